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


def show(reports: Sequence[Report], out: TextIO, width: int | None = None) -> None:
    """Write the reports as tables; texts of the workbook are shown as they are, never as markup."""
    from rich.console import Console
    from rich.table import Table
    from rich.text import Text

    console = Console(file=out, width=width, highlight=False, markup=False, soft_wrap=False)
    for report in reports:
        console.print(Text(f"{printable(report.workbook)}: {report.headline()}", style="bold"))
        if report.findings:
            table = Table(box=None, pad_edge=False, padding=(0, 2, 1, 0))
            for head, least in (("cell", 12), ("stated", 9), ("comes out", 9), ("cause", 24), ("rests on it", 14)):
                table.add_column(head, min_width=least, overflow="fold", header_style="underline")
            for finding in report.findings:
                cells = (_where(finding), _stated(finding), _recomputed(finding), _cause(finding))
                texts = [*cells, report.consequence(finding)]
                table.add_row(*(Text(printable(text), style=_WEIGHT[finding.severity]) for text in texts))
            console.print(table)
        _remarks(report, console, Text)


def _where(finding: Finding) -> str:
    return f"{finding.cell} {finding.severity}: {finding.quantity}"


def _stated(finding: Finding) -> str:
    return "" if finding.stated is None else f"{number(finding.stated)} {finding.unit}".strip()


def _recomputed(finding: Finding) -> str:
    return "" if finding.recomputed is None else f"{number(finding.recomputed)} {finding.unit}".strip()


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
