"""Values on their way between the engine and the sheet, and the helpers that the engine calls."""

from __future__ import annotations

import math
from typing import Any

from cellfuncs.books.package import shown
from cellfuncs.books.xmltext import ErrorValue, Value

SPILL = ErrorValue("#SPILL!")
CIRCULAR = ErrorValue("#CIRC!")
_ERRORS = {
    "Div": "#DIV/0!",
    "Na": "#N/A",
    "Name": "#NAME?",
    "Null": "#NULL!",
    "Num": "#NUM!",
    "Ref": "#REF!",
    "Spill": SPILL.text,
    "Circ": CIRCULAR.text,
}


def from_engine(value: Any) -> Value:
    """A value of the engine as a cell's value; errors that no file knows are ``#VALUE!``, but for spill and circle."""
    if isinstance(value, float):
        return value if math.isfinite(value) else ErrorValue("#NUM!")
    if value is None or isinstance(value, (bool, str)):
        return value
    if isinstance(value, int):
        return float(value)
    if isinstance(value, dict):
        return ErrorValue(_ERRORS.get(value.get("kind", ""), "#VALUE!"))
    if isinstance(value, list):
        return from_engine(value[0][0]) if value and isinstance(value[0], list) and value[0] else None
    return ErrorValue("#VALUE!")


def fitted(value: Any, rows: float, columns: float) -> Any:
    """A value made to fill a fixed array: one value, row or column is repeated, the rest cut or padded with #N/A."""
    from formualizer import LiteralValue

    table = value if isinstance(value, list) and value and isinstance(value[0], list) else [[value]]
    tall, wide = len(table), len(table[0])

    def at(row: int, column: int) -> Any:
        row, column = (0 if tall == 1 else row), (0 if wide == 1 else column)
        if row >= tall or column >= len(table[row]):
            return LiteralValue.error("Na", None)
        found = table[row][column]
        return LiteralValue.error(found.get("kind", "Value"), None) if isinstance(found, dict) else found

    return [[at(row, column) for column in range(int(columns))] for row in range(int(rows))]


def agree(stored: Value, value: Value) -> bool:
    """Whether a recalculated value is the stored one, but for rounding."""
    if isinstance(stored, float) and isinstance(value, float):
        return math.isclose(stored, value, rel_tol=1e-9, abs_tol=1e-12)
    if value is None:
        return stored in (0.0, "", None)
    return type(stored) is type(value) and stored == value


def said(value: Value) -> str:
    """A value in a message."""
    text = f"{value:.10g}" if isinstance(value, float) else shown(str(value))
    return text or "an empty text"
