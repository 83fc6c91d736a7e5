"""Published check values of methods: rows of data in ``methods_*.json``, evaluated by the method's name.

A row has id, method, inputs (parameters by their names in Python), expected, rel_tol or abs_tol, source and kind as
in ``test_published``. Every row is evaluated once with plain numbers and once with columns.
"""

import json
import math
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError
from cellfuncs.methods import METHODS
from cellfuncs.methods.base import inputs
from cellfuncs.sources import cite

FOLDER = Path(__file__).parent
KINDS = {"published", "derived", "computed", "common practice", "memory", "regression"}
FILES = sorted(FOLDER.glob("methods_*.json"))
ROWS = [row for file in FILES for row in json.loads(file.read_text("utf-8"))]
BY_ID = [pytest.param(row, id=f"{row['method']}-{row['id']}") for row in ROWS]
FIRST = [pytest.param(row, id=name) for name, row in {row["method"]: row for row in reversed(ROWS)}.items()]


def is_number(name):
    return inputs()[name].sign != "choice"


def test_rows_are_complete():
    ids = [row["id"] for row in ROWS]
    assert len(set(ids)) == len(ids), sorted(x for x in ids if ids.count(x) > 1)
    for row in ROWS:
        assert row["method"] in METHODS, row
        assert row["kind"] in KINDS, row["id"]
        assert row["source"].strip(), row["id"]
        assert row.get("rel_tol", 0) > 0 or row.get("abs_tol", 0) > 0, row["id"]


@pytest.mark.parametrize("name", METHODS)
def test_every_method_has_an_outside_check(name):
    assert any(row["method"] == name and row["kind"] != "regression" for row in ROWS)


@pytest.mark.parametrize("name", METHODS)
def test_every_method_says_what_it_is(name):
    found = METHODS[name]
    assert cite(found.source)
    assert 0 <= found.scatter <= 0.5
    assert 10 < len(found.summary) <= 255 and found.summary.endswith(".")
    known = {i.symbol for i in inputs().values()}
    assert set(found.inputs) <= set(inputs())
    assert {r.variable for r in found.ranges} <= known
    for r in found.ranges:
        assert r.low < r.high
    for allowed in found.where.values():
        assert isinstance(allowed, tuple)


@pytest.mark.parametrize("row", BY_ID)
def test_method(row):
    found = METHODS[row["method"]]
    got = found.evaluate(row["inputs"], allow=True)
    wanted = row["expected"]
    allowed = max(row.get("rel_tol", 0.0) * abs(wanted), row.get("abs_tol", 0.0))
    text = f"{row['method']}({row['inputs']}) = {got!r}, wanted {wanted!r}; {row['source']}"
    assert math.isfinite(got) and abs(got - wanted) <= allowed, f"{text}; off by {got - wanted:.3g}"


@pytest.mark.parametrize("row", BY_ID)
def test_a_column_gives_what_its_numbers_give(row):
    found = METHODS[row["method"]]
    columns = {
        name: np.array([value, value * 1.01]) if is_number(name) else value for name, value in row["inputs"].items()
    }
    if not any(is_number(name) for name in row["inputs"]):
        return
    got = np.broadcast_to(found.evaluate(columns, allow=True), 2)
    for k in range(2):
        single = {n: float(v[k]) if is_number(n) else v for n, v in columns.items()}
        assert got[k] == pytest.approx(found.evaluate(single, allow=True), rel=1e-12)


@pytest.mark.parametrize("bad", [math.nan, math.inf, -math.inf, -1.0, 0.0])
@pytest.mark.parametrize("row", FIRST)
def test_what_is_no_number_of_its_sign_is_refused(row, bad):
    found = METHODS[row["method"]]
    for name in row["inputs"]:
        if not is_number(name):
            continue
        sign = inputs()[name].sign
        if math.isfinite(bad) and (sign == "any" or (sign == "zero" and bad == 0)):
            continue
        for value in (bad, np.array([row["inputs"][name], bad])):
            with pytest.raises(CellfuncsError):
                found.evaluate({**row["inputs"], name: value}, allow=True)


@pytest.mark.parametrize("row", FIRST)
def test_a_missing_input_is_named(row):
    found = METHODS[row["method"]]
    for name in found.needed:
        with pytest.raises(CellfuncsError, match=found.name.split(",")[0][:20].replace("(", ".")):
            found.evaluate({**row["inputs"], name: None}, allow=True)


@pytest.mark.parametrize("row", FIRST)
def test_outside_its_range_a_method_refuses(row):
    found = METHODS[row["method"]]
    by_symbol = {i.symbol: name for name, i in inputs().items()}
    for r in found.ranges:
        for limit, beyond in ((r.low, r.low - abs(r.low) * 0.01), (r.high, r.high * 1.01 + 1e-300)):
            name = by_symbol[r.variable]
            sign = inputs()[name].sign
            if not math.isfinite(limit) or limit == 0 or (sign != "any" and beyond <= 0):
                continue
            with pytest.raises(CellfuncsError):
                found.evaluate({**row["inputs"], name: beyond})
            assert found.outside(**{r.variable: beyond})
            assert not found.outside(**{r.variable: limit})


@pytest.mark.parametrize("row", FIRST)
@settings(max_examples=20)
@given(st.data())
def test_whatever_the_numbers_there_is_a_finite_answer_or_a_refusal(row, data):
    """Sizes over twenty-four powers of ten, with `beyond range: allow`: nothing but our own refusals comes out."""
    found = METHODS[row["method"]]
    wild = {
        name: 10.0 ** data.draw(st.floats(-12.0, 12.0), label=name) if is_number(name) else value
        for name, value in row["inputs"].items()
    }
    try:
        got = found.evaluate(wild, allow=True)
    except CellfuncsError:
        return
    assert isinstance(got, (float, int)) and math.isfinite(got)
