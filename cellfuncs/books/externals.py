"""What formulas refer to besides cells: tables of the workbook, and values stored of other workbooks.

Both become ordinary cell references before the engine sees a formula: a table's columns as ranges, the
stored values of other workbooks as cells of extra sheets. No link is ever followed.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from xml.parsers import expat

from cellfuncs.books.formulas import Reference, reference
from cellfuncs.books.gate import Book
from cellfuncs.books.grid import Area, area_text, column_letters, rectangle
from cellfuncs.books.xmltext import escaped

MAX_STORED = 500_000  # cells kept of other workbooks


@dataclass(frozen=True)
class Table:
    """A table of the workbook: its sheet, whole area, rows of heads and totals, and column heads."""

    name: str
    sheet: str
    area: Area
    heads: int
    totals: int
    columns: tuple[str, ...]


def tables(book: Book) -> dict[str, Table]:
    """All tables by name in small letters."""
    found: dict[str, Table] = {}
    for sheet in book.sheets:
        for part in sheet.tables:
            table = _table(book.package.read(part), sheet.name)
            if table is not None:
                found[table.name.casefold()] = table
    return found


def _table(data: bytes, sheet: str) -> Table | None:
    head: dict[str, str] = {}
    columns: list[str] = []

    def start(name: str, attributes: dict[str, str]) -> None:
        local = name.rpartition(" ")[2]
        if local == "table":
            head.update(attributes)
        elif local == "tableColumn":
            columns.append(re.sub(r"_x000a_", "\n", attributes.get("name", ""), flags=re.IGNORECASE))

    parser = expat.ParserCreate(namespace_separator=" ")
    parser.StartElementHandler = start
    parser.Parse(data, True)
    area = rectangle(head.get("ref", ""))
    name = head.get("displayName") or head.get("name")
    if area is None or not name:
        return None
    heads = int(head.get("headerRowCount", "1") == "1")
    totals = int(head.get("totalsRowCount", "0") not in ("0", ""))
    return Table(name, sheet, area, heads, totals, tuple(columns))


_PART = re.compile(r"\[((?:[^\[\]']|'.)*)\]")


def table_area(text: str, found: Mapping[str, Table], sheet: str, row: int, column: int) -> tuple[str, Area] | None:
    """The cells that `Table[[#This Row],[head]]` and the like mean in a formula at `row`; None where they are none."""
    name, bracket, inner = text.partition("[")
    table = found.get(name.casefold()) if name else _table_here(found, sheet, row, column)
    if table is None or not bracket or not inner.endswith("]"):
        return None
    inner = inner[:-1]
    specials: set[str] = set()
    heads: list[str] = []
    if inner.startswith("@"):
        specials.add("#this row")
        inner = inner[1:]
    inner = inner.strip()
    if inner.startswith("["):
        words = _PART.findall(inner)
    else:
        words = [inner] if inner else []
    for word in words:
        if word.startswith("#"):
            specials.add(word.casefold())
        elif word.startswith("@"):
            specials.add("#this row")
            heads.append(word[1:])
        else:
            heads.append(re.sub(r"'(.)", r"\1", word))
    return _table_cells(table, specials, heads, row)


def _table_here(found: Mapping[str, Table], sheet: str, row: int, column: int) -> Table | None:
    for table in found.values():
        top, left, bottom, right = table.area
        if table.sheet == sheet and top <= row <= bottom and left <= column <= right:
            return table
    return None


def _table_cells(table: Table, specials: set[str], heads: list[str], row: int) -> tuple[str, Area] | None:
    top, left, bottom, right = table.area
    names = [column.casefold() for column in table.columns]
    if heads:
        try:
            places = [names.index(head.casefold()) for head in heads]
        except ValueError:
            return None
        left, right = left + min(places), left + max(places)
    data_top, data_bottom = top + table.heads, bottom - table.totals
    if not specials or specials == {"#data"}:
        rows = (data_top, data_bottom)
    elif specials == {"#all"}:
        rows = (top, bottom)
    elif specials == {"#headers"} and table.heads:
        rows = (top, top)
    elif specials == {"#totals"} and table.totals:
        rows = (bottom, bottom)
    elif specials == {"#headers", "#data"}:
        rows = (top, data_bottom)
    elif specials == {"#data", "#totals"}:
        rows = (data_top, bottom)
    elif specials == {"#this row"} and data_top <= row <= data_bottom:
        rows = (row, row)
    else:
        return None
    return table.sheet, (rows[0], left, rows[1], right)


def quoted(sheet: str) -> str:
    """A sheet's name as formulas write it."""
    return "'" + sheet.replace("'", "''") + "'"


def absolute(sheet: str, area: Area) -> str:
    """`'Sheet 1'!$A$1:$B$2`."""
    top, left, bottom, right = area
    first = f"${column_letters(left)}${top}"
    last = f"${column_letters(right)}${bottom}"
    return f"{quoted(sheet)}!{first}" + ("" if first == last else f":{last}")


@dataclass
class Linked:
    """Values that the file has stored of other workbooks: extra sheets for the engine, and how to reach them."""

    sheets: dict[str, bytes] = field(default_factory=dict)  # name of the extra sheet -> its sheetData
    names: dict[tuple[int, str], str] = field(default_factory=dict)  # (book number, sheet) -> extra sheet
    defined: dict[tuple[int, str], str] = field(default_factory=dict)  # (book number, name) -> its text

    def local(self, found: Reference) -> str | None:
        """The reference among the extra sheets for one to another workbook; None where nothing is stored."""
        match = re.fullmatch(r"\[(\d+)\](.*)", found.sheet or "", re.DOTALL)
        if match is None:
            return None
        number, sheet = int(match[1]), match[2]
        if found.area is not None:
            extra = self.names.get((number, sheet.casefold()))
            return None if extra is None else f"{quoted(extra)}!{area_text(found.area)}"
        text = self.defined.get((number, found.name.casefold()))
        if text is None or sheet:
            return None
        inner = reference(text.lstrip("="))
        extra = self.names.get((number, (inner.sheet or "").casefold()))
        return None if extra is None or inner.area is None else f"{quoted(extra)}!{area_text(inner.area)}"


def linked(book: Book) -> Linked:
    """Read the stored values of all linked workbooks; what is too large or damaged is left out."""
    found = Linked()
    left = MAX_STORED
    for number, part in enumerate(book.externals, start=1):
        if part in book.package.members:
            left = _linked_book(found, book.package.read(part), number, left)
    return found


def _linked_book(found: Linked, data: bytes, number: int, left: int) -> int:
    names: list[str] = []
    rows: list[str] = []
    sheet, row, mark, reference_text, text = -1, "", "", "", None

    def start(name: str, attributes: dict[str, str]) -> None:
        nonlocal sheet, row, mark, reference_text, text
        local = name.rpartition(" ")[2]
        if local == "sheetName":
            names.append(attributes.get("val", ""))
        elif local == "definedName":
            key = (number, attributes.get("name", "").casefold())
            if "sheetId" not in attributes:
                found.defined[key] = attributes.get("refersTo", "")
        elif local == "sheetData":
            identity = attributes.get("sheetId", "")
            sheet = int(identity) if identity.isdigit() else -1
            rows.clear()
        elif local == "row":
            row = attributes.get("r", "")
            rows.append(f'<row r="{int(row)}">' if row.isdigit() else "<row>")
        elif local == "cell":
            mark, reference_text = attributes.get("t", "n"), attributes.get("r", "")
        elif local == "v":
            text = ""

    def words(piece: str) -> None:
        nonlocal text
        if text is not None:
            text += piece

    def end(name: str) -> None:
        nonlocal text, left
        local = name.rpartition(" ")[2]
        if local == "v":
            area = rectangle(reference_text)
            if area and mark in ("n", "b", "e", "str") and left > 0:
                left -= 1
                rows.append(f'<c r="{area_text(area)}" t="{mark}"><v>{escaped(text or "")}</v></c>')
            text = None
        elif local == "row":
            rows.append("</row>")
        elif local == "sheetData" and 0 <= sheet < len(names):
            extra = f"linked {number} {sheet}"
            found.names[number, names[sheet].casefold()] = extra
            found.sheets[extra] = "".join(rows).encode()

    parser = expat.ParserCreate(namespace_separator=" ")
    parser.buffer_text = True
    parser.StartElementHandler, parser.EndElementHandler, parser.CharacterDataHandler = start, end, words
    parser.Parse(data, True)
    return left
