"""What ± in a block costs: each measurement gives name, measured, limit, unit and a note."""

import itertools
import time
from importlib import import_module

ROUNDS = 7

STATED = (
    ("flow kind", "duct", "", ""),
    ("velocity", 2.0, "m/s", "5 %"),
    ("diameter", 20.0, "mm", "2 %"),
    ("length", 4.0, "m", ""),
    ("inlet temperature", 20.0, "degC", 0.5),
    ("wall temperature", 60.0, "degC", 1.0),
    ("time scale", 50.0, "s", "10 %"),
    ("density", 1000.0, "kg/m3", "1 %"),
    ("viscosity", 1.0, "mPa.s", "5 %"),
    ("conductivity", 0.6, "W/mK", "2 %"),
    ("specific heat", 4.2, "kJ/kgK", "1 %"),
)
WATER = (
    *(row for row in STATED[:7]),
    ("substance", "water", "", ""),
)

Measured = tuple[str, float, float, str, str]


def stated() -> Measured:
    """CF_TERMS with eight ± of stated properties, the velocity changing every call."""
    return _measured("±, 2,000 samples, properties stated", STATED, 60.0)


def with_properties() -> Measured:
    """CF_TERMS with five ± of water, the velocity changing every call."""
    return _measured("±, 2,000 samples, water", WATER, 400.0)


def _measured(name: str, rows: tuple, limit: float) -> Measured:
    call = import_module("cellfuncs.cells.catalogue").functions()["CF_TERMS"].call
    counter = itertools.count()

    def block(spread: bool) -> list[list[object]]:
        velocity = 2.0 + next(counter) * 1e-4
        return [
            [label, velocity if label == "velocity" else value, unit, plus_minus if spread else ""]
            for label, value, unit, plus_minus in rows
        ]

    def shortest(spread: bool) -> float:
        times = []
        for _ in range(ROUNDS):
            given = block(spread)
            start = time.perf_counter()
            answer = call(given)
            times.append(time.perf_counter() - start)
            told = isinstance(answer, list) and any("2,000 samples" in row[5] for row in answer)
            if told is not spread:
                raise RuntimeError(str(answer)[:200])
        return min(times)

    call(block(True))
    measured, plain = shortest(True), shortest(False)
    return name, 1000 * measured, limit, "ms", f"{1000 * plain:.2f} ms without ±"
