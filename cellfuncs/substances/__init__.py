"""Substances: properties of fluids, solutions, moist air, oils, metals, solids and melts, with source, range and phase.

All numbers are plain SI floats. A newcomer's map: ``names`` finds a substance from its name, ``properties``
lists what can be asked for; ``fluids`` (with ``saturation`` and ``state``) holds pure fluids, ``solutions``
liquids and solutions, ``moist`` moist air, ``oils`` mineral oils. ``relations`` holds what depends on temperature
alone: ``solids``, ``liquid_metals``, ``polymers`` and the user's own tables (``user_table``). ``additions`` fills
gaps that CoolProp leaves. ``base`` says what every substance can do, ``engine`` is the one door to CoolProp.
"""

from .base import ATMOSPHERE, Limits, Substance
from .moist import moist_air
from .names import find, names
from .oils import oil_viscosity, viscosity_index
from .properties import MOIST_AIR, PROPERTIES, Property, property_key
from .user_table import from_table

__all__ = [
    "ATMOSPHERE",
    "MOIST_AIR",
    "PROPERTIES",
    "Limits",
    "Property",
    "Substance",
    "find",
    "from_table",
    "moist_air",
    "names",
    "oil_viscosity",
    "property_key",
    "viscosity_index",
]
