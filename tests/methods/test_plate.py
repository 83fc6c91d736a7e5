"""Plates: limits, the mean of the local law, seams between regimes."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import NumberRefused, OutOfRange
from cellfuncs.methods import METHODS, plate


def mean_of(local, start=0.0):
    """Mean h over [start, 1] times the whole length over k, by Gauss-Legendre in a variable that tames both ends."""
    nodes, weights = np.polynomial.legendre.leggauss(400)
    s = 0.5 * (nodes + 1.0)
    x = start + (1.0 - start) * s**2  # h is singular at the start
    return float(np.sum(0.5 * weights * local(x) / x * 2.0 * s))


def test_laminar_constants():
    """Pohlhausen 1921: mean 0.664, local half of it; Kays and others at uniform flux 0.453."""
    assert plate.laminar(1.0, 1.0) == 0.664
    assert plate.laminar_local(1.0, 1.0) == 0.332
    assert plate.laminar_flux_local(1.0, 1.0) == 0.453


@pytest.mark.parametrize(
    ("local", "mean", "power"),
    [(plate.laminar_local, plate.laminar, 0.5), (plate.turbulent_local, plate.turbulent, 0.8)],
)
def test_mean_is_the_mean_of_the_local_law(local, mean, power):
    assert mean_of(lambda x: local(1e6 * x, 0.7)) == pytest.approx(mean(1e6, 0.7), rel=1e-3)


@pytest.mark.parametrize("unheated", [0.0, 0.2, 0.7, 0.95])
def test_unheated_start_mean_is_the_mean_of_its_local_law(unheated):
    """Ameel 1997 gives the closed forms; here the local law is integrated."""
    if unheated == 0.0:
        assert plate.laminar_start(1e5, 1.0, 0.0) == plate.laminar(1e5, 1.0)
        assert plate.turbulent_start_local(1e6, 1.0, 0.0) == plate.turbulent_local(1e6, 1.0)
        return
    laminar = mean_of(lambda x: plate.laminar_start_local(1e5 * x, 1.0, unheated / x), unheated)
    assert laminar == pytest.approx(plate.laminar_start(1e5, 1.0, unheated), rel=1e-4)
    turbulent = mean_of(lambda x: plate.turbulent_start_local(1e6 * x, 1.0, unheated / x), unheated)
    assert turbulent == pytest.approx(plate.turbulent_start(1e6, 1.0, unheated), rel=1e-3)


@given(st.floats(1e4, 3e6), st.floats(0.6, 60.0))
def test_mixed_plate_begins_where_the_laminar_one_ends(transition, prandtl):
    assert plate.mixed(transition, prandtl, transition) == pytest.approx(plate.laminar(transition, prandtl), rel=1e-9)
    shorter = 0.3 * transition
    assert plate.mixed(shorter, prandtl, transition) == pytest.approx(plate.laminar(shorter, prandtl), rel=1e-9)


@given(st.floats(1e3, 1e7), st.floats(0.6, 200.0), st.floats(3e4, 5e5))
def test_lienhard_lies_between_its_laminar_and_turbulent_parts(reynolds, prandtl, transition):
    laminar = plate.laminar_local(reynolds, prandtl)
    assert plate.lienhard_local(reynolds, prandtl, transition) >= laminar * (1 - 1e-12)
    if reynolds < 0.5 * transition:
        assert plate.lienhard_local(reynolds, prandtl, transition) < 1.2 * laminar


@given(st.floats(1e3, 3e6), st.floats(1e-4, 1e4))
def test_churchill_ozoe_limits(reynolds, prandtl):
    """Pohlhausen's limits: 0.3387 Pr^1/3 above, 0.564 Pr^1/2 below (0.3387/0.0468^1/6 = 0.5643)."""
    local = plate.churchill_ozoe_local(reynolds, prandtl)
    assert local <= 0.3387 * math.sqrt(reynolds) * prandtl ** (1 / 3)
    assert local <= math.sqrt(reynolds * prandtl / math.pi) * 1.001


def test_beyond_its_range_a_formula_that_gives_less_than_nothing_has_no_value():
    with pytest.raises(NumberRefused, match="Whitaker plate has no value there"):
        METHODS["Whitaker plate"].evaluate({"reynolds": 1e4, "prandtl": 0.7}, allow=True)
    with pytest.raises(NumberRefused, match="no value"):
        METHODS["Whitaker plate"].evaluate({"reynolds": np.array([1e6, 1e4]), "prandtl": 0.7}, allow=True)


def test_a_laminar_method_refuses_turbulent_flow_and_gases_refuse_mercury():
    with pytest.raises(OutOfRange, match="plate laminar"):
        METHODS["plate laminar"].evaluate({"reynolds": 1e7, "prandtl": 0.7})
    with pytest.raises(OutOfRange, match=r"Pr from 0\.6"):
        METHODS["plate laminar"].evaluate({"reynolds": 1e5, "prandtl": 0.025})
    with pytest.raises(OutOfRange, match="Pe"):
        METHODS["Churchill-Ozoe plate"].evaluate({"reynolds": 200.0, "prandtl": 0.01})
