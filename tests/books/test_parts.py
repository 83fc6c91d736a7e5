"""Parts added to a container and taken out of it, with relations and content types kept right."""

import io
import zipfile

import pytest

from cellfuncs.books import inspect
from cellfuncs.books.package import copy_with
from cellfuncs.books.parts import TYPES, Draft, parsed, put_in
from cellfuncs.books.splice import apply_edits
from cellfuncs.errors import BookRefused

SHEET = "xl/worksheets/sheet1.xml"


@pytest.fixture
def draft(make):
    return Draft(inspect(make('<row r="1"><c r="A1"><v>1</v></c></row>')))


def names(data):
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        assert archive.testzip() is None
        return archive.namelist()


def test_untouched_is_the_same_file(draft):
    draft.write(SHEET, draft.read(SHEET))
    assert draft.container() is draft.book.package.data


def test_a_part_comes_and_goes(draft):
    before = names(draft.container())
    types, place = draft.read(TYPES), "xl/worksheets/_rels/sheet1.xml.rels"
    draft.add("xl/é&.xml", b"<a/>", "text/xml")
    key = draft.relate(SHEET, "http://example.org/kinds/thing", "xl/é&.xml")
    data = draft.container()
    assert names(data) == [*before, "xl/é&.xml", place]
    assert data == draft.container()
    assert draft.related(SHEET, "thing").target == "xl/é&.xml" and draft.relations(SHEET)[key].kind == "thing"
    # The gate resolves relations on its own.
    again = Draft(inspect(data))
    assert again.related(SHEET, "thing").key == key
    again.drop("xl/é&.xml", SHEET)
    assert names(again.container()) == [*before, place]
    assert again.read(TYPES) == types and again.relations(SHEET) == {}


def test_keys_and_names_are_new(draft):
    keys = {draft.relate(SHEET, "k", f"xl/{n}.xml") for n in range(3)}
    assert keys == {"rId1", "rId2", "rId3"}
    assert draft.free_name("xl/worksheets/SHEET{}.xml") == "xl/worksheets/SHEET2.xml"


def test_links_to_the_outside_have_no_part(draft):
    draft.changed["xl/worksheets/_rels/sheet1.xml.rels"] = (
        b'<p:Relationships xmlns:p="http://schemas.openxmlformats.org/package/2006/relationships">'
        b'<p:Relationship Id="RID1" Type="x/hyperlink" Target="file:///a" TargetMode="External"/></p:Relationships>'
    )
    assert draft.related(SHEET, "hyperlink") is None
    assert draft.relate(SHEET, "x/new", "xl/a.xml") == "rId2"
    assert b"<p:Relationship Id=" in draft.read("xl/worksheets/_rels/sheet1.xml.rels")


@pytest.mark.parametrize(
    "data, wanted",
    [
        (b"<a/>", b"<a><n/></a>"),
        (b"<x:a y='/>' />", b"<x:a y='/>'><n/></x:a>"),
        (b"<a></a>", b"<a><n/></a>"),
        (b"<?xml version='1.0'?>\r\n<a>t<b/> </a >", b"<?xml version='1.0'?>\r\n<a>t<b/> <n/></a >"),
    ],
)
def test_put_in(data, wanted):
    assert apply_edits(data, [put_in(data, parsed(data, "a"), b"<n/>")]) == wanted


def test_what_cannot_be_followed_is_refused():
    with pytest.raises(BookRefused, match="UTF-8"):
        parsed("<a/>".encode("utf-16"), "a.xml")
    with pytest.raises(BookRefused, match="well-formed"):
        parsed(b"<a>", "a.xml")


def test_added_parts_have_no_date_of_their_own(draft):
    data = copy_with(draft.book.package, {"xl/new.xml": b"<a/>"})
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        assert archive.getinfo("xl/new.xml").date_time == (1980, 1, 1, 0, 0, 0)
