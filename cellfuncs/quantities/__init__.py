"""Quantities: what a text means as a number with a unit, in SI.

A new spelling of a unit is one word in ``data/units.csv``, a new kind one row in ``data/kinds.csv``.

``kinds``        the kinds of quantity, with SI unit, dimension and usual units
``atoms``        the table of units that may stand in a unit text
``clean``        unit texts from workbooks as plain ones
``unit_text``    the closed and bounded reader: a text gives all that it may mean
``convert``      the wanted kind settles which meaning holds; values to and from SI
``number_text``  numbers as people type them
"""

from .convert import (
    STANDARD_ATMOSPHERE,
    Unit,
    check_physical,
    convert,
    from_pint,
    from_si,
    kinds_for,
    read_quantity,
    read_unit,
    to_si,
    unit_fits,
)
from .kinds import KINDS, Kind, example, kind_key
from .number_text import Reading, read_number

__all__ = [
    "KINDS",
    "STANDARD_ATMOSPHERE",
    "Kind",
    "Reading",
    "Unit",
    "check_physical",
    "convert",
    "example",
    "from_pint",
    "from_si",
    "kind_key",
    "kinds_for",
    "read_number",
    "read_quantity",
    "read_unit",
    "to_si",
    "unit_fits",
]
