"""Builds the sample workbooks, the inherited sheets with their reports, the function reference and the self-test.

Run it with ``python workbooks/build.py [FOLDER]``. Without a folder the answers of the catalogue's examples, which
``cellfuncs functions NAME`` shows, are stored anew as well. The stored values come from the embedded host, so that a
colleague without Cellfuncs sees every number. The scenario (the Veldermoor pilot line) is invented.
"""

import json
import shutil
import sys
import tempfile
from functools import partial
from pathlib import Path

from cellfuncs.hosts import embedded
from cellfuncs.sheets import examples, reference, self_test
from cellfuncs.sheets.case_sheet import write_book
from cellfuncs.sheets.check import check_book
from cellfuncs.sheets.many_cases import write_many
from cellfuncs.sheets.reference_book import write_reference
from cellfuncs.sheets.reference_pages import write_pages
from cellfuncs.sheets.reporting.page import as_html
from cellfuncs.sheets.reporting.written import as_json
from cellfuncs.sources import DATA

sys.path.insert(0, str(Path(__file__).resolve().parent))
from inherited_book import write_inherited
from inherited_scenario import INHERITED
from pages.methods import write_methods
from scenario import COOLANT, METHODS, METHODS_FILE, SAMPLES, TWENTY, TWENTY_FILE

HERE = Path(__file__).resolve().parent
PUBLISHED = HERE.parent / "tests" / "published"
WRITERS = {name: partial(write_book, sheet) for name, sheet in SAMPLES.items()} | {
    METHODS_FILE: partial(write_methods, METHODS),
    TWENTY_FILE: partial(write_many, TWENTY),
}
REFERENCE, SELF_TEST = "functions.xlsx", "self_test.xlsx"


def build(name: str, folder: Path) -> Path:
    """Write one sample with its stored values and return its path."""
    with tempfile.TemporaryDirectory() as temporary:
        raw = Path(temporary) / name
        WRITERS[name](raw)
        embedded.recalc(raw, folder / name)
    return folder / name


def build_inherited(name: str, folder: Path) -> Path:
    """Write one sheet of another hand, and its check report beside it as a page and as JSON."""
    folder.mkdir(parents=True, exist_ok=True)
    book = folder / name
    write_inherited(INHERITED[name], book)
    report = check_book(book)
    for ending, text in ((".json", as_json(report)), (".html", as_html(report))):
        book.with_suffix(ending).write_text(text, "utf-8", newline="\n")
    return book


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
    files = sorted(file for file in PUBLISHED.glob("*.json") if not file.name.startswith("methods_"))
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
    for name in WRITERS:
        print("built", build(name, folder))
    for name in INHERITED:
        print("built", build_inherited(name, folder / "inherited"))
    print("built", build_reference(folder))
    print("built", build_self_test(folder))
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
