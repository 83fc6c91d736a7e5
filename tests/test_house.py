"""The rules of the house, read from the source: layers, heavy imports, lengths, data with sources."""

import ast
import csv
import re
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parent.parent
PACKAGE = ROOT / "cellfuncs"

# From the top down; a module imports from its own layer and those after it.
LAYERS = (
    "cli",
    "hosts",
    "sheets",
    "cells",
    "checks",
    "terms",
    "answers",
    "models",
    "methods",
    "cases",
    "groups",
    "substances",
    "sources",
    "quantities",
    "errors",
)
ABOVE_BOOKS = ("cli", "hosts", "sheets")
HOSTS_ONLY = {"xlwings", "formualizer", "openpyxl", "uno", "unohelper", "com"}
QUANTITIES_ONLY = {"pint"}
NEVER_AT_IMPORT = {
    "CoolProp",
    "scipy",
    "matplotlib",
    "pint",
    "openpyxl",
    "rich",
    "xlsxwriter",
    "formualizer",
    "iapws",
    "jinja2",
    "distributed",
}
LONGEST_FILE = 400
LONG_WITH_REASON: dict[str, str] = {}
UNFINISHED = re.compile(
    r"\b(todo|fixme|xxx|raise NotImplementedError|not implemented|placeholder)\b", re.IGNORECASE
)

SOURCES = sorted(PACKAGE.rglob("*.py"))
TABLES = sorted((PACKAGE / "data").rglob("*.csv"))


def name_of(path: Path) -> str:
    return path.relative_to(ROOT).as_posix()


def module_of(path: Path) -> str:
    """cellfuncs/cells/convert.py -> cellfuncs.cells.convert."""
    parts = path.relative_to(ROOT).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


def imports_of(source: str, module: str = "", is_package: bool = False) -> Iterator[tuple[str, bool]]:
    """(absolute dotted name, whether it runs at import) of everything that a source imports."""
    tree = ast.parse(source)
    inside = {
        id(node)
        for function in ast.walk(tree)
        if isinstance(function, (ast.FunctionDef, ast.AsyncFunctionDef, ast.Lambda))
        for node in ast.walk(function)
    }
    inside |= {
        id(node)
        for block in ast.walk(tree)
        if isinstance(block, ast.If) and ast.unparse(block.test) in ("TYPE_CHECKING", "typing.TYPE_CHECKING")
        for node in ast.walk(block)
    }
    for node in ast.walk(tree):
        at_import = id(node) not in inside
        if isinstance(node, ast.Import):
            yield from ((alias.name, at_import) for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            base = node.module or ""
            if node.level:
                above = module.split(".")
                above = above[: len(above) - node.level + is_package]
                base = ".".join([*above, base] if base else above)
            yield from ((f"{base}.{alias.name}", at_import) for alias in node.names)
        elif isinstance(node, ast.Call) and ast.unparse(node.func).endswith("import_module"):
            first = node.args[0] if node.args else None
            if isinstance(first, ast.Constant) and isinstance(first.value, str):
                yield first.value, at_import


def room_of(dotted: str) -> str:
    """The layer a dotted name of the package stands in, or "" for the package's own top."""
    parts = dotted.split(".")
    return parts[1] if len(parts) > 1 else ""


def layer_faults(source: str, module: str, is_package: bool = False) -> list[str]:
    here = room_of(module)
    found = []
    for dotted, _ in imports_of(source, module, is_package):
        if dotted.split(".")[0] != "cellfuncs":
            continue
        there = room_of(dotted)
        if there in ("__version__", "") or there == here or here == "__main__":
            continue
        if here == "books":
            allowed = there == "errors"
        elif there == "books":
            allowed = here in ABOVE_BOOKS
        else:
            allowed = here in LAYERS and there in LAYERS and LAYERS.index(there) > LAYERS.index(here)
        if not allowed:
            found.append(f"{module} imports {dotted}")
    return found


def outside_faults(source: str, module: str) -> list[str]:
    """Packages from outside in rooms where they have no business, or imported too early."""
    here = room_of(module)
    found = []
    for dotted, at_import in imports_of(source, module):
        outside = dotted.split(".")[0]
        if outside in HOSTS_ONLY and here not in ("hosts", "books"):
            found.append(f"{module} imports {outside}, which belongs into hosts/ or books/")
        if outside in QUANTITIES_ONLY and here != "quantities":
            found.append(f"{module} imports {outside}, which belongs into quantities/")
        if outside in NEVER_AT_IMPORT and at_import:
            found.append(f"{module} imports {outside} at its own import: move it into the function")
        if dotted.startswith("xlwings.pro"):
            found.append(f"{module} imports {dotted}, which has another licence")
    return found


@pytest.mark.parametrize("path", SOURCES, ids=name_of)
def test_imports_go_down(path):
    assert layer_faults(path.read_text("utf-8"), module_of(path), path.name == "__init__.py") == []


@pytest.mark.parametrize("path", SOURCES, ids=name_of)
def test_packages_from_outside_stay_in_their_rooms(path):
    assert outside_faults(path.read_text("utf-8"), module_of(path)) == []


def test_every_room_has_a_layer():
    rooms = {path.relative_to(PACKAGE).parts[0].removesuffix(".py") for path in SOURCES}
    assert rooms - set(LAYERS) <= {"__init__", "__main__", "books"}


@pytest.mark.parametrize(
    ("source", "module"),
    [
        ("from cellfuncs.cells import catalogue", "cellfuncs.groups"),
        ("from cellfuncs import terms", "cellfuncs.methods.duct"),
        ("def f():\n    import cellfuncs.cli", "cellfuncs.hosts.embedded"),
        ("from ..terms import energy", "cellfuncs.cases.block"),
        ("import_module('cellfuncs.hosts.excel')", "cellfuncs.cells.catalogue"),
        ("from cellfuncs import quantities", "cellfuncs.books.gate"),
        ("from cellfuncs.books import gate", "cellfuncs.cells.convert"),
    ],
)
def test_an_import_upwards_is_found(source, module):
    assert len(layer_faults(source, module)) == 1


@pytest.mark.parametrize(
    ("source", "module"),
    [
        ("import openpyxl", "cellfuncs.cells.convert"),
        ("def f():\n    from xlwings import func", "cellfuncs.sheets.read"),
        ("def f():\n    import pint", "cellfuncs.cells.convert"),
        ("from CoolProp.CoolProp import AbstractState", "cellfuncs.substances.engine"),
        ("class A:\n    import scipy.optimize", "cellfuncs.methods.duct"),
        ("def f():\n    import xlwings.pro.reports", "cellfuncs.hosts.excel"),
    ],
)
def test_a_package_in_the_wrong_room_is_found(source, module):
    assert len(outside_faults(source, module)) >= 1


def test_an_import_inside_a_function_may_be_heavy():
    assert outside_faults("def f():\n    import CoolProp", "cellfuncs.substances.engine") == []


@pytest.mark.parametrize("path", SOURCES, ids=name_of)
def test_files_stay_readable_in_one_sitting(path):
    length = len(path.read_text("utf-8").splitlines())
    assert length <= LONGEST_FILE or LONG_WITH_REASON.get(name_of(path)), f"{length} lines without a reason"


def test_reasons_are_only_given_for_long_files():
    for name in LONG_WITH_REASON:
        assert len((ROOT / name).read_text("utf-8").splitlines()) > LONGEST_FILE


def test_nothing_is_left_unfinished():
    found = [
        f"{name_of(path)}:{number}: {line.strip()}"
        for folder in ("cellfuncs", "install", "workbooks")
        for path in (ROOT / folder).rglob("*.py")
        for number, line in enumerate(path.read_text("utf-8").splitlines(), 1)
        if UNFINISHED.search(line)
    ]
    assert found == []


def test_an_unfinished_place_is_found():
    assert UNFINISHED.search("# TODO: later") and UNFINISHED.search("    raise NotImplementedError")
    assert not UNFINISHED.search("except (ImportError, NotImplementedError):")


@pytest.mark.parametrize("path", TABLES, ids=name_of)
def test_every_row_of_data_has_its_source(path):
    with path.open(encoding="utf-8", newline="") as file:
        lines = csv.reader(line for line in file if not line.startswith("#"))
        head = next(lines)
        rows = list(lines)
    assert rows
    assert [row for row in rows if len(row) != len(head)] == []
    if "source" in head:
        place = head.index("source")
        assert [row for row in rows if not row[place].strip()] == []


def test_there_are_tables_with_sources():
    heads = [path.read_text("utf-8").splitlines()[0].split(",") for path in TABLES]
    assert any("source" in head for head in heads)


def test_the_top_folder_holds_what_the_design_lists():
    listed = {"README.md", "DEVELOPERS.md", "pyproject.toml", "cellfuncs", "tests", "workbooks", "install"}
    made_by_tools = {"build", "dist", "__pycache__"}
    seen = {path.name for path in ROOT.iterdir() if not path.name.startswith(".")} - made_by_tools
    assert {name for name in seen if not name.endswith(".egg-info")} <= listed


HEAVY = ("xlwings", *sorted(NEVER_AT_IMPORT))


@pytest.mark.parametrize(
    ("statement", "heavy"),
    [
        ("import cellfuncs", ("numpy", *HEAVY)),
        ("import cellfuncs.cli", ("numpy", *HEAVY)),
        # numpy costs a tenth of a second, which the list of functions may take
        ("import cellfuncs.cli as c; c.main(['functions'])", HEAVY),
    ],
)
def test_nothing_heavy_is_loaded_before_it_is_needed(statement, heavy):
    script = f"import sys\n{statement}\nprint('loaded:', [name for name in {heavy!r} if name in sys.modules])"
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, cwd=ROOT)
    assert done.returncode == 0, done.stderr
    assert done.stdout.splitlines()[-1] == "loaded: []"
