"""Evaluation: the formulas that depend on given functions, with the stored values of all others.

The engine never sees the workbook file. It gets a small package made here: the sheets as they are, but
formulas that need no calculation stand there as their stored values, our functions under plain names,
arrays without their old cells, links to other workbooks as stored values. So the engine's gaps touch only
what has to be calculated, and a first run over the other formulas tells how far it is to be trusted.
"""

from __future__ import annotations

import math
import threading
import time
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from cellfuncs.books.externals import Linked, Table, linked, plain_references, table_area, tables
from cellfuncs.books.formulas import IsOurs, as_one_value, normalised, pieces, reference
from cellfuncs.books.gate import Book, inspect
from cellfuncs.books.influence import Place, Readers
from cellfuncs.books.package import shown
from cellfuncs.books.reading import Area, Formula, Sheet, read_sheet
from cellfuncs.books.splice import column_letters
from cellfuncs.books.xmltext import ErrorValue, Value
from cellfuncs.errors import BookRefused

Progress = Callable[[str], None]  # told what is being done

MAX_EXTENT = 1_000_000  # cells of one array
_REACHING = {"INDIRECT", "OFFSET"}  # what they read cannot be seen in the text
_VOLATILE = {"NOW", "TODAY", "RAND", "RANDBETWEEN", "RANDARRAY", "INFO", "CELL"}
_ERRORS = {
    "Div": "#DIV/0!",
    "Na": "#N/A",
    "Name": "#NAME?",
    "Null": "#NULL!",
    "Num": "#NUM!",
    "Ref": "#REF!",
}


@dataclass(slots=True)
class Item:
    """A formula with what is known of it."""

    sheet: str
    formula: Formula
    text: str  # our functions under plain names
    ours: frozenset[str]
    reads: list[Place]
    volatile: bool
    reaching: bool
    readable: bool


@dataclass
class Evaluation:
    """What came out: values to write by sheet and cell (None empties a cell), extents of arrays, warnings."""

    book: Book
    sheets: dict[str, Sheet]
    ours: dict[str, list[Formula]] = field(default_factory=dict)
    values: dict[str, dict[tuple[int, int], Value]] = field(default_factory=dict)
    extents: dict[str, dict[tuple[int, int], Area]] = field(default_factory=dict)
    warnings: list[str] = field(default_factory=list)


def evaluate(
    source: str | Path | bytes | Book,
    functions: Mapping[str, Callable[..., Any]],
    is_ours: IsOurs | None = None,
    *,
    seconds: float = 600.0,
    progress: Progress | None = None,
) -> Evaluation:
    """Calculate all formulas that depend on `functions`, and those without a stored value.

    `functions` maps plain names to callables, which are handed to the engine as they are; `is_ours` gives
    the plain name for a name found in the file, or None. Raises BookRefused for a file the gate refuses and
    when `seconds` run out.
    """
    book = source if isinstance(source, Book) else inspect(source)
    names = {name.casefold(): name for name in functions}
    run = _Run(book, functions, is_ours or (lambda name: names.get(name.casefold())), seconds, progress)
    return run.evaluate()


class _Run:
    """One evaluation."""

    def __init__(
        self,
        book: Book,
        functions: Mapping[str, Callable],
        is_ours: IsOurs,
        seconds: float,
        progress: Progress | None,
    ) -> None:
        self.book, self.functions, self.is_ours = book, functions, is_ours
        self.started = time.monotonic()
        self.deadline = self.started + seconds
        self.progress = progress
        self.sheets: dict[str, Sheet] = {}
        self.items: list[Item] = []
        self.warnings: list[str] = []
        self.names: dict[tuple[str | None, str], str] = {}
        self.tables: dict[str, Table] = {}
        self.links = Linked()

    def say(self, what: str) -> None:
        now = time.monotonic()
        if self.progress is not None:
            spent = int(now - self.started)
            self.progress(f"{what}, {spent} s" if spent else what)
        if now > self.deadline:
            raise BookRefused("The calculation took longer than it may and was stopped.")

    def evaluate(self) -> Evaluation:
        self.say("reading")
        self._read()
        result = Evaluation(self.book, self.sheets, warnings=self.warnings)
        for item in self.items:
            if item.ours:
                result.ours.setdefault(item.sheet, []).append(item.formula)
        changing = self._changing()
        if not changing:
            return result
        if not self.book.full_calculation:
            self._compare_with_stored()
        for _ in range(3):
            workbook = self._calculate(changing, "calculating")
            grown = self._collect(workbook, changing, result)
            more = self.readers.reached(changing, self._writes(grown)) - changing
            more = {n for n in more if self._can_run(self.items[n])}
            if not more:
                break
            changing |= more
        return result

    # -- what is in the workbook ---------------------------------------------------------------------

    def _read(self) -> None:
        for defined in self.book.names:
            scope = defined.sheet.casefold() if defined.sheet else None
            self.names[scope, defined.name.casefold()] = normalised(defined.text, self.is_ours).text
        self.tables = tables(self.book)
        self.links = linked(self.book)
        for part in self.book.sheets:
            if part.formulas:
                sheet = self.sheets[part.name] = read_sheet(self.book, part.name)
                self.items += [self._item(sheet, formula) for formula in sheet.formulas]
                self.say("reading")
        self.readers = Readers([item.reads for item in self.items])

    def _item(self, sheet: Sheet, formula: Formula) -> Item:
        text, ours = normalised(formula.text, self.is_ours)
        item = Item(
            sheet.name, formula, text, ours, [], False, False, bool(text) and formula.kind != "data table"
        )
        self._study(item, text, sheet.name, 0)
        return item

    def _study(self, item: Item, text: str, sheet: str, depth: int) -> None:
        """Note what a formula reads, through defined names too."""
        parts = pieces(text)
        if parts is None or depth > 8:
            item.readable = False
            return
        for part in parts:
            if part.kind == "call":
                name = part.text[:-1].upper().removeprefix("_XLFN.").removeprefix("_XLWS.")
                item.volatile |= name in _VOLATILE
                item.reaching |= name in _REACHING
            elif part.kind == "reference":
                self._study_reference(item, part.text, sheet, depth)

    def _study_reference(self, item: Item, text: str, sheet: str, depth: int) -> None:
        found = reference(text)
        if found.kind == "cells":
            item.reads.append(((found.sheet or sheet).casefold(), found.area))
        elif found.kind == "table":
            place = table_area(text, self.tables, item.sheet, item.formula.row, item.formula.column)
            if place is not None:
                item.reads.append((place[0].casefold(), place[1]))
        elif found.kind == "name":
            name = found.name.casefold()
            scope = (found.sheet or sheet).casefold()
            inner = self.names.get((scope, name), self.names.get((None, name)))
            if inner is not None:
                item.ours |= normalised(inner, self.is_ours).ours
                self._study(item, inner, found.sheet or sheet, depth + 1)
        elif found.kind == "unknown":
            item.reaching = True

    # -- what has to be calculated -------------------------------------------------------------------

    def _can_run(self, item: Item) -> bool:
        return item.readable

    def _writes(self, extents: Mapping[int, Area] | None = None) -> list[list[Place]]:
        extents = extents or {}
        return [
            [(item.sheet.casefold(), item.formula.area)]
            + ([(item.sheet.casefold(), extents[number])] if number in extents else [])
            for number, item in enumerate(self.items)
        ]

    def _changing(self) -> set[int]:
        if self.book.full_calculation:
            return {n for n, item in enumerate(self.items) if self._can_run(item)}
        seeds = {n for n, item in enumerate(self.items) if item.ours or item.formula.stored is None}
        if any(item.ours for item in self.items):
            seeds |= {n for n, item in enumerate(self.items) if item.reaching}
        reached = self.readers.reached(seeds, self._writes())
        return {n for n in reached if self._can_run(self.items[n])}

    def _compare_with_stored(self) -> None:
        """Calculate the formulas that need none of our functions, and say where the engine and the file differ."""
        unfit = {n for n, item in enumerate(self.items) if item.volatile}
        unfit = self.readers.reached(unfit, self._writes())
        tried = {
            n
            for n, item in enumerate(self.items)
            if not item.ours and item.formula.stored is not None and self._can_run(item) and n not in unfit
        }
        if not tried:
            return
        workbook = self._calculate(tried, "comparing with the stored values")
        differing = []
        for number in sorted(tried):
            item = self.items[number]
            value = _value(workbook.get_value(item.sheet, item.formula.row, item.formula.column))
            if not _agree(item.formula.stored, value):
                differing.append(
                    f"{_place(item)} holds {_said(item.formula.stored)}, recalculated it is {_said(value)}"
                )
        if differing:
            more = f" and {len(differing) - 5} more" if len(differing) > 5 else ""
            self.warnings.append(
                "These cells differ when recalculated: " + "; ".join(differing[:5]) + more + "."
            )

    # -- the engine ----------------------------------------------------------------------------------

    def _calculate(self, running: set[int], what: str) -> Any:
        """A workbook of the engine in which the formulas in `running` are calculated and all others are values."""
        import formualizer as fz

        from cellfuncs.books.stand_in import stand_in

        by_sheet: dict[str, dict[int, str | None]] = {}
        for number, item in enumerate(self.items):
            text = self._engine_text(item) if number in running else None
            by_sheet.setdefault(item.sheet, {})[item.formula.row * 16384 + item.formula.column - 1] = text
        data = stand_in(self.book, self.sheets, by_sheet, self._engine_names(), self.links.sheets)
        config = fz.EvaluationConfig()
        config.enable_parallel = False  # one thread: a state of a property library belongs to one
        config.date_system = "1904" if self.book.date_1904 else "1900"
        try:
            workbook = fz.Workbook.from_bytes(data, config=fz.WorkbookConfig(eval_config=config))
        except Exception as error:  # the engine's own kinds are many
            raise BookRefused(f"The workbook cannot be calculated: {_short(error)}") from error
        self._check_loaded(workbook)
        workbook.set_temporal_egress("serial")
        for name, function in self.functions.items():
            workbook.register_function(name, function)
        workbook.register_function(_FIT, _fitted, min_args=3, max_args=3)
        workbook.register_function(_SHAPE, _shape, min_args=1, max_args=1)
        self._run(workbook, what)
        return workbook

    def _check_loaded(self, workbook: Any) -> None:
        names = set(workbook.sheet_names)
        lost = [part.name for part in self.book.sheets if part.kind == "worksheet" and part.name not in names]
        if lost:
            raise BookRefused(f"The sheet {shown(lost[0])} cannot be read for calculation.")

    def _engine_text(self, item: Item) -> str:
        formula = item.formula
        text, _ = plain_references(
            item.text, item.sheet, formula.row, formula.column, self.tables, self.links
        )
        if formula.kind == "plain":
            return as_one_value(text)
        if formula.kind == "fixed":
            top, left, bottom, right = formula.area
            if (bottom - top + 1) * (right - left + 1) > MAX_EXTENT:
                return "#REF!"
            return f"{_FIT}({text},{bottom - top + 1},{right - left + 1})"
        return text

    def _engine_names(self) -> list[tuple[str, str, str | None]]:
        found = []
        for defined in self.book.names:
            if defined.name.startswith("_xlnm."):
                continue
            text = normalised(defined.text, self.is_ours).text
            text, whole = plain_references(text, defined.sheet or "", 1, 1, self.tables, self.links)
            if whole and pieces(text) is not None:
                found.append((defined.name, text, defined.sheet))
        return found

    def _run(self, workbook: Any, what: str) -> None:
        """Calculate in a thread, so that time limits and Ctrl-C work while the engine is busy."""
        failure: list[BaseException] = []

        def work() -> None:
            try:
                workbook.evaluate_all()
            except BaseException as error:
                failure.append(error)

        thread = threading.Thread(target=work, daemon=True)
        thread.start()
        try:
            while thread.is_alive():
                thread.join(0.1)
                self.say(what)
        except BaseException:
            workbook.cancel()
            thread.join(5.0)
            raise
        if failure:
            self.warnings.append(f"Not all cells could be calculated: {_short(failure[0])}")

    # -- results -------------------------------------------------------------------------------------

    def _collect(self, workbook: Any, running: set[int], result: Evaluation) -> dict[int, Area]:
        """Take the values of all calculated cells; gives the extents of the dynamic arrays."""
        result.values, result.extents = {}, {}
        grown: dict[int, Area] = {}
        emptied: dict[str, set[tuple[int, int]]] = {}
        for number in sorted(running):
            item = self.items[number]
            formula, sheet = item.formula, item.sheet
            values = result.values.setdefault(sheet, {})
            anchor = (formula.row, formula.column)
            value = _value(workbook.get_value(sheet, *anchor))
            if formula.kind == "plain":
                values[anchor] = self._kept(item, value)
                continue
            area = formula.area
            if formula.kind == "dynamic":
                area = _extent(workbook, item)
                if isinstance(value, ErrorValue) and value.text == _SPILL:
                    value = self._no_room(workbook, item)
                grown[number] = area
                result.extents.setdefault(sheet, {})[anchor] = area
                emptied.setdefault(sheet, set()).update(self._old_cells(item))
            for row in range(area[0], area[2] + 1):
                for column in range(area[1], area[3] + 1):
                    here = (
                        value if (row, column) == anchor else _value(workbook.get_value(sheet, row, column))
                    )
                    values[row, column] = here
            if values[anchor] is None:
                values[anchor] = 0.0
        for sheet, cells in emptied.items():
            for cell in cells - set(result.values[sheet]):
                result.values[sheet][cell] = None
        return grown

    def _kept(self, item: Item, value: Value) -> Value:
        """A plain formula's value, or the stored one where a formula that needs nothing of ours is unknown to the engine."""
        if isinstance(value, ErrorValue):
            value = ErrorValue("#VALUE!") if value.text == _SPILL else value
            stored = item.formula.stored
            if (
                self.book.full_calculation
                and not item.ours
                and stored is not None
                and not isinstance(stored, ErrorValue)
                and value.text == "#NAME?"
            ):
                self.warnings.append(
                    f"{_place(item)} uses a function that is not known here; its stored value was kept."
                )
                return stored
        return 0.0 if value is None else value

    def _old_cells(self, item: Item) -> set[tuple[int, int]]:
        """The cells of an array's old extent that hold its values: all but the anchor and other formulas."""
        sheet = self.sheets[item.sheet]
        formulas = self._formula_cells(sheet)
        return {(row, column) for row, column, _ in sheet.inside(item.formula.area)} - formulas

    def _formula_cells(self, sheet: Sheet) -> set[tuple[int, int]]:
        cache = self.__dict__.setdefault("_formulas_of", {})
        if sheet.name not in cache:
            cache[sheet.name] = {(f.row, f.column) for f in sheet.formulas}
        return cache[sheet.name]

    def _no_room(self, workbook: Any, item: Item) -> Value:
        """What an array's anchor shows where other cells stand in its way."""
        formula, sheet = item.formula, self.sheets[item.sheet]
        text, _ = plain_references(
            item.text, item.sheet, formula.row, formula.column, self.tables, self.links
        )
        try:
            workbook.set_formula(item.sheet, formula.row, formula.column, f"={_SHAPE}({text})")
            size = workbook.evaluate_cell(item.sheet, formula.row, formula.column)
            rows, columns = (int(part) for part in str(size).split(" "))
        except Exception:  # the size only makes the text better
            return "! table: other cells stand where it needs room; clear the cells below and right of it"
        area = (formula.row, formula.column, formula.row + rows - 1, formula.column + columns - 1)
        own = self._old_cells(item)
        for row, column, index in sheet.inside(area):
            if (
                (row, column) != (formula.row, formula.column)
                and (row, column) not in own
                and sheet.filled[index]
            ):
                blocking = f"{column_letters(column)}{row} is not empty"
                break
        else:
            blocking = "it does not fit here"
        return (
            f"! table: needs {rows} rows and {columns} columns, but {blocking}; clear it or move the formula"
        )


_FIT, _SHAPE = "BOOKS_FITTED", "BOOKS_SHAPE"
_SPILL = "#SPILL!"


def _fitted(value: Any, rows: float, columns: float) -> Any:
    """A value made to fill a fixed array: one value, row or column is repeated, the rest cut or padded with #N/A."""
    from formualizer import LiteralValue

    table = value if isinstance(value, list) and value and isinstance(value[0], list) else [[value]]
    missing = LiteralValue.error("Na", None)
    tall, wide = len(table), len(table[0])

    def at(row: int, column: int) -> Any:
        row, column = (0 if tall == 1 else row), (0 if wide == 1 else column)
        if row >= tall or column >= len(table[row]):
            return missing
        found = table[row][column]
        if isinstance(found, dict):
            return LiteralValue.error(found.get("kind", "Value"), None)
        return found

    return [[at(row, column) for column in range(int(columns))] for row in range(int(rows))]


def _shape(value: Any) -> str:
    if isinstance(value, list) and value and isinstance(value[0], list):
        return f"{len(value)} {len(value[0])}"
    return "1 1"


def _value(value: Any) -> Value:
    """A value of the engine as a cell's value."""
    if value is None or isinstance(value, (bool, float, str)):
        return value
    if isinstance(value, int):
        return float(value)
    if isinstance(value, dict):
        kind = value.get("kind", "Value")
        return ErrorValue(_SPILL if kind == "Spill" else _ERRORS.get(kind, "#VALUE!"))
    if isinstance(value, list):
        return _value(value[0][0]) if value and value[0] else None
    return ErrorValue("#VALUE!")


def _extent(workbook: Any, item: Item) -> Area:
    formula = item.formula
    anchor = (formula.row, formula.column, formula.row, formula.column)
    spill = workbook.inspect_cell(_address(item), include_values=False).cell.spill
    if spill is None or spill.extent is None:
        return anchor
    found = reference(spill.extent)
    return found.area if found.area and found.area[:2] == anchor[:2] else anchor


def _address(item: Item) -> str:
    name = item.sheet.replace("'", "''")
    return f"'{name}'!{column_letters(item.formula.column)}{item.formula.row}"


def _place(item: Item) -> str:
    return f"{shown(item.sheet)}!{column_letters(item.formula.column)}{item.formula.row}"


def _agree(stored: Value, value: Value) -> bool:
    if isinstance(stored, float) and isinstance(value, float):
        return math.isclose(stored, value, rel_tol=1e-9, abs_tol=1e-12)
    if value is None:
        return stored in (0.0, "", None)
    return type(stored) is type(value) and stored == value


def _said(value: Value) -> str:
    text = f"{value:.10g}" if isinstance(value, float) else shown(str(value))
    return text if text else "an empty text"


def _short(error: BaseException) -> str:
    text = " ".join(str(error).split())
    return shown(text[:120])
