"""Small workbooks made part by part, so that a test says exactly what stands in the file."""

import io
import zipfile

import pytest

MAIN = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
RELATIONS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships"
PACKAGE = "http://schemas.openxmlformats.org/package/2006"
ML = "application/vnd.openxmlformats-officedocument.spreadsheetml"


def parts_of(*sheets, names="", calc="", strings=None, extra_relations="", extra_types="", kind=f"{ML}.sheet.main+xml"):
    """The parts of a workbook whose sheets hold the given sheetData, or are the given text where it is a whole part."""
    whole = [
        s
        if s.startswith(("<?xml", "<x:", "<worksheet"))
        else f'<worksheet xmlns="{MAIN}" xmlns:r="{RELATIONS}"><sheetData>{s}</sheetData></worksheet>'
        for s in sheets
    ]
    rows = "".join(f'<sheet name="S{n}" sheetId="{n}" r:id="rId{n}"/>' for n, _ in enumerate(whole, 1))
    relations = "".join(
        f'<Relationship Id="rId{n}" Type="{RELATIONS}/worksheet" Target="worksheets/sheet{n}.xml"/>'
        for n, _ in enumerate(whole, 1)
    )
    types = "".join(
        f'<Override PartName="/xl/worksheets/sheet{n}.xml" ContentType="{ML}.worksheet+xml"/>'
        for n, _ in enumerate(whole, 1)
    )
    parts = {
        "[Content_Types].xml": f'<Types xmlns="{PACKAGE}/content-types"><Default Extension="rels"'
        ' ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
        f'<Override PartName="/xl/workbook.xml" ContentType="{kind}"/>{types}{extra_types}</Types>',
        "_rels/.rels": f'<Relationships xmlns="{PACKAGE}/relationships"><Relationship Id="rId1"'
        f' Type="{RELATIONS}/officeDocument" Target="xl/workbook.xml"/></Relationships>',
        "xl/workbook.xml": f'<workbook xmlns="{MAIN}" xmlns:r="{RELATIONS}">'
        f"<sheets>{rows}</sheets>{names}{calc}</workbook>",
        "xl/_rels/workbook.xml.rels": f'<Relationships xmlns="{PACKAGE}/relationships">{relations}{extra_relations}'
        + (f'<Relationship Id="rIdS" Type="{RELATIONS}/sharedStrings" Target="sharedStrings.xml"/>' if strings else "")
        + "</Relationships>",
    }
    for number, text in enumerate(whole, 1):
        parts[f"xl/worksheets/sheet{number}.xml"] = text
    if strings:
        parts["xl/sharedStrings.xml"] = f'<sst xmlns="{MAIN}">{strings}</sst>'
    return parts


def zipped(parts, method=zipfile.ZIP_DEFLATED):
    """The bytes of a container with these parts."""
    out = io.BytesIO()
    with zipfile.ZipFile(out, "w", method) as archive:
        for name, data in parts.items():
            archive.writestr(name, data)
    return out.getvalue()


@pytest.fixture(name="parts_of")
def _parts_of():
    return parts_of


@pytest.fixture(name="zipped")
def _zipped():
    return zipped


@pytest.fixture
def make():
    """A workbook's bytes from the sheetData of its sheets."""
    return lambda *sheets, **more: zipped(parts_of(*sheets, **more))


@pytest.fixture
def run():
    """Evaluate and splice in memory: (evaluation, new bytes of the file)."""

    def go(data, functions):
        from cellfuncs.books import inspect
        from cellfuncs.books.engine import evaluate
        from cellfuncs.books.package import copy_with
        from cellfuncs.books.splice import set_values

        book = inspect(data)
        result = evaluate(book, functions)
        changed = {
            book.sheet(name).part: set_values(sheet, result.values.get(name, {}), result.extents.get(name, {}))
            for name, sheet in result.sheets.items()
        }
        return result, copy_with(book.package, changed)

    return go
