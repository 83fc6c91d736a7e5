"""A number of a sheet with what stands around it, before it is settled which quantity it is."""

from __future__ import annotations

from dataclasses import dataclass

from cellfuncs.sheets.inherited.page import Spot


@dataclass(slots=True)
class Found:
    """A number and its surroundings.

    ``names`` are the texts that may be its label, the likeliest first, ``units`` likewise. ``value`` is the number as
    shown in the unit (stored numbers are scaled where the format scales). ``block`` is where its label stands: the
    label's column, or the head row of its table as a negative number. ``lane`` is the column or row that makes a case
    of its own, or None; ``heads`` are texts over it: heading of the section, head of the column.
    """

    spot: Spot
    value: float
    names: tuple[str, ...]
    units: tuple[str, ...] = ()
    written_label: str = ""
    block: int = 0
    lane: int | None = None
    section: str = ""
    section_row: int = 0
    head: str = ""
    in_text: bool = False
