"""Another number in the place of the right one: radius, kinematic viscosity, °C, gauge, Fanning's factor, a side."""

from collections.abc import Callable, Iterator

from cellfuncs import quantities
from cellfuncs.checks.causes.guess import Guess
from cellfuncs.checks.resolve import Resolved
from cellfuncs.checks.stated import SheetCase, Stated
from cellfuncs.errors import CellfuncsError

_ZERO, _ZERO_F, _ATMOSPHERE = 273.15, 459.67 / 1.8, 101_325.0
_ROUND = frozenset(
    {"diameter", "hydraulic_diameter", "outside_diameter", "core_diameter", "insulation_diameter", "particle_diameter"}
)
_SIDES = (*_ROUND, "inside_radius", "outside_radius", "insulation_radius", "length", "width", "height", "gap")
Answer = Callable[[float], float]


def of_input(
    name: str, resolved: Resolved, case: SheetCase, answer: Answer, not_these: frozenset[str]
) -> Iterator[Guess]:
    """What the relation gives when this input is taken for something near, but none of the cells ``not_these``."""
    entry, value = resolved.entry, resolved.value
    key = entry.key if entry else name
    kind = entry.kind if entry else _kind(name)
    label = f'"{entry.label}"' if entry else f"the {name.replace('_', ' ')}"
    if kind == "length" and (key in _ROUND or name == "bore" or name.endswith("diameter")):
        yield Guess("radius-for-diameter", f"the radius for {label}", answer(value / 2.0), 1.2)
        yield Guess("radius-for-diameter", f"{label} is taken for a radius", answer(value * 2.0), 1.1)
    if key.endswith("_radius"):
        yield Guess("radius-for-diameter", f"the diameter for {label}", answer(value * 2.0), 1.2)
    if kind == "temperature":
        yield Guess("celsius-for-kelvin", f"{label} is taken in °C", answer(value - _ZERO), 1.0)
        yield Guess("celsius-for-kelvin", f"{label} is taken in °F", answer(value - _ZERO_F), 0.9)
    if kind == "pressure_absolute" or kind == "pressure_gauge":
        yield Guess("gauge-for-absolute", f"{label} is taken as gauge", answer(value - _ATMOSPHERE), 1.0)
        yield Guess("gauge-for-absolute", f"{label} has the atmosphere added twice", answer(value + _ATMOSPHERE), 0.6)
    if key == "friction_factor":
        yield Guess("fanning-for-darcy", f"{label} is taken as Fanning's", answer(4.0 * value), 1.1)
        yield Guess("fanning-for-darcy", f"{label} is taken for four of Fanning's", answer(value / 4.0), 1.1)
    if key == "fanning_factor":
        yield Guess("fanning-for-darcy", f"{label} is taken as Darcy's", answer(value / 4.0), 1.1)
    yield from _viscosities(key, label, entry, case, answer, value)
    if entry is not None:
        yield from _other_cells(entry, case, answer, not_these)
        yield from _temperature_scale(entry, label, answer)


def _kind(name: str) -> str:
    from cellfuncs.cases import labels

    found = labels.dictionary().get(name)
    return found.kind if found else ""


def _viscosities(
    key: str, label: str, entry: Stated | None, case: SheetCase, answer: Answer, value: float
) -> Iterator[Guess]:
    others = {"viscosity": "kinematic_viscosity", "kinematic_viscosity": "viscosity"}
    if key not in others:
        return
    words = f"the {'kinematic' if key == 'viscosity' else 'dynamic'} viscosity for {label}"
    density = next((e.si for e in case.stated.get("density", ())), None)
    candidates = [e for e in case.stated.get(others[key], ())]
    values = [e.si for e in candidates]
    if entry is not None:
        # as written: 40 cSt where 40 mPa s is wanted
        values += [e.value * (entry.si / entry.value) for e in candidates if entry.value]
    if density:
        values.append(value / density if key == "viscosity" else value * density)
        # the same number in the customary units: cSt for mPa s
        values.append(value * 1000.0 / density if key == "viscosity" else value * density / 1000.0)
    for other in values:
        yield Guess("kinematic-for-dynamic", words, answer(other), 1.3)


def _other_cells(entry: Stated, case: SheetCase, answer: Answer, not_these: frozenset[str]) -> Iterator[Guess]:
    """Another stated number of the same kind stands for this one."""
    for other in case.all():
        if other.cell == entry.cell or other.cell in not_these:
            continue
        if other.kind != entry.kind or other.kind in ("dimensionless", "fraction"):
            continue
        sides = other.key in _SIDES and entry.key in _SIDES and other.kind == "length"
        round_ones = other.key in _ROUND and entry.key in _ROUND
        code = "area-factor" if round_ones else "property-temperature" if other.key == entry.key else "unknown"
        prior = 1.0 if round_ones else 0.3 if sides else 0.5
        words = f'"{other.label}" ({other.cell}) stands for "{entry.label}"'
        yield Guess(code, words, answer(other.si), prior)


def in_place_of(
    name: str, resolved: Resolved, used: tuple[Stated, ...], support: frozenset[str], answer: Answer
) -> Iterator[Guess]:
    """Something of another kind that the formula uses stands where this input, which it does not use, should."""
    entry = resolved.entry
    if entry is None or entry.cell in {e.cell for e in used}:
        return
    for other in used:
        if other.cell not in support and other.kind != entry.kind:
            words = f'"{other.label}" ({other.cell}) stands for "{entry.label}"'
            for value in {other.si, other.value}:
                yield Guess("dimension-mismatch", words, answer(value), 0.8)


def _temperature_scale(entry: Stated, label: str, answer: Answer) -> Iterator[Guess]:
    """A difference in °F taken for K, or the other way round."""
    if entry.kind == "temperature_difference":
        yield Guess("unit-factor", f"{label} is in the other scale (1.8)", answer(entry.si * 1.8), 0.8)
        yield Guess("unit-factor", f"{label} is in the other scale (1.8)", answer(entry.si / 1.8), 0.8)


_POWERS = (
    (1.0, "stands once too often", 0.5),
    (-1.0, "is missing", 0.5),
    (2.0, "stands twice too often", 0.4),
    (-2.0, "is missing twice", 0.4),
    (0.5, "has the wrong power", 0.25),
    (-0.5, "has the wrong power", 0.25),
)


def left_out(entry: Stated | None, used: frozenset[str] | None, expected: float) -> Iterator[Guess]:
    """The input is missing, or stands once too often, in the units of the sheet or in SI.

    ``used`` are the cells that the formula uses; an input that is not among them can only be missing.
    """
    if entry is None or not expected or entry.kind in ("temperature", "dimensionless", "fraction"):
        return
    weight = 1.0 if used is None else 0.7 if entry.cell in used else 2.5
    for number in {abs(entry.value), abs(entry.si)}:
        if not number or 0.97 < number < 1.03:
            continue
        for power, words, prior in _POWERS:
            yield Guess("dimension-mismatch", f'"{entry.label}" {words}', expected * number**power, prior * weight)


def of_difference(a: Stated, b: Stated, expected: float) -> Iterator[Guess]:
    """The difference of two temperatures is missing, or on the wrong side of the solidus."""
    number = abs(a.si - b.si)
    if not number:
        return
    for power, words, prior in _POWERS[:4]:
        yield Guess("dimension-mismatch", f'"{a.label}" less "{b.label}" {words}', expected * number**power, prior)


def upside_down(entry: Stated, expected: float) -> Iterator[Guess]:
    """The inverse, the square, or the root of the right number, in SI or in the unit of the sheet."""
    if entry.kind == "temperature" or not expected or not entry.si or entry.si * entry.value <= 0:
        return
    factor = entry.si / entry.value
    for scale in {1.0, factor}:
        number = expected / scale
        if number > 0 and not 0.95 < number < 1.05:
            yield Guess("dimension-mismatch", "the inverse stands here", scale / number, 0.6)
            yield Guess("dimension-mismatch", "the root is missing", scale * number**2, 0.5)
            yield Guess("dimension-mismatch", "a root stands here", scale * number**0.5, 0.4)


def without_density(inputs: dict[str, Resolved], answer: Callable[[str, float], float]) -> Iterator[Guess]:
    """The kinematic viscosity for the dynamic one: the density beside it is missing."""
    if "kinematic_viscosity" in inputs and "density" in inputs:
        words = "the kinematic viscosity stands where the dynamic one is meant"
        yield Guess("kinematic-for-dynamic", words, answer("density", 1.0), 1.6)
        yield Guess("kinematic-for-dynamic", words, answer("density", 1000.0), 1.3)


def of_result(entry: Stated, expected: float) -> Iterator[Guess]:
    """The stated number itself is a neighbour of the right one."""
    if entry.kind == "temperature":
        yield Guess("celsius-for-kelvin", "°C and K are mixed up", expected - _ZERO, 1.0)
        yield Guess("celsius-for-kelvin", "°C and K are mixed up", expected + _ZERO, 1.0)
        yield from _fahrenheit(entry, expected)
    if entry.kind in ("pressure_absolute", "pressure_gauge"):
        yield Guess("gauge-for-absolute", "the atmosphere is missing", expected - _ATMOSPHERE, 1.2)
        yield Guess("gauge-for-absolute", "the atmosphere is added once too often", expected + _ATMOSPHERE, 0.9)
    if entry.key in ("friction_factor", "pressure_drop", "total_pressure_drop", "head", "wall_shear"):
        yield Guess("fanning-for-darcy", "Fanning's factor stands for Darcy's", expected / 4.0, 1.0)
        yield Guess("fanning-for-darcy", "four times too large, as Fanning's factor with 4f", expected * 4.0, 0.9)
    if entry.key == "fanning_factor":
        yield Guess("fanning-for-darcy", "Darcy's factor stands for Fanning's", expected * 4.0, 1.2)
    if entry.kind == "length" and (entry.key in _ROUND or entry.key.endswith("_radius")):
        yield Guess("radius-for-diameter", "radius and diameter are mixed up", expected * 2.0, 1.0)
        yield Guess("radius-for-diameter", "radius and diameter are mixed up", expected / 2.0, 1.0)


def _fahrenheit(entry: Stated, expected: float) -> Iterator[Guess]:
    try:
        fahrenheit = quantities.read_unit("degF", "temperature")
        celsius = quantities.read_unit("degC", "temperature")
    except CellfuncsError:
        return
    number_f = (expected - fahrenheit.offset) / fahrenheit.factor
    number_c = (expected - celsius.offset) / celsius.factor
    yield Guess("unit-factor", "the number is in °F, not in °C", number_f + celsius.offset, 0.8)
    yield Guess("unit-factor", "the number is in °C, not in °F", number_c * fahrenheit.factor + fahrenheit.offset, 0.8)


AREA_FACTORS = (
    (4.0 / 3.141592653589793, "π/4 is missing"),
    (3.141592653589793 / 4.0, "π/4 stands once too often"),
    (1.0 / 3.141592653589793, "π is missing"),
    (3.141592653589793, "π stands once too often"),
    (2.0, "2 stands once too often"),
    (0.5, "2 is missing"),
    (2.0 / 3.141592653589793, "π/2 is missing"),
)
_AREA_KINDS = ("area", "length", "volume")


def of_area(entry: Stated, expected: float, round_inputs: bool) -> Iterator[Guess]:
    """A factor of the area of a circle or a shell is missing or doubled."""
    for factor, words in AREA_FACTORS:
        if entry.kind == "area":
            yield Guess("area-factor", words, expected * factor, 0.9)
        elif entry.kind in _AREA_KINDS and "diameter" not in entry.key and "radius" not in entry.key:
            yield Guess("area-factor", words, expected * factor, 0.7)
        elif round_inputs and entry.kind not in ("temperature", "length"):
            yield Guess("area-factor", f"{words}, or is once too often, in the area", expected * factor, 0.4)
    if entry.key == "hydraulic_diameter":
        yield Guess("area-factor", "the hydraulic radius A/P stands for 4A/P", expected / 4.0, 1.2)
