"""Which of the meanings of a unit text holds: the wanted kind settles it.

Here stand the rules of the trade that a table of units cannot hold: gauge and absolute are said by a
suffix, a turn is 2π radians or one cycle, kg and lb may stand for their weight.
"""

import re
from dataclasses import dataclass
from fractions import Fraction
from functools import cache, lru_cache

from ..errors import UnitRefused
from .atoms import PI
from .kinds import KINDS, Dimension, Kind, Unit
from .texts import a, shortened
from .unit_text import Meaning, meanings

MOST_CHARACTERS = 100  # nothing longer is looked at, or remembered
GRAVITY = Fraction("9.80665")  # m/s2, exact: standard acceleration of free fall, NIST SP 811 (2008) B.8

_ONE, _TURN = Fraction(1), 2 * PI
_ANY_ATMOSPHERE = 101325.0  # Pa: standard atmosphere, where only the kind or a difference of gauges counts
_PRESSURE = KINDS["stress"].dimension
_PER_SECOND = KINDS["frequency"].dimension
_TURNING = KINDS["angular_velocity"].dimension
_FREQUENCIES = ("frequency", "rotational_frequency")
_REFERENCES = {  # which references a kind of pressure takes; other kinds take none
    "pressure_absolute": ("", "absolute", "gauge"),
    "pressure_gauge": ("gauge",),
    "pressure_difference": ("", "difference"),
}

# Kinds in whose units sheets write kg, lb and oz for the force: kg/cm2, ft-lb, lb/in2, lb-s/ft2.
_WITH_FORCE = frozenset(
    [
        "force",
        "torque",
        "energy",
        "stress",
        "pressure_absolute",
        "pressure_gauge",
        "pressure_difference",
        "pressure_gradient",
        "dynamic_viscosity",
        "force_per_length",
    ]
)
_WEIGHED = {"kg": "kgf", "lb": "lbf", "oz": "ozf"}
_WEIGHT_SHIFT = tuple(f - m for f, m in zip(KINDS["force"].dimension, KINDS["mass"].dimension, strict=True))

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


@dataclass(frozen=True, slots=True, eq=False)
class _Reading:
    """All meanings of a text, with the reference its pressure is given against, or the refusal.

    ``unreferred`` is what the text means when the end that looks like a reference is a unit.
    """

    meanings: tuple[Meaning, ...]
    reference: str
    refusal: str
    unreferred: tuple[Meaning, ...] = ()


@dataclass(frozen=True, slots=True)
class _Fit:
    """A meaning that fits a kind: SI = value * factor + offset, both exact."""

    factor: Fraction
    offset: Fraction
    understood: str


def fit(text: str, wanted: Kind, atmosphere: float) -> Unit:
    """The unit that a text means where a kind is wanted; raises UnitRefused."""
    if not isinstance(text, str):
        raise UnitRefused("a unit must be a text")
    reading = _read(text)
    if reading.refusal:
        raise UnitRefused(_with_example(reading.refusal, wanted))
    found = _fits(reading, wanted, atmosphere)
    if len({fits.factor for fits in found}) > 1:
        choices = " or ".join(dict.fromkeys(fits.understood for fits in found))
        raise UnitRefused(f'"{shortened(text)}" may be {choices}; write the one that is meant')
    if not found:
        raise UnitRefused(_misfit(text, reading, wanted))
    return Unit(float(found[0].factor), float(found[0].offset), wanted.name, found[0].understood)


def _read(text: str) -> _Reading:
    if len(text) > MOST_CHARACTERS:
        return _Reading((), "", f'"{shortened(text, 30)}" has {len(text):,} characters; write a unit')
    return _reading(text)


@lru_cache(maxsize=1024)
def _reading(text: str) -> _Reading:
    try:
        plain = tuple(meanings(text))
        refusal = ""
    except UnitRefused as refused:
        plain, refusal = (), str(refused)
    if any(_is_pressure(meaning) for meaning in plain):
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
            # kg/cm2-d is a mass flux as well; psid is nothing else
            weights = all(meaning.dimension != _PRESSURE for meaning in base)
            return _Reading(base, reference, "", plain if weights else ())
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


def _fits(reading: _Reading, wanted: Kind, atmosphere: float) -> list[_Fit]:
    """The units of the nearest spelling that fit a kind."""
    candidates, reference = reading.meanings, reading.reference
    if reference and wanted.name not in _REFERENCES:
        candidates, reference = reading.unreferred, ""
    elif reference not in _REFERENCES.get(wanted.name, ("",)):
        return []
    found: list[_Fit] = []
    rank = None
    for meaning in candidates:
        if rank is not None and meaning.rank != rank:
            break
        unit = _fit(meaning, reference, wanted, atmosphere)
        if unit is not None:
            rank = meaning.rank
            found.append(unit)
    return found


def _fit(meaning: Meaning, reference: str, wanted: Kind, atmosphere: float) -> _Fit | None:
    times = _times(meaning, wanted)
    if times is None or not meaning.allows(wanted.name):
        return None
    offset = Fraction(0)
    if wanted.name == "temperature":
        offset = meaning.offset
    elif reference == "gauge":
        offset = Fraction(atmosphere)
    understood = meaning.text(_WEIGHED if times is GRAVITY else None)
    return _Fit(meaning.factor * times, offset, f"{understood} {reference}".rstrip())


def _times(meaning: Meaning, wanted: Kind) -> Fraction | None:
    """By what a unit's factor is to be multiplied for a kind; None where it does not fit."""
    name, dimension = wanted.name, meaning.dimension
    if dimension == wanted.dimension:
        if name == "temperature" and (meaning.single is None or meaning.is_difference):
            return None
        if name == "relative_humidity" and any(any(p.atom.dimension) for p, _ in meaning.pieces):
            return None  # a ratio of two masses is a humidity ratio
        return _ONE
    if dimension == _TURNING and name in _FREQUENCIES:
        return 1 / _TURN
    if dimension == _PER_SECOND and name == "angular_velocity":
        return _TURN if meaning.single is not None and meaning.single.symbol == "Hz" else None
    if name in _WITH_FORCE and _shifted(dimension, 1) == wanted.dimension and _weighed_power(meaning) == 1:
        return GRAVITY
    return None


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


def kinds_for(text: str) -> tuple[str, ...]:
    """The kinds that a unit can express, the likeliest first; none for what is no unit."""
    return _kinds_of(_read(text)) if isinstance(text, str) else ()


@lru_cache(maxsize=1024)
def _kinds_of(reading: _Reading) -> tuple[str, ...]:
    """Kinds with the unit among their usual ones first, then in the order of the table."""
    usual, others = [], []
    for kind in KINDS.values():
        found = _fits(reading, kind, _ANY_ATMOSPHERE)
        if len({fits.factor for fits in found}) == 1:
            listed = found[0].understood in _usual_units(kind.name)
            (usual if listed else others).append(kind.name)
    kinds = usual + others
    if reading.reference:
        kinds.sort(key=lambda name: (name in _REFERENCES, name != "pressure_gauge"))
    return tuple(kinds)


@cache
def _usual_units(kind: str) -> frozenset[str]:
    """The understood forms of a kind's usual units."""
    return frozenset(
        unit.understood for text in KINDS[kind].units for unit in _fits(_read(text), KINDS[kind], _ANY_ATMOSPHERE)
    )


@lru_cache(maxsize=1024)
def conversion(unit_text: str, wanted_text: str) -> tuple[float, float]:
    """Factor and offset from one unit to another of the same kind; raises UnitRefused."""
    kinds = _kinds_or_raise(unit_text), _kinds_or_raise(wanted_text)
    readings = _read(unit_text), _read(wanted_text)
    common = [kind for kind in kinds[0] if kind in kinds[1]]
    first = f'"{shortened(unit_text, 30)}" is {a(KINDS[kinds[0][0]].words)}'
    second = f'"{shortened(wanted_text, 30)}" {a(KINDS[kinds[1][0]].words)}'
    if not common:
        raise UnitRefused(f"{first}, {second}; these cannot be converted")
    # a column of water is nearly always a difference: beside a gauge or absolute unit it must say which
    for one, other, kind in ((0, 1, kinds[0][0]), (1, 0, kinds[1][0])):
        if (
            kind == "pressure_difference"
            and not readings[one].reference
            and readings[other].reference in ("absolute", "gauge")
        ):
            raise UnitRefused(f"{first}, {second}; add abs, g or diff to the one that is open")
    start, end = (_fits(reading, KINDS[common[0]], _ANY_ATMOSPHERE)[0] for reading in readings)
    return float(start.factor / end.factor), float((start.offset - end.offset) / end.factor)


def _kinds_or_raise(text: str) -> tuple[str, ...]:
    reading = _read(text)
    if reading.refusal:
        raise UnitRefused(reading.refusal)
    kinds = kinds_for(text)
    if not kinds:
        raise UnitRefused(f'"{shortened(text)}" is no unit of a known kind')
    return kinds
