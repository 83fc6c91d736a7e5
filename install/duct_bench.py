"""What the solved duct costs: each measurement gives name, measured, limit, unit and a note."""

import itertools
import time
from importlib import import_module
from typing import Any

import finite_differences

ROUNDS = 40
PECLET, LENGTH = 10.0, 2.0  # length in D
PLACES = (0.1, 1.0, 1.9)  # x/D where the bulk temperature must be right to 1e-4
TOLERANCE = 1e-4

Measured = tuple[str, float, float, str, str]


def _duct() -> Any:
    return import_module("cellfuncs.models.duct")


def _forget() -> None:
    """Everything solved or built before is dropped: the next call is a first one."""
    _duct().solve.cache_clear()
    for name in ("duct_modes.modes_of", "duct_section.section", "duct_section.polynomials", "duct_section.gauss"):
        module, function = name.split(".")
        getattr(import_module(f"cellfuncs.models.{module}"), function).cache_clear()


def _first(peclet: float = PECLET) -> Any:
    import numpy as np

    duct = _duct()
    solution = duct.solve(duct.DuctProblem(peclet=peclet, heated_length=LENGTH / peclet))
    return solution.with_error("bulk", np.array(PLACES) / peclet, brinkman=0.1)


def _shortest(work: Any, rounds: int = ROUNDS) -> float:
    times = []
    for _ in range(rounds):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def first_time() -> Measured:
    """A laminar tube with conduction along, heated over 2 D, bulk temperatures with their error, nothing remembered."""
    _first()

    def work() -> None:
        _forget()
        _first()

    error = float(_first()[1].max())
    return "duct with conduction along, first time", 1000 * _shortest(work), 25.0, "ms", f"told error {error:.1g}"


def another() -> Measured:
    """The same duct at another position and Brinkman number."""
    duct = _duct()
    solution = duct.solve(duct.DuctProblem(peclet=PECLET, heated_length=LENGTH / PECLET))
    counter = itertools.count()

    def work() -> None:
        x = 0.01 + 1e-4 * next(counter)
        solution.with_error("bulk", x, brinkman=x)
        solution.with_error("nusselt", x, brinkman=x)

    work()
    return "the same, another position and Br", 1000 * _shortest(work), 1.0, "ms", "bulk and Nu, both with error"


def against_differences() -> Measured:
    """The first time, one resolution, beside second-order finite differences with the fewest cells for 1e-4."""
    import numpy as np

    places = np.array(PLACES)
    duct = _duct()
    exact = duct.solve(duct.DuctProblem(peclet=PECLET, heated_length=LENGTH / PECLET)).bulk(places / PECLET)
    cells = finite_differences.cells_for(TOLERANCE, PECLET, LENGTH, places, exact)

    def mine() -> None:
        _forget()
        duct.solve(duct.DuctProblem(peclet=PECLET, heated_length=LENGTH / PECLET)).bulk(places / PECLET)

    own = _shortest(mine)
    other = _shortest(lambda: finite_differences.bulk_temperatures(PECLET, LENGTH, places, cells), 3)
    note = f"{1000 * own:.1f} ms beside {1000 * other:.0f} ms on {cells} crowded cells over the radius"
    return "duct, first time ÷ finite differences at 1e-4", own / other, 1.0 / 50.0, "×", note
