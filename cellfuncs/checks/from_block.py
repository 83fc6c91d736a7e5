"""A case block that states more than it needs, as a sheet's case: every number in it can be checked."""

from typing import Any

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.checks.stated import SheetCase, Stated
from cellfuncs.errors import CaseRefused, CellfuncsError

_HEADS = frozenset({"value", "values", "unit", "units", "quantity"})
_UNITLESS = frozenset({"dimensionless", "fraction"})


def sheet_case(block: tuple[tuple[Any, ...], ...]) -> SheetCase:
    """The rows of a block (number of the row, label, value, unit …) with derived quantities allowed among them."""
    rows = [(*row, None, None, None)[:4] for row in block]
    case = SheetCase("block", flow=_flow(rows))
    for number, label, value, unit in rows:
        if not isinstance(label, str) or value is None or (isinstance(value, str) and value.casefold() in _HEADS):
            continue
        name, bracket = labels.split_unit(label)
        keys = labels.candidates(label, sheets=True) or labels.candidates(name, sheets=True)
        if not keys:
            raise CaseRefused(f'row {number}: the label "{label[:60]}" is not known; {labels.hint(name)}')
        written = unit if isinstance(unit, str) else bracket
        _add(case, labels.settle(label, keys, written or "", case.flow), number, label, value, written or "")
    return case


def _flow(rows: list[tuple[Any, ...]]) -> str | None:
    for _, label, value, _ in rows:
        if isinstance(label, str) and isinstance(value, str) and "flow_kind" in labels.candidates(label):
            try:
                return labels.choice("flow_kind", value)
            except CellfuncsError:
                continue
    return None


def _add(case: SheetCase, key: str, number: int, label: str, value: Any, unit: str) -> None:
    entry = labels.dictionary()[key]
    if entry.role == "note" or key == "flow_kind":
        return
    if entry.role in ("choice", "text"):
        text = f"{value:g}" if isinstance(value, float) else str(value)
        case.facts[key] = labels.choice(key, text) if entry.role == "choice" else text
        return
    read, unit = _read(value, unit, label)
    if not unit and entry.kind not in _UNITLESS:
        raise CaseRefused(f'"{label}": has no unit; write one, for instance {quantities.KINDS[entry.kind].units[0]}')
    understood = quantities.read_unit(unit, entry.kind) if unit else None
    factor, offset = (understood.factor, understood.offset) if understood else (1.0, 0.0)
    rounding = _half_digit(read) * abs(factor)
    case.add(Stated(key, entry.kind, read, unit, read * factor + offset, rounding, f"row {number}", label))


def _read(value: Any, unit: str, label: str) -> tuple[float, str]:
    if isinstance(value, str):
        if value.startswith("#error "):
            raise CaseRefused(f'"{label}" shows an error ({value[7:]}); mend that cell first')
        found = quantities.read_number(value)
        return found.value, found.unit_text or unit
    return float(value), unit


def _half_digit(value: float) -> float:
    """Half of the last digit that a number has in writing, at most 0.1 % of it: a block holds all its digits."""
    text = f"{value:.12g}"
    if "e" in text or not value:
        return 0.0
    decimals = len(text.partition(".")[2])
    return min(0.5 * 10.0**-decimals, 1e-3 * abs(value))
