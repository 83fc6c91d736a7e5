"""What a method is, the check of its range, and how it is evaluated by name."""

import inspect
import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cached_property, lru_cache
from typing import Any

from cellfuncs.errors import CellfuncsError, NumberRefused, OutOfRange
from cellfuncs.sources import read_table

METHODS: dict[str, "Method"] = {}
# what ranges speak of and follows from inputs: symbol -> (names of the inputs, function of them)
_FOLLOWS: dict[str, tuple[tuple[str, ...], Callable[..., Any]]] = {}

# what a method may give; the words that tables show
GIVES = (
    "mean Nu",
    "local Nu",
    "mean coefficient",
    "heat flux",
    "Darcy friction factor",
    "pressure drop",
    "pressure gradient",
    "loss coefficient",
    "drag coefficient",
    "local friction coefficient",
    "recovery factor",
    "reference temperature",
    "reference enthalpy",
    "factor",
    "efficiency",
    "effectiveness",
    "temperature ratio",
    "resistance",
    "length",
    "transition Reynolds number",
)
# far beyond its range a formula may give less than nothing of these
_NEVER_NEGATIVE = frozenset(
    ("mean Nu", "local Nu", "mean coefficient", "Darcy friction factor", "pressure gradient", "drag coefficient")
)
# the temperatures at which authors meant properties to be taken
PROPERTY_TEMPERATURES = (
    "mean bulk",
    "film",
    "stream",
    "wall",
    "inlet",
    "mean of the walls",
    "reference",
    "saturation",
    "vapour film",
    "solid",
    "none",
)


@dataclass(frozen=True)
class Input:
    """A parameter that methods may have: its symbol, its words, its sign, and its kind where it has a dimension."""

    parameter: str
    symbol: str
    words: str
    sign: str  # positive, zero (zero or above), any, choice
    kind: str


@lru_cache(maxsize=1)
def inputs() -> Mapping[str, Input]:
    """Every parameter of every method, by its name in Python (``data/method_inputs.csv``)."""
    found = {}
    for row in read_table("method_inputs.csv"):
        found[row["parameter"]] = Input(row["parameter"], row["symbol"], row["words"], row["sign"], row["kind"])
    return found


@lru_cache(maxsize=32)
def choices_of(parameter: str) -> tuple[str, ...]:
    """The words that methods know of a choice, in the order of the library; empty where they are free (fittings)."""
    found = (word for m in METHODS.values() for word in m.where.get(parameter, ()))
    return tuple(dict.fromkeys(found))


@dataclass(frozen=True)
class Range:
    """Closed interval of one variable in which a method was published; ``variable`` is an input's symbol."""

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

    ``gives`` is one of ``GIVES``. ``scatter`` is the published relative scatter. ``flows`` are the flow kinds of
    cases it answers for, ``where`` the choices that must hold (``{"section": ("tube",)}``). ``length`` says what
    length Nu is on. ``warning`` is a line that goes with every answer. The parameters of ``function`` have the
    names of ``data/method_inputs.csv``; ranges name their variables by the symbols there.
    """

    name: str
    gives: str
    ranges: tuple[Range, ...]
    scatter: float
    property_temperature: str
    source: str
    function: Callable[..., Any]
    flows: tuple[str, ...] = ()
    where: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    length: str = ""
    warning: str = ""

    @cached_property
    def inputs(self) -> tuple[str, ...]:
        """Names of the function's parameters, in order."""
        return tuple(inspect.signature(self.function).parameters)

    @cached_property
    def needed(self) -> tuple[str, ...]:
        """The parameters that have no default."""
        parameters = inspect.signature(self.function).parameters.values()
        return tuple(p.name for p in parameters if p.default is p.empty)

    @property
    def summary(self) -> str:
        """What it is, in one sentence."""
        return (self.function.__doc__ or "").strip().split("\n")[0]

    def applies(self, **choices: str) -> bool:
        """Whether nothing that is known of the case contradicts what the method is for."""
        return all(choices.get(key) is None or choices[key] in allowed for key, allowed in self.where.items())

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

    def evaluate(self, given: Mapping[str, Any], allow: bool = False) -> Any:
        """The answer for inputs by their names in Python (floats, choices, or arrays of one shape).

        Every number is checked: finite, of the sign that the input has, inside the range unless ``allow``.
        Further variables that only a range speaks of may be given too. Raises NumberRefused or OutOfRange.
        """
        missing = [inputs()[name].words for name in self.needed if given.get(name) is None]
        if missing:
            raise NumberRefused(f"{self.name} needs {' and '.join(missing)}")
        known = {name: value for name, value in given.items() if value is not None}
        entries, extremes = inputs(), {}
        for name, value in known.items():
            if entries[name].sign != "choice":
                extremes[name] = ends = _extremes(value)
                _check_sign(entries[name], *ends)
        if self.ranges:
            self._check_range(known, extremes, allow)
        taken = {name: known[name] for name in self.inputs if name in known}
        found, (low, _) = _finite(self.function, taken, f"{self.name} has no finite value there")
        if self.gives in _NEVER_NEGATIVE and low < 0:
            raise NumberRefused(f"{self.name} has no value there, its formula gives {low:.4g}")
        return found

    def _check_range(self, known: Mapping[str, Any], extremes: Mapping[str, tuple[float, float]], allow: bool) -> None:
        by_symbol = {inputs()[name].symbol: ends for name, ends in extremes.items()}
        worst = {}
        for r in self.ranges:
            ends = by_symbol.get(r.variable)
            if ends is None and r.variable in _FOLLOWS:
                names, function = _FOLLOWS[r.variable]
                if all(name in known for name in names):
                    refusal = f"{self.name} has no finite value of {r.variable} there"
                    ends = _finite(function, {name: known[name] for name in names}, refusal)[1]
            if ends is not None:
                worst[r.variable] = ends[0] if ends[0] < r.low else ends[1]
        self.check(allow, **worst)


def follows(symbol: str) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Record how a variable that ranges speak of follows from inputs, where a case does not hand it over itself."""

    def record(function: Callable[..., Any]) -> Callable[..., Any]:
        _FOLLOWS[symbol] = (tuple(inspect.signature(function).parameters), function)
        return function

    return record


def following(symbol: str, get: Callable[[str], Any]) -> float | None:
    """A variable of a range from the inputs it follows from, by what hands them over; None where one is not known."""
    if symbol not in _FOLLOWS:
        return None
    names, function = _FOLLOWS[symbol]
    given = [get(name) for name in names]
    return None if any(value is None for value in given) else function(*given)


@follows("Pe")
def _peclet(reynolds: Any, prandtl: Any) -> Any:
    return reynolds * prandtl


def _finite(function: Callable[..., Any], taken: Mapping[str, Any], refusal: str) -> tuple[Any, tuple[float, float]]:
    """The function's value, and its smallest and largest; beyond its range a formula may have none."""
    try:
        if all(isinstance(value, (float, int, str)) for value in taken.values()):
            found = function(**taken)
            if not isinstance(found, complex) and found - found == 0:
                return found, (found, found)
        else:
            import numpy as np

            with np.errstate(all="ignore"):
                found = function(**taken)
            low, high = ends = _extremes(found)
            if low - low == 0 and high - high == 0:
                return found, ends
    except (ZeroDivisionError, OverflowError, ValueError) as fault:
        if isinstance(fault, CellfuncsError):
            raise
    raise NumberRefused(refusal)


def _extremes(value: Any) -> tuple[float, float]:
    """The smallest and the largest of a number or an array; both NaN where one of its numbers is."""
    if isinstance(value, (float, int)):
        return value, value
    if not value.size:
        raise NumberRefused("a column without numbers is given")
    smallest, largest = _reductions()
    return float(smallest(value, None)), float(largest(value, None))


@lru_cache(maxsize=1)
def _reductions() -> tuple[Callable[..., Any], Callable[..., Any]]:
    """What finds the smallest and the largest with one call each, without the detour of an array's own methods."""
    import numpy

    return numpy.minimum.reduce, numpy.maximum.reduce


def _check_sign(known: Input, low: float, high: float) -> None:
    if low - low != 0 or high - high != 0:
        raise NumberRefused(f"{known.words} is not a finite number")
    if (known.sign == "positive" and low <= 0) or (known.sign == "zero" and low < 0):
        least = "above" if known.sign == "positive" else "at least"
        raise NumberRefused(f"{known.words} is {low:.4g}; it must be {least} zero")


def method(
    name: str,
    *,
    gives: str,
    ranges: tuple[Range, ...] = (),
    scatter: float,
    property_temperature: str,
    source: str,
    flows: tuple[str, ...] = (),
    where: Mapping[str, tuple[str, ...]] | None = None,
    length: str = "",
    warning: str = "",
) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Record a published correlation under its usual name; the function is returned unchanged."""

    def record(function: Callable[..., Any]) -> Callable[..., Any]:
        if name in METHODS:
            raise TypeError(f"method {name} is there already")
        if gives not in GIVES or property_temperature not in PROPERTY_TEMPERATURES:
            raise TypeError(f"method {name}: {gives} or {property_temperature} is no word of the list")
        METHODS[name] = Method(
            name, gives, ranges, scatter, property_temperature, source, function, flows, where or {}, length, warning
        )
        return function

    return record
