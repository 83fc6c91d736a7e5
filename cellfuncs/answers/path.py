"""The heat path beyond a wall: from the surface that the stream wets to a stated temperature on the other side.

1/U = 1/h + R_f + the wall + the insulation + the film on the far side, all on the wetted surface. A duct has its path
outwards (wall, then insulation); a body in a stream inwards (insulation, then wall).
"""

import math

from cellfuncs.cases.case import Case
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import CaseRefused

_OUTWARDS = {"temperature": "ambient_temperature", "coefficient": "outside_coefficient"}
_INWARDS = {"temperature": "beyond_temperature", "coefficient": "beyond_coefficient"}


def far_temperature(case: Case) -> float | None:
    """The temperature at the other end of the path [K], or None where no path is stated."""
    return case.get(_ends(case)["temperature"])


def overall(case: Case, shape: Duct, coefficient: float) -> float:
    """Overall coefficient U [W/(m2 K)] of a duct, a bank or a film on the surface that the stream wets."""
    return 1.0 / (1.0 / coefficient + duct_resistance(case, shape))


def duct_resistance(case: Case, shape: Duct) -> float:
    """Resistance beyond the surface that the stream of a duct, a bank or a film wets [m2 K/W]."""
    round_one = case.flow == "bank" or (case.flow == "duct" and shape.section in ("tube", "other"))
    return resistance(case, "cylinder" if round_one else "plane", shape.diameter / 2.0)


def resistance(case: Case, form: str, radius: float = math.inf) -> float:
    """Resistance of the path [m2 K/W] on the wetted surface; form plane, cylinder or sphere of that radius."""
    ends = _ends(case)
    sign = 1.0 if ends is _OUTWARDS else -1.0
    wall = _layer(case, "wall_thickness", "wall_conductivity")
    insulation = _layer(case, "insulation_thickness", "insulation_conductivity")
    far = case.need(ends["coefficient"])
    total = case.get("fouling", 0.0)
    at = radius
    for thickness, conductivity in filter(None, (wall, insulation) if sign > 0 else (insulation, wall)):
        beyond = math.inf if form == "plane" else at + sign * thickness
        if beyond <= 0:
            raise CaseRefused("the layers beyond the wall are thicker than the body; look at the thicknesses")
        if form == "cylinder":
            total += radius * abs(math.log(beyond / at)) / conductivity
        elif form == "sphere":
            total += radius**2 * abs(1.0 / at - 1.0 / beyond) / conductivity
        else:
            total += thickness / conductivity
        at = beyond
    power = {"plane": 0, "cylinder": 1, "sphere": 2}[form]
    return total + (radius / at if power else 1.0) ** power / far


def _ends(case: Case) -> dict[str, str]:
    return _OUTWARDS if case.flow == "duct" else _INWARDS


def _layer(case: Case, thickness: str, conductivity: str) -> tuple[float, float] | None:
    """Thickness and conductivity of a layer, None where it is not stated; half a statement is refused."""
    if case.has(thickness) != case.has(conductivity):
        if thickness == "wall_thickness" and not case.has(thickness):
            return None
        case.need(thickness)
        case.need(conductivity)
    return (case.get(thickness), case.get(conductivity)) if case.has(thickness) else None


def refuse_without_end(case: Case) -> None:
    """A path without a temperature at its end would be ignored in silence."""
    ends = _ends(case)
    if case.has(ends["temperature"]):
        return
    keys = [ends["coefficient"], "insulation_thickness", "fouling"]
    if ends is _INWARDS:
        keys += ["wall_thickness"]  # in a duct the wall also conducts along and stores
    for key in keys:
        if case.has(key):
            from cellfuncs.cases import labels

            wanted = labels.dictionary()[ends["temperature"]].label
            raise CaseRefused(f'"{case.stated[key].label}" leads beyond the wall; add the row "{wanted}"')
