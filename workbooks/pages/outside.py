"""The outside of an insulated pipe: wind, still air, both, and radiation, one column each through CF_BLOCK."""

from dataclasses import dataclass
from typing import Any

from cellfuncs.sheets.inks import INK, LINE, RULE
from pages.page import HEAD_ROWS, Page

_NAME = "Outside"
_TOP = HEAD_ROWS + 1
_FIRST = _TOP + 2  # first row of the blocks, counted from 1
_CASES = ("wind alone", "still air", "wind and buoyancy")
_LETTERS = "CDE"  # their columns
_SKIPPED = {"wind alone": ("surface", "direction"), "still air": ("direction", "velocity"), "wind and buoyancy": ()}
_FLOWS = {"wind alone": "cylinder", "still air": "free", "wind and buoyancy": "mixed"}


@dataclass(frozen=True)
class Outside:
    """``rows`` are label, unit and value or formula of the jacket; ``winds`` the speeds of the sweep [m/s]."""

    rows: tuple[tuple[str, str, Any], ...]
    winds: tuple[float, ...]
    remarks: tuple[str, ...]

    @property
    def coefficient_cell(self) -> str:
        """Where the coefficient of wind, buoyancy and radiation together stands."""
        return f"{_NAME}!$E${self.last + 5}"

    @property
    def last(self) -> int:
        """The last row of the blocks, counted from 1."""
        return _FIRST + len(self.rows)

    def __call__(self, book: Any, block: str) -> tuple[str, str, str]:
        """Write the page; what, where and what it says, for the contents."""
        story = "The jacket of the insulation gives its heat to wind, by buoyancy and by radiation to a cold sky."
        page = Page(book, _NAME, "Outside the insulation", story, (34, 11, 18, 18, 18, 18), landscape=False)
        self._blocks(page)
        self._results(page)
        end = self._sweep(page)
        for k, remark in enumerate(self.remarks):
            page.sheet.write(end + 1 + k, 0, remark, page.look.quiet())
        page.faults(f"A{_TOP + 1}:E{end + 1}", weights=f"C{self.last + 1}:E{self.last + 10}")
        self._chart(page, end + 2 + len(self.remarks))
        return _NAME, f"{_NAME}!A1", "the coefficient outside: wind, buoyancy, radiation"

    def _blocks(self, page: Page) -> None:
        sheet, look = page.sheet, page.look
        page.heading(_TOP, ("Jacket", "unit", *_CASES), left=(0, 1))
        for k, (label, unit, value) in enumerate((("flow kind", "", None), *self.rows)):
            at = _TOP + 1 + k
            sheet.write(at, 0, label, look.label())
            sheet.write(at, 1, unit, look.label())
            for column, case in enumerate(_CASES, start=2):
                given = _FLOWS[case] if label == "flow kind" else None if label in _SKIPPED[case] else value
                side = {"align": "right", "indent": 0}
                if isinstance(given, str) and given.startswith("="):
                    sheet.write_formula(at, column, given, look.label(num_format="0.0##", align="right"))
                elif column == 2 or label in ("flow kind", "surface", "direction", "velocity"):
                    sheet.write(at, column, given, look.entry(ruled=column == 2, **side))
                else:
                    sheet.write_formula(at, column, f"=$C{at + 1}", look.label(align="right"))

    def block(self, letter: str) -> str:
        """The case block of a column."""
        a, z = _FIRST, self.last
        return f"CF_BLOCK($A${a}:$A${z},{letter}${a}:{letter}${z},$B${a}:$B${z})"

    def _results(self, page: Page) -> None:
        asked = (
            ("convection", "W/m2K", "0.0", 'CF_CASE({b},"coefficient","W/m2K")'),
            ("radiation", "W/m2K", "0.0", '-CF_WITHOUT({b},"wall radiation","coefficient","W/m2K")'),
            ("convection and radiation", "W/m2K", "0.0", "{c}{n}"),
            ("jacket temperature", "degC", "0.0", None),
            ("heat loss", "W", "#,##0", None),
            ("radiation may be", "", "General", 'CF_TERM({b},"wall radiation","verdict")'),
        )
        sheet, look, top = page.sheet, page.look, self.last + 1
        page.heading(top, ("What follows from it", "unit", *_CASES), left=(0, 1))
        quantity = {
            "jacket temperature": '=CF_CASE({b},"wall temperature","degC")'
            '-CF_WITHOUT({b},"wall radiation","wall temperature","K")',
            "heat loss": '=CF_CASE({b},"duty","W")-CF_WITHOUT({b},"wall radiation","duty","W")',
        }
        for k, (what, unit, shown, formula) in enumerate(asked, start=1):
            at = top + k
            sheet.write(at, 0, what, look.label(bold=k == 3))
            sheet.write(at, 1, unit, look.label())
            for letter in _LETTERS:
                text = quantity[what] if formula is None else f"={formula}"
                if k == 3:
                    text = f"={letter}{top + 2}+{letter}{top + 3}"
                text = text.format(b=self.block(letter))
                sheet.write_formula(f"{letter}{at + 1}", text, look.label(num_format=shown, align="right", bold=k == 3))

    def _sweep(self, page: Page) -> int:
        sheet, look, top = page.sheet, page.look, self.last + 10
        page.heading(
            top, ("wind [m/s], the last column varied", "", "convection", "radiation", "both", "heat loss [W]")
        )
        for k, wind in enumerate(self.winds, start=1):
            at = top + k
            varied = f'CF_VARY({self.block("E")},"velocity",$A{at + 1},"m/s")'
            sheet.write(at, 0, wind, look.entry(align="right"))
            sheet.write_blank(at, 1, None, look.label())
            style = look.label(num_format="0.0", align="right")
            sheet.write_formula(at, 2, f'=CF_CASE({varied},"coefficient","W/m2K")', style)
            radiation = f'=-CF_WITHOUT({varied},"wall radiation","coefficient","W/m2K")'
            sheet.write_formula(at, 3, radiation, style)
            sheet.write_formula(at, 4, f"=C{at + 1}+D{at + 1}", style)
            loss = f'=CF_CASE({varied},"duty","W")-CF_WITHOUT({varied},"wall radiation","duty","W")'
            sheet.write_formula(at, 5, loss, look.label(num_format="#,##0", align="right"))
        return top + len(self.winds)

    def _chart(self, page: Page, row: int) -> None:
        chart = page.book.add_chart({"type": "scatter", "subtype": "straight_with_markers"})
        first = self.last + 11
        last = first + len(self.winds) - 1
        lines = (
            ("both", 4, RULE, "circle", 2.25),
            ("convection", 2, INK, "diamond", 1.0),
            ("radiation", 3, "#C46A1B", "square", 1.0),
        )
        for name, column, ink, shape, width in lines:
            chart.add_series(
                {
                    "name": name,
                    "categories": [_NAME, first, 0, last, 0],
                    "values": [_NAME, first, column, last, column],
                    "line": {"color": ink, "width": width},
                    "marker": {"type": shape, "size": 5, "fill": {"color": ink}, "border": {"color": ink}},
                }
            )
        still = {
            "name": "still air, with radiation",
            "categories": [_NAME, first, 0, first, 0],
            "values": [_NAME, self.last + 4, 3, self.last + 4, 3],
            "marker": {"type": "x", "size": 9, "border": {"color": INK, "width": 1.75}, "fill": {"none": True}},
            "line": {"none": True},
        }
        chart.add_series(still)
        font = {"color": INK, "size": 9}
        grid = {"visible": True, "line": {"color": LINE}}
        name_font = {"size": 9, "bold": False}
        x = {"name": "wind [m/s]", "log_base": 10, "min": 0.1, "max": 20, "crossing": 0.1, "num_format": "General"}
        y = {
            "name": "coefficient outside [W/m2K]",
            "log_base": 10,
            "min": 1,
            "max": 100,
            "crossing": 1,
            "num_format": "0",
        }
        for axis, options in ((chart.set_x_axis, x), (chart.set_y_axis, y)):
            axis(options | {"num_font": font, "name_font": name_font, "major_gridlines": grid, "line": {"color": INK}})
        chart.set_title({"none": True})
        chart.set_legend({"position": "right", "font": font})
        chart.set_size({"width": 800, "height": 340})
        page.sheet.insert_chart(row, 0, chart, {"x_offset": 4, "y_offset": 4})
        page.sheet.print_area(0, 0, row + 18, 5)
