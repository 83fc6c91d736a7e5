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
from cellfuncs.hosts.calc import __main__ as package_command
from cellfuncs.hosts.calc.office import calls, interpreter, pipe, repair, stored

ROOT = Path(__file__).resolve().parent.parent.parent
IN_OFFICE = sorted((ROOT / "cellfuncs" / "hosts" / "calc" / "office").glob("*.py"))
if str(ROOT / "install") not in sys.path:
    sys.path.insert(0, str(ROOT / "install"))

from calc import command, compile_types, extension, installer  # noqa: E402
from calc import libreoffice as offices  # noqa: E402
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
        words = interpreter.command(sys.executable, str(ROOT)) if words is None else words
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

STALE = "the catalogue or the office files have changed: run install/calc/compile_types.py and commit its three files"


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
    given = {"block": block, "labels": [["a"]], "values": [[1.0]], "term": "viscous heating", "label": "velocity"}
    given |= {"what": "terms", "substance": "water", "temperature": 300.0, "value": 2.0, "range": [[1.0]]}
    given |= {"stated": 2.0, "recomputed": 1.0, "case_block": block}
    for function in catalogue.functions().values():
        if function.returns == "table":
            answer = function.call(*[given[a.name] for a in function.arguments if not a.optional])
            assert isinstance(answer, list) == (extension.kind_of(function) == "table"), (function.name, answer)
        else:
            assert extension.kind_of(function) == "cell"


def test_the_ready_extension_is_that_of_the_catalogue(tmp_path):
    extension.build(tmp_path / "x.oxt")
    assert (tmp_path / "x.oxt").read_bytes() == installer.READY.read_bytes(), STALE


def test_what_is_in_order_is_not_compiled_again(monkeypatch, tmp_path):
    monkeypatch.setattr(compile_types, "compile_types", None)
    monkeypatch.setattr(compile_types, "READY", tmp_path / "x.oxt")
    assert compile_types.in_order(extension.idl()) and not compile_types.in_order(extension.idl() + "\n")
    assert compile_types.main() == 0
    assert (tmp_path / "x.oxt").exists()


def test_the_extension_holds_what_its_manifest_names():
    with zipfile.ZipFile(installer.READY) as file:
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
    assert settings["command"] == []
    assert set(settings["functions"]) == set(catalogue.functions())


def test_what_is_installed_names_its_python_and_is_else_the_same(tmp_path):
    installer.write(tmp_path / "x.oxt", Path("/a place/ä/python"))
    with zipfile.ZipFile(installer.READY) as ready, zipfile.ZipFile(tmp_path / "x.oxt") as written:
        assert ready.namelist() == written.namelist()
        assert [name for name in ready.namelist() if ready.read(name) != written.read(name)] == ["helper.json"]
        settings, before = json.loads(written.read("helper.json")), json.loads(ready.read("helper.json"))
    assert settings == before | {"command": interpreter.command("/a place/ä/python", str(ROOT))}


# -- which Python calculates -------------------------------------------------------------------------


@pytest.fixture
def home(tmp_path, monkeypatch):
    """A user without any note, and nothing on PATH."""
    home = tmp_path / "home"
    home.mkdir()
    for variable in ("HOME", "USERPROFILE"):
        monkeypatch.setenv(variable, str(home))
    monkeypatch.setenv("PATH", "")
    return home


def with_command(folder, mode=0o755):
    """A folder with the command `cellfuncs` and a Python beside it."""
    folder.mkdir(parents=True)
    end = ".exe" if os.name == "nt" else ""
    for name in ("cellfuncs", "python" if end else "python3"):
        (folder / (name + end)).write_text("")
        (folder / (name + end)).chmod(mode)
    return folder


def test_a_cell_says_when_no_python_is_known(helper, home):
    fault = helper([]).ask("CF_VERSION", ())
    assert fault == calls.fault(interpreter.UNKNOWN) and "python -m cellfuncs.hosts.calc use" in fault
    assert len(fault) < 255


def test_the_python_that_a_user_noted_calculates(helper, home, capsys):
    one = helper([])
    assert one.ask("CF_VERSION", ()).startswith("! ")
    assert package_command.main(["use"]) == 0
    assert str(installer.READY) in capsys.readouterr().out
    one.failed = ("", 0.0)  # as after the pause
    assert isinstance(one.ask("CF_REYNOLDS", (2.0, 0.02, 998.0, 0.001)), float)
    assert package_command.main(["use"]) == 0  # again, over the note before


def test_a_note_goes_before_path(home, monkeypatch, tmp_path):
    folder = with_command(tmp_path / "bin")
    monkeypatch.setenv("PATH", str(folder))
    assert interpreter.find()[0].startswith(str(folder / "python"))
    installer.use(Path(sys.executable))
    assert interpreter.find() == interpreter.command(sys.executable, str(ROOT))


@pytest.mark.parametrize("text", ["", "[1]", '{"python": "python3", "folder": "/x"}', '{"python": 3, "folder": "/x"}'])
def test_a_damaged_note_is_told_and_nothing_else_is_started(home, monkeypatch, tmp_path, text):
    monkeypatch.setenv("PATH", str(with_command(tmp_path / "bin")))
    (home / ".cellfuncs").mkdir()
    (home / ".cellfuncs" / "calc.json").write_text(text)
    with pytest.raises(interpreter.Unknown, match="is damaged"):
        interpreter.find()


@pytest.mark.skipif(os.name == "nt", reason="there the folder of a user belongs to the user")
def test_a_note_that_others_may_write_is_not_used(home, monkeypatch):
    installer.use(Path(sys.executable))
    note = home / ".cellfuncs" / "calc.json"
    assert note.stat().st_mode & 0o077 == 0
    note.chmod(0o666)
    with pytest.raises(interpreter.Unknown, match="others may write"):
        interpreter.find()
    note.chmod(0o600)
    monkeypatch.setattr(os, "geteuid", lambda: note.stat().st_uid + 1)
    with pytest.raises(interpreter.Unknown, match="others may write"):
        interpreter.find()


@pytest.mark.skipif(os.name == "nt", reason="links and rights of other systems")
def test_path_is_searched_in_whole_folders_only(home, monkeypatch, tmp_path):
    folder = with_command(tmp_path / "bin")
    monkeypatch.chdir(folder)
    for path in ("", ".", f"{os.pathsep}bin", str(with_command(tmp_path / "not to run", 0o644))):
        monkeypatch.setenv("PATH", path)
        with pytest.raises(interpreter.Unknown):
            interpreter.find()
    (tmp_path / "links").mkdir()
    (tmp_path / "links" / "cellfuncs").symlink_to(folder / "cellfuncs")
    monkeypatch.setenv("PATH", os.pathsep.join(("links", str(tmp_path / "links"))))
    assert interpreter.find() == interpreter.command(str(folder / "python3"))


# -- the installer -----------------------------------------------------------------------------------


@pytest.fixture
def machine(tmp_path, monkeypatch, home):
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


@pytest.mark.parametrize("mark", ["pyvenv.cfg", "conda-meta"])
def test_an_activated_environment_is_kept_from_the_office(home, monkeypatch, tmp_path, mark):
    folders = [tmp_path / name / "bin" for name in ("before", "environment", "after", "versions")]
    for folder in folders:
        folder.mkdir(parents=True)
    (folders[3] / "python3").touch()  # a version manager's Python: no `uno` in it either
    (tmp_path / "environment" / mark).mkdir()
    monkeypatch.setenv("PATH", os.pathsep.join(map(str, folders)))
    monkeypatch.setenv("VIRTUAL_ENV", str(tmp_path / "environment"))
    variables = offices.variables()
    assert variables["PATH"].split(os.pathsep) == [str(folders[0]), str(folders[2])]
    assert "VIRTUAL_ENV" not in variables


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
    monkeypatch.setattr(installer, "PAUSE", 0.0)
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
    installer.use(Path(sys.executable))
    assert command.main(["--remove"]) == 0
    assert "nothing to remove" in capsys.readouterr().out
    assert not os.path.exists(interpreter.user_file())


@pytest.mark.skipif(os.name == "nt", reason="the office of this test is made of shell scripts")
def test_the_command_of_the_package_says_the_same(machine, monkeypatch, capsys):
    monkeypatch.setattr(installer, "PAUSE", 0.0)
    assert package_command.main(["remove"]) == 0
    assert package_command.main(["install"]) == 2
    monkeypatch.setenv("CELLFUNCS_OFFICE", str(machine[0] / "nowhere"))
    assert package_command.main(["install"]) == 2
    said = capsys.readouterr()
    assert "nothing to remove" in said.out
    first, second = said.err.splitlines()
    assert "did not calculate" in first and "there is no soffice" in second


def test_the_extension_alone_is_written(machine, capsys):
    out = machine[0] / "with a space.oxt"
    assert command.main(["--out", str(out)]) == 0
    assert zipfile.is_zipfile(out) and str(out) in capsys.readouterr().out


@pytest.mark.parametrize(
    ("formula", "answer"),
    [
        ('=CF_TERM(coolant,"storage")', 2.0),
        ("=INDEX(CF_PREMISES(coolant),2,3)", [[2.0] * 3] * 2),
        ("=index(cf_terms(a1:c9);1;1)", [[2.0]]),
        ("=INDEX(CF_TERMS(a)*2,1,1)", None),
        ("=INDEX(CF_TERMS(a),1,1)+1", None),
        ("=INDEX(A1:B9,1,1)", None),
        ("=INDEX(CF_TERMS(a),B1,1)", None),
    ],
)
def test_what_is_answered_so_that_a_stored_value_shows(formula, answer):
    from cellfuncs.hosts.calc.office.stored import answer_for

    assert answer_for(formula, 2.0) == answer
