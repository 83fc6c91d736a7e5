"""The table of units that may stand in a unit text (``data/units.csv``)."""

import csv
import functools
import re
from dataclasses import dataclass
from fractions import Fraction

from .kinds import DATA, Dimension, read_dimension

# More digits than a double holds, so that factors with π are right to the last place.
PI = Fraction("3.14159265358979323846264338327950288419716939937510")

PREFIXES = {"G": 9, "M": 6, "k": 3, "h": 2, "d": -1, "c": -2, "m": -3, "μ": -6, "u": -6, "n": -9, "T": 12}
PREFIX_NAMES = {
    "giga": "G",
    "mega": "M",
    "kilo": "k",
    "hecto": "h",
    "deci": "d",
    "centi": "c",
    "milli": "m",
    "micro": "μ",
    "nano": "n",
    "tera": "T",
}
# Prefixes whose case people get wrong without changing the meaning, or that M and m compete for.
_LOOSE_PREFIXES = {"k": "k", "g": "G", "c": "c", "d": "d", "h": "h", "m": "mM", "μ": "μ", "u": "u"}

EXACT, SPLIT, LOOSE, LOOSE_SPLIT = range(4)  # how far a reading is from the spelling in the table


@dataclass(frozen=True, slots=True, eq=False)
class Atom:
    """One row of the table."""

    symbol: str
    factor: Fraction
    dimension: Dimension
    prefixes: str
    exact_case: bool
    # "joins": may be written without a joint (mPas); "column": after a length (mmHg); "alone": not within
    # a compound; "once": to no power (fps2 is written for ft/s2)
    place: str
    kinds: tuple[str, ...]
    refuse: str


@dataclass(frozen=True, slots=True)
class Piece:
    """An atom with its prefix, as found in a text; ``rank`` tells how loosely it was matched."""

    atom: Atom
    prefix: str
    rank: int


def _factor(text: str) -> Fraction:
    """``0.45359237*9.80665/0.09290304`` or ``pi/180`` as an exact fraction; each ``/`` divides once."""
    result = Fraction(1)
    for place, group in enumerate(text.split("/")):
        for number in group.split("*"):
            value = PI if number == "pi" else Fraction(number)
            result = result / value if place else result * value
    return result


@functools.cache
def _table() -> tuple[dict[str, list[Atom]], dict[str, list[Atom]]]:
    """Spelling -> atoms, with case and without."""
    exact: dict[str, list[Atom]] = {}
    loose: dict[str, list[Atom]] = {}
    with (DATA / "units.csv").open(encoding="utf-8", newline="") as file:
        for row in csv.DictReader(file):
            written = row["spellings"].split(";")
            spellings = [spelling.replace(" ", "") for spelling in written]
            atom = Atom(
                symbol=written[0],
                factor=_factor(row["factor"]) if row["factor"] else Fraction(0),
                dimension=read_dimension(row["dimension"]),
                prefixes=row["prefixes"],
                exact_case=row["case"] == "exact",
                place=row["place"],
                kinds=tuple(filter(None, row["kinds"].split(";"))),
                refuse=row["refuse"],
            )
            for spelling in spellings:
                exact.setdefault(spelling, []).append(atom)
                if not atom.exact_case:
                    known = loose.setdefault(spelling.casefold(), [])
                    if atom not in known:
                        known.append(atom)
    return exact, loose


@functools.cache
def _phrases() -> re.Pattern[str]:
    """The spellings of several words: ``short ton``, ``lb mol``, with any joints between them."""
    with (DATA / "units.csv").open(encoding="utf-8", newline="") as file:
        written = [spelling for row in csv.DictReader(file) for spelling in row["spellings"].split(";")]
    phrases = sorted((spelling for spelling in written if " " in spelling), key=len, reverse=True)
    choice = "|".join(phrase.replace(" ", "[ .-]{1,2}") for phrase in phrases)
    # g mol^-1 is a quotient: a phrase ends before a negative power
    return re.compile(rf"(?<![a-z])(?:{choice})(?![a-z]|\^?-\d)", re.IGNORECASE)


def join_phrases(text: str) -> str:
    """Spellings of several words as single words."""
    return _phrases().sub(lambda found: re.sub("[ .-]", "", found.group()), text)


def spellings() -> tuple[str, ...]:
    """Every spelling of the table, as one word."""
    return tuple(_table()[0])


def whole(word: str) -> list[Piece]:
    """What a word may mean as one unit, exactly as spelled."""
    exact = _table()[0]
    found = [Piece(atom, "", EXACT) for atom in exact.get(word, ())]
    head, rest = word[:1], word[1:]
    if head in PREFIXES and rest in exact:
        sign = "μ" if head == "u" else head
        found += [Piece(atom, sign, EXACT) for atom in exact[rest] if sign in atom.prefixes]
    return found or _named(word, exact, EXACT)


def _named(word: str, table: dict[str, list[Atom]], rank: int) -> list[Piece]:
    """A prefix written out, before a unit of at least three letters: ``kilowatt``, ``centipoise``."""
    for name, sign in PREFIX_NAMES.items():
        rest = word[len(name) :]
        if len(rest) >= 3 and word.startswith(name) and rest in table:
            return [Piece(atom, sign, rank) for atom in table[rest] if sign in atom.prefixes]
    return []


def whole_in_any_case(word: str) -> list[Piece]:
    """What a word may mean as one unit when its case is not trusted.

    In ``Mpa`` the M stands out, so the case is trusted there; in ``mpa`` and ``MPA`` it says nothing.
    """
    loose = _table()[1]
    small = word.casefold()
    found = [Piece(atom, "", LOOSE) for atom in loose.get(small, ())]
    head, rest = small[:1], small[1:]
    signs = _LOOSE_PREFIXES.get(head, "")
    if word[:1] == "M" and not word.isupper():
        signs = "M"
    for sign in signs:
        sign = "μ" if sign == "u" else sign
        found += [Piece(atom, sign, LOOSE) for atom in loose.get(rest, ()) if sign in atom.prefixes]
    return found or _named(small, loose, LOOSE)
