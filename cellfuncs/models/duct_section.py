"""The cross-section as matrices: a Galerkin method with polynomials that crowd towards the heated wall.

With y = 1 − c the distance from the wall and y = t^q, the temperature is θ = θ_w + y·P(t), P a polynomial of N terms in
Legendre's basis. The power q packs points so closely to the wall that the layer of a step in wall conditions, where
θ ~ √distance, is met as well as the core: the error falls like N^(−2q) there and spectrally elsewhere.

All matrices are in coordinates in which conduction across is the unit matrix (``p``), or the mean square is (``g``):
both come from QR factors of the functions at Gauss points, not from products, so that scales down to 1e-12 D survive.
Sources: Shen, Tang and Wang 2011, Spectral Methods (Springer); Golub and Van Loan 2013, Matrix Computations.
"""

from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import Any

import numpy as np
from numpy.polynomial import legendre

from cellfuncs.models.duct_profile import Profile

ONE = np.ones(1)
RESPONSES = ("drive", "friction", "source", "expansion")


@lru_cache(maxsize=32)
def gauss(count: int) -> tuple[Any, Any]:
    """Gauss points and weights on [0, 1]."""
    x, w = legendre.leggauss(count)
    return (x + 1.0) / 2.0, w / 2.0


@lru_cache(maxsize=64)
def polynomials(terms: int, count: int) -> tuple[Any, Any]:
    """Legendre's polynomials and their slopes on [0, 1] at ``gauss(count)``."""
    x = 2.0 * gauss(count)[0] - 1.0
    values = legendre.legvander(x, terms - 1)
    slopes = np.zeros_like(values)
    for k in range(1, terms):  # P'_k = P'_{k-2} + (2k - 1) P_{k-1}
        slopes[:, k] = (slopes[:, k - 2] if k > 1 else 0.0) + (2 * k - 1) * values[:, k - 1]
    return values, 2.0 * slopes


@dataclass(frozen=True, eq=False)
class Section:
    """Matrices of one profile on one resolution.

    ``carry`` the advection ∫uφφ, ``carried`` ∫uφ; ``loads`` the heats of the four responses as seen by p, ``heats``
    their means over the section; ``steepness`` the wall flux of each p by its own gradient. With conduction along:
    ``fold`` turns g into p coordinates, ``whole`` is the unit temperature in g coordinates of the space that includes
    the wall's value, ``embed`` its part without.
    """

    carry: Any
    carried: Any
    loads: Any
    heats: Any
    perimeter: float
    steepness: Any
    weighed: Any  # 1 and the functions, times the root of weight and conductivity
    back: Any  # from the functions to p coordinates

    @property
    def terms(self) -> int:
        return len(self.carried)

    @cached_property
    def _factors(self) -> tuple[Any, Any]:
        return np.linalg.qr(self.weighed, mode="r"), np.linalg.qr(self.weighed[:, 1:], mode="r")

    @cached_property
    def fold(self) -> Any:
        return (self._factors[1] @ self.back).T

    @cached_property
    def embed(self) -> Any:
        both, alone = self._factors
        return both[:, 1:] @ np.linalg.inv(alone)

    @property
    def whole(self) -> Any:
        return self._factors[0][:, 0]


@lru_cache(maxsize=16)
def section(profile: Profile, terms: int, power: int) -> Section:
    """The matrices of ``profile`` with ``terms`` polynomials in t, wall distance = t^power."""
    count = 20 * -(-(2 * terms + 40) // 20)  # rounded up, so that two resolutions share their points
    t, weights = gauss(count)
    values, slopes = polynomials(terms, count)
    y = t**power
    c = 1.0 - y
    weights = weights * power * t ** (power - 1)
    functions = y[:, None] * values
    gradients = values + (t / power)[:, None] * slopes
    u, friction, conductivity = profile.velocity(c), profile.friction(c), profile.conductivity(c)
    u = u / (weights @ u)  # exact but for rounding: the mean velocity is the unit
    root = np.sqrt(weights * conductivity)
    upright = np.linalg.qr((root * np.sqrt(profile.spread(c)))[:, None] * gradients, mode="r")
    back = np.linalg.inv(upright)
    basis = functions @ back
    moved = np.sqrt(weights * u)[:, None] * basis
    made = weights @ friction
    heats = np.column_stack([np.zeros(count), friction, np.ones(count), -made * u])
    wall = (-1.0) ** np.arange(terms) @ back
    return Section(
        carry=moved.T @ moved,
        carried=basis.T @ (weights * u),
        loads=basis.T @ (weights[:, None] * heats),
        heats=weights @ heats,
        perimeter=profile.perimeter,
        steepness=-wall * float((profile.spread(ONE) * profile.conductivity(ONE))[0]) / profile.perimeter,
        weighed=root[:, None] * np.column_stack([np.ones(count), functions]),
        back=back,
    )
