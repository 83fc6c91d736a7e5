"""Which formulas change when certain others do: the reach of a set of cells through all references."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from typing import Any

from cellfuncs.books.grid import Area

Place = tuple[str, Area]  # a sheet's name in small letters, and an area of it

_SMALL = 4096  # cells of an area that are looked up one by one


class Readers:
    """Who reads what. Built once; :meth:`reached` walks from some formulas to all that depend on them."""

    def __init__(self, reads: Sequence[Iterable[Place]]) -> None:
        self._cells: dict[tuple[str, int, int], list[int]] = defaultdict(list)
        ranges: dict[str, dict[Area, list[int]]] = defaultdict(lambda: defaultdict(list))
        for reader, places in enumerate(reads):
            for sheet, area in places:
                if area[:2] == area[2:]:
                    self._cells[sheet, area[0], area[1]].append(reader)
                else:
                    ranges[sheet][area].append(reader)
        self._ranges = {sheet: dict(areas) for sheet, areas in ranges.items()}

    def reached(self, start: Iterable[int], writes: Sequence[Sequence[Place]]) -> set[int]:
        """All formulas that depend on those in `start`, and these themselves; `writes` says where each one writes."""
        import numpy as np

        reached = set(start)
        waiting = list(reached)
        untouched = {
            sheet: _Untouched(np.array(list(areas), dtype=np.int64), list(areas.values()))
            for sheet, areas in self._ranges.items()
        }
        while waiting:
            found: set[int] = set()
            for sheet, area in writes[waiting.pop()]:
                found.update(self._cell_readers(sheet, area))
                if sheet in untouched:
                    found.update(untouched[sheet].take(area))
            new = found - reached
            reached |= new
            waiting.extend(new)
        return reached

    def _cell_readers(self, sheet: str, area: Area) -> Iterable[int]:
        top, left, bottom, right = area
        if (bottom - top + 1) * (right - left + 1) <= _SMALL:
            places = ((sheet, row, column) for row in range(top, bottom + 1) for column in range(left, right + 1))
            return (reader for place in places for reader in self._cells.get(place, ()))
        return (
            reader
            for (name, row, column), readers in self._cells.items()
            if name == sheet and top <= row <= bottom and left <= column <= right
            for reader in readers
        )


class _Untouched:
    """The ranges of a sheet that nothing has touched yet: their corners as one table, thinned out now and then."""

    def __init__(self, corners: Any, readers: list[list[int]]) -> None:
        self.corners, self.readers = corners, readers
        self.gone = 0

    def take(self, area: Area) -> set[int]:
        """The readers of all ranges that an area touches; these ranges are taken out."""
        corners = self.corners
        top, left, bottom, right = area
        hit = (corners[:, 0] <= bottom) & (corners[:, 2] >= top) & (corners[:, 1] <= right) & (corners[:, 3] >= left)
        numbers = hit.nonzero()[0].tolist()
        if not numbers:
            return set()
        found = {reader for number in numbers for reader in self.readers[number]}
        corners[hit, 2] = -1  # ends before it begins: touches nothing any more
        self.gone += len(numbers)
        if 2 * self.gone > len(self.readers):
            keep = corners[:, 2] >= 0
            self.corners = corners[keep]
            self.readers = [readers for readers, kept in zip(self.readers, keep.tolist(), strict=True) if kept]
            self.gone = 0
        return found
