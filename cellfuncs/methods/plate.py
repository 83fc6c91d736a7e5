"""Heat transfer at a flat plate in a parallel stream: laminar, turbulent, both in turn, unheated start.

Re and Nu are on the plate's length for a mean, on the distance from the leading edge for a local value. Properties are
taken at film temperature where nothing else is said. A ``regime`` of a case is laminar (transition behind the plate's
end), mixed (transition on the plate) or turbulent (tripped at the leading edge).

Scatters are those that authors or handbooks give, mostly from memory.
"""

from typing import Any

from cellfuncs.methods.algebra import larger, log10, smaller, sqrt, where
from cellfuncs.methods.base import Range, method

TRANSITION = 5e5
_LAMINAR_RE = Range("Re", 100.0, 3e6)  # to the latest transition seen in a quiet stream
_TURBULENT = (Range("Re", 5e5, 1e8), Range("Pr", 0.6, 60.0))
_TEMPERATURE = {"wall": ("temperature",)}
_FLUX = {"wall": ("flux",)}


def _method(name: str, gives: str, ranges: tuple[Range, ...], scatter: float, source: str, **more: Any) -> Any:
    length = "length" if gives == "mean Nu" else "distance from the leading edge"
    given = {"property_temperature": "film", "flows": ("plate",), "length": length} | more
    return method(name, gives=gives, ranges=ranges, scatter=scatter, source=source, **given)


# -- laminar -------------------------------------------------------------------------------------------


@_method(
    "plate laminar", "mean Nu", (_LAMINAR_RE, Range("Pr", low=0.6)), 0.03, "pohlhausen-1921",
    where=_TEMPERATURE | {"regime": ("laminar",)},
)  # fmt: skip
def laminar(reynolds: float, prandtl: float) -> float:
    """Mean Nu at uniform wall temperature, 0.664 Re^1/2 Pr^1/3."""
    return 0.664 * sqrt(reynolds) * prandtl ** (1.0 / 3.0)


@_method(
    "plate laminar, local", "local Nu", (_LAMINAR_RE, Range("Pr", low=0.6)), 0.03, "pohlhausen-1921",
    where=_TEMPERATURE | {"regime": ("laminar",)},
)  # fmt: skip
def laminar_local(reynolds: float, prandtl: float) -> float:
    """Local Nu at uniform wall temperature, 0.332 Re^1/2 Pr^1/3: half of the mean up to there."""
    return 0.5 * laminar(reynolds, prandtl)


@_method(
    "plate laminar, flux", "mean Nu", (_LAMINAR_RE, Range("Pr", low=0.6)), 0.03, "rohsenow-1998",
    where=_FLUX | {"regime": ("laminar",)},
)  # fmt: skip
def laminar_flux(reynolds: float, prandtl: float) -> float:
    """Mean Nu at uniform flux (on the mean difference), 0.680 Re^1/2 Pr^1/3."""
    return 0.680 * sqrt(reynolds) * prandtl ** (1.0 / 3.0)


@_method(
    "plate laminar, flux, local", "local Nu", (_LAMINAR_RE, Range("Pr", low=0.6)), 0.03, "rohsenow-1998",
    where=_FLUX | {"regime": ("laminar",)},
)  # fmt: skip
def laminar_flux_local(reynolds: float, prandtl: float) -> float:
    """Local Nu at uniform flux, 0.453 Re^1/2 Pr^1/3."""
    return 0.453 * sqrt(reynolds) * prandtl ** (1.0 / 3.0)


@_method(
    "Churchill-Ozoe plate, local", "local Nu", (_LAMINAR_RE, Range("Pe", low=100.0)), 0.03, "churchill-ozoe-1973",
    where={"regime": ("laminar",)},
)  # fmt: skip
def churchill_ozoe_local(reynolds: float, prandtl: float, wall: str = "temperature") -> float:
    """Local Nu at any Pr, 0.3387 Re^1/2 Pr^1/3/(1+(0.0468/Pr)^2/3)^1/4; for a flux 0.4637 and 0.0207."""
    lead, at = (0.4637, 0.0207) if wall == "flux" else (0.3387, 0.0468)
    return lead * sqrt(reynolds) * prandtl ** (1.0 / 3.0) / (1.0 + (at / prandtl) ** (2.0 / 3.0)) ** 0.25


@_method(
    "Churchill-Ozoe plate", "mean Nu", (_LAMINAR_RE, Range("Pe", low=100.0)), 0.03, "churchill-ozoe-1973",
    where={"regime": ("laminar",)},
)  # fmt: skip
def churchill_ozoe(reynolds: float, prandtl: float, wall: str = "temperature") -> float:
    """Mean Nu at any Pr, twice the local one of Churchill and Ozoe; for a flux 3/2 of it, on the mean difference."""
    return (1.5 if wall == "flux" else 2.0) * churchill_ozoe_local(reynolds, prandtl, wall)


@_method(
    "plate laminar, liquid metal", "mean Nu", (_LAMINAR_RE, Range("Pr", 1e-4, 0.03), Range("Pe", low=100.0)), 0.15,
    "pohlhausen-1921", where=_TEMPERATURE | {"regime": ("laminar",)},
)  # fmt: skip
def liquid_metal(reynolds: float, prandtl: float) -> float:
    """Mean Nu as Pr vanishes, 2(Pe/π)^1/2 = 1.128 Pe^1/2; 9 % high at Pr 0.01, 15 % at 0.03."""
    return 1.1283791670955126 * sqrt(reynolds * prandtl)


# -- unheated start ------------------------------------------------------------------------------------


def _delay(reynolds: float, unheated: float, turbulent: bool) -> tuple[float, float]:
    power = 9.0 / 10.0 if turbulent else 3.0 / 4.0
    return 1.0 - unheated**power, 1.0 / 9.0 if turbulent else 1.0 / 3.0


@_method(
    "plate laminar, unheated start, local", "local Nu",
    (_LAMINAR_RE, Range("Pr", low=0.6), Range("ξ/x", 0.0, 0.99)), 0.03, "lighthill-1950",
    where=_TEMPERATURE | {"regime": ("laminar",)},
)  # fmt: skip
def laminar_start_local(reynolds: float, prandtl: float, unheated: float) -> float:
    """Local Nu behind an unheated start ξ, that of the heated plate over (1−(ξ/x)^3/4)^1/3."""
    left, power = _delay(reynolds, unheated, False)
    return laminar_local(reynolds, prandtl) / left**power


@_method(
    "plate laminar, unheated start", "mean Nu",
    (_LAMINAR_RE, Range("Pr", low=0.6), Range("ξ/x", 0.0, 0.99)), 0.03, "lighthill-1950;ameel-1997",
    where=_TEMPERATURE | {"regime": ("laminar",)},
)  # fmt: skip
def laminar_start(reynolds: float, prandtl: float, unheated: float) -> float:
    """Mean Nu over the heated part, on the whole length: that without start × (1−(ξ/L)^3/4)^2/3/(1−ξ/L)."""
    left, power = _delay(reynolds, unheated, False)
    return laminar(reynolds, prandtl) * left ** (1.0 - power) / (1.0 - unheated)


@_method(
    "plate turbulent, unheated start, local", "local Nu", (*_TURBULENT, Range("ξ/x", 0.0, 0.99)), 0.15,
    "reynolds-1958", where=_TEMPERATURE | {"regime": ("turbulent", "mixed")},
)  # fmt: skip
def turbulent_start_local(reynolds: float, prandtl: float, unheated: float) -> float:
    """Local Nu of a turbulent layer behind an unheated start ξ, that of the heated plate over (1−(ξ/x)^9/10)^1/9."""
    left, power = _delay(reynolds, unheated, True)
    return turbulent_local(reynolds, prandtl) / left**power


@_method(
    "plate turbulent, unheated start", "mean Nu", (*_TURBULENT, Range("ξ/x", 0.0, 0.99)), 0.15,
    "reynolds-1958;ameel-1997", where=_TEMPERATURE | {"regime": ("turbulent",)},
)  # fmt: skip
def turbulent_start(reynolds: float, prandtl: float, unheated: float) -> float:
    """Mean Nu over the heated part of a tripped layer: that without start × (1−(ξ/L)^9/10)^8/9/(1−ξ/L)."""
    left, power = _delay(reynolds, unheated, True)
    return turbulent(reynolds, prandtl) * left ** (1.0 - power) / (1.0 - unheated)


# -- turbulent -----------------------------------------------------------------------------------------


@_method(
    "plate turbulent, local", "local Nu", _TURBULENT, 0.15, "rohsenow-1998",
    where=_TEMPERATURE | {"regime": ("turbulent", "mixed")},
)  # fmt: skip
def turbulent_local(reynolds: float, prandtl: float) -> float:
    """Local Nu of a turbulent layer at uniform wall temperature, 0.0296 Re^4/5 Pr^1/3."""
    return 0.0296 * reynolds**0.8 * prandtl ** (1.0 / 3.0)


@_method(
    "plate turbulent, flux, local", "local Nu", _TURBULENT, 0.15, "rohsenow-1998",
    where=_FLUX | {"regime": ("turbulent", "mixed")},
)  # fmt: skip
def turbulent_flux_local(reynolds: float, prandtl: float) -> float:
    """Local Nu of a turbulent layer at uniform flux, 0.0308 Re^4/5 Pr^1/3: 4 % above that at uniform temperature."""
    return 0.0308 * reynolds**0.8 * prandtl ** (1.0 / 3.0)


@_method(
    "plate turbulent", "mean Nu", _TURBULENT, 0.15, "rohsenow-1998", where={"regime": ("turbulent",)},
)  # fmt: skip
def turbulent(reynolds: float, prandtl: float) -> float:
    """Mean Nu of a layer turbulent from the leading edge, 0.037 Re^4/5 Pr^1/3."""
    return 0.037 * reynolds**0.8 * prandtl ** (1.0 / 3.0)


@_method(
    "plate mixed", "mean Nu", (Range("Re", high=1e8), Range("Pr", 0.6, 60.0), Range("Re transition", 1e4, 3e6)), 0.15,
    "rohsenow-1998", where={"regime": ("mixed",)},
)  # fmt: skip
def mixed(reynolds: float, prandtl: float, transition: float = TRANSITION) -> float:
    """Mean Nu of a layer laminar to the transition and turbulent behind it, (0.037 Re^4/5 − A) Pr^1/3."""
    reached = smaller(transition, reynolds)  # a plate that ends before the transition is laminar
    a = 0.037 * reached**0.8 - 0.664 * sqrt(reached)
    return (0.037 * reynolds**0.8 - a) * prandtl ** (1.0 / 3.0)


@_method(
    "Whitaker plate", "mean Nu",
    (Range("Re", 2e5, 5.5e6), Range("Pr", 0.7, 380.0), Range("viscosity ratio", 0.26, 3.5)), 0.25, "whitaker-1972",
    property_temperature="stream", where={"regime": ("mixed",)},
)  # fmt: skip
def whitaker(reynolds: float, prandtl: float, viscosity_ratio: float = 1.0) -> float:
    """Mean Nu of a partly turbulent plate, 0.036 Pr^0.43 (Re^0.8 − 9200)(μ/μw)^1/4; range from memory."""
    return 0.036 * prandtl**0.43 * (reynolds**0.8 - 9200.0) * viscosity_ratio**0.25


@_method(
    "Petukhov-Popov plate", "mean Nu", (Range("Re", 5e5, 1e7), Range("Pr", 0.6, 2000.0)), 0.15,
    "petukhov-popov-1963;gnielinski-1975", where={"regime": ("turbulent",)},
)  # fmt: skip
def petukhov(reynolds: float, prandtl: float) -> float:
    """Mean Nu of a layer turbulent from the edge, 0.037 Re^0.8 Pr/(1+2.443 Re^−0.1 (Pr^2/3−1))."""
    return 0.037 * reynolds**0.8 * prandtl / (1.0 + 2.443 * reynolds**-0.1 * (prandtl ** (2.0 / 3.0) - 1.0))


@_method(
    "Gnielinski plate", "mean Nu", (Range("Re", 10.0, 1e7), Range("Pr", 0.6, 2000.0)), 0.2, "gnielinski-1975",
    where={"regime": ("mixed", "turbulent")},
)  # fmt: skip
def gnielinski(reynolds: float, prandtl: float, prandtl_ratio: float = 1.0) -> float:
    """Mean Nu of a plate in a turbulent stream, √(laminar² + turbulent²); liquids times (Pr/Prw)^1/4."""
    return sqrt(laminar(reynolds, prandtl) ** 2 + petukhov(reynolds, prandtl) ** 2) * prandtl_ratio**0.25


@_method(
    "Schultz-Grunow plate, local", "local Nu", (Range("Re", 5e5, 1e9), Range("Pr", 0.5, 2000.0)), 0.15,
    "schultz-grunow-1940;petukhov-popov-1963", where={"regime": ("turbulent", "mixed")},
)  # fmt: skip
def friction_form(reynolds: float, prandtl: float) -> float:
    """Local Nu from friction, (cf/2)Re Pr/(1+12.7√(cf/2)(Pr^2/3−1)), cf = 0.370 (log10 Re)^−2.584."""
    half = 0.185 * log10(reynolds) ** -2.584
    return half * reynolds * prandtl / (1.0 + 12.7 * sqrt(half) * (prandtl ** (2.0 / 3.0) - 1.0))


@_method(
    "Lienhard plate, local", "local Nu",
    (Range("Re", 1e3, 1e7), Range("Pr", 0.6, 200.0), Range("Re transition", 3e4, 5e5)), 0.15, "lienhard-2020",
    where=_TEMPERATURE,
)  # fmt: skip
def lienhard_local(reynolds: float, prandtl: float, transition: float = TRANSITION) -> float:
    """Local Nu through laminar, transitional and turbulent flow by one equation; coefficients from memory.

    Turbulent part: 0.0296 Re^0.8 Pr^0.6 for gases, from friction for others. The whole:
    (Nu_lam⁵ + (Nu_tr^−10 + Nu_turb^−10)^−1/2)^1/5, Nu_tr = Nu_lam(Re_t)(Re/Re_t)^c, c = 0.9922 log10 Re_t − 3.013.
    """
    power = 0.9922 * log10(transition) - 3.013
    before = laminar_local(reynolds, prandtl)
    onset = laminar_local(transition, prandtl) * (reynolds / transition) ** power
    behind = where(prandtl < 1.0, 0.0296 * reynolds**0.8 * prandtl**0.6, _log_law(reynolds, prandtl))
    return (before**5 + (onset**-10 + behind**-10) ** -0.5) ** 0.2


def _log_law(reynolds: Any, prandtl: Any) -> Any:
    """Local turbulent Nu with cf = 0.455/ln²(0.06 Re)."""
    half = 0.2275 / (2.302585092994046 * larger(log10(0.06 * reynolds), 0.5)) ** 2
    return reynolds * prandtl * half / (1.0 + 12.7 * (prandtl ** (2.0 / 3.0) - 1.0) * sqrt(half))
