"""Films that fall down a wall: heat transfer and thickness. film Re = 4Γ/μ, Γ the flow per width.

Nu of the developed laminar film is on its thickness; elsewhere on (ν²/g)^1/3, which does not ask for the thickness.
The heat goes from the wall into the film (heated), or through it to its surface (evaporating).

Scatters are those that authors or handbooks give, mostly from memory.
"""

from typing import Any

from cellfuncs.methods.algebra import larger, where
from cellfuncs.methods.base import Range, follows, method

_LENGTH = "(ν²/g)^1/3"
_DRY_OUT = (
    "A film breaks and leaves dry patches at small flow or large flux, and gas rising against it floods the channel; "
    "check wetting and flooding, and leave the design to a licensed engineer."
)


@method(
    "laminar film",
    gives="mean Nu",
    ranges=(Range("film Re", high=1800.0),),
    scatter=0.2,
    property_temperature="mean bulk",
    source="nusselt-1923",
    flows=("falling film",),
    where={"film": ("heated",)},
    length="thickness of the film",
)
def laminar(wall: str = "temperature") -> float:
    """Nu on the thickness of a developed laminar falling film: 1.88, or 35/17 for a flux; waves add up to 20 %."""
    return 35.0 / 17.0 if wall == "flux" else 1.88


@method(
    "Schnabel-Palen film",
    gives="mean Nu",
    ranges=(Range("film Re", 4.0, 4e4), Range("Pr", 2.0, 400.0)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="wilke-1962;vdi-heat-atlas-2010",
    flows=("falling film",),
    where={"film": ("heated",)},
    length=_LENGTH,
)
def heating(film_reynolds: float, prandtl: float, wall: str = "temperature") -> float:
    """Nu of a developed film that is heated, laminar to turbulent; ranges and scatter from memory.

    The largest of 1.30 Re^−1/3 (flux 1.43), 0.0425 Re^0.2 Pr^0.344 and 0.0136 Re^0.4 Pr^0.344, Re = Γ/μ.
    """
    per_width = 0.25 * film_reynolds
    still = (1.43 if wall == "flux" else 1.30) * per_width ** (-1.0 / 3.0)
    power = prandtl**0.344
    return larger(larger(still, 0.0425 * per_width**0.2 * power), 0.0136 * per_width**0.4 * power)


@method(
    "Nusselt evaporating film",
    gives="local Nu",
    ranges=(Range("film Re", high=30.0),),
    scatter=0.1,
    property_temperature="saturation",
    source="nusselt-1916",
    flows=("falling film",),
    where={"film": ("evaporating",)},
    length=_LENGTH,
    warning=_DRY_OUT,
)
def smooth(film_reynolds: float) -> float:
    """Local Nu of a smooth laminar film that evaporates or condenses at its surface, (4/3)^1/3 film Re^−1/3."""
    return 1.1006424163 * film_reynolds ** (-1.0 / 3.0)


@method(
    "Chun-Seban",
    gives="local Nu",
    ranges=(Range("film Re", 30.0, 2e4), Range("Pr", 1.7, 5.7)),
    scatter=0.1,
    property_temperature="saturation",
    source="chun-seban-1971",
    flows=("falling film",),
    where={"film": ("evaporating",)},
    length=_LENGTH,
    warning=_DRY_OUT,
)
def chun_seban(film_reynolds: float, prandtl: float) -> float:
    """Local Nu of an evaporating water film, 0.822 Re^−0.22 with waves, 0.0038 Re^0.4 Pr^0.65 from Re 5800 Pr^−1.06.

    Scatter from memory.
    """
    waves = 0.822 * film_reynolds**-0.22
    turbulent = 0.0038 * film_reynolds**0.4 * prandtl**0.65
    return where(film_reynolds < 5800.0 * prandtl**-1.06, waves, turbulent)


# -- thickness -------------------------------------------------------------------------------------------


@method(
    "Nusselt film thickness",
    gives="length",
    ranges=(Range("film Re", high=1600.0),),
    scatter=0.1,
    property_temperature="mean bulk",
    source="nusselt-1916",
    flows=("falling film",),
)
def thickness(film_flow: float, density: float, viscosity: float, gravity: float) -> float:
    """Thickness [m] of a laminar falling film, (3μΓ/(ρ²g))^1/3, Γ in kg/(m s)."""
    return (3.0 * viscosity * film_flow / (density**2 * gravity)) ** (1.0 / 3.0)


@method(
    "Brauer film thickness",
    gives="length",
    ranges=(Range("film Re", 1600.0, 2e4),),
    scatter=0.1,
    property_temperature="mean bulk",
    source="brauer-1956",
    flows=("falling film",),
)
def turbulent_thickness(film_flow: float, density: float, viscosity: float, gravity: float) -> float:
    """Thickness [m] of a turbulent falling film, 0.302 (3ν²/g)^1/3 (Γ/μ)^8/15; from memory."""
    scale = (3.0 * (viscosity / density) ** 2 / gravity) ** (1.0 / 3.0)
    return 0.302 * scale * (film_flow / viscosity) ** (8.0 / 15.0)


@follows("film Re")
def film_reynolds(film_flow: Any, viscosity: Any) -> Any:
    """4Γ/μ."""
    return 4.0 * film_flow / viscosity
