"""Solids: metals, alloys, plastics, insulation, building and ceramic materials, from published tables.

``data/solids.csv`` has one row a solid, ``data/solid_properties.csv`` one a property. The emissivity belongs
to a surface: where a solid has several ("polished", "oxidised" ...), the name says which one is meant.
"""

from functools import cache

from ..errors import NoModel, OutOfRange, UnknownName
from ..sources import read_table
from .liquid_metals import metal_names
from .properties import PROPERTIES
from .relations import Related, Relation, relation
from .texts import folded

SURFACES = {
    "polished": ("polished",),
    "cleaned": ("cleaned", "clean"),
    "oxidised": ("oxidised", "oxidized"),
    "anodised": ("anodised", "anodized"),
    "foil": ("foil",),
    "in fire": ("in fire",),
}
OF_SOLIDS = ("density", "conductivity", "specific_heat", "thermal_diffusivity", "emissivity")


class Solid(Related):
    """A solid with at most one surface; made by ``names.find``."""

    state = "solid"
    p_max = None

    def __init__(self, row: dict[str, str], surface: str = ""):
        self.solid, self.surface = row["solid"], surface
        self.grade = row["grade"]
        self._melting = float(row["t_melting"] or "nan")
        own = [r for r in property_rows().get(row["solid"], ()) if r["surface"] in ("", surface)]
        relations = {r["property"]: relation(r) for r in own}
        super().__init__(" ".join(filter(None, (row["solid"], surface))), "solid", relations, row["source"])

    def _check_kind(self, key: str) -> None:
        if key not in OF_SOLIDS:
            raise NoModel(f"{self.solid} is a solid: the {PROPERTIES[key].words} of a solid is not given here")
        if key == "emissivity" and key not in self._relations:
            known = surfaces_of(self.solid)
            if known:
                several = " or ".join(f"{self.solid} {surface}" for surface in known)
                raise NoModel(f"the emissivity of {self.solid} depends on its surface: write {several}", "substance")

    def _outside(self, key: str, temperature: float, found: Relation) -> OutOfRange:
        error = super()._outside(key, temperature, found)
        if not temperature > self._melting:
            return error
        molten = metal_names().get(folded(f"liquid {self.solid}"))
        more = f", write {molten} above it" if molten else ""
        return OutOfRange(f"{error}; it melts at {self._melting:g} K{more}")

    def note(self, what: str) -> str:
        """Return grade, place in the source and uncertainty of a property."""
        return "; ".join(filter(None, (self.grade, super().note(what))))


@cache
def solid_rows() -> dict[str, dict[str, str]]:
    """Name -> row of every solid."""
    return {row["solid"]: row for row in read_table("solids.csv")}


@cache
def property_rows() -> dict[str, list[dict[str, str]]]:
    """Name of a solid -> its rows of properties."""
    rows: dict[str, list[dict[str, str]]] = {}
    for row in read_table("solid_properties.csv"):
        rows.setdefault(row["solid"], []).append(row)
    return rows


@cache
def surfaces_of(solid: str) -> tuple[str, ...]:
    """The surfaces of a solid that have an emissivity of their own."""
    return tuple(dict.fromkeys(row["surface"] for row in property_rows().get(solid, ()) if row["surface"]))


@cache
def solid_names() -> dict[str, tuple[str, str]]:
    """Folded name -> (solid, surface), the surface before or behind the name ("polished copper")."""
    names = {}
    for solid, row in solid_rows().items():
        for name in (solid, *filter(None, row["aliases"].split(";"))):
            names[folded(name)] = (solid, "")
            for surface in surfaces_of(solid):
                for word in SURFACES[surface]:
                    names.setdefault(folded(f"{name} {word}"), (solid, surface))
                    names.setdefault(folded(f"{word} {name}"), (solid, surface))
    return names


def find_solid(text: str) -> Solid | None:
    """The solid that a text names, or None. Raises UnknownName for a surface that its emissivity is not known of."""
    name = folded(text)
    found = solid_names().get(name)
    if found:
        return Solid(solid_rows()[found[0]], found[1])
    for words in SURFACES.values():
        for word in map(folded, words):
            bare = name.removesuffix(word) if name.endswith(word) else name.removeprefix(word)
            if bare != name and bare in solid_names():
                solid = solid_names()[bare][0]
                known = ", ".join(surfaces_of(solid)) or "none but the plain name"
                raise UnknownName(f"no surface {words[0]!r} of {solid} is at hand; known are: {known}")
    return None
