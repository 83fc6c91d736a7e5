"""What a wrong number does to the results that rest on it: these calculated anew with the right one in its place.

Only the formulas between the two are handed to the engine, with the stored values of all else; where the engine does
not give the stored result for the stored number, nothing is said.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from cellfuncs.books import what_if
from cellfuncs.checks.finding import Finding
from cellfuncs.sheets.inherited.links import Links
from cellfuncs.sheets.inherited.reading import Reading

MOST_FORMULAS = 400  # between a wrong number and the results
_SAME = 1e-6  # relative
_COMES_OUT = 0.02  # relative, between a result calculated anew and what a relation gives

Results = Mapping[str, tuple[float, float]]  # a cell, as stored and as it would be


class Consequences:
    """The results of a workbook with other numbers in it."""

    def __init__(self, reading: Reading, final: Sequence[str]) -> None:
        self.reading, self.final = reading, tuple(final)
        self.links: Links = reading.links

    def of(self, finding: Finding) -> Results:
        """The results that change with a finding, weightiest first; nothing where they cannot be calculated."""
        resting = set(self.links.resting_on([finding.cell], MOST_FORMULAS))
        wanted = [cell for cell in self.final if cell in resting]
        changed = self._changed(finding, [cell for cell in wanted if cell != finding.cell])
        return {cell: pair for cell, pair in changed.items() if not math.isclose(*pair, rel_tol=_SAME)}

    def explains(self, finding: Finding, other: Finding) -> bool:
        """Whether ``other`` is wrong only because it rests on ``finding``: mend that, and it comes out right."""
        right = self._right(other)
        if right is None or finding.cell == other.cell:
            return False
        if other.cell not in self.links.resting_on([finding.cell], MOST_FORMULAS):
            return False
        changed = self._changed(finding, [other.cell]).get(other.cell)
        return changed is not None and math.isclose(changed[1], right, rel_tol=_COMES_OUT)

    def _right(self, finding: Finding) -> float | None:
        """The number that comes out, as the cell would store it."""
        stored = self._stored(finding.cell)
        if finding.recomputed is None or not finding.stated or stored is None:
            return None
        right = finding.recomputed * (stored / finding.stated)
        return right if math.isfinite(right) else None

    def _changed(self, finding: Finding, wanted: Sequence[str]) -> Results:
        """Some results as they are stored, and as they would be with the right number in a finding's cell."""
        right = self._right(finding)
        formulas = [c for c in self.links.resting_on([finding.cell], MOST_FORMULAS) if c != finding.cell]
        if right is None or not wanted or len(formulas) > MOST_FORMULAS:
            return {}
        before = self._calculated(finding.cell, self._stored(finding.cell), formulas, wanted)
        after = self._calculated(finding.cell, right, formulas, wanted)
        return {
            cell: (before[cell], after[cell])
            for cell in wanted
            if cell in before and cell in after and self._is_stored(cell, before[cell])
        }

    def _stored(self, cell: str) -> float | None:
        sheet, _, _ = cell.rpartition("!")
        place = self.links.place(cell)
        value = self.links.pages[sheet].values.get(place) if sheet in self.links.pages and place else None
        return value if isinstance(value, float) else None

    def _is_stored(self, cell: str, value: float) -> bool:
        stored = self._stored(cell)
        return stored is not None and math.isclose(stored, value, rel_tol=_SAME, abs_tol=1e-300)

    def _calculated(self, cell: str, number: float, formulas: Sequence[str], wanted: Sequence[str]) -> dict[str, float]:
        """The wanted results with a number in a cell."""
        inside = set(formulas)
        given = {source for formula in formulas for source in self.reading.graph[formula]} - inside
        values = {source: number if source == cell else self._stored(source) for source in given}
        texts = {self._key(f): self.links.without_names(self.links.formula(f)[0], self._key(f)[0]) for f in formulas}
        known = {self._key(source): value for source, value in values.items() if value is not None}
        found = what_if.calculated(texts, known, [self._key(result) for result in wanted])
        return {result: found[self._key(result)] for result in wanted if self._key(result) in found}

    def _key(self, cell: str) -> what_if.Cell:
        return (cell.rpartition("!")[0], *self.links.place(cell))
