"""Evaluation: the formulas that depend on given functions, with the stored values of all others.

The engine never sees the workbook file. It gets a small package made here: the sheets as they are, but
formulas that need no calculation stand there as their stored values, our functions under plain names,
arrays without their old cells, links to other workbooks as stored values. So the engine's gaps touch only
what has to be calculated, and a first run over the other formulas tells how far it is to be trusted.
"""

from __future__ import annotations

import threading
import time
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from cellfuncs.books.exchange import agree, fitted, from_engine, said
from cellfuncs.books.formulas import IsOurs, normalised, pieces, reference
from cellfuncs.books.gate import Book, inspect
from cellfuncs.books.grid import Area
from cellfuncs.books.influence import Place, Readers
from cellfuncs.books.outcome import Item, Outcome
from cellfuncs.books.package import shown
from cellfuncs.books.reading import Formula, Sheet, read_sheet
from cellfuncs.books.translate import FITTED, Translator, engine_text
from cellfuncs.books.xmltext import Value
from cellfuncs.errors import BookRefused

Progress = Callable[[str], None]  # told what is being done

_REACHING = {"INDIRECT", "OFFSET"}  # what they read cannot be seen in the text
_VOLATILE = {"NOW", "TODAY", "RAND", "RANDBETWEEN", "RANDARRAY", "INFO", "CELL"}


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
        self.failed: set[int] = set()

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
            outcome = Outcome(self.items, self.sheets, self.failed, keep_unknown=self.book.full_calculation)
            grown = outcome.collect(workbook, changing)
            result.values, result.extents = outcome.values, outcome.extents
            unknown = outcome.warnings
            more = self.readers.reached(changing, self._writes(grown)) - changing
            more = {n for n in more if self._can_run(self.items[n])}
            if not more:
                break
            changing |= more
        self.warnings += unknown
        return result

    # -- what is in the workbook ---------------------------------------------------------------------

    def _read(self) -> None:
        self.translator = Translator(self.book, self.is_ours)
        for part in self.book.sheets:
            if part.formulas:
                sheet = self.sheets[part.name] = read_sheet(self.book, part.name)
                self.items += [self._item(sheet, formula) for formula in sheet.formulas]
                self.say("reading")
        self.readers = Readers([item.reads for item in self.items])
        unread = [item for item in self.items if not item.readable and item.formula.text]
        if unread:
            more = f" and {len(unread) - 1} more" if len(unread) > 1 else ""
            self.warnings.append(f"{unread[0].place}{more} cannot be read; stored values were kept there.")

    def _item(self, sheet: Sheet, formula: Formula) -> Item:
        formula.text = normalised(formula.text, self.is_ours).text  # from here on without prefixes
        text = self.translator.plain(formula.text, sheet.name, formula.row, formula.column)
        readable = bool(text) and formula.kind != "data table"
        item = Item(sheet.name, formula, text or "", frozenset(), [], False, False, readable)
        if text:
            self._study(item, text)
        return item

    def _study(self, item: Item, text: str) -> None:
        """Note what a formula calls and reads; its names, tables and links are plain references by now."""
        ours = set()
        for part in pieces(text) or ():
            if part.kind == "call":
                name = part.text[:-1].upper().removeprefix("_XLFN.").removeprefix("_XLWS.")
                item.volatile |= name in _VOLATILE
                item.reaching |= name in _REACHING
                if own := self.is_ours(part.text[:-1]):
                    ours.add(own)
            elif part.kind == "reference":
                found = reference(part.text)
                if found.kind == "cells":
                    item.reads.append(((found.sheet or item.sheet).casefold(), found.area))
                elif found.kind == "unknown" and part.text != "#REF!":
                    item.reaching = True
        item.ours = frozenset(ours)

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
            value = from_engine(workbook.get_value(item.sheet, item.formula.row, item.formula.column))
            if not agree(item.formula.stored, value):
                differing.append(f"{item.place} holds {said(item.formula.stored)}, recalculated it is {said(value)}")
        if differing:
            more = f" and {len(differing) - 5} more" if len(differing) > 5 else ""
            self.warnings.append("These cells differ when recalculated: " + "; ".join(differing[:5]) + more + ".")

    # -- the engine ----------------------------------------------------------------------------------

    def _calculate(self, running: set[int], what: str) -> Any:
        """A workbook of the engine in which the formulas in `running` are calculated and all others are values."""
        import formualizer as fz

        from cellfuncs.books.stand_in import stand_in

        by_sheet: dict[str, dict[int, str | None]] = {}
        for number, item in enumerate(self.items):
            text = engine_text(item.text, item.formula) if number in running else None
            by_sheet.setdefault(item.sheet, {})[item.formula.row * 16384 + item.formula.column - 1] = text
        data = stand_in(self.book, self.sheets, by_sheet, self._engine_names(), self.translator.links.sheets)
        config = fz.EvaluationConfig()
        # One thread, for the states of a property library belong to one; and the engine's parallel way,
        # for only that one stops soon when it is told to.
        config.enable_parallel, config.max_threads = True, 1
        config.date_system = "1904" if self.book.date_1904 else "1900"
        try:
            workbook = fz.Workbook.from_bytes(data, config=fz.WorkbookConfig(eval_config=config))
        except Exception as error:  # the engine's own kinds are many
            raise BookRefused(f"The workbook cannot be calculated: {_short(error)}") from error
        self._check_loaded(workbook)
        workbook.set_temporal_egress("serial")
        for name, function in self.functions.items():
            workbook.register_function(name, function)
        workbook.register_function(FITTED, fitted, min_args=3, max_args=3)
        self._run(workbook, running, what)
        return workbook

    def _check_loaded(self, workbook: Any) -> None:
        names = set(workbook.sheet_names)
        lost = [part.name for part in self.book.sheets if part.kind == "worksheet" and part.name not in names]
        if lost:
            raise BookRefused(f"The sheet {shown(lost[0])} cannot be read for calculation.")

    def _engine_names(self) -> list[tuple[str, str, str | None]]:
        """Names that stand for plain cells, for INDIRECT; elsewhere names are replaced in the formulas."""
        return [
            (defined.name, defined.text, defined.sheet)
            for defined in self.book.names
            if not defined.name.startswith("_xlnm.") and reference(defined.text).kind == "cells"
        ]

    def _run(self, workbook: Any, running: set[int], what: str) -> None:
        """Calculate in a thread, so that time limits and Ctrl-C work while the engine is busy."""
        failures: list[BaseException] = []

        def work() -> None:
            try:
                workbook.evaluate_all()
            except BaseException as error:
                failures.append(error)

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
        if failures:
            self._one_by_one(workbook, running, failures[0])

    def _one_by_one(self, workbook: Any, running: set[int], first: BaseException) -> None:
        """The engine gave up as a whole: find the cells that make it, and go on without them."""
        for number in sorted(running):
            item = self.items[number]
            try:
                workbook.evaluate_cell(item.sheet, item.formula.row, item.formula.column)
            except Exception:  # whatever the engine raises, it is this cell that cannot be calculated
                self.failed.add(number)
            self.say("calculating cell by cell")
        if self.failed >= running:
            raise BookRefused(f"The workbook cannot be calculated: {_short(first)}")


def _short(error: BaseException) -> str:
    return shown(" ".join(str(error).split())[:120])
