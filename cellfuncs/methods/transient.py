"""Bodies that warm or cool in a fluid: lumped, exact series, and the semi-infinite solid.

Bi = hL/k and Fo = αt/L² with L half the thickness of a wall, the radius of a cylinder or a sphere; lumped: volume over
surface. ``place`` is the distance from the middle over L. Temperature ratios are (T − T∞)/(T_start − T∞); those of the
semi-infinite solid are the part of the change that has happened. Constant properties, one coefficient, one start.
"""

import math
from functools import lru_cache
from typing import Any, NamedTuple

from cellfuncs.errors import OutOfRange
from cellfuncs.methods.algebra import exp, plain, smaller
from cellfuncs.methods.base import Range, method

_SHAPES = {"shape": ("plane wall", "long cylinder", "sphere")}
_DEEP = {"shape": ("semi-infinite solid",)}
_EXPONENT = 40.0  # terms below e^-40 = 4e-18 are nothing beside the first
_MOST_TERMS = 4096
_CELLS = 1_000_000  # rows times terms that are worked on at once
_LENGTH = "half the thickness, or the radius"


@method(
    "lumped body",
    gives="temperature ratio",
    ranges=(Range("Bi", high=0.1),),
    scatter=0.05,
    property_temperature="solid",
    source="rohsenow-1998-conduction",
    flows=("body",),
    length="volume over surface",
)
def lumped(biot: Any, fourier: Any) -> Any:
    """Temperature ratio exp(−Bi·Fo) of a body of one temperature throughout; Bi and Fo on volume over surface."""
    return exp(-biot * fourier)


@method(
    "exact transient",
    gives="temperature ratio",
    ranges=(Range("Fo", low=1e-5), Range("place", 0.0, 1.0)),
    scatter=0.0,
    property_temperature="solid",
    source="grober-1925;heisler-1947",
    flows=("body",),
    where=_SHAPES,
    length=_LENGTH,
)
def ratio_at(shape: str, biot: Any, fourier: Any, place: Any) -> Any:
    """Temperature ratio at a place of a plane wall, long cylinder or sphere: the series, all terms that count."""
    return _series(shape, biot, fourier, place)


@method(
    "exact heat given off",
    gives="factor",
    ranges=(Range("Fo", low=1e-5),),
    scatter=0.0,
    property_temperature="solid",
    source="grober-1925;heisler-1947",
    flows=("body",),
    where=_SHAPES,
    length=_LENGTH,
)
def heat_part(shape: str, biot: Any, fourier: Any) -> Any:
    """Heat given off so far over all that a wall, long cylinder or sphere can give off: one minus the mean ratio."""
    return 1.0 - _series(shape, biot, fourier, None)


@method(
    "one-term transient",
    gives="temperature ratio",
    ranges=(Range("Fo", low=0.2), Range("place", 0.0, 1.0)),
    scatter=0.02,
    property_temperature="solid",
    source="heisler-1947",
    flows=("body",),
    where=_SHAPES,
    length=_LENGTH,
)
def ratio_by_one_term(shape: str, biot: Any, fourier: Any, place: Any) -> Any:
    """Temperature ratio at a place by the first term of the series, within 2 % from Fo 0.2."""
    return _series(shape, biot, fourier, place, terms=1)


# -- the series ------------------------------------------------------------------------------------------------------


class Roots(NamedTuple):
    """Roots ζ_n of a shape for one or more Bi (rows), C_n, and the mean of the shape of each term."""

    root: Any
    factor: Any
    mean: Any


def _series(shape: str, biot: Any, fourier: Any, place: Any, terms: int = 0) -> Any:
    """Sum of C_n·exp(−ζ_n²Fo) times the term's shape at the place, or times its mean (place None)."""
    import numpy as np

    if shape not in _SHAPES["shape"]:
        raise OutOfRange(f'the series is known for {", ".join(_SHAPES["shape"])}, here "{shape}"')
    fewest = float(np.min(fourier))
    terms = terms or _terms(fewest)
    if all(isinstance(x, (float, int)) for x in (biot, fourier, place) if x is not None):
        return float(_sum(shape, roots_of(shape, float(biot), terms), fourier, place))
    columns = np.broadcast_arrays(*(np.asarray(x, float) for x in (biot, fourier, 0.0 if place is None else place)))
    bi, fo, at = (x.ravel() for x in columns)
    total = np.empty(bi.shape)
    step = max(1, _CELLS // terms)
    for start in range(0, len(bi), step):
        part = slice(start, start + step)
        different, back = np.unique(bi[part], return_inverse=True)
        found = Roots(*(x[back] for x in _roots(shape, different[:, None], terms)))
        total[part] = _sum(shape, found, fo[part, None], None if place is None else at[part, None])
    return total.reshape(columns[0].shape)


def _terms(fourier: float) -> int:
    """How many terms count at the smallest Fo, a power of two so that roots can be kept."""
    needed = math.sqrt(_EXPONENT / max(fourier, 1e-12)) / math.pi + 2.0
    if needed > _MOST_TERMS:
        raise OutOfRange(f"Fo {fourier:.3g} is too soon for the series; take the semi-infinite solid")
    return max(4, 1 << math.ceil(math.log2(needed)))


def _sum(shape: str, roots: Roots, fourier: Any, place: Any) -> Any:
    import numpy as np

    if place is None:
        form = roots.mean
    elif shape == "plane wall":
        form = np.cos(roots.root * place)
    elif shape == "sphere":
        form = np.sinc(roots.root * place / math.pi)  # numpy's sinc(x) is sin(πx)/(πx)
    else:
        from scipy.special import j0

        form = j0(roots.root * place)
    exponents = np.maximum(-(roots.root**2) * fourier, -700.0)
    return np.sum(roots.factor * np.exp(exponents) * form, axis=-1)


@lru_cache(maxsize=256)
def roots_of(shape: str, biot: float, terms: int) -> Roots:
    """The first roots of a shape for one Bi, with C_n and the mean of the shape of each term."""
    return _roots(shape, biot, terms)


def _roots(shape: str, biot: Any, terms: int) -> Roots:
    import numpy as np
    from scipy import special

    number = np.arange(1, terms + 1)
    if shape == "plane wall":  # ζ tan ζ = Bi
        z = _rising(
            (number - 1) * math.pi,
            (number - 0.5) * math.pi,
            lambda z: (z * np.sin(z) - biot * np.cos(z), np.sin(z) + z * np.cos(z) + biot * np.sin(z)),
            biot,
        )
        return Roots(z, 4.0 * np.sin(z) / (2.0 * z + np.sin(2.0 * z)), np.sinc(z / math.pi))
    if shape == "long cylinder":  # ζ J1(ζ)/J0(ζ) = Bi
        z = _rising(
            np.concatenate(([0.0], special.jn_zeros(1, terms)[:-1])),
            special.jn_zeros(0, terms),
            lambda z: (z * special.j1(z) - biot * special.j0(z), z * special.j0(z) + biot * special.j1(z)),
            biot,
        )
        j0, j1 = special.j0(z), special.j1(z)
        return Roots(z, 2.0 * j1 / (z * (j0**2 + j1**2)), 2.0 * j1 / z)
    # a sphere: 1 − ζ cot ζ = Bi; ζ²j1 is sin ζ − ζ cos ζ without its cancellation
    z = _rising(
        (number - 1) * math.pi,
        number * math.pi,
        lambda z: (z * z * special.spherical_jn(1, z) - biot * np.sin(z), z * np.sin(z) - biot * np.cos(z)),
        biot,
    )
    # sin ζ/ζ by the roots' own equation, which loses no digits near multiples of π
    swing = np.where(number % 2 == 1, 1.0, -1.0) / np.sqrt(z**2 + (biot - 1.0) ** 2)
    factor = 2.0 * biot * swing * (z**2 + (biot - 1.0) ** 2) / (z**2 + biot**2 - biot)
    return Roots(z, factor, 3.0 * biot * swing / z**2)


def _rising(low: Any, high: Any, function: Any, biot: Any) -> Any:
    """Roots between low and high of a function of known derivative; every other one falls instead of rising.

    Newton's steps, halved brackets where one would leave; a dozen rounds reach the last digit.
    """
    import numpy as np

    sign = np.where(np.arange(len(high)) % 2 == 0, 1.0, -1.0)
    low, high, sign = np.broadcast_arrays(low, high, sign + 0.0 * biot)
    z = 0.5 * (low + high)
    for _ in range(100):
        value, slope = function(z)
        value, slope = sign * value, sign * slope
        low, high = np.where(value <= 0, z, low), np.where(value >= 0, z, high)
        moved = z - value / np.where(slope == 0, 1.0, slope)
        inside = (slope > 0) & (moved >= low) & (moved <= high)
        new = np.where(inside, moved, 0.5 * (low + high))
        done = np.abs(new - z) <= 2e-16 * z
        z = new
        if done.all():
            break
    return z


# -- the semi-infinite solid -----------------------------------------------------------------------------------------


@method(
    "semi-infinite, wall temperature",
    gives="temperature ratio",
    scatter=0.0,
    property_temperature="solid",
    source="rohsenow-1998-conduction",
    flows=("body",),
    where=_DEEP,
)
def deep_temperature(depth: Any) -> Any:
    """Part of a sudden change of the wall's temperature that has arrived at a depth, erfc(x/(2√(αt)))."""
    from scipy.special import erfc

    return plain(erfc(depth))


@method(
    "semi-infinite, wall flux",
    gives="temperature ratio",
    scatter=0.0,
    property_temperature="solid",
    source="rohsenow-1998-conduction",
    flows=("body",),
    where=_DEEP,
)
def deep_flux(depth: Any) -> Any:
    """Rise at a depth under a uniform flux q over q√(αt)/k: 2·exp(−η²)/√π − 2η·erfc(η), η = x/(2√(αt))."""
    from scipy.special import erfc

    # the flux from the depth on; for a deep place both parts vanish together
    return plain(2.0 / math.sqrt(math.pi) * exp(-_square(depth)) - 2.0 * depth * erfc(depth))


@method(
    "semi-infinite, convection",
    gives="temperature ratio",
    scatter=0.0,
    property_temperature="solid",
    source="rohsenow-1998-conduction",
    flows=("body",),
    where=_DEEP,
)
def deep_convection(depth: Any, surface_biot: Any) -> Any:
    """Part of a fluid's change that has arrived at a depth: erfc(η) − e^(2ηH + H²)·erfc(η + H), H = h√(αt)/k."""
    from scipy.special import erfc, erfcx

    return plain(erfc(depth) - exp(-_square(depth)) * erfcx(depth + surface_biot))


def _square(x: Any) -> Any:
    """x², no more than what exp still tells from zero."""
    return smaller(x, 26.0) ** 2
