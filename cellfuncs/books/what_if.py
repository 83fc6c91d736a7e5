"""Some formulas of a workbook calculated with other values, beside the workbook."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping

Cell = tuple[str, int, int]  # sheet, row, column


def calculated(formulas: Mapping[Cell, str], values: Mapping[Cell, float], wanted: Iterable[Cell]) -> dict[Cell, float]:
    """The numbers of the wanted cells, from formulas (with their `=`) and the values of all other cells that they use.

    Cells that give no number are left out; all are where the engine cannot take a formula.
    """
    import formualizer as fz

    book = fz.Workbook()
    found: dict[Cell, float] = {}
    try:
        for sheet in dict.fromkeys(cell[0] for cell in (*formulas, *values)):
            book.add_sheet(sheet)
        for (sheet, row, column), value in values.items():
            book.set_value(sheet, row, column, value)
        for (sheet, row, column), text in formulas.items():
            book.set_formula(sheet, row, column, text)
        for cell in wanted:
            value = book.evaluate_cell(*cell)
            if isinstance(value, (int, float)) and math.isfinite(value):
                found[cell] = float(value)
    except Exception:  # the engine raises kinds of its own for formulas that it does not know
        return {}
    return found
