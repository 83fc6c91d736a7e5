"""One sheet's text: where each row and cell stands in it (byte offsets), its formulas and stored values.

Only the formulas become Python objects; of the other cells the offsets are kept, so that a sheet of two
million cells stays small. Cells are looked at one by one, where somebody asks.
"""

from __future__ import annotations

import re
from array import array
from bisect import bisect_left
from collections.abc import Iterator
from dataclasses import dataclass
from typing import NamedTuple
from xml.parsers import expat

from cellfuncs.books.formulas import shifted
from cellfuncs.books.gate import Book
from cellfuncs.books.grid import Area, column_number, rectangle
from cellfuncs.books.package import shown
from cellfuncs.books.xmltext import ErrorValue, Value, decoded, unescaped
from cellfuncs.errors import BookRefused

MAX_FORMULA_TEXT = 32_000_000  # characters of all formulas of a sheet, shared ones written out


@dataclass(slots=True)
class Formula:
    """A cell with a formula. `kind`: plain, fixed (array), dynamic (array that grows and shrinks) or data table."""

    row: int
    column: int
    text: str
    kind: str
    area: Area
    stored: Value
    shared: str | None = None  # key of the group of formulas that is written once


class Piece(NamedTuple):
    """A child of a cell: its plain name and where it lies in the sheet's bytes."""

    name: str
    start: int
    end: int
    text: str


class Cell(NamedTuple):
    """One cell taken apart: its start tag, attributes and children."""

    start: int
    tag_end: int
    end: int
    closed: bool  # written as one empty tag
    attributes: dict[str, str]
    children: list[Piece]


class Sheet:
    """The text of one worksheet with its offsets."""

    def __init__(self, name: str, data: bytes) -> None:
        self.name, self.data = name, data
        self.prefix = ""
        self.keys = array("Q")  # row * 16384 + column - 1, ascending
        self.starts = array("Q")
        self.ends = array("Q")
        self.filled = bytearray()
        self.rows = array("L")
        self.row_starts = array("Q")
        self.row_ends = array("Q")  # where the closing tag of the row begins
        self.data_end = 0  # where </sheetData> begins
        self.dimension: tuple[int, str] | None = None
        self.columns: list[tuple[int, int, str]] = []  # first, last, style
        self.merges: list[Area] = []
        self.formulas: list[Formula] = []
        # The form in which most programs write a cell with a number or a shared string.
        self._plain_cell = re.compile(
            rb'<c(?: r="[A-Z0-9]+")?(?: s="\d+")?(?: t="(s|n|b)")?>(?:<f>[^<>]*</f>)?<v>([-+.0-9eE]+)</v></c>'
        )

    def at(self, row: int, column: int) -> int | None:
        """The index of a cell that stands in the file, or None."""
        key = row * 16384 + column - 1
        index = bisect_left(self.keys, key)
        return index if index < len(self.keys) and self.keys[index] == key else None

    def inside(self, area: Area) -> Iterator[tuple[int, int, int]]:
        """Row, column and index of every cell of the file in an area."""
        top, left, bottom, right = area
        index = bisect_left(self.keys, top * 16384 + left - 1)
        while index < len(self.keys):
            row, column = divmod(self.keys[index], 16384)
            column += 1
            if row > bottom:
                return
            if column > right:
                index = bisect_left(self.keys, (row + 1) * 16384 + left - 1, index)
                continue
            if column < left:
                index = bisect_left(self.keys, row * 16384 + left - 1, index)
                continue
            yield row, column, index
            index += 1

    def cell(self, index: int) -> Cell:
        """Take one cell apart."""
        return _take_apart(self.data, self.starts[index], self.ends[index])

    def value(self, row: int, column: int) -> tuple[str | None, str | None]:
        """Type mark and text of a cell, (None, None) where it is empty."""
        index = self.at(row, column)
        return (None, None) if index is None or not self.filled[index] else self.raw(index)

    def raw(self, index: int) -> tuple[str | None, str | None]:
        """Type mark and text of the cell with this index, which is not empty."""
        quick = self._plain_cell.match(self.data, self.starts[index])
        if quick is not None:
            mark, text = quick.groups()
            return mark and mark.decode(), text.decode()
        cell = self.cell(index)
        mark = cell.attributes.get("t")
        text = None
        for child in cell.children:
            if child.name == "v" or (child.name == "is" and mark == "inlineStr"):
                text = child.text
        return mark, text


def tag_end(data: bytes, start: int) -> int:
    """The offset just past the tag that begins at `start`; a `>` inside quotes does not end it."""
    match = _TAG.match(data, start)
    if match is None:
        raise BookRefused("A sheet of the workbook is written in a way that cannot be followed.")
    return match.end()


def element_end(data: bytes, start: int, closing: int) -> int:
    """The offset just past the element that begins at `start`, whose end the parser met at `closing`."""
    opened = tag_end(data, start)
    return opened if data[opened - 2 : opened] == b"/>" else tag_end(data, closing)


_TAG = re.compile(rb"""<[^<>"']*(?:"[^"]*"[^<>"']*|'[^']*'[^<>"']*)*>""")


def _take_apart(data: bytes, start: int, closing: int) -> Cell:
    opened = tag_end(data, start)
    end = element_end(data, start, closing)
    raw = data[start:end]
    parser = expat.ParserCreate()
    parser.buffer_text = True
    attributes: dict[str, str] = {}
    children: list[Piece] = []
    opened_at: list[tuple[str, int]] = []
    texts: list[str] = []
    names: list[str] = []

    def on_start(name: str, found: dict[str, str]) -> None:
        names.append(name.rpartition(":")[2])
        if len(names) == 1:
            attributes.update(found)
        elif len(names) == 2:
            opened_at.append((names[1], parser.CurrentByteIndex))
            texts.clear()

    def on_end(_: str) -> None:
        if len(names) == 2:
            name, begin = opened_at.pop()
            begin += start
            end = element_end(data, begin, start + parser.CurrentByteIndex)
            children.append(Piece(name, begin, end, "".join(texts)))
        names.pop()

    def on_text(text: str) -> None:
        # Runs of rich text count, phonetic guides (rPh) do not.
        if len(names) >= 2 and "rPh" not in names and (len(names) == 2 or names[-1] == "t"):
            texts.append(text)

    parser.StartElementHandler, parser.EndElementHandler, parser.CharacterDataHandler = (
        on_start,
        on_end,
        on_text,
    )
    parser.Parse(raw, True)
    return Cell(start, opened, end, end == opened, attributes, children)


def read_sheet(book: Book, name: str) -> Sheet:
    """Read one worksheet; raises BookRefused where its text cannot be followed."""
    data = book.package.read(book.sheet(name).part)
    if data[:2] in (b"\xff\xfe", b"\xfe\xff") or b"\0" in data[:200]:
        raise BookRefused(
            f"The sheet {shown(name)} is not written in UTF-8. Save the workbook again in your spreadsheet program."
        )
    sheet = Sheet(name, data)
    _Reader(sheet).run()
    return sheet


class _Reader:
    """Handlers that fill a :class:`Sheet`."""

    def __init__(self, sheet: Sheet) -> None:
        self.sheet = sheet
        self.parser = expat.ParserCreate()
        self.row = self.column = 0
        self.in_data = False
        self.formula: dict[str, str] | None = None
        self.text: list[str] | None = None
        self.formula_text = ""
        self.value_text: str | None = None
        self.cell_attributes: dict[str, str] = {}
        self.shared: dict[str, tuple[int, int, str]] = {}
        self.letters: dict[str, int] = {}
        self.length = 0

    def run(self) -> None:
        parser = self.parser
        parser.buffer_text = True
        parser.ordered_attributes = False
        parser.XmlDeclHandler = self._declared
        parser.StartElementHandler = self._root
        try:
            parser.Parse(self.sheet.data, True)
        except expat.ExpatError as error:
            raise BookRefused(f"The sheet {shown(self.sheet.name)} is not well-formed XML.") from error

    def _declared(self, _version: str, encoding: str | None, _standalone: int) -> None:
        if encoding is not None and encoding.lower().replace("_", "-") not in ("utf-8", "utf8", "us-ascii"):
            raise BookRefused(
                f"The sheet {shown(self.sheet.name)} is written in {shown(encoding)}, not in UTF-8."
                " Save the workbook again in your spreadsheet program."
            )

    def _root(self, name: str, _: dict[str, str]) -> None:
        head, colon, _local = name.rpartition(":")
        prefix = self.sheet.prefix = head + colon
        words = ("c", "v", "f", "is", "row", "sheetData", "dimension", "col", "mergeCell")
        self.C, self.V, self.F, self.IS, self.ROW, self.DATA, self.DIMENSION, self.COL, self.MERGE = (
            prefix + word for word in words
        )
        self.parser.StartElementHandler = self._outside
        self.parser.EndElementHandler = self._end

    def _outside(self, name: str, attributes: dict[str, str]) -> None:
        sheet = self.sheet
        if name == self.DATA:
            if sheet.data_end:
                raise BookRefused(f"The sheet {shown(sheet.name)} holds its cells twice; it is damaged.")
            self.in_data = True
            self.parser.StartElementHandler = self._inside
        elif name == self.DIMENSION:
            sheet.dimension = (self.parser.CurrentByteIndex, attributes.get("ref", ""))
        elif name == self.COL and attributes.get("style") and not sheet.data_end:
            first, last = attributes.get("min", ""), attributes.get("max", "")
            if first.isdigit() and last.isdigit():
                sheet.columns.append((int(first), int(last), attributes["style"]))
        elif name == self.MERGE and (area := rectangle(attributes.get("ref", ""))):
            sheet.merges.append(area)

    def _inside(self, name: str, attributes: dict[str, str]) -> None:
        sheet = self.sheet
        if name == self.C:
            reference = attributes.get("r")
            if reference is None:
                self.column += 1
            else:
                letters = reference.rstrip("0123456789")
                column = self.letters.get(letters)
                if column is None:
                    column = self.letters[letters] = column_number(letters)
                self.column = column
            sheet.keys.append(self.row * 16384 + self.column - 1)
            sheet.starts.append(self.parser.CurrentByteIndex)
            sheet.filled.append(0)
            self.formula = None
            self.cell_attributes = attributes
        elif name == self.V:
            sheet.filled[-1] = 1
            if self.formula is not None:
                self._listen()
        elif name == self.F:
            sheet.filled[-1] = 1
            self.formula = attributes
            self.formula_text, self.value_text = "", None
            self._listen()
        elif name == self.ROW:
            text = attributes.get("r")
            self.row = int(text) if text else self.row + 1
            self.column = 0
            sheet.rows.append(self.row)
            sheet.row_starts.append(self.parser.CurrentByteIndex)
        elif name == self.IS:
            sheet.filled[-1] = 1

    def _listen(self) -> None:
        self.text = []
        self.parser.CharacterDataHandler = self.text.append

    def _heard(self) -> str:
        self.parser.CharacterDataHandler = None
        text, self.text = "".join(self.text or ()), None
        return text

    def _end(self, name: str) -> None:
        if not self.in_data:
            return
        if name == self.C:
            self.sheet.ends.append(self.parser.CurrentByteIndex)
            if self.formula is not None:
                self._formula_cell()
        elif name == self.V:
            if self.text is not None:
                self.value_text = self._heard()
        elif name == self.F:
            self.formula_text = self._heard()
        elif name == self.ROW:
            self.sheet.row_ends.append(self.parser.CurrentByteIndex)
        elif name == self.DATA:
            self.sheet.data_end = self.parser.CurrentByteIndex
            self.in_data = False
            self.parser.StartElementHandler = self._outside

    def _formula_cell(self) -> None:
        row, column = self.row, self.column
        attributes, cell = self.formula or {}, self.cell_attributes
        self.formula = None
        area = rectangle(attributes.get("ref", "")) or (row, column, row, column)
        kind, text = "plain", unescaped(self.formula_text)
        mark = attributes.get("t", "normal")
        self.length += len(text)
        if mark == "shared":
            key = attributes.get("si", "")
            if text:
                self.shared[key] = (row, column, text)
            elif key in self.shared:
                top, left, master = self.shared[key]
                self.length += len(master)
                text = shifted(master, row - top, column - left)
            area = (row, column, row, column)
        elif mark == "array":
            kind = "dynamic" if cell.get("cm", "0") != "0" else "fixed"
            if area[:2] != (row, column):
                area = (row, column, row, column)
        elif mark == "dataTable":
            kind = "data table"
        else:
            area = (row, column, row, column)
        if self.length > MAX_FORMULA_TEXT:
            raise BookRefused(
                f"The formulas of the sheet {shown(self.sheet.name)} are far longer than any program writes."
            )
        stored = self._stored(cell.get("t"))
        shared = attributes.get("si", "") if mark == "shared" else None
        self.sheet.formulas.append(Formula(row, column, text, kind, area, stored, shared))

    def _stored(self, mark: str | None) -> Value:
        if self.value_text is None:
            return None
        if mark == "s":
            return ErrorValue("#N/A")  # a formula's value is never a shared string
        return decoded(mark, self.value_text)
