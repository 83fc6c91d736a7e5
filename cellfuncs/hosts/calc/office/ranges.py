"""The cells of a reference as rows, errors included."""

ERROR = 4  # com.sun.star.sheet.FormulaResult
MANY_ROWS = 10_000
# The office's numbers of errors; what it shows depends on its language.
NAMES = {
    503: "#NUM!",
    521: "#NULL!",
    524: "#REF!",
    525: "#NAME?",
    532: "#DIV/0!",
    32767: "#N/A",
}


def rows_of(cells: object) -> "list[list]":
    """Values of a range in rows: numbers, texts, "" where blank, and the name of the error in an error cell."""
    cells = _used(cells)
    rows = [list(row) for row in cells.DataArray]
    if any(cell is None for row in rows for cell in row):
        corner = cells.RangeAddress
        for area in cells.queryFormulaCells(ERROR).RangeAddresses:
            for i in range(area.StartRow - corner.StartRow, area.EndRow - corner.StartRow + 1):
                for j in range(area.StartColumn - corner.StartColumn, area.EndColumn - corner.StartColumn + 1):
                    rows[i][j] = NAMES.get(cells.getCellByPosition(j, i).getError(), "#VALUE!")
    return rows


def _used(cells: object) -> object:
    """A long range without the rows below the last used one of its sheet."""
    place = cells.RangeAddress
    if place.EndRow - place.StartRow < MANY_ROWS:
        return cells
    cursor = cells.Spreadsheet.createCursor()
    cursor.gotoEndOfUsedArea(False)
    last = max(place.StartRow, min(place.EndRow, cursor.RangeAddress.EndRow))
    return cells.getCellRangeByPosition(0, 0, place.EndColumn - place.StartColumn, last - place.StartRow)
