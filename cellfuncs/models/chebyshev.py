"""Chebyshev collocation on one interval, and on intervals joined end to end."""

from functools import lru_cache
from typing import Any

import numpy as np


@lru_cache(maxsize=64)
def nodes(count: int) -> tuple[Any, Any, Any]:
    """Points on [0, 1] (rising, ends included), the derivative matrix there, and the weights of the integral.

    Source: Trefethen 2000, Spectral Methods in MATLAB (SIAM), chapters 6 and 12 (Clenshaw-Curtis).
    """
    n = count - 1
    k = np.arange(count)
    x = -np.cos(np.pi * k / n)
    c = np.ones(count)
    c[[0, -1]] = 2.0
    c *= (-1.0) ** k
    # x_i - x_j by the product of sines: no cancellation near the ends
    half = np.pi * k / (2 * n)
    apart = 2.0 * np.sin(half[:, None] + half) * np.sin(half[:, None] - half)
    d = np.outer(c, 1.0 / c) / (apart + np.eye(count))
    d -= np.diag(d.sum(axis=1))
    m = np.arange(0, count, 2)
    moments = np.zeros(count)
    moments[m] = 2.0 / (1.0 - m.astype(float) ** 2)
    matrix = np.cos(np.pi * np.outer(k, k) / n) * (2.0 / n)
    matrix[[0, -1], :] *= 0.5
    matrix[:, [0, -1]] *= 0.5
    weights = (matrix.T @ moments)[::-1] / 2.0
    found = (x + 1.0) / 2.0, 2.0 * d, weights
    for array in found:
        array.flags.writeable = False
    return found


def interpolate(count: int, values: Any, places: Any) -> Any:
    """The polynomial through values at ``nodes(count)``, at places in [0, 1] (barycentric)."""
    x = nodes(count)[0]
    places = np.atleast_1d(np.asarray(places, dtype=float))
    apart = places[:, None] - x[None, :]
    hit = apart == 0.0
    some = hit.any()
    if some:
        apart[hit] = 1.0
    terms = _barycentric(count) / apart
    found = (terms @ values) / terms.sum(axis=1)
    if some:
        rows, columns = np.nonzero(hit)
        found[rows] = np.asarray(values)[columns]
    return found


@lru_cache(maxsize=64)
def second_derivative(count: int) -> Any:
    """The matrix of the second derivative on ``nodes(count)``."""
    d = nodes(count)[1]
    found = d @ d
    found.flags.writeable = False
    return found


@lru_cache(maxsize=64)
def _barycentric(count: int) -> Any:
    """Weights of the nodes in an interpolation."""
    w = (-1.0) ** np.arange(count)
    w[[0, -1]] *= 0.5
    w.flags.writeable = False
    return w
