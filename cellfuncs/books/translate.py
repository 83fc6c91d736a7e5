"""Formulas of the file as the engine wants them: names, tables, links and marks of new functions made plain."""

from __future__ import annotations

from cellfuncs.books.externals import Linked, absolute, linked, quoted, table_area, tables
from cellfuncs.books.formulas import MAX_LENGTH, IsOurs, Piece, as_one_value, normalised, pieces, reference
from cellfuncs.books.gate import Book
from cellfuncs.books.grid import area_text
from cellfuncs.books.reading import Formula

FITTED = "BOOKS_FITTED"  # the helper that makes a value fill a fixed array


class Translator:
    """What a workbook's formulas refer to, and the engine's text for each of them."""

    def __init__(self, book: Book, is_ours: IsOurs) -> None:
        self.is_ours = is_ours
        self.tables = tables(book)
        self.links: Linked = linked(book)
        self.order = [part.name for part in book.sheets]
        self._plain_names: dict[tuple[str, str], str | None] = {}
        self.names: dict[tuple[str | None, str], str] = {}
        for defined in book.names:
            scope = defined.sheet.casefold() if defined.sheet else None
            self.names[scope, defined.name.casefold()] = normalised(defined.text, is_ours).text

    def name_text(self, name: str, sheet: str) -> str | None:
        """What a defined name stands for, as seen from a sheet."""
        key = name.casefold()
        return self.names.get((sheet.casefold(), key), self.names.get((None, key)))

    def plain(self, text: str, sheet: str, row: int, column: int) -> str | None:
        """A formula (our functions already under plain names) with plain references only; None where it cannot be read.

        What cannot be replaced becomes ``#REF!``, so that one bad link spoils one cell and not the workbook.
        """
        parts = pieces(text)
        if parts is None:
            return None
        new = "".join(self._piece(part, parts, number, sheet, row, column) for number, part in enumerate(parts))
        return new if len(new) <= MAX_LENGTH else None

    def _plain_name(self, name: str, sheet: str) -> str | None:
        """What a name stands for, with plain references; a name that stands for itself is ``#REF!``."""
        key = (sheet.casefold(), name.casefold())
        if key not in self._plain_names:
            inner = self.name_text(name, sheet)
            self._plain_names[key] = "#REF!"  # as long as it is being worked out
            if inner is None:
                self._plain_names[key] = None
            else:
                inner = self.plain(inner, sheet, 0, 0) or "#REF!"
                self._plain_names[key] = inner if reference(inner).kind == "cells" else f"({inner})"
        return self._plain_names[key]

    def _piece(self, part: Piece, parts: tuple[Piece, ...], number: int, sheet: str, row: int, column: int) -> str:
        if part.kind == "call":
            if "[" in part.text:
                return "#REF!+("  # a function of another workbook's macros
            return "@(" if part.text.upper() == "_XLFN.SINGLE(" else part.text
        if part.kind != "reference":
            return part.text
        found = reference(part.text)
        if found.kind == "name":
            inner = self._plain_name(found.name, found.sheet or sheet)
            return part.text if inner is None else inner
        if found.kind == "table":
            place = table_area(part.text, self.tables, sheet, row, column)
            return "#REF!" if place is None else absolute(*place)
        if found.kind == "external":
            return self.links.local(found) or "#REF!"
        if found.kind == "unknown" and found.sheet and ":" in found.sheet and found.area:
            return self._through_sheets(found.sheet, area_text(found.area), parts, number)
        return part.text

    def _through_sheets(self, span: str, area: str, parts: tuple[Piece, ...], number: int) -> str:
        """`First:Last!A1` as one argument for each sheet, where it stands as a whole argument."""
        first, _, last = span.partition(":")
        low = [name.casefold() for name in self.order]
        if first.casefold() not in low or last.casefold() not in low:
            return "#REF!"
        ends = sorted((low.index(first.casefold()), low.index(last.casefold())))
        before = parts[number - 1] if number else None
        after = parts[number + 1] if number + 1 < len(parts) else None
        alone = before and after and (before.kind == "call" or before.text == ",") and after.text in (",", ")")
        if not alone:
            return "#REF!"
        return ",".join(f"{quoted(name)}!{area}" for name in self.order[ends[0] : ends[1] + 1])


def engine_text(text: str, formula: Formula) -> str:
    """A plain text as the engine gets it, without its `=`: one value, a fixed array made to fit, or as it is."""
    if formula.kind == "plain":
        return as_one_value(text)
    if formula.kind == "fixed":
        top, left, bottom, right = formula.area
        return f"{FITTED}({text},{bottom - top + 1},{right - left + 1})"
    return text
