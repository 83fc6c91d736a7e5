"""Workbooks from strangers: one clear line each, bounded, never a traceback."""

import re
import zipfile

import pytest

from cellfuncs import cli
from cellfuncs.errors import BookRefused
from cellfuncs.sheets.check import check_book

PIPE = {
    "A1": "Velocity", "B1": 2.0, "C1": "m/s", "A2": "Diameter", "B2": 0.025, "C2": "m",
    "A3": "Kinematic viscosity", "B3": 1e-6, "C3": "m²/s",
}  # fmt: skip


def result(formula, stored=50000.0):
    """A pipe whose Reynolds number has that formula."""
    return {**PIPE, "A5": "Reynolds number", "B5": (formula, stored), "C5": "-"}


def changed(data, part, change):
    """A workbook with one part's text changed."""
    import io

    out = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(data)) as old, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            content = old.read(name)
            new.writestr(name, change(content) if name == part else content)
    return out.getvalue()


SHEET = "xl/worksheets/sheet1.xml"


def _encrypted(_):
    return b"\xd0\xcf\x11\xe0" + bytes(600) + "EncryptedPackage".encode("utf-16-le")


def _old_xls(_):
    return b"\xd0\xcf\x11\xe0" + bytes(600) + "Workbook".encode("utf-16-le")


def _truncated(data):
    return data[: len(data) // 2]


def _xlsb(data):
    types = b"application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"
    return changed(data, "[Content_Types].xml", lambda t: t.replace(types, b"application/vnd.ms-excel.sheet.binary.macroEnabled.main"))  # noqa: E501


def _ods(_):
    import io

    out = io.BytesIO()
    with zipfile.ZipFile(out, "w") as archive:
        archive.writestr("mimetype", "application/vnd.oasis.opendocument.spreadsheet")
    return out.getvalue()


def _entities(data):
    bomb = b'<!DOCTYPE w [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;">]>'
    return changed(data, SHEET, lambda t: t.replace(b"?>", b"?>" + bomb, 1))


def _zip_bomb(data):
    return changed(data, SHEET, lambda t: t.replace(b"<sheetData>", b"<sheetData>" + b"<!-- a  -->" * 2_000_000))


def _far(data):
    return changed(data, SHEET, lambda t: t.replace(b'<dimension ref="A1:C3"/>', b'<dimension ref="A1:XFD1048576"/>'))


def _strict(data):
    loose = b"http://schemas.openxmlformats.org/spreadsheetml/2006/main"
    return changed(data, "xl/workbook.xml", lambda t: t.replace(loose, b"http://purl.oclc.org/ooxml/spreadsheetml/main"))


def _utf16(data):
    return changed(data, SHEET, lambda t: t.replace(b"UTF-8", b"utf-16").decode().encode("utf-16"))


REFUSED = {
    "password": (_encrypted, "encrypted"),
    "old xls": (_old_xls, "save it as .xlsx"),
    "xlsb": (_xlsb, "save it as .xlsx"),
    "ods": (_ods, "save it as .xlsx"),
    "truncated": (_truncated, "damaged"),
    "empty": (lambda _: b"", "empty"),
    "text": (lambda _: b"a;b;c\n1;2;3\n", "plain text"),
    "entities": (_entities, "entities"),
    "zip bomb": (_zip_bomb, "trap"),
    "million rows": (_far, "1048576"),
    "strict": (_strict, "strict"),
    "utf-16": (_utf16, "UTF-8"),
}


@pytest.mark.parametrize("name", REFUSED)
def test_a_file_that_cannot_be_read_gets_one_line(make_book, tmp_path, capsys, name):
    make, word = REFUSED[name]
    data = make(make_book(PIPE))
    with pytest.raises(BookRefused, match=word):
        check_book(data)
    path = tmp_path / "strange.xlsx"
    path.write_bytes(data)
    assert cli.main(["check", str(path)]) == 2
    said = capsys.readouterr()
    assert said.out == "" and said.err.startswith("cellfuncs: ") and said.err.count("\n") == 1 and word in said.err


def test_a_file_that_is_not_there(tmp_path, capsys):
    assert cli.main(["check", str(tmp_path / "none.xlsx")]) == 2
    assert capsys.readouterr().err == "cellfuncs: none.xlsx does not exist.\n"


@pytest.mark.parametrize(
    "formula",
    [
        "=B5+0*B1*B2/B3",  # on itself
        "=B6",
        "=" + "(" * 5000 + "B1" + ")" * 5000,
        "=" + "(" * 60 + "B1*B2/B3" + ")" * 60,
        "=" + "+".join(["B1"] * 2000),
        "=[1]Other!A1*B2/B3",
        "='[Other book.xlsx]S 1'!A1*B2/B3",
        "=NO.SUCH.FUNCTION(B1,B2)",
        "=_xlfn.LAMBDA(_xlpm.x,_xlpm.x*B1)(2)",
        "=B1*#REF!/B3",
        "=SUM(A:XFD)",
        "=SUM(A1:XFD1048576)",
        "=Table1[Flow]*B2",
        "={1,2;3,4}",
        "=B1**B2",
        "=)",
        "=",
        '="' + "x" * 5000 + '"',
        "=1/0",
        "=B1^1E308",
        "=10^400*B1",
    ],
    ids=lambda formula: formula[:24],
)
def test_strange_formulas_are_read_past(make_book, formula):
    cells = {**result(formula), "A6": "Prandtl number", "B6": ("=B5", 7.0), "C6": "-"}
    report = check_book(make_book(cells), "strange")
    assert report.cases and not any(f.code == "dimension-mismatch" for f in report.findings)


def test_circles_end(make_book):
    cells = {f"A{row}": (f"=A{row % 30 + 1}+B1", 1.0) for row in range(1, 31)}
    report = check_book(make_book({**cells, "B1": 1.0, "D1": "Velocity", "E1": ("=A1", 1.0), "F1": "m/s"}))
    assert not report.has_errors


def test_a_long_chain_of_unlabelled_cells(make_book):
    cells = {"A1": 2.0} | {f"A{row}": (f"=A{row - 1}*1.0001", 2.0) for row in range(2, 5000)}
    report = check_book(make_book({**cells, "D1": "Velocity", "E1": ("=A4999", 2.0), "F1": "m/s"}))
    assert not report.findings


def test_stored_errors_and_missing_values_are_told(make_book):
    cells = result("=B1*B2/B3", "#DIV/0!")
    report = check_book(make_book(cells))
    assert ("Sheet1!B5", "shows the error #DIV/0!") in report.not_understood
    data = changed(make_book(result("=B1*B2/B3")), SHEET, lambda t: re.sub(rb"<v>50000(?:\.0)?</v>", b"", t))
    report = check_book(data)
    assert ("Sheet1!B5", "the formula has no stored value") in report.not_understood


def test_nothing_recognisable(make_book):
    report = check_book(make_book({"A1": "Shopping list", "A2": "Apples", "B2": 3.0}))
    assert report.not_understood[-1] == ("", "no quantity was recognised in this workbook")
    assert not report.findings and not report.cases
    assert not check_book(make_book({})).findings


def test_large_sheets_are_cut_and_say_so(make_book, monkeypatch):
    from cellfuncs.sheets.inherited import page

    monkeypatch.setattr(page, "MOST_CELLS", 30)
    cells = {f"{column}{row}": float(row) for row in range(1, 40) for column in "AB"}
    report = check_book(make_book(cells))
    assert any("too large" in why for _, why in report.not_understood)


def test_signs_that_steer_a_terminal_are_taken_out(make_book):
    evil = "Velocity\x1b[31m \u202egnol"
    report = check_book(make_book({"A1": evil, "B1": 2.0, "C1": "m/s", "A2": "Reynolds number \x07", "B2": 3.0}))
    written = " ".join([*report.labels.values(), *(why for _, why in report.not_understood)])
    assert written.isprintable()
