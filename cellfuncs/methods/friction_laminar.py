"""Friction in laminar ducts: developed, in the entry, with slip; and the laminar-equivalent diameter for turbulence.

f is Darcy's friction factor on the hydraulic diameter, x+ = (x/D)/Re.
"""

from functools import lru_cache

from cellfuncs.methods.algebra import between, sqrt
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR, LENGTH, friction_times_re
from cellfuncs.methods.friction import ROUGHNESS, STRAIGHT, colebrook_white
from cellfuncs.sources import read_table


@lru_cache(maxsize=4)
def _entry_constants(section: str) -> tuple[tuple[float, ...], tuple[float, ...], tuple[float, ...]]:
    rows = [row for row in read_table("duct_entry_friction.csv") if row["section"] == section]
    return tuple(zip(*((float(r["at"]), float(r["increment"]), float(r["constant"])) for r in rows), strict=True))


def _increment_and_constant(section: str, ratio: float) -> tuple[float, float]:
    places, increments, constants = _entry_constants(section)
    return between(ratio, places, increments), between(ratio, places, constants)


@method(
    "laminar friction",
    gives="Darcy friction factor",
    ranges=(LAMINAR,),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where={"section": ("tube", "plates", "rectangle", "annulus", "ellipse"), "profile": ("developed",), **STRAIGHT},
    length=LENGTH,
)
def laminar_friction(reynolds: float, section: str, ratio: float = 1.0) -> float:
    """f of developed laminar flow: 64/Re in a tube, 96/Re between plates, by the ratio in other sections."""
    return friction_times_re(section, ratio) / reynolds


@method(
    "laminar friction, triangle",
    gives="Darcy friction factor",
    ranges=(LAMINAR, Range("apex angle", 10.0, 120.0)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978;developed-sections",
    flows=("duct",),
    where={"section": ("triangle",), "profile": ("developed",), **STRAIGHT},
    length=LENGTH,
)
def triangle_friction(reynolds: float, apex_angle: float) -> float:
    """f of developed laminar flow in an isosceles triangle (160/3 over Re where equilateral) by its apex angle."""
    return friction_times_re("triangle", apex_angle) / reynolds


@method(
    "Shah entry friction",
    gives="Darcy friction factor",
    ranges=(LAMINAR, Range("ratio", 0.05, 1.0)),
    scatter=0.024,
    property_temperature="mean bulk",
    source="shah-1978",
    flows=("duct",),
    where={"section": ("tube", "plates", "rectangle", "annulus"), "profile": ("uniform",), **STRAIGHT},
    length=LENGTH,
)
def shah_entry_friction(reynolds: float, x_plus: float, section: str, ratio: float = 1.0) -> float:
    """Apparent f from a uniform inlet to x+ (wall friction and the growing momentum of the stream together)."""
    increment, constant = _increment_and_constant(section, ratio)
    early = 3.44 / sqrt(x_plus)  # Fanning, as published
    late = increment / (4.0 * x_plus) + friction_times_re(section, ratio) / 4.0 - early
    return 4.0 * (early + late / (1.0 + constant / x_plus**2)) / reynolds


@method(
    "laminar entrance loss",
    gives="loss coefficient",
    ranges=(LAMINAR, Range("ratio", 0.05, 1.0), Range("x+", low=0.06)),
    scatter=0.05,
    property_temperature="mean bulk",
    source="shah-1978;shah-london-1978",
    flows=("duct",),
    where={"section": ("tube", "plates", "rectangle", "annulus"), "profile": ("uniform",), **STRAIGHT},
    length=LENGTH,
)
def laminar_entrance_loss(section: str, ratio: float = 1.0) -> float:
    """K of a complete laminar entry beyond developed friction (on ρU²/2): tube 1.25, plates 0.674."""
    return _increment_and_constant(section, ratio)[0] + 0.0 * ratio


@method(
    "laminar-equivalent diameter",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e7), ROUGHNESS),
    scatter=0.05,
    property_temperature="mean bulk",
    source="jones-1976;colebrook-1939",
    flows=("duct",),
    where={"section": ("plates", "rectangle", "annulus", "ellipse"), **STRAIGHT},
    length=LENGTH,
)
def laminar_equivalent(reynolds: float, section: str, ratio: float = 1.0, relative_roughness: float = 0.0) -> float:
    """f of turbulent flow in a non-circular duct: Colebrook-White at the Re that gives 64/Re when laminar (Jones)."""
    return colebrook_white(reynolds * 64.0 / friction_times_re(section, ratio), relative_roughness)
