"""Friction in helically coiled tubes, smooth and rough. f is Darcy's, De = Re·√(d/Dc)."""

from cellfuncs.methods.algebra import larger, log10, sqrt, where
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.coil import COIL, CURVATURE, LENGTH
from cellfuncs.methods.friction import ROUGHNESS, blasius, colebrook_white


@method(
    "White coil",
    gives="Darcy friction factor",
    ranges=(Range("De", 11.6, 2000.0), CURVATURE),
    scatter=0.05,
    property_temperature="mean bulk",
    source="white-1929",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def white(reynolds: float, curvature: float) -> float:
    """f of laminar flow in a coil, 64/Re over 1 − (1 − (11.6/De)^0.45)^2.2; 64/Re below De 11.6."""
    bent = larger(0.0, 1.0 - (11.6 / (reynolds * sqrt(curvature))) ** 0.45)
    return 64.0 / reynolds / (1.0 - bent ** (1.0 / 0.45))


@method(
    "Itō coil, laminar",
    gives="Darcy friction factor",
    ranges=(Range("De", 13.5, 2000.0), CURVATURE),
    scatter=0.05,
    property_temperature="mean bulk",
    source="ito-1959",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def ito_laminar(reynolds: float, curvature: float) -> float:
    """f of laminar flow in a coil, 64/Re · 21.5 De/(1.56 + log10 De)^5.73."""
    dean = reynolds * sqrt(curvature)
    return 64.0 / reynolds * 21.5 * dean / (1.56 + log10(dean)) ** 5.73


@method(
    "Mishra-Gupta coil, laminar",
    gives="Darcy friction factor",
    ranges=(Range("De", 1.0, 3000.0), Range("d/Dc", 0.003, 0.15)),
    scatter=0.07,
    property_temperature="mean bulk",
    source="mishra-gupta-1979",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def mishra_gupta_laminar(reynolds: float, curvature: float) -> float:
    """f of laminar flow in a coil, 64/Re · (1 + 0.033 (log10 De)^4)."""
    return 64.0 / reynolds * (1.0 + 0.033 * log10(reynolds * sqrt(curvature)) ** 4)


@method(
    "Manlapaz-Churchill coil, friction",
    gives="Darcy friction factor",
    ranges=(Range("Re", high=2e4), Range("De", high=2000.0), CURVATURE),
    scatter=0.05,
    property_temperature="mean bulk",
    source="manlapaz-churchill-1980",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def manlapaz_churchill_friction(reynolds: float, curvature: float) -> float:
    """f of laminar flow in a coil of any De; the power m falls from 2 (De to 20) over 1 to 0 (from 40)."""
    dean = reynolds * sqrt(curvature)
    m = where(dean < 20.0, 2.0, where(dean <= 40.0, 1.0, 0.0))
    slow = (1.0 - 0.18 / sqrt(1.0 + (35.0 / dean) ** 2)) ** m
    return 64.0 / reynolds * sqrt(slow + (1.0 + curvature / 3.0) ** 2 * dean / 88.33)


@method(
    "Itō coil, turbulent",
    gives="Darcy friction factor",
    ranges=(Range("Re", 6000.0, 1e6), Range("d/Dc", 1.0 / 860.0, 1.0 / 15.0)),
    scatter=0.03,
    property_temperature="mean bulk",
    source="ito-1959",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def ito_turbulent(reynolds: float, curvature: float) -> float:
    """f of turbulent flow in a smooth coil, 0.304 Re^−1/4 + 0.029 (d/Dc)^1/2 (Re (d/Dc)² from 0.034 to 300)."""
    return 0.304 * reynolds**-0.25 + 0.029 * sqrt(curvature)


@method(
    "Mishra-Gupta coil, turbulent",
    gives="Darcy friction factor",
    ranges=(Range("Re", 4500.0, 1e5), Range("d/Dc", 0.003, 0.15)),
    scatter=0.07,
    property_temperature="mean bulk",
    source="mishra-gupta-1979",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
)
def mishra_gupta_turbulent(reynolds: float, curvature: float) -> float:
    """f of turbulent flow in a smooth coil, Blasius' 0.3164 Re^−1/4 and 0.03 (d/Dc)^1/2 added."""
    return blasius(reynolds) + 0.03 * sqrt(curvature)


@method(
    "rough coil",
    gives="Darcy friction factor",
    ranges=(Range("Re", 1e4, 1e7), Range("d/Dc", 0.003, 0.15), ROUGHNESS),
    scatter=0.2,
    property_temperature="mean bulk",
    source="mishra-gupta-1979;colebrook-1939",
    flows=("duct",),
    where=COIL,
    length=LENGTH,
    warning="common practice: the coil's addition was measured on smooth walls",
)
def rough_coil(reynolds: float, curvature: float, relative_roughness: float) -> float:
    """f of turbulent flow in a rough coil: Colebrook-White of the straight tube and 0.03 (d/Dc)^1/2 added."""
    return colebrook_white(reynolds, relative_roughness) + 0.03 * sqrt(curvature)
