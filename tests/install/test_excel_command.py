"""`start.py excel`: what it does in which order, with Windows, Excel and the environment replaced."""

import json
import os
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent.parent
sys.path.insert(0, str(ROOT / "install"))

from environment import Trouble  # noqa: E402
from excel import command, office, settings  # noqa: E402

EXCEL = office.Excel(Path("EXCEL.EXE"), "16.0", "64-bit", "Click-to-Run")
FINE = office.Security(True, False, False, False, False)


@pytest.fixture
def machine(tmp_path, monkeypatch):
    """A Windows with Excel and an environment, as far as the command looks at them; what was done is written down."""
    done = []
    python = tmp_path / "environment" / "Scripts" / "python.exe"
    python.parent.mkdir(parents=True)
    python.write_text("stands for a Python")
    startup = tmp_path / "Roaming" / "Microsoft" / "Excel" / "XLSTART"
    monkeypatch.setenv("CELLFUNCS_ENV", str(tmp_path / "environment"))
    monkeypatch.setenv("USERPROFILE", str(tmp_path / "home"))
    monkeypatch.setenv("APPDATA", str(tmp_path / "Roaming"))
    monkeypatch.setattr(command, "on_windows", lambda: True)
    monkeypatch.setattr(command, "interpreter", lambda folder: folder / "Scripts" / "python.exe")
    monkeypatch.setattr(command, "prepare", lambda: done.append("prepare") or python)
    monkeypatch.setattr(office, "find", lambda: EXCEL)
    monkeypatch.setattr(office, "security", lambda version: FINE)
    monkeypatch.setattr(office, "is_open", lambda: False)
    monkeypatch.setattr(office, "synced", lambda path: False)
    monkeypatch.setattr(office, "disabled_items", lambda version, name: [])

    def make_add_in(interpreter):
        assert settings.load()["INTERPRETER_WIN"] == str(interpreter), "the proof needs the settings"
        startup.mkdir(parents=True, exist_ok=True)
        with zipfile.ZipFile(startup / settings.ADD_IN, "w") as packed:
            packed.writestr("xl/vbaProject.bin", "")
        done.append("make")
        return {"add_in": str(startup / settings.ADD_IN), "fingerprint": "now", "xlwings": "0.37.8"}

    monkeypatch.setattr(command, "make_add_in", make_add_in)
    monkeypatch.setattr(command, "in_environment", lambda python, *words, **more: {"fingerprint": "now"})
    return done, python, startup / settings.ADD_IN


@pytest.mark.skipif(os.name == "nt", reason="there it can be done")
@pytest.mark.parametrize("words", [[], ["--repair"], ["--remove"], ["--nonsense"]])
def test_elsewhere_it_says_in_one_line_why_not(words):
    done = subprocess.run(
        [sys.executable, ROOT / "install" / "start.py", "excel", *words], capture_output=True, text=True
    )
    assert done.returncode == 2 and done.stdout == ""
    (line,) = done.stderr.splitlines()
    assert "need Excel on Windows" in line and "not the Store edition" in line


def test_installing_sets_up_writes_makes_and_remembers(machine, capsys):
    done, python, add_in = machine
    assert command.main([]) == 0
    assert done == ["prepare", "make"]
    assert settings.load() == {
        "INTERPRETER_WIN": str(python),
        "PYTHONPATH": str(ROOT),
        "UDF MODULES": "cellfuncs.hosts.excel",
        "ADD_WORKBOOK_TO_PYTHONPATH": "False",
    }
    assert settings.load_record()["add_in"] == str(add_in)
    assert "From its next start" in capsys.readouterr().out


def test_a_whole_installation_is_left_alone_and_repair_makes_it_anew(machine, capsys):
    done, _, _ = machine
    command.main([])
    done.clear()
    assert command.main([]) == 0
    assert done == ["prepare"]
    assert "already" in capsys.readouterr().out
    done.clear()
    assert command.main(["--repair"]) == 0
    assert done == ["prepare", "make"]


@pytest.mark.parametrize("damage", ["add-in gone", "add-in cut", "settings changed", "functions changed"])
def test_damage_is_mended(machine, monkeypatch, damage):
    done, _, add_in = machine
    command.main([])
    done.clear()
    if damage == "add-in gone":
        add_in.unlink()
    elif damage == "add-in cut":
        add_in.write_bytes(add_in.read_bytes()[:20])
    elif damage == "settings changed":
        settings.save({"INTERPRETER_WIN": "C:\\other.exe"})
    else:
        monkeypatch.setattr(command, "in_environment", lambda python, *words: {"fingerprint": "later"})
    assert command.main([]) == 0
    assert done[-1] == "make"
    assert add_in.stat().st_size > 20


def test_everything_in_the_way_is_told_at_once_and_nothing_is_written(machine, monkeypatch):
    done, _, _ = machine
    monkeypatch.setattr(office, "security", lambda version: office.Security(False, False, False, True, False))
    monkeypatch.setattr(office, "is_open", lambda: True)
    monkeypatch.setattr(sys, "maxsize", 2**31 - 1)
    monkeypatch.setenv("CELLFUNCS_ENV", "/100 %")
    with pytest.raises(Trouble) as trouble:
        command.main([])
    lines = trouble.value.args[0].splitlines()
    assert len(lines) == 5 and all(line.startswith("start.py: ") for line in lines[1:])
    for mark, line in zip(("32-bit Python", "Trust access", "not signed", "Excel is open", "%"), lines, strict=True):
        assert mark in line
    assert done == [] and not settings.folder().exists()


def test_an_add_in_that_cannot_be_made_leaves_nothing_new_behind(machine, monkeypatch):
    def fail(python):
        raise Trouble("Excel refused a step")

    with monkeypatch.context() as failing:
        failing.setattr(command, "make_add_in", fail)
        with pytest.raises(Trouble, match="refused"):
            command.main([])
        assert not settings.folder().exists()
    command.main([])
    before = settings.load_record()
    monkeypatch.setattr(command, "make_add_in", fail)
    with pytest.raises(Trouble, match="refused"):
        command.main(["--repair"])
    assert settings.load_record() == before and settings.load() and command.add_in_file().exists()


def test_a_policy_against_trust_sends_to_the_administrator(machine, monkeypatch):
    monkeypatch.setattr(office, "security", lambda version: office.Security(False, True, False, False, False))
    with pytest.raises(Trouble, match="policy of your organisation"):
        command.main([])


@pytest.mark.parametrize(
    ("found", "words"), [(None, "not found"), (office.Excel(Path(), "", "", "Store"), "Microsoft Store")]
)
def test_no_excel_and_the_store_edition(machine, monkeypatch, found, words):
    monkeypatch.setattr(office, "find", lambda: found)
    with pytest.raises(Trouble, match=words):
        command.main([])
    assert machine[0] == []


@pytest.mark.parametrize("words", [["--help"], ["--repair", "--remove"], ["x"]])
def test_other_words_are_refused(machine, words):
    with pytest.raises(Trouble, match="--repair or --remove"):
        command.main(words)


def test_a_32_bit_excel_is_served(machine, monkeypatch):
    monkeypatch.setattr(office, "find", lambda: office.Excel(Path("EXCEL.EXE"), "16.0", "32-bit", "Click-to-Run"))
    assert command.main([]) == 0


def test_a_synced_folder_is_only_noted(machine, monkeypatch, capsys):
    monkeypatch.setattr(office, "synced", lambda path: True)
    assert command.main([]) == 0
    assert "OneDrive" in capsys.readouterr().err


def test_an_environment_named_when_installing_is_used_again(machine, monkeypatch):
    _, python, _ = machine
    command.main([])
    monkeypatch.delenv("CELLFUNCS_ENV")
    command.main(["--repair"])
    assert os.environ["CELLFUNCS_ENV"] == str(python.parent.parent)


def test_notes_of_a_crash_and_an_add_in_elsewhere_are_taken_away(machine, monkeypatch, tmp_path):
    old, gone = tmp_path / "old.xlam", []
    old.write_text("")
    settings.save_record({"add_in": str(old)})
    monkeypatch.setattr(office, "disabled_items", lambda version, name: [("place", "1A2B")])
    monkeypatch.setattr(office, "delete_value", lambda place, name: gone.append((place, name)))
    assert command.main(["--repair"]) == 0
    assert gone == [("place", "1A2B")] and not old.exists()


def test_removing_takes_away_what_was_put_there(machine, capsys, tmp_path):
    done, python, add_in = machine
    command.main([])
    done.clear()
    assert command.main(["--remove"]) == 0
    assert not add_in.exists() and not settings.folder().exists()
    assert python.exists() and done == []
    assert command.main(["--remove"]) == 0
    assert "Nothing" in capsys.readouterr().out


def test_removing_waits_for_excel_to_be_closed(machine, monkeypatch):
    _, _, add_in = machine
    command.main([])
    monkeypatch.setattr(office, "is_open", lambda: True)
    with pytest.raises(Trouble, match="close it"):
        command.main(["--remove"])
    assert add_in.exists() and settings.file().exists()


def test_each_user_has_files_of_her_own(machine, monkeypatch, tmp_path):
    command.main([])
    monkeypatch.setenv("USERPROFILE", str(tmp_path / "second"))
    monkeypatch.setenv("APPDATA", str(tmp_path / "second" / "Roaming"))
    assert settings.load_record() == {} and not command.add_in_file().exists()
    command.main(["--remove"])
    monkeypatch.setenv("USERPROFILE", str(tmp_path / "home"))
    assert command.add_in_file().exists()


@pytest.fixture
def builder(tmp_path, monkeypatch):
    """A Python that answers as the builder would: a script in the place of `-m excel.build`."""

    def answering(script):
        path = tmp_path / "excel" / "build.py"
        path.parent.mkdir(exist_ok=True)
        path.write_text(script)
        monkeypatch.setattr(command, "ROOT", tmp_path / "root")
        (tmp_path / "root").mkdir(exist_ok=True)
        link = tmp_path / "root" / "install"
        if not link.exists():
            link.mkdir()
            (link / "excel").symlink_to(path.parent, target_is_directory=True)
        return Path(sys.executable)

    return answering


def test_what_the_builder_tells_is_found_among_what_xlwings_prints(builder):
    python = builder('print(\'{"pid": 1}\\nImported functions from x\\n{"add_in": "Å"}\')')
    assert command.in_environment(python, "make", "x") == {"add_in": "Å"}


def test_trouble_of_the_builder_is_ours(builder):
    python = builder('print(\'{"trouble": "Excel is away"}\'); raise SystemExit(1)')
    with pytest.raises(Trouble, match=r"^Excel is away$"):
        command.in_environment(python, "make", "x")


def test_a_crash_of_the_builder_is_told_in_one_line(builder):
    python = builder("raise ImportError('DLL load failed')")
    with pytest.raises(Trouble, match=r"DLL load failed; start\.py diagnose"):
        command.in_environment(python, "make", "x")


def test_an_excel_that_hangs_is_ended_and_no_other(builder, monkeypatch):
    ended = []
    python = builder("import time; print('{\"pid\": 4711}', flush=True); time.sleep(60)")
    monkeypatch.setattr(command, "PATIENCE", 2)
    monkeypatch.setattr(command, "_end", ended.append)
    with pytest.raises(Trouble, match="did not answer"):
        command.in_environment(python, "make", "x")
    assert ended == [4711]


def test_the_builder_gets_a_folder_for_temporary_files_that_vba_can_read(builder, tmp_path, monkeypatch):
    python = builder("import json, os; print(json.dumps({'TEMP': os.environ['TEMP'], 'TMP': os.environ['TMP']}))")
    monkeypatch.setattr(settings, "short_name", lambda path: "/KURZ~1")
    given = command.in_environment(python, "make", "x", temporary=tmp_path / "ж")
    assert given == {"TEMP": "/KURZ~1", "TMP": "/KURZ~1"}


def test_the_template_is_asked_for_in_the_documented_way(monkeypatch):
    asked = []

    def answer(python, *words, temporary):
        asked.append((words[0], Path(words[1]).name, command.is_add_in(Path(words[1]))))
        return {"add_in": "x"}

    monkeypatch.setattr(command, "in_environment", answer)
    assert command.make_add_in(Path(sys.executable)) == {"add_in": "x"}
    assert asked == [("make", "Cellfuncs.xlam", True)]


def test_a_python_without_xlwings_gives_one_line(tmp_path):
    python = tmp_path / "python"
    python.write_text("#!/bin/sh\necho 'No module named xlwings' >&2\nexit 1\n")
    python.chmod(0o755)
    if os.name != "nt":
        with pytest.raises(Trouble, match="no template for the add-in: No module named xlwings"):
            command.make_add_in(python)


def test_the_record_is_readable_for_people(machine):
    command.main([])
    assert json.loads(settings.record_file().read_text("utf-8"))["fingerprint"] == "now"
