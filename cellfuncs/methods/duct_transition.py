"""Heat transfer and friction between laminar and turbulent duct flow, where a calculation is least sure.

Both are drawn straight in Re between the laminar value at 2300 and the turbulent one at 4000, so that they join both
regimes without a jump (Gnielinski 2013 for Nu of tubes; for other sections and for friction common practice).
"""

from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR_UP_TO, LENGTH, developed_value, friction_times_re
from cellfuncs.methods.duct_series import graetz_flux, graetz_mean
from cellfuncs.methods.duct_turbulent import STRAIGHT, THIRD, TURBULENT_FROM, gnielinski, petukhov_roizen
from cellfuncs.methods.friction import ROUGHNESS, colebrook_white, konakov

TRANSITION = Range("Re", LAMINAR_UP_TO, TURBULENT_FROM)


def _between(reynolds: float, laminar: float, turbulent: float) -> float:
    share = (reynolds - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)
    return (1.0 - share) * laminar + share * turbulent


@method(
    "transition blend",
    gives="mean Nu",
    ranges=(TRANSITION, Range("Pr", 0.6, 1000.0), Range("L/D", low=1.0)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="gnielinski-2013",
    flows=("duct",),
    where={"section": ("tube",), **STRAIGHT},
    length=LENGTH,
)
def transition_blend(reynolds: float, prandtl: float, length_over_diameter: float, wall: str) -> float:
    """Mean Nu of a tube between Re 2300 and 4000, straight in Re between laminar and turbulent (Gnielinski 2013)."""
    graetz = (LAMINAR_UP_TO * prandtl / length_over_diameter) ** THIRD
    if wall == "flux":
        laminar = (4.364**3 + 0.6**3 + (1.953 * graetz - 0.6) ** 3) ** THIRD
    else:
        laminar = (3.66**3 + 0.7**3 + (1.615 * graetz - 0.7) ** 3) ** THIRD
    turbulent = gnielinski(TURBULENT_FROM, prandtl, konakov(TURBULENT_FROM), 1.0 / length_over_diameter)
    return _between(reynolds, laminar, turbulent)


@method(
    "transition blend, other sections",
    gives="mean Nu",
    ranges=(TRANSITION, Range("Pr", 0.6, 1000.0), Range("L/D", low=1.0)),
    scatter=0.25,
    property_temperature="mean bulk",
    source="gnielinski-2013;shah-london-1978;petukhov-roizen-1964",
    flows=("duct",),
    where={"section": ("plates", "rectangle", "annulus"), **STRAIGHT},
    length=LENGTH,
    warning="common practice: Gnielinski's blend was measured in tubes",
)
def transition_other(
    reynolds: float,
    prandtl: float,
    length_over_diameter: float,
    section: str,
    wall: str,
    heated: str,
    ratio: float = 1.0,
) -> float:
    """Nu between Re 2300 and 4000 of plates (thermal entry included), rectangle and annulus, straight in Re."""
    if section == "plates":
        x_star = length_over_diameter / (LAMINAR_UP_TO * prandtl)
        laminar = (graetz_flux if wall == "flux" else graetz_mean)(x_star, section, heated)
    else:
        laminar = developed_value(section, wall, heated, ratio)
    turbulent = gnielinski(TURBULENT_FROM, prandtl, konakov(TURBULENT_FROM), 1.0 / length_over_diameter)
    if section == "annulus":
        turbulent = turbulent * petukhov_roizen(ratio, heated)
    return _between(reynolds, laminar, turbulent)


@method(
    "transition friction",
    gives="Darcy friction factor",
    ranges=(TRANSITION, ROUGHNESS),
    scatter=0.3,
    property_temperature="mean bulk",
    source="gnielinski-2013;colebrook-1939;shah-london-1978",
    flows=("duct",),
    where={"section": ("tube", "plates", "rectangle", "annulus", "ellipse"), **STRAIGHT},
    length=LENGTH,
    warning="common practice: between Re 2300 and 4000 friction follows the inlet more than any formula",
)
def transition_friction(reynolds: float, section: str, relative_roughness: float = 0.0, ratio: float = 1.0) -> float:
    """f between Re 2300 and 4000, straight between the laminar value and Colebrook-White's at 4000."""
    laminar = friction_times_re(section, ratio) / LAMINAR_UP_TO
    return _between(reynolds, laminar, colebrook_white(TURBULENT_FROM, relative_roughness))
