"""Friction in turbulent ducts, smooth and rough. f is Darcy's friction factor, Re is on the hydraulic diameter.

A wall of uniform sand counts as smooth while the roughness Reynolds number Reε = Re·√(f/8)·ε/D stays below 5, and as
fully rough above 70 (Nikuradse 1933). Walls as they are made feel their highest grains earlier: at Reε 0.25
Colebrook-White lies 2 % above the smooth wall, which is where the laws for smooth walls end here. They were measured in
tubes; other sections have the laminar-equivalent diameter (``friction_laminar.py``) and Colebrook-White by the
hydraulic diameter. The scatter of an explicit formula holds its distance from Colebrook-White.
"""

import math

from cellfuncs.methods.algebra import log, log10, sqrt
from cellfuncs.methods.base import Range, follows, method

SMOOTH_UP_TO, ROUGH_FROM = 5.0, 70.0
FELT_FROM = 0.25
ROUGHNESS = Range("roughness", 0.0, 0.05)
SMOOTH = Range("Reε", 0.0, FELT_FROM)
STRAIGHT = {"shape": ("straight",)}
TUBE = {"section": ("tube",), **STRAIGHT}
LOG_SCALE = 2.0 / math.log(10.0)
LENGTH = "hydraulic diameter"


def _log_law(start: float, offset: float, slope: float, scale: float = LOG_SCALE) -> float:
    """x = 1/√f of x = −scale·ln(offset + slope·x), by two steps of Halley from a start within some per cent.

    The function is nearly straight in x, so that two steps of third order end at rounding.
    """
    x = start
    for _ in range(2):
        inner = offset + slope * x
        bend = scale * slope / inner
        rise = 1.0 + bend
        excess = x + scale * log(inner)
        x = x - excess / (rise + 0.5 * excess * bend * bend / (scale * rise))
    return x


@method(
    "Colebrook-White",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e8), ROUGHNESS),
    scatter=0.05,
    property_temperature="mean bulk",
    source="colebrook-1939",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def colebrook_white(reynolds: float, relative_roughness: float) -> float:
    """f of 1/√f = −2 log10(ε/(3.7 D) + 2.51/(Re √f)), solved to rounding (15 digits)."""
    start = -1.8 * log10(6.9 / reynolds + (relative_roughness / 3.7) ** 1.11)
    return _log_law(start, relative_roughness / 3.7, 2.51 / reynolds) ** -2.0


@method(
    "Haaland",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e8), ROUGHNESS),
    scatter=0.06,
    property_temperature="mean bulk",
    source="haaland-1983",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def haaland(reynolds: float, relative_roughness: float) -> float:
    """f of a rough wall, 1/√f = −1.8 log10(6.9/Re + (ε/3.7D)^1.11), within 2 % of Colebrook-White."""
    return (-1.8 * log10(6.9 / reynolds + (relative_roughness / 3.7) ** 1.11)) ** -2.0


@method(
    "Serghides",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e8), ROUGHNESS),
    scatter=0.051,
    property_temperature="mean bulk",
    source="serghides-1984",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def serghides(reynolds: float, relative_roughness: float) -> float:
    """f by three substitutions in Colebrook-White and Steffensen's rule, within 0.003 % of its solution."""
    rough = relative_roughness / 3.7
    a = -2.0 * log10(rough + 12.0 / reynolds)
    b = -2.0 * log10(rough + 2.51 * a / reynolds)
    c = -2.0 * log10(rough + 2.51 * b / reynolds)
    return (a - (b - a) ** 2 / (c - 2.0 * b + a)) ** -2.0


@method(
    "Swamee-Jain",
    gives="Darcy friction factor",
    ranges=(Range("Re", 5000.0, 1e8), Range("roughness", 1e-6, 0.01)),
    scatter=0.06,
    property_temperature="mean bulk",
    source="swamee-jain-1976",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def swamee_jain(reynolds: float, relative_roughness: float) -> float:
    """f = 0.25/(log10(ε/(3.7 D) + 5.74/Re^0.9))², within 1 % of Colebrook-White."""
    return 0.25 / log10(relative_roughness / 3.7 + 5.74 / reynolds**0.9) ** 2


@method(
    "Churchill, all regimes",
    gives="Darcy friction factor",
    ranges=(Range("Re", 1.0, 1e8), ROUGHNESS),
    scatter=0.1,
    property_temperature="mean bulk",
    source="churchill-1977-friction",
    flows=("duct",),
    where={"section": ("tube",), **STRAIGHT},
    length=LENGTH,
)
def churchill(reynolds: float, relative_roughness: float) -> float:
    """f of laminar, transitional and turbulent flow in a tube in one expression, smooth or rough."""
    a = (-2.457 * log((7.0 / reynolds) ** 0.9 + 0.27 * relative_roughness)) ** 16
    b = (37530.0 / reynolds) ** 16
    return 8.0 * ((8.0 / reynolds) ** 12 + (a + b) ** -1.5) ** (1.0 / 12.0)


@method(
    "Blasius",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e5), SMOOTH),
    scatter=0.03,
    property_temperature="mean bulk",
    source="blasius-1913",
    flows=("duct",),
    where=TUBE,
    length=LENGTH,
)
def blasius(reynolds: float) -> float:
    """f = 0.3164 Re^−1/4 of a smooth wall."""
    return 0.3164 * reynolds**-0.25


@method(
    "smooth wall friction",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 5e6), SMOOTH),
    scatter=0.02,
    property_temperature="mean bulk",
    source="petukhov-1970",
    flows=("duct",),
    where=TUBE,
    length=LENGTH,
)
def smooth_friction(reynolds: float) -> float:
    """f = (0.790 ln Re − 1.64)^−2 for smooth walls (Filonenko, in the form of Petukhov)."""
    return (0.790 * log(reynolds) - 1.64) ** -2.0


@method(
    "Konakov",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 1e6), SMOOTH),
    scatter=0.02,
    property_temperature="mean bulk",
    source="konakov-1946;gnielinski-2010",
    flows=("duct",),
    where=TUBE,
    length=LENGTH,
)
def konakov(reynolds: float) -> float:
    """f = (1.8 log10 Re − 1.5)^−2 for smooth walls."""
    return (1.8 * log10(reynolds) - 1.5) ** -2.0


@method(
    "Prandtl-Kármán-Nikuradse",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4000.0, 3.2e6), SMOOTH),
    scatter=0.02,
    property_temperature="mean bulk",
    source="karman-nikuradse",
    flows=("duct",),
    where=TUBE,
    length=LENGTH,
)
def karman_nikuradse(reynolds: float) -> float:
    """f of a smooth wall, 1/√f = 2 log10(Re √f) − 0.8, solved to rounding."""
    return _log_law(1.8 * log10(reynolds / 6.9), 0.0, 10.0**0.4 / reynolds) ** -2.0


@method(
    "McKeon smooth",
    gives="Darcy friction factor",
    ranges=(Range("Re", 3.1e5, 3.6e7), SMOOTH),
    scatter=0.014,
    property_temperature="mean bulk",
    source="mckeon-2005",
    flows=("duct",),
    where=TUBE,
    length=LENGTH,
)
def mckeon(reynolds: float) -> float:
    """f of a smooth wall to the highest Re measured, 1/√f = 1.930 log10(Re √f) − 0.537, solved to rounding."""
    scale = 1.930 / math.log(10.0)
    return _log_law(1.8 * log10(reynolds / 6.9), 0.0, 10.0 ** (0.537 / 1.930) / reynolds, scale) ** -2.0


@method(
    "Nikuradse fully rough",
    gives="Darcy friction factor",
    ranges=(Range("roughness", 1e-6, 0.05), Range("Reε", ROUGH_FROM)),
    scatter=0.06,
    property_temperature="mean bulk",
    source="nikuradse-1933",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def fully_rough(relative_roughness: float) -> float:
    """f of a fully rough wall, 1/√f = 1.74 − 2 log10(2 ε/D), whatever the Reynolds number."""
    return (1.74 - 2.0 * log10(2.0 * relative_roughness)) ** -2.0


@method(
    "Dean plates",
    gives="Darcy friction factor",
    ranges=(Range("Re", 1.2e4, 1.2e6), SMOOTH),
    scatter=0.05,
    property_temperature="mean bulk",
    source="dean-1978",
    flows=("duct",),
    where={"section": ("plates",), **STRAIGHT},
    length=LENGTH,
)
def dean_plates(reynolds: float) -> float:
    """f of turbulent flow between smooth plates, 0.347 Re^−1/4 on the hydraulic diameter."""
    return 4.0 * 0.0868 * reynolds**-0.25


@follows("Reε")
def _height_of_roughness(reynolds: float, relative_roughness: float) -> float:
    return roughness_reynolds(reynolds, haaland(reynolds, relative_roughness), relative_roughness)


def roughness_reynolds(reynolds: float, friction: float, relative_roughness: float) -> float:
    """Reε = Re·√(f/8)·ε/D, the height of the roughness in wall units: smooth below 5, fully rough above 70."""
    return reynolds * sqrt(friction / 8.0) * relative_roughness
