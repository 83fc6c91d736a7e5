"""The report as one HTML page that needs nothing else and prints."""

from __future__ import annotations

from functools import lru_cache
from pathlib import Path
from typing import Any

from cellfuncs.checks.shown import number
from cellfuncs.sheets.inks import CAUTION
from cellfuncs.sheets.reporting.chart import drawing_of
from cellfuncs.sheets.reporting.report import Report

TEMPLATE = Path(__file__).parents[2] / "data" / "check_report.html"
MOST_CHARTS = 6
_MOST_AGREED = 300


@lru_cache(maxsize=1)
def _template() -> Any:
    from jinja2 import Environment, StrictUndefined

    environment = Environment(autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True)
    environment.filters["number"] = lambda value: "" if value is None else number(value)
    environment.filters["unit"] = lambda text: text.strip("-– ")
    return environment.from_string(TEMPLATE.read_text(encoding="utf-8"))


def as_html(report: Report) -> str:
    """The report as a page. Every text of the workbook is escaped; drawings are our own."""
    from markupsafe import Markup

    drawings = [drawing_of(case) for case in report.cases[:MOST_CHARTS]]
    return _template().render(
        report=report,
        charts=[(d, Markup(d.svg)) for d in drawings],
        more_cases=max(0, len(report.cases) - MOST_CHARTS),
        agreed=_by_sheet(report),
        caution=CAUTION,
    )


def _by_sheet(report: Report) -> list[tuple[str, list[tuple[str, str]]]]:
    """Cells that agree, by sheet."""
    table: dict[str, list[tuple[str, str]]] = {}
    for cell, quantity in report.agreed[:_MOST_AGREED]:
        sheet, _, place = cell.rpartition("!")
        table.setdefault(sheet, []).append((place, quantity))
    return list(table.items())
