"""A case with one of its rows at another value, and where such values may lie: for searches and for ±."""

import math
from dataclasses import replace
from typing import Any

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.cases.block import SIGNED, Stated
from cellfuncs.cases.case import Case
from cellfuncs.errors import CellfuncsError, UnknownName

_PER_DECADE = 4
_DECADES = 3  # both ways from the stated value
_DECADES_UNSTATED = 6  # both ways from the usual size of the kind
_OFFSETS = (0.01, 0.1, 1.0, 3.0, 10.0, 30.0, 100.0, 300.0)  # K from every stated temperature
_LOWEST, _HIGHEST = 1.0, 3000.0  # K, where no substance sets the range
_STEPS = 30


def row_key(case: Case, text: str) -> str:
    """The key of the row that ``text`` means; of several meanings the one that the case states.

    Raises UnknownName for what is no row of numbers.
    """
    keys = labels.find_all(text)
    stated = [key for key in keys if case.has(key)]
    key = stated[0] if len(stated) == 1 else labels.settle(text, keys, labels.split_unit(text)[1], case.flow)
    entry = labels.dictionary()[key]
    if entry.role != "stated":
        what = "follows from the other rows" if entry.role == "derived" else "is no number"
        raise UnknownName(f'"{entry.label}" {what}; name a row that states a number')
    return key


def with_value(case: Case, key: str, value: float) -> Case:
    """The case with the row ``key`` at ``value`` [SI], added where it is not stated; what followed is open again."""
    case = case.origin or case
    entry = case.stated.get(key)
    if entry is None:
        entry = Stated(key, labels.dictionary()[key].label, 0, value, None, "")
    return case.stating({**case.stated, key: replace(entry, value=value)})


def start_of(case: Case, key: str) -> float | None:
    """The stated value of a row [SI], or None."""
    value = case.get(key)
    return float(value) if isinstance(value, (int, float)) else None


def places(case: Case, key: str) -> list[float]:
    """Values [SI] of a row at which a search looks, rising: decades both ways inside the physical range."""
    kind = labels.dictionary()[key].kind
    start = start_of(case, key)
    if kind == "temperature":
        return _temperatures(case, start)
    if kind == "angle":
        return [math.radians(10.0 * k) for k in range(19)] + ([start] if start else [])
    decades = _DECADES if start else _DECADES_UNSTATED
    size = abs(start) if start else _usual(kind)
    found = [size * 10.0 ** (k / _PER_DECADE) for k in range(-_PER_DECADE * decades, _PER_DECADE * decades + 1)]
    if kind == "fraction":
        found = [x for x in found if x < 1.0] + [1.0]
    if key in SIGNED:
        found = sorted([-x for x in found] + found)
    return found


def _usual(kind: str) -> float:
    """The usual size of a kind, from its example [SI]."""
    return quantities.read_quantity(quantities.example(kind), kind)


def _temperatures(case: Case, start: float | None) -> list[float]:
    low, high = _LOWEST, _HIGHEST
    try:
        if case.substance is not None:
            limits = case.substance.limits()
            low, high = limits.t_min, limits.t_max
    except CellfuncsError:
        pass  # the search meets the same refusal at every place, and says so
    even = [low + (high - low) * k / _STEPS for k in range(_STEPS + 1)]
    stated: list[Any] = [
        entry.value for name, entry in case.stated.items() if labels.dictionary()[name].kind == "temperature"
    ]
    near = [t + sign * offset for t in stated for offset in _OFFSETS for sign in (-1.0, 1.0)]
    return sorted({t for t in (*even, *stated, *near) if low <= t <= high} | ({start} if start else set()))
