"""From the rows of a case block to the stated rows of a case.

A block is rows of label, value, unit and, optionally, ±, in any order, with blank rows, headings and
notes between. Every refusal names the label of the row as it is written in the sheet.
"""

import re
from dataclasses import dataclass
from typing import Any

from cellfuncs import quantities
from cellfuncs.cases import labels, tabled
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused, CellfuncsError

Row = tuple[Any, ...]  # number of the row in the block, label, value, unit, ±
_HEAD_WORDS = frozenset({"value", "values", "unit", "units", "quantity"})
_COLUMNS = 5
# SI; far beyond any case, and near enough that no formula runs out of numbers
_SMALLEST, _LARGEST = 1e-30, 1e30
_UNITLESS_KINDS = frozenset({"dimensionless", "fraction"})


@dataclass(frozen=True)
class Stated:
    """One row of the block: the label as written, the value in SI (or a text), its uncertainty."""

    key: str
    label: str
    row: int
    value: Any
    plus_minus: float | None
    unit: str


def read_case(rows: tuple[Row, ...]) -> Case:
    """The case that the rows of a block state; rows begin with their number in the block."""
    texts = [_cells(row) for row in rows]
    flow = _flow_kind(texts)
    stated: dict[str, Stated] = {}
    points: list[tabled.Point] = []
    atmosphere = _atmosphere(texts, flow)
    for number, label, value, unit, plus_minus in texts:
        entry = _stated_row(number, label, value, unit, plus_minus, flow, atmosphere)
        if entry is None:
            continue
        if isinstance(entry, tabled.Point):
            points.append(entry)
            continue
        other = stated.get(entry.key)
        if other is not None:
            raise CaseRefused(
                f'rows {other.row} ("{other.label}") and {entry.row} ("{entry.label}") both state the '
                f"{labels.dictionary()[entry.key].label}; keep one"
            )
        _refuse_useless(entry, flow)
        stated[entry.key] = entry
    for point in points:
        if point.key in stated:
            raise CaseRefused(f'"{stated[point.key].label}" and "{point.label}" are both stated; keep one')
    return Case(flow, stated, tuple(points))


def _refuse_useless(entry: Stated, flow: str) -> None:
    """Refuse a known row that this flow kind does not use: it would be ignored in silence."""
    flows = labels.dictionary()[entry.key].flows
    if flows and flow not in flows:
        raise CaseRefused(
            f'"{entry.label}" has no use in a {flow}; leave the row out, or put the word remark before its label'
        )


def _cells(row: Row) -> Row:
    """The five cells of a row, with the checks that concern the shape of the block."""
    number, *cells = row
    if len(cells) == 1:
        raise CaseRefused("a block of one column; give rows of label, value, unit")
    while len(cells) > _COLUMNS - 1 and cells[-1] is None:
        cells.pop()
    if len(cells) > _COLUMNS - 1:
        raise CaseRefused(f"row {number} of the block has {len(cells)} columns; label, value, unit and ± are read")
    cells += [None] * (_COLUMNS - 1 - len(cells))
    label, value, unit, plus_minus = cells
    if isinstance(label, float):
        raise CaseRefused(f"row {number} begins with the number {label:g}; the first column holds the labels")
    if label is None and value is not None:
        shown = f"{value:g}" if isinstance(value, float) else f'"{value[:30]}"'
        raise CaseRefused(f"row {number} has a value ({shown}) but no label; a merged cell hides the others")
    if isinstance(value, str) and value.startswith("#error "):
        raise CaseRefused(f'"{label}" shows an error ({value[7:]}); mend that cell first')
    return number, label, value, unit, plus_minus


def _is_head(value: Any, unit: Any) -> bool:
    """Whether a row is the head of the table, or a heading or note without a value."""
    if value is None:
        return True
    return isinstance(value, str) and value.casefold() in _HEAD_WORDS


def _flow_kind(rows: list[Row]) -> str:
    for _number, label, value, unit, _ in rows:
        if label is None or _is_head(value, unit):
            continue
        if "flow_kind" in labels.candidates(label) and isinstance(value, str) and _is_choice("flow_kind", value):
            return labels.choice("flow_kind", value)
    for _number, label, value, _unit, _ in rows:
        if label is not None and isinstance(value, str) and labels.candidates(label)[:1] == ("flow_kind",):
            return labels.choice("flow_kind", value)
    listed = ", ".join(labels.choices("flow_kind"))
    raise CaseRefused(f'the row "flow kind" is missing; write one of: {listed}')


def _is_choice(key: str, text: str) -> bool:
    try:
        labels.choice(key, text)
    except CellfuncsError:
        return False
    return True


def _atmosphere(rows: list[Row], flow: str) -> float:
    """The stated atmosphere that gauge pressures stand on, or the standard one."""
    for number, label, value, unit, plus_minus in rows:
        if label is not None and value is not None and "atmosphere" in labels.candidates(labels.split_unit(label)[0]):
            entry = _stated_row(number, label, value, unit, plus_minus, flow, quantities.STANDARD_ATMOSPHERE)
            if entry is not None and entry.key == "atmosphere":
                return entry.value
    return quantities.STANDARD_ATMOSPHERE


def _stated_row(
    number: int, label: Any, value: Any, unit: Any, plus_minus: Any, flow: str, atmosphere: float
) -> Stated | tabled.Point | None:
    if label is None or _is_head(value, unit):
        return None
    if isinstance(unit, float):
        raise CaseRefused(f'"{label}" has the number {unit:g} where its unit should stand')
    name, bracket = labels.split_unit(label)
    keys = labels.candidates(label)
    if not keys:
        keys = labels.candidates(name)
    if not keys:
        point = _point(number, name, value, unit or bracket, plus_minus, atmosphere)
        if point is not None:
            return point
        raise CaseRefused(f'row {number}: the label "{label[:60]}" is not known; {labels.hint(name)}')
    key = labels.settle(label, keys, unit or bracket or _unit_within(value), flow)
    entry = labels.dictionary()[key]
    if entry.role == "note":
        return None
    if entry.role == "derived":
        raise CaseRefused(f'"{label}" follows from the other rows; leave the row out, or ask for it with CF_CASE')
    if entry.role == "choice":
        return _choice_row(key, label, number, value)
    if entry.role == "text":
        if not isinstance(value, str):
            raise CaseRefused(f'"{label}" is a name; the cell holds the number {value:g}')
        return Stated(key, label, number, value, None, "")
    if unit and bracket and entry.kind and _differs(bracket, unit, entry.kind):
        raise CaseRefused(f'"{label}": the label says {bracket}, the unit column {unit}; keep one')
    return _quantity_row(entry, label, number, value, unit or bracket, plus_minus, atmosphere)


def _point(
    number: int, label: str, value: Any, unit: str, plus_minus: Any, atmosphere: float
) -> tabled.Point | None:
    """A property at a temperature, or None for a label that is no such thing."""
    parts = tabled.split_temperature(label)
    key = tabled.property_key(parts[0]) if parts else None
    if key is None:
        return None
    if plus_minus is not None:
        raise CaseRefused(f'"{label}": a value of a table has no ±; state the property itself for that')
    row = _quantity_row(labels.dictionary()[key], label, number, value, unit, None, atmosphere)
    return tabled.Point(key, parts[1], row.value, label)


def _choice_row(key: str, label: str, number: int, value: Any) -> Stated:
    text = f"{value:g}" if isinstance(value, float) else value
    try:
        return Stated(key, label, number, labels.choice(key, text), None, "")
    except CellfuncsError as error:
        raise CaseRefused(f'"{label}": {error}') from None


def _unit_within(value: Any) -> str:
    """The unit written in the value's own cell."""
    if not isinstance(value, str):
        return ""
    try:
        return quantities.read_number(value).unit_text
    except CellfuncsError:
        return ""


def _quantity_row(
    entry: labels.Label, label: str, number: int, value: Any, unit: str, plus_minus: Any, atmosphere: float
) -> Stated:
    try:
        reading, own_plus_minus, own_unit = _number(value)
        if own_unit and unit and own_unit != unit and _differs(own_unit, unit, entry.kind):
            raise CaseRefused(f"the value says {own_unit}, the unit column {unit}; keep one")
        unit = own_unit or unit
        if not unit and entry.kind not in _UNITLESS_KINDS:
            raise CaseRefused(f"has no unit; write one, for instance {_usual(entry.kind)}")
        understood = quantities.read_unit(unit, entry.kind, atmosphere) if unit else None
        si = reading * understood.factor + understood.offset if understood else reading
        if understood and understood.offset and entry.kind == "pressure_absolute" and "absolute" in label.casefold():
            raise CaseRefused(f"says absolute, but {unit} is a gauge unit; keep one")
        quantities.check_physical(si, entry.kind)
        if si and not _SMALLEST <= abs(si) <= _LARGEST:
            raise CaseRefused(f"{si:.3g} {quantities.KINDS[entry.kind].si_unit} is beyond anything physical")
        _check_sign(entry.key, si)
        spread = _plus_minus(plus_minus, own_plus_minus, understood, entry.kind, si)
    except CellfuncsError as error:
        raise CaseRefused(f'"{label}": {error}') from None
    return Stated(entry.key, label, number, si, spread, unit)


def _number(value: Any) -> tuple[float, float | None, str]:
    if isinstance(value, float):
        return value, None, ""
    reading = quantities.read_number(value)
    return reading.value, reading.plus_minus, reading.unit_text


def _differs(one: str, other: str, kind: str) -> bool:
    first, second = quantities.read_unit(one, kind), quantities.read_unit(other, kind)
    return (first.factor, first.offset) != (second.factor, second.offset)


def _usual(kind: str) -> str:
    return " or ".join(quantities.KINDS[kind].units[:2])


# stated quantities for which only a value above zero makes sense
SIGNED = frozenset(
    {"temperature_difference", "heat_flux", "expansion", "volumetric_source", "pressure_drop", "inclination", "duty"}
)


def _check_sign(key: str, si: float) -> None:
    if key in SIGNED:
        return
    if key in ("emissivity", "tolerance", "smallest"):
        if not si >= 0:
            raise CaseRefused(f"{si:g} is below zero")
        if key != "smallest" and si > 1:
            raise CaseRefused(f"{si:g} is above 1; write for instance 0.05 or 5 %")
        if key == "tolerance" and si == 0:
            raise CaseRefused("is zero; write for instance 5 %")
        return
    if not si > 0:
        raise CaseRefused(f"is {'zero' if si == 0 else 'negative'}; it must be above zero")


_INTERVAL = re.compile(r"…|\.\.\.?|\bto\b")


def _of_interval(cell: str, unit: Any, kind: str, si: float) -> float:
    """Standard uncertainty of a value that may lie anywhere in ``a … b``: half the width over √3 (JCGM 100, 4.3.7)."""
    ends = []
    for text in _INTERVAL.split(cell, maxsplit=1):
        reading = quantities.read_number(text.strip())
        if reading.unit_text:
            ends.append(quantities.to_si(reading.value, reading.unit_text, kind))
        else:
            ends.append(reading.value * unit.factor + unit.offset if unit else reading.value)
    low, high = ends
    if not low <= si <= high or low == high:
        raise CaseRefused("the value lies outside the interval of its ±, or the interval has no width")
    return (high - low) / (2.0 * 3.0**0.5)


def _plus_minus(cell: Any, own: float | None, unit: Any, kind: str, si: float) -> float | None:
    """The standard uncertainty in SI: a number in the row's unit, or a text such as 5 % or 0.2 m/s, or an interval."""
    if cell is None:
        return None if own is None else own * (unit.factor if unit else 1.0)
    if isinstance(cell, float):
        spread = cell
    elif _INTERVAL.search(cell):
        return _of_interval(cell, unit, kind, si)
    else:
        text = re.sub(r"^\s*(±|\+/-)\s*", "", cell)
        reading = quantities.read_number(text)
        spread = reading.value
        if reading.unit_text == "%" and kind not in _UNITLESS_KINDS:
            if kind == "temperature":
                raise CaseRefused("a ± in per cent of a temperature depends on its zero; write it in K")
            return abs(spread / 100.0 * si)
        if reading.unit_text:
            difference = "temperature_difference" if kind == "temperature" else kind
            return abs(quantities.to_si(spread, reading.unit_text, difference))
    if spread < 0:
        raise CaseRefused("the ± is negative")
    return spread * (unit.factor if unit else 1.0)
