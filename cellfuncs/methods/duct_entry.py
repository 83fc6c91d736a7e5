"""Thermal entry of a laminar flow with a developed velocity profile: published fits. x* = (x/D)/(Re·Pr) = 1/Gz.

The scatter of a fit is its greatest distance from the exact series (``duct_series.py``) from x* = 1e-4 on, where that
is more than its author says.
"""

from cellfuncs.methods.algebra import exp, where
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR, LENGTH

TUBE_T = {
    "section": ("tube",),
    "wall": ("temperature",),
    "heated": ("both",),
    "profile": ("developed",),
    "shape": ("straight",),
}
TUBE_Q = {**TUBE_T, "wall": ("flux",)}
PLATES_T = {**TUBE_T, "section": ("plates",)}
BOTH_Q = {**TUBE_Q, "section": ("tube", "plates")}
THIRD = 1.0 / 3.0


@method(
    "Hausen entry",
    gives="mean Nu",
    ranges=(LAMINAR,),
    scatter=0.13,
    property_temperature="mean bulk",
    source="hausen-1943",
    flows=("duct",),
    where=TUBE_T,
    length=LENGTH,
)
def hausen_entry(x_star: float) -> float:
    """Mean Nu over the thermal entry of a tube at uniform wall temperature, 3.66 + 0.0668 Gz/(1 + 0.04 Gz^2/3).

    Within 5 % of Graetz's series from x* = 0.004, 12 % above it at 0.0005.
    """
    gz = 1.0 / x_star
    return 3.66 + 0.0668 * gz / (1.0 + 0.04 * gz ** (2.0 / 3.0))


@method(
    "tube entry",
    gives="mean Nu",
    ranges=(LAMINAR,),
    scatter=0.045,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where=TUBE_T,
    length=LENGTH,
)
def tube_entry(x_star: float) -> float:
    """Mean Nu over the thermal entry of a tube at uniform wall temperature (Shah and London's three branches)."""
    near = 1.615 * x_star**-THIRD
    early = where(x_star <= 0.005, near - 0.7, near - 0.2)
    return where(x_star < 0.03, early, 3.657 + 0.0499 / x_star)


@method(
    "tube entry, local",
    gives="local Nu",
    ranges=(LAMINAR,),
    scatter=0.011,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where=TUBE_T,
    length=LENGTH,
)
def tube_entry_local(x_star: float) -> float:
    """Local Nu in the thermal entry of a tube at uniform wall temperature (branches of Shah, joined at x* = 0.001)."""
    far = 3.657 + 6.874 * (1000.0 * x_star) ** -0.488 * exp(-57.2 * x_star)
    return where(x_star <= 0.001, 1.077 * x_star**-THIRD - 0.7, far)


@method(
    "plates entry",
    gives="mean Nu",
    ranges=(LAMINAR,),
    scatter=0.035,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where=PLATES_T,
    length=LENGTH,
)
def plates_entry(x_star: float) -> float:
    """Mean Nu over the thermal entry between plates, both at uniform temperature (Shah and London 1978)."""
    near = 1.849 * x_star**-THIRD
    early = where(x_star <= 0.0005, near, near + 0.6)
    return where(x_star <= 0.006, early, 7.541 + 0.0235 / x_star)


@method(
    "plates entry, local",
    gives="local Nu",
    ranges=(LAMINAR,),
    scatter=0.016,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where=PLATES_T,
    length=LENGTH,
)
def plates_entry_local(x_star: float) -> float:
    """Local Nu in the thermal entry between plates, both at uniform temperature (Shah and London 1978)."""
    far = 7.541 + 6.874 * (1000.0 * x_star) ** -0.488 * exp(-245.0 * x_star)
    return where(x_star <= 0.001, 1.233 * x_star**-THIRD + 0.4, far)


@method(
    "flux entry",
    gives="local Nu",
    ranges=(LAMINAR,),
    scatter=0.012,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where=BOTH_Q,
    length=LENGTH,
)
def flux_entry(x_star: float, section: str) -> float:
    """Local Nu at x* under uniform wall flux (Shah and London 1978, tube and plates with both walls heated)."""
    decay = 8.68 * (1000.0 * x_star) ** -0.506
    if section == "plates":
        near = 1.490 * x_star**-THIRD
        early = where(x_star <= 0.0002, near, near + 0.4)  # often printed −0.4; the series wants +0.4
        return where(x_star <= 0.001, early, 8.235 + decay * exp(-164.0 * x_star))
    near = 1.302 * x_star**-THIRD
    early = where(x_star <= 0.00005, near - 1.0, near - 0.5)
    return where(x_star <= 0.0015, early, 4.364 + decay * exp(-41.0 * x_star))


@method(
    "flux entry, mean",
    gives="mean Nu",
    ranges=(LAMINAR,),
    scatter=0.03,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where=BOTH_Q,
    length=LENGTH,
)
def flux_entry_mean(x_star: float, section: str) -> float:
    """Mean Nu from the inlet to x* under uniform wall flux (Shah and London 1978, tube, plates both heated)."""
    if section == "plates":
        near = 2.236 * x_star**-THIRD
        early = where(x_star <= 0.001, near, near + 0.9)
        return where(x_star < 0.01, early, 8.235 + 0.0364 / x_star)
    return where(x_star < 0.03, 1.953 * x_star**-THIRD, 4.364 + 0.0722 / x_star)


@method(
    "Lévêque",
    gives="mean Nu",
    ranges=(LAMINAR, Range("x*", high=0.001)),
    scatter=0.08,
    property_temperature="mean bulk",
    source="leveque-1928",
    flows=("duct",),
    where=TUBE_T,
    length=LENGTH,
)
def leveque(x_star: float) -> float:
    """Mean Nu of the earliest thermal entry of a tube, 1.615 Gz^1/3: a thin layer in a straight velocity profile."""
    return 1.615 * x_star**-THIRD


@method(
    "Sieder-Tate laminar",
    gives="mean Nu",
    ranges=(LAMINAR, Range("x*", high=0.125), Range("Pr", 0.48, 16700.0), Range("viscosity ratio", 0.0044, 9.75)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="sieder-tate-1936",
    flows=("duct",),
    where=TUBE_T,
    length=LENGTH,
)
def sieder_tate_laminar(x_star: float, viscosity_ratio: float = 1.0) -> float:
    """Mean Nu of a tube, 1.86 Gz^1/3 (μ/μw)^0.14, where that is 3.7 or more (x* to 0.125)."""
    return 1.86 * x_star**-THIRD * viscosity_ratio**0.14


@method(
    "Churchill-Ozoe entry",
    gives="local Nu",
    ranges=(LAMINAR,),
    scatter=0.095,
    property_temperature="mean bulk",
    source="churchill-ozoe-1973-tube",
    flows=("duct",),
    where={**TUBE_T, "wall": ("temperature", "flux")},
    length=LENGTH,
)
def churchill_ozoe_entry(x_star: float, wall: str) -> float:
    """Local Nu in the thermal entry of a tube, either wall condition, in one expression for all x*."""
    if wall == "flux":
        return 5.364 * (1.0 + (70.02817496043394 * x_star) ** (-10.0 / 9.0)) ** 0.3 - 1.0
    return 5.357 * (1.0 + (123.50423583931078 * x_star) ** (-8.0 / 9.0)) ** 0.375 - 1.7


@method(
    "Gnielinski laminar",
    gives="mean Nu",
    ranges=(LAMINAR,),
    scatter=0.05,
    property_temperature="mean bulk",
    source="gnielinski-2010",
    flows=("duct",),
    where=TUBE_T,
    length=LENGTH,
)
def gnielinski_laminar(x_star: float) -> float:
    """Mean Nu of a tube, (3.66³ + 0.7³ + (1.615 Gz^1/3 − 0.7)³)^1/3, uniform wall temperature."""
    return (3.66**3 + 0.7**3 + (1.615 * x_star**-THIRD - 0.7) ** 3) ** THIRD


@method(
    "Gnielinski laminar, flux",
    gives="local Nu",
    ranges=(LAMINAR,),
    scatter=0.05,
    property_temperature="mean bulk",
    source="gnielinski-2010",
    flows=("duct",),
    where=TUBE_Q,
    length=LENGTH,
)
def gnielinski_laminar_flux(x_star: float) -> float:
    """Local Nu of a tube, (4.364³ + 1 + (1.302 Gz^1/3 − 1)³)^1/3, uniform flux."""
    return (4.364**3 + 1.0 + (1.302 * x_star**-THIRD - 1.0) ** 3) ** THIRD
