"""Which texts of a sheet belong to which calculation on it."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence

from cellfuncs.sheets.inherited.facts import Written, written_on
from cellfuncs.sheets.inherited.gather import Group
from cellfuncs.sheets.inherited.page import Page


class Regions:
    """The texts of one sheet by the calculation among whose numbers they stand; those of none belong to all."""

    def __init__(self, page: Page, groups: Sequence[Group]) -> None:
        rows: dict[int, list[tuple[int, int, int]]] = defaultdict(list)  # row -> left, right, calculation
        for number, group in enumerate(groups):
            for top, left, bottom, right in group.areas().get(page.name, ()):
                for row in range(top, bottom + 1):
                    rows[row].append((left, right, number))
        self._own: dict[int, Written] = defaultdict(list)
        self._free: Written = []
        for spot, text in written_on(page):
            owners = {number for left, right, number in rows.get(spot[0], ()) if left <= spot[1] <= right}
            for number in owners:
                self._own[number].append((spot, text))
            if not owners:
                self._free.append((spot, text))

    def of(self, number: int) -> Written:
        """The texts that speak of a calculation, its own first."""
        return self._own[number] + self._free
