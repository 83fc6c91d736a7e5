"""Radiation as a coefficient: heat radiated per area over the difference of the temperatures, q = h·(T1 − T2).

Grey and diffuse surfaces, a gas between them that takes no part. 4σTm³ is exact with Tm³ = (T1 + T2)(T1² + T2²)/4.
"""

from typing import Any

from cellfuncs.groups import STEFAN_BOLTZMANN
from cellfuncs.methods.base import Range, method

_OPAQUE = "a gas with much water vapour, carbon dioxide or soot takes part itself and is not counted"
_EMISSIVITY = Range("ε", 0.0, 1.0)


def black(wall_temperature: Any, surroundings_temperature: Any) -> Any:
    """4σTm³ [W/(m2 K)] between black surfaces at two temperatures [K]."""
    one, other = wall_temperature, surroundings_temperature
    return STEFAN_BOLTZMANN * (one + other) * (one * one + other * other)


@method(
    "radiation to surroundings",
    gives="mean coefficient",
    ranges=(_EMISSIVITY,),
    scatter=0.0,
    property_temperature="none",
    source="stefan-boltzmann",
    warning=_OPAQUE,
)
def to_surroundings(wall_temperature: Any, surroundings_temperature: Any, emissivity: Any) -> Any:
    """4εσTm³ [W/(m2 K)] of a grey surface that sees only large surroundings at one temperature; [K], [K], ε."""
    return emissivity * black(wall_temperature, surroundings_temperature)


@method(
    "radiation between parallel walls",
    gives="mean coefficient",
    ranges=(_EMISSIVITY, Range("ε2", 0.0, 1.0)),
    scatter=0.0,
    property_temperature="none",
    source="christiansen-1883",
    flows=("enclosure",),
    where={"shape": ("layer",)},
    warning=_OPAQUE,
)
def between_walls(wall_temperature: Any, surroundings_temperature: Any, emissivity: Any, second_emissivity: Any) -> Any:
    """4σTm³/(1/ε1 + 1/ε2 − 1) [W/(m2 K)] between two grey walls that see only each other; [K], [K], ε1, ε2."""
    exchange = 1.0 / (1.0 / emissivity + 1.0 / second_emissivity - 1.0)
    return exchange * black(wall_temperature, surroundings_temperature)


@method(
    "radiation between concentric cylinders",
    gives="mean coefficient",
    ranges=(_EMISSIVITY, Range("ε2", 0.0, 1.0), Range("ratio", 0.0, 1.0)),
    scatter=0.0,
    property_temperature="none",
    source="christiansen-1883",
    flows=("enclosure",),
    where={"shape": ("concentric cylinders",)},
    warning=_OPAQUE,
)
def between_cylinders(
    wall_temperature: Any, surroundings_temperature: Any, emissivity: Any, second_emissivity: Any, ratio: Any
) -> Any:
    """4σTm³/(1/ε1 + (D1/D2)(1/ε2 − 1)) [W/(m2 K)] on the inner of two long grey cylinders; ``ratio`` D1/D2."""
    exchange = 1.0 / (1.0 / emissivity + ratio * (1.0 / second_emissivity - 1.0))
    return exchange * black(wall_temperature, surroundings_temperature)


@method(
    "radiation between concentric spheres",
    gives="mean coefficient",
    ranges=(_EMISSIVITY, Range("ε2", 0.0, 1.0), Range("ratio", 0.0, 1.0)),
    scatter=0.0,
    property_temperature="none",
    source="christiansen-1883",
    flows=("enclosure",),
    where={"shape": ("concentric spheres",)},
    warning=_OPAQUE,
)
def between_spheres(
    wall_temperature: Any, surroundings_temperature: Any, emissivity: Any, second_emissivity: Any, ratio: Any
) -> Any:
    """4σTm³/(1/ε1 + (D1/D2)²(1/ε2 − 1)) [W/(m2 K)] on the inner of two grey spheres; ``ratio`` D1/D2."""
    return between_cylinders(wall_temperature, surroundings_temperature, emissivity, second_emissivity, ratio**2)
