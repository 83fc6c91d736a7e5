"""Columns of numbers under labels: one row a case.

A head row holds labels of quantities side by side with numbers below them; their units stand in the labels or in
the row below.
"""

from __future__ import annotations

from collections import defaultdict

from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.found import Found
from cellfuncs.sheets.inherited.page import Page, Spot, is_number

_LEAST_COLUMNS = 2
_WIDEST_GAP = 2  # columns from one head to the next
_LOOK_DOWN = 3  # rows between a head and its first number
_KNOWN_SHARE = 0.5


def tables_in(page: Page) -> tuple[list[Found], set[Spot]]:
    """The numbers of all such tables, and every cell that belongs to one."""
    rows: dict[int, list[int]] = defaultdict(list)
    for row, column in page.values:
        rows[row].append(column)
    found: list[Found] = []
    taken: set[Spot] = set()
    for row in sorted(rows):
        for run in _runs(page, row, sorted(rows[row]), taken):
            found += _read(page, row, run, taken)
    return found, taken


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


def _read(page: Page, row: int, columns: list[int], taken: set[Spot]) -> list[Found]:
    """The numbers of one table."""
    firsts = {c: below for c in columns if (below := _first_below(page, row, c)) is not None}
    start = min(firsts.values())
    taken |= {(row, c) for c in columns}
    found: list[Found] = []
    heads = {}
    for column in columns:
        label = _label(page, (row, column))
        between = [page.values.get((r, column)) for r in range(row + 1, start)]
        texts_between = [v for v in between if isinstance(v, str)]
        units = [texts.bare_unit(v) for v in texts_between if texts.is_unit(v)]
        symbols = [v for v in texts_between if not texts.is_unit(v)]
        taken |= {(r, column) for r in range(row + 1, start)}
        heads[column] = (label, (label.unit, *units) if label.unit else tuple(units), symbols)
    section = _title(page, row, columns[0], columns[-1])
    rows_read = 0
    below = start
    gap = 0
    while gap <= 1 and rows_read < 100_000:
        cells = {c: page.values.get((below, c)) for c in columns}
        numbers = {c: v for c, v in cells.items() if _number(v) is not None}
        if not numbers:
            if any(isinstance(v, str) for v in cells.values()):
                break
            gap += 1
            below += 1
            continue
        gap = 0
        name = _row_name(page, below, columns)
        for column, value in numbers.items():
            label, units, symbols = heads[column]
            number, unit = _number(value)
            spot = (below, column)
            taken.add(spot)
            own = page.shown(spot).text
            found.append(
                Found(
                    spot,
                    number,
                    (*label.names, *symbols),
                    tuple(u for u in (unit, *units, own) if u),
                    str(page.values[row, column]),
                    block=-row,
                    lane=below,
                    section=section,
                    section_row=row,
                    head=name,
                    in_text=isinstance(value, str),
                )
            )
        rows_read += 1
        below += 1
    lanes = {f.lane for f in found}
    if len(lanes) == 1:
        for entry in found:
            entry.lane = None
    return found


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
