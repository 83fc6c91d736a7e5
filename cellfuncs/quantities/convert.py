"""The wanted kind settles what a unit text means; values to and from SI.

A unit text is read once for each kind and remembered: afterwards a conversion is a multiplication.
"""

import math
import re
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from typing import Any

from ..errors import NumberRefused, OutOfRange, UnitRefused
from .atoms import PI
from .kinds import BASE, KINDS, NO_DIMENSION, Dimension, Kind, a, kind_of, shortened
from .number_text import read_number
from .unit_text import TEMPERATURE, Meaning, meanings

STANDARD_ATMOSPHERE = 101325.0  # Pa, exact: SI Brochure 9 (2019)
GRAVITY = Fraction("9.80665")  # m/s2, exact: standard acceleration of free fall, NIST SP 811 (2008) B.8
COLDEST_BARE = 200.0  # K: a temperature without unit below it is more likely meant in °C or °F
MOST_REMEMBERED = 4096

_PRESSURE = KINDS["stress"].dimension
_PER_SECOND = KINDS["frequency"].dimension
_TURNING = KINDS["angular_velocity"].dimension
_FREQUENCIES = ("frequency", "rotational_frequency")
_REFERENCES = {"pressure_absolute": ("", "absolute", "gauge"), "pressure_gauge": ("gauge",)}
_REFERENCES["pressure_difference"] = ("", "difference")

# Kinds in whose units sheets write kg, lb and oz for the force: kg/cm2, ft-lb, lb/in2, lb-s/ft2.
_WITH_FORCE = frozenset(
    "force torque energy stress pressure_absolute pressure_gauge pressure_difference pressure_gradient "
    "dynamic_viscosity force_per_length".split()
)
_WEIGHED = {"kg": "kgf", "lb": "lbf", "oz": "ozf"}
_WEIGHT_SHIFT = tuple(
    f - m for f, m in zip(KINDS["force"].dimension, KINDS["mass"].dimension, strict=True)
)

_REFERENCE_WORDS = {
    "absolute": "a|abs|absolute",
    "gauge": "g|ga|gauge|gage|rel",
    "difference": "d|dif|diff|differential|delta",
    "vacuum": "v|vac|vacuum",
}
_WITH_REFERENCE = {
    reference: re.compile(rf"^(.+?)[ ._-]*(?:\( ?(?:{words})\.? ?\)|(?:{words})\.?)$", re.IGNORECASE)
    for reference, words in _REFERENCE_WORDS.items()
}


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit text as read for a kind: SI = value * factor + offset; ``understood`` is its plain form."""

    factor: float
    offset: float
    kind: str
    understood: str


@dataclass(frozen=True, slots=True)
class _Reading:
    """All meanings of a text, with the reference its pressure is given against, or the refusal."""

    meanings: tuple[Meaning, ...]
    reference: str
    refusal: str


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
    unit = _read(text, kind, atmosphere)
    if len(_units) >= MOST_REMEMBERED:
        _units.clear()
    _units[text, kind, atmosphere] = unit
    return unit


def _read(text: str, kind: str, atmosphere: float) -> Unit:
    if not isinstance(text, str):
        raise UnitRefused("a unit must be a text")
    wanted = kind_of(kind)
    reading = _reading(text)
    if reading.refusal:
        raise UnitRefused(_with_example(reading.refusal, wanted))
    found = _fits(reading, wanted, atmosphere)
    values = {(unit.factor, unit.offset) for unit in found}
    if len(values) > 1:
        choices = " or ".join(dict.fromkeys(unit.understood for unit in found))
        raise UnitRefused(f'"{shortened(text)}" may be {choices}; write the one that is meant')
    if not found:
        raise UnitRefused(_misfit(text, reading, wanted))
    return found[0]


@lru_cache(maxsize=1024)
def _reading(text: str) -> _Reading:
    try:
        plain = tuple(meanings(text))
        refusal = ""
    except UnitRefused as refused:
        plain, refusal = (), str(refused)
    if any(_is_pressure(meaning) for meaning in plain) or len(text) > 60:
        return _Reading(plain, "", refusal)
    for reference, pattern in _WITH_REFERENCE.items():
        match = pattern.match(text.strip().strip("[]").replace("\xa0", " "))
        if not match:
            continue
        try:
            base = tuple(m for m in meanings(match.group(1)) if _is_pressure(m))
        except UnitRefused:
            continue
        if base and reference == "vacuum":
            said = f'"{shortened(text)}" counts downwards from the atmosphere; write the absolute pressure'
            return _Reading((), "", said)
        if base:
            return _Reading(base, reference, "")
    return _Reading(plain, "", refusal)


def _is_pressure(meaning: Meaning) -> bool:
    return meaning.dimension == _PRESSURE or (
        _weighed_power(meaning) == 1 and _shifted(meaning.dimension, 1) == _PRESSURE
    )


def _weighed_power(meaning: Meaning) -> int:
    """The power of the one mass that may stand for its weight, or 0."""
    powers = [power for piece, power in meaning.pieces if piece.atom.symbol in _WEIGHED]
    return powers[0] if len(powers) == 1 else 0


def _shifted(dimension: Dimension, times: int) -> Dimension:
    return tuple(d + times * s for d, s in zip(dimension, _WEIGHT_SHIFT, strict=True))


def _fits(reading: _Reading, wanted: Kind, atmosphere: float) -> list[Unit]:
    """The units of the nearest spelling that fit a kind."""
    if reading.reference not in _REFERENCES.get(wanted.name, ("",)):
        return []
    found: list[Unit] = []
    rank = None
    for meaning in reading.meanings:
        if rank is not None and meaning.rank != rank:
            break
        unit = _fit(meaning, reading.reference, wanted, atmosphere)
        if unit is not None:
            rank = meaning.rank
            found.append(unit)
    return found


def _fit(meaning: Meaning, reference: str, wanted: Kind, atmosphere: float) -> Unit | None:
    name, dimension = wanted.name, meaning.dimension
    if not meaning.allows(name):
        return None
    if name == "temperature":
        if dimension != TEMPERATURE or meaning.single is None or meaning.is_difference:
            return None
        return Unit(float(meaning.factor), float(meaning.offset), name, meaning.text())
    if dimension == wanted.dimension:
        if name == "angular_velocity" or dimension != NO_DIMENSION:
            return _unit(meaning, 1, reference, wanted, atmosphere)
        if name == "relative_humidity" and any(any(p.atom.dimension) for p, _ in meaning.pieces):
            return None
        return _unit(meaning, 1, reference, wanted, atmosphere)
    if name in _FREQUENCIES and dimension == _TURNING:
        return _unit(meaning, 1 / (2 * PI), reference, wanted, atmosphere)
    if name == "angular_velocity" and dimension == _PER_SECOND and meaning.single is not None:
        return _unit(meaning, 2 * PI, reference, wanted, atmosphere) if meaning.single.symbol == "Hz" else None
    if name in _WITH_FORCE and _weighed_power(meaning) == 1 and _shifted(dimension, 1) == wanted.dimension:
        return _unit(meaning, GRAVITY, reference, wanted, atmosphere, _WEIGHED)
    return None


def _unit(
    meaning: Meaning,
    times: Fraction | int,
    reference: str,
    wanted: Kind,
    atmosphere: float,
    swap: dict[str, str] | None = None,
) -> Unit:
    understood = meaning.text(swap) + (f" {reference}" if reference else "")
    offset = atmosphere if reference == "gauge" else 0.0
    return Unit(float(meaning.factor * times), offset, wanted.name, understood)


def _with_example(refusal: str, wanted: Kind) -> str:
    if "write" in refusal or "type" in refusal:
        return refusal
    return f"{refusal}; write for instance {wanted.example}"


def _misfit(text: str, reading: _Reading, wanted: Kind) -> str:
    """Why a unit that can be read does not fit the kind."""
    shown = f'"{shortened(text)}"'
    kinds = _kinds_of(reading)
    instance = f"write for instance {wanted.example}"
    if wanted.name == "pressure_gauge" and not reading.reference and kinds and _is_pressure(reading.meanings[0]):
        return f"{shown} does not say that it is gauge; {instance}"
    if wanted.name == "angular_velocity" and reading.meanings[0].dimension == _PER_SECOND:
        return f"{shown} may be radians or turns in that time; write rad/s or rpm"
    if not kinds:
        return f"{shown} is no unit of {wanted.words}; {instance}"
    found = KINDS[kinds[0]]
    hint = ""
    if {found.name, wanted.name} == {"kinematic_viscosity", "dynamic_viscosity"}:
        verb = "multiply" if wanted.name == "dynamic_viscosity" else "divide"
        hint = f"{verb} the value by the density, or "
    return f"{shown} is {a(found.words)}, not {a(wanted.words)}; {hint}{instance}"


def unit_fits(text: str, kind: str) -> bool:
    """Whether a text is a unit of a kind (no text raises)."""
    try:
        read_unit(text, kind)
    except UnitRefused:
        return False
    return True


@lru_cache(maxsize=1024)
def kinds_for(text: str) -> tuple[str, ...]:
    """The kinds that a unit can express, the likeliest first; none for what is no unit."""
    return _kinds_of(_reading(text))


def _kinds_of(reading: _Reading) -> tuple[str, ...]:
    """Kinds with the unit among their usual ones first, then in the order of the table."""
    usual, others = [], []
    for kind in KINDS.values():
        found = _fits(reading, kind, STANDARD_ATMOSPHERE)
        if len({(unit.factor, unit.offset) for unit in found}) == 1:
            listed = found[0].understood in _usual_units(kind.name)
            (usual if listed else others).append(kind.name)
    return (*usual, *others)


@lru_cache(maxsize=None)
def _usual_units(kind: str) -> frozenset[str]:
    """The understood forms of a kind's usual units."""
    return frozenset(
        unit.understood
        for text in KINDS[kind].units
        for unit in _fits(_reading(text), KINDS[kind], STANDARD_ATMOSPHERE)
    )


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
    kind = _common_kind(unit_text, wanted_text)
    return from_si(to_si(value, unit_text, kind), wanted_text, kind)


@lru_cache(maxsize=1024)
def _common_kind(unit_text: str, wanted_text: str) -> str:
    kinds = _kinds_or_raise(unit_text), _kinds_or_raise(wanted_text)
    common = [kind for kind in kinds[0] if kind in kinds[1]]
    texts = [f'"{shortened(text, 30)}"' for text in (unit_text, wanted_text)]
    words = [a(KINDS[k[0]].words) for k in kinds]
    if not common:
        raise UnitRefused(f"{texts[0]} is {words[0]}, {texts[1]} {words[1]}; these cannot be converted")
    first = {k[0] for k in kinds}
    if common[0] == "pressure_absolute" and "pressure_difference" in first and len(first) == 2:
        raise UnitRefused(
            f"{texts[0]} is {words[0]}, {texts[1]} {words[1]}; add abs, g or diff to the unit that leaves it open"
        )
    return common[0]


def _kinds_or_raise(text: str) -> tuple[str, ...]:
    reading = _reading(text)
    if reading.refusal:
        raise UnitRefused(reading.refusal)
    kinds = kinds_for(text)
    if not kinds:
        raise UnitRefused(f'"{shortened(text)}" is no unit of a known kind')
    return kinds


def read_quantity(text: str, kind: str, atmosphere: float = STANDARD_ATMOSPHERE) -> float:
    """A number with its unit as SI; without a unit the number is in SI already.

    Raises
    ------
    NumberRefused
        When it does not begin with one number, or is a bare temperature below 200.
    UnitRefused
        When the unit is not one of the kind.
    """
    reading = read_number(text)
    if reading.unit_text:
        unit = read_unit(reading.unit_text, kind, atmosphere)
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


_PINT_BASE = dict(
    zip(BASE, ("meter", "kilogram", "second", "kelvin", "mole", "ampere", "radian"), strict=True)
)
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
    if kind in _FREQUENCIES and any(name in _PINT_ANGLES for name in names):
        powers = ["turn", "second**-1"]
    try:
        return quantity.to(" * ".join(powers) if powers else "dimensionless").magnitude
    except Exception as error:
        if type(error).__name__ not in ("DimensionalityError", "OffsetUnitCalculusError"):
            raise
        raise UnitRefused(f'"{shown}" is no unit of {wanted.words}; {instance}') from None
