"""The report as JSON: the form that other programs read."""

from __future__ import annotations

import json
import math
from typing import Any

from cellfuncs.checks.finding import Finding
from cellfuncs.checks.stated import SheetCase
from cellfuncs.sheets.reporting.report import Report


def as_json(report: Report) -> str:
    """The report as one JSON object, numbers finite, texts as they stand in the sheet."""
    return json.dumps(as_dict(report), ensure_ascii=False, indent=2, allow_nan=False) + "\n"


def as_dict(report: Report) -> dict[str, Any]:
    """The report as plain values."""
    return {
        "workbook": report.workbook,
        "version": report.version,
        "findings": [_finding(finding) for finding in report.findings],
        "agreed": [{"cell": cell, "quantity": quantity} for cell, quantity in report.agreed],
        "not_understood": [{"cell": cell, "why": why} for cell, why in report.not_understood],
        "cases": [_case(case) for case in report.cases],
    }


def _finding(finding: Finding) -> dict[str, Any]:
    return {
        "cell": finding.cell,
        "severity": finding.severity,
        "quantity": finding.quantity,
        "stated": {"value": _finite(finding.stated), "unit": finding.unit},
        "recomputed": {"value": _finite(finding.recomputed), "unit": finding.unit},
        "cause": {"code": finding.code, "text": finding.cause, "confidence": finding.confidence},
        "inherited": list(finding.inherited),
        "message": finding.message,
        "source": finding.source,
    }


def _case(case: SheetCase) -> dict[str, Any]:
    return {
        "name": case.name,
        "flow": case.flow,
        "facts": {key: list(value) if isinstance(value, tuple) else value for key, value in case.facts.items()},
        "quantities": [
            {"cell": entry.cell, "quantity": entry.key, "value": _finite(entry.value), "unit": entry.unit}
            for entry in case.all()
        ],
    }


def _finite(value: float | None) -> float | None:
    return value if value is not None and math.isfinite(value) else None
