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
from cellfuncs.books.scans import MAIN, STRICT, STRICT_TEXT, DefinedName, SheetScan, Totals, WorkbookScan
from cellfuncs.errors import BookRefused

MAX_MARKS = 16_000_000  # tags in all parts together
MAX_DEPTH = 100
MAX_TAG = 1024 * 1024  # bytes between two "<"
MAX_SHEETS = 1000
MAX_SECONDS = 8.0

_PACKAGE_RELATIONS = "http://schemas.openxmlformats.org/package/2006/relationships"
_CONTENT_TYPES = "http://schemas.openxmlformats.org/package/2006/content-types"

_KINDS = {
    "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml": "xlsx",
    "application/vnd.openxmlformats-officedocument.spreadsheetml.template.main+xml": "xlsx",
    "application/vnd.ms-excel.sheet.macroEnabled.main+xml": "xlsm",
    "application/vnd.ms-excel.template.macroEnabled.main+xml": "xlsm",
    "application/vnd.ms-excel.addin.macroEnabled.main+xml": "xlsm",
}
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
            raise BookRefused(f"The file has more than {MAX_FILE // 1024**2} MB, which is beyond what is read.")
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
            text = "The file is encrypted. Open it in your spreadsheet program, remove the password and save it."
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


class _Gate:
    """The state of one examination."""

    def __init__(self, package: Package) -> None:
        self.package = package
        self.deadline = time.monotonic() + MAX_SECONDS
        self.marks = 0
        self.totals = Totals()

    def run(self) -> Book:
        types = self._content_types()
        part, kind = self._main_part(types)
        relations = self._relations(part)
        workbook = WorkbookScan()
        self._scan(part, workbook.start, workbook.end, workbook.text)
        if workbook.root.startswith(STRICT):
            raise BookRefused(STRICT_TEXT)
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
            names=workbook.defined(tuple(sheet.name for sheet in sheets)),
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
            raise BookRefused("The file is a zip archive, but not a workbook: only .xlsx and .xlsm files are read.")
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
        raise BookRefused("The file is a package without a workbook in it: only .xlsx and .xlsm files are read.")

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
                found[attributes.get("Id", "")] = (kind, resolved(folder, attributes.get("Target", "")))

        self._scan(relations_part, start)
        return found

    def _sheets(self, workbook: WorkbookScan, relations: dict, part: str) -> tuple[SheetPart, ...]:
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
            scan = SheetScan(self.totals, name)
            self._scan(target, scan.start)
            scan.finish()
            self.totals.cells += scan.cells
            tables = tuple(t for k, t in self._relations(target).values() if k == "table" and t in self.package.members)
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
            if low.endswith((".xml", ".vml")) and re.search(rb"<!\s*(?:DOCTYPE|ENTITY)", head.replace(b"\0", b"")):
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
                        f"The workbook holds more than {MAX_MARKS // 1_000_000} million tags, beyond what is read."
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
    return BookRefused(f"The part {shown(name)} declares a document type or entities, which no workbook needs.")


def _refuser(name: str) -> Callable[..., None]:
    def refuse(*_: object) -> None:
        raise _declares(name)

    return refuse


def resolved(folder: str, target: str) -> str:
    """A relation's target as a part name; `..` goes up inside the package only."""
    parts = [] if target.startswith("/") else [p for p in folder.split("/") if p]
    for piece in target.split("/"):
        if piece == "..":
            if parts:
                parts.pop()
        elif piece not in ("", "."):
            parts.append(piece)
    return "/".join(parts)
