"""Contiguous areas of some formulas, with the labels left of them and the heads above them, for a reader."""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple

from cellfuncs.books.engine import Evaluation
from cellfuncs.books.grid import area_text
from cellfuncs.books.reading import Sheet
from cellfuncs.books.strings import shared_strings
from cellfuncs.books.xmltext import Value, decoded

LOOK_LEFT, LOOK_UP = 4, 4  # how far a label or head may stand from its area

Spot = tuple[int, int]


@dataclass(frozen=True)
class FoundArea:
    """An area: sheet, range, labels by row, heads by column, values by row."""

    sheet: str
    range: str
    row_labels: tuple[str, ...]
    heads: tuple[str, ...]
    values: tuple[tuple[Value, ...], ...]


class Raw(NamedTuple):
    """A cell as it stands in the file: type mark and text; (None, None) where empty."""

    mark: str | None
    text: str | None

    @property
    def is_text(self) -> bool:
        return self.mark in ("s", "str", "inlineStr") and bool(self.text)

    @property
    def is_number(self) -> bool:
        return self.mark in (None, "n") and bool(self.text)


_EMPTY = Raw(None, None)


class Looker:
    """Looks at cells of one sheet: new values before stored ones; shared strings are looked up at the end."""

    def __init__(self, sheet: Sheet, values: dict[Spot, Value]) -> None:
        self.sheet, self.values = sheet, values
        self._raw: dict[Spot, Raw] = {}

    def raw(self, row: int, column: int) -> Raw:
        """What stands in a cell; a new value counts before the stored one."""
        spot = (row, column)
        found = self._raw.get(spot)
        if found is None:
            if row < 1 or column < 1:
                found = _EMPTY
            elif spot in self.values:
                value = self.values[spot]
                mark = "str" if isinstance(value, str) else "n" if type(value) is float else "e"
                found = _EMPTY if value is None else Raw(mark, str(value))
            else:
                found = Raw(*self.sheet.value(row, column))
            self._raw[spot] = found
        return found

    def label(self, row: int, column: int) -> Spot | None:
        """The label of a cell: the text at the left end of the cells beside it, else the number next to it, else
        the nearest text past a gap."""
        near = [(row, column - step) for step in range(1, LOOK_LEFT + 1)]
        for spot in near:
            raw = self.raw(*spot)
            if raw.is_text:
                return spot
            if not raw.is_number:
                break
        if self.raw(*near[0]).is_number:
            return near[0]
        return next((spot for spot in near if self.raw(*spot).is_text), None)

    def head(self, row: int, column: int) -> Spot | None:
        """The nearest text above a cell."""
        for step in range(1, LOOK_UP + 1):
            if self.raw(row - step, column).is_text:
                return row - step, column
        return None


def texts(
    evaluation: Evaluation, lookers: dict[str, Looker], wanted: dict[str, set[Spot]]
) -> dict[tuple[str, Spot], str]:
    """The texts of the wanted cells, shared strings looked up in one pass."""
    numbers = {
        int(raw.text)
        for name, spots in wanted.items()
        for raw in (lookers[name].raw(*spot) for spot in spots)
        if raw.mark == "s" and raw.text and raw.text.isdigit()
    }
    strings = shared_strings(evaluation.book, numbers)
    found = {}
    for name, spots in wanted.items():
        for spot in spots:
            raw = lookers[name].raw(*spot)
            if raw.mark == "s" and raw.text and raw.text.isdigit():
                found[name, spot] = strings.get(int(raw.text), "")
            elif raw.is_text:
                found[name, spot] = str(decoded("str", raw.text))
            elif raw.is_number:
                number = decoded("n", raw.text)
                found[name, spot] = f"{number:.6g}" if isinstance(number, float) else str(number)
    return found


def areas_of(evaluation: Evaluation) -> list[FoundArea]:
    """All contiguous areas of the formulas with our functions, in the order of the sheets."""
    lookers: dict[str, Looker] = {}
    wanted: dict[str, set[Spot]] = {}
    drafts = []
    for name, formulas in evaluation.ours.items():
        sheet = evaluation.sheets[name]
        values = evaluation.values.get(name, {})
        looker = lookers[name] = Looker(sheet, values)
        extents = evaluation.extents.get(name, {})
        covered: dict[Spot, Spot] = {}
        for formula in formulas:
            top, left, bottom, right = extents.get((formula.row, formula.column), formula.area)
            for row in range(top, bottom + 1):
                for column in range(left, right + 1):
                    covered[row, column] = (formula.row, formula.column)
        for spots in _connected(set(covered)):
            top, left = min(row for row, _ in spots), min(column for _, column in spots)
            bottom, right = max(row for row, _ in spots), max(column for _, column in spots)
            labels = [looker.label(row, left) for row in range(top, bottom + 1)]
            heads = [looker.head(top, column) for column in range(left, right + 1)]
            anchor = covered[top, left]
            if top < bottom and left < right and all(covered[spot] == anchor for spot in spots):
                labels, heads = [None] * len(labels), [None] * len(heads)  # a table has its own
            rows = tuple(
                tuple(
                    values.get((row, column)) if (row, column) in spots else None for column in range(left, right + 1)
                )
                for row in range(top, bottom + 1)
            )
            wanted.setdefault(name, set()).update(spot for spot in labels + heads if spot)
            drafts.append((name, (top, left, bottom, right), labels, heads, rows))
    found = texts(evaluation, lookers, wanted)
    return [
        FoundArea(
            name,
            area_text(area),
            tuple(found.get((name, spot), "") if spot else "" for spot in labels),
            tuple(found.get((name, spot), "") if spot else "" for spot in heads),
            rows,
        )
        for name, area, labels, heads, rows in drafts
    ]


def _connected(spots: set[Spot]) -> list[set[Spot]]:
    """Groups of cells that touch by a side, ordered by their first cell."""
    groups = []
    left = set(spots)
    for start in sorted(spots):
        if start not in left:
            continue
        left.discard(start)
        group, waiting = {start}, [start]
        while waiting:
            row, column = waiting.pop()
            for near in ((row - 1, column), (row + 1, column), (row, column - 1), (row, column + 1)):
                if near in left:
                    left.discard(near)
                    group.add(near)
                    waiting.append(near)
        groups.append(group)
    return groups
