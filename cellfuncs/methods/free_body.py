"""Free convection at cylinders, wires and spheres. Ra with the whole difference, on the diameter unless said."""

import math
from typing import Any

from cellfuncs.methods.algebra import log, sqrt, where
from cellfuncs.methods.base import Range, follows, method
from cellfuncs.methods.free_plate import (
    joined,
    laminar_plate_factor,
    laminar_vertical_plate,
    laminarity,
    vertical_plate,
)

_LYING = {"surface": ("horizontal cylinder",)}
_STANDING = {"surface": ("vertical cylinder",)}
_SPHERE = {"surface": ("sphere",)}

# -- horizontal cylinders --------------------------------------------------------------------------------------------


@method(
    "Churchill-Chu cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1e-5, 1e12),),
    scatter=0.15,
    property_temperature="film",
    source="churchill-chu-cylinder-1975",
    flows=("free",),
    where=_LYING,
    length="diameter",
)
def horizontal_cylinder(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a horizontal cylinder, laminar and turbulent, any Pr."""
    return (0.6 + 0.387 * rayleigh ** (1 / 6) / laminarity(prandtl, 0.559) ** (8.0 / 27.0)) ** 2


@method(
    "Churchill-Chu laminar cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1e-6, 1e9),),
    scatter=0.1,
    property_temperature="film",
    source="churchill-chu-cylinder-1975",
    flows=("free",),
    where=_LYING,
    length="diameter",
)
def laminar_horizontal_cylinder(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a laminar horizontal cylinder, any Pr."""
    return 0.36 + 0.518 * rayleigh**0.25 / laminarity(prandtl, 0.559) ** (4.0 / 9.0)


_MORGAN = ((1e-2, 0.675, 0.058), (1e2, 1.02, 0.148), (1e4, 0.850, 0.188), (1e7, 0.480, 0.250), (1e12, 0.125, 0.333))


@method(
    "Morgan cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1e-10, 1e12), Range("Pr", 0.7, 3000.0)),
    scatter=0.05,
    property_temperature="film",
    source="morgan-1975",
    flows=("free",),
    where=_LYING,
    length="diameter",
)
def horizontal_cylinder_pieces(rayleigh: Any) -> Any:
    """Mean Nu of horizontal cylinders and wires as powers of Ra by pieces; the seams step by less than 1 %."""
    *lower, last = _MORGAN
    nusselt = last[1] * rayleigh ** last[2]
    for upto, factor, power in reversed(lower):
        nusselt = where(rayleigh <= upto, factor * rayleigh**power, nusselt)
    return nusselt


@method(
    "Kuehn-Goldstein cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1.0, 1e12),),
    scatter=0.1,
    property_temperature="film",
    source="kuehn-goldstein-1976",
    flows=("free",),
    where=_LYING,
    length="diameter",
)
def horizontal_cylinder_joined(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a horizontal cylinder from its laminar and turbulent limits and the thick layer of a wire."""
    laminar = 0.518 * rayleigh**0.25 * (1.0 + (0.559 / prandtl) ** 0.6) ** (-5.0 / 12.0)
    return 2.0 / log(1.0 + 2.0 / joined(laminar, 0.1 * rayleigh ** (1 / 3), 15.0))


@method(
    "Fujii wire",
    gives="mean Nu",
    ranges=(Range("Ra", 1e-8, 1e6),),
    scatter=0.1,
    property_temperature="film",
    source="fujii-1982",
    flows=("free",),
    where=_LYING,
    length="diameter",
)
def wire(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a thin horizontal wire, any Pr."""
    power = 0.25 + 1.0 / (10.0 + 5.0 * rayleigh**0.175)
    return 2.0 / log(1.0 + 3.3 / (laminar_plate_factor(prandtl) * rayleigh**power))


# -- vertical cylinders ----------------------------------------------------------------------------------------------


@follows("(D/L)Gr^1/4")
def stoutness(rayleigh: Any, prandtl: Any, length_over_diameter: Any) -> Any:
    """Diameter over height times Gr^1/4, on the height: how thick the cylinder is beside its layer."""
    return (rayleigh / prandtl) ** 0.25 / length_over_diameter


@method(
    "Churchill-Chu upright cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e12), Range("(D/L)Gr^1/4", low=35.0)),
    scatter=0.1,
    property_temperature="film",
    source="churchill-chu-1975",
    flows=("free",),
    where=_STANDING,
    length="height of the cylinder",
)
def vertical_cylinder(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a vertical cylinder thick enough to count as a plate."""
    return vertical_plate(rayleigh, prandtl)


@method(
    "Le Fevre-Ede cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1e4, 1e9), Range("(D/L)Gr^1/4", low=3.0)),
    scatter=0.1,
    property_temperature="film",
    source="le-fevre-ede-1956",
    flows=("free",),
    where=_STANDING,
    length="height of the cylinder",
)
def slender_cylinder(rayleigh: Any, prandtl: Any, length_over_diameter: Any) -> Any:
    """Mean Nu of a laminar vertical cylinder: the plate and a term for the curvature of its layer."""
    plate = (7.0 * rayleigh * prandtl / (5.0 * (20.0 + 21.0 * prandtl))) ** 0.25
    curved = (272.0 + 315.0 * prandtl) / (35.0 * (64.0 + 63.0 * prandtl)) * length_over_diameter
    return 4.0 / 3.0 * plate + 4.0 * curved


@method(
    "Cebeci-Popiel cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1e4, 1e9), Range("Pr", 0.01, 100.0), Range("(D/L)Gr^1/4", low=1.1)),
    scatter=0.1,
    property_temperature="film",
    source="cebeci-1974;popiel-2008",
    flows=("free",),
    where=_STANDING,
    length="height of the cylinder",
)
def slender_cylinder_corrected(rayleigh: Any, prandtl: Any, length_over_diameter: Any) -> Any:
    """Mean Nu of a laminar vertical cylinder: Churchill and Chu's plate times Cebeci's correction, fit by Popiel."""
    thickness = math.sqrt(32.0) / stoutness(rayleigh, prandtl, length_over_diameter)
    factor = 0.0571322 + 0.20305 * prandtl**-0.43
    power = 0.9165 - 0.0043 * sqrt(prandtl) + 0.01333 * log(prandtl) + 0.0004809 / prandtl
    return laminar_vertical_plate(rayleigh, prandtl) * (1.0 + factor * thickness**power)


# -- spheres ---------------------------------------------------------------------------------------------------------


@method(
    "Churchill sphere",
    gives="mean Nu",
    ranges=(Range("Ra", high=1e11), Range("Pr", low=0.7)),
    scatter=0.15,
    property_temperature="film",
    source="churchill-1983",
    flows=("free",),
    where=_SPHERE,
    length="diameter",
)
def sphere(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a sphere, laminar."""
    return 2.0 + 0.589 * rayleigh**0.25 / laminarity(prandtl, 0.469) ** (4.0 / 9.0)


@method(
    "Yuge sphere",
    gives="mean Nu",
    ranges=(Range("Gr", 1.0, 1e5), Range("Pr", 0.6, 1.0)),
    scatter=0.1,
    property_temperature="film",
    source="yuge-1960",
    flows=("free",),
    where=_SPHERE,
    length="diameter",
)
def sphere_in_air(grashof: Any) -> Any:
    """Mean Nu of a small sphere in air or a gas like it, measured."""
    return 2.0 + 0.392 * grashof**0.25


@method(
    "Amato-Tien sphere",
    gives="mean Nu",
    ranges=(Range("Ra", 3e5, 8e8), Range("Pr", 3.0, 10.0)),
    scatter=0.1,
    property_temperature="film",
    source="amato-tien-1972",
    flows=("free",),
    where=_SPHERE,
    length="diameter",
)
def sphere_in_water(rayleigh: Any) -> Any:
    """Mean Nu of a sphere in water, measured."""
    return 2.0 + 0.50 * rayleigh**0.25
