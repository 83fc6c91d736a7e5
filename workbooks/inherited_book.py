"""Plain workbooks as other people write them: formulas with stored values, no function of ours, their own looks."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from io import BytesIO
from pathlib import Path
from typing import Any


@dataclass(frozen=True)
class Sheet:
    """One worksheet: ``rows`` from the top, None for a blank cell, texts that begin with = are formulas.

    ``shown`` are number formats by cell, ``heads`` the rows (counted from 1) set as headings.
    """

    name: str
    rows: tuple[Sequence[Any], ...]
    widths: tuple[float, ...]
    shown: Mapping[str, str] = field(default_factory=dict)
    heads: tuple[int, ...] = ()


@dataclass(frozen=True)
class Inherited:
    """A workbook in somebody else's look; ``slips`` are cell and cause of what is wrong in it, for the tests."""

    sheets: tuple[Sheet, ...]
    slips: tuple[tuple[str, str], ...]
    font: str = "Arial"
    size: float = 10
    head: Mapping[str, Any] = field(default_factory=lambda: {"bold": True})


def write_inherited(book: Inherited, path: str | Path) -> None:
    """Write the workbook with the values that its formulas have."""
    raw = BytesIO()
    _write(book, raw, {})
    _write(book, path, _calculated(book, raw.getvalue()))


def _calculated(book: Inherited, data: bytes) -> dict[tuple[str, int, int], Any]:
    """The value of every formula."""
    import formualizer as fz

    engine = fz.Workbook.from_bytes(data)
    engine.evaluate_all()
    found = {}
    for sheet in book.sheets:
        for row, cells in enumerate(sheet.rows):
            for column, value in enumerate(cells):
                if _is_formula(value):
                    number = engine.evaluate_cell(sheet.name, row + 1, column + 1)
                    if not isinstance(number, int | float):
                        raise ValueError(f"{sheet.name} row {row + 1}, column {column + 1}: {value} gives {number}")
                    found[sheet.name, row, column] = number
    return found


def _is_formula(value: Any) -> bool:
    return isinstance(value, str) and value.startswith("=")


def _write(book: Inherited, target: Any, values: Mapping[tuple[str, int, int], Any]) -> None:
    import datetime as dt

    import xlsxwriter
    from xlsxwriter.utility import xl_rowcol_to_cell

    out = xlsxwriter.Workbook(target if isinstance(target, BytesIO) else str(target))
    out.set_properties({"title": book.sheets[0].rows[0][0], "created": dt.datetime(2026, 1, 1)})
    base = {"font_name": book.font, "font_size": book.size}
    formats: dict[tuple[Any, ...], Any] = {}

    def style(**options: Any) -> Any:
        key = tuple(sorted(options.items()))
        if key not in formats:
            formats[key] = out.add_format(base | options)
        return formats[key]

    for sheet in book.sheets:
        page = out.add_worksheet(sheet.name)
        for column, width in enumerate(sheet.widths):
            page.set_column(column, column, width)
        for row, cells in enumerate(sheet.rows):
            for column, value in enumerate(cells):
                options = {"bold": True} if row == 0 else dict(book.head) if row + 1 in sheet.heads else {}
                if isinstance(value, str) and column and not _is_formula(value):
                    options["indent"] = 1
                if value is not None or row + 1 in sheet.heads:
                    place = xl_rowcol_to_cell(row, column)
                    if place in sheet.shown:
                        options["num_format"] = sheet.shown[place]
                    if _is_formula(value):
                        stored = values.get((sheet.name, row, column), 0)
                        page.write_formula(row, column, value, style(**options), stored)
                    else:
                        page.write(row, column, value, style(**options))
        page.set_paper(9)
        page.fit_to_pages(1, 0)
    out.close()
