"""Columns of numbers under labels: one row a case.

A head row holds labels of quantities side by side with numbers below them; their units stand in the labels or in
the row below.
"""

from __future__ import annotations

from collections import defaultdict
from typing import NamedTuple

from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.found import Found
from cellfuncs.sheets.inherited.page import Page, Spot, is_number

_LEAST_COLUMNS = 2
_WIDEST_GAP = 2  # columns from one head to the next
_LOOK_DOWN = 3  # rows between a head and its first number
_KNOWN_SHARE = 0.5
MANY_ROWS = 200  # rows from which copies of one row are passed over
KEPT_ROWS = 6  # of which so many are kept


class Copies(NamedTuple):
    """Rows of a long table that repeat the formulas of others: its first number, and how many were passed over."""

    spot: Spot
    rows: int


def tables_in(page: Page) -> tuple[list[Found], set[Spot], list[Copies]]:
    """The numbers of all such tables, every cell that belongs to one, and what was passed over."""
    rows: dict[int, list[int]] = defaultdict(list)
    for row, column in page.values:
        rows[row].append(column)
    found: list[Found] = []
    taken: set[Spot] = set()
    copies: list[Copies] = []
    for row in sorted(rows):
        for run in _runs(page, row, sorted(rows[row]), taken):
            entries, passed = _read(page, row, run, taken)
            found += entries
            if passed:
                copies.append(Copies(entries[0].spot, passed))
    return found, taken, copies


def _label(page: Page, spot: Spot) -> texts.Labelled | None:
    value = page.values.get(spot)
    if not isinstance(value, str) or spot in page.formulas:
        return None
    label = texts.label_in(value)
    return label if label.names else None


def _is_known(label: texts.Labelled) -> bool:
    return any(k.key != "note" for name in label.names for k in texts.known(name))


def _runs(page: Page, row: int, columns: list[int], taken: set[Spot]) -> list[list[int]]:
    """Groups of neighbouring texts in a row that may be the heads of columns."""
    groups: list[list[int]] = []
    for column in columns:
        if (row, column) in taken or _label(page, (row, column)) is None:
            continue
        if groups and column - groups[-1][-1] <= _WIDEST_GAP:
            groups[-1].append(column)
        else:
            groups.append([column])
    return [group for group in groups if len(group) >= _LEAST_COLUMNS and _is_head(page, row, group)]


def _is_head(page: Page, row: int, columns: list[int]) -> bool:
    labels = {column: _label(page, (row, column)) for column in columns}
    over = [c for c in columns if _first_below(page, row, c) is not None]
    known = [c for c in over if labels[c] is not None and _is_known(labels[c])]
    if len(known) < _LEAST_COLUMNS or len(known) < _KNOWN_SHARE * len(over):
        return False
    # a unit or symbol beside a label has a number in its own row: that is a row, not a head
    return not any(is_number(page.at(row, column + step)) for column in known for step in (1, 2))


def _first_below(page: Page, row: int, column: int) -> int | None:
    """The row of the first number under a head, with at most units between."""
    for below in range(row + 1, row + 1 + _LOOK_DOWN):
        value = page.values.get((below, column))
        if is_number(value) or (isinstance(value, str) and texts.quantity_in(value) is not None):
            return below
        if isinstance(value, str) and not (texts.is_unit(value) or texts.is_symbol(value) or value.strip() in "-–—"):
            return None
    return None


def _read(page: Page, row: int, columns: list[int], taken: set[Spot]) -> tuple[list[Found], int]:
    """The numbers of one table, and how many of its rows were passed over as copies."""
    firsts = {c: below for c in columns if (below := _first_below(page, row, c)) is not None}
    start = min(firsts.values())
    taken |= {(row, c) for c in columns}
    heads = {}
    for column in columns:
        label = _label(page, (row, column))
        between = [page.values.get((r, column)) for r in range(row + 1, start)]
        texts_between = [v for v in between if isinstance(v, str)]
        units = [texts.bare_unit(v) for v in texts_between if texts.is_unit(v)]
        symbols = [v for v in texts_between if not texts.is_unit(v)]
        taken |= {(r, column) for r in range(row + 1, start)}
        heads[column] = ((*label.names, *symbols), (label.unit, *units) if label.unit else tuple(units))
    section = _title(page, row, columns[0], columns[-1])
    rows = _rows_of(page, columns, start)
    taken |= {(at, column) for at, numbers in rows for column in numbers}
    kept = _chosen(page, rows)
    lane = len(rows) > 1
    found = []
    for at, numbers in kept:
        name = _row_name(page, at, columns)
        for column, (number, unit) in numbers.items():
            names, units = heads[column]
            spot = (at, column)
            own = page.shown(spot).text
            if unit or own:
                units = tuple(u for u in (unit, *units, own) if u)
            written, in_text = str(page.values[row, column]), isinstance(page.values[spot], str)
            found.append(
                Found(spot, number, names, units, written, -row, at if lane else None, section, row, name, in_text)
            )
    return found, len(rows) - len(kept)


_Row = tuple[int, dict[int, tuple[float, str]]]  # its number, and column -> number and unit


def _rows_of(page: Page, columns: list[int], start: int) -> list[_Row]:
    """The rows of a table that hold numbers, to the first that is all blank or holds only texts."""
    rows: list[_Row] = []
    at, gap = start, 0
    while gap <= 1:
        numbers: dict[int, tuple[float, str]] = {}
        text = False
        for column in columns:
            value = page.values.get((at, column))
            if value is not None:
                number = _number(value)
                if number is not None:
                    numbers[column] = number
                text |= number is None and isinstance(value, str)
        if numbers:
            rows.append((at, numbers))
            gap = 0
        elif text:
            break
        else:
            gap += 1
        at += 1
    return rows


def _chosen(page: Page, rows: list[_Row]) -> list[_Row]:
    """All rows; of very many those that differ from the usual one, and a few of the usual."""
    if len(rows) <= MANY_ROWS:
        return rows
    alike: dict[tuple, list[_Row]] = defaultdict(list)
    for at, numbers in rows:
        alike[tuple(_pattern(page, (at, column), at) for column in numbers)].append((at, numbers))
    usual = max(alike.values(), key=len)
    left = [*usual[: KEPT_ROWS - 1], usual[-1]]
    for others in alike.values():
        if others is not usual:
            left += others[:MANY_ROWS]
    keep = {at for at, _ in left[: 2 * MANY_ROWS]}
    for at, numbers in rows:
        if at not in keep:
            page.copies.update((at, column) for column in numbers)
    return [row for row in rows if row[0] in keep]


def _pattern(page: Page, spot: Spot, row: int) -> str:
    """What a copy of a formula further down has in common with it; a dash for a typed number."""
    formula = page.formulas.get(spot)
    return "-" if formula is None else formula.text.replace(str(row), "#")


def _number(value: object) -> tuple[float, str] | None:
    if is_number(value):
        return value, ""
    reading = texts.quantity_in(value) if isinstance(value, str) else None
    return None if reading is None else (reading.value, reading.unit_text)


def _row_name(page: Page, row: int, columns: list[int]) -> str:
    """What a row is called: the text in its first column, or left of it."""
    for column in (columns[0], columns[0] - 1):
        value = page.values.get((row, column))
        if isinstance(value, str) and texts.quantity_in(value) is None:
            return value.strip()[:60]
    return ""


def _title(page: Page, row: int, left: int, right: int) -> str:
    """The heading over a table: the nearest text in the rows above it that stands alone."""
    for above in range(row - 1, max(0, row - 4), -1):
        cells = [page.values[above, c] for c in range(max(1, left - 1), right + 1) if (above, c) in page.values]
        if len(cells) == 1 and isinstance(cells[0], str):
            return cells[0].strip()[:80]
        if cells:
            return ""
    return ""
