"""What methods cost: the table of a case, friction of a column, methods on columns beside their formulas in numpy."""

import itertools
import math
import time
from collections.abc import Callable
from importlib import import_module

ROUNDS = 9
NUMBER = 10_000

WATER = (
    ("flow kind", "duct", ""),
    ("substance", "water", ""),
    ("velocity", 1.5, "m/s"),
    ("diameter", 20.0, "mm"),
    ("length", 2.0, "m"),
    ("inlet temperature", 20.0, "degC"),
    ("wall temperature", 50.0, "degC"),
)

Measured = tuple[str, float, float, str, str]


def _shortest(work: Callable[[], object]) -> float:
    times = []
    for _ in range(ROUNDS):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def table() -> Measured:
    """CF_METHODS on water in a duct after its first call, the velocity changing every call."""
    call = import_module("cellfuncs.cells.catalogue").functions()["CF_METHODS"].call
    counter = itertools.count()

    def one() -> list:
        velocity = 1.5 + 1e-4 * next(counter)
        answer = call([[label, velocity if label == "velocity" else value, unit] for label, value, unit in WATER])
        if not isinstance(answer, list):
            raise RuntimeError(answer)
        return answer

    rows = len(one()) - 1
    return "CF_METHODS on water in a duct", 1000 * _shortest(one), 3.0, "ms", f"{rows} methods"


def colebrook() -> Measured:
    """CF_FRICTION by Colebrook and White on 10,000 Reynolds numbers beside Haaland; exact to 1e-12."""
    call = import_module("cellfuncs.cells.catalogue").functions()["CF_FRICTION"].call
    method = import_module("cellfuncs.methods").METHODS["Colebrook-White"]
    haaland = import_module("cellfuncs.methods").METHODS["Haaland"]
    column = [[10.0 ** (3.7 + 4.2 * k / NUMBER)] for k in range(NUMBER)]
    answer = call(column, 1e-4, "Colebrook-White")
    worst = max(abs(answer[k][0] / _iterated(column[k][0], 1e-4) - 1.0) for k in range(0, NUMBER, 97))
    if worst > 1e-12:
        raise RuntimeError(f"{worst:.1e} from an iterated solution")
    import numpy as np

    given = {"reynolds": np.array(column), "relative_roughness": 1e-4}
    exact = _shortest(lambda: method.evaluate(given))
    explicit = _shortest(lambda: haaland.evaluate(given))
    cells = _shortest(lambda: call(column, 1e-4, "Colebrook-White")) / _shortest(lambda: call(column, 1e-4, "Haaland"))
    note = f"in cells {cells:.2f} ×; within {worst:.0e} of an iterated solution"
    return "Colebrook on 10,000 ÷ Haaland", max(exact / explicit, cells), 10.0, "×", note


def _iterated(reynolds: float, roughness: float) -> float:
    """Colebrook and White's f by fixed-point iteration."""
    x = 7.0
    for _ in range(60):
        x = -2.0 * math.log10(roughness / 3.7 + 2.51 * x / reynolds)
    return x**-2.0


def columns() -> Measured:
    """Methods on columns of 10,000 beside the bare numpy expressions of their formulas."""
    import numpy as np

    methods = import_module("cellfuncs.methods").METHODS
    re, pr = np.geomspace(2e4, 1e5, NUMBER), np.linspace(1.0, 5.0, NUMBER)
    ra = np.geomspace(1e5, 1e9, NUMBER)
    f = (0.79 * np.log(re) - 1.64) ** -2.0
    works = {
        "Dittus-Boelter, heating": ({"reynolds": re, "prandtl": pr}, lambda: 0.023 * re**0.8 * pr**0.4),
        "Gnielinski": (
            {"reynolds": re, "prandtl": pr, "friction": f},
            lambda: f / 8 * (re - 1000) * pr / (1 + 12.7 * np.sqrt(f / 8) * (pr ** (2 / 3) - 1)),
        ),
        "Haaland": (
            {"reynolds": re, "relative_roughness": 1e-3},
            lambda: (-1.8 * np.log10(6.9 / re + (1e-3 / 3.7) ** 1.11)) ** -2.0,
        ),
        "Churchill-Bernstein": (
            {"reynolds": re, "prandtl": pr},
            lambda: 0.3 + 0.62 * re**0.5 * pr ** (1 / 3) / (1 + (0.4 / pr) ** (2 / 3)) ** 0.25
            * (1 + (re / 282000) ** 0.625) ** 0.8,
        ),
        "Churchill-Chu plate": (
            {"rayleigh": ra, "prandtl": pr},
            lambda: (0.825 + 0.387 * ra ** (1 / 6) / (1 + (0.492 / pr) ** (9 / 16)) ** (8 / 27)) ** 2,
        ),
    }  # fmt: skip
    ratios = {}
    for name, (given, bare) in works.items():
        if not np.allclose(methods[name].evaluate(given), bare(), rtol=1e-3):
            raise RuntimeError(f"{name} is not the formula beside it")
        ratios[name] = _shortest(lambda m=methods[name], g=given: m.evaluate(g)) / _shortest(bare)
    worst = max(ratios, key=ratios.get)
    return "a method on 10,000 ÷ bare numpy", ratios[worst], 5.0, "×", f"{worst}; {len(works)} methods tried"
