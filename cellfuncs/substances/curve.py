"""A smooth curve through tabled points that never overshoots them (monotone cubic), on plain floats.

Own, and not scipy's, because one value of a solid or of a user's table should cost a microsecond and no
import; the tests compare it with scipy's ``PchipInterpolator``, whose method it is.
"""

import math
from bisect import bisect_right
from collections.abc import Sequence
from itertools import pairwise

from ..errors import NumberRefused


class Curve:
    """Monotone cubic interpolation (Fritsch and Butland 1984) through points whose x rise strictly.

    With ``logarithmic`` the logarithm of y is interpolated: for what falls or rises exponentially.
    """

    __slots__ = ("_logarithmic", "_pieces", "_x", "x_max", "x_min")

    def __init__(self, x: Sequence[float], y: Sequence[float], logarithmic: bool = False):
        if len(x) != len(y) or len(x) < 2:
            raise NumberRefused("at least two points are wanted")
        if any(right <= left for left, right in pairwise(x)):
            raise NumberRefused("the points must rise from one to the next")
        if logarithmic:
            y = [math.log(value) for value in y]
        self._x, self._logarithmic = tuple(x), logarithmic
        self.x_min, self.x_max = self._x[0], self._x[-1]
        steps = [right - left for left, right in pairwise(x)]
        rises = [(right - left) / step for left, right, step in zip(y[:-1], y[1:], steps, strict=True)]
        slopes = _slopes(steps, rises)
        self._pieces = tuple(
            (y[k], slopes[k], _second(slopes, rises[k], steps[k], k), _third(slopes, rises[k], steps[k], k))
            for k in range(len(steps))
        )

    def __call__(self, x: float) -> float:
        """The value at x; the caller sees to it that x lies between the ends."""
        place = min(max(bisect_right(self._x, x) - 1, 0), len(self._pieces) - 1)
        zeroth, first, second, third = self._pieces[place]
        step = x - self._x[place]
        value = zeroth + step * (first + step * (second + step * third))
        return math.exp(value) if self._logarithmic else value


def _slopes(steps: list[float], rises: list[float]) -> list[float]:
    """Slopes at the points: weighted harmonic means, zero at a turn; three-point formula at the ends."""
    if len(steps) == 1:
        return [rises[0], rises[0]]
    slopes = [_end(steps[0], steps[1], rises[0], rises[1])]
    for before, after, left, right in zip(steps[:-1], steps[1:], rises[:-1], rises[1:], strict=True):
        if left * right <= 0:
            slopes.append(0.0)
        else:
            heavy, light = 2 * after + before, after + 2 * before
            slopes.append((heavy + light) / (heavy / left + light / right))
    slopes.append(_end(steps[-1], steps[-2], rises[-1], rises[-2]))
    return slopes


def _end(near: float, far: float, rise: float, next_rise: float) -> float:
    slope = ((2 * near + far) * rise - near * next_rise) / (near + far)
    if slope * rise <= 0:
        return 0.0
    if rise * next_rise <= 0 and abs(slope) > 3 * abs(rise):
        return 3 * rise
    return slope


def _second(slopes: list[float], rise: float, step: float, k: int) -> float:
    return (3 * rise - 2 * slopes[k] - slopes[k + 1]) / step


def _third(slopes: list[float], rise: float, step: float, k: int) -> float:
    return (slopes[k] + slopes[k + 1] - 2 * rise) / (step * step)
