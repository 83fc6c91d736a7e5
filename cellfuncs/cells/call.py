"""How one call of a cell runs: values read, function called, answer fit for cells, faults as texts."""

import inspect
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

from cellfuncs import quantities
from cellfuncs.cells import convert, faults, table
from cellfuncs.cells.grid import Grid, common_shape, positions
from cellfuncs.errors import CellfuncsError, OutOfRange


@dataclass(frozen=True)
class Argument:
    """One argument of a cell function: its help, and the kind of quantity where it is one."""

    name: str
    help: str
    kind: str | None
    form: str
    optional: bool


@dataclass(frozen=True)
class Answer:
    """An answer in SI whose kind is only known when it is there."""

    value: Any
    kind: str


def reader(argument: Argument, row: Mapping[str, str]) -> Callable[[Any], Any]:
    """The reader of convert.py that belongs to the form of an argument."""
    if argument.form == "quantity":
        return convert.QuantityReader(row["kind"], row["zero"], argument.optional)
    if argument.form in ("text", "unit"):
        return convert.TextReader(argument.optional, argument.help)
    if argument.form == "substance":
        return table.SubstanceReader(argument.optional, argument.help)
    if argument.form == "block":
        return convert.read_block
    if argument.form == "range":
        return convert.read_range
    if argument.form == "value":
        return lambda value: value  # read by the function itself, with its unit
    raise TypeError(f"unknown form {argument.form}")


def caller(
    name: str,
    function: Callable[..., Any],
    arguments: tuple[Argument, ...],
    readers: tuple[Callable[[Any], Any], ...],
    returns: str,
    kind: str | None,
    by_array: Callable[..., Any] | None,
) -> Callable[..., Any]:
    """What hosts call: reads the arguments, runs the function, lets only what may stand in cells go out."""
    names = tuple(a.name for a in arguments)
    parameters = inspect.signature(function).parameters
    optional = {n: p.default for n, p in parameters.items() if p.default is not p.empty}
    defaults = tuple(optional.get(n) for n in names)
    count = len(arguments)
    required = sum(not a.optional for a in arguments)
    quantity = returns == "quantity"
    ranges = any(a.form in ("quantity", "text", "unit", "substance") for a in arguments) and returns != "table"
    first = names[0] if names else name

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
            return faults.from_error(error, names[k] if k < count else first, names)

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
        longest = faults.LONGEST_TEXT
        return [
            [
                # fit already: the common case, decided without a call
                cell
                if (type(cell) is str and len(cell) <= longest) or (type(cell) is float and cell - cell == 0.0)
                else _settle(cell)
                for cell in row
            ]
            for row in result
        ]
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
    grids = [value for value in values if type(value) is Grid]
    shape = common_shape(grids)
    unit = None
    if quantity and len(values) == len(names):
        unit = values.pop()
    answers = None
    if by_array is not None and type(unit) is not Grid and not any(grid.faults for grid in grids):
        answers = _by_array(by_array, values, shape, kind, unit)
    if answers is not None:
        return answers
    rows: list[list[Any]] = [[None] * shape[1] for _ in range(shape[0])]
    for i, j in positions(shape):
        rows[i][j] = _one_of_range(function, values, names, (i, j), kind, unit, quantity)
    return rows


def _by_array(by_array: Any, values: list[Any], shape: Any, kind: Any, unit: Any) -> list[list[Any]] | None:
    """The answers computed as arrays, or None where a single cell has something to say."""
    import numpy as np

    arrays = [
        (value.rows if value.rows and isinstance(value.rows[0][0], str) else value.array())
        if type(value) is Grid
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
    function: Any,
    values: list[Any],
    names: tuple[str, ...],
    place: tuple[int, int],
    kind: Any,
    unit: Any,
    quantity: bool,
) -> Any:
    picked = []
    for name, value in zip((*names[: len(values)], "unit"), [*values, unit], strict=True):
        if type(value) is Grid:
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
        return faults.from_error(error, names[0], names)
