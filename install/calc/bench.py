"""What Calc costs: each measurement gives name, measured, limit, unit and a note. Needs LibreOffice."""

import atexit
import shutil
import sys
import tempfile
from functools import cache
from pathlib import Path

from . import installer, libreoffice
from .session import Session

SAMPLE = Path(__file__).resolve().parent.parent.parent / "workbooks" / "coolant_channel.xlsx"
CELLS = 10_000
OURS, BUILT_IN = "=CF_REYNOLDS(A1;0.05;998;0.001)", "=PRODUCT(A1;0.05;998;0.001)"
ROUNDS = 5

Measured = tuple[str, float, float, str, str]


@cache
def _session(with_extension: bool) -> Session:
    folder = Path(tempfile.mkdtemp(prefix="cellfuncs-bench-"))
    atexit.register(shutil.rmtree, folder, ignore_errors=True)
    office = libreoffice.find()
    if with_extension:
        installer.install(office, lambda: Path(sys.executable), folder)
    session = Session(office, folder)
    atexit.register(session.close)
    return session


def _column(formula: str) -> float:
    """Seconds to calculate a column of cells anew, the best of several rounds."""
    calc = _session(True)
    calc.new()
    calc.values(f"A1:A{CELLS}", [[0.5 + k * 1e-4] for k in range(CELLS)])
    calc.formula("B1", formula)
    calc.fill_down(f"B1:B{CELLS}")
    seconds = min(calc.recalculate() for _ in range(ROUNDS))
    if not isinstance(calc.read(f"B{CELLS}")[0][0], float):
        raise RuntimeError(f"a cell holds {calc.read(f'B{CELLS}')}")
    return seconds


def cells() -> Measured:
    """10,000 cells in Calc beside a built-in formula of the same length."""
    times = [(_column(OURS), _column(BUILT_IN)) for _ in range(2)]
    ours, built_in = (1e6 * min(column) / CELLS for column in zip(*times, strict=True))
    name = "a CF_REYNOLDS cell in Calc"
    return name, ours, 3 * built_in + 60, "µs", f"{built_in:.2f} µs for a built-in function; limit 3 × this + 60 µs"


def column() -> Measured:
    """10,000 values in one array formula in Calc."""
    calc = _session(True)
    calc.new()
    calc.values(f"A1:A{CELLS}", [[0.5 + k * 1e-4] for k in range(CELLS)])
    calc.array(f"B1:B{CELLS}", OURS.replace("A1", f"A1:A{CELLS}"))
    seconds = min(calc.recalculate() for _ in range(ROUNDS))
    if not isinstance(calc.read(f"B{CELLS}")[0][0], float):
        raise RuntimeError(f"a cell holds {calc.read(f'B{CELLS}')}")
    return f"{CELLS:,} in one array formula in Calc", seconds, 0.2, "s", ""


def opening() -> Measured:
    """Opening a sample in Calc, seconds more than without the extension; the first time and the best of all."""
    first, best = {}, {}
    for with_extension in (True, False):
        calc = _session(with_extension)
        calc.new()
        times = [calc.open(SAMPLE, False) for _ in range(ROUNDS)]
        calc.new()  # gives the file free for the other office
        first[with_extension], best[with_extension] = times[0], min(times)
    more = max(first[True] - first[False], best[True] - best[False])
    note = f"{first[True]:.2f} beside {first[False]:.2f} s, later {best[True]:.2f} beside {best[False]:.2f} s"
    return "opening a sample in Calc, beyond without", more, 1.0, "s", note


def available() -> bool:
    """Whether there is a LibreOffice to measure."""
    try:
        libreoffice.find()
    except libreoffice.Unusable:
        return False
    return True
