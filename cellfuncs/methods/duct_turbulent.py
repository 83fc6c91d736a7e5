"""Heat transfer in turbulent duct flow, smooth walls or any wall by its friction factor.

Nu on the hydraulic diameter, properties at the mean bulk temperature unless said. Property-ratio corrections stand in
``corrections.py``. f is Darcy's. All but Gnielinski's are for smooth walls; his is used in practice with the friction
of a rough wall too, which claims too much where the wall is fully rough (``duct_rough.py``).
"""

from cellfuncs.methods.algebra import exp, sqrt
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LENGTH, friction_times_re
from cellfuncs.methods.friction import konakov

TURBULENT_FROM = 4000.0
STRAIGHT = {"shape": ("straight",)}
TURBULENT = Range("Re", 1e4, 5e6)
SMOOTH = Range("Reε", 0.0, 0.5)  # the friction of a made wall is 4 % above a smooth one's there
LONG = Range("L/D", low=100.0)  # the entry adds less than 5 % to the mean
THIRD, TWO_THIRDS = 1.0 / 3.0, 2.0 / 3.0


@method(
    "Gnielinski",
    gives="mean Nu",
    ranges=(Range("Re", TURBULENT_FROM, 5e6), Range("Pr", 0.5, 2000.0), Range("L/D", low=1.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="gnielinski-1976",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def gnielinski(reynolds: float, prandtl: float, friction: float, diameter_over_length: float = 0.0) -> float:
    """Nu of turbulent duct flow, (f/8)(Re−1000)Pr/(1+12.7√(f/8)(Pr^2/3−1))·(1+(D/L)^2/3)."""
    eighth = friction / 8.0
    developed = eighth * (reynolds - 1000.0) * prandtl / (1.0 + 12.7 * sqrt(eighth) * (prandtl**TWO_THIRDS - 1.0))
    return developed * (1.0 + diameter_over_length**TWO_THIRDS)


@method(
    "Petukhov-Kirillov",
    gives="mean Nu",
    ranges=(TURBULENT, Range("Pr", 0.5, 2000.0), LONG, SMOOTH),
    scatter=0.1,
    property_temperature="mean bulk",
    source="petukhov-kirillov-1958;petukhov-1970",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def petukhov_kirillov(reynolds: float, prandtl: float, friction: float) -> float:
    """Nu of developed turbulent flow, (f/8) Re Pr/(1.07 + 12.7 √(f/8) (Pr^2/3 − 1)); 6 % up to Pr 200."""
    eighth = friction / 8.0
    return eighth * reynolds * prandtl / (1.07 + 12.7 * sqrt(eighth) * (prandtl**TWO_THIRDS - 1.0))


@method(
    "Petukhov-Popov",
    gives="mean Nu",
    ranges=(TURBULENT, Range("Pr", 0.5, 200.0), LONG, SMOOTH),
    scatter=0.06,
    property_temperature="mean bulk",
    source="petukhov-popov-1963;bhatti-shah-1987",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def petukhov_popov(reynolds: float, prandtl: float, friction: float) -> float:
    """Nu of developed turbulent flow, as Petukhov-Kirillov with 1.07 + 900/Re − 0.63/(1 + 10 Pr) for 1.07."""
    eighth = friction / 8.0
    lead = 1.07 + 900.0 / reynolds - 0.63 / (1.0 + 10.0 * prandtl)
    return eighth * reynolds * prandtl / (lead + 12.7 * sqrt(eighth) * (prandtl**TWO_THIRDS - 1.0))


def _power_law(lead: float, reynolds: float, prandtl: float, power: float) -> float:
    return lead * reynolds**0.8 * prandtl**power


@method(
    "Dittus-Boelter, heating",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1.2e5), Range("Pr", 0.7, 120.0), Range("L/D", low=60.0), SMOOTH),
    scatter=0.25,
    property_temperature="mean bulk",
    source="dittus-boelter-1930;mcadams-1954",
    flows=("duct",),
    where={"heating": ("heating",), **STRAIGHT},
    length=LENGTH,
)
def dittus_boelter_heating(reynolds: float, prandtl: float) -> float:
    """Nu of a heated turbulent stream at moderate temperature differences, 0.023 Re^0.8 Pr^0.4."""
    return _power_law(0.023, reynolds, prandtl, 0.4)


@method(
    "Dittus-Boelter, cooling",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1.2e5), Range("Pr", 0.7, 120.0), Range("L/D", low=60.0), SMOOTH),
    scatter=0.25,
    property_temperature="mean bulk",
    source="dittus-boelter-1930;mcadams-1954",
    flows=("duct",),
    where={"heating": ("cooling",), **STRAIGHT},
    length=LENGTH,
)
def dittus_boelter_cooling(reynolds: float, prandtl: float) -> float:
    """Nu of a cooled turbulent stream at moderate temperature differences, 0.023 Re^0.8 Pr^0.3."""
    return _power_law(0.023, reynolds, prandtl, 0.3)


@method(
    "Colburn",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1e6), Range("Pr", 0.7, 160.0), Range("L/D", low=60.0), SMOOTH),
    scatter=0.25,
    property_temperature="film",
    source="colburn-1933",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def colburn(reynolds: float, prandtl: float) -> float:
    """Nu of a turbulent stream, 0.023 Re^0.8 Pr^1/3, viscosity and Pr at the film temperature."""
    return _power_law(0.023, reynolds, prandtl, THIRD)


@method(
    "Sieder-Tate turbulent",
    gives="mean Nu",
    ranges=(
        Range("Re", 1e4, 5e6),
        Range("Pr", 0.7, 16700.0),
        Range("viscosity ratio", 0.0044, 9.75),
        Range("L/D", low=60.0),
        SMOOTH,
    ),
    scatter=0.25,
    property_temperature="mean bulk",
    source="sieder-tate-1936",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def sieder_tate_turbulent(reynolds: float, prandtl: float, viscosity_ratio: float = 1.0) -> float:
    """Nu of a turbulent stream whose viscosity changes much, 0.027 Re^0.8 Pr^1/3 (μ/μw)^0.14."""
    return _power_law(0.027, reynolds, prandtl, THIRD) * viscosity_ratio**0.14


@method(
    "gas in a tube",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1e6), Range("Pr", 0.5, 1.0), LONG, SMOOTH),
    scatter=0.1,
    property_temperature="mean bulk",
    source="ebadian-dong-1998",
    flows=("duct",),
    where={"phase": ("gas",), **STRAIGHT},
    length=LENGTH,
)
def gas_in_tube(reynolds: float, prandtl: float, wall: str) -> float:
    """Nu of a turbulent gas stream, 0.022 Re^0.8 Pr^0.5 at uniform flux, 0.021 at uniform wall temperature (Kays)."""
    return _power_law(0.022 if wall == "flux" else 0.021, reynolds, prandtl, 0.5)


@method(
    "Sleicher-Rouse",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1e6), Range("Pr", 0.1, 1e5), LONG, SMOOTH),
    scatter=0.1,
    property_temperature="mean bulk",
    source="sleicher-rouse-1975;notter-sleicher-1972",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def sleicher_rouse(reynolds: float, prandtl: float) -> float:
    """Nu of developed turbulent flow, 5 + 0.015 Re^a Pr^b, a = 0.88 − 0.24/(4+Pr), b = 1/3 + 0.5 exp(−0.6 Pr).

    With large temperature differences Re is meant at the film and Pr at the wall temperature.
    """
    a = 0.88 - 0.24 / (4.0 + prandtl)
    b = THIRD + 0.5 * exp(-0.6 * prandtl)
    return 5.0 + 0.015 * reynolds**a * prandtl**b


@method(
    "Gnielinski annulus",
    gives="mean Nu",
    ranges=(
        Range("Re", TURBULENT_FROM, 1e6),
        Range("Pr", 0.5, 1000.0),
        Range("L/D", low=1.0),
        Range("ratio", 0.01, 1.0),
    ),
    scatter=0.15,
    property_temperature="mean bulk",
    source="gnielinski-2009",
    flows=("duct",),
    where={"section": ("annulus",), "heated": ("inner", "outer"), **STRAIGHT},
    length=LENGTH,
)
def gnielinski_annulus(
    reynolds: float, prandtl: float, ratio: float, heated: str, diameter_over_length: float = 0.0
) -> float:
    """Nu of turbulent flow in an annulus, one wall heated; friction by its own Re*, factors of the heated wall."""
    equivalent = reynolds * 64.0 / friction_times_re("annulus", ratio)
    eighth = konakov(equivalent) / 8.0
    lead = 1.07 + 900.0 / reynolds - 0.63 / (1.0 + 10.0 * prandtl)
    factor = 0.75 * ratio**-0.17 if heated == "inner" else 0.9 - 0.15 * ratio**0.6
    developed = eighth * reynolds * prandtl / (lead + 12.7 * sqrt(eighth) * (prandtl**TWO_THIRDS - 1.0))
    return developed * (1.0 + diameter_over_length**TWO_THIRDS) * factor


@method(
    "Petukhov-Roizen",
    gives="factor",
    ranges=(Range("Re", 1e4, 1e6), Range("ratio", 0.07, 1.0), Range("Pr", 0.5, 100.0)),
    scatter=0.05,
    property_temperature="none",
    source="petukhov-roizen-1964",
    flows=("duct",),
    where={"section": ("annulus",), **STRAIGHT},
    length=LENGTH,
)
def petukhov_roizen(ratio: float, heated: str) -> float:
    """Nu of a turbulent annulus over that of a tube of its hydraulic diameter: inner, outer or both walls heated."""
    inner, outer = 0.86 * ratio**-0.16, 1.0 - 0.14 * ratio**0.6
    if heated == "both":
        return (inner * ratio + outer) / (1.0 + ratio)
    return inner if heated == "inner" else outer


@method(
    "turbulent entry",
    gives="factor",
    ranges=(Range("Re", TURBULENT_FROM, 5e6), Range("Pr", 0.5, 2000.0), Range("L/D", low=1.0)),
    scatter=0.1,
    property_temperature="none",
    source="gnielinski-1976;gnielinski-2010",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def turbulent_entry(diameter_over_length: float) -> float:
    """Mean Nu from the inlet over that of developed turbulent flow, 1 + (D/L)^2/3."""
    return 1.0 + diameter_over_length**TWO_THIRDS


@method(
    "turbulent entry, local",
    gives="factor",
    ranges=(Range("Re", TURBULENT_FROM, 5e6), Range("Pr", 0.5, 2000.0), Range("L/D", low=1.0)),
    scatter=0.1,
    property_temperature="none",
    source="gnielinski-2010",
    flows=("duct",),
    where=STRAIGHT,
    length=LENGTH,
)
def turbulent_entry_local(diameter_over_length: float) -> float:
    """Local Nu at a distance from the inlet over that of developed turbulent flow, 1 + (D/x)^2/3 / 3."""
    return 1.0 + diameter_over_length**TWO_THIRDS / 3.0
