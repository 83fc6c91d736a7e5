"""The sample workbooks: built by their script, free of faults, with stored values that the embedded host repeats."""

import importlib.util
import zipfile
from pathlib import Path

import openpyxl
import pytest

from cellfuncs.cells import catalogue
from cellfuncs.hosts import embedded
from cellfuncs.terms import COLUMNS, TERMS

FOLDER = Path(__file__).parents[2] / "workbooks"
OTHERS = {"functions.xlsx", "self_test.xlsx"}  # tested in test_reference.py and test_self_test.py
SAMPLES = sorted(path for path in FOLDER.glob("*.xlsx") if path.name not in OTHERS)


@pytest.fixture(scope="module")
def builder():
    spec = importlib.util.spec_from_file_location("build_samples", FOLDER / "build.py")
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


def cells(path, stored):
    book = openpyxl.load_workbook(path, data_only=stored)
    return {
        (sheet.title, cell.coordinate): cell.value
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    }


def test_all_samples_are_there(builder):
    assert [path.name for path in SAMPLES] == sorted((*builder.SAMPLES, builder.TWENTY_FILE))


def test_the_script_builds_what_is_there(builder, tmp_path):
    for name in (*builder.SAMPLES, builder.TWENTY_FILE):
        built = builder.build(name, tmp_path)
        assert cells(built, False) == cells(FOLDER / name, False)
        new, old = cells(built, True), cells(FOLDER / name, True)
        assert new.keys() == old.keys()
        for place, value in new.items():
            assert value == (pytest.approx(old[place], rel=1e-9) if isinstance(value, float) else old[place]), place


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_recalculation_repeats_the_stored_values(path, tmp_path):
    before = path.read_bytes()
    result = embedded.recalc(path, tmp_path / "again.xlsx")
    assert path.read_bytes() == before
    assert not result.warnings
    new, old = cells(tmp_path / "again.xlsx", True), cells(path, True)
    assert new.keys() == old.keys()
    for place, value in new.items():
        assert value == (pytest.approx(old[place], rel=1e-9) if isinstance(value, float) else old[place]), place


@pytest.mark.parametrize("path", [p for p in SAMPLES if p.name != "twenty_cases.xlsx"], ids=lambda p: p.name)
def test_a_sheet_an_engineer_would_be_glad_of(path):
    formulas, stored = cells(path, False), cells(path, True)
    ours = [v for v in formulas.values() if isinstance(v, str) and "CF_" in v and v.startswith("=")]
    assert len(ours) > 50
    assert not any(isinstance(v, str) and v.startswith(("! ", "#")) for v in stored.values())
    texts = " ".join(v for v in stored.values() if isinstance(v, str))
    assert "licensed engineer" in texts and "local codes" in texts
    assert "CF_FAULTS" in str(formulas["Case", "B3"])
    assert stored["Case", "B3"] == 0
    head = [v for (_, place), v in stored.items() if place[0] in "ABCDEF" and v in COLUMNS]
    assert set(COLUMNS) <= set(head)
    assert {v for (_, place), v in stored.items() if place.startswith("A")} >= set(TERMS)
    with zipfile.ZipFile(path) as book:
        assert any(name.startswith("xl/charts/chart") for name in book.namelist())
        sheet = book.read("xl/worksheets/sheet2.xml").decode()
        assert 't="array"' not in sheet
        assert "<dataValidations" in sheet
        assert "Print_Area" in book.read("xl/workbook.xml").decode()
        chart = book.read("xl/charts/chart1.xml").decode()
        assert "logBase" in chart


def test_the_sheet_of_twenty_cases():
    path = FOLDER / "twenty_cases.xlsx"
    formulas, stored = cells(path, False), cells(path, True)
    assert sum(isinstance(v, str) and v.startswith("=CF_") for v in formulas.values()) >= 200
    assert stored["Cases", "B3"] == 0
    assert not any(isinstance(v, str) and v.startswith(("! ", "#")) for v in stored.values())


def test_twenty_cases_stand_side_by_side_in_one_sheet(tmp_path):
    """One column a case through CF_BLOCK; every cell equals the case on its own."""
    import xlsxwriter

    labels = ["flow kind", "substance", "velocity", "diameter", "length", "inlet temperature", "wall temperature"]
    units = ["", "", "m/s", "mm", "m", "degC", "degC"]
    path = tmp_path / "twenty.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet("Cases")
    sheet.write_column(0, 0, labels)
    sheet.write_column(0, 1, units)
    blocks = []
    for k in range(20):
        values = ["duct", "water", 0.5 + 0.2 * k, 20 + k, 3, 15 + k / 2, 60]
        column = xlsxwriter.utility.xl_col_to_name(2 + k)
        sheet.write_column(0, 2 + k, values)
        block = f"CF_BLOCK($A$1:$A$7,{column}$1:{column}$7,$B$1:$B$7)"
        sheet.write_formula(8, 2 + k, f'=CF_CASE({block},"Reynolds number")')
        sheet.write_formula(9, 2 + k, f'=CF_TERM({block},"viscous heating")')
        sheet.write_formula(10, 2 + k, f'=CF_TERM({block},"storage","verdict")')
        blocks.append([[name, value, unit] for name, value, unit in zip(labels, values, units, strict=True)])
    book.close()
    embedded.recalc(path, tmp_path / "out.xlsx")
    stored = openpyxl.load_workbook(tmp_path / "out.xlsx", data_only=True)["Cases"]
    functions = catalogue.functions()
    for k, block in enumerate(blocks):
        assert stored.cell(9, 3 + k).value == pytest.approx(functions["CF_CASE"].call(block, "Re"), rel=1e-12)
        assert stored.cell(10, 3 + k).value == pytest.approx(
            functions["CF_TERM"].call(block, "viscous heating"), rel=1e-12
        )
        assert stored.cell(11, 3 + k).value == "leave out"
