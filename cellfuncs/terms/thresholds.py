"""Limits of the premises (``data/premises.csv``): one source for the states, the words and other files."""

from dataclasses import dataclass
from functools import cache

from cellfuncs.sources import read_table

HOLDS, STRAINED, FAILS = "holds", "strained", "fails"
NOT_JUDGED = "not judged"


@dataclass(frozen=True)
class Threshold:
    """Where a premise is strained and where it fails; low figures are bad where ``fails`` is below ``strained``."""

    name: str
    figure: str
    strained: float
    fails: float
    exponent: float
    source: str

    @property
    def of_tolerance(self) -> bool:
        """Whether the limits are multiples of the case's tolerance."""
        return "tolerance" in self.figure

    def state(self, value: float, scale: float = 1.0) -> str:
        """The state of a figure; both limits are multiplied by ``scale``."""
        sign = -1.0 if self.fails < self.strained else 1.0
        if sign * value > sign * self.fails * scale:
            return FAILS
        return STRAINED if sign * value > sign * self.strained * scale else HOLDS


@cache
def threshold(name: str) -> Threshold:
    """The limits of a premise by its name."""
    row = next(row for row in read_table("premises.csv") if row["name"] == name)
    numbers = (float(row[column]) if row[column] else float("nan") for column in ("strained", "fails", "exponent"))
    return Threshold(name, row["figure"], *numbers, row["source"])
