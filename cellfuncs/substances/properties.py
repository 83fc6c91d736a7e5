"""The properties a substance may have: key, words, symbol, kind, and the names engineers use for them."""

from dataclasses import dataclass
from functools import lru_cache

from ..errors import UnknownName
from ..sources import read_table
from .texts import folded, nearest, shown


@dataclass(frozen=True)
class Property:
    """One property: `kind` is a key of quantities.KINDS, `symbol` that of ISO 80000 where it has one."""

    key: str
    words: str
    symbol: str
    kind: str
    aliases: tuple[str, ...]
    source: str


def _table(family: str) -> dict[str, Property]:
    return {
        row["key"]: Property(
            row["key"],
            row["words"],
            row["symbol"],
            row["kind"],
            tuple(row["aliases"].split(";")),
            row["source"],
        )
        for row in read_table("properties.csv")
        if row["set"] == family
    }


PROPERTIES: dict[str, Property] = _table("substance")
MOIST_AIR: dict[str, Property] = _table("moist air")


def _names(table: dict[str, Property]) -> dict[str, str]:
    names = {}
    for key, entry in table.items():
        for name in (key, entry.words, *entry.aliases):
            names[folded(name)] = key
    return names


_NAMES = {"substance": _names(PROPERTIES), "moist air": _names(MOIST_AIR)}


@lru_cache(maxsize=512)
def property_key(text: str, family: str = "substance") -> str:
    """Return the key of a property from any of its names ("mu", "thermal conductivity", "cp" ...).

    `family` is "substance" or "moist air". Raises UnknownName with the nearest name.
    """
    key = _NAMES[family].get(folded(str(text)))
    if key is None:
        table = PROPERTIES if family == "substance" else MOIST_AIR
        choices = [entry.words for entry in table.values()] + list(table)
        raise UnknownName(f"{shown(str(text))} is no property known here{nearest(str(text), choices)}")
    return key
