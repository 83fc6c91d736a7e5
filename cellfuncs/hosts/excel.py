"""Excel, through xlwings: every function of the catalogue as a worksheet function of this module.

Excel's side calls a function by the name of this module and its own, and xlwings fetches it from here
with ``getattr``; so each one stands here under its name, as a wrapper with plain positional arguments
(xlwings refuses keyword-only ones and stumbles over annotations). xlwings gives each argument to the
wrapper, None where it was left out; what cells hold is read in ``cells/convert.py`` alone.
The answer is already what Excel takes (a number, a text, or rows of these): no conversion is asked for.
"""

import inspect
from collections.abc import Callable
from typing import Any

import xlwings

from cellfuncs.cells import catalogue

# xlwings writes seven of Excel's error values as texts; the newer ones come as the bare code of the error.
FIRST_ERROR_CODE = -2146826288
NEWER_ERRORS = {
    2043: "#GETTING_DATA",
    2045: "#SPILL!",
    2046: "#CONNECT!",
    2047: "#BLOCKED!",
    2048: "#UNKNOWN!",
    2049: "#FIELD!",
    2050: "#CALC!",
    2051: "#BUSY!",
}
ERRORS_BY_CODE = {FIRST_ERROR_CODE + number - 2000: text for number, text in NEWER_ERRORS.items()}

# A range of one column and one of one row would both arrive flat: two dimensions keep them apart.
READING = {"ndim": 2, "err_to_str": True}


def _named_error(cell: Any) -> Any:
    # Numbers of cells come as floats, so that an int is a truth value or the code of an error.
    return ERRORS_BY_CODE.get(cell, cell) if type(cell) is int else cell


def _cells(value: Any) -> Any:
    """What xlwings read, with the newer error values named."""
    if isinstance(value, list):
        return [[_named_error(cell) for cell in row] for row in value]
    return value


def worksheet_function(function: catalogue.CellFunction) -> Callable[..., Any]:
    """The wrapper that xlwings registers for one function of the catalogue."""
    call = function.call

    def wrapper(*values: Any) -> Any:
        return call(*[_cells(value) for value in values])

    wrapper.__annotations__ = {}
    wrapper.__name__ = wrapper.__qualname__ = function.name
    wrapper.__doc__ = function.summary
    wrapper.__signature__ = inspect.Signature(
        [
            inspect.Parameter(
                argument.name,
                inspect.Parameter.POSITIONAL_OR_KEYWORD,
                default=None if argument.optional else inspect.Parameter.empty,
            )
            for argument in function.arguments
        ]
    )
    for argument in function.arguments:
        wrapper = xlwings.arg(argument.name, doc=argument.help, **READING)(wrapper)
    # Last, because each `arg` sets the category back to xlwings' own.
    return xlwings.func(category=function.family)(wrapper)


globals().update({name: worksheet_function(function) for name, function in catalogue.functions().items()})
