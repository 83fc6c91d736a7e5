"""A workbook that somebody else wrote, checked: read, units followed through its formulas, numbers recomputed."""

from __future__ import annotations

import os
from collections.abc import Iterable, Sequence
from dataclasses import replace
from pathlib import Path

from cellfuncs import __version__
from cellfuncs.books import inspect
from cellfuncs.cases import labels
from cellfuncs.checks.finding import SEVERITIES, Finding
from cellfuncs.checks.judge import judge
from cellfuncs.checks.references import References
from cellfuncs.checks.stated import Stated
from cellfuncs.sheets import own_formulas
from cellfuncs.sheets.consequences import Consequences
from cellfuncs.sheets.dimensions import judge as units
from cellfuncs.sheets.inherited.page import Page, Spot
from cellfuncs.sheets.inherited.reading import MOST_NOTES, Reading, read_book
from cellfuncs.sheets.inherited.remarks import has_remark
from cellfuncs.sheets.reporting.report import Report, excerpt

# causes that say less than what the units of a formula tell
_WEAK = frozenset(("unknown", "typing-slip", "hard-coded"))
# what a calculation is made for, wherever it stands
_TOTALS = frozenset(("total_pressure_drop", "overall_coefficient", "clean_coefficient", "duty", "heat_loss", "head"))
_SURE = 0.75
_MOST_FINDINGS = 500
_MOST_FOLLOWED = 20  # findings whose consequences are calculated


def check_book(path: str | Path | bytes, name: str = "") -> Report:
    """Check a workbook (.xlsx, .xlsm); raises BookRefused with one sentence where it cannot be read.

    ``path`` may be the file's bytes; ``name`` is what the report calls it.
    """
    reading = read_book(inspect(path))
    report = checked(reading)
    report.workbook = name or (Path(path).name if not isinstance(path, bytes) else "")
    return report


def checked(reading: Reading) -> Report:
    """The report on a workbook that was read."""
    found, agreed, broken = _judged(reading)
    findings = _together(found, units.findings(reading), {cell for cell, _ in agreed})
    findings += [f for f in own_formulas.findings(reading) if f.cell not in {other.cell for other in findings}]
    final = _final(reading)
    consequences = Consequences(reading, final)
    findings = _origins(findings, consequences)
    references = References(reading.cases, reading.graph)
    findings = [
        f if f.inherited else replace(f, inherited=tuple(c for c in references.below(f.cell) if c != f.cell))
        for f in findings
    ]
    order = {cell: place for place, cell in enumerate(reading.quantities)}
    findings.sort(key=lambda f: (SEVERITIES.index(f.severity), order.get(f.cell, len(order))))
    wrong = {f.cell for f in findings} | {cell for f in findings for cell in f.inherited if f.severity == "error"}
    words = {cell: labels.dictionary()[q.stated.key].label for cell, q in reading.quantities.items()}
    notes = [*broken, *reading.notes.notes][:MOST_NOTES]
    if not reading.quantities:
        notes = [*notes, ("", "no quantity was recognised in this workbook")]
    changes = {f.cell: found for f in findings[:_MOST_FOLLOWED] if (found := consequences.of(f))}
    return Report(
        workbook="",
        version=__version__,
        findings=findings[:_MOST_FINDINGS],
        agreed=[(cell, words[cell]) for cell in dict.fromkeys(c for c, _ in agreed) if cell not in wrong],
        not_understood=notes,
        cases=reading.cases,
        excerpts=_excerpts(reading, findings[:_MOST_FINDINGS]),
        labels={cell: quantity.stated.label for cell, quantity in reading.quantities.items()},
        final=final,
        changes=changes,
        units={cell: quantity.stated.unit for cell, quantity in reading.quantities.items()},
    )


def _judged(reading: Reading) -> tuple[list[Finding], list[tuple[str, str]], list[tuple[str, str]]]:
    """Findings and cells that agree; cases that the program itself breaks off at, told as remarks.

    One strange case must not take the rest of the report along.
    """
    try:
        return *judge(reading.cases, reading.graph), []
    except Exception:
        if os.environ.get("CELLFUNCS_TRACEBACK"):
            raise
    found: list[Finding] = []
    agreed: list[tuple[str, str]] = []
    broken: list[tuple[str, str]] = []
    for case in reading.cases:
        try:
            findings, agrees = judge([case], reading.graph)
        except Exception as error:
            first = next((entry.cell for entry in case.all()), "")
            why = f"{type(error).__name__}: {error}"
            broken.append((first, f"{case.name}: not recomputed, an error of the program itself ({why})"[:200]))
            continue
        found += findings
        agreed += agrees
    return found, agreed, broken


def _together(recomputed: Iterable[Finding], of_units: Iterable[Finding], agreed: set[str]) -> list[Finding]:
    """One finding a cell: numbers from recomputing, and the cause that says most."""
    by_cell: dict[str, Finding] = {}
    for finding in recomputed:
        other = by_cell.get(finding.cell)
        if other is None or finding.confidence > other.confidence:
            by_cell[finding.cell] = finding
    for finding in of_units:
        other = by_cell.get(finding.cell)
        if other is None:
            # a number that agrees with what follows from its inputs has the right units too
            if finding.cell not in agreed:
                by_cell[finding.cell] = finding
        elif other.code == finding.code:
            by_cell[finding.cell] = replace(other, confidence=max(other.confidence, finding.confidence))
        elif other.code == "unknown" and other.severity == "error" and finding.code == "unit-factor":
            # the number itself is off by no factor of units, whatever stands in its formula
            continue
        elif other.code in _WEAK or other.severity != "error" or _says_more(finding, other):
            by_cell[finding.cell] = replace(
                finding,
                recomputed=other.recomputed,
                reasoning=(*finding.reasoning, *other.reasoning),
                inherited=other.inherited,
                case=other.case,
            )
    return list(by_cell.values())


def _says_more(of_units: Finding, recomputed: Finding) -> bool:
    """Units that do not fit explain a number better than a factor that happens to give it."""
    return of_units.code == "dimension-mismatch" and recomputed.code == "unit-factor" and recomputed.confidence < _SURE


def _origins(findings: list[Finding], consequences: Consequences) -> list[Finding]:
    """Findings without those that come out right when another one is mended; they are listed under that one."""
    if not 1 < len(findings) <= _MOST_FOLLOWED:
        return findings
    kept: list[Finding] = []
    explained: set[str] = set()
    for finding in findings:
        mine = [other.cell for other in findings if consequences.explains(finding, other)]
        explained.update(mine)
        if mine and finding.inherited:
            finding = replace(finding, inherited=tuple(dict.fromkeys((*finding.inherited, *mine))))
        kept.append(finding)
    return [finding for finding in kept if finding.cell not in explained]


def _final(reading: Reading) -> tuple[str, ...]:
    """The results of a workbook: totals and what a remark stands beside, then labelled formulas that no other uses."""
    used = {source for sources in reading.graph.values() for source in sources}
    computed = {cell: quantity for cell, quantity in reading.quantities.items() if not quantity.stated.typed}
    pages = {page.name: page for page in reading.pages}
    weighty = [cell for cell, q in computed.items() if _is_total(q.stated) or has_remark(pages[q.page], q.found.spot)]
    return tuple(dict.fromkeys((*weighty, *(cell for cell in computed if cell not in used))))


def _is_total(stated: Stated) -> bool:
    return stated.key in _TOTALS or "total" in stated.label.casefold().split()


def _excerpts(reading: Reading, findings: Sequence[Finding]) -> dict:
    pages = {page.name: page for page in reading.pages}
    found = {}
    for finding in findings:
        place = place_of(finding.cell, pages)
        if place is not None:
            found[finding.cell] = excerpt(*place)
    return found


def place_of(cell: str, pages: dict[str, Page]) -> tuple[Page, Spot] | None:
    """The page and place of ``Sheet1!C7``."""
    from cellfuncs.books.grid import rectangle

    sheet, _, place = cell.rpartition("!")
    area = rectangle(place)
    return (pages[sheet], area[:2]) if area and sheet in pages else None
