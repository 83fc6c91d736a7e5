"""Properties: read at another temperature or pressure, or of another fluid."""

from collections.abc import Iterator

from cellfuncs.cases import labels
from cellfuncs.checks.causes.guess import Guess
from cellfuncs.checks.relations.of_substance import PROPERTIES, SCATTER, is_liquid, named, pressure_of, value_at
from cellfuncs.checks.stated import SheetCase, Stated

_ZERO = 273.15
# the temperatures at which tables and data sheets give properties, °C (common practice; 60 and 68 °F among them)
_USUAL = (0.0, 4.0, 15.0, 15.556, 20.0, 25.0, 26.85, 40.0, 100.0)
# fluids that are mixed up with one another (common practice)
_FLUIDS = (
    "water", "air", "nitrogen", "oxygen", "carbon dioxide", "argon", "helium", "hydrogen", "methane", "ammonia",
    "ethanol", "methanol", "toluene", "R134a", "propane", "acetone", "benzene", "hexane", "heptane", "steam",
    "ethylene glycol 30 %", "ethylene glycol 50 %", "propylene glycol 30 %", "propylene glycol 50 %",
)  # fmt: skip
_ATMOSPHERE = 101_325.0


def _named(case: SheetCase) -> str:
    found = named(case)
    return found.name if found is not None else ""


def stated_temperatures(case: SheetCase) -> Iterator[tuple[float, str]]:
    """Every stated temperature of the case with its label."""
    for key in case.stated:
        if labels.dictionary()[key].kind == "temperature":
            for entry in case.stated[key]:
                yield entry.si, f'"{entry.label}"'


def guesses(entry: Stated, case: SheetCase, expected_at: float | None) -> Iterator[Guess]:
    """The property at other temperatures, at gauge pressure, per mass or volume, and of other fluids."""
    key = entry.key.removeprefix("hot_").removeprefix("cold_")
    what, name = PROPERTIES.get(key), _named(case)
    if what is None or not name:
        return
    pressure = pressure_of(case)
    for temperature, words, prior in _other_temperatures(case):
        if expected_at is not None and abs(temperature - expected_at) < 0.5:
            continue
        value = value_at(name, what, temperature, pressure)
        if value is not None:
            yield Guess("property-temperature", f"{name} at {temperature - _ZERO:.1f} °C ({words})", value, prior)
    at = expected_at if expected_at is not None else next((t for t, _ in stated_temperatures(case)), 293.15)
    yield from _pressures(name, what, at, pressure)
    yield from _viscosity(what, name, at, pressure)
    yield from _fluids(case, what, name, at, pressure)


def _other_temperatures(case: SheetCase) -> Iterator[tuple[float, str, float]]:
    stated = list(stated_temperatures(case))
    for temperature, words in stated:
        yield temperature, words, 1.0
    for k, (a, label_a) in enumerate(stated):
        for b, label_b in stated[k + 1 :]:
            yield (a + b) / 2.0, f"mean of {label_a} and {label_b}", 0.8
    for celsius in _USUAL:
        yield celsius + _ZERO, "a usual temperature of tables", 1.0


def _pressures(name: str, what: str, at: float, pressure: float) -> Iterator[Guess]:
    if is_liquid(name, at, pressure):
        return  # a liquid hardly feels an atmosphere
    others = ((pressure - _ATMOSPHERE, "the gauge pressure"), (pressure + _ATMOSPHERE, "twice the atmosphere"))
    for other, words in others:
        if other > 0 and abs(other / pressure - 1.0) > 1e-6:
            value = value_at(name, what, at, other)
            if value is not None:
                yield Guess("gauge-for-absolute", f"{name} at {words}", value, 0.9)
    if abs(pressure / _ATMOSPHERE - 1.0) > 0.02:
        value = value_at(name, what, at, _ATMOSPHERE)
        if value is not None:
            yield Guess("gauge-for-absolute", f"{name} at the pressure of the atmosphere", value, 0.6)


def _viscosity(what: str, name: str, at: float, pressure: float) -> Iterator[Guess]:
    others = {"viscosity": "kinematic_viscosity", "kinematic_viscosity": "viscosity"}
    if what in others:
        value, density = value_at(name, others[what], at, pressure), value_at(name, "density", at, pressure)
        if value is not None and density:
            words = f"the {others[what].replace('_', ' ')} of {name}"
            yield Guess("kinematic-for-dynamic", words, value, 1.2)
            # as numbers in the customary units: cSt for mPa s
            scale = 1000.0 if what == "viscosity" else 1e-3
            yield Guess("kinematic-for-dynamic", f"{words}, as a number in customary units", value * scale, 1.2)


def _fluids(case: SheetCase, what: str, name: str, at: float, pressure: float) -> Iterator[Guess]:
    own = [
        (PROPERTIES[key], case.stated[key][0].si) for key in PROPERTIES if case.stated.get(key)
    ]
    for fluid in _FLUIDS:
        value = None if fluid == name else value_at(fluid, what, at, pressure)
        if value is None:
            continue
        agree = sum(_near(fluid, prop, at, pressure, si) for prop, si in own)
        # one property alone says little about which fluid was meant
        prior = 0.35 if agree <= 1 else 1.5
        yield Guess("wrong-fluid", f"{fluid} at {at - _ZERO:.1f} °C", value, prior)


def _near(fluid: str, what: str, at: float, pressure: float, si: float) -> bool:
    value = value_at(fluid, what, at, pressure)
    return value is not None and abs(value - si) <= 2.0 * max(SCATTER[what]) * abs(value)
