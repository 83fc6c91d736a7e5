"""Free convection at vertical and inclined plates. Ra with the whole driving difference.

Of an inclined plate Ra is taken with the component of gravity along it, on its length along the slope.
"""

from typing import Any

from cellfuncs.errors import OutOfRange
from cellfuncs.methods.algebra import log, smaller, sqrt
from cellfuncs.methods.base import Range, follows, method

_HEIGHT = "height of the plate"
_PLATE = {"surface": ("vertical plate",), "wall": ("temperature",)}
_FLUX = {"surface": ("vertical plate",), "wall": ("flux",)}


@follows("Ra")
def rayleigh_of(grashof: Any, prandtl: Any) -> Any:
    """Gr·Pr."""
    return grashof * prandtl


def laminarity(prandtl: Any, constant: float) -> Any:
    """The Prandtl function 1 + (c/Pr)^9/16 of Churchill and co-workers."""
    return 1.0 + (constant / prandtl) ** (9.0 / 16.0)


def laminar_plate_factor(prandtl: Any) -> Any:
    """0.671/(1 + (0.492/Pr)^9/16)^4/9: mean Nu over Ra^1/4 of a laminar vertical plate with a thin layer."""
    return 0.671 / laminarity(prandtl, 0.492) ** (4.0 / 9.0)


def thick_layer(nusselt: Any, constant: Any) -> Any:
    """Nu of a laminar layer that is not thin, c/ln(1 + c/Nu_thin) (Raithby and Hollands)."""
    return constant / log(1.0 + constant / nusselt)


def joined(one: Any, other: Any, power: float) -> Any:
    """(a^n + b^n)^(1/n), taken from the larger of the two so that nothing overflows."""
    low = smaller(one, other)
    high = one + other - low
    return high * (1.0 + (low / high) ** power) ** (1.0 / power)


# -- vertical and inclined, at one wall temperature ------------------------------------------------------------------


def _whole_range(rayleigh: Any, prandtl: Any, constant: float) -> Any:
    return (0.825 + 0.387 * rayleigh ** (1 / 6) / laminarity(prandtl, constant) ** (8.0 / 27.0)) ** 2


def _laminar(rayleigh: Any, prandtl: Any, constant: float) -> Any:
    return 0.68 + 0.670 * rayleigh**0.25 / laminarity(prandtl, constant) ** (4.0 / 9.0)


@method(
    "Churchill-Chu plate",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e12), Range("angle from vertical", -60.0, 60.0)),
    scatter=0.1,
    property_temperature="film",
    source="churchill-chu-1975",
    flows=("free",),
    where={"surface": ("vertical plate", "inclined plate"), "wall": ("temperature",)},
    length=_HEIGHT,
)
def vertical_plate(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a vertical plate, laminar and turbulent; on an inclined one Ra with the component of g along it."""
    return _whole_range(rayleigh, prandtl, 0.492)


@method(
    "Churchill-Chu laminar plate",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e9), Range("angle from vertical", -60.0, 60.0)),
    scatter=0.05,
    property_temperature="film",
    source="churchill-chu-1975",
    flows=("free",),
    where={"surface": ("vertical plate", "inclined plate"), "wall": ("temperature",)},
    length=_HEIGHT,
)
def laminar_vertical_plate(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a laminar vertical plate, the closer of the two forms of Churchill and Chu below Ra 1e9."""
    return _laminar(rayleigh, prandtl, 0.492)


@method(
    "Ostrach plate",
    gives="local Nu",
    ranges=(Range("Ra", 1e4, 1e9), Range("Pr", 0.01, 1000.0)),
    scatter=0.05,
    property_temperature="film",
    source="ostrach-1953;le-fevre-1956",
    flows=("free",),
    where=_PLATE,
    length="distance from the leading edge",
)
def laminar_similarity(grashof: Any, prandtl: Any) -> Any:
    """Local Nu of a laminar vertical plate by similarity, Le Fevre's fit (0.5 %) of Ostrach's solutions."""
    root = sqrt(prandtl)
    return 0.75 * root / (0.609 + 1.221 * root + 1.238 * prandtl) ** 0.25 * (0.25 * grashof) ** 0.25


@method(
    "Ede plate",
    gives="mean Nu",
    ranges=(Range("Ra", 1e4, 1e9),),
    scatter=0.1,
    property_temperature="film",
    source="ede-1967",
    flows=("free",),
    where=_PLATE,
    length=_HEIGHT,
)
def laminar_integral(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a laminar vertical plate with a thin layer, any Pr."""
    return (0.4 * prandtl / (1.0 + 2.0 * sqrt(prandtl) + 2.0 * prandtl) * rayleigh) ** 0.25


@method(
    "Raithby-Hollands plate",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e12), Range("angle from vertical", -60.0, 60.0)),
    scatter=0.1,
    property_temperature="film",
    source="raithby-hollands-1998",
    flows=("free",),
    where={"surface": ("vertical plate", "inclined plate"), "wall": ("temperature",)},
    length=_HEIGHT,
)
def vertical_plate_joined(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a vertical plate from its laminar and turbulent limits, with the thick layer at small Ra."""
    laminar = thick_layer(laminar_plate_factor(prandtl) * rayleigh**0.25, 2.0)
    rough = 0.13 * prandtl**0.22 / (1.0 + 0.61 * prandtl**0.81) ** 0.42
    turbulent = rough * rayleigh ** (4.0 / 3.0) / (rayleigh + 1.4e9 * prandtl)
    return joined(laminar, turbulent, 6.0)


@method(
    "Eckert-Jackson plate",
    gives="mean Nu",
    ranges=(Range("Ra", 1e10, 1e12), Range("Pr", 0.5, 10.0)),
    scatter=0.2,
    property_temperature="film",
    source="eckert-jackson-1950",
    flows=("free",),
    where=_PLATE,
    length=_HEIGHT,
)
def turbulent_plate(grashof: Any, prandtl: Any) -> Any:
    """Mean Nu of a vertical plate that is turbulent from its edge."""
    lift = (1.0 + 0.494 * prandtl ** (2.0 / 3.0)) ** -0.4
    return 0.0246 * grashof**0.4 * prandtl ** (7.0 / 15.0) * lift


@method(
    "Bayley plate",
    gives="mean Nu",
    ranges=(Range("Ra", 2e9, 1e12), Range("Pr", 0.6, 10.0)),
    scatter=0.15,
    property_temperature="film",
    source="bayley-1955",
    flows=("free",),
    where=_PLATE,
    length=_HEIGHT,
)
def turbulent_plate_third(rayleigh: Any) -> Any:
    """Mean Nu of a turbulent vertical plate, 0.10 Ra^1/3: the coefficient does not depend on the height."""
    return 0.10 * rayleigh ** (1 / 3)


@method(
    "Fujii-Imura inclined plate",
    gives="mean Nu",
    ranges=(Range("Ra", 1e5, 1e11), Range("angle from vertical", -88.0, 88.0)),
    scatter=0.1,
    property_temperature="film",
    source="fujii-imura-1972",
    flows=("free",),
    where={"surface": ("inclined plate",), "facing": ("held",)},
    length="length along the slope",
)
def inclined_plate_held(rayleigh: Any, facing: str) -> Any:
    """Mean Nu of an inclined plate whose warm face looks down or whose cold face looks up; Ra with g along it.

    ``facing`` is asked for so that nobody takes it for the other face, which gives off more.
    """
    if facing != "held":
        raise OutOfRange("this is for a held face: a warm one that looks down or a cold one that looks up")
    # the authors take properties at Tw − (Tw − T∞)/4, β at T∞ + (Tw − T∞)/4: the film is between the two
    return 0.56 * rayleigh**0.25


# -- vertical, with a uniform flux -----------------------------------------------------------------------------------


@method(
    "Churchill-Chu flux plate",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e12),),
    scatter=0.1,
    property_temperature="film",
    source="churchill-chu-1975",
    flows=("free",),
    where=_FLUX,
    length=_HEIGHT,
)
def vertical_plate_flux(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a vertical plate with a uniform flux; Ra and Nu with the difference at half its height."""
    return _whole_range(rayleigh, prandtl, 0.437)


@method(
    "Churchill-Chu laminar flux plate",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e9),),
    scatter=0.05,
    property_temperature="film",
    source="churchill-chu-1975",
    flows=("free",),
    where=_FLUX,
    length=_HEIGHT,
)
def laminar_vertical_plate_flux(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a laminar vertical plate with a uniform flux; the difference is the one at half its height."""
    return _laminar(rayleigh, prandtl, 0.437)


@method(
    "Fujii-Fujii flux plate",
    gives="local Nu",
    ranges=(Range("Ra*", 1e5, 1e13),),
    scatter=0.05,
    property_temperature="film",
    source="fujii-fujii-1976",
    flows=("free",),
    where=_FLUX,
    length="distance from the leading edge",
)
def laminar_similarity_flux(rayleigh_flux: Any, prandtl: Any) -> Any:
    """Local Nu of a laminar vertical plate with a uniform flux, a fit of the similarity solutions for any Pr."""
    return (prandtl / (4.0 + 9.0 * sqrt(prandtl) + 10.0 * prandtl) * rayleigh_flux) ** 0.2


@method(
    "Vliet-Liu laminar plate",
    gives="local Nu",
    ranges=(Range("Ra*", 1e5, 1e13), Range("Pr", 3.0, 10.0)),
    scatter=0.1,
    property_temperature="film",
    source="vliet-liu-1969",
    flows=("free",),
    where=_FLUX,
    length="distance from the leading edge",
)
def laminar_plate_flux(rayleigh_flux: Any) -> Any:
    """Local Nu of a laminar vertical plate in water with a uniform flux, measured."""
    return 0.60 * rayleigh_flux**0.2


@method(
    "Vliet-Liu turbulent plate",
    gives="local Nu",
    ranges=(Range("Ra*", 2e13, 1e16), Range("Pr", 3.0, 10.0)),
    scatter=0.15,
    property_temperature="film",
    source="vliet-liu-1969",
    flows=("free",),
    where=_FLUX,
    length="distance from the leading edge",
)
def turbulent_plate_flux(rayleigh_flux: Any) -> Any:
    """Local Nu of a turbulent vertical plate in water with a uniform flux, measured."""
    return 0.568 * rayleigh_flux**0.22
