"""The bibliography: one sorted list of keys (``data/sources.csv``) that all other data files point into."""

import csv
from functools import cache
from pathlib import Path

from .errors import UnknownName

DATA = Path(__file__).parent / "data"


@cache
def read_table(name: str) -> tuple[dict[str, str], ...]:
    """Rows of the data file `name` (``cellfuncs/data``), each a dict of texts.

    The rows are shared by all callers: read them, do not change them.
    """
    with open(DATA / name, encoding="utf-8", newline="") as file:
        return tuple(csv.DictReader(file))


@cache
def bibliography() -> dict[str, dict[str, str]]:
    """Key -> row of the bibliography (key, authors_year_title, doi_or_number)."""
    return {row["key"]: row for row in read_table("sources.csv")}


def cite(key: str) -> str:
    """Return the full reference for a bibliography key.

    Several keys parted by ";" give several references, parted alike.

    Raises
    ------
    UnknownName
        When a key is not in the bibliography.
    """
    return "; ".join(_cite_one(part.strip()) for part in key.split(";"))


def _cite_one(key: str) -> str:
    row = bibliography().get(key)
    if row is None:
        raise UnknownName(f'"{key}" is not in the bibliography')
    number = row["doi_or_number"]
    prefix = "doi:" if number.startswith("10.") else ""
    return row["authors_year_title"] + (f", {prefix}{number}" if number else "")
