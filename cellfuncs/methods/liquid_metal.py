"""Liquid metals in turbulent tubes: molecular conduction carries much of the heat, Nu depends on Pe = Re·Pr."""

from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LENGTH

LIQUID_METAL_PRANDTL = 0.1
TUBE = {"section": ("tube",), "shape": ("straight",)}
TEMPERATURE, FLUX = {**TUBE, "wall": ("temperature",)}, {**TUBE, "wall": ("flux",)}
PECLET = Range("Pe", 100.0, 1e4)
METAL = Range("Pr", 0.003, LIQUID_METAL_PRANDTL)
LONG = Range("L/D", low=60.0)


@method(
    "Lyon",
    gives="mean Nu",
    ranges=(PECLET, METAL, LONG),
    scatter=0.25,
    property_temperature="mean bulk",
    source="lyon-1951",
    flows=("duct",),
    where=FLUX,
    length=LENGTH,
)
def lyon(peclet: float) -> float:
    """Nu of a liquid metal at uniform flux, 7 + 0.025 Pe^0.8; measured values lie lower rather than higher."""
    return 7.0 + 0.025 * peclet**0.8


@method(
    "Seban-Shimazaki",
    gives="mean Nu",
    ranges=(PECLET, METAL, LONG),
    scatter=0.25,
    property_temperature="mean bulk",
    source="seban-shimazaki-1951",
    flows=("duct",),
    where=TEMPERATURE,
    length=LENGTH,
)
def seban_shimazaki(peclet: float) -> float:
    """Nu of a liquid metal at uniform wall temperature, 5 + 0.025 Pe^0.8."""
    return 5.0 + 0.025 * peclet**0.8


@method(
    "Skupinski",
    gives="mean Nu",
    ranges=(PECLET, Range("Re", 3600.0, 9.05e5), Range("Pr", 0.003, 0.05), LONG),
    scatter=0.2,
    property_temperature="mean bulk",
    source="skupinski-1965",
    flows=("duct",),
    where=FLUX,
    length=LENGTH,
)
def skupinski(peclet: float) -> float:
    """Nu of a liquid metal at uniform flux, 4.82 + 0.0185 Pe^0.827, measured with sodium-potassium."""
    return 4.82 + 0.0185 * peclet**0.827


@method(
    "Lubarsky-Kaufman",
    gives="mean Nu",
    ranges=(PECLET, Range("Re", 1e4, 1e5), METAL, LONG),
    scatter=0.4,
    property_temperature="mean bulk",
    source="lubarsky-kaufman-1955",
    flows=("duct",),
    where=FLUX,
    length=LENGTH,
)
def lubarsky_kaufman(peclet: float) -> float:
    """Nu of a liquid metal at uniform flux, 0.625 Pe^0.4, a mean through measurements of many laboratories."""
    return 0.625 * peclet**0.4


NOTTER_SLEICHER = (Range("Re", 1e4, 1e6), Range("Pr", 0.004, 0.1), LONG)


@method(
    "Notter-Sleicher, temperature",
    gives="mean Nu",
    ranges=NOTTER_SLEICHER,
    scatter=0.15,
    property_temperature="mean bulk",
    source="notter-sleicher-1972",
    flows=("duct",),
    where=TEMPERATURE,
    length=LENGTH,
)
def notter_sleicher_temperature(reynolds: float, prandtl: float) -> float:
    """Nu of a liquid metal at uniform wall temperature, 4.8 + 0.0156 Re^0.85 Pr^0.93."""
    return 4.8 + 0.0156 * reynolds**0.85 * prandtl**0.93


@method(
    "Notter-Sleicher, flux",
    gives="mean Nu",
    ranges=NOTTER_SLEICHER,
    scatter=0.15,
    property_temperature="mean bulk",
    source="notter-sleicher-1972",
    flows=("duct",),
    where=FLUX,
    length=LENGTH,
)
def notter_sleicher_flux(reynolds: float, prandtl: float) -> float:
    """Nu of a liquid metal at uniform flux, 6.3 + 0.0167 Re^0.85 Pr^0.93."""
    return 6.3 + 0.0167 * reynolds**0.85 * prandtl**0.93


CHEN_CHIOU = (Range("Re", 1e4, 5e6), Range("Pr", 0.0001, 0.1), LONG)


@method(
    "Chen-Chiou, temperature",
    gives="mean Nu",
    ranges=CHEN_CHIOU,
    scatter=0.15,
    property_temperature="mean bulk",
    source="chen-chiou-1981",
    flows=("duct",),
    where=TEMPERATURE,
    length=LENGTH,
)
def chen_chiou_temperature(reynolds: float, prandtl: float) -> float:
    """Nu of a liquid metal at uniform wall temperature, 4.5 + 0.0156 Re^0.85 Pr^0.86."""
    return 4.5 + 0.0156 * reynolds**0.85 * prandtl**0.86


@method(
    "Chen-Chiou, flux",
    gives="mean Nu",
    ranges=CHEN_CHIOU,
    scatter=0.15,
    property_temperature="mean bulk",
    source="chen-chiou-1981",
    flows=("duct",),
    where=FLUX,
    length=LENGTH,
)
def chen_chiou_flux(reynolds: float, prandtl: float) -> float:
    """Nu of a liquid metal at uniform flux, 5.6 + 0.0165 Re^0.85 Pr^0.86."""
    return 5.6 + 0.0165 * reynolds**0.85 * prandtl**0.86
