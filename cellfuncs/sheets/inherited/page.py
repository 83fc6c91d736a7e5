"""The cells of a sheet as they stand in the file: stored values, texts, formulas, number formats."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field

from cellfuncs.books import Book
from cellfuncs.books.grid import Area, column_letters
from cellfuncs.books.reading import Formula, Sheet, read_sheet
from cellfuncs.books.strings import shared_strings
from cellfuncs.books.xmltext import ErrorValue, Value, decoded
from cellfuncs.sheets.inherited.formats import GENERAL, Shown, formats_of

Spot = tuple[int, int]  # row, column

MOST_CELLS = 400_000  # filled cells of all sheets that are looked at
LONGEST = 4_000  # signs of a text
MOST_MERGED = 2_000  # cells under one merge that count as the merged cell

_STYLE = re.compile(rb'\ss="(\d{1,6})"')
_NUMBER = frozenset((None, "n"))


@dataclass(slots=True)
class Page:
    """One sheet. ``values`` holds every filled cell; ``covers`` leads from a cell under a merge to the merged one."""

    name: str
    values: dict[Spot, Value] = field(default_factory=dict)
    formulas: dict[Spot, Formula] = field(default_factory=dict)
    formats: dict[Spot, Shown] = field(default_factory=dict)
    covers: dict[Spot, Spot] = field(default_factory=dict)
    cut: bool = False  # not all cells were read
    copies: set[Spot] = field(default_factory=set)  # numbers of long tables that repeat the formulas of others

    def at(self, row: int, column: int) -> Value:
        """The value of a cell, that of the merged cell where it lies under one."""
        value = self.values.get((row, column))
        if value is None and (row, column) in self.covers:
            return self.values.get(self.covers[row, column])
        return value

    def shown(self, spot: Spot) -> Shown:
        return self.formats.get(spot, GENERAL)

    def address(self, spot: Spot) -> str:
        return address(self.name, spot)


def address(sheet: str, spot: Spot) -> str:
    """``Sheet1!C7``, also for names that formulas would put in quotes."""
    return f"{sheet}!{column_letters(spot[1])}{spot[0]}"


def read_pages(book: Book) -> list[Page]:
    """All worksheets, hidden ones too; cells beyond ``MOST_CELLS`` are left out and the page says so."""
    styles = formats_of(book)
    pages: list[Page] = []
    waiting: list[tuple[Page, Spot, int]] = []  # texts whose shared string is looked up at the end
    left = MOST_CELLS
    for part in book.sheets:
        if part.kind != "worksheet":
            continue
        sheet = read_sheet(book, part.name)
        page = Page(part.name)
        left -= _fill(page, sheet, styles, waiting, max(left, 0))
        page.covers = _covers(sheet.merges)
        pages.append(page)
    strings = shared_strings(book, {number for _, _, number in waiting})
    for page, spot, number in waiting:
        text = printable(strings.get(number, ""))
        if text.strip():
            page.values[spot] = text
    return pages


def _fill(page: Page, sheet: Sheet, styles: list[Shown], waiting: list, most: int) -> int:
    """Put the filled cells of a sheet into a page; gives how many."""
    formulas = {(f.row, f.column): f for f in sheet.formulas}
    data = sheet.data
    count = 0
    for index, key in enumerate(sheet.keys):
        if not sheet.filled[index]:
            continue
        count += 1
        if count > most:
            page.cut = True
            break
        spot = (key // 16384, key % 16384 + 1)
        start = sheet.starts[index]
        mark, raw = sheet.raw(index)
        formula = formulas.get(spot)
        if formula is not None:
            page.formulas[spot] = formula
            value = formula.stored
        elif mark == "s":
            if raw and raw.isdigit():
                waiting.append((page, spot, int(raw)))
            continue
        else:
            value = decoded(mark, raw)
        if isinstance(value, str):
            value = printable(value)
        if value is None or (isinstance(value, str) and not value.strip()):
            continue
        page.values[spot] = value
        if isinstance(value, float) and styles:
            end = data.find(b">", start)
            style = _STYLE.search(data, start, end)
            number = int(style[1]) if style else 0
            if number < len(styles) and styles[number] is not GENERAL:
                page.formats[spot] = styles[number]
    return count


def _covers(merges: list[Area]) -> Mapping[Spot, Spot]:
    found: dict[Spot, Spot] = {}
    for top, left, bottom, right in merges:
        if (bottom - top + 1) * (right - left + 1) > MOST_MERGED or len(found) > MOST_CELLS:
            continue
        for row in range(top, bottom + 1):
            for column in range(left, right + 1):
                if (row, column) != (top, left):
                    found[row, column] = (top, left)
    return found


def printable(text: str) -> str:
    """A text without signs that steer a terminal or turn the direction of writing; at most ``LONGEST`` signs."""
    text = text[:LONGEST]
    return text if text.isprintable() else "".join(c if c.isprintable() else " " for c in text)


def is_number(value: Value) -> bool:
    """Whether a stored value is a number."""
    return isinstance(value, float)


def is_error(value: Value) -> bool:
    """Whether a stored value is one of the sheet's own errors."""
    return isinstance(value, ErrorValue)
