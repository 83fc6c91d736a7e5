"""A table of the user's own as a substance: a column of temperatures, a column for each property."""

import math
from collections.abc import Mapping, Sequence
from itertools import pairwise

from ..errors import NoModel, NumberRefused, OutOfRange
from .curve import Curve
from .properties import PROPERTIES, property_key
from .relations import EXPONENTIAL, Related, Relation
from .state import SIGNED

SOURCE = "own-table"
FEWEST = 2


class UserTable(Related):
    """A substance as the user tabled it. What phase it is the table does not say, and pressure changes nothing."""

    state = "as tabled"
    p_max = None

    def has(self, what: str) -> bool:
        """Whether a property stands in the table or follows from it."""
        return self._has(what)

    def has_column(self, what: str) -> bool:
        """Whether a property stands in the table itself."""
        return what in self._relations

    def _check_phase(self, phase: str | None) -> None:
        """The table holds for the phase that its user means."""

    def _no_model(self, key: str) -> NoModel:
        return NoModel(f"the table has no column from which the {PROPERTIES[key].words} follows")


def from_table(
    temperatures: Sequence[float], columns: Mapping[str, Sequence[float | None]], name: str = "the table"
) -> UserTable:
    """Build a substance from a table.

    Parameters
    ----------
    temperatures [K] : rising or falling, at least two
    columns : property (any name that ``property_key`` knows) -> values [SI] for these temperatures, None
        where there is none

    Between the rows a monotone cubic is taken, of the logarithm for viscosities and vapour pressure; outside
    them every question is refused. Raises NumberRefused or OutOfRange where the table is none, UnknownName for
    a column that is no property.
    """
    temperatures = [float(t) for t in temperatures]
    if len(temperatures) < FEWEST:
        raise NumberRefused("a table of properties needs at least two rows of values")
    if not columns:
        raise NumberRefused("a table of properties needs a column beside the temperature")
    if not all(math.isfinite(t) and t > 0 for t in temperatures):
        raise OutOfRange("a temperature of the table is not above absolute zero")
    rising = temperatures[1] > temperatures[0]
    order = temperatures if rising else temperatures[::-1]
    if any(right <= left for left, right in pairwise(order)):
        raise OutOfRange("the temperatures of a table must rise or fall from row to row, none twice")
    relations: dict[str, Relation] = {}
    for title, values in columns.items():
        key = property_key(title)
        if key in relations:
            raise NumberRefused(f"the {PROPERTIES[key].words} stands twice in the table")
        relations[key] = _column(key, order, list(values) if rising else list(values)[::-1])
    return UserTable(name, "own table", relations, SOURCE)


def _column(key: str, temperatures: list[float], values: list[float | None]) -> Relation:
    words = PROPERTIES[key].words
    if len(values) != len(temperatures):
        raise NumberRefused(f"the column of the {words} is not as long as that of the temperature")
    points = [(t, float(v)) for t, v in zip(temperatures, values, strict=True) if v is not None]
    if len(points) < FEWEST:
        raise NumberRefused(f"the column of the {words} needs at least two values")
    for temperature, value in points:
        if not math.isfinite(value) or (value <= 0 and key not in SIGNED):
            raise OutOfRange(f"a {words} of {value:g} at {temperature:g} K in the table is not above zero")
    x, y = zip(*points, strict=True)
    return Relation(Curve(x, y, key in EXPONENTIAL), x[0], x[-1], SOURCE, "monotone cubic between the rows")
