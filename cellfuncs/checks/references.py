"""Who refers to whom: the labelled cells above and below a cell, through formulas without labels."""

from collections.abc import Iterable, Mapping
from functools import cached_property

from cellfuncs.checks.stated import Graph, SheetCase, Stated

_DEEPEST = 10_000


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

    def direct(self, cell: str) -> tuple[Stated, ...]:
        """The labelled cells that a formula uses, itself or through cells without a label, in their order."""
        known = self._direct.get(cell)
        if known is None:
            found: dict[str, Stated] = {}
            waiting, seen = list(reversed(self.graph.get(cell, ()))), {cell}
            while waiting and len(seen) < _DEEPEST:
                at = waiting.pop()
                if at in seen:
                    continue
                seen.add(at)
                if at in self.by_cell:
                    found[at] = self.by_cell[at]
                else:
                    waiting.extend(reversed(self.graph.get(at, ())))
            known = self._direct[cell] = tuple(found.values())
        return known

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
    def _order(self) -> list[str]:
        return list(self.by_cell)

    def pasted(self, cell: str) -> float:
        """How much a typed number stands among formulas: 0 among inputs to 1 among results."""
        at = self.place.get(cell)
        if at is None or not self.by_cell[cell].typed:
            return 0.0
        near = [self.by_cell[c] for c in self._order[max(at - 2, 0) : at + 3] if c != cell]
        return sum(not entry.typed for entry in near) / len(near) if near else 0.0

    @cached_property
    def _users(self) -> Mapping[str, list[str]]:
        users: dict[str, list[str]] = {}
        for cell, refs in self.graph.items():
            for ref in refs:
                users.setdefault(ref, []).append(cell)
        return users

    def below(self, cell: str) -> tuple[str, ...]:
        """The labelled cells that depend on a cell, in reading order."""
        seen: set[str] = set()
        waiting = list(self._users.get(cell, ()))
        while waiting and len(seen) < _DEEPEST:
            at = waiting.pop()
            if at not in seen and at != cell:
                seen.add(at)
                waiting.extend(self._users.get(at, ()))
        return tuple(sorted((c for c in seen if c in self.place), key=self.place.__getitem__))
