"""Our own functions in a sheet that is checked: bare numbers that another unit than SI stands beside, and results that
rest on a fault without showing it."""

from __future__ import annotations

import re
from collections.abc import Iterator

from cellfuncs import quantities
from cellfuncs.books.formulas import calls, canonical, reference
from cellfuncs.checks.finding import Finding
from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.page import Page, address
from cellfuncs.sheets.inherited.reading import Reading

_OURS = re.compile(r"CF_", re.IGNORECASE)
_FAULT = "! "
# what passes over texts, or compares them, without a word (LibreOffice and Excel alike)
_SILENT = re.compile(
    r"\b(?:SUM|SUMIF|SUMIFS|SUMPRODUCT|AVERAGE|MAX|MIN|MEDIAN|LARGE|SMALL|COUNT|COUNTIF|IF|IFS|AND|OR|NPV|STDEV\w*)\s*\("
    r"|<>|<=|>=|[<>=]",
    re.IGNORECASE,
)
_GUARD = re.compile(r"CF_FAULTS\s*\(", re.IGNORECASE)
_COUNTERS = frozenset(("COUNTA", "ROWS", "COLUMNS"))


def findings(reading: Reading) -> Iterator[Finding]:
    """What is wrong in the use of our functions, in reading order."""
    faulty = any(
        isinstance(value, str) and value.startswith(_FAULT) for page in reading.pages for value in page.values.values()
    )
    for page in reading.pages:
        ours = [(spot, f) for spot, f in page.formulas.items() if _OURS.search(f.text)]
        for spot, formula in sorted(ours):
            yield from _bare_numbers(reading, page, address(page.name, spot), formula.text)
        if faulty:
            yield from _silent_faults(reading, page)


def _bare_numbers(reading: Reading, page: Page, cell: str, text: str) -> Iterator[Finding]:
    """Single cells handed over as quantities while a unit other than SI belongs to their number."""
    from cellfuncs.cells import catalogue

    known = catalogue.functions()
    for call, given in calls(text):
        name = canonical(call, lambda word: word.upper() if word.upper() in known else None)
        if name is None or name in ("CF_SI", "CF_IN_UNIT"):
            continue
        for argument, operand in zip(known[name].arguments, given, strict=False):
            if not argument.kind or argument.kind == "dimensionless" or not operand:
                continue
            found = _foreign(reading, page, operand, argument.kind)
            if found is not None:
                source, value, unit, si_unit = found
                yield Finding(
                    cell=cell,
                    severity="error",
                    quantity=argument.name.replace("_", " "),
                    stated=value,
                    recomputed=None,
                    unit=unit,
                    code="unit-factor",
                    cause=f"{name} takes {source} as {value:g} {si_unit}, but it is in {unit}",
                    confidence=0.95,
                    message=f"{argument.name.replace('_', ' ')} of {name}: a bare number counts as SI, and {unit} "
                    f"stands beside {source}; give the pair of cells, or CF_SI(number, unit).",
                    source="cellfuncs: a bare number is in SI",
                )


def _foreign(reading: Reading, page: Page, operand: str, kind: str) -> tuple[str, float, str, str] | None:
    """The cell that an operand means, its number, and the unit of the kind, other than SI, that belongs to it."""
    at = reference(operand)
    if at.kind != "cells" or at.area[:2] != at.area[2:]:
        return None
    name = page.name if at.sheet is None else next((p.name for p in reading.pages if p.name == at.sheet), None)
    if name is None:
        return None
    there = reading.links.pages[name]
    spot = at.area[:2]
    value = there.values.get(spot)
    if not isinstance(value, float):
        return None
    cell = address(name, spot)
    quantity = reading.quantities.get(cell)
    beside = there.values.get((spot[0], spot[1] + 1))
    units = [quantity.stated.unit] if quantity and quantity.stated.unit else []
    units += [texts.bare_unit(beside)] if isinstance(beside, str) else []
    for unit in units:
        try:
            read = quantities.read_unit(unit, kind)
        except CellfuncsError:
            continue
        if read.factor == 1.0 and read.offset == 0.0:
            return None
        return cell, value, unit, quantities.KINDS[kind].si_unit
    return None


def _silent_faults(reading: Reading, page: Page) -> Iterator[Finding]:
    """Formulas that use a cell with a fault and show something else than a fault all the same."""
    for spot, formula in page.formulas.items():
        shown = page.values.get(spot)
        if not isinstance(shown, (float, bool)) or _GUARD.search(formula.text):
            continue
        if not _SILENT.search(formula.text) or any(name.upper() in _COUNTERS for name, _ in calls(formula.text)):
            continue
        cell = address(page.name, spot)
        for source in reading.graph.get(cell, ()):
            fault = _value(reading, source)
            if isinstance(fault, str) and fault.startswith(_FAULT):
                quantity = reading.quantities.get(cell)
                yield Finding(
                    cell=cell,
                    severity="error",
                    quantity=quantity.stated.label if quantity else "formula",
                    stated=shown if isinstance(shown, float) else None,
                    recomputed=None,
                    unit=quantity.stated.unit if quantity else "",
                    code="unknown",
                    cause=f"{source} shows a fault, which this formula passes over: {fault[:120]}",
                    confidence=0.95,
                    message=f"The formula rests on {source}, which shows a fault, and gives a value all the same; "
                    "mend that cell, and guard totals with CF_FAULTS.",
                    source="cellfuncs: texts are passed over by sums and comparisons",
                )
                break


def _value(reading: Reading, cell: str) -> object:
    sheet, _, _ = cell.rpartition("!")
    place = reading.links.place(cell)
    return reading.links.pages[sheet].values.get(place) if sheet in reading.links.pages and place else None
