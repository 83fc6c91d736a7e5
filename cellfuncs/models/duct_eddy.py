"""Developed turbulent flow in a smooth tube or between plates: velocity, friction heat and eddy conductivity.

Eddy viscosity: van Driest's damping towards the wall with the constants of Kawai and Larsson 2012 times Reichardt's
middle law (1951), ξ the distance from the middle:

    ν_t/ν = 0.41·y⁺·(1 − exp(−y⁺/17))² · (½ + ξ²)(1 + ξ)/3

It grows like y⁺³ at the wall, as heat transfer at high Pr asks for (Nu ~ Pr^⅓; Notter and Sleicher 1971). Shear
τ/τ_w = ξ, so du⁺/dy⁺ = ξ/(1 + ν_t/ν); friction heat (1 + ν_t/ν)(du/dy)², all of it, since what feeds the eddies ends
as heat in the same place on the mean. Eddy conductivity Pr·(ν_t/ν)/Pr_t with Pr_t = 0.85 + b/Pe_t, Pe_t = Pr·ν_t/ν
(Kays 1994: b = 0.7, for liquid metals 2), the same along as across. Plates carry the law of the tube in their half gap.
Sources: Reichardt 1951, Z. angew. Math. Mech. 31, 208-219; Kawai and Larsson 2012, Phys. Fluids 24, 015105; Kays 1994,
J. Heat Transfer 116, 284-295; Notter and Sleicher 1971, Chem. Eng. Sci. 26, 161-171.
"""

from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.models.duct_profile import Profile
from cellfuncs.models.duct_section import gauss

REYNOLDS = (4e3, 5e6)
PRANDTL = (1e-3, 1e3)
_SLOPE, _DAMPING = 0.41, 17.0
_METALS = 0.1  # Pr: only liquid metals lie below
_POWER, _POINTS = 5, 96


def eddy(from_middle: Any, wall_units: Any) -> Any:
    """ν_t/ν at ξ, y⁺. Sources: Kawai and Larsson 2012 (damping), Reichardt 1951 (middle)."""
    damped = _SLOPE * wall_units * np.expm1(-np.minimum(wall_units / _DAMPING, 60.0)) ** 2
    return damped * (0.5 + from_middle**2) * (1.0 + from_middle) / 3.0


def eddy_conductivity(ratio: Any, prandtl: float) -> Any:
    """k_t/k from ν_t/ν, with the turbulent Prandtl number of Kays 1994."""
    peclet = prandtl * ratio
    return peclet**2 / (0.85 * peclet + (2.0 if prandtl < _METALS else 0.7))


@lru_cache(maxsize=256)
def friction_scale(section: str, reynolds: float) -> tuple[float, float]:
    """(half width in wall units, mean velocity over the friction velocity); Darcy's f is 8/(the latter)²."""
    t, weights = gauss(_POINTS)
    y = t**_POWER
    weights = weights * _POWER * t ** (_POWER - 1)
    xi = 1.0 - y
    lever, diameters = (xi**3, 2.0) if section == "tube" else (xi**2, 4.0)

    def mean(half: float) -> float:
        return half * float(weights @ (lever / (1.0 + eddy(xi, half * y))))

    half = 0.1 * reynolds**0.9 / diameters
    for _ in range(60):  # Re ~ half^1.1: the fixed point contracts by ten a round
        new = half * (reynolds / (diameters * half * mean(half))) ** 0.9
        if abs(new - half) < 1e-14 * half:
            break
        half = new
    return half, mean(half)


@lru_cache(maxsize=128)
def turbulent(section: str, heated: str, reynolds: float, prandtl: float) -> Profile:
    """The turbulent flow's profile; Re 4e3 to 5e6, Pr 1e-3 to 1e3, tube or plates heated alike."""
    for name, value, (low, high) in (("Reynolds", reynolds, REYNOLDS), ("Prandtl", prandtl, PRANDTL)):
        if not low <= value <= high:
            raise OutOfRange(f"turbulent model: {name} number {value:.4g} is outside {low:g} to {high:g}")
    if section not in ("tube", "plates") or heated != "both":
        raise NoModel("the turbulent model knows a tube, or plates that are both heated")
    half, mean = friction_scale(section, reynolds)
    tube = section == "tube"
    scale = ((2.0 if tube else 4.0) * half / mean) ** 2

    def from_middle(c: Any) -> Any:
        return np.sqrt(c) if tube else c

    def distance(c: Any) -> Any:
        return (1.0 - c) / (1.0 + np.sqrt(c)) if tube else 1.0 - c

    def ratio(c: Any) -> Any:
        return eddy(from_middle(c), half * distance(c))

    def velocity(c: Any) -> Any:
        return _from_wall(distance(c), half) / mean

    return Profile(
        velocity=velocity,
        friction=lambda c: scale * from_middle(c) ** 2 / (1.0 + ratio(c)),
        conductivity=lambda c: 1.0 + eddy_conductivity(ratio(c), prandtl),
        spread=(lambda c: 16.0 * c) if tube else (lambda c: np.full_like(c, 16.0)),
        perimeter=4.0,
    )


def _from_wall(y: Any, half: float) -> Any:
    """u⁺ at wall distances y (over the half width): Gauss sums of du⁺/dy⁺ from each place to the next."""
    order = np.argsort(y)
    ends = np.concatenate([[0.0], y[order]]) ** (1.0 / _POWER)
    t, weights = gauss(12)
    width = np.diff(ends)
    places = ends[:-1, None] + width[:, None] * t
    at = places**_POWER
    slope = (1.0 - at) / (1.0 + eddy(1.0 - at, half * at)) * half * _POWER * places ** (_POWER - 1)
    found = np.empty_like(y)
    found[order] = np.cumsum(width * (slope @ weights))
    return found
