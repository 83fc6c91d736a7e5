"""Free convection by the kind of surface: which method answers, and what lies outside its range."""

from collections.abc import Callable, Mapping
from typing import Any

from cellfuncs.methods.base import METHODS
from cellfuncs.methods.chimney import channel
from cellfuncs.methods.enclosure import layer_heated_below, upright_layer
from cellfuncs.methods.free_body import horizontal_cylinder, sphere, vertical_cylinder
from cellfuncs.methods.free_plate import horizontal_free_face, horizontal_held_face, vertical_plate

__all__ = [
    "channel",
    "enclosure",
    "horizontal_cylinder",
    "horizontal_free_face",
    "horizontal_held_face",
    "layer_heated_below",
    "nusselt",
    "sphere",
    "upright_layer",
    "vertical_cylinder",
    "vertical_plate",
]

_BY_SURFACE: Mapping[str, tuple[str, Callable[..., Any]]] = {
    "vertical plate": ("Churchill-Chu plate", vertical_plate),
    "inclined plate": ("Churchill-Chu plate", vertical_plate),
    "horizontal plate, free face": ("McAdams upper face", lambda rayleigh, prandtl: horizontal_free_face(rayleigh)),
    "horizontal plate, held face": ("McAdams lower face", lambda rayleigh, prandtl: horizontal_held_face(rayleigh)),
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
    outside = METHODS["Catton"].check(allow, **{"Ra": rayleigh, "H/L": aspect})
    return upright_layer(rayleigh, prandtl, aspect), "Catton", outside
