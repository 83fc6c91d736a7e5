"""The grid of a sheet: rows, columns, and how areas of it are written."""

from __future__ import annotations

import re
from functools import lru_cache

LAST_ROW, LAST_COLUMN = 1_048_576, 16_384

Area = tuple[int, int, int, int]  # first row, first column, last row, last column

_REFERENCE = re.compile(r"\$?([A-Z]{1,3})\$?([0-9]{1,7})(?::\$?([A-Z]{1,3})\$?([0-9]{1,7}))?\Z")


@lru_cache(maxsize=20_000)
def column_number(letters: str) -> int:
    """A = 1 … XFD = 16384."""
    number = 0
    for letter in letters:
        number = number * 26 + ord(letter) - 64
    return number


def rectangle(text: str) -> tuple[int, int, int, int] | None:
    """`B2:C9` or `B2` as (first row, first column, last row, last column); None where it is no such reference."""
    match = _REFERENCE.match(text)
    if match is None:
        return None
    left, top, right, bottom = match.groups()
    rows = sorted((int(top), int(bottom or top)))
    columns = sorted((column_number(left), column_number(right or left)))
    if rows[0] < 1 or rows[1] > LAST_ROW or columns[1] > LAST_COLUMN:
        return None
    return rows[0], columns[0], rows[1], columns[1]


@lru_cache(maxsize=20_000)
def column_letters(number: int) -> str:
    """1 = A … 16384 = XFD."""
    letters = ""
    while number:
        number, rest = divmod(number - 1, 26)
        letters = chr(65 + rest) + letters
    return letters


def area_text(area: Area) -> str:
    """`B2:C9`, or `B2` for one cell."""
    top, left, bottom, right = area
    first = f"{column_letters(left)}{top}"
    return first if (top, left) == (bottom, right) else f"{first}:{column_letters(right)}{bottom}"
