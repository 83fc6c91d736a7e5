"""Many cases side by side: labels and units once, a column a case, one formula a cell through CF_BLOCK."""

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from cellfuncs.sheets.inks import CAUTION, SHARES
from cellfuncs.sheets.look import Look

_TOP = 7  # first row of the cases, counted from 1


@dataclass(frozen=True)
class ManyCases:
    """``rows`` are label, unit, a value for each case; ``results`` what, unit, format; ``terms`` those asked for."""

    title: str
    story: str
    names: tuple[str, ...]
    rows: tuple[tuple[str, str, tuple[Any, ...]], ...]
    results: tuple[tuple[str, str, str], ...]
    terms: tuple[str, ...]


def write_many(content: ManyCases, path: str | Path) -> None:
    """Write the workbook; its formulas have no values yet."""
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    book.set_properties({"title": content.title, "comments": CAUTION, "created": dt.datetime(2026, 1, 1)})
    look, sheet = Look(book), book.add_worksheet("Cases")
    last = xlsxwriter.utility.xl_col_to_name(1 + len(content.names))
    _head(sheet, look, content)
    bottom = _rows(sheet, look, content)
    end = _answers(sheet, look, content, bottom, xlsxwriter.utility.xl_col_to_name)
    sheet.write_formula(2, 1, f"=CF_FAULTS(A{_TOP}:{last}{end})", look.style(align="left"))
    sheet.freeze_panes(_TOP - 1, 2)
    sheet.hide_gridlines(2)
    sheet.set_landscape()
    sheet.set_paper(8)
    sheet.fit_to_pages(1, 1)
    sheet.print_area(0, 0, end, 1 + len(content.names))
    sheet.set_footer(f"&L&8{CAUTION}")
    book.close()


def _head(sheet: Any, look: Look, content: ManyCases) -> None:
    sheet.set_column(0, 0, 27)
    sheet.set_column(1, 1, 9)
    sheet.set_column(2, 1 + len(content.names), 11)
    sheet.set_row(0, 24)
    sheet.write(0, 0, content.title, look.title())
    sheet.write(1, 0, content.story, look.quiet())
    sheet.write(2, 0, "Faults in this sheet", look.quiet())
    sheet.write(3, 0, CAUTION, look.quiet())
    sheet.write(_TOP - 2, 0, "Case", look.head())
    sheet.write(_TOP - 2, 1, "unit", look.head())
    for column, name in enumerate(content.names, start=2):
        sheet.write(_TOP - 2, column, name, look.head(align="right"))


def _rows(sheet: Any, look: Look, content: ManyCases) -> int:
    """The inputs; the number of their last row, counted from 1."""
    for k, (label, unit, values) in enumerate(content.rows):
        at = _TOP - 1 + k
        sheet.write(at, 0, label, look.label())
        sheet.write(at, 1, unit, look.label())
        for column, value in enumerate(values, start=2):
            sheet.write(at, column, value, look.entry(ruled=column == 2, align="right", indent=0, shrink=True))
    return _TOP - 1 + len(content.rows)


def _answers(sheet: Any, look: Look, content: ManyCases, bottom: int, column_name: Any) -> int:
    """One formula a cell under each case; the number of the last row."""
    asked: list[tuple[str, str, str, str]] = [
        (f"{what}", unit, f'CF_CASE({{block}},"{what}"' + (f',"{unit}")' if unit else ")"), shown)
        for what, unit, shown in content.results
    ]
    for term in content.terms:
        asked.append((f"{term}, share", "", f'CF_TERM({{block}},"{term}")', SHARES))
        asked.append((f"{term}, verdict", "", f'CF_TERM({{block}},"{term}","verdict")', "General"))
    for k, (words, unit, formula, shown) in enumerate(asked):
        at = bottom + 1 + k
        sheet.write(at, 0, words, look.label())
        sheet.write(at, 1, unit, look.label())
        for column in range(2, 2 + len(content.names)):
            name = column_name(column)
            block = f"CF_BLOCK($A${_TOP}:$A${bottom},{name}${_TOP}:{name}${bottom},$B${_TOP}:$B${bottom})"
            style = look.label(num_format=shown, align="right")
            sheet.write_formula(at, column, "=" + formula.format(block=block), style)
    _verdict_weights(sheet, look, bottom + 2, bottom + 1 + len(asked), column_name(1 + len(content.names)))
    return bottom + 1 + len(asked)


def _verdict_weights(sheet: Any, look: Look, first: int, last: int, column: str) -> None:
    """Verdicts by word and weight, faults bold."""
    rules: Sequence[tuple[str, dict[str, Any]]] = (("keep", {"bold": True}), ("leave out", {"font_color": "#7A858C"}))
    for word, style in rules:
        rule = {"type": "cell", "criteria": "==", "value": f'"{word}"', "format": look.book.add_format(style)}
        sheet.conditional_format(f"C{first}:{column}{last}", rule)
    bold = {"type": "text", "criteria": "begins with", "value": "! ", "format": look.book.add_format({"bold": True})}
    sheet.conditional_format(f"C{first}:{column}{last}", bold)
