"""Thermal entry of a laminar flow with a developed velocity profile in sections that no series is at hand for.

Lévêque's thin layer in the mean wall shear of the section and the section's developed Nu, joined by fifth powers
(Muzychka and Yovanovich 2004, their model without the part of the growing velocity profile). Nu and f are on the
hydraulic diameter. In tube and between plates, where the exact series is known, it is within 8 % of it.
"""

from cellfuncs.methods.algebra import log, where
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR, LENGTH, developed_value, friction_times_re

_SHEAR = {"temperature": 0.409, "flux": 0.501}
_OF_BOX = {"section": ("rectangle", "ellipse"), "heated": ("both",), "profile": ("developed",), "shape": ("straight",)}
_RATIO = Range("ratio", 0.05, 1.0)
_ANGLE = Range("apex angle", 10.0, 120.0)
_COMMON = {
    "scatter": 0.15,
    "property_temperature": "mean bulk",
    "source": "muzychka-yovanovich-2004;shah-london-1978",
    "flows": ("duct",),
    "length": LENGTH,
}


def entry_by_shear(x_star: float, wall: str, section: str, at: float, mean: bool, heated: str = "both") -> float:
    """Nu at x* = (x/D)/(Re·Pr), or its mean from the inlet; ``at`` is the section's ratio or apex angle [degrees]."""
    shear = friction_times_re(section, at) / 4.0  # Fanning's f·Re, as published
    if heated != "both":
        shear = shear * shear_of_wall(heated, at)
    thin = (1.5 if mean else 1.0) * _SHEAR[wall] * (shear / x_star) ** (1.0 / 3.0)
    developed = developed_value(section, wall, heated, at)
    far = thin < 0.05 * developed  # a fifth power that is lost beside the other
    return where(far, developed, (thin**5 + developed**5) ** 0.2)


def shear_of_wall(heated: str, ratio: float) -> float:
    """The shear at one wall of an annulus over the mean of both, from the exact laminar profile."""
    near = abs(1.0 - ratio) < 1e-4  # plates, where the formula is 0/0
    inner = where(near, 0.5, ratio)
    turning = (1.0 - inner * inner) / -log(inner)
    of_inner, of_outer = turning / inner - 2.0 * inner, 2.0 - turning
    mean = (inner * of_inner + of_outer) / (1.0 + inner)
    return where(near, 1.0 + 0.0 * ratio, (of_inner if heated == "inner" else of_outer) / mean)


def _of(wall: str, *sections: str) -> dict[str, tuple[str, ...]]:
    return {**_OF_BOX, "section": sections, "wall": (wall,)}


@method(
    "entry by wall shear",
    gives="mean Nu",
    ranges=(LAMINAR, Range("x*", low=1e-4), _RATIO),
    where=_of("temperature", "rectangle", "ellipse", "annulus"),
    **_COMMON,
)
def entry_of_section(x_star: float, section: str, ratio: float) -> float:
    """Mean Nu over the thermal entry of a rectangle, an ellipse or an annulus, all walls at one temperature."""
    return entry_by_shear(x_star, "temperature", section, ratio, True)


@method(
    "entry by wall shear, flux",
    gives="local Nu",
    ranges=(LAMINAR, Range("x*", low=1e-4), _RATIO),
    where=_of("flux", "rectangle", "ellipse"),
    **_COMMON,
)
def entry_of_section_flux(x_star: float, section: str, ratio: float) -> float:
    """Local Nu in the thermal entry of a rectangle or an ellipse at a flux that is uniform along it."""
    return entry_by_shear(x_star, "flux", section, ratio, False)


@method(
    "entry by wall shear, triangle",
    gives="mean Nu",
    ranges=(LAMINAR, Range("x*", low=1e-4), _ANGLE),
    where=_of("temperature", "triangle"),
    **_COMMON,
)
def entry_of_triangle(x_star: float, apex_angle: float) -> float:
    """Mean Nu over the thermal entry of an isosceles triangle, all walls at one temperature."""
    return entry_by_shear(x_star, "temperature", "triangle", apex_angle, True)


@method(
    "entry by wall shear, triangle, flux",
    gives="local Nu",
    ranges=(LAMINAR, Range("x*", low=1e-4), _ANGLE),
    where=_of("flux", "triangle"),
    **_COMMON,
)
def entry_of_triangle_flux(x_star: float, apex_angle: float) -> float:
    """Local Nu in the thermal entry of an isosceles triangle at a flux that is uniform along it."""
    return entry_by_shear(x_star, "flux", "triangle", apex_angle, False)


@method(
    "entry by wall shear, annulus",
    gives="mean Nu",
    ranges=(LAMINAR, Range("x*", low=1e-4), _RATIO),
    where={**_of("temperature", "annulus"), "heated": ("inner", "outer")},
    **_COMMON,
)
def entry_of_annulus(x_star: float, heated: str, ratio: float) -> float:
    """Mean Nu over the thermal entry of an annulus, one wall at a temperature and the other insulated."""
    return entry_by_shear(x_star, "temperature", "annulus", ratio, True, heated)


@method(
    "entry by wall shear, annulus, flux",
    gives="local Nu",
    ranges=(LAMINAR, Range("x*", low=1e-4), _RATIO),
    where={**_of("flux", "annulus"), "heated": ("inner", "outer")},
    **_COMMON,
)
def entry_of_annulus_flux(x_star: float, heated: str, ratio: float) -> float:
    """Local Nu in the thermal entry of an annulus, one wall at a uniform flux and the other insulated."""
    return entry_by_shear(x_star, "flux", "annulus", ratio, False, heated)
