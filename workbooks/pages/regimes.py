"""A map of a term's verdict over two rows of a case: CF_TERM on CF_VARY, one formula a cell, and a scatter chart."""

from dataclasses import dataclass
from typing import Any

from xlsxwriter.utility import xl_col_to_name, xl_rowcol_to_cell

from cellfuncs.sheets.inks import GREY, INK, LINE, RULE, SHARES
from pages.page import HEAD_ROWS, Page

_TOP = HEAD_ROWS + 1
_ROW_X, _ROW_Y, _ROW_TERM = _TOP + 2, _TOP + 3, _TOP + 4  # rows of the inputs as formulas count
_PALE = "#BFA8D6"
# verdict -> marker of its points: by shape and weight as well as by ink
_MARKERS = (
    ("keep", {"type": "circle", "size": 9, "fill": {"color": RULE}, "border": {"color": RULE}}),
    ("borderline", {"type": "diamond", "size": 9, "fill": {"color": _PALE}, "border": {"color": RULE}}),
    ("leave out", {"type": "square", "size": 4, "fill": {"color": GREY}, "border": {"color": GREY}}),
)


@dataclass(frozen=True)
class RegimeMap:
    """``x`` and ``y`` are label, unit, places; ``answer`` the one that counts, "" for the block's own."""

    term: str
    x: tuple[str, str, tuple[float, ...]]
    y: tuple[str, str, tuple[float, ...]]
    answer: str = ""
    name: str = "Map"

    def __call__(self, book: Any, block: str) -> tuple[str, str, str]:
        """Write the page; what, where and what it says, for the contents."""
        title = f"Map: may {self.term} be left out" + (f" of the {self.answer}?" if self.answer else "?")
        story = "Every cell is the case with two rows changed; the rows and their places may be changed too."
        columns = max(1 + len(self.x[2]), 5)
        widths = [18] + [11] * (columns - 1) + [4] + [9] * 5
        page = Page(book, self.name, title, story, widths, landscape=False)
        last = self._inputs(page, block)
        effect = self._matrix(page, block, last + 3, "effect", None)
        verdict = self._matrix(page, block, effect + 3, "verdict", last + 3)
        self._points(page, last + 3, effect + 3, columns + 1)
        area = f"A{HEAD_ROWS + 2}:{xl_col_to_name(columns - 1)}{verdict + 1}"
        page.faults(area, weights=area)
        self._chart(page, verdict + 1, last + 4, columns + 1)
        page.sheet.print_area(0, 0, verdict + 25, columns - 1)
        return (
            self.name,
            f"'{self.name}'!A1",
            f"where {self.term} may be left out" + (f" of the {self.answer}" if self.answer else ""),
        )

    def _inputs(self, page: Page, block: str) -> int:
        """Term and axes; the case's own place on them."""
        top, look, sheet = _TOP, page.look, page.sheet
        page.heading(top, ("", "row", "", "unit", "the case"), left=(0, 1, 3))
        for k, (word, axis) in enumerate((("across", self.x), ("upward", self.y)), start=1):
            at = top + k
            sheet.write(at, 0, word, look.label())
            sheet.write(at, 1, axis[0], look.entry())
            sheet.write_blank(at, 2, None, look.entry(ruled=False))
            sheet.write(at, 3, axis[1], look.entry(ruled=False))
            sheet.write_formula(at, 4, f"=CF_CASE({block},$B{at + 1},$D{at + 1})", look.label(align="right"))
        sheet.write(top + 3, 0, "term", look.label())
        sheet.write(top + 3, 1, self.term, look.entry())
        sheet.write_blank(top + 3, 2, None, look.entry(ruled=False))
        return top + 3

    def _matrix(self, page: Page, block: str, top: int, measure: str, places_at: int | None) -> int:
        """One measure at every place: x in the head, y at the left, the largest on top as in the chart."""
        look, sheet = page.look, page.sheet
        over = "Effect over its base" if measure == "effect" else "Verdict"
        caption = f"{over}: {self.x[0]} [{self.x[1]}] across, {self.y[0]} [{self.y[1]}] at the left"
        sheet.write(top - 1, 0, caption, look.style(bold=True))
        sheet.write(top, 0, "", look.head())
        for k, place in enumerate(self.x[2], start=1):
            if places_at is None:
                sheet.write(top, k, place, look.entry(ruled=k == 1, align="right", bold=True))
            else:
                sheet.write_formula(top, k, f"={xl_rowcol_to_cell(places_at, k)}", look.head(align="right"))
        # without ±, which would be sampled at every place
        asked = f'CF_VARY({block}_values,"answer","{self.answer}")' if self.answer else f"{block}_values"
        for j, place in enumerate(reversed(self.y[2]), start=1):
            row = top + j
            if places_at is None:
                sheet.write(row, 0, place, look.entry(align="right"))
            else:
                sheet.write_formula(row, 0, f"={xl_rowcol_to_cell(places_at + j, 0)}", look.label(align="right"))
            for k in range(1, len(self.x[2]) + 1):
                x = xl_rowcol_to_cell(top, k, row_abs=True)
                varied = f"CF_VARY({asked},$B${_ROW_X},{x},$D${_ROW_X})"
                varied = f"CF_VARY({varied},$B${_ROW_Y},$A{row + 1},$D${_ROW_Y})"
                formula = f'=CF_TERM({varied},$B${_ROW_TERM},"{measure}")'
                shown = SHARES if measure == "effect" else "General"
                sheet.write_formula(row, k, formula, look.label(num_format=shown, align="right"))
        return top + len(self.y[2])

    def _points(self, page: Page, effect: int, verdict: int, column: int) -> None:
        """A row for each point, y in the column of its verdict and #N/A in the others: for the chart."""
        look, sheet = page.look, page.sheet
        sheet.write(effect - 1, column, "for the chart", look.quiet())
        words = [self.x[0], *(word for word, _ in _MARKERS)]
        for k, word in enumerate(words):
            sheet.write(effect, column + k, word, look.quiet(align="right", bottom=1, bottom_color=INK))
        row = effect
        for k in range(1, len(self.x[2]) + 1):
            for j in range(1, len(self.y[2]) + 1):
                row += 1
                quiet = look.quiet(align="right")
                sheet.write_formula(row, column, f"={xl_rowcol_to_cell(effect, k)}", quiet)
                cell, y = xl_rowcol_to_cell(verdict + j, k), xl_rowcol_to_cell(effect + j, 0)
                for m, (word, _) in enumerate(_MARKERS, start=1):
                    sheet.write_formula(row, column + m, f'=IF({cell}="{word}",{y},NA())', quiet)

    def _chart(self, page: Page, row: int, first: int, column: int) -> None:
        last = first + len(self.x[2]) * len(self.y[2]) - 1
        chart = page.book.add_chart({"type": "scatter"})
        for m, (word, marker) in enumerate(_MARKERS, start=1):
            chart.add_series(
                {
                    "name": word,
                    "categories": [self.name, first, column, last, column],
                    "values": [self.name, first, column + m, last, column + m],
                    "marker": marker,
                }
            )
        own = {"type": "x", "size": 12, "border": {"color": INK, "width": 2.25}, "fill": {"none": True}}
        chart.add_series(
            {
                "name": "the case",
                "categories": [self.name, _ROW_X - 1, 4, _ROW_X - 1, 4],
                "values": [self.name, _ROW_Y - 1, 4, _ROW_Y - 1, 4],
                "marker": own,
            }
        )
        font = {"color": INK, "size": 9}
        for axis, (label, unit, places) in ((chart.set_x_axis, self.x), (chart.set_y_axis, self.y)):
            axis(
                {
                    "log_base": 10, "min": _below(min(places)), "max": _above(max(places)), "num_font": font,
                    "crossing": _below(min(places)), "num_format": "General", "name": f"{label} [{unit}]",
                    "name_font": {"size": 9, "bold": False, "color": INK},
                    "major_gridlines": {"visible": True, "line": {"color": LINE}}, "line": {"color": INK},
                }
            )  # fmt: skip
        chart.set_title({"none": True})
        chart.set_legend({"position": "right", "font": font})
        chart.set_size({"width": 690, "height": 420})
        page.sheet.insert_chart(row + 1, 0, chart, {"x_offset": 4, "y_offset": 4})


def _below(value: float) -> float:
    """The largest 1, 2 or 5 times a power of ten that is below a place with some room."""
    return _round(value / 1.25, up=False)


def _above(value: float) -> float:
    return _round(value * 1.25, up=True)


def _round(value: float, up: bool) -> float:
    import math

    power = 10.0 ** math.floor(math.log10(value))
    steps = [power * m for m in (1.0, 2.0, 5.0, 10.0)]
    if up:
        return next(s for s in steps if s >= value)
    return max(s for s in steps if s <= value)
