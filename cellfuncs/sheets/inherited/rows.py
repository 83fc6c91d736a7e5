"""Numbers beside their labels: ``label | value | unit``, with a symbol, with the unit before the value, or with one
column a case."""

from __future__ import annotations

from bisect import bisect_left
from collections import Counter, defaultdict

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.found import Found
from cellfuncs.sheets.inherited.page import Page, Spot, is_number

_WIDEST_GAP = 4  # blank columns between a label and its value
_FARTHEST = 60  # cells that are looked through
_LONGEST_RUN = 200  # rows between a number and the head of its column
_JOINTS = frozenset(("=", ":", "≈", "~", ":=", "->", "→", "…", "..."))
_NO_CASE = frozenset(
    ("min", "max", "minimum", "maximum", "limit", "limits", "tolerance", "±", "source", "ref", "reference", "no", "#",
     "row", "line", "item", "page")
)  # fmt: skip


def rows_in(page: Page, taken: set[Spot]) -> list[Found]:
    """The numbers that stand beside a label, of all cells that are not taken."""
    by_row: dict[int, list[int]] = defaultdict(list)
    for row, column in page.values:
        if (row, column) not in taken:
            by_row[row].append(column)
    found: list[Found] = []
    for row in sorted(by_row):
        for column in sorted(by_row[row]):
            entry = _entry(page, (row, column))
            if entry is not None:
                found.append(entry)
    _sections(page, found, taken)
    return _lanes(page, found)


def _entry(page: Page, spot: Spot) -> Found | None:
    value = page.values[spot]
    if isinstance(value, str):
        if spot in page.formulas:
            return None
        assigned = texts.assignment_in(value)
        if assigned is not None:
            label = texts.label_in(assigned[0])
            unit = assigned[1].unit_text or label.unit
            return Found(spot, assigned[1].value, label.names, (unit,) if unit else (), value, spot[1], in_text=True)
        reading = texts.quantity_in(value)
        if reading is None:
            return None
        number, own = reading.value, reading.unit_text
    elif is_number(value):
        if page.shown(spot).date:
            return None
        number, own = value, page.shown(spot).text
    else:
        return None
    left = _left(page, spot)
    if left is None:
        return None
    names, column, between, written = left
    label_units = [label.unit for label in map(texts.label_in, names) if label.unit]
    keys = {k.key for name in names for n in texts.label_in(name).names for k in texts.known(n)}
    right = _right(page, spot, keys)
    units = [u for u in (own, right, *between, *label_units) if u]
    looked_up = tuple(dict.fromkeys(n for name in names for n in texts.label_in(name).names))
    return Found(spot, number, looked_up, tuple(dict.fromkeys(units)), written, column, in_text=isinstance(value, str))


def _left(page: Page, spot: Spot) -> tuple[list[str], int, list[str], str] | None:
    """The texts that label a cell, the column of the foremost, the units between, and the label as written."""
    row, column = spot
    names: list[str] = []
    units: list[str] = []
    at, gap, looked = column - 1, 0, 0
    label_column = 0
    while at >= 1 and gap <= _WIDEST_GAP and looked < _FARTHEST:
        covered = page.covers.get((row, at))
        value = page.values.get(covered) if covered else page.values.get((row, at))
        here = at
        at = covered[1] - 1 if covered else at - 1
        if value is None:
            gap += 1
            continue
        gap_before, gap, looked = gap > 1, 0, looked + 1
        if not isinstance(value, str):
            if names:
                break
            continue
        text = value.strip()
        if text in _JOINTS or texts.quantity_in(text) is not None:
            if names and text not in _JOINTS:
                break
            continue
        if texts.assignment_in(text) is not None:
            break
        label = texts.label_in(text)
        known = any(map(texts.known, label.names))
        if texts.is_unit(text) and not names and not _is_label_here(page, row, here, known):
            units.append(text)
            continue
        if names and (gap_before or (texts.is_unit(text) and not known)):
            break
        if texts.is_symbol(text) and not texts.is_name(text):
            names.insert(0, text) if names and not any(map(texts.known, names)) else names.append(text)
            label_column = here
            if len(names) >= 2:
                break
            continue
        names.insert(0, text) if known or not names else names.append(text)
        label_column = here
        break
    if not names:
        return None
    keys = {k.key for name in names for n in texts.label_in(name).names for k in texts.known(n)}
    symbols = [text for text in units if keys & set(labels.in_sheets(text.rstrip("=: ")))]
    units = [texts.bare_unit(text) for text in units if text not in symbols]
    return [*names, *symbols], label_column, units, max(names, key=len)


def _is_label_here(page: Page, row: int, column: int, known: bool) -> bool:
    """Whether a text that reads as a unit is a symbol instead: it is known, and nothing longer stands left of it."""
    if not known:
        return False
    for step in range(1, _WIDEST_GAP):
        value = page.at(row, column - step) if column > step else None
        if isinstance(value, str):
            return False
        if value is not None:
            break
    return True


def _right(page: Page, spot: Spot, keys: set[str]) -> str:
    """The unit right of a value, or behind the last number of its row."""
    row, column = spot
    at = column + 1
    first = page.at(row, at)
    while is_number(page.at(row, at)) and at - column < _FARTHEST:
        at += 1
    value = page.at(row, at)
    if not isinstance(value, str) or (row, at) in page.formulas or not texts.is_unit(value):
        return ""
    unit = texts.bare_unit(value)
    kinds = [labels.dictionary()[key].kind for key in keys]
    fits = any(kind and quantities.unit_fits(unit, kind) for kind in kinds)
    if fits:
        return unit
    # a symbol that labels what stands right of it
    if texts.known(value) and is_number(page.at(row, at + 1)):
        return ""
    return unit if first is value or not keys else ""


def _sections(page: Page, found: list[Found], taken: set[Spot]) -> None:
    """Give each entry the heading over its block: the nearest text above in its label's column or beside it that
    labels no number."""
    labelled = {(entry.spot[0], entry.block) for entry in found}
    rows_with = {entry.spot[0] for entry in found}
    headings: dict[int, list[tuple[int, str]]] = defaultdict(list)
    for (row, column), value in page.values.items():
        if not isinstance(value, str) or (row, column) in taken or (row, column) in page.formulas:
            continue
        if (row, column) in labelled or len(value) > 80 or texts.quantity_in(value) is not None:
            continue
        beside = [page.values.get((row, column + step)) for step in (1, 2, 3)]
        if row in rows_with and any(is_number(v) for v in beside):
            continue
        if isinstance(beside[0], str) or isinstance(beside[1], str):
            continue  # a row of texts, or the head of a table
        headings[column].append((row, value.strip()))
    for column in headings:
        headings[column].sort()
    starts = {block: _starts(page, block) for block in {entry.block for entry in found}}
    for entry in found:
        best = (0, "")
        for column in (entry.block - 1, entry.block):
            above = headings.get(column, [])
            place = bisect_left(above, (entry.spot[0], ""))
            if place and above[place - 1] > best:
                best = above[place - 1]
        entry.section_row, entry.section = max(best[0], starts[entry.block][entry.spot[0]]), best[1][:80]


def _starts(page: Page, block: int) -> dict[int, int]:
    """For each row the first row of its stretch without a blank row, seen from a column of labels."""
    filled = sorted({row for row, column in page.values if block <= column <= block + _WIDEST_GAP})
    found: dict[int, int] = {}
    for row in filled:
        found[row] = found.get(row - 1, row)
    return found


def _lanes(page: Page, found: list[Found]) -> list[Found]:
    """Tell columns that are cases of their own; drop numbers that only stand behind others (limits, remarks)."""
    blocks: dict[tuple[int, int], list[Found]] = defaultdict(list)
    for entry in found:
        blocks[entry.block, entry.section_row].append(entry)
    kept: list[Found] = []
    columns_of: dict[int, Counter[int]] = defaultdict(Counter)
    for entry in found:
        if entry.spot[1] != entry.block:
            columns_of[entry.block][entry.spot[1]] += 1
    for (block, _), entries in blocks.items():
        many = _many(entries)
        counts = columns_of[block]
        most = max(counts.values(), default=0)
        lanes = sorted(c for c, n in counts.items() if n >= max(2, 0.3 * most) and _makes_case(page, entries, c))
        for entry in entries:
            column = entry.spot[1]
            if column == block or len(lanes) < 2 or not many:
                first = min((e.spot[1] for e in entries if e.spot[0] == entry.spot[0]), default=column)
                if column == first or (entry.units and column in lanes):
                    kept.append(entry)
            elif column in lanes:
                row = [e for e in entries if e.spot[0] == entry.spot[0]]
                entry.head = _head(page, entry.spot)
                entry.lane = column if len(row) > 1 or column != lanes[0] else None
                kept.append(entry)
    return sorted(kept, key=lambda entry: entry.spot)


def _many(entries: list[Found]) -> bool:
    """Whether several numbers of a row are cases, not one value in two units."""
    rows: dict[int, list[Found]] = defaultdict(list)
    for entry in entries:
        rows[entry.spot[0]].append(entry)
    several = [row for row in rows.values() if len(row) > 1]
    units = [row for row in several if len({e.units[:1] for e in row}) > 1]
    return len(several) > 2 * len(units)


def _makes_case(page: Page, entries: list[Found], column: int) -> bool:
    entry = next((e for e in entries if e.spot[1] == column), None)
    return entry is None or texts.labels.plain(_head(page, entry.spot)) not in _NO_CASE


def _head(page: Page, spot: Spot) -> str:
    """The text over a column of numbers."""
    row, column = spot
    for above in range(row - 1, max(0, row - _LONGEST_RUN), -1):
        value = page.at(above, column)
        if isinstance(value, str) and texts.quantity_in(value) is None:
            return value.strip()[:60]
    return ""
