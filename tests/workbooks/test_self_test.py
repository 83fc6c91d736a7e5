"""The self-test workbook agrees here, is up to date, and says so when something does not agree."""

import dataclasses
import importlib.util
import re
import zipfile
from pathlib import Path

import openpyxl
import pytest

from cellfuncs import __version__
from cellfuncs.cells import catalogue
from cellfuncs.hosts import embedded

FOLDER = Path(__file__).parents[2] / "workbooks"
BOOK = FOLDER / "self_test.xlsx"
SHEET, FIRST = "Self-test", 9
HEADLINE, VERSION, RUN = "C4", "C5", "C6"
REBUILD = "out of date: run `python workbooks/build.py` and look at what changed"


def cells(path, stored):
    book = openpyxl.load_workbook(path, data_only=stored)
    return {
        (sheet.title, cell.coordinate): cell.value
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    }


def rows(path):
    """The stored values of the checks: number, function, formula, answer, expected, difference, tolerance, verdict …"""
    sheet = openpyxl.load_workbook(path, data_only=True)[SHEET]
    return list(sheet.iter_rows(min_row=FIRST, values_only=True))


def recalculated(folder, change, functions=None):
    """The sheet after a change and a recalculation."""
    book = openpyxl.load_workbook(BOOK)
    change(book[SHEET])
    book.save(folder / "changed.xlsx")
    embedded.recalc(folder / "changed.xlsx", folder / "out.xlsx", functions=functions)
    return openpyxl.load_workbook(folder / "out.xlsx", data_only=True)[SHEET]


def test_all_agree_and_every_function_is_there():
    sheet = openpyxl.load_workbook(BOOK, data_only=True)[SHEET]
    checks = rows(BOOK)
    count = len(checks)
    assert sheet[HEADLINE].value == f"all {count} of {count} agree"
    assert sheet[VERSION].value == __version__, REBUILD
    assert {check[1] for check in checks} == set(catalogue.functions()), REBUILD
    assert all(check[7] == "agrees" and check[8] and check[9] for check in checks)
    assert all(f"{check[1]}(" in check[2] for check in checks)


def test_the_script_builds_what_is_there(tmp_path):
    spec = importlib.util.spec_from_file_location("build_self_test", FOLDER / "build.py")
    builder = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(builder)
    built = builder.build_self_test(tmp_path)
    assert cells(built, False) == cells(BOOK, False), REBUILD
    new, old = cells(built, True), cells(BOOK, True)
    assert new.keys() == old.keys(), REBUILD
    for (sheet, place), value in new.items():
        if sheet == SHEET and place[0] == "F":  # differences near zero are rounding
            continue
        assert value == (pytest.approx(old[sheet, place], rel=1e-9) if isinstance(value, float) else value), place


def test_formulas_are_one_a_cell_and_expected_values_are_stored():
    with zipfile.ZipFile(BOOK) as book:
        sheets = [book.read(name).decode() for name in book.namelist() if name.startswith("xl/worksheets/sheet")]
    assert not any('t="array"' in sheet or "cm=" in sheet for sheet in sheets)
    sheet = openpyxl.load_workbook(BOOK)[SHEET]
    for answer, expected, *_, tolerance in sheet.iter_rows(min_row=FIRST, min_col=4, max_col=7):
        assert answer.data_type == "f" and expected.data_type in "ns" and tolerance.data_type == "n"


def test_what_is_shown_is_what_is_calculated():
    """The formula shown is the one beside it, which waits for the cell of the run."""
    sheet = openpyxl.load_workbook(BOOK)[SHEET]
    for shown, answer in sheet.iter_rows(min_row=FIRST, min_col=3, max_col=4):
        assert answer.value == f'=IF(ISNUMBER($C$6),{shown.value[1:]},"not run")'


def test_another_run_agrees_too(tmp_path):
    sheet = recalculated(tmp_path, lambda sheet: sheet.__setitem__(RUN, 2))
    assert re.fullmatch(r"all (\d+) of \1 agree", sheet[HEADLINE].value)


def test_without_a_run_nothing_agrees(tmp_path):
    sheet = recalculated(tmp_path, lambda sheet: sheet.__setitem__(RUN, None))
    assert sheet[HEADLINE].value.startswith("0 of ")
    assert {row[3] for row in sheet.iter_rows(min_row=FIRST, values_only=True)} == {"not run"}


@pytest.mark.parametrize("column", ["number", "text"])
def test_a_wrong_answer_is_named(tmp_path, column):
    place, (number, function, *_) = next(
        (k, check) for k, check in enumerate(rows(BOOK), FIRST) if isinstance(check[4], str) == (column == "text")
    )
    wrong = "something else" if column == "text" else rows(BOOK)[place - FIRST][4] * 1.001 + 1
    sheet = recalculated(tmp_path, lambda sheet: sheet.__setitem__(f"E{place}", wrong))
    count = len(rows(BOOK))
    said = f"{count - 1} of {count} agree; the first that differs is number {number}, {function}"
    assert sheet[HEADLINE].value == said
    assert sheet[f"H{place}"].value == "differs"


def test_a_function_that_answers_a_fault_differs(tmp_path):
    functions = dict(catalogue.functions())
    functions["CF_MACH"] = dataclasses.replace(functions["CF_MACH"], call=lambda *_: "! velocity: gone")
    sheet = recalculated(tmp_path, lambda sheet: None, functions)
    (row,) = (r for r in sheet.iter_rows(min_row=FIRST, values_only=True) if r[1] == "CF_MACH")
    assert row[3] == "! velocity: gone" and row[5] == "no answer" and row[7] == "differs"
    assert sheet[HEADLINE].value.endswith("CF_MACH")


def test_a_host_that_does_not_know_a_function_is_found_out(tmp_path):
    functions = {name: f for name, f in catalogue.functions().items() if name not in ("CF_MACH", "CF_FROUDE")}
    sheet = recalculated(tmp_path, lambda sheet: sheet.__setitem__(RUN, 3), functions)
    count = len(rows(BOOK))
    agree = int(sheet[HEADLINE].value.split()[0])
    lost = [r[1] for r in sheet.iter_rows(min_row=FIRST, values_only=True) if r[7] == "differs"]
    assert set(lost) == {"CF_MACH", "CF_FROUDE"} and agree == count - len(lost)


def test_it_says_who_decides_and_how_to_run_it():
    texts = " ".join(v for v in cells(BOOK, True).values() if isinstance(v, str))
    assert "licensed engineer" in texts and "local codes" in texts
    assert "Type another number into the tinted cell" in texts
