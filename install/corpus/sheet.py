"""The workbook of a seed, with what is wrong in it."""

import random
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from corpus.calculation import SI, US, Calculation, Slip
from corpus.calculations import KINDS
from corpus.formula import UNITS, evaluate, names_in, with_cells, write_out
from corpus.layouts import DOWN, LAYOUTS, Page, number_format
from corpus.slips import all_slips

# one sheet in so many has no slip
_CLEAN_EVERY = 4
# numbers of the other cases of a sheet with several
_OTHERS = (1.0, 0.93, 1.08)


@dataclass(frozen=True)
class Made:
    """A seed's sheet: its kind, layout and system, the slip (None on a clean sheet), and the cells of the slip."""

    seed: int
    kind: str
    layout: str
    system: str
    slip: Slip | None
    cells: tuple[str, ...]
    filled: int


@dataclass
class Worked:
    """A calculation with its written formulas and its numbers."""

    calculation: Calculation
    written: dict[str, str]
    values: dict[str, float]


def worked(c: Calculation, slip: Slip | None = None) -> Worked:
    """All numbers of a calculation, with a slip where one is given."""
    units = {line.name: line.unit for line in c.lines}
    typed = {line.name: line.value for line in c.lines if line.pattern is None}
    patterns = {line.name: line.pattern for line in c.lines if line.pattern is not None}
    if slip is not None and not slip.name.startswith("note:"):
        changes = [(slip.name, slip.pattern, slip.value), *((n, None, v) for n, v in slip.lines)]
        for name, pattern, value in changes:
            typed.pop(name, None)
            patterns.pop(name, None)
            if pattern is not None:
                patterns[name] = pattern
            else:
                typed[name] = value
    values, written = dict(typed), {}
    for line in c.lines:
        if line.name in patterns:
            pattern = patterns[line.name]
            if pattern.startswith("=") and not c.line(line.name).pattern.startswith("="):
                # the result without its own conversion
                written[line.name] = write_out(pattern[1:], "", units)
            else:
                written[line.name] = write_out(pattern, line.unit, units)
            values[line.name] = evaluate(written[line.name], values)
    return Worked(c, written, values)


def calculation_of(seed: int, kind: Any, system: str) -> Calculation:
    """The calculation of a seed."""
    return kind(random.Random(f"{seed} numbers"), system)


def make(seed: int, folder: Path) -> Made:
    """Write the workbook of a seed into a folder (``SEED.xlsx``)."""
    rng = random.Random(f"{seed} sheet")
    kind = KINDS[seed % len(KINDS)]
    layout = LAYOUTS[(seed // len(KINDS)) % len(LAYOUTS)]
    system = rng.choice((SI, US))
    c = calculation_of(seed, kind, system)
    right = worked(c)
    slip = None
    if rng.randrange(_CLEAN_EVERY):
        slips = all_slips(c, right.values, rng)
        # every code as often as any other, however many ways there are to it
        code = rng.choice(sorted({s.code for s in slips}))
        slip = rng.choice([s for s in slips if s.code == code and _tells(c, right, s)] or [None])
    if slip is not None and slip.name.startswith("note:"):
        c.notes.append(slip.name[5:])
    page = layout(c, right.values, rng)
    done = worked(c, slip)
    filled = _write(folder / f"{seed}.xlsx", page, done, layout in DOWN, slip)
    return Made(seed, kind.__name__, layout.__name__, system, slip, _cells(page, c, slip), filled)


def _tells(c: Calculation, right: Worked, slip: Slip) -> bool:
    """Whether a slip changes its number by more than handbooks differ."""
    if slip.name.startswith("note:") or slip.seen_at:
        return True
    try:
        now = worked(c, slip).values[slip.name]
    except (ArithmeticError, ValueError, TypeError):
        # the sheet would show an error, which nobody overlooks
        return False
    before = right.values[slip.name]
    return abs(now / before - 1.0) > 0.08 if before else True


def _address(place: tuple[str, int, int]) -> str:
    from xlsxwriter.utility import xl_rowcol_to_cell

    sheet, row, column = place
    return f"{sheet}!{xl_rowcol_to_cell(row, column)}"


def _cells(page: Page, c: Calculation, slip: Slip | None) -> tuple[str, ...]:
    if slip is None:
        return ()
    if slip.name.startswith("note:"):
        place = next(at for at, text in page.texts.items() if text == slip.name[5:])
        return (_address(place),)
    return tuple(_address(page.places[name]) for name in slip.cells)


def _write(path: Path, page: Page, done: Worked, down: bool, slip: Slip | None) -> int:
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    sheets: dict[str, Any] = {}

    def sheet(name: str) -> Any:
        if name not in sheets:
            sheets[name] = book.add_worksheet(name)
        return sheets[name]

    for name, *_rest in page.merged:
        sheet(name)
    for place in [*page.places.values(), *page.texts]:
        sheet(place[0])
    for name, top, left, bottom, right, text in page.merged:
        sheet(name).merge_range(top, left, bottom, right, text)
    for (name, row, column), text in page.texts.items():
        if text != "":
            sheet(name).write_string(row, column, str(text))
    for line, name in page.names.items():
        at, row, column = page.places[line]
        from xlsxwriter.utility import xl_rowcol_to_cell

        book.define_name(name, f"={at}!{xl_rowcol_to_cell(row, column, True, True)}")
    filled = len(page.texts)
    for repeat in range(page.repeats):
        one = _other_case(done, repeat, slip)
        places = {n: _moved(p, repeat, down) for n, p in page.places.items()}
        filled += _write_numbers(book, sheet, page, one, places)
    book.close()
    return filled


def _moved(place: tuple[str, int, int], repeat: int, down: bool) -> tuple[str, int, int]:
    name, row, column = place
    return (name, row + repeat, column) if down else (name, row, column + repeat)


def _other_case(done: Worked, repeat: int, slip: Slip | None) -> Worked:
    """The same calculation with another flow or size, without the slip."""
    if repeat == 0:
        return done
    c = done.calculation
    for line in c.lines:
        if line.pattern is None and line.name in ("V", "m", "w", "L", "h", "mh", "U"):
            old = line.value
            line.value = float(f"{old * _OTHERS[repeat]:.{line.digits}g}")
            other = worked(c)
            line.value = old
            return other
    return worked(c)


def _write_numbers(book: Any, sheet: Any, page: Page, done: Worked, places: dict[str, tuple[str, int, int]]) -> int:
    for line in done.calculation.lines:
        name, row, column = places[line.name]
        value = done.values[line.name]
        shown = page.formats.get(line.name) or number_format(line, value)
        style = book.add_format({"num_format": shown})
        written = done.written.get(line.name)
        if written is None:
            sheet(name).write_number(row, column, value, style)
            continue
        cells = {n: _reference(page, places, n, name) for n in names_in(written)}
        sheet(name).write_formula(row, column, with_cells(written, cells), style, value)
    return len(places)


def _reference(page: Page, places: dict[str, tuple[str, int, int]], line: str, here: str) -> str:
    from xlsxwriter.utility import xl_rowcol_to_cell

    if line in page.names:
        return page.names[line]
    name, row, column = places[line]
    cell = xl_rowcol_to_cell(row, column)
    return cell if name == here else f"{name}!{cell}"


def direct_case(c: Calculation, done: Worked) -> tuple[Any, dict[str, tuple[str, ...]]]:
    """The calculation as a reader should hand it over, without a workbook: the case and the graph."""
    from cellfuncs.cases import labels
    from cellfuncs.checks import SheetCase, Stated

    case = SheetCase("direct", flow=c.flow, facts=dict(c.facts))
    graph = {}
    at = {line.name: f"Calc!B{k + 1}" for k, line in enumerate(c.lines)}
    for line in c.lines:
        factor, offset = UNITS[line.unit]
        value = done.values[line.name]
        written = done.written.get(line.name)
        cell = at[line.name]
        refs = tuple(at[name] for name in names_in(written)) if written else ()
        rounding = 0.5 * 10.0 ** _last_digit(value, line.digits) * factor if value else 0.0
        if refs:
            graph[cell] = refs
        case.add(
            Stated(line.key, labels.dictionary()[line.key].kind, value, _unit(line.unit), value * factor + offset,
                   rounding, cell, line.labels[0], f"={written}" if written else None, refs)
        )  # fmt: skip
    return case, graph


def _unit(unit: str) -> str:
    return {"dK": "K", "dF": "degF"}.get(unit, unit)


def _last_digit(value: float, digits: int) -> int:
    import math

    return math.floor(math.log10(abs(value))) - digits + 1
