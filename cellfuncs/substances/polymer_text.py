"""Polymer melts from words: "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K", "LDPE melt at 100 1/s".

Parts in any order, parted by commas:

* ``12000 Pa s^n at 230 degC`` (power law) or ``15000 Pa s at 230 degC`` with ``time 0.5 s`` (Carreau)
* ``n 0.35``, the power-law exponent
* how it falls with temperature: ``b 0.02 1/K``, ``E 40 kJ/mol`` (Arrhenius), or ``C1 8.86, C2 101.6 K`` (WLF)
* where wanted: ``190 to 270 degC`` (else 30 K each way), density, conductivity and specific heat with their units,
  and ``expansion 0.0007 1/K`` of a density that holds at the temperature of the constants
* the shear rate at the end: ``at 100 1/s``
"""

import re
import unicodedata
from functools import cache

from .. import quantities
from ..errors import CellfuncsError, NumberRefused, OutOfRange, UnknownName
from .polymers import (
    PolymerMelt,
    Rheology,
    arrhenius_shift,
    carreau,
    exponential_shift,
    polymer_names,
    power_law,
    published_melt,
    wlf_shift,
)
from .relations import Relation
from .texts import folded, shown

EITHER_SIDE = 30.0  # [K] range about the temperature of the constants where none is stated; common practice
RATES = (1e-3, 1e6)  # [1/s] beyond these no melt is sheared
SOURCE = "own-table"
NUMBER = r"(?P<{}>-?\d+(?:\.\d+)?(?:e[+-]?\d+)?)"
SCALE = r"\s*(?P<{}>°\s*c|deg\s*c|c|k|°\s*f|deg\s*f|f)\b"
_HEAD = re.compile(r"^\s*(?:polymer\s+melt|molten\s+polymer|melt)\s*[:,]\s*(?P<rest>.+)$", re.I)
_RATE = re.compile(r"[\s,]+at\s+" + NUMBER.format("rate") + r"\s*(?:1/s|/s|s\^?-1|s⁻¹)\s*$", re.I)
_STRENGTH = re.compile(
    NUMBER.format("value") + r"\s*(?P<kilo>k?)pa[\s.·*]*s(?P<law>\^?n)?\s+(?:at|@)\s+"
    + NUMBER.format("temperature") + SCALE.format("scale"), re.I
)  # fmt: skip
_RANGE = re.compile(NUMBER.format("low") + r"\s*(?:to|-|–)\s*" + NUMBER.format("high") + SCALE.format("scale"), re.I)
_NAMED = {
    "n": re.compile(r"n\s*=?\s*" + NUMBER.format("value"), re.I),
    "b": re.compile(r"b\s*=?\s*" + NUMBER.format("value") + r"\s*(?:1/k|/k|k\^?-1|1/degc|1/°c)", re.I),
    "energy": re.compile(r"(?:ea?|activation energy)\s*=?\s*" + NUMBER.format("value") + r"\s*(?P<kilo>k?)j/mol", re.I),
    "expansion": re.compile(r"(?:expansion|beta)\s*=?\s*" + NUMBER.format("value") + r"\s*1/(?:k|degc|°c)", re.I),
    "c1": re.compile(r"c1\s*=?\s*" + NUMBER.format("value"), re.I),
    "c2": re.compile(r"c2\s*=?\s*" + NUMBER.format("value") + r"\s*k", re.I),
    "time": re.compile(r"(?:time|relaxation time|lambda)\s*=?\s*" + NUMBER.format("value") + r"\s*s", re.I),
}
_THERMAL = {"density": "density", "conductivity": "thermal_conductivity", "specific_heat": "specific_heat"}
_EXAMPLE = "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K"


def find_polymer(text: str) -> PolymerMelt | None:
    """The melt that a text names, with its shear rate where it says one; None when it is no melt.

    Raises NumberRefused, UnknownName or OutOfRange where something is missing or cannot be.
    """
    plain = unicodedata.normalize("NFKC", text).replace("−", "-")
    found = _RATE.search(plain)
    rate = float(found["rate"]) if found else None
    body = plain[: found.start()] if found else plain
    head = _HEAD.match(body)
    melt = _from_constants(head["rest"]) if head else _published(body)
    if melt is None:
        return None
    return melt if rate is None else melt.at(rate)


@cache
def _spellings() -> dict[str, str]:
    """Folded spelling -> polymer."""
    names = {}
    for name, polymer in polymer_names().items():
        bare = name.removesuffix(" melt")
        for spelling in (name, f"molten {bare}", f"{bare} molten", f"{bare} liquid", f"liquid {bare}"):
            names[folded(spelling)] = polymer
    return names


def _published(text: str) -> PolymerMelt | None:
    polymer = _spellings().get(folded(text))
    if polymer is None and folded(text) in ("polymermelt", "moltenpolymer", "polymer"):
        raise UnknownName(f"which polymer: write for instance LDPE melt at 100 1/s, or {_EXAMPLE}")
    return None if polymer is None else published_melt(polymer)


def _from_constants(text: str) -> PolymerMelt:
    parts = [part.strip() for part in re.split(r"[,;]", text) if part.strip()]
    strength, limits, named, thermal, said = None, None, {}, {}, []
    for part in parts:
        if found := _STRENGTH.fullmatch(part):
            strength = found
        elif found := _RANGE.fullmatch(part):
            limits = tuple(_kelvin(float(found[end]), found["scale"]) for end in ("low", "high"))
        elif name := next((name for name, pattern in _NAMED.items() if pattern.fullmatch(part)), None):
            found = _NAMED[name].fullmatch(part)
            named[name] = float(found["value"]) * (1000 if found.groupdict().get("kilo") else 1)
        else:
            key, value = _thermal(part)
            thermal[key] = value
        said.append(part)
    if strength is None:
        raise NumberRefused(f"the name of a melt needs its constants: write {_EXAMPLE}")
    reference = _kelvin(float(strength["temperature"]), strength["scale"])
    value = float(strength["value"]) * (1000 if strength["kilo"] else 1)
    law = _law(bool(strength["law"]), value, named, reference)
    low, high = limits or (reference - EITHER_SIDE, reference + EITHER_SIDE)
    if not 0 < low <= reference <= high:
        raise OutOfRange("the temperature of a melt's constants must lie inside its range")
    note = "constants as given" + ("" if limits else f", {EITHER_SIDE:g} K each way from their temperature")
    relations = {
        key: Relation(lambda temperature, value=value: value, low, high, SOURCE, "constant, as given", True)
        for key, value in thermal.items()
    }
    if "expansion" in named:
        relations["density"] = _expanding(thermal.get("density"), named["expansion"], reference, low, high)
    name = "polymer melt: " + ", ".join(said)
    return PolymerMelt(name, Rheology(law, low, high, *RATES, SOURCE, note), relations)


def _law(power: bool, value: float, named: dict[str, float], reference: float):
    if "n" not in named:
        raise NumberRefused("the name of a melt needs its exponent, for instance n 0.35")
    if not 0 < named["n"] <= 1.5 or not value > 0:
        raise OutOfRange(f"a melt with n {named['n']:g} and {value:g} Pa s is none: n lies between 0 and 1")
    shift = _shift(named, reference)
    if power:
        if "time" in named:
            raise NumberRefused("a time belongs to the Carreau law, whose viscosity is in Pa s; Pa s^n is a power law")
        return power_law(value, named["n"], shift)
    if not named.get("time", 0) > 0:
        raise NumberRefused("a viscosity in Pa s is that of the Carreau law: add its time, for instance time 0.5 s")
    return carreau(value, named["time"], named["n"], shift)


def _shift(named: dict[str, float], reference: float):
    given = [name for name in ("b", "energy", "c1") if name in named]
    if len(given) != 1 or ("c1" in named) != ("c2" in named):
        raise NumberRefused(
            "how does it fall with temperature? Write one of: b 0.02 1/K, E 40 kJ/mol, or C1 8.86, C2 101.6 K"
        )
    if not min(named[given[0]], named.get("c2", 1.0)) >= 0:
        raise OutOfRange("a melt gets thinner when warmer: its temperature constants are positive")
    if given == ["b"]:
        return exponential_shift(named["b"], reference)
    if given == ["energy"]:
        return arrhenius_shift(named["energy"], reference)
    if named["c2"] <= EITHER_SIDE:
        raise OutOfRange(f"C2 must be above {EITHER_SIDE:g} K, about 50 to 150 K for most polymers")
    return wlf_shift(named["c1"], named["c2"], reference)


def _expanding(density: float | None, expansion: float, reference: float, low: float, high: float) -> Relation:
    """Density from its value at the temperature of the constants and the expansion coefficient there."""
    if density is None:
        raise NumberRefused("an expansion coefficient goes with a density: add it, for instance 740 kg/m3")
    if not 0 <= expansion * (high - low) < 0.5:
        raise OutOfRange(f"an expansion of {expansion:g} 1/K is none of a melt, about 0.0005 to 0.001 1/K")
    return Relation(lambda t: density / (1 + expansion * (t - reference)), low, high, SOURCE, "as given")


def _thermal(part: str) -> tuple[str, float]:
    for key, kind in _THERMAL.items():
        try:
            value = quantities.read_quantity(part, kind)
        except CellfuncsError:
            continue
        if not value > 0:
            raise OutOfRange(f"{shown(part)} is not above zero")
        return key, value
    raise NumberRefused(f"{shown(part)} in the name of a melt is not understood; write {_EXAMPLE}")


def _kelvin(value: float, scale: str) -> float:
    return {"k": value, "c": value + 273.15, "f": (value + 459.67) / 1.8}[scale[-1].casefold()]
