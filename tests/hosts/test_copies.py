"""Copies for others: values without our functions, and our names as Excel and Calc write them."""

import re
import zipfile
from pathlib import Path

import openpyxl
import pytest
import xlsxwriter

from cellfuncs.cells import catalogue
from cellfuncs.errors import BookRefused
from cellfuncs.hosts import embedded

SAMPLES = sorted((Path(__file__).resolve().parent.parent.parent / "workbooks").glob("*.xlsx"))
LONG = "CELLFUNCS.FUNCTIONS."
OURS = re.compile(r"\bCF_[A-Z_]+\(")


def parts(path):
    with zipfile.ZipFile(path) as archive:
        assert archive.testzip() is None
        return {name: archive.read(name) for name in archive.namelist()}


def filled(path, data_only=True):
    """{sheet: {place: cell}} of all cells that hold something."""
    book = openpyxl.load_workbook(path, data_only=data_only)
    return {
        sheet.title: {c.coordinate: c for row in sheet.iter_rows() for c in row if c.value is not None}
        for sheet in book.worksheets
    }


def text_of(cell):
    return getattr(cell.value, "text", cell.value)  # an array formula is an object


@pytest.fixture(scope="module")
def book(tmp_path_factory):
    path = tmp_path_factory.mktemp("copies") / "loop.xlsx"
    with xlsxwriter.Workbook(path) as made:
        sheet = made.add_worksheet("Loop")
        sheet.write_row("A1", ["speed", 2.0, "m/s"])
        sheet.write_formula("B2", "=CF_REYNOLDS(B1,0.02,998,0.001)")
        sheet.write_comment("B2", "as measured")
        sheet.write_comment("A1", "kept")
        sheet.write_formula("B3", "=B2/1000")
        sheet.write_formula("B4", "=[1]!cf_reynolds(-1,0.02,998,0.001)")
        sheet.write_array_formula("E1:E3", "{=CF_REYNOLDS(F1:F3,0.02,998,0.001)}")
        sheet.write_column("F1", [1.0, 2.0, 3.0])
        sheet.insert_textbox("A20", "a text box")
        sheet.conditional_format("B3", {"type": "formula", "criteria": "=CF_REYNOLDS(1,1,1,1)>0"})
        made.define_name("limit", "=CF_REYNOLDS(Loop!$B$1,0.02,998,0.001)")
        made.add_worksheet("Other").write_formula("A1", '="say CF_REYNOLDS("&Loop!B2')
    return path


@pytest.fixture(scope="module")
def values(book):
    return embedded.recalc(book, values=True)


def test_a_copy_with_values(book, values):
    assert values.out == book.with_name("loop.values.xlsx")
    recalculated = filled(embedded.recalc(book).out)
    copied = filled(values.out)
    assert {s: {p: c.value for p, c in cells.items()} for s, cells in copied.items()} == {
        s: {p: c.value for p, c in cells.items()} for s, cells in recalculated.items()
    }
    formulas = {
        f"{sheet}!{place}": cell.value
        for sheet, cells in filled(values.out, data_only=False).items()
        for place, cell in cells.items()
        if cell.data_type == "f"
    }
    assert formulas == {"Loop!B3": "=B2/1000", "Other!A1": '="say CF_REYNOLDS("&Loop!B2'}
    assert copied["Loop"]["B4"].value.startswith("! velocity: ")
    notes = {place: cell.comment.text for place, cell in copied["Loop"].items() if cell.comment}
    assert notes == {
        "A1": "kept",
        "B2": "as measured\n\n=CF_REYNOLDS(B1,0.02,998,0.001)",
        "B4": "=CF_REYNOLDS(-1,0.02,998,0.001)",
        "E1": "{=CF_REYNOLDS(F1:F3,0.02,998,0.001)}\nfills E1:E3",
    }
    assert values.warnings[-1].startswith("2 of the workbook's names, validations, conditional formats")


def test_everything_else_stays(book, values):
    before, after = parts(book), parts(values.out)
    changed = {name for name in before if before[name] != after.get(name)}
    assert changed == {
        "xl/worksheets/sheet1.xml",
        "xl/worksheets/sheet2.xml",
        "xl/comments1.xml",
        "xl/drawings/vmlDrawing1.vml",
    }
    assert set(after) == set(before)


def test_again_gives_the_same_bytes(book, values, tmp_path):
    assert embedded.recalc(book, tmp_path / "b.xlsx", values=True).out.read_bytes() == values.out.read_bytes()
    again = embedded.recalc(values.out, tmp_path / "c.xlsx", values=True)
    assert again.out.read_bytes() == values.out.read_bytes() and again.areas == ()


@pytest.mark.parametrize("path", SAMPLES, ids=lambda path: path.stem)
def test_the_samples_without_our_functions(path, tmp_path):
    out = embedded.recalc(path, tmp_path / "out.xlsx", values=True).out
    fresh = filled(embedded.recalc(path, tmp_path / "fresh.xlsx").out)
    kept = filled(path, data_only=False)
    copied, left = filled(out), filled(out, data_only=False)
    listed = left.pop("Formulas", {}) and copied.pop("Formulas")
    count = 0
    for sheet, cells in kept.items():
        for place, cell in cells.items():
            new, formula = left[sheet].get(place), text_of(cell) if cell.data_type == "f" else ""
            if OURS.search(formula):
                count += 1
                assert new.data_type != "f" and new.value == fresh[sheet][place].value
                note = copied[sheet][place].comment
                assert (note and formula in note.text) or formula in {c.value for c in listed.values()}
            elif new is not None:
                assert text_of(new) == text_of(cell)
    assert count or path.stem == "functions"  # the reference names them in texts


def test_with_a_real_office(values, bare_calc, tmp_path):
    """A colleague without Cellfuncs calculates the copy anew, saves it, and sees numbers and notes."""
    bare_calc.open(values.out)
    bare_calc.recalculate()
    assert bare_calc.read("Loop!B2:B4")[:2] == [[39920.0], [39.92]]
    assert bare_calc.read("Loop!B4")[0][0].startswith("! velocity: ")
    assert bare_calc.read("Loop!E1:E3") == [[19960.0], [39920.0], [59880.0]]
    assert bare_calc.read("Other!A1") == [["say CF_REYNOLDS(39920"]]
    saved = tmp_path / "saved.ods"
    bare_calc.save(saved, "ods")
    text = re.sub("<[^>]*>", "", "".join(re.findall(r"<office:annotation .*?</office:annotation>", _content(saved))))
    for note in ("kept", "as measured", "=CF_REYNOLDS(B1,0.02,998,0.001)", "{=CF_REYNOLDS(F1:F3,", "fills E1:E3"):
        assert note in text


def _content(path):
    return parts(path)["content.xml"].decode()


# -- names for one program -------------------------------------------------------------------------------


def formulas_of(path):
    return {
        f"{sheet}!{place}": text_of(cell)
        for sheet, cells in filled(path, data_only=False).items()
        for place, cell in cells.items()
        if cell.data_type == "f"
    }


def test_names_for_calc_and_back(book, tmp_path):
    long = embedded.recalc(book, tmp_path / "calc.xlsx", written_for="calc").out
    assert formulas_of(long) == {
        "Loop!B2": f"={LONG}CF_REYNOLDS(B1,0.02,998,0.001)",
        "Loop!B3": "=B2/1000",
        "Loop!B4": f"={LONG}CF_REYNOLDS(-1,0.02,998,0.001)",
        "Loop!E1": f"={LONG}CF_REYNOLDS(F1:F3,0.02,998,0.001)",
        "Other!A1": '="say CF_REYNOLDS("&Loop!B2',
    }
    assert f"<formula>{LONG}CF_REYNOLDS(1,1,1,1)&gt;0</formula>".encode() in parts(long)["xl/worksheets/sheet1.xml"]
    assert f">{LONG}CF_REYNOLDS(Loop!$B$1,".encode() in parts(long)["xl/workbook.xml"]
    short = embedded.recalc(long, tmp_path / "excel.xlsx", written_for="excel").out
    wanted = formulas_of(book) | {"Loop!B4": "=CF_REYNOLDS(-1,0.02,998,0.001)"}
    assert formulas_of(short) == wanted
    assert LONG.encode() not in b"".join(parts(short).values())


def test_without_a_program_the_names_stay(book, tmp_path):
    for written_for, same in ((None, True), ("excel", False)):
        out = embedded.recalc(book, tmp_path / "out.xlsx", written_for=written_for).out
        assert (b"<f>[1]!cf_reynolds(" in parts(out)["xl/worksheets/sheet1.xml"]) is same


def test_the_prefix_is_the_name_of_the_service(libreoffice):
    from calc.extension import SERVICE

    assert embedded.PREFIXES["calc"] == f"{SERVICE.upper()}."


def test_as_calc_itself_writes_them(book, calc, tmp_path):
    """What Calc saves in an .xlsx is what we write for it, and Excel gets back what it wrote."""
    short = embedded.recalc(book, tmp_path / "short.xlsx", written_for="excel").out
    calc.open(short)
    saved = tmp_path / "saved.xlsx"
    calc.save(saved, "xlsx")
    by_calc = formulas_of(saved)
    assert by_calc["Loop!B2"].startswith(f"={LONG}CF_")
    assert formulas_of(embedded.recalc(short, tmp_path / "long.xlsx", written_for="calc").out) == by_calc
    back = embedded.recalc(saved, tmp_path / "back.xlsx", written_for="excel").out
    assert formulas_of(back) == formulas_of(short)


def test_calc_resolves_what_is_written_for_it(book, calc, tmp_path):
    calc.open(embedded.recalc(book, tmp_path / "long.xlsx", written_for="calc").out)
    calc.values("Loop!B1", [[4.0]])
    calc.recalculate()
    assert calc.read("Loop!B2:B3") == [[79840.0], [79.84]]
    assert calc.read("Loop!E1:E3") == [[19960.0], [39920.0], [59880.0]]


def test_every_function_goes_there_and_back(tmp_path):
    path = tmp_path / "all.xlsx"
    names = list(catalogue.functions())
    with xlsxwriter.Workbook(path) as made:
        sheet = made.add_worksheet("S")
        for row, name in enumerate(names):
            sheet.write_formula(row, 0, f"=IF(FALSE,{name}(),1)")
    long = embedded.recalc(path, tmp_path / "long.xlsx", written_for="calc").out
    assert list(formulas_of(long).values()) == [f"=IF(FALSE,{LONG}{name}(),1)" for name in names]
    short = embedded.recalc(long, tmp_path / "short.xlsx", written_for="excel").out
    assert formulas_of(short) == formulas_of(path)


def test_never_over_the_input(book):
    with pytest.raises(BookRefused, match="overwrite"):
        embedded.recalc(book, book, values=True)
