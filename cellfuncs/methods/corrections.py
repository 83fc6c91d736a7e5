"""What the change of properties across the stream does to Nu and f: factors on the constant-property value.

Liquids by the viscosity ratio (stream over wall) or the Prandtl ratio, gases by the absolute temperature ratio (wall
over stream). All other properties are those at the mean bulk temperature. A heated liquid has a viscosity ratio above
1, a heated gas a temperature ratio above 1, so that the ratio itself says which exponent counts.
"""

from cellfuncs.methods.algebra import where
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR

TURBULENT = Range("Re", 4000.0, 1e6)
LIQUID, GAS = {"phase": ("liquid",)}, {"phase": ("gas",)}


@method(
    "viscosity correction of laminar Nu",
    gives="factor",
    ranges=(LAMINAR, Range("viscosity ratio", 0.0044, 9.75)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="sieder-tate-1936;ebadian-dong-1998",
    flows=("duct",),
    where=LIQUID,
)
def laminar_liquid(viscosity_ratio: float) -> float:
    """Nu of a laminar liquid over its constant-property value, (μ/μw)^0.14."""
    return viscosity_ratio**0.14


@method(
    "viscosity correction of laminar friction",
    gives="factor",
    ranges=(LAMINAR, Range("viscosity ratio", 0.1, 10.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="ebadian-dong-1998",
    flows=("duct",),
    where=LIQUID,
)
def laminar_liquid_friction(viscosity_ratio: float) -> float:
    """f of a laminar liquid over its constant-property value, (μ/μw)^−0.58 heated, ^−0.50 cooled."""
    return viscosity_ratio ** where(viscosity_ratio > 1.0, -0.58, -0.50)


@method(
    "viscosity correction of turbulent Nu",
    gives="factor",
    ranges=(TURBULENT, Range("viscosity ratio", 0.025, 12.5), Range("Pr", 2.0, 140.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="petukhov-1970",
    flows=("duct",),
    where=LIQUID,
)
def turbulent_liquid(viscosity_ratio: float) -> float:
    """Nu of a turbulent liquid over its constant-property value, (μ/μw)^0.11 heated, ^0.25 cooled."""
    return viscosity_ratio ** where(viscosity_ratio > 1.0, 0.11, 0.25)


@method(
    "viscosity correction of turbulent friction",
    gives="factor",
    ranges=(TURBULENT, Range("viscosity ratio", 0.5, 2.85), Range("Pr", 1.3, 10.0)),
    scatter=0.05,
    property_temperature="mean bulk",
    source="petukhov-1970",
    flows=("duct",),
    where=LIQUID,
)
def turbulent_liquid_friction(viscosity_ratio: float) -> float:
    """f of a turbulent liquid over its constant-property value, (7 − μ/μw)/6 heated, (μ/μw)^−0.24 cooled."""
    return where(viscosity_ratio > 1.0, (7.0 - viscosity_ratio) / 6.0, viscosity_ratio**-0.24)


@method(
    "Prandtl correction of Nu",
    gives="factor",
    ranges=(Range("Pr/Prw", 0.1, 10.0),),
    scatter=0.05,
    property_temperature="mean bulk",
    source="gnielinski-2010",
    flows=("duct",),
    where=LIQUID,
)
def prandtl_correction(prandtl_ratio: float) -> float:
    """Nu of a liquid, laminar or turbulent, over its constant-property value, (Pr/Prw)^0.11."""
    return prandtl_ratio**0.11


@method(
    "temperature correction of laminar friction",
    gives="factor",
    ranges=(LAMINAR, Range("Tw/Tb", 0.5, 3.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="ebadian-dong-1998",
    flows=("duct",),
    where=GAS,
)
def laminar_gas_friction(temperature_ratio: float) -> float:
    """f of a laminar gas over its constant-property value, (Tw/Tb)^1 heated, ^0.81 cooled; Nu keeps its value."""
    return temperature_ratio ** where(temperature_ratio > 1.0, 1.0, 0.81)


@method(
    "temperature correction of turbulent Nu",
    gives="factor",
    ranges=(TURBULENT, Range("Tw/Tb", 0.37, 5.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="ebadian-dong-1998",
    flows=("duct",),
    where=GAS,
)
def turbulent_gas(temperature_ratio: float) -> float:
    """Nu of a turbulent gas over its constant-property value, (Tw/Tb)^−0.5 heated, 1 cooled (Kays)."""
    return temperature_ratio ** where(temperature_ratio > 1.0, -0.5, 0.0)


@method(
    "Gnielinski temperature correction of Nu",
    gives="factor",
    ranges=(TURBULENT, Range("Tw/Tb", 0.5, 2.0)),
    scatter=0.1,
    property_temperature="mean bulk",
    source="gnielinski-2010",
    flows=("duct",),
    where=GAS,
)
def turbulent_gas_gnielinski(temperature_ratio: float) -> float:
    """Nu of a turbulent gas over its constant-property value, (Tb/Tw)^0.45 heated, 1 cooled."""
    return temperature_ratio ** where(temperature_ratio > 1.0, -0.45, 0.0)


@method(
    "temperature correction of turbulent friction",
    gives="factor",
    ranges=(TURBULENT, Range("Tw/Tb", 0.37, 5.0)),
    scatter=0.05,
    property_temperature="mean bulk",
    source="ebadian-dong-1998",
    flows=("duct",),
    where=GAS,
)
def turbulent_gas_friction(temperature_ratio: float) -> float:
    """f of a turbulent gas over its constant-property value, (Tw/Tb)^−0.1."""
    return temperature_ratio**-0.1
