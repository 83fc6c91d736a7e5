"""Calc's side without an office: the pipe, the helper process, the files of the extension, what the installer says."""

import ast
import json
import os
import sys
import xml.etree.ElementTree as ElementTree
import zipfile
from pathlib import Path
from types import SimpleNamespace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.cells import catalogue
from cellfuncs.hosts.calc import helper as helper_process
from cellfuncs.hosts.calc.office import calls, pipe, repair, stored

ROOT = Path(__file__).resolve().parent.parent.parent
IN_OFFICE = sorted((ROOT / "cellfuncs" / "hosts" / "calc" / "office").glob("*.py"))
if str(ROOT / "install") not in sys.path:
    sys.path.insert(0, str(ROOT / "install"))

from calc import command, compile_types, extension  # noqa: E402
from calc import office as offices  # noqa: E402
from environment import Trouble  # noqa: E402

# -- what runs inside the office ---------------------------------------------------------------------


@pytest.mark.parametrize("path", IN_OFFICE, ids=lambda path: path.name)
def test_what_runs_in_the_office_asks_for_an_old_python_and_nothing_else(path):
    tree = ast.parse(path.read_text("utf-8"), feature_version=(3, 8))
    allowed = set(sys.stdlib_module_names) | {"uno", "unohelper", "com", "cellfuncs_in_office"}
    for node in ast.walk(tree):
        names = [alias.name for alias in node.names] if isinstance(node, ast.Import) else []
        names += [node.module] if isinstance(node, ast.ImportFrom) and not node.level and node.module else []
        assert {name.split(".")[0] for name in names} <= allowed
    # Annotations of newer kinds are errors for an old Python when they stand outside of a text.
    annotated = [node.annotation for node in ast.walk(tree) if isinstance(node, (ast.arg, ast.AnnAssign))]
    annotated += [node.returns for node in ast.walk(tree) if isinstance(node, ast.FunctionDef)]
    assert not [one for one in annotated if isinstance(one, (ast.BinOp, ast.Subscript))]


CELLS = st.one_of(st.floats(allow_nan=False), st.text(), st.none())


@given(st.lists(st.one_of(CELLS, st.lists(st.lists(CELLS, max_size=3), max_size=3)), max_size=4))
def test_a_message_arrives_as_it_was_sent(message):
    reading, writing = os.pipe()
    try:
        pipe.send(writing, message)
        assert pipe.receive(reading) == message
    finally:
        os.close(reading)
        os.close(writing)


def test_half_of_a_surrogate_pair_arrives():
    assert pipe.decode(pipe.encode(["\ud800"]).encode("ascii")) == ["\ud800"]


def test_a_pipe_that_closes_in_the_middle_is_told():
    reading, writing = os.pipe()
    os.write(writing, b"\0\0\0\x09[1,")
    os.close(writing)
    with pytest.raises(pipe.Closed):
        pipe.receive(reading)
    os.close(reading)


def whole_column(*used):
    return tuple(used) + (("",) * len(used[0]),) * (calls.WHOLE_COLUMN - len(used))


def test_whole_columns_of_a_call_are_cut_at_one_row():
    first, second = whole_column((1.0,), ("",), (3.0,)), whole_column(("a",))
    got = calls.trimmed((first, 7.0, second, ((1.0,), ("",)), None))
    assert got == [((1.0,), ("",), (3.0,)), 7.0, (("a",), ("",), ("",)), ((1.0,), ("",))]


def test_arguments_left_out_at_the_end_are_not_sent():
    assert list(calls.trimmed((1.0, None, "x", None, None))) == [1.0, None, "x"]
    assert list(calls.trimmed((None, None))) == []
    assert calls.trimmed((whole_column(("", "")),)) == [(("", ""),)]


@pytest.mark.parametrize(
    ("formula", "unresolved"),
    [
        ("=cf_reynolds(A1;2)", True),
        ("=1+CF_TERM (coolant;A1)", True),
        ("{=CF_TERMS(coolant)}", True),
        ("=CELLFUNCS.FUNCTIONS.CF_REYNOLDS(A1;2)", False),
        ("=CELLFUNCS.FUNCTIONS.CF_TERM(cf_vary(coolant;1;2);3)", True),
        ('="cf_reynolds(1)"&A1', False),
        ("=my_cf_reynolds(1)", False),
        ("=cf_reynolds+1", False),
    ],
)
def test_an_unresolved_name_is_found(formula, unresolved):
    assert repair.names_ours(formula) is unresolved


@pytest.mark.parametrize(
    ("formula", "one_call"),
    [
        ("=cf_term(cf_vary(coolant;1;2);A1)", True),
        ("=CF_VERSION( ) ", True),
        ('=cf_si(A1;"m/s)")', True),
        ("=cf_si(A1;'a )'.B1)", True),
        ("=cf_si(1;2)+1", False),
        ("=cf_si(1;2)*cf_si(1;2)", False),
        ("=-cf_si(1;2)", False),
        ("=IF(A1;cf_si(1;2);0)", False),
        ("{=cf_terms(coolant)}", False),
        ("=cf_si(1;2", False),
    ],
)
def test_a_formula_of_one_call_is_known(formula, one_call):
    assert stored.is_one_call(formula) is one_call


class Sheet:
    """Stands for a document with one sheet, whose cells answer as they like."""

    def __init__(self, values, areas=()):
        self.values, self.areas, self.calculated = values, areas, 0
        self.Sheets = self

    def getByIndex(self, index):
        return self

    def isAutomaticCalculationEnabled(self):
        return True

    def calculateAll(self):
        self.calculated += 1

    def getCellByPosition(self, column, row):
        return SimpleNamespace(
            getError=lambda: 0,
            DataArray=((self.values[row],),),
            queryPrecedents=lambda all_of_them: SimpleNamespace(RangeAddresses=self.areas),
        )


def formulas(*values):
    return [stored.Cell((0, row, 0), "=cf_si(1;2)", value) for row, value in enumerate(values)]


def test_values_that_were_not_put_back_as_stored_are_all_calculated():
    helper = SimpleNamespace(told=None)
    right, wrong = Sheet([1.0, "x"]), Sheet([1.0, 1.0])
    for sheet in (right, wrong):
        stored.put_back(sheet, formulas(1.0, "x"), helper)
        assert helper.told is None
    assert (right.calculated, wrong.calculated) == (0, 1)


def test_a_file_of_zeros_and_one_of_very_many_cells_is_left_to_be_calculated():
    helper = SimpleNamespace(told=None)
    for cells in (formulas(0.0, 0.0), formulas(*[1.0] * (stored.MOST_CELLS + 1))):
        stored.put_back(Sheet([]), cells, helper)  # it has no cells to look at
    everywhere = [SimpleNamespace(Sheet=0, StartRow=0, EndRow=500, StartColumn=0, EndColumn=0)] * 2000
    stored.put_back(Sheet([1.0] * 200, everywhere), formulas(*[1.0] * 200), helper)


# -- the helper process ------------------------------------------------------------------------------


@pytest.fixture
def helper():
    made = []

    def make(words=None, patience=10.0):
        words = helper_process.command(sys.executable, str(ROOT)) if words is None else words
        made.append(calls.Helper(words, patience))
        return made[-1]

    yield make
    for one in made:
        one._drop()


def test_the_helper_answers_as_the_catalogue_does(helper, cf):
    one = helper()
    rows = tuple((0.1 + k / 3,) for k in range(3000))
    assert one.ask("CF_REYNOLDS", (rows, 0.02, 998.0, 0.001)) == cf("REYNOLDS", rows, 0.02, 998.0, 0.001)
    assert one.ask("CF_REYNOLDS", (2.0, None, None, None)) == cf("REYNOLDS", 2.0)
    assert one.ask("CF_LIST", ("terms", None)) == cf("LIST", "terms")
    assert one.ask("CF_NOWHERE", ()).startswith("! CF_NOWHERE: not in Cellfuncs ")


@pytest.mark.parametrize(
    ("words", "said"),
    [
        ([], "none recorded"),
        (["/nowhere/python"], "/nowhere/python"),
        ([sys.executable, "-I", "-c", "raise SystemExit('no module of that name')"], "no module of that name"),
        ([sys.executable, "-I", "-c", "print('not a message')"], "does not start"),
        ([str(ROOT / "pyproject.toml")], "does not start"),
    ],
)
def test_a_helper_that_does_not_start_is_told_in_the_cell(helper, words, said):
    one = helper(words)
    fault = one.ask("CF_VERSION", ())
    assert fault.startswith("! Cellfuncs: ") and said in fault and "install/start.py calc" in fault
    assert len(fault) <= 255
    assert one.ask("CF_VERSION", ()) == fault  # at once, without another start for each cell


def test_a_calculation_that_hangs_is_ended(helper):
    silent = "import sys, time; sys.path.insert(0, sys.argv[1]); from cellfuncs.hosts.calc.office import pipe;"
    silent += "pipe.send(1, {}); pipe.receive(0); time.sleep(600)"
    one = helper([sys.executable, "-I", "-c", silent, str(ROOT)], patience=0.5)
    assert one.ask("CF_VERSION", ()).startswith("! Cellfuncs: no answer within 0.5 s")
    assert one.process is None


# -- the extension -----------------------------------------------------------------------------------

STALE = "the catalogue has changed: run install/calc/compile_types.py (needs LibreOffice's SDK) and commit both files"


def test_the_types_are_those_of_the_catalogue():
    assert compile_types.IDL.read_text("utf-8") == compile_types.mark(extension.RDB.read_bytes()) + extension.idl(), (
        STALE
    )


def test_the_types_compile_to_the_file_in_the_repository():
    try:
        compiled = compile_types.compile_types(offices.find(), extension.idl())
    except offices.Unusable as unusable:
        if os.environ.get("CI") == "true":
            pytest.fail(str(unusable))
        pytest.skip(str(unusable))
    assert compiled == extension.RDB.read_bytes(), STALE


def test_a_function_that_answers_in_one_cell_is_declared_so(cf):
    """Texts in rows are not equal to any text in Calc, so only what is a table may be declared as rows."""
    block = [["flow kind", "duct", ""], ["substance", "water", ""], ["velocity", 3.0, "m/s"], ["diameter", 8.0, "mm"]]
    block += [["length", 1.2, "m"], ["inlet temperature", 18.0, "degC"], ["wall temperature", 45.0, "degC"]]
    given = {"block": block, "labels": [["a"]], "values": [[1.0]], "term": "advection", "label": "velocity"}
    given |= {"what": "terms", "substance": "water", "temperature": 300.0, "value": 2.0, "range": [[1.0]]}
    for function in catalogue.functions().values():
        if function.returns == "table":
            answer = function.call(*[given[a.name] for a in function.arguments if not a.optional])
            assert isinstance(answer, list) == (extension.kind_of(function) == "table"), (function.name, answer)
        else:
            assert extension.kind_of(function) == "cell"


def test_the_extension_holds_what_its_manifest_names(tmp_path):
    path = extension.build(tmp_path / "x.oxt", "/a place/ä/python", tmp_path)
    with zipfile.ZipFile(path) as file:
        names = set(file.namelist())
        listed = {
            value
            for entry in ElementTree.fromstring(file.read("META-INF/manifest.xml"))
            for key, value in entry.attrib.items()
            if key.endswith("full-path")
        }
        assert listed <= names and "pythonpath/cellfuncs_in_office/calls.py" in names
        for name in names:
            if name.endswith((".xml", ".xcu", ".components")):
                ElementTree.fromstring(file.read(name))
        settings = json.loads(file.read("helper.json"))
        assert b"AdminTime" not in file.read("Jobs.xcu")
    assert settings["command"][0] == "/a place/ä/python" and settings["command"][-1] == str(tmp_path)
    assert set(settings["functions"]) == set(catalogue.functions())
    again = extension.build(tmp_path / "y.oxt", "/a place/ä/python", tmp_path)
    assert again.read_bytes() == path.read_bytes()


# -- the installer -----------------------------------------------------------------------------------


@pytest.fixture
def machine(tmp_path, monkeypatch):
    """An office of shell scripts; `say` sets what unopkg prints and its code."""
    program = tmp_path / "program"
    program.mkdir()
    for name in ("soffice", "unopkg"):
        (program / name).write_text("#!/bin/sh\nexit 0\n")
        (program / name).chmod(0o755)
    (program / "pythonloader.py").write_text("")
    monkeypatch.setenv("CELLFUNCS_OFFICE", str(program))
    monkeypatch.setattr(offices, "user_profile", lambda: tmp_path / "profile")
    monkeypatch.setattr(command, "prepare", lambda: Path(sys.executable))

    def say(text, code):
        (program / "unopkg").write_text(f"#!/bin/sh\necho '{text}'\nexit {code}\n")

    return tmp_path, say


def refused(*words):
    with pytest.raises(Trouble) as caught:
        command.main(list(words))
    text = str(caught.value)
    assert "\n" not in text
    return text


def test_without_libreoffice_it_says_so(machine, monkeypatch):
    monkeypatch.setenv("CELLFUNCS_OFFICE", str(machine[0] / "nowhere"))
    assert "there is no soffice" in refused()
    monkeypatch.delenv("CELLFUNCS_OFFICE")
    monkeypatch.setattr(offices, "_places", lambda: iter(()))
    assert "LibreOffice is not installed here" in refused()
    assert "LibreOffice is not installed here" in refused("--remove")


@pytest.mark.skipif(os.name == "nt", reason="the office of this test is made of shell scripts")
def test_what_stands_in_the_way_is_told(machine, monkeypatch):
    folder, say = machine
    monkeypatch.setattr(command, "PAUSE", 0.0)
    assert "did not calculate" in refused()
    say("ERROR: The following extension cannot be read", 1)
    assert refused() == "unopkg add failed: ERROR: The following extension cannot be read"
    say("unopkg cannot be started. The lock file indicates it as already running.", 1)
    assert "close it and try again" in refused()
    (folder / "profile").mkdir()
    (folder / "profile" / ".lock").write_text("")
    assert "LibreOffice is running" in refused() and "LibreOffice is running" in refused("--remove")
    (folder / "program" / "pythonloader.py").unlink()
    assert "python3-uno" in refused()
    assert "takes no argument" in refused("--everything")


@pytest.mark.skipif(os.name == "nt", reason="the office of this test is made of shell scripts")
def test_removing_what_is_not_there_is_no_error(machine, capsys):
    assert command.main(["--remove"]) == 0
    assert "nothing to remove" in capsys.readouterr().out


def test_the_extension_alone_is_written(machine, capsys):
    out = machine[0] / "with a space.oxt"
    assert command.main(["--out", str(out)]) == 0
    assert zipfile.is_zipfile(out) and str(out) in capsys.readouterr().out
