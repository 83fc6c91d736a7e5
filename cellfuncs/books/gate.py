"""The gate: one streaming look through a workbook file before anything else opens it.

Refuses, each in one sentence, whatever is no .xlsx or .xlsm workbook and whatever is built to cost
time or memory. What passes is bounded: bytes, parts, elements, cells, formulas, merges, depth.
The limits were set from measured harm; see the constants here and in ``package.py``.
"""

from __future__ import annotations

import re
import time
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path
from xml.parsers import expat

from cellfuncs.books.package import MAX_FILE, Package, shown
from cellfuncs.errors import BookRefused

MAX_CELLS = 2_000_000
MAX_FORMULAS = 200_000
MAX_MERGED = 1_000_000  # cells under merges
MAX_MERGES = 100_000
MAX_AREA = 20_000_000  # cells of the rectangle round all cells of a sheet
MAX_MARKS = 16_000_000  # tags in all parts together
MAX_DEPTH = 100
MAX_TAG = 1024 * 1024  # bytes between two "<"
MAX_NAMES = 20_000
MAX_SHEETS = 1000
MAX_SECONDS = 8.0
LAST_ROW, LAST_COLUMN = 1_048_576, 16_384
AHEAD_ROWS = 500_000  # how far a stated dimension may reach past the last row

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
STRICT = "http://purl.oclc.org/ooxml/"
_PACKAGE_RELATIONS = "http://schemas.openxmlformats.org/package/2006/relationships"
_CONTENT_TYPES = "http://schemas.openxmlformats.org/package/2006/content-types"

_KINDS = {
    "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml": "xlsx",
    "application/vnd.openxmlformats-officedocument.spreadsheetml.template.main+xml": "xlsx",
    "application/vnd.ms-excel.sheet.macroEnabled.main+xml": "xlsm",
    "application/vnd.ms-excel.template.macroEnabled.main+xml": "xlsm",
    "application/vnd.ms-excel.addin.macroEnabled.main+xml": "xlsm",
}
_STRICT_TEXT = "The workbook is saved in the strict Open XML form. Save it as an ordinary .xlsx workbook."
_SAVE_AS = "Open it in your spreadsheet program and save it as .xlsx"


@dataclass(frozen=True)
class SheetPart:
    """One sheet: its name, the part that holds it, and what the gate counted. `kind` is worksheet or other."""

    name: str
    part: str
    kind: str = "worksheet"
    state: str = "visible"
    cells: int = 0
    formulas: int = 0
    last_row: int = 0
    last_column: int = 0
    tables: tuple[str, ...] = ()


@dataclass(frozen=True)
class DefinedName:
    """A name of the workbook; `sheet` is the sheet it is local to, or None."""

    name: str
    text: str
    sheet: str | None = None


@dataclass(frozen=True)
class Book:
    """What is known of a workbook after the gate. `package` holds the bytes that were examined."""

    package: Package = field(repr=False)
    kind: str
    part: str
    sheets: tuple[SheetPart, ...]
    names: tuple[DefinedName, ...]
    date_1904: bool
    full_calculation: bool
    iterate: dict[str, str]
    strings_part: str | None
    styles_part: str | None
    externals: tuple[str, ...]  # parts of the linked workbooks, in the order of [1], [2] …

    def sheet(self, name: str) -> SheetPart:
        """The sheet of that name; raises BookRefused."""
        for sheet in self.sheets:
            if sheet.name == name:
                return sheet
        raise BookRefused(f"The workbook has no sheet {shown(name)}.")


def inspect(path: str | Path | bytes) -> Book:
    """Examine a workbook file (or its bytes) and describe it; raises BookRefused with one sentence."""
    data = path if isinstance(path, bytes) else _read_file(Path(path))
    _check_signature(data)
    return _Gate(Package(data)).run()


def _read_file(path: Path) -> bytes:
    try:
        if not path.is_file():
            word = "is a folder, not a workbook" if path.is_dir() else "does not exist"
            raise BookRefused(f"{path.name or path} {word}.")
        if path.stat().st_size > MAX_FILE:
            raise BookRefused(
                f"The file has more than {MAX_FILE // 1024**2} MB, which is beyond what is read."
            )
        with path.open("rb") as file:
            data = file.read(MAX_FILE + 1)
    except OSError as error:
        raise BookRefused(f"{path.name} cannot be read: {error.strerror}.") from error
    return data


def _check_signature(data: bytes) -> None:
    if len(data) > MAX_FILE:
        raise BookRefused(f"The file has more than {MAX_FILE // 1024**2} MB, which is beyond what is read.")
    if data[:4] == b"PK\x03\x04":
        return
    if not data:
        raise BookRefused("The file is empty.")
    if data[:4] == b"\xd0\xcf\x11\xe0":
        if "EncryptedPackage".encode("utf-16-le") in data:
            text = "The file is encrypted with a password. Open it in your spreadsheet program, remove the password and save it."
        elif "Workbook".encode("utf-16-le") in data or "Book".encode("utf-16-le") in data:
            text = f"The file is a workbook in the old .xls form. {_SAVE_AS}."
        else:
            text = f"The file is encrypted or in an old binary form. {_SAVE_AS}, without a password."
        raise BookRefused(text)
    head = data[:4096].lstrip(b"\xef\xbb\xbf \t\r\n").lower()
    if head.startswith(b"%pdf"):
        raise BookRefused("The file is a PDF, not a workbook.")
    if head.startswith((b"<?xml", b"<html", b"<!doctype", b"<workbook", b"<table", b"<office:")):
        raise BookRefused(f"The file is a text in XML or HTML, not a workbook. {_SAVE_AS}.")
    if b"\0" not in data[:4096]:
        raise BookRefused(f"The file is a plain text, such as CSV, not a workbook. {_SAVE_AS}.")
    raise BookRefused("The file is not a workbook: only .xlsx and .xlsm files are read.")


_REFERENCE = re.compile(r"\$?([A-Z]{1,3})\$?([0-9]{1,7})(?::\$?([A-Z]{1,3})\$?([0-9]{1,7}))?\Z")


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


class _Gate:
    """The state of one examination."""

    def __init__(self, package: Package) -> None:
        self.package = package
        self.deadline = time.monotonic() + MAX_SECONDS
        self.marks = self.cells = self.formulas = self.merged = 0

    def run(self) -> Book:
        types = self._content_types()
        part, kind = self._main_part(types)
        relations = self._relations(part)
        workbook = _WorkbookScan()
        self._scan(part, workbook.start, workbook.end, workbook.text)
        if workbook.root.startswith(STRICT):
            raise BookRefused(_STRICT_TEXT)
        if workbook.root != f"{MAIN} workbook":
            raise BookRefused(
                "The file is a damaged workbook: its main part is not one. Save it again in your spreadsheet program."
            )
        sheets = self._sheets(workbook, relations, part)
        seen = {sheet.part for sheet in sheets} | {part, "[Content_Types].xml"}
        self._scan_others(seen)
        by_kind: dict[str, list[str]] = {}
        for kind_of, target in relations.values():
            by_kind.setdefault(kind_of, []).append(target)
        return Book(
            package=self.package,
            kind=kind,
            part=part,
            sheets=sheets,
            names=workbook.defined(sheets),
            date_1904=workbook.date_1904,
            full_calculation=workbook.full_calculation,
            iterate=workbook.iterate,
            strings_part=self._first(by_kind, "sharedStrings"),
            styles_part=self._first(by_kind, "styles"),
            externals=self._externals(workbook.externals, relations),
        )

    def _first(self, by_kind: dict[str, list[str]], kind: str) -> str | None:
        for target in by_kind.get(kind, ()):
            if target in self.package.members:
                return target
        return None

    def _externals(self, ids: list[str], relations: dict[str, tuple[str, str]]) -> tuple[str, ...]:
        return tuple(relations.get(key, ("", ""))[1] for key in ids)

    # -- parts -------------------------------------------------------------------------------------

    def _content_types(self) -> dict[str, str]:
        members = self.package.members
        if "[Content_Types].xml" not in members:
            if "mimetype" in members and b"opendocument" in self.package.read("mimetype")[:200]:
                raise BookRefused(f"The file is in the OpenDocument form (.ods). {_SAVE_AS}.")
            raise BookRefused(
                "The file is a zip archive, but not a workbook: only .xlsx and .xlsm files are read."
            )
        types: dict[str, str] = {}

        def start(name: str, attributes: dict[str, str]) -> None:
            if name == f"{_CONTENT_TYPES} Override":
                types[attributes.get("PartName", "").lstrip("/")] = attributes.get("ContentType", "")
            elif name == f"{_CONTENT_TYPES} Default":
                types["*." + attributes.get("Extension", "").lower()] = attributes.get("ContentType", "")

        self._scan("[Content_Types].xml", start)
        return types

    def _main_part(self, types: dict[str, str]) -> tuple[str, str]:
        for kind, target in self._relations("").values():
            if kind == "officeDocument":
                if target not in self.package.members:
                    raise BookRefused(f"The file is a damaged workbook: the part {shown(target)} is missing.")
                content = types.get(target) or types.get("*." + target.rpartition(".")[2].lower(), "")
                if content in _KINDS:
                    return target, _KINDS[content]
                if "sheet.binary" in content:
                    raise BookRefused(f"The file is a workbook in the binary .xlsb form. {_SAVE_AS}.")
                if "wordprocessingml" in content or "presentationml" in content:
                    raise BookRefused("The file is a text document or a presentation, not a workbook.")
                break
        raise BookRefused(
            "The file is a package without a workbook in it: only .xlsx and .xlsm files are read."
        )

    def _relations(self, part: str) -> dict[str, tuple[str, str]]:
        """Relations of a part: id -> (last word of the kind, part name); links to the outside are left out."""
        folder, _, name = part.rpartition("/")
        relations_part = f"{folder}/_rels/{name}.rels".lstrip("/")
        found: dict[str, tuple[str, str]] = {}
        if relations_part not in self.package.members:
            return found

        def start(name: str, attributes: dict[str, str]) -> None:
            if name == f"{_PACKAGE_RELATIONS} Relationship" and attributes.get("TargetMode") != "External":
                kind = attributes.get("Type", "").rpartition("/")[2]
                found[attributes.get("Id", "")] = (kind, _resolved(folder, attributes.get("Target", "")))

        self._scan(relations_part, start)
        return found

    def _sheets(self, workbook: _WorkbookScan, relations: dict, part: str) -> tuple[SheetPart, ...]:
        if not workbook.sheets:
            raise BookRefused("The workbook has no sheets.")
        if len(workbook.sheets) > MAX_SHEETS:
            raise BookRefused(f"The workbook has more than {MAX_SHEETS} sheets.")
        sheets: list[SheetPart] = []
        for name, key, state in workbook.sheets:
            kind, target = relations.get(key, ("", ""))
            if target not in self.package.members:
                raise BookRefused(f"The file is a damaged workbook: the sheet {shown(name)} has no part.")
            if any(sheet.name.casefold() == name.casefold() or sheet.part == target for sheet in sheets):
                raise BookRefused(f"The sheet {shown(name)} stands twice in the workbook.")
            if kind != "worksheet":
                sheets.append(SheetPart(name, target, "other", state))
                self._scan(target)
                continue
            scan = _SheetScan(self, name)
            self._scan(target, scan.start)
            scan.finish()
            self.cells += scan.cells
            tables = tuple(
                t for k, t in self._relations(target).values() if k == "table" and t in self.package.members
            )
            sheets.append(
                SheetPart(
                    name,
                    target,
                    "worksheet",
                    state,
                    scan.cells,
                    scan.formulas,
                    scan.last_row,
                    scan.last_column,
                    tables,
                )
            )
        return tuple(sheets)

    def _scan_others(self, seen: set[str]) -> None:
        """All other parts: their real size, and for XML its form, whoever may read it later."""
        for name in self.package.members:
            if name in seen:
                continue
            low = name.lower()
            if low.endswith((".xml", ".rels")) and not low.startswith(("customxml/", "docprops/")):
                self._scan(name)
                continue
            head = b""
            for piece in self.package.pieces(name):
                self._check_time()
                if len(head) < 65536:
                    head += piece[:65536]
            if low.endswith((".xml", ".vml")) and re.search(
                rb"<!\s*(?:DOCTYPE|ENTITY)", head.replace(b"\0", b"")
            ):
                raise _declares(name)

    def _check_time(self) -> None:
        if time.monotonic() > self.deadline:
            raise BookRefused("The file takes too long to examine, far more than any ordinary workbook.")

    # -- one part ----------------------------------------------------------------------------------

    def _scan(
        self,
        name: str,
        start: Callable[[str, dict[str, str]], None] | None = None,
        end: Callable[[str], None] | None = None,
        text: Callable[[str], None] | None = None,
    ) -> None:
        """Run one XML part through the parser, bounded; `start`, `end` and `text` are its handlers."""
        parser = expat.ParserCreate(namespace_separator=" ")
        parser.buffer_text = True
        parser.StartDoctypeDeclHandler = parser.EntityDeclHandler = _refuser(name)
        depth = 0

        def on_start(element: str, attributes: dict[str, str]) -> None:
            nonlocal depth
            depth += 1
            if depth > MAX_DEPTH:
                raise BookRefused(
                    f"The part {shown(name)} is nested deeper than {MAX_DEPTH} levels, as only a trap is."
                )
            if start is not None:
                start(element, attributes)

        def on_end(element: str) -> None:
            nonlocal depth
            depth -= 1
            if end is not None:
                end(element)

        parser.StartElementHandler = on_start
        parser.EndElementHandler = on_end
        if text is not None:
            parser.CharacterDataHandler = text
        since_mark = 0
        try:
            for piece in self.package.pieces(name):
                marks = piece.count(b"<")
                self.marks += marks
                if self.marks > MAX_MARKS:
                    raise BookRefused(
                        f"The workbook holds more than {MAX_MARKS // 1_000_000} million tags, which is beyond what is read."
                    )
                since_mark = len(piece) - piece.rfind(b"<") if marks else since_mark + len(piece)
                if since_mark > MAX_TAG:
                    raise BookRefused(
                        f"The part {shown(name)} holds one attribute or text longer than 1 MB, which no workbook needs."
                    )
                parser.Parse(piece, False)
                self._check_time()
            parser.Parse(b"", True)
        except expat.ExpatError as error:
            raise BookRefused(
                f"The part {shown(name)} is not well-formed XML. Save the file again in your spreadsheet program."
            ) from error
        except (UnicodeDecodeError, LookupError) as error:
            raise BookRefused(f"The part {shown(name)} is written in an unknown encoding.") from error


def _declares(name: str) -> BookRefused:
    return BookRefused(
        f"The part {shown(name)} declares a document type or entities, which no workbook needs."
    )


def _refuser(name: str) -> Callable[..., None]:
    def refuse(*_: object) -> None:
        raise _declares(name)

    return refuse


def _resolved(folder: str, target: str) -> str:
    """A relation's target as a part name; `..` goes up inside the package only."""
    parts = [] if target.startswith("/") else [p for p in folder.split("/") if p]
    for piece in target.split("/"):
        if piece == "..":
            if parts:
                parts.pop()
        elif piece not in ("", "."):
            parts.append(piece)
    return "/".join(parts)


class _WorkbookScan:
    """Handlers for the main part."""

    def __init__(self) -> None:
        self.root = ""
        self.sheets: list[tuple[str, str, str]] = []
        self.externals: list[str] = []
        self.date_1904 = self.full_calculation = False
        self.iterate: dict[str, str] = {}
        self._names: list[tuple[str, str, str | None]] = []
        self._open: tuple[str, str | None] | None = None
        self._text: list[str] = []

    def start(self, name: str, attributes: dict[str, str]) -> None:
        self.root = self.root or name
        space, _, local = name.rpartition(" ")
        if space != MAIN:
            return
        if local == "sheet":
            key = attributes.get(f"{RELATIONS} id", "")
            self.sheets.append((attributes.get("name", ""), key, attributes.get("state", "visible")))
        elif local == "definedName":
            self._open = (attributes.get("name", ""), attributes.get("localSheetId"))
            self._text = []
        elif local == "workbookPr":
            self.date_1904 = _true(attributes.get("date1904"))
        elif local == "calcPr":
            self.full_calculation = _true(attributes.get("fullCalcOnLoad"))
            self.iterate = {k: v for k, v in attributes.items() if k.startswith("iterate")}
        elif local == "externalReference":
            self.externals.append(attributes.get(f"{RELATIONS} id", ""))

    def text(self, text: str) -> None:
        if self._open is not None:
            self._text.append(text)

    def end(self, name: str) -> None:
        if self._open is not None and name == f"{MAIN} definedName":
            self._names.append((self._open[0], "".join(self._text), self._open[1]))
            self._open = None
            if len(self._names) > MAX_NAMES:
                raise BookRefused(f"The workbook defines more than {MAX_NAMES} names.")

    def defined(self, sheets: tuple[SheetPart, ...]) -> tuple[DefinedName, ...]:
        found = []
        for name, text, place in self._names:
            sheet = None
            if place is not None:
                if not place.isdigit() or int(place) >= len(sheets):
                    continue
                sheet = sheets[int(place)].name
            found.append(DefinedName(name, text, sheet))
        return tuple(found)


def _true(text: str | None) -> bool:
    return text in ("1", "true")


class _SheetScan:
    """Handlers for one worksheet: counts, and where the cells really are."""

    def __init__(self, gate: _Gate, name: str) -> None:
        self.gate, self.name = gate, name
        self.cells = self.formulas = self.merges = 0
        self.root = ""
        self.row = self.column = 0
        self.last_row = self.last_column = 0
        self.first_row, self.first_column = LAST_ROW, LAST_COLUMN
        self.far_row = 0  # rows may be stated without cells
        self.dimension: tuple[int, int, int, int] | None = None
        self._columns: dict[str, int] = {}
        self._row_text = ""

    def start(self, name: str, attributes: dict[str, str]) -> None:
        # The order is that of frequency: this runs millions of times.
        if name == _VALUE:
            return
        if name == _CELL:
            self._cell(attributes.get("r"))
        elif name == _FORMULA:
            self.formulas += 1
            self.gate.formulas += 1
            if self.gate.formulas > MAX_FORMULAS:
                raise BookRefused(
                    f"The workbook holds more than {MAX_FORMULAS:,} formulas.".replace(",", " ")
                )
        elif name == _ROW:
            text = attributes.get("r")
            row = _whole(text, LAST_ROW, self.name) if text else self.row + 1
            if row <= self.row:
                raise BookRefused(
                    f"The sheet {shown(self.name)} has its rows out of order at row {row}; it is damaged."
                )
            self.row = self.far_row = row
            self._row_text = str(row)
            self.column = 0
        elif name == _MERGE:
            self._merge(attributes.get("ref", ""))
        elif name == _DIMENSION:
            self.dimension = rectangle(attributes.get("ref", ""))
        elif not self.root:
            self.root = name
            if name.startswith(STRICT):
                raise BookRefused(_STRICT_TEXT)
            if name != f"{MAIN} worksheet":
                raise BookRefused(f"The file is a damaged workbook: the sheet {shown(self.name)} is not one.")

    def _cell(self, reference: str | None) -> None:
        self.cells += 1
        if self.gate.cells + self.cells > MAX_CELLS:
            raise BookRefused(f"The workbook holds more than {MAX_CELLS // 1_000_000} million cells.")
        if reference is None:
            column = self.column + 1
            if column > LAST_COLUMN:
                raise BookRefused(f"The sheet {shown(self.name)} has a cell outside the grid.")
        else:
            letters = reference.rstrip("0123456789")
            column = self._columns.get(letters) or self._new_column(letters, reference)
            if reference != letters + self._row_text:
                raise BookRefused(
                    f"The sheet {shown(self.name)} has the cell {shown(reference)} in row {self.row}; it is damaged."
                )
        if column <= self.column or not self.row:
            raise BookRefused(
                f"The sheet {shown(self.name)} has its cells out of order in row {self.row}; it is damaged."
            )
        if self.column == 0:
            self.last_row = self.row
            self.first_row = min(self.first_row, self.row)
        self.column = column
        if column > self.last_column:
            self.last_column = column
        if column < self.first_column:
            self.first_column = column

    def _new_column(self, letters: str, reference: str) -> int:
        plain = letters.isascii() and letters.isalpha() and letters.isupper() and len(letters) <= 3
        column = column_number(letters) if plain else 0
        if not 1 <= column <= LAST_COLUMN:
            raise BookRefused(
                f"The sheet {shown(self.name)} has a cell called {shown(reference)}, which is no cell."
            )
        self._columns[letters] = column
        return column

    def _merge(self, reference: str) -> None:
        area = rectangle(reference)
        if area is None:
            raise BookRefused(f"The sheet {shown(self.name)} merges {shown(reference)}, which is no range.")
        self.merges += 1
        self.gate.merged += (area[2] - area[0] + 1) * (area[3] - area[1] + 1)
        if self.gate.merged > MAX_MERGED or self.merges > MAX_MERGES:
            raise BookRefused(
                f"The sheet {shown(self.name)} merges far too many cells ({shown(reference)} and others)."
            )

    def finish(self) -> None:
        if not self.root:
            raise BookRefused(f"The file is a damaged workbook: the sheet {shown(self.name)} is empty.")
        if self.cells:
            area = (self.last_row - self.first_row + 1) * (self.last_column - self.first_column + 1)
            if area > MAX_AREA:
                raise BookRefused(
                    f"The sheet {shown(self.name)} has a cell far away from the others, at row {self.last_row} or column"
                    f" {self.last_column}; delete it and save the workbook again."
                )
        if self.dimension is not None:
            top, left, bottom, right = self.dimension
            ahead = bottom - self.far_row
            if ahead > AHEAD_ROWS or (bottom - top + 1) * (right - left + 1) > MAX_AREA:
                raise BookRefused(
                    f"The sheet {shown(self.name)} says it reaches to row {bottom}, but its last row is"
                    f" {self.far_row}; save the workbook again in your spreadsheet program."
                )


_CELL, _VALUE, _FORMULA, _ROW = f"{MAIN} c", f"{MAIN} v", f"{MAIN} f", f"{MAIN} row"
_MERGE, _DIMENSION = f"{MAIN} mergeCell", f"{MAIN} dimension"


def _whole(text: str, highest: int, sheet: str) -> int:
    if text.isascii() and text.isdigit() and len(text) <= 7 and 1 <= int(text) <= highest:
        return int(text)
    raise BookRefused(f"The sheet {shown(sheet)} has a row numbered {shown(text)}, which is no row.")
