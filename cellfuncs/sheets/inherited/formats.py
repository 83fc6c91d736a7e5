"""What the number format of a cell shows: decimals, per cent, thousands cut off, a unit written in it."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from functools import lru_cache
from xml.parsers import expat

from cellfuncs.books import Book

# ECMA-376 part 1, 18.8.30: the formats that are not written out in the file
_BUILT_IN = {
    1: "0", 2: "0.00", 3: "#,##0", 4: "#,##0.00", 9: "0%", 10: "0.00%", 11: "0.00E+00", 12: "# ?/?", 13: "# ??/??",
    37: "#,##0", 38: "#,##0", 39: "#,##0.00", 40: "#,##0.00", 48: "##0.0E+0", 49: "@",
}  # fmt: skip
_DATES = {*range(14, 23), *range(27, 37), 45, 46, 47, *range(50, 59)}

_QUOTED = re.compile(r'"([^"]*)"|\\(.)|\[\$([^\]\-]*)(?:-[^\]]*)?\]|_.|\*.')
_BRACKETS = re.compile(r"\[[^\]]*\]")
_PICTURE = re.compile(r"[0#?][0#?,]*(?:\.([0#?]*))?(E[+-]0+)?(,*)")
_LEAST_SHOWN = 2  # significant digits that a format is taken to show at least


@dataclass(frozen=True)
class Shown:
    """A number format: decimals (None: all digits are shown), whether per cent or with exponent, the scale by which
    shown numbers are smaller than stored ones, the text beside the number, whether it shows a date or a text."""

    decimals: int | None = None
    percent: bool = False
    exponent: bool = False
    scale: float = 1.0
    text: str = ""
    date: bool = False

    def half_digit(self, value: float, typed: bool) -> float:
        """Half of the last digit shown of a stored value, in the unit of the stored value; 0 where all are shown."""
        if value == 0 or not math.isfinite(value):
            return 0.0
        magnitude = math.floor(math.log10(abs(value)))
        if self.decimals is None:
            if not typed:
                return 0.0
            decimals = _decimals(value)
            step = 10.0**-decimals
            return 0.5 * (step if decimals > 0 else min(step, 10.0 ** (magnitude - _LEAST_SHOWN + 1)))
        if self.exponent:
            step = 10.0 ** (magnitude - self.decimals)
        else:
            step = 10.0**-self.decimals * self.scale / (100.0 if self.percent else 1.0)
        return 0.5 * min(step, 10.0 ** (magnitude - _LEAST_SHOWN + 1))


def _decimals(value: float) -> int:
    """Decimals of the shortest text of a number; negative for none: 1.2e-05 has 6."""
    digits, _, power = repr(float(value)).partition("e")
    part = digits.partition(".")[2]
    return (0 if part == "0" else len(part)) - (int(power) if power else 0)


GENERAL = Shown()


@lru_cache(maxsize=2048)
def shown_by(code: str) -> Shown:
    """Read a format code; its first section counts."""
    if code in ("", "General", "@"):
        return GENERAL
    written: list[str] = []

    def keep(match: re.Match[str]) -> str:
        text = match[1] if match[1] is not None else match[2] if match[2] is not None else match[3]
        written.append(text or "")
        return "\x00" if text else ""

    plain = _QUOTED.sub(keep, code)
    section = plain.split(";")[0]
    bare = _BRACKETS.sub("", section)
    text = "".join(written[: section.count("\x00")]) if section.count("\x00") else ""
    picture = _PICTURE.search(bare)
    if picture is None:
        dated = re.search(r"[ymdhs]", bare, re.IGNORECASE) is not None
        return Shown(date=dated, text="" if dated else text.strip())
    if re.search(r"[ymdhs]", bare, re.IGNORECASE):
        return Shown(date=True)
    behind = _behind(section, written)
    decimals = len(picture[1] or "")
    if "general" in bare.casefold():
        decimals = None
    return Shown(decimals, "%" in bare, picture[2] is not None, 1000.0 ** len(picture[3] or ""), behind)


def _behind(section: str, written: list[str]) -> str:
    """The text that a format writes behind its number."""
    last = max((section.rfind(sign) for sign in "0#?"), default=-1)
    before = section[: last + 1].count("\x00")
    kept = [t for t in written if t][before : section.count("\x00")]
    return "".join(kept).strip()


def formats_of(book: Book) -> list[Shown]:
    """The formats by the number of a cell's style."""
    if book.styles_part is None:
        return []
    custom: dict[int, str] = {}
    styles: list[int] = []
    path: list[str] = []

    def start(name: str, attributes: dict[str, str]) -> None:
        local = name.rpartition(" ")[2]
        path.append(local)
        if local == "numFmt":
            custom[_whole(attributes.get("numFmtId"))] = attributes.get("formatCode", "")[:255]
        elif local == "xf" and path[-2:-1] == ["cellXfs"]:
            styles.append(_whole(attributes.get("numFmtId")))

    parser = expat.ParserCreate(namespace_separator=" ")
    parser.StartElementHandler = start
    parser.EndElementHandler = lambda _: path.pop()
    for piece in book.package.pieces(book.styles_part):
        parser.Parse(piece, False)
    parser.Parse(b"", True)
    return [_known(number, custom) for number in styles]


def _known(number: int, custom: dict[int, str]) -> Shown:
    if number in custom:
        return shown_by(custom[number])
    if number in _DATES:
        return Shown(date=True)
    return shown_by(_BUILT_IN.get(number, ""))


def _whole(text: str | None) -> int:
    return int(text) if text and text.isdigit() and len(text) < 7 else 0
