"""The package: built from the tree without a network, its contents, and a workbook recalculated from the wheel."""

import ast
import email
import json
import os
import re
import shutil
import subprocess
import sys
import tarfile
import zipfile
from pathlib import Path

import pytest

import cellfuncs

ROOT = Path(__file__).resolve().parent.parent.parent
PACKAGE = ROOT / "cellfuncs"
EXTENSION = "cellfuncs/hosts/calc/cellfuncs.oxt"
BUILD = "import sys; from setuptools import build_meta as b; out = sys.argv[1]; b.build_wheel(out); b.build_sdist(out)"
# Modules of the office itself, and the name under which it holds our files; they come from no package index.
OFFICE = {"uno", "unohelper", "com", "cellfuncs_in_office"}


@pytest.fixture(scope="module")
def built(tmp_path_factory):
    """Folder with the wheel and the sdist, made by the build backend from a copy of the tree."""
    tree, out = tmp_path_factory.mktemp("tree"), tmp_path_factory.mktemp("dist")
    for name in ("pyproject.toml", "README.md"):
        shutil.copy(ROOT / name, tree)
    shutil.copytree(PACKAGE, tree / "cellfuncs", ignore=shutil.ignore_patterns("__pycache__"))
    done = subprocess.run([sys.executable, "-c", BUILD, out], cwd=tree, capture_output=True, text=True)
    assert done.returncode == 0, f"install setuptools as in install/lock.txt; the build said: {done.stderr[-2000:]}"
    return out


@pytest.fixture(scope="module")
def wheel(built):
    (path,) = built.glob("*.whl")
    return path


@pytest.fixture(scope="module")
def metadata(wheel):
    with zipfile.ZipFile(wheel) as file:
        (name,) = (n for n in file.namelist() if n.endswith(".dist-info/METADATA"))
        return email.message_from_bytes(file.read(name))


def files_of_package() -> set[str]:
    files = (path for path in PACKAGE.rglob("*") if path.is_file() and "__pycache__" not in path.parts)
    return {path.relative_to(ROOT).as_posix() for path in files}


def test_the_wheel_holds_the_package_with_its_data_and_nothing_else(wheel):
    with zipfile.ZipFile(wheel) as file:
        assert file.testzip() is None
        names = set(file.namelist())
    assert {name for name in names if ".dist-info/" not in name} == files_of_package()
    assert {"cellfuncs/LICENSE", "cellfuncs/CHANGES.md", "cellfuncs/data/units.csv", EXTENSION} <= names
    assert any(name.endswith(".dist-info/licenses/cellfuncs/LICENSE") for name in names)


def test_the_sdist_holds_what_the_wheel_is_made_of(built):
    (path,) = built.glob("*.tar.gz")
    with tarfile.open(path) as file:
        names = {name.partition("/")[2] for name in file.getnames()}
    assert files_of_package() | {"pyproject.toml", "README.md", EXTENSION} <= names


def test_name_version_and_licence(wheel, metadata):
    assert wheel.name == f"cellfuncs-{cellfuncs.__version__}-py3-none-any.whl"
    assert metadata["Version"] == cellfuncs.__version__
    assert metadata["License-Expression"] == "MIT"
    assert "MIT License" in (PACKAGE / "LICENSE").read_text("utf-8")
    assert metadata["Requires-Python"] == ">=3.11"
    assert "Programming Language :: Python :: 3.11" in metadata.get_all("Classifier")


def requirements(metadata) -> dict[str, str]:
    """Package -> version bounds, also those for a cluster, without those of the tests."""
    found = {}
    for line in metadata.get_all("Requires-Dist"):
        wanted, _, extra = line.partition(";")
        if "extra" not in extra or "cluster" in extra:
            name, bounds = re.fullmatch(r"([A-Za-z0-9_.-]+)\s*(.*)", wanted.strip()).groups()
            found[name.lower()] = bounds
    return found


def test_every_dependency_has_both_bounds(metadata):
    loose = {n: b for n, b in requirements(metadata).items() if ">=" not in b or not re.search(r"<(?!=)", b)}
    assert loose == {}


def test_what_is_imported_is_declared(metadata):
    imported = set()
    for path in PACKAGE.rglob("*.py"):
        for node in ast.walk(ast.parse(path.read_text("utf-8"))):
            if isinstance(node, ast.Import):
                imported |= {alias.name.split(".")[0] for alias in node.names}
            elif isinstance(node, ast.ImportFrom) and node.level == 0:
                imported.add(node.module.split(".")[0])
    beside_in_office = {path.stem for path in (PACKAGE / "hosts" / "calc" / "office").glob("*.py")}
    from_outside = imported - set(sys.stdlib_module_names) - OFFICE - beside_in_office - {"cellfuncs"}
    assert {"numpy", "CoolProp", "formualizer"} <= from_outside
    assert {name.lower() for name in from_outside} <= set(requirements(metadata))


@pytest.fixture(scope="module")
def unpacked(wheel, tmp_path_factory):
    folder = tmp_path_factory.mktemp("unpacked")
    with zipfile.ZipFile(wheel) as file:
        file.extractall(folder)
    return folder


def run(unpacked, folder, *words):
    variables = os.environ | {"PYTHONPATH": str(unpacked), "PYTHONDONTWRITEBYTECODE": "1", "PYTHONUTF8": "1"}
    variables |= {"HOME": str(folder), "USERPROFILE": str(folder)}
    return subprocess.run(
        [sys.executable, *map(str, words)], cwd=folder, env=variables, capture_output=True, encoding="utf-8"
    )


def test_a_workbook_is_recalculated_by_what_the_wheel_holds(unpacked, tmp_path):
    where = run(unpacked, tmp_path, "-c", "import cellfuncs; print(cellfuncs.__file__)")
    assert Path(where.stdout.strip()).is_relative_to(unpacked)
    book = ROOT / "workbooks" / "self_test.xlsx"
    done = run(unpacked, tmp_path, "-m", "cellfuncs", "recalc", book, "-o", tmp_path / "out.xlsx")
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout.splitlines()[-1] == f"wrote {tmp_path / 'out.xlsx'}"
    import openpyxl

    answer = openpyxl.load_workbook(tmp_path / "out.xlsx", data_only=True)["Self-test"]["C4"].value
    assert re.fullmatch(r"all (\d+) of \1 agree", answer)


def test_the_command_of_the_wheel_is_the_command_line(wheel, unpacked, tmp_path):
    with zipfile.ZipFile(wheel) as file:
        (name,) = (n for n in file.namelist() if n.endswith("entry_points.txt"))
        points = file.read(name).decode()
    assert re.search(r"^cellfuncs\s*=\s*cellfuncs\.cli:main$", points, re.MULTILINE)
    shown = run(unpacked, tmp_path, "-c", "import sys; from cellfuncs.cli import main; sys.exit(main(['--version']))")
    assert shown.stdout.strip() == f"cellfuncs {cellfuncs.__version__}"


def test_the_extension_for_calc_is_found_in_what_the_wheel_holds(unpacked, tmp_path):
    done = run(unpacked, tmp_path, "-m", "cellfuncs.hosts.calc", "use")
    assert (done.returncode, done.stderr) == (0, "")
    assert str(unpacked / EXTENSION) in done.stdout
    noted = json.loads((tmp_path / ".cellfuncs" / "calc.json").read_text("utf-8"))
    assert noted == {"python": sys.executable, "folder": str(unpacked)}
