"""Formulas as texts: names with the prefixes that hosts write, shifting of shared formulas, references,
and which cells depend on which.

The engine's own tokenizer does the splitting: its pieces, put together again, are the formula.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from functools import lru_cache
from typing import Any, NamedTuple

from cellfuncs.books.grid import LAST_COLUMN, LAST_ROW, Area, column_letters, column_number

MAX_LENGTH = 8192  # characters; longer formulas are left alone, no program writes them

IsOurs = Callable[[str], str | None]


class Piece(NamedTuple):
    """A part of a formula: a function's opening, an operand that refers to cells, an operator, or anything else."""

    text: str
    kind: str  # "call", "reference", "operator", "open", "close", "other"


def pieces(text: str) -> tuple[Piece, ...] | None:
    """A formula (without its `=`) in pieces, or None where it cannot be read."""
    if len(text) > MAX_LENGTH:
        return None
    return _pieces(text)


@lru_cache(maxsize=4096)
def _pieces(text: str) -> tuple[Piece, ...] | None:
    import formualizer as fz

    try:
        tokens = fz.tokenize("=" + text)
        found = []
        for token in tokens:
            kind, sub = token.token_type, token.subtype
            if kind == fz.TokenType.Func:
                word = "call" if sub == fz.TokenSubType.Open else "close"
            elif kind == fz.TokenType.Operand and sub == fz.TokenSubType.Range:
                word = "reference"
            elif kind in (fz.TokenType.OpInfix, fz.TokenType.OpPrefix, fz.TokenType.OpPostfix):
                word = "operator"
            elif kind in (fz.TokenType.Paren, fz.TokenType.Array):
                word = "open" if sub == fz.TokenSubType.Open else "close"
            else:
                word = "other"
            found.append(Piece(token.value, word))
    except (fz.TokenizerError, ValueError):
        return None
    return tuple(found)


# -- names of functions ------------------------------------------------------------------------------


def canonical(call: str, is_ours: IsOurs) -> str | None:
    """The name that `is_ours` knows behind the prefixes a host wrote, or None.

    `[1]!CF_X`, `'C:\\add ins\\x.xlam'!cf_x`, `_xlfn.CF_X`, `_xludf.CF_X`, `com.example.AddIn.cf_x`
    and `com.example.AddIn.getcf_x` all mean CF_X.
    """
    name = call.rpartition("!")[2].strip()
    last = name.rpartition(".")[2]
    for candidate in (name, last, re.sub(r"(?i)\A(?:_xldudf_|_xludf_|_xlfn_|get)", "", last)):
        if found := is_ours(candidate):
            return found
    return None


class Normal(NamedTuple):
    """A formula with plain function names: its text, and which of our functions it calls."""

    text: str
    ours: frozenset[str]


def normalised(text: str, is_ours: IsOurs, prefix: str = "") -> Normal:
    """Our functions under their plain names behind `prefix`, whatever prefix stands in the file; the rest unchanged."""
    parts = pieces(text) if "(" in text else None
    if parts is None:
        return Normal(text, frozenset())
    names: set[str] = set()
    written: list[str] = []
    for part in parts:
        new = part.text
        if part.kind == "call":
            name = canonical(new[:-1], is_ours)
            if name:
                names.add(name)
                new = prefix + name + "("
        written.append(new)
    return Normal("".join(written) if names else text, frozenset(names))


# -- references --------------------------------------------------------------------------------------

_SHEET = r"(?:(?:'(?P<quoted>(?:[^']|'')*)'|(?P<plain>[^'!\s]*))!)?"
_CELLS = re.compile(
    _SHEET
    + r"(?:(?P<a>(?P<a1>\$?)(?P<left>[A-Za-z]{1,3})(?P<a2>\$?)(?P<top>[0-9]{1,7}))"
    + r"(?::(?P<b>(?P<b1>\$?)(?P<right>[A-Za-z]{1,3})(?P<b2>\$?)(?P<bottom>[0-9]{1,7})))?"
    + r"|(?P<c1>\$?)(?P<first_column>[A-Za-z]{1,3}):(?P<c2>\$?)(?P<last_column>[A-Za-z]{1,3})"
    + r"|(?P<d1>\$?)(?P<first_row>[0-9]{1,7}):(?P<d2>\$?)(?P<last_row>[0-9]{1,7}))\Z"
)
_CELL = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})\Z")
_NAMED = re.compile(_SHEET + r"(?P<name>[^\W\d][\w.\\?]*|\\[\w.\\?]*)\Z")
_TABLE = re.compile(r"(?P<table>[^\W\d][\w.\\]*)?\[")


class Reference(NamedTuple):
    """What an operand refers to. `kind`: cells, name, table, external (another workbook) or unknown."""

    kind: str
    sheet: str | None = None
    area: Area | None = None
    name: str = ""


@lru_cache(maxsize=16384)
def reference(text: str) -> Reference:
    """Read one operand, `Sheet1!$A$1:B3`, `A:A`, `3:5`, a name, `Table[column]`, `[1]Sheet1!A1` …"""
    match = _CELL.match(text)
    if match is not None:  # by far the most frequent
        row, column = int(match[2]), column_number(match[1].upper())
        if 1 <= row <= LAST_ROW and column <= LAST_COLUMN:
            return Reference("cells", None, (row, column, row, column))
        return Reference("unknown")
    match = _CELLS.match(text)
    if match is not None:
        sheet = _sheet_of(match)
        if sheet is not None and ("[" in sheet or ":" in sheet):
            return Reference("external" if "[" in sheet else "unknown", sheet, _area(match))
        area = _area(match)
        return Reference("unknown") if area is None else Reference("cells", sheet, area)
    match = _NAMED.match(text)
    if match is not None:
        sheet = _sheet_of(match)
        if sheet is not None and "[" in sheet:
            return Reference("external", sheet, None, match["name"])
        return Reference("name", sheet, None, match["name"])
    match = _TABLE.match(text)
    if match is not None and "!" not in text:
        return Reference("table", None, None, match["table"] or "")
    return Reference("external" if "[" in text and "!" in text else "unknown")


def _sheet_of(match: re.Match[str]) -> str | None:
    if match["quoted"] is not None:
        return match["quoted"].replace("''", "'")
    return match["plain"]


def _area(match: re.Match[str]) -> Area | None:
    if match["top"]:
        rows = sorted((int(match["top"]), int(match["bottom"] or match["top"])))
        columns = sorted(column_number(c.upper()) for c in (match["left"], match["right"] or match["left"]))
    elif match["first_column"]:
        rows = [1, LAST_ROW]
        columns = sorted(column_number(c.upper()) for c in (match["first_column"], match["last_column"]))
    else:
        rows = sorted((int(match["first_row"]), int(match["last_row"])))
        columns = [1, LAST_COLUMN]
    if rows[0] < 1 or rows[1] > LAST_ROW or columns[1] > LAST_COLUMN:
        return None
    return rows[0], columns[0], rows[1], columns[1]


def shifted(text: str, rows: int, columns: int) -> str:
    """A shared formula as it reads `rows` further down and `columns` further right."""
    parts = pieces(text)
    if parts is None or (rows == 0 and columns == 0):
        return text
    return "".join(_shifted_operand(p.text, rows, columns) if p.kind == "reference" else p.text for p in parts)


def _shifted_operand(text: str, rows: int, columns: int) -> str:
    match = _CELLS.match(text)
    if match is None:
        return text
    head = text[: match.start("a")] if match["a"] else text[: text.rfind("!") + 1]
    ends: list[str] = []
    if match["a"]:
        corners = [(match["a1"], match["left"], match["a2"], match["top"])]
        if match["b"]:
            corners.append((match["b1"], match["right"], match["b2"], match["bottom"]))
        for fixed_column, letters, fixed_row, row in corners:
            ends.append(_moved_column(fixed_column, letters, columns) + _moved_row(fixed_row, row, rows))
    elif match["first_column"]:
        ends = [
            _moved_column(match["c1"], match["first_column"], columns),
            _moved_column(match["c2"], match["last_column"], columns),
        ]
    else:
        ends = [
            _moved_row(match["d1"], match["first_row"], rows),
            _moved_row(match["d2"], match["last_row"], rows),
        ]
    if any("#" in end for end in ends):
        return "#REF!"
    return head + ":".join(ends)


def _moved_column(fixed: str, letters: str, by: int) -> str:
    if fixed:
        return fixed + letters
    # A shared formula wraps round the edge of the grid.
    return column_letters((column_number(letters.upper()) + by - 1) % LAST_COLUMN + 1)


def _moved_row(fixed: str, row: str, by: int) -> str:
    return fixed + row if fixed else str((int(row) + by - 1) % LAST_ROW + 1)


_JOINS = {":", ",", "#", "@"}  # operators that make one reference of two, or already pick


def as_one_value(text: str) -> str:
    """A plain formula's text so that it gives one value: the cell of its own row or column where a range
    stands beside an operator, the top left of a table."""
    parts = pieces(text)
    if parts is None:
        return text
    written: list[str] = []
    opened: list[str] = []
    for number, part in enumerate(parts):
        if part.kind in ("call", "open"):
            opened.append(part.kind)
        elif part.kind == "close" and opened:
            opened.pop()
        elif part.kind == "reference" and "call" not in opened and _many(part.text):
            before = next((p.text for p in reversed(parts[:number]) if p.text.strip()), "")
            after = next((p.text for p in parts[number + 1 :] if p.text.strip()), "")
            if not {before, after} & _JOINS:
                written.append("@")
        written.append(part.text)
    return f"@({''.join(written)})"


def _many(text: str) -> bool:
    found = reference(text)
    return found.kind == "name" or (
        found.kind == "cells" and found.area is not None and found.area[:2] != found.area[2:]
    )


def calls(text: str) -> list[tuple[str, list[str]]]:
    """Every call in a formula: the function's name and the texts of its arguments, without outer blanks."""
    parts = pieces(text)
    found: list[tuple[str, list[str]]] = []
    opened: list[tuple[str, list[str]] | None] = []  # the call in which we are; None inside brackets or braces
    for part in parts or ():
        if part.kind == "close" and opened:
            opened.pop()
        inner = opened[-1] if opened else None
        for call in opened:
            if call is inner is not None and part.text == ",":
                call[1].append("")
            elif call is not None:
                call[1][-1] += part.text
        if part.kind == "call":
            call = (part.text[:-1], [""])
            found.append(call)
            opened.append(call)
        elif part.kind == "open":
            opened.append(None)
    return [(name, [argument.strip() for argument in arguments]) for name, arguments in found]


# -- trees -------------------------------------------------------------------------------------------

MOST_NESTED = 60  # brackets in brackets; spreadsheet programs allow 64


def depth(text: str) -> int:
    """How deep brackets are nested."""
    deepest = level = 0
    for sign in text:
        if sign == "(":
            level += 1
            deepest = max(deepest, level)
        elif sign == ")":
            level -= 1
    return deepest


@lru_cache(maxsize=4096)
def tree(text: str) -> dict[str, Any] | None:
    """The tree of a formula (without its `=`) as the engine's parser gives it, or None where it cannot be parsed."""
    import formualizer as fz

    if len(text) > 2 * MAX_LENGTH or depth(text) > MOST_NESTED:
        return None
    try:
        return fz.parse("=" + text).to_dict()
    except (fz.ParserError, fz.TokenizerError, ValueError, RecursionError):
        return None
