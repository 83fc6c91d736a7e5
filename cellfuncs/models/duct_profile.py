"""What flows in a duct: velocity, friction heat and conductivity across the section, as functions of one coordinate.

The coordinate c runs from 0 to 1 at the heated wall: (r/R)² in a tube, the distance from the middle over the half gap
between plates heated alike, the distance from the insulated wall over the gap where one wall is heated. Lengths are in
hydraulic diameters, velocities in mean velocities, friction heat in μU²/D² (power law: K·U^(n+1)/D^(n+1)).
"""

from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.errors import OutOfRange, UnknownName

Across = Callable[[Any], Any]


@dataclass(frozen=True, eq=False)
class Profile:
    """A developed flow; ``spread(c)`` is the weight of (∂θ/∂c)² in the mean of |∇θ|², ``perimeter`` the heated
    perimeter times D over the section."""

    velocity: Across
    friction: Across
    conductivity: Across
    spread: Across
    perimeter: float


@lru_cache(maxsize=64)
def laminar(section: str, heated: str, power_law: float) -> Profile:
    """Laminar flow of a power-law fluid (n = 1: Newtonian) in a ``tube``, or between ``plates`` (heated both or one).

    Power-law index 0.05 to 20. Source: Bird, R. B. 1959, Unsteady pseudoplastic flow near a moving wall and the
    Ostwald-de Waele law as in Rohsenow, Hartnett and Cho, Handbook of Heat Transfer (1998), chapter 10.
    """
    n = power_law
    if not 0.05 <= n <= 20.0:
        raise OutOfRange(f"power-law index {n:.4g} is outside 0.05 to 20")
    m = (n + 1.0) / n
    if section == "tube":
        top, steep = (3 * n + 1) / (n + 1), 2 * (3 * n + 1) / n
        return Profile(
            velocity=lambda c: top * -np.expm1(0.5 * m * np.log(c)),
            friction=lambda c: steep ** (n + 1) * c ** (0.5 * m),
            conductivity=np.ones_like,
            spread=lambda c: 16.0 * c,
            perimeter=4.0,
        )
    if section != "plates":
        raise UnknownName(f'no laminar model of the section "{section}"; there are tube and plates')
    if heated not in ("both", "one"):
        raise UnknownName(f'heated walls of plates are "both" or "one", not "{heated}"')
    top, steep = (2 * n + 1) / (n + 1), 4 * (2 * n + 1) / n
    both = heated == "both"

    def off_middle(c: Any) -> Any:
        return c if both else np.abs(2.0 * c - 1.0)

    return Profile(
        velocity=lambda c: top * -np.expm1(m * np.log(np.maximum(off_middle(c), 1e-300))),
        friction=lambda c: steep ** (n + 1) * off_middle(c) ** m,
        conductivity=np.ones_like,
        spread=lambda c: np.full_like(c, 16.0 if both else 4.0),
        perimeter=4.0 if both else 2.0,
    )
