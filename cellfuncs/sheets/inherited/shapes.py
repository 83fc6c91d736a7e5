"""Formulas with their references taken out: ``=C2*A2/D2`` copied down a column is one shape.

Each shape is parsed once (``books.formulas.tree``); what a formula refers to stands beside it.
"""

from __future__ import annotations

import re
from typing import NamedTuple

from cellfuncs.books.grid import Area, column_number

_PIECES = re.compile(
    r'"(?:[^"]|"")*"'
    r"|(?<![\w.\[])(?P<prefix>(?:'(?:[^']|'')*'|\[\d{1,4}\][^\s'!+\-*/^&=<>(),;:{}\"]*|[^\W\d][\w.]*)!)?"
    r"\$?(?P<left>[A-Za-z]{1,3})\$?(?P<top>[0-9]{1,7})"
    r"(?::\$?(?P<right>[A-Za-z]{1,3})\$?(?P<bottom>[0-9]{1,7}))?(?![\w(.!\[])"
    r"|[^\W\d][\w.\\]*"
)


class Target(NamedTuple):
    """What a reference means: the sheet's name (None: the formula's own), the area."""

    sheet: str | None
    area: Area


class Shape(NamedTuple):
    """A formula's text with ``_r1_``, ``_r2_`` … in the place of its references, and these."""

    text: str
    targets: tuple[Target, ...]


def shape_of(text: str) -> Shape:
    """Take the references out of a formula (without its ``=``)."""
    targets: list[Target] = []

    def take(match: re.Match[str]) -> str:
        top = match["top"]
        if top is None:
            return match[0]
        prefix = match["prefix"]
        left, first = column_number(match["left"].upper()), int(top)
        if match["right"]:
            right, last = column_number(match["right"].upper()), int(match["bottom"])
            area = (min(first, last), min(left, right), max(first, last), max(left, right))
        else:
            area = (first, left, first, left)
        sheet = None
        if prefix:
            sheet = prefix[:-1]
            sheet = sheet[1:-1].replace("''", "'") if sheet[0] == "'" else sheet
        targets.append(Target(sheet, area))
        return f"_r{len(targets)}_"

    return Shape(_PIECES.sub(take, text), tuple(targets))
