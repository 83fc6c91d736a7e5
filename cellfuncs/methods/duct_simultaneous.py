"""Laminar entry in which velocity and temperature develop together (both uniform at the inlet)."""

import math

from cellfuncs.methods.algebra import sqrt, tanh
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_entry import PLATES_T, THIRD, TUBE_Q, TUBE_T
from cellfuncs.methods.duct_laminar import LAMINAR, LENGTH

UNIFORM = {"profile": ("uniform",)}


@method(
    "Churchill-Ozoe simultaneous",
    gives="local Nu",
    ranges=(LAMINAR, Range("Pr", low=0.1)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="churchill-ozoe-1973-tube",
    flows=("duct",),
    where={**TUBE_T, "wall": ("temperature", "flux"), **UNIFORM},
    length=LENGTH,
)
def churchill_ozoe_simultaneous(x_star: float, prandtl: float, wall: str) -> float:
    """Local Nu in a tube while velocity and temperature develop together, either wall condition, all x*."""
    if wall == "flux":
        thermal = 1.0 + (220.0 / math.pi * x_star) ** (-10.0 / 9.0)
        layer = math.pi / (115.2 * x_star) / (sqrt(1.0 + (prandtl / 0.0207) ** (2.0 / 3.0)) * thermal**0.6)
        return 5.364 * thermal**0.3 * (1.0 + layer ** (5.0 / 3.0)) ** 0.3 - 1.0
    thermal = 1.0 + (388.0 / math.pi * x_star) ** (-8.0 / 9.0)
    layer = math.pi / (284.0 * x_star) / (sqrt(1.0 + (prandtl / 0.0468) ** (2.0 / 3.0)) * thermal**0.75)
    return 5.357 * thermal**0.375 * (1.0 + layer ** (4.0 / 3.0)) ** 0.375 - 1.7


@method(
    "Stephan",
    gives="mean Nu",
    ranges=(LAMINAR, Range("Pr", 0.7, 7.0)),
    scatter=0.05,
    property_temperature="mean bulk",
    source="stephan-1959",
    flows=("duct",),
    where={**TUBE_T, **UNIFORM},
    length=LENGTH,
)
def stephan(x_star: float, prandtl: float) -> float:
    """Mean Nu of a tube at uniform temperature, both entries: 3.657 + 0.0677 Gz^1.33/(1 + 0.1 Pr (Gz/Pr)^0.83)."""
    gz = 1.0 / x_star
    return 3.657 + 0.0677 * gz**1.33 / (1.0 + 0.1 * prandtl * (gz / prandtl) ** 0.83)


@method(
    "Stephan, plates",
    gives="mean Nu",
    ranges=(LAMINAR, Range("Pr", 0.1, 1000.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="stephan-1959",
    flows=("duct",),
    where={**PLATES_T, **UNIFORM},
    length=LENGTH,
)
def stephan_plates(x_star: float, prandtl: float) -> float:
    """Mean Nu between plates at uniform temperature with both entries, fit of Stephan in the form of Shah."""
    return 7.55 + 0.024 * x_star**-1.14 / (1.0 + 0.0358 * prandtl**0.17 * x_star**-0.64)


@method(
    "Gnielinski laminar, simultaneous",
    gives="mean Nu",
    ranges=(LAMINAR, Range("Pr", low=0.1)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="gnielinski-2010",
    flows=("duct",),
    where={**TUBE_T, **UNIFORM},
    length=LENGTH,
)
def gnielinski_simultaneous(x_star: float, prandtl: float) -> float:
    """Mean Nu of a tube with both entries, the developed profile's value and (2/(1 + 22 Pr))^1/6 Gz^1/2 by cubes."""
    layer = (2.0 / (1.0 + 22.0 * prandtl)) ** (1.0 / 6.0) * x_star**-0.5
    return (3.66**3 + 0.7**3 + (1.615 * x_star**-THIRD - 0.7) ** 3 + layer**3) ** THIRD


@method(
    "Gnielinski laminar, simultaneous, flux",
    gives="local Nu",
    ranges=(LAMINAR, Range("Pr", low=0.7)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="gnielinski-2010",
    flows=("duct",),
    where={**TUBE_Q, **UNIFORM},
    length=LENGTH,
)
def gnielinski_simultaneous_flux(x_star: float, prandtl: float) -> float:
    """Local Nu of a tube with both entries at uniform flux; the layer's part is 0.462 Pr^−1/6 Gz^1/2."""
    layer = 0.462 * prandtl ** (-1.0 / 6.0) * x_star**-0.5
    return (4.364**3 + 1.0 + (1.302 * x_star**-THIRD - 1.0) ** 3 + layer**3) ** THIRD


def _muzychka_yovanovich(x_star: float, prandtl: float, wall: str, ratio: float, mean: bool) -> float:
    """Nu on the hydraulic diameter; the model is on the root of the area."""
    root_area = (1.0 + ratio) / (2.0 * sqrt(ratio))  # over the hydraulic diameter, of a rectangle
    z = x_star / root_area**2
    friction = 12.0 / (sqrt(ratio) * (1.0 + ratio) * (1.0 - 192.0 * ratio / math.pi**5 * tanh(math.pi / (2.0 * ratio))))
    developed, layer, lead, at = (3.86, 0.501, 0.886, 1.909) if wall == "flux" else (3.24, 0.409, 0.564, 1.664)
    factor, plate = (1.5, 2.0) if mean else (1.0, 1.0)
    of_prandtl = lead / (1.0 + (at * prandtl ** (1.0 / 6.0)) ** 4.5) ** (2.0 / 9.0)
    m = 2.27 + 1.65 * prandtl**THIRD
    far = developed * friction / (8.0 * math.sqrt(math.pi) * ratio**0.1)
    graetz = factor * layer * (friction / z) ** THIRD
    both = ((plate * of_prandtl / sqrt(z)) ** m + (graetz**5 + far**5) ** (m / 5.0)) ** (1.0 / m)
    return both / root_area


_MUZYCHKA = {
    "ranges": (LAMINAR, Range("Pr", low=0.1), Range("ratio", 0.01, 1.0)),
    "scatter": 0.15,
    "property_temperature": "mean bulk",
    "source": "muzychka-yovanovich-2004",
    "flows": ("duct",),
    "where": {"section": ("rectangle",), "heated": ("both",), **UNIFORM, "shape": ("straight",)},
    "length": LENGTH,
}


@method("Muzychka-Yovanovich", gives="local Nu", **_MUZYCHKA)
def muzychka_yovanovich(x_star: float, prandtl: float, wall: str, ratio: float) -> float:
    """Local Nu in the combined entry of a rectangle, either wall condition, all x* and Pr."""
    return _muzychka_yovanovich(x_star, prandtl, wall, ratio, False)


@method("Muzychka-Yovanovich, mean", gives="mean Nu", **_MUZYCHKA)
def muzychka_yovanovich_mean(x_star: float, prandtl: float, wall: str, ratio: float) -> float:
    """Mean Nu over the combined entry of a rectangle, either wall condition, all x* and Pr."""
    return _muzychka_yovanovich(x_star, prandtl, wall, ratio, True)
