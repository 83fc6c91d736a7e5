"""Closed layers, rings and shells: conduction alone, onset, tilts, and methods beside each other."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import METHODS, enclosure


@given(st.floats(0.0, 1708.0), st.floats(0.02, 1000.0))
def test_still_below_the_onset(rayleigh, prandtl):
    """Linear stability: a level layer heated from below is at rest up to Ra 1707.76 (Chandrasekhar 1961)."""
    assert enclosure.layer_heated_below(rayleigh) == 1.0
    assert enclosure.layer_heated_below_any(rayleigh, prandtl) == 1.0


@given(st.floats(1.0, 1e7), st.floats(0.1, 1.0))
def test_level_tilt_is_the_level_layer(rayleigh, prandtl):
    assert enclosure.tilted_layer(rayleigh, 0.0) == pytest.approx(enclosure.layer_heated_below(rayleigh), rel=1e-12)


@given(st.floats(0.0, 1e5), st.floats(0.0, 60.0))
def test_tilted_layer_conducts_at_least(rayleigh, tilt):
    assert enclosure.tilted_layer(rayleigh, tilt) >= 1.0 - 1e-12


def test_steep_air_ends_upright():
    assert enclosure.steep_air(5e4, 20.0, 90.0) == pytest.approx(enclosure.upright_air(5e4, 20.0), rel=1e-12)
    assert enclosure.steep_air(5e4, 20.0, 60.0) == pytest.approx(enclosure.tilted_layer(5e4, 60.0), rel=0.05)
    assert enclosure.air_heated_above(5e4, 20.0, 150.0) < enclosure.upright_air(5e4, 20.0)


def test_steps_where_the_steep_layer_takes_over():
    """At 60 degrees Hollands' tilted layer and the upright one times sin^1/4 differ by a fifth (H/L 20, Ra 5e4)."""
    upright = enclosure.upright_air(5e4, 20.0)
    steep = enclosure.steep_layer(upright, 60.0)
    assert steep / enclosure.tilted_layer(5e4, 60.0) == pytest.approx(0.80, abs=0.01)
    assert enclosure.layer_heated_above(upright, 90.0) == pytest.approx(enclosure.steep_layer(upright, 90.0))


def test_steps_between_the_pieces_of_catton():
    """Catton 1978: at H/L 2 Nu steps down by 10 %, at H/L 10 up by 20 % (Ra 1e6, Pr 0.71)."""
    for seam, step in ((2.0, 0.895), (10.0, 1.20)):
        below, above = (enclosure.upright_layer(1e6, 0.71, seam * k) for k in (1.0, 1.0 + 1e-12))
        assert above / below == pytest.approx(step, abs=0.01)


@given(st.floats(0.2, 0.8))
def test_rings_and_shells_conduct_at_least(ratio):
    assert enclosure.ring(1.0, 0.7, ratio) == 1.0
    assert enclosure.shell(1.0, 0.7, ratio) == 1.0
    assert enclosure.ring(1e5, 0.7, ratio) > 1.0


def test_range_of_rings_is_in_their_own_rayleigh_number():
    inputs = {"rayleigh": 1e10, "prandtl": 0.7, "ratio": 0.5}
    with pytest.raises(OutOfRange, match="Ra ring"):
        METHODS["Raithby-Hollands ring"].evaluate(inputs)
    with pytest.raises(OutOfRange, match="Ra shell"):
        METHODS["Raithby-Hollands shell"].evaluate(inputs)


def test_columns():
    rayleigh = np.geomspace(1.0, 1e7, 50)
    assert np.all(np.diff(enclosure.layer_heated_below_any(rayleigh, 0.7)) >= 0)
    assert np.all(np.diff(enclosure.upright_air(rayleigh, 20.0)) >= 0)
