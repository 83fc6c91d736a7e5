"""Cell texts as a workbook file writes them: escapes, numbers, and values as Python sees them.

A value is a float, a str, a bool, an :class:`ErrorValue`, or None for an empty cell.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

MAX_TEXT = 32_767  # characters in one cell


@dataclass(frozen=True)
class ErrorValue:
    """An error value of the sheet itself, such as ``#N/A``."""

    text: str

    def __str__(self) -> str:
        return self.text


Value = float | str | bool | ErrorValue | None

_ESCAPED = re.compile(r"_x([0-9A-Fa-f]{4})_")
# Characters that XML cannot hold, or would not give back unchanged (a bare CR becomes LF).
_UNFIT = re.compile("[\x00-\x08\x0b-\x1f\ud800-\udfff\ufffe\uffff]|_(?=x[0-9A-Fa-f]{4}_)")


def unescaped(text: str) -> str:
    """`_x000D_` and the like as the characters they stand for."""
    return _ESCAPED.sub(lambda m: chr(int(m[1], 16)), text) if "_x" in text else text


def _fit(match: re.Match[str]) -> str:
    character = match[0]
    if "\ud800" <= character <= "\udfff":
        return "\ufffd"
    return f"_x{ord(character):04X}_"


def escaped(text: str) -> str:
    """A text ready to stand between tags: `&`, `<`, `>` and what XML cannot hold."""
    text = _UNFIT.sub(_fit, text[:MAX_TEXT])
    return text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")


def number_text(number: float) -> str:
    """The shortest text that reads back as the same number; whole numbers without a point."""
    text = repr(float(number))
    return text[:-2] if text.endswith(".0") else text


def encoded(value: Value) -> tuple[str | None, str | None]:
    """The type mark and the text of a value: `("str", "a &amp; b")`, `(None, "1.5")`, `(None, None)` for empty."""
    if value is None:
        return None, None
    if isinstance(value, bool):
        return "b", "1" if value else "0"
    if isinstance(value, ErrorValue):
        return "e", escaped(value.text)
    if isinstance(value, (int, float)):
        if not math.isfinite(value):
            return "e", "#NUM!"
        return None, number_text(value)
    return "str", escaped(str(value))


def decoded(mark: str | None, text: str | None) -> Value:
    """The value of a cell's type mark and text; shared strings are not looked up here (their index is returned)."""
    if mark == "str":
        return unescaped(text or "")
    if text is None or text == "":
        return None
    if mark == "b":
        return text.strip() in ("1", "true")
    if mark == "e":
        return ErrorValue(text)
    if mark in ("inlineStr", "d"):
        return unescaped(text)
    try:
        return float(text)
    except ValueError:
        return unescaped(text)
