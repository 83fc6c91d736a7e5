"""Heat transfer and friction in ducts. Lengths enter as x* = (x/D)/(Re·Pr) with the hydraulic diameter.

f is Darcy's friction factor. Nusselt numbers are on the hydraulic diameter and the bulk temperature.
"""

import math

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
FRICTION_TIMES_RE = {"tube": 64.0, "plates": 96.0}


@method(
    "developed laminar",
    gives="mean Nu",
    ranges=(Range("Re", high=LAMINAR_UP_TO), Range("x*", low=0.05)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
)
def developed_laminar(section: str, wall: str, heated: str) -> float:
    """Nu of developed laminar flow: tube 3.6568 and 48/11, plates 7.5407 and 140/17, one wall 4.8607 and 5.3846."""
    return DEVELOPED[section, wall, heated]


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
    ranges=(Range("Re", TURBULENT_FROM, 5e6), Range("Pr", 0.5, 2000.0)),
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
    "laminar friction",
    gives="Darcy friction factor",
    ranges=(Range("Re", high=LAMINAR_UP_TO),),
    scatter=0.0,
    property_temperature="mean bulk",
    source="shah-london-1978",
)
def laminar_friction(reynolds: float, section: str) -> float:
    """f = 64/Re in a tube, 96/Re between plates (developed)."""
    return FRICTION_TIMES_RE[section] / reynolds


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
    x_star: float, section: str, wall: str, heated: str, reynolds: float, allow: bool
) -> tuple[float, str, str]:
    """Nu of a laminar duct with the method chosen and what lies outside its range."""
    if heated == "one" or x_star >= 10.0:
        name = "developed laminar"
        outside = METHODS[name].check(allow, **{"Re": reynolds, "x*": x_star})
        return developed_laminar(section, wall, heated), name, outside
    if wall == "flux":
        name, nusselt = "flux entry", flux_entry(x_star, section)
    elif section == "plates":
        name, nusselt = "plates entry", plates_entry(x_star)
    else:
        name, nusselt = "Hausen entry", hausen_entry(x_star)
    return nusselt, name, METHODS[name].check(allow, Re=reynolds)


def nusselt_and_friction(
    reynolds: float,
    prandtl: float,
    x_star: float,
    section: str,
    wall: str,
    heated: str,
    allow: bool = False,
) -> tuple[float, float, str, str]:
    """Nu, Darcy f, the method's name and what lies outside its range, for any Re.

    Between Re 2300 and 4000 both are blended linearly in Re (Gnielinski 2013).
    Nu is the mean over the length at a prescribed wall temperature, the local one at the end for a
    prescribed flux.
    """
    if reynolds <= LAMINAR_UP_TO:
        nusselt, name, outside = laminar_nusselt(x_star, section, wall, heated, reynolds, allow)
        return nusselt, laminar_friction(reynolds, section), name, outside
    ratio = x_star * reynolds * prandtl
    short = 1.0 / ratio if wall == "temperature" else 0.0
    if reynolds >= TURBULENT_FROM:
        outside = METHODS["Gnielinski"].check(allow, Re=reynolds, Pr=prandtl)
        friction = smooth_friction(reynolds)
        return gnielinski(reynolds, prandtl, friction, short), friction, "Gnielinski", outside
    share = (reynolds - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)
    outside = METHODS["Gnielinski"].check(allow, Pr=prandtl)
    x_laminar = ratio / (LAMINAR_UP_TO * prandtl)
    low, _, outside_low = laminar_nusselt(x_laminar, section, wall, heated, LAMINAR_UP_TO, allow)
    at_4000 = smooth_friction(TURBULENT_FROM)
    high = gnielinski(TURBULENT_FROM, prandtl, at_4000, short)
    friction = (1.0 - share) * laminar_friction(LAMINAR_UP_TO, section) + share * at_4000
    nusselt = (1.0 - share) * low + share * high
    return nusselt, friction, "transition blend", "; ".join(filter(None, (outside, outside_low)))
