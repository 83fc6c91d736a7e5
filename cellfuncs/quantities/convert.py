"""Values to and from SI. A unit text is read once for each kind and remembered; afterwards a
conversion is a multiplication. What reads the text is imported with the first one, not before.
"""

import math
import re
from typing import Any

from ..errors import NumberRefused, OutOfRange, UnitRefused
from .kinds import BASE, Unit, kind_of
from .number_text import read_number
from .texts import a, shortened

STANDARD_ATMOSPHERE = 101325.0  # Pa, exact: NIST SP 811 (2008) B.8, standard atmosphere
COLDEST_BARE = 200.0  # K: a temperature without unit below it is more likely meant in °C or °F
MOST_REMEMBERED = 4096

_units: dict[tuple[str, str, float], Unit] = {}


def read_unit(text: str, kind: str, atmosphere: float = STANDARD_ATMOSPHERE) -> Unit:
    """What a unit text means where a kind is wanted.

    Parameters
    ----------
    text : a unit as engineers write it, at most 40 characters
    kind : key of ``KINDS``
    atmosphere : pressure [Pa] that gauge units stand on

    Raises
    ------
    UnitRefused
        When the text is no unit, one of another kind, or may mean two things.
    """
    try:
        return _units[text, kind, atmosphere]
    except KeyError:
        pass
    except TypeError:
        raise UnitRefused("a unit must be a text") from None
    from . import fitting

    unit = fitting.fit(text, kind_of(kind), atmosphere)
    if len(_units) >= MOST_REMEMBERED:
        _units.clear()
    _units[text, kind, atmosphere] = unit
    return unit


def unit_fits(text: str, kind: str) -> bool:
    """Whether a text is a unit of a kind (no text raises)."""
    try:
        read_unit(text, kind)
    except UnitRefused:
        return False
    return True


def kinds_for(text: str) -> tuple[str, ...]:
    """The kinds that a unit can express, the likeliest first; none for what is no unit."""
    from . import fitting

    return fitting.kinds_for(text)


def to_si(value: Any, unit_text: str, kind: str) -> Any:
    """A number or array in a unit as SI."""
    unit = read_unit(unit_text, kind)
    return value * unit.factor + unit.offset


def from_si(value: Any, unit_text: str, kind: str) -> Any:
    """A number or array in SI as one in a unit."""
    unit = read_unit(unit_text, kind)
    return (value - unit.offset) / unit.factor


def convert(value: Any, unit_text: str, wanted_text: str) -> Any:
    """A number or array from one unit to another of the same kind.

    Raises
    ------
    UnitRefused
        When the two have no kind in common, or one is gauge and the other leaves that open.
    """
    from . import fitting

    factor, offset = fitting.conversion(unit_text, wanted_text)
    return value * factor + offset


_PLAIN = re.compile(r"[+-]?\d{1,15}(?:\.\d{1,15})?(?![\d.,])", re.ASCII)
_MOST_SEEN = 4096
_seen: dict[tuple[str, str], tuple[float, float]] = {}  # what stood behind a plain number -> its factor and offset


def read_quantity(text: str, kind: str, atmosphere: float = STANDARD_ATMOSPHERE) -> float:
    """A number with its unit as SI; without a unit the number is in SI already.

    Raises
    ------
    NumberRefused
        When it does not begin with one number, or is a bare temperature below 200.
    UnitRefused
        When the unit is not one of the kind.
    """
    plain = _PLAIN.match(text)
    tail = text[plain.end() :] if plain else ""
    if atmosphere == STANDARD_ATMOSPHERE:
        seen = _seen.get((tail, kind))
        if seen is not None:
            return float(plain[0]) * seen[0] + seen[1]
    reading = read_number(text)
    if reading.unit_text:
        unit = read_unit(reading.unit_text, kind, atmosphere)
        if tail.strip() == reading.unit_text and atmosphere == STANDARD_ATMOSPHERE:
            if len(_seen) >= _MOST_SEEN:
                _seen.clear()
            _seen[tail, kind] = unit.factor, unit.offset
        return reading.value * unit.factor + unit.offset
    if kind == "temperature" and reading.value < COLDEST_BARE:
        number = f"{reading.value:g}"
        raise NumberRefused(f"{number} means {number} K; write {number} degC, or {number} K if that is meant")
    return reading.value


def check_physical(si: Any, kind: str) -> None:
    """Refuse a value (or array) in SI that cannot be: not finite, or below the kind's minimum.

    Raises
    ------
    OutOfRange
    """
    wanted = kind_of(kind)
    least = most = si
    if hasattr(si, "min") and hasattr(si, "max"):
        if not getattr(si, "size", 1):
            return
        least, most = float(si.min()), float(si.max())
    if not (math.isfinite(least) and math.isfinite(most)):
        raise OutOfRange(f"{a(wanted.words)} that is not a finite number")
    if wanted.minimum is None:
        return
    if least < wanted.minimum - 1e-9:
        said = f"{least:g} {wanted.si_unit}".removesuffix(" 1")
        if kind == "temperature":
            raise OutOfRange(f"a temperature of {said} is below absolute zero")
        raise OutOfRange(f"{a(wanted.words)} of {said} cannot be; it is at least 0")
    if least == 0 and not wanted.zero_ok:
        raise OutOfRange(f"{a(wanted.words)} of 0 cannot be")


_PINT_BASE = dict(zip(BASE, ("meter", "kilogram", "second", "kelvin", "mole", "ampere", "radian"), strict=True))
_PINT_ANGLES = ("radian", "degree", "turn", "grade", "revolutions_per_minute", "revolutions_per_second")


def from_pint(quantity: Any, kind: str) -> Any:
    """A pint quantity as SI; its degrees Celsius are a temperature, its delta degrees a difference.

    Raises
    ------
    UnitRefused
        When its dimension is not that of the kind.
    """
    wanted = kind_of(kind)
    names = [name for name, _ in quantity.unit_items()]
    shown = shortened(str(quantity.units)) or "a plain number"
    instance = f"write for instance {wanted.example}"
    if kind == "temperature" and any(name.startswith("delta_") for name in names):
        raise UnitRefused(f'"{shown}" is a temperature difference, not a temperature; {instance}')
    offset = names and names[0] in ("degree_Celsius", "degree_Fahrenheit") and len(names) == 1
    if offset and kind != "temperature":
        raise UnitRefused(f'"{shown}" is a temperature, not {a(wanted.words)}; {instance}')
    powers = [f"{_PINT_BASE[base]}**{power}" for base, power in zip(BASE, wanted.dimension, strict=True) if power]
    if kind in ("frequency", "rotational_frequency") and any(name in _PINT_ANGLES for name in names):
        powers = ["turn", "second**-1"]
    try:
        return quantity.to(" * ".join(powers) if powers else "dimensionless").magnitude
    except Exception as error:
        if type(error).__name__ not in ("DimensionalityError", "OffsetUnitCalculusError"):
            raise
        raise UnitRefused(f'"{shown}" is no unit of {wanted.words}; {instance}') from None
