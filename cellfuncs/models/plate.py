"""The laminar layer on a flat plate, solved by similarity at any Prandtl number, with the heat that friction makes.

η = y·√(U/νx), f of Blasius: f''' + f·f''/2 = 0. With G = ∫f/2 dη every answer is an integral of f'' and e^(−Pr·G)
(Pohlhausen 1921; Eckert and Drewitz 1940), so nothing is shot for: Blasius' function comes once from its Taylor
series, panel by panel, by the scaling of Töpfer (1912), and the integrals from

    K(η) = ∫η..∞ exp(−Pr·(G(s) − G(η))) ds,     K' = Pr·f/2·K − 1,

which is solved by collocation on panels that follow the thickness of the thermal layer. Then Nu/√Re = 1/K(0), and
the recovery factor is 2Pr·∫f''²·K dη.
"""

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np

from cellfuncs.errors import OutOfRange
from cellfuncs.models.chebyshev import nodes

PRANDTL = (1e-3, 1e4)
_END = 10.0  # beyond, f = η − const (f'' is 8e-9 there, and enters squared)
_PANELS, _ORDER = 20, 28  # of Blasius' function: half a unit each
_COARSE, _FINE = 14, 20  # points in a panel of K


@dataclass(frozen=True)
class Plate:
    """Constants of a laminar plate; local values, means beside them."""

    prandtl: float
    nusselt: float  # Nu_x/√Re_x, uniform wall temperature
    nusselt_flux: float  # Nu_x/√Re_x, uniform flux
    recovery: float  # (T_recovery − T_stream)/(U²/2cp)
    friction: float  # cf_x·√Re_x
    error: float  # relative, the largest of all these

    @property
    def mean_nusselt(self) -> float:
        """Nu_L/√Re_L of the mean coefficient at uniform wall temperature."""
        return 2.0 * self.nusselt

    @property
    def mean_nusselt_flux(self) -> float:
        """Nu_L/√Re_L of the flux over the mean difference at uniform flux: ΔT ~ √x, its mean is 2/3 of the end's."""
        return 1.5 * self.nusselt_flux


@lru_cache(maxsize=256)
def plate(prandtl: float) -> Plate:
    """The constants at a Prandtl number from 1e-3 to 1e4; OutOfRange elsewhere."""
    if not PRANDTL[0] <= prandtl <= PRANDTL[1]:
        raise OutOfRange(f"the plate is solved for Pr {PRANDTL[0]:g} to {PRANDTL[1]:g}, here {prandtl:.4g}")
    coarse, fine = _constants(prandtl, _COARSE), _constants(prandtl, _FINE)
    error = max(abs(c / f - 1.0) for c, f in zip(coarse, fine, strict=True))
    return Plate(prandtl, *fine, friction=2.0 * blasius().shear, error=error + 1e-15)


def _constants(prandtl: float, count: int) -> tuple[float, float, float]:
    """Nu/√Re for both wall conditions, and the recovery factor, with so many points a panel."""
    edges = _panels(prandtl)
    x, d, w = nodes(count)
    after = _beyond(prandtl)
    recovered = 0.0
    # from the outer edge inwards: the homogeneous part of K decays that way
    for a, b in zip(edges[-2::-1], edges[:0:-1], strict=True):
        width = b - a
        f, _, shear = blasius().at(a + width * x)
        matrix = d / width - np.diag(0.5 * prandtl * f)
        right = np.full(count, -1.0)
        matrix[-1], right[-1] = 0.0, after
        matrix[-1, -1] = 1.0
        k = np.linalg.solve(matrix, right)
        recovered += width * float(w @ (shear**2 * k))
        after = float(k[0])
    return 1.0 / after, 1.0 / _flux_rise(prandtl, edges, count), 2.0 * prandtl * recovered


def _panels(prandtl: float) -> list[float]:
    """Panels that double from the thickness of the thermal layer outwards, at most one unit wide."""
    inner = (12.0 / (blasius().shear * prandtl)) ** (1.0 / 3.0)
    edges, width = [0.0], min(0.5 * inner, 1.0)
    while edges[-1] < _END:
        edges.append(min(edges[-1] + width, _END))
        width = min(2.0 * width, 1.0)
    if len(edges) > 2 and edges[-1] - edges[-2] < 0.1 * (edges[-2] - edges[-3]):
        del edges[-2]
    return edges


def _beyond(prandtl: float) -> float:
    """K at the end of the panels, where f = η − c: √π/(2a)·erfcx(a·f) with a = √Pr/2."""
    from scipy.special import erfcx

    a = 0.5 * math.sqrt(prandtl)
    return math.sqrt(math.pi) / (2.0 * a) * float(erfcx(a * blasius().end))


def _flux_rise(prandtl: float, edges: list[float], count: int) -> float:
    """φ(0) of φ'' + Pr/2·(f·φ' − f'·φ) = 0, φ'(0) = −1, φ(∞) = 0: a wall of uniform flux, ΔT ~ √x.

    Each panel carries the ratio φ'/φ = −s at its outer end to its inner end: nothing grows on the way in.
    """
    x, d, _ = nodes(count)
    steepness = _steepness_beyond(prandtl)
    for a, b in zip(edges[-2::-1], edges[:0:-1], strict=True):
        width = b - a
        f, slope, _ = blasius().at(a + width * x)
        first = d / width
        matrix = first @ first + 0.5 * prandtl * (f[:, None] * first - np.diag(slope))
        matrix[-1] = first[-1]
        matrix[-1, -1] += steepness
        right = np.zeros(count)
        # the inner end is held at 1
        matrix[0], right[0] = 0.0, 1.0
        matrix[0, 0] = 1.0
        phi = np.linalg.solve(matrix, right)
        steepness = -float(first[0] @ phi)
    return 1.0 / steepness


def _steepness_beyond(prandtl: float) -> float:
    """−φ'/φ where f = η − c, f' = 1: φ is the integral of erfc there."""
    from scipy.special import erfcx

    a = 0.5 * math.sqrt(prandtl)
    z = a * blasius().end
    scaled = float(erfcx(z))
    rest = 1.0 / math.sqrt(math.pi) - z * scaled
    if z > 50.0:  # the difference cancels; its series, DLMF 7.12.1
        rest = (0.5 - 0.75 / z**2 + 1.875 / z**4) / (math.sqrt(math.pi) * z * z)
    return a * scaled / rest


@dataclass(frozen=True)
class Blasius:
    """Blasius' function by its Taylor series on equal panels; f'' = shear·exp(−∫f/2) to rounding."""

    shear: float  # f''(0)
    width: float
    series: Any  # (panels, order): coefficients of f in powers of the distance from the panel's left end
    end: float  # f at the last edge

    def at(self, eta: Any) -> tuple[Any, Any, Any]:
        """f, f', f'' at η in [0, 10]."""
        panel = np.clip((np.asarray(eta) / self.width).astype(int), 0, _PANELS - 1)
        step = eta - panel * self.width
        rows = self.series[panel]
        found = [np.zeros_like(step), np.zeros_like(step), np.zeros_like(step)]
        for n in range(_ORDER - 1, -1, -1):  # Horner's scheme for a polynomial and two derivatives
            found[2] = found[2] * step + 2.0 * found[1]
            found[1] = found[1] * step + found[0]
            found[0] = found[0] * step + rows[:, n]
        return found[0], found[1], found[2]


@lru_cache(maxsize=1)
def blasius() -> Blasius:
    """Blasius' function, from the series with f''(0) = 1 scaled by Töpfer's rule."""
    # with F''(0) = 1, f(η) = c·F(cη), c = F'(∞)^−1/2
    width = 0.25
    f, slope, shear = 0.0, 0.0, 1.0
    for _ in range(80):
        f, slope, shear = _taylor_step(_taylor(f, slope, shear), width)
    scale = slope**-0.5
    wall = scale**3
    f, slope, shear = 0.0, 0.0, wall
    width = _END / _PANELS
    series = []
    for _ in range(_PANELS):
        series.append(_taylor(f, slope, shear))
        f, slope, shear = _taylor_step(series[-1], width)
    return Blasius(wall, width, np.array(series), f)


def _taylor(f: float, slope: float, shear: float) -> list[float]:
    """Coefficients of f about a point, from 2f''' = −f·f''."""
    c = [f, slope, 0.5 * shear]
    for n in range(_ORDER - 3):
        product = sum(c[k] * (n - k + 2) * (n - k + 1) * c[n - k + 2] for k in range(n + 1))
        c.append(-0.5 * product / ((n + 3) * (n + 2) * (n + 1)))
    return c


def _taylor_step(c: list[float], h: float) -> tuple[float, float, float]:
    f = slope = shear = 0.0
    for n in range(len(c) - 1, -1, -1):
        shear = shear * h + 2.0 * slope
        slope = slope * h + f
        f = f * h + c[n]
    return f, slope, shear
