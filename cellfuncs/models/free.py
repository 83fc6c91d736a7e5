"""The laminar layer at a vertical plate in a still fluid, solved by similarity at any Prandtl number.

η = (y/x)·(Gr_x/4)^¼, the wall's excess ΔT ~ x^n: n = 0 is a wall of one temperature (Ostrach 1953), n = 1/5 one of
uniform flux (Sparrow and Gregg 1956, 1958). With the stream function 4ν(Gr_x/4)^¼·f and θ = (T − T∞)/ΔT:

    f''' + (n+3)·f·f'' − 2(n+1)·f'² + θ = 0,    θ'' + Pr·[(n+3)·f·θ' − 4n·f'·θ] = 0

The heat made by friction (ε = gβx/cp) and the pressure work against the weight (λ = βT·gx/(cpΔT)) change this a
little; their first-order changes (Gebhart 1962) solve the linearised equations with sources 4Pr·f''² and −4Pr·f'.

Collocation on one interval stretched towards the wall, Newton's method, from one Prandtl number to the next.
"""

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.models.chebyshev import nodes

PRANDTL = (1e-3, 1e4)
UNIFORM_TEMPERATURE, UNIFORM_FLUX = 0.0, 0.2
_COUNTS = ((1.0, 44, 56), (2.0, 60, 74), (4.0, 80, 96))  # decades of Pr from one; points of the two resolutions
_WIDE = 16.0  # the outer layer in units of its own thickness: e^-24 is left at its end
_BUNCHED = 0.5
_STEP = 0.5  # decades of Pr from one solution to the next
_ROUNDS = 40


@dataclass(frozen=True)
class FreePlate:
    """A vertical plate in a still fluid; local constants at x, means beside them."""

    prandtl: float
    wall: float  # n of ΔT ~ x^n
    slope: float  # −θ'(0): Nu_x = slope·(Gr_x/4)^¼
    shear: float  # f''(0)
    friction: float  # first-order change of −θ'(0) a unit of ε; of θ(0) where the flux is given
    pressure: float  # ... a unit of λ
    error: float  # relative, of all four

    @property
    def nusselt(self) -> float:
        """Nu_x/Gr_x^¼ with the local difference."""
        return self.slope / math.sqrt(2.0)

    @property
    def mean_nusselt(self) -> float:
        """Nu_L/Gr_L^¼: 4/3 of the end's for one temperature; for uniform flux q over the mean difference, Gr_L with
        the end's difference: ΔT ~ x^⅕ has 5/6 of the end's as its mean."""
        return (4.0 / 3.0 if self.wall == UNIFORM_TEMPERATURE else 6.0 / 5.0) * self.nusselt

    @property
    def nusselt_flux(self) -> float:
        """Nu_x/Gr*_x^⅕ with Gr* = Gr·Nu, for uniform flux."""
        return self.slope**0.8 / 4.0**0.2

    def relative_change(self, friction: float, pressure: float, mean: bool) -> float:
        """Relative change of the local or mean flux (of the wall's excess for a given flux) with ε and λ at the end."""
        if self.wall == UNIFORM_TEMPERATURE:
            # local flux ~ x^−¼·(1 + change·x): the mean of the change has 3/7 of its end value
            part = 3.0 / 7.0 if mean else 1.0
            return part * (self.friction * friction + self.pressure * pressure) / self.slope
        # wall excess ~ x^⅕·(1 + a·x) or λ ~ x^⅘: means 6/11 and 3/5
        parts = (6.0 / 11.0, 3.0 / 5.0) if mean else (1.0, 1.0)
        return parts[0] * self.friction * friction + parts[1] * self.pressure * pressure


def free_plate(prandtl: float, uniform_flux: bool = False) -> FreePlate:
    """The constants at a Prandtl number from 1e-3 to 1e4; OutOfRange elsewhere."""
    if not PRANDTL[0] <= prandtl <= PRANDTL[1]:
        raise OutOfRange(f"the vertical plate is solved for Pr {PRANDTL[0]:g} to {PRANDTL[1]:g}, here {prandtl:.4g}")
    return _found(prandtl, UNIFORM_FLUX if uniform_flux else UNIFORM_TEMPERATURE)


@lru_cache(maxsize=256)
def _found(prandtl: float, wall: float) -> FreePlate:
    decades = abs(math.log10(prandtl))
    counts = next(c for most, *c in _COUNTS if decades <= most + 1e-9)
    coarse, fine = (_constants(prandtl, wall, count) for count in counts)
    error = max(abs(c - f) / abs(f) for c, f in zip(coarse, fine, strict=True))
    return FreePlate(prandtl, wall, *fine, error + 1e-15)


def _constants(prandtl: float, wall: float, count: int) -> tuple[float, float, float, float]:
    x = _solved(prandtl, wall, count)
    layer = _Layer(prandtl, wall, count)
    flux = wall == UNIFORM_FLUX
    change = 0 if flux else 1
    sign = 1.0 if flux else -1.0
    f = x[:count]
    by_friction = layer.perturbed(x, 1.0, 4.0 * prandtl * (layer.second @ f) ** 2)
    by_pressure = layer.perturbed(x, 0.8 if flux else 1.0, -4.0 * prandtl * (layer.first @ f))
    row = layer.first[0] if change else np.eye(1, count)[0]
    slope = -float(layer.first[0] @ x[count:])
    shear = float(layer.second[0] @ f)
    return slope, shear, sign * float(row @ by_friction[count:]), sign * float(row @ by_pressure[count:])


@lru_cache(maxsize=128)
def _solved(prandtl: float, wall: float, count: int) -> Any:
    """f and θ on the nodes, from the solution half a decade nearer to Pr 1."""
    layer = _Layer(prandtl, wall, count)
    decades = math.log10(prandtl)
    if abs(decades) <= _STEP:
        return layer.newton(layer.first_guess())
    steps = math.ceil(abs(decades) / _STEP - 1e-9) - 1
    nearer = 10.0 ** math.copysign(_STEP * steps, decades)
    # heights follow the layer, so that the old values on the new nodes are nearly the solution
    return layer.newton(_solved(nearer, wall, count) * layer.rescaled(_Layer(nearer, wall, count)))


class _Layer:
    """The equations at one Pr on one resolution."""

    def __init__(self, prandtl: float, wall: float, count: int):
        self.prandtl, self.n, self.count = prandtl, wall, count
        z, d, _ = nodes(count)
        # the thinner layer is thermal above Pr 1 and viscous below; the wider one ends where f = f∞
        inner, wide = (prandtl**-0.25, prandtl**0.25) if prandtl >= 1.0 else (1.0, prandtl**-0.5)
        outer = _WIDE * wide
        self.height = prandtl**-0.25 if prandtl >= 1.0 else prandtl**-0.5  # how f∞ goes with Pr
        stretch = math.log(_BUNCHED * outer / inner)
        self.eta = outer * np.sinh(stretch * z) / math.sinh(stretch)
        slope = outer * stretch * np.cosh(stretch * z) / math.sinh(stretch)
        self.first = d / slope[:, None]
        self.second = self.first @ self.first
        self.third = self.first @ self.second

    def rescaled(self, other: "_Layer") -> Any:
        """What turns another Pr's f and θ on its own nodes into a start for this one."""
        return np.concatenate([np.full(self.count, self.height / other.height), np.ones(self.count)])

    def first_guess(self) -> Any:
        eta = self.eta
        return np.concatenate([0.5 * (1.0 - np.exp(-eta) * (1.0 + eta)), np.exp(-0.6 * eta)])

    def jacobian(self, f: Any, theta: Any, extra: float) -> Any:
        """The linearised equations; ``extra`` = 4m for changes that grow as x^m."""
        n, pr, c = self.n, self.prandtl, self.count
        a, b, s = self.first @ f, self.second @ f, self.first @ theta
        matrix = np.zeros((2 * c, 2 * c))
        matrix[:c, :c] = (
            self.third
            + (n + 3.0) * (f[:, None] * self.second)
            + np.diag((n + 3.0 + extra) * b)
            - (4.0 * (n + 1.0) + extra) * (a[:, None] * self.first)
        )
        matrix[:c, c:] = np.eye(c)
        matrix[c:, :c] = pr * (np.diag((n + 3.0 + extra) * s) - 4.0 * n * (theta[:, None] * self.first))
        matrix[c:, c:] = self.second + pr * ((n + 3.0) * (f[:, None] * self.first) - np.diag((4.0 * n + extra) * a))
        return matrix

    def ends(self, matrix: Any, flux: bool) -> None:
        """f(0) = f'(0) = 0, f'(∞) = 0; θ at the wall and far away."""
        c = self.count
        matrix[[0, 1, c - 1, c, 2 * c - 1]] = 0.0
        matrix[0, 0] = 1.0
        matrix[1, :c] = self.first[0]
        matrix[c - 1, :c] = self.first[-1]
        if flux:
            matrix[c, c:] = self.first[0]
        else:
            matrix[c, c] = 1.0
        matrix[2 * c - 1, 2 * c - 1] = 1.0

    def newton(self, start: Any) -> Any:
        n, pr, c = self.n, self.prandtl, self.count
        x = start.copy()
        for _ in range(_ROUNDS):
            f, theta = x[:c], x[c:]
            a, b, s = self.first @ f, self.second @ f, self.first @ theta
            residual = np.concatenate([
                self.third @ f + (n + 3.0) * f * b - 2.0 * (n + 1.0) * a * a + theta,
                self.second @ theta + pr * ((n + 3.0) * f * s - 4.0 * n * a * theta),
            ])  # fmt: skip
            residual[[0, 1, c - 1, c, 2 * c - 1]] = f[0], a[0], a[-1], theta[0] - 1.0, theta[-1]
            matrix = self.jacobian(f, theta, 0.0)
            self.ends(matrix, flux=False)
            step = np.linalg.solve(matrix, residual)
            size = max(abs(step[:c]).max() / max(abs(f).max(), 1e-3), abs(step[c:]).max())
            if not math.isfinite(size):
                break
            x = x - step * min(1.0, 0.8 / size)
            if size < 1e-10:
                return x
        raise NoModel(f"the layer at Pr {pr:.4g} was not solved")

    def perturbed(self, x: Any, m: float, source: Any) -> Any:
        """The first-order change of f and θ by a source of heat that grows as x^m."""
        c = self.count
        matrix = self.jacobian(x[:c], x[c:], 4.0 * m)
        self.ends(matrix, flux=self.n == UNIFORM_FLUX)
        right = np.concatenate([np.zeros(c), -source])
        right[[c, 2 * c - 1]] = 0.0
        return np.linalg.solve(matrix, right)
