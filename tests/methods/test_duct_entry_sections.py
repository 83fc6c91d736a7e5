"""Thermal entry by the shear at the wall, beside the exact series where there is one, and in its limits."""

import numpy as np
import pytest

from cellfuncs.methods.duct_entry_sections import entry_by_shear, shear_of_wall
from cellfuncs.methods.duct_laminar import developed_value
from cellfuncs.methods.duct_series import graetz_flux, graetz_mean

PLACES = [1e-4, 1e-3, 3e-3, 0.01, 0.03, 0.1, 1.0]


@pytest.mark.parametrize("x_star", PLACES)
@pytest.mark.parametrize("section", ["tube", "plates"])
def test_within_eight_percent_of_the_exact_series(section, x_star):
    mean = entry_by_shear(x_star, "temperature", section, 1.0, True)
    local = entry_by_shear(x_star, "flux", section, 1.0, False)
    assert mean == pytest.approx(graetz_mean(x_star, section, "both"), rel=0.08)
    assert local == pytest.approx(graetz_flux(x_star, section, "both"), rel=0.08)


@pytest.mark.parametrize("x_star", PLACES)
@pytest.mark.parametrize("heated", ["inner", "outer"])
def test_a_narrow_annulus_is_plates_with_one_wall_heated(heated, x_star):
    mean = entry_by_shear(x_star, "temperature", "annulus", 0.995, True, heated)
    assert mean == pytest.approx(graetz_mean(x_star, "plates", "one"), rel=0.10)


@pytest.mark.parametrize("x_star", PLACES)
def test_a_round_ellipse_is_a_tube(x_star):
    tube = entry_by_shear(x_star, "temperature", "tube", 1.0, True)
    assert entry_by_shear(x_star, "temperature", "ellipse", 1.0, True) == pytest.approx(tube, rel=1e-3)


@pytest.mark.parametrize("ratio", [0.05, 0.2, 0.5, 0.9, 0.999])
def test_the_shears_of_both_walls_carry_the_pressure_drop(ratio):
    together = (ratio * shear_of_wall("inner", ratio) + shear_of_wall("outer", ratio)) / (1.0 + ratio)
    assert together == pytest.approx(1.0, rel=1e-12)
    assert shear_of_wall("inner", ratio) > 1.0 > shear_of_wall("outer", ratio)


@pytest.mark.parametrize(("section", "at"), [("rectangle", 0.5), ("ellipse", 0.4), ("triangle", 60.0)])
def test_falls_to_the_developed_value_and_takes_columns(section, at):
    column = entry_by_shear(np.array([1e-3, 0.05, 1e6]), "temperature", section, np.full(3, at), True)
    assert (np.diff(column) < 0).all()
    assert column[2] == pytest.approx(developed_value(section, "temperature", "both", at), rel=1e-9)
    assert column[0] == pytest.approx(entry_by_shear(1e-3, "temperature", section, at, True), rel=1e-12)
