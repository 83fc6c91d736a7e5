"""A film sheared between a fixed and a moving wall, with a pressure gradient, heated by its own friction.

Across the gap y = 0 … 1, velocity u in units of the moving wall's, θ = (T − T₀)/Δ with a temperature scale Δ, and the
viscosity m(θ) over that at T₀:

    (m·u')' = −P,  u(0) = 0, u(1) = 1,          P = (−dp/dx)·h²/(μ₀U)
    θ'' + Br·m·u'² + S = 0,                       Br = μ₀U²/(kΔ),  S = q‴h²/(kΔ)

each wall at a temperature or insulated. For exponential viscosity μ₀·exp(−b(T − T₀)) take Δ = 1/b: Br is then Nahme's
number and m = e^−θ. The equation is solved with the heat made, H = Br·∫m·u'², as the parameter: for a given H it has
one solution, and Br and the wall stress follow from it, so that turning points are maxima of a curve and are found,
not stumbled over. Sources: Nahme 1940; Gavis and Laurence 1968.
"""

import math
from itertools import pairwise

from cellfuncs.errors import NoModel
from cellfuncs.models.film import Beyond, Film, Gap, Solver, State, Unresolved, difference
from cellfuncs.models.thinning import Thinning, constant, exponential, smooth, tabulated

__all__ = [
    "Film", "Gap", "Thinning", "at_speed", "at_stress", "constant", "critical_nahme", "exponential", "nahme_peak",
    "nahme_stress", "smooth", "tabulated", "turning_point",
]  # fmt: skip

_COUNTS = (20, 30, 45, 68, 100)
_CLOSE = 1e-9  # of the rise: two resolutions agree
_POOR = 1e-4  # of the rise: the least with which the finest resolution answers; the error is told
_FAR = 0.03  # of the rise: another solution, or none


def at_speed(gap: Gap, heating: float) -> Film:
    """The film at a given Br (the speed is given); the coolest one where a pressure gradient allows several.

    Raises NoModel above the turning point (runaway), in words with the largest Br, and where no resolution suffices.
    """
    if not math.isfinite(heating) or heating < 0:
        raise NoModel("viscous heating is a number from zero upwards")
    before: State | None = None
    error, found = math.inf, None
    for count in _COUNTS:
        solver = Solver(gap, count)
        try:
            state = solver.at_speed(heating, near=before)
            if before is not None and difference(before, state) > _FAR * _size(state):
                state = solver.at_speed(heating)  # the coarse one was none of the film's: follow the branch anew
        except Unresolved:
            before, found = None, None
            continue
        if before is not None:
            error = difference(before, state)
            found = solver.film(state, error)
            if error <= _CLOSE * _size(state):
                return found
        before = state
    if found is not None and before is not None and error <= _POOR * _size(before):
        return found
    raise NoModel("the film is too sharply layered to be resolved; the viscosity changes too steeply across it")


def _size(state: State) -> float:
    """By what θ differs in a film."""
    return max(float(state.theta.max() - state.theta.min()), 1e-300)


def at_stress(gap: Gap, squared_stress: float) -> tuple[Film, ...]:
    """All films under a given stress without pressure gradient, the coolest first; G = τ²h²/(μ₀kΔ), θ'' + G/m + S = 0.

    Two below the turning point; NoModel above it (runaway), with the largest G in words.
    """
    if gap.pressure:
        raise NoModel("a given wall stress is answered without a pressure gradient; give the speed instead")
    if not math.isfinite(squared_stress) or squared_stress < 0:
        raise NoModel("a stress squared is a number from zero upwards")
    largest = 0.0
    for count, finer in pairwise(_COUNTS):
        coarse, fine = Solver(gap, count), Solver(gap, finer)
        try:
            found = list(zip(coarse.at_stress(squared_stress), fine.at_stress(squared_stress), strict=True))
        except (Unresolved, ValueError):
            continue
        except Beyond as beyond:
            largest = beyond.largest
            continue
        films = [fine.film(state, difference(near, state)) for near, state in found]
        if all(f.error <= _CLOSE * max(float(abs(f.rise).max()), 1e-300) for f in films):
            return tuple(films)
    if largest:
        raise NoModel(
            f"no steady film under this stress: the largest that one can bear has τ²h²/(μkΔ) = {largest:.4g}, "
            f"asked {squared_stress:.4g}; beyond it the film runs away"
        )
    raise NoModel("the film is too sharply layered to be resolved")


def turning_point(gap: Gap) -> Film | None:
    """The film that bears the largest stress without pressure gradient, or None where stress rises for ever."""
    if gap.pressure:
        raise NoModel("the largest stress is told without a pressure gradient")
    solver = Solver(gap, _COUNTS[2])
    top = solver.top(lambda s: s.squared_stress)
    if top is None:
        return None
    again = Solver(gap, _COUNTS[3])
    state = again.solve(top.made, top.theta_at(again.x))
    return again.film(state, difference(top, state))


# -- closed forms: exponential viscosity, walls at one temperature, no pressure gradient ----------------------------


def nahme_peak(nahme: float, insulated: bool = False) -> float:
    """b·(T_peak − T_wall) at Na = bμ₀U²/k: ln(1 + Na/8), or ln(1 + Na/2) with one wall insulated."""
    return math.log1p(nahme / (2.0 if insulated else 8.0))


def nahme_stress(nahme: float, insulated: bool = False) -> float:
    """Wall stress over μ₀U/h: asinh(s)/(s·√(1 + s²)), s² = Na/8, or Na/2 with one wall insulated."""
    s = math.sqrt(nahme / (2.0 if insulated else 8.0))
    return math.asinh(s) / (s * math.hypot(1.0, s)) if s > 1e-8 else 1.0


def critical_nahme(insulated: bool = False) -> tuple[float, float]:
    """Na and G = bτ²h²/(μ₀k) at the largest stress: 18.2 and 3.514; with one wall insulated 4.55 and 0.878."""
    x = 1.199678640257734  # x·tanh x = 1
    factor = 2.0 if insulated else 8.0
    return factor * math.sinh(x) ** 2, factor * (x / math.cosh(x)) ** 2
