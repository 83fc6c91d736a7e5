"""The embedded host: recalculate a workbook file without a spreadsheet program.

Hands the catalogue to the engine of ``books``, writes the values into a copy of the file, and says what
a reader wants to see: the areas of our formulas with their labels, and where a bare number stands beside
a unit that is not SI.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

from cellfuncs.errors import BookRefused

if TYPE_CHECKING:
    from cellfuncs.books.areas import FoundArea
    from cellfuncs.books.engine import Evaluation

MAX_SHOWN = 40  # rows of an area that are printed
SECONDS = 600.0
AUTHOR = "Cellfuncs"  # of notes
LIST_NAME = "Formulas"  # the sheet for what finds no room in notes

# What stands before our names in a formula's text, by the program that is to read it: Calc knows a function of
# an extension by the name of its service and resolves that at once, Excel knows the bare name.
PREFIXES = {"excel": "", "calc": "CELLFUNCS.FUNCTIONS."}


@dataclass(frozen=True)
class Recalculation:
    """What a recalculation gave; `out` is the file that was written."""

    areas: tuple[FoundArea, ...]
    warnings: tuple[str, ...]
    out: Path


@dataclass(frozen=True)
class Calculated:
    """What was calculated, and the bytes of the file that holds it."""

    areas: tuple[FoundArea, ...]
    warnings: tuple[str, ...]
    data: bytes


def detect(functions: Mapping[str, Any]) -> Callable[[str], str | None]:
    """A reader of function names: the catalogue's name for a name in any case, else None."""
    names = {name.casefold(): name for name in functions}
    return lambda name: names.get(name.casefold())


def recalc(
    path: str | Path,
    out: str | Path | None = None,
    *,
    values: bool = False,
    written_for: str | None = None,
    apart: bool = False,
    progress: Callable[[str], None] | None = None,
    seconds: float = SECONDS,
    functions: Mapping[str, Any] | None = None,
) -> Recalculation:
    """Recalculate the workbook at `path` into `out` (default: beside it, `book.recalculated.xlsx`).

    Only the cells that depend on our functions change, and cells that had no value; everything else in the
    file stays byte for byte, and the file at `path` itself is never written. Raises BookRefused for a file
    that cannot be used. `functions` is the catalogue unless another one is given.

    With `values` the formulas that call our functions give way to their values and are kept in notes (default
    `book.values.xlsx`). `written_for`, "excel" or "calc", writes the names of our functions as that program
    reads them. `apart` calculates in a process of its own, whose memory and time are bounded; `functions` must
    then be left out.
    """
    path = Path(path)
    target = _target(path, out, "values" if values else "recalculated")
    if apart:
        from cellfuncs.hosts.apart import calculated_apart

        done = calculated_apart(path, values=values, written_for=written_for, progress=progress, seconds=seconds)
    else:
        done = calculated(
            path, values=values, written_for=written_for, progress=progress, seconds=seconds, functions=functions
        )
    from cellfuncs.books.package import write_whole

    write_whole(target, done.data)
    return Recalculation(done.areas, done.warnings, target)


def calculated(
    path: Path,
    *,
    values: bool = False,
    written_for: str | None = None,
    progress: Callable[[str], None] | None = None,
    seconds: float = SECONDS,
    functions: Mapping[str, Any] | None = None,
) -> Calculated:
    """What :func:`recalc` writes, without writing it."""
    from cellfuncs.books import inspect
    from cellfuncs.books.areas import areas_of
    from cellfuncs.books.engine import evaluate
    from cellfuncs.books.parts import Draft
    from cellfuncs.books.splice import set_values

    if progress is not None:
        progress("examining the file")
    book = inspect(path)
    if functions is None:
        from cellfuncs.cells import catalogue

        functions = catalogue.functions()
    calls = {name: function.call for name, function in functions.items()}
    is_ours = detect(functions)
    result = evaluate(book, calls, is_ours, seconds=seconds, progress=progress)
    if progress is not None:
        progress("writing")
    areas = tuple(areas_of(result))
    warnings = [*result.warnings, *bare_numbers(result, functions)]
    draft = Draft(book)
    if values:
        from cellfuncs.books.share import share

        warnings += share(result, draft, is_ours, AUTHOR, LIST_NAME)
    else:
        for name, sheet in result.sheets.items():
            data = set_values(sheet, result.values.get(name, {}), result.extents.get(name, {}))
            draft.write(book.sheet(name).part, data)
    if written_for is not None:
        _write_names(draft, is_ours, PREFIXES[written_for])
    return Calculated(areas, tuple(warnings), draft.container())


def _write_names(draft: Any, is_ours: Callable[[str], str | None], prefix: str) -> None:
    """The names of our functions behind `prefix`, in every formula of the workbook."""
    from cellfuncs.books.formulas import normalised
    from cellfuncs.books.rewrite import parts_with_formulas, rewritten

    for part, _ in parts_with_formulas(draft.book):
        draft.write(part, rewritten(draft.read(part), lambda text: normalised(text, is_ours, prefix).text))


def _target(path: Path, out: str | Path | None, word: str) -> Path:
    suffix = path.suffix if path.suffix.lower() in (".xlsx", ".xlsm") else ".xlsx"
    target = Path(out) if out is not None else path.with_name(f"{path.stem}.{word}{suffix}")
    same = target.resolve() == path.resolve()
    if not same and target.exists() and path.exists():
        same = target.samefile(path)
    if same:
        raise BookRefused("The output would overwrite the workbook itself; give another name.")
    if target.is_dir():
        raise BookRefused(f"{target.name} is a folder; give the name of a file.")
    if target.suffix.lower() != suffix.lower():
        raise BookRefused(f"The copy of a {suffix} workbook is one too; write {target.stem or 'out'}{suffix}.")
    return target


def render_areas(areas: Sequence[FoundArea]) -> str:
    """The areas as plain text tables."""
    if not areas:
        return "The workbook holds no formulas with our functions."
    return "\n\n".join(_rendered(area) for area in areas)


def fault_line(areas: Sequence[FoundArea]) -> str:
    """How many faults stand in the areas, and the first; empty where there is none."""
    found = [
        f"{area.sheet}!{area.range}: {value}"
        for area in areas
        for row in area.values
        for value in row
        if isinstance(value, str) and value.startswith("! ")
    ]
    if not found:
        return ""
    return f"{len(found)} fault{'s' if len(found) > 1 else ''} in our formulas, first in {found[0]}"


def _rendered(area: FoundArea) -> str:
    rows = [[label, *map(_shown, values)] for label, values in zip(area.row_labels, area.values, strict=True)]
    left = len(rows) - MAX_SHOWN
    rows = rows[:MAX_SHOWN]
    if any(area.heads):
        rows.insert(0, ["", *area.heads])
    if not any(row[0] for row in rows):
        rows = [row[1:] for row in rows]
    widths = [max(len(cell) for cell in column) for column in zip(*rows, strict=True)]
    lines = [f"{area.sheet}!{area.range}"]
    lines += ["  " + "  ".join(c.ljust(w) for c, w in zip(row, widths, strict=True)).rstrip() for row in rows]
    if left > 0:
        lines.append(f"  … and {left} more rows")
    return "\n".join(lines)


def _shown(value: Any) -> str:
    if value is None:
        return ""
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, float):
        return f"{value:.6g}"
    return " ".join(str(value).split())


# -- bare numbers beside a unit ----------------------------------------------------------------------


def bare_numbers(result: Evaluation, functions: Mapping[str, Any]) -> list[str]:
    """Warnings: one of our formulas takes a bare number for a quantity, and a unit other than SI stands beside it."""
    from cellfuncs.books.areas import texts

    search = _UnitSearch(result, functions)
    for sheet, formulas in result.ours.items():
        for formula in formulas:
            search.formula(sheet, formula)
    words = texts(result, search.lookers, search.wanted)
    found: dict[tuple[str, str, str, str], list[str]] = {}
    for use in search.uses:
        for spot in use.beside:
            unit = _foreign_unit(words.get((use.sheet, spot), ""), use.kind)
            if unit:
                key = (use.function, use.argument, unit, use.sheet)
                found.setdefault(key, []).append(f"{use.place} takes {use.number}")
                break
    return [_bare_text(key, places) for key, places in found.items()]


def _bare_text(key: tuple[str, str, str, str], places: list[str]) -> str:
    function, argument, unit, _ = key
    more = f" (and {len(places) - 1} more cells)" if len(places) > 1 else ""
    return (
        f"{places[0]}{more} as {argument} of {function}: a bare number counts as SI, but {unit} stands beside it;"
        f" give the pair of cells, or CF_SI(number, unit)"
    )


class _Use(NamedTuple):
    """A number that a formula takes for a quantity, and the cells that may name its unit."""

    function: str
    argument: str
    kind: str
    place: str
    number: str
    sheet: str
    beside: tuple[tuple[int, int], ...]


class _UnitSearch:
    """Goes through our formulas and collects the bare numbers they take."""

    def __init__(self, result: Evaluation, functions: Mapping[str, Any]) -> None:
        self.result, self.functions = result, functions
        self.lookers: dict[str, Any] = {}
        self.wanted: dict[str, set[tuple[int, int]]] = {}
        self.uses: list[_Use] = []
        self._ends: dict[tuple[str, int, int, int], tuple[int, int] | None] = {}

    def formula(self, sheet: str, formula: Any) -> None:
        """Note every single-cell argument of our functions in one formula."""
        from cellfuncs.books.formulas import calls, reference
        from cellfuncs.books.grid import area_text

        place = f"{sheet}!{area_text((formula.row, formula.column, formula.row, formula.column))}"
        for name, arguments in calls(formula.text):
            function = self.functions.get(name)
            if function is None:
                continue
            for argument, given in zip(function.arguments, arguments, strict=False):
                if not argument.kind or argument.kind == "dimensionless" or not given:
                    continue
                found = reference(given)
                if found.kind == "cells" and found.area[:2] == found.area[2:]:
                    self._use(name, argument, place, given, self._sheet(found.sheet or sheet), found.area[:2])

    def _sheet(self, name: str) -> str | None:
        for part in self.result.book.sheets:
            if part.name.casefold() == name.casefold() and part.kind == "worksheet":
                return part.name
        return None

    def _use(self, name: str, argument: Any, place: str, given: str, sheet: str | None, spot: tuple[int, int]) -> None:
        if sheet is None:
            return
        looker = self._looker(sheet)
        row, column = spot
        if not looker.raw(row, column).is_number:
            return
        beside = []
        if looker.raw(row, column + 1).is_text:
            beside.append((row, column + 1))
        label, head = (self._along(sheet, looker, row, column, *way) for way in ((0, 1), (1, 0)))
        beside += [near for near in (label, head) if near]
        if beside:
            self.wanted.setdefault(sheet, set()).update(beside)
            self.uses.append(_Use(name, argument.name, argument.kind, place, given, sheet, tuple(beside)))

    def _looker(self, sheet: str) -> Any:
        from cellfuncs.books.areas import Looker
        from cellfuncs.books.reading import read_sheet

        if sheet not in self.lookers:
            text = self.result.sheets.get(sheet) or read_sheet(self.result.book, sheet)
            self.lookers[sheet] = Looker(text, self.result.values.get(sheet, {}))
        return self.lookers[sheet]

    def _along(self, sheet: str, looker: Any, row: int, column: int, up: int, left: int) -> tuple[int, int] | None:
        """The text at the end of the numbers that run up, or left, from a cell: its head or label."""
        passed, end = [], None
        while True:
            key = (sheet, row, column, up)
            if key in self._ends:
                end = self._ends[key]
                break
            passed.append(key)
            row, column = row - up, column - left
            raw = looker.raw(row, column)
            if raw.is_text:
                end = (row, column)
                break
            if not raw.is_number:
                break
        for key in passed:
            self._ends[key] = end
        return end


_BRACKETED = re.compile(r"[\[(]([^\[\]()]{1,40})[\])]\s*$")


@lru_cache(maxsize=2048)
def _foreign_unit(text: str, kind: str) -> str | None:
    """The unit of `kind`, other than SI, that a text is or ends with in brackets; None where there is none."""
    from cellfuncs.errors import CellfuncsError
    from cellfuncs.quantities import read_unit

    bracketed = _BRACKETED.search(text)
    candidates = [text.strip()] if len(text) <= 40 else []
    if bracketed:
        candidates.append(bracketed[1].strip())
    for candidate in filter(None, candidates):
        try:
            unit = read_unit(candidate, kind)
        except CellfuncsError:
            continue
        if unit.factor != 1.0 or unit.offset != 0.0:
            return candidate
        return None
    return None
