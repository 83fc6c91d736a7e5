"""The catalogue of cell functions.

``cell_function`` records a specification and returns the function unchanged; the specification is
checked when it is made. ``CellFunction.call`` takes what a host hands over and returns a float, a
text or rows of these; it never raises and never returns None, nan or infinity.
"""

import inspect
import keyword
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cache
from importlib import import_module
from typing import Any

from cellfuncs import quantities
from cellfuncs.cells.call import Answer, Argument, caller, reader
from cellfuncs.sources import read_table

__all__ = ["Answer", "Argument", "CellFunction", "cell_function", "functions"]

FAMILIES = ("Quantities", "Substances", "Groups", "Cases", "Terms", "Methods", "Checks")
MODULES = ("quantity", "substance", "group", "case", "term", "limit", "without", "premise", "method", "check")
RETURNS = ("quantity", "number", "text", "table")
LONGEST_HELP = 255
LONGEST_NAMES = 254  # number of arguments plus the length of their names, for the function wizard


@dataclass(frozen=True)
class CellFunction:
    """One entry of the catalogue."""

    name: str
    family: str
    summary: str
    arguments: tuple[Argument, ...]
    returns: str
    kind: str | None
    source: str
    example: str
    function: Callable[..., Any]
    call: Callable[..., Any]


@cache
def nomenclature() -> Mapping[str, Mapping[str, str]]:
    """Argument name -> kind, form, meaning of zero, help (data/arguments.csv)."""
    return {row["name"]: row for row in read_table("arguments.csv")}


@cache
def reserved() -> frozenset[str]:
    """Argument names that kill a whole module in one of the hosts, or are no names in Python."""
    return frozenset(keyword.kwlist) | {row["name"] for row in read_table("reserved_names.csv")}


_functions: dict[str, CellFunction] = {}


@cache
def functions() -> Mapping[str, CellFunction]:
    """All cell functions by name, in the order of the families."""
    for module in MODULES:
        import_module(f"cellfuncs.cells.{module}")
    order = {family: k for k, family in enumerate(FAMILIES)}
    ordered = sorted(_functions.values(), key=lambda f: order[f.family])
    return {function.name: function for function in ordered}


def cell_function(
    name: str,
    *,
    family: str,
    summary: str,
    returns: str,
    source: str,
    example: str,
    kind: str | None = None,
    takes: Mapping[str, str] | None = None,
    by_array: Callable[..., Any] | None = None,
) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Record the decorated function as the cell function ``name``.

    ``takes`` maps an argument to the row of arguments.csv that describes it, where the names differ.
    ``by_array`` computes a whole range at once (arrays in, array out); without it a range is
    walked cell by cell. A function that returns a quantity has ``unit`` as its last argument,
    which it does not see; it returns SI, of ``kind`` or wrapped in ``Answer``.
    """

    def record(function: Callable[..., Any]) -> Callable[..., Any]:
        arguments = _arguments(function, name, takes or {}, with_unit=returns == "quantity")
        entry = CellFunction(
            name, family, summary, arguments, returns, kind, source, example, function,
            caller(name, function, arguments, _readers(arguments, takes or {}), returns, kind, by_array),
        )  # fmt: skip
        _check(entry)
        _functions[name] = entry
        return function

    return record


def _arguments(function: Any, name: str, takes: Mapping[str, str], with_unit: bool) -> tuple[Argument, ...]:
    found = []
    for parameter in inspect.signature(function).parameters.values():
        row = nomenclature().get(takes.get(parameter.name, parameter.name))
        if row is None:
            raise TypeError(f"{name}: argument {parameter.name} is not in data/arguments.csv")
        optional = parameter.default is not parameter.empty
        if optional and row["zero"] in ("value", "signed"):
            raise TypeError(f"{name}: {parameter.name} is optional, but zero means something")
        found.append(Argument(parameter.name, row["help"], row["kind"] or None, row["form"], optional))
    if with_unit:
        row = nomenclature()["unit"]
        found.append(Argument("unit", row["help"], None, "unit", True))
    return tuple(found)


def _check(entry: CellFunction) -> None:
    if entry.family not in FAMILIES or entry.returns not in RETURNS:
        raise TypeError(f"{entry.name}: unknown family or kind of answer")
    if entry.name in _functions or not entry.name.startswith("CF_") or not entry.name.isupper():
        raise TypeError(f"{entry.name}: taken, or not CF_ and capitals")
    if not entry.source or not entry.example:
        raise TypeError(f"{entry.name}: needs a source and an example")
    names = [argument.name for argument in entry.arguments]
    if len({n.casefold() for n in names}) < len(names):
        raise TypeError(f"{entry.name}: two arguments differ only by case")
    for argument in entry.arguments:
        if argument.name.casefold() in reserved() or not argument.name.isidentifier():
            raise TypeError(f"{entry.name}: argument name {argument.name} is reserved in a host")
        if not 0 < len(argument.help) <= LONGEST_HELP:
            raise TypeError(f"{entry.name}: help of {argument.name} is missing or too long")
        if argument.kind and argument.kind not in quantities.KINDS:
            raise TypeError(f"{entry.name}: unknown kind {argument.kind}")
    if not 0 < len(entry.summary) <= LONGEST_HELP:
        raise TypeError(f"{entry.name}: summary is missing or too long")
    if len(names) + sum(map(len, names)) > LONGEST_NAMES:
        raise TypeError(f"{entry.name}: argument names too long for the function wizard")
    optional = [argument.optional for argument in entry.arguments]
    if optional != sorted(optional):
        raise TypeError(f"{entry.name}: an optional argument stands before a required one")


def _readers(arguments: tuple[Argument, ...], takes: Mapping[str, str]) -> tuple[Callable[[Any], Any], ...]:
    rows = nomenclature()
    return tuple(reader(a, rows[takes.get(a.name, a.name)]) for a in arguments)
