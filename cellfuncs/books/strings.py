"""Shared strings, and the stored values of single cells."""

from __future__ import annotations

from xml.parsers import expat

from cellfuncs.books.gate import Book
from cellfuncs.books.reading import Sheet
from cellfuncs.books.xmltext import Value, decoded, unescaped


def shared_strings(book: Book, wanted: set[int]) -> dict[int, str]:
    """The texts of the shared strings with the given numbers, without phonetic guides."""
    found: dict[int, str] = {}
    if book.strings_part is None or not wanted:
        return found
    parser = expat.ParserCreate(namespace_separator=" ")
    parser.buffer_text = True
    number = -1
    path: list[str] = []
    texts: list[str] = []

    def on_start(name: str, _: dict[str, str]) -> None:
        nonlocal number
        local = name.rpartition(" ")[2]
        path.append(local)
        if local == "si":
            number += 1
            texts.clear()

    def on_end(_: str) -> None:
        if path.pop() == "si" and number in wanted:
            found[number] = unescaped("".join(texts))

    def on_text(text: str) -> None:
        if path[-1] == "t" and "rPh" not in path and number in wanted:
            texts.append(text)

    parser.StartElementHandler, parser.EndElementHandler, parser.CharacterDataHandler = (
        on_start,
        on_end,
        on_text,
    )
    for piece in book.package.pieces(book.strings_part):
        parser.Parse(piece, False)
    parser.Parse(b"", True)
    return found


def values_of(book: Book, sheet: Sheet, cells: set[tuple[int, int]]) -> dict[tuple[int, int], Value]:
    """The stored values of the given cells of one sheet, shared strings looked up."""
    raw = {cell: sheet.value(*cell) for cell in cells}
    wanted = {int(text) for mark, text in raw.values() if mark == "s" and text and text.isdigit()}
    strings = shared_strings(book, wanted)
    return {
        cell: strings.get(int(text), "") if mark == "s" and text and text.isdigit() else decoded(mark, text)
        for cell, (mark, text) in raw.items()
    }
