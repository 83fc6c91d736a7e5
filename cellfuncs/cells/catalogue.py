"""The catalogue of cell functions, and how one call of a cell runs.

``cell_function`` records a specification and returns the function unchanged; the specification is
checked when it is made. ``CellFunction.call`` takes what a host hands over and returns a float, a
text or rows of these; it never raises and never returns None, nan or infinity.
"""

import csv
import inspect
import keyword
import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cache
from importlib import import_module, resources
from typing import Any

from cellfuncs import quantities
from cellfuncs.cells import convert, faults
from cellfuncs.errors import CellfuncsError, OutOfRange

FAMILIES = ("Quantities", "Substances", "Groups", "Cases", "Terms")
MODULES = ("quantity", "substance", "group", "case", "term")
RETURNS = ("quantity", "number", "text", "table")
LONGEST_HELP = 255
LONGEST_NAMES = 254  # number of arguments plus the length of their names, for the function wizard

# names that kill a whole module in one of the hosts (VBA keywords, UNO IDL keywords, xlwings)
RESERVED = frozenset(
    keyword.kwlist
    + """any as boolean byref byte byval call caller case char close const context currency date debug declare
    default dim do double each else elseif empty end enum erase error event exit explicit false fixed float for
    friend from function get global go goto hyper if implements in inout input integer interface is lbound len
    let lib like line lock long loop lset me method mid mod module name new next not nothing null object on open
    option optional or out output paramarray preserve print private property public put raises raiseevent
    redim rem rset seek select sequence service set short single singleton spc static step stop string struct
    sub tab then to true type typedef typeof union unsigned until variant void wend while width with withevents
    write xor""".split()
)


@dataclass(frozen=True)
class Argument:
    """One argument of a cell function: its help, and the kind of quantity where it is one."""

    name: str
    help: str
    kind: str | None
    form: str
    optional: bool


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


@dataclass(frozen=True)
class Answer:
    """An answer in SI whose kind is only known when it is there."""

    value: Any
    kind: str


@cache
def nomenclature() -> Mapping[str, Mapping[str, str]]:
    """Argument name -> kind, form, meaning of zero, help (data/arguments.csv)."""
    text = resources.files("cellfuncs").joinpath("data/arguments.csv").read_text("utf-8")
    return {row["name"]: row for row in csv.DictReader(text.splitlines())}


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
            _caller(name, function, arguments, returns, kind, by_array, takes or {}),
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
        if argument.name.casefold() in RESERVED or not argument.name.isidentifier():
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


def _reader(argument: Argument, row: Mapping[str, str]) -> Callable[[Any], Any]:
    """The reader of convert.py that belongs to the form of an argument."""
    if argument.form == "quantity":
        return convert.QuantityReader(row["kind"], row["zero"], argument.optional)
    if argument.form in ("text", "unit"):
        return convert.TextReader(argument.optional, argument.help)
    if argument.form == "block":
        return convert.read_block
    if argument.form == "range":
        return convert.read_range
    if argument.form == "value":
        return lambda value: value  # read by the function itself, with its unit
    raise TypeError(f"unknown form {argument.form}")


def _caller(
    name: str,
    function: Callable[..., Any],
    arguments: tuple[Argument, ...],
    returns: str,
    kind: str | None,
    by_array: Callable[..., Any] | None,
    takes: Mapping[str, str],
) -> Callable[..., Any]:
    rows = nomenclature()
    readers = tuple(_reader(a, rows[takes.get(a.name, a.name)]) for a in arguments)
    names = tuple(a.name for a in arguments)
    parameters = inspect.signature(function).parameters
    defaults = tuple(parameters[n].default if n in parameters else None for n in names)
    count = len(arguments)
    required = sum(not a.optional for a in arguments)
    quantity = returns == "quantity"
    ranges = any(a.form in ("quantity", "text", "unit") for a in arguments) and returns != "table"
    first = names[0] if names else name
    Grid = convert.Grid

    def call(*given: Any) -> Any:
        k = 0
        try:
            if len(given) > count:
                return faults.fault(name, f"takes at most {count} arguments; {len(given)} are given")
            values = []
            has_range = False
            for value in given:
                value = readers[k](value)
                if type(value) is Grid:
                    has_range = True
                elif value is None:
                    value = defaults[k]
                values.append(value)
                k += 1
            if k < required:
                return faults.fault(names[k], f"is missing; {arguments[k].help}")
            if has_range and ranges:
                return _over_range(function, by_array, values, names, kind, quantity)
            k = 0
            if quantity:
                unit = values.pop() if len(values) == count else None
                return _finish(function(*values), kind, unit)
            return _settle(function(*values))
        except convert.Handed as handed:
            return str(handed)
        except _UnitWanted as refused:
            return faults.from_error(refused.error, "unit")
        except Exception as error:
            return faults.from_error(error, names[k] if k < count else first)

    call.__name__ = name
    return call


class _UnitWanted(Exception):
    """Wraps a refusal of the unit wanted, so that the cell names ``unit``."""

    def __init__(self, error: CellfuncsError):
        self.error = error


def _finish(result: Any, kind: str | None, unit: str | None) -> Any:
    """A quantity in the unit wanted."""
    if type(result) is Answer:
        result, kind = result.value, result.kind
    if unit is not None and isinstance(result, (int, float)):
        try:
            result = quantities.from_si(result, unit, kind)
        except CellfuncsError as error:
            raise _UnitWanted(error) from None
    return _settle(result)


def _settle(result: Any) -> Any:
    """What may stand in cells: finite floats and short texts."""
    if type(result) is float:
        if result - result == 0.0:
            return result
        raise OutOfRange("the result is not a finite number; look at the size of the inputs")
    if type(result) is str:
        return faults.clip(result)
    if isinstance(result, (list, tuple)):
        return [[_settle(cell) for cell in row] for row in result]
    if isinstance(result, (bool, int)) or hasattr(result, "__float__"):
        return _settle(float(result))
    raise TypeError(f"no answer for a cell: {type(result).__name__}")


def _over_range(
    function: Callable[..., Any],
    by_array: Callable[..., Any] | None,
    values: list[Any],
    names: tuple[str, ...],
    kind: str | None,
    quantity: bool,
) -> list[list[Any]]:
    """One call over ranges: as arrays where the function can, cell by cell otherwise."""
    grids = [value for value in values if type(value) is convert.Grid]
    shape = convert.common_shape(grids)
    unit = None
    if quantity and len(values) == len(names):
        unit = values.pop()
    answers = None
    if by_array is not None and type(unit) is not convert.Grid and not any(grid.faults for grid in grids):
        answers = _by_array(by_array, values, shape, kind, unit)
    if answers is not None:
        return answers
    rows: list[list[Any]] = [[None] * shape[1] for _ in range(shape[0])]
    for i, j in convert.positions(shape):
        rows[i][j] = _one_of_range(function, values, names, (i, j), kind, unit, quantity)
    return rows


def _by_array(by_array: Any, values: list[Any], shape: Any, kind: Any, unit: Any) -> list[list[Any]] | None:
    """The answers computed as arrays, or None where a single cell has something to say."""
    import numpy as np

    arrays = [
        (value.rows if value.rows and isinstance(value.rows[0][0], str) else value.array())
        if type(value) is convert.Grid
        else value
        for value in values
    ]
    try:
        with np.errstate(all="ignore"):
            result = by_array(*arrays)
            if type(result) is Answer:
                result, kind = result.value, result.kind
            if unit is not None:
                if not kind:
                    return None
                result = quantities.from_si(result, unit, kind)
    except CellfuncsError:
        return None
    result = np.broadcast_to(result, shape)
    if not np.isfinite(result).all():
        return None
    return result.tolist()


def _one_of_range(
    function: Any, values: list[Any], names: tuple[str, ...], place: tuple[int, int], kind: Any, unit: Any, quantity: bool
) -> Any:
    picked = []
    for name, value in zip((*names[: len(values)], "unit"), [*values, unit], strict=True):
        if type(value) is convert.Grid:
            problem = value.fault_at(*place)
            if problem is not None:
                return problem if isinstance(problem, str) else faults.from_error(problem, name)
            value = value.at(*place)
        picked.append(value)
    wanted = picked.pop()
    try:
        result = function(*picked)
        return _finish(result, kind, wanted) if quantity else _settle(result)
    except convert.Handed as handed:
        return str(handed)
    except _UnitWanted as refused:
        return faults.from_error(refused.error, "unit")
    except Exception as error:
        return faults.from_error(error, names[0])
