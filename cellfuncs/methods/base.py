"""What a method is, and the check of its range."""

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from cellfuncs.errors import OutOfRange

METHODS: dict[str, "Method"] = {}


@dataclass(frozen=True)
class Range:
    """Closed interval of one variable in which a method was published."""

    variable: str
    low: float = -math.inf
    high: float = math.inf

    def words(self) -> str:
        if self.low == -math.inf:
            return f"{self.variable} up to {self.high:g}"
        if self.high == math.inf:
            return f"{self.variable} from {self.low:g}"
        return f"{self.variable} {self.low:g} to {self.high:g}"


@dataclass(frozen=True)
class Method:
    """A published correlation.

    ``gives`` is what comes out: ``mean Nu``, ``local Nu`` or ``Darcy friction factor``. ``scatter`` is
    the published relative scatter. The function's parameters that carry a range have the names that
    ``inputs`` lists, in order.
    """

    name: str
    gives: str
    ranges: tuple[Range, ...]
    scatter: float
    property_temperature: str
    source: str
    function: Callable[..., Any]

    def outside(self, **variables: float) -> str:
        """What lies outside the range, in words; empty when all is inside."""
        missed = [
            f"{r.words()}, here {variables[r.variable]:.4g}"
            for r in self.ranges
            if r.variable in variables and not r.low <= variables[r.variable] <= r.high
        ]
        return "; ".join(missed)

    def check(self, allow: bool, **variables: float) -> str:
        """Refuse outside the range; with ``allow`` say instead what lies outside."""
        missed = self.outside(**variables)
        if missed and not allow:
            raise OutOfRange(
                f"{self.name} holds for {missed}; change the case, state a coefficient, "
                "or add the row: beyond range | allow"
            )
        return missed


def method(
    name: str,
    *,
    gives: str,
    ranges: tuple[Range, ...] = (),
    scatter: float,
    property_temperature: str,
    source: str,
) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Record a published correlation under its usual name; the function is returned unchanged."""

    def record(function: Callable[..., Any]) -> Callable[..., Any]:
        if name in METHODS:
            raise TypeError(f"method {name} is there already")
        METHODS[name] = Method(name, gives, ranges, scatter, property_temperature, source, function)
        return function

    return record
