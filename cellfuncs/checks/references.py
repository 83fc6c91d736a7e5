"""Who refers to whom: the labelled cells above and below a cell, through formulas without labels."""

import re
from collections.abc import Iterable, Mapping
from functools import cached_property, lru_cache

from cellfuncs.checks.stated import Graph, SheetCase, Stated

_DEEPEST = 10_000
# cells between two numbers that still count as neighbours
_FARTHEST = 4
_ADDRESS = re.compile(r"^(.*)!([A-Z]{1,3})([0-9]+)$")


@lru_cache(maxsize=20_000)
def _spot(cell: str) -> tuple[str, int, int] | None:
    """Sheet, row and column of ``Sheet1!C7``."""
    found = _ADDRESS.match(cell)
    if not found:
        return None
    column = 0
    for letter in found.group(2):
        column = column * 26 + ord(letter) - 64
    return found.group(1), int(found.group(3)), column


class References:
    """The graph of a workbook's formulas, asked about labelled cells."""

    def __init__(self, cases: Iterable[SheetCase], graph: Graph):
        self.by_cell: dict[str, Stated] = {}
        self.graph: dict[str, tuple[str, ...]] = dict(graph)
        self.place: dict[str, int] = {}
        for case in cases:
            for entry in case.all():
                self.by_cell.setdefault(entry.cell, entry)
                if entry.refs:
                    self.graph.setdefault(entry.cell, entry.refs)
        for number, cell in enumerate(self.by_cell):
            self.place[cell] = number
        self._above: dict[str, frozenset[str]] = {}
        self._direct: dict[str, tuple[Stated, ...]] = {}
        self._below: dict[str, tuple[str, ...]] = {}
        self._unread: dict[str, int] = {}

    def direct(self, cell: str) -> tuple[Stated, ...]:
        """The labelled cells that a formula uses, itself or through cells without a label, in their order."""
        known = self._direct.get(cell)
        if known is None:
            found: dict[str, Stated] = {}
            unread = 0
            waiting, seen = list(reversed(self.graph.get(cell, ()))), {cell}
            while waiting and len(seen) < _DEEPEST:
                at = waiting.pop()
                if at in seen:
                    continue
                seen.add(at)
                if at in self.by_cell:
                    found[at] = self.by_cell[at]
                elif at in self.graph:
                    waiting.extend(reversed(self.graph[at]))
                else:
                    unread += 1
            known = self._direct[cell] = tuple(found.values())
            self._unread[cell] = unread
        return known

    def unread(self, cell: str) -> int:
        """How many cells a formula uses, itself or through formulas without labels, that nobody could read."""
        self.direct(cell)
        return self._unread.get(cell, 0)

    def above(self, cell: str) -> frozenset[str]:
        """All cells that a formula depends on."""
        known = self._above.get(cell)
        if known is None:
            seen: set[str] = set()
            waiting = list(self.graph.get(cell, ()))
            while waiting and len(seen) < _DEEPEST:
                at = waiting.pop()
                if at not in seen and at != cell:
                    seen.add(at)
                    waiting.extend(self.graph.get(at, ()))
            known = self._above[cell] = frozenset(seen)
        return known

    @cached_property
    def _spots(self) -> dict[tuple[str, int, int], Stated]:
        return {spot: entry for cell, entry in self.by_cell.items() if (spot := _spot(cell))}

    def pasted(self, cell: str) -> float:
        """How much a typed number stands among formulas: 0 among inputs to 1 among results.

        What stands in the same place of other cases says most, then the numbers above and below, then those beside.
        """
        own, spot = self.by_cell.get(cell), _spot(cell)
        if own is None or spot is None or not own.typed:
            return 0.0
        upright, level = (self._near(spot, along) for along in ((1, 0), (0, 1)))
        same = [entry for entry in (*upright, *level) if entry.key == own.key]
        if any(not entry.typed for entry in same):
            return 1.0
        around = [e for e in upright if e.key != own.key] or [e for e in level if e.key != own.key]
        return sum(not entry.typed for entry in around) / len(around) if around else 0.0

    def _near(self, spot: tuple[str, int, int], along: tuple[int, int]) -> list[Stated]:
        """The two next labelled numbers on both sides, at most a few cells away."""
        sheet, row, column = spot
        found = []
        for sign in (1, -1):
            steps = range(1, _FARTHEST + 1)
            spots = [(sheet, row + sign * k * along[0], column + sign * k * along[1]) for k in steps]
            found += [self._spots[s] for s in spots if s in self._spots][:2]
        return found

    @cached_property
    def _users(self) -> Mapping[str, list[str]]:
        users: dict[str, list[str]] = {}
        for cell, refs in self.graph.items():
            for ref in refs:
                users.setdefault(ref, []).append(cell)
        return users

    def below(self, cell: str) -> tuple[str, ...]:
        """The labelled cells that depend on a cell, in reading order."""
        known = self._below.get(cell)
        if known is None:
            known = self._below[cell] = self._found_below(cell)
        return known

    def _found_below(self, cell: str) -> tuple[str, ...]:
        if cell not in self._users:
            return ()
        seen: set[str] = set()
        waiting = list(self._users.get(cell, ()))
        while waiting and len(seen) < _DEEPEST:
            at = waiting.pop()
            if at not in seen and at != cell:
                seen.add(at)
                waiting.extend(self._users.get(at, ()))
        return tuple(sorted((c for c in seen if c in self.place), key=self.place.__getitem__))
