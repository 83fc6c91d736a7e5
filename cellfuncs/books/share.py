"""A copy for people who lack the functions: values in the place of the formulas that call them.

Each such formula is kept in a note on its cell; what finds no place in notes is listed on a sheet of its own.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import partial

from cellfuncs.books.added import add_sheet
from cellfuncs.books.engine import Evaluation
from cellfuncs.books.externals import absolute
from cellfuncs.books.formulas import IsOurs, normalised, reference
from cellfuncs.books.grid import Area, area_text
from cellfuncs.books.notes import Note, add_notes
from cellfuncs.books.parts import Draft
from cellfuncs.books.reading import Formula
from cellfuncs.books.rewrite import parts_with_formulas, rewritten
from cellfuncs.books.splice import set_values

# A thousand notes open in 3 s in an office program, five thousand in 11 s, twenty thousand in 90 s.
MAX_NOTES = 1000

_SPILL = re.compile(r"(?:_xlfn\.)?ANCHORARRAY\(([^()\"]+)\)", re.IGNORECASE)

Spot = tuple[int, int]


@dataclass(frozen=True)
class Left:
    """A formula that is listed because there was no room for it in notes."""

    sheet: str
    place: str
    text: str


def share(result: Evaluation, draft: Draft, is_ours: IsOurs, author: str, list_name: str) -> list[str]:
    """Write the values of an evaluation into `draft`, without the formulas that call our functions.

    `author` stands for the notes, `list_name` names the sheet of those that are listed, where one is needed.
    Gives what a reader should be told, a line each.
    """
    said: list[str] = []
    left: list[Left] = []
    spills = _spills(result)
    for name, sheet in result.sheets.items():
        ours = {(f.row, f.column): f for f in result.ours.get(name, ())}
        extents = result.extents.get(name, {})
        formulas: dict[Spot, str | None] = dict.fromkeys(ours)
        formulas.update(_renewed(sheet.formulas, ours, spills, name))
        kept = {spot: extent for spot, extent in extents.items() if spot not in ours}
        draft.write(result.book.sheet(name).part, set_values(sheet, result.values.get(name, {}), kept, formulas))
    for name, formulas in result.ours.items():
        extents = result.extents.get(name, {})
        notes = [Note(f.row, f.column, _note(f, extents.get((f.row, f.column), f.area))) for f in formulas]
        over = notes[MAX_NOTES:] + add_notes(draft, result.book.sheet(name).part, notes[:MAX_NOTES], author)
        left += [
            Left(name, area_text((note.row, note.column) * 2), note.text.replace("\n", ", ")) for note in sorted(over)
        ]
    if left:
        said.append(_listed(draft, left, list_name))
    if result.ours:
        _without_chain(draft)
        said += _elsewhere(draft, is_ours, spills)
    return said


def _note(formula: Formula, area: Area) -> str:
    text = f"={formula.text}"
    if formula.kind == "fixed":
        text = f"{{{text}}}"
    return text if area[:2] == area[2:] else f"{text}\nfills {area_text(area)}"


# -- formulas that stay ----------------------------------------------------------------------------------


def _spills(result: Evaluation) -> dict[tuple[str, Spot], Area]:
    """The extents of our dynamic arrays, by sheet in small letters and anchor: fixed from now on."""
    return {
        (name.casefold(), (f.row, f.column)): result.extents.get(name, {}).get((f.row, f.column), f.area)
        for name, formulas in result.ours.items()
        for f in formulas
        if f.kind == "dynamic"
    }


def _renewed(
    formulas: Sequence[Formula], ours: dict[Spot, Formula], spills: dict[tuple[str, Spot], Area], sheet: str
) -> dict[Spot, str]:
    """The formulas that need another text: they name the extent of an array that is one no more, or they shared
    their text with a formula that goes."""
    new: dict[Spot, str] = {}
    groups: set[str] = {formula.shared for formula in ours.values() if formula.shared is not None}
    for formula in formulas:
        spot = (formula.row, formula.column)
        if spot not in ours and (text := _fixed(formula.text, spills, sheet)) != formula.text:
            new[spot] = text
            groups |= {formula.shared} - {None}
    for formula in formulas:
        spot = (formula.row, formula.column)
        if formula.shared in groups and spot not in ours:
            new.setdefault(spot, formula.text)
    return new


def _fixed(text: str, spills: dict[tuple[str, Spot], Area], sheet: str | None) -> str:
    """A formula with the extents of our arrays in the place of what names them by their first cell."""
    if not spills or "ANCHORARRAY(" not in text.upper():
        return text

    def area(match: re.Match[str]) -> str:
        found = reference(match[1].strip())
        place = found.sheet or sheet
        if found.kind != "cells" or place is None:
            return match[0]
        extent = spills.get((place.casefold(), found.area[:2]))
        if extent is None:
            return match[0]
        return absolute(place, extent) if found.sheet else absolute(place, extent).rpartition("!")[2]

    return _SPILL.sub(area, text)


def _elsewhere(draft: Draft, is_ours: IsOurs, spills: dict[tuple[str, Spot], Area]) -> list[str]:
    """Names, validations and formats: extents made fixed, and how many still call our functions."""
    calling = 0

    def change(text: str, sheet: str | None) -> str:
        nonlocal calling
        calling += bool(normalised(text, is_ours).ours)
        return _fixed(text, spills, sheet)

    for part, sheet in parts_with_formulas(draft.book):
        draft.write(part, rewritten(draft.read(part), partial(change, sheet=sheet), in_cells=False))
    if not calling:
        return []
    return [
        f"{calling} of the workbook's names, validations, conditional formats and table columns call our functions"
        " and stay as they are; they do nothing where the functions are missing."
    ]


def _without_chain(draft: Draft) -> None:
    """Take out the order of calculation, which names cells that hold no formula now; programs make it anew."""
    relation = draft.related(draft.book.part, "calcChain")
    if relation is not None:
        draft.drop(relation.target, draft.book.part)


# -- the list --------------------------------------------------------------------------------------------


def _listed(draft: Draft, left: Sequence[Left], name: str) -> str:
    rows = [("sheet", "cell", "formula"), *((row.sheet, row.place, row.text) for row in left)]
    wanted = add_sheet(draft, name, rows, (24, 10, 90))
    return f"{len(left)} formulas found no room in notes ({MAX_NOTES} a sheet); they are listed on the sheet {wanted}."
