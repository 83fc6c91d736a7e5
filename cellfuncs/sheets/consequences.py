"""What a wrong number does to the results that rest on it: these calculated anew with the right one in its place.

Only the formulas between the two are handed to the engine, with the stored values of all else; where the engine does
not give the stored result for the stored number, nothing is said.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from cellfuncs.checks.finding import Finding
from cellfuncs.sheets.inherited.links import Links
from cellfuncs.sheets.inherited.reading import Reading

MOST_FORMULAS = 400  # between a wrong number and the results
_SAME = 1e-6  # relative

Results = Mapping[str, tuple[float, float]]  # a cell, as stored and as it would be


class Consequences:
    """The results of a workbook with other numbers in it."""

    def __init__(self, reading: Reading, final: Sequence[str]) -> None:
        self.reading, self.final = reading, set(final)
        self.links: Links = reading.links
        users: dict[str, list[str]] = {}
        for cell, sources in reading.graph.items():
            for source in sources:
                users.setdefault(source, []).append(cell)
        self.users = users

    def of(self, finding: Finding) -> Results:
        """The final results that change with a finding; nothing where they cannot be calculated."""
        stored = self._stored(finding.cell)
        if finding.recomputed is None or finding.stated is None or stored is None or not finding.stated:
            return {}
        right = finding.recomputed * (stored / finding.stated)
        if not math.isfinite(right):
            return {}
        formulas = self._between(finding.cell)
        wanted = [cell for cell in formulas if cell in self.final]
        if not wanted or len(formulas) > MOST_FORMULAS:
            return {}
        before = self._calculated(finding.cell, stored, formulas, wanted)
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

    def _between(self, cell: str) -> list[str]:
        """All formulas that rest on a cell."""
        seen: dict[str, None] = {}
        waiting = list(self.users.get(cell, ()))
        while waiting and len(seen) <= MOST_FORMULAS:
            at = waiting.pop()
            if at not in seen and at != cell:
                seen[at] = None
                waiting.extend(self.users.get(at, ()))
        return list(seen)

    def _calculated(self, cell: str, number: float, formulas: Sequence[str], wanted: Sequence[str]) -> dict[str, float]:
        import formualizer

        inside = set(formulas)
        book = formualizer.Workbook()
        for sheet in dict.fromkeys(self.links.pages):
            book.add_sheet(sheet)
        given = {source for formula in formulas for source in self.reading.graph[formula]} - inside
        found: dict[str, float] = {}
        try:
            for source in given:
                self._put(book, source, number if source == cell else self._stored(source))
            for formula in formulas:
                sheet, _, _ = formula.rpartition("!")
                row, column = self.links.place(formula)
                text, _ = self.links.formula(formula)
                book.set_formula(sheet, row, column, self.links.without_names(text, sheet))
            for result in wanted:
                sheet, _, _ = result.rpartition("!")
                value = book.evaluate_cell(sheet, *self.links.place(result))
                if isinstance(value, (int, float)) and math.isfinite(value):
                    found[result] = float(value)
        except Exception:  # whatever a strange formula makes of the engine, the finding stands without it
            return {}
        return found

    def _put(self, book, cell: str, value: float | None) -> None:
        sheet, _, _ = cell.rpartition("!")
        if value is not None:
            row, column = self.links.place(cell)
            book.set_value(sheet, row, column, value)
