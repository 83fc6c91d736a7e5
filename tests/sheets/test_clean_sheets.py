"""Sheets in many hands' styles, written without a thought of a checker: nothing is wrong, so nothing is found.

Rows of ``clean_sheets.json``: a workbook's sheets with their cells; a formula has its stored value beside it. Each
number that the check agrees with is then spoiled, one at a time, and has to be found.
"""

import json
from pathlib import Path

import pytest

from cellfuncs.sheets.check import check_book

BOOKS = json.loads((Path(__file__).parent / "clean_sheets.json").read_text("utf-8"))
COUNTED = ("error", "warning")
FACTOR = 1.6


def sheets_of(name, spoiled=()):
    """The cells as the maker of workbooks takes them; ``spoiled`` cells have another stored value."""
    return {
        sheet: {
            place: (value[0], value[1] * FACTOR if f"{sheet}!{place}" in spoiled else value[1])
            if isinstance(value, list)
            else value
            for place, value in cells.items()
        }
        for sheet, cells in BOOKS[name].items()
    }


def formulas(name):
    return {
        f"{sheet}!{place}": value
        for sheet, cells in BOOKS[name].items()
        for place, value in cells.items()
        if isinstance(value, list)
    }


@pytest.mark.parametrize("name", BOOKS)
def test_a_clean_sheet_has_no_finding(name, make_book):
    report = check_book(make_book(sheets=sheets_of(name)))
    assert [(f.cell, f.code, f.message) for f in report.findings if f.severity in COUNTED] == []


def test_much_of_them_is_judged(make_book):
    agreed = sum(len(check_book(make_book(sheets=sheets_of(name))).agreed) for name in BOOKS)
    assert agreed >= 120


def test_spoiled_results_are_found(make_book):
    """Each judged result of the sheets in turn; those that nothing but a loose relation speaks of may be missed."""
    spoiled, found = 0, 0
    for name in BOOKS:
        report = check_book(make_book(sheets=sheets_of(name)))
        for cell in [cell for cell, _ in report.agreed if cell in formulas(name)][:3]:
            findings = check_book(make_book(sheets=sheets_of(name, {cell}))).findings
            spoiled += 1
            found += cell in {f.cell for f in findings if f.severity in COUNTED}
    assert spoiled >= 50
    assert found >= 0.95 * spoiled
