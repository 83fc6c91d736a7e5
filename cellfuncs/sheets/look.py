"""Formats of the reference and the self-test, in the look of ``case_sheet.py``."""

from typing import Any

from cellfuncs.sheets.inks import GREY, INK, LINE, RULE, TINT

LINE_HEIGHT = 15


def height_for(text: str, characters: int) -> float:
    """Height of a row that shows a text wrapped after so many characters."""
    return LINE_HEIGHT * max(1, -(-len(text) // characters))


class Look:
    """The formats of a book, each made once."""

    def __init__(self, book: Any):
        self.book = book
        self.formats: dict[tuple[Any, ...], Any] = {}

    def style(self, **options: Any) -> Any:
        """A format on top of our font and ink."""
        key = tuple(sorted(options.items()))
        if key not in self.formats:
            base = {"font_name": "Calibri", "font_size": 10.5, "font_color": INK, "valign": "vcenter"}
            self.formats[key] = self.book.add_format(base | options)
        return self.formats[key]

    def title(self) -> Any:
        return self.style(bold=True, font_size=16)

    def head(self, **options: Any) -> Any:
        """The head of a table."""
        return self.style(bold=True, bottom=1, bottom_color=INK, **options)

    def label(self, **options: Any) -> Any:
        """A plain cell of a table."""
        return self.style(bottom=4, bottom_color=LINE, **options)

    def entry(self, ruled: bool = True, **options: Any) -> Any:
        """An input cell: tinted, with a rule at the left of the inputs of a row."""
        rule = {"left": 5, "left_color": RULE} if ruled else {}
        side = {"align": "left", "indent": 1} | options
        return self.style(bg_color=TINT, bottom=4, bottom_color=LINE, **rule, **side)

    def ruled(self, **options: Any) -> Any:
        """The opening line of an entry: our rule at its left."""
        return self.style(left=5, left_color=RULE, align="left", indent=1, **options)

    def quiet(self, **options: Any) -> Any:
        """What is said beside: grey and small."""
        return self.style(font_color=GREY, font_size=9, **options)

    def link(self) -> Any:
        return self.style(font_color=RULE, valign="top", bottom=4, bottom_color=LINE)
