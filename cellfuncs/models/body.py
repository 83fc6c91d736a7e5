"""A solid body that warms or cools in a fluid: the exact series against one temperature throughout (lumped).

Bi = hL/k and Fo = αt/L², L half the thickness of a wall or the radius of a cylinder or sphere; temperature ratios are
(T − T∞)/(T_start − T∞). The series, and the semi-infinite solid for the first instants, stand in
``methods/transient.py``; here they are set side by side. A lumped body may also make heat and radiate.
"""

import math
from dataclasses import dataclass

from cellfuncs.errors import NoModel, UnknownName
from cellfuncs.methods import transient
from cellfuncs.models.trust import finite

SHAPES = {"plane wall": 1.0, "long cylinder": 2.0, "sphere": 3.0}  # surface times L over volume
_ROUNDING = 1e-13  # of the series, which has every term above e^-40 of the first
_STEPS = 20000  # of the integration, more than any that ends
_SERIES_FROM = 1e-4  # Fo: before, heat has not come a twentieth of the way to the middle


@dataclass(frozen=True)
class Body:
    """Temperature ratios after the time, and the lumped one beside them."""

    middle: float
    surface: float
    mean: float
    lumped: float
    error: float


def body(shape: str, biot: float, fourier: float) -> Body:
    """The exact ratios of a plane wall, long cylinder or sphere. Range: Bi and Fo above zero, finite."""
    if shape not in SHAPES:
        raise UnknownName(f'bodies are solved as {", ".join(SHAPES)}, not "{shape[:40]}"')
    finite(Biot_number=biot, Fourier_number=fourier)
    if biot <= 0 or fourier <= 0:
        raise NoModel("Biot and Fourier number are above zero")
    lumped = math.exp(-min(SHAPES[shape] * biot * fourier, 700.0))
    if fourier < _SERIES_FROM:
        return _first_instants(shape, biot, fourier, lumped)
    middle, surface = (transient.ratio_at(shape, biot, fourier, place) for place in (0.0, 1.0))
    return Body(middle, surface, 1.0 - transient.heat_part(shape, biot, fourier), lumped, _ROUNDING)


def _first_instants(shape: str, biot: float, fourier: float, lumped: float) -> Body:
    """The semi-infinite solid at the surface; the flux through it, over the whole surface, for the mean."""
    from scipy.special import erfcx

    h = biot * math.sqrt(fourier)
    surface = 1.0 - transient.deep_convection(0.0, h)
    given_off = h * h * (1.0 - 4.0 * h / (3.0 * math.sqrt(math.pi)))  # the series of what follows, for small h
    if h > 1e-3:
        given_off = float(erfcx(h)) - 1.0 + 2.0 * h / math.sqrt(math.pi)
    curved = SHAPES[shape] - 1.0
    # a curved surface takes in more than a plane one, by the depth that heat has reached over the radius
    error = (curved + 1e-3) * math.sqrt(fourier) * max(1.0 - surface, SHAPES[shape] * given_off / biot)
    return Body(1.0, surface, 1.0 - SHAPES[shape] * given_off / biot, lumped, error)


@dataclass(frozen=True)
class Lumped:
    """A body of one temperature after some time constants ρcV/(hA)."""

    ratio: float  # (T − T∞)/(T_start − T∞)
    error: float


def lumped(time: float, source: float = 0.0, radiation: float = 0.0, level: float = 0.0, seen: float = 0.0) -> Lumped:
    """A lumped body that makes heat and radiates: θ' = −θ + S − R·((1 + Bθ)⁴ − C⁴)/B, θ(0) = 1, t in time constants.

    ``source`` S = q‴V/(hAΔT); ``radiation`` R = εσT∞³/h; ``level`` B = ΔT/T∞ (signed); ``seen`` C = T_surroundings/T∞.
    Without radiation the closed form.
    """
    finite(time=time, source=source, radiation=radiation, level=level, surroundings=seen)
    if time < 0 or radiation < 0:
        raise NoModel("time and radiation are numbers from zero upwards")
    if radiation == 0:
        fading = math.exp(-min(time, 700.0))
        return Lumped(source + (1.0 - source) * fading, 1e-15)
    if level == 0:
        raise NoModel("radiation needs the level of the temperatures")
    if 1.0 + level <= 0:
        raise NoModel("the body would start below absolute zero")
    from scipy.integrate import odeint

    def slope(_: float, y: list[float]) -> float:
        t = 1.0 + level * float(y[0])  # a step that tries a temperature below zero is led back, not away
        return -float(y[0]) + source - radiation * (abs(t) ** 3 * t - seen**4) / level

    if 1.0 + level * source <= 0 and radiation * seen**4 < -source * level - 1.0:
        raise NoModel("the sink of heat would take the body below absolute zero")
    ends = []
    for tolerance in (1e-8, 1e-11):
        found, told = odeint(
            slope, 1.0, (0.0, min(time, 700.0)), rtol=tolerance, atol=1e-2 * tolerance,
            mxstep=_STEPS, tfirst=True, full_output=True,
        )  # fmt: skip
        if told["message"] != "Integration successful.":
            raise NoModel("the cooling of the body was not solved")
        ends.append(float(found[-1, 0]))
        if 1.0 + level * ends[-1] <= 0:
            raise NoModel("the sink of heat would take the body below absolute zero")
    return Lumped(ends[1], abs(ends[1] - ends[0]) + 1e-14)
