"""Worked numbers of handbooks and standards typed into sheets: clean as published, caught with one number changed.

Rows of ``sheets/worked.json``: label, value, unit as they would stand in a sheet; ``changed`` is the label of the row
that gets the value ``to``; each has its source.
"""

import json
from pathlib import Path

import pytest
import xlsxwriter

from cellfuncs.sheets.check import check_book

ROWS = json.loads((Path(__file__).parent / "sheets" / "worked.json").read_text("utf-8"))
COUNTED = ("error", "warning")


def write(path, sheet, changes=()):
    """The sheet as a workbook; the cells by label."""
    book = xlsxwriter.Workbook(str(path))
    page = book.add_worksheet("Sheet1")
    page.write(0, 0, sheet["title"])
    cells = {}
    for k, (label, value, unit) in enumerate(sheet["rows"], start=2):
        page.write(k, 0, label)
        page.write(k, 1, dict(changes).get(label, value))
        page.write(k, 2, unit)
        cells[label] = f"Sheet1!B{k + 1}"
    book.close()
    return cells


def test_there_are_enough_and_each_has_a_source():
    assert len(ROWS) >= 15
    assert len({row["id"] for row in ROWS}) == len(ROWS)
    assert all(row["source"].strip() and row["kind"] for row in ROWS)


@pytest.mark.parametrize("sheet", ROWS, ids=[row["id"] for row in ROWS])
def test_a_published_sheet_is_clean(sheet, tmp_path):
    cells = write(tmp_path / "sheet.xlsx", sheet)
    report = check_book(tmp_path / "sheet.xlsx")
    assert [f for f in report.findings if f.severity in COUNTED] == [], sheet["source"]
    assert cells[sheet["changed"]] in {cell for cell, _ in report.agreed}


@pytest.mark.parametrize("sheet", ROWS, ids=[row["id"] for row in ROWS])
def test_a_changed_number_is_caught(sheet, tmp_path):
    cells = write(tmp_path / "sheet.xlsx", sheet, [(sheet["changed"], sheet["to"])])
    found = [f for f in check_book(tmp_path / "sheet.xlsx").findings if f.severity in COUNTED]
    assert cells[sheet["changed"]] in {f.cell for f in found}, [(f.cell, f.message) for f in found]
