"""What a relation is: one quantity from others, declared once and solved for whichever is wanted.

A relation is a small function whose parameters are keys of ``data/labels.csv`` (SI floats); a parameter with a
default may be missing. The parameter ``case`` receives the case itself, for what texts say. Names of
``STAND_INS`` stand for one of several labels, in the order in which they are looked for.
"""

import inspect
import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from cellfuncs.cases import labels
from cellfuncs.checks.stated import SheetCase

RELATIONS: list["Relation"] = []

# relative: what constants written with three or four digits make of a definition (3.14, 9.81, 0.287)
DEFINITION = 0.005

_ROUND = ("hydraulic_diameter", "diameter")
_LENGTHS: Mapping[str | None, tuple[str, ...]] = {
    "duct": (*_ROUND, "gap"),
    "plate": ("length",),
    "cylinder": ("diameter", "outside_diameter"),
    "sphere": ("diameter",),
    "jet": ("diameter",),
    "bank": ("diameter", "outside_diameter"),
    "bed": ("particle_diameter",),
    "free": ("length", "diameter", "outside_diameter", "gap", "characteristic_length"),
    "enclosure": ("gap",),
    "gap": ("gap",),
    "body": ("characteristic_length", "length"),
    None: (*_ROUND, "length", "gap", "characteristic_length", "outside_diameter"),
}
STAND_INS: Mapping[str, tuple[str, ...]] = {
    "bore": _ROUND,
    "span": ("temperature_difference", "driving_difference"),
    "any_drop": ("total_pressure_drop", "pressure_drop"),
    "any_coefficient": ("coefficient", "inside_coefficient", "outside_coefficient"),
    "any_difference": ("log_mean_difference", "temperature_difference", "driving_difference"),
    "bath": ("stream_temperature", "ambient_temperature", "surroundings_temperature"),
    "gas_temperature": ("property_temperature", "stream_temperature", "inlet_temperature"),
    "any_area": ("area", "surface_area"),
    "any_overall": ("overall_coefficient", "clean_coefficient"),
    "any_diffusivity": ("solid_diffusivity", "diffusivity"),
}
STREAMS = ("hot_", "cold_")
# two labels of one quantity
_SAME: Mapping[str, tuple[str, ...]] = {"area": ("area", "surface_area"), "surface_area": ("surface_area", "area")}


@dataclass(frozen=True)
class Wrong:
    """A known wrong way to the same quantity: the code of the cause, its words, and the function."""

    code: str
    words: str
    function: Callable[..., float]


@dataclass(frozen=True)
class Admissible:
    """One of several answers, with the words that say which and its relative scatter.

    With a ``code`` it is what a known mistake gives; ``loose`` ones (a spread of methods) count only where no known
    mistake fits better. ``assumed`` is what a sheet may take for granted even where it computes the rest.
    """

    value: float
    words: str
    scatter: float
    code: str = ""
    loose: bool = False
    assumed: bool = False


@dataclass(frozen=True)
class Relation:
    """``gives`` from ``needs``; ``scatter`` is the relative spread that belongs to it beyond roundings."""

    name: str
    gives: str
    needs: tuple[str, ...]
    optional: tuple[str, ...]
    function: Callable[..., Any]
    scatter: float
    source: str
    flows: tuple[str, ...] = ()
    when: Callable[[SheetCase], bool] | None = None
    wrong: tuple[Wrong, ...] = ()
    renamed: Mapping[str, str] | None = None
    takes_case: bool = False
    derives: bool = True

    def keys_for(self, need: str, case: SheetCase) -> tuple[str, ...]:
        """The labels that may fill a parameter in this case, the likeliest first."""
        name = (self.renamed or {}).get(need, need)
        if name == "group_length":
            return _LENGTHS.get(case.flow, _LENGTHS[None])
        return STAND_INS.get(name, (name,))

    def applies(self, case: SheetCase) -> bool:
        """Whether flow kind and facts allow it."""
        if self.flows and case.flow and case.flow not in self.flows:
            return False
        return self.when is None or self.when(case)

    def answer(self, case: SheetCase, values: Mapping[str, float]) -> Any:
        """The quantity from the others: a float, or a list of admissible answers."""
        return self.function(case=case, **values) if self.takes_case else self.function(**values)


def relation(
    name: str,
    gives: str,
    *,
    scatter: float = 0.0,
    source: str = "definition",
    flows: tuple[str, ...] = (),
    when: Callable[[SheetCase], bool] | None = None,
    wrong: tuple[tuple[str, str, Callable[..., float]], ...] = (),
    streams: bool = False,
    derives: bool = True,
) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Declare a relation; with ``streams`` also for the hot and the cold stream of an exchanger.

    One that holds only for a shape nobody may have meant does not ``derives``: it is tried on stated numbers, but no
    number that is not stated follows from it.
    """

    def record(function: Callable[..., Any]) -> Callable[..., Any]:
        parameters = inspect.signature(function).parameters
        needs = tuple(k for k, p in parameters.items() if p.default is p.empty and k != "case")
        optional = tuple(k for k, p in parameters.items() if p.default is not p.empty)
        ways = tuple(Wrong(*way) for way in wrong)
        takes_case = "case" in parameters
        rest = (needs, optional, function, scatter, source, flows, when, ways)
        for key in _SAME.get(gives, (gives,)):
            RELATIONS.append(Relation(name, key, *rest, None, takes_case, derives))
        for prefix in STREAMS if streams else ():
            own = {k: prefix + k for k in (*needs, *optional, gives) if prefix + k in labels.dictionary()}
            words = f"{name}, {prefix.rstrip('_')} stream"
            RELATIONS.append(Relation(words, own.get(gives, gives), *rest, own, takes_case, derives))
            if gives in own:
                # the duty of either stream is the duty
                RELATIONS.append(Relation(words, gives, *rest, {**own, gives: gives}, takes_case, derives))
        return function

    return record


@cache
def giving() -> Mapping[str, tuple[Relation, ...]]:
    """The relations by the label that they give."""
    table: dict[str, list[Relation]] = {}
    for entry in RELATIONS:
        table.setdefault(entry.gives, []).append(entry)
    return {key: tuple(entries) for key, entries in table.items()}


def solve(function: Callable[[float], float], target: float, start: float) -> float | None:
    """The x near ``start`` for which ``function`` gives ``target``; None where there is none.

    Newton on logarithms where all is positive, so that products of powers take one step; a bracketed root where
    that fails.
    """
    logs = start > 0 and target > 0
    x = start
    try:
        for _ in range(40):
            y = function(x)
            if logs and y <= 0:
                break
            step = 1e-5 * (abs(x) or 1.0)
            y_beside = function(x + step)
            if abs(y - target) <= 1e-11 * abs(target or 1.0):
                return x
            if logs:
                slope = (math.log(y_beside) - math.log(y)) / (math.log(x + step) - math.log(x))
                x *= math.exp(max(-8.0, min(8.0, (math.log(target) - math.log(y)) / slope)))
            else:
                x += (target - y) * step / (y_beside - y)
        close = abs(function(x) - target) <= 1e-8 * abs(target or 1.0)
        return x if close else _bracketed(function, target, start)
    except (ArithmeticError, ValueError):
        return _bracketed(function, target, start)


def _bracketed(function: Callable[[float], float], target: float, start: float) -> float | None:
    from scipy.optimize import brentq

    def beyond(x: float) -> float:
        try:
            return function(x) - target
        except (ArithmeticError, ValueError):
            return math.nan

    low = high = start
    for _ in range(24):
        low, high = low / 1.6, high * 1.6
        ends = beyond(low), beyond(high)
        if ends[0] * ends[1] < 0:
            return float(brentq(beyond, low, high, xtol=1e-14, rtol=1e-12))
    return None
