"""What the engine calculated, as values for the cells of the file: one value, fixed arrays, arrays that spill."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from cellfuncs.books.exchange import CIRCULAR, SPILL, from_engine
from cellfuncs.books.externals import quoted
from cellfuncs.books.formulas import reference
from cellfuncs.books.grid import Area, column_letters
from cellfuncs.books.influence import Place
from cellfuncs.books.package import shown
from cellfuncs.books.reading import Formula, Sheet
from cellfuncs.books.xmltext import ErrorValue, Value
from cellfuncs.errors import BookRefused

MAX_RESULTS = 2_000_000  # cells
_VALUE = ErrorValue("#VALUE!")

Spot = tuple[int, int]


@dataclass(slots=True)
class Item:
    """A formula with what is known of it."""

    sheet: str
    formula: Formula
    text: str  # our functions under plain names, and plain references only
    ours: frozenset[str]
    reads: list[Place]
    volatile: bool
    reaching: bool
    readable: bool

    @property
    def place(self) -> str:
        """`Sheet!B3`, for messages."""
        return f"{shown(self.sheet)}!{column_letters(self.formula.column)}{self.formula.row}"


@dataclass
class Outcome:
    """Collects values by sheet and cell (None empties a cell), and the extents of dynamic arrays."""

    items: Sequence[Item]
    sheets: Mapping[str, Sheet]
    failed: set[int]
    keep_unknown: bool
    values: dict[str, dict[Spot, Value]] = field(default_factory=dict)
    extents: dict[str, dict[Spot, Area]] = field(default_factory=dict)
    warnings: list[str] = field(default_factory=list)

    def collect(self, workbook: Any, running: set[int]) -> dict[int, Area]:
        """Take all calculated cells over; gives the new extents of the dynamic arrays by item."""
        grown: dict[int, Area] = {}
        crowded: list[Item] = []
        freed: dict[str, set[Spot]] = {}
        results = 0
        self._formulas = {name: {(f.row, f.column) for f in sheet.formulas} for name, sheet in self.sheets.items()}
        for number in sorted(running):
            item = self.items[number]
            formula = item.formula
            values = self.values.setdefault(item.sheet, {})
            anchor = (formula.row, formula.column)
            if number in self.failed:
                values[anchor] = self._failure(item, "cannot be calculated here")
                continue
            value = from_engine(workbook.get_value(item.sheet, *anchor))
            if formula.kind == "plain":
                values[anchor] = self._single(item, value)
                continue
            area = formula.area
            if formula.kind == "dynamic":
                area = grown[number] = _extent(workbook, item)
                self.extents.setdefault(item.sheet, {})[anchor] = area
                freed.setdefault(item.sheet, set()).update(self._old_cells(item))
                if value == SPILL:
                    crowded.append(item)
            results += (area[2] - area[0] + 1) * (area[3] - area[1] + 1)
            if results > MAX_RESULTS:
                raise BookRefused(f"The tables of the workbook fill over {MAX_RESULTS // 1_000_000} million cells.")
            for row in range(area[0], area[2] + 1):
                for column in range(area[1], area[3] + 1):
                    values[row, column] = from_engine(workbook.get_value(item.sheet, row, column))
            values[anchor] = self._single(item, value)
        for sheet, cells in freed.items():
            for cell in cells - set(self.values[sheet]):
                self.values[sheet][cell] = None
        for item in crowded:  # last, for it sets formulas anew
            text = self._no_room(workbook, item) if item.ours else _VALUE
            self.values[item.sheet][item.formula.row, item.formula.column] = text
        return grown

    def _single(self, item: Item, value: Value) -> Value:
        """The value that a formula's own cell gets."""
        if value is None:
            return 0.0  # a reference to an empty cell shows 0
        if value == CIRCULAR:
            return self._failure(item, "refers to itself in a circle")
        if value == SPILL:
            return _VALUE
        stored = item.formula.stored
        unknown = isinstance(value, ErrorValue) and value.text == "#NAME?"
        if self.keep_unknown and unknown and not item.ours and stored is not None:
            self.warnings.append(f"{item.place} calls a function that is not known here; its stored value was kept.")
            return stored
        return value

    def _failure(self, item: Item, what: str) -> Value:
        self.warnings.append(f"{item.place} {what}.")
        return f"! formula: {what}" if item.ours else _VALUE

    def _old_cells(self, item: Item) -> set[Spot]:
        """The cells of an array's old extent that hold its values: all but formulas."""
        area = self.sheets[item.sheet].inside(item.formula.area)
        return {(row, column) for row, column, _ in area} - self._formulas[item.sheet]

    def _no_room(self, workbook: Any, item: Item) -> str:
        """What an array's anchor shows where other cells stand in its way."""
        formula, sheet = item.formula, self.sheets[item.sheet]
        text = item.text
        try:
            workbook.set_formula(item.sheet, formula.row, formula.column, f'=ROWS({text})&" "&COLUMNS({text})')
            size = workbook.evaluate_cell(item.sheet, formula.row, formula.column)
            rows, columns = (int(part) for part in str(size).split(" "))
        except Exception:  # the size only makes the text better
            return "! table: other cells stand where it needs room; clear the cells below and right of it"
        area = (formula.row, formula.column, formula.row + rows - 1, formula.column + columns - 1)
        own = self._old_cells(item) | {(formula.row, formula.column)}
        blocking = "does not fit here"
        for row, column, index in sheet.inside(area):
            if (row, column) not in own and sheet.filled[index]:
                blocking = f"{column_letters(column)}{row} is not empty"
                break
        return f"! table: needs {rows} rows and {columns} columns, but {blocking}; clear it or move the formula"


def _extent(workbook: Any, item: Item) -> Area:
    formula = item.formula
    anchor = (formula.row, formula.column, formula.row, formula.column)
    address = f"{quoted(item.sheet)}!{column_letters(formula.column)}{formula.row}"
    spill = workbook.inspect_cell(address, include_values=False).cell.spill
    if spill is None or spill.extent is None:
        return anchor
    found = reference(spill.extent)
    return found.area if found.area and found.area[:2] == anchor[:2] else anchor
