"""What formulas give against what their cells state: findings."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import combinations

from cellfuncs.checks.finding import Finding
from cellfuncs.checks.stated import Stated
from cellfuncs.quantities import KINDS
from cellfuncs.sheets.dimensions import constants, derive
from cellfuncs.sheets.dimensions import measure as m
from cellfuncs.sheets.dimensions.cells import Cells, kind_words
from cellfuncs.sheets.dimensions.constants import CLOSE
from cellfuncs.sheets.dimensions.derive import Problem
from cellfuncs.sheets.dimensions.measure import TEMPERATURE, Measure, alike
from cellfuncs.sheets.inherited.reading import Reading

SOURCE = "units carried through the formula (NIST SP 811, 2008)"
_LEAST = 0.7  # numbers from here to its reciprocal may be margins and efficiencies
_DIFFERENT_ZERO = 1.0  # K


def findings(reading: Reading) -> Iterator[Finding]:
    """What is wrong with the units in the formulas of a workbook, in reading order."""
    cells = Cells(reading)
    seen: dict[tuple, Problem | None] = {}  # copies of a formula are compared once
    known = reading.links.resting_on(reading.quantities)  # where no unit goes in, none comes out
    for cell in reading.links.shapes:
        if cell not in known:
            continue
        measure, problems = cells.derived(cell)
        quantity = reading.quantities.get(cell)
        stated = cells.stated(cell)
        entry = quantity.stated if quantity else None
        if problems:
            yield _finding(cell, entry, problems[0], 0.9)
        elif entry is not None and stated is not None and measure.known:
            key = (measure, stated, entry.kind, entry.unit)
            if key not in seen:
                seen[key] = compared(measure, stated, entry)
            problem = seen[key]
            if problem is not None:
                yield _finding(cell, entry, problem, 0.8)


def compared(derived: Measure, stated: Measure, entry: Stated) -> Problem | None:
    """Why a formula's result is not what its cell states; None where it is, or where that cannot be judged."""
    if derived.literal or derived.empirical:
        return None
    factor = derived.factor
    literals = derived.literals
    if not alike(derived.dimension, stated.dimension):
        carried = _carried(derived, stated)
        if carried is None:
            open_ones = any(constants.may_carry_a_unit(value) for value, _ in derived.literals)
            if open_ones or any(power != round(power) for power in derived.dimension):
                return None
            words = f"the formula gives {_of(derived)}, the cell states {KINDS[entry.kind].words} ({_unit(entry)})"
            return Problem("dimension-mismatch", words)
        factor, literals = carried
        if len(derived.literals) - len(literals) > 1:
            return None  # two numbers with units: what scale they have is a guess
    problem = _points(derived, stated, entry) or _marks(derived)
    return problem or _scale(factor, literals, stated, entry)


def _of(measure: Measure) -> str:
    return kind_words(measure.dimension)


def _unit(entry: Stated) -> str:
    return entry.unit or "no unit"


def _carried(derived: Measure, stated: Measure) -> tuple[float, m.Literals] | None:
    """Scale and numbers left when one or two numbers in the formula carry a unit, such as 9.81; None where none do."""
    found = [
        (place, power, constant)
        for place, (value, power) in enumerate(derived.literals)
        for constant in constants.constants()
        if math.isclose(value, constant.value, rel_tol=CLOSE)
    ]
    for chosen in (*combinations(found, 1), *combinations(found, 2)):
        places = {place for place, _, _ in chosen}
        if len(places) < len(chosen):
            continue
        dimension = derived.dimension
        factor = derived.factor
        for _, power, constant in chosen:
            dimension = tuple(a + power * b for a, b in zip(dimension, constant.dimension, strict=True))
            factor *= constant.si**power
        if alike(dimension, stated.dimension):
            rest = tuple(entry for place, entry in enumerate(derived.literals) if place not in places)
            return factor, rest
    return None


def _points(derived: Measure, stated: Measure, entry: Stated) -> Problem | None:
    """A difference where a temperature is stated, or another zero."""
    if not alike(stated.dimension, TEMPERATURE):
        if m.is_point(stated) and m.is_point(derived) and abs(derived.shift - stated.shift) > 1000.0:
            if derived.shift > stated.shift:
                return Problem("gauge-for-absolute", "a gauge pressure stands where an absolute one is stated")
            return Problem("gauge-for-absolute", "an absolute pressure stands where a gauge one is stated")
        return None
    if derived.weight == 0.0 and abs(derived.shift) > _DIFFERENT_ZERO:
        return Problem("celsius-for-kelvin", "takes the difference of temperatures with different zeros")
    if m.is_point(stated) and abs(derived.weight) < 1e-9:
        return Problem("dimension-mismatch", "a difference of temperatures stands where a temperature is stated")
    if not m.is_point(stated) and m.is_point(derived) and not derived.odd:
        return Problem("dimension-mismatch", "a temperature stands where a difference of temperatures is stated")
    if m.is_point(stated) and m.is_point(derived):
        if not math.isclose(derived.factor, stated.factor, rel_tol=CLOSE):
            return Problem("unit-factor", f"the formula gives the temperature on another scale than {_unit(entry)}")
        if abs(derived.shift - stated.shift) > _DIFFERENT_ZERO:
            return Problem("celsius-for-kelvin", f"the formula counts from another zero than {_unit(entry)}")
    return None


def _marks(derived: Measure) -> Problem | None:
    """°C where kelvins are needed, gauge where absolute is."""
    marks = derived.marks
    if "two zeros above" in marks:
        return Problem("celsius-for-kelvin", "takes the difference of temperatures with different zeros")
    if "celsius below" in marks or "celsius power" in marks:
        return Problem("celsius-for-kelvin", "divides by, or raises to a power, a temperature that is not absolute")
    gauge = {mark for mark in marks if mark.startswith("gauge")}
    pressures = {mark for mark in marks if "pressure" in mark} | gauge
    with_temperature = any("temperature" in mark or mark.startswith("celsius") for mark in marks)
    ratio = len({mark.rpartition(" ")[2] for mark in pressures}) > 1
    if gauge and (with_temperature or ratio or "gauge power" in gauge):
        return Problem("gauge-for-absolute", "takes a gauge pressure where an absolute one is needed")
    return None


def _scale(factor: float, literals: m.Literals, stated: Measure, entry: Stated) -> Problem | None:
    """Whether the numbers in a formula convert between the units of its cells and that of its result."""
    wanted = factor / stated.factor
    must = {
        place for place, (value, power) in enumerate(literals) if constants.converts(value) and power == round(power)
    }
    turns = any(math.isclose(value, math.pi) for value, _ in literals)
    fits_without = False
    for product, places in constants.subsets(literals):
        if not _equal(product, wanted, turns):
            continue
        unused = math.prod(literals[place][0] ** literals[place][1] for place in must - set(places))
        if math.isclose(unused, 1.0, rel_tol=CLOSE):
            return None
        fits_without = True
    if fits_without:
        listed = " and ".join(f"{literals[place][0]:g}" for place in sorted(must))
        return Problem("unit-factor", f"converts with {listed}, but the units of its cells need no such factor")
    used = math.prod(literals[place][0] ** literals[place][1] for place in must)
    left = wanted / used
    others = [value for value, _ in literals if not constants.is_plain(value)]
    if others and not (constants.is_conversion(left) and all(_LEAST < abs(v) < 1 / _LEAST for v in others)):
        return None
    result = f"the result is {left:.4g} times too {'small' if left < 1 else 'large'}" if left > 0 else ""
    lacks = f"the units of its cells do not give {_unit(entry)}"
    return Problem("unit-factor", f"{lacks}: a factor {1 / left if left else 0:.4g} is missing; {result}".rstrip("; "))


def _equal(product: float, wanted: float, turns: bool) -> bool:
    """Whether numbers convert rightly; with π among them a turn may be one, or 2π radians."""
    ways = (wanted, wanted / (2 * math.pi)) if turns else (wanted,)
    return any(math.isclose(product, way, rel_tol=CLOSE) for way in ways)


def _finding(cell: str, entry: Stated | None, problem: Problem, confidence: float) -> Finding:
    label = entry.label if entry else "formula"
    return Finding(
        cell=cell,
        severity="error",
        quantity=derive_words(entry),
        stated=entry.value if entry else None,
        recomputed=None,
        unit=entry.unit if entry else "",
        code=problem.code,
        cause=problem.words,
        confidence=confidence,
        message=f"{label}: {problem.words}.",
        source=SOURCE,
        reasoning=(entry.formula,) if entry and entry.formula else (),
    )


def derive_words(entry: Stated | None) -> str:
    """What a cell states, in words."""
    from cellfuncs.sheets.dimensions.cells import label_words

    return label_words(entry.key) if entry else "formula without a label"


__all__ = ["compared", "derive", "findings"]
