"""One sheet of ours: case block, what follows from it, term table, decision, chart. Written with XlsxWriter.

An input has a rule at its left and a light tint, computed cells are plain, faults bold; verdicts go by word and
weight. One formula a cell and no array formulas, so that whoever lacks Cellfuncs still sees the stored values.
"""

import datetime as dt
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from cellfuncs.cases import labels
from cellfuncs.sheets.inks import CAUTION, GREY, INK, LINE, RULE, SHARES, TINT
from cellfuncs.sheets.premises_sheet import write_premises
from cellfuncs.terms import COLUMNS, MEASURES, TERMS
from cellfuncs.terms.table import ALL_LEFT_OUT


@dataclass(frozen=True)
class CaseSheet:
    """What stands in the sheet.

    ``rows`` are label, value (or formula), unit, ±; ``results`` what, unit, number format; ``sweep`` the label that
    varies, its unit, its values, and the term whose share (or ``sweep_measure``) is shown. ``pages`` write further
    sheets into the book, given the block's workbook name (``{block}_values`` is the block without ±), and tell what
    stands there, where, and what it says.
    """

    title: str
    story: str
    block: str
    rows: tuple[tuple[Any, ...], ...]
    results: tuple[tuple[str, str, str], ...]
    question: str
    sweep: tuple[str, str, tuple[float, ...], str]
    spare: int = 4
    protected: bool = False
    sweep_measure: str = "share"
    pages: tuple[Callable[[Any, str], tuple[str, str, str]], ...] = ()


def write_book(sheet: CaseSheet, path: str | Path) -> None:
    """Write the workbook; its formulas have no values yet."""
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    _Writer(book, sheet).write()
    book.close()


class _Writer:
    """Writes the sheet; rows are counted from 0 as XlsxWriter does."""

    def __init__(self, book: Any, content: CaseSheet):
        self.book, self.content = book, content
        self.contents = book.add_worksheet("Contents")
        self.sheet = book.add_worksheet("Case")
        self.premises = book.add_worksheet("Premises")
        self.places: list[tuple[str, str, str]] = []
        self.formats: dict[tuple[Any, ...], Any] = {}

    def style(self, **options):
        key = tuple(sorted(options.items()))
        if key not in self.formats:
            base = {"font_name": "Calibri", "font_size": 10.5, "font_color": INK, "valign": "vcenter"}
            self.formats[key] = self.book.add_format(base | options)
        return self.formats[key]

    def entry(self, ruled: bool = True, **options):
        """An input cell: a rule at the left of the inputs of a row, and a light tint."""
        rule = {"left": 5, "left_color": RULE} if ruled else {}
        return self.style(bg_color=TINT, locked=False, bottom=4, bottom_color=LINE, **rule, **options)

    def write(self) -> None:
        sheet, content = self.sheet, self.content
        for column, width in enumerate((25, 29, 11, 14, 13, 66)):
            sheet.set_column(column, column, width)
        sheet.hide_gridlines(2)
        row = self._head()
        beside = row + len(self.content.results) + len(self.content.sweep[2]) + 5
        row = max(self._block(row), beside)
        self._terms(row)
        self._results(7)
        self._print()
        write_premises(self.premises, self.style, content.block, content.title)
        self.places.append(("Premises", "Premises!A1", "what the calculation rests on, safety first"))
        self.places.extend(page(self.book, content.block) for page in content.pages)
        self._contents()
        self.sheet.activate()
        if content.protected:
            for sheet in (self.sheet, self.premises):
                sheet.protect("", {"format_columns": True, "format_rows": True, "objects": True})
        about = {"title": content.title, "subject": "which terms matter", "comments": CAUTION}
        # a fixed date, so that the same content gives the same file
        self.book.set_properties(about | {"created": dt.datetime(2026, 1, 1)})

    def _offered(self) -> list[str]:
        """The labels that a block of this flow kind may have, for the lists in its spare rows."""
        flow = next(value for label, value, *_ in self.content.rows if label == "flow kind")
        entries = labels.dictionary().values()
        stated = [e for e in entries if e.role in ("stated", "choice", "text") and (not e.flows or flow in e.flows)]
        return [e.label for e in stated]

    def _contents(self) -> None:
        """The sheet that says what stands where."""
        sheet = self.contents
        sheet.hide_gridlines(2)
        for column, width in enumerate((26, 22, 60, 4, 4, 30)):
            sheet.set_column(column, column, width)
        sheet.set_row(0, 24)
        sheet.write(0, 0, self.content.title, self.style(bold=True, font_size=16))
        sheet.write(1, 0, self.content.story, self.style(font_color=GREY, italic=True))
        for column, word in ((0, "what"), (1, "where"), (2, "what it says"), (5, "labels a block may have")):
            sheet.write(2, column, word, self.style(bold=True, bottom=1, bottom_color=INK))
        order = {"Case block": 0, "What follows from it": 1, "Sweep": 2, "Term table": 3}
        places = sorted(self.places, key=lambda place: order.get(place[0], 9))
        for k, (what, where, says) in enumerate(places, start=3):
            target = where if "!" in where else f"Case!{where}"
            sheet.write_url(k, 0, f"internal:{target}", self.style(font_color=RULE), what)
            sheet.write(k, 1, where, self.style())
            sheet.write(k, 2, says, self.style())
        for k, label in enumerate(self._offered(), start=3):
            sheet.write(k, 5, label, self.style(font_color=GREY))
        notes = (
            "Tinted cells with a rule at their left are inputs; everything else follows from them.",
            "A text that begins with an exclamation mark is a fault and says what would do.",
            "A verdict goes by the effect where a solved model gives it, against the tolerance.",
            "Else it goes by the share: below a third of the tolerance leave out, above three times keep.",
            *(f"{sentence.rstrip('.')}." for sentence in CAUTION.split(". ")),
        )
        for k, note in enumerate(notes, start=5 + len(places)):
            sheet.write(k, 0, note, self.style(font_color=GREY, font_size=9))
        sheet.set_landscape()
        sheet.set_paper(9)
        sheet.fit_to_pages(1, 1)
        sheet.print_area(0, 0, 5 + len(places) + len(notes), 2)

    def _head(self) -> int:
        sheet, content = self.sheet, self.content
        sheet.set_row(0, 24)
        sheet.write(0, 0, content.title, self.style(bold=True, font_size=16))
        sheet.write(1, 0, content.story, self.style(font_color=GREY, italic=True))
        sheet.write(2, 0, "Faults in this sheet", self.style(font_color=GREY))
        self.faults_at = 2
        sheet.write(3, 0, "Cellfuncs", self.style(font_color=GREY))
        sheet.write_formula(3, 1, "=CF_VERSION()", self.style(font_color=GREY, align="left"))
        sheet.write(4, 0, CAUTION, self.style(font_color=GREY, font_size=9))
        return 6

    def _block(self, row: int) -> int:
        sheet, content = self.sheet, self.content
        self._heading(row, ("Case", "value", "unit", "±"))
        first = row + 1
        for k, (label, value, unit, spread) in enumerate(content.rows):
            at = first + k
            sheet.write(at, 0, label, self.style(bottom=4, bottom_color=LINE))
            text = isinstance(value, str)
            if text and value.startswith("="):
                computed = self.style(align="right", indent=1, num_format="0.0##", bottom=4, bottom_color=LINE)
                sheet.write_formula(at, 1, value, computed)
            else:
                sheet.write(at, 1, value, self.entry(align="left" if text else "right", indent=1))
            sheet.write(at, 2, unit, self.entry(ruled=False, align="left", indent=1))
            sheet.write(at, 3, spread, self.entry(ruled=False, align="right"))
            key = labels.find(label)
            if labels.dictionary()[key].role == "choice":
                sheet.data_validation(at, 1, at, 1, {"validate": "list", "source": list(labels.choices(key))})
        last = first + len(content.rows) + content.spare - 1
        for at in range(first + len(content.rows), last + 1):
            sheet.write_blank(at, 0, None, self.style(bottom=4, bottom_color=LINE, locked=False))
            offered = {"validate": "list", "source": f"=Contents!$F$4:$F${3 + len(self._offered())}"}
            sheet.data_validation(at, 0, at, 0, offered | {"error_type": "information", "ignore_blank": True})
            for column in range(1, 4):
                sheet.write_blank(at, column, None, self.entry(ruled=column == 1))
        self.places.append(("Case block", f"A{row + 1}", f"the workbook name {content.block}, with spare rows"))
        self.book.define_name(content.block, f"=Case!$A${first + 1}:$D${last + 1}")
        if content.pages:
            self.book.define_name(f"{content.block}_values", f"=Case!$A${first + 1}:$C${last + 1}")
        return last + 2

    def _heading(self, row: int, words: Sequence[str], column: int = 0) -> None:
        for k, word in enumerate(words):
            left = k in (0, 5) or word in ("unit", "verdict")
            look = {"align": "left" if left else "right", "indent": 0 if k == 0 else 1}
            self.sheet.write(row, column + k, word, self.style(bold=True, bottom=1, bottom_color=INK, **look))

    def _results(self, row: int) -> None:
        """Answers and characteristic numbers, right of the block: one formula a cell."""
        sheet, content = self.sheet, self.content
        top = row - 1
        self.places.append(("What follows from it", f"F{top + 1}", "properties, characteristic numbers, answers"))
        sheet.write(top, 5, "What follows from it", self.style(bold=True, bottom=1, bottom_color=INK, indent=2))
        for k, (what, unit, shown) in enumerate(content.results):
            name = f"{what} [{unit}]" if unit else what
            formula = f'=CF_CASE({content.block},"{what}"' + (f',"{unit}")' if unit else ")")
            sheet.write(row + k, 5, name, self.style(indent=2, bottom=4, bottom_color=LINE))
            sheet.write_formula(row + k, 6, formula, self.style(num_format=shown, bottom=4, bottom_color=LINE))
        sheet.write(top, 6, "value", self.style(bold=True, bottom=1, bottom_color=INK, align="right"))
        sheet.set_column(6, 6, 16)
        label, unit, values, term = content.sweep
        top = row + len(content.results) + 1
        self.places.append(("Sweep", f"F{top + 1}", f"one row varied, and the {content.sweep_measure} of {term}"))
        sheet.write(
            top,
            5,
            f"{label} [{unit}] and the {content.sweep_measure} that follows",
            self.style(bold=True, bottom=1, bottom_color=INK, indent=2),
        )
        sheet.write(top, 6, term, self.style(bold=True, bottom=1, bottom_color=INK, align="right"))
        swept = f"{content.block}_values" if content.pages else content.block  # shares and effects know no ±
        measure = "" if content.sweep_measure == "share" else f',"{content.sweep_measure}"'
        for k, value in enumerate(values, start=1):
            sheet.write(top + k, 5, value, self.entry(align="left", indent=1))
            formula = f'=CF_TERM(CF_VARY({swept},"{label}",$F{top + k + 1},"{unit}"),"{term}"{measure})'
            sheet.write_formula(top + k, 6, formula, self.style(num_format=SHARES, bottom=4, bottom_color=LINE))

    def _terms(self, row: int) -> None:
        sheet, content = self.sheet, self.content
        sheet.write(row, 0, content.question, self.style(bold=True, font_size=12))
        sheet.set_h_pagebreaks([row])
        self.places.append(("Term table", f"A{row + 1}", "how large each term is, its verdict and why"))
        head = row + 1
        self._heading(head, COLUMNS)
        sheet.set_column(7, 7, 13)
        sheet.write(head, 7, "for the chart", self.style(font_color=GREY, align="right", bottom=1, bottom_color=INK))
        names = (*TERMS, ALL_LEFT_OUT)
        first = head + 1
        for k, term in enumerate(names):
            at = first + k
            sheet.write(at, 0, term, self.style(bold=term == ALL_LEFT_OUT, bottom=4, bottom_color=LINE))
            for j, measure in enumerate(MEASURES, start=1):
                number = measure in ("one-scale", "share", "effect")
                style = self.style(
                    num_format=SHARES if number else "General",
                    align="right" if number else "left",
                    indent=1,
                    bottom=4,
                    bottom_color=LINE,
                    text_wrap=measure == "reason",
                    font_size=9 if measure == "reason" else 10.5,
                )
                column = "ABCDEF"[j]
                sheet.write_formula(at, j, f"=CF_TERM({content.block},$A{at + 1},{column}${head + 1})", style)
            sheet.set_row(at, 35)  # three lines of a reason
            guarded = f"=IF(ISNUMBER(C{at + 1}),MAX(C{at + 1},0.000001),NA())"
            if term != ALL_LEFT_OUT:
                sheet.write_formula(at, 7, guarded, self.style(num_format=SHARES, font_color=GREY))
        last = first + len(TERMS) - 1
        verdicts = f"E{first + 1}:E{last + 2}"
        bold = self.book.add_format({"bold": True})
        for word, look in (("keep", bold), ("leave out", self.book.add_format({"font_color": GREY}))):
            rule = {"type": "cell", "criteria": "==", "value": f'"{word}"', "format": look}
            sheet.conditional_format(verdicts, rule)
        sheet.conditional_format(
            f"A1:H{last + 8}",
            {"type": "text", "criteria": "begins with", "value": "! ", "format": bold},
        )
        self._decision(last + 3, first, last)
        span = f"A8:G{last + 3}"  # not the column for the chart: its #N/A are meant
        sheet.write_formula(self.faults_at, 1, f"=CF_FAULTS({span})", self.style(align="left"))
        self._chart(first, last, last + 8)

    def _decision(self, row: int, first: int, last: int) -> None:
        sheet = self.sheet
        self.places.append(("Decision", f"A{row + 1}", "what to keep and what may be left out"))
        sheet.write(row, 0, "Decision", self.style(bold=True, font_size=12))
        lines = ("keep", "borderline", "leave out", "not stated, so not judged")
        for k, word in enumerate(lines):
            parts = "&".join(f'IF({_listed(word, r + 1)},A{r + 1}&", ","")' for r in range(first, last + 1))
            sheet.write(row + 1 + k, 0, word, self.style(bold=word == "keep", indent=1))
            listed = f'=IF({parts}="","none",LEFT({parts},LEN({parts})-2))'
            sheet.write_formula(row + 1 + k, 1, listed, self.style())

    def _chart(self, first: int, last: int, row: int) -> None:
        chart = self.book.add_chart({"type": "bar"})
        chart.add_series(
            {
                "name": "share",
                "categories": ["Case", first, 0, last, 0],
                "values": ["Case", first, 7, last, 7],
                "fill": {"color": RULE},
                "gap": 60,
            }
        )
        font = {"color": INK, "size": 9}
        chart.set_title({"name": "Share of each term", "name_font": {"size": 11, "bold": True, "color": INK}})
        chart.set_x_axis(
            {
                "log_base": 10, "min": 1e-6, "max": 10, "num_format": "0E+00", "num_font": font, "crossing": 1e-6,
                "major_gridlines": {"visible": True, "line": {"color": LINE}},
                "name": "share of the largest term, or of what the answer calls for",
                "name_font": {"size": 9, "bold": False},
            }
        )  # fmt: skip
        chart.set_y_axis({"reverse": True, "num_font": font, "line": {"color": INK}})
        chart.set_legend({"none": True})
        chart.set_size({"width": 920, "height": 250})
        self.places.append(("Chart", f"A{row + 1}", "the share of each term on a logarithmic axis"))
        self.sheet.insert_chart(row, 0, chart, {"x_offset": 4, "y_offset": 6})
        self.last_row = row + 13

    def _print(self) -> None:
        sheet = self.sheet
        sheet.set_landscape()
        sheet.set_paper(9)
        sheet.fit_to_pages(1, 0)
        sheet.set_margins(0.5, 0.5, 0.6, 0.6)
        sheet.print_area(0, 0, self.last_row, 6)
        sheet.set_footer(f"&L&8{CAUTION}&R&8&P/&N")


def _listed(word: str, row: int) -> str:
    """The condition under which a term of the table belongs to a line of the decision.

    A share of exactly zero is a term that the case as stated does not have: it was not weighed.
    """
    if word == "leave out":
        return f'AND(E{row}="leave out",C{row}<>0)'
    if word.startswith("not stated"):
        return f'AND(E{row}="leave out",C{row}=0)'
    return f'E{row}="{word}"'
