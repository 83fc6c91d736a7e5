"""Numbers as people type them into cells: ``1,250.5 kPa``, ``½ in``, ``12 ± 0.5 m/s``, ``0,5``."""

import math
import re
from typing import NamedTuple

from ..errors import NumberRefused
from .texts import check_characters, shortened

LONGEST = 60

# One character for one, so that what is left of the text is what the user typed.
_SIGNS = str.maketrans(
    {
        **dict.fromkeys("\xa0\u2002\u2003\u2007\u2008\u2009\u200a\u202f\t", " "),
        **dict.fromkeys("−–—‐‑‒﹣－", "-"),
        **dict.fromkeys("⁄∕", "/"),
        **{chr(0xFF10 + digit): str(digit) for digit in range(10)},
        "．": ".",
        "，": ",",
        "＋": "+",
        "％": "%",
    }
)
_VULGAR = {
    "½": (1, 2), "⅓": (1, 3), "⅔": (2, 3), "¼": (1, 4), "¾": (3, 4), "⅕": (1, 5), "⅖": (2, 5), "⅗": (3, 5),
    "⅘": (4, 5), "⅙": (1, 6), "⅚": (5, 6), "⅛": (1, 8), "⅜": (3, 8), "⅝": (5, 8), "⅞": (7, 8),
}  # fmt: skip
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")

_SIGN = r"(?P<sign>[+-] ?)?"
_FRACTION = re.compile(
    _SIGN + rf"(?:(?P<whole>\d{{1,6}}) ?)?(?P<vulgar>[{''.join(_VULGAR)}])"
    r"|" + _SIGN.replace("sign", "sign2") + r"(?:(?P<whole2>\d{1,6})[ -])?"
    r"(?P<over>\d{1,6}) ?/ ?(?P<under>\d{1,6})(?![\d.,])",
    re.ASCII,
)
_NUMERAL = re.compile(
    _SIGN + r"(?P<digits>\d{1,3}(?: \d{3})+(?![\d])(?:[.,]\d+)?|[.,]?\d[\d.,]*)"
    r"(?P<power>[eE][+-]?\d+(?!\d)| ?[×xX*·] ?10(?:\^|\*\*)[+-]?\d+| ?[×xX*·] ?10[+-]\d+"
    r"| ?[×xX*·] ?10[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+)?",
    re.ASCII,
)
_TEN_TO = re.compile(_SIGN + r"10(?:(?:\^|\*\*)(?P<plain>[+-]?\d+)|(?P<raised>[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+))", re.ASCII)
_PLUS_MINUS = re.compile(r" ?(?:±|\+ ?/ ?-|\+-) ?")
_RANGE = re.compile(r" ?(?:-|\.\.+|…|to\b|~) ?\d", re.ASCII)


class Reading(NamedTuple):
    """A number, its ± (None where there is none), and the text of its unit (may be empty)."""

    value: float
    plus_minus: float | None
    unit_text: str


def read_number(text: str) -> Reading:
    """The number at the start of a text, and what follows as the text of its unit.

    A ± shares the unit that stands last; ``12 m/s ± 5 %`` is a share of the value.

    Raises
    ------
    NumberRefused
        When the text does not begin with one finite number, or it may be two different ones.
    """
    if not isinstance(text, str):
        raise NumberRefused("not a text")
    stripped = text.strip()
    if not stripped:
        raise NumberRefused("empty; write a number")
    shown = shortened(stripped, 30)
    if len(stripped) > LONGEST:
        raise NumberRefused(f'"{shown}" has {len(stripped)} characters; a number with its unit has at most {LONGEST}')
    check_characters(stripped.replace("\t", " "), NumberRefused)
    plain = stripped.translate(_SIGNS)
    if plain[0] == "(" and ")" in plain:
        plain, stripped = (t[1:].replace(")", " ", 1) for t in (plain, stripped))
        plain, stripped = plain.strip(), stripped.strip()
    parted = _PLUS_MINUS.search(plain)
    if not parted or parted.start() == 0:
        value, unit = _value_and_unit(plain, stripped, shown)
        return Reading(value, None, unit)
    value, unit = _value_and_unit(plain[: parted.start()], stripped[: parted.start()], shown)
    spread, spread_unit = _value_and_unit(plain[parted.end() :], stripped[parted.end() :], shown)
    if spread < 0:
        raise NumberRefused(f'"{shown}" has a negative number after the ±')
    if unit and spread_unit == "%" and unit != "%":
        return Reading(value, abs(value) * spread / 100.0, unit)
    if unit and spread_unit and unit != spread_unit:
        raise NumberRefused(f'"{shown}" has two units; write one, after the ±')
    return Reading(value, spread, spread_unit or unit)


def _value_and_unit(plain: str, typed: str, shown: str) -> tuple[float, str]:
    start = len(plain) - len(plain.lstrip())
    plain, typed = plain[start:].rstrip(), typed[start:].rstrip()
    value, end = _leading(plain, shown)
    if not math.isfinite(value):
        raise NumberRefused(f'"{shown}" is beyond the largest number')
    rest = plain[end:]
    if _RANGE.match(rest):
        raise NumberRefused(f'"{shown}" is a range; give one number')
    unit = typed[end:].strip()
    if re.match("[0-9]", unit) and not re.match(r"1 ?/", unit) and not rest.strip().startswith("10^"):
        raise NumberRefused(f'"{shown}" holds two numbers; give one with its unit')
    if "±" in unit or re.match(r"[.,eExX×*·/^'’_] ?[+-]?\d", unit):
        raise NumberRefused(f'"{shown}" is no number as written; write for instance 1250.5')
    return value, unit


def _leading(plain: str, shown: str) -> tuple[float, int]:
    """The value at the start of a plain text, and where it ends."""
    match = _FRACTION.match(plain)
    if match:
        over, under = _VULGAR.get(match["vulgar"]) or (int(match["over"]), int(match["under"]))
        if under == 0:
            raise NumberRefused(f'"{shown}" divides by zero')
        value = int(match["whole"] or match["whole2"] or 0) + over / under
        return (-value if "-" in (match["sign"] or match["sign2"] or "") else value), match.end()
    match = _TEN_TO.match(plain)
    if match:
        power = match["plain"] or match["raised"].translate(_SUPERSCRIPTS)
        return _power_of_ten("-1" if "-" in (match["sign"] or "") else "1", power, shown), match.end()
    match = _NUMERAL.match(plain)
    if not match:
        raise NumberRefused(f'"{shown}" does not begin with a number; write for instance 1250.5')
    digits = _decimal(match["digits"], shown)
    if "-" in (match["sign"] or ""):
        digits = "-" + digits
    power = match["power"]
    if not power:
        return float(digits), match.end()
    power = power.strip()
    raised = power[1:] if power[0] in "eE" else re.sub(r"^[×xX*·] ?10(?:\^|\*\*)?", "", power)
    return _power_of_ten(digits, raised.translate(_SUPERSCRIPTS), shown), match.end()


def _power_of_ten(digits: str, power: str, shown: str) -> float:
    value = float(f"{digits}e{int(power)}") if len(power) <= 5 else math.inf
    if value == 0 and float(digits) != 0:
        raise NumberRefused(f'"{shown}" is below the smallest number')
    return value


def _decimal(digits: str, shown: str) -> str:
    """Digits with separators as Python writes them; refused where a comma has two meanings."""
    spaced = " " in digits
    digits = digits.replace(" ", "")
    dots, commas = digits.count("."), digits.count(",")
    if not dots and not commas:
        return digits
    if dots and commas:
        decimal, grouping = (".", ",") if digits.rfind(".") > digits.rfind(",") else (",", ".")
        whole, _, part = digits.rpartition(decimal)
        if spaced or decimal in whole or grouping in part or not _grouped(whole, grouping):
            raise NumberRefused(f'"{shown}" mixes commas and dots; write for instance 1250.5')
        return whole.replace(grouping, "") + "." + part
    mark, count = (".", dots) if dots else (",", commas)
    if count > 1:
        if spaced or not _grouped(digits, mark):
            raise NumberRefused(f'"{shown}" is no number as written; write for instance 1250.5')
        return digits.replace(mark, "")
    whole, _, part = digits.partition(mark)
    if mark == "," and not part:
        raise NumberRefused(f'"{shown}" ends its number with a comma; write for instance 1250.5')
    if mark == "," and len(part) == 3 and 1 <= len(whole) <= 3 and whole[0] != "0" and not spaced:
        raise NumberRefused(f'"{digits}" may be {whole}{part} or {whole}.{part}; write the one that is meant')
    return f"{whole or 0}.{part or 0}"


def _grouped(text: str, mark: str) -> bool:
    """Whether digits are parted into threes."""
    first, *others = text.split(mark)
    return 1 <= len(first) <= 3 and all(len(group) == 3 for group in others)
