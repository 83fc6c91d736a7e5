"""The one dictionary of labels: what engineers write beside a value, and what it stands for.

Data: ``data/labels.csv`` and ``data/choices.csv``. A label is found by its name, a synonym or its
usual symbol; where several remain, the unit and the flow kind settle it.
"""

import re
import unicodedata
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cache

from cellfuncs import quantities
from cellfuncs.errors import CaseRefused, UnknownName
from cellfuncs.sources import read_table

_BRACKETED = re.compile(r"[\[(]([^\[\]()]*)[\])]\s*$")
_JOINTS = re.compile(r"[\s_,.\-]+")


_REMARKS = ("remark ", "note ", "comment ")


@dataclass(frozen=True)
class Label:
    """An entry of the dictionary; ``role`` is stated, choice, text, note, derived, or sheet: only other people's
    sheets state it, case blocks do not. ``in_sheets`` are names and symbols that only other people's sheets use for it.
    """

    key: str
    label: str
    role: str
    kind: str
    symbols: tuple[str, ...]
    synonyms: tuple[str, ...]
    flows: tuple[str, ...]
    in_sheets: tuple[str, ...] = ()


def _split(text: str) -> tuple[str, ...]:
    return tuple(part for part in text.split(";") if part)


@cache
def dictionary() -> Mapping[str, Label]:
    """All labels by key."""
    return {
        row["key"]: Label(
            row["key"], row["label"], row["role"], row["kind"],
            _split(row["symbols"]), _split(row["synonyms"]), _split(row["flows"]), _split(row.get("in_sheets") or ""),
        )
        for row in read_table("labels.csv")
    }  # fmt: skip


@cache
def _choices() -> Mapping[str, Mapping[str, str]]:
    table: dict[str, dict[str, str]] = {}
    for row in read_table("choices.csv"):
        for spelling in _split(row["spellings"]):
            table.setdefault(row["key"], {})[plain(spelling)] = row["choice"]
    return table


@cache
def choices(key: str) -> tuple[str, ...]:
    """The admissible choices of a row such as ``flow kind``."""
    return tuple(dict.fromkeys(_choices()[key].values()))


def plain(text: str) -> str:
    """A label without case, accents of spacing, and joints."""
    text = unicodedata.normalize("NFKC", text).replace("µ", "μ").strip().rstrip(":=").strip()
    return _JOINTS.sub(" ", text).strip().casefold()


def _symbol(text: str) -> str:
    """A symbol without separators, case kept."""
    text = text.replace("µ", "μ").replace("\u2206", "Δ").strip().rstrip(":=").strip()
    return _JOINTS.sub("", text).replace("{", "").replace("}", "")


@cache
def _index() -> tuple[dict[str, list[str]], dict[str, list[str]], dict[str, list[str]]]:
    """Names, symbols with case, symbols without case -> keys."""
    names: dict[str, list[str]] = {}
    exact: dict[str, list[str]] = {}
    loose: dict[str, list[str]] = {}
    for key, entry in dictionary().items():
        for name in (entry.label, *entry.synonyms):
            names.setdefault(plain(name), []).append(key)
        for symbol in entry.symbols:
            exact.setdefault(_symbol(symbol), []).append(key)
            loose.setdefault(_symbol(symbol).casefold(), []).append(key)
    return names, exact, loose


@cache
def split_unit(label: str) -> tuple[str, str]:
    """``Tube ID (mm)`` -> ``Tube ID``, ``mm``; a bracket that holds no unit is left off the label.

    ``Diameter (D)`` has its symbol in the bracket, although D alone might be a day.
    """
    found = _BRACKETED.search(label)
    if not found or found.start() == 0:
        return label, ""
    inside = found.group(1).strip()
    rest = label[: found.start()].strip().rstrip(",")
    entries = [dictionary()[key] for key in candidates(rest)]
    if any(entry.kind and quantities.unit_fits(inside, entry.kind) for entry in entries):
        return rest, inside
    symbol = any(_symbol(inside) in map(_symbol, entry.symbols) for entry in entries)
    return rest, "" if symbol or not inside or not quantities.kinds_for(inside) else inside


@cache
def candidates(label: str, sheets: bool = False) -> tuple[str, ...]:
    """All keys that a label may stand for, names before symbols; empty for an unknown label.

    What only other people's sheets state stands behind what case blocks know, unless ``sheets``.
    """
    names, exact, loose = _index()
    if plain(label).startswith(_REMARKS):
        return ("note",)
    places = (names.get(plain(label)), exact.get(_symbol(label)), loose.get(_symbol(label).casefold()))
    found = [tuple(dict.fromkeys(place)) for place in places if place]
    if sheets:
        return found[0] if found else ()
    own = [tuple(key for key in place if dictionary()[key].role != "sheet") for place in found]
    return next(filter(None, [*own, *found]), ())


_LONGEST_SYMBOL = 5


@cache
def _sheet_index() -> tuple[dict[str, list[str]], dict[str, list[str]], dict[str, list[str]]]:
    """As ``_index``, with what only other people's sheets write."""
    names, exact, loose = ({text: list(keys) for text, keys in table.items()} for table in _index())
    for key, entry in dictionary().items():
        for text in entry.in_sheets:
            names.setdefault(plain(text), [])
            if len(text) > _LONGEST_SYMBOL:
                names[plain(text)].append(key)
            else:
                exact.setdefault(_symbol(text), []).append(key)
                loose.setdefault(_symbol(text).casefold(), []).append(key)
    return names, exact, loose


@cache
def in_sheets(label: str) -> tuple[str, ...]:
    """All keys that a label of somebody's sheet may stand for: by its name, as a symbol, as one in any case."""
    return tuple(dict.fromkeys(key for place in _in_sheets(label) for key in place))


@cache
def as_written(label: str) -> frozenset[str]:
    """Those of ``in_sheets`` that need no other case: F, but not f."""
    names, symbols, _ = _in_sheets(label)
    return frozenset((*names, *symbols))


@cache
def _in_sheets(label: str) -> tuple[tuple[str, ...], tuple[str, ...], tuple[str, ...]]:
    names, exact, loose = _sheet_index()
    if plain(label).startswith(_REMARKS):
        return ("note",), (), ()
    places = (names.get(plain(label)), exact.get(_symbol(label)), loose.get(_symbol(label).casefold()))
    return tuple(tuple(place or ()) for place in places)


def settle(label: str, keys: Iterable[str], unit: str, flow: str | None) -> str:
    """The one key that fits the unit and the flow kind, or a refusal that names those that remain."""
    keys = list(keys)
    table = dictionary()
    if len(keys) > 1 and unit:
        keys = [k for k in keys if table[k].kind and quantities.unit_fits(unit, table[k].kind)] or keys
    if len(keys) > 1 and flow:
        keys = [k for k in keys if not table[k].flows or flow in table[k].flows] or keys
        own = [k for k in keys if flow in table[k].flows]
        keys = own if len(own) == 1 else keys
    if len(keys) > 1:
        meant = " or ".join(f'"{table[k].label}"' for k in keys)
        raise CaseRefused(f'"{label}" may be {meant}; write that instead')
    return keys[0]


def nearest(label: str, roles: tuple[str, ...] = ("stated", "choice", "text")) -> str:
    """The known label nearest to an unknown one."""
    from rapidfuzz import fuzz, process

    names = {
        name: entry.label
        for entry in dictionary().values()
        if entry.role in roles
        for name in (entry.label, *entry.synonyms)
    }
    match = process.extractOne(plain(label), list(names), scorer=fuzz.ratio)
    return names[match[0]]


def hint(label: str, roles: tuple[str, ...] = ("stated", "choice", "text")) -> str:
    """``the nearest is "velocity"``, or where the admissible labels are listed when nothing is near."""
    from rapidfuzz import fuzz

    near = nearest(label, roles)
    known = [near, *next(e.synonyms for e in dictionary().values() if e.label == near)]
    if max(fuzz.ratio(plain(label), plain(name)) for name in known) >= 60:
        return f'the nearest is "{near}"'
    return f'the nearest is "{near}", but none is near: =CF_LIST("labels") lists them'


def choice(key: str, text: str) -> str:
    """The admissible choice that a text means, or a refusal that lists them."""
    table = _choices()[key]
    found = table.get(plain(text))
    if found is None:
        listed = ", ".join(choices(key))
        raise UnknownName(f'"{text[:40]}" is no {dictionary()[key].label}; write one of: {listed}')
    return found


def find_all(text: str) -> tuple[str, ...]:
    """The keys that a label or derived quantity asked for by name or symbol may mean."""
    keys = candidates(text) or candidates(split_unit(text)[0])
    keys = tuple(k for k in keys if dictionary()[k].role != "note")
    if not keys:
        raise UnknownName(f'"{text[:60]}" is not known; {hint(text, ("stated", "choice", "text", "derived"))}')
    return keys


def find(text: str, flow: str | None = None) -> str:
    """The one key that a name or symbol means, or a refusal that names those that remain."""
    return settle(text, find_all(text), split_unit(text)[1], flow)
