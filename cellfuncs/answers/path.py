"""The heat path beyond the wall of a duct: overall coefficient from stream to surroundings.

1/U = 1/h + R_f + the wall + the insulation + the outside film, all on the inside surface.
"""

import math

from cellfuncs.cases.case import Case
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import CaseRefused


def overall(case: Case, shape: Duct, coefficient: float) -> float:
    """Overall coefficient U [W/(m2 K)] on the inside surface; the outside coefficient is needed."""
    layers = [
        _layer(case, "wall_thickness", "wall_conductivity"),
        _layer(case, "insulation_thickness", "insulation_conductivity"),
    ]
    outside = case.need("outside_coefficient")
    round_one = shape.section in ("tube", "other")
    resistance = 1.0 / coefficient + case.get("fouling", 0.0)
    radius = inner = shape.diameter / 2.0
    for thickness, conductivity in filter(None, layers):
        if round_one:
            resistance += inner * math.log((radius + thickness) / radius) / conductivity
            radius += thickness
        else:
            resistance += thickness / conductivity
    return 1.0 / (resistance + (inner / radius if round_one else 1.0) / outside)


def _layer(case: Case, thickness: str, conductivity: str) -> tuple[float, float] | None:
    """Thickness and conductivity of a layer, None where it is not stated; half a statement is refused."""
    if case.has(thickness) != case.has(conductivity):
        if thickness == "wall_thickness" and not case.has(thickness):
            return None
        case.need(thickness)
        case.need(conductivity)
    return (case.get(thickness), case.get(conductivity)) if case.has(thickness) else None


def refuse_without_ambient(case: Case) -> None:
    """A path without a temperature at its end would be ignored in silence."""
    for key in ("outside_coefficient", "insulation_thickness", "fouling"):
        if case.has(key) and not case.has("ambient_temperature"):
            raise CaseRefused(
                f'"{case.stated[key].label}" leads to the surroundings; add the row "outside temperature"'
            )
