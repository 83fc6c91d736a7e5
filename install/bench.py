"""Prints what the program costs beside its limits: one row a promise, ratios measured in one run.

`bench.py` prints the table, `bench.py check` also ends with 1 when a limit is missed; letters pick rows.
Both sides of a ratio run by turns and the best of several rounds counts, so that noise does not decide.
Plain times stand beside one fixed loop, so that runs on different machines can be compared.
"""

import contextlib
import functools
import gc
import itertools
import os
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from importlib import import_module
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
ATMOSPHERE = 101_325.0

sys.path.insert(0, str(ROOT))
os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # as the command line and the hosts set it


@dataclass(frozen=True)
class Row:
    """One line of the table; ``measured`` and ``limit`` are in ``unit``."""

    name: str
    measured: float
    limit: float
    unit: str
    note: str = ""

    @property
    def kept(self) -> bool:
        return self.measured <= self.limit


def calibration() -> float:
    """The fixed loop: plain float arithmetic and a dictionary, about 10 ms."""
    table = {k: float(k) for k in range(64)}
    total = 0.0
    for k in range(100_000):
        total += table[k & 63] * 1.000001
    return total


def best(works: Sequence[Callable[[], object]], rounds: int) -> list[float]:
    """Shortest time of each work [s], all works by turns."""
    shortest = [float("inf")] * len(works)
    gc.collect()
    gc.disable()
    try:
        for _ in range(rounds):
            for k, work in enumerate(works):
                start = time.perf_counter()
                work()
                shortest[k] = min(shortest[k], time.perf_counter() - start)
    finally:
        gc.enable()
    return shortest


def functions() -> dict:
    return import_module("cellfuncs.cells.catalogue").functions()


def sound(answer: object) -> object:
    """The answer, or an error where a fault text came back: a refusal is quick and proves nothing."""
    cells = [cell for row in answer for cell in row] if isinstance(answer, list) else [answer]
    faulty = next((cell for cell in cells if isinstance(cell, str) and cell.startswith("! ")), None)
    if faulty:
        raise RuntimeError(faulty)
    return answer


def one_property() -> Row:
    """CF_PROPERTY on one cell, the state changing every call, beside the same done by hand."""
    from CoolProp.CoolProp import PT_INPUTS, AbstractState

    call = functions()["CF_PROPERTY"].call
    state = AbstractState("HEOS", "Water")
    number = 3000
    counter = itertools.count()

    def temperatures() -> list[float]:
        # Never the same twice, so that nothing remembered can answer.
        shift = next(counter) * 1e-5
        return [290.0 + shift + 0.02 * k for k in range(number)]

    def ours() -> None:
        for temperature in temperatures():
            call("water", "density", temperature, ATMOSPHERE)

    def by_hand() -> None:
        for temperature in temperatures():
            state.update(PT_INPUTS, ATMOSPHERE, temperature)
            state.rhomass()

    state.update(PT_INPUTS, ATMOSPHERE, 300.0)
    if abs(sound(call("water", "density", 300.0, ATMOSPHERE)) / state.rhomass() - 1) > 1e-12:
        raise RuntimeError("the two sides do not answer the same")
    mine, hand = best([ours, by_hand], 9)
    note = f"{1e6 * mine / number:.1f} beside {1e6 * hand / number:.1f} µs"
    return Row("CF_PROPERTY, one cell ÷ by hand", mine / hand, 1.3, "×", note)


def column_of_properties() -> Row:
    """CF_PROPERTY on 10,000 temperatures and 4 properties beside a loop by hand."""
    from CoolProp.CoolProp import PT_INPUTS, AbstractState

    call = functions()["CF_PROPERTY"].call
    state = AbstractState("HEOS", "Water")
    wanted = [["density", "viscosity", "conductivity", "specific heat"]]
    counter = itertools.count()

    def column() -> list[list[float]]:
        shift = next(counter) * 1e-5
        return [[290.0 + shift + 0.006 * k] for k in range(10_000)]

    def ours() -> list:
        return call("water", wanted, column(), ATMOSPHERE)

    def by_hand() -> list:
        answers = []
        for (temperature,) in column():
            state.update(PT_INPUTS, ATMOSPHERE, temperature)
            answers.append([state.rhomass(), state.viscosity(), state.conductivity(), state.cpmass()])
        return answers

    answer = sound(ours())
    if (len(answer), len(answer[0])) != (10_000, 4):
        raise RuntimeError(f"{len(answer)} × {len(answer[0])} cells came back")
    mine, hand = best([ours, by_hand], 5)
    note = f"{mine:.2f} beside {hand:.2f} s"
    return Row("CF_PROPERTY, 10,000 × 4 ÷ loop by hand", mine / hand, 1.1, "×", note)


def own_cost() -> Row:
    """CF_REYNOLDS with four texts, units seen before and numbers not, less the bare formula."""
    from cellfuncs import groups

    call = functions()["CF_REYNOLDS"].call
    number = 2000
    counter = itertools.count(1)
    texts: list[tuple[str, str, str, str]] = []

    def fresh() -> None:
        texts.clear()
        for _ in range(number):
            k = next(counter)
            texts.append((f"{k / 9:.6f} ft/s", f"{k / 7:.6f} mm", f"{k / 3:.6f} kg/m3", f"{k / 8:.6f} cP"))

    def ours() -> None:
        for words in texts:
            call(*words)

    def bare() -> None:
        for _ in texts:
            groups.reynolds(2.0, 0.05, 998.0, 0.001)

    fresh()
    sound(call(*texts[0]))
    times = []
    for _ in range(7):
        fresh()
        times.append(best([ours, ours, bare], 1))  # the second time the texts are known
    first, second, formula = (min(column) / number for column in zip(*times, strict=True))
    note = f"for 4 texts; {1e6 * (second - formula):.1f} µs when the texts come again"
    return Row("a cell's own cost, unit texts seen before", 1e6 * (first - formula), 15, "µs", note)


def embedded_cells() -> Row:
    """20,000 CF_REYNOLDS cells beside a bare lambda in its place, in the host and in its engine alone."""
    from types import SimpleNamespace

    from cellfuncs.hosts import embedded

    number = 20_000
    ours = functions()
    bare = {"CF_REYNOLDS": SimpleNamespace(call=lambda u, d, r, m: u * d * r / m, arguments=())}
    with tempfile.TemporaryDirectory() as folder:
        book, out = Path(folder) / "reynolds.xlsx", Path(folder) / "out.xlsx"
        _write_reynolds(book, number)
        results: list = []

        def in_host(known: dict) -> Callable[[], object]:
            return lambda: results.append(embedded.recalc(book, out, functions=known))

        def in_engine(known: dict) -> Callable[[], object]:
            return lambda: _engine_alone(book, known["CF_REYNOLDS"].call, number)

        host, host_bare, engine, engine_bare = best([in_host(ours), in_host(bare), in_engine(ours), in_engine(bare)], 3)
    cells = [cell for area in results[0].areas for row in area.values for cell in row]
    if len(cells) != number:
        raise RuntimeError(f"{len(cells)} cells were calculated")
    sound(cells[-1])
    note = f"in the engine alone {engine / engine_bare:.2f} ×; the whole recalculation takes {host:.1f} s"
    worse = max(host / host_bare, engine / engine_bare)
    return Row("20,000 CF_REYNOLDS cells ÷ bare lambda", worse, 2.0, "×", note)


def _write_reynolds(path: Path, number: int) -> None:
    import xlsxwriter

    book = xlsxwriter.Workbook(str(path))
    sheet = book.add_worksheet("Cells")
    for k in range(number):
        sheet.write_number(k, 0, 0.5 + k * 1e-4)
        sheet.write_formula(k, 1, f"=CF_REYNOLDS(A{k + 1},0.05,998,0.001)", None, 0)
    book.close()


def _engine_alone(path: Path, call: Callable[..., object], number: int) -> None:
    import formualizer

    book = formualizer.load_workbook(str(path))
    book.register_function("CF_REYNOLDS", call, min_args=4, max_args=4)
    book.evaluate_all()
    last = book.get_value("Cells", number, 2)
    if abs(last / ((0.5 + (number - 1) * 1e-4) * 0.05 * 998 / 0.001) - 1) > 1e-12:
        raise RuntimeError(f"the engine answers {last}")


def command_start() -> Row:
    """`cellfuncs --help` and `cellfuncs functions`, seconds more than an empty Python."""
    python = sys.executable

    def start(*words: str) -> Callable[[], object]:
        return lambda: subprocess.run([python, *words], check=True, stdout=subprocess.DEVNULL, cwd=ROOT)

    works = [
        start("-c", "pass"),
        start("-m", "cellfuncs", "--help"),
        start("-m", "cellfuncs", "functions"),
    ]
    empty, shown, listed = best(works, 9)
    note = f"--help {shown - empty:.3f} s, functions {listed - empty:.3f} s; empty Python {empty:.3f} s"
    return Row("start of the command, beyond Python's", max(shown, listed) - empty, 0.25, "s", note)


def without_fluids() -> Row:
    """A workbook without fluid properties never imports CoolProp."""
    script = (
        "import sys; from cellfuncs.hosts import embedded; result = embedded.recalc(sys.argv[1]);"
        "print(int('CoolProp' in sys.modules), len(result.areas))"
    )
    with tempfile.TemporaryDirectory() as folder:
        book = Path(folder) / "plain.xlsx"
        _write_reynolds(book, 3)
        done = subprocess.run(
            [sys.executable, "-c", script, str(book)], capture_output=True, text=True, check=True, cwd=ROOT
        )
    loaded, areas = map(int, done.stdout.split())
    if not areas:
        raise RuntimeError("nothing was calculated")
    return Row("CoolProp imported without need (1 is yes)", loaded, 0, "", "")


WATER_IN_A_DUCT = (
    ("flow kind", "duct", ""),
    ("substance", "water", ""),
    ("diameter", 25.0, "mm"),
    ("length", 4.0, "m"),
    ("velocity", 1.2, "m/s"),
    ("inlet temperature", 20.0, "degC"),
    ("wall temperature", 60.0, "degC"),
)


def term_table() -> Row:
    """CF_TERMS on water in a duct after the first, the velocity changing every call."""
    call = functions()["CF_TERMS"].call
    counter = itertools.count()
    number = 40

    def block() -> list[list[object]]:
        velocity = 1.2 + next(counter) * 1e-4
        return [[label, velocity if label == "velocity" else value, unit] for label, value, unit in WATER_IN_A_DUCT]

    def changing() -> None:
        for _ in range(number):
            call(block())

    fixed = block()

    def remembered() -> None:
        for _ in range(number):
            call(fixed)

    sound(call(fixed))
    fresh, again = best([changing, remembered], 7)
    note = f"{1000 * again / number:.3f} ms for a block seen before"
    return Row("CF_TERMS on water in a duct", 1000 * fresh / number, 2.0, "ms", note)


UNITS = "m kg s K W Btu degF mmH2O lbf psi kJ cSt mil ft a µ Å"
JOINTS = "*|/|·|.| |-|^|**|⁻¹|^-1|^4|(|)|((|))|per |²|%|,"


def hostile_unit_texts() -> list[str]:
    """Texts of at most 40 characters built to make a reader of units work hard."""
    units, joints = UNITS.split(), JOINTS.split("|")
    texts = {"", " " * 40, "9**9**9", "m^" * 20, "(" * 40, "(" * 20 + ")" * 20, "/" * 40, "^" * 40, "·" * 40}
    texts |= {(unit + joint) * (40 // len(unit + joint)) for unit in units for joint in joints}
    texts |= {(joint + unit) * (40 // len(unit + joint)) for unit in units for joint in joints}
    texts |= {f"{unit}^{exponent}" for unit in units for exponent in ("999999999", "-4", "1e308", "4.5", "³⁴⁵⁶⁷")}
    texts |= {unit * (40 // len(unit)) for unit in units}
    texts |= {
        f"{a}{b}/{c}{d}{a}" for a, b, c, d in itertools.product(units[:7], ("-", "·", " "), units[7:], joints[:5])
    }
    texts |= {a + b for a in ("kilo", "mega", "milli", "k", "M", "µ", "da") for b in ("gram", "btu", "calorie", "xyz")}
    texts |= {sign * 40 for sign in ("\u200b", "\u202e", "\u0301", "ﬃ", "㎏", "Ａ", "x", "mM", "9")}
    return sorted(text[:40] for text in texts)


def worst_unit_text() -> Row:
    """The longest time that the reader of unit texts takes for any of the hostile texts."""
    from cellfuncs import quantities

    reader = getattr(quantities.read_unit, "__wrapped__", quantities.read_unit)
    kinds = ("specific_heat", "heat_transfer_coefficient", "pressure_absolute", "dimensionless")
    worst, which = 0.0, ""
    reader("m/s", "velocity")
    for text in hostile_unit_texts():
        for kind in kinds:
            times = []
            for _ in range(3):
                start = time.perf_counter()
                with contextlib.suppress(ValueError):
                    reader(text, kind)
                times.append(time.perf_counter() - start)
            if min(times) > worst:
                worst, which = min(times), f"{text!r} as {kind.replace('_', ' ')}"
    return Row("reading the worst unit text", 1000 * worst, 10, "ms", which)


ROWS = {
    "a": one_property,
    "b": column_of_properties,
    "c": own_cost,
    "d": embedded_cells,
    "e": command_start,
    "f": without_fluids,
    "g": term_table,
    "h": worst_unit_text,
}


def outside_rows() -> dict[str, Callable[[], Row]]:
    """Rows measured in files of their own; those about LibreOffice Calc where it is installed."""
    import check_bench as check
    import duct_bench as duct
    import effects_bench as effects
    import many_bench as many
    import method_bench as method
    import spread_bench as spread
    from calc import bench as calc

    def row(measure: Callable[[], tuple]) -> Callable[[], Row]:
        return functools.wraps(measure)(lambda: Row(*measure()))

    found = {"l": row(spread.stated), "m": row(spread.with_properties)}
    found |= {"n": row(spread.flow_kinds), "o": row(spread.twenty_cases)}
    found |= {"p": row(duct.first_time), "q": row(duct.another), "r": row(duct.against_differences)}
    found |= {"s": row(method.table), "t": row(method.colebrook), "u": row(method.columns)}
    found |= {"v": row(effects.plate), "w": row(effects.still_plate), "x": row(effects.table)}
    found |= {"y": row(effects.whole_map), "z": row(check.targets)}
    found |= {"A": row(many.typical_sheet), "B": row(many.many_formulas), "C": row(many.folder)}
    if calc.available():
        found |= {"i": row(calc.cells), "j": row(calc.column), "k": row(calc.opening)}
    return dict(sorted(found.items(), key=lambda one: (one[0].isupper(), one[0])))


ROWS |= outside_rows()
IN_SECONDS = {"s": 1.0, "ms": 1e-3, "µs": 1e-6}


def table(rows: dict[str, Row], loop: float) -> str:
    """The rows as text, times also as multiples of the fixed loop."""
    lines = [("", "name", "measured", "limit", "of the loop", "verdict", "")]
    for letter, row in rows.items():
        share = f"{row.measured * IN_SECONDS[row.unit] / loop:.2g}" if row.unit in IN_SECONDS else ""
        measured, limit = (f"{value:.3g} {row.unit}".strip() for value in (row.measured, row.limit))
        lines.append((letter, row.name, measured, limit, share, "kept" if row.kept else "MISSED", row.note))
    widths = [max(map(len, column)) for column in zip(*lines, strict=True)]
    return "\n".join("  ".join(map(str.ljust, line, widths)).rstrip() for line in lines)


def main(words: Sequence[str]) -> int:
    """Measure and print; 1 with ``check`` when a limit is missed, 2 when a row cannot be measured."""
    letters = [word for word in words if word != "check"]
    unknown = [letter for letter in letters if letter not in ROWS]
    if unknown:
        print(f"no row {', '.join(unknown)}; there are {', '.join(ROWS)}", file=sys.stderr)
        return 2
    rows, broken = {}, 0
    (loop,) = best([calibration], 15)
    for letter in letters or ROWS:
        print(f"measuring {letter}: {ROWS[letter].__doc__}", file=sys.stderr, flush=True)
        try:
            rows[letter] = ROWS[letter]()
        except Exception as error:
            print(f"row {letter} cannot be measured: {type(error).__name__}: {error}", file=sys.stderr)
            broken += 1
    (after,) = best([calibration], 15)
    loop = min(loop, after)
    print(f"fixed loop: {1000 * loop:.2f} ms\n")
    print(table(rows, loop))
    for text in import_module("check_bench").printed if "z" in rows else ():
        print(f"\n{text}")
    if broken:
        return 2
    return 1 if "check" in words and not all(row.kept for row in rows.values()) else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
