"""Names of our functions that the office did not resolve when it read a file.

A file from elsewhere (an .xlsx, or an .ods saved without the extension) names a function CF_X, and the office
leaves it unresolved: the stored value shows until something changes, then #NAME?. When a name of the workbook
appears or goes, the office resolves every unresolved name anew, on protected sheets and in arrays as well.
"""

import re

VALUE, TEXT, ERROR = 1, 2, 4  # com.sun.star.sheet.FormulaResult
ROWS_AT_ONCE = 20_000
OWN_FORMATS = ("calc8", "StarOffice XML (Calc)", "OpenDocument Spreadsheet Flat XML")
PASSING_NAME = "cellfuncs_resolves_its_functions"
# Resolved, the name of the service stands before it, with a dot between.
UNRESOLVED = re.compile(r"(?<![\w.])cf_[a-z0-9_]+\s*\(", re.IGNORECASE)
IN_QUOTES = re.compile('"[^"]*"')


def repair(document: object) -> bool:
    """Resolve what names our functions in a document that was opened; whether there was anything."""
    if not hasattr(document, "NamedRanges") or not any(_unresolved(sheet, document) for sheet in document.Sheets):
        return False
    modified = document.isModified()
    undo = document.UndoManager
    undo.lock()
    try:
        _resolve(document)
    finally:
        undo.unlock()
    if not modified:
        _unmodified(document)
    return True


def _unmodified(document: object) -> None:
    """Opening a file is no change of it; charts count as changed because their cells are calculated anew."""
    document.setModified(False)
    if document.isModified():
        for sheet in document.Sheets:
            for name in sheet.Charts.ElementNames:
                sheet.Charts.getByName(name).EmbeddedObject.setModified(False)


def _resolve(document: object) -> None:
    from com.sun.star.table import CellAddress

    names = document.NamedRanges
    if not names.hasByName(PASSING_NAME):
        names.addNewByName(PASSING_NAME, "0", CellAddress(), 0)
    names.removeByName(PASSING_NAME)


def _unresolved(sheet: object, document: object) -> bool:
    # In the office's own files an unresolved name shows as an error at once; elsewhere a stored value hides it.
    own = any(part.Name == "FilterName" and part.Value in OWN_FORMATS for part in document.Args)
    for area in sheet.queryFormulaCells(ERROR if own else VALUE | TEXT | ERROR).RangeAddresses:
        for top in range(area.StartRow, area.EndRow + 1, ROWS_AT_ONCE):
            bottom = min(area.EndRow, top + ROWS_AT_ONCE - 1)
            cells = sheet.getCellRangeByPosition(area.StartColumn, top, area.EndColumn, bottom)
            if any(names_ours(formula) for row in cells.FormulaArray for formula in row):
                return True
    return False


def names_ours(formula: str) -> bool:
    """Whether a formula calls one of our functions by a name that is not resolved."""
    return "cf_" in formula.lower() and UNRESOLVED.search(IN_QUOTES.sub('""', formula)) is not None
