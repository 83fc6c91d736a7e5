"""What all these pages share: head with fault count, tables, print setting."""

from collections.abc import Sequence
from typing import Any

from cellfuncs.sheets.inks import CAUTION
from cellfuncs.sheets.look import Look

FAULTS_ROW = 1  # counted from 0
HEAD_ROWS = 5


class Page:
    """One worksheet with our head; rows and columns are counted from 0 as XlsxWriter does."""

    def __init__(self, book: Any, name: str, title: str, story: str, widths: Sequence[float], landscape: bool = True):
        self.look, self.sheet, self.name = Look(book), book.add_worksheet(name), name
        self.book = book
        sheet, look = self.sheet, self.look
        sheet.hide_gridlines(2)
        for column, width in enumerate(widths):
            sheet.set_column(column, column, width)
        sheet.set_row(0, 24)
        sheet.write(0, 0, title, look.title())
        sheet.write(FAULTS_ROW, 0, "Faults in this sheet", look.quiet())
        sheet.write(2, 0, story, look.quiet(italic=True))
        first, _, rest = CAUTION.partition(". ")
        sheet.write(3, 0, f"{first}.", look.quiet())
        sheet.write(4, 0, rest, look.quiet())
        if landscape:
            sheet.set_landscape()
        sheet.set_paper(9)
        sheet.fit_to_pages(1, 1)
        sheet.set_margins(0.5, 0.5, 0.6, 0.6)
        sheet.set_footer(f"&L&8{CAUTION}&R&8&P/&N")

    def heading(self, row: int, words: Sequence[str], column: int = 0, left: Sequence[int] = (0,)) -> None:
        """The head of a table; the columns ``left`` hold texts."""
        for k, word in enumerate(words):
            side = {"align": "left"} if k in left else {"align": "right"}
            self.sheet.write(row, column + k, word, self.look.head(text_wrap=True, **side))

    def faults(self, area: str, *, weights: str = "", column: int = 1) -> None:
        """The count of faults over an area, faults bold, and verdicts by weight where there are some."""
        self.sheet.write_formula(FAULTS_ROW, column, f"=CF_FAULTS({area})", self.look.style(align="left"))
        bold, grey = self.book.add_format({"bold": True}), self.book.add_format({"font_color": "#7A858C"})
        self.sheet.conditional_format(area, {"type": "text", "criteria": "begins with", "value": "! ", "format": bold})
        for word, look in (("keep", bold), ("leave out", grey)):
            if weights:
                rule = {"type": "cell", "criteria": "==", "value": f'"{word}"', "format": look}
                self.sheet.conditional_format(weights, rule)
