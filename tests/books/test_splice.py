"""Values set into a sheet's text: only the cells that change are touched."""

import re

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.books import inspect, scans
from cellfuncs.books.reading import Sheet, _Reader, read_sheet
from cellfuncs.books.splice import set_values, with_attribute
from cellfuncs.books.strings import values_of
from cellfuncs.books.xmltext import ErrorValue, decoded
from cellfuncs.errors import BookRefused


@pytest.fixture
def sheet(make):
    return lambda data, **more: read_sheet(inspect(make(data, **more)), "S1")


def inner(data):
    return re.search(rb"<(?:\w+:)?sheetData>(.*)</(?:\w+:)?sheetData>", data, re.S)[1].decode()


def test_values_of_every_type(sheet):
    s = sheet('<row r="1">' + "".join(f'<c r="{c}1" s="4"><f>X</f><v>9</v></c>' for c in "ABCDEF") + "</row>")
    data = set_values(
        s,
        {
            (1, 1): 0.1 + 0.2,
            (1, 2): "=a<b",
            (1, 3): True,
            (1, 4): ErrorValue("#N/A"),
            (1, 5): None,
            (1, 6): 9.0,
        },
    )
    assert inner(data) == (
        '<row r="1"><c r="A1" s="4"><f>X</f><v>0.30000000000000004</v></c>'
        '<c r="B1" s="4" t="str"><f>X</f><v>=a&lt;b</v></c>'
        '<c r="C1" s="4" t="b"><f>X</f><v>1</v></c>'
        '<c r="D1" s="4" t="e"><f>X</f><v>#N/A</v></c>'
        '<c r="E1" s="4"><f>X</f></c>'
        '<c r="F1" s="4"><f>X</f><v>9</v></c></row>'
    )


def test_equal_values_keep_their_bytes(sheet):
    cells = (
        "<row r='1'  spans = '1:3'><c t='str' r='A1'><f >X</f><v>a b</v></c><c r='B1'><f>X</f><v>1.50</v></c>"
        "<c r='C1'><f>X</f><v>1E+2</v></c></row>"
    )
    s = sheet(cells)
    assert set_values(s, {(1, 1): "a b", (1, 2): 1.5, (1, 3): 100.0}) is s.data


@pytest.mark.parametrize(
    "cell, wanted",
    [
        ("<c r='A1' t='b' s='1'><f>X</f><v>1</v></c>", "<c r='A1' s='1'><f>X</f><v>2</v></c>"),
        ('<c r="A1" t="s"><v>0</v></c>', '<c r="A1"><v>2</v></c>'),
        ('<c r="A1" t="inlineStr"><is><r><t>a</t></r></is></c>', '<c r="A1"><v>2</v></c>'),
        ('<c r="A1"/>', '<c r="A1"><v>2</v></c>'),
        ('<c r="A1" s="3" />', '<c r="A1" s="3"><v>2</v></c>'),
        ('<c r="A1"></c>', '<c r="A1"><v>2</v></c>'),
        ('<c\n r="A1"\r\n><f\n>X</f>\n<v>1</v>\n</c\n>', '<c\n r="A1"\r\n><f\n>X</f><v>2</v></c>'),
        ('<c r="A1"><f>X</f></c>', '<c r="A1"><f>X</f><v>2</v></c>'),
        ('<c r="A1"><f>X</f><v/></c>', '<c r="A1"><f>X</f><v>2</v></c>'),
        (
            '<c r="A1"><f>X</f><v></v><extLst><ext/></extLst></c>',
            '<c r="A1"><f>X</f><v>2</v><extLst><ext/></extLst></c>',
        ),
        ('<c r="A1"><f>a>b</f><v>1</v></c>', '<c r="A1"><f>a>b</f><v>2</v></c>'),
        ('<c r="A1"><f/></c>', '<c r="A1"><f/><v>2</v></c>'),
    ],
)
def test_forms_of_cells(sheet, cell, wanted):
    s = sheet(f'<row r="1">{cell}<c r="B1"><v>7</v></c></row>')
    assert inner(set_values(s, {(1, 1): 2.0})) == f'<row r="1">{wanted}<c r="B1"><v>7</v></c></row>'


def test_prefix_quotes_and_line_ends(make):
    text = (
        f"<?xml version='1.0' encoding='UTF-8'?>\r\n<x:worksheet xmlns:x='{scans.MAIN}'>\r\n<x:dimension ref='A1'/>"
        "\r\n<x:sheetData>\r\n<x:row r='1'>\r\n<x:c r='A1' t='str'><x:f>X</x:f><x:v>é</x:v></x:c>\r\n</x:row>\r\n"
        "</x:sheetData>\r\n</x:worksheet>"
    )
    s = read_sheet(inspect(make(text)), "S1")
    data = set_values(s, {(1, 1): 2.0, (1, 3): "ü", (3, 1): 1.0}).decode()
    assert '<x:c r=\'A1\'><x:f>X</x:f><x:v>2</x:v></x:c>\r\n<x:c r="C1" t="str"><x:v>ü</x:v></x:c></x:row>' in data
    assert '</x:row>\r\n<x:row r="3"><x:c r="A3"><x:v>1</x:v></x:c></x:row></x:sheetData>' in data
    assert '<x:dimension ref="A1:C3"/>' in data
    assert data.startswith("<?xml version='1.0' encoding='UTF-8'?>\r\n<x:worksheet ")


def test_new_cells_stand_in_order(sheet):
    s = sheet('<row r="2" spans="2:3"><c r="B2"/><c r="D2"><v>1</v></c></row><row r="4"/><row r="7" ht="9"></row>')
    places = [(1, 1), (2, 1), (2, 3), (2, 5), (3, 2), (3, 1), (4, 9), (7, 1), (9, 1), (8, 1)]
    data = inner(set_values(s, {place: float(n) for n, place in enumerate(places)}))
    rows = [int(r) for r in re.findall(r'<row r="(\d+)"', data)]
    assert rows == [1, 2, 3, 4, 7, 8, 9]
    assert re.findall(r'<c r="([A-Z]+\d+)"', data) == [
        *("A1", "A2", "B2", "C2", "D2", "E2", "A3", "B3", "I4", "A7", "A8", "A9")
    ]
    assert 'spans="1:5"' in data and 'ht="9"' in data


def test_new_cells_take_the_format_of_row_or_column(make):
    text = (
        f'<worksheet xmlns="{scans.MAIN}"><cols><col min="2" max="3" style="5"/></cols><sheetData>'
        '<row r="1" s="7" customFormat="1"/><row r="2"/></sheetData></worksheet>'
    )
    s = read_sheet(inspect(make(text)), "S1")
    data = inner(set_values(s, {(1, 2): 1.0, (2, 2): 1.0, (2, 4): 1.0, (3, 3): 1.0}))
    assert '<c r="B1" s="7">' in data and '<c r="B2" s="5">' in data and '<c r="D2">' in data
    assert '<c r="C3" s="5">' in data


def test_extent(sheet):
    s = sheet("""<row r="1"><c r="A1" cm="1"><f t='array' aca = "1" ref='A1:B2'>X</f><v>1</v></c></row>""")
    data = set_values(s, {(1, 1): 1.0}, {(1, 1): (1, 1, 3, 1)})
    assert """<f t='array' aca = "1" ref="A1:A3">X</f><v>1</v>""" in data.decode()
    assert set_values(s, {(1, 1): 1.0}, {(1, 1): (1, 1, 2, 2)}) is s.data


def test_emptying_nothing_adds_nothing(sheet):
    s = sheet('<row r="1"><c r="A1" s="2"/></row>')
    assert set_values(s, {(1, 1): None, (5, 5): None}) is s.data


def test_cells_without_references(sheet):
    s = sheet("<row><c><v>1</v></c><c><f>X</f><v>2</v></c></row><row><c><v>3</v></c></row>")
    assert inner(set_values(s, {(1, 2): 5.0, (1, 4): 6.0, (2, 1): 7.0})) == (
        '<row><c><v>1</v></c><c><f>X</f><v>5</v></c><c r="D1"><v>6</v></c></row><row><c><v>7</v></c></row>'
    )


def test_attributes_inside_quotes_are_left():
    tag = b"""<f t="array" x=' ref="A1"' ref='B2'>"""
    assert with_attribute(tag, "ref", "C3") == b"""<f t="array" x=' ref="A1"' ref="C3">"""
    assert with_attribute(b"<c r='A1'/>", "t", "str") == b"<c r='A1' t=\"str\"/>"


def test_texts_of_all_forms(sheet):
    s = sheet(
        '<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1" t="inlineStr"><is><t>in</t></is></c>'
        '<c r="C1" t="inlineStr"><is><r><t xml:space="preserve">a </t></r><r><rPr><b/></rPr><t>b</t></r></is></c>'
        '<c r="D1" t="str"><v> x</v></c><c r="E1" t="b"><v>1</v></c><c r="F1" t="e"><v>#N/A</v></c><c r="G1"/></row>'
    )
    assert [s.value(1, column) for column in range(1, 9)] == [
        ("s", "0"),
        ("inlineStr", "in"),
        ("inlineStr", "a b"),
        ("str", " x"),
        ("b", "1"),
        ("e", "#N/A"),
        (None, None),
        (None, None),
    ]


def test_values_with_shared_strings(make):
    book = inspect(
        make(
            '<row r="1"><c r="A1" t="s"><v>1</v></c><c r="B1" t="s"><v>9</v></c><c r="C1"><v>2</v></c></row>',
            strings="<si><t>plain</t></si><si><r><t>東</t></r><r><t>京</t></r>"
            "<rPh sb='0' eb='1'><t>トウ</t></rPh></si>",
        )
    )
    s = read_sheet(book, "S1")
    found = values_of(book, s, {(1, 1), (1, 2), (1, 3), (9, 9)})
    assert found == {(1, 1): "東京", (1, 2): "", (1, 3): 2.0, (9, 9): None}


def test_formulas_of_all_forms(sheet):
    s = sheet(
        '<row r="1"><c r="A1"><f>1+1</f><v>2</v></c><c r="B1"><f t="shared" si="0" ref="B1:B3">A1*$C$1</f><v/></c>'
        '<c r="C1" cm="1"><f t="array" ref="C1:D2">X</f><v>3</v></c><c r="D1"><v>4</v></c>'
        '<c r="E1" t="str"><f>""</f><v></v></c></row>'
        '<row r="2"><c r="A2"><f t="array" ref="A2:A3">Y&amp;"_x0041_"</f></c><c r="B2"><f t="shared" si="0"/></c>'
        '<c r="C2"><f t="dataTable" ref="C2:C3" r1="A1"/><v>1</v></c></row>'
        '<row r="3"><c r="B3" t="e"><f t="shared" si="0"></f><v>#DIV/0!</v></c></row>'
    )
    got = [(f.row, f.column, f.text, f.kind, f.area, f.stored) for f in s.formulas]
    assert got == [
        (1, 1, "1+1", "plain", (1, 1, 1, 1), 2.0),
        (1, 2, "A1*$C$1", "plain", (1, 2, 1, 2), None),
        (1, 3, "X", "dynamic", (1, 3, 2, 4), 3.0),
        (1, 5, '""', "plain", (1, 5, 1, 5), ""),
        (2, 1, 'Y&"A"', "fixed", (2, 1, 3, 1), None),
        (2, 2, "A2*$C$1", "plain", (2, 2, 2, 2), None),
        (2, 3, "", "data table", (2, 3, 3, 3), 1.0),
        (3, 2, "A3*$C$1", "plain", (3, 2, 3, 2), ErrorValue("#DIV/0!")),
    ]


@pytest.mark.parametrize("encoding", ["utf-16", "iso-8859-1"])
def test_other_encodings_are_refused_in_words(parts_of, zipped, encoding):
    parts = parts_of('<row r="1"><c r="A1"><f>1</f></c></row>')
    text = f'<?xml version="1.0" encoding="{encoding}"?>' + parts["xl/worksheets/sheet1.xml"]
    book = inspect(zipped({**parts, "xl/worksheets/sheet1.xml": text.encode(encoding)}))
    with pytest.raises(BookRefused, match="UTF-8"):
        read_sheet(book, "S1")


def test_byte_order_mark(parts_of, zipped):
    parts = parts_of('<row r="1"><c r="A1"><f>1</f></c></row>')
    text = "\ufeff" + parts["xl/worksheets/sheet1.xml"]
    s = read_sheet(inspect(zipped({**parts, "xl/worksheets/sheet1.xml": text.encode()})), "S1")
    assert set_values(s, {(1, 1): 3.0}) == text.replace("<f>1</f>", "<f>1</f><v>3</v>").encode()


_values = st.one_of(st.none(), st.floats(allow_nan=False, allow_infinity=False), st.booleans(), st.text(max_size=12))


@settings(max_examples=150, deadline=None)
@given(
    st.dictionaries(st.tuples(st.integers(1, 6), st.integers(1, 5)), _values, max_size=12),
    st.dictionaries(st.tuples(st.integers(1, 7), st.integers(1, 6)), _values, max_size=12),
)
def test_set_values_are_read_back(before, after):
    def parsed(data):
        s = Sheet("S", data)
        _Reader(s).run()
        return s

    empty = f'<worksheet xmlns="{scans.MAIN}"><dimension ref="A1"/><sheetData></sheetData></worksheet>'.encode()
    first = set_values(parsed(empty), before)
    second = set_values(parsed(first), after)
    s = parsed(second)
    assert list(s.keys) == sorted(set(s.keys)) and list(s.rows) == sorted(set(s.rows))
    wanted = {**{k: v for k, v in before.items() if v is not None}, **after}
    for spot, value in wanted.items():
        index = s.at(*spot)
        if value is None:
            assert index is None or not s.filled[index]
            continue
        cell = s.cell(index)
        assert decoded(cell.attributes.get("t"), cell.children[0].text) == value
    assert set_values(s, after) == second
