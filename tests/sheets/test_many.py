"""Many workbooks: bounded processes, going on where a run was interrupted, the summary, a real cluster."""

import csv
import os
import signal
import threading
import time
from pathlib import Path

import pytest

from cellfuncs import cli
from cellfuncs.errors import BookRefused
from cellfuncs.sheets.many import cluster, pool, summary
from cellfuncs.sheets.many.journal import NAME, Journal
from cellfuncs.sheets.many.process import Process
from cellfuncs.sheets.many.run import Run
from cellfuncs.sheets.many.task import BROKEN, CHECKED, REFUSED, Task

RIGHT = {
    "A1": "Diameter", "B1": 50.0, "C1": "mm", "A2": "Volume flow", "B2": 10.8, "C2": "m3/h",
    "A3": "Flow area", "B3": ("=PI()/4*(B1/1000)^2", 0.0019634954), "C3": "m2",
    "A4": "Velocity", "B4": ("=B2/3600/B3", 1.5278875), "C4": "m/s",
}  # fmt: skip
WRONG = RIGHT | {"B4": ("=B2/60/B3", 91.67325)}


@pytest.fixture
def folder(make_book, tmp_path):
    """Three workbooks in a tree: a right one, a wrong one, a broken one."""
    inside = tmp_path / "in"
    (inside / "deep").mkdir(parents=True)
    (inside / "a.xlsx").write_bytes(make_book(RIGHT))
    (inside / "deep" / "b.xlsx").write_bytes(make_book(WRONG))
    (inside / "c.xlsx").write_bytes(b"PK\x03\x04 broken")
    return inside


def silent(*_):
    """Nobody watches."""


def run_of(inside, **more):
    books = sorted(inside.rglob("*.xlsx"))
    return Run(books, {book: f"{book.parent.name} {book.stem}" for book in books}, more.pop("outputs", {}), **more)


def test_every_workbook_has_its_line_the_worst_first(folder):
    rows = run_of(folder).go(silent)
    assert [Path(row["workbook"]).name for row in rows] == ["b.xlsx", "c.xlsx", "a.xlsx"]
    assert [row["state"] for row in rows] == [CHECKED, REFUSED, CHECKED]
    assert rows[0]["cause"] == "unit-factor" and rows[0]["cell"] == "Sheet1!B4" and rows[2]["errors"] == 0


def test_a_run_goes_on_where_it_was(folder, tmp_path, monkeypatch):
    out = tmp_path / "out"
    first = run_of(folder, summary=out).go(silent)
    seen = []
    monkeypatch.setattr(pool, "examine_all", lambda tasks, *_: seen.extend(t.path for t in tasks) or iter(()))
    assert run_of(folder, summary=out).go(silent) == first
    assert seen == []
    with (out / NAME).open("a") as file:
        file.write('{"mark": [1, 2')  # the run was cut off here
    os.utime(folder / "a.xlsx", (1, 1))
    run_of(folder, summary=out).go(silent)
    assert [Path(path).name for path in seen] == ["a.xlsx"]


def test_a_journal_is_of_one_version(folder, tmp_path, monkeypatch):
    journal = Journal(tmp_path)
    journal.note({"workbook": str(folder / "a.xlsx"), "state": CHECKED})
    assert Journal(tmp_path).is_done(folder / "a.xlsx")
    assert not Journal(tmp_path, ("html",)).is_done(folder / "a.xlsx")
    monkeypatch.setattr("cellfuncs.sheets.many.journal.__version__", "another")
    assert not Journal(tmp_path).is_done(folder / "a.xlsx")


def test_a_process_that_hangs_or_dies_is_replaced(folder):
    process = Process(seconds=60.0)
    task = Task(str(folder / "a.xlsx"))
    assert process.examine(task).state == CHECKED
    running = process._running
    os.kill(running.pid, signal.SIGSTOP)
    process.seconds = 0.5
    hung = process.examine(task)
    assert hung.state == BROKEN and "0.5 s" in hung.message
    process.seconds = 60.0
    assert process.examine(task).state == CHECKED
    assert process._running.pid != running.pid
    os.kill(process._running.pid, signal.SIGKILL)
    assert process.examine(task).state == BROKEN
    assert process.examine(task).state == CHECKED
    process.close()


def test_one_that_dies_stops_none_of_the_rest(folder, make_book):
    for k in range(8):
        (folder / f"more {k}.xlsx").write_bytes(make_book(WRONG if k % 2 else RIGHT))
    tasks = [Task(str(path)) for path in sorted(folder.rglob("*.xlsx"))]
    seen = []
    killed = False
    for done in pool.examine_all(tasks, 2):
        seen.append(done)
        if not killed:
            killed = True
            for child in _children():
                os.kill(child, signal.SIGKILL)
                break
    assert sorted(d.path for d in seen) == sorted(t.path for t in tasks)
    assert sum(d.state == BROKEN for d in seen) <= 1


def _children():
    me = threading.get_native_id(), os.getpid()
    for entry in Path("/proc").glob("[0-9]*/stat"):
        try:
            fields = entry.read_text().rsplit(")", 1)[1].split()
        except OSError:
            continue
        if int(fields[1]) in me and "cellfuncs" in (entry.parent / "cmdline").read_text():
            yield int(entry.parent.name)


def test_memory_is_bounded(folder):
    process = Process(memory=1)
    done = process.examine(Task(str(folder / "a.xlsx")))
    assert done.state in (BROKEN, CHECKED)
    process.close()


def test_a_run_that_is_given_up_leaves_no_process(folder):
    answers = pool.examine_all([Task(str(folder / "a.xlsx"))] * 6, 2)
    next(answers)
    answers.close()
    assert list(_children()) == []


def test_texts_of_workbooks_do_nothing_in_the_summary(tmp_path):
    row = {column: "" for column in summary.COLUMNS}
    row |= {"errors": 1, "warnings": 0, "notes": 0, "agreed": 0, "read": 1, "seconds": 0.1, "state": CHECKED}
    row |= {"workbook": "=cmd|' /C calc'!A1", "message": "<script>alert(1)</script>", "cell": "@x", "cause": "unknown"}
    summary.write(tmp_path, [row], {})
    assert "<script>" not in (tmp_path / "summary.html").read_text("utf-8")
    lines = list(csv.reader((tmp_path / "summary.csv").read_text("utf-8-sig").splitlines()))
    assert lines[1][0].startswith("'=") and lines[1][7].startswith("'@")


def test_the_command_line(folder, tmp_path, capsys):
    out, pages = tmp_path / "out", tmp_path / "pages"
    code = cli.main(["check", str(folder), "--summary", str(out), "--html", str(pages)])
    said = capsys.readouterr()
    assert code == 1 and "3 workbooks, 1 with errors" in said.out and "c.xlsx" in said.err
    assert (out / "summary.csv").exists() and len(list(pages.iterdir())) == 2
    assert 'href="../pages/b.html"' in (out / "summary.html").read_text("utf-8")


def test_outputs_go_into_folders(folder, tmp_path):
    (tmp_path / "file").write_text("")
    with pytest.raises(BookRefused, match="is a file"):
        run_of(folder, outputs={"json": tmp_path / "file"}).go(silent)


def test_a_cluster_that_does_not_answer_is_refused(folder, monkeypatch):
    pytest.importorskip("distributed")
    monkeypatch.setattr(cluster, "CONNECT", 1.0)
    with pytest.raises(BookRefused, match="No cluster answers"):
        run_of(folder, scheduler="tcp://127.0.0.1:9").go(silent)


def test_on_a_cluster_nothing_is_lost_with_a_worker(folder, make_book):
    """Two real workers; the process of one is killed while workbooks are on their way."""
    distributed = pytest.importorskip("distributed")
    for k in range(10):
        (folder / f"more {k}.xlsx").write_bytes(make_book(WRONG if k % 2 else RIGHT))
    seen = []
    with distributed.LocalCluster(
        n_workers=2, threads_per_worker=1, processes=True, dashboard_address=None, silence_logs=50
    ) as local, distributed.Client(local) as client:
        pids = list(client.run(os.getpid).values())

        def watch(done, of, path):
            seen.append(path)
            if len(seen) == 3:  # the first call tells what is done already
                os.kill(pids[0], signal.SIGKILL)

        rows = run_of(folder, scheduler=local.scheduler_address).go(watch)
        for _ in range(100):
            if len(client.scheduler_info()["workers"]) == 2:
                break
            time.sleep(0.1)
        assert set(client.run(os.getpid).values()) != set(pids)
    books = sorted(map(str, folder.rglob("*.xlsx")))
    assert sorted(row["workbook"] for row in rows) == books
    states = {row["workbook"]: row["state"] for row in rows}
    assert [path for path, state in states.items() if state != CHECKED] == [str(folder / "c.xlsx")]
    assert sum(row["errors"] > 0 for row in rows) == 6
