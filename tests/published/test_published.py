"""Published check values: rows of data, called through the catalogue as a cell would call them.

A row has id, call (a cell function), args (cell values), expected (number or text), rel_tol or abs_tol, source and
kind: published, derived, computed, common practice, memory or regression. ``pick`` names the row and the column of a
table that is answered.
"""

import json
import math
from pathlib import Path

import pytest

from cellfuncs.cells import catalogue

FOLDER = Path(__file__).parent
KINDS = {"published", "derived", "computed", "common practice", "memory", "regression"}
# rows for methods (methods_*.json) have a runner of their own, test_methods.py
FILES = [file for file in sorted(FOLDER.glob("*.json")) if not file.name.startswith("methods_")]
ROWS = [row for file in FILES for row in json.loads(file.read_text("utf-8"))]

# cell functions that no outside source can speak about: they list, count, convert shapes or look up
WITHOUT_OUTSIDE_CHECK = {
    "CF_FAULTS": "counts our own fault texts",
    "CF_LIST": "lists what may be typed",
    "CF_VERSION": "tells our own version",
    "CF_UNIT_FITS": "one or zero; every unit of the outside table is read in tests/quantities",
    "CF_SUBSTANCES": "lists names",
    "CF_PROPERTIES": "the values of CF_PROPERTY in a table; compared with it in tests/cells",
    "CF_BLOCK": "rearranges cells",
    "CF_VARY": "replaces a row",
    "CF_TERMS": "the values of CF_TERM in a table; compared with it in tests/cells",
}


def test_rows_are_complete():
    ids = [row["id"] for row in ROWS]
    assert len(set(ids)) == len(ids)
    for row in ROWS:
        assert row["kind"] in KINDS, row["id"]
        assert row["source"].strip(), row["id"]
        assert "expected" in row, row["id"]


def test_every_function_has_an_outside_check():
    checked = {row["call"] for row in ROWS if row["kind"] != "regression"}
    missing = set(catalogue.functions()) - checked - set(WITHOUT_OUTSIDE_CHECK)
    assert not missing
    assert not set(WITHOUT_OUTSIDE_CHECK) & checked


@pytest.mark.parametrize("row", ROWS, ids=[f"{row['call']}-{row['id']}" for row in ROWS])
def test_published(row):
    got = catalogue.functions()[row["call"]].call(*row["args"])
    if "pick" in row:
        assert isinstance(got, list), got
        name, column = row["pick"]
        got = next(cells for cells in got if cells[0] == name)[got[0].index(column)]
    wanted = row["expected"]
    text = f"{row['call']}({row['args']}) = {got!r}, wanted {wanted!r}; {row['source']}"
    if isinstance(wanted, str):
        assert got == wanted, text
        return
    assert isinstance(got, float), text
    allowed = max(row.get("rel_tol", 0.0) * abs(wanted), row.get("abs_tol", 0.0))
    assert math.isfinite(got) and abs(got - wanted) <= allowed, f"{text}; off by {got - wanted:.3g}"
