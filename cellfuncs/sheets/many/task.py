"""One workbook to check, and what became of it."""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from cellfuncs.sheets.reporting.report import Report

CHECKED, REFUSED, BROKEN = "checked", "refused", "broken off"


@dataclass(frozen=True)
class Task:
    """A file with what is wanted of it (``json``, ``html``, ``annotate``); ``content`` travels where no path does."""

    path: str
    wanted: tuple[str, ...] = ()
    content: bytes | None = None


@dataclass
class Done:
    """The outcome: a report, or why there is none; outputs by what was wanted."""

    path: str
    state: str
    message: str = ""
    report: Report | None = None
    outputs: dict[str, bytes] = field(default_factory=dict)
    seconds: float = 0.0

    def row(self) -> dict[str, Any]:
        """The outcome in a line of a summary."""
        report = self.report
        first = report.findings[0] if report and report.findings else None
        return {
            "workbook": self.path,
            "state": self.state,
            "errors": report.count("error") if report else 0,
            "warnings": report.count("warning") if report else 0,
            "notes": report.count("note") if report else 0,
            "agreed": len(report.agreed) if report else 0,
            "read": len(report.labels) if report else 0,
            "cell": first.cell if first else "",
            "cause": first.code if first else "",
            "message": first.message if first else self.message,
            "seconds": round(self.seconds, 2),
        }


def examine(task: Task) -> Done:
    """Check one workbook and make its outputs; raises BookRefused where it cannot be read."""
    from cellfuncs.books import inspect
    from cellfuncs.sheets.check import checked
    from cellfuncs.sheets.inherited.reading import read_book

    book = inspect(Path(task.path) if task.content is None else task.content)
    report = checked(read_book(book))
    report.workbook = Path(task.path).name
    outputs: dict[str, bytes] = {}
    if "json" in task.wanted:
        from cellfuncs.sheets.reporting.written import as_json

        outputs["json"] = as_json(report).encode()
    if "html" in task.wanted:
        from cellfuncs.sheets.reporting.page import as_html

        outputs["html"] = as_html(report).encode()
    if "annotate" in task.wanted:
        from cellfuncs.sheets.reporting.annotated import annotated

        outputs["annotate"] = annotated(book, report)
    return Done(task.path, CHECKED, report=report, outputs=outputs)
