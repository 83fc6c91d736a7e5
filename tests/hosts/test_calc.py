"""The functions in a real LibreOffice Calc, cell by cell beside the embedded host."""

import os
import re
import signal
import sys
import threading
import time
import zipfile
from pathlib import Path
from string import ascii_uppercase

import openpyxl
import pytest
import xlsxwriter

from cellfuncs import __version__
from cellfuncs.cells import catalogue
from cellfuncs.hosts import embedded

ROOT = Path(__file__).resolve().parent.parent.parent
if str(ROOT / "install") not in sys.path:
    sys.path.insert(0, str(ROOT / "install"))

from calc import installer, interpreter  # noqa: E402
from calc import libreoffice as offices  # noqa: E402
from calc.session import with_mark  # noqa: E402

SAMPLES = sorted((ROOT / "workbooks").glob("*.xlsx"))
# The block of the sample workbook that the examples of the catalogue speak of.
COOLANT = [
    ("flow kind", "duct", "", ""),
    ("substance", "ethylene glycol 30 % by mass", "", ""),
    ("velocity", 3, "m/s", 0.1),
    ("diameter", 8, "mm", ""),
    ("length", 1.2, "m", ""),
    ("inlet temperature", 18, "degC", 0.5),
    ("wall temperature", 45, "degC", 1),
    ("pressure", 3.2, "bar", ""),
    ("time scale", 90, "s", ""),
    ("answer", "outlet temperature", "", ""),
    ("tolerance", 5, "%", ""),
    ("smallest that matters", 0.1, "K", ""),
]
TOLERANCE = 1e-12


def same(ours, theirs, scale=0.0):
    """Whether two cells hold the same: numbers to 1e-12, texts and errors equal, blank equal to blank."""
    if isinstance(ours, (int, float)) and isinstance(theirs, (int, float)):
        return ours == pytest.approx(theirs, rel=TOLERANCE, abs=TOLERANCE * scale)
    return ("" if ours is None else ours) == ("" if theirs is None else theirs)


def differences(ours, theirs):
    """Cells of two {place: value} that are not the same.

    A difference of two cells is as exact as these are, so the largest number of a row sets its scale.
    """
    scale = {}
    for place, value in theirs.items():
        if isinstance(value, (int, float)):
            row = place.lstrip(ascii_uppercase)
            scale[row] = max(scale.get(row, 0.0), abs(value))
    wrong = {}
    for place in sorted(set(ours) | set(theirs)):
        pair = ours.get(place), theirs.get(place)
        if not same(*pair, scale.get(place.lstrip(ascii_uppercase), 0.0)):
            wrong[place] = pair
    return wrong


def all_differences(ours, wanted):
    """The sheets of two {sheet: {place: value}} that are not the same, with their differences."""
    found = {sheet: differences(ours.get(sheet, {}), wanted.get(sheet, {})) for sheet in {*ours, *wanted}}
    return {sheet: wrong for sheet, wrong in found.items() if wrong}


def stored(path):
    """The stored values of a workbook file: {sheet: {place: value}}; an error is its name in a list."""
    book = openpyxl.load_workbook(path, data_only=True)
    return {
        sheet.title: {
            cell.coordinate: [cell.value] if cell.data_type == "e" else cell.value
            for row in sheet.iter_rows()
            for cell in row
            if cell.value is not None
        }
        for sheet in book.worksheets
    }


def shown(office):
    """The values of the open document: {sheet: {place: value}}."""
    found = {}
    for name, (area, _) in office.sheets().items():
        rows = office.read(f"{name}!{area}")
        found[name] = {
            f"{openpyxl.utils.get_column_letter(j)}{i}": value
            for i, row in enumerate(rows, 1)
            for j, value in enumerate(row, 1)
            if value != ""
        }
    return found


def in_both(calc, folder, formulas, cells=()):
    """What the embedded host and Calc answer to the same workbook: two lists of values.

    The first sheet holds `cells` and the formulas in column J, the second the block `coolant`.
    """
    path, out = folder / "both.xlsx", folder / "out.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet("Cells")
    block = book.add_worksheet("Block")
    for k, row in enumerate(COOLANT):
        block.write_row(k, 0, row)
    book.define_name("coolant", f"=Block!$A$1:$D${len(COOLANT) + 3}")
    for (row, column), value in dict(cells).items():
        sheet.write(row, column, value)
    for k, formula in enumerate(formulas):
        sheet.write_formula(k, 9, formula)
    book.close()
    embedded.recalc(path, out)
    calc.open(path)
    calc.recalculate()
    place = f"J1:J{len(formulas)}"
    calculated = stored(out)["Cells"]
    return [calculated.get(f"J{k + 1}") for k in range(len(formulas))], [row[0] for row in calc.read(place)]


def block_columns():
    """Cells for the example of CF_BLOCK: labels, units and values in A, B and D from row 3 on."""
    cells = {}
    for k, (label, value, unit, _) in enumerate(COOLANT):
        cells[k + 2, 0], cells[k + 2, 1], cells[k + 2, 3] = label, unit, value
    return {place: value for place, value in cells.items() if value != ""}


def test_every_function_answers_in_a_cell_as_in_the_embedded_host(calc, tmp_path):
    functions = list(catalogue.functions().values())
    ours, theirs = in_both(calc, tmp_path, [function.example for function in functions], block_columns())
    wrong = {f.example: pair for f, *pair in zip(functions, ours, theirs, strict=True) if not same(*pair)}
    assert wrong == {}
    assert [value for value in theirs if isinstance(value, list) or str(value).startswith("! ")] == []


WRONG = [
    "=CF_REYNOLDS()",
    "=CF_REYNOLDS(2)",
    "=CF_REYNOLDS(A1,0.02,998,0.001)",
    "=CF_REYNOLDS(0,0.02,998,0.001)",
    '=CF_REYNOLDS("",0.02,998,0.001)',
    "=CF_REYNOLDS(-2,0.02,998,0.001)",
    '=CF_REYNOLDS("fast",0.02,998,0.001)',
    '=CF_REYNOLDS("2 kg",0.02,998,0.001)',
    '=CF_REYNOLDS("9**9**9",0.02,998,0.001)',
    '=CF_REYNOLDS(2,0.02,998,"1 cSt")',
    "=CF_REYNOLDS(1E+308,1E+308,998,0.001)",
    '=CF_REYNOLDS("! velocity: handed on",0.02,998,0.001)',
    "=CF_REYNOLDS(CF_REYNOLDS(-1,1,1,1),0.02,998,0.001)",
    "=CF_REYNOLDS(B1,B2,998,0.001)",
    '=CF_PROPERTY("watr","density",300)',
    '=CF_PROPERTY("water","colour",300)',
    '=CF_PROPERTY("water","density",40)',
    '=CF_PROPERTY("water","density",3000)',
    '=CF_PROPERTY("water","density",300,,"K")',
    '=CF_PROPERTY("water","density",300,0,"lb/ft3")',
    '=CF_PROPERTY("water","density",300,A1,A1)',
    '=CF_PROPERTY(A1,"density",300)',
    '=CF_PROPERTY(7,"density",300)',
    "=CF_CASE(coolant)",
    '=CF_CASE(A1:C9,"velocity")',
    '=CF_CASE("coolant","velocity")',
    '=CF_CASE(coolant,"flow kind")',
    '=CF_CASE(coolant,"velocity","kg")',
    '=CF_TERM(coolant,"viscous heating","colour")',
    '=CF_TERM(coolant,"viscous heating","verdict")',
    '=CF_TERM(CF_VARY(coolant,"velocity",-2.5),"viscous heating")',
    '=CF_TERM(CF_VARY(coolant,"velocity",2.5),"viscous heating")',
    '=CF_IN_UNIT(1,"ton","kg")',
    '=CF_IN_UNIT("1,250.5","kPa","bar")',
    '=CF_UNIT_FITS("W/m2K","velocity")',
    "=CF_FAULTS(B1:B6)",
    "=CF_SI(B3,B4)",
    '=CF_IN_UNIT(12,"Straße","m")',
]
WRONG_CELLS = {(0, 1): "3 ft/s", (1, 1): "20 mm", (2, 1): 12.5, (3, 1): "kJ/kg-K", (4, 1): "! mass: none"}


def test_wrong_arguments_show_the_texts_of_the_embedded_host(calc, tmp_path):
    ours, theirs = in_both(calc, tmp_path, WRONG, WRONG_CELLS)
    wrong = {f: pair for f, *pair in zip(WRONG, ours, theirs, strict=True) if not same(*pair)}
    assert wrong == {}
    assert sum(str(value).startswith("! ") for value in theirs) > 20


@pytest.mark.parametrize("kind", ["table", "cell"])
def test_a_range_answers_in_its_shape(calc, cf, kind):
    calc.new()
    rows = [[0.5 + k / 7, 290.0 + k] for k in range(50)]
    calc.values("A1:B50", rows)
    if kind == "cell":
        got = calc.array("D1:D50", "=CF_REYNOLDS(A1:A50;0.02;998;0.001)")
        assert got == cf("REYNOLDS", [[row[0]] for row in rows], 0.02, 998.0, 0.001)
        got = calc.array("F1:G50", '=CF_PROPERTY("water";{"density";"viscosity"};B1:B50)')
        assert got == cf("PROPERTY", "water", [["density", "viscosity"]], [[row[1]] for row in rows])
    else:
        calc.values("A1:D12", COOLANT)
        got = calc.array("F1:K10", "=CF_TERMS(A1:D12)")
        wanted = cf("TERMS", [list(row) for row in COOLANT])
        assert [row[: len(wanted[0])] for row in got[: len(wanted)]] == wanted[:10]


def test_a_range_answers_each_cell_with_its_own_fault(calc):
    calc.new()
    calc.values("A1:A4", [[2.0], ["fast"], [""], ["3 ft/s"]])
    got = calc.array("C1:C4", "=CF_REYNOLDS(A1:A4;0.02;998;0.001)")
    assert got[0] == [39920.0] and got[3][0] == pytest.approx(3 * 0.3048 * 19960)
    assert got[1][0].startswith("! velocity: ") and got[2][0].startswith("! velocity: empty")
    assert calc.formula("E1", "=CF_FAULTS(C1:C4)").startswith("2 faults, first: velocity: ")


def test_texts_compare_as_texts_do(calc):
    calc.new()
    calc.values("A1:D12", COOLANT)
    formula = '=IF(CF_TERM(A1:D12;"viscous heating";"verdict")="leave out";"left";"kept")'
    assert calc.formula("G1", '=CF_TERM(A1:D12;"viscous heating";"verdict")') == "leave out"
    assert calc.formula("G2", '=G1="leave out"') == 1.0
    assert calc.formula("G3", formula) == "left"
    assert calc.formula("G4", '=IF(CF_CASE(A1:D12;"flow kind")="duct";"yes";"no")') == "yes"


def test_errors_of_cells_pass_through_and_are_counted(calc):
    calc.new()
    calc.fill("A1:A4", [["=NA()"], ["=1/0"], ["! mass: none"], ["=CF_REYNOLDS(A1;1;1;1)"]])
    assert calc.read("A4") == [[["#N/A"]]]
    assert calc.formula("B1", "=CF_FAULTS(A1:A4)") == "4 faults, first: #N/A"
    assert calc.formula("B2", "=CF_FAULTS(A3:A3)") == "1 fault, first: mass: none"
    assert calc.formula("B3", "=CF_FAULTS(D:E)") == 0.0


def test_whole_columns_end_where_their_cells_do(calc, cf):
    calc.new()
    calc.values("A1:D12", COOLANT)
    wanted = cf("CASE", [list(row) for row in COOLANT], "Reynolds number")
    assert calc.formula("F1", '=CF_CASE(A:D;"Reynolds number")') == pytest.approx(wanted, rel=TOLERANCE)
    calc.values("H1:H3", [[1.0], [2.0], [3.0]])
    assert calc.array("I1:I4", "=CF_REYNOLDS(H:H;0.02;998;0.001)") == [[19960.0], [39920.0], [59880.0], [["#N/A"]]]


def test_twenty_thousand_cells(calc):
    calc.new()
    count = 20_000
    calc.values(f"A1:A{count}", [[0.5 + k * 1e-4] for k in range(count)])
    calc.formula("B1", "=CF_REYNOLDS(A1;0.05;998;0.001)")
    calc.fill_down(f"B1:B{count}")
    assert calc.formula("D1", f"=COUNT(B1:B{count})") == count
    assert calc.formula("D2", f"=SUMPRODUCT(ABS(B1:B{count}/(A1:A{count}*0.05*998/0.001)-1))") < count * 1e-15


# -- the helper process ------------------------------------------------------------------------------


def _gone(process, seconds=20):
    """Whether a process has ended, be it that nobody has waited for it yet (Linux)."""
    end, folder = time.monotonic() + seconds, Path(f"/proc/{process}")
    while time.monotonic() < end:
        try:
            state = (folder / "stat").read_text().rpartition(")")[2].split()[0]
            if state == "Z" and len(list((folder / "task").iterdir())) == 1:
                return True
        except (FileNotFoundError, ProcessLookupError):
            return True
        time.sleep(0.02)
    return False


def test_a_helper_that_was_killed_starts_anew(calc):
    calc.new()
    assert calc.formula("A1", "=CF_REYNOLDS(2;0.02;998;0.001)") == 39920.0
    (first,) = calc.helpers()
    os.kill(first, signal.SIGKILL)
    assert _gone(first)
    assert calc.formula("A2", "=CF_REYNOLDS(4;0.02;998;0.001)") == 79840.0
    assert first not in calc.helpers()


def test_a_helper_that_dies_at_work_is_told_in_the_cell(calc):
    calc.new()
    assert calc.formula("A1", "=CF_REYNOLDS(2;0.02;998;0.001)") == 39920.0
    (first,) = calc.helpers()
    os.kill(first, signal.SIGSTOP)
    threading.Timer(0.5, os.kill, (first, signal.SIGKILL)).start()
    fault = calc.formula("A2", "=CF_REYNOLDS(4;0.02;998;0.001)")
    assert fault.startswith("! Cellfuncs: the calculation ended while it worked on this cell; ")
    assert calc.formula("A3", "=CF_FAULTS(A1:A2)").startswith("1 fault, first: Cellfuncs: ")


def test_a_call_that_hangs_is_ended_and_the_next_one_works(calc):
    calc.new()
    assert calc.formula("A1", "=CF_REYNOLDS(2;0.02;998;0.001)") == 39920.0
    (first,) = calc.helpers()
    os.kill(first, signal.SIGSTOP)  # as a process that hangs: there, and silent
    fault = calc.formula("A2", "=CF_REYNOLDS(4;0.02;998;0.001)")
    assert re.fullmatch(r"! Cellfuncs: no answer within \d+ s, so the calculation was ended; .*", fault)
    assert calc.formula("A3", "=CF_REYNOLDS(4;0.02;998;0.001)") == 79840.0
    calc.recalculate()
    assert calc.read("A1:A3") == [[39920.0], [79840.0], [79840.0]]


def test_the_helper_starts_with_the_first_call_and_ends_with_the_office(libreoffice, tmp_path, monkeypatch):
    """Put in from an activated environment, one file converted on the command line, taken out; all in one folder."""
    office = libreoffice
    monkeypatch.setenv("PATH", os.pathsep.join((str(Path(sys.executable).parent), os.environ["PATH"])))
    monkeypatch.setenv("CELLFUNCS_MARK", tmp_path.name)
    private = tmp_path / "office"
    assert "a cell answered" in installer.install(office, lambda: Path(sys.executable), private)
    assert all(map(_gone, with_mark(tmp_path.name)))
    path = tmp_path / "short names.xlsx"
    book = xlsxwriter.Workbook(path)
    book.add_worksheet().write_formula(0, 0, "=CF_REYNOLDS(2,0.02,998,0.001)+1", None, 7)
    book.close()
    words = ["--headless", "--convert-to", "csv", "--outdir", tmp_path, path]
    offices.run([office.program("soffice"), *offices.settings_of(private), *words])
    assert (tmp_path / "short names.csv").read_text().strip() == "39921"
    assert all(map(_gone, with_mark(tmp_path.name)))
    assert "is removed" in installer.remove(office, private)
    assert "nothing to remove" in installer.remove(office, private)


@pytest.mark.skipif(os.name == "nt", reason="the place of the user is set as other systems do")
def test_an_extension_put_in_by_hand_calculates_with_the_noted_python(libreoffice, tmp_path, monkeypatch):
    private = tmp_path / "office"
    monkeypatch.setenv("HOME", str(tmp_path))
    monkeypatch.setenv("PATH", "/usr/bin:/bin")
    with pytest.raises(offices.Unusable, match=re.escape(interpreter.UNKNOWN[:60])):
        installer.add(libreoffice, installer.READY, private)
    installer.use(Path(sys.executable))
    assert installer.calculated(libreoffice, private) == f"{__version__},39920"


# -- files -------------------------------------------------------------------------------------------


def test_a_file_with_short_names_is_mended_when_it_opens(calc, tmp_path):
    path = tmp_path / "short.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet()
    sheet.write_formula(0, 0, "=CF_REYNOLDS(2,0.02,998,0.001)", None, 7)
    sheet.write_formula(1, 0, '=A1&"CF_REYNOLDS(1)"', None, "as it was")
    sheet.write_array_formula("B1:B2", "{=CF_REYNOLDS(C1:C2,0.02,998,0.001)}", None, 7)
    sheet.write_column("C1", [1, 2])
    sheet.protect()
    book.add_chart({"type": "line"})
    book.close()
    calc.open(path)
    assert calc.formulas("A1") == [["=CELLFUNCS.FUNCTIONS.CF_REYNOLDS(2;0.02;998;0.001)"]]
    assert calc.modified() is False
    assert calc.read("A1") == [[7.0]]
    calc.recalculate()
    assert calc.read("A1:B2") == [[39920.0, 19960.0], ["39920CF_REYNOLDS(1)", 39920.0]]


def test_stored_values_show_until_something_changes(calc, tmp_path):
    """Each formula stands beside a wrong stored value and what is to show when the file is opened."""
    path = tmp_path / "stored.xlsx"
    rows = [
        ("=CF_REYNOLDS(A2,0.02,998,0.001)", 11.0, 5.0 * 0.3048 * 19960),  # the next one is calculated, so this is too
        ('=CF_IN_UNIT(A3,"ft/s","m/s")', 22.0, 5.0 * 0.3048),
        ('=CF_SI(3,"m/s")+2', 33.0, 5.0),  # more than one call: calculated
        ("=CF_REYNOLDS(B1,0.02,998,0.001)", 44.0, 44.0),
        ('=CF_CASE(Sheet1!$C$1:$F$12,"substance")', "oil", "oil"),
        ("=CF_REYNOLDS(A4,0.02,998,0.001)", 66.0, 66.0),
        ("=A6+1", 77.0, 67.0),
    ]
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet()
    for k, (formula, value, _) in enumerate(rows):
        sheet.write_formula(k, 0, formula, None, value)
    sheet.write("B1", 2.0)
    for k, row in enumerate(COOLANT):
        sheet.write_row(k, 2, row)
    book.close()
    for hidden in (True, False):
        calc.open(path, hidden)
        assert [row[0] for row in calc.read("A1:A7")] == pytest.approx([show for _, _, show in rows])
    calc.values("B1", [[4.0]])
    assert calc.read("A4") == [[79840.0]]
    calc.recalculate()
    assert calc.read("A5") == [[COOLANT[1][1]]]


def test_values_that_do_not_fit_are_calculated(calc, tmp_path):
    """A cell with OFFSET is never stored for good; and zeros everywhere are no values."""
    path = tmp_path / "offset.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet()
    sheet.write_formula(0, 0, "=CF_REYNOLDS(OFFSET(B1,1,-1),0.02,998,0.001)", None, 5)
    sheet.write_formula(1, 0, '=CF_SI(4,"m/s")', None, 6)
    book.close()
    calc.open(path)
    assert calc.read("A1:A2") == [[6 * 19960.0], [6.0]]
    book = xlsxwriter.Workbook(path)
    book.add_worksheet().write_formula(0, 0, "=CF_REYNOLDS(2,0.02,998,0.001)")
    book.close()
    calc.open(path, False)
    assert calc.read("A1") == [[39920.0]]


def test_a_file_without_our_functions_is_left_alone(calc, tmp_path):
    path = tmp_path / "other.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet()
    sheet.write_formula(0, 0, "=1+1", None, 3)
    sheet.write_formula(0, 1, '="=CF_REYNOLDS(1)"', None, "a text")
    book.define_name("one", "=Sheet1!$A$1")
    sheet.write_formula(0, 2, "=one+1", None, 5)
    book.close()
    calc.open(path)
    assert calc.read("A1:C1") == [[3.0, "a text", 5.0]]


OURS = re.compile(r'(<c r="([A-Z]+[0-9]+)"(?: s="[0-9]+")?><f>[^<]*CF_[^<]*</f><v>)[^<]*(</v>)')
POISON = 123456.75


def test_samples_hold_cells_to_poison(tmp_path):
    assert [path.stem for path in SAMPLES if len(poisoned(path, tmp_path / "wrong.xlsx")) > 20]


def poisoned(path, out):
    """A copy with a wrong stored number in every cell with one of our functions; the places of these."""
    places = set()
    with zipfile.ZipFile(path) as source, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as copy:
        for name in source.namelist():
            data = source.read(name)
            if name.startswith("xl/worksheets/sheet"):
                text = data.decode("utf-8")
                places |= {match[2] for match in OURS.finditer(text)}
                data = OURS.sub(rf"\g<1>{POISON}\g<3>", text).encode("utf-8")
            copy.writestr(name, data)
    return places


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_samples_calculate_as_in_the_embedded_host(calc, tmp_path, sample):
    wrong, out = tmp_path / "wrong.xlsx", tmp_path / "out.xlsx"
    poisoned(sample, wrong)
    embedded.recalc(sample, out)
    wanted = stored(out)
    calc.open(wrong)
    calc.recalculate()
    assert all_differences(shown(calc), wanted) == {}
    calc.open(sample, False)
    assert all_differences(shown(calc), stored(sample)) == {}
    assert calc.modified() is False
    for kind in ("xlsx", "ods"):
        saved = tmp_path / f"saved.{kind}"
        calc.open(wrong)
        calc.recalculate()
        calc.save(saved, kind)
        for again in (False, True):
            calc.open(saved)
            if again:
                calc.recalculate()
            assert all_differences(shown(calc), wanted) == {}, (kind, again)
    # Calc writes its own long names; the embedded host reads them.
    embedded.recalc(tmp_path / "saved.xlsx", tmp_path / "again.xlsx")
    assert all_differences(stored(tmp_path / "again.xlsx"), wanted) == {}


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_samples_show_their_stored_values_without_cellfuncs(bare_calc, tmp_path, sample):
    wanted = stored(sample)
    bare_calc.open(sample)
    assert all_differences(shown(bare_calc), wanted) == {}
    with zipfile.ZipFile(sample) as package:
        charts = sum(name.startswith("xl/charts/chart") for name in package.namelist())
    assert sum(count for _, count in bare_calc.sheets().values()) == charts
    # A wrong stored value shows as it is: nothing was calculated above.
    wrong = tmp_path / "wrong.xlsx"
    places = poisoned(sample, wrong)
    bare_calc.open(wrong)
    assert {place for cells in shown(bare_calc).values() for place, cell in cells.items() if cell == POISON} == places


def test_the_wizard_shows_help_of_the_catalogue(calc):
    wizard = calc.wizard("CF_")
    assert set(wizard) == set(catalogue.functions())
    for name, function in catalogue.functions().items():
        help_text, arguments = wizard[name]
        assert help_text == f"{function.family}: {function.summary}"
        assert [shown_name for shown_name, _ in arguments] == [a.name.replace("_", " ") for a in function.arguments]
        for argument, (_, description) in zip(function.arguments, arguments, strict=True):
            assert description.startswith(argument.help)
            assert description.endswith("(required)") != argument.optional
