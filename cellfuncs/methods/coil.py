"""Heat transfer in helically coiled tubes. De = Re·√(d/Dc), with the tube's inner and the coil's mean diameter.

Secondary flow keeps a coil laminar to higher Re than a straight tube; the transition Reynolds numbers are methods too.
"""

from cellfuncs.methods.algebra import sqrt, where
from cellfuncs.methods.base import Range, follows, method

LENGTH = "tube diameter"
COIL = {"section": ("tube",), "shape": ("coil",)}
CURVATURE = Range("d/Dc", 0.0012, 0.2)
THIRD = 1.0 / 3.0


@follows("De")
def dean_number(reynolds: float, curvature: float) -> float:
    """De = Re·√(d/Dc)."""
    return reynolds * sqrt(curvature)


@method(
    "Schmidt coil, transition",
    gives="transition Reynolds number",
    ranges=(Range("d/Dc", 0.0012, 0.2),),
    scatter=0.1,
    property_temperature="none",
    source="schmidt-1967;gnielinski-coil-1986",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def schmidt_transition(curvature: float) -> float:
    """Re up to which flow in a coil is laminar, 2300 (1 + 8.6 (d/Dc)^0.45)."""
    return 2300.0 * (1.0 + 8.6 * curvature**0.45)


@method(
    "Itō coil, transition",
    gives="transition Reynolds number",
    ranges=(Range("d/Dc", 1.0 / 860.0, 1.0 / 15.0),),
    scatter=0.1,
    property_temperature="none",
    source="ito-1959",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def ito_transition(curvature: float) -> float:
    """Re up to which flow in a coil is laminar, 20000 (d/Dc)^0.32."""
    return 2e4 * curvature**0.32


@method(
    "Manlapaz-Churchill coil",
    gives="mean Nu",
    ranges=(Range("Re", high=2e4), Range("De", high=2000.0), Range("Pr", low=0.1), CURVATURE),
    scatter=0.15,
    property_temperature="mean bulk",
    source="manlapaz-churchill-1981",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def manlapaz_churchill(reynolds: float, prandtl: float, curvature: float, wall: str) -> float:
    """Nu of developed laminar flow in a coil, either wall condition; the straight tube's value as De vanishes."""
    dean = reynolds * sqrt(curvature)
    if wall == "flux":
        straight = 4.364 + 4.636 / (1.0 + 1342.0 / (dean * dean * prandtl)) ** 2
        return (straight**3 + 1.816 * (dean / (1.0 + 1.15 / prandtl)) ** 1.5) ** THIRD
    straight = 3.657 + 4.343 / (1.0 + 957.0 / (dean * dean * prandtl)) ** 2
    return (straight**3 + 1.158 * (dean / (1.0 + 0.477 / prandtl)) ** 1.5) ** THIRD


@method(
    "Schmidt coil, laminar",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 2e4), CURVATURE),
    scatter=0.15,
    property_temperature="mean bulk",
    source="schmidt-1967;gnielinski-coil-1986",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def schmidt_laminar(reynolds: float, prandtl: float, curvature: float) -> float:
    """Nu of laminar flow in a coil, 3.66 + 0.08 (1 + 0.8 (d/Dc)^0.9) Re^m Pr^1/3, m = 0.5 + 0.2903 (d/Dc)^0.194."""
    m = 0.5 + 0.2903 * curvature**0.194
    return 3.66 + 0.08 * (1.0 + 0.8 * curvature**0.9) * reynolds**m * prandtl**THIRD


@method(
    "Schmidt coil, turbulent",
    gives="mean Nu",
    ranges=(Range("Re", 5000.0, 1.5e5), Range("Pr", 0.7, 100.0), CURVATURE),
    scatter=0.25,
    property_temperature="mean bulk",
    source="schmidt-1967",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def schmidt_turbulent(reynolds: float, prandtl: float, curvature: float) -> float:
    """Nu of turbulent flow in a coil: a power of Re that falls with d/Dc up to Re 22000, a factor beyond.

    It lies up to 30 % below Gnielinski's at Pr 10, as its straight tube's 0.023 Re^0.8 Pr^1/3 does.
    """
    power = 0.8 - 0.22 * curvature**0.1
    early = 0.023 * (1.0 + 14.8 * (1.0 + curvature) * curvature**THIRD) * reynolds**power
    late = 0.023 * (1.0 + 3.6 * (1.0 - curvature) * curvature**0.8) * reynolds**0.8
    return where(reynolds < 2.2e4, early, late) * prandtl**THIRD


@method(
    "Gnielinski coil, turbulent",
    gives="mean Nu",
    ranges=(Range("Re", 2.2e4, 1.5e5), Range("Pr", 0.7, 1000.0), CURVATURE),
    scatter=0.15,
    property_temperature="mean bulk",
    source="gnielinski-coil-1986",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def gnielinski_coil(reynolds: float, prandtl: float, curvature: float) -> float:
    """Nu of turbulent flow in a coil by Petukhov's form with the coil's friction 0.3164/Re^1/4 + 0.03 (d/Dc)^1/2."""
    eighth = (0.3164 * reynolds**-0.25 + 0.03 * sqrt(curvature)) / 8.0
    return eighth * reynolds * prandtl / (1.0 + 12.7 * sqrt(eighth) * (prandtl ** (2.0 / 3.0) - 1.0))


@method(
    "Rogers-Mayhew coil",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 1e5), Range("Pr", 0.7, 10.0), Range("d/Dc", 0.05, 0.1)),
    scatter=0.1,
    property_temperature="film",
    source="rogers-mayhew-1964",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def rogers_mayhew(reynolds: float, prandtl: float, curvature: float) -> float:
    """Nu of turbulent flow in a coil, 0.021 Re^0.85 Pr^0.4 (d/Dc)^0.1, properties at the film temperature."""
    return 0.021 * reynolds**0.85 * prandtl**0.4 * curvature**0.1
