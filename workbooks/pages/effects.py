"""The effect table of a case: what leaving out each term does to several answers, one formula a cell."""

from dataclasses import dataclass
from typing import Any

from cellfuncs.sheets.inks import SHARES
from cellfuncs.terms import TERMS
from cellfuncs.terms.table import ALL_LEFT_OUT
from pages.page import HEAD_ROWS, Page

LEADING = ("advection", "conduction across")
_NAME = "Effects"
# changes in kelvins, in watts and the like; what would show as 0.0 is 0
_LARGE = '[>=0.05]+#,##0.0;[<=-0.05]-#,##0.0;"0"'
_CHANGE = '[>=0.001]+#,##0.0##;[<=-0.001]-#,##0.0##;"0"'


@dataclass(frozen=True)
class Effects:
    """``answers`` are answer and unit of its change; ``limits`` term, row varied, its unit, level, answer."""

    question: str
    answers: tuple[tuple[str, str], ...]
    limits: tuple[tuple[str, str, str, str, str], ...] = ()
    remarks: tuple[str, ...] = ()

    def __call__(self, book: Any, block: str) -> tuple[str, str, str]:
        """Write the page; what, where and what it says, for the contents."""
        widths = [38] + [13, 15, 13] * len(self.answers)
        page = Page(book, _NAME, "What leaving out a term does to the answers", self.question, widths)
        last = self._table(page, block)
        last = self._limits(page, block, last + 2)
        for k, remark in enumerate(self.remarks):
            page.sheet.write(last + 1 + k, 0, remark, page.look.quiet())
        return "Effects", f"{_NAME}!A1", "what leaving out a term does to several answers"

    def _table(self, page: Page, block: str) -> int:
        from xlsxwriter.utility import xl_col_to_name

        top = HEAD_ROWS + 1
        head, look, sheet = top + 1, page.look, page.sheet
        sheet.write(top, 0, "answer", look.quiet())
        page.heading(head, ("term left out",))
        sheet.set_row(head, 30)
        terms = [term for term in TERMS if term not in LEADING] + [ALL_LEFT_OUT]
        for k, (answer, unit) in enumerate(self.answers):
            column = 1 + 3 * k
            sheet.write(top, column, answer, look.style(bold=True))
            page.heading(head, (f"change [{unit}]", "over its base", "  verdict"), column, left=(2,))
            letter, over = xl_col_to_name(column), xl_col_to_name(column + 1)
            asked = f'CF_VARY({block},"answer",${letter}${top + 1})'
            for row, term in enumerate(terms, start=head + 1):
                sheet.write(row, 0, term, look.label(bold=term == ALL_LEFT_OUT))
                at = row + 1
                change = f'=IF(ISNUMBER({over}{at}),CF_WITHOUT({block}_values,$A{at},${letter}${top + 1},"{unit}"),"–")'
                shown = look.label(num_format=_CHANGE if unit == "K" else _LARGE, align="right")
                if term != ALL_LEFT_OUT:
                    sheet.write_formula(
                        row, column, change, look.label(num_format=_CHANGE if unit == "K" else _LARGE, align="right")
                    )
                else:
                    sheet.write_blank(row, column, None, look.label())
                for j, (measure, shown) in enumerate((("effect", SHARES), ("verdict", "General")), start=1):
                    side = {"align": "right"} if j == 1 else {"align": "left", "indent": 1}
                    formula = f'=CF_TERM({asked},$A{at},"{measure}")'
                    sheet.write_formula(row, column + j, formula, look.label(num_format=shown, **side))
        last = head + len(terms)
        area = f"A{head + 2}:{xl_col_to_name(3 * len(self.answers))}{last + 8}"
        page.faults(area, weights=area)
        return last

    def _limits(self, page: Page, block: str, row: int) -> int:
        if not self.limits:
            return row
        page.heading(row, ("Where the effect reaches a size", "level", "", "at", "unit"), left=(0, 4))
        for k, (term, vary, unit, level, answer) in enumerate(self.limits, start=1):
            at, look = row + k, page.look
            page.sheet.write(at, 0, f"{term}, on the {answer}", look.label())
            page.sheet.write(at, 1, level, look.entry(align="right"))
            page.sheet.write(at, 2, vary, look.label(align="right"))
            page.sheet.write(at, 4, unit, look.label())
            formula = (
                f'=CF_TERM_LIMIT(CF_VARY({block}_values,"answer","{answer}"),"{term}","{vary}",$B{at + 1},"{unit}")'
            )
            page.sheet.write_formula(at, 3, formula, look.label(num_format="0.0##", align="right"))
        return row + len(self.limits) + 1
