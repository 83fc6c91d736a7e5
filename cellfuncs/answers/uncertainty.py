"""The ± of an answer from the ± of the rows, to first order, and how much of it each row makes.

Each uncertain row is moved by one standard uncertainty to both sides and the case solved anew; the variances of rows
that are uncertain by themselves add up (JCGM 100:2008, 5.1.2). Held against sampling in the tests.
"""

import math
from dataclasses import dataclass

from cellfuncs.answers.solve import Solution, solve
from cellfuncs.cases import labels
from cellfuncs.cases.vary import with_value
from cellfuncs.errors import CaseRefused, CellfuncsError


@dataclass(frozen=True)
class Uncertainty:
    """Standard uncertainty of a quantity [SI], and the part of its variance that each row makes, the largest first."""

    standard: float
    parts: tuple[tuple[str, float], ...]  # label, part

    def words(self) -> str:
        """Which rows matter, as text."""
        if not self.parts:
            return "no row with a ± matters for it"
        return ", ".join(f"{label} {100 * part:.3g} %" for label, part in self.parts[:6])


def uncertainty(solution: Solution, key: str) -> Uncertainty:
    """The uncertainty of a quantity of a solved case. Refuses a case without ±, and where a row cannot be moved."""
    rows = [
        (name, float(entry.value), entry.plus_minus) for name, entry in solution.case.stated.items() if entry.plus_minus
    ]
    if not rows:
        raise CaseRefused("no row has a ±; state standard uncertainties in the fourth column of the block")
    squares = []
    for name, value, spread in rows:
        ends = []
        for side in (spread, -spread):
            try:
                found = solve(with_value(solution.case, name, value + side)).value(key)
            except (CellfuncsError, ArithmeticError) as error:
                label = labels.dictionary()[name].label
                raise CaseRefused(f"{label} moved by its ±: {error}") from None
            ends.append(float(found))
        squares.append(((ends[0] - ends[1]) ** 2 / 4.0, labels.dictionary()[name].label))
    total = sum(square for square, _ in squares)
    parts = tuple((label, square / total) for square, label in sorted(squares, reverse=True) if square > 0)
    return Uncertainty(math.sqrt(total), parts)
