"""Free and forced convection together: blends of the two, and level tubes in laminar flow."""

import math
from typing import Any

from cellfuncs.methods.base import Range, method

_RATIO = (Range("Gr/Re2", 0.0, 100.0),)


def _blended(forced: Any, free: Any, direction: str, power: float) -> Any:
    """|Nu_F^n ± Nu_N^n|^1/n: + assisting and transverse, − opposing."""
    sign = -1.0 if direction == "opposing" else 1.0
    return abs(forced**power + sign * free**power) ** (1.0 / power)


@method(
    "Churchill blend",
    gives="mean Nu",
    ranges=_RATIO,
    scatter=0.2,
    property_temperature="film",
    source="churchill-1977",
    flows=("mixed",),
)
def blend(forced: Any, free: Any, direction: str) -> Any:
    """Nu of mixed convection, Nu³ = Nu_F³ ± Nu_N³: + assisting and transverse, − opposing."""
    return _blended(forced, free, direction, 3.0)


@method(
    "Churchill transverse plate blend",
    gives="mean Nu",
    ranges=_RATIO,
    scatter=0.2,
    property_temperature="film",
    source="churchill-1983",
    flows=("mixed",),
    where={
        "direction": ("transverse",),
        "surface": ("horizontal plate, free face", "horizontal plate, held face"),
    },
)
def blend_across_plate(forced: Any, free: Any) -> Any:
    """Nu of a level plate in a stream along it, with the exponent 7/2."""
    return _blended(forced, free, "transverse", 3.5)


@method(
    "Churchill transverse body blend",
    gives="mean Nu",
    ranges=_RATIO,
    scatter=0.2,
    property_temperature="film",
    source="churchill-1983",
    flows=("mixed",),
    where={"direction": ("transverse",), "surface": ("horizontal cylinder", "sphere")},
)
def blend_across_body(forced: Any, free: Any) -> Any:
    """Nu of a level cylinder or a sphere in a level stream, with the exponent 4."""
    return _blended(forced, free, "transverse", 4.0)


# -- level tubes, laminar --------------------------------------------------------------------------------------------
# The authors' Graetz number is m·cp/(kL), (π/4)/x*; Gr on the diameter and wall minus mean bulk.

_TUBE = {"surface": ("inside of a level tube",), "section": ("tube",), "wall": ("temperature",)}


@method(
    "Depew-August tube",
    gives="mean Nu",
    ranges=(Range("Re", high=2100.0), Range("Gr", 1.0, 1e6), Range("Pr", 4.0, 5000.0), Range("L/D", 20.0, 50.0)),
    scatter=0.4,
    property_temperature="mean bulk",
    source="depew-august-1971",
    flows=("mixed",),
    where=_TUBE,
    length="diameter",
)
def level_tube(x_star: Any, grashof: Any, prandtl: Any, viscosity_ratio: Any = 1.0) -> Any:
    """Mean Nu of laminar flow in a short level tube where buoyancy turns the fluid over."""
    graetz = 0.25 * math.pi / x_star
    turned = 0.12 * (graetz * grashof ** (1 / 3) * prandtl**0.36) ** 0.88
    return 1.75 * viscosity_ratio**0.14 * (graetz + turned) ** (1 / 3)


@method(
    "Oliver tube",
    gives="mean Nu",
    ranges=(Range("Re", high=2100.0), Range("L/D", low=70.0)),
    scatter=0.4,
    property_temperature="mean bulk",
    source="oliver-1962",
    flows=("mixed",),
    where=_TUBE,
    length="diameter",
)
def long_level_tube(x_star: Any, grashof: Any, prandtl: Any, viscosity_ratio: Any = 1.0) -> Any:
    """Mean Nu of laminar flow in a long level tube where buoyancy turns the fluid over."""
    graetz = 0.25 * math.pi / x_star
    turned = 0.0083 * (grashof * prandtl) ** 0.75
    return 1.75 * viscosity_ratio**0.14 * (graetz + turned) ** (1 / 3)
