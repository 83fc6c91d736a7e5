"""The small package that the engine gets instead of the workbook file."""

from __future__ import annotations

import io
import zipfile
from collections.abc import Mapping, Sequence
from xml.sax.saxutils import quoteattr

from cellfuncs.books.gate import Book
from cellfuncs.books.grid import column_letters
from cellfuncs.books.reading import Sheet, element_end
from cellfuncs.books.scans import MAIN, RELATIONS
from cellfuncs.books.splice import apply_edits
from cellfuncs.books.xmltext import Value, encoded, escaped

_TYPES = "http://schemas.openxmlformats.org/package/2006/content-types"
_PACKAGE = "http://schemas.openxmlformats.org/package/2006/relationships"
_ML = "application/vnd.openxmlformats-officedocument.spreadsheetml"


def stand_in(
    book: Book,
    sheets: Mapping[str, Sheet],
    formulas: Mapping[str, Mapping[int, str | None]],
    names: Sequence[tuple[str, str, str | None]],
    extra: Mapping[str, bytes],
) -> bytes:
    """An .xlsx as bytes: sheets with the given formulas (None: the stored value stands there), names, extra sheets."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED, compresslevel=1) as archive:
        written: list[str] = []
        for part in book.sheets:
            if part.kind != "worksheet":
                continue
            if part.name in sheets:
                data = _with_formulas(sheets[part.name], formulas.get(part.name, {}))
            else:
                data = book.package.read(part.part)
            written.append(part.name)
            archive.writestr(f"xl/worksheets/sheet{len(written)}.xml", data)
        for name, rows in extra.items():
            written.append(name)
            text = f'<worksheet xmlns="{MAIN}"><sheetData>'.encode() + rows + b"</sheetData></worksheet>"
            archive.writestr(f"xl/worksheets/sheet{len(written)}.xml", text)
        parts = []
        if book.strings_part:
            archive.writestr("xl/sharedStrings.xml", book.package.read(book.strings_part))
            parts.append("sharedStrings")
        archive.writestr("xl/workbook.xml", _workbook(book, written, names))
        archive.writestr("xl/_rels/workbook.xml.rels", _relations(len(written), parts))
        archive.writestr("[Content_Types].xml", _content_types(len(written), parts))
        archive.writestr(
            "_rels/.rels",
            f'<Relationships xmlns="{_PACKAGE}"><Relationship Id="rId1" Type="{RELATIONS}/officeDocument"'
            ' Target="xl/workbook.xml"/></Relationships>',
        )
    return out.getvalue()


def _with_formulas(sheet: Sheet, formulas: Mapping[int, str | None]) -> bytes:
    edits: list[tuple[int, int, bytes]] = []
    done: set[int] = set()
    for formula in sheet.formulas:
        key = formula.row * 16384 + formula.column - 1
        text = formulas.get(key)
        edits.append(_edit(sheet, formula.row, formula.column, text, formula.stored))
        done.add(key)
    for formula in sheet.formulas:
        if formula.kind not in ("fixed", "dynamic") or formulas.get(formula.row * 16384 + formula.column - 1) is None:
            continue
        for row, column, index in sheet.inside(formula.area):
            key = row * 16384 + column - 1
            if key not in done and sheet.filled[index]:
                done.add(key)
                edits.append(_edit(sheet, row, column, None, None))
    return apply_edits(sheet.data, edits)


def _edit(sheet: Sheet, row: int, column: int, text: str | None, stored: Value) -> tuple[int, int, bytes]:
    index = sheet.at(row, column)
    assert index is not None  # every formula stands in a cell of the file
    start, closing = sheet.starts[index], sheet.ends[index]
    p = sheet.prefix
    head = f'<{p}c r="{column_letters(column)}{row}"'
    if text is not None:
        new = f"{head}><{p}f>{escaped(text)}</{p}f></{p}c>"
    else:
        mark, value = encoded(stored)
        new = f"{head}/>" if value is None else f'{head} t="{mark or "n"}"><{p}v>{value}</{p}v></{p}c>'
    return start, element_end(sheet.data, start, closing), new.encode()


def _workbook(book: Book, sheets: Sequence[str], names: Sequence[tuple[str, str, str | None]]) -> str:
    rows = "".join(
        f'<sheet name={quoteattr(name)} sheetId="{number}" r:id="rId{number}"/>'
        for number, name in enumerate(sheets, 1)
    )
    defined = ""
    for name, text, sheet in names:
        if sheet is not None and sheet not in sheets:
            continue
        scope = "" if sheet is None else f' localSheetId="{list(sheets).index(sheet)}"'
        defined += f"<definedName name={quoteattr(name)}{scope}>{escaped(text)}</definedName>"
    defined = f"<definedNames>{defined}</definedNames>" if defined else ""
    dates = '<workbookPr date1904="1"/>' if book.date_1904 else ""
    iterate = "".join(f" {key}={quoteattr(value)}" for key, value in book.iterate.items())
    return (
        f'<workbook xmlns="{MAIN}" xmlns:r="{RELATIONS}">{dates}<sheets>{rows}</sheets>{defined}'
        f"<calcPr{iterate}/></workbook>"
    )


def _relations(sheets: int, parts: Sequence[str]) -> str:
    rows = [
        f'<Relationship Id="rId{n}" Type="{RELATIONS}/worksheet" Target="worksheets/sheet{n}.xml"/>'
        for n in range(1, sheets + 1)
    ]
    rows += [
        f'<Relationship Id="rId{sheets + n}" Type="{RELATIONS}/{part}" Target="{part}.xml"/>'
        for n, part in enumerate(parts, 1)
    ]
    return f'<Relationships xmlns="{_PACKAGE}">{"".join(rows)}</Relationships>'


def _content_types(sheets: int, parts: Sequence[str]) -> str:
    rows = [f'<Override PartName="/xl/workbook.xml" ContentType="{_ML}.sheet.main+xml"/>']
    rows += [
        f'<Override PartName="/xl/worksheets/sheet{n}.xml" ContentType="{_ML}.worksheet+xml"/>'
        for n in range(1, sheets + 1)
    ]
    rows += [f'<Override PartName="/xl/{part}.xml" ContentType="{_ML}.{part}+xml"/>' for part in parts]
    return (
        f'<Types xmlns="{_TYPES}"><Default Extension="rels"'
        f' ContentType="application/vnd.openxmlformats-package.relationships+xml"/>{"".join(rows)}</Types>'
    )
