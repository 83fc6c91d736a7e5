"""Copies without our functions: values stand in their place, everything else stays."""

import io
import re
import zipfile

import openpyxl
import pytest

from cellfuncs.books import inspect, share
from cellfuncs.books.engine import evaluate
from cellfuncs.books.parts import TYPES, Draft
from cellfuncs.books.reading import read_sheet

FUNCTIONS = {
    "CF_TWICE": lambda x: 2 * x if isinstance(x, float) else f"! x: {x!r}",
    "CF_COLUMN": lambda n: [[float(k)] for k in range(int(n))],
}
CHAIN = "http://schemas.openxmlformats.org/officeDocument/2006/relationships/calcChain"


def is_ours(name):
    return name.upper() if name.upper() in FUNCTIONS else None


def shared(data):
    """The copy's bytes, what was said, and the draft."""
    draft = Draft(inspect(data))
    said = share.share(evaluate(draft.book, FUNCTIONS, is_ours), draft, is_ours, "Ours", "Formulas")
    return draft.container(), said, draft


def cells(data, sheet="S1"):
    text = read_sheet(inspect(data), sheet).data
    return {r.decode(): whole.decode() for whole, r in re.findall(rb'(<c r="([A-Z]+\d+)"[^>]*(?:/>|>.*?</c>))', text)}


def notes(data, sheet="S1"):
    rows = openpyxl.load_workbook(io.BytesIO(data))[sheet].iter_rows()
    return {cell.coordinate: cell.comment.text for row in rows for cell in row if cell.comment}


def test_values_take_the_place_of_our_formulas(make):
    data = make(
        '<row r="1"><c r="A1"><v>3</v></c><c r="B1"><f>cf_twice(A1)</f><v>0</v></c>'
        '<c r="C1"><f>B1+1</f><v>1</v></c><c r="D1" t="str"><f>[1]!CF_TWICE("x")</f><v>old</v></c>'
        '<c r="E1"><f>CF_TWICE(1)/0</f></c></row>'
    )
    out, said, _ = shared(data)
    assert cells(out) == {
        "A1": '<c r="A1"><v>3</v></c>',
        "B1": '<c r="B1"><v>6</v></c>',
        "C1": '<c r="C1"><f>B1+1</f><v>7</v></c>',
        "D1": """<c r="D1" t="str"><v>! x: 'x'</v></c>""",
        "E1": '<c r="E1" t="e"><v>#DIV/0!</v></c>',
    }
    assert said == []
    assert notes(out) == {"B1": "=CF_TWICE(A1)", "D1": '=CF_TWICE("x")', "E1": "=CF_TWICE(1)/0"}
    book = openpyxl.load_workbook(io.BytesIO(out))
    assert [c.value for c in book["S1"][1]] == [3, 6, "=B1+1", "! x: 'x'", "#DIV/0!"]


def test_twice_gives_the_same_bytes(make):
    data = make('<row r="1"><c r="B1"><f>CF_TWICE(2)</f></c><c r="C1"><f>B1*2</f></c></row>')
    out, _, _ = shared(data)
    assert shared(data)[0] == out
    again, said, draft = shared(out)
    assert again == out and said == [] and not draft.changed


def test_a_book_without_our_functions_is_left_alone(make):
    data = make('<row r="1"><c r="B1"><f>1+1</f><v>2</v></c></row>')
    assert shared(data)[0] == data


def test_arrays_become_plain_cells(make):
    out, _, _ = shared(
        make(
            '<row r="1"><c r="A1" cm="1" vm="2"><f t="array" ref="A1:A2">CF_COLUMN(3)</f><v>9</v></c>'
            '<c r="C1"><f t="array" ref="C1:C2">CF_COLUMN(2)</f><v>9</v></c></row>'
            '<row r="2"><c r="A2"><v>9</v></c><c r="C2"><v>9</v></c></row>'
        )
    )
    assert cells(out) == {
        "A1": '<c r="A1"><v>0</v></c>',
        "A2": '<c r="A2"><v>1</v></c>',
        "A3": '<c r="A3"><v>2</v></c>',
        "C1": '<c r="C1"><v>0</v></c>',
        "C2": '<c r="C2"><v>1</v></c>',
    }
    assert notes(out) == {"A1": "=CF_COLUMN(3)\nfills A1:A3", "C1": "{=CF_COLUMN(2)}\nfills C1:C2"}


def test_what_names_the_extent_of_an_array_names_the_cells(make):
    """An array that is one no more has no extent; in a file the extent of A1 is ANCHORARRAY(A1)."""
    out, _, _ = shared(
        make(
            '<row r="1"><c r="A1" cm="1"><f t="array" ref="A1">CF_COLUMN(3)</f><v>9</v></c>'
            '<c r="E1"><f>SUM(_xlfn.ANCHORARRAY($A$1))</f><v>0</v></c>'
            '<c r="F1"><f t="shared" ref="F1:F2" si="0">SUM(_xlfn.ANCHORARRAY(A1))</f><v>0</v></c></row>'
            '<row r="2"><c r="F2"><f t="shared" si="0"/><v>0</v></c></row>'
            '<row r="9"><c r="H9" cm="1"><f t="array" ref="H9:H10">{5;6}</f><v>5</v></c>'
            '<c r="I9"><f>SUM(_xlfn.ANCHORARRAY(H9))</f><v>11</v></c></row><row r="10"><c r="H10"><v>6</v></c></row>',
            '<row r="1"><c r="A1"><f>SUM(_xlfn.ANCHORARRAY(S1!A1),1)</f></c></row>',
            names='<definedNames><definedName name="n">_xlfn.ANCHORARRAY(S1!$A$1)</definedName></definedNames>',
        )
    )
    found = cells(out)
    assert found["E1"] == '<c r="E1"><f>SUM($A$1:$A$3)</f><v>3</v></c>'
    assert found["F1"] == '<c r="F1"><f>SUM($A$1:$A$3)</f><v>3</v></c>'
    assert "<f>SUM(_xlfn.ANCHORARRAY(A2))</f>" in found["F2"]
    assert found["I9"] == '<c r="I9"><f>SUM(_xlfn.ANCHORARRAY(H9))</f><v>11</v></c>'
    assert cells(out, "S2")["A1"] == "<c r=\"A1\"><f>SUM('S1'!$A$1:$A$3,1)</f><v>4</v></c>"
    assert inspect(out).names[0].text == "'S1'!$A$1:$A$3"


def test_formulas_that_shared_their_text_with_one_that_goes(make):
    """Only the first of a group holds the text; here it calls a function and the second one does not."""
    text = "A9+" * 2700 + "CF_TWICE(A9)"  # with A10 it is longer than what is read
    out, _, _ = shared(
        make(
            f'<row r="9"><c r="B9"><f t="shared" ref="B9:B10" si="4">{text}</f><v>1</v></c></row>'
            '<row r="10"><c r="B10"><f t="shared" si="4"/><v>7</v></c></row>'
        )
    )
    found = cells(out)
    assert "<f" not in found["B9"]
    assert found["B10"] == f'<c r="B10"><f>{text.replace("A9", "A10")}</f><v>7</v></c>'


def test_the_order_of_calculation_goes(make, parts_of, zipped):
    extra = f'<Relationship Id="rIdC" Type="{CHAIN}" Target="calcChain.xml"/>'
    types = '<Override PartName="/xl/calcChain.xml" ContentType="c"/>'
    parts = parts_of('<row r="1"><c r="A1"><f>CF_TWICE(1)</f></c></row>', extra_relations=extra, extra_types=types)
    out, _, draft = shared(zipped({**parts, "xl/calcChain.xml": '<calcChain><c r="A1" i="1"/></calcChain>'}))
    assert "xl/calcChain.xml" not in zipfile.ZipFile(io.BytesIO(out)).namelist()
    assert b"calcChain" not in draft.read(TYPES) + draft.read("xl/_rels/workbook.xml.rels")


def test_functions_in_names_and_validations_are_told(make, parts_of, zipped):
    parts = parts_of(
        '<row r="1"><c r="A1"><f>two*3</f><v>0</v></c></row>',
        names='<definedNames><definedName name="two">CF_TWICE(1)</definedName></definedNames>',
    )
    place = "xl/worksheets/sheet1.xml"
    validation = "<dataValidations><dataValidation><formula1>CF_TWICE(2)</formula1></dataValidation></dataValidations>"
    parts[place] = parts[place].replace("</sheetData>", f"</sheetData>{validation}")
    out, (line,), _ = shared(zipped(parts))
    assert line.startswith("2 of the workbook's names, validations")
    # A name that calls ours makes the formula one of ours.
    assert cells(out)["A1"] == '<c r="A1"><v>6</v></c>' and notes(out) == {"A1": "=two*3"}
    assert validation.encode() in read_sheet(inspect(out), "S1").data


def test_what_finds_no_room_in_notes_is_listed(make, monkeypatch):
    monkeypatch.setattr(share, "MAX_NOTES", 2)
    rows = "".join(f'<row r="{n}"><c r="A{n}"><f>CF_TWICE({n})</f></c></row>' for n in range(1, 6))
    data = make(rows, '<row r="1"><c r="A1"><f>CF_TWICE(0)</f></c></row>')
    out, (line,), _ = shared(data)
    assert line == "3 formulas found no room in notes (2 a sheet); they are listed on the sheet Formulas."
    assert set(notes(out)) == {"A1", "A2"} and set(notes(out, "S2")) == {"A1"}
    listed = openpyxl.load_workbook(io.BytesIO(out))["Formulas"]
    assert list(listed.iter_rows(values_only=True)) == [
        ("sheet", "cell", "formula"),
        *(("S1", f"A{n}", f"=CF_TWICE({n})") for n in (3, 4, 5)),
    ]
    assert all(cell.data_type == "s" for row in listed.iter_rows() for cell in row)
    assert [sheet.name for sheet in inspect(out).sheets] == ["S1", "S2", "Formulas"]
    assert shared(out)[0] == out


def test_the_list_takes_a_name_that_is_free(parts_of, zipped, monkeypatch):
    monkeypatch.setattr(share, "MAX_NOTES", 0)
    parts = parts_of('<row r="1"><c r="A1"><f>CF_TWICE(1)</f></c></row>', "")
    parts["xl/workbook.xml"] = parts["xl/workbook.xml"].replace('name="S2"', 'name="FORMULAS"')
    out, _, _ = shared(zipped(parts))
    assert [sheet.name for sheet in inspect(out).sheets] == ["S1", "FORMULAS", "Formulas 2"]
    assert not [name for name in zipfile.ZipFile(io.BytesIO(out)).namelist() if "comments" in name]


@pytest.mark.parametrize("prefix", ["x:", ""])
def test_sheets_with_a_prefix(make, prefix):
    space = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
    p = prefix
    text = (
        f"<{p}worksheet xmlns{':x' if p else ''}='{space}'><{p}sheetData><{p}row r='1'><{p}c r='A1'><{p}f>CF_TWICE(2)"
        f"</{p}f></{p}c></{p}row></{p}sheetData></{p}worksheet>"
    )
    out, _, draft = shared(make("<?xml version='1.0'?>" + text))
    assert notes(out) == {"A1": "=CF_TWICE(2)"}
    sheet = draft.read("xl/worksheets/sheet1.xml").decode()
    assert f"<{p}c r='A1'><{p}v>4</{p}v></{p}c>" in sheet and f"</{p}sheetData><{p}legacyDrawing " in sheet
