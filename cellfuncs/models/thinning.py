"""How the viscosity of a film goes with its temperature: θ -> ln m and its slope, m over that at θ = 0."""

from collections.abc import Callable
from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.errors import NoModel, NumberRefused
from cellfuncs.models.chebyshev import nodes

Thinning = Callable[[Any], tuple[Any, Any]]  # θ -> ln m and d(ln m)/dθ


def constant(theta: Any) -> tuple[Any, Any]:
    """A viscosity that does not change."""
    return np.zeros_like(theta), np.zeros_like(theta)


def exponential(slope: float = 1.0) -> Thinning:
    """ln m = −slope·θ; with Δ = 1/b the slope is one."""
    return lambda theta: (-slope * theta, np.full_like(theta, -slope))


def tabulated(thetas: Any, relative: Any) -> Thinning:
    """ln m through table points, monotone between them (Fritsch and Carlson 1980); refuses beyond the table."""
    from scipy.interpolate import PchipInterpolator

    x, y = np.asarray(thetas, dtype=float), np.asarray(relative, dtype=float)
    if len(x) < 2 or (np.diff(x) <= 0).any() or (y <= 0).any() or not np.isfinite(y).all():
        raise NumberRefused("a viscosity table needs rising temperatures and viscosities above zero")
    coefficients = PchipInterpolator(x, np.log(y)).c  # cubics, highest power first

    def inside(theta: Any) -> tuple[Any, Any]:
        piece = np.minimum(np.searchsorted(x, theta, side="right") - 1, len(x) - 2)
        c3, c2, c1, c0 = coefficients[:, piece]
        step = theta - x[piece]
        return ((c3 * step + c2) * step + c1) * step + c0, (3.0 * c3 * step + 2.0 * c2) * step + c1

    return _bounded(inside, float(x[0]), float(x[-1]))


def smooth(low: float, high: float, relative: Any) -> Thinning:
    """ln m as the polynomial through its values at ``chebyshev.nodes`` between two θ; refuses beyond them.

    A smooth viscosity needs far fewer points across the film than a table with bends.
    """
    values = np.log(np.asarray(relative, dtype=float))
    if not (high > low and np.isfinite(values).all()):
        raise NumberRefused("a viscosity over a range needs two temperatures and viscosities above zero")
    powers, slopes = (matrix @ values for matrix in _powers(len(values)))
    slopes = slopes * (2.0 / (high - low))
    first, *others = np.array([powers, slopes]).T[:, :, None]

    def inside(theta: Any) -> tuple[Any, Any]:
        s = 2.0 * (theta - low) / (high - low) - 1.0
        found = first
        for power in others:  # Horner's rule for both at once
            found = found * s + power
        return found[0], found[1]

    return _bounded(inside, low, high)


@lru_cache(maxsize=16)
def _powers(count: int) -> tuple[Any, Any]:
    """From values at ``chebyshev.nodes`` to the powers of s = −1 … 1 in the polynomial through them, the highest first;
    and to those of its slope in s, as many."""
    series = np.polynomial.chebyshev
    fitted = series.chebfit(2.0 * nodes(count)[0] - 1.0, np.eye(count), count - 1)
    rising = np.zeros((count, count))  # powers of each Chebyshev polynomial
    for k in range(count):
        rising[: k + 1, k] = series.cheb2poly(np.eye(count)[k, : k + 1])
    powers = (rising @ fitted)[::-1]
    slopes = np.zeros_like(powers)
    slopes[1:] = np.arange(count - 1, 0, -1)[:, None] * powers[:-1]
    return powers, slopes


def _bounded(function: Callable[[Any], tuple[Any, Any]], low: float, high: float) -> Thinning:
    """The function inside its range. Newton's steps may look beyond, where the end's slope goes on; the film that is
    answered may not (``within``)."""
    margin = 1e-9 * (high - low)

    def thinning(theta: Any) -> tuple[Any, Any]:
        held = np.minimum(np.maximum(theta, low), high)
        values, slopes = function(held)
        return values + slopes * (theta - held), slopes

    def within(theta: Any) -> None:
        if theta.min() < low - margin or theta.max() > high + margin:
            raise NoModel(
                f"the film would come to {float(theta.max()):.4g} of the temperature scale, "
                f"but the viscosity is known from {low:.4g} to {high:.4g} only"
            )

    thinning.within = within
    return thinning
