"""The report on the terminal."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TextIO

from cellfuncs.checks.finding import Finding
from cellfuncs.checks.shown import number
from cellfuncs.sheets.inherited.page import printable
from cellfuncs.sheets.reporting.report import Report

_MOST_REMARKS = 12
_WEIGHT = {"error": "bold", "warning": "", "note": "dim"}


_WIDTH = 118  # where the output is no terminal


def show(reports: Sequence[Report], out: TextIO, width: int | None = None) -> None:
    """Write the reports as tables; texts of the workbook are shown as they are, never as markup."""
    from rich.console import Console
    from rich.table import Table
    from rich.text import Text

    width = width or (None if out.isatty() else _WIDTH)
    console = Console(file=out, width=width, highlight=False, markup=False, soft_wrap=False)
    for report in reports:
        console.print(Text(f"{printable(report.workbook)}: {report.headline()}", style="bold"))
        if report.findings:
            table = Table(box=None, pad_edge=False, padding=(0, 2, 1, 0))
            for head, share in (("cell", 3), ("stated", 2), ("comes out", 2), ("cause", 5), ("rests on it", 4)):
                table.add_column(head, ratio=share, overflow="fold", header_style="underline")
            for finding in report.findings:
                numbers = (_shown(value, finding.unit) for value in (finding.stated, finding.recomputed))
                cells = (_where(finding), *numbers, _cause(finding))
                texts = [*cells, report.consequence(finding)]
                table.add_row(*(Text(printable(text), style=_WEIGHT[finding.severity]) for text in texts))
            console.print(table)
        _remarks(report, console, Text)


def _where(finding: Finding) -> str:
    return f"{finding.cell} {finding.severity}: {finding.quantity}"


def _shown(value: float | None, unit: str) -> str:
    """A number with its unit; a dash stands for none."""
    return "" if value is None else f"{number(value)} {unit.strip('-– ')}".strip()


def _cause(finding: Finding) -> str:
    return f"{finding.code}: {finding.cause}"


def _remarks(report: Report, console, text_of) -> None:
    """What was not understood, the first dozen."""
    if not report.not_understood:
        return
    console.print(text_of("Not understood or not judged:", style="bold"))
    for cell, why in report.not_understood[:_MOST_REMARKS]:
        console.print(text_of(printable(f"  {cell}  {why}"), style="dim"))
    left = len(report.not_understood) - _MOST_REMARKS
    if left > 0:
        console.print(text_of(f"  and {left} more (--json lists all)", style="dim"))
