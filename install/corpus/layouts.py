"""How the lines of a calculation stand in a sheet. Every layout gives each line its cell before anything is written."""

import random
from dataclasses import dataclass, field
from typing import Any

from corpus.calculation import Calculation, Line
from corpus.formula import WRITTEN

Cell = tuple[str, int, int]


@dataclass
class Page:
    """Cells to write: texts as they are, and the places of the lines; sheet, row and column from 0."""

    places: dict[str, Cell] = field(default_factory=dict)
    texts: dict[Cell, Any] = field(default_factory=dict)
    formats: dict[str, str] = field(default_factory=dict)
    names: dict[str, str] = field(default_factory=dict)
    merged: list[tuple[str, int, int, int, int, str]] = field(default_factory=list)
    repeats: int = 1


def unit_text(unit: str) -> str:
    """The unit as it is written beside a number."""
    return WRITTEN.get(unit, unit)


def number_format(line: Line, value: float, quoted: str = "") -> str:
    """A format that shows the line's digits."""
    size = abs(value)
    if size and (size < 1e-3 or size >= 1e7):
        shown = "0." + "0" * (line.digits - 1) + "E+00"
    else:
        whole = len(str(int(size))) if size >= 1 else 0
        zeros = (
            0
            if size >= 1 or not size
            else len(f"{size:.6f}".split(".")[1]) - len(f"{size:.6f}".split(".")[1].lstrip("0"))
        )
        places = max(line.digits - whole, 0) + zeros
        shown = "0." + "0" * places if places else "0"
    return f'{shown} "{quoted}"' if quoted else shown


def _label(line: Line, rng: random.Random) -> str:
    return rng.choice(line.labels)


def _title(page: Page, c: Calculation, sheet: str, width: int) -> None:
    page.merged.append((sheet, 0, 0, 0, width, c.title))
    page.texts[sheet, 1, 0] = "Prepared for the works' heat balance"


def _texts(page: Page, c: Calculation, sheet: str, row: int, column: int = 0, value_column: int = 1) -> int:
    for label, text in c.texts:
        page.texts[sheet, row, column] = label
        page.texts[sheet, row, column + value_column] = text
        row += 1
    return row


def _notes(page: Page, c: Calculation, sheet: str, row: int) -> None:
    for k, note in enumerate(c.notes):
        page.texts[sheet, row + 1 + k, 0] = note


def plain(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Label, value, unit."""
    page, sheet = Page(), "Calc"
    _title(page, c, sheet, 3)
    row = _texts(page, c, sheet, 3)
    for line in c.lines:
        page.texts[sheet, row, 0] = _label(line, rng)
        page.places[line.name] = (sheet, row, 1)
        page.texts[sheet, row, 2] = unit_text(line.unit)
        row += 1 + (rng.random() < 0.1)
    _notes(page, c, sheet, row)
    return page


def with_symbols(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Label, symbol, value, unit, remark, with headings between."""
    page, sheet = Page(), "Sheet1"
    _title(page, c, sheet, 4)
    for k, head in enumerate(("Quantity", "Symbol", "Value", "Unit", "Remark")):
        page.texts[sheet, 3, k] = head
    row = _texts(page, c, sheet, 4, 0, 2)
    group = ""
    for line in c.lines:
        if line.group != group:
            page.texts[sheet, row, 0] = {"input": "Input data", "result": "Results"}[line.group]
            group = line.group
            row += 1
        page.texts[sheet, row, 0] = _label(line, rng)
        page.texts[sheet, row, 1] = line.symbol
        page.places[line.name] = (sheet, row, 2)
        page.texts[sheet, row, 3] = unit_text(line.unit)
        if rng.random() < 0.2:
            page.texts[sheet, row, 4] = rng.choice(("see data sheet", "from process", "assumed", "checked"))
        row += 1
    _notes(page, c, sheet, row)
    return page


def unit_in_label(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """``Velocity [m/s]`` and the value beside it."""
    page, sheet = Page(), "Calculation"
    _title(page, c, sheet, 1)
    row = _texts(page, c, sheet, 2)
    left, right = rng.choice(("[]", "()"))
    for line in c.lines:
        unit = unit_text(line.unit)
        page.texts[sheet, row, 0] = _label(line, rng) + (f" {left}{unit}{right}" if unit else "")
        page.places[line.name] = (sheet, row, 1)
        row += 1
    _notes(page, c, sheet, row)
    return page


def symbol_equals(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Words, ``w =``, value, unit."""
    page, sheet = Page(), "A"
    _title(page, c, sheet, 3)
    row = _texts(page, c, sheet, 2)
    for line in c.lines:
        page.texts[sheet, row, 0] = _label(line, rng)
        page.texts[sheet, row, 1] = f"{line.symbol} ="
        page.places[line.name] = (sheet, row, 2)
        page.texts[sheet, row, 3] = unit_text(line.unit)
        row += 1
    _notes(page, c, sheet, row)
    return page


def unit_in_format(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """The unit stands in the number format of the value."""
    page, sheet = Page(), "Blatt"
    _title(page, c, sheet, 1)
    row = _texts(page, c, sheet, 3, 1)
    for line in c.lines:
        page.texts[sheet, row, 1] = _label(line, rng)
        page.places[line.name] = (sheet, row, 2)
        page.formats[line.name] = number_format(line, values[line.name], unit_text(line.unit))
        row += 1
    _notes(page, c, sheet, row)
    return page


def side_by_side(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Inputs on the left, results on the right."""
    page, sheet = Page(), "Work"
    _title(page, c, sheet, 7)
    row = _texts(page, c, sheet, 2)
    page.texts[sheet, row, 0], page.texts[sheet, row, 4] = "Inputs", "Results"
    rows = {"input": row + 1, "result": row + 1}
    for line in c.lines:
        at, column = rows[line.group], 0 if line.group == "input" else 4
        page.texts[sheet, at, column] = _label(line, rng)
        page.places[line.name] = (sheet, at, column + 1)
        page.texts[sheet, at, column + 2] = unit_text(line.unit)
        rows[line.group] += 1
    _notes(page, c, sheet, max(rows.values()))
    return page


def two_sheets(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Inputs on one sheet, results on another."""
    page = Page()
    _title(page, c, "Input", 2)
    page.texts["Results", 0, 0] = "Results"
    row = _texts(page, c, "Input", 2)
    rows = {"input": row, "result": 2}
    for line in c.lines:
        sheet = "Input" if line.group == "input" else "Results"
        at = rows[line.group]
        page.texts[sheet, at, 0] = _label(line, rng)
        page.places[line.name] = (sheet, at, 1)
        page.texts[sheet, at, 2] = unit_text(line.unit)
        rows[line.group] += 1
    _notes(page, c, "Results", rows["result"])
    return page


def with_names(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Label, value, unit; formulas use defined names."""
    page = plain(c, values, rng)
    page.names = {line.name: f"{line.name}_{k + 1}x" for k, line in enumerate(c.lines)}
    return page


def column_a_case(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Label, unit, then a column a case; the slip is in one of them."""
    page, sheet = Page(repeats=3), "Cases"
    _title(page, c, sheet, 4)
    for k, head in enumerate(("Quantity", "Unit", "Case 1", "Case 2", "Case 3")):
        page.texts[sheet, 2, k] = head
    row = 3
    for label, text in c.texts:
        page.texts[sheet, row, 0] = label
        for k in range(3):
            page.texts[sheet, row, 2 + k] = text
        row += 1
    for line in c.lines:
        page.texts[sheet, row, 0] = _label(line, rng)
        page.texts[sheet, row, 1] = unit_text(line.unit)
        page.places[line.name] = (sheet, row, 2)
        row += 1
    _notes(page, c, sheet, row)
    return page


def row_a_case(c: Calculation, values: dict[str, float], rng: random.Random) -> Page:
    """Heads with units, then a row a case."""
    page, sheet = Page(repeats=3), "Table"
    _title(page, c, sheet, 6)
    row = _texts(page, c, sheet, 1)
    head = row + 1
    page.texts[sheet, head, 0] = "Case"
    for k in range(3):
        page.texts[sheet, head + 1 + k, 0] = f"{k + 1}"
    for k, line in enumerate(c.lines):
        unit = unit_text(line.unit)
        page.texts[sheet, head, 1 + k] = _label(line, rng) + (f" [{unit}]" if unit else "")
        page.places[line.name] = (sheet, head + 1, 1 + k)
    _notes(page, c, sheet, head + 5)
    return page


LAYOUTS = (
    plain,
    with_symbols,
    unit_in_label,
    symbol_equals,
    unit_in_format,
    side_by_side,
    two_sheets,
    with_names,
    column_a_case,
    row_a_case,
)
# layouts whose cases go on along columns, and those along rows
DOWN = (row_a_case,)
