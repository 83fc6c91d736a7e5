"""What hosts hand over for the same cell, made equal: embedded engine, Calc, Excel through xlwings."""

import datetime as dt
import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.cells import catalogue
from cellfuncs.cells.faults import LONGEST_TEXT

NOTHING = [None, "", "  ", 0.0, 0, False, [[None]], ((None,),), [[""]]]
ERRORS = [{"type": "Error", "kind": "Div"}, "#DIV/0!", "#N/A", [[{"type": "Error", "kind": "Na"}]]]


def clean(answer):
    """Whether an answer may stand in cells."""
    if isinstance(answer, list):
        return bool(answer) and all(isinstance(row, list) and row and all(map(clean, row)) for row in answer)
    if isinstance(answer, str):
        return 0 < len(answer) <= LONGEST_TEXT
    return type(answer) is float and math.isfinite(answer)


@pytest.mark.parametrize("nothing", NOTHING, ids=repr)
def test_a_required_argument_left_empty(cf, nothing):
    answer = cf("REYNOLDS", nothing, 0.02, 998.0, 0.001)
    assert answer.startswith("! velocity: empty or zero")


@pytest.mark.parametrize("nothing", NOTHING, ids=repr)
def test_an_optional_argument_left_empty(cf, nothing):
    assert cf("FROUDE", 2.0, 0.5, nothing) == cf("FROUDE", 2.0, 0.5)
    assert cf("PROPERTY", "water", "density", 300.0, nothing, nothing) == cf("PROPERTY", "water", "density", 300.0)


@pytest.mark.parametrize("nothing", [None, "", 0.0, False], ids=repr)
def test_zero_is_a_value_where_it_means_something(cf, nothing):
    assert cf("MOIST_AIR", "humidity ratio", 300.0, nothing) == cf("MOIST_AIR", "humidity ratio", 300.0, 0.0) == 0.0


@pytest.mark.parametrize("error", ERRORS, ids=repr)
def test_an_error_cell_is_said(cf, error):
    answer = cf("REYNOLDS", 1.0, error, 998.0, 0.001)
    assert answer.startswith("! length: the cell it points at shows an error")


@pytest.mark.parametrize(
    "same",
    [
        2.0,
        2,
        "2 m/s",
        "2",
        [[2.0]],
        ((2.0,),),
        (2.0,),
        [["2 m/s"]],
        [[2.0, "m/s"]],
        ((2.0, "m/s"),),
        "200 cm/s",
        [[200, "cm/s"]],
    ],
    ids=repr,
)
def test_the_same_velocity_in_every_form(cf, same):
    assert cf("REYNOLDS", same, 0.02, 998.0, 0.001) == pytest.approx(2.0 * 0.02 * 998.0 / 0.001, rel=1e-15)


def test_true_counts_as_one_in_every_host(cf):
    assert cf("REYNOLDS", True, 1.0, 1.0, 1.0) == cf("REYNOLDS", 1.0, 1.0, 1.0, 1.0) == 1.0


@pytest.mark.parametrize("date", [dt.date(2026, 3, 1), dt.datetime(2026, 3, 1, 12)])
def test_a_date_is_no_quantity(cf, date):
    assert cf("REYNOLDS", date, 0.02, 998.0, 0.001).startswith("! velocity: a date")


def test_a_fault_goes_through_unchanged(cf):
    fault = '! velocity: "12 fps2" is not a speed; write for instance 12 ft/s'
    assert cf("REYNOLDS", fault, 0.02, 998.0, 0.001) == fault
    assert cf("TERMS", fault) == fault
    assert cf("PROPERTY", "water", fault, 300.0) == fault
    assert cf("CASE", [["flow kind", "duct"], ["velocity", fault, "m/s"]], "velocity") == fault
    assert cf("REYNOLDS", [[1.0], [fault]], 0.02, 998.0, 0.001)[1] == [fault]


@pytest.mark.parametrize(
    ("argument", "part"),
    [
        ("12 fps2", "12 ft/s"),
        ("12 kg", "not a"),
        (-1.0, "above zero"),
        ("-1 m/s", "above zero"),
        (math.inf, "finite"),
        (math.nan, "finite"),
        ("1e999", ""),
        ("fast", ""),
        ("x" * 5000, ""),
        (10**400, "finite"),
        ([[1.0, 2.0], [3.0]], ""),
    ],
    ids=lambda v: str(v)[:20],
)
def test_bad_velocities_end_in_one_clear_text(cf, argument, part):
    answer = cf("REYNOLDS", argument, 0.02, 998.0, 0.001)
    assert clean(answer)
    text = answer if isinstance(answer, str) else str(answer[-1][-1])
    assert text.startswith("! velocity: ")
    assert part in text


@pytest.mark.parametrize(("bare", "part"), [(40.0, "40 degC"), (-5.0, "-5 degC"), (199.9, "199.9 K")])
def test_a_bare_low_temperature_asks(cf, bare, part):
    answer = cf("PROPERTY", "water", "density", bare)
    assert answer.startswith("! temperature: ")
    assert part in answer


def test_cold_temperatures_carry_their_unit(cf):
    assert cf("PROPERTY", "nitrogen", "density", "100 K") > 0


def test_a_column_gives_a_column_in_one_call(cf):
    column = [[1.0], [2.0], [4.0]]
    assert cf("REYNOLDS", column, 1.0, 1.0, 1.0) == column
    assert cf("REYNOLDS", [[1.0, 2.0]], [[1.0], [3.0]], 1.0, 1.0) == [[1.0, 2.0], [3.0, 6.0]]
    assert cf("REYNOLDS", ((1.0,), (2.0,)), 1.0, 1.0, 1.0) == [[1.0], [2.0]]


def test_pairs_of_value_and_unit_make_a_column(cf):
    assert cf("REYNOLDS", [[1.0, "m/s"], [200.0, "cm/s"]], 1.0, 1.0, 1.0) == [[1.0], [2.0]]


def test_one_bad_cell_leaves_the_others(cf):
    answer = cf("REYNOLDS", [[1.0], ["two"], [None], [-1.0]], 1.0, 1.0, 1.0)
    assert answer[0] == [1.0]
    assert all(row[0].startswith("! velocity: ") for row in answer[1:])


def test_ranges_that_do_not_fit(cf):
    assert "do not fit" in cf("REYNOLDS", [[1.0], [2.0]], [[1.0], [2.0], [3.0]], 1.0, 1.0)


def test_a_whole_column_is_refused_in_words(cf):
    assert "cells" in cf("REYNOLDS", [[None]] * 1_048_576, 1.0, 1.0, 1.0)


def test_too_many_and_too_few_arguments(cf):
    assert "at most 4" in cf("REYNOLDS", 1.0, 1.0, 1.0, 1.0, 1.0)
    assert cf("REYNOLDS", 1.0, 1.0).startswith("! density: is missing")


def test_columns_of_properties_in_one_call(cf):
    temperatures = [[290.0], [300.0], [310.0]]
    row = [["density", "viscosity", "conductivity", "specific heat"]]
    table = cf("PROPERTY", "water", row, temperatures)
    assert len(table) == 3 and len(table[0]) == 4
    for (t,), cells in zip(temperatures, table, strict=True):
        for what, cell in zip(row[0], cells, strict=True):
            assert cell == pytest.approx(cf("PROPERTY", "water", what, t), rel=1e-12)
    celsius = cf("PROPERTY", "water", "viscosity", temperatures, None, "mPa s")
    assert celsius[1][0] == pytest.approx(1000 * table[1][1], rel=1e-12)


@pytest.mark.parametrize("unit", ["kg", "furlongs", 12.0])
def test_a_wrong_unit_wanted_names_unit(cf, unit):
    assert cf("PROPERTY", "water", "density", 300.0, None, unit).startswith("! unit: ")


JUNK = st.one_of(
    st.none(),
    st.booleans(),
    st.floats(),
    st.integers(-(10**30), 10**30),
    st.text(max_size=30),
    st.sampled_from(
        ["#DIV/0!", "12 m/s", "1 bar", "40 degC", "water", "duct", "! x: y", {"kind": "Na"}, dt.date(2026, 1, 1)]
    ),
)
CELLS = st.one_of(JUNK, st.lists(st.lists(JUNK, max_size=4), max_size=4), st.lists(JUNK, max_size=4))


@settings(max_examples=25, deadline=None)
@given(data=st.data())
@pytest.mark.parametrize("name", sorted(catalogue.functions()))
def test_whatever_is_handed_over_the_answer_may_stand_in_a_cell(name, data):
    function = catalogue.functions()[name]
    count = data.draw(st.integers(0, len(function.arguments) + 1))
    arguments = [data.draw(CELLS) for _ in range(count)]
    answer = function.call(*arguments)
    if name in ("CF_BLOCK", "CF_VARY") and isinstance(answer, list):  # a block has blank cells, as in the sheet
        answer = [[cell if cell != "" else "blank" for cell in row] for row in answer]
    assert clean(answer)
