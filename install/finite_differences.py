"""A plain second-order finite-volume solution of the tube with conduction along: what the solved duct is held against.

Not part of the library. Central differences, one sparse direct solution; the cells may crowd towards the wall and
towards the ends of the heated length, which is the best that can be done for the square root in θ there.
"""

import math
from itertools import pairwise
from typing import Any

import numpy as np


def _edges(stations: list[tuple[float, int]], crowded: bool) -> Any:
    """Cell edges through the stations (place, cells up to the next), crowded towards inner stations or even."""
    parts = []
    for k, ((start, cells), (end, _)) in enumerate(pairwise(stations)):
        s = np.linspace(0.0, 1.0, cells + 1)[:-1]
        if crowded:
            first, last = k == 0, k == len(stations) - 2
            s = 1 - (1 - s) ** 2 if first else s**2 if last else np.where(s < 0.5, 2 * s**2, 1 - 2 * (1 - s) ** 2)
        parts.append(start + (end - start) * s)
    return np.concatenate([*parts, [stations[-1][0]]])


def bulk_temperatures(peclet: float, length: float, places: Any, cells: int, crowded: bool = True) -> Any:
    """θ_b at x/D ``places`` of a tube held at 1 over ``length`` (in D), insulated before and after; inlet 0.

    ``cells`` over the radius, as many over each half of the heated length and on each side of it.
    """
    from scipy.interpolate import CubicSpline
    from scipy.sparse import coo_matrix
    from scipy.sparse.linalg import spsolve

    before, after = 12.0 / min(max(peclet, 1.0), 40.0) + 0.8, 1.5
    x = _edges([(-before, cells), (0.0, 2 * cells), (length, cells), (length + after, 0)], crowded)
    t = np.linspace(0.0, 1.0, cells + 1)
    r = 0.5 * (1.0 - (1.0 - t) ** 2) if crowded else 0.5 * t
    dx, xc = np.diff(x), 0.5 * (x[1:] + x[:-1])
    rc, ring = 0.5 * (r[1:] + r[:-1]), 0.5 * np.diff(r**2)
    nx, nr = len(dx), len(rc)
    flow = peclet * (r[1:] ** 2 - r[:-1] ** 2 - 2.0 * (r[1:] ** 4 - r[:-1] ** 4))  # ∫2(1 − 4r²)·r dr
    across = r[1:-1] / np.diff(rc)
    number = np.arange(nx * nr).reshape(nx, nr)
    rows, columns, values = [], [], []

    def add(row: Any, column: Any, value: Any) -> None:
        rows.append(row.ravel())
        columns.append(column.ravel())
        values.append(np.broadcast_to(value, row.shape).ravel())

    for a, b in ((number[:, :-1], number[:, 1:]), (number[:, 1:], number[:, :-1])):
        conductance = across[None, :] * dx[:, None]
        add(a, a, conductance)
        add(a, b, -conductance)
    along = ring[None, :] / np.diff(xc)[:, None]
    share = ((x[1:-1] - xc[:-1]) / np.diff(xc))[:, None]  # linear between cells, also where they differ in length
    west, east = number[:-1], number[1:]
    for a, sign in ((west, 1.0), (east, -1.0)):
        add(a, west, sign * (along + flow * (1.0 - share)))
        add(a, east, sign * (-along + flow * share))
    add(number[-1], number[-1], flow)
    add(number[0], number[0], 2.0 * ring / dx[0])  # θ = 0 at the first edge; nothing is carried in
    heated = (xc > 0.0) & (xc < length)
    wall = np.where(heated, 0.5 * dx / (0.5 - rc[-1]), 0.0)
    add(number[:, -1], number[:, -1], wall)
    right = np.zeros(nx * nr)
    right[number[:, -1]] = wall
    matrix = coo_matrix((np.concatenate(values), (np.concatenate(rows), np.concatenate(columns)))).tocsc()
    theta = spsolve(matrix, right).reshape(nx, nr)
    return CubicSpline(xc, theta @ flow / (peclet * 0.125))(places)


def cells_for(tolerance: float, peclet: float, length: float, places: Any, exact: Any) -> int:
    """The fewest cells (by steps of a tenth) that bring the bulk temperature to ``tolerance``, relative."""
    cells = 40
    while cells < 400:
        found = bulk_temperatures(peclet, length, places, cells)
        if np.max(np.abs(found / exact - 1.0)) <= tolerance:
            return cells
        cells = math.ceil(1.1 * cells)
    raise RuntimeError("finite differences do not come to the tolerance")
