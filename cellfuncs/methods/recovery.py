"""Recovery: by how much friction warms a wall that takes no heat.

The table for turbulent tubes was computed with an eddy-viscosity profile, about ±10 %; it is
interpolated in log Re and log Pr and refused outside.
"""

import math
from bisect import bisect_right

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import high_speed

_LOG_RE = (4.0, 5.0, 6.0)
_PRANDTL = (0.005, 0.025, 0.1, 0.71, 2.0, 6.0, 20.0, 100.0, 500.0)
_FACTOR = (
    (0.05, 0.23, 0.45),
    (0.23, 0.47, 0.61),
    (0.53, 0.66, 0.73),
    (1.07, 0.95, 0.92),
    (1.44, 1.16, 1.05),
    (2.0, 1.47, 1.25),
    (3.0, 2.0, 1.6),
    (5.5, 3.4, 2.5),
    (10.9, 6.4, 4.5),
)
_LOG_PR = tuple(math.log10(p) for p in _PRANDTL)
SOURCE = "eddy-viscosity-tube"


def _place(grid: tuple[float, ...], x: float) -> tuple[int, float]:
    k = min(max(bisect_right(grid, x) - 1, 0), len(grid) - 2)
    return k, (x - grid[k]) / (grid[k + 1] - grid[k])


def turbulent_tube(reynolds: float, prandtl: float) -> float:
    """Recovery factor r of a turbulent tube, ΔT_rec = rU²/(2cp) with the mean velocity."""
    tiny = 1e-9
    if not 1e4 * (1 - tiny) <= reynolds <= 1e6 * (1 + tiny) or not 0.005 <= prandtl <= 500.0:
        raise OutOfRange(
            f"the recovery factor of a turbulent duct is known for Re 1e4 to 1e6 and Pr 0.005 to 500, "
            f"here Re {reynolds:.3g}, Pr {prandtl:.3g}"
        )
    i, s = _place(_LOG_PR, math.log10(prandtl))
    j, t = _place(_LOG_RE, math.log10(reynolds))
    low = _FACTOR[i][j] * (1 - t) + _FACTOR[i][j + 1] * t
    high = _FACTOR[i + 1][j] * (1 - t) + _FACTOR[i + 1][j + 1] * t
    return low * (1 - s) + high * s


def laminar_plate(prandtl: float) -> float:
    """Recovery factor of a laminar plate, refused outside its range."""
    if prandtl < 0.01:
        raise OutOfRange(f"the recovery factor of a plate is known from Pr 0.01, here {prandtl:.3g}")
    return high_speed.laminar_recovery(prandtl)


def turbulent_plate(prandtl: float) -> tuple[float, bool]:
    """Recovery factor of a turbulent plate, and whether it is only rough there (Pr 1 to 10)."""
    if not 0.5 <= prandtl <= 10.0:
        raise OutOfRange(f"the recovery factor of a turbulent plate is known for Pr 0.5 to 10, here {prandtl:.3g}")
    return high_speed.turbulent_recovery(prandtl), prandtl > 1.0
