"""The report of a check: findings with the rows around them, what agreed, what was not understood, the cases."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from cellfuncs.books.grid import column_letters
from cellfuncs.checks.finding import SEVERITIES, Finding
from cellfuncs.checks.shown import number
from cellfuncs.checks.stated import SheetCase
from cellfuncs.sheets.inherited.formats import Shown
from cellfuncs.sheets.inherited.page import Page, Spot

ROWS_AROUND, MOST_COLUMNS = 2, 8
LONGEST_TEXT = 60
MOST_RESULTS = 4


@dataclass(frozen=True)
class Line:
    """One row of an excerpt: its number, the texts of its cells, and which of them is the finding's."""

    number: int
    cells: tuple[str, ...]
    marked: int | None


@dataclass(frozen=True)
class Excerpt:
    """Some rows of a sheet around a cell: the letters of the columns, and the rows."""

    sheet: str
    columns: tuple[str, ...]
    lines: tuple[Line, ...]


@dataclass
class Report:
    """All that a check of one workbook says. Nothing in it refers to the workbook any more."""

    workbook: str
    version: str
    findings: list[Finding] = field(default_factory=list)
    agreed: list[tuple[str, str]] = field(default_factory=list)
    not_understood: list[tuple[str, str]] = field(default_factory=list)
    cases: list[SheetCase] = field(default_factory=list)
    excerpts: dict[str, Excerpt] = field(default_factory=dict)
    labels: dict[str, str] = field(default_factory=dict)
    final: tuple[str, ...] = ()
    changes: dict[str, Mapping[str, tuple[float, float]]] = field(default_factory=dict)
    units: dict[str, str] = field(default_factory=dict)

    def count(self, severity: str) -> int:
        """How many findings have a severity."""
        return sum(finding.severity == severity for finding in self.findings)

    @property
    def has_errors(self) -> bool:
        return self.count("error") > 0

    def name_of(self, cell: str) -> str:
        """``Area (Sheet1!B10)``, or the cell alone where it has no label."""
        label = self.labels.get(cell)
        return f"{label} ({cell})" if label else cell

    def consequence(self, finding: Finding) -> str:
        """Which results at the end of the sheet rest on a finding, and what they would be without it."""
        changed = self.changes.get(finding.cell)
        if changed:
            return "; ".join(self._change(cell, *pair) for cell, pair in list(changed.items())[:MOST_RESULTS])
        reached = [cell for cell in finding.inherited if cell in self.final] or list(finding.inherited)
        if reached:
            return ", ".join(map(self.name_of, reached[:MOST_RESULTS])) + (" …" if len(reached) > MOST_RESULTS else "")
        return "nothing else in the workbook rests on it"

    def _change(self, cell: str, before: float, after: float) -> str:
        unit = self.units.get(cell, "").strip("-– ")
        return f"{self.name_of(cell)} {number(before)} would be {number(after)} {unit}".strip()

    def headline(self) -> str:
        """The outcome in a line."""
        counts = [(self.count(s), s) for s in SEVERITIES]
        said = ", ".join(f"{n} {s}{'s' if n != 1 else ''}" for n, s in counts if n) or "nothing found"
        read, agree, remarks = len(self.labels), len(self.agreed), len(self.not_understood)
        return f"{said}; of {read} labelled numbers {agree} agree with others; {remarks} remarks"


def excerpt(page: Page, spot: Spot) -> Excerpt:
    """The rows around a cell, as a reader of the sheet sees them."""
    row, column = spot
    top, bottom = max(1, row - ROWS_AROUND), row + ROWS_AROUND
    filled = [c for r, c in _near(page, top, bottom) if abs(c - column) < MOST_COLUMNS]
    left = max(min([*filled, column]), column - MOST_COLUMNS + 2, 1)
    right = min(max([*filled, column]), left + MOST_COLUMNS - 1)
    lines = []
    for at in range(top, bottom + 1):
        cells = tuple(cell_text(page, (at, c)) for c in range(left, right + 1))
        lines.append(Line(at, cells, column - left if at == row else None))
    return Excerpt(page.name, tuple(column_letters(c) for c in range(left, right + 1)), tuple(lines))


def _near(page: Page, top: int, bottom: int) -> Iterable[Spot]:
    return (
        (row, column)
        for row in range(top, bottom + 1)
        for column in range(1, 60)
        if page.values.get((row, column)) is not None
    )


def cell_text(page: Page, spot: Spot) -> str:
    """A cell as it shows: texts cut, numbers in their format."""
    value = page.values.get(spot)
    if value is None:
        return ""
    if isinstance(value, float):
        return number_text(value, page.shown(spot))
    text = " ".join(str(value).split())
    return text if len(text) <= LONGEST_TEXT else text[: LONGEST_TEXT - 1] + "…"


def number_text(value: float, shown: Shown) -> str:
    """A number as its format shows it."""
    scaled = value / shown.scale * (100.0 if shown.percent else 1.0)
    if shown.decimals is None:
        text = f"{scaled:.10g}"
    elif shown.exponent:
        text = f"{scaled:.{shown.decimals}E}"
    else:
        text = f"{scaled:.{min(shown.decimals, 15)}f}"
    return f"{text}{' %' if shown.percent else ''}{' ' + shown.text if shown.text else ''}"
