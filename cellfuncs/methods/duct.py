"""Heat transfer and friction in ducts. Lengths enter as x* = (x/D)/(Re·Pr) with the hydraulic diameter.

f is Darcy's friction factor. Nusselt numbers are on the hydraulic diameter and the bulk temperature.
"""

import math
from bisect import bisect_right

from cellfuncs.errors import OutOfRange
from cellfuncs.methods.base import METHODS, Range, method

LAMINAR_UP_TO = 2300.0
TURBULENT_FROM = 4000.0

# developed Nusselt numbers: (section, wall condition, walls heated) -> value (Shah and London 1978)
DEVELOPED = {
    ("tube", "temperature", "both"): 3.6568,
    ("tube", "flux", "both"): 48.0 / 11.0,
    ("plates", "temperature", "both"): 7.5407,
    ("plates", "flux", "both"): 140.0 / 17.0,
    ("plates", "temperature", "one"): 4.8607,
    ("plates", "flux", "one"): 5.3846,
}
LIQUID_METAL_PRANDTL = 0.1

# annulus, one wall heated and the other insulated: inner over outer diameter -> Nu of the inner, of the outer wall,
# at uniform temperature (first pair) and uniform flux (second pair); Shah and London 1978
_ANNULUS_RATIOS = (0.05, 0.1, 0.25, 0.5, 1.0)
_ANNULUS = {
    ("inner", "temperature"): (17.46, 11.56, 7.37, 5.74, 4.86),
    ("outer", "temperature"): (4.06, 4.11, 4.23, 4.43, 4.86),
    ("inner", "flux"): (17.81, 11.91, 7.753, 6.181, 5.385),
    ("outer", "flux"): (4.792, 4.834, 4.904, 5.036, 5.385),
}
_RECTANGLE = {
    "temperature": (7.541, -2.610, 4.970, -5.119, 2.702, -0.548),
    "flux": (8.235, -2.0421, 3.0853, -2.4765, 1.0578, -0.1861),
    "friction": (96.0, -1.3553, 1.9467, -1.7012, 0.9564, -0.2537),
}


def _polynomial(what: str, ratio: float) -> float:
    """Shah and London's polynomials in the short over the long side."""
    lead, *rest = _RECTANGLE[what]
    return lead * (1.0 + sum(c * ratio ** (k + 1) for k, c in enumerate(rest)))


def developed_value(section: str, wall: str, heated: str, ratio: float = 1.0) -> float:
    """Nu of developed laminar flow in any section."""
    if section == "rectangle":
        return _polynomial(wall, ratio)
    if section == "annulus":
        if heated == "both" or not _ANNULUS_RATIOS[0] <= ratio:
            raise OutOfRange(
                "laminar flow in an annulus is known with one wall heated and diameters from 1:20; "
                "state heated walls inner or outer, or the coefficient"
            )
        values = _ANNULUS[heated, wall]
        k = min(max(bisect_right(_ANNULUS_RATIOS, ratio) - 1, 0), len(values) - 2)
        low, high = _ANNULUS_RATIOS[k], _ANNULUS_RATIOS[k + 1]
        t = math.log(ratio / low) / math.log(high / low)
        return values[k] + t * (values[k + 1] - values[k])
    return DEVELOPED[section, wall, heated]


def friction_times_re(section: str, ratio: float = 1.0) -> float:
    """f·Re of developed laminar flow (Darcy): 64, 96, and the exact annulus."""
    if section == "rectangle":
        return _polynomial("friction", ratio)
    if section == "annulus":
        square = ratio * ratio
        if 1.0 - ratio < 1e-6:
            return 96.0
        return 64.0 * (1.0 - ratio) ** 2 / (1.0 + square + (1.0 - square) / math.log(ratio))
    return 96.0 if section == "plates" else 64.0


@method(
    "developed laminar",
    gives="mean Nu",
    ranges=(Range("Re", high=LAMINAR_UP_TO), Range("x*", low=0.05)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
)
def developed_laminar(section: str, wall: str, heated: str, ratio: float = 1.0) -> float:
    """Nu of developed laminar flow: tube 3.6568 and 48/11, plates 7.5407 and 140/17, one wall 4.8607 and 5.3846."""
    return developed_value(section, wall, heated, ratio)


@method(
    "Hausen entry",
    gives="mean Nu",
    ranges=(Range("Re", high=LAMINAR_UP_TO),),
    scatter=0.05,
    property_temperature="mean bulk",
    source="hausen-1943",
)
def hausen_entry(x_star: float) -> float:
    """Mean Nu over the thermal entry of a tube at uniform wall temperature, Gz = 1/x*."""
    gz = 1.0 / x_star
    return 3.66 + 0.0668 * gz / (1.0 + 0.04 * gz ** (2.0 / 3.0))


@method(
    "plates entry",
    gives="mean Nu",
    ranges=(Range("Re", high=LAMINAR_UP_TO),),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
)
def plates_entry(x_star: float) -> float:
    """Mean Nu over the thermal entry between plates, both at uniform temperature (Shah and London 1978)."""
    if x_star <= 0.0005:
        return 1.849 * x_star ** (-1.0 / 3.0)
    if x_star <= 0.006:
        return 1.849 * x_star ** (-1.0 / 3.0) + 0.6
    return 7.541 + 0.0235 / x_star


@method(
    "flux entry",
    gives="local Nu",
    ranges=(Range("Re", high=LAMINAR_UP_TO),),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
)
def flux_entry(x_star: float, section: str) -> float:
    """Local Nu at x* under uniform wall flux (Shah and London 1978, tube and plates with both walls heated)."""
    if section == "plates":
        if x_star <= 0.0002:
            return 1.490 * x_star ** (-1.0 / 3.0)
        if x_star <= 0.001:
            return 1.490 * x_star ** (-1.0 / 3.0) - 0.4
        return 8.235 + 8.68 * (1000.0 * x_star) ** -0.506 * math.exp(-164.0 * x_star)
    if x_star <= 0.00005:
        return 1.302 * x_star ** (-1.0 / 3.0) - 1.0
    if x_star <= 0.0015:
        return 1.302 * x_star ** (-1.0 / 3.0) - 0.5
    return 4.364 + 8.68 * (1000.0 * x_star) ** -0.506 * math.exp(-41.0 * x_star)


@method(
    "Gnielinski",
    gives="mean Nu",
    ranges=(Range("Re", TURBULENT_FROM, 5e6), Range("Pr", 0.5, 2000.0), Range("L/D", low=1.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="gnielinski-1976",
)
def gnielinski(reynolds: float, prandtl: float, friction: float, diameter_over_length: float = 0.0) -> float:
    """Nu of turbulent duct flow, (f/8)(Re−1000)Pr/(1+12.7√(f/8)(Pr^2/3−1))·(1+(D/L)^2/3)."""
    eighth = friction / 8.0
    developed = (
        eighth * (reynolds - 1000.0) * prandtl / (1.0 + 12.7 * math.sqrt(eighth) * (prandtl ** (2.0 / 3.0) - 1.0))
    )
    return developed * (1.0 + diameter_over_length ** (2.0 / 3.0))


@method(
    "liquid metal",
    gives="mean Nu",
    ranges=(Range("Pe", 100.0, 1e4), Range("Pr", 0.003, 0.1)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="lyon-1951;seban-shimazaki-1951",
)
def liquid_metal(peclet: float, wall: str) -> float:
    """Nu of a liquid metal in a turbulent tube, 7 + 0.025 Pe^0.8 (flux, Lyon), 5 + ... (temperature, Seban)."""
    return (7.0 if wall == "flux" else 5.0) + 0.025 * peclet**0.8


@method(
    "Haaland",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e8), Range("roughness", 0.0, 0.05)),
    scatter=0.02,
    property_temperature="mean bulk",
    source="haaland-1983",
)
def rough_friction(reynolds: float, relative_roughness: float) -> float:
    """f of a rough wall, 1/√f = −1.8 log10(6.9/Re + (ε/3.7D)^1.11)."""
    return (-1.8 * math.log10(6.9 / reynolds + (relative_roughness / 3.7) ** 1.11)) ** -2.0


@method(
    "laminar friction",
    gives="Darcy friction factor",
    ranges=(Range("Re", high=LAMINAR_UP_TO),),
    scatter=0.0,
    property_temperature="mean bulk",
    source="shah-london-1978",
)
def laminar_friction(reynolds: float, section: str, ratio: float = 1.0) -> float:
    """f = 64/Re in a tube, 96/Re between plates (developed)."""
    return friction_times_re(section, ratio) / reynolds


@method(
    "smooth wall friction",
    gives="Darcy friction factor",
    ranges=(Range("Re", 3000.0, 5e6),),
    scatter=0.02,
    property_temperature="mean bulk",
    source="petukhov-1970",
)
def smooth_friction(reynolds: float) -> float:
    """f = (0.790 ln Re − 1.64)^−2 for smooth walls."""
    return (0.790 * math.log(reynolds) - 1.64) ** -2.0


def laminar_nusselt(
    x_star: float, section: str, wall: str, heated: str, reynolds: float, allow: bool, ratio: float = 1.0
) -> tuple[float, str, str]:
    """Nu of a laminar duct with the method chosen and what lies outside its range."""
    if heated != "both" or section in ("rectangle", "annulus") or x_star >= 10.0:
        name = "developed laminar"
        outside = METHODS[name].check(allow, **{"Re": reynolds, "x*": x_star})
        return developed_laminar(section, wall, heated, ratio), name, outside
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
        return liquid_metal(peclet, wall), "liquid metal", METHODS["liquid metal"].check(allow, Pe=peclet, Pr=prandtl)
    more = {"Re": reynolds} if check_re else {}
    if short:
        more["L/D"] = 1.0 / short
    outside = METHODS["Gnielinski"].check(allow, Pr=prandtl, **more)
    return factor * gnielinski(reynolds, prandtl, friction, short), "Gnielinski", outside


def _annulus_factor(section: str, heated: str, ratio: float) -> float:
    """Petukhov and Roizen 1964: a turbulent annulus over a tube of the same hydraulic diameter."""
    if section != "annulus":
        return 1.0
    inner, outer = 0.86 * ratio**-0.16, 1.0 - 0.14 * ratio**0.6
    if heated == "both":
        return (inner * ratio + outer) / (1.0 + ratio)
    return inner if heated == "inner" else outer


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
    factor = _annulus_factor(section, heated, ratio)
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
