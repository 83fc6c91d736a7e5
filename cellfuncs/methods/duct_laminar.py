"""Developed laminar flow in ducts: Nu and f·Re by section, wall condition and the walls that are heated.

Nusselt numbers and f are on the hydraulic diameter; f is Darcy's. Uniform flux is uniform along the duct with one
temperature round it (H1 in the literature). Tables stand in ``data/duct_developed.csv``; the formulas and
tables of Shah and London 1978 are what they are compared with.
"""

import math
from functools import lru_cache

from cellfuncs.errors import OutOfRange
from cellfuncs.methods.algebra import between, exp, log, where
from cellfuncs.methods.base import Range, method
from cellfuncs.sources import read_table

LAMINAR_UP_TO = 2300.0
LENGTH = "hydraulic diameter"
LAMINAR = Range("Re", high=LAMINAR_UP_TO)
DEVELOPED_FROM = Range("x*", low=0.05)

# Shah and London's polynomials in the short over the long side of a rectangle
_RECTANGLE = {
    "temperature": (7.541, -2.610, 4.970, -5.119, 2.702, -0.548),
    "flux": (8.235, -2.0421, 3.0853, -2.4765, 1.0578, -0.1861),
    "friction": (96.0, -1.3553, 1.9467, -1.7012, 0.9564, -0.2537),
}
_WALLS_OF_ANNULUS = (
    "laminar flow in an annulus with both walls at a flux has a Nu for each wall that depends on the ratio of the "
    'fluxes; state heated walls inner or outer, or take "annulus, two fluxes"'
)


@lru_cache(maxsize=1)
def _tables() -> dict[tuple[str, str, str], tuple[tuple[float, ...], tuple[float, ...]]]:
    """(section, what, heated) -> the places and the values there."""
    found: dict[tuple[str, str, str], list[tuple[float, float]]] = {}
    for row in read_table("duct_developed.csv"):
        key = (row["section"], row["what"], row["heated"])
        found.setdefault(key, []).append((float(row["at"]), float(row["value"])))
    return {key: tuple(zip(*sorted(points), strict=True)) for key, points in found.items()}


@lru_cache(maxsize=16)
def _in_logs(key: tuple[str, str, str]) -> tuple[tuple[float, ...], tuple[float, ...]]:
    places, values = _tables()[key]
    return tuple(map(math.log, places)), tuple(map(math.log, values))


def table_value(section: str, what: str, heated: str, at: float) -> float:
    """A value of the table at a ratio or an angle; straight in the logarithms for the annulus."""
    key = (section, what, heated)
    if key not in _tables():
        raise OutOfRange(
            f"laminar flow in the section {section} with heated walls {heated} at a given {what} is not tabulated; "
            "change section, wall or heated walls"
        )
    if section != "annulus":
        return between(at, *_tables()[key])
    return exp(between(log(at), *_in_logs(key)))


def rectangle_value(what: str, ratio: float) -> float:
    """Nu ("temperature", "flux") or f·Re ("friction") of a rectangle by short over long side."""
    if what not in _RECTANGLE:
        raise OutOfRange(f"a wall condition of {what} is not known; write temperature or flux")
    lead, *rest = _RECTANGLE[what]
    total = 0.0
    for coefficient in reversed(rest):
        total = (total + coefficient) * ratio
    return lead * (1.0 + total)


def developed_value(section: str, wall: str, heated: str, ratio: float = 1.0) -> float:
    """Nu of developed laminar flow; ``ratio`` is the section's, or the apex angle of a triangle in degrees."""
    if section == "rectangle":
        return rectangle_value(wall, ratio)
    if section == "annulus":
        if heated == "both" and wall == "flux":
            raise OutOfRange(_WALLS_OF_ANNULUS)
        if isinstance(ratio, (float, int)) and ratio < 0.01:
            raise OutOfRange(
                "laminar flow in an annulus is known for diameters from 1:100; change the case or state the coefficient"
            )
    return table_value(section, wall, heated, ratio)


def friction_times_re(section: str, ratio: float = 1.0) -> float:
    """f·Re of developed laminar flow (Darcy): tube 64, plates 96, the exact annulus, tables of the others."""
    if section == "rectangle":
        return rectangle_value("friction", ratio)
    if section == "annulus":
        square = ratio * ratio
        near = abs(1.0 - ratio) < 1e-4
        apart = where(near, 0.5, ratio)  # plates in the limit, where the formula is 0/0
        curved = 64.0 * (1.0 - apart) ** 2 / (1.0 + apart * apart + (1.0 - apart * apart) / log(apart))
        return where(near, 96.0 + 0.0 * square, curved)
    if section in ("ellipse", "triangle"):
        return table_value(section, "friction", "both", ratio)
    return 96.0 if section == "plates" else 64.0


@method(
    "developed laminar",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where={"section": ("tube", "plates"), "shape": ("straight",)},
    length=LENGTH,
)
def developed_laminar(section: str, wall: str, heated: str, ratio: float = 1.0) -> float:
    """Nu of developed laminar flow: tube 3.6568 and 48/11, plates 7.5407 and 140/17, one wall 4.8607 and 70/13."""
    return developed_value(section, wall, heated, ratio)


@method(
    "developed laminar, rectangle",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM, Range("ratio", high=1.0)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978",
    flows=("duct",),
    where={"section": ("rectangle",), "heated": ("both",), "shape": ("straight",)},
    length=LENGTH,
)
def developed_rectangle(wall: str, ratio: float) -> float:
    """Nu of developed laminar flow in a rectangle, all walls heated, by the short over the long side."""
    return rectangle_value(wall, ratio)


@method(
    "developed laminar, annulus",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM, Range("ratio", 0.01, 1.0)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="lundberg-1963;shah-london-1978;developed-sections",
    flows=("duct",),
    where={"section": ("annulus",), "shape": ("straight",)},
    length=LENGTH,
)
def developed_annulus(wall: str, heated: str, ratio: float) -> float:
    """Nu in an annulus: both walls at one temperature, or one wall heated and the other insulated."""
    return developed_value("annulus", wall, heated, ratio)


@method(
    "annulus, two fluxes",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM, Range("ratio", 0.01, 1.0)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="lundberg-1963;shah-london-1978;developed-sections",
    flows=("duct",),
    where={"section": ("annulus",), "wall": ("flux",), "heated": ("inner", "outer"), "shape": ("straight",)},
    length=LENGTH,
)
def annulus_two_fluxes(heated: str, ratio: float, flux_ratio: float) -> float:
    """Nu of one wall of an annulus while the other has flux_ratio times its flux (both into the fluid)."""
    alone = table_value("annulus", "flux", heated, ratio)
    return alone / (1.0 - flux_ratio * table_value("annulus", "influence", heated, ratio))


@method(
    "annulus, two temperatures",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM, Range("ratio", 0.0001, 0.999)),
    scatter=0.0,
    property_temperature="mean bulk",
    source="lundberg-1963;shah-london-1978",
    where={"section": ("annulus",), "heated": ("inner", "outer"), "shape": ("straight",)},
    length=LENGTH,
    warning="on the difference between the two walls: heat goes straight across, none stays in the stream",
)
def annulus_across(heated: str, ratio: float) -> float:
    """Conductance of an annulus with walls at two temperatures (kinds one and four), on the wall named."""
    own = ratio if heated == "inner" else 1.0 + 0.0 * ratio
    return 2.0 * (1.0 - ratio) / (own * -log(ratio))


@method(
    "developed laminar, ellipse",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM, Range("ratio", 0.05, 1.0)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978;developed-sections",
    flows=("duct",),
    where={"section": ("ellipse",), "heated": ("both",), "shape": ("straight",)},
    length=LENGTH,
)
def developed_ellipse(wall: str, ratio: float) -> float:
    """Nu of developed laminar flow in an elliptic duct by its short over its long axis."""
    return table_value("ellipse", wall, "both", ratio)


@method(
    "developed laminar, triangle",
    gives="mean Nu",
    ranges=(LAMINAR, DEVELOPED_FROM, Range("apex angle", 10.0, 120.0)),
    scatter=0.01,
    property_temperature="mean bulk",
    source="shah-london-1978;developed-sections",
    flows=("duct",),
    where={"section": ("triangle",), "heated": ("both",), "shape": ("straight",)},
    length=LENGTH,
)
def developed_triangle(wall: str, apex_angle: float) -> float:
    """Nu of developed laminar flow in an isosceles triangle (60 degrees: equilateral) by its apex angle."""
    return table_value("triangle", wall, "both", apex_angle)
