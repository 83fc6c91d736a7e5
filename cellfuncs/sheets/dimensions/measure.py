"""What a number measures: its dimension, the scale and zero of its unit, and the plain numbers that went into it.

SI value = number · factor + shift. ``weight`` counts zero points: 1 for a temperature or a pressure, 0 for a
difference of two. ``literals`` are the numbers, with their powers, by which a formula multiplied.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from cellfuncs.sheets.dimensions.constants import CLOSE, Dimension, converts, is_plain, subsets

NONE: Dimension = (0.0,) * 6  # L M T Θ N I
TEMPERATURE: Dimension = (0.0, 0.0, 0.0, 1.0, 0.0, 0.0)
PRESSURE: Dimension = (-1.0, 1.0, -2.0, 0.0, 0.0, 0.0)

Literals = tuple[tuple[float, float], ...]


@dataclass(frozen=True, slots=True)
class Measure:
    """A number's dimension (None: nothing is known), scale, zero, and how it came about.

    ``literal`` marks a plain number; ``empirical`` one with a summand whose unit is not known; ``marks`` hold
    temperatures in °C and gauge pressures that were multiplied (``celsius below``, ``gauge`` …).
    """

    dimension: Dimension | None
    factor: float = 1.0
    shift: float = 0.0
    weight: float = 0.0
    literals: Literals = ()
    literal: bool = False
    empirical: bool = False
    log_of: Dimension | None = None
    marks: frozenset[str] = frozenset()

    @property
    def known(self) -> bool:
        return self.dimension is not None

    @property
    def value(self) -> float:
        """The number itself, for a literal."""
        return math.prod(value**power for value, power in self.literals) if self.literals else 1.0

    @property
    def odd(self) -> bool:
        """Whether a number in it may carry a unit that nobody wrote down."""
        return self.empirical or any(not is_plain(value) for value, _ in self.literals)


UNKNOWN = Measure(None)
NUMBER = Measure(NONE)


def literal(value: float) -> Measure:
    """A number written in a formula."""
    return Measure(NONE, literals=((value, 1.0),), literal=True)


def alike(one: Dimension, other: Dimension) -> bool:
    """Whether two dimensions are the same."""
    return all(abs(a - b) < 1e-6 for a, b in zip(one, other, strict=True))


def is_point(measure: Measure) -> bool:
    """Whether it is a temperature or a pressure, not a difference."""
    return abs(measure.weight - 1.0) < 1e-9


def _mark(measure: Measure, place: str) -> frozenset[str]:
    """What has to be remembered when a temperature or pressure is multiplied, divided by, or raised to a power."""
    if measure.dimension is not None and measure.weight == 0.0 and abs(measure.shift) > 1.0:
        return frozenset(("two zeros above",))
    if not is_point(measure) or measure.dimension is None:
        return frozenset()
    if alike(measure.dimension, TEMPERATURE):
        word = "celsius" if abs(measure.shift) > 1.0 else "absolute temperature"
    elif alike(measure.dimension, PRESSURE):
        word = "gauge" if abs(measure.shift) > 1.0 else "absolute pressure"
    else:
        return frozenset()
    return frozenset((f"{word} {place}",))


def _turned(marks: frozenset[str]) -> frozenset[str]:
    """Marks of what stands below the line now."""
    other = {"above": "below", "below": "above"}
    return frozenset(f"{word} {other.get(place, place)}" for word, _, place in (mark.rpartition(" ") for mark in marks))


def times(one: Measure, other: Measure, power: float = 1.0) -> Measure:
    """``one · other**power`` for power 1 or −1."""
    if not (one.known and other.known):
        return UNKNOWN
    if one.literal and other.literal:
        return Measure(NONE, literals=one.literals + _raised(other.literals, power), literal=True)
    if other.literal:
        return _scaled(one, _raised(other.literals, power))
    if one.literal and power == 1.0:
        return _scaled(other, one.literals)
    theirs = other.marks if power > 0 else _turned(other.marks)
    marks = one.marks | _mark(one, "above") | theirs | _mark(other, "above" if power > 0 else "below")
    return Measure(
        tuple(a + power * b for a, b in zip(one.dimension, other.dimension, strict=True)),
        one.factor * other.factor**power,
        literals=one.literals + _raised(other.literals, power),
        empirical=one.empirical or other.empirical,
        marks=marks,
    )


def _raised(literals: Literals, power: float) -> Literals:
    return tuple((value, p * power) for value, p in literals)


_CHANGES_SCALE = (1.8, 1 / 1.8)


def _scaled(measure: Measure, literals: Literals) -> Measure:
    """A measure times plain numbers, which may convert it or take a part of it."""
    return replace(measure, literals=measure.literals + literals, log_of=None)


def settled(measure: Measure) -> Measure:
    """A temperature or pressure, or a sum of such, with the numbers used up by which it was multiplied: they change
    its scale (1.8), convert it (pressures), or multiply it (the half of a sum of two)."""
    if measure.weight == 0.0 or not measure.literals:
        return measure
    size = measure.value
    if is_point(measure):
        if alike(measure.dimension, PRESSURE):
            return measure
        if any(math.isclose(abs(size), c, rel_tol=1e-3) for c in _CHANGES_SCALE):
            return replace(measure, factor=measure.factor / size, literals=())
    return replace(measure, shift=measure.shift * size, weight=measure.weight * size, literals=())


def raised(measure: Measure, power: float) -> Measure:
    """A measure to a power."""
    if not measure.known:
        return UNKNOWN
    if power == 1.0:
        return measure
    place = "power" if abs(power) != 1.0 else "below"
    marks = (measure.marks if power > 0 else _turned(measure.marks)) | _mark(measure, place)
    return Measure(
        tuple(d * power for d in measure.dimension),
        measure.factor**power,
        literals=_raised(measure.literals, power),
        literal=measure.literal,
        empirical=measure.empirical,
        marks=marks,
    )


def scaled_to(measure: Measure, factor: float) -> bool:
    """Whether some of the numbers in it turn its scale into ``factor``."""
    if math.isclose(measure.factor, factor, rel_tol=CLOSE):
        return True
    return any(
        math.isclose(measure.factor / product, factor, rel_tol=CLOSE) for product, _ in subsets(measure.literals)
    )


def common_factor(one: Measure, other: Measure) -> float | None:
    """The scale that two measures of one dimension can share; None where they cannot.

    Of several the one that uses up the conversions written in both: 25 mm / 1000 is in metres.
    """
    if math.isclose(one.factor, other.factor, rel_tol=CLOSE) and not (one.literals or other.literals):
        return one.factor
    best: tuple[int, float] | None = None
    for left, factor in _scales(one):
        for more, another in _scales(other):
            if math.isclose(factor, another, rel_tol=CLOSE) and (best is None or left + more < best[0]):
                best = (left + more, factor)
    return None if best is None else best[1]


def _scales(measure: Measure) -> list[tuple[int, float]]:
    """The scales that the numbers in a measure can make, each with how many conversions it leaves unused."""
    converting = {place for place, (value, _) in enumerate(measure.literals) if converts(value)}
    return [
        (len(converting - set(places)), measure.factor / product) for product, places in subsets(measure.literals)
    ]
