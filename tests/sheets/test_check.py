"""The whole check: findings on the cell where they start, and the outputs that show them."""

import io
import json
import zipfile
from html.parser import HTMLParser

import openpyxl
import pytest

from cellfuncs import cli
from cellfuncs.books import inspect
from cellfuncs.checks.finding import CAUSES, SEVERITIES
from cellfuncs.sheets.check import check_book, checked
from cellfuncs.sheets.reporting.annotated import annotated
from cellfuncs.sheets.reporting.page import as_html
from cellfuncs.sheets.reporting.written import as_dict, as_json

EVIL = '<script>alert("x")</script>'


def pipe(reynolds="=B3*B1*B2/1000/(B4/1000)", stored=49900.0, **more):
    """Water in a tube, with a formula of the Reynolds number and what rests on it."""
    return {
        "A1": "Mean velocity", "B1": 2.0, "C1": "m/s", "A2": "Inside diameter", "B2": 25.0, "C2": "mm",
        "A3": "Density", "B3": 998.0, "C3": "kg/m³", "A4": "Dynamic viscosity", "B4": 1.0, "C4": "mPa·s",
        "A5": "Reynolds number", "B5": (reynolds, stored), "C5": "-",
        "A6": "Friction factor", "B6": ("=0.3164/B5^0.25", 0.3164 / stored**0.25), "C6": "-",
        "A7": "Length", "B7": 10.0, "C7": "m",
        "A8": "Pressure drop",
        "B8": ("=B6*B7/(B2/1000)*B3*B1^2/2/1000", 0.3164 / stored**0.25 * 10 / 0.025 * 998 * 2e-3),
        "C8": "kPa", "A10": "Water in a pipe, friction after Blasius", **more,
    }  # fmt: skip


WRONG = pipe("=B3*B1*B2/(B4/1000)", 49900000.0)


def test_a_right_sheet_is_clean(make_book):
    report = check_book(make_book(pipe()))
    assert not report.findings
    assert {cell for cell, _ in report.agreed} >= {"Sheet1!B5", "Sheet1!B6", "Sheet1!B8"}


def test_a_fault_is_laid_to_the_cell_where_it_starts(make_book):
    (finding,) = check_book(make_book(WRONG)).findings
    assert (finding.cell, finding.code, finding.severity) == ("Sheet1!B5", "unit-factor", "error")
    assert finding.recomputed == pytest.approx(49900.0, rel=1e-3)
    assert finding.inherited == ("Sheet1!B6", "Sheet1!B8")


def test_results_are_told_as_they_would_be(make_book):
    """The consequence is the stored formulas calculated with the right number: Blasius' f goes with Re^-1/4."""
    report = check_book(make_book(WRONG))
    (before, after) = report.changes["Sheet1!B5"]["Sheet1!B8"]
    assert after / before == pytest.approx(1000**0.25, rel=1e-3)
    assert "Pressure drop (Sheet1!B8)" in report.consequence(report.findings[0])


def test_a_finding_that_another_explains_is_listed_under_it(read):
    """A result that comes out right once the cell before it is mended only inherits, whatever contradicts it."""
    from dataclasses import replace

    from cellfuncs.sheets.check import _origins
    from cellfuncs.sheets.consequences import Consequences

    reading = read(WRONG)
    (first,) = checked(reading).findings
    stated = reading.quantities["Sheet1!B8"].stated.value
    drop = replace(first, cell="Sheet1!B8", quantity="pressure drop", stated=stated, unit="kPa", inherited=())
    consequences = Consequences(reading, ["Sheet1!B8"])
    same = replace(drop, recomputed=stated * 1000**0.25)  # Blasius' f goes with Re^-1/4
    own = replace(drop, recomputed=stated * 4.0)
    assert [f.cell for f in _origins([first, same], consequences)] == ["Sheet1!B5"]
    assert [f.cell for f in _origins([first, own], consequences)] == ["Sheet1!B5", "Sheet1!B8"]


def test_nothing_is_told_of_results_that_the_engine_does_not_give(make_book):
    cells = WRONG | {"B8": ("=B6*NO.SUCH.FUNCTION(B7)", 3.0)}
    report = check_book(make_book(cells))
    assert not report.changes and "Pressure drop" in report.consequence(report.findings[0])


def test_numbers_that_agree_overrule_doubts_about_units(make_book):
    """A formula in a form that the units cannot be followed through, but with the right number."""
    cells = pipe(A12="Flow area", B12=("=7.85398E-7*B2^2", 4.90874e-4), C12="m²")
    assert not check_book(make_book(cells)).findings


def test_json_has_exactly_the_agreed_form(make_book):
    found = json.loads(as_json(check_book(make_book(WRONG), "pipe.xlsx")))
    assert list(found) == ["workbook", "version", "findings", "agreed", "not_understood", "cases"]
    assert found["workbook"] == "pipe.xlsx"
    (finding,) = found["findings"]
    keys = "cell severity quantity stated recomputed cause inherited message source"
    assert list(finding) == keys.split()
    assert finding["severity"] in SEVERITIES and finding["cause"]["code"] in CAUSES
    assert set(finding["stated"]) == set(finding["recomputed"]) == {"value", "unit"}
    assert set(finding["cause"]) == {"code", "text", "confidence"}
    assert finding["inherited"] == ["Sheet1!B6", "Sheet1!B8"]
    assert all(set(entry) == {"cell", "quantity"} for entry in found["agreed"])
    assert all(set(entry) == {"cell", "why"} for entry in found["not_understood"])


class _Tags(HTMLParser):
    def __init__(self):
        super().__init__()
        self.tags, self.links, self.open = [], [], []

    def handle_starttag(self, tag, attributes):
        self.tags.append(tag)
        self.links += [value for name, value in attributes if name in ("src", "href", "action", "onload", "onclick")]


def test_the_page_needs_nothing_else_and_runs_nothing(make_book):
    cells = WRONG | {"A5": f"Reynolds number {EVIL}", "A12": EVIL, "B12": 7.0, "A13": f"Note {EVIL}"}
    report = check_book(make_book(cells), EVIL)
    page = as_html(report)
    tags = _Tags()
    tags.feed(page)
    assert "script" not in tags.tags and not tags.links and "img" not in tags.tags
    assert EVIL not in page and "&lt;script&gt;" in page
    assert "http" not in page.replace("http://www.w3.org/2000/svg", "").replace("http-equiv", "")
    assert report.findings and all(f"finding-{n}" in page for n in range(1, len(report.findings) + 1))


def test_the_page_shows_rows_numbers_terms_and_what_agreed(make_book):
    cells = WRONG | {"A14": "Inlet temperature", "B14": 20.0, "C14": "°C", "A15": "Wall temperature", "B15": 60.0,
                     "C15": "°C", "A16": "Flow area", "B16": ("=PI()/4*(B2/1000)^2", 4.90874e-4),
                     "C16": "m²"}  # fmt: skip
    page = as_html(check_book(make_book(cells), "pipe.xlsx"))
    for text in ("Mean velocity", "49900000", "unit-factor", "Friction factor", "<svg", "viscous heating", "flow area"):
        assert text in page, text


def test_a_copy_has_notes_and_a_sheet_of_findings_and_all_else(make_book):
    evil = '=HYPERLINK("http://x","y")'
    data = make_book(WRONG | {"A5": "Reynolds number", "A20": evil}, formats={"B1": "0.000"})
    book = inspect(data)
    report = check_book(data)
    copy = annotated(book, report)
    old, new = openpyxl.load_workbook(io.BytesIO(data)), openpyxl.load_workbook(io.BytesIO(copy))
    assert new.sheetnames == [*old.sheetnames, "Findings"]
    for row in old["Sheet1"].iter_rows():
        for cell in row:
            assert new["Sheet1"][cell.coordinate].value == cell.value
    assert new["Sheet1"]["B1"].number_format == "0.000"
    assert "unit-factor" in new["Sheet1"]["B5"].comment.text
    listed = [[cell.value for cell in row] for row in new["Findings"].iter_rows(min_row=4)]
    assert listed[0][:4] == ["no.", "sheet", "cell", "severity"] and listed[1][1:4] == ["Sheet1", "B5", "error"]
    inspect(copy)  # passes the gate itself
    with zipfile.ZipFile(io.BytesIO(data)) as before, zipfile.ZipFile(io.BytesIO(copy)) as after:
        kept = set(before.namelist()) - {"[Content_Types].xml"}
        same = {name for name in kept if before.read(name) == after.read(name)}
    assert {"xl/styles.xml", "xl/sharedStrings.xml"} <= same


def test_texts_of_a_workbook_are_texts_in_the_copy(make_book):
    """A label that begins like a formula stands in the list of findings as a text."""
    cells = WRONG | {"A5": '=cmd|" /C calc"!A0', "D5": "Reynolds number"}
    cells |= {"A5": "Reynolds number\n=1+1"}
    data = make_book(cells)
    copy = annotated(inspect(data), check_book(data))
    with zipfile.ZipFile(io.BytesIO(copy)) as archive:
        sheets = [name for name in archive.namelist() if name.startswith("xl/worksheets/sheet")]
        added = archive.read(sorted(sheets)[-1])
    assert b"<f>" not in added and b'<f ' not in added and b't="inlineStr"' in added


def with_macros(data):
    """The workbook as one with macros, which are nothing but bytes here."""
    out = io.BytesIO()
    plain, macro = b"spreadsheetml.sheet.main+xml", b"application/vnd.ms-excel.sheet.macroEnabled.main+xml"
    with zipfile.ZipFile(io.BytesIO(data)) as old, zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            content = old.read(name)
            if name == "[Content_Types].xml":
                content = content.replace(b"application/vnd.openxmlformats-officedocument." + plain, macro)
                kind = b'<Default Extension="bin" ContentType="application/vnd.ms-office.vbaProject"/>'
                content = content.replace(b"<Override", kind + b"<Override", 1)
            new.writestr(name, content)
        new.writestr("xl/vbaProject.bin", bytes(range(256)))
    return out.getvalue()


def test_macros_are_kept_and_the_original_stays(make_book, tmp_path):
    path, out = tmp_path / "old.xlsm", tmp_path / "checked.xlsm"
    path.write_bytes(with_macros(make_book(WRONG)))
    before = path.read_bytes()
    assert cli.main(["check", str(path), "--annotate", str(out)]) == 1
    assert path.read_bytes() == before
    with zipfile.ZipFile(out) as copy:
        assert copy.read("xl/vbaProject.bin") == bytes(range(256))
    assert inspect(out).kind == "xlsm"
    assert cli.main(["check", str(path), "--annotate", str(path)]) == 2
    assert path.read_bytes() == before


def test_hidden_rows_and_sheets_are_read(make_book):
    data = make_book(sheets={"Sheet1": WRONG, "Notes": {"A1": "Velocity", "B1": 3.0, "C1": "m/s"}})
    out = io.BytesIO()
    book = openpyxl.load_workbook(io.BytesIO(data))
    book["Sheet1"].row_dimensions[5].hidden = True
    book["Notes"].sheet_state = "hidden"
    book.save(out)
    report = check_book(out.getvalue())
    assert "Notes!B1" in report.labels and "Sheet1!B3" in report.labels


def test_exit_codes_and_the_table(make_book, tmp_path, capsys):
    right, wrong = tmp_path / "right.xlsx", tmp_path / "wrong.xlsx"
    right.write_bytes(make_book(pipe()))
    wrong.write_bytes(make_book(WRONG))
    assert cli.main(["check", str(right)]) == 0
    assert "nothing found" in capsys.readouterr().out
    assert cli.main(["check", str(wrong)]) == 1
    said = capsys.readouterr().out
    assert "Sheet1!B5" in said and "unit-factor" in said and "Pressure drop" in said


def test_a_folder_with_a_broken_file(make_book, tmp_path, capsys):
    (tmp_path / "in" / "deep").mkdir(parents=True)
    (tmp_path / "in" / "a.xlsx").write_bytes(make_book(pipe()))
    (tmp_path / "in" / "deep" / "a.xlsx").write_bytes(make_book(WRONG))
    (tmp_path / "in" / "b.xlsx").write_bytes(b"PK\x03\x04 broken")
    (tmp_path / "in" / "~$a.xlsx").write_bytes(b"open elsewhere")
    (tmp_path / "in" / "notes.txt").write_text("no workbook")
    code = cli.main(["check", str(tmp_path / "in"), "--json", str(tmp_path / "out")])
    said = capsys.readouterr()
    assert code == 1 and "b.xlsx" in said.err and said.err.count("\n") == 1
    written = sorted(path.relative_to(tmp_path / "out").as_posix() for path in (tmp_path / "out").rglob("*.json"))
    assert written == ["a.xlsx.json", "deep/a.xlsx.json"]
    empty = tmp_path / "empty"
    empty.mkdir()
    assert cli.main(["check", str(empty)]) == 2


def test_markup_in_a_workbook_is_no_markup_on_the_terminal(make_book, tmp_path, capsys):
    path = tmp_path / "odd.xlsx"
    path.write_bytes(make_book(WRONG | {"A5": "Reynolds number [bold red]x[/]"}))
    cli.main(["check", str(path)])
    assert "\x1b[" not in capsys.readouterr().out


def test_one_strange_case_does_not_take_the_rest_along(make_book, monkeypatch):
    from cellfuncs.sheets import check
    from cellfuncs.sheets.reporting import chart

    real = check.judge

    def breaks(cases, graph):
        if any(case.name == "Pump 1" for case in cases):
            raise ZeroDivisionError("division by zero")
        return real(cases, graph)

    monkeypatch.setattr(check, "judge", breaks)
    monkeypatch.setattr(chart, "_drawn", breaks)
    cells = {}
    for number, column in enumerate("AE"):
        value, unit = (("B", "C"), ("F", "G"))[number]
        cells |= {f"{column}1": f"Pump {number + 1}"}
        rows = [("Flow", 10.0, "m³/h"), ("Head", 20.0, "m"), ("Density", 998.0, "kg/m³")]
        for row, (label, amount, written) in enumerate([*rows, ("Hydraulic power", 9.9, "kW")], 2):
            cells |= {f"{column}{row}": label, f"{value}{row}": amount, f"{unit}{row}": written}
    report = check_book(make_book(cells))
    assert [finding.cell for finding in report.findings] == ["Sheet1!F5"]
    assert any("not recomputed" in why and "ZeroDivisionError" in why for _, why in report.not_understood)
    assert "an error of the program itself" in as_html(report)


def test_the_report_is_plain_values(make_book):
    import pickle

    report = check_book(make_book(WRONG))
    assert as_dict(pickle.loads(pickle.dumps(report))) == as_dict(report)
