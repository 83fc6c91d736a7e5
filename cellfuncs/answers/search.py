"""Where a function of one input reaches a target: brackets from a scan, roots from Brent's method.

The function may refuse points: a refused point parts the scan into stretches, and no root is looked for
across it. The last answered place beside a refused one is closed in on, so that roots near the end of a
range are found. A sign that changes at a jump is no root and is told apart.
"""

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field

from cellfuncs.errors import CellfuncsError

_EDGE_STEPS = 12
_SAME = 1e-6  # of the values around: nearer than this the target is met


@dataclass
class Stretch:
    """Consecutive answered places and what was found between them."""

    places: list[float]
    values: list[float]  # function minus target
    roots: list[float] = field(default_factory=list)
    jumps: list[float] = field(default_factory=list)

    def holds(self, place: float | None) -> bool:
        return place is not None and self.places[0] <= place <= self.places[-1]


@dataclass
class Scan:
    """All stretches of a search, and the first refusal met."""

    stretches: list[Stretch]
    refusal: CellfuncsError | None

    def roots(self, start: float | None) -> list[float]:
        """The roots in the stretch that holds the stated value; those of all others where it has none."""
        own = [root for s in self.stretches if s.holds(start) for root in s.roots]
        return own or sorted(root for s in self.stretches for root in s.roots)

    def jumps(self) -> list[float]:
        return [jump for s in self.stretches for jump in s.jumps]


def scan(function: Callable[[float], float], target: float, places: Sequence[float]) -> Scan:
    """Look for ``function(x) = target`` between the rising ``places``."""
    refusals: list[CellfuncsError] = []

    def off(x: float) -> float | None:
        try:
            return function(x) - target
        except CellfuncsError as error:
            refusals.append(error)
        except (OverflowError, ZeroDivisionError):
            pass
        return None

    stretches = [Stretch([x for x, _ in run], [y for _, y in run]) for run in _runs(off, places)]
    for stretch in stretches:
        _search(stretch, off)
    return Scan(stretches, refusals[0] if refusals else None)


def _runs(off: Callable[[float], float | None], places: Sequence[float]) -> list[list[tuple[float, float]]]:
    """Runs of answered places with their values, closed in on at their ends."""
    runs: list[list[tuple[float, float]]] = []
    before: tuple[float, float | None] | None = None
    for x in places:
        y = off(x)
        if y is not None and not math.isfinite(y):
            y = None
        if y is None:
            if before is not None and before[1] is not None:
                runs[-1].extend(_edge(off, before[0], x))
        else:
            if before is None or before[1] is None:
                runs.append([] if before is None else _edge(off, x, before[0])[::-1])
            runs[-1].append((x, y))
        before = x, y
    return runs


def _edge(off: Callable[[float], float | None], answered: float, refused: float) -> list[tuple[float, float]]:
    """The answered place nearest to the refused side, by halving."""
    found: list[tuple[float, float]] = []
    for _ in range(_EDGE_STEPS):
        middle = 0.5 * (answered + refused)
        y = off(middle)
        if y is None or not math.isfinite(y):
            refused = middle
        else:
            answered = middle
            found = [(middle, y)]
    return found


def _search(stretch: Stretch, off: Callable[[float], float | None]) -> None:
    x, y = stretch.places, stretch.values
    _turn(stretch, off)
    for k, value in enumerate(y):
        if value == 0.0:
            stretch.roots.append(x[k])
        elif k and y[k - 1] * value < 0.0:
            _between(stretch, off, k)
    stretch.roots = _apart(stretch.roots)


def _turn(stretch: Stretch, off: Callable[[float], float | None]) -> None:
    """Where the function turns back towards the target between places, add the place where it is nearest."""
    from numpy import errstate
    from scipy.optimize import minimize_scalar

    x, y = stretch.places, stretch.values
    for k in range(len(x) - 2, 0, -1):
        sign = math.copysign(1.0, y[k])
        if not (y[k - 1] * sign > y[k] * sign > 0.0 and y[k + 1] * sign > y[k] * sign):
            continue

        def height(place: float, sign: float = sign) -> float:
            value = off(place)
            return math.inf if value is None else value * sign

        with errstate(invalid="ignore", over="ignore"):  # where there is no answer the height is infinite
            found = minimize_scalar(height, bounds=(x[k - 1], x[k + 1]), method="bounded", options={"maxiter": 25})
        if math.isfinite(found.fun) and found.fun * sign != y[k]:
            place = k + 1 if found.x > x[k] else k
            x.insert(place, float(found.x))
            y.insert(place, float(found.fun) * sign)


def _between(stretch: Stretch, off: Callable[[float], float | None], k: int) -> None:
    """The root or jump between the places k − 1 and k."""
    from scipy.optimize import brentq

    def asked(place: float) -> float:
        value = off(place)
        if value is None:
            raise _Refused
        return value

    low, high = stretch.places[k - 1], stretch.places[k]
    try:
        root = brentq(asked, low, high, xtol=1e-12 * max(abs(low), abs(high)), rtol=1e-12)
        left = asked(root)
    except _Refused:
        return
    around = max(abs(stretch.values[k - 1]), abs(stretch.values[k]))
    (stretch.roots if abs(left) <= _SAME * around else stretch.jumps).append(root)


class _Refused(Exception):
    """The function refused a point inside a bracket."""


def _apart(roots: list[float]) -> list[float]:
    """The roots without those that are the same to nine digits."""
    found: list[float] = []
    for root in sorted(roots):
        if not found or abs(root - found[-1]) > 1e-9 * max(abs(root), abs(found[-1])):
            found.append(root)
    return found
