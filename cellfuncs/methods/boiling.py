"""Pool boiling of a pure, saturated liquid: nucleate boiling, its highest heat flux, film boiling and its lowest.

The driving difference is wall minus saturation. Liquid and vapour at saturation; in film boiling the vapour at the mean
of wall and saturation.

Scatters are those that authors or handbooks give, mostly from memory.
"""

import math
from collections.abc import Mapping
from functools import cache
from typing import Any

from cellfuncs.errors import UnknownName
from cellfuncs.methods.algebra import exp, log10, sqrt, where
from cellfuncs.methods.base import Range, follows, method
from cellfuncs.methods.condensation import lift, liquid_prandtl
from cellfuncs.sources import read_table

_WARNING = (
    "Boiling: above the critical heat flux the wall turns red hot or melts within moments, and coefficients scatter by "
    "half; keep a wide margin, and leave boilers and pressure equipment to local codes and licensed engineers."
)


def _method(
    name: str, gives: str, ranges: tuple[Range, ...], scatter: float, source: str, temperature: str = "saturation",
    **where_: tuple[str, ...],
) -> Any:  # fmt: skip
    return method(
        name, gives=gives, ranges=ranges, scatter=scatter, property_temperature=temperature, source=source,
        flows=("boiling",), where=where_, warning=_WARNING,
    )  # fmt: skip


_NUCLEATE = {"boiling": ("nucleate",)}
_CRISIS = {"boiling": ("critical",)}
_FILM = {"boiling": ("film",)}


def capillary_length(density_liquid: Any, density_vapour: Any, surface_tension: Any, gravity: Any) -> Any:
    """√(σ/(g(ρl − ρv))) [m]."""
    return sqrt(surface_tension / (gravity * lift(density_liquid, density_vapour)))


@follows("R'")
def body_number(density_liquid: Any, density_vapour: Any, surface_tension: Any, gravity: Any, diameter: Any) -> Any:
    """Radius of a cylinder or sphere over the capillary length."""
    return 0.5 * diameter / capillary_length(density_liquid, density_vapour, surface_tension, gravity)


# -- nucleate boiling --------------------------------------------------------------------------------------


@cache
def surfaces() -> Mapping[tuple[str, str], tuple[float, float]]:
    """(liquid, surface) -> factor Csf and exponent of Pr for Rohsenow (``data/boiling_surfaces.csv``)."""
    rows = read_table("boiling_surfaces.csv")
    return {(row["liquid"], row["surface"]): (float(row["factor"]), float(row["exponent"])) for row in rows}


def surface(liquid: str, material: str) -> tuple[float, float]:
    """Rohsenow's factor and exponent of a liquid on a surface; UnknownName where it was not measured."""
    found = surfaces().get((liquid.strip().casefold(), material.strip().casefold()))
    if found is None:
        known = [m for of, m in surfaces() if of == liquid.strip().casefold()]
        there = f"known are: {', '.join(known)}" if known else "state the surface factor"
        raise UnknownName(f'no surface factor of "{liquid}" on "{material}"; {there}')
    return found


@_method("Rohsenow", "heat flux", (), 0.5, "rohsenow-1952;vachon-1968", **_NUCLEATE)
def rohsenow(
    surface_factor: float, prandtl_exponent: float, wall_superheat: float, density_liquid: float,
    density_vapour: float, viscosity_liquid: float, conductivity_liquid: float, specific_heat_liquid: float,
    heat_of_vaporisation: float, surface_tension: float, gravity: float,
) -> float:  # fmt: skip
    """Heat flux [W/m2] of nucleate boiling, μ hfg (g(ρl−ρv)/σ)^1/2 (cp ΔT/(Csf hfg Pr^n))³; scatters twofold."""
    scale = capillary_length(density_liquid, density_vapour, surface_tension, gravity)
    prandtl = liquid_prandtl(specific_heat_liquid, viscosity_liquid, conductivity_liquid)
    jakob = specific_heat_liquid * wall_superheat / (surface_factor * heat_of_vaporisation * prandtl**prandtl_exponent)
    return viscosity_liquid * heat_of_vaporisation / scale * jakob**3


@_method(
    "Cooper", "mean coefficient", (Range("p/pc", 0.001, 0.9), Range("M", 0.002, 0.2)), 0.4, "cooper-1984", **_NUCLEATE
)
def cooper(reduced_pressure: float, molar_mass: float, heat_flux: float, surface_roughness: float = 1e-6) -> float:
    """Mean h [W/(m2 K)], 55 pr^(0.12−0.2 log Rp) (−log pr)^−0.55 M^−0.5 q^0.67, Rp in μm, M in g/mol.

    On horizontal copper tubes he found 1.7 of it; scatter from memory.
    """
    power = 0.12 - 0.2 * log10(1e6 * surface_roughness)
    state = reduced_pressure**power * (-log10(reduced_pressure)) ** -0.55
    return 55.0 * state * (1e3 * molar_mass) ** -0.5 * heat_flux**0.67


@_method("Mostinski", "mean coefficient", (Range("p/pc", 0.001, 0.9),), 0.5, "mostinski-1963", **_NUCLEATE)
def mostinski(reduced_pressure: float, critical_pressure: float, heat_flux: float) -> float:
    """Mean h [W/(m2 K)] of nucleate boiling, 0.00417 q^0.7 pc^0.69 (1.8 pr^0.17 + 4 pr^1.2 + 10 pr^10), pc in kPa.

    Ranges and scatter from memory.
    """
    state = 1.8 * reduced_pressure**0.17 + 4.0 * reduced_pressure**1.2 + 10.0 * reduced_pressure**10
    return 0.00417 * heat_flux**0.7 * (1e-3 * critical_pressure) ** 0.69 * state


def _rough(surface_roughness: Any) -> Any:
    return (surface_roughness / 0.4e-6) ** 0.133


@_method("Gorenflo", "mean coefficient", (Range("p/pc", 0.005, 0.9),), 0.3, "gorenflo-1993", **_NUCLEATE)
def gorenflo(
    reference_coefficient: float, reduced_pressure: float, heat_flux: float, surface_roughness: float = 0.4e-6
) -> float:
    """Mean h [W/(m2 K)] from one measured at p/pc 0.1, 20 kW/m2 and Ra 0.4 μm; not for water; scatter from memory.

    h0 (1.2 pr^0.27 + 2.5 pr + pr/(1 − pr)) (q/20000)^(0.9 − 0.3 pr^0.3) (Ra/0.4 μm)^0.133.
    """
    pressure = 1.2 * reduced_pressure**0.27 + (2.5 + 1.0 / (1.0 - reduced_pressure)) * reduced_pressure
    power = 0.9 - 0.3 * reduced_pressure**0.3
    return reference_coefficient * pressure * (heat_flux / 2e4) ** power * _rough(surface_roughness)


@_method("Gorenflo, water", "mean coefficient", (Range("p/pc", 0.0005, 0.9),), 0.3, "gorenflo-1993", **_NUCLEATE)
def gorenflo_water(reduced_pressure: float, heat_flux: float, surface_roughness: float = 0.4e-6) -> float:
    """Mean h [W/(m2 K)] of boiling water, from 5600 at p/pc 0.1, 20 kW/m2 and Ra 0.4 μm; scatter from memory.

    5600 (1.73 pr^0.27 + (6.1 + 0.68/(1 − pr)) pr²) (q/20000)^(0.9 − 0.3 pr^0.15) (Ra/0.4 μm)^0.133.
    """
    pressure = 1.73 * reduced_pressure**0.27 + (6.1 + 0.68 / (1.0 - reduced_pressure)) * reduced_pressure**2
    power = 0.9 - 0.3 * reduced_pressure**0.15
    return 5600.0 * pressure * (heat_flux / 2e4) ** power * _rough(surface_roughness)


@_method("Davis-Anderson onset", "heat flux", (), 0.3, "davis-anderson-1966", boiling=("onset",))
def onset(
    wall_superheat: float, saturation_temperature: float, density_vapour: float, conductivity_liquid: float,
    heat_of_vaporisation: float, surface_tension: float,
) -> float:  # fmt: skip
    """Heat flux [W/m2] at which a wall with cavities of all sizes starts to boil, k hfg ρv ΔT²/(8σTs)."""
    lead = conductivity_liquid * heat_of_vaporisation * density_vapour * wall_superheat**2
    return lead / (8.0 * surface_tension * saturation_temperature)


# -- critical heat flux ------------------------------------------------------------------------------------


def _jets(density_liquid: Any, density_vapour: Any, heat: Any, tension: Any, gravity: Any) -> Any:
    """hfg ρv^1/2 (σg(ρl − ρv))^1/4 [W/m2]."""
    return heat * sqrt(density_vapour) * (tension * gravity * lift(density_liquid, density_vapour)) ** 0.25


@_method("Zuber", "heat flux", (), 0.2, "zuber-1958", **_CRISIS)
def zuber(
    density_liquid: float, density_vapour: float, heat_of_vaporisation: float, surface_tension: float, gravity: float
) -> float:
    """Critical heat flux [W/m2] of an endless flat wall, π/24 hfg ρv^1/2 (σg(ρl − ρv))^1/4."""
    return math.pi / 24.0 * _jets(density_liquid, density_vapour, heat_of_vaporisation, surface_tension, gravity)


@_method("Kutateladze crisis", "heat flux", (), 0.2, "kutateladze-1948;kutateladze-1963", **_CRISIS)
def kutateladze(
    density_liquid: float, density_vapour: float, heat_of_vaporisation: float, surface_tension: float, gravity: float
) -> float:
    """Critical heat flux [W/m2], 0.14 hfg ρv^1/2 (σg(ρl − ρv))^1/4; his number, from memory, lies at 0.13 to 0.16."""
    return 0.14 * _jets(density_liquid, density_vapour, heat_of_vaporisation, surface_tension, gravity)


@_method("Lienhard-Dhir plate", "heat flux", (), 0.2, "lienhard-dhir-1973", **_CRISIS, body=("plate",))
def plate(
    density_liquid: float, density_vapour: float, heat_of_vaporisation: float, surface_tension: float, gravity: float
) -> float:
    """Critical heat flux [W/m2] of a wide flat heater with side walls, 1.14 of Zuber's."""
    return 1.14 * zuber(density_liquid, density_vapour, heat_of_vaporisation, surface_tension, gravity)


@_method(
    "Sun-Lienhard cylinder", "heat flux", (Range("R'", low=0.15),), 0.2, "sun-lienhard-1970", **_CRISIS,
    body=("cylinder",),
)  # fmt: skip
def cylinder(
    density_liquid: float, density_vapour: float, heat_of_vaporisation: float, surface_tension: float, gravity: float,
    diameter: float,
) -> float:  # fmt: skip
    """Critical heat flux [W/m2] of a horizontal cylinder, Zuber's × (0.89 + 2.27 exp(−3.44 √R'))."""
    size = body_number(density_liquid, density_vapour, surface_tension, gravity, diameter)
    factor = 0.89 + 2.27 * exp(-3.44 * sqrt(size))
    return factor * zuber(density_liquid, density_vapour, heat_of_vaporisation, surface_tension, gravity)


@_method(
    "Lienhard-Dhir sphere", "heat flux", (Range("R'", low=0.15),), 0.2, "lienhard-dhir-1973", **_CRISIS,
    body=("sphere",),
)  # fmt: skip
def sphere(
    density_liquid: float, density_vapour: float, heat_of_vaporisation: float, surface_tension: float, gravity: float,
    diameter: float,
) -> float:  # fmt: skip
    """Critical heat flux [W/m2] of a sphere, Zuber's × 1.734/√R' up to R' 4.26, 0.84 beyond."""
    size = body_number(density_liquid, density_vapour, surface_tension, gravity, diameter)
    factor = where(size < 4.26, 1.734 / sqrt(size), 0.84)
    return factor * zuber(density_liquid, density_vapour, heat_of_vaporisation, surface_tension, gravity)


# -- film boiling ------------------------------------------------------------------------------------------


def _blanket(
    density_liquid: Any, density_vapour: Any, viscosity_vapour: Any, conductivity_vapour: Any, latent: Any,
    superheat: Any, gravity: Any, size: Any,
) -> Any:  # fmt: skip
    """(k³ρv(ρl − ρv)g hfg/(μ ΔT size))^1/4 of the vapour [W/(m2 K)]."""
    weight = density_vapour * lift(density_liquid, density_vapour) * gravity
    return (conductivity_vapour**3 * weight * latent / (viscosity_vapour * superheat * size)) ** 0.25


@_method("Bromley", "mean coefficient", (), 0.15, "bromley-1950", "vapour film", **_FILM, body=("cylinder",))
def bromley(
    density_liquid: float, density_vapour: float, viscosity_vapour: float, conductivity_vapour: float,
    specific_heat_vapour: float, heat_of_vaporisation: float, wall_superheat: float, gravity: float, diameter: float,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of film boiling on a horizontal cylinder, 0.62 (k³ρv(ρl−ρv)g hfg/(μ ΔT D))^1/4.

    hfg carries 0.8 cp ΔT of the vapour; radiation comes on top."""
    latent = heat_of_vaporisation + 0.8 * specific_heat_vapour * wall_superheat
    return 0.62 * _blanket(
        density_liquid, density_vapour, viscosity_vapour, conductivity_vapour, latent, wall_superheat, gravity,
        diameter,
    )  # fmt: skip


@_method("film boiling, sphere", "mean coefficient", (), 0.25, "bromley-1950", "vapour film", **_FILM, body=("sphere",))
def film_sphere(
    density_liquid: float, density_vapour: float, viscosity_vapour: float, conductivity_vapour: float,
    specific_heat_vapour: float, heat_of_vaporisation: float, wall_superheat: float, gravity: float, diameter: float,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of film boiling on a sphere, 0.67 for 0.62 of the cylinder (common practice), no radiation."""
    on_cylinder = bromley(
        density_liquid, density_vapour, viscosity_vapour, conductivity_vapour, specific_heat_vapour,
        heat_of_vaporisation, wall_superheat, gravity, diameter,
    )  # fmt: skip
    return 0.67 / 0.62 * on_cylinder


@_method("Berenson film boiling", "mean coefficient", (), 0.2, "berenson-1961", "vapour film", **_FILM, body=("plate",))
def berenson(
    density_liquid: float, density_vapour: float, viscosity_vapour: float, conductivity_vapour: float,
    specific_heat_vapour: float, heat_of_vaporisation: float, surface_tension: float, wall_superheat: float,
    gravity: float,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of film boiling on a horizontal wall near the minimum, 0.425 with the capillary length."""
    latent = heat_of_vaporisation + 0.5 * specific_heat_vapour * wall_superheat
    size = capillary_length(density_liquid, density_vapour, surface_tension, gravity)
    return 0.425 * _blanket(
        density_liquid, density_vapour, viscosity_vapour, conductivity_vapour, latent, wall_superheat, gravity, size
    )


@_method("Bromley with radiation", "mean coefficient", (), 0.05, "bromley-1950", "vapour film", **_FILM)
def with_radiation(film_coefficient: float, radiation_coefficient: float) -> float:
    """Coefficient [W/(m2 K)] of film and radiation, hc + hr(3/4 + 1/4 (hr/hc)/(2.62 + hr/hc)): hr thickens the film."""
    ratio = radiation_coefficient / film_coefficient
    return film_coefficient + radiation_coefficient * (0.75 + 0.25 * ratio / (2.62 + ratio))


@_method("Zuber-Berenson minimum", "heat flux", (), 0.5, "zuber-1958;berenson-1961", "saturation", boiling=("minimum",))
def minimum(
    density_liquid: float, density_vapour: float, heat_of_vaporisation: float, surface_tension: float, gravity: float
) -> float:
    """Lowest heat flux [W/m2] of film boiling on a horizontal wall, 0.09 ρv hfg (σg(ρl − ρv)/(ρl + ρv)²)^1/4."""
    wave = surface_tension * gravity * lift(density_liquid, density_vapour) / (density_liquid + density_vapour) ** 2
    return 0.09 * density_vapour * heat_of_vaporisation * wave**0.25
