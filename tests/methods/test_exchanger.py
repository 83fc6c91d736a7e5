"""Heat exchangers: order of the arrangements, limits, and F against effectiveness."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import exchanger as x

ALL = (
    x.counter_flow,
    x.cross_flow,
    x.cross_flow_larger_mixed,
    x.cross_flow_smaller_mixed,
    x.cross_flow_mixed,
    x.one_shell,
    x.parallel_flow,
)
UNITS, CAPACITY = st.floats(0.01, 20.0), st.floats(0.0, 1.0)


@settings(deadline=None)
@given(UNITS, CAPACITY)
def test_nothing_is_better_than_counter_flow(ntu, capacity):
    best, worst = x.counter_flow(ntu, capacity), x.parallel_flow(ntu, capacity)
    for effectiveness in ALL:
        assert 0.0 < worst * (1 - 1e-9) <= effectiveness(ntu, capacity) <= best * (1 + 1e-9) <= 1.0 + 1e-9


@pytest.mark.parametrize("effectiveness", ALL)
@given(UNITS)
def test_one_temperature_makes_all_alike(effectiveness, ntu):
    assert effectiveness(ntu, 0.0) == pytest.approx(x.one_temperature(ntu), rel=1e-9)


@pytest.mark.parametrize("effectiveness", ALL)
@given(UNITS)
def test_equal_streams_are_no_special_case(effectiveness, ntu):
    assert effectiveness(ntu, 1.0 - 1e-10) == pytest.approx(effectiveness(ntu, 1.0), rel=1e-6)


@pytest.mark.parametrize("effectiveness", ALL)
def test_a_little_surface(effectiveness):
    assert effectiveness(1e-6, 0.7) == pytest.approx(1e-6, rel=1e-5)


@given(UNITS, CAPACITY)
def test_many_shells_come_to_counter_flow(ntu, capacity):
    rising = [x.shells(ntu, capacity, n) for n in (1.0, 2.0, 3.0, 10.0, 1000.0)]
    assert rising == sorted(rising) or max(rising) - min(rising) < 1e-9
    assert rising[0] == pytest.approx(x.one_shell(ntu, capacity), rel=1e-9)
    assert rising[-1] == pytest.approx(x.counter_flow(ntu, capacity), rel=1e-2)


def test_error_of_the_closed_form_of_cross_flow():
    """Its docstring says within 4 % of the series."""
    ntu, capacity = np.meshgrid(np.geomspace(0.05, 20.0, 60), np.linspace(0.0, 1.0, 21))
    error = x.cross_flow_short(ntu, capacity) / x.cross_flow(ntu, capacity) - 1.0
    assert -0.04 < error.min() < -0.03 and 0.005 < error.max() < 0.04


@given(st.floats(1e-3, 1e3), st.floats(1e-3, 1e3))
def test_the_mean_difference_lies_between(one, other):
    mean = x.mean_difference(one, other)
    assert min(one, other) * (1 - 1e-12) <= mean <= max(one, other) * (1 + 1e-12)
    assert mean == x.mean_difference(other, one)
    assert mean <= 0.5 * (one + other) * (1 + 1e-12)


@given(st.floats(1e-9, 1e-2))
def test_the_mean_difference_of_nearly_equal_ends(apart):
    import mpmath

    with mpmath.workdps(40):
        wanted = mpmath.mpf(apart) / mpmath.log1p(mpmath.mpf(apart))
    assert x.mean_difference(1.0, 1.0 + apart) == pytest.approx(float(wanted), rel=1e-11)


@pytest.mark.parametrize("passes", [1.0, 2.0, 3.0])
@given(st.floats(0.1, 3.0), st.floats(0.1, 1.0))
def test_correction_and_effectiveness_tell_the_same(passes, ntu, capacity):
    """F from P and R (Bowman et al. 1940) is the counter-flow units over the units that gave that effectiveness."""
    part = x.shells(ntu, capacity, passes)
    apart = 1.0 - capacity
    counter = np.log1p(part / (1.0 - part) * apart) / apart if apart > 0 else part / (1.0 - part)
    assert x.correction_shells(part, capacity, passes) == pytest.approx(counter / ntu, rel=1e-6)
    # from the other stream: P·R and 1/R
    assert x.correction_shells(part * capacity, 1.0 / capacity, passes) == pytest.approx(counter / ntu, rel=1e-6)


@pytest.mark.parametrize("correction", [x.correction_cross_flow, x.correction_cross_flow_mixed])
@pytest.mark.parametrize(("part", "quotient"), [(0.3, 0.5), (0.4, 1.0), (0.2, 2.0), (0.6, 0.3)])
def test_correction_of_cross_flow_has_no_side(correction, part, quotient):
    one, other = correction(part, quotient), correction(part * quotient, 1.0 / quotient)
    assert 0.5 < one < 1.0
    assert other == pytest.approx(one, rel=1e-9)
    column = correction(np.array([part, 0.5 * part]), np.array([quotient, quotient]))
    assert column[0] == pytest.approx(one, rel=1e-12) and column[1] > one


@pytest.mark.parametrize("effectiveness", ALL)
@given(st.floats(0.05, 2.0), CAPACITY)
def test_units_for_an_effectiveness(effectiveness, ntu, capacity):
    assert x.units_for(effectiveness, effectiveness(ntu, capacity), capacity) == pytest.approx(ntu, rel=1e-6)


def test_correction_with_one_stream_mixed():
    """R below 1 is the formula with the larger stream mixed, R above 1 that with the smaller one."""
    part = x.cross_flow_larger_mixed(1.5, 0.5)
    counter = np.log((1 - part * 0.5) / (1 - part)) / 0.5
    assert x.correction_cross_flow_one_mixed(part, 0.5) == pytest.approx(counter / 1.5, rel=1e-9)
    part = x.cross_flow_smaller_mixed(1.5, 0.5)
    counter = np.log((1 - part * 0.5) / (1 - part)) / 0.5
    assert x.correction_cross_flow_one_mixed(0.5 * part, 2.0) == pytest.approx(counter / 1.5, rel=1e-9)


@pytest.mark.parametrize(
    ("correction", "part", "quotient"),
    [
        (x.correction_shells, 0.7, 1.0),
        (x.correction_shells, 0.99, 0.9),
        (x.correction_cross_flow_mixed, 0.7, 1.0),
        (x.correction_shells, 0.5, 2.5),
        (x.correction_cross_flow, 1.2, 0.5),
    ],
)
def test_where_there_is_no_correction_it_is_said(correction, part, quotient):
    for column in (False, True):
        given_ = (np.array([0.1, part]), np.array([quotient, quotient])) if column else (part, quotient)
        with pytest.raises(OutOfRange, match=r"counter-flow|below 1"):
            correction(*given_)
    assert 0.1 < correction(0.1, 1.0) <= 1.0


def test_more_shells_reach_what_one_does_not():
    with pytest.raises(OutOfRange, match="shell passes"):
        x.correction_shells(0.7, 1.0, 1.0)
    assert 0.7 < x.correction_shells(0.7, 1.0, 3.0) < 1.0
