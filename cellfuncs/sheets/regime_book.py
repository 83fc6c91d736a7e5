"""Where a workbook has case blocks: the ranges with a name whose first column says the flow kind."""

from pathlib import Path
from typing import Any

from cellfuncs.books import Book, inspect
from cellfuncs.books.formulas import reference
from cellfuncs.books.grid import Area
from cellfuncs.books.reading import read_sheet
from cellfuncs.books.strings import values_of
from cellfuncs.books.xmltext import ErrorValue
from cellfuncs.cases import labels
from cellfuncs.cells.convert import MOST_BLOCK_ROWS, read_block
from cellfuncs.errors import BookRefused

Rows = tuple[tuple[Any, ...], ...]
_COLUMNS = 4  # label, value, unit, ±
_MOST_LISTED = 8


def block_of(path: str | Path, name: str | None) -> tuple[str, Rows]:
    """The name and the rows of a case block by its stored values; without a name the only one there is."""
    book = inspect(path)
    found = {}
    for defined in book.names:
        if name is not None and defined.name.casefold() != name.casefold():
            continue
        rows = _rows_of(book, defined.text)
        if rows is not None:
            found[defined.name] = rows
    if name is not None:
        if not found:
            raise BookRefused(f"{name[:60]} is no name of this workbook for a case block (label, value, unit, ±)")
        return found.popitem()
    found = _widest(found)
    if not found:
        raise BookRefused("no named range of this workbook is a case block; name one, and write --block NAME")
    if len(found) > 1:
        listed = ", ".join(sorted(found)[:_MOST_LISTED])
        raise BookRefused(f"the workbook has several case blocks: {listed}; write --block NAME")
    return found.popitem()


def _rows_of(book: Book, text: str) -> Rows | None:
    """The rows of a range that is a case block, or None."""
    place = reference(text.lstrip("="))
    sheet, area = getattr(place, "sheet", None), getattr(place, "area", None)
    if sheet is None or area is None or not any(s.name == sheet and s.kind == "worksheet" for s in book.sheets):
        return None
    top, left, bottom, right = area
    if not 1 < right - left + 1 <= _COLUMNS or bottom - top >= MOST_BLOCK_ROWS:
        return None
    cells = _values(book, sheet, area)
    if not any(isinstance(row[0], str) and "flow_kind" in labels.candidates(row[0]) for row in cells):
        return None
    return read_block(cells)


def _values(book: Book, sheet: str, area: Area) -> list[list[Any]]:
    top, left, bottom, right = area
    wanted = {(row, column) for row in range(top, bottom + 1) for column in range(left, right + 1)}
    stored = values_of(book, read_sheet(book, sheet), wanted)
    return [[_plain(stored.get((row, column))) for column in range(left, right + 1)] for row in range(top, bottom + 1)]


def _plain(value: Any) -> Any:
    return str(value) if isinstance(value, ErrorValue) else value


def _widest(found: dict[str, Rows]) -> dict[str, Rows]:
    """One name for blocks that state the same rows, the one with most columns."""
    kept: dict[tuple[Any, ...], str] = {}
    for name, rows in sorted(found.items()):
        key = tuple(row[:3] for row in rows)
        if key not in kept or max(map(len, rows)) > max(map(len, found[kept[key]])):
            kept[key] = name
    return {name: found[name] for name in kept.values()}
