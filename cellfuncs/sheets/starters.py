"""Starter workbooks: one a flow kind, to be filled with the engineer's own case.

The values in them (``data/starters.csv``) are invented starting values that give a plausible case.
A row is label, value, unit; a result what, unit, number format; the sweep label, unit, values, term.
"""

from functools import cache
from pathlib import Path

from cellfuncs.cases import labels
from cellfuncs.sheets.case_sheet import CaseSheet, write_book
from cellfuncs.sources import read_table

_STORY = "Starter: put your own values into the tinted cells; spare rows take further labels from their lists."


@cache
def kinds() -> tuple[str, ...]:
    """The flow kinds there is a starter for."""
    return tuple(dict.fromkeys(row["flow"] for row in read_table("starters.csv")))


def starter(kind: str) -> CaseSheet:
    """The starter of a flow kind; raises UnknownName for another word."""
    flow = labels.choice("flow_kind", kind)
    parts = [row for row in read_table("starters.csv") if row["flow"] == flow]
    rows = [(r["label"], _value(r["a"]), r["b"] or None, None) for r in parts if r["part"] == "row"]
    results = [(r["label"], r["a"], r["b"]) for r in parts if r["part"] == "result"]
    sweep = next(r for r in parts if r["part"] == "sweep")
    return CaseSheet(
        title=f"{flow.capitalize()}: which terms matter",
        story=_STORY,
        block=f"{flow.replace(' ', '_')}_case",
        rows=(("flow kind", flow, None, None), *rows),
        results=tuple(results),
        question="Which terms of the energy equation matter?",
        sweep=(sweep["label"], sweep["a"], tuple(map(float, sweep["b"].split(";"))), sweep["c"]),
        spare=6,
        protected=True,
    )


def _value(text: str) -> float | str:
    try:
        return float(text)
    except ValueError:
        return text


def write_starter(kind: str, path: str | Path) -> None:
    """Write the starter of a flow kind; its formulas have no values yet."""
    write_book(starter(kind), path)
