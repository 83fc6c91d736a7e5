"""Cross-sections of ducts: what describes them, and hydraulic diameter, area and heated part that follow."""

import math
from dataclasses import dataclass
from typing import Any

from cellfuncs.errors import CaseRefused


@dataclass(frozen=True)
class Duct:
    """Cross-section of a duct.

    ``section`` is tube, plates, rectangle, annulus, ellipse, triangle or other; ``heated`` both, one, inner or outer;
    ``heated_share`` the heated part of the wetted perimeter; ``ratio`` the short over the long side of a
    rectangle or the short over the long axis of an ellipse, the inner over the outer diameter of an annulus, 1
    elsewhere; ``apex_angle`` that of an isosceles triangle in degrees.
    """

    diameter: float
    area: float | None
    section: str
    heated: str
    heated_share: float = 1.0
    ratio: float = 1.0
    apex_angle: float | None = None

    @property
    def heated_per_area(self) -> float:
        """Heated perimeter over cross-section [1/m]: 4/D where all of it is heated."""
        return 4.0 / self.diameter * self.heated_share

    @property
    def area_needs(self) -> str:
        """The label of the row that would give the area."""
        return "width" if self.section == "plates" else "flow area"


def section_of(case: Any) -> Duct:
    """The section that the rows of a case describe; refuses rows that contradict each other."""
    given = [k for k in ("diameter", "hydraulic_diameter", "gap", "height") if case.has(k)]
    if len(given) > 1:
        names = " and ".join(f'"{case.stated[k].label}"' for k in given)
        raise CaseRefused(f"{names} are both stated; one of them describes the section")
    size = case.need("diameter", "hydraulic_diameter", "gap", "height")
    natural = {"diameter": "tube", "hydraulic_diameter": "other", "gap": "plates", "height": "rectangle"}[given[0]]
    if natural == "tube" and case.has("core_diameter"):
        natural = "annulus"
    section = case.get("section", natural)
    if natural == "rectangle" and section in _IN_A_BOX:
        natural = section
    if section in _WANTS and section != natural:
        wants = _WANTS[section]
        raise CaseRefused(
            f'a section of {section} is described by its "{wants}", not by "{case.stated[given[0]].label}"'
        )
    if natural in _WANTS and section != natural:
        raise CaseRefused(f'"{case.stated[given[0]].label}" describes {natural}, but the section is {section}')
    heated = case.get("heated_walls", "both")
    fitting = {"plates": ("both", "one"), "annulus": ("both", "inner", "outer")}.get(section, ("both",))
    if heated not in fitting:
        raise CaseRefused(f'"heated walls" of {section}: write {" or ".join(fitting)}, not {heated}')
    return _BUILD.get(section, _by_diameter)(case, size, section, heated)


def _by_diameter(case: Any, size: float, section: str, heated: str) -> Duct:
    area = case.get("flow_area")
    if area is None and section == "tube":
        area = math.pi / 4.0 * size * size
    return Duct(size, area, section, heated)


def _plates(case: Any, gap: float, section: str, heated: str) -> Duct:
    area = case.get("flow_area")
    if area is None and case.has("width"):
        area = gap * case.get("width")
    return Duct(2.0 * gap, area, section, heated, 0.5 if heated == "one" else 1.0)


def _rectangle(case: Any, height: float, section: str, heated: str) -> Duct:
    width = case.need("width")
    ratio = min(height, width) / max(height, width)
    return Duct(2.0 * height * width / (height + width), height * width, section, heated, ratio=ratio)


def _ellipse(case: Any, height: float, section: str, heated: str) -> Duct:
    from scipy.special import ellipe

    width = case.need("width")
    short, long = min(height, width), max(height, width)
    area = math.pi / 4.0 * short * long
    around = 2.0 * long * float(ellipe(1.0 - (short / long) ** 2))
    return Duct(4.0 * area / around, area, section, heated, ratio=short / long)


def _triangle(case: Any, height: float, section: str, heated: str) -> Duct:
    base = case.need("width")
    area = 0.5 * height * base
    around = base + 2.0 * math.hypot(height, 0.5 * base)
    angle = 2.0 * math.degrees(math.atan2(0.5 * base, height))
    return Duct(4.0 * area / around, area, section, heated, apex_angle=angle)


def _annulus(case: Any, outer: float, section: str, heated: str) -> Duct:
    core = case.need("core_diameter")
    if core >= outer:
        raise CaseRefused(f'"{case.stated["core_diameter"].label}" is not smaller than the outer diameter of the gap')
    share = {"both": 1.0, "inner": core / (core + outer), "outer": outer / (core + outer)}[heated]
    area = math.pi / 4.0 * (outer**2 - core**2)
    return Duct(outer - core, area, section, heated, share, core / outer)


_BUILD = {
    "plates": _plates,
    "rectangle": _rectangle,
    "annulus": _annulus,
    "ellipse": _ellipse,
    "triangle": _triangle,
}
# the row that describes a section; ellipse and triangle are described by the sides of the rectangle round them
_WANTS = {
    "plates": "gap",
    "rectangle": "height",
    "annulus": "core diameter",
    "ellipse": "height",
    "triangle": "height",
}
_IN_A_BOX = ("ellipse", "triangle")
