"""The function reference as a workbook: contents, one sheet a family, tables of methods, labels and kinds."""

import datetime as dt
from collections.abc import Sequence
from pathlib import Path
from typing import Any

from cellfuncs import __version__
from cellfuncs.sheets import examples, reference
from cellfuncs.sheets.inks import CAUTION, GREY, RULE
from cellfuncs.sheets.look import Look, height_for
from cellfuncs.sheets.reference import Example, Facts, Table

_WIDTHS = (32, 30, 16, 15, 15, 72)
_PLAIN_WIDTH = 9  # of a column nobody has set
_PER_WIDTH = 1.1  # characters of our font in a unit of width, with some to spare
_WHOLE, _HELP = 186, 94  # characters in a line of a whole row, and of the help's cells
_GROUP_HEADS = ("number", "formula", "symbol", "function", "", "what it compares; which decision uses it")


def write_reference(path: str | Path) -> None:
    """Write the workbook; nothing in it is calculated."""
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    _Writer(book).write()
    book.close()


class _Writer:
    """Writes the sheets; rows are counted from 0 as XlsxWriter does."""

    def __init__(self, book: Any):
        self.book, self.look = book, Look(book)
        self.families = reference.by_family()
        self.tables = reference.tables()
        self.places: dict[str, tuple[str, int]] = {}

    def write(self) -> None:
        contents = self._sheet("Contents", (26, 16, 30, 90))
        for family, entries in self.families.items():
            self._family(family, entries)
        for table in self.tables:
            self._table(table)
        self._example()
        self._contents(contents)
        about = {"title": "Cellfuncs: function reference", "subject": f"version {__version__}", "comments": CAUTION}
        # a fixed date, so that the same content gives the same file
        self.book.set_properties(about | {"created": dt.datetime(2026, 1, 1)})

    def _sheet(self, name: str, widths: Sequence[float]) -> Any:
        sheet = self.book.add_worksheet(name)
        for column, width in enumerate(widths):
            sheet.set_column(column, column, width)
        sheet.hide_gridlines(2)
        sheet.set_landscape()
        sheet.set_paper(9)
        sheet.fit_to_pages(1, 0)
        sheet.set_margins(0.5, 0.5, 0.6, 0.6)
        sheet.set_footer("&L&8Cellfuncs, function reference: &A&R&8&P/&N")
        return sheet

    def _title(self, sheet: Any, title: str, words: str) -> None:
        sheet.set_row(0, 24)
        sheet.write(0, 0, title, self.look.title())
        sheet.write(1, 0, words, self.look.quiet())

    def _contents(self, sheet: Any) -> None:
        look = self.look
        self._title(sheet, "Function reference", f"Cellfuncs {__version__}. Made from the catalogue of cell functions.")
        sheet.write(2, 0, CAUTION, look.quiet())
        row = 4
        for column, word in enumerate(("function", "family", "answers", "what it does")):
            sheet.write(row, column, word, look.head())
        first = row
        for family, entries in self.families.items():
            for one in entries:
                row += 1
                name, at = self.places[one.name]
                sheet.write_url(row, 0, f"internal:'{name}'!A{at + 1}", look.link(), one.name)
                wide = look.label(text_wrap=True, valign="top")
                for column, words in enumerate((family, one.answers, one.summary), start=1):
                    sheet.write(row, column, words, wide)
                sheet.set_row(row, max(height_for(one.answers, 32), height_for(one.summary, 100)))
        sheet.autofilter(first, 0, row, 3)
        sheet.freeze_panes(first + 1, 0)
        sheet.repeat_rows(first)
        row += 2
        sheet.write(row, 0, "further sheets", look.head())
        sheet.write(row, 1, "", look.head())
        for name, words in (
            *((table.title, table.intro) for table in self.tables),
            (examples.SHEET, "The cells that the examples mean; type an example there to see it at work."),
        ):
            row += 1
            sheet.write_url(row, 0, f"internal:'{name}'!A1", look.link(), name)
            sheet.write(row, 1, words, look.style())

    def _family(self, family: str, entries: Sequence[Facts]) -> None:
        sheet = self._sheet(family, _WIDTHS)
        self._title(sheet, family, reference.FAMILY_WORDS.get(family, ""))
        row = 3
        grouped = [one for one in entries if one.group is not None]
        if grouped:
            row = self._groups(sheet, row, grouped) + 1
        for one in entries:
            row = self._function(sheet, row, one) + 2

    def _groups(self, sheet: Any, row: int, entries: Sequence[Facts]) -> int:
        """All characteristic numbers of the family in one table."""
        look = self.look
        for column, word in enumerate(_GROUP_HEADS):
            sheet.write(row, column, word, look.head())
        for one in entries:
            row += 1
            group = one.group
            for column, words in enumerate((group.name, group.formula, group.symbol)):
                sheet.write(row, column, words, look.label(valign="top"))
            sheet.merge_range(row, 3, row, 4, one.name, look.label(valign="top"))
            says = f"{group.compares}; {group.decides}"
            sheet.write(row, 5, says, look.label(text_wrap=True, valign="top"))
            sheet.set_row(row, height_for(says, _HELP - 14))
        return row + 1

    def _function(self, sheet: Any, row: int, one: Facts) -> int:
        """One entry; returns the row after it."""
        look = self.look
        self.places[one.name] = (one.family, row)
        sheet.set_row(row, 19)
        sheet.merge_range(row, 0, row, 5, one.call, look.ruled(bold=True, font_size=12))
        row = self._line(sheet, row + 1, None, one.summary)
        if one.arguments:
            row = self._arguments(sheet, row, one)
        row = self._line(sheet, row, "answers", one.answers)
        if one.group is not None:
            row = self._line(sheet, row, "symbol, formula", f"{one.group.symbol}:  {one.group.formula}")
            row = self._line(sheet, row, "compares", one.group.compares)
            row = self._line(sheet, row, "decides", one.group.decides)
        row = self._line(sheet, row, "example", one.formula, tinted=True)
        if one.example is not None:
            if one.example.where:
                row = self._line(sheet, row, "", one.example.where)
            row = self._answer(sheet, row, one.example)
        return self._line(sheet, row, "source", one.source)

    def _line(self, sheet: Any, row: int, head: str | None, words: str, tinted: bool = False) -> int:
        """A label and a text over the rest of the row, or a text over the whole row."""
        look = self.look
        sheet.set_row(row, height_for(words, _WHOLE if head is None else _WHOLE - 34))
        if head is None:
            sheet.merge_range(row, 0, row, 5, words, look.ruled(text_wrap=True))
            return row + 1
        sheet.write(row, 0, head, look.ruled(font_color=GREY))
        wide = look.entry(ruled=False, indent=0) if tinted else look.style(text_wrap=True)
        sheet.merge_range(row, 1, row, 5, "", wide)
        sheet.write_string(row, 1, words, wide)
        return row + 1

    def _arguments(self, sheet: Any, row: int, one: Facts) -> int:
        look = self.look
        for column, word in enumerate(("argument", "kind", "SI unit", "", "help", "")):
            sheet.write(row, column, word, look.ruled(bold=True) if column == 0 else look.head())
        for argument in one.arguments:
            row += 1
            sheet.write(row, 0, argument.name, look.ruled())
            for column, words in enumerate((argument.kind, argument.unit, "optional" if argument.optional else "")):
                sheet.write(row, column + 1, words, look.label())
            sheet.merge_range(row, 4, row, 5, argument.help, look.label(text_wrap=True))
            sheet.set_row(row, height_for(argument.help, _HELP))
        return row + 1

    def _answer(self, sheet: Any, row: int, example: Example) -> int:
        look = self.look
        if not example.is_table:
            return self._line(sheet, row, "gives", example.single)
        sheet.write(row, 0, "gives", look.ruled(font_color=GREY))
        sheet.write(
            row, 1, "" if example.count <= len(example.rows) else f"{example.count} rows, of these", look.quiet()
        )
        headed = len(example.rows[0]) > 1
        for k, cells in enumerate(example.rows):
            row += 1
            self._answer_row(sheet, row, cells, headed and k == 0)
        return row + 1

    def _answer_row(self, sheet: Any, row: int, cells: Sequence[Any], is_head: bool) -> None:
        """A row of a table that an example gives; its last cell takes the room that is left."""
        look = self.look
        last = len(cells) - 1
        height = 0.0
        for column, cell in enumerate(cells):
            options: dict[str, Any] = {"align": "left", "text_wrap": True, "valign": "top"}
            if column == 0:
                options |= {"indent": 1, "left": 5, "left_color": RULE}
            style = look.head(**options) if is_head else look.label(**options)
            width = _WIDTHS[column] if column < len(_WIDTHS) else _PLAIN_WIDTH
            if column == last and 0 < last < len(_WIDTHS) - 1:
                width = sum(_WIDTHS[last:])
                sheet.merge_range(row, last, row, len(_WIDTHS) - 1, "", style)
            if isinstance(cell, str):
                sheet.write_string(row, column, cell, style)
                height = max(height, height_for(cell, int(width * _PER_WIDTH)))
            else:
                sheet.write_number(row, column, float(reference.shown(cell)), style)
        sheet.set_row(row, height or None)

    def _table(self, table: Table) -> None:
        widths = [_width([row[k] for row in table.rows], head) for k, head in enumerate(table.heads)]
        sheet = self._sheet(table.title, widths)
        self._title(sheet, table.title, table.intro)
        for column, head in enumerate(table.heads):
            sheet.write(3, column, head, self.look.head())
        wide = self.look.label(text_wrap=True, valign="top")
        for k, cells in enumerate(table.rows, start=4):
            for column, cell in enumerate(cells):
                sheet.write_string(k, column, cell, wide)
            sheet.set_row(k, max(height_for(c, int(w * _PER_WIDTH)) for c, w in zip(cells, widths, strict=True)))
        sheet.autofilter(3, 0, 3 + len(table.rows), len(table.heads) - 1)
        sheet.freeze_panes(4, 1)
        sheet.repeat_rows(3)

    def _example(self) -> None:
        sheet = self._sheet(examples.SHEET, ())
        examples.fill(self.book, sheet, reference.stored()["block"], self.look)
        sheet.write(0, 0, "The cells that the examples mean", self.look.style(bold=True))


def _width(texts: Sequence[str], head: str) -> float:
    """A width that shows most texts in a line and the longest in a few."""
    longest = max(map(len, (*texts, head)))
    return min(longest + 3, 60 if head in ("source", "also written", "what it is") else 44)
