"""Heat transfer and friction of a duct at any Re in one call, and the names that cases and terms use.

Methods stand in ``duct_laminar``, ``duct_series``, ``duct_entry``, ``duct_simultaneous``, ``duct_turbulent``,
``duct_transition``, ``duct_rough``, ``liquid_metal``, ``corrections``, ``friction``, ``friction_laminar``, ``slip``,
``coil``, ``coil_friction`` and ``minor_losses``. f is Darcy's; Nu is on the hydraulic diameter and bulk temperature.
"""

from cellfuncs.methods import (  # noqa: F401
    coil,
    coil_friction,
    corrections,
    duct_rough,
    duct_series,
    duct_simultaneous,
    duct_transition,
    minor_losses,
    slip,
)
from cellfuncs.methods.base import METHODS
from cellfuncs.methods.duct_entry import flux_entry, hausen_entry, plates_entry
from cellfuncs.methods.duct_laminar import (
    LAMINAR_UP_TO,
    developed_laminar,
    developed_value,
    friction_times_re,
)
from cellfuncs.methods.duct_turbulent import TURBULENT_FROM, gnielinski, petukhov_roizen
from cellfuncs.methods.friction import haaland as rough_friction
from cellfuncs.methods.friction import smooth_friction
from cellfuncs.methods.friction_laminar import laminar_friction
from cellfuncs.methods.liquid_metal import LIQUID_METAL_PRANDTL, lyon, seban_shimazaki

__all__ = [
    "LAMINAR_UP_TO",
    "LIQUID_METAL_PRANDTL",
    "TURBULENT_FROM",
    "developed_laminar",
    "developed_value",
    "flux_entry",
    "friction_times_re",
    "gnielinski",
    "hausen_entry",
    "laminar_friction",
    "laminar_nusselt",
    "nusselt_and_friction",
    "plates_entry",
    "rough_friction",
    "smooth_friction",
]


def laminar_nusselt(
    x_star: float, section: str, wall: str, heated: str, reynolds: float, allow: bool, ratio: float = 1.0
) -> tuple[float, str, str]:
    """Nu of a laminar duct with the method chosen and what lies outside its range."""
    if heated != "both" or section in ("rectangle", "annulus") or x_star >= 10.0:
        name = "developed laminar"
        outside = METHODS[name].check(allow, **{"Re": reynolds, "x*": x_star})
        return developed_value(section, wall, heated, ratio), name, outside
    if wall == "flux":
        name, nusselt = "flux entry", flux_entry(x_star, section)
    elif section == "plates":
        name, nusselt = "plates entry", plates_entry(x_star)
    else:
        name, nusselt = "Hausen entry", hausen_entry(x_star)
    return nusselt, name, METHODS[name].check(allow, Re=reynolds)


def _turbulent(
    reynolds: float,
    prandtl: float,
    friction: float,
    short: float,
    wall: str,
    factor: float,
    allow: bool,
    check_re: bool,
) -> tuple[float, str, str]:
    if prandtl <= LIQUID_METAL_PRANDTL:
        peclet = reynolds * prandtl
        name, law = ("Lyon", lyon) if wall == "flux" else ("Seban-Shimazaki", seban_shimazaki)
        return law(peclet), name, METHODS[name].check(allow, Pe=peclet, Pr=prandtl)
    more = {"Re": reynolds} if check_re else {}
    if short:
        more["L/D"] = 1.0 / short
    outside = METHODS["Gnielinski"].check(allow, Pr=prandtl, **more)
    return factor * gnielinski(reynolds, prandtl, friction, short), "Gnielinski", outside


def nusselt_and_friction(
    reynolds: float,
    prandtl: float,
    x_star: float,
    section: str,
    wall: str,
    heated: str,
    allow: bool = False,
    ratio: float = 1.0,
) -> tuple[float, float, str, str]:
    """Nu, Darcy f, the method's name and what lies outside its range, for any Re.

    Between Re 2300 and 4000 both are blended linearly in Re (Gnielinski 2013).
    Nu is the mean over the length at a prescribed wall temperature, the local one at the end for a
    prescribed flux.
    """
    if reynolds <= LAMINAR_UP_TO:
        nusselt, name, outside = laminar_nusselt(x_star, section, wall, heated, reynolds, allow, ratio)
        return nusselt, laminar_friction(reynolds, section, ratio), name, outside
    length_ratio = x_star * reynolds * prandtl
    short = 1.0 / length_ratio if wall == "temperature" else 0.0
    factor = petukhov_roizen(ratio, heated) if section == "annulus" else 1.0
    if reynolds >= TURBULENT_FROM:
        friction = smooth_friction(reynolds)
        nusselt, name, outside = _turbulent(reynolds, prandtl, friction, short, wall, factor, allow, True)
        return nusselt, friction, name, outside
    share = (reynolds - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)
    x_laminar = length_ratio / (LAMINAR_UP_TO * prandtl)
    low, _, outside_low = laminar_nusselt(x_laminar, section, wall, heated, LAMINAR_UP_TO, allow, ratio)
    at_4000 = smooth_friction(TURBULENT_FROM)
    high, _, outside = _turbulent(TURBULENT_FROM, prandtl, at_4000, short, wall, factor, allow, False)
    friction = (1.0 - share) * laminar_friction(LAMINAR_UP_TO, section, ratio) + share * at_4000
    nusselt = (1.0 - share) * low + share * high
    return nusselt, friction, "transition blend", "; ".join(filter(None, (outside, outside_low)))
