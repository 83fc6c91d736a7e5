"""Film condensation of a pure vapour at rest on walls and tubes, and of flowing vapour inside tubes.

The driving difference is saturation minus wall. Properties of the condensate at film temperature, density of the vapour
and heat of vaporisation at saturation. Where the specific heat of the condensate is given, the heat of vaporisation
carries Rohsenow's addition 0.68 cp ΔT (in tubes 3/8). P = kΔTH/(μ hfg ℓ) is the height in terms of the film, with
ℓ = (μ²/(ρl(ρl − ρv)g))^1/3; the film has waves from P 15.8 (film Re 30) and is turbulent from 2530 (1800).

Scatters are those that authors or handbooks give, mostly from memory.
"""

from typing import Any

from cellfuncs.errors import NumberRefused
from cellfuncs.methods.base import Range, follows, method

_FLOWS = ("condensation",)
_WARNING = (
    "Condensation: a little air or other gas that does not condense cuts the coefficient manyfold, and vapour rising "
    "against the film can flood a tube; vent, check flooding, and have pressure equipment designed under local codes."
)
WAVES, TURBULENT = 15.8, 2530.0


def _method(
    name: str, shape: str, ranges: tuple[Range, ...], scatter: float, source: str, gives: str = "mean coefficient",
    temperature: str = "film", length: str = "",
) -> Any:  # fmt: skip
    return method(
        name, gives=gives, ranges=ranges, scatter=scatter, property_temperature=temperature, source=source,
        flows=_FLOWS, where={"condenser": (shape,)}, length=length, warning=_WARNING,
    )  # fmt: skip


def _latent(heat_of_vaporisation: Any, specific_heat: Any, subcooling: Any, part: float = 0.68) -> Any:
    return heat_of_vaporisation + part * specific_heat * subcooling


def lift(density_liquid: Any, density_vapour: Any) -> Any:
    """ρl − ρv [kg/m3]; refused where the vapour is not the lighter one."""
    difference = density_liquid - density_vapour
    if not (difference > 0 if isinstance(difference, (float, int)) else (difference > 0).all()):
        raise NumberRefused("the density of the vapour is not below that of the liquid")
    return difference


def film_length(density_liquid: Any, density_vapour: Any, viscosity_liquid: Any, gravity: Any) -> Any:
    """ℓ = (μ²/(ρl(ρl − ρv)g))^1/3 [m]."""
    return (viscosity_liquid**2 / (density_liquid * lift(density_liquid, density_vapour) * gravity)) ** (1.0 / 3.0)


@follows("P")
def condensation_number(
    density_liquid: Any, density_vapour: Any, viscosity_liquid: Any, conductivity_liquid: Any,
    heat_of_vaporisation: Any, wall_subcooling: Any, gravity: Any, height_of_wall: Any,
) -> Any:  # fmt: skip
    """P = kΔTH/(μ hfg ℓ)."""
    scale = film_length(density_liquid, density_vapour, viscosity_liquid, gravity)
    heat = conductivity_liquid * wall_subcooling * height_of_wall
    return heat / (viscosity_liquid * heat_of_vaporisation * scale)


@follows("Pr")
def liquid_prandtl(specific_heat_liquid: Any, viscosity_liquid: Any, conductivity_liquid: Any) -> Any:
    """Prandtl number of the liquid."""
    return specific_heat_liquid * viscosity_liquid / conductivity_liquid


def _still(
    density_liquid: Any, density_vapour: Any, viscosity_liquid: Any, conductivity_liquid: Any, latent: Any,
    subcooling: Any, gravity: Any, size: Any,
) -> Any:  # fmt: skip
    """(ρl(ρl − ρv)g k³hfg/(μ ΔT size))^1/4 [W/(m2 K)]: Nusselt's film on any body but for a number."""
    weight = density_liquid * lift(density_liquid, density_vapour) * gravity
    return (weight * conductivity_liquid**3 * latent / (viscosity_liquid * subcooling * size)) ** 0.25


# -- vertical wall -----------------------------------------------------------------------------------------


@_method(
    "Nusselt condensation, wall", "vertical wall", (Range("P", high=WAVES),), 0.1, "nusselt-1916;rohsenow-1956",
)  # fmt: skip
def wall(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    heat_of_vaporisation: float, wall_subcooling: float, gravity: float, height_of_wall: float,
    specific_heat_liquid: float = 0.0,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of a smooth laminar film on a vertical wall, 0.943 (ρl(ρl−ρv)g k³hfg/(μ ΔT H))^1/4."""
    latent = _latent(heat_of_vaporisation, specific_heat_liquid, wall_subcooling)
    return 0.9428090415820634 * _still(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, latent, wall_subcooling, gravity,
        height_of_wall,
    )  # fmt: skip


@_method(
    "McAdams condensation, wall", "vertical wall", (Range("P", WAVES, TURBULENT),), 0.2, "mcadams-1954-film",
)  # fmt: skip
def wall_with_waves(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    heat_of_vaporisation: float, wall_subcooling: float, gravity: float, height_of_wall: float,
    specific_heat_liquid: float = 0.0,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of a laminar film with waves, 1.13 for 0.943 in Nusselt's equation (a fifth more)."""
    smooth = wall(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, heat_of_vaporisation, wall_subcooling,
        gravity, height_of_wall, specific_heat_liquid,
    )  # fmt: skip
    return 1.13 / 0.943 * smooth


def _through_film(number: Any, reynolds: Any, conductivity: Any, scale: Any) -> Any:
    """h where the film's Re at the foot is known: Nu = Re/(4P), on ℓ."""
    return reynolds / (4.0 * number) * conductivity / scale


@_method(
    "Kutateladze condensation, wall", "vertical wall", (Range("P", WAVES, TURBULENT),), 0.15, "kutateladze-1963",
)  # fmt: skip
def kutateladze(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    heat_of_vaporisation: float, wall_subcooling: float, gravity: float, height_of_wall: float,
    specific_heat_liquid: float = 0.0,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of a laminar film with waves, from Nu = Re/(1.08 Re^1.22 − 5.2) solved for Re = 4P·Nu.

    Scatter from memory.
    """
    latent = _latent(heat_of_vaporisation, specific_heat_liquid, wall_subcooling)
    number = condensation_number(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, latent, wall_subcooling, gravity,
        height_of_wall,
    )  # fmt: skip
    reynolds = ((4.0 * number + 5.2) / 1.08) ** (1.0 / 1.22)
    scale = film_length(density_liquid, density_vapour, viscosity_liquid, gravity)
    return _through_film(number, reynolds, conductivity_liquid, scale)


@_method(
    "Labuntsov condensation, wall", "vertical wall", (Range("P", TURBULENT, 1e6), Range("Pr", 1.0, 10.0)), 0.2,
    "labuntsov-1957",
)  # fmt: skip
def labuntsov(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    specific_heat_liquid: float, heat_of_vaporisation: float, wall_subcooling: float, gravity: float,
    height_of_wall: float,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] of a film turbulent at its foot, from Nu = Re/(8750 + 58 Pr^−1/2(Re^3/4 − 253)), Re = 4P·Nu.

    Ranges beyond the turning point and scatter from memory.
    """
    latent = _latent(heat_of_vaporisation, specific_heat_liquid, wall_subcooling)
    number = condensation_number(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, latent, wall_subcooling, gravity,
        height_of_wall,
    )  # fmt: skip
    prandtl = liquid_prandtl(specific_heat_liquid, viscosity_liquid, conductivity_liquid)
    reynolds = ((4.0 * number - 8750.0) * prandtl**0.5 / 58.0 + 253.0) ** (4.0 / 3.0)
    scale = film_length(density_liquid, density_vapour, viscosity_liquid, gravity)
    return _through_film(number, reynolds, conductivity_liquid, scale)


_FILM = {"gives": "mean Nu", "length": "ℓ = (μ²/(ρl(ρl − ρv)g))^1/3"}


@_method("Nusselt condensate film", "vertical wall", (Range("film Re", high=30.0),), 0.1, "nusselt-1916", **_FILM)
def film_smooth(film_reynolds: float) -> float:
    """Mean Nu of a smooth laminar condensate by the film Re at its foot, 1.47 Re^−1/3."""
    return 1.4675232217 * film_reynolds ** (-1.0 / 3.0)


@_method(
    "Kutateladze condensate film", "vertical wall", (Range("film Re", 30.0, 1800.0),), 0.15, "kutateladze-1963", **_FILM
)
def film_with_waves(film_reynolds: float) -> float:
    """Mean Nu of a laminar condensate with waves by the film Re at its foot, Re/(1.08 Re^1.22 − 5.2)."""
    return film_reynolds / (1.08 * film_reynolds**1.22 - 5.2)


@_method(
    "Labuntsov condensate film", "vertical wall", (Range("film Re", 1800.0, 1e5), Range("Pr", 1.0, 10.0)), 0.2,
    "labuntsov-1957", **_FILM,
)  # fmt: skip
def film_turbulent(film_reynolds: float, prandtl: float) -> float:
    """Mean Nu of a turbulent condensate by the film Re at its foot, Re/(8750 + 58 Pr^−1/2(Re^3/4 − 253))."""
    return film_reynolds / (8750.0 + 58.0 * prandtl**-0.5 * (film_reynolds**0.75 - 253.0))


# -- horizontal tubes and spheres ----------------------------------------------------------------------------


@_method("Nusselt condensation, tube", "horizontal tube", (), 0.1, "nusselt-1916;dhir-lienhard-1971")
def tube(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    heat_of_vaporisation: float, wall_subcooling: float, gravity: float, diameter: float,
    specific_heat_liquid: float = 0.0,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] outside one horizontal tube, 0.729 (ρl(ρl−ρv)g k³hfg/(μ ΔT D))^1/4."""
    latent = _latent(heat_of_vaporisation, specific_heat_liquid, wall_subcooling)
    return 0.729 * _still(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, latent, wall_subcooling, gravity,
        diameter,
    )  # fmt: skip


@_method("Dhir-Lienhard condensation, sphere", "sphere", (), 0.1, "dhir-lienhard-1971")
def sphere(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    heat_of_vaporisation: float, wall_subcooling: float, gravity: float, diameter: float,
    specific_heat_liquid: float = 0.0,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] outside a sphere, 0.828 (ρl(ρl−ρv)g k³hfg/(μ ΔT D))^1/4."""
    latent = _latent(heat_of_vaporisation, specific_heat_liquid, wall_subcooling)
    return 0.828 * _still(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, latent, wall_subcooling, gravity,
        diameter,
    )  # fmt: skip


@_method("Nusselt tube bundle", "tube bundle", (Range("rows", 1.0, 40.0),), 0.25, "nusselt-1916", gives="factor")
def bundle_nusselt(rows: float) -> float:
    """Mean h of a column of horizontal tubes over that of its top tube, n^−1/4, if each sheds a sheet on the next."""
    return rows**-0.25


@_method("Kern tube bundle", "tube bundle", (Range("rows", 1.0, 40.0),), 0.2, "kern-1958", gives="factor")
def bundle_kern(rows: float) -> float:
    """Mean h of a column of horizontal tubes over that of its top tube, n^−1/6, as the drops splash."""
    return rows ** (-1.0 / 6.0)


# -- inside horizontal tubes -----------------------------------------------------------------------------------


@_method("Chato", "inside a horizontal tube", (Range("Rev", high=3.5e4),), 0.2, "chato-1962")
def chato(
    density_liquid: float, density_vapour: float, viscosity_liquid: float, conductivity_liquid: float,
    heat_of_vaporisation: float, wall_subcooling: float, gravity: float, diameter: float,
    specific_heat_liquid: float = 0.0,
) -> float:  # fmt: skip
    """Mean h [W/(m2 K)] inside a horizontal tube at low vapour speed, 0.555 (ρl(ρl−ρv)g k³hfg/(μ ΔT D))^1/4.

    Scatter from memory.
    """
    latent = _latent(heat_of_vaporisation, specific_heat_liquid, wall_subcooling, 0.375)
    return 0.555 * _still(
        density_liquid, density_vapour, viscosity_liquid, conductivity_liquid, latent, wall_subcooling, gravity,
        diameter,
    )  # fmt: skip


_SHAH = (Range("ReL", 350.0, 6.3e4), Range("Pr", 1.0, 13.0), Range("p/pc", 0.002, 0.44))
_INSIDE = {"temperature": "saturation", "length": "diameter"}


def _all_liquid(liquid_reynolds: Any, prandtl: Any) -> Any:
    return 0.023 * liquid_reynolds**0.8 * prandtl**0.4


@_method(
    "Shah 1979 condensation", "inside a tube", (*_SHAH, Range("x", 0.0, 1.0)), 0.25, "shah-1979", gives="local Nu",
    **_INSIDE,
)  # fmt: skip
def shah(liquid_reynolds: float, prandtl: float, reduced_pressure: float, quality: float) -> float:
    """Local Nu inside a tube, all flow as liquid × ((1−x)^0.8 + 3.8 x^0.76 (1−x)^0.04/(p/pc)^0.38).

    Range from memory."""
    left = 1.0 - quality
    enhanced = 3.8 * quality**0.76 * left**0.04 / reduced_pressure**0.38
    return _all_liquid(liquid_reynolds, prandtl) * (left**0.8 + enhanced)


@_method("Shah 1979 condensation, whole tube", "inside a tube", _SHAH, 0.25, "shah-1979", gives="mean Nu", **_INSIDE)
def shah_mean(liquid_reynolds: float, prandtl: float, reduced_pressure: float) -> float:
    """Mean Nu where all vapour condenses evenly along a tube, all flow as liquid × (0.55 + 2.09/(p/pc)^0.38)."""
    return _all_liquid(liquid_reynolds, prandtl) * (0.55 + 2.09 / reduced_pressure**0.38)


@_method(
    "Cavallini-Zecchin", "inside a tube",
    (Range("ReL", 1200.0, 1e5), Range("Pr", 0.8, 20.0), Range("x", 0.1, 0.9), Range("ρl/ρv", 10.0, 2000.0)), 0.3,
    "cavallini-zecchin-1974", gives="local Nu", **_INSIDE,
)  # fmt: skip
def cavallini_zecchin(liquid_reynolds: float, prandtl: float, quality: float, density_ratio: float) -> float:
    """Local Nu of annular flow inside a tube, 0.05 (ReL(1 − x + x√(ρl/ρv)))^0.8 Pr^1/3; range, scatter from memory."""
    equivalent = liquid_reynolds * (1.0 - quality + quality * density_ratio**0.5)
    return 0.05 * equivalent**0.8 * prandtl ** (1.0 / 3.0)
