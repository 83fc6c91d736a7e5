"""Rows such as ``viscosity at 40 degC | 46 | mPa s``: together a table of the user's own."""

import re
from collections.abc import Iterable
from functools import cache
from typing import Any, NamedTuple

from cellfuncs import quantities, substances
from cellfuncs.cases import labels
from cellfuncs.errors import CaseRefused, CellfuncsError

_AT = re.compile(r"^(?P<name>.+?)\s+(?:at|@)\s+(?P<temperature>.*\d.*)$", re.IGNORECASE)

# label of a block -> property of a table
PROPERTY_OF = {
    "density": "density",
    "viscosity": "viscosity",
    "kinematic_viscosity": "kinematic_viscosity",
    "conductivity": "conductivity",
    "specific_heat": "specific_heat",
    "expansion": "expansion_coefficient",
    "surface_tension": "surface_tension",
    "vapour_pressure": "saturation_pressure",
}


class Point(NamedTuple):
    """One property at one temperature, SI."""

    key: str
    temperature: float
    value: float
    label: str


@cache
def split_temperature(label: str) -> tuple[str, float] | None:
    """``viscosity at 40 degC`` -> ``viscosity``, 313.15; None for a label that says no temperature."""
    found = _AT.match(label.strip().rstrip(":"))
    if not found:
        return None
    try:
        return found["name"], quantities.read_quantity(found["temperature"], "temperature")
    except CellfuncsError:
        return None


def property_key(name: str) -> str | None:
    """The label that a table may hold, by the name before ``at``; None for any other."""
    keys = [key for key in labels.candidates(name) if key in PROPERTY_OF]
    return keys[0] if keys else None


def substance_of(points: Iterable[Point]) -> Any:
    """The table that the points of a block make, interpolated and never extrapolated; refused where it is none."""
    columns: dict[str, dict[float, float]] = {}
    for point in points:
        column = columns.setdefault(PROPERTY_OF[point.key], {})
        if point.temperature in column:
            raise CaseRefused(f'"{point.label}" is stated twice; keep one')
        column[point.temperature] = point.value
    temperatures = sorted({t for column in columns.values() for t in column})
    tabled = {key: [column.get(t) for t in temperatures] for key, column in columns.items()}
    try:
        return substances.from_table(temperatures, tabled, "the table of the block")
    except CellfuncsError as error:
        raise CaseRefused(f"properties at temperatures: {error}") from None
