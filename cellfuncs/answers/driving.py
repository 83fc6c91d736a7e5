"""The difference between wall and stream that a stated flux or a heat path beyond the wall asks for.

The coefficient depends on the difference (film temperature, wall viscosity, buoyancy), the difference on the
coefficient: a bracketed root closes the loop.
"""

import math
from collections.abc import Callable

from cellfuncs.errors import CellfuncsError, OutOfRange

_FIRST = 10.0  # K, the first guess
_MOST_DOUBLINGS = 60
_FACTOR = 2.0
_SAME = 1e-11

Coefficient = Callable[[float], float]  # of the signed difference


def for_flux(coefficient: Coefficient, flux: float) -> float:
    """The signed difference [K] at which h·ΔT is the flux [W/m2]."""
    sign, wanted = math.copysign(1.0, flux), abs(flux)

    def positive(difference: float) -> float:
        found = coefficient(difference)
        if found > 0.0:
            return found
        raise OutOfRange("the method has no coefficient above zero here; it is far outside its range")

    def missing(logarithm: float) -> float:
        difference = math.exp(logarithm)
        return math.log(positive(sign * difference) * difference / wanted)

    at = math.log(wanted / positive(sign * _first_answered(positive, sign)))
    short = missing(at)
    if short == 0.0:
        return sign * math.exp(at)
    step = math.copysign(math.log(_FACTOR), -short)
    for _ in range(_MOST_DOUBLINGS):
        beyond = at + step
        other = missing(beyond)
        if short * other <= 0.0:
            return sign * math.exp(_root(missing, at, beyond))
        at, short = beyond, other
    raise OutOfRange("no difference between wall and stream gives this flux; look at its size")


def _first_answered(coefficient: Coefficient, sign: float) -> float:
    """A difference at which the coefficient is known: smaller ones where the properties end early."""
    difference = _FIRST
    for _ in range(8):
        try:
            coefficient(sign * difference)
            return difference
        except CellfuncsError:
            difference /= 4.0
    coefficient(sign * difference)
    return difference


def for_path(coefficient: Coefficient, total: float, resistance: float) -> float:
    """The signed difference of wall and stream [K], of ``total`` between the far side and the stream.

    The flux through the path, (total − ΔT)/R, is the flux to the stream, h·ΔT.
    """

    def missing(share: float) -> float:
        difference = share * total
        return coefficient(difference) * resistance * share - (1.0 - share)

    guess = 1.0 / (1.0 + coefficient(0.5 * total) * resistance)
    low, high = guess, guess
    while missing(low) > 0.0:
        low *= 0.5
    while missing(high) < 0.0:
        high = 0.5 * (1.0 + high)
        if high > 1.0 - 1e-12:
            return total
    return total * _root(missing, low, high)


def _root(function: Callable[[float], float], one: float, other: float) -> float:
    if one == other:
        return one
    from scipy.optimize import brentq

    return brentq(function, min(one, other), max(one, other), xtol=_SAME, rtol=_SAME)
