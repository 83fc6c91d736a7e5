"""Liquid metals by published equations: ``data/liquid_metals.csv`` and ``liquid_metal_properties.csv``."""

import math
from functools import cache

from ..errors import OutOfRange, UnknownName
from ..sources import read_table
from .relations import Related, Relation, relation
from .texts import folded, kelvin

SLACK = 1e-6  # relative; melting points are printed with few digits


class LiquidMetal(Related):
    """A liquid metal from its melting point up; made by ``names.find``."""

    def __init__(self, row: dict[str, str], properties: list[dict[str, str]]):
        relations: dict[str, Relation] = {}
        for one in properties:
            if one["form"] == "activated":
                relations[one["property"]] = _activated(one, relations["density"])
            else:
                relations[one["property"]] = relation(one)
        super().__init__(row["metal"], "liquid metal", relations, row["source"])
        self.melting, self.boiling = float(row["t_melting"]), float(row["t_boiling"])
        self._composition = row["note"]

    def _outside(self, key: str, temperature: float, found: Relation) -> OutOfRange:
        if 0 < temperature < self.melting * (1 - SLACK):
            return OutOfRange(
                f"{self.spoken} is solid at {kelvin(temperature)}: it melts at {kelvin(self.melting)}"
            )
        return super()._outside(key, temperature, found)

    def note(self, what: str) -> str:
        """Return composition, uncertainty and place in the source."""
        return "; ".join(filter(None, (self._composition, super().note(what))))


def _activated(row: dict[str, str], density: Relation) -> Relation:
    """Viscosity A rho^(1/3) exp(B rho/T), rho in g/cm3, with two pairs A [Pa s], B below and above a temperature."""
    low_a, low_b, high_a, high_b, change = (float(part) for part in row["values"].split(";"))

    def viscosity(temperature: float) -> float:
        factor, energy = (low_a, low_b) if temperature < change else (high_a, high_b)
        specific = density.value(temperature) / 1000
        return factor * specific ** (1 / 3) * math.exp(energy * specific / temperature)

    return Relation(viscosity, float(row["t_min"]), float(row["t_max"]), row["source"], row["place"])


@cache
def metal_rows() -> dict[str, dict[str, str]]:
    """Name -> row of every liquid metal."""
    return {row["metal"]: row for row in read_table("liquid_metals.csv")}


@cache
def metal_names() -> dict[str, str]:
    """Folded name -> liquid metal."""
    names = {}
    for metal, row in metal_rows().items():
        for name in (metal, *filter(None, row["aliases"].split(";"))):
            names[folded(name)] = metal
    return names


def find_liquid_metal(text: str) -> LiquidMetal | None:
    """The liquid metal that a text names, or None. Raises UnknownName for NaK of no stated composition."""
    name = folded(text)
    if name in ("nak", "sodiumpotassiumalloy", "sodiumpotassium"):
        raise UnknownName("which NaK: the eutectic is at hand, write NaK-78 (78 % potassium by mass)")
    metal = metal_names().get(name)
    return None if metal is None else make_liquid_metal(metal)


def make_liquid_metal(metal: str) -> LiquidMetal:
    """The liquid metal of a row."""
    rows = [row for row in read_table("liquid_metal_properties.csv") if row["metal"] == metal]
    return LiquidMetal(metal_rows()[metal], rows)
