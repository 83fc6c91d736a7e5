"""Setting up: what is found, made, mended or refused, without a network and without a real environment."""

import ast
import importlib.metadata
import os
import re
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest
from packaging.requirements import Requirement

ROOT = Path(__file__).resolve().parent.parent.parent
INSTALL = ROOT / "install"
sys.path.insert(0, str(INSTALL))

import commands  # noqa: E402
import environment  # noqa: E402


@pytest.fixture
def machine(tmp_path, monkeypatch):
    """An empty place for the environment, and steps that only write down what they would do."""
    folder = tmp_path / "with a space" / "environment"
    monkeypatch.setenv("CELLFUNCS_ENV", str(folder))
    done = []

    def run(words, where, follow=None):
        words = [str(word) for word in words]
        done.append(words)
        if "venv" in words:
            python = environment.interpreter(folder)
            python.parent.mkdir(parents=True)
            python.write_text("stands for a Python")
            (folder / "pyvenv.cfg").write_text("version = 3.11.9")
        return '{"numpy": "2.0"}'

    monkeypatch.setattr(environment, "_run", run)
    monkeypatch.setattr(environment, "_version", lambda python: "3.11" if python.exists() else "")
    monkeypatch.setattr(environment, "_complete", lambda python, stamp: python.exists())
    return folder, done


def test_an_empty_place_is_filled_and_then_left_alone(machine):
    folder, done = machine
    python = environment.prepare()
    assert python == environment.interpreter(folder)
    assert [("venv" in words, str(INSTALL / "lock.txt") in words, "-e" in words) for words in done] == [
        (True, False, False),
        (False, True, False),
        (False, False, True),
        (False, False, False),
    ]
    done.clear()
    assert environment.prepare() == python
    assert done == []


def test_a_changed_lock_file_installs_again_without_making_anew(machine, monkeypatch, tmp_path):
    _, done = machine
    environment.prepare()
    done.clear()
    other = tmp_path / "lock.txt"
    other.write_text("numpy==2.1\n")
    monkeypatch.setattr(environment, "LOCK_FILE", other)
    environment.prepare()
    assert any(str(other) in words for words in done)
    assert not any("venv" in words for words in done)


@pytest.mark.parametrize("damage", ["python gone", "half made", "stamp unreadable", "package gone"])
def test_a_broken_environment_is_made_anew(machine, monkeypatch, damage):
    folder, done = machine
    environment.prepare()
    done.clear()
    (folder / "left over").write_text("")
    if damage == "python gone":
        environment.interpreter(folder).unlink()
    elif damage == "half made":
        environment._write_stamp(folder, {"state": "making", "own": True})
    elif damage == "stamp unreadable":
        (folder / environment.STAMP).write_text("{")
    else:
        answers = iter([False, False, True])
        monkeypatch.setattr(environment, "_complete", lambda python, stamp: next(answers))
    environment.prepare()
    assert "venv" in done[0]
    assert not (folder / "left over").exists()


def test_a_folder_with_other_things_is_never_touched(machine):
    folder, done = machine
    folder.mkdir(parents=True)
    (folder / "letters").write_text("mine")
    with pytest.raises(environment.Trouble, match="holds something else"):
        environment.prepare()
    assert (folder / "letters").read_text() == "mine"
    assert done == []


def test_an_environment_of_somebody_else_is_used_and_never_deleted(machine, monkeypatch):
    folder, done = machine
    python = environment.interpreter(folder)
    python.parent.mkdir(parents=True)
    python.write_text("stands for a Python")
    (folder / "pyvenv.cfg").write_text("version = 3.12.1")

    def fail(python, folder, progress):
        raise environment.Trouble("no network")

    with monkeypatch.context() as failing:
        failing.setattr(environment, "_install", fail)
        with pytest.raises(environment.Trouble, match="no network"):
            environment.prepare()
    environment.prepare()
    assert not any("venv" in words for words in done)
    monkeypatch.setattr(environment, "_version", lambda python: "")
    monkeypatch.setattr(environment, "_complete", lambda python, stamp: False)
    with pytest.raises(environment.Trouble, match="holds something else"):
        environment.prepare()
    assert python.exists()


def test_a_file_in_the_place_is_refused(machine):
    folder, _ = machine
    folder.parent.mkdir(parents=True)
    folder.write_text("")
    with pytest.raises(environment.Trouble, match="is a file"):
        environment.prepare()


def test_a_full_disk_is_said_before_anything_is_made(machine, monkeypatch):
    folder, done = machine
    monkeypatch.setattr(environment, "SPACE_NEEDED", 1 << 62)
    with pytest.raises(environment.Trouble, match="no space left"):
        environment.prepare()
    assert done == [] and not folder.exists()


def test_interrupting_leaves_one_line_and_a_place_that_is_made_anew(machine, monkeypatch):
    folder, done = machine

    def interrupted(python, folder, progress):
        raise KeyboardInterrupt

    with monkeypatch.context() as broken:
        broken.setattr(environment, "_install", interrupted)
        with pytest.raises(environment.Trouble, match="interrupted"):
            environment.prepare()
    assert environment._read_stamp(folder)["state"] == "making"
    done.clear()
    environment.prepare()
    assert "venv" in done[0]


def test_a_version_that_is_not_to_be_had_falls_back_to_the_bounds(machine, monkeypatch, capsys):
    folder, done = machine
    plain = environment._run

    def run(words, where, follow=None):
        if environment.LOCK_FILE in words:
            raise environment.Trouble("pip failed", "ERROR: No matching distribution found for scipy==1.17.1")
        return plain(words, where, follow)

    monkeypatch.setattr(environment, "_run", run)
    environment.prepare()
    assert environment._read_stamp(folder)["how"] == "bounds"
    assert "not to be had" in capsys.readouterr().err
    assert any(word.startswith("scipy>=") for words in done for word in words)


@pytest.mark.parametrize(
    ("output", "said"),
    [
        (
            "WARNING: Retrying (Retry(total=4)) after connection broken by 'NewConnectionError(<...>: Failed "
            "to establish a new connection: [Errno -3] Temporary failure in name resolution')\n"
            "ERROR: Could not find a version that satisfies the requirement numpy==2.4.6\n"
            "ERROR: No matching distribution found for numpy==2.4.6",
            "no network",
        ),
        ("ERROR: Could not install packages due to an OSError: [Errno 28] No space left", "no space"),
        (
            "The virtual environment was not created successfully because ensurepip is not available.  On "
            "Debian/Ubuntu systems, you need to install the python3-venv package",
            "apt install python3-venv",
        ),
        ("/usr/bin/python3: No module named venv", "apt install python3-venv"),
        ("ERROR: Could not install packages due to an OSError: [Errno 13] Permission denied", "no right"),
        ("SSLError(SSLCertVerificationError(1, '[SSL: CERTIFICATE_VERIFY_FAILED]", "certificate"),
    ],
)
def test_what_is_wrong_is_told_in_one_line(monkeypatch, tmp_path, output, said):
    script = f"import sys; print({output!r}); sys.exit(1)"
    with pytest.raises(environment.Trouble) as caught:
        environment._run([sys.executable, "-c", script], tmp_path)
    told = caught.value.args[0]
    assert said in told and "\n" not in told


def test_any_other_failure_shows_its_error_line(tmp_path):
    script = "import sys; print('building'); print('ERROR: the wheel is bent'); sys.exit(3)"
    with pytest.raises(environment.Trouble, match="code 3: ERROR: the wheel is bent"):
        environment._run([sys.executable, "-c", script], tmp_path)


def test_missing_packages_are_seen():
    version = importlib.metadata.version("pytest")
    python = Path(sys.executable)
    assert environment._complete(python, {"packages": {"pytest": version}})
    assert not environment._complete(python, {"packages": {"pytest": "0.0.1"}})
    assert not environment._complete(python, {"packages": {"a-package-that-is-not-there": "1"}})
    assert not environment._complete(Path("/nowhere/python"), {"packages": {}})


def test_only_one_process_sets_up(tmp_path, monkeypatch):
    monkeypatch.setattr(environment.tempfile, "gettempdir", lambda: str(tmp_path))
    with environment._alone(tmp_path / "environment", environment.Progress()):
        (lock,) = tmp_path.glob("*.lock")
        with lock.open("a+b") as second:
            assert not environment._locked(second)
    with lock.open("a+b") as third:
        assert environment._locked(third)


def test_variables_of_another_python_stay_out(monkeypatch):
    monkeypatch.setenv("PYTHONPATH", "/elsewhere")
    monkeypatch.setenv("PIP_TARGET", "/elsewhere")
    kept = environment.clean_variables()
    assert "PYTHONPATH" not in kept and "PIP_TARGET" not in kept and kept["PYTHONNOUSERSITE"] == "1"


def test_start_is_read_by_an_old_python_which_is_refused():
    source = (INSTALL / "start.py").read_text("utf-8")
    ast.parse(source, feature_version=(3, 4))
    script = (
        "import runpy, sys; sys.version_info = (3, 9, 18, 'final', 0); sys.argv = ['start.py', 'demo'];"
        f"runpy.run_path({str(INSTALL / 'start.py')!r}, run_name='__main__')"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True)
    assert done.returncode == 2
    assert done.stderr.count("\n") == 1 and "3.9" in done.stderr and "3.11" in done.stderr
    assert done.stdout == ""


def test_only_the_standard_library_is_used():
    own = {path.stem for path in INSTALL.glob("*.py")} | {path.parent.name for path in INSTALL.glob("*/__init__.py")}
    for name in ("start.py", "commands.py", "environment.py"):
        for node in ast.walk(ast.parse((INSTALL / name).read_text("utf-8"))):
            names = [alias.name for alias in node.names] if isinstance(node, ast.Import) else []
            names += [node.module] if isinstance(node, ast.ImportFrom) else []
            assert {one.split(".")[0] for one in names} <= sys.stdlib_module_names | own


def test_usage_lists_every_command_and_a_wrong_one_is_refused(capsys):
    assert commands.main(["--help"]) == 0
    shown = capsys.readouterr().out
    assert all(re.search(rf"^  {name}\b", shown, re.M) for name in commands.COMMANDS)
    assert commands.main([]) == 2
    capsys.readouterr()
    assert commands.main(["fly"]) == 2
    assert "demo" in capsys.readouterr().err


def test_trouble_is_one_line_and_code_2(monkeypatch, capsys):
    def prepare():
        raise commands.Trouble("no network")

    monkeypatch.setattr(commands, "prepare", prepare)
    assert commands.main(["test"]) == 2
    assert capsys.readouterr().err == "start.py: no network\n"


def test_demo_writes_outside_the_project(monkeypatch, tmp_path):
    ran = []
    monkeypatch.setattr(commands, "prepare", lambda: Path(sys.executable))
    monkeypatch.setattr(commands, "_run", lambda words, folder=None: ran.append(words) or 0)
    monkeypatch.chdir(tmp_path)
    assert commands.main(["demo"]) == 0
    assert commands.main(["demo", "out"]) == 0
    written = [Path(words[-1]) for words in ran]
    assert len(written) == 4
    assert all(ROOT not in path.parents for path in written)
    assert written[2] == tmp_path / "out" / "coolant_channel.xlsx"
    assert written[3] == tmp_path / "out" / "cooling_water_line.html"


def test_demo_is_fine_when_the_check_finds_what_it_should(monkeypatch, tmp_path):
    monkeypatch.setattr(commands, "prepare", lambda: Path(sys.executable))
    for codes, wanted in (((0, 1), 0), ((0, 0), 0), ((0, 2), 2), ((3,), 3)):
        left = list(codes)
        monkeypatch.setattr(commands, "_run", lambda words, folder=None, left=left: left.pop(0))
        assert commands.main(["demo", str(tmp_path)]) == wanted
        assert not left


def test_pytest_gets_paths_as_they_are_meant_here(monkeypatch, tmp_path):
    ran = []
    monkeypatch.setattr(commands, "prepare", lambda: Path(sys.executable))
    monkeypatch.setattr(commands, "_run", lambda words, folder=None: ran.append((words, folder)) or 0)
    monkeypatch.chdir(tmp_path)
    (tmp_path / "test_a.py").write_text("")
    commands.main(["test", "test_a.py::test_b", "-k", "water"])
    words, folder = ran[0]
    assert words[-3:] == [str(tmp_path / "test_a.py::test_b"), "-k", "water"]
    assert folder == ROOT


@pytest.mark.skipif(os.name == "nt", reason="signals")
def test_a_command_ended_by_a_signal_is_a_failure():
    assert commands._run([sys.executable, "-c", "import os; os.kill(os.getpid(), 9)"]) == 137


def test_the_lock_file_pins_whatever_the_project_asks_for():
    lines = (INSTALL / "lock.txt").read_text("utf-8").splitlines()
    pinned = {}
    for line in lines:
        if line and not line.startswith("#"):
            requirement = Requirement(line)
            (exact,) = requirement.specifier
            assert exact.operator == "=="
            pinned[requirement.name.lower().replace("_", "-")] = exact.version
    project = tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))
    asked = [
        *project["build-system"]["requires"],
        *project["project"]["dependencies"],
        *(one for extra in project["project"]["optional-dependencies"].values() for one in extra),
    ]
    for requirement in map(Requirement, asked):
        version = pinned.get(requirement.name.lower().replace("_", "-"))
        assert version and requirement.specifier.contains(version), f"{requirement} against {version}"


def test_the_script_of_continuous_integration_is_in_order():
    script = ROOT / ".ci" / "run"
    assert os.access(script, os.X_OK)
    text = script.read_text("utf-8")
    assert "set -euo pipefail" in text and "install/start.py test" in text
    subprocess.run(["bash", "-n", script], check=True)
