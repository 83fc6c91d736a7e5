"""Beds of particles: Nu of the particles and the pressure gradient. Re, Nu with the particle's diameter and the
superficial velocity; ``voidage`` is the free part of the volume.

Scatters are those that authors or handbooks give, mostly from memory.
"""

from typing import Any

from cellfuncs.methods.algebra import sqrt
from cellfuncs.methods.base import Range, follows, method
from cellfuncs.methods.sphere import gnielinski as sphere_gnielinski

_LENGTH = "diameter of the particle"


@follows("Re/(1−ε)")
def bed_reynolds(velocity: Any, diameter: Any, voidage: Any, density: Any, viscosity: Any) -> Any:
    """Re over the solid part of the volume."""
    return density * velocity * diameter / (viscosity * (1.0 - voidage))


# -- heat transfer ---------------------------------------------------------------------------------------


@method(
    "Wakao bed",
    gives="mean Nu",
    ranges=(Range("Re", 15.0, 8500.0),),
    scatter=0.3,
    property_temperature="mean bulk",
    source="wakao-1979",
    flows=("bed",),
    length=_LENGTH,
)
def wakao(reynolds: float, prandtl: float) -> float:
    """Nu of the particles, 2 + 1.1 Re^0.6 Pr^1/3, all data corrected for dispersion."""
    return 2.0 + 1.1 * reynolds**0.6 * prandtl ** (1.0 / 3.0)


@method(
    "Gunn bed",
    gives="mean Nu",
    ranges=(Range("Re", 0.0, 1e5), Range("voidage", 0.35, 1.0)),
    scatter=0.3,
    property_temperature="mean bulk",
    source="gunn-1978",
    flows=("bed",),
    length=_LENGTH,
)
def gunn(reynolds: float, prandtl: float, voidage: float) -> float:
    """Nu of the particles of a fixed or fluidised bed, in one equation down to no flow; scatter from memory."""
    still = 7.0 - 10.0 * voidage + 5.0 * voidage**2
    moving = 1.33 - 2.4 * voidage + 1.2 * voidage**2
    third = prandtl ** (1.0 / 3.0)
    return still * (1.0 + 0.7 * reynolds**0.2 * third) + moving * reynolds**0.7 * third


@method(
    "Gnielinski bed",
    gives="mean Nu",
    ranges=(Range("Re/ε", 100.0, 2e4), Range("voidage", 0.26, 0.935), Range("Pr", 0.6, 1e4)),
    scatter=0.25,
    property_temperature="mean bulk",
    source="gnielinski-1978",
    flows=("bed",),
    length=_LENGTH,
)
def gnielinski(reynolds: float, prandtl: float, voidage: float) -> float:
    """Nu of the particles as of a single sphere at the velocity in the voids, times 1 + 1.5(1 − ε)."""
    return (1.0 + 1.5 * (1.0 - voidage)) * sphere_gnielinski(reynolds / voidage, prandtl)


@follows("Re/ε")
def _void_reynolds(reynolds: Any, voidage: Any) -> Any:
    return reynolds / voidage


@method(
    "Whitaker bed",
    gives="mean Nu",
    ranges=(Range("Re/(1−ε)", 22.0, 8000.0), Range("voidage", 0.34, 0.74)),
    scatter=0.25,
    property_temperature="mean bulk",
    source="whitaker-1972",
    flows=("bed",),
    length=_LENGTH,
)
def whitaker(reynolds: float, prandtl: float, voidage: float) -> float:
    """Nu of the particles, (1−ε)/ε (0.5 Re'^1/2 + 0.2 Re'^2/3) Pr^1/3 with Re' = Re/(1 − ε); range from memory."""
    solid = 1.0 - voidage
    inside = reynolds / solid
    return solid / voidage * (0.5 * sqrt(inside) + 0.2 * inside ** (2.0 / 3.0)) * prandtl ** (1.0 / 3.0)


@method(
    "KTA 3102.2 bed",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 1e5), Range("voidage", 0.36, 0.42)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="KTA-3102-2",
    flows=("bed",),
    where={"phase": ("gas",)},
    length=_LENGTH,
)
def kta(reynolds: float, prandtl: float, voidage: float) -> float:
    """Nu of spheres in gas, 1.27 Pr^1/3 Re^0.36/ε^1.18 + 0.033 Pr^1/2 Re^0.86/ε^1.07; coefficients from memory."""
    third = 1.27 * prandtl ** (1.0 / 3.0) / voidage**1.18 * reynolds**0.36
    return third + 0.033 * sqrt(prandtl) / voidage**1.07 * reynolds**0.86


# -- pressure gradient -----------------------------------------------------------------------------------


def _gradient(velocity: Any, diameter: Any, voidage: Any, density: Any, factor: Any) -> Any:
    """ψ(1−ε)ρU²/(ε³d) [Pa/m]."""
    return factor * (1.0 - voidage) * density * velocity**2 / (voidage**3 * diameter)


@method(
    "Ergun",
    gives="pressure gradient",
    ranges=(Range("voidage", 0.36, 0.5), Range("Re/(1−ε)", high=2500.0)),
    scatter=0.25,
    property_temperature="mean bulk",
    source="ergun-1952",
    flows=("bed",),
)
def ergun(velocity: float, diameter: float, voidage: float, density: float, viscosity: float) -> float:
    """Pressure gradient [Pa/m] of a bed, ψ = 150/Re' + 1.75; superficial velocity; range of Re' from memory."""
    factor = 150.0 / bed_reynolds(velocity, diameter, voidage, density, viscosity) + 1.75
    return _gradient(velocity, diameter, voidage, density, factor)


@method(
    "Carman-Kozeny",
    gives="pressure gradient",
    ranges=(Range("voidage", 0.26, 0.6), Range("Re/(1−ε)", high=5.0)),
    scatter=0.15,
    property_temperature="mean bulk",
    source="carman-1937",
    flows=("bed",),
)
def carman_kozeny(velocity: float, diameter: float, voidage: float, viscosity: float) -> float:
    """Pressure gradient [Pa/m] of creeping flow, 180 μU(1−ε)²/(ε³d²); ranges and scatter from memory."""
    return 180.0 * viscosity * velocity * (1.0 - voidage) ** 2 / (voidage**3 * diameter**2)


@method(
    "Carman bed",
    gives="pressure gradient",
    ranges=(Range("voidage", 0.26, 0.6), Range("Re/(1−ε)", 0.01, 1e4)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="carman-1937",
    flows=("bed",),
)
def carman(velocity: float, diameter: float, voidage: float, density: float, viscosity: float) -> float:
    """Pressure gradient [Pa/m], ψ = 180/Re' + 2.87/Re'^0.1; ranges and scatter from memory."""
    inside = bed_reynolds(velocity, diameter, voidage, density, viscosity)
    return _gradient(velocity, diameter, voidage, density, 180.0 / inside + 2.87 / inside**0.1)


@method(
    "Brauer bed",
    gives="pressure gradient",
    ranges=(Range("voidage", 0.36, 0.5), Range("Re/(1−ε)", 0.01, 2e4)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="brauer-1957",
    flows=("bed",),
)
def brauer(velocity: float, diameter: float, voidage: float, density: float, viscosity: float) -> float:
    """Pressure gradient [Pa/m] of equal spheres, ψ = 160/Re' + 3.1/Re'^0.1; ranges and scatter from memory."""
    inside = bed_reynolds(velocity, diameter, voidage, density, viscosity)
    return _gradient(velocity, diameter, voidage, density, 160.0 / inside + 3.1 / inside**0.1)


@method(
    "KTA 3102.3 bed",
    gives="pressure gradient",
    ranges=(Range("voidage", 0.36, 0.42), Range("Re/(1−ε)", 1.0, 1e5)),
    scatter=0.15,
    property_temperature="mean bulk",
    source="KTA-3102-3",
    flows=("bed",),
)
def kta_gradient(velocity: float, diameter: float, voidage: float, density: float, viscosity: float) -> float:
    """Pressure gradient [Pa/m] of beds of equal spheres, ψ = (320/Re' + 6/Re'^0.1)/2; coefficients from memory."""
    inside = bed_reynolds(velocity, diameter, voidage, density, viscosity)
    return _gradient(velocity, diameter, voidage, density, 0.5 * (320.0 / inside + 6.0 / inside**0.1))
