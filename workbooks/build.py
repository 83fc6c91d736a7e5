"""Builds the sample workbooks, the function reference and the self-test.

Run it with ``python workbooks/build.py [FOLDER]``. Without a folder the answers of the catalogue's examples, which
``cellfuncs functions NAME`` shows, are stored anew as well. The stored values come from the embedded host, so that a
colleague without Cellfuncs sees every number. The scenario (the Veldermoor pilot line) is invented.
"""

import json
import shutil
import sys
import tempfile
from pathlib import Path

from cellfuncs.hosts import embedded
from cellfuncs.sheets import examples, reference, self_test
from cellfuncs.sheets.case_sheet import CaseSheet, write_book
from cellfuncs.sheets.reference_book import write_reference
from cellfuncs.sheets.reference_pages import write_pages
from cellfuncs.sources import DATA

HERE = Path(__file__).resolve().parent
PUBLISHED = HERE.parent / "tests" / "published"
REFERENCE, SELF_TEST = "functions.xlsx", "self_test.xlsx"

COOLANT = CaseSheet(
    title="Coolant channel of a mould plate",
    story="Veldermoor pilot line, mould plate 3 (invented). Glycol solution in a drilled channel; the plate holds "
    "its wall at one temperature.",
    block="coolant",
    rows=(
        ("flow kind", "duct", None, None),
        ("substance", "ethylene glycol 30 % by mass", None, None),
        ("velocity", 3, "m/s", 0.1),
        ("diameter", 8, "mm", None),
        ("length", 1.2, "m", None),
        ("inlet temperature", 18, "degC", 0.5),
        ("wall temperature", 45, "degC", 1),
        ("pressure", 3.2, "bar", None),
        ("time scale", 90, "s", None),
        ("answer", "outlet temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.1, "K", None),
    ),
    results=(
        ("property temperature", "degC", "0.0"),
        ("Reynolds number", "", "0"),
        ("Prandtl number", "", "0.0"),
        ("Péclet number", "", "0"),
        ("coefficient", "W/m2K", "0"),
        ("outlet temperature", "degC", "0.0"),
        ("duty", "W", "0"),
        ("pressure drop", "kPa", "0.00"),
        ("friction rise", "K", "0.0000"),
    ),
    question="Which terms may the outlet temperature be calculated without?",
    sweep=("velocity", "m/s", (0.25, 0.5, 1, 2, 4, 8), "viscous heating"),
)

FILM = CaseSheet(
    title="Oil film under a sliding shoe",
    story="Veldermoor pilot line, press drive (invented). A shoe slides on a flooded film between two walls held "
    "at one temperature.",
    block="film",
    rows=(
        ("flow kind", "gap", None, None),
        ("substance", "ISO VG 46 VI 98", None, None),
        ("sliding speed", 9, "m/s", 0.2),
        ("film thickness", 18, "µm", 1.5),
        ("film length", 140, "mm", None),
        ("width", 60, "mm", None),
        ("wall temperature", 55, "degC", 2),
        ("answer", "peak temperature", None, None),
        ("tolerance", 5, "%", None),
        ("smallest that matters", 0.5, "K", None),
    ),
    results=(
        ("viscosity", "mPa s", "0.00"),
        ("conductivity", "W/mK", "0.000"),
        ("Reynolds number", "", "0.00"),
        ("Péclet number", "", "0"),
        ("driving difference", "K", "0.0"),
        ("peak temperature", "degC", "0.0"),
        ("wall shear stress", "kPa", "0.0"),
        ("friction power", "W", "0"),
        ("local flux", "kW/m2", "0.0"),
    ),
    question="Does the film need a temperature field, and which terms must it carry?",
    sweep=("sliding speed", "m/s", (1, 2, 4, 8, 12, 16), "advection"),
)

SAMPLES = {"coolant_channel.xlsx": COOLANT, "oil_film.xlsx": FILM}


def build(name: str, folder: Path) -> Path:
    """Write one sample with its stored values and return its path."""
    with tempfile.TemporaryDirectory() as temporary:
        raw = Path(temporary) / name
        write_book(SAMPLES[name], raw)
        embedded.recalc(raw, folder / name)
    return folder / name


def answer_examples() -> str:
    """The text of the data file with the answers of all examples, computed for the coolant channel."""
    with tempfile.TemporaryDirectory() as temporary:
        asked = Path(temporary) / "questions.xlsx"
        examples.write_questions(asked, COOLANT.rows)
        result = embedded.recalc(asked, Path(temporary) / "answers.xlsx")
    return examples.as_json(COOLANT.rows, examples.answers(result.areas))


def build_reference(folder: Path) -> Path:
    """Write the function reference, as a workbook and as pages beside it."""
    write_reference(folder / REFERENCE)
    write_pages(folder / "functions")
    return folder / REFERENCE


def build_self_test(folder: Path) -> Path:
    """Write the self-test with its stored values; expected values come from the published rows of the tests."""
    files = sorted(PUBLISHED.glob("*.json"))
    published = [row for file in files for row in json.loads(file.read_text("utf-8"))]
    found, blocks = self_test.checks(published)
    with tempfile.TemporaryDirectory() as temporary:
        raw, done = Path(temporary) / "raw.xlsx", Path(temporary) / SELF_TEST
        self_test.write_self_test(raw, found, blocks)
        wrong = self_test.differing(found, embedded.recalc(raw, done).areas)
        if wrong:
            raise SystemExit("not built, the self-test does not agree: " + "; ".join(wrong))
        shutil.copy(done, folder / SELF_TEST)
    return folder / SELF_TEST


def main(arguments: list[str]) -> int:
    folder = Path(arguments[0]) if arguments else HERE
    if not arguments:
        (DATA / reference.EXAMPLES_FILE).write_text(answer_examples(), "utf-8", newline="\n")
        reference.stored.cache_clear()
    for name in SAMPLES:
        print("built", build(name, folder))
    print("built", build_reference(folder))
    print("built", build_self_test(folder))
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
