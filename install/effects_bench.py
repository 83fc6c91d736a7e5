"""What solved effects cost: each measurement gives name, measured, limit, unit and a note."""

import itertools
import time
from importlib import import_module
from typing import Any

from duct_bench import Measured, _forget, _shortest

METAL = (
    ("flow kind", "duct", ""), ("density", 850.0, "kg/m3"), ("viscosity", 2e-4, "Pa s"),
    ("specific heat", 1000.0, "J/kgK"), ("conductivity", 25.0, "W/mK"), ("velocity", 0.03, "m/s"),
    ("diameter", 10.0, "mm"), ("length", 20.0, "mm"), ("inlet temperature", 300.0, "degC"),
    ("wall temperature", 350.0, "degC"),
)  # fmt: skip
PRANDTL = (1e-3, 0.01, 0.71, 7.0, 1e3, 1e4)


def _model(name: str) -> Any:
    return import_module(f"cellfuncs.models.{name}")


def plate() -> Measured:
    """The similarity solution of a plate with friction heat, the slowest of six Prandtl numbers from 1e-3 to 1e4."""
    model = _model("plate")
    model.blasius()
    worst, at = 0.0, 0.0
    for prandtl in PRANDTL:

        def work(prandtl: float = prandtl) -> None:
            model.plate.cache_clear()
            model.plate(prandtl)

        took = _shortest(work, 15)
        worst, at = max((worst, at), (took, prandtl))
    return "plate at any Prandtl number", 1000 * worst, 15.0, "ms", f"slowest at Pr {at:g}"


def still_plate() -> Measured:
    """The similarity solution of a vertical plate in a still fluid, both walls, nothing remembered, slowest of six."""
    model = _model("free")
    worst, at = 0.0, 0.0
    for prandtl in PRANDTL:

        def work(prandtl: float = prandtl) -> None:
            model._found.cache_clear()
            model._solved.cache_clear()
            model.free_plate(prandtl)

        took = _shortest(work, 5)
        worst, at = max((worst, at), (took, prandtl))
    return "vertical plate in a still fluid", 1000 * worst, 60.0, "ms", f"slowest at Pr {at:g}"


def _block(**changed: float) -> list[list[object]]:
    return [[label, changed.get(label, value), unit] for label, value, unit in METAL]


def table() -> Measured:
    """CF_TERMS with effects where conduction along is solved for, nothing remembered."""
    call = import_module("cellfuncs.cells.catalogue").functions()["CF_TERMS"].call
    steps = itertools.count()

    def work() -> None:
        _forget()
        answer = call(_block(velocity=0.03 + 1e-5 * next(steps)))
        if isinstance(answer, str):
            raise ValueError(answer)

    work()
    return "CF_TERMS with effects, first time", 1000 * _shortest(work, 20), 60.0, "ms", "conduction along kept"


def whole_map() -> Measured:
    """A map of 41 × 41 points of conduction along over Péclet number and length, drawn, on two processors."""
    from cellfuncs.cases import read_case
    from cellfuncs.sheets import regime_picture

    rows = tuple((k, *row) for k, row in enumerate(METAL, 1))
    case = read_case(tuple(tuple(cell if cell != "" else None for cell in row) for row in rows))
    start = time.perf_counter()
    regime_picture.draw(case, "conduction along", "peclet", "length", 41)
    return "map of 41 × 41 points", time.perf_counter() - start, 5.0, "s", "with the picture"
