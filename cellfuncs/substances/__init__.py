"""Substances: properties of fluids, solutions, moist air and oils, with source, range and phase.

All numbers are plain SI floats. A newcomer's map: ``names`` finds a substance from its name; ``fluids`` holds pure
fluids, ``properties`` the list of what can be asked for.
"""

from .base import ATMOSPHERE, Limits, Substance
from .names import find, names
from .properties import MOIST_AIR, PROPERTIES, Property, property_key

__all__ = [
    "ATMOSPHERE",
    "MOIST_AIR",
    "PROPERTIES",
    "Limits",
    "Property",
    "Substance",
    "find",
    "names",
    "property_key",
]
