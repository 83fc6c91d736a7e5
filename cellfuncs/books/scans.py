"""What the gate looks for in the main part and in each worksheet, as handlers for its parser."""

from __future__ import annotations

from dataclasses import dataclass

from cellfuncs.books.grid import LAST_COLUMN, LAST_ROW, Area, column_number, rectangle
from cellfuncs.books.package import shown
from cellfuncs.errors import BookRefused

MAX_FORMULAS = 200_000
MAX_MERGED = 1_000_000  # cells under merges
MAX_ARRAYS = 200_000  # cells under array formulas
MAX_MERGES = 100_000
MAX_AREA = 20_000_000  # cells of the rectangle round all cells of a sheet
MAX_NAMES = 20_000
AHEAD_ROWS = 500_000  # how far a stated dimension may reach past the last row
MAX_CELLS = 2_000_000
MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
STRICT = "http://purl.oclc.org/ooxml/"
STRICT_TEXT = "The workbook is saved in the strict Open XML form. Save it as an ordinary .xlsx workbook."


@dataclass(frozen=True)
class DefinedName:
    """A name of the workbook; `sheet` is the sheet it is local to, or None."""

    name: str
    text: str
    sheet: str | None = None


@dataclass
class Totals:
    """Counts over all sheets."""

    cells: int = 0
    formulas: int = 0
    merged: int = 0
    arrays: int = 0


class WorkbookScan:
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

    def defined(self, sheets: tuple[str, ...]) -> tuple[DefinedName, ...]:
        found = []
        for name, text, place in self._names:
            sheet = None
            if place is not None:
                if not place.isdigit() or int(place) >= len(sheets):
                    continue
                sheet = sheets[int(place)]
            found.append(DefinedName(name, text, sheet))
        return tuple(found)


def _true(text: str | None) -> bool:
    return text in ("1", "true")


class SheetScan:
    """Handlers for one worksheet: counts, and where the cells really are."""

    def __init__(self, totals: Totals, name: str) -> None:
        self.totals, self.name = totals, name
        self.cells = self.formulas = self.merges = 0
        self.root = ""
        self.row = self.column = 0
        self.last_row = self.last_column = 0
        self.first_row, self.first_column = LAST_ROW, LAST_COLUMN
        self.far_row = 0  # rows may be stated without cells
        self.dimension: Area | None = None
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
            if "ref" in attributes and attributes.get("t") == "array":
                self._array(attributes["ref"])
            self.totals.formulas += 1
            if self.totals.formulas > MAX_FORMULAS:
                raise BookRefused(f"The workbook holds more than {MAX_FORMULAS:,} formulas.".replace(",", " "))
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
                raise BookRefused(STRICT_TEXT)
            if name != f"{MAIN} worksheet":
                raise BookRefused(f"The file is a damaged workbook: the sheet {shown(self.name)} is not one.")

    def _cell(self, reference: str | None) -> None:
        self.cells += 1
        if self.totals.cells + self.cells > MAX_CELLS:
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
            raise BookRefused(f"The sheet {shown(self.name)} has a cell called {shown(reference)}, which is no cell.")
        self._columns[letters] = column
        return column

    def _array(self, reference: str) -> None:
        area = rectangle(reference)
        if area is None:
            raise BookRefused(
                f"The sheet {shown(self.name)} has an array formula over {shown(reference)}, which is no range."
            )
        self.totals.arrays += (area[2] - area[0] + 1) * (area[3] - area[1] + 1)
        if self.totals.arrays > MAX_ARRAYS:
            raise BookRefused(
                f"The array formulas of the workbook cover far too many cells ({shown(reference)} and others)."
            )

    def _merge(self, reference: str) -> None:
        area = rectangle(reference)
        if area is None:
            raise BookRefused(f"The sheet {shown(self.name)} merges {shown(reference)}, which is no range.")
        self.merges += 1
        self.totals.merged += (area[2] - area[0] + 1) * (area[3] - area[1] + 1)
        if self.totals.merged > MAX_MERGED or self.merges > MAX_MERGES:
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
                    f"The sheet {shown(self.name)} has a cell far from the others, at row {self.last_row} or column"
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
