"""Heat transfer and friction in turbulent tubes with rough or ribbed walls."""

from cellfuncs.methods.algebra import log, smaller, sqrt
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LENGTH
from cellfuncs.methods.friction import ROUGH_FROM, STRAIGHT, roughness_reynolds

ROUGH = {"section": ("tube",), **STRAIGHT}
RIBBED = {"section": ("tube",), "shape": ("ribbed",)}
LOG_SLOPE = 2.5


@method(
    "Dipprey-Sabersky",
    gives="mean Nu",
    ranges=(
        Range("Re", 1.4e4, 5e5),
        Range("Pr", 1.2, 5.94),
        Range("roughness", 0.0024, 0.049),
        Range("Reε", ROUGH_FROM),
    ),
    scatter=0.1,
    property_temperature="mean bulk",
    source="dipprey-sabersky-1963",
    flows=("duct",),
    where=ROUGH,
    length=LENGTH,
)
def dipprey_sabersky(reynolds: float, prandtl: float, friction: float, relative_roughness: float) -> float:
    """Nu of a close-packed sand-grain wall, (f/8) Re Pr/(1 + √(f/8) (5.19 Reε^0.2 Pr^0.44 − 8.48))."""
    eighth = friction / 8.0
    height = roughness_reynolds(reynolds, friction, relative_roughness)
    return eighth * reynolds * prandtl / (1.0 + sqrt(eighth) * (5.19 * height**0.2 * prandtl**0.44 - 8.48))


@method(
    "Bhatti-Shah rough",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1e7), Range("Pr", 0.5, 10.0), Range("roughness", 0.002, 0.05), Range("Reε", ROUGH_FROM)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="bhatti-shah-1987",
    flows=("duct",),
    where=ROUGH,
    length=LENGTH,
)
def bhatti_shah(reynolds: float, prandtl: float, friction: float, relative_roughness: float) -> float:
    """Nu of a fully rough wall, (f/8) Re Pr/(1 + √(f/8) (4.5 Reε^0.2 Pr^0.5 − 8.48))."""
    eighth = friction / 8.0
    height = roughness_reynolds(reynolds, friction, relative_roughness)
    return eighth * reynolds * prandtl / (1.0 + sqrt(eighth) * (4.5 * height**0.2 * sqrt(prandtl) - 8.48))


@method(
    "Norris",
    gives="factor",
    ranges=(Range("Re", 1e4, 1e7), Range("Pr", 0.5, 50.0)),
    scatter=0.2,
    property_temperature="none",
    source="norris-1970",
    flows=("duct",),
    where=ROUGH,
    length=LENGTH,
)
def norris(prandtl: float, friction: float, smooth_friction: float) -> float:
    """Nu of a rough wall over that of the smooth one, (f/f smooth)^n, n = 0.68 Pr^0.215; no more beyond f/f = 4."""
    return smaller(friction / smooth_friction, 4.0) ** smaller(0.68 * prandtl**0.215, 1.0)


RIBS = (Range("roughness", 0.01, 0.04), Range("p/e", 10.0, 40.0), Range("Reε", 35.0))


@method(
    "Webb ribs, friction",
    gives="Darcy friction factor",
    ranges=(Range("Re", 6000.0, 1e5), *RIBS),
    scatter=0.1,
    property_temperature="mean bulk",
    source="webb-1971",
    flows=("duct",),
    where=RIBBED,
    length=LENGTH,
)
def webb_friction(relative_roughness: float, rib_pitch: float) -> float:
    """f of a tube with repeated ribs across the stream, √(8/f) = 2.5 ln(D/(2e)) − 3.75 + 0.95 (p/e)^0.53."""
    return 8.0 * (LOG_SLOPE * -log(2.0 * relative_roughness) - 3.75 + 0.95 * rib_pitch**0.53) ** -2.0


@method(
    "Webb ribs",
    gives="mean Nu",
    ranges=(Range("Re", 6000.0, 1e5), Range("Pr", 0.71, 37.6), *RIBS),
    scatter=0.1,
    property_temperature="mean bulk",
    source="webb-1971",
    flows=("duct",),
    where=RIBBED,
    length=LENGTH,
)
def webb(reynolds: float, prandtl: float, relative_roughness: float, rib_pitch: float) -> float:
    """Nu of a tube with repeated ribs (height e, pitch p), by Reε^0.28 Pr^0.57 and the ribs' own friction."""
    friction = webb_friction(relative_roughness, rib_pitch)
    height = roughness_reynolds(reynolds, friction, relative_roughness)
    eighth = friction / 8.0
    wall = 4.5 * height**0.28 * prandtl**0.57 - 0.95 * rib_pitch**0.53
    return eighth * reynolds * prandtl / (1.0 + sqrt(eighth) * wall)
