"""A folder from the command line: nothing stops the rest, an interrupted run goes on, outputs are whole."""

import json
import os
import signal
import subprocess
import sys
import time

import pytest

from cellfuncs import cli
from cellfuncs.errors import BookRefused
from cellfuncs.sheets.many import command, crew, one, state, summary
from cellfuncs.sheets.many.found import Found, found
from cellfuncs.sheets.many.one import CHECKED, FAILED, REFUSED, Answer, checked_one, failed, task_of

on_linux = pytest.mark.skipif(sys.platform != "linux", reason="looks for processes in /proc")


def files_in(folder):
    return found([folder])


@pytest.fixture
def seen(monkeypatch):
    """The files that were checked, in this process, which saves the start of others."""
    listed = []

    def answers(files, *how):
        for file in files:
            listed.append(file.place)
            task = task_of(file, *how)
            yield task if isinstance(task, Answer) else checked_one(task)

    monkeypatch.setattr(crew, "answers_here", answers)
    return listed


@pytest.fixture
def light(monkeypatch):
    """Processes that import nothing beforehand, which saves seconds each."""
    monkeypatch.setattr(crew, "_LEAST", 1000)


def check(capsys, *words):
    code = cli.main(["check", *map(str, words)])
    return code, *capsys.readouterr()


def test_every_file_is_told(folder, tmp_path, capsys):
    (folder / "old.xls").write_bytes(b"\xd0\xcf\x11\xe0" + bytes(600) + "Workbook".encode("utf-16-le"))
    code, out, err = check(capsys, folder, "--summary", tmp_path / "out")
    assert code == 1 and "4 workbooks: 1 with errors, 1 with neither, 2 not checked" in out
    assert "deep/b.xlsx" in out and "unit-factor" in out
    assert err.count("\n") == 2 and "c.xlsx: " in err and "save it as .xlsx" in err
    assert {path.name for path in (tmp_path / "out").iterdir()} == set(summary.NAMES)


def test_exit_codes(folder, seen, capsys):
    (folder / "deep" / "b.xlsx").unlink()
    assert check(capsys, folder)[0] == 2
    (folder / "c.xlsx").unlink()
    assert check(capsys, folder)[0] == 0
    (folder / "a.xlsx").unlink()
    code, out, err = check(capsys, folder)
    assert (code, out) == (2, "") and "no workbook" in err and err.count("\n") == 1


def test_what_is_done_is_not_done_again(folder, seen, own_state, tmp_path, capsys):
    first = check(capsys, folder, "--summary", tmp_path / "1")
    assert sorted(seen) == ["a.xlsx", "c.xlsx", "deep/b.xlsx"]
    seen.clear()
    again = check(capsys, folder, "--summary", tmp_path / "2")
    assert seen == [] and again[0] == first[0] and "3 of them were checked before" in again[1]
    for name in summary.NAMES:
        assert (tmp_path / "1" / name).read_bytes() == (tmp_path / "2" / name).read_bytes()
    (kept,) = own_state.iterdir()
    assert str(kept) in again[1] and "delete it to check everything anew" in again[1]
    kept.unlink()
    check(capsys, folder)
    assert sorted(seen) == ["a.xlsx", "c.xlsx", "deep/b.xlsx"]


def test_a_changed_file_is_checked_anew(folder, seen, right, capsys):
    check(capsys, folder)
    path = folder / "deep" / "b.xlsx"
    times = path.stat().st_atime_ns, path.stat().st_mtime_ns
    path.write_bytes(right)
    os.utime(path, ns=times)  # the time alone does not tell
    os.utime(folder / "a.xlsx", (1, 1))
    seen.clear()
    code, out, _ = check(capsys, folder)
    assert seen == ["deep/b.xlsx"] and code == 2 and "with errors" not in out


def test_a_missing_output_is_made(folder, seen, tmp_path, capsys):
    pages = tmp_path / "pages"
    check(capsys, folder)
    seen.clear()
    check(capsys, folder, "--html", pages)
    assert sorted(seen) == ["a.xlsx", "deep/b.xlsx"]
    (pages / "deep" / "b.xlsx.html").unlink()
    seen.clear()
    check(capsys, folder, "--html", pages)
    assert seen == ["deep/b.xlsx"] and (pages / "deep" / "b.xlsx.html").exists()


def test_another_version_checks_anew(folder, seen, monkeypatch, capsys):
    check(capsys, folder)
    seen.clear()
    monkeypatch.setattr(state, "__version__", "0.0.1")
    assert "is of version" in check(capsys, folder)[2] and len(seen) == 3


@pytest.mark.parametrize(
    "content",
    [
        b"",
        b"{",
        b"[]",
        b"\xff",
        b"[" * 100_000,
        b'{"version": "V", "files": []}',
        b'{"version": "V", "files": {"a": 1}}',
        b'{"version": "V", "files": {"a": {"outputs": {}, "path": 3}}}',
    ],
)
def test_a_damaged_state_is_said_and_not_used(folder, seen, own_state, content, capsys):
    check(capsys, folder)
    (kept,) = own_state.iterdir()
    kept.write_bytes(content.replace(b"V", state.__version__.encode()))
    seen.clear()
    _, _, err = check(capsys, folder)
    assert len(seen) == 3 and "cannot be read: all is checked anew" in err
    assert json.loads(kept.read_bytes())["files"]


def test_no_state_can_be_kept(folder, seen, own_state, monkeypatch, capsys):
    (own_state / "file").write_text("")
    monkeypatch.setattr("platformdirs.user_state_path", lambda *_, **__: own_state / "file")
    code, out, err = check(capsys, folder)
    assert code == 1 and "no state can be kept" in err and "kept in" not in out


def test_what_failed_is_tried_again(folder, seen, monkeypatch, capsys):
    real = one.checked_one
    with monkeypatch.context() as patch:
        patch.setitem(globals(), "checked_one", lambda t: failed(t, "broke off") if t.place == "a.xlsx" else real(t))
        code, out, err = check(capsys, folder)
    assert code == 1 and "2 not checked" in out and "a.xlsx: broke off" in err
    seen.clear()
    assert "1 not checked" in check(capsys, folder)[1]
    assert seen == ["a.xlsx"]


def test_crash_hang_and_memory_stop_none_of_the_rest(traps, light, folder, right, wrong, monkeypatch):
    monkeypatch.setattr("cellfuncs.sheets.many.worker.SECONDS", 10.0)
    for number in range(6):
        (folder / f"more {number}.xlsx").write_bytes(wrong if number % 2 else right)
    for word in ("hang", "die", "crash", "memory"):
        (folder / f"{word}.xlsx").write_bytes(f"{word}:".encode())
    files = files_in(folder)
    told = {answer.outcome.place: answer.outcome for answer in crew.answers_here(files, count=2)}
    assert sorted(told) == sorted(file.place for file in files)
    failed = {place for place, outcome in told.items() if outcome.state == FAILED}
    assert {"hang.xlsx", "die.xlsx", "crash.xlsx"} <= failed
    assert failed == {f"{word}.xlsx" for word in ("hang", "die", "crash", "memory")}
    assert told["c.xlsx"].state == REFUSED and sum(outcome.errors for outcome in told.values()) == 4


@on_linux
def test_a_killed_process_loses_nothing(light, folder, right, children, kill):
    for number in range(12):
        (folder / f"more {number}.xlsx").write_bytes(right)
    told, killed = [], False
    for answer in crew.answers_here(files_in(folder), count=2):
        told.append(answer.outcome)
        if not killed:
            for pid in children():
                kill(pid)
            killed = True
    assert killed and len(told) == 15 and all(outcome.state != FAILED for outcome in told)


@on_linux
def test_whoever_stops_listening_leaves_no_process(light, folder, right, children):
    for number in range(12):
        (folder / f"more {number}.xlsx").write_bytes(right)
    answers = crew.answers_here(files_in(folder), count=2)
    next(answers)
    assert list(children())
    answers.close()
    assert list(children()) == []


def test_an_error_of_ours_in_a_thread_comes_out(folder, monkeypatch):
    monkeypatch.setattr(crew, "task_of", lambda *_: 1 / 0)
    with pytest.raises(ZeroDivisionError):
        list(crew.answers_here(files_in(folder)))


@on_linux
def test_an_interrupted_run_says_so_and_goes_on(folder, right, wrong, tmp_path, children, gone):
    """Ctrl+C while a file hangs: a line, no process left, no outputs cut off, and the rest is not done again."""
    for number in range(60):
        (folder / f"{number:02}.xlsx").write_bytes(wrong if number == 7 else right)
    pages, variables = tmp_path / "pages", os.environ | {"XDG_STATE_HOME": str(tmp_path / "state")}
    words = [sys.executable, "-m", "cellfuncs", "check", folder, "--html", pages, "--summary", tmp_path / "s"]
    process = subprocess.Popen(words, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, env=variables,
                               start_new_session=True)  # fmt: skip
    end = time.monotonic() + 120.0
    while len(list(pages.glob("*.html"))) < 3 and process.poll() is None and time.monotonic() < end:
        time.sleep(0.01)
    own = list(children(process.pid))
    process.send_signal(signal.SIGINT)
    out, err = process.communicate(timeout=60.0)
    assert (process.returncode, out) == (130, "") and err.count("\n") == 1
    assert err.startswith("cellfuncs: interrupted, ") and "delete it to start anew" in err
    assert own and all(gone(pid) for pid in own)
    assert not (tmp_path / "s").exists() and not list(pages.glob(".*"))
    done = int(err.split()[2])
    (kept,) = (tmp_path / "state" / "cellfuncs").iterdir()
    assert str(kept) in err and len(json.loads(kept.read_bytes())["files"]) == done
    again = subprocess.run(words, capture_output=True, text=True, env=variables)
    assert again.returncode == 1 and f"{done} of them were checked before" in again.stdout
    assert "63 workbooks: 2 with errors" in again.stdout and len(list(pages.rglob("*.html"))) == 62


def test_several_books_are_told_in_full_in_their_order(folder, capsys):
    paths = [folder / "deep" / "b.xlsx", folder / "c.xlsx", folder / "a.xlsx"]
    code, out, err = check(capsys, *paths)
    assert code == 1 and out.index("b.xlsx: 1 error") < out.index("a.xlsx: nothing found")
    assert err.startswith(f"cellfuncs: {paths[1]}: ") and err.count("\n") == 1


def test_outputs_have_names_of_their_own(folder, seen, tmp_path, right, capsys):
    other = tmp_path / "other" / "in"
    other.mkdir(parents=True)
    (other / "a.xlsx").write_bytes(right)
    (folder / "a.xlsm").write_bytes(right)
    check(capsys, folder, other, "--json", tmp_path / "out", "--annotate", tmp_path / "copies")
    written = {path.relative_to(tmp_path).as_posix() for path in (tmp_path / "out").rglob("*.json")}
    assert written == {f"out/{name}.json" for name in ("in/a.xlsx", "in/a.xlsm", "in/deep/b.xlsx", "in 2/a.xlsx")}
    assert (tmp_path / "copies" / "in" / "deep" / "b.checked.xlsx").exists()


def test_outputs_in_the_folder_are_not_checked_the_next_time(folder, seen, capsys):
    for _ in range(2):
        out = check(capsys, folder, "--annotate", folder / "copies", "--summary", folder / "s")[1]
        assert "3 workbooks" in out
    with pytest.raises(BookRefused, match="the folder that is checked"):
        command.check(command.Run([str(folder)], {"annotate": folder}))


def test_outputs_go_into_folders(folder, seen, tmp_path, capsys):
    (tmp_path / "file").write_text("kept")
    for word in ("--json", "--summary"):
        code, _, err = check(capsys, folder, word, tmp_path / "file")
        assert code == 2 and "is a file" in err and (tmp_path / "file").read_text() == "kept"


@on_linux
def test_folders_that_cannot_be_looked_into_are_told(folder, seen, monkeypatch, capsys):
    def walk(root, onerror):
        onerror(PermissionError(13, "Permission denied", str(folder / "deep")))
        yield str(root), [], ["a.xlsx"]

    monkeypatch.setattr("cellfuncs.sheets.many.found.os.walk", walk)
    code, out, err = check(capsys, folder)
    assert code == 2 and "1 not checked" in out and "deep: the folder cannot be looked into: Permission denied" in err


def test_each_file_once(folder, tmp_path):
    named = [folder, folder / "a.xlsx", folder / "deep" / ".." / "c.xlsx", tmp_path / "none.xlsx"]
    places = [file.place for file in found(named)]
    assert places == ["in/a.xlsx", "in/c.xlsx", "in/deep/b.xlsx", "none.xlsx"]
    assert found([folder], [folder / "deep"]) == [Found(folder / n, n) for n in ("a.xlsx", "c.xlsx")]


@on_linux
def test_links_lead_nowhere_twice(folder, seen, capsys):
    """A link to a folder is not followed, one to a file that is there is the same file, circles are told."""
    (folder / "again").symlink_to(folder)
    (folder / "same.xlsx").symlink_to(folder / "a.xlsx")
    (folder / "circle.xlsx").symlink_to(folder / "circle.xlsx")
    assert [file.place for file in found([folder])] == ["a.xlsx", "c.xlsx", "deep/b.xlsx"]
    code, _, err = check(capsys, folder / "circle.xlsx")
    assert code == 2 and err.count("\n") == 1 and "circle.xlsx" in err


@on_linux
def test_names_that_are_no_unicode(folder, seen, tmp_path, right, capsys):
    os.makedirs(os.path.join(os.fsencode(folder), b"caf\xe9"))
    with open(os.path.join(os.fsencode(folder), b"caf\xe9", b"\xff.xlsx"), "wb") as file:
        file.write(right)
    for _ in range(2):
        code, out, _ = check(capsys, folder, "--summary", tmp_path / "out", "--html", tmp_path / "pages")
        assert code == 1 and "4 workbooks" in out
    assert "4 of them were checked before" in out
    assert CHECKED in (tmp_path / "out" / "summary.csv").read_text("utf-8-sig")
