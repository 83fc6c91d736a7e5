"""From the name in a cell to the substance: aliases, a phase word, a concentration, an oil grade.

The order: a fluid or liquid by one of its names; liquid metals, solids and melts; moist air; a solution with its
concentration; an oil; each also with a phase word before or behind ("water liquid", "liquid nitrogen", "R134a vapour").
"""

import re
import threading
from collections.abc import Callable
from functools import cache, lru_cache

from ..errors import UnknownName
from ..sources import read_table
from .base import PHASES, Substance
from .fluids import PureFluid
from .liquid_metals import find_liquid_metal, metal_rows
from .moist import humid_air
from .oils import oil
from .polymer_text import find_polymer
from .polymers import polymer_names
from .solids import Solid, find_solid, solid_rows, surfaces_of
from .solutions import Liquid, ask_concentration, liquid_names, liquid_rows, solution
from .texts import folded, nearest, shown

LONGEST_NAME = 200
MOST_KEPT = 1000  # substances kept with their states; concentrations can be many
_STEAM = frozenset(("steam", "watersteam", "watervapour", "watervapor"))
_PHASE = re.compile(
    r"^\s*(?P<before>(?:" + "|".join(PHASES) + r"))[\s,]+(?P<rest>.+)$"
    r"|^(?P<name>.+?)[\s,]*[\s,(](?P<after>(?:" + "|".join(PHASES) + r"))\)?\s*$",
    re.I,
)
_REFRIGERANT = re.compile(r"^(?:hfc|hcfc|cfc|hfo|hcfo|pfc|hc|fc|freon|refrigerant)(?=\d)")
_MADE: dict[str, Substance] = {}
_MADE_LOCK = threading.RLock()


@lru_cache(maxsize=4096)
def find(text: str) -> Substance:
    """Return the substance that `text` names, in any case and spelling.

    The same substance is the same object, whatever it was called. Raises UnknownName with
    the nearest name on a miss, OutOfRange for a concentration outside its range.
    """
    if not isinstance(text, str) or not text.strip():
        raise UnknownName("a substance is wanted, for instance water, R134a or ethylene glycol 30 % by mass")
    if len(text) > LONGEST_NAME:
        raise UnknownName(f"{shown(text)} is too long for the name of a substance")
    found = _read(text)
    if found is not None:
        return found
    parts = _PHASE.match(text)
    if parts:
        found = _read(parts["rest"] or parts["name"])
        if found is not None:
            return _in_phase(found, PHASES[(parts["before"] or parts["after"]).casefold()])
    ask_concentration(text)
    raise UnknownName(f"no substance {shown(text)}{nearest(text, _all_names())}")


def _read(text: str) -> Substance | None:
    """The substance for a text without phase word; None on a miss."""
    name = folded(text)
    if name in _STEAM:
        return _in_phase(_fluid("Water"), "gas")
    key = _fluid_names().get(name)
    if key:
        return _fluid(key)
    liquid = liquid_names(False).get(name)
    if liquid:
        return _kept(liquid, lambda: Liquid(liquid_rows()[liquid], liquid_rows()[liquid]["name"]))
    key = _fluid_names().get(_REFRIGERANT.sub("r", name))
    if key:
        return _fluid(key)
    found = find_liquid_metal(text) or find_solid(text) or find_polymer(text) or humid_air(text)
    if found is None:
        read = solution(text)
        if read is not None:
            key, title, fraction, note = read
            return _kept(title, lambda: Liquid(liquid_rows()[key], title, fraction, note))
        found = oil(text)
    return None if found is None else _kept(found.name, lambda: found)


def _kept(key: str, make: Callable[[], Substance]) -> Substance:
    """The one object for a key, so that its states are shared by all its names; the oldest goes when full."""
    with _MADE_LOCK:
        if key not in _MADE:
            if len(_MADE) >= MOST_KEPT:
                del _MADE[next(iter(_MADE))]
            _MADE[key] = make()
        return _MADE[key]


def _fluid(key: str) -> PureFluid:
    return _kept("fluid " + key, lambda: PureFluid(_fluid_titles()[key]["name"], _fluid_rows()[key]))


def _in_phase(substance: Substance, phase: str) -> Substance:
    """The substance with a stated phase; one object for each."""
    if isinstance(substance, PureFluid):
        return _kept(f"fluid {substance.key} {phase}", lambda: substance.in_phase(phase))
    if isinstance(substance, Solid):
        molten = find_liquid_metal(f"{phase} {substance.solid}")
        if molten:
            return _kept(molten.name, lambda: molten)
        raise UnknownName(f"{substance.name} is a solid here; leave the phase out")
    if phase == ("gas" if substance.family == "moist air" else "liquid"):
        return substance
    raise UnknownName(f"{substance.name} has no {phase} here; leave the phase out")


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
    rows = (*read_table("fluid_names.csv"), *liquid_rows().values())
    titled = [(row["name"], row["aliases"]) for row in rows]
    titled += [(name, row["aliases"]) for table in (metal_rows(), solid_rows()) for name, row in table.items()]
    listed = (name for title, others in titled for name in (title, *filter(None, others.split(";"))))
    return (*listed, *polymer_names(), "steam", "moist air", "mineral oil", "polymer melt")


def names(contains: str = "") -> list[tuple[str, str, str]]:
    """Return (name, family, other names) of every substance whose names contain the text.

    Solutions stand with the way their concentration is written, oils, melts and moist air with an example.
    """
    rows = [(row["name"], PureFluid.family, row["aliases"].replace(";", ", ")) for row in _fluid_titles().values()]
    for row in liquid_rows().values():
        name = row["name"]
        if row["basis"]:
            low, high = (100 * float(row[end]) for end in ("x_min", "x_max"))
            name += f", {low:g} % to {high:g} % by {row['basis']}"
        rows.append((name, row["family"], row["aliases"].replace(";", ", ")))
    for name, row in metal_rows().items():
        rows.append((name, "liquid metal", row["aliases"].replace(";", ", ")))
    for name, row in solid_rows().items():
        others = [*filter(None, row["aliases"].split(";")), *(f"{name} {surface}" for surface in surfaces_of(name))]
        rows.append((name, "solid", ", ".join(others)))
    for row in read_table("polymers.csv"):
        rows.append((f"{row['polymer']} at 100 1/s", "polymer melt", row["aliases"].replace(";", ", ")))
    rows.append(("polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K at 100 1/s", "polymer melt", "any melt"))
    rows.append(("moist air 50 %", "moist air", "humid air, wet air"))
    rows.append(("ISO VG 46 VI 95", "mineral oil", "oil 46 cSt at 40 degC, 6.8 cSt at 100 degC, 870 kg/m3"))
    wanted = folded(contains)
    found = [row for row in rows if any(wanted in folded(part) for part in (row[0], row[1], *row[2].split(", ")))]
    return sorted(found, key=lambda row: (row[1], row[0].casefold()))
