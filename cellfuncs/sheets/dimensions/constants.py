"""Numbers in formulas that convert units, carry units, or are plain."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations
from math import isclose, log10, pi

from cellfuncs.quantities.kinds import read_dimension
from cellfuncs.sources import read_table

_ROUND = (10.0, 100.0, 0.1, 0.01)
CLOSE = 0.006  # relative: constants written with three digits
MOST_LITERALS = 10

Dimension = tuple[float, ...]


@dataclass(frozen=True)
class Constant:
    """A number that carries a unit: ``si`` is the SI value of its unit."""

    value: float
    dimension: Dimension
    si: float
    words: str


@lru_cache(maxsize=1)
def _rows() -> tuple[dict[str, str], ...]:
    return tuple(read_table("sheet_constants.csv"))


@lru_cache(maxsize=1)
def factors() -> tuple[float, ...]:
    """Numbers that hardly stand in a formula for anything but a conversion."""
    return tuple(float(row["value"]) for row in _rows() if row["role"] == "factor")


@lru_cache(maxsize=1)
def _loose() -> tuple[float, ...]:
    return tuple(float(row["value"]) for row in _rows() if row["role"] == "loose")


@lru_cache(maxsize=1)
def coefficients() -> tuple[float, ...]:
    """Dimensionless numbers of well-known correlations."""
    return tuple(float(row["value"]) for row in _rows() if row["role"] == "coefficient")


@lru_cache(maxsize=1)
def constants() -> tuple[Constant, ...]:
    """Numbers that carry a unit of their own, such as the acceleration of gravity."""
    return tuple(
        Constant(float(row["value"]), read_dimension(row["dimension"])[:-1], float(row["si"]), row["words"])
        for row in _rows()
        if row["role"] == "constant"
    )


@lru_cache(maxsize=4096)
def converts(value: float) -> bool:
    """Whether a number, or its reciprocal, is a conversion that has to be used up."""
    return value != 0 and any(isclose(v, f, rel_tol=1e-4) for v in (abs(value), 1 / abs(value)) for f in factors())


_PLAIN = (1, 2, 3, 4, 6, 8, 12, 16, 24, 32, 64)


@lru_cache(maxsize=4096)
def is_plain(value: float) -> bool:
    """Whether a number carries no unit for sure: one of formulas of geometry and definitions (2, 3/4, π/4), a power of
    ten, a conversion, or a coefficient of a known correlation. All others may be a value with a unit, typed in."""
    size = abs(value)
    if size == 0 or converts(size) or any(isclose(size, n, rel_tol=1e-4) for n in (*_loose(), *coefficients())):
        return True
    if isclose(log10(size), round(log10(size)), abs_tol=1e-9):
        return True
    return any(isclose(size, ratio * by, rel_tol=1e-3) for ratio in _ratios() for by in (1.0, pi, 1 / pi))


@lru_cache(maxsize=1)
def _ratios() -> frozenset[float]:
    return frozenset(above / below for above in _PLAIN for below in _PLAIN)


@lru_cache(maxsize=4096)
def may_carry_a_unit(value: float) -> bool:
    """Whether a number may be a value with a unit that was typed in: also 10 or 0.01, which else convert."""
    size = abs(value)
    return not is_plain(value) or any(isclose(size, n) for n in _ROUND)


@lru_cache(maxsize=4096)
def is_conversion(ratio: float) -> bool:
    """Whether a ratio of units is a power of ten, a factor of the table, or a product of two of these."""
    if ratio <= 0:
        return False
    if _power_of_ten(ratio):
        return True
    return any(_power_of_ten(r / f) for r in (ratio, 1 / ratio) for f in (*factors(), *_loose()))


def _power_of_ten(ratio: float) -> bool:
    power = log10(ratio)
    return abs(power - round(power)) < 0.002 and abs(power) < 13


def subsets(literals: tuple[tuple[float, float], ...]) -> Iterator[tuple[float, tuple[int, ...]]]:
    """Every product of some of the numbers in a formula, with their places; the fewest first."""
    chosen = [place for place, (value, _) in enumerate(literals) if value > 0][:MOST_LITERALS]
    for size in range(len(chosen) + 1):
        for places in combinations(chosen, size):
            product = 1.0
            for place in places:
                value, power = literals[place]
                product *= value**power
            yield product, places
