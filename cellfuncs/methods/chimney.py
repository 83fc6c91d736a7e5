"""Free convection between upright plates that are open below and above, and in arrays of fins.

The Elenbaas number is Ra on the spacing times spacing over height; with a uniform flux q it is
gβqS⁴/(kνα)·S/L, q on each heated plate. The reference difference is wall minus inlet, properties at their film.
"""

from typing import Any

from cellfuncs.methods.algebra import exp, larger
from cellfuncs.methods.base import Range, method

_BOTH = {"surface": ("channel",), "wall": ("temperature",), "heated": ("both",)}
_ONE = {"surface": ("channel",), "wall": ("temperature",), "heated": ("one",)}
_BOTH_FLUX = {"surface": ("channel",), "wall": ("flux",), "heated": ("both",)}
_ONE_FLUX = {"surface": ("channel",), "wall": ("flux",), "heated": ("one",)}
_SPACING = "spacing of the plates"
_RANGE = (Range("Ra S/L", 0.1, 1e5),)
_FLUX_RANGE = (Range("Ra* S/L", 0.1, 1e5),)


def _isothermal(elenbaas: Any, narrow: float) -> Any:
    """The developed channel and the single plate as one: Nu² is the harmonic sum of El²/c and √El/2.873."""
    return (narrow / elenbaas**2 + 2.873 * elenbaas**-0.5) ** -0.5


def _uniform_flux(elenbaas: Any, narrow: float, wide: float) -> Any:
    """The same with a uniform flux: El/c and El^2/5/c."""
    return (narrow / elenbaas + wide * elenbaas**-0.4) ** -0.5


@method(
    "Bar-Cohen and Rohsenow",
    gives="mean Nu",
    ranges=_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where=_BOTH,
    length=_SPACING,
)
def channel(elenbaas: Any) -> Any:
    """Mean Nu between two plates at one temperature, open at both ends; Nu on the spacing."""
    return _isothermal(elenbaas, 576.0)


@method(
    "Bar-Cohen and Rohsenow one-sided",
    gives="mean Nu",
    ranges=_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where=_ONE,
    length=_SPACING,
)
def channel_one_sided(elenbaas: Any) -> Any:
    """Mean Nu between a plate at one temperature and an insulated one, open at both ends."""
    return _isothermal(elenbaas, 144.0)


@method(
    "Bar-Cohen and Rohsenow flux",
    gives="local Nu",
    ranges=_FLUX_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where=_BOTH_FLUX,
    length=_SPACING,
)
def channel_flux_top(elenbaas_flux: Any) -> Any:
    """Local Nu at the top, where it is hottest, between two plates with a uniform flux."""
    return _uniform_flux(elenbaas_flux, 48.0, 2.51)


@method(
    "Bar-Cohen and Rohsenow flux, one-sided",
    gives="local Nu",
    ranges=_FLUX_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where=_ONE_FLUX,
    length=_SPACING,
)
def channel_flux_top_one_sided(elenbaas_flux: Any) -> Any:
    """Local Nu at the top, where it is hottest, between a plate with a uniform flux and an insulated one."""
    return _uniform_flux(elenbaas_flux, 24.0, 2.51)


@method(
    "Bar-Cohen and Rohsenow flux, half height",
    gives="mean Nu",
    ranges=_FLUX_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where=_BOTH_FLUX,
    length=_SPACING,
)
def channel_flux(elenbaas_flux: Any) -> Any:
    """Mean Nu, on the difference at half height, between two plates with a uniform flux."""
    return _uniform_flux(elenbaas_flux, 12.0, 1.88)


@method(
    "Bar-Cohen and Rohsenow flux, half height, one-sided",
    gives="mean Nu",
    ranges=_FLUX_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where=_ONE_FLUX,
    length=_SPACING,
)
def channel_flux_one_sided(elenbaas_flux: Any) -> Any:
    """Mean Nu, on the difference at half height, between a plate with a uniform flux and an insulated one."""
    return _uniform_flux(elenbaas_flux, 6.0, 1.88)


@method(
    "Elenbaas",
    gives="mean Nu",
    ranges=_RANGE,
    scatter=0.1,
    property_temperature="film",
    source="elenbaas-1942",
    flows=("free",),
    where=_BOTH,
    length=_SPACING,
)
def channel_measured(elenbaas: Any) -> Any:
    """Mean Nu between two square plates at one temperature in air, measured."""
    return elenbaas / 24.0 * (1.0 - exp(-35.0 / elenbaas)) ** 0.75


@method(
    "best spacing",
    gives="factor",
    ranges=(Range("Ra", 1e2, 1e12),),
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where={"surface": ("channel",), "wall": ("temperature",)},
    length="height of the plates",
)
def best_spacing(rayleigh: Any, heated: str = "both") -> Any:
    """Spacing over height of upright plates or fins at one temperature that carries most heat from a given volume.

    Ra on the height of the plates. ``heated``: both faces of a channel, or one.
    """
    return (2.154 if heated == "one" else 2.714) * rayleigh**-0.25


@method(
    "best spacing, flux",
    gives="factor",
    ranges=(Range("Ra*", 1e2, 1e13),),
    scatter=0.1,
    property_temperature="film",
    source="barcohen-rohsenow-1984",
    flows=("free",),
    where={"surface": ("channel",), "wall": ("flux",)},
    length="height of the plates",
)
def best_spacing_flux(rayleigh_flux: Any, heated: str = "both") -> Any:
    """Spacing over height of upright plates with a uniform flux that lets a given volume give off most heat.

    Ra* on the height of the plates. ``heated``: both faces of a channel, or one.
    """
    return (1.169 if heated == "one" else 1.472) * rayleigh_flux**-0.2


@method(
    "Jones-Smith fins",
    gives="mean Nu",
    ranges=(Range("Ra", 200.0, 6e5), Range("Pr", 0.6, 1.0)),
    scatter=0.25,
    property_temperature="film",
    source="jones-smith-1970",
    flows=("free",),
    where={"surface": ("fins on a level base",)},
    length=_SPACING,
)
def fins_on_level_base(rayleigh: Any) -> Any:
    """Mean Nu of upright rectangular fins on a level base that looks up, in air; Ra and Nu on the clear spacing."""
    return 6.7e-4 * rayleigh * (1.0 - exp(-((7460.0 / larger(rayleigh, 1e-9)) ** 0.44))) ** 1.7
