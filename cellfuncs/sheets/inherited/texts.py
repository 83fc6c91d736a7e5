"""What a text in a cell is: a label with its symbol and unit, a number with its unit, an assignment."""

from __future__ import annotations

import re
from functools import lru_cache
from typing import NamedTuple

from rapidfuzz import fuzz, process

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.errors import CellfuncsError
from cellfuncs.sources import read_table

LONGEST_LABEL = 90
LONGEST_UNIT = 24
LONGEST_SYMBOL = 9
_WORD_LENGTH = 4
_OTHER_CASE = 0.75  # how sure a symbol is whose case is another
_NEAR = 90.0  # rapidfuzz ratio (0 to 100) from which a misspelt label counts as known

_BRACKET = re.compile(r"\s*[\[({]([^\[\](){}]{1,30})[\])}]")
_SYMBOL = re.compile(r"[^\W\d](?:[\w'′″*∞,.̇̄+/\-]|[({][\w, ]{1,6}[)}]){0,8}\Z")
_ASSIGNED = re.compile(r"^(?P<label>[^=:]{1,60}?)\s*(?:=|:(?!\S*/))\s*(?P<value>[-+.]?\d.{0,38}|½.{0,20})$", re.DOTALL)
_ENDING = re.compile(r"(?:,|;|\s-|\s–|\sin|\s/|/|:)\s+(?P<unit>[^\s,;:][^,;:]{0,22})$|\s(?P<bare>[^\s,;:]{1,16})$")
_NUMBERED = re.compile(r"^(?:[-–•*>·]\s+|\(?\d{1,2}(?:\.\d{1,2}){0,3}[.)]?\s+(?=[^\W\d]{2}))")
_WORD = re.compile(r"[a-zα-ωµ°0-9']+")


class Labelled(NamedTuple):
    """A label taken apart: what to look up, the likeliest first, and the unit written in it (may be empty)."""

    names: tuple[str, ...]
    unit: str


class Known(NamedTuple):
    """A key of the dictionary that a label may stand for, and how sure that is (0 to 1)."""

    key: str
    score: float


@lru_cache(maxsize=8192)
def is_unit(text: str) -> bool:
    """Whether a text can be read as a unit."""
    text = text.strip()
    return 0 < len(text) <= LONGEST_UNIT and bool(quantities.kinds_for(bare_unit(text)))


@lru_cache(maxsize=8192)
def bare_unit(text: str) -> str:
    """A unit without the brackets round it."""
    text = text.strip().strip(":").strip()
    if len(text) > 2 and text[0] + text[-1] in ("[]", "()", "{}", "<>"):
        return text[1:-1].strip()
    return text


@lru_cache(maxsize=8192)
def quantity_in(text: str) -> quantities.Reading | None:
    """The number and unit of a text such as ``25 mm``; None where it is none, or what follows is no unit."""
    text = text.strip()
    if len(text) > 40 or not re.match(r"[-+−±~≈]?\s?[\d.½¼¾]", text) or (text.startswith("1/") and is_unit(text)):
        return None
    try:
        reading = quantities.read_number(text.lstrip("~≈ "))
    except CellfuncsError:
        return None
    if reading.unit_text and not is_unit(reading.unit_text):
        return None
    return reading


@lru_cache(maxsize=8192)
def assignment_in(text: str) -> tuple[str, quantities.Reading] | None:
    """``Re = 12 000`` or ``Diameter: 25 mm`` as its label and its number; None for other texts."""
    if len(text) > 100:
        return None
    match = _ASSIGNED.match(text.strip())
    if match is None:
        return None
    reading = quantity_in(match["value"])
    return None if reading is None else (match["label"].strip(), reading)


@lru_cache(maxsize=8192)
def label_in(text: str) -> Labelled:
    """A label taken apart."""
    text = _NUMBERED.sub("", " ".join(text.split())).rstrip(":= ").strip()
    if not text or len(text) > LONGEST_LABEL:
        return Labelled((), "")
    names, unit, rest = [text], "", text
    for match in reversed(list(_BRACKET.finditer(text))):
        inside = match[1].strip()
        without = (text[: match.start()] + text[match.end() :]).strip(" ,;:=")
        if not without:
            continue
        if not unit and _is_unit_of(inside, without, match[0].lstrip()[0] == "["):
            unit = inside
        elif _SYMBOL.match(inside) or labels.in_sheets(inside):
            names.append(inside)
        rest = rest.replace(match[0], " ").strip(" ,;:=")
    if rest != text:
        names.insert(0 if not known(text) else 1, " ".join(rest.split()))
    if not unit and not any(k.score > 0.95 for name in names for k in known(name)):
        rest, unit = _ending(names[0])
        if unit:
            names.insert(0, rest)
    head, _, tail = names[0].rpartition(" ")
    if head and _is_symbol_of(tail, head):
        names.append(head.rstrip(" ,;:=-"))
    for joint in (", ", " = ", "="):
        head, found, _ = names[0].partition(joint)
        if found and head.strip():
            names.append(head.strip())
            break
    return Labelled(tuple(dict.fromkeys(name for name in names if name)), unit)


def _is_unit_of(text: str, label: str, square: bool) -> bool:
    """Whether what stands in brackets behind a label is its unit, and not its symbol or a remark."""
    if not is_unit(text):
        return False
    keys = [k.key for k in known(label)]
    kinds = [labels.dictionary()[key].kind for key in keys]
    if any(kind and quantities.unit_fits(text, kind) for kind in kinds):
        return square or not set(keys) & set(labels.in_sheets(text)) or len(text) > 1
    return square or not keys


def _is_symbol_of(text: str, label: str) -> bool:
    """Whether the last word of a label is its symbol."""
    if len(text) > LONGEST_SYMBOL or not _SYMBOL.match(text):
        return False
    if {k.key for k in known(label)} & set(labels.in_sheets(text)):
        return True
    return len(text) <= 2 or not (text.isascii() and text.isalpha() and text.islower())


def _ending(text: str) -> tuple[str, str]:
    """``Velocity, m/s`` or ``T / K`` as name and unit."""
    match = _ENDING.search(text)
    if match is None:
        return text, ""
    unit = match["unit"] or match["bare"]
    rest = text[: match.start()].strip(" ,;:=")
    kinds = [labels.dictionary()[k.key].kind for k in known(rest)]
    if not any(kind and quantities.unit_fits(unit, kind) for kind in kinds):
        return text, ""
    return rest, unit


@lru_cache(maxsize=1)
def _spelled() -> dict[str, list[str]]:
    """Words of labels and what they mean; nothing for those that do not tell quantities apart."""
    return {row["word"]: row["means"].split() for row in read_table("label_words.csv")}


def _words(text: str) -> list[str]:
    """The telling words of a label, spelled out."""
    spelled = _spelled()
    return [word for found in _WORD.findall(labels.plain(text)) for word in spelled.get(found, [found])]


@lru_cache(maxsize=1)
def _by_words() -> dict[frozenset[str], tuple[str, ...]]:
    table: dict[frozenset[str], list[str]] = {}
    for key, entry in labels.dictionary().items():
        if entry.role == "note":
            continue
        for name in (entry.label, *entry.synonyms, *entry.in_sheets):
            words = frozenset(_words(name))
            # "fluid temperature" is more than any temperature
            plain_word = len(name.split()) == len(words) == 1 and len(name) > 2 and name.isalpha() and name.islower()
            if len(words) > 1 or plain_word:
                table.setdefault(words, []).append(key)
    return {words: tuple(dict.fromkeys(keys)) for words, keys in table.items()}


@lru_cache(maxsize=1)
def _telling_words() -> frozenset[str]:
    """Words that make another quantity of what they stand before: hydraulic, outside, relative."""
    table = _by_words()
    return frozenset(
        word
        for words, keys in table.items()
        for word in words
        if len(words) > 1 and (rest := table.get(words - {word})) and not set(rest) & set(keys)
    )


@lru_cache(maxsize=1)
def _names() -> dict[str, tuple[str, ...]]:
    table: dict[str, list[str]] = {}
    for key, entry in labels.dictionary().items():
        if entry.role in ("stated", "derived", "sheet"):
            for name in (entry.label, *entry.synonyms, *entry.in_sheets):
                if len(name) >= 7:
                    table.setdefault(name.casefold(), []).append(key)
    return {name: tuple(dict.fromkeys(keys)) for name, keys in table.items()}


@lru_cache(maxsize=8192)
def known(text: str) -> tuple[Known, ...]:
    """The quantities that a label may stand for: as written, by its telling words, or nearly so written."""
    text = text.strip().rstrip(":= ").strip()
    if not text or len(text) > LONGEST_LABEL or not any(c.isalpha() for c in text):
        return ()
    exact = labels.in_sheets(text)
    if exact:
        written = labels.as_written(text)
        return tuple(
            Known(key, (1.0 if key in written else _OTHER_CASE) - 0.001 * place) for place, key in enumerate(exact)
        )
    words = _words(text)
    by_words = _by_words().get(frozenset(words), ())
    if not by_words and len(words) > 1:
        # a qualifier in front or behind: "circulating mass flow", "tube length each", "pin diameter"
        shorter = [_by_words().get(frozenset(part), ()) for part in (words[1:], words[:-1]) if len(part) > 1]
        first, *others = filter(None, shorter) if any(shorter) else ((),)
        common = [key for key in first if all(key in other for other in others)]
        if common:
            return tuple(Known(key, 0.6) for key in common)
        if len(words) == 2 and words[0] not in _telling_words():
            return tuple(Known(key, 0.45) for key in _by_words().get(frozenset(words[1:]), ()))
        # "length of line", "density of the coating"
        head, of, tail = text.partition(" of ")
        if of and not _telling_words() & set(_words(tail)):
            return tuple(Known(known_head.key, 0.45) for known_head in known(head))
    if by_words:
        return tuple(Known(key, 0.9) for key in by_words)
    if len(text) < 6:
        return ()
    match = process.extractOne(text.casefold(), _names().keys(), scorer=fuzz.ratio, score_cutoff=_NEAR)
    return tuple(Known(key, 0.7) for key in _names()[match[0]]) if match else ()


def is_name(text: str) -> bool:
    """Whether a text that might be a symbol is a word of the dictionary: Head, Tubes."""
    return len(text) >= _WORD_LENGTH and text.isalpha() and text.isascii() and bool(known(text))


def is_symbol(text: str) -> bool:
    """Whether a text may be a symbol: short, without blanks, beginning with a letter."""
    return len(text) <= LONGEST_SYMBOL and _SYMBOL.match(text.strip().rstrip("=: ")) is not None
