"""The sheet of premises beside a case: one formula a cell, so that every stored value shows without Cellfuncs."""

from collections.abc import Callable
from typing import Any

from cellfuncs.sheets.inks import CAUTION, GREY, INK, LINE
from cellfuncs.terms.premises import COLUMNS, PREMISES

_SHOWN = ("premise", "figure", "limit", "state", "reason")
_FIRST = 5  # row of the first premise, counted from 1


def write_premises(sheet: Any, style: Callable[..., Any], block: str, title: str) -> None:
    """Write the premises of the case block that has the workbook name ``block``."""
    sheet.hide_gridlines(2)
    for column, width in enumerate((32, 12, 12, 13, 128)):
        sheet.set_column(column, column, width)
    sheet.set_row(0, 24)
    sheet.write(0, 0, f"{title}: what the calculation rests on", style(bold=True, font_size=16))
    sheet.write(1, 0, CAUTION, style(font_color=GREY, font_size=9))
    for column, word in enumerate(_SHOWN):
        align = "right" if word in ("figure", "limit") else "left"
        sheet.write(
            _FIRST - 2, column, word, style(bold=True, bottom=1, bottom_color=INK, align=align, indent=int(column > 0))
        )
    for k, name in enumerate(PREMISES):
        sheet.write(_FIRST - 1 + k, 0, name, style(bottom=4, bottom_color=LINE))
        for column, word in enumerate(_SHOWN[1:], start=1):
            number = word in ("figure", "limit")
            look = style(
                num_format="0.0##E+0" if number else "General",
                align="right" if number else "left",
                indent=1,
                bottom=4,
                bottom_color=LINE,
                font_size=9.5 if word == "reason" else 10.5,
            )
            place = f"{k + 2},{COLUMNS.index(word) + 1}"
            sheet.write_formula(_FIRST - 1 + k, column, f"=INDEX(CF_PREMISES({block}),{place})", look)
    sheet.set_landscape()
    sheet.set_paper(9)
    sheet.fit_to_pages(1, 1)
    sheet.set_footer(f"&L&8{CAUTION}")
