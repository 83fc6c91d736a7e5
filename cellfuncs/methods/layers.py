"""Heat through walls in layers: resistances, the overall coefficient with fouling, the critical radius."""

from typing import Any

from cellfuncs.errors import NumberRefused
from cellfuncs.methods.algebra import holds, log
from cellfuncs.methods.base import method


@method("plane layer", gives="resistance", scatter=0.0, property_temperature="solid", source="iso-6946")
def plane(thickness: Any, conductivity: Any) -> Any:
    """Resistance of a plane layer on its area, thickness/k [m2 K/W]; [m], [W/(m K)]."""
    return thickness / conductivity


def _check(diameter_ratio: Any) -> None:
    if not holds(diameter_ratio >= 1.0):
        raise NumberRefused("the outer diameter of a layer is below its inner one; give outer over inner diameter")


@method(
    "cylindrical layer",
    gives="resistance",
    scatter=0.0,
    property_temperature="solid",
    source="iso-12241",
)
def cylindrical(diameter: Any, diameter_ratio: Any, conductivity: Any) -> Any:
    """Resistance of a layer on a pipe, on the layer's outer surface: Do·ln(Do/Di)/(2k) [m2 K/W].

    ``diameter`` is the layer's outer one [m], ``conductivity`` in [W/(m K)]. On another surface of diameter D it is
    smaller or larger as D/Do; layers add up on one surface.
    """
    _check(diameter_ratio)
    return 0.5 * diameter * log(diameter_ratio) / conductivity


@method(
    "spherical layer",
    gives="resistance",
    scatter=0.0,
    property_temperature="solid",
    source="iso-12241",
)
def spherical(diameter: Any, diameter_ratio: Any, conductivity: Any) -> Any:
    """Resistance of a layer on a sphere, on the layer's outer surface: Do·(Do/Di − 1)/(2k) [m2 K/W]; D [m]."""
    _check(diameter_ratio)
    return 0.5 * diameter * (diameter_ratio - 1.0) / conductivity


@method("overall coefficient", gives="mean coefficient", scatter=0.0, property_temperature="none", source="tema-2007")
def overall(
    coefficient: Any,
    second_coefficient: Any,
    wall_resistance: Any = 0.0,
    fouling: Any = 0.0,
    second_fouling: Any = 0.0,
    surface_ratio: Any = 1.0,
) -> Any:
    """Overall coefficient U [W/(m2 K)] on the first surface through a wall with fouling on both sides.

    1/U = 1/h1 + R1 + Rw + (A1/A2)(R2 + 1/h2); h [W/(m2 K)], R [m2 K/W], Rw on the first surface, ``surface_ratio``
    A1/A2 (a tube: outer over inner diameter, with the outside first).
    """
    other = (second_fouling + 1.0 / second_coefficient) * surface_ratio
    return 1.0 / (1.0 / coefficient + fouling + wall_resistance + other)


@method(
    "critical radius, cylinder",
    gives="length",
    scatter=0.0,
    property_temperature="solid",
    source="rohsenow-1998-conduction",
)
def critical_radius_cylinder(conductivity: Any, coefficient: Any) -> Any:
    """Outer radius of insulation on a pipe at which it loses most, k/h [m]; below it more insulation loses more."""
    return conductivity / coefficient


@method(
    "critical radius, sphere",
    gives="length",
    scatter=0.0,
    property_temperature="solid",
    source="rohsenow-1998-conduction",
)
def critical_radius_sphere(conductivity: Any, coefficient: Any) -> Any:
    """Outer radius of insulation on a sphere at which it loses most, 2k/h [m]; below it more loses more."""
    return 2.0 * conductivity / coefficient
