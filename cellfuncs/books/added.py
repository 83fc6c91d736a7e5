"""A sheet of texts added to a workbook, behind the others; nothing in it is ever a formula."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from xml.sax.saxutils import quoteattr

from cellfuncs.books.grid import column_letters
from cellfuncs.books.parts import HEAD, Draft, parsed, put_in
from cellfuncs.books.scans import MAIN, RELATIONS
from cellfuncs.books.splice import apply_edits
from cellfuncs.books.xmltext import escaped
from cellfuncs.errors import BookRefused

_SHEET_TYPE = "application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"


def add_sheet(draft: Draft, name: str, rows: Iterable[Sequence[str]], widths: Sequence[float]) -> str:
    """Add a sheet that holds ``rows`` as texts, columns of the given widths; gives its name, counted up where taken."""
    part = draft.book.part
    data = draft.read(part)
    root = parsed(data, part)
    sheets = root.first("sheets")
    if sheets is None:
        raise BookRefused("The workbook's list of sheets is written in a way that cannot be followed.")
    taken = {sheet.name.casefold() for sheet in draft.book.sheets}
    number, wanted = 1, name
    while wanted.casefold() in taken:
        number += 1
        wanted = f"{name} {number}"
    place = draft.free_name("xl/worksheets/sheet{}.xml")
    draft.add(place, _sheet(rows, widths), _SHEET_TYPE)
    key = draft.relate(part, f"{RELATIONS}/worksheet", place)
    ids = [int(text) for s in sheets.children if (text := s.attributes.get("sheetId", "")).isdigit()]
    p = sheets.prefix
    new = (
        f'<{p}sheet xmlns:r="{RELATIONS}" name={quoteattr(wanted)} sheetId="{max(ids, default=0) + 1}"'
        f" r:id={quoteattr(key)}/>"
    )
    draft.write(part, apply_edits(data, [put_in(data, sheets, new.encode())]))
    return wanted


def _sheet(rows: Iterable[Sequence[str]], widths: Sequence[float]) -> bytes:
    written = "".join(_row(number, row) for number, row in enumerate(rows, 1))
    columns = "".join(
        f'<col min="{n}" max="{n}" width="{width:g}" customWidth="1"/>' for n, width in enumerate(widths, 1)
    )
    text = (
        f'<worksheet xmlns="{MAIN}"><sheetPr><pageSetUpPr fitToPage="1"/></sheetPr><cols>{columns}</cols>'
        f'<sheetData>{written}</sheetData><pageSetup orientation="landscape" fitToHeight="0"/></worksheet>'
    )
    return HEAD + text.encode()


def _row(number: int, texts: Sequence[str]) -> str:
    cells = "".join(
        f'<c r="{column_letters(column)}{number}" t="inlineStr">'
        f'<is><t xml:space="preserve">{escaped(text)}</t></is></c>'
        for column, text in enumerate(texts, 1)
        if text
    )
    return f'<row r="{number}">{cells}</row>'
