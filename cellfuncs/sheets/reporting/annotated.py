"""A copy of the workbook with a note on every cell of a finding, and a sheet that lists them; all else is kept."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator

from cellfuncs.books import Book
from cellfuncs.books.added import add_sheet
from cellfuncs.books.grid import rectangle
from cellfuncs.books.notes import Note, add_notes
from cellfuncs.books.parts import Draft
from cellfuncs.checks.finding import Finding
from cellfuncs.checks.shown import number
from cellfuncs.sheets.inks import CAUTION
from cellfuncs.sheets.reporting.report import Report

AUTHOR = "Cellfuncs"
SHEET = "Findings"
_HEAD = ("no.", "sheet", "cell", "severity", "quantity", "stated", "comes out", "unit", "cause", "why", "rests on it")
_WIDTHS = (5, 16, 8, 10, 22, 14, 14, 12, 22, 60, 40)


def annotated(book: Book, report: Report) -> bytes:
    """The bytes of the copy. Texts stand as texts: none of them is a formula."""
    draft = Draft(book)
    notes: dict[str, list[Note]] = defaultdict(list)
    for place, finding in enumerate(report.findings, 1):
        sheet, _, cell = finding.cell.rpartition("!")
        area = rectangle(cell)
        if area is not None and any(part.name == sheet for part in book.sheets):
            notes[sheet].append(Note(area[0], area[1], _note(place, finding, report)))
    for sheet, listed in notes.items():
        add_notes(draft, book.sheet(sheet).part, listed, AUTHOR)
    add_sheet(draft, SHEET, _rows(report), _WIDTHS)
    return draft.container()


def _note(place: int, finding: Finding, report: Report) -> str:
    lines = [
        f"Finding {place}, {finding.severity}: {finding.message}",
        f"Likely cause: {finding.code}, {finding.cause}",
    ]
    if finding.recomputed is not None:
        lines.append(f"Comes out: {number(finding.recomputed)} {finding.unit}".rstrip())
    lines.append(f"Rests on it: {report.consequence(finding)}")
    return "\n".join(lines)


def _rows(report: Report) -> Iterator[tuple[str, ...]]:
    yield (f"Check by {AUTHOR} {report.version}: {report.headline()}",)
    yield (CAUTION,)
    yield ()
    yield _HEAD
    for place, finding in enumerate(report.findings, 1):
        sheet, _, cell = finding.cell.rpartition("!")
        yield (
            str(place), sheet, cell, finding.severity, finding.quantity, _shown(finding.stated),
            _shown(finding.recomputed), finding.unit, finding.code, finding.cause, report.consequence(finding),
        )  # fmt: skip


def _shown(value: float | None) -> str:
    return "" if value is None else number(value)
