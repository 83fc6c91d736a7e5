"""Remarks that stand beside a number: what a reader of the sheet wrote about it."""

from __future__ import annotations

from cellfuncs.sheets.inherited.page import Page, Spot

_FARTHEST = 4  # columns to the right of a number
_WORDS = 2  # fewer are a unit or the name of a method


def has_remark(page: Page, spot: Spot) -> bool:
    """Whether words stand to the right of a number, and no other number in that part of the row."""
    row, column = spot
    beside = [page.values.get((row, at)) for at in range(column + 1, column + 1 + _FARTHEST)]
    if any(isinstance(value, float) for value in beside):
        return False
    return any(isinstance(value, str) and len([w for w in value.split() if len(w) > 1]) > _WORDS for value in beside)
