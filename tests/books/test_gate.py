"""The gate: what passes, and that each hostile or foreign file ends in one sentence, fast and small."""

import contextlib
import io
import random
import struct
import zipfile

import pytest

from cellfuncs.books import gate, inspect, package, scans
from cellfuncs.errors import BookRefused

CELLS = '<row r="1"><c r="A1"><v>1</v></c></row>'


def refused(data):
    with pytest.raises(BookRefused) as caught:
        inspect(data)
    text = str(caught.value)
    assert text[0].isupper() or text[0].isdigit() or "." in text
    assert text.endswith((".", ")")) and "\n" not in text and len(text) < 230 and not text.startswith("! ")
    return text


def edited(parts, name, data):
    return {**parts, name: data}


# -- what passes ---------------------------------------------------------------------------------------


def test_description(make):
    data = make(
        '<row r="2"><c r="B2"><f>1+1</f><v>2</v></c><c r="D2"/></row>',
        "",
        names='<definedNames><definedName name="block">S1!$A$1:$B$2</definedName>'
        '<definedName name="local" localSheetId="1">S2!$A$1</definedName></definedNames>',
        calc='<calcPr fullCalcOnLoad="1" iterate="1"/>',
    )
    book = inspect(data)
    first, second = book.sheets
    assert (first.name, first.part, first.kind) == ("S1", "xl/worksheets/sheet1.xml", "worksheet")
    assert (first.cells, first.formulas, first.last_row, first.last_column) == (2, 1, 2, 4)
    assert (second.cells, second.formulas) == (0, 0)
    assert [(n.name, n.text, n.sheet) for n in book.names] == [
        ("block", "S1!$A$1:$B$2", None),
        ("local", "S2!$A$1", "S2"),
    ]
    assert book.full_calculation and not book.date_1904 and book.iterate == {"iterate": "1"}
    assert book.kind == "xlsx"


def test_date_system_and_macro_workbook(parts_of, zipped):
    parts = parts_of(CELLS, kind="application/vnd.ms-excel.sheet.macroEnabled.main+xml")
    parts["xl/workbook.xml"] = parts["xl/workbook.xml"].replace("<sheets>", '<workbookPr date1904="1"/><sheets>')
    parts["xl/vbaProject.bin"] = b"\xd0\xcf\x11\xe0 macros"
    book = inspect(zipped(parts))
    assert book.date_1904 and book.kind == "xlsm"


def test_path_and_bytes_agree(make, tmp_path):
    path = tmp_path / "a.xlsx"
    path.write_bytes(make(CELLS))
    assert inspect(path).sheets == inspect(path.read_bytes()).sheets


def test_prefixed_sheet_passes(make):
    rows = "<x:sheetData><x:row><x:c><x:v>1</x:v></x:c></x:row></x:sheetData>"
    sheet = f'<x:worksheet xmlns:x="{scans.MAIN}">{rows}</x:worksheet>'
    assert inspect(make(sheet)).sheets[0].cells == 1


def test_stored_parts_pass(parts_of, zipped):
    assert inspect(zipped(parts_of(CELLS), zipfile.ZIP_STORED)).sheets[0].cells == 1


# -- other kinds of file -------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "data, word",
    [
        (b"", "empty"),
        (
            b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 600 + "EncryptedPackage".encode("utf-16-le"),
            "password",
        ),
        (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 600 + "Workbook".encode("utf-16-le"), ".xls form"),
        (b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + b"\0" * 600, "binary form"),
        (b"quantity,value\nvelocity,3\n", "plain text"),
        (b"%PDF-1.7\n", "PDF"),
        (b"<html><table></table></html>", "HTML"),
        (b"\xef\xbb\xbf<?xml version='1.0'?><Workbook/>", "XML"),
        (b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR", "not a workbook"),
        (b"PK\x03\x04" + b"\0" * 100, "damaged"),
    ],
)
def test_not_a_workbook(data, word):
    assert word in refused(data)


def test_other_archives(zipped):
    assert "not a workbook" in refused(zipped({"a.txt": "hello"}))
    ods = {"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": "<a/>"}
    assert ".ods" in refused(zipped(ods))


def test_other_packages(parts_of, zipped):
    binary = "application/vnd.ms-excel.sheet.binary.macroEnabled.main"
    assert ".xlsb" in refused(zipped(parts_of(CELLS, kind=binary)))
    text = "application/vnd.openxmlformats-officedocument.wordprocessingml.document.main+xml"
    assert "text document" in refused(zipped(parts_of(CELLS, kind=text)))
    assert "without a workbook" in refused(zipped(parts_of(CELLS, kind="text/plain")))


def test_strict_form(parts_of, zipped):
    parts = parts_of(CELLS)
    strict = "http://purl.oclc.org/ooxml/spreadsheetml/main"
    whole = {n: d.replace(scans.MAIN, strict) for n, d in parts.items()}
    assert "strict" in refused(zipped(whole))
    only_sheet = edited(parts, "xl/worksheets/sheet1.xml", whole["xl/worksheets/sheet1.xml"])
    assert "strict" in refused(zipped(only_sheet))


def test_missing_file_folder_and_size(tmp_path, monkeypatch):
    assert "does not exist" in refused(tmp_path / "none.xlsx")
    assert "folder" in refused(tmp_path)
    big = tmp_path / "big.xlsx"
    big.write_bytes(b"PK\x03\x04" + b"\0" * (package.MAX_FILE + 1))
    assert "20 MB" in refused(big)
    assert "20 MB" in refused(big.read_bytes())


# -- the container -------------------------------------------------------------------------------------


def test_truncated(make):
    data = make(CELLS)
    for length in (30, len(data) // 2, len(data) - 30, len(data) - 1):
        refused(data[:length])


def test_any_damaged_byte_is_refused_or_harmless(make):
    """Flipping a byte anywhere never raises anything but BookRefused."""
    data = make(CELLS)
    for at in range(4, len(data), 7):
        with contextlib.suppress(BookRefused):
            inspect(data[:at] + bytes([data[at] ^ 0xFF]) + data[at + 1 :])


def test_duplicate_entries(parts_of):
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w") as archive:
        for name, data in parts_of(CELLS).items():
            archive.writestr(name, data)
        with pytest.warns(UserWarning):
            archive.writestr("xl/workbook.xml", "<other/>")
    assert "twice" in refused(out.getvalue())
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w") as archive:
        for name, data in parts_of(CELLS).items():
            archive.writestr(name, data)
        archive.writestr("XL/workbook.XML", "<other/>")
    assert "twice" in refused(out.getvalue())


@pytest.mark.parametrize("name", ["../evil.xml", "xl/../../evil.xml", "/etc/evil", "C:/evil.xml", "..\\evil.xml"])
def test_names_that_point_outside(parts_of, zipped, name):
    assert "outside" in refused(zipped({**parts_of(CELLS), name: "x"}))


def test_too_many_entries(parts_of, zipped):
    assert "2000" in refused(zipped({**parts_of(CELLS), **{f"x/{n}.bin": "" for n in range(2001)}}))


def test_zip_bomb(parts_of, zipped):
    bomb = zipped({**parts_of(CELLS), "xl/media/image.bin": b"\0" * 30_000_000})
    assert len(bomb) < 100_000
    assert "100 times" in refused(bomb)


def test_bomb_of_blank_cells(parts_of, zipped):
    rows = "".join(f'<row r="{r}">' + '<c s="1"/>' * 1000 + "</row>" for r in range(1, 2000))
    assert "100 times" in refused(zipped(parts_of(rows)))


def test_size_that_lies(parts_of, zipped):
    """The directory claims 10 bytes, the data is 3 MB: real bytes are counted, not claims."""
    payload = random.Random(1).randbytes(3_000_000)
    good = zipped({**parts_of(CELLS), "xl/a.bin": payload})
    central = good.rindex(b"PK\x01\x02", 0, good.rindex(b"xl/a.bin"))
    lying = bytearray(good)
    lying[central + 24 : central + 28] = struct.pack("<I", 10)
    assert "directory says" in refused(bytes(lying))


def test_total_size(parts_of, zipped, monkeypatch):
    monkeypatch.setattr(package, "MAX_INFLATED", 3000)
    assert "200 MB" in refused(zipped({**parts_of(CELLS), "xl/a.bin": b"ab" * 2000}))


def test_overlapping_parts(parts_of, zipped):
    """Two directory entries that share the same packed bytes."""
    good = bytearray(zipped({**parts_of(CELLS), "xl/a.bin": b"abc", "xl/b.bin": b"abc"}, zipfile.ZIP_STORED))
    first = good.index(b"PK\x03\x04", good.index(b"xl/worksheets/sheet1.xml"))
    central = good.rindex(b"PK\x01\x02", 0, good.rindex(b"xl/b.bin"))
    good[central + 42 : central + 46] = struct.pack("<I", first)
    text = refused(bytes(good))
    assert "two names" in text or "on top" in text


def test_encrypted_part(parts_of, zipped):
    data = bytearray(zipped(parts_of(CELLS)))
    at = data.index(b"PK\x01\x02")
    data[at + 8] |= 1
    assert "encrypted" in refused(bytes(data))


def test_unusual_packing(parts_of, zipped):
    assert "unusual" in refused(zipped({**parts_of(CELLS), "a.bin": b"a" * 100}, zipfile.ZIP_BZIP2))


def test_large_form_of_the_container(parts_of):
    """Members in the ZIP64 form are read where their sizes are ordinary."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, data in parts_of(CELLS).items():
            with archive.open(name, "w", force_zip64=True) as part:
                part.write(data.encode())
    assert inspect(out.getvalue()).sheets[0].cells == 1


# -- XML -----------------------------------------------------------------------------------------------

_BOMB = (
    '<?xml version="1.0"?><!DOCTYPE w [<!ENTITY a "aaaaaaaaaa">'
    + "".join(f'<!ENTITY {chr(98 + n)} "{f"&{chr(97 + n)};" * 10}">' for n in range(9))
    + f']><worksheet xmlns="{scans.MAIN}"><sheetData><row><c t="str"><v>&j;</v></c></row></sheetData></worksheet>'
)


def test_entity_bomb(parts_of, zipped):
    assert "document type" in refused(zipped(parts_of(_BOMB)))
    for part in ("xl/drawings/drawing1.xml", "customXml/item1.xml", "docProps/core.xml", "xl/d.vml"):
        assert "document type" in refused(zipped({**parts_of(CELLS), part: _BOMB}))
    outside = f'<?xml version="1.0"?><!DOCTYPE w SYSTEM "file:///etc/hosts"><worksheet xmlns="{scans.MAIN}"/>'
    assert "document type" in refused(zipped(parts_of(outside)))
    sixteen = _BOMB.replace('version="1.0"', 'version="1.0" encoding="UTF-16"').encode("utf-16")
    assert "document type" in refused(zipped({**parts_of(CELLS), "customXml/item1.xml": sixteen}))


def test_depth(make):
    deep = "<a>" * 100_000 + "</a>" * 100_000
    assert "nested" in refused(make(f'<row r="1"><c r="A1"><v>1</v></c></row>{deep}'))


def test_long_attribute(parts_of, zipped):
    repeated = f'<row r="1" spans="{"1:2 " * 12_500_000}"></row>'  # 50 MB
    assert "1 MB" in refused(zipped(parts_of(repeated)))


def test_too_many_tags(make, monkeypatch):
    monkeypatch.setattr(gate, "MAX_MARKS", 1_000_000)
    noise = "".join(f'<a b="{n * n}"/>' for n in range(1_000_100))
    assert "million tags" in refused(make(f'<row r="1">{noise}</row>'))


def test_time(make, monkeypatch):
    monkeypatch.setattr(gate, "MAX_SECONDS", -1.0)
    assert "too long" in refused(make(CELLS))


@pytest.mark.parametrize("name", ["xl/workbook.xml", "xl/worksheets/sheet1.xml", "_rels/.rels", "[Content_Types].xml"])
def test_broken_and_missing_parts(parts_of, zipped, name):
    parts = parts_of(CELLS)
    assert "well-formed" in refused(zipped(edited(parts, name, parts[name][:-5])))
    refused(zipped(edited(parts, name, "")))
    refused(zipped(edited(parts, name, b"\xff\xfe\x00")))
    refused(zipped({n: d for n, d in parts.items() if n != name}))
    refused(zipped(edited(parts, name, "<other/>")))


def test_missing_relations(parts_of, zipped):
    parts = parts_of(CELLS)
    del parts["xl/_rels/workbook.xml.rels"]
    assert "no part" in refused(zipped(parts))


def test_no_sheets(parts_of, zipped):
    assert "no sheets" in refused(zipped(parts_of()))


# -- cells ---------------------------------------------------------------------------------------------


def test_merge_over_the_whole_sheet(make):
    merges = '<mergeCells><mergeCell ref="A1:XFD1048576"/></mergeCells>'
    sheet = f'<worksheet xmlns="{scans.MAIN}"><sheetData/>{merges}</worksheet>'
    assert "merges" in refused(make(sheet))


def test_array_over_the_whole_sheet(make):
    cell = '<row r="1"><c r="A1"><f t="array" ref="{}">SIN(1)</f></c></row>'
    assert "array formulas" in refused(make(cell.format("A1:XFD1048576")))
    assert "no range" in refused(make(cell.format("A1:ZZZZ9")))
    assert inspect(make(cell.format("A1:J100"))).sheets[0].formulas == 1


def test_million_row_dimension(make):
    for claimed in ("A1:XFD1048576", "A1:A1048576", "A1:C1000000"):
        body = f'<dimension ref="{claimed}"/><sheetData>{CELLS}</sheetData>'
        sheet = f'<worksheet xmlns="{scans.MAIN}">{body}</worksheet>'
        assert "says it reaches" in refused(make(sheet))


def test_far_cell(make):
    far = CELLS + '<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>'
    assert "far from" in refused(make(far))
    corner_only = '<row r="1048576"><c r="XFD1048576"><v>1</v></c></row>'
    assert inspect(make(corner_only)).sheets[0].last_row == 1048576


@pytest.mark.parametrize(
    "cells",
    [
        '<row r="1"><c r="XFE1"><v>1</v></c></row>',
        '<row r="1"><c r="a1"><v>1</v></c></row>',
        '<row r="1"><c r="A2"><v>1</v></c></row>',
        '<row r="0"><c r="A0"><v>1</v></c></row>',
        '<row r="1048577"><c><v>1</v></c></row>',
        '<row r="x"/>',
        '<row r="-1"/>',
        '<row r="2"/><row r="1"/>',
        '<row r="1"><c r="B1"/><c r="A1"/></row>',
        '<row r="1"><c r="A1"/><c r="A1"/></row>',
        '<c r="A1"/>',
        '<row r="1">' + "<c/>" * 16385 + "</row>",
        '<row r="1"><c r=""/></row>',
    ],
)
def test_cells_that_are_none(make, cells):
    refused(make(cells))


def test_too_many_formulas(make):
    rows = "".join(f'<row r="{r}"><c r="A{r}"><f>B{r}*{r * r}</f></c></row>' for r in range(1, 200_002))
    assert "200 000 formulas" in refused(make(rows))


def test_too_many_cells(make, monkeypatch):
    monkeypatch.setattr(scans, "MAX_CELLS", 3)
    cells = '<row r="1"><c/><c/></row>'
    assert "million cells" in refused(make(cells, cells))
