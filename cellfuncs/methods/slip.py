"""Laminar gas flow in small channels with slip and a temperature jump at the wall, Kn on the hydraulic diameter."""

from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR, LENGTH
from cellfuncs.methods.friction import STRAIGHT

SLIP = Range("Kn", 0.0, 0.1)
SECTIONS = {"section": ("tube", "plates"), "phase": ("gas",), **STRAIGHT}
# slip velocity over the mean of what is left, for Kn on the hydraulic diameter
_SLIP = {"tube": 8.0, "plates": 12.0}


@method(
    "slip friction",
    gives="Darcy friction factor",
    ranges=(LAMINAR, SLIP, Range("σ", 0.1, 1.0)),
    scatter=0.05,
    property_temperature="mean bulk",
    source="ebadian-dong-1998",
    flows=("duct",),
    where=SECTIONS,
    length=LENGTH,
)
def slip_friction(reynolds: float, knudsen: float, section: str, accommodation: float = 1.0) -> float:
    """f of a developed gas flow with first-order slip: 64/(1 + 8 Kn (2 − σ)/σ)/Re, plates 96 and 12 Kn."""
    slip = _SLIP[section] * knudsen * (2.0 - accommodation) / accommodation
    return (96.0 if section == "plates" else 64.0) / (reynolds * (1.0 + slip))


@method(
    "slip flow, flux",
    gives="mean Nu",
    ranges=(LAMINAR, SLIP, Range("x*", low=0.05), Range("σ", 0.1, 1.0), Range("σT", 0.1, 1.0)),
    scatter=0.05,
    property_temperature="mean bulk",
    source="sparrow-lin-1962;inman-1964",
    flows=("duct",),
    where={"wall": ("flux",), "heated": ("both",), **SECTIONS},
    length=LENGTH,
)
def slip_flux(
    knudsen: float,
    prandtl: float,
    section: str,
    accommodation: float = 1.0,
    thermal_accommodation: float = 1.0,
    heat_capacity_ratio: float = 1.4,
) -> float:
    """Nu of developed flow at uniform flux with slip and jump; 48/11 and 140/17 without (all walls heated)."""
    slip = _SLIP[section] * knudsen * (2.0 - accommodation) / accommodation
    part = slip / (1.0 + slip)  # of the mean velocity
    jump = (2.0 - thermal_accommodation) / thermal_accommodation
    jump = jump * 2.0 * heat_capacity_ratio / (heat_capacity_ratio + 1.0) * knudsen / prandtl
    if section == "plates":
        return 1.0 / ((17.0 - 6.0 * part + 2.0 / 3.0 * part**2) / 140.0 + jump)
    return 1.0 / ((11.0 - 6.0 * part + part**2) / 48.0 + jump)
