"""The self-test workbook: every cell function at least once beside its expected value, and one line that sums up.

A user proves an installation with it in any host. Expected values come from published rows where there are any, else
from the embedded host at the time of building. Every answer depends on the cell of the run, so that typing a number
there makes the host calculate all of them anew: stored values alone prove nothing.
"""

import datetime as dt
import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from cellfuncs import __version__
from cellfuncs.cells.catalogue import CellFunction, functions
from cellfuncs.sheets import examples, reference
from cellfuncs.sheets.inks import CAUTION, GREY
from cellfuncs.sheets.look import Look

KINDS = ("published", "derived", "computed", "common practice", "memory")  # in the order they are taken
USUAL, MANY = 2, 6  # checks of a function; of one that many rows speak about
MANY_ROWS = 15
OWN_TOLERANCE = 1e-9  # relative; of values computed by Cellfuncs itself
SHEET, BLOCKS = "Self-test", "Blocks"
RUN = "$C$6"
FIRST = 9  # row of the first check, counted from 1
HEADS = ("", "function", "formula", "answer", "expected", "difference", "tolerance", "", "kind of check", "source")
_WIDTHS = (5, 27, 62, 18, 18, 13, 11, 10, 17, 90)


@dataclass(frozen=True)
class Check:
    """A formula, without its equals sign, with what it should answer and by how much it may miss that."""

    function: str
    formula: str
    expected: float | str
    tolerance: float
    kind: str
    source: str


# what a host may hand over: function, formula, expected, what it shows
HANDED_OVER = (
    ("CF_REYNOLDS", 'CF_REYNOLDS("2 m/s","20 mm","998 kg/m3","1 mPa s")', 39920.0, "texts with units"),
    ("CF_REYNOLDS", "CF_REYNOLDS(Example!$G$5:$H$5,0.02,998,0.001)", 59880.0, "value and unit side by side"),
    ("CF_REYNOLDS", "INDEX(CF_REYNOLDS(Example!$C$5:$D$5,0.02,998,0.001),1,2)", 29940.0, "a range gives a range"),
    ("CF_REYNOLDS", 'MID(CF_REYNOLDS("12 fps2",0.02,998,0.001),3,8)', "velocity", "bad input names its argument"),
    ("CF_SI", "CF_SI(Example!$C$6,Example!$B$6)", 0.008, "number and unit in cells"),
    ("CF_MOIST_AIR", 'CF_MOIST_AIR("dew point","30 degC",1,,"degC")', 30.0, "an argument left out in the middle"),
)


class Blocks:
    """Case blocks of published rows, each once, below each other on a sheet of their own."""

    def __init__(self) -> None:
        self.places: dict[str, tuple[int, Sequence[Sequence[Any]]]] = {}
        self.next = 2

    def area(self, rows: Sequence[Sequence[Any]]) -> str:
        key = repr(rows)
        if key not in self.places:
            self.places[key] = (self.next, rows)
            self.next += len(rows) + 1
        first, rows = self.places[key]
        return f"{BLOCKS}!$A${first}:$C${first + len(rows) - 1}"


def _literal(value: Any, blocks: Blocks) -> str:
    """An argument as it is typed in a formula; nothing for one that is left out."""
    if value is None:
        return ""
    if isinstance(value, list):
        return blocks.area(value)
    if isinstance(value, str):
        return '"' + value.replace('"', '""') + '"' if value else ""
    return repr(value).upper().removesuffix(".0")


def checks(
    published: Iterable[Mapping[str, Any]], called: Mapping[str, CellFunction] | None = None
) -> tuple[list[Check], Blocks]:
    """All checks, function by function, and the blocks that their formulas name; ``called`` is the catalogue."""
    blocks = Blocks()
    rows: dict[str, list[Mapping[str, Any]]] = {}
    for row in published:
        if row["kind"] in KINDS and "pick" not in row:  # a row that picks from a table is no single cell
            rows.setdefault(row["call"], []).append(row)
    found = []
    for name, function in (functions() if called is None else called).items():
        chosen = _chosen(rows.get(name, ()))
        found += [_from_row(row, blocks) for row in chosen] or [_from_example(function)]
        found += [
            Check(name, formula, expected, OWN_TOLERANCE * expected if isinstance(expected, float) else 0.0,
                  "handing over", f"{shows}; the value follows from the definition")
            for concerned, formula, expected, shows in HANDED_OVER
            if concerned == name
        ]  # fmt: skip
    return found, blocks


def _chosen(rows: Sequence[Mapping[str, Any]]) -> list[Mapping[str, Any]]:
    """A few rows from all over, the best sources first."""
    wanted = MANY if len(rows) >= MANY_ROWS else USUAL
    pool: list[Mapping[str, Any]] = []
    for kind in KINDS:
        if len(pool) < wanted:
            pool += [row for row in rows if row["kind"] == kind]
    count = min(wanted, len(pool))
    return [pool[k * len(pool) // count] for k in range(count)]


def _from_row(row: Mapping[str, Any], blocks: Blocks) -> Check:
    expected = row["expected"]
    number = not isinstance(expected, str)
    tolerance = max(row.get("rel_tol", 0.0) * abs(expected), row.get("abs_tol", 0.0)) if number else 0.0
    formula = f"{row['call']}({','.join(_literal(value, blocks) for value in row['args'])})"
    return Check(row["call"], formula, float(expected) if number else expected, tolerance, row["kind"], row["source"])


def _from_example(function: CellFunction) -> Check:
    """The example of the catalogue, one telling cell of it where it gives a table."""
    example = reference.example_of(function)
    if example is None:
        raise ValueError(f"no answer is stored for the example of {function.name}")
    formula = on_example_sheet(function.example[1:])
    expected = example.rows[0][0]
    if example.is_table:
        row, column = _telling(example.rows)
        formula = f"INDEX({formula},{row + 1},{column + 1})"
        expected = example.rows[row][column]
    tolerance = OWN_TOLERANCE * abs(expected) if isinstance(expected, float) else 0.0
    source = f"computed by Cellfuncs {__version__} when this workbook was built"
    return Check(function.name, formula, expected, tolerance, "own answer", source)


def _telling(rows: Sequence[Sequence[Any]]) -> tuple[int, int]:
    """The first number below the head, else the first text there."""
    for i, row in enumerate(rows[1:], start=1):
        for j, cell in enumerate(row):
            if isinstance(cell, float):
                return i, j
    return 1 if len(rows) > 1 else 0, 0


def on_example_sheet(formula: str) -> str:
    """The formula with its plain ranges meant on the sheet of the examples."""
    parts = formula.split('"')
    for k in range(0, len(parts), 2):
        parts[k] = re.sub(
            r"(?<![\w!$])([A-Z]{1,3})(\d+):([A-Z]{1,3})(\d+)", rf"{examples.SHEET}!$\1$\2:$\3$\4", parts[k]
        )
    return '"'.join(parts)


def differing(found: Sequence[Check], areas: Iterable[Any]) -> list[str]:
    """The checks that do not agree after a recalculation, one line each: those no workbook may be given away with."""
    (answers,) = (area.values for area in areas if area.sheet == SHEET and area.range.startswith(f"D{FIRST}:"))
    lines = []
    for check, (answer,) in zip(found, answers, strict=True):
        expected = check.expected
        if isinstance(expected, float) and isinstance(answer, float):
            agrees = abs(answer - expected) <= check.tolerance
        else:
            agrees = answer == expected
        if not agrees:
            lines.append(f"{check.formula} gives {answer}, not {expected}")
    return lines


def write_self_test(path: str | Path, found: Sequence[Check], blocks: Blocks) -> None:
    """Write the workbook; its formulas have no values yet."""
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    look = Look(book)
    sheet = book.add_worksheet(SHEET)
    _write_checks(sheet, look, found)
    second = book.add_worksheet(examples.SHEET)
    examples.fill(book, second, reference.stored()["block"], look)
    second.write(0, 0, "Cells that the checks mean", look.style(bold=True))
    _write_blocks(book.add_worksheet(BLOCKS), look, blocks)
    for each in book.worksheets():
        _on_paper(each)
    about = {"title": "Cellfuncs: self-test", "subject": f"version {__version__}", "comments": CAUTION}
    # a fixed date, so that the same content gives the same file
    book.set_properties(about | {"created": dt.datetime(2026, 1, 1)})
    book.close()


def _write_checks(sheet: Any, look: Look, found: Sequence[Check]) -> None:
    for column, width in enumerate(_WIDTHS):
        sheet.set_column(column, column, width)
    last = FIRST + len(found) - 1
    _write_head(sheet, look, last)
    right = {"align": "right"}
    for column, head in enumerate(HEADS):
        sheet.write(FIRST - 2, column, head, look.head(**(right if 3 <= column <= 6 else {"align": "left"})))
    for k, check in enumerate(found):
        at, row = FIRST - 1 + k, FIRST + k
        sheet.write(at, 0, k + 1, look.label(align="left", font_color=GREY))
        sheet.write(at, 1, check.function, look.label())
        sheet.write_string(at, 2, f"={check.formula}", look.label(text_wrap=True, font_size=9.5))
        number = isinstance(check.expected, float)
        shown = look.label(num_format="General" if number else "@", align="right")
        sheet.write_formula(at, 3, f'=IF(ISNUMBER({RUN}),{check.formula},"not run")', look.label(align="right"))
        sheet.write(at, 4, check.expected, shown) if number else sheet.write_string(at, 4, check.expected, shown)
        difference = (
            f"=IF(AND(ISNUMBER(D{row}),ISNUMBER(E{row})),D{row}-E{row},"
            f'IF(AND(ISTEXT(D{row}),ISTEXT(E{row})),IF(EXACT(D{row},E{row}),0,"other text"),"no answer"))'
        )
        sheet.write_formula(at, 5, difference, look.label(num_format='0.0E+00;-0.0E+00;"0"', align="right"))
        sheet.write(at, 6, check.tolerance, look.label(num_format='0.0E+00;-0.0E+00;"0"', align="right"))
        agrees = f'=IF(ISNUMBER(F{row}),IF(ABS(F{row})<=G{row},"agrees","differs"),"differs")'
        sheet.write_formula(at, 7, agrees, look.label(indent=1))
        sheet.write(at, 8, check.kind, look.label())
        sheet.write_string(at, 9, check.source, look.label(text_wrap=True, font_size=9.5))
        lines = max(-(-len(check.formula) // 66), -(-len(check.source) // 112))
        sheet.set_row(at, max(16, 13 * lines + 3))
    bold = look.style(bold=True)
    sheet.conditional_format(
        f"H{FIRST}:H{last}", {"type": "cell", "criteria": "==", "value": '"differs"', "format": bold}
    )
    sheet.freeze_panes(FIRST - 1, 0)
    sheet.repeat_rows(FIRST - 2)


def _on_paper(sheet: Any) -> None:
    sheet.hide_gridlines(2)
    sheet.set_landscape()
    sheet.set_paper(9)
    sheet.fit_to_pages(1, 0)
    sheet.set_margins(0.5, 0.5, 0.6, 0.6)
    sheet.set_footer(f"&L&8{CAUTION}&R&8&P/&N")


def _write_head(sheet: Any, look: Look, last: int) -> None:
    sheet.set_row(0, 24)
    sheet.write(0, 0, "Self-test of an installation", look.title())
    sheet.write(
        1, 0, "Type another number into the tinted cell: the program you see this in then calculates every check anew, "
        "with the Cellfuncs it finds.", look.style(),
    )  # fmt: skip
    sheet.write(2, 0, CAUTION, look.quiet())
    verdicts, names = f"$H${FIRST}:$H${last}", f"$B${FIRST}:$B${last}"
    agree, count = f'COUNTIF({verdicts},"agrees")', f"ROWS({names})"
    headline = (
        f'=IF({agree}={count},"all "&{count}&" of "&{count}&" agree",{agree}&" of "&{count}&" agree; the first that '
        f'differs is number "&MATCH("differs",{verdicts},0)&", "&INDEX({names},MATCH("differs",{verdicts},0)))'
    )
    sheet.set_row(3, 21)
    sheet.write(3, 1, "result", look.style(bold=True))
    sheet.write_formula(3, 2, headline, look.style(bold=True, font_size=13))
    sheet.write(4, 1, "version that answers", look.style())
    sheet.write_formula(4, 2, f'=IF(ISNUMBER({RUN}),CF_VERSION(),"not run")', look.style(align="left"))
    sheet.write(4, 3, f"this workbook was built with {__version__}", look.quiet())
    sheet.write(5, 1, "run number", look.style())
    sheet.write(5, 2, 1, look.entry())
    sheet.write(5, 3, "as delivered this is 1, and the answers below are stored values", look.quiet())


def _write_blocks(sheet: Any, look: Look, blocks: Blocks) -> None:
    for column, width in enumerate((28, 30, 12)):
        sheet.set_column(column, column, width)
    sheet.write(0, 0, "Case blocks that the checks mean", look.style(bold=True))
    for first, rows in blocks.places.values():
        for k, cells in enumerate(rows):
            padded = [*cells, None, None, None][:3]
            for column, cell in enumerate(padded):
                sheet.write(first - 1 + k, column, cell, look.label() if column == 0 else look.entry(ruled=column == 1))
