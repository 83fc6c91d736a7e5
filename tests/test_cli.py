"""The command line: what it prints, its exit codes, and one clear line for whatever goes wrong."""

import os
import subprocess
import sys
import types
from pathlib import Path

import pytest

from cellfuncs import __version__, cli
from cellfuncs.cells import catalogue
from cellfuncs.errors import BookRefused

ROOT = Path(__file__).resolve().parent.parent


def run(*words, **more):
    return subprocess.run(
        [sys.executable, "-m", "cellfuncs", *map(str, words)],
        capture_output=True,
        encoding="utf-8",
        cwd=ROOT,
        **more,
    )


@pytest.fixture
def engine(monkeypatch):
    """A host that does what a test tells it, in the place of the embedded one."""
    fake = types.ModuleType("cellfuncs.hosts.embedded")
    fake.asked = []
    fake.error = None

    def recalc(path, out=None, progress=None, **how):
        fake.asked.append((path, out))
        fake.how = how
        progress("reading")
        if fake.error:
            raise fake.error
        return types.SimpleNamespace(areas=["Sheet1!B2"], warnings=["B2 takes a bare number"], out=out)

    fake.recalc = recalc
    fake.render_areas = lambda areas: f"areas: {', '.join(areas)}"
    fake.fault_line = lambda areas: ""
    monkeypatch.setitem(sys.modules, "cellfuncs.hosts.embedded", fake)
    import cellfuncs.hosts

    monkeypatch.setattr(cellfuncs.hosts, "embedded", fake, raising=False)
    return fake


def test_version_and_help():
    assert run("--version").stdout.strip() == f"cellfuncs {__version__}"
    shown = run("--help")
    assert shown.returncode == 0
    assert "recalc" in shown.stdout and "functions" in shown.stdout


@pytest.mark.parametrize(
    "words", [[], ["melt"], ["recalc"], ["functions", "a", "b"], ["recalc", "a", "--values", "--for", "calc"]]
)
def test_a_wrong_call_says_how_it_goes(words):
    done = run(*words)
    assert done.returncode == 2
    assert done.stdout == ""
    assert done.stderr.startswith("usage: cellfuncs")


def test_functions_lists_every_one_under_its_family(capsys):
    assert cli.main(["functions"]) == 0
    lines = capsys.readouterr().out.splitlines()
    for function in catalogue.functions().values():
        assert function.family in lines
        assert any(line.startswith(f"  {function.name}(") for line in lines)
    assert len({line for line in lines if line in catalogue.FAMILIES}) == len(
        [line for line in lines if line in catalogue.FAMILIES]
    )


@pytest.mark.parametrize("name", ["CF_REYNOLDS", "cf_reynolds", "reynolds"])
def test_one_function_is_told_in_full(capsys, name):
    assert cli.main(["functions", name]) == 0
    text = " ".join(capsys.readouterr().out.split())
    function = catalogue.functions()["CF_REYNOLDS"]
    assert text.startswith("CF_REYNOLDS(velocity, length, density, viscosity)")
    for said in (
        function.summary,
        function.source,
        function.example,
        *(one.help for one in function.arguments),
    ):
        assert " ".join(said.split()) in text


def test_optional_arguments_stand_in_brackets(capsys):
    cli.main(["functions", "CF_SI"])
    shown = capsys.readouterr().out
    for argument in catalogue.functions()["CF_SI"].arguments:
        assert (f"[{argument.name}]" in shown) is argument.optional


def test_an_unknown_function_names_its_neighbours(capsys):
    assert cli.main(["functions", "reynold"]) == 2
    said = capsys.readouterr()
    assert said.out == ""
    assert said.err.count("\n") == 1
    assert "CF_REYNOLDS" in said.err


def test_recalc_prints_areas_warnings_and_where_it_wrote(engine, capsys):
    assert cli.main(["recalc", "a.xlsx", "-o", "b.xlsx"]) == 0
    said = capsys.readouterr()
    assert engine.asked == [("a.xlsx", "b.xlsx")]
    assert said.out == "areas: Sheet1!B2\nwrote b.xlsx\n"
    assert said.err == "warning: B2 takes a bare number\n"


@pytest.mark.parametrize(
    ("words", "values", "written_for"),
    [
        ([], False, None),
        (["--values"], True, None),
        (["--for", "excel"], False, "excel"),
        (["--for=calc"], False, "calc"),
    ],
)
def test_recalc_hands_its_options_on(engine, monkeypatch, words, values, written_for):
    assert cli.main(["recalc", "a.xlsx", *words]) == 0
    assert engine.how == {"values": values, "written_for": written_for, "apart": True}
    monkeypatch.setenv("CELLFUNCS_TRACEBACK", "1")
    cli.main(["recalc", "a.xlsx", *words])
    assert engine.how["apart"] is False


@pytest.mark.parametrize(
    ("error", "code", "said"),
    [
        (BookRefused("a.xlsx is encrypted;\nsave it without a password"), 2, "encrypted; save it without"),
        (FileNotFoundError(2, "No such file or directory", "a.xlsx"), 2, "a.xlsx: No such file or directory"),
        (PermissionError(13, "Permission denied", "b.xlsx"), 2, "b.xlsx: Permission denied"),
        (OSError(28, "No space left on device"), 2, "No space left on device"),
        (MemoryError(), 2, "not enough memory"),
        (RecursionError("too\ndeep"), 2, "RecursionError: too deep"),
        (KeyboardInterrupt(), 130, "interrupted"),
    ],
)
def test_every_failure_is_one_line(engine, capsys, error, code, said):
    engine.error = error
    assert cli.main(["recalc", "a.xlsx", "-o", "b.xlsx"]) == code
    shown = capsys.readouterr()
    assert shown.out == ""
    assert shown.err.count("\n") == 1
    assert shown.err.startswith("cellfuncs: ") and said in shown.err


def test_where_an_error_of_the_program_came_from_can_be_asked_for(engine, monkeypatch):
    monkeypatch.setenv("CELLFUNCS_TRACEBACK", "1")
    engine.error = ZeroDivisionError("inside")
    with pytest.raises(ZeroDivisionError):
        cli.main(["recalc", "a.xlsx"])


def test_progress_is_shown_on_a_terminal_and_gone_after_it(engine, capsys, monkeypatch):
    monkeypatch.setattr(sys.stderr, "isatty", lambda: True)
    cli.main(["recalc", "a.xlsx"])
    shown = capsys.readouterr().err
    assert shown.startswith("reading\r") and shown.index("\r" + " " * len("reading") + "\r") > 0


def test_a_reader_that_leaves_early_is_no_error():
    script = "import sys; sys.stdin.readline()"
    listing = subprocess.Popen(
        [sys.executable, "-m", "cellfuncs", "functions"],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        cwd=ROOT,
    )
    subprocess.run([sys.executable, "-c", script], stdin=listing.stdout)
    listing.stdout.close()
    assert listing.stderr.read() == b""
    listing.stderr.close()
    assert listing.wait() == 0


def test_a_terminal_without_our_signs_shows_question_marks():
    done = run("functions", env=os.environ | {"PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"})
    assert done.returncode == 0
    assert done.stderr == ""


# -- with real files --------------------------------------------------------------------------------


@pytest.fixture
def book(tmp_path):
    import xlsxwriter

    path = tmp_path / "a sheet.xlsx"
    with xlsxwriter.Workbook(str(path)) as made:
        sheet = made.add_worksheet("Tube")
        sheet.write_row("A1", ["speed", "Re"])
        sheet.write_column("A2", [2.0, "4 m/s"])
        for row in (2, 3):
            sheet.write_formula(f"B{row}", f"=CF_REYNOLDS(A{row},0.05,998,0.001)", None, 0)
    return path


def test_a_workbook_is_recalculated_into_a_copy(book, tmp_path):
    before = book.read_bytes()
    done = run("recalc", book, "-o", tmp_path / "out.xlsx")
    assert (done.returncode, done.stderr) == (0, "")
    assert "Tube!B2:B3" in done.stdout and "Re" in done.stdout
    assert "99800" in done.stdout and "199600" in done.stdout
    assert done.stdout.splitlines()[-1] == f"wrote {tmp_path / 'out.xlsx'}"
    assert book.read_bytes() == before
    import openpyxl

    sheet = openpyxl.load_workbook(tmp_path / "out.xlsx", data_only=True)["Tube"]
    assert sheet["B3"].value == pytest.approx(199_600, rel=1e-12)


def test_a_copy_with_values(book, tmp_path):
    done = run("recalc", book, "--values")
    assert (done.returncode, done.stderr) == (0, "")
    out = tmp_path / "a sheet.values.xlsx"
    assert "99800" in done.stdout and done.stdout.splitlines()[-1] == f"wrote {out}"
    import openpyxl

    cell = openpyxl.load_workbook(out)["Tube"]["B3"]
    assert cell.value == pytest.approx(199_600, rel=1e-12)
    assert cell.comment.text == "=CF_REYNOLDS(A3,0.05,998,0.001)"


@pytest.mark.parametrize(
    ("name", "content"),
    [("gone.xlsx", None), ("letter.xlsx", b"Dear reader"), ("cut.xlsx", "half of the book")],
)
def test_what_is_no_workbook_ends_in_one_line(book, tmp_path, name, content):
    path = tmp_path / name
    if content is not None:
        path.write_bytes(content if isinstance(content, bytes) else book.read_bytes()[:2000])
    done = run("recalc", path, "-o", tmp_path / "out.xlsx")
    assert done.returncode == 2
    assert done.stdout == ""
    assert done.stderr.startswith("cellfuncs: ") and done.stderr.count("\n") == 1
    assert "Error" not in done.stderr and "program itself" not in done.stderr
    assert not (tmp_path / "out.xlsx").exists()


@pytest.mark.parametrize("out", ["a sheet.xlsx", ".", "no such folder/out.xlsx"])
def test_an_output_that_cannot_be_is_refused(book, tmp_path, out):
    before = book.read_bytes()
    done = run("recalc", book, "-o", tmp_path / out)
    assert done.returncode == 2
    assert done.stderr.count("\n") == 1 and "program itself" not in done.stderr
    assert book.read_bytes() == before
