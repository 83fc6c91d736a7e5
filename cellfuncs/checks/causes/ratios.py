"""Factors between units: the stated number is right in another unit, or an input was taken in another unit."""

import math
from collections.abc import Callable, Iterator, Mapping
from functools import lru_cache

from cellfuncs import quantities
from cellfuncs.checks.causes.guess import Guess
from cellfuncs.errors import CellfuncsError

# factors that hand-made conversions forget or apply twice, with their words
_USUAL: Mapping[float, str] = {
    1000.0: "1000",
    1e6: "1,000,000",
    100.0: "100",
    10.0: "10",
    60.0: "60",
    3600.0: "3600",
    3.6: "3.6",
    1e5: "100,000 (Pa in bar)",
    12.0: "12 (inches in a foot)",
    144.0: "144 (square inches in a square foot)",
    1.8: "1.8 (°F for K)",
    9.80665: "9.81 (gravity)",
    32.174: "32.2 (pound-force for pound-mass)",
    0.3048: "0.3048 (feet)",
    0.0254: "0.0254 (inches)",
    25.4: "25.4 (inches)",
    0.45359237: "0.4536 (pounds)",
    1055.056: "1055 (Btu)",
    3.412142: "3.412 (Btu/h for W)",
    6894.757: "6895 (psi)",
    4.1868: "4.187 (kcal)",
    1.163: "1.163 (kcal/h)",
    7.48052: "7.48 (gallons in a cubic foot)",
    448.831: "448.8 (gallons a minute)",
    264.172: "264 (gallons)",
    0.06309020: "0.0631 (gallons a minute)",
    62.428: "62.4 (lb/ft3 of water)",
    1.4881639: "1.488 (lb/ft-s)",
    2118.88: "2119 (cubic feet a minute)",
    3.28084: "3.281 (feet)",
    10.7639: "10.76 (square feet)",
    35.3147: "35.31 (cubic feet)",
    745.700: "746 (hp)",
    550.0: "550 (ft lbf/s in a hp)",
    778.169: "778 (ft lbf in a Btu)",
    5.678263: "5.678 (Btu/h-ft2-F)",
    1.730735: "1.731 (Btu/h-ft-F)",
    249.08891: "249 (inches of water)",
    60000.0: "60,000 (L/min)",
    2.0**0.5: "",
}
_DECIMALS = (10.0, 100.0)


# what a typed number is off by without being computed at all
_PLAIN = frozenset({1000.0, 1e6, 60.0, 3600.0, 3.6, 1e5, 12.0, 144.0})
_GRAVITY = 9.80665
# ratios this near to one have many explanations
_NEAR = 1.9


def usual(ratio: float, typed: bool = False) -> Iterator[tuple[str, float]]:
    """The words of every usual factor that a ratio is, or is the inverse of, with the factor itself."""
    for factor, words in _USUAL.items():
        if not words or (typed and factor in _DECIMALS):
            continue
        for power, joint in ((1.0, "too large"), (-1.0, "too small")):
            value = factor**power
            if abs(ratio / value - 1.0) < 0.02:
                yield f"{joint} by the factor {words}", value


@lru_cache(maxsize=256)
def _factors(kind: str) -> tuple[tuple[str, float], ...]:
    """The usual units of a kind with their factors to SI; temperatures and gauges have no plain factor."""
    found = []
    for text in quantities.KINDS[kind].units:
        try:
            unit = quantities.read_unit(text, kind)
        except CellfuncsError:
            continue
        if not unit.offset:
            found.append((text, unit.factor))
    return tuple(found)


def of_unit(kind: str, unit: str, si: float, expected: float, typed: bool) -> Iterator[Guess]:
    """The stated number would be right in another unit of its kind."""
    if kind not in quantities.KINDS or kind in ("dimensionless", "fraction"):
        return
    own = _own(kind, unit)
    for text, factor in _factors(kind):
        ratio = own / factor
        if abs(ratio - 1.0) > 1e-6 and not (typed and any(_is(ratio, d) for d in _DECIMALS)):
            prior = 0.35 if 1.0 / _NEAR < ratio < _NEAR else 1.0
            yield Guess("unit-factor", f"the number is in {text}, not in {unit or 'SI'}", expected * ratio, prior)


def _own(kind: str, unit: str) -> float:
    try:
        return quantities.read_unit(unit, kind).factor if unit else 1.0
    except CellfuncsError:
        return 1.0


def _is(ratio: float, factor: float) -> bool:
    return any(abs(ratio / value - 1.0) < 1e-6 for value in (factor, 1.0 / factor))


def of_number(si: float, expected: float, typed: bool) -> Iterator[Guess]:
    """The stated number is off by a factor that conversions use."""
    if not expected or si / expected <= 0:
        return
    for words, factor in usual(si / expected, typed):
        plain = any(_is(factor, f) for f in _PLAIN)
        prior = (0.9 if plain else 0.12) if typed else (0.35 if 1.0 / _NEAR < factor < _NEAR else 0.9)
        code = "dimension-mismatch" if _is(factor, _GRAVITY) else "unit-factor"
        yield Guess(code, f"it is {words}", expected * factor, prior)


def of_input(
    words: str, kind: str, unit: str, value: float, answer: Callable[[float], float]
) -> Iterator[Guess]:
    """An input was taken in another unit than it is stated in."""
    if kind not in quantities.KINDS or kind in ("dimensionless", "fraction"):
        return
    own = _own(kind, unit)
    seen: set[float] = set()
    for text, factor in _factors(kind):
        ratio = factor / own
        if abs(ratio - 1.0) < 1e-6 or any(math.isclose(ratio, s, rel_tol=1e-6) for s in seen):
            continue
        seen.add(ratio)
        taken = f"{words} is taken in {text}, but it is in {unit or 'SI'}"
        yield Guess("unit-factor", taken, answer(value * ratio), 0.8)
        yield Guess("unit-factor", f"{words} is converted from {unit or 'SI'} to {text} the wrong way or twice",
                    answer(value / ratio), 0.7)  # fmt: skip
