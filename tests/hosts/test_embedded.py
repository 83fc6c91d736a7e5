"""Recalculating whole workbook files: made by two libraries, with everything else left byte for byte."""

import hashlib
import io
import subprocess
import sys
import zipfile
from dataclasses import dataclass

import pytest
import xlsxwriter

from cellfuncs.errors import BookRefused
from cellfuncs.hosts import embedded


@dataclass(frozen=True)
class Argument:
    name: str
    kind: str | None


@dataclass(frozen=True)
class Function:
    """As much of a catalogue entry as the host uses."""

    arguments: tuple
    call: object


def product(a, b):
    return a * b if isinstance(a, float) and isinstance(b, float) else f"! a: {a!r} and {b!r}"


def table(rows):
    return [["term", "share"], *[[f"t{r}", r / 7] for r in range(1, int(rows) + 1)]]


OURS = {
    "CF_PRODUCT": Function((Argument("velocity", "velocity"), Argument("length", "length")), product),
    "CF_TABLE": Function((Argument("rows", None),), table),
}


def recalc(path, out=None, **more):
    before = path.read_bytes()
    result = embedded.recalc(path, out, functions=OURS, **more)
    assert path.read_bytes() == before, "the input file was touched"
    return result


def contents(path):
    with zipfile.ZipFile(path) as archive:
        assert archive.testzip() is None
        return {info.filename: archive.read(info) for info in archive.infolist()}


@pytest.fixture
def rich(tmp_path):
    """A workbook with much that must survive: chart, text box, sparkline, note, names, formats, validation."""
    path = tmp_path / "coolant.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet, other = book.add_worksheet("Coolant loop"), book.add_worksheet("Other")
    bold = book.add_format({"bold": True, "bg_color": "#EEEEFF"})
    sheet.write_row("A1", ["Quantity", "Value", "Unit"], bold)
    sheet.write_row("A2", ["Velocity", 2.0, "m/s"])
    sheet.write_row("A3", ["Length", 0.25, "m"])
    sheet.write("A5", "Product")
    sheet.write_formula("B5", "=CF_PRODUCT(B2,B3)", bold)
    sheet.write_formula("C5", "=ROUND(B5,1)")
    sheet.write_dynamic_array_formula("E2:F2", "=CF_TABLE(3)")
    sheet.write_array_formula("H2:I6", "{=CF_TABLE(2)}")
    sheet.write_formula("K2", "=CF_TABLE(2)")
    sheet.write_rich_string("A9", "rich ", bold, "text")
    sheet.write_comment("B5", "a note")
    sheet.insert_textbox("A20", "a text box", {"width": 200})
    sheet.add_sparkline("L5", {"range": "'Coolant loop'!F3:F5"})
    sheet.data_validation("B2", {"validate": "decimal", "criteria": ">", "value": 0})
    sheet.conditional_format("F3:F9", {"type": "data_bar"})
    sheet.set_header("&Lhead")
    chart = book.add_chart({"type": "column"})
    chart.add_series({"values": "='Coolant loop'!$F$3:$F$5"})
    sheet.insert_chart("A30", chart)
    other.write_formula("A1", "='Coolant loop'!B5*2")
    other.merge_range("C1:D2", "merged")
    book.define_name("loop", "='Coolant loop'!$A$2:$C$3")
    book.close()
    return path


def test_everything_else_stays(rich):
    result = recalc(rich)
    assert result.out == rich.with_name("coolant.recalculated.xlsx")
    before, after = contents(rich), contents(result.out)
    assert list(before) == list(after)
    changed = [name for name in before if before[name] != after[name]]
    assert changed == ["xl/worksheets/sheet1.xml", "xl/worksheets/sheet2.xml"]
    # What is not cells stays within the changed parts too.
    head, tail = before[changed[0]].split(b"<sheetData>")[0], before[changed[0]].split(b"</sheetData>")[1]
    new = after[changed[0]]
    assert new.split(b"</sheetData>")[1] == tail
    assert new.split(b"<sheetData>")[0].replace(b"A1:K9", b"") == head.replace(b"A1:K9", b"")


def test_the_packed_bytes_of_other_parts_are_copied(rich):
    result = recalc(rich)
    with zipfile.ZipFile(rich) as old, zipfile.ZipFile(result.out) as new:
        for a, b in zip(old.infolist(), new.infolist(), strict=True):
            assert (a.filename, a.date_time, a.compress_type, a.external_attr) == (
                b.filename,
                b.date_time,
                b.compress_type,
                b.external_attr,
            )
            if "sheet1" not in a.filename and "sheet2" not in a.filename:
                assert (a.CRC, a.compress_size) == (b.CRC, b.compress_size)


def test_again_gives_the_same_file(rich, tmp_path):
    first = recalc(rich)
    second = recalc(first.out, tmp_path / "again.xlsx")
    assert first.out.read_bytes() == second.out.read_bytes()
    assert first.areas == second.areas


def test_another_library_reads_the_values(rich):
    import openpyxl

    result = recalc(rich)
    book = openpyxl.load_workbook(result.out, data_only=True)
    sheet = book["Coolant loop"]
    assert sheet["B5"].value == 0.5 and sheet["C5"].value == 0.5 and book["Other"]["A1"].value == 1
    assert [[c.value for c in row] for row in sheet["E2:F5"]] == [
        ["term", "share"],
        *[[f"t{r}", r / 7] for r in (1, 2, 3)],
    ]
    assert [[c.value for c in row] for row in sheet["H2:I6"]] == [
        ["term", "share"],
        ["t1", 1 / 7],
        ["t2", 2 / 7],
        ["#N/A", "#N/A"],
        ["#N/A", "#N/A"],
    ]
    assert sheet["K2"].value == "term" and sheet["K3"].value is None
    formulas = openpyxl.load_workbook(result.out)["Coolant loop"]
    assert formulas["B5"].value == "=CF_PRODUCT(B2,B3)" and formulas["E2"].value.ref == "E2:F5"


def test_areas(rich):
    areas = {area.range: area for area in recalc(rich).areas}
    assert set(areas) == {"B5", "E2:F5", "H2:I6", "K2"}
    assert areas["B5"].row_labels == ("Product",) and areas["B5"].values == ((0.5,),)
    assert areas["E2:F5"].values[0] == ("term", "share") and areas["E2:F5"].row_labels == ("", "", "", "")
    text = embedded.render_areas(recalc(rich).areas)
    assert "Coolant loop!E2:F5\n  term  share\n  t1    0.142857" in text
    assert "Product  0.5" in text


def test_column_with_head_and_labels(tmp_path):
    path = tmp_path / "a.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet()
    sheet.write_row("A1", ["point", "u", "product", "second"])
    for row in range(1, 61):
        sheet.write_row(row, 0, [f"p{row}", row])
        sheet.write_formula(row, 2, f"=CF_PRODUCT(B{row + 1},2)")
        sheet.write_formula(row, 3, f"=CF_PRODUCT(C{row + 1},1)")
    book.close()
    (area,) = recalc(path).areas
    assert area.range == "C2:D61" and area.heads == ("product", "second") and area.row_labels[:2] == ("p1", "p2")
    assert area.values[59] == (120.0, 120.0)
    text = embedded.render_areas([area])
    assert text.splitlines()[1].split() == ["product", "second"] and "and 20 more rows" in text


def test_numbers_as_labels(tmp_path):
    """A sweep: the varied number stands left of the answer, other things past a gap."""
    path = tmp_path / "a.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet()
    for row in range(3):
        sheet.write(row, 0, "K")
        sheet.write(row, 2, row / 4)
        sheet.write_formula(row, 3, f"=CF_PRODUCT(C{row + 1},2)")
    book.close()
    (area,) = recalc(path).areas
    assert area.row_labels == ("0", "0.25", "0.5")


def test_no_formulas_of_ours(tmp_path):
    path = tmp_path / "a.xlsx"
    book = xlsxwriter.Workbook(path)
    book.add_worksheet().write("A1", 1)
    book.close()
    result = recalc(path)
    assert result.areas == () and result.out.read_bytes() == path.read_bytes()
    assert embedded.render_areas(result.areas) == "The workbook holds no formulas with our functions."


def test_made_by_openpyxl(tmp_path):
    """A library that stores no values: all formulas are calculated."""
    import openpyxl

    path = tmp_path / "a.xlsx"
    book = openpyxl.Workbook()
    book.active["A1"] = 3
    book.active["A2"] = "=A1*2"
    book.active["A3"] = "=CF_PRODUCT(A1,A2)"
    book.save(path)
    result = recalc(path)
    sheet = openpyxl.load_workbook(result.out, data_only=True).active
    assert (sheet["A2"].value, sheet["A3"].value) == (6, 18)
    assert result.warnings == ()


def test_macro_workbook(rich, tmp_path):
    """Macros are copied as bytes: nothing looks into them."""
    parts = contents(rich)
    parts["[Content_Types].xml"] = parts["[Content_Types].xml"].replace(
        b"application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml",
        b"application/vnd.ms-excel.sheet.macroEnabled.main+xml",
    )
    parts["xl/vbaProject.bin"] = b"\xd0\xcf\x11\xe0 not even a project"
    path = tmp_path / "m.xlsm"
    with zipfile.ZipFile(path, "w") as archive:
        for name, data in parts.items():
            archive.writestr(name, data)
    result = recalc(path)
    assert result.out.name == "m.recalculated.xlsm"
    assert contents(result.out)["xl/vbaProject.bin"] == parts["xl/vbaProject.bin"]
    assert result.areas


# -- where it writes -----------------------------------------------------------------------------------


def test_never_over_the_input(rich, tmp_path):
    link = tmp_path / "link.xlsx"
    link.symlink_to(rich)
    for out in (rich, rich.parent / "." / rich.name, link):
        with pytest.raises(BookRefused, match="overwrite"):
            recalc(rich, out)
    with pytest.raises(BookRefused, match="folder"):
        recalc(rich, tmp_path)
    with pytest.raises(BookRefused, match=r"write out\.xlsx"):
        recalc(rich, tmp_path / "out.pdf")
    with pytest.raises(BookRefused, match="Cannot write"):
        recalc(rich, tmp_path / "no such folder" / "a.xlsx")


def test_nothing_is_left_behind_on_failure(rich, tmp_path, monkeypatch):
    def fail(*_):
        raise OSError(28, "No space left on device")

    names = set(p.name for p in tmp_path.iterdir())
    monkeypatch.setattr("os.replace", fail)
    with pytest.raises(BookRefused, match="No space left"):
        recalc(rich, tmp_path / "out.xlsx")
    assert set(p.name for p in tmp_path.iterdir()) == names


def test_output_replaces_an_old_one_whole(rich, tmp_path):
    out = tmp_path / "out.xlsx"
    out.write_bytes(b"old")
    recalc(rich, out)
    assert contents(out)


def test_refusals_pass_through(tmp_path):
    path = tmp_path / "a.xlsx"
    path.write_bytes(b"a,b\n1,2\n")
    with pytest.raises(BookRefused, match="plain text"):
        recalc(path)
    assert [p.name for p in tmp_path.iterdir()] == ["a.xlsx"]


def test_progress_is_told(rich):
    told = []
    recalc(rich, progress=told.append)
    assert told[0] == "examining the file" and "reading" in told and "calculating" in told and told[-1] == "writing"


# -- bare numbers beside a unit ------------------------------------------------------------------------


def warnings_of(tmp_path, fill):
    path = tmp_path / "units.xlsx"
    book = xlsxwriter.Workbook(path)
    fill(book.add_worksheet("S"))
    book.close()
    return recalc(path).warnings


def test_unit_right_of_the_number(tmp_path):
    def fill(sheet):
        sheet.write_row("A1", ["Velocity", 12, "ft/s"])
        sheet.write_row("A2", ["Length", 2, "m"])
        sheet.write_formula("B4", "=1+cf_product(B1,B2)")

    (warning,) = warnings_of(tmp_path, fill)
    assert "S!B4 takes B1 as velocity of CF_PRODUCT" in warning and "ft/s" in warning and "CF_SI" in warning


@pytest.mark.parametrize("label", ["Velocity [ft/s]", "U (ft/s)", "mean velocity, in the pipe (ft/s) "])
def test_unit_in_the_label(tmp_path, label):
    def fill(sheet):
        sheet.write_row("A1", [label, 12])
        sheet.write_formula("B4", "=CF_PRODUCT(B1,2)")

    assert len(warnings_of(tmp_path, fill)) == 1


def test_unit_in_the_head_of_a_column(tmp_path):
    def fill(sheet):
        sheet.write_row("A1", ["U [ft/s]", "L [m]", "product"])
        for row in range(1, 50):
            sheet.write_row(row, 0, [row, row])
            sheet.write_formula(row, 2, f"=CF_PRODUCT(A{row + 1},B{row + 1})")

    (warning,) = warnings_of(tmp_path, fill)
    assert "S!C2 takes A2 (and 48 more cells)" in warning


@pytest.mark.parametrize(
    "fill",
    [
        lambda s: (s.write_row("A1", ["Velocity", 12, "m/s"]), s.write_formula("B4", "=CF_PRODUCT(B1,2)")),
        lambda s: (s.write_row("A1", ["Velocity", 12, "psi"]), s.write_formula("B4", "=CF_PRODUCT(B1,2)")),
        lambda s: (
            s.write_row("A1", ["Velocity", 12, "ft/s"]),
            s.write_formula("B4", "=CF_PRODUCT(B1:C1,2)"),
        ),
        lambda s: (s.write_row("A1", ["Velocity", "12 ft/s"]), s.write_formula("B4", "=CF_PRODUCT(B1,2)")),
        lambda s: (s.write_row("A1", ["Velocity", 12, "a note"]), s.write_formula("B4", "=CF_PRODUCT(B1,2)")),
        lambda s: (s.write_row("A1", ["rows", 1, "ft/s"]), s.write_formula("B4", "=CF_TABLE(B1)")),
    ],
)
def test_no_warning(tmp_path, fill):
    assert warnings_of(tmp_path, fill) == ()


# -- light, bounded ------------------------------------------------------------------------------------


def test_import_is_light():
    code = (
        "import sys, cellfuncs.hosts.embedded, cellfuncs.books.gate\n"
        "heavy = {'numpy', 'formualizer', 'CoolProp', 'openpyxl', 'rich', 'scipy', 'pint'} & set(sys.modules)\n"
        "sys.exit(', '.join(heavy) or 0)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert done.returncode == 0, done.stderr


def _blank_bomb():
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", zipfile.ZIP_DEFLATED) as archive:
        archive.writestr("[Content_Types].xml", "<Types/>")
        archive.writestr("xl/a.xml", "<a>" + "<b/>" * 20_000_000 + "</a>")
    return out.getvalue()


def _merged():
    out, small = io.BytesIO(), io.BytesIO()
    book = xlsxwriter.Workbook(small)
    book.add_worksheet().merge_range("A1:B2", "all")
    book.close()
    with zipfile.ZipFile(small) as old, zipfile.ZipFile(out, "w") as archive:
        for name in old.namelist():
            archive.writestr(name, old.read(name).replace(b'mergeCell ref="A1:B2"', b'mergeCell ref="A1:XFD1048576"'))
    return out.getvalue()


@pytest.mark.parametrize("build", [_blank_bomb, _merged])
def test_hostile_files_within_memory_and_time(build, tmp_path):
    """In a process of its own: one line, 1 GiB of memory, 10 s of processor time, the input untouched."""
    path = tmp_path / "hostile.xlsx"
    path.write_bytes(build())
    digest = hashlib.sha256(path.read_bytes()).hexdigest()
    code = (
        "import resource, sys\n"
        "resource.setrlimit(resource.RLIMIT_CPU, (10, 10))\n"
        "from cellfuncs.errors import BookRefused\n"
        "from cellfuncs.hosts import embedded\n"
        "try:\n"
        "    embedded.recalc(sys.argv[1], functions={})\n"
        "except BookRefused as error:\n"
        "    print(error)\n"
        "print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss)"
    )
    done = subprocess.run([sys.executable, "-c", code, str(path)], capture_output=True, text=True)
    text, memory = done.stdout.splitlines()
    assert done.returncode == 0 and text.endswith(".") and int(memory) < 1024 * 1024
    assert hashlib.sha256(path.read_bytes()).hexdigest() == digest
    assert [p.name for p in tmp_path.iterdir()] == ["hostile.xlsx"]


def test_faults_are_counted_at_the_end():
    from cellfuncs.books.areas import FoundArea
    from cellfuncs.hosts.embedded import fault_line

    fine = FoundArea("S", "A1:A2", ("", ""), ("",), ((1.0,), ("water",)))
    bad = FoundArea("S", "B1:B2", ("", ""), ("",), (("! velocity: empty",), ("! length: empty",)))
    assert fault_line([fine]) == ""
    assert fault_line([fine, bad]) == "2 faults in our formulas, first in S!B1:B2: ! velocity: empty"
