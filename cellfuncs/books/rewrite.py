"""Formulas changed wherever a part writes one: cells, names, validations, conditional formats, table columns."""

from __future__ import annotations

import re
from collections.abc import Callable
from xml.parsers import expat

from cellfuncs.books.gate import Book
from cellfuncs.books.reading import tag_end
from cellfuncs.books.splice import apply_edits
from cellfuncs.books.xmltext import escaped, unescaped

_HOLDERS = frozenset(
    ("f", "formula", "formula1", "formula2", "definedName", "calculatedColumnFormula", "totalsRowFormula")
)
_ANY = re.compile(rb"<(?:[\w.-]+:)?(?:%s)[\s>]" % "|".join(sorted(_HOLDERS)).encode())


def parts_with_formulas(book: Book) -> list[tuple[str, str | None]]:
    """The parts in which formulas stand, each with the name of its sheet (None for the main part)."""
    found: list[tuple[str, str | None]] = [(book.part, None)]
    for sheet in book.sheets:
        if sheet.kind == "worksheet":
            found += [(part, sheet.name) for part in (sheet.part, *sheet.tables)]
    return found


def rewritten(data: bytes, change: Callable[[str], str], in_cells: bool = True) -> bytes:
    """A part with every formula text as `change` gives it; what `change` leaves alone stays byte for byte.

    With `in_cells` False the formulas of cells are left out.
    """
    if not _ANY.search(data):
        return data
    parser = expat.ParserCreate()
    parser.buffer_text = True
    edits: list[tuple[int, int, bytes]] = []
    path: list[str] = []
    opened, text = 0, None

    def start(name: str, _: dict[str, str]) -> None:
        nonlocal opened, text
        local = name.rpartition(":")[2]
        path.append(local)
        if local in _HOLDERS and (in_cells or path[-2:-1] != ["c"]):
            opened, text = parser.CurrentByteIndex, ""
            parser.CharacterDataHandler = heard

    def heard(piece: str) -> None:
        nonlocal text
        text += piece

    def end(name: str) -> None:
        nonlocal text
        path.pop()
        if text is None:
            return
        parser.CharacterDataHandler = None
        old, text = unescaped(text), None
        new = change(old) if old else old
        if new != old:
            written = escaped(new).encode("ascii", "xmlcharrefreplace")
            edits.append((tag_end(data, opened), parser.CurrentByteIndex, written))

    parser.StartElementHandler, parser.EndElementHandler = start, end
    parser.Parse(data, True)
    return apply_edits(data, edits) if edits else data
