"""Heat transfer between laminar and turbulent duct flow, where a calculation is least sure."""

from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR_UP_TO, LENGTH
from cellfuncs.methods.duct_turbulent import STRAIGHT, THIRD, TURBULENT_FROM, gnielinski
from cellfuncs.methods.friction import konakov


@method(
    "transition blend",
    gives="mean Nu",
    ranges=(Range("Re", LAMINAR_UP_TO, TURBULENT_FROM), Range("Pr", 0.6, 1000.0), Range("L/D", low=1.0)),
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
    share = (reynolds - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)
    return (1.0 - share) * laminar + share * turbulent
