"""Free convection: plates, cylinders, spheres, channels and enclosures. Ra with the whole driving difference."""

import math
from collections.abc import Callable, Mapping

from cellfuncs.methods.base import METHODS, Range, method


def _laminarity(prandtl: float, constant: float) -> float:
    """The Prandtl function 1 + (c/Pr)^9/16 of Churchill and co-workers."""
    return 1.0 + (constant / prandtl) ** (9.0 / 16.0)


@method(
    "Churchill-Chu plate",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e12), Range("angle from vertical", -60.0, 60.0)),
    scatter=0.1,
    property_temperature="film",
    source="churchill-chu-1975",
)
def vertical_plate(rayleigh: float, prandtl: float) -> float:
    """Mean Nu of a vertical plate; on an inclined one Ra is taken with the component of g along it."""
    return (0.825 + 0.387 * rayleigh ** (1 / 6) / _laminarity(prandtl, 0.492) ** (8.0 / 27.0)) ** 2


@method(
    "McAdams upper face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e4, 1e11),),
    scatter=0.15,
    property_temperature="film",
    source="mcadams-1954",
)
def horizontal_free_face(rayleigh: float, prandtl: float) -> float:
    """Mean Nu of a warm face looking up or a cold one looking down; the length is area over perimeter."""
    return 0.54 * rayleigh**0.25 if rayleigh <= 1e7 else 0.15 * rayleigh ** (1 / 3)


@method(
    "McAdams lower face",
    gives="mean Nu",
    ranges=(Range("Ra", 1e5, 1e10),),
    scatter=0.2,
    property_temperature="film",
    source="mcadams-1954",
)
def horizontal_held_face(rayleigh: float, prandtl: float) -> float:
    """Mean Nu of a warm face looking down or a cold one looking up; the length is area over perimeter."""
    return 0.27 * rayleigh**0.25


@method(
    "Churchill-Chu cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 1e-5, 1e12),),
    scatter=0.15,
    property_temperature="film",
    source="churchill-chu-1975",
)
def horizontal_cylinder(rayleigh: float, prandtl: float) -> float:
    """Mean Nu of a horizontal cylinder on its diameter."""
    return (0.6 + 0.387 * rayleigh ** (1 / 6) / _laminarity(prandtl, 0.559) ** (8.0 / 27.0)) ** 2


@method(
    "Churchill-Chu upright cylinder",
    gives="mean Nu",
    ranges=(Range("Ra", 0.1, 1e12), Range("(D/L)Gr^1/4", low=35.0)),
    scatter=0.1,
    property_temperature="film",
    source="churchill-chu-1975",
)
def vertical_cylinder(rayleigh: float, prandtl: float) -> float:
    """Mean Nu of a vertical cylinder thick enough to count as a plate."""
    return vertical_plate(rayleigh, prandtl)


@method(
    "Churchill sphere",
    gives="mean Nu",
    ranges=(Range("Ra", high=1e11), Range("Pr", low=0.7)),
    scatter=0.15,
    property_temperature="film",
    source="churchill-1983",
)
def sphere(rayleigh: float, prandtl: float) -> float:
    """Mean Nu of a sphere on its diameter."""
    return 2.0 + 0.589 * rayleigh**0.25 / _laminarity(prandtl, 0.469) ** (4.0 / 9.0)


@method(
    "Bar-Cohen and Rohsenow",
    gives="mean Nu",
    ranges=(Range("Ra S/L", 0.1, 1e5),),
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
)
def channel(elenbaas: float) -> float:
    """Mean Nu on the spacing S of two equal vertical walls, open at both ends; Ra S/L in."""
    return (576.0 / elenbaas**2 + 2.873 / math.sqrt(elenbaas)) ** -0.5


@method(
    "Hollands",
    gives="mean Nu",
    ranges=(Range("Ra", high=1e8),),
    scatter=0.05,
    property_temperature="mean of the walls",
    source="hollands-1976",
)
def layer_heated_below(rayleigh: float) -> float:
    """Mean Nu of a horizontal layer heated from below, on its thickness (air)."""
    first = max(0.0, 1.0 - 1708.0 / rayleigh)
    second = max(0.0, (rayleigh / 5830.0) ** (1 / 3) - 1.0)
    return 1.0 + 1.44 * first + second


@method(
    "Catton",
    gives="mean Nu",
    ranges=(Range("Ra", 1e3, 1e10), Range("H/S", 1.0, 40.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="catton-1978",
)
def upright_layer(rayleigh: float, prandtl: float, aspect: float) -> float:
    """Mean Nu of a vertical layer between two walls, on its thickness; H/S up to 2, to 10, to 40."""
    ratio = prandtl / (0.2 + prandtl) * rayleigh
    if aspect <= 2.0:
        nusselt = 0.18 * ratio**0.29
    elif aspect <= 10.0:
        nusselt = 0.22 * ratio**0.28 * aspect**-0.25
    else:
        nusselt = 0.42 * rayleigh**0.25 * prandtl**0.012 * aspect**-0.3
    return max(1.0, nusselt)


_BY_SURFACE: Mapping[str, tuple[str, Callable[[float, float], float]]] = {
    "vertical plate": ("Churchill-Chu plate", vertical_plate),
    "inclined plate": ("Churchill-Chu plate", vertical_plate),
    "horizontal plate, free face": ("McAdams upper face", horizontal_free_face),
    "horizontal plate, held face": ("McAdams lower face", horizontal_held_face),
    "horizontal cylinder": ("Churchill-Chu cylinder", horizontal_cylinder),
    "vertical cylinder": ("Churchill-Chu upright cylinder", vertical_cylinder),
    "sphere": ("Churchill sphere", sphere),
}


def nusselt(surface: str, rayleigh: float, prandtl: float, allow: bool, **more: float) -> tuple[float, str, str]:
    """Mean Nu of a surface in a still fluid, the method's name, and what lies outside its range."""
    if surface == "channel":
        name, value = "Bar-Cohen and Rohsenow", channel(more["Ra S/L"])
    else:
        name, function = _BY_SURFACE[surface]
        value = function(rayleigh, prandtl)
    return value, name, METHODS[name].check(allow, Ra=rayleigh, Pr=prandtl, **more)


def enclosure(rayleigh: float, prandtl: float, aspect: float, heated: str, allow: bool) -> tuple[float, str, str]:
    """Mean Nu across an enclosed layer (heated: from the side, from below, from above)."""
    if heated == "from above":
        return 1.0, "conduction alone", ""
    if heated == "from below":
        return layer_heated_below(rayleigh), "Hollands", METHODS["Hollands"].check(allow, Ra=rayleigh)
    if rayleigh < 1e3:
        return 1.0, "conduction alone", ""
    outside = METHODS["Catton"].check(allow, **{"Ra": rayleigh, "H/S": aspect})
    return upright_layer(rayleigh, prandtl, aspect), "Catton", outside
