"""The one place where cell values are read.

What hosts hand over for the same cell differs: an omitted argument is 0.0 or None, a blank cell None,
0.0 or "", TRUE is True or 1.0, an error a dict, a text or nothing, a range nested lists or tuples.
The readers here make these equal. A reader takes one host value and gives a float, a text, a
``Grid`` (for a range), a tuple of rows (for a block) or None (optional and not given); it raises
``Handed`` for a fault that passes through, and a ``CellfuncsError`` for everything it refuses.
"""

import datetime as dt
import math
from collections.abc import Callable
from typing import Any

from cellfuncs import quantities
from cellfuncs.cells import faults
from cellfuncs.cells.grid import MOST_CELLS, Grid
from cellfuncs.errors import CellfuncsError, NumberRefused, OutOfRange

MOST_BLOCK_ROWS = 1_000
MOST_TEXT = 1_000
COLDEST_BARE = 200.0  # K: a plain number below it is more likely meant in °C or °F
_REMEMBERED_TEXTS = 20_000

BLANK = (None, "")
ERROR_TEXTS = frozenset(
    ["#NULL!", "#DIV/0!", "#VALUE!", "#REF!", "#NAME?", "#NUM!", "#N/A", "#GETTING_DATA", "#SPILL!", "#CALC!",
     "#BLOCKED!", "#FIELD!"]
)  # fmt: skip


# The embedded engine's names of the same errors.
ERRORS_BY_KIND = dict(
    Na="#N/A", Div="#DIV/0!", Value="#VALUE!", Num="#NUM!", Name="#NAME?", Ref="#REF!", Null="#NULL!", Spill="#SPILL!"
)


class Handed(Exception):
    """A fault that was handed in and goes out unchanged."""


def is_range(value: object) -> bool:
    return isinstance(value, (list, tuple))


def as_rows(value: Any) -> list[list[Any]]:
    """A range as equally long lists, whatever nesting the host used; a flat one is a column."""
    if hasattr(value, "tolist"):
        value = value.tolist()
    if not is_range(value):
        return [[value]]
    if not value:
        return [[None]]
    if not is_range(value[0]):
        return [[cell] for cell in value]
    width = max(map(len, value))
    rows = list(map(list, value))
    for row in rows:
        if len(row) < width:
            row += [None] * (width - len(row))
    return rows if width else [[None]]


def unwrap(value: Any) -> Any:
    """The cell of a range of one, or a numpy scalar as a Python one; everything else unchanged."""
    if is_range(value) and len(value) == 1:
        inner = value[0]
        if not is_range(inner):
            return inner
        if len(inner) == 1:
            return inner[0]
    if hasattr(value, "item") and getattr(value, "size", 0) == 1:
        return value.item()
    return value


def error_cell(value: Any) -> str | None:
    """The name of an error value of the host, or None."""
    if type(value) is dict:
        return ERRORS_BY_KIND.get(value.get("kind"), "#VALUE!")
    if type(value) is str and value in ERROR_TEXTS:
        return value
    return None


def refuse_foreign(value: Any) -> None:
    """Raise for what is neither number nor usable text: faults, errors, dates, objects."""
    if faults.is_fault(value):
        raise Handed(value)
    shown = error_cell(value)
    if shown:
        raise NumberRefused(f"the cell it points at shows an error ({shown}); mend that cell first")
    if isinstance(value, (dt.date, dt.datetime, dt.time, dt.timedelta)):
        raise NumberRefused("a date or time of day is no quantity; write a number with its unit")
    if is_range(value):
        raise NumberRefused("a range where one cell is meant")


def text_of(value: Any, wanted: str = "a text") -> str:
    """A required text."""
    value = unwrap(value)
    refuse_foreign(value)
    if value in BLANK or value is False or (isinstance(value, (int, float)) and value == 0):
        raise NumberRefused(f"empty; give {wanted}")
    if not isinstance(value, str):
        raise NumberRefused(f"{value:g} is a number; give {wanted}")
    value = value.strip()
    if not value:
        raise NumberRefused(f"empty; give {wanted}")
    if len(value) > MOST_TEXT:
        raise NumberRefused(f"a text of {len(value)} characters; give {wanted}")
    return value


def optional_text(value: Any) -> str | None:
    """A text, or None where the host hands over nothing, "", 0 or FALSE."""
    value = unwrap(value)
    if value is None or (type(value) is str and not value.strip()):
        return None
    if isinstance(value, (int, float)) and value == 0:
        return None
    return text_of(value)


def number_of(value: Any) -> float:
    """A finite plain number."""
    if isinstance(value, bool):
        value = float(value)
    if isinstance(value, str):
        reading = quantities.read_number(value)
        if reading.unit_text:
            raise NumberRefused(f'"{value.strip()[:40]}" has a unit; a plain number is wanted here')
        value = reading.value
    try:
        number = float(value)
    except OverflowError:
        raise NumberRefused("not a finite number") from None
    except (TypeError, ValueError):
        raise NumberRefused(f"{type(value).__name__} is no number") from None
    if not math.isfinite(number):
        raise NumberRefused("not a finite number")
    return number


class QuantityReader:
    """Reads a physical argument: number in SI, text with unit, pair of value and unit, or a range."""

    def __init__(self, kind: str, zero: str = "none", optional: bool = False):
        self.kind = kind
        self.optional = optional
        self.zero_is_value = zero == "value" or zero == "signed"
        self.words = quantities.KINDS[kind].words
        # what a plain float may be without a second look
        if kind == "temperature":
            self.low, self.high = COLDEST_BARE, math.inf
        elif zero in ("none", "value"):
            self.low, self.high = 0.0, math.inf
        else:
            self.low, self.high = -math.inf, math.inf
        self.positive = zero == "none"
        self.never_negative = zero in ("none", "value")
        self._remembered: dict[str, float] = {}

    def example(self) -> str:
        return quantities.example(self.kind)

    def __call__(self, value: Any) -> Any:
        kind = type(value)
        if kind is float:
            if self.low < value < self.high and (value or not self.never_negative):
                return value
        elif kind is str:
            known = self._remembered.get(value)
            if known is not None:
                return known
        return self.read(value)

    def read(self, value: Any) -> Any:
        value = unwrap(value)
        if is_range(value):
            return self.read_range(value)
        return self.read_cell(value)

    def read_cell(self, value: Any) -> Any:
        refuse_foreign(value)
        if value is None or (type(value) is str and not value.strip()):
            return self._nothing()
        if isinstance(value, str):
            si = quantities.read_quantity(value, self.kind)
            self.check(si)
            if len(self._remembered) >= _REMEMBERED_TEXTS:
                self._remembered.clear()
            self._remembered[value] = si
            return si
        if hasattr(value, "dimensionality"):
            si = quantities.from_pint(value, self.kind)
            self.check(si)
            return si
        number = number_of(value)
        if number == 0 and (self.optional or not self.zero_is_value):
            return self._nothing()
        if self.kind == "temperature" and number < COLDEST_BARE:
            raise OutOfRange(f"{number:g} means {number:g} K; write {number:g} degC, or {number:g} K if that is meant")
        self.check(number)
        return number

    def _nothing(self) -> Any:
        if self.optional:
            return None
        if self.zero_is_value:
            return 0.0
        raise NumberRefused(f"empty or zero; give a {self.words}, for instance {self.example()}")

    def check(self, si: float) -> None:
        """Refuse what is below absolute zero, negative where it cannot be, or not finite."""
        quantities.check_physical(si, self.kind)
        if self.positive and not si > 0:
            raise OutOfRange(f"{self._shown(si)}; it must be above zero")
        if self.never_negative and si < 0:
            raise OutOfRange(f"{self._shown(si)}; it cannot be negative")

    def _shown(self, si: float) -> str:
        return f"a {self.words} of {si:g} {quantities.KINDS[self.kind].si_unit}".removesuffix(" 1")

    def read_range(self, value: Any) -> Any:
        rows = as_rows(value)
        height, width = len(rows), len(rows[0])
        if height * width > MOST_CELLS:
            raise NumberRefused(f"{height * width:,} cells; give at most {MOST_CELLS:,} (a column with an end)")
        if width == 2 and all(_pair(row) for row in rows) and any(isinstance(row[1], str) for row in rows):
            pairs = [[self._from_pair(row)] for row in rows]
            if height == 1:
                return pairs[0][0]()
            rows = pairs
        grid = Grid(rows=rows)
        if all(type(cell) is float and self.low < cell < self.high for row in rows for cell in row) and not (
            self.never_negative and any(not cell for row in rows for cell in row)
        ):
            return grid
        for i, row in enumerate(rows):
            for j, cell in enumerate(row):
                try:
                    row[j] = cell() if callable(cell) else self(unwrap(cell))
                except Handed as handed:
                    grid.faults[i, j] = str(handed)
                    row[j] = None
                except CellfuncsError as refused:
                    grid.faults[i, j] = refused
                    row[j] = None
        return grid

    def _from_pair(self, row: list[Any]) -> Callable[[], Any]:
        def read() -> Any:
            number, unit = row
            refuse_foreign(number)
            refuse_foreign(unit)
            if number in BLANK:
                return self._nothing()
            if unit in BLANK:
                return self(number)
            si = quantities.to_si(number_of(number), unit, self.kind)
            self.check(si)
            return si

        return read


def _pair(row: list[Any]) -> bool:
    """Whether a row of two cells is a number beside its unit."""
    number, unit = row
    if number in BLANK and unit in BLANK:
        return True
    is_number = (
        (isinstance(number, (int, float)) and not isinstance(number, bool))
        or number in BLANK
        or (isinstance(number, str) and _reads_bare(number))
    )
    is_unit = unit in BLANK or (isinstance(unit, str) and not _reads_bare(unit) and not _reads_full(unit))
    return is_number and is_unit


def _reads_bare(text: str) -> bool:
    try:
        return not quantities.read_number(text).unit_text
    except CellfuncsError:
        return False


def _reads_full(text: str) -> bool:
    try:
        quantities.read_number(text)
    except CellfuncsError:
        return False
    return True


class TextReader:
    """Reads a text argument; a range of texts gives a Grid."""

    def __init__(self, optional: bool = False, wanted: str = "a text"):
        self.optional = optional
        self.wanted = wanted

    def __call__(self, value: Any) -> Any:
        if type(value) is str and value and value[0] not in "!# " and len(value) < MOST_TEXT:
            return value
        value = unwrap(value)
        if is_range(value):
            return self.read_range(value)
        return optional_text(value) if self.optional else text_of(value, self.wanted)

    def read_range(self, value: Any) -> Grid:
        rows = as_rows(value)
        if len(rows) * len(rows[0]) > MOST_CELLS:
            raise NumberRefused(f"more than {MOST_CELLS:,} cells")
        grid = Grid(rows)
        for i, row in enumerate(rows):
            for j, cell in enumerate(row):
                try:
                    row[j] = optional_text(cell) if self.optional else text_of(cell, self.wanted)
                except Handed as handed:
                    grid.faults[i, j], row[j] = str(handed), None
                except CellfuncsError as refused:
                    grid.faults[i, j], row[j] = refused, None
        return grid


_plain_texts: dict[str, str] = {}


def plain_cell(value: Any) -> Any:
    """A cell of a block or list as float, text or None; faults and errors stay recognisable texts."""
    if value is None or type(value) is float:
        return value
    if type(value) is str:
        known = _plain_texts.get(value)
        if known is not None:
            return known
        text = value.strip()
        text = f"#error {text}" if text in ERROR_TEXTS else text or None
        if text is not None:
            if len(_plain_texts) >= _REMEMBERED_TEXTS:
                _plain_texts.clear()
            _plain_texts[value] = text
        return text
    value = unwrap(value)
    if value is None or type(value) is float:
        return value
    if isinstance(value, str):
        text = value.strip()
        return f"#error {text}" if text in ERROR_TEXTS else text or None
    if isinstance(value, (bool, int)):
        return float(value)
    shown = error_cell(value)
    if shown:
        return f"#error {shown}"
    if isinstance(value, (dt.date, dt.datetime, dt.time, dt.timedelta)):
        return f"#date {value}"
    try:
        return float(value)
    except (TypeError, ValueError):
        return str(value)[:MOST_TEXT]


def read_range(value: Any) -> list[list[Any]]:
    """Any range as rows of float, text or None."""
    rows = as_rows(value)
    if len(rows) * len(rows[0]) > 1_048_576 * 4:
        raise NumberRefused("too many cells")
    return [[plain_cell(cell) for cell in row] for row in rows]


def read_block(value: Any) -> tuple[tuple[Any, ...], ...]:
    """A case block as rows (label, value, unit, ±), blank rows dropped, with their row numbers.

    The result is hashable: solved blocks are remembered by it.
    """
    value = unwrap(value)
    if not is_range(value):
        refuse_foreign(value)
        raise NumberRefused("not a block; give a range of rows: label, value, unit")
    rows = []
    for number, row in enumerate(as_rows(value), start=1):
        cells = tuple(map(plain_cell, row))
        if cells.count(None) == len(cells):
            continue
        for cell in cells:
            if type(cell) is str and cell.startswith(faults.MARK):
                raise Handed(cell)
        if len(rows) >= MOST_BLOCK_ROWS:
            raise NumberRefused(f"more than {MOST_BLOCK_ROWS:,} filled rows; a block is one case")
        rows.append((number, *cells))
    if not rows:
        raise NumberRefused("an empty block; write rows of label, value, unit")
    return tuple(rows)
