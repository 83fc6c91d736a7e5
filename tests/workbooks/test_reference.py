"""The function reference that stands in the repository is what the catalogue says now."""

import importlib.util
import json
import re
from pathlib import Path

import openpyxl
import pytest

from cellfuncs.cells import catalogue
from cellfuncs.sheets import examples, reference, reference_book, reference_pages
from cellfuncs.sources import DATA

FOLDER = Path(__file__).parents[2] / "workbooks"
REBUILD = "out of date: run `python workbooks/build.py` and look at what changed"


@pytest.fixture(scope="module")
def builder():
    spec = importlib.util.spec_from_file_location("build_reference", FOLDER / "build.py")
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


def same(new, old) -> bool:
    """Equal structures; numbers to nine digits, which is more than is shown."""
    if isinstance(new, float) and isinstance(old, (int, float)):
        return new == pytest.approx(old, rel=1e-9, abs=1e-300)
    if isinstance(new, dict) and isinstance(old, dict):
        return new.keys() == old.keys() and all(same(new[key], old[key]) for key in new)
    if isinstance(new, list) and isinstance(old, list):
        return len(new) == len(old) and all(map(same, new, old))
    return new == old


def test_the_answers_of_the_examples_are_those_of_today(builder):
    stored = json.loads((DATA / reference.EXAMPLES_FILE).read_text("utf-8"))
    new = json.loads(builder.answer_examples())
    assert new["block"] == stored["block"], REBUILD
    assert list(new["answers"]) == list(stored["answers"]), REBUILD
    changed = [name for name in new["answers"] if not same(new["answers"][name], stored["answers"][name])]
    assert changed == [], REBUILD


def test_a_changed_answer_would_be_seen():
    assert same([1.0, "a"], [1.0 + 1e-12, "a"])
    assert not same([1.0], [1.0 + 1e-8]) and not same({"a": 1.0}, {"b": 1.0}) and not same(["a"], ["b"])


def test_every_example_answers():
    """No example of the catalogue shows a fault, an error or nothing."""
    for name, kept in reference.stored()["answers"].items():
        cells = [cell for row in kept["rows"] for cell in row]
        assert cells, name
        assert not [c for c in cells if c is None or (isinstance(c, str) and c.startswith(("! ", "#")))], name


def test_pages_are_up_to_date():
    new = reference_pages.pages()
    there = {path.name: path.read_text("utf-8") for path in (FOLDER / "functions").glob("*")}
    assert there.keys() == new.keys(), REBUILD
    assert [name for name in new if new[name] != there[name]] == [], REBUILD


def cells(path):
    book = openpyxl.load_workbook(path)
    return {
        (sheet.title, cell.coordinate): (cell.value, cell.hyperlink.location if cell.hyperlink else None)
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    }


@pytest.fixture(scope="module")
def book():
    return openpyxl.load_workbook(FOLDER / "functions.xlsx")


def test_the_workbook_is_up_to_date(tmp_path):
    reference_book.write_reference(tmp_path / "functions.xlsx")
    assert cells(tmp_path / "functions.xlsx") == cells(FOLDER / "functions.xlsx"), REBUILD


def test_a_sheet_a_family_and_a_sheet_a_table(book):
    families = list(dict.fromkeys(function.family for function in catalogue.functions().values()))
    assert book.sheetnames == ["Contents", *families, *(t.title for t in reference.tables()), examples.SHEET]


def test_the_contents_lead_to_every_function(book):
    found = {}
    for row in book["Contents"].iter_rows():
        link = row[0].hyperlink
        if link is not None:
            found[row[0].value] = link.location
    for name, function in catalogue.functions().items():
        sheet, place = re.fullmatch(r"'(.+)'!(A\d+)", found.pop(name)).groups()
        assert sheet == function.family
        assert book[sheet][place].value == reference.call_of(function)
    assert {re.fullmatch(r"'(.+)'!A1", place)[1] for place in found.values()} == set(found)


def test_every_function_is_told_in_full(book):
    for family in {function.family for function in catalogue.functions().values()}:
        texts = {str(cell.value) for row in book[family].iter_rows() for cell in row if cell.value is not None}
        for function in catalogue.functions().values():
            if function.family == family:
                helps = {one.help for one in function.arguments}
                assert {function.summary, function.source, function.example, *helps} <= texts


def test_nothing_in_it_is_calculated(book):
    """A formula shown is a text; nobody needs Cellfuncs to read its reference."""
    assert [c.coordinate for sheet in book for row in sheet.iter_rows() for c in row if c.data_type == "f"] == []


def test_the_example_sheet_is_what_the_examples_mean(book):
    """The name of the block and the columns of CF_BLOCK's example, with two different cases."""
    sheet = book[examples.SHEET]
    area = book.defined_names[examples.BLOCK].attr_text.split("!")[1].replace("$", "")
    rows = [[cell.value for cell in row] for row in sheet[area]]
    assert rows == reference.stored()["block"]
    labels, units, first, second = ([cell.value for (cell,) in sheet[f"{c}3:{c}14"]] for c in "ABCD")
    assert labels == [row[0] for row in rows] and units == [row[2] for row in rows]
    call = catalogue.functions()["CF_CASE"].call
    for values, case in ((first, rows), (second, None)):
        block = [list(row) for row in zip(labels, values, units, strict=True)]
        assert call(block, "Reynolds number") == call(case, "Reynolds number") if case else True
    assert first != second
    kept = reference.stored()["answers"]["CF_BLOCK"]["rows"][0][0]
    block = [list(row) for row in zip(labels, second, units, strict=True)][:10]
    assert kept == pytest.approx(call(block, "Reynolds number"), rel=1e-12)
