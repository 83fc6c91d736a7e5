"""The stored values of a file, put back into cells whose names have just been resolved.

Resolving makes a cell forget its value, and to calculate every cell while a file opens would make her wait for
the helper to start. So each cell is calculated once with the stored value as the answer of its function. This
only works where the formula is one call, or one cell of its table by INDEX, and where no other cell that still has
to be calculated is drawn in; the other cells are calculated when they are first looked at, as any cell is.
"""

import re
from collections import namedtuple

MOST_CELLS = 500  # more are calculated anew; finding what they depend on would take longer
MOST_LOOKED_AT = 200_000  # pairs of a cell and a range
OPENING = re.compile(r"=\s*cf_[a-z0-9_]+\s*\(", re.IGNORECASE)
ONE_OF_TABLE = re.compile(r"=\s*index\s*\((.*)[,;]\s*(\d{1,3})\s*[,;]\s*(\d{1,2})\s*\)\s*$", re.IGNORECASE)
IN_QUOTES = re.compile(r"\"[^\"]*\"|'[^']*'")

# place: (sheet, row, column), from 0; value: None where an error is stored
Cell = namedtuple("Cell", "place formula value")


def put_back(document: object, cells: list, helper: object) -> None:
    """Give the cells their stored values back where that is possible; `helper` answers with what it is told."""
    answers = {cell.place: answer_for(cell.formula, cell.value) for cell in cells if cell.value is not None}
    whole = {cell.place: cell.value for cell in cells if answers.get(cell.place) is not None}
    # Some programs store 0 in every cell because they do not calculate.
    if not any(whole.values()) or len(cells) > MOST_CELLS or not document.isAutomaticCalculationEnabled():
        return
    needs = _needs(document, [cell.place for cell in cells], whole)
    if needs is None:
        return
    order = sorted((place for place in needs if needs[place] <= set(whole)), key=lambda place: len(needs[place]))
    try:
        for place in order:
            helper.told = (answers[place],)
            _cell(document, place).getError()  # asks for the result, so it is calculated
    finally:
        helper.told = None
    if any(_cell(document, place).DataArray[0][0] != whole[place] for place in order):
        document.calculateAll()


def answer_for(formula: str, value: object) -> object:
    """What our function has to answer so that the cell shows a value; None where the formula is more than that."""
    if is_one_call(formula):
        return value
    picked = ONE_OF_TABLE.match(formula)
    if picked and is_one_call("=" + picked.group(1)):
        return [[value] * int(picked.group(3)) for _ in range(int(picked.group(2)))]
    return None


def is_one_call(formula: str) -> bool:
    """Whether a formula is one call of ours and nothing around it."""
    opening = OPENING.match(formula)
    if opening is None:
        return False
    depth = 0
    rest = IN_QUOTES.sub("", formula[opening.end() - 1 :])
    for k, sign in enumerate(rest):
        depth += (sign == "(") - (sign == ")")
        if depth == 0:
            return not rest[k + 1 :].strip()
    return False


def _needs(document: object, places: list, wanted: dict) -> "dict | None":
    """For each wanted cell, those of the cells whose values it uses, directly or not; None where it takes too long."""
    found, looked_at = {}, 0
    for place in wanted:
        used = set()
        for area in _cell(document, place).queryPrecedents(True).RangeAddresses:
            looked_at += len(places)
            if looked_at > MOST_LOOKED_AT:
                return None
            used.update(other for other in places if other != place and _inside(other, area))
        found[place] = used
    return found


def _inside(place: tuple, area: object) -> bool:
    sheet, row, column = place
    return sheet == area.Sheet and area.StartRow <= row <= area.EndRow and area.StartColumn <= column <= area.EndColumn


def _cell(document: object, place: tuple) -> object:
    sheet, row, column = place
    return document.Sheets.getByIndex(sheet).getCellByPosition(column, row)
