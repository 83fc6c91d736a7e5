"""The search for a target: roots, edges of refused ranges, jumps, turning points, the stretch of the stated value."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.answers.search import scan
from cellfuncs.errors import OutOfRange

GRID = [10.0 ** (k / 4) for k in range(-12, 13)]


@given(root=st.floats(-2.9, 2.9).map(lambda e: 10.0**e), power=st.sampled_from([-2.0, -0.3, 0.2, 1.0, 3.0]))
def test_the_root_of_a_power_law(root, power):
    found = scan(lambda x: x**power, root**power, GRID)
    assert found.roots(1.0) == [pytest.approx(root, rel=1e-9)]


def test_a_place_that_meets_the_target_is_the_root():
    assert scan(lambda x: x, 1.0, GRID).roots(None) == [1.0]


def test_two_roots_between_two_places_are_found_at_the_turn():
    found = scan(lambda x: (math.log(x) - 0.3) ** 2, 0.01, GRID)
    assert found.roots(1.0) == [pytest.approx(math.exp(0.2)), pytest.approx(math.exp(0.4))]


def test_a_jump_is_no_root():
    found = scan(lambda x: 1.0 if x < 2.0 else 3.0, 2.0, GRID)
    assert found.roots(1.0) == []
    assert found.jumps() == [pytest.approx(2.0)]


def test_a_root_beside_a_refused_range_is_found():
    def function(x):
        if x > 7.0:
            raise OutOfRange("up to 7")
        return x

    found = scan(function, 6.99, GRID)
    assert found.roots(1.0) == [pytest.approx(6.99)]
    assert str(found.refusal) == "up to 7"


def test_no_root_is_looked_for_across_a_refused_place():
    def function(x):
        if 0.9 < x < 1.1:
            raise OutOfRange("not here")
        return math.copysign(1.0 + abs(x), x - 1.0)

    found = scan(function, 0.0, GRID)
    assert found.roots(None) == []
    assert len(found.stretches) == 2


def test_the_stretch_of_the_stated_value_answers_first():
    def function(x):
        if 0.9 < x < 1.1:
            raise OutOfRange("no difference")
        return 1.0 / abs(x - 1.0)

    places = sorted([*GRID, 0.95, 1.02])
    assert scan(function, 1.5, places).roots(3.0) == [pytest.approx(1.0 + 1.0 / 1.5)]
    assert scan(function, 1.5, places).roots(0.01) == [pytest.approx(1.0 - 1.0 / 1.5)]
    assert len(scan(function, 1.5, places).roots(None)) == 2


def test_everything_refused():
    def function(x):
        raise OutOfRange("never")

    found = scan(function, 1.0, GRID)
    assert found.stretches == []
    assert str(found.refusal) == "never"
