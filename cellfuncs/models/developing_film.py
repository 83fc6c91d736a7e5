"""How far the heat of friction has developed in a sheared film of finite length; constant viscosity, equal walls.

The film enters at the temperature of its walls: y·∂θ/∂x* = ∂²θ/∂y² + Br, x* = αx/(Uh²), u = y. By collocation across
and all eigenvalues along, so that any x* is one product; what is told is over the developed film's μU²/(8k) and its
wall fluxes μU²/(2h).
"""

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.errors import NoModel
from cellfuncs.models.chebyshev import interpolate, nodes

_COARSE, _FINE = 24, 32
_DEVELOPED = 5.0  # x*: the slowest mode has faded by e^-90


@dataclass(frozen=True)
class Developing:
    """Parts of the developed values at a place."""

    peak: float
    low_flux: float  # into the fixed wall
    high_flux: float  # into the moving wall
    error: float


@lru_cache(maxsize=1024)
def developing(place: float) -> Developing:
    """The parts at x* = αx/(Uh²); the error from two resolutions."""
    if not place > 0 or not math.isfinite(place):
        raise NoModel("a place along the film is a number above zero")
    if place >= _DEVELOPED:
        return Developing(1.0, 1.0, 1.0, 1e-15)
    coarse, fine = _parts(place, _COARSE), _parts(place, _FINE)
    return Developing(*fine, max(abs(c - f) for c, f in zip(coarse, fine, strict=True)) + 1e-14)


@lru_cache(maxsize=4)
def _modes(count: int) -> tuple[Any, Any, Any]:
    """Rates, modes and what each takes of the developed profile y(1 − y)/2, on the inner nodes."""
    y, d, _ = nodes(count)
    inner = slice(1, -1)
    rates, modes = np.linalg.eig((d @ d)[inner, inner] / y[inner, None])
    developed = 0.5 * y[inner] * (1.0 - y[inner])
    return rates, modes, np.linalg.solve(modes, developed.astype(modes.dtype))


def _parts(place: float, count: int) -> tuple[float, float, float]:
    y, d, _ = nodes(count)
    rates, modes, weights = _modes(count)
    theta = 0.5 * y * (1.0 - y)
    theta[1:-1] -= ((modes * np.exp(np.maximum(rates.real, -700.0 / place) * place)) @ weights).real
    fluxes = d @ theta
    fine = np.linspace(0.0, 1.0, 201)
    return float(interpolate(count, theta, fine).max() * 8.0), float(fluxes[0] * 2.0), float(-fluxes[-1] * 2.0)
