"""Elementary functions that take a float quickly and an array as one call: methods are written with these."""

import math
from bisect import bisect_right
from typing import Any


def exp(x: Any) -> Any:
    return math.exp(x) if isinstance(x, (float, int)) else _numpy().exp(x)


def log(x: Any) -> Any:
    return math.log(x) if isinstance(x, (float, int)) else _numpy().log(x)


def log10(x: Any) -> Any:
    return math.log10(x) if isinstance(x, (float, int)) else _numpy().log10(x)


def sqrt(x: Any) -> Any:
    return math.sqrt(x) if isinstance(x, (float, int)) else _numpy().sqrt(x)


def tanh(x: Any) -> Any:
    return math.tanh(x) if isinstance(x, (float, int)) else _numpy().tanh(x)


def cos(x: Any) -> Any:
    return math.cos(x) if isinstance(x, (float, int)) else _numpy().cos(x)


def sin(x: Any) -> Any:
    return math.sin(x) if isinstance(x, (float, int)) else _numpy().sin(x)


def expm1(x: Any) -> Any:
    return math.expm1(x) if isinstance(x, (float, int)) else _numpy().expm1(x)


def log1p(x: Any) -> Any:
    return math.log1p(x) if isinstance(x, (float, int)) else _numpy().log1p(x)


def holds(condition: Any) -> bool:
    """Whether a condition is true of a number, or of every element of an array."""
    return condition if isinstance(condition, bool) else bool(condition.all())


def plain(x: Any) -> Any:
    """A float where a library gave a number of its own kind, an array unchanged."""
    return float(x) if getattr(x, "ndim", 0) == 0 else x


def where(condition: Any, yes: Any, no: Any) -> Any:
    """One of two values by a condition, element by element; both are computed."""
    return (yes if condition else no) if isinstance(condition, bool) else _numpy().where(condition, yes, no)


def larger(a: Any, b: Any) -> Any:
    scalar = isinstance(a, (float, int)) and isinstance(b, (float, int))
    return max(a, b) if scalar else _numpy().maximum(a, b)


def smaller(a: Any, b: Any) -> Any:
    scalar = isinstance(a, (float, int)) and isinstance(b, (float, int))
    return min(a, b) if scalar else _numpy().minimum(a, b)


def between(x: Any, known_x: tuple[float, ...], known_y: tuple[float, ...]) -> Any:
    """Linear interpolation in a published table; the ends are held, ranges are checked by the caller."""
    if not isinstance(x, (float, int)):
        return _numpy().interp(x, known_x, known_y)
    if x <= known_x[0]:
        return known_y[0]
    for k in range(1, len(known_x)):
        if x <= known_x[k]:
            t = (x - known_x[k - 1]) / (known_x[k] - known_x[k - 1])
            return known_y[k - 1] + t * (known_y[k] - known_y[k - 1])
    return known_y[-1]


def steps(x: Any, starts: tuple[float, ...], values: tuple[float, ...]) -> Any:
    """The value of the step that x lies in; step k runs from starts[k]; below the first the first holds."""
    if isinstance(x, (float, int)):
        return values[max(bisect_right(starts, x) - 1, 0)]
    numpy = _numpy()
    return numpy.asarray(values)[numpy.maximum(numpy.searchsorted(starts, x, side="right") - 1, 0)]


def _numpy() -> Any:
    import numpy

    return numpy
