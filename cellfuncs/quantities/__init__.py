"""Quantities: what a text means as a number with a unit, in SI.

A new spelling of a unit is one word in ``data/units.csv``, a new kind one row in ``data/kinds.csv``.

``kinds``        the kinds of quantity, with SI unit, dimension and usual units
``number_text``  numbers as people type them
``convert``      values to and from SI; remembers the units it has seen
``fitting``      the wanted kind settles which meaning of a unit text holds
``unit_text``    the closed and bounded reader: a text gives all that it may mean
``clean``        unit texts from workbooks as plain ones
``atoms``        the table of units that may stand in a unit text
"""

from .convert import (
    STANDARD_ATMOSPHERE,
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
from .kinds import KINDS, Kind, Unit, example, kind_key
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
