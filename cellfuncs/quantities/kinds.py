"""The kinds of quantity (``data/kinds.csv``)."""

import csv
from functools import cache
from pathlib import Path
from typing import NamedTuple

from ..errors import UnknownName
from .texts import shortened

DATA = Path(__file__).parent.parent / "data"
BASE = ("L", "M", "T", "Θ", "N", "I", "A")  # A is the plane angle: a turn is not a radian
NO_DIMENSION = (0,) * len(BASE)

Dimension = tuple[int, ...]


class Kind(NamedTuple):
    """One kind of quantity.

    ``minimum`` is the least value in SI that can be (None: any), ``zero_ok`` whether zero can be.
    """

    name: str
    words: str
    aliases: tuple[str, ...]
    symbol: str
    si_unit: str
    dimension: Dimension
    units: tuple[str, ...]
    example: str
    minimum: float | None
    zero_ok: bool
    source: str


class Unit(NamedTuple):
    """A unit text as read for a kind: SI = value * factor + offset; ``understood`` is its plain form."""

    factor: float
    offset: float
    kind: str
    understood: str


def read_dimension(text: str) -> Dimension:
    """``M L-1 T-2`` as exponents in the order of BASE; ``1`` is no dimension."""
    powers = dict.fromkeys(BASE, 0)
    for part in text.split():
        if part != "1":
            powers[part[0]] = int(part[1:] or 1)
    return tuple(powers.values())


def _load() -> dict[str, Kind]:
    with (DATA / "kinds.csv").open(encoding="utf-8", newline="") as file:
        return {
            row["name"]: Kind(
                name=row["name"],
                words=row["words"].split(";")[0],
                aliases=tuple(row["words"].split(";")[1:]),
                symbol=row["symbol"],
                si_unit=row["si_unit"],
                dimension=read_dimension(row["dimension"]),
                units=tuple(row["units"].split(";")),
                example=row["example"],
                minimum=float(row["minimum"]) if row["minimum"] else None,
                zero_ok=row["zero_ok"] == "yes",
                source=row["source"],
            )
            for row in csv.DictReader(file)
        }


KINDS: dict[str, Kind] = _load()


def _plain(text: str) -> str:
    return " ".join(text.replace("_", " ").replace("-", " ").split()).casefold()


@cache
def _index() -> dict[str, str]:
    """Plain name -> key; an own name goes before another kind's alias."""
    index = {}
    for kind in KINDS.values():
        for alias in kind.aliases:
            index.setdefault(_plain(alias), kind.name)
    for kind in KINDS.values():
        index[_plain(kind.words)] = kind.name
        index[_plain(kind.name)] = kind.name
    return index


def kind_key(text: str) -> str:
    """The key of a kind from its key, its words or another name of it, in any case.

    Raises
    ------
    UnknownName
        When no kind is so called; the text names the nearest.
    """
    if text in KINDS:
        return text
    index = _index()
    wanted = _plain(text[:200])
    if wanted in index:
        return index[wanted]
    from difflib import get_close_matches

    near = get_close_matches(wanted[:60], index, n=1, cutoff=0.5)
    hint = f'; the nearest is "{KINDS[index[near[0]]].words}"' if near else ""
    raise UnknownName(f'"{shortened(text)}" is no kind of quantity{hint}')


def kind_of(key: str) -> Kind:
    """The kind of a key or name."""
    return KINDS.get(key) or KINDS[kind_key(key)]


def example(kind: str) -> str:
    """A quantity as a user may type it, for messages: ``12 ft/s``."""
    return kind_of(kind).example
