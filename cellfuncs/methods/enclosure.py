"""Free convection between walls that close a fluid in: layers, rings and shells.

Nu and Ra on the gap and the difference of the walls; Nu is the heat flow over that of conduction alone (for rings and
shells: over that of conduction through them). Tilt: 0 is a level layer heated from below, 90 an upright one.
"""

import math
from typing import Any

from cellfuncs.methods.algebra import cos, exp, larger, log, sin, smaller, where
from cellfuncs.methods.base import Range, follows, method

_GAP = "gap; over conduction alone"
_BELOW = {"shape": ("layer",), "heated_from": ("from below",)}
_SIDE = {"shape": ("layer",), "heated_from": ("from the side",)}
_TILTED = {"shape": ("layer",), "heated_from": ("tilted",)}
_CRITICAL = 1708.0  # Ra at which a level layer begins to turn over
_LEAST = 1e-100  # keeps quotients finite for a fluid at rest


def _above(x: Any) -> Any:
    return larger(0.0, x)


def _onset(rayleigh: Any) -> Any:
    """1 − 1708/Ra where that is above zero."""
    return _above(1.0 - _CRITICAL / larger(rayleigh, _LEAST))


def _turbulent(rayleigh: Any) -> Any:
    """(Ra/5830)^1/3 − 1 where that is above zero."""
    return _above((rayleigh / 5830.0) ** (1 / 3) - 1.0)


# -- level, heated from below ----------------------------------------------------------------------------------------


@method(
    "Hollands",
    gives="mean Nu",
    ranges=(Range("Ra", high=1e8), Range("Pr", 0.6, 1.0)),
    scatter=0.05,
    property_temperature="mean of the walls",
    source="hollands-1976",
    flows=("enclosure",),
    where=_BELOW,
    length=_GAP,
)
def layer_heated_below(rayleigh: Any) -> Any:
    """Mean Nu of a level layer of air heated from below; conduction alone up to Ra 1708."""
    return 1.0 + 1.44 * _onset(rayleigh) + _turbulent(rayleigh)


@method(
    "Hollands any fluid",
    gives="mean Nu",
    ranges=(Range("Ra", high=4e9), Range("Pr", 0.02, 11000.0)),
    scatter=0.1,
    property_temperature="mean of the walls",
    source="hollands-1984",
    flows=("enclosure",),
    where=_BELOW,
    length=_GAP,
)
def layer_heated_below_any(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a level layer of any fluid heated from below; conduction alone up to Ra 1708."""
    first = 1.44 / (1.0 + 0.018 / prandtl + 0.00136 / prandtl**2)
    # (Ra^1/3/k)^(1 − ln(Ra^1/3/k)) as a power of e: ln of it is l − l², l = ln Ra^1/3 − ln k
    l = log(larger(rayleigh, 1.0)) / 3.0 - math.log(75.0) - 1.5 * prandtl**-0.5  # noqa: E741
    return 1.0 + _onset(rayleigh) * (first + 2.0 * exp(l - l * l)) + _turbulent(rayleigh)


@method(
    "Globe-Dropkin",
    gives="mean Nu",
    ranges=(Range("Ra", 3e5, 7e9), Range("Pr", 0.02, 8750.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="globe-dropkin-1959",
    flows=("enclosure",),
    where=_BELOW,
    length=_GAP,
)
def layer_heated_below_liquid(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a turbulent level layer heated from below, liquids from mercury to oil."""
    return 0.069 * rayleigh ** (1 / 3) * prandtl**0.074


@method(
    "O'Toole-Silveston",
    gives="mean Nu",
    ranges=(Range("Ra", 1700.0, 1e9), Range("Pr", 0.7, 1e4)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="otoole-silveston-1961",
    flows=("enclosure",),
    where=_BELOW,
    length=_GAP,
)
def layer_heated_below_pieces(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of a level layer of a liquid heated from below, by regime: first cells, laminar, turbulent."""
    laminar = where(rayleigh <= 3500.0, 0.00238 * rayleigh**0.816, 0.229 * rayleigh**0.252)
    return where(rayleigh <= 1e5, laminar, 0.104 * rayleigh**0.305 * prandtl**0.084)


# -- upright, heated from the side -----------------------------------------------------------------------------------


@method(
    "Berkovsky-Polevikov square",
    gives="mean Nu",
    ranges=(Range("Ra", 1e3, 1e10), Range("Pr", 1e-3, 1e5), Range("H/L", 1.0, 2.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="catton-1978",
    flows=("enclosure",),
    where=_SIDE,
    length=_GAP,
)
def upright_square(rayleigh: Any, prandtl: Any) -> Any:
    """Mean Nu of an upright layer about as high as wide, H/L 1 to 2."""
    return larger(1.0, 0.18 * (prandtl / (0.2 + prandtl) * rayleigh) ** 0.29)


@method(
    "Berkovsky-Polevikov",
    gives="mean Nu",
    ranges=(Range("Ra", 1e3, 1e10), Range("Pr", 1e-3, 1e5), Range("H/L", 2.0, 10.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="catton-1978",
    flows=("enclosure",),
    where=_SIDE,
    length=_GAP,
)
def upright_short(rayleigh: Any, prandtl: Any, aspect: Any) -> Any:
    """Mean Nu of an upright layer, H/L 2 to 10."""
    return larger(1.0, 0.22 * (prandtl / (0.2 + prandtl) * rayleigh) ** 0.28 * aspect**-0.25)


@method(
    "MacGregor-Emery laminar",
    gives="mean Nu",
    ranges=(Range("Ra", 1e4, 1e7), Range("Pr", 1.0, 2e4), Range("H/L", 10.0, 40.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="macgregor-emery-1969",
    flows=("enclosure",),
    where=_SIDE,
    length=_GAP,
)
def upright_tall(rayleigh: Any, prandtl: Any, aspect: Any) -> Any:
    """Mean Nu of a tall upright layer, laminar, H/L 10 to 40."""
    return larger(1.0, 0.42 * rayleigh**0.25 * prandtl**0.012 * aspect**-0.3)


@method(
    "MacGregor-Emery turbulent",
    gives="mean Nu",
    ranges=(Range("Ra", 1e6, 1e9), Range("Pr", 1.0, 20.0), Range("H/L", 1.0, 40.0)),
    scatter=0.3,
    property_temperature="mean of the walls",
    source="macgregor-emery-1969",
    flows=("enclosure",),
    where=_SIDE,
    length=_GAP,
)
def upright_turbulent(rayleigh: Any) -> Any:
    """Mean Nu of an upright layer of a liquid, turbulent, H/L 1 to 40; low where the layer is not tall."""
    return 0.046 * rayleigh ** (1 / 3)


@method(
    "ElSherbiny",
    gives="mean Nu",
    ranges=(Range("Ra", 1e2, 2e7), Range("Pr", 0.6, 1.0), Range("H/L", 5.0, 110.0)),
    scatter=0.09,
    property_temperature="mean of the walls",
    source="elsherbiny-1982",
    flows=("enclosure",),
    where=_SIDE,
    length=_GAP,
)
def upright_air(rayleigh: Any, aspect: Any) -> Any:
    """Mean Nu of an upright layer of air: the largest of conduction with first cells, boundary layers, turbulence."""
    slow = 0.104 * rayleigh**0.293 / (1.0 + (6310.0 / larger(rayleigh, 1.0)) ** 1.36)
    cells = (1.0 + slow**3) ** (1 / 3)
    return larger(cells, larger(0.0605 * rayleigh ** (1 / 3), 0.242 * (rayleigh / aspect) ** 0.272))


@method(
    "Catton",
    gives="mean Nu",
    ranges=(Range("Ra", 1e3, 1e10), Range("H/L", 1.0, 40.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="catton-1978",
    flows=("enclosure",),
    where=_SIDE,
    length=_GAP,
)
def upright_layer(rayleigh: Any, prandtl: Any, aspect: Any) -> Any:
    """Mean Nu of an upright layer, H/L up to 2, to 10, to 40; it steps where one piece takes over from another."""
    tall = where(aspect <= 10.0, upright_short(rayleigh, prandtl, aspect), upright_tall(rayleigh, prandtl, aspect))
    return where(aspect <= 2.0, upright_square(rayleigh, prandtl), tall)


# -- tilted ----------------------------------------------------------------------------------------------------------


@method(
    "Hollands tilted",
    gives="mean Nu",
    ranges=(Range("Ra", high=1e5), Range("tilt", 0.0, 60.0), Range("H/L", low=12.0), Range("Pr", 0.6, 1.0)),
    scatter=0.05,
    property_temperature="mean of the walls",
    source="hollands-1976",
    flows=("enclosure",),
    where=_TILTED,
    length=_GAP,
)
def tilted_layer(rayleigh: Any, tilt: Any) -> Any:
    """Mean Nu of a layer of air tilted up to 60 degrees and heated from below; Ra with the whole of g."""
    radians = tilt * (math.pi / 180.0)
    across = rayleigh * larger(cos(radians), 0.0)
    wavy = 1.0 - _CRITICAL * larger(sin(1.8 * radians), 0.0) ** 1.6 / larger(across, _LEAST)
    # below the onset the first bracket is zero whatever the second is
    return 1.0 + 1.44 * _onset(across) * where(across > _CRITICAL, wavy, 0.0) + _turbulent(across)


@method(
    "Ayyaswamy-Catton tilt",
    gives="mean Nu",
    ranges=(Range("tilt", 60.0, 90.0),),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="ayyaswamy-catton-1973",
    flows=("enclosure",),
    where=_TILTED,
    length=_GAP,
)
def steep_layer(upright: Any, tilt: Any) -> Any:
    """Mean Nu of a steep layer heated from below, tilt 60 to 90, from that of the same layer upright."""
    return upright * larger(sin(tilt * (math.pi / 180.0)), 0.0) ** 0.25


@method(
    "Arnold-Catton-Edwards tilt",
    gives="mean Nu",
    ranges=(Range("tilt", 90.0, 180.0),),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="arnold-1976",
    flows=("enclosure",),
    where=_TILTED,
    length=_GAP,
)
def layer_heated_above(upright: Any, tilt: Any) -> Any:
    """Mean Nu of a layer heated from above, tilt 90 to 180, from that of the same layer upright."""
    return 1.0 + (upright - 1.0) * larger(sin(tilt * (math.pi / 180.0)), 0.0)


@method(
    "ElSherbiny tilted",
    gives="mean Nu",
    ranges=(Range("Ra", 1e2, 2e7), Range("tilt", 60.0, 90.0), Range("H/L", 5.0, 110.0), Range("Pr", 0.6, 1.0)),
    scatter=0.09,
    property_temperature="mean of the walls",
    source="elsherbiny-1982;iso-15099",
    flows=("enclosure",),
    where=_TILTED,
    length=_GAP,
)
def steep_air(rayleigh: Any, aspect: Any, tilt: Any) -> Any:
    """Mean Nu of a steep layer of air heated from below: straight between that at 60 degrees and that upright."""
    still = 0.5 / (1.0 + smaller(rayleigh / 3160.0, 1e10) ** 20.6) ** 0.1
    cells = (1.0 + (0.0936 * rayleigh**0.314 / (1.0 + still)) ** 7) ** (1.0 / 7.0)
    at_60 = larger(cells, (0.104 + 0.175 / aspect) * rayleigh**0.283)
    return at_60 + (upright_air(rayleigh, aspect) - at_60) * (tilt - 60.0) / 30.0


@method(
    "ISO 15099 layer heated above",
    gives="mean Nu",
    ranges=(Range("Ra", 1e2, 2e7), Range("tilt", 90.0, 180.0), Range("H/L", 5.0, 110.0), Range("Pr", 0.6, 1.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="iso-15099;arnold-1976;elsherbiny-1982",
    flows=("enclosure",),
    where=_TILTED,
    length=_GAP,
)
def air_heated_above(rayleigh: Any, aspect: Any, tilt: Any) -> Any:
    """Mean Nu of a layer of air heated from above, from ElSherbiny's upright one."""
    return layer_heated_above(upright_air(rayleigh, aspect), tilt)


# -- rings and shells ------------------------------------------------------------------------------------------------


def _enclosed(rayleigh: Any, prandtl: Any, factor: float) -> Any:
    """Conduction that convection raises to, k_eff/k; at least 1."""
    return larger(1.0, factor * (prandtl / (0.861 + prandtl) * rayleigh) ** 0.25)


@follows("Ra ring")
def ring_rayleigh(rayleigh: Any, ratio: Any) -> Any:
    """The Rayleigh number of Raithby and Hollands for a ring, from Ra on the gap and inner over outer diameter.

    ln(Do/Di)^4/(b³ (Di^-3/5 + Do^-3/5)^5) · Ra, with the gap b = (Do − Di)/2.
    """
    return rayleigh * log(ratio) ** 4 / ((0.5 * (1.0 - ratio)) ** 3 * (ratio**-0.6 + 1.0) ** 5)


@follows("Ra shell")
def shell_rayleigh(rayleigh: Any, ratio: Any) -> Any:
    """The Rayleigh number of Raithby and Hollands for a shell, from Ra on the gap and inner over outer diameter.

    b/((Di Do)^4 (Di^-7/5 + Do^-7/5)^5) · Ra, with the gap b = (Do − Di)/2.
    """
    return rayleigh * 0.5 * (1.0 - ratio) / (ratio**4 * (ratio**-1.4 + 1.0) ** 5)


@method(
    "Raithby-Hollands ring",
    gives="mean Nu",
    ranges=(Range("Ra ring", 1e2, 1e7), Range("Pr", 0.7, 6000.0)),
    scatter=0.1,
    property_temperature="mean of the walls",
    source="raithby-hollands-1975",
    flows=("enclosure",),
    where={"shape": ("concentric cylinders",)},
    length=_GAP,
)
def ring(rayleigh: Any, prandtl: Any, ratio: Any) -> Any:
    """Mean k_eff/k between long level concentric cylinders, at least 1; ``ratio`` inner over outer diameter."""
    return _enclosed(ring_rayleigh(rayleigh, ratio), prandtl, 0.386)


@method(
    "Raithby-Hollands shell",
    gives="mean Nu",
    ranges=(Range("Ra shell", 1e2, 1e4), Range("Pr", 0.7, 4000.0)),
    scatter=0.15,
    property_temperature="mean of the walls",
    source="raithby-hollands-1975",
    flows=("enclosure",),
    where={"shape": ("concentric spheres",)},
    length=_GAP,
)
def shell(rayleigh: Any, prandtl: Any, ratio: Any) -> Any:
    """Mean k_eff/k between concentric spheres, at least 1; ``ratio`` inner over outer diameter."""
    return _enclosed(shell_rayleigh(rayleigh, ratio), prandtl, 0.74)


@method(
    "Scanlan-Bishop-Powe shell",
    gives="mean Nu",
    ranges=(Range("Ra", 480.0, 7e8), Range("Pr", 0.7, 4150.0), Range("ratio", 0.4, 0.8)),
    scatter=0.16,
    property_temperature="mean of the walls",
    source="scanlan-1970",
    flows=("enclosure",),
    where={"shape": ("concentric spheres",)},
    length=_GAP,
)
def shell_measured(rayleigh: Any, ratio: Any) -> Any:
    """Mean k_eff/k between concentric spheres, measured with air, water and oils."""
    return larger(1.0, 0.228 * (rayleigh * larger(1.0 - ratio, 0.0) / ratio) ** 0.226)
