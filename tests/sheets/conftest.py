"""Workbooks written cell by cell, as other people's programs write them."""

import io

import pytest
import xlsxwriter


def book_of(cells=None, *, sheets=None, names=(), formats=None, merges=()):
    """The bytes of a workbook; ``cells`` are those of Sheet1 by address, a value or a formula with its stored value."""
    out = io.BytesIO()
    book = xlsxwriter.Workbook(out, {"in_memory": True})
    for title, content in (sheets or {"Sheet1": cells}).items():
        sheet = book.add_worksheet(title)
        for place, value in content.items():
            code = (formats or {}).get(place)
            style = book.add_format({"num_format": code}) if code else None
            if isinstance(value, tuple):
                sheet.write_formula(place, value[0], style, value[1])
            elif isinstance(value, str):
                sheet.write_string(place, value, style)
            else:
                sheet.write(place, value, style)
        for area, text in merges:
            sheet.merge_range(area, text)
    for name, text in names:
        book.define_name(name, text)
    book.close()
    return out.getvalue()


@pytest.fixture(autouse=True)
def own_state(tmp_path_factory, monkeypatch):
    """What is kept of a run lies in a folder of the test, whatever the system."""
    folder = tmp_path_factory.mktemp("state")
    monkeypatch.setattr("platformdirs.user_state_path", lambda *_, **__: folder)
    return folder


@pytest.fixture
def make_book():
    return book_of


@pytest.fixture
def read():
    """A workbook's cells as a reading."""
    from cellfuncs.books import inspect
    from cellfuncs.sheets.inherited.reading import read_book

    return lambda cells=None, **more: read_book(inspect(book_of(cells, **more)))
