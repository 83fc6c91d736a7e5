"""The measures of a sheet's cells: what label and unit state, else what the formula gives."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from functools import lru_cache

from cellfuncs import quantities
from cellfuncs.books import formulas
from cellfuncs.cases import labels
from cellfuncs.quantities import KINDS
from cellfuncs.sheets.dimensions import measure as m
from cellfuncs.sheets.dimensions.constants import Dimension
from cellfuncs.sheets.dimensions.derive import Derivation, Problem
from cellfuncs.sheets.dimensions.measure import NONE, UNKNOWN, Measure, alike
from cellfuncs.sheets.inherited.gather import Quantity
from cellfuncs.sheets.inherited.page import Spot, address
from cellfuncs.sheets.inherited.reading import Reading
from cellfuncs.sheets.inherited.shapes import Shape

_POINTS = frozenset(("temperature", "pressure_absolute", "pressure_gauge"))
_DEEPEST = 40  # cells without unit that stand behind one another
_MOST_IN_RANGE = 200
_ALSO = {"thermal_conductance": "heat capacity rate"}


@lru_cache(maxsize=512)
def kind_words(dimension: Dimension | None) -> str:
    """A dimension in words: the first kind that has it, else its exponents."""
    if dimension is None:
        return "something unknown"
    if alike(dimension, NONE):
        return "a plain number"
    for kind in KINDS.values():
        if alike(dimension, of_kind(kind.name)):
            return _ALSO.get(kind.name, kind.words)
    parts = [
        f"{unit}^{power:g}" for unit, power in zip(("m", "kg", "s", "K", "mol", "A"), dimension, strict=True) if power
    ]
    return "a quantity in " + "·".join(parts)


@lru_cache(maxsize=256)
def of_kind(kind: str) -> Dimension:
    """The dimension of a kind without the plane angle, which formulas come and go with."""
    return tuple(float(power) for power in KINDS[kind].dimension[:-1])


@lru_cache(maxsize=4096)
def stated_measure(kind: str, factor: float, shift: float) -> Measure:
    """What a labelled number with its unit measures."""
    return Measure(of_kind(kind), factor, shift, 1.0 if kind in _POINTS else 0.0)


@dataclass
class Cells:
    """The measures of all cells of a workbook, found as they are asked for."""

    reading: Reading
    _known: dict[str, Measure] = field(default_factory=dict)
    _results: dict[tuple, tuple[Measure, tuple[Problem, ...]]] = field(default_factory=dict)
    _open: set[str] = field(default_factory=set)

    def __post_init__(self) -> None:
        self._stated = {cell: self._of(quantity) for cell, quantity in self.reading.quantities.items()}

    def _of(self, quantity: Quantity) -> Measure:
        stated = quantity.stated
        scale = 1.0
        page = self.reading.links.pages[quantity.page]
        if not quantity.found.in_text:
            scale = page.shown(quantity.found.spot).scale
        if not stated.unit:
            return stated_measure(stated.kind, 1.0 / scale, 0.0)
        unit = quantities.read_unit(stated.unit, stated.kind)
        return stated_measure(stated.kind, unit.factor / scale, unit.offset)

    def stated(self, cell: str) -> Measure | None:
        """What label and unit of a cell state, or None."""
        return self._stated.get(cell)

    def measure(self, cell: str, depth: int = 0) -> Measure:
        """What a cell measures: as stated, or derived from its formula; UNKNOWN for numbers without label or unit."""
        found = self._stated.get(cell) or self._known.get(cell)
        if found is not None:
            return found
        if cell not in self.reading.links.shapes or depth > _DEEPEST or cell in self._open:
            return UNKNOWN
        self._open.add(cell)
        found, _ = self.derived(cell, depth + 1)
        self._open.discard(cell)
        self._known[cell] = found
        return found

    def derived(self, cell: str, depth: int = 0) -> tuple[Measure, tuple[Problem, ...]]:
        """What the formula of a cell gives, and what cannot be right in it. Copies of a formula are walked once."""
        sheet, _, shape = self.reading.links.shapes[cell]
        targets = tuple(self._target(sheet, shape, place, depth) for place in range(len(shape.targets)))
        key = (shape.text, targets, sheet if self.reading.links.has_names else "")
        if key not in self._results:
            self._results[key] = self._walk(shape, targets, sheet, depth)
        return self._results[key]

    def _walk(self, shape: Shape, targets: tuple, sheet: str, depth: int) -> tuple[Measure, tuple[Problem, ...]]:
        tree = formulas.tree(shape.text)
        if tree is None:
            return UNKNOWN, ()
        derivation = Derivation(targets, lambda name: self._name(name, sheet, depth))
        result = derivation.result(tree)
        return result, tuple(derivation.problems)

    def _target(self, sheet: str, shape: Shape, place: int, depth: int) -> Measure | tuple[Measure, ...]:
        found = self.reading.links.target(shape.targets[place], sheet)
        if found is None:
            return UNKNOWN
        page, (top, left, bottom, right) = found
        if (top, left) == (bottom, right):
            return self.measure(address(page.name, (top, left)), depth)
        if (bottom - top + 1) * (right - left + 1) > _MOST_IN_RANGE:
            return UNKNOWN
        return tuple(
            self.measure(address(page.name, spot), depth)
            for spot in _spots(top, left, bottom, right)
            if isinstance(page.values.get(spot), float)
        )

    def _name(self, name: str, sheet: str, depth: int) -> Measure:
        target = self.reading.links.name(name, sheet)
        if target is None or target.area[:2] != target.area[2:]:
            return UNKNOWN
        place = self.reading.links.target(target, sheet)
        return UNKNOWN if place is None else self.measure(address(place[0].name, target.area[:2]), depth)


def _spots(top: int, left: int, bottom: int, right: int) -> Iterator[Spot]:
    return ((row, column) for row in range(top, bottom + 1) for column in range(left, right + 1))


def label_words(key: str) -> str:
    """The words of a label's key."""
    return labels.dictionary()[key].label


def is_known(measure: Measure) -> bool:
    """Whether anything is known of a measure."""
    return measure is not UNKNOWN and m.Measure.known.fget(measure)
