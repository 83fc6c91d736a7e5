"""Notes on cells: read back by another library, with what was there before kept."""

import io
import re
import zipfile
from xml.etree import ElementTree

import openpyxl
import pytest
import xlsxwriter
from openpyxl.comments import Comment

from cellfuncs.books import inspect
from cellfuncs.books.notes import Note, add_notes
from cellfuncs.books.parts import Draft

AUTHOR = "A & Ü"
SPACE = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"


def by_xlsxwriter(fill):
    out = io.BytesIO()
    with xlsxwriter.Workbook(out) as book:
        fill(book, book.add_worksheet("S"))
    return out.getvalue()


def noted(data, notes, sheet="xl/worksheets/sheet1.xml"):
    draft = Draft(inspect(data))
    left = add_notes(draft, sheet, [Note(*note) for note in notes], AUTHOR)
    return draft, left


def read_notes(data):
    sheet = openpyxl.load_workbook(io.BytesIO(data)).worksheets[0]
    return {cell.coordinate: cell.comment for row in sheet.iter_rows() for cell in row if cell.comment}


def drawing(data):
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        (name,) = [name for name in archive.namelist() if name.endswith(".vml")]
        return archive.read(name)


def boxes(data):
    """(row, column) of every note's box; the drawing must be well-formed and its ids unique."""
    text = drawing(data)
    root = ElementTree.fromstring(text)
    ids = re.findall(rb'id="(_x0000_[st]\d+)"', text)
    assert len(ids) == len(set(ids))
    excel = "{urn:schemas-microsoft-com:office:excel}"
    return {
        (int(one.find(f"{excel}Row").text), int(one.find(f"{excel}Column").text))
        for one in root.iter(f"{excel}ClientData")
        if one.get("ObjectType") == "Note"
    }


def test_a_sheet_without_notes():
    data = by_xlsxwriter(
        lambda book, sheet: (sheet.write("B2", 1), sheet.set_footer("foot"), sheet.autofilter("A1:B2"))
    )
    texts = {"B2": '=X(<1>, "é")\nfills B2:C3', "XFD1048576": " last "}
    draft, left = noted(data, [(2, 2, texts["B2"]), (1_048_576, 16_384, texts["XFD1048576"])])
    made = draft.container()
    assert left == []
    assert {p for p in draft.parts() if p not in draft.book.package.members} == {
        "xl/comments1.xml",
        "xl/drawings/vmlDrawing1.vml",
        "xl/worksheets/_rels/sheet1.xml.rels",
    }
    inspect(made)
    with zipfile.ZipFile(io.BytesIO(made)) as archive:
        found = ElementTree.fromstring(archive.read("xl/comments1.xml"))
    assert {c.get("ref"): "".join(c.itertext()) for c in found.iter(f"{SPACE}comment")} == texts
    assert boxes(made) == {(1, 1), (1_048_575, 16_383)}
    for anchor in re.findall(rb"<x:Anchor>([^<]*)<", drawing(made)):
        left, _, top, _, right, _, bottom, _ = map(int, anchor.split(b","))
        assert 0 <= left < right <= 16_383 and 0 <= top < bottom <= 1_048_575


@pytest.mark.filterwarnings("ignore:Sparkline")
@pytest.mark.parametrize("feature", ["drawing", "tables", "picture in the header", "nothing"])
def test_the_drawing_stands_where_the_standard_wants_it(feature):
    """ECMA-376 part 1, 18.3.1.99: drawing, legacyDrawing, legacyDrawingHF, picture … tableParts, extLst."""

    def fill(book, sheet):
        sheet.write("A1", 1)
        sheet.add_sparkline("D5", {"range": "S!A1:A3"})
        if feature == "drawing":
            sheet.insert_textbox("C3", "box")
        if feature == "tables":
            sheet.add_table("F1:G3")
        if feature == "picture in the header":
            sheet.set_background(io.BytesIO(_PIXEL))

    draft, _ = noted(by_xlsxwriter(fill), [(1, 1, "t")])
    root = ElementTree.fromstring(draft.read("xl/worksheets/sheet1.xml"))
    order = [child.tag.rpartition("}")[2] for child in root]
    at = order.index("legacyDrawing")
    assert not {"picture", "legacyDrawingHF", "tableParts", "extLst"} & set(order[:at])
    assert not {"sheetData", "pageMargins", "drawing"} & set(order[at:])
    assert set(read_notes(draft.container())) == {"A1"}


_PIXEL = bytes.fromhex(
    "89504e470d0a1a0a0000000d49484452000000010000000108060000001f15c4890000000d49444154789c626001000000ffff03000006"
    "000557bfabd40000000049454e44ae426082"
)


def test_notes_that_are_there_stay():
    def fill(_, sheet):
        sheet.write_comment("B2", "mine", {"author": "somebody", "visible": True})
        sheet.write_comment("B3", "other")
        sheet.insert_button("D4")

    data = by_xlsxwriter(fill)
    draft, left = noted(data, [(3, 2, "=X()"), (9, 1, "=Y()")])
    made = draft.container()
    assert left == [] and set(draft.changed) == {"xl/comments1.xml", "xl/drawings/vmlDrawing1.vml"}
    notes = read_notes(made)
    assert {place: note.text for place, note in notes.items()} == {"B2": "mine", "B3": "other\n\n=X()", "A9": "=Y()"}
    assert (notes["B2"].author, notes["A9"].author) == ("somebody", AUTHOR)
    assert boxes(made) == {(1, 1), (2, 1), (8, 0)}
    old = drawing(data)
    assert drawing(made).startswith(old[: old.rfind(b"</xml>")])


def test_a_sheet_with_a_button_only():
    draft, left = noted(by_xlsxwriter(lambda _, sheet: sheet.insert_button("D4")), [(1, 1, "=X()")])
    made = draft.container()
    assert left == [] and boxes(made) == {(0, 0)} and read_notes(made)["A1"].text == "=X()"
    assert b'id="_x0000_t202"' in drawing(made) and b'id="_x0000_t201"' in drawing(made)


def test_made_by_openpyxl():
    book = openpyxl.Workbook()
    book.active["A1"].comment = Comment("old", AUTHOR)
    book.active["A2"] = 1
    out = io.BytesIO()
    book.save(out)
    draft, left = noted(out.getvalue(), [(1, 1, "=X()"), (2, 1, "=Y()")])
    notes = read_notes(draft.container())
    assert left == []
    assert {place: note.text for place, note in notes.items()} == {"A1": "old\n\n=X()", "A2": "=Y()"}
    assert {note.author for note in notes.values()} == {AUTHOR}


@pytest.mark.parametrize(
    "old, wanted",
    [
        ("<t>old</t>", "old\n\n=X()"),
        ("<r><t>o</t></r><r><rPr><b/></rPr><t>ld</t></r>", "old\n\n=X()"),
        ("<t>o</t><r><t>ld</t></r><phoneticPr fontId='1'/>", "old\n\n=X()"),
        ("", "=X()"),
        ("<t/>", "\n\n=X()"),
    ],
)
def test_all_forms_of_a_text(old, wanted):
    data = by_xlsxwriter(lambda _, sheet: sheet.write_comment("A1", "mine"))
    draft = Draft(inspect(data))
    text = re.sub(rb"<text>.*</text>", f"<text>{old}</text>".encode(), draft.read("xl/comments1.xml"))
    draft.write("xl/comments1.xml", text)
    assert add_notes(draft, "xl/worksheets/sheet1.xml", [Note(1, 1, "=X()")], AUTHOR) == []
    assert read_notes(draft.container())["A1"].text == wanted
    (holder,) = ElementTree.fromstring(draft.read("xl/comments1.xml")).iter(f"{SPACE}text")
    kinds = [child.tag.rpartition("}")[2] for child in holder]
    assert kinds == sorted(kinds, key=["r", "phoneticPr"].index), "a plain text stands beside runs"


def test_cells_with_a_conversation_are_left_out():
    """Programs that show conversations hide the note of the cell."""
    draft = Draft(inspect(by_xlsxwriter(lambda _, sheet: sheet.write_comment("A1", "[a conversation]"))))
    draft.add("xl/threadedComments/t1.xml", b'<ThreadedComments><threadedComment ref="A1"/></ThreadedComments>', "t/x")
    draft.relate("xl/worksheets/sheet1.xml", "http://x/threadedComment", "xl/threadedComments/t1.xml")
    notes = [Note(1, 1, "=X()"), Note(2, 1, "=Y()")]
    assert add_notes(draft, "xl/worksheets/sheet1.xml", notes, AUTHOR) == notes[:1]
    assert {place: note.text for place, note in read_notes(draft.container()).items()} == {
        "A1": "[a conversation]",
        "A2": "=Y()",
    }


@pytest.mark.parametrize("damage", ["no list", "no root", "utf-16"])
def test_what_cannot_be_followed_is_left_alone(damage):
    draft = Draft(inspect(by_xlsxwriter(lambda _, sheet: sheet.write_comment("A1", "mine"))))
    if damage == "no list":
        draft.changed["xl/comments1.xml"] = b"<comments/>"
    elif damage == "no root":
        draft.changed["xl/drawings/vmlDrawing1.vml"] = b"<html/>"
    else:
        draft.changed["xl/comments1.xml"] = draft.read("xl/comments1.xml").decode().encode("utf-16")
    before = dict(draft.changed)
    notes = [Note(2, 2, "=X()")]
    assert add_notes(draft, "xl/worksheets/sheet1.xml", notes, AUTHOR) == notes
    assert draft.changed == before


def test_drawings_of_two_sheets_share_no_number():
    out = io.BytesIO()
    with xlsxwriter.Workbook(out) as book:
        book.add_worksheet("S").write_comment("A1", "old")
        book.add_worksheet("T")
    draft, _ = noted(out.getvalue(), [(2, 1, "=X()")], "xl/worksheets/sheet2.xml")
    ids = [re.findall(rb"_x0000_s(\d+)", draft.read(f"xl/drawings/vmlDrawing{n}.vml")) for n in (1, 2)]
    assert ids[0] and ids[1] and not set(ids[0]) & set(ids[1])
    assert b'data="2"' in draft.read("xl/drawings/vmlDrawing2.vml")
