"""What a check of a workbook and of a folder costs: each measurement gives name, measured, limit, unit and a note."""

import contextlib
import statistics
import tempfile
import time
from collections.abc import Callable, Iterator
from pathlib import Path

FILES = 80  # a processor
ROUNDS = 3
TYPICAL = 200  # filled cells of a typical sheet
FORMULAS = 10_000

Measured = tuple[str, float, float, str, str]


def folder() -> Measured:
    """A folder at one file a processor at once, beside the same files in bare loops in as many processes."""
    from cellfuncs.sheets.many.crew import answers_here, processors
    from cellfuncs.sheets.many.found import found

    count = processors()
    with tempfile.TemporaryDirectory() as place, loops(count) as loop_over:
        files = Path(place, "files")
        files.mkdir()
        write_folder(files, FILES * count)
        loop_over(files)  # a first time, for the imports
        ratios, times = [], []
        for _ in range(ROUNDS):
            alone = loop_over(files)
            # twice the same: while the first half is checked the processes come up
            answers = answers_here(found([files]) * 2, count=count)
            for _ in range(FILES * count):
                next(answers)
            start = time.perf_counter()
            states = [answer.outcome.state for answer in answers]
            times.append((time.perf_counter() - start) / len(states))
            if len(states) != FILES * count or set(states) != {"checked"}:
                raise RuntimeError("not all files were checked")
            ratios.append(times[-1] / alone)
    note = f"{1000 * min(times):.1f} ms a file with {count} processors, {FILES * count} files"
    return "a folder beside its files in bare loops", statistics.median(ratios), 1.1, "×", note


def typical_sheet() -> Measured:
    """A check after the imports, the sheets' times set to that of 200 filled cells."""
    from corpus.sheet import make

    from cellfuncs.sheets.check import check_book

    times = []
    with tempfile.TemporaryDirectory() as place:
        for seed in range(60):
            made = make(seed, Path(place))
            path = Path(place) / f"{seed}.xlsx"
            check_book(path)
            start = time.perf_counter()
            check_book(path)
            times.append((time.perf_counter() - start) * TYPICAL / made.filled)
    note = f"the slowest of {len(times)} sheets {max(times):.2f} s"
    return f"check of a sheet, {TYPICAL} filled cells", statistics.median(times), 0.3, "s", note


def many_formulas() -> Measured:
    """A check of 10,000 formula cells beside openpyxl's reading of the file."""
    import openpyxl

    from cellfuncs.sheets.check import check_book

    with tempfile.TemporaryDirectory() as place:
        path = Path(place) / "large.xlsx"
        _write_formulas(path)
        check_book(path)
        ratios = []
        for _ in range(ROUNDS):
            start = time.perf_counter()
            openpyxl.load_workbook(path)
            middle = time.perf_counter()
            report = check_book(path)
            ratios.append((time.perf_counter() - middle) / (middle - start))
        if not report.agreed:
            raise RuntimeError("nothing was recomputed")
    return f"check of {FORMULAS:,} formula cells beside openpyxl", statistics.median(ratios), 3.0, "×", ""


def _write_formulas(path: Path) -> None:
    """A table of pipes, a row each: what is stated, and four formulas that follow from it."""
    import math

    import xlsxwriter

    heads = ("Diameter [mm]", "Volume flow [m3/h]", "Flow area [m2]", "Velocity [m/s]", "Kinematic viscosity [m2/s]",
             "Reynolds number [-]", "Velocity head [m]")  # fmt: skip
    with xlsxwriter.Workbook(path) as book:
        sheet = book.add_worksheet("Pipes")
        sheet.write_row(0, 0, heads)
        for k in range(FORMULAS // 4):
            row, diameter, flow = k + 2, 20.0 + k % 80, 1.0 + 0.01 * k
            area = math.pi / 4 * (diameter / 1000) ** 2
            velocity = flow / 3600 / area
            sheet.write_row(k + 1, 0, (diameter, flow))
            sheet.write(k + 1, 4, 1e-6)
            sheet.write_formula(k + 1, 2, f"=PI()/4*(A{row}/1000)^2", None, area)
            sheet.write_formula(k + 1, 3, f"=B{row}/3600/C{row}", None, velocity)
            sheet.write_formula(k + 1, 5, f"=D{row}*A{row}/1000/E{row}", None, velocity * diameter * 1000)
            sheet.write_formula(k + 1, 6, f"=D{row}^2/2/9.81", None, velocity**2 / 2 / 9.81)


@contextlib.contextmanager
def loops(count: int) -> Iterator[Callable[[Path], float]]:
    """As many processes that do nothing but check files in a loop; gives what tells their time a file [s]."""
    import multiprocessing

    with multiprocessing.get_context("spawn").Pool(count) as pool:

        def loop_over(place: Path) -> float:
            paths = sorted(map(str, place.rglob("*.xlsx")))
            start = time.perf_counter()
            pool.map(_loop, [paths[k::count] for k in range(count)], chunksize=1)
            return (time.perf_counter() - start) / len(paths)

        yield loop_over


def _loop(paths: list[str]) -> None:
    from cellfuncs.sheets.check import check_book

    for path in paths:
        check_book(path)


def write_folder(place: Path, number: int) -> None:
    """Sheets as ``corpus`` makes them."""
    from corpus.sheet import make

    for seed in range(number):
        make(seed, place)
