"""What ±, the other flow kinds and many cases cost: each measurement gives name, measured, limit, unit and a note."""

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


def flow_kinds() -> Measured:
    """CF_TERMS of the slowest flow kind after its first call, the tolerance changing every call."""
    starters = import_module("cellfuncs.sheets.starters")
    call = import_module("cellfuncs.cells.catalogue").functions()["CF_TERMS"].call
    slowest, kind = 0.0, ""
    for name in starters.kinds():
        rows = [["" if cell is None else cell for cell in row] for row in starters.starter(name).rows]
        rows = [row for row in rows if row[0] != "tolerance"]
        times = []
        for k in range(ROUNDS + 1):
            given = [*rows, ["tolerance", 5.0 + 1e-6 * k, "%", ""]]
            start = time.perf_counter()
            answer = call(given)
            times.append(time.perf_counter() - start)
            if not isinstance(answer, list):
                raise RuntimeError(answer[:200])
        slowest, kind = max((slowest, kind), (min(times[1:]), name))
    return "CF_TERMS of the slowest flow kind", 1000 * slowest, 3.0, "ms", kind


def twenty_cases() -> Measured:
    """Twenty cases through CF_BLOCK and CF_TERMS beside reading, solving and judging their rows alone."""
    functions = import_module("cellfuncs.cells.catalogue").functions()
    read = import_module("cellfuncs.cases").read_case
    solve = import_module("cellfuncs.answers").solve
    judge = import_module("cellfuncs.terms").term_rows
    labels, units = [[row[0]] for row in WATER], [[row[2]] for row in WATER]
    counter = itertools.count()

    def columns() -> list[list[list[object]]]:
        base = next(counter)
        return [[[2.0 + 0.1 * k + 1e-4 * base if row[0] == "velocity" else row[1]] for row in WATER] for k in range(20)]

    def cells() -> float:
        given = columns()
        start = time.perf_counter()
        for values in given:
            functions["CF_TERMS"].call(functions["CF_BLOCK"].call(labels, values, units))
        return time.perf_counter() - start

    def physics() -> float:
        given = [
            tuple(
                (k + 1, row[0], value[0], row[2] or None, None)
                for k, (row, value) in enumerate(zip(WATER, values, strict=True))
            )
            for values in columns()
        ]
        start = time.perf_counter()
        for rows in given:
            judge(solve(read(rows)))
        return time.perf_counter() - start

    cells(), physics()
    pairs = [(cells(), physics()) for _ in range(3 * ROUNDS)]  # in turn, so that noise meets both
    mine, alone = min(pair[0] for pair in pairs), min(pair[1] for pair in pairs)
    return (
        "twenty cases side by side ÷ their physics",
        mine / alone,
        1.2,
        "×",
        f"{1000 * mine:.1f} beside {1000 * alone:.1f} ms",
    )
