"""The diagnosis: every part that can fail does so here once, and is named with what to do."""

import json
import os
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent.parent
sys.path.insert(0, str(ROOT / "install"))

import diagnose  # noqa: E402
import environment  # noqa: E402
from environment import Trouble  # noqa: E402
from excel import command, diagnosis, office, settings  # noqa: E402
from findings import FAILS, NOT_SET_UP, NOTE, OK, Answer, Line, in_python  # noqa: E402

FINE = office.Security(True, False, False, False, False)


def run(*words, **variables):
    return subprocess.run(
        [sys.executable, ROOT / "install" / "start.py", "diagnose", *words],
        capture_output=True,
        encoding="utf-8",
        env=os.environ | variables,
    )


def states(lines):
    return {line.subject: line.state for line in lines}


def test_without_an_environment_it_says_so_and_what_to_do(tmp_path):
    done = run(CELLFUNCS_ENV=str(tmp_path / "none"))
    assert done.returncode == 1 and done.stderr == ""
    assert "environment     FAILS" in done.stdout and "-> python3 install/start.py setup" in done.stdout
    assert not (tmp_path / "none").exists()


def test_output_that_takes_no_other_letters_is_no_traceback(tmp_path):
    done = run(CELLFUNCS_ENV=str(tmp_path / "Übung ж"), PYTHONIOENCODING="ascii")
    assert done.stderr == "" and "\\u0436" in done.stdout


def test_other_words_are_refused():
    done = run("word")
    assert done.returncode == 2 and done.stderr.count("\n") == 1


def test_a_host_that_is_named_has_to_be_there(monkeypatch, capsys):
    monkeypatch.setattr(diagnose, "CHECKS", {"Excel": lambda: iter([Line("Excel add-in", NOT_SET_UP, "none", "do")])})
    assert diagnose.main([]) == 0
    assert "nothing fails" in capsys.readouterr().out
    assert diagnose.main(["excel"]) == 1
    assert diagnose.main(["calc"]) == 0


def test_a_check_that_breaks_is_a_finding_and_the_others_go_on(monkeypatch, capsys):
    def broken():
        yield Line("first", OK, "fine")
        raise RuntimeError("of\ntwo lines")

    monkeypatch.setattr(diagnose, "CHECKS", {"A": broken, "B": lambda: iter([Line("B", OK, "fine")])})
    assert diagnose.main([]) == 1
    lines = capsys.readouterr().out.splitlines()
    assert [line.split()[0] for line in lines[:3]] == ["first", "A", "B"]
    assert "could not be looked at: of two lines" in lines[1]


@pytest.fixture
def surroundings(tmp_path, monkeypatch):
    """A whole environment, as the diagnosis sees it; entries of the dictionary replace what its Python answers."""
    folder = tmp_path / "environment"
    python = environment.interpreter(folder)
    python.parent.mkdir(parents=True)
    python.write_text("stands for a Python")
    (folder / "pyvenv.cfg").write_text("version = 3.11.9")
    monkeypatch.setenv("CELLFUNCS_ENV", str(folder))
    stamp = {"state": "ready", "own": True, "key": environment._key(python), "how": "lock", "packages": {}}
    environment._write_stamp(folder, stamp)
    answers = {
        "version_info": "3.11.9",
        environment.INSTALLED: json.dumps(diagnose.locked() | {"cellfuncs": "0.1.0"}),
        diagnose.PACKAGE: f"0.1.0 37 {ROOT / 'cellfuncs' / '__init__.py'}",
        diagnose.DENSITY: "8.0.0 996.556000",
    }

    def answer(python, script):
        found = next(given for mark, given in answers.items() if mark in script)
        return found if isinstance(found, Answer) else Answer(found)

    monkeypatch.setattr(diagnose, "in_python", answer)
    return folder, answers


def test_a_whole_environment_is_fine(surroundings):
    assert states(diagnose.environment_here()) == dict.fromkeys(
        ("environment", "packages", "Cellfuncs", "CoolProp"), OK
    )


@pytest.mark.parametrize(
    ("stamp", "state"),
    [({}, NOTE), ({"state": "making"}, FAILS), ({"state": "ready", "key": "other"}, FAILS)],
)
def test_the_stamp_of_the_environment(surroundings, stamp, state):
    folder, _ = surroundings
    environment._write_stamp(folder, stamp)
    assert states(diagnose.environment_here())["environment"] == state


def test_an_interpreter_that_does_not_run_ends_the_lines(surroundings):
    surroundings[1]["version_info"] = Answer(None, "it does not start (Permission denied)")
    (line,) = diagnose.environment_here()
    assert line.state == FAILS and "Permission denied" in line.text and "setup" in line.advice


def test_packages_that_are_missing_or_of_another_version(surroundings):
    folder, answers = surroundings
    there = diagnose.locked()
    there.pop("coolprop")
    there["numpy"] = "1.0"
    answers[environment.INSTALLED] = json.dumps(there)
    line = next(line for line in diagnose.environment_here() if line.subject == "packages")
    assert line.state == FAILS and "coolprop missing instead of" in line.text and "numpy 1.0 instead of" in line.text
    stamp = environment._read_stamp(folder)
    environment._write_stamp(folder, stamp | {"how": "bounds"})
    assert states(diagnose.environment_here())["packages"] == NOTE


@pytest.mark.parametrize(
    ("script", "answer", "subject"),
    [
        (environment.INSTALLED, Answer(None, "broken"), "packages"),
        (diagnose.PACKAGE, Answer(None, "ModuleNotFoundError: cellfuncs"), "Cellfuncs"),
        (diagnose.PACKAGE, "0.1.0 37 /another place/cellfuncs/__init__.py", "Cellfuncs"),
        (diagnose.DENSITY, Answer(None, "ImportError: DLL load failed"), "CoolProp"),
        (diagnose.DENSITY, "8.0.0 996.6", "CoolProp"),
    ],
)
def test_each_part_of_the_environment_fails_by_itself(surroundings, script, answer, subject):
    surroundings[1][script] = answer
    found = list(diagnose.environment_here())
    assert [line.subject for line in found if line.state == FAILS] == [subject]
    assert all(line.advice for line in found if line.state == FAILS)


def test_the_questions_are_answered_by_a_real_python():
    version, density = in_python(Path(sys.executable), diagnose.DENSITY).text.split()
    assert float(density) == pytest.approx(diagnose.WATER, rel=1e-6) and version[0].isdigit()
    assert in_python(Path(sys.executable), "raise ValueError('a')").error == "ValueError: a"
    assert in_python(Path("/nowhere/python"), "").text is None


def test_the_lock_file_counts_only_for_this_system(monkeypatch):
    monkeypatch.setattr(sys, "platform", "win32")
    assert "pywin32" in diagnose.locked() and "appscript" not in diagnose.locked()
    monkeypatch.setattr(sys, "platform", "linux")
    assert "pywin32" not in diagnose.locked() and diagnose.locked()["coolprop"]


@pytest.mark.skipif(os.name == "nt", reason="about other systems")
def test_elsewhere_excel_is_one_line():
    assert [line.state for line in diagnosis.lines()] == [NOT_SET_UP]


@pytest.fixture
def windows(tmp_path, monkeypatch):
    """A Windows on which everything of Excel is in order."""
    monkeypatch.setenv("USERPROFILE", str(tmp_path / "Åsa"))
    monkeypatch.setenv("APPDATA", str(tmp_path / "Åsa" / "Roaming"))
    monkeypatch.setenv("CELLFUNCS_ENV", str(tmp_path / "environment"))
    python = environment.interpreter(tmp_path / "environment")
    python.parent.mkdir(parents=True)
    python.write_text("stands for a Python")
    library = tmp_path / "environment" / "xlwings64-0.37.8.dll"
    library.write_bytes(b"MZ".ljust(60, b"\0") + (64).to_bytes(4, "little") + b"PE\0\0\x64\x86")
    add_in = office.startup_folder() / settings.ADD_IN
    add_in.parent.mkdir(parents=True)
    with zipfile.ZipFile(add_in, "w") as packed:
        packed.writestr("xl/vbaProject.bin", "")
    settings.save(command.wanted(python))
    settings.save_record({"add_in": str(add_in), "fingerprint": "now", "xlwings": "0.37.8"})
    monkeypatch.setattr(command, "on_windows", lambda: True)
    monkeypatch.setattr(office, "find", lambda: office.Excel(Path("EXCEL.EXE"), "16.0", "64-bit", "Click-to-Run"))
    monkeypatch.setattr(office, "security", lambda version: FINE)
    monkeypatch.setattr(office, "disabled_items", lambda version, name: [])
    monkeypatch.setattr(office, "synced", lambda path: False)
    monkeypatch.setattr(command, "in_environment", lambda python, *words: {"fingerprint": "now"})
    host = f"0.37.8 {ROOT / 'cellfuncs' / 'hosts' / 'excel.py'}"
    monkeypatch.setattr(diagnosis, "in_python", lambda python, script: Answer(host))
    return {"python": python, "library": library, "add_in": add_in}


def failing():
    return [(line.subject, line.text) for line in diagnosis.lines() if line.state == FAILS]


def test_a_whole_installation_in_excel(windows):
    assert {line.state for line in diagnosis.lines()} == {OK}
    subjects = [line.subject for line in diagnosis.lines()]
    assert subjects == [
        *("Excel", "trust setting", "Trust Center", "settings", "interpreter", "xlwings DLL", "xlwings", "add-in file"),
    ]


def break_part(part, windows, monkeypatch):
    record = settings.load_record()
    if part == "interpreter moved":
        windows["python"].unlink()
    elif part == "settings emptied":
        settings.file().write_text("")
    elif part == "settings changed":
        settings.save({"PYTHONPATH": "C:\\elsewhere"})
    elif part == "server broken":
        monkeypatch.setattr(diagnosis, "in_python", lambda python, script: Answer(None, "No module named 'pythoncom'"))
    elif part == "another Cellfuncs":
        monkeypatch.setattr(diagnosis, "in_python", lambda *words: Answer("0.37.8 C:/x/cellfuncs/hosts/excel.py"))
    elif part == "library gone":
        windows["library"].unlink()
    elif part == "library damaged":
        windows["library"].write_bytes(b"")
    elif part == "32-bit Excel":
        monkeypatch.setattr(office, "find", lambda: office.Excel(Path("x"), "16.0", "32-bit", "Click-to-Run"))
    elif part == "another xlwings":
        settings.save_record(record | {"xlwings": "0.33.0"})
    elif part == "add-in gone":
        windows["add_in"].unlink()
    elif part == "add-in cut":
        windows["add_in"].write_bytes(b"PK")
    elif part == "other functions":
        settings.save_record(record | {"fingerprint": "then"})
    elif part == "switched off after a crash":
        monkeypatch.setattr(office, "disabled_items", lambda version, name: [("place", "1A2B")])
    elif part == "Trust Center":
        monkeypatch.setattr(office, "security", lambda version: office.Security(True, False, True, True, True))
    elif part == "Store":
        monkeypatch.setattr(office, "find", lambda: office.Excel(Path(), "", "", "Store"))
    else:
        raise KeyError(part)


@pytest.mark.parametrize(
    ("part", "subject", "words"),
    [
        ("interpreter moved", "interpreter", "is not there"),
        ("settings emptied", "settings", "names no interpreter"),
        ("settings changed", "settings", "PYTHONPATH in"),
        ("server broken", "interpreter", "No module named 'pythoncom'"),
        ("another Cellfuncs", "interpreter", "another Cellfuncs"),
        ("library gone", "xlwings DLL", "xlwings64-0.37.8.dll is neither"),
        ("library damaged", "xlwings DLL", "damaged"),
        ("32-bit Excel", "xlwings DLL", "xlwings32-0.37.8.dll"),
        ("another xlwings", "xlwings", "0.33.0 in the add-in, 0.37.8"),
        ("add-in gone", "add-in file", "is not there"),
        ("add-in cut", "add-in file", "no add-in any more"),
        ("other functions", "add-in file", "made from other functions"),
        ("switched off after a crash", "add-in file", "after a crash"),
        ("Trust Center", "Trust Center", "add-ins are switched off"),
        ("Store", "Excel", "Store"),
    ],
)
def test_each_part_of_excel_fails_by_its_name(windows, monkeypatch, part, subject, words):
    break_part(part, windows, monkeypatch)
    found = failing()
    assert found and {name for name, _ in found} == {subject}
    assert words in found[0][1]
    assert all(line.advice for line in diagnosis.lines() if line.state == FAILS)


def test_trust_that_is_off_again_after_installing_is_no_failure(windows, monkeypatch):
    monkeypatch.setattr(office, "security", lambda version: office.Security(False, True, False, False, False))
    assert failing() == []
    assert next(line for line in diagnosis.lines() if line.subject == "trust setting").state == NOTE


def test_nothing_installed_is_not_set_up(windows, monkeypatch):
    settings.remove()
    windows["add_in"].unlink()
    assert [line.state for line in diagnosis.lines()][-1] == NOT_SET_UP
    monkeypatch.setattr(office, "find", lambda: None)
    assert [line.state for line in diagnosis.lines()] == [NOT_SET_UP]


def test_another_environment_and_synced_folders_are_noted(windows, monkeypatch, tmp_path):
    monkeypatch.setenv("CELLFUNCS_ENV", str(tmp_path / "another"))
    monkeypatch.setattr(office, "synced", lambda path: True)
    notes = [line for line in diagnosis.lines() if line.state == NOTE]
    assert [line.subject for line in notes] == ["interpreter", "OneDrive"]
    assert failing() == []


@pytest.fixture
def extension(tmp_path, monkeypatch):
    """An installed extension, as LibreOffice keeps it, and the file that it names its Python in."""
    functions = {"CF_A": "number", "CF_B": "text"}
    place = tmp_path / "profile" / "user" / "uno_packages" / "cache" / "uno_packages" / "lu1.tmp_" / "cellfuncs.oxt"
    place.mkdir(parents=True)
    file = place / "helper.json"
    made = {"version": "0.1.0", "command": [sys.executable, "-I"], "functions": functions}
    file.write_text(json.dumps(made), "utf-8")
    monkeypatch.setattr(diagnose, "in_python", lambda python, script: Answer("0.1.0 CF_B CF_A"))
    return file, made


def test_an_extension_in_order(extension, tmp_path):
    file, _ = extension
    assert diagnose.extensions_of(tmp_path / "profile", tmp_path / "program") == [file]
    assert [line.state for line in diagnose.calc_extension([file])] == [OK]


@pytest.mark.parametrize(
    ("change", "words"),
    [
        ({"version": "0.0.1"}, "version 0.0.1"),
        ({"functions": {"CF_A": "number"}}, "other functions"),
        ({"command": ["/gone/python"]}, "interpreter /gone/python"),
        ({"command": []}, "it names no Python"),
    ],
)
def test_an_extension_that_does_not_fit(extension, change, words, tmp_path, monkeypatch):
    file, made = extension
    for variable in ("HOME", "USERPROFILE", "PATH"):
        monkeypatch.setenv(variable, str(tmp_path))
    file.write_text(json.dumps(made | change), "utf-8")
    (line,) = diagnose.calc_extension([file])
    assert line.state == FAILS and words in line.text and "start.py calc" in line.advice


def test_a_removed_extension_does_not_count(extension, tmp_path):
    file, _ = extension
    (file.parent.parent.parent / "lu1.tmpremoved").write_text("")
    assert diagnose.extensions_of(tmp_path / "profile", tmp_path / "program") == []
    assert [line.state for line in diagnose.calc_extension([])] == [NOT_SET_UP]


def test_no_libreoffice_and_one_without_python(monkeypatch, tmp_path):
    from calc import libreoffice as offices

    monkeypatch.setenv("CELLFUNCS_OFFICE", str(tmp_path))
    assert [line.state for line in diagnose.calc_here()] == [NOT_SET_UP]
    for name in ("soffice", "unopkg"):
        offices.Office(tmp_path).program(name).write_text("")
    monkeypatch.setattr(offices, "user_profile", lambda: tmp_path / "profile")
    lines = states(diagnose.calc_here())
    assert lines == {"Calc": OK, "Calc's Python": FAILS, "Calc extension": NOT_SET_UP}


def test_trouble_is_the_only_way_out(monkeypatch):
    with pytest.raises(Trouble, match="excel, calc or nothing"):
        diagnose.main(["Excel"])
