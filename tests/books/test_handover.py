"""What the engine hands to a function and makes of its answers, so that a change of the library is noticed."""

import datetime

import numpy as np
import pytest

from cellfuncs.books.engine import evaluate
from cellfuncs.books.xmltext import ErrorValue

CELLS = (
    '<row r="1"><c r="A1"><v>1.5</v></c><c r="B1"><v>7</v></c></row>'
    '<row r="2"><c r="A2" t="inlineStr"><is><t>text</t></is></c></row>'
    '<row r="3"><c r="A3" t="b"><v>1</v></c></row>'
    '<row r="4"><c r="A4" t="e"><v>#DIV/0!</v></c></row>'
)


@pytest.fixture
def handed(make):
    """What CF_SEE is called with in one formula."""

    def go(formula):
        seen = []

        def see(*given):
            seen.append(given)
            return 0.0

        evaluate(make(f'{CELLS}<row r="9"><c r="Z9"><f>{formula}</f></c></row>'), {"CF_SEE": see})
        assert len(seen) == 1
        return seen[0]

    return go


@pytest.mark.parametrize(
    "formula, wanted",
    [
        ("CF_SEE()", ()),
        ("CF_SEE(A1)", (1.5,)),
        ("CF_SEE(B1)", (7.0,)),
        ("CF_SEE(A2)", ("text",)),
        ("CF_SEE(A3)", (True,)),
        ("CF_SEE(TRUE)", (True,)),
        ("CF_SEE(A5)", (None,)),
        ('CF_SEE("")', ("",)),
        ("CF_SEE(A1,,B1)", (1.5, 0.0, 7.0)),
        ("CF_SEE(A1,)", (1.5, 0.0)),
        ("CF_SEE(A4)", ({"type": "Error", "kind": "Div"},)),
        ("CF_SEE(#N/A)", ({"type": "Error", "kind": "Na"},)),
        ("CF_SEE(A1:B2)", ([[1.5, 7.0], ["text", None]],)),
        ("CF_SEE(A1:A5)", ([[1.5], ["text"], [True], [{"type": "Error", "kind": "Div"}], [None]],)),
        ("CF_SEE(A1:C1)", ([[1.5, 7.0, None]],)),
        ("CF_SEE({1,2;3,4})", ([[1.0, 2.0], [3.0, 4.0]],)),
        ("CF_SEE(5%)", (0.05,)),
    ],
)
def test_arguments(handed, formula, wanted):
    given = handed(formula)
    assert given == wanted and [type(v) for v in given] == [type(v) for v in wanted]


def test_a_whole_column_comes_as_far_as_it_is_filled(handed):
    (rows,) = handed("CF_SEE(A:A)")
    assert rows[:3] == [[1.5], ["text"], [True]] and len(rows) < 100
    assert handed("CF_SEE(B:B)") == (7.0,)  # a column with one cell comes as that cell


def test_dates(handed):
    """A date cell is its number; a date that a function of the sheet makes may come as a date."""
    (given,) = handed("CF_SEE(DATE(2024,1,2))")
    assert given in (45293.0, datetime.date(2024, 1, 2), datetime.datetime(2024, 1, 2))


@pytest.mark.parametrize(
    "answer, wanted",
    [
        (2, 2.0),
        ("x", "x"),
        (True, True),
        (None, 0.0),
        (float("nan"), ErrorValue("#NUM!")),
        (float("inf"), ErrorValue("#NUM!")),
        (np.float64(2.5), 2.5),
        (np.array([[1.0]]), ErrorValue("#VALUE!")),
        ([1.0, 2.0], ErrorValue("#VALUE!")),
        ([[1.0, 2.0], [3.0]], ErrorValue("#VALUE!")),
        ([["a", 1.0], ["b", 2.0]], "a"),
    ],
)
def test_answers(make, answer, wanted):
    data = make('<row r="1"><c r="A1"><f>CF_GIVE()</f></c></row>')
    result = evaluate(data, {"CF_GIVE": lambda: answer})
    assert result.values["S1"][1, 1] == wanted
