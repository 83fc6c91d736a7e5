"""Names of our functions that the office did not resolve when it read a file.

A file from elsewhere (an .xlsx, or an .ods saved without the extension) names a function CF_X, and the office
leaves it unresolved: the stored value shows until something changes, then #NAME?. When a name of the workbook
appears or goes, the office resolves every unresolved name anew, on protected sheets and in arrays as well.
"""

import re

from . import stored

VALUE, TEXT, ERROR = 1, 2, 4  # com.sun.star.sheet.FormulaResult
ROWS_AT_ONCE = 20_000
OWN_FORMATS = ("calc8", "StarOffice XML (Calc)", "OpenDocument Spreadsheet Flat XML")
PASSING_NAME = "cellfuncs_resolves_its_functions"
# Resolved, the name of the service stands before it, with a dot between.
UNRESOLVED = re.compile(r"(?<![\w.])cf_[a-z0-9_]+\s*\(", re.IGNORECASE)
IN_QUOTES = re.compile('"[^"]*"')


def repair(document: object, helper: object) -> bool:
    """Resolve what names our functions in a document that was opened; whether there was anything."""
    if not hasattr(document, "NamedRanges"):
        return False
    cells = _unresolved(document)
    if not cells:
        return False
    modified = document.isModified()
    undo = document.UndoManager
    undo.lock()
    try:
        _resolve(document)
        stored.put_back(document, cells, helper)
    finally:
        undo.unlock()
    if not modified:
        _unmodified(document)
    return True


def _resolve(document: object) -> None:
    from com.sun.star.table import CellAddress

    names = document.NamedRanges
    if not names.hasByName(PASSING_NAME):
        names.addNewByName(PASSING_NAME, "0", CellAddress(), 0)
    names.removeByName(PASSING_NAME)


def _unmodified(document: object) -> None:
    """Opening a file is no change of it; charts count as changed because their cells are calculated anew."""
    document.setModified(False)
    if document.isModified():
        for sheet in document.Sheets:
            for name in sheet.Charts.ElementNames:
                sheet.Charts.getByName(name).EmbeddedObject.setModified(False)


def _unresolved(document: object) -> list:
    """The cells that call ours by unresolved names, as stored.Cell; no more than one beyond what is put back."""
    # In the office's own files an unresolved name shows as an error at once; elsewhere a stored value hides it.
    own = any(part.Name == "FilterName" and part.Value in OWN_FORMATS for part in document.Args)
    found = []
    for index, sheet in enumerate(document.Sheets):
        for area in sheet.queryFormulaCells(ERROR if own else VALUE | TEXT | ERROR).RangeAddresses:
            for top in range(area.StartRow, area.EndRow + 1, ROWS_AT_ONCE):
                bottom = min(area.EndRow, top + ROWS_AT_ONCE - 1)
                cells = sheet.getCellRangeByPosition(area.StartColumn, top, area.EndColumn, bottom)
                found += _ours(cells, (index, top, area.StartColumn))
                if len(found) > stored.MOST_CELLS:
                    return found
    return found


def _ours(cells: object, corner: tuple) -> list:
    sheet, top, left = corner
    places = [
        (i, j, formula)
        for i, row in enumerate(cells.FormulaArray)
        for j, formula in enumerate(row)
        if names_ours(formula)
    ]
    values = cells.DataArray if places else ()
    return [stored.Cell((sheet, top + i, left + j), formula, values[i][j]) for i, j, formula in places]


def names_ours(formula: str) -> bool:
    """Whether a formula calls one of our functions by a name that is not resolved."""
    return "cf_" in formula.lower() and UNRESOLVED.search(IN_QUOTES.sub('""', formula)) is not None
