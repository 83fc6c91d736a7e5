"""The examples of the catalogue: the sheet they refer to, and their answers as a host gives them.

A file of questions holds every example once; whoever builds the workbooks has it recalculated and stores what came
out in ``data/examples.json``.
"""

import json
from collections.abc import Iterable, Mapping, Sequence
from pathlib import Path
from typing import Any

from cellfuncs import quantities, substances
from cellfuncs.cases import labels
from cellfuncs.cells.catalogue import CellFunction, functions
from cellfuncs.cells.faults import is_fault
from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets import reference

SHEET, BLOCK = "Example", "coolant"
FIRST_ROW = 3  # of the labels, counted from 1
SECOND_CASE = {"velocity": 1.5}  # what differs in the column beside
BLOCK_COLUMN = 5  # of the block's labels, counted from 0
_APART = 24  # columns from one answer to the next

Row = Sequence[Any]


def fill(book: Any, sheet: Any, rows: Sequence[Row], look: Any) -> None:
    """Write the cells that the examples mean: two cases side by side from A3, and the block ``coolant``.

    ``look`` gives the formats: ``look.label()``, ``look.entry()``, ``look.head()``.
    """
    for column, (head, width) in enumerate(
        (("label", 24), ("unit", 10), ("a case", 30), ("another case", 30), ("", 3),
         ("label", 24), ("value", 30), ("unit", 10), ("±", 8))
    ):  # fmt: skip
        sheet.set_column(column, column, width)
        if head:
            sheet.write(FIRST_ROW - 2, column, head, look.head())
    for k, (label, value, unit, spread) in enumerate(rows):
        at = FIRST_ROW - 1 + k
        second = SECOND_CASE.get(label, value)
        for column, cell in enumerate((label, unit, value, second, None, label, value, unit, spread)):
            if column == BLOCK_COLUMN - 1:
                continue
            plain = column in (0, BLOCK_COLUMN)
            sheet.write(at, column, cell, look.label() if plain else look.entry(ruled=column in (2, 6)))
    last = FIRST_ROW + len(rows) - 1
    sheet.write(last, BLOCK_COLUMN, f"The name {BLOCK} means the rows above, F{FIRST_ROW}:I{last}.", look.quiet())
    book.define_name(BLOCK, f"={SHEET}!$F${FIRST_ROW}:$I${last}")


def write_questions(path: str | Path, rows: Sequence[Row]) -> None:
    """A workbook that asks every example once, each in a cell with room beside and below it."""
    import xlsxwriter

    from cellfuncs.sheets.look import Look

    book = xlsxwriter.Workbook(str(path))
    sheet = book.add_worksheet(SHEET)
    fill(book, sheet, rows, Look(book))
    for place, function in places():
        sheet.write_dynamic_array_formula(f"{place}:{place}", function.example)
    book.close()


def places() -> Iterable[tuple[str, CellFunction]]:
    """The cell of each example in the file of questions."""
    from xlsxwriter.utility import xl_rowcol_to_cell

    for k, function in enumerate(functions().values(), start=1):
        yield xl_rowcol_to_cell(0, _APART * k), function


def answers(areas: Iterable[Any]) -> dict[str, dict[str, Any]]:
    """Function -> formula, rows, number of rows and unit, from the areas of a recalculation.

    Raises ValueError for an example that answers a fault or an error.
    """
    found = {area.range.split(":")[0]: area.values for area in areas}
    kept = {}
    for place, function in places():
        rows = found[place]
        if any(not isinstance(cell, (float, str)) or is_fault(cell) for row in rows for cell in row):
            raise ValueError(f"{function.example} gives {rows[0][0]}")
        kept[function.name] = {
            "formula": function.example,
            "rows": [list(row) for row in rows[: reference.MOST_ROWS]],
            "count": len(rows),
            "unit": unit_of(function),
        }
    return kept


def as_json(rows: Sequence[Row], kept: Mapping[str, Any]) -> str:
    """The text of ``data/examples.json``."""
    block = ",\n  ".join(json.dumps(list(row), ensure_ascii=False) for row in rows)
    lines = ",\n  ".join(f"{json.dumps(name)}: {json.dumps(one, ensure_ascii=False)}" for name, one in kept.items())
    note = "made by workbooks/build.py; not to be edited"
    return f'{{"note": "{note}",\n "block": [\n  {block}\n ],\n "answers": {{\n  {lines}\n }}\n}}\n'


def unit_of(function: CellFunction) -> str:
    """The unit that the answer of an example is in; "" for one without dimension or unknown."""
    from cellfuncs.books.formulas import calls

    name, texts = calls(function.example)[0]
    outer = functions().get(name)
    if outer is None:
        return ""
    given = {one.name: text.strip('"') for one, text in zip(outer.arguments, texts, strict=False)}
    if outer.returns == "quantity":
        unit = given.get("unit") or _si_unit(outer.kind or _kind_of(given.get("what", ""), name))
    elif name == "CF_SI":
        unit = _si_unit(quantities.kinds_for(given["unit"])[0])
    else:
        unit = given.get("wanted", "")
    return "" if unit == "1" else unit


def _si_unit(kind: str | None) -> str:
    return quantities.KINDS[kind].si_unit if kind else ""


def _kind_of(what: str, name: str) -> str | None:
    finders = (
        lambda: substances.MOIST_AIR[substances.property_key(what, "moist air")] if name == "CF_MOIST_AIR" else None,
        lambda: labels.dictionary()[labels.find(what)] if name == "CF_CASE" else None,
        lambda: substances.PROPERTIES[substances.property_key(what)],
    )
    for find in finders:
        try:
            found = find()
        except CellfuncsError:
            continue
        if found is not None:
            return found.kind
    return None
