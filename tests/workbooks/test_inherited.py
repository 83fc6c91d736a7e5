"""The inherited sheets: plain formulas with stored values, and a report that finds what is wrong in them."""

import importlib.util
import json
from pathlib import Path

import openpyxl
import pytest

FOLDER = Path(__file__).parents[2] / "workbooks"


@pytest.fixture(scope="module")
def builder():
    spec = importlib.util.spec_from_file_location("build_inherited", FOLDER / "build.py")
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


NAMES = ("cooling_water_line.xlsx", "oil_cooler.xlsx", "drying_air.xlsx", "hot_water_main.xlsx")


def test_all_are_there_with_their_reports(builder):
    assert set(builder.INHERITED) == set(NAMES)
    found = {path.name for path in (FOLDER / "inherited").iterdir()}
    assert found == {Path(name).with_suffix(ending).name for name in NAMES for ending in (".xlsx", ".json", ".html")}


def test_their_slips_are_of_many_causes(builder):
    assert len({code for book in builder.INHERITED.values() for _, code in book.slips}) >= 7


@pytest.mark.parametrize("name", NAMES)
def test_the_check_finds_the_slips_and_nothing_else(builder, name, tmp_path):
    book = builder.build_inherited(name, tmp_path)
    report = json.loads(book.with_suffix(".json").read_text("utf-8"))
    found = {(f["cell"], f["cause"]["code"]): f for f in report["findings"]}
    slips = set(builder.INHERITED[name].slips)
    assert slips <= found.keys()
    below = {cell for key in slips for cell in found[key]["inherited"]}
    assert {cell for cell, _ in found.keys() - slips} <= below  # what a slip has made wrong further down
    assert report["agreed"]
    page = book.with_suffix(".html").read_text("utf-8")
    assert "licensed engineer" in page and "local codes" in page


@pytest.mark.parametrize("name", NAMES)
def test_the_workbook_knows_nothing_of_ours_and_has_stored_values(builder, name, tmp_path):
    book = builder.build_inherited(name, tmp_path)
    formulas, stored = openpyxl.load_workbook(book), openpyxl.load_workbook(book, data_only=True)
    count = 0
    for sheet in formulas:
        for row in sheet.iter_rows():
            for cell in row:
                assert "CF_" not in str(cell.value)
                if isinstance(cell.value, str) and cell.value.startswith("="):
                    count += 1
                    assert isinstance(stored[sheet.title][cell.coordinate].value, int | float)
    assert count >= 5
    before = {cell: value for cell, value in _values(FOLDER / "inherited" / name)}
    assert before == {cell: value for cell, value in _values(book)}


def _values(path):
    book = openpyxl.load_workbook(path, data_only=True)
    return [
        ((sheet.title, cell.coordinate), cell.value if isinstance(cell.value, str) else pytest.approx(cell.value))
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    ]
