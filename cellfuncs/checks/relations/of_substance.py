"""Properties from the substance that the sheet names, at the temperatures where they may be meant.

A property table of a handbook and an equation of state differ a little; ``SCATTER`` holds by how much, and what the
source says of an estimated model widens it.
"""

from collections.abc import Iterator, Mapping
from functools import lru_cache
from typing import Any

from cellfuncs import substances
from cellfuncs.checks.relation import Admissible, relation
from cellfuncs.checks.stated import SheetCase
from cellfuncs.errors import CellfuncsError

STANDARD_ATMOSPHERE = 101_325.0
# relative, liquid and gas: what handbook tables differ among themselves and from the equations (common practice)
SCATTER: Mapping[str, tuple[float, float]] = {
    "density": (0.005, 0.015),
    "viscosity": (0.03, 0.03),
    "kinematic_viscosity": (0.03, 0.04),
    "conductivity": (0.03, 0.03),
    "specific_heat": (0.015, 0.012),
    "expansion_coefficient": (0.06, 0.02),
    "prandtl": (0.05, 0.03),
    "thermal_diffusivity": (0.035, 0.04),
    "speed_of_sound": (0.01, 0.01),
    "surface_tension": (0.02, 0.02),
}
_ESTIMATED = 0.2
# solutions and oils vary with maker, additives and the table they come from (common practice)
_VARIED = frozenset(("solution", "thermal oil", "mineral oil"))
_VARIED_BY: Mapping[str, float] = {"viscosity": 0.06, "kinematic_viscosity": 0.06, "density": 0.01}
# label -> property
PROPERTIES: Mapping[str, str] = {
    "density": "density",
    "viscosity": "viscosity",
    "kinematic_viscosity": "kinematic_viscosity",
    "conductivity": "conductivity",
    "specific_heat": "specific_heat",
    "expansion": "expansion_coefficient",
    "prandtl": "prandtl",
    "diffusivity": "thermal_diffusivity",
    "speed_of_sound": "speed_of_sound",
    "surface_tension": "surface_tension",
}


@lru_cache(maxsize=256)
def find(name: str) -> Any:
    """The substance of a name, or None where it is not known."""
    try:
        return substances.find(name)
    except CellfuncsError:
        return None


def named(case: SheetCase, prefix: str = "") -> Any:
    """The substance that the sheet names for the case or one of its streams."""
    text = case.facts.get(prefix + "substance") or (case.facts.get("substance") if not prefix else None)
    return find(str(text)) if text else None


def pressure_of(case: SheetCase) -> float:
    """The stated absolute pressure [Pa], or the standard atmosphere."""
    for key in ("pressure", "gauge_pressure"):
        for entry in case.stated.get(key, ()):
            return entry.si
    return STANDARD_ATMOSPHERE


@lru_cache(maxsize=4096)
def value_at(name: str, what: str, temperature: float, pressure: float) -> float | None:
    """A property in SI, or None where the substance has none there."""
    found = find(name)
    try:
        return None if found is None else found.get(what, temperature, pressure)
    except CellfuncsError:
        return None


def first(case: SheetCase, key: str) -> float | None:
    """The first stated number of a label in SI."""
    entries = case.stated.get(key)
    return entries[0].si if entries else None


def temperatures(case: SheetCase, prefix: str = "") -> Iterator[tuple[float, str]]:
    """The temperatures [K] at which properties may be meant, with their words; a stated one rules out others."""
    stated = case.stated.get("property_temperature", ())
    if stated and not prefix:
        yield from ((entry.si, f"{entry.label} of {entry.cell}") for entry in stated)
        return
    inlet, outlet = first(case, prefix + "inlet_temperature"), first(case, prefix + "outlet_temperature")
    wall, stream = first(case, "wall_temperature"), first(case, "stream_temperature")
    if inlet is not None and outlet is not None:
        yield (inlet + outlet) / 2.0, "mean of inlet and outlet"
        if wall is not None and not prefix:
            yield (wall + (inlet + outlet) / 2.0) / 2.0, "film"
        return
    if inlet is not None:
        yield inlet, "inlet"
        if wall is not None and not prefix:
            yield (wall + inlet) / 2.0, "film"
    ambient = stream if stream is not None else first(case, "ambient_temperature")
    if ambient is not None and not prefix:
        if wall is not None:
            yield (wall + ambient) / 2.0, "film"
        else:
            yield ambient, "stream"


def varies(substance: Any) -> bool:
    """Whether a substance is a solution or an oil, of which no two tables agree as they do of pure fluids."""
    return getattr(substance, "family", "") in _VARIED


def is_liquid(name: str, temperature: float, pressure: float) -> bool:
    """Whether a substance is liquid there; False where it does not say."""
    found = find(name)
    try:
        return found is not None and found.phase(temperature, pressure) == "liquid"
    except (CellfuncsError, AttributeError):
        return False


def spread(substance: Any, what: str, temperature: float, pressure: float) -> float:
    """Relative scatter that belongs to a property here."""
    liquid, gas = SCATTER[what]
    if varies(substance):
        liquid = max(liquid, _VARIED_BY.get(what, 0.0))
    try:
        is_gas = substance.phase(temperature, pressure) != "liquid"
        estimated = "estimated" in substance.note(what)
    except (CellfuncsError, AttributeError):
        return liquid
    return max(gas if is_gas else liquid, _ESTIMATED if estimated else 0.0)


def admissible(case: SheetCase, what: str, prefix: str = "") -> list[Admissible]:
    """The values that a property may have in this case."""
    substance = named(case, prefix)
    if substance is None:
        return []
    pressure = pressure_of(case)
    found = []
    for temperature, words in temperatures(case, prefix):
        value = value_at(substance.name, what, temperature, pressure)
        if value is not None:
            celsius = temperature - 273.15
            text = f"{substance.name} at {celsius:.1f} °C ({words})"
            found.append(Admissible(value, text, spread(substance, what, temperature, pressure)))
    return found


def _declare(label: str, what: str) -> None:
    words = substances.PROPERTIES[what].words if hasattr(substances.PROPERTIES[what], "words") else label
    relation(f"{words} of the substance", label, source="properties",
             when=lambda case: named(case) is not None)(lambda case: admissible(case, what))  # fmt: skip


for _label, _what in PROPERTIES.items():
    _declare(_label, _what)


def _of_stream(prefix: str) -> None:
    relation(f"specific heat of the {prefix.rstrip('_')} stream", f"{prefix}specific_heat", source="properties",
             when=lambda case: named(case, prefix) is not None)(
                 lambda case: admissible(case, "specific_heat", prefix))  # fmt: skip


for _prefix in ("hot_", "cold_"):
    _of_stream(_prefix)


@relation("viscosity at the wall", "wall_viscosity", source="properties", when=lambda case: named(case) is not None)
def wall_viscosity(case, wall_temperature):
    """μ at the wall's temperature."""
    substance = named(case)
    value = value_at(substance.name, "viscosity", wall_temperature, pressure_of(case))
    return [] if value is None else [Admissible(value, f"{substance.name} at the wall", 0.04)]


@relation("vapour pressure of the substance", "vapour_pressure", source="properties",
          when=lambda case: named(case) is not None)  # fmt: skip
def vapour_pressure(case):
    """Saturation pressure at the property temperature."""
    found = []
    for temperature, words in temperatures(case):
        try:
            value = named(case).saturation("saturation_pressure", "liquid", temperature=temperature)
        except CellfuncsError:
            continue
        found.append(Admissible(value, words, 0.02))
    return found
