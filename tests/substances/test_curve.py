"""The monotone cubic against scipy's, and what must hold for any table."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.interpolate import PchipInterpolator

from cellfuncs.errors import NumberRefused
from cellfuncs.substances.curve import Curve

VALUES = st.floats(-100, 100).map(lambda value: round(value, 6))  # scipy stumbles over the smallest of floats
STEPS = st.lists(st.tuples(st.floats(0.1, 50), VALUES), min_size=2, max_size=12)


def points(steps):
    x, y = zip(*steps, strict=True)
    return np.cumsum(x).tolist(), list(y)


@given(STEPS)
def test_against_scipy(steps):
    x, y = points(steps)
    curve, other = Curve(x, y), PchipInterpolator(x, y)
    for place in np.linspace(x[0], x[-1], 57):
        assert curve(float(place)) == pytest.approx(float(other(place)), rel=1e-9, abs=1e-9)


@given(STEPS)
def test_never_leaves_the_two_neighbours(steps):
    x, y = points(steps)
    curve = Curve(x, y)
    for k in range(len(x) - 1):
        low, high = sorted(y[k : k + 2])
        for share in (0.0, 0.1, 0.5, 0.93, 1.0):
            assert low - 1e-9 <= curve(x[k] + share * (x[k + 1] - x[k])) <= high + 1e-9


def test_the_points_come_out_exactly():
    x, y = [273.15, 300.0, 350.0, 400.0], [1.688e-3, 1.523e-3, 1.309e-3, 1.171e-3]
    assert [Curve(x, y)(place) for place in x] == pytest.approx(y, rel=1e-14)
    assert [Curve(x, y, logarithmic=True)(place) for place in x] == pytest.approx(y, rel=1e-14)


def test_a_logarithmic_curve_follows_an_exponential():
    x = [300.0, 330.0, 380.0]
    y = [np.exp(-0.03 * place) for place in x]
    assert Curve(x, y, logarithmic=True)(345.0) == pytest.approx(np.exp(-0.03 * 345.0), rel=1e-12)


@pytest.mark.parametrize(
    ("x", "y"), [([1.0], [1.0]), ([1.0, 1.0], [1.0, 2.0]), ([2.0, 1.0], [1.0, 2.0]), ([1.0, 2.0], [1.0])]
)
def test_what_is_no_curve(x, y):
    with pytest.raises(NumberRefused):
        Curve(x, y)
