"""From the name in a cell to the substance: aliases, a phase word, a concentration, an oil grade.

The order: a fluid or liquid by one of its names; moist air; an oil; a solution with its concentration; each also
with a phase word before or behind ("water liquid", "liquid nitrogen", "R134a vapour").
"""

import re
import threading
from functools import cache, lru_cache

from ..errors import UnknownName
from ..sources import read_table
from .base import PHASES, Substance
from .fluids import PureFluid
from .texts import folded, nearest, shown

LONGEST_NAME = 120
_PHASE = re.compile(
    r"^\s*(?P<before>(?:" + "|".join(PHASES) + r"))[\s,]+(?P<rest>.+)$"
    r"|^(?P<name>.+?)[\s,]*[\s,(](?P<after>(?:" + "|".join(PHASES) + r"))\)?\s*$",
    re.I,
)
_REFRIGERANT = re.compile(r"^(?:hfc|hcfc|cfc|hfo|hcfo|pfc|hc|fc|freon|refrigerant)(?=\d)")
_MADE: dict[str, Substance] = {}
_MADE_LOCK = threading.Lock()


@lru_cache(maxsize=4096)
def find(text: str) -> Substance:
    """Return the substance that `text` names, in any case and spelling; the same object for the same substance.

    Raises UnknownName with the nearest name on a miss, OutOfRange for a concentration outside its range.
    """
    if not isinstance(text, str) or not text.strip():
        raise UnknownName("a substance is wanted, for instance water, R134a or ethylene glycol 30 % by mass")
    if len(text) > LONGEST_NAME:
        raise UnknownName(f"{shown(text)} is too long for the name of a substance")
    if folded(text) in ("steam", "watersteam", "watervapour", "watervapor"):
        return _in_phase(find("water"), "gas")
    found = _exact(text)
    if found is not None:
        return found
    parts = _PHASE.match(text)
    if parts:
        rest = parts["rest"] or parts["name"]
        found = _exact(rest)
        if found is not None:
            return _in_phase(found, PHASES[(parts["before"] or parts["after"]).casefold()])
    raise UnknownName(f"no substance {shown(text)}{nearest(text, _all_names())}")


def _exact(text: str) -> Substance | None:
    """The substance for a text without phase word, None on a miss."""
    name = folded(text)
    key = _fluid_names().get(name) or _fluid_names().get(_REFRIGERANT.sub("r", name))
    return _fluid(key) if key else None


def _fluid(key: str) -> PureFluid:
    """The one object of a fluid, so that its states are shared by all its names."""
    with _MADE_LOCK:
        if key not in _MADE:
            _MADE[key] = PureFluid(_fluid_titles()[key]["name"], _fluid_rows()[key])
        return _MADE[key]


def _in_phase(substance: Substance, phase: str) -> Substance:
    """The substance with a stated phase; one object for each."""
    if not isinstance(substance, PureFluid):
        if phase == "liquid":
            return substance
        raise UnknownName(f"{substance.name} is a liquid here; leave out the phase")
    key = f"{substance.key}|{phase}"
    with _MADE_LOCK:
        if key not in _MADE:
            _MADE[key] = substance.in_phase(phase)
        return _MADE[key]


@cache
def _fluid_rows() -> dict[str, dict[str, str]]:
    return {row["key"]: row for row in read_table("coolprop_fluids.csv")}


@cache
def _fluid_titles() -> dict[str, dict[str, str]]:
    return {row["key"]: row for row in read_table("fluid_names.csv")}


@cache
def _fluid_names() -> dict[str, str]:
    """Folded name -> key of every pure fluid."""
    names = {}
    for row in read_table("fluid_names.csv"):
        for name in (row["key"], row["name"], *filter(None, row["aliases"].split(";"))):
            names[folded(name)] = row["key"]
    return names


@cache
def _all_names() -> tuple[str, ...]:
    """Every name that a hint may propose."""
    rows = read_table("fluid_names.csv")
    return tuple(
        name for row in rows for name in (row["name"], *filter(None, row["aliases"].split(";")))
    ) + ("steam",)


def names(contains: str = "") -> list[tuple[str, str, str]]:
    """Return (name, family, other names) of every substance whose names contain the text."""
    rows = [(row["name"], PureFluid.family, row["aliases"].replace(";", ", ")) for row in _fluid_titles().values()]
    wanted = folded(contains)
    return sorted(
        (row for row in rows if wanted in folded(row[0]) or any(wanted in folded(part) for part in row[2].split(", "))),
        key=lambda row: (row[1], row[0].casefold()),
    )
