"""What a sheet states: labelled numbers with their cells, gathered into cases.

Whoever reads a sheet fills these in; the relations and the search for causes read nothing else.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from typing import Any

Graph = Mapping[str, tuple[str, ...]]
"""Every formula cell, ``Sheet1!C7``, and the cells that its formula uses directly (labelled or not)."""


@dataclass(frozen=True)
class Stated:
    """One number of a sheet.

    ``key`` is that of ``data/labels.csv``; ``value`` is the stored number in ``unit`` and ``si`` the same in SI;
    ``rounding`` is half of the last shown digit, in SI (0 where all digits are shown); ``refs`` are the cells that the
    formula uses directly, empty for a typed number.
    """

    key: str
    kind: str
    value: float
    unit: str
    si: float
    rounding: float
    cell: str
    label: str
    formula: str | None = None
    refs: tuple[str, ...] = ()

    @property
    def typed(self) -> bool:
        """Whether the number was typed or pasted, not computed in the sheet."""
        return self.formula is None


@dataclass
class SheetCase:
    """One operating point or calculation of a sheet.

    ``stated`` holds the numbers by key, each list in reading order. ``facts`` are what texts say:
    ``substance`` (also ``hot_substance``, ``cold_substance``), ``arrangement`` (countercurrent, cocurrent, crossflow,
    shell and tube), ``method`` (the name of a method), ``regime`` (laminar, turbulent), ``heating`` (heating,
    cooling), ``neglects`` (a list of terms by their names in term tables), and choices of case blocks by their keys
    (``section``, ``surface``, ``heated_walls`` …). ``fact_cells`` says where a fact stands; of several neglected terms
    each has its own, ``neglects viscous heating``.
    """

    name: str
    stated: dict[str, list[Stated]] = field(default_factory=dict)
    facts: dict[str, Any] = field(default_factory=dict)
    flow: str | None = None
    fact_cells: dict[str, str] = field(default_factory=dict)

    def all(self) -> Iterator[Stated]:
        """Every stated number, key by key."""
        for numbers in self.stated.values():
            yield from numbers

    def add(self, entry: Stated) -> None:
        """Put a number at the end of its key's list."""
        self.stated.setdefault(entry.key, []).append(entry)
