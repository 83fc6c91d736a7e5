"""Turbulent and transitional ducts: seams of the regimes, laws beside one another, limits."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError
from cellfuncs.methods import METHODS, coil, corrections, duct_entry, duct_rough, liquid_metal
from cellfuncs.methods import duct_transition as transition
from cellfuncs.methods import duct_turbulent as turbulent
from cellfuncs.methods.friction import colebrook_white, fully_rough, konakov, roughness_reynolds, smooth_friction

REYNOLDS = st.floats(math.log(1e4), math.log(1e6)).map(math.exp)
PRANDTL = st.floats(math.log(0.6), math.log(1000.0)).map(math.exp)


@given(PRANDTL, st.floats(1.0, 1e4))
def test_transition_meets_both_regimes(prandtl, length):
    """Gnielinski 2013: straight between the laminar value at 2300 and the turbulent one at 4000, without a jump."""
    low = transition.transition_blend(2300.0, prandtl, length, "temperature")
    assert low == pytest.approx(duct_entry.gnielinski_laminar(length / (2300.0 * prandtl)), rel=1e-9)
    high = transition.transition_blend(4000.0, prandtl, length, "temperature")
    assert high == pytest.approx(turbulent.gnielinski(4000.0, prandtl, konakov(4000.0), 1.0 / length), rel=1e-9)
    assert high > low
    flux = transition.transition_blend(4000.0, prandtl, length, "flux")
    assert flux == pytest.approx(high, rel=1e-9)
    for section in ("plates", "rectangle"):
        there = transition.transition_other(4000.0, prandtl, length, section, "flux", "both", 0.5)
        assert there == pytest.approx(high, rel=1e-9)


@given(REYNOLDS, PRANDTL)
def test_laws_for_developed_flow_agree_within_their_scatter(reynolds, prandtl):
    friction = smooth_friction(reynolds)
    petukhov = turbulent.petukhov_kirillov(reynolds, prandtl, friction)
    assert turbulent.petukhov_popov(reynolds, prandtl, friction) == pytest.approx(petukhov, rel=0.13)
    assert turbulent.gnielinski(reynolds, prandtl, friction) == pytest.approx(petukhov, rel=0.1)
    assert turbulent.sleicher_rouse(reynolds, prandtl) == pytest.approx(petukhov, rel=0.25)


@given(st.floats(1e4, 1.2e5), st.floats(0.7, 120.0))
def test_older_power_laws_within_their_scatter(reynolds, prandtl):
    petukhov = turbulent.petukhov_kirillov(reynolds, prandtl, smooth_friction(reynolds))
    for law in (turbulent.colburn, turbulent.sieder_tate_turbulent, turbulent.dittus_boelter_heating):
        assert law(reynolds, prandtl) == pytest.approx(petukhov, rel=0.45)
    assert turbulent.dittus_boelter_heating(reynolds, prandtl) / turbulent.dittus_boelter_cooling(
        reynolds, prandtl
    ) == pytest.approx(prandtl**0.1)


@pytest.mark.parametrize("name", ["Gnielinski", "Petukhov-Kirillov", "Petukhov-Popov", "Sleicher-Rouse", "Colburn"])
def test_nu_rises_with_re_and_pr(name):
    reynolds = np.geomspace(1e4, 1e6, 300)
    given_too = {"friction": smooth_friction(reynolds)} if "friction" in METHODS[name].inputs else {}
    got = METHODS[name].evaluate({"reynolds": reynolds, "prandtl": 5.0 + 0.0 * reynolds, **given_too})
    assert (np.diff(got) > 0).all()
    more = METHODS[name].evaluate({"reynolds": reynolds, "prandtl": 6.0 + 0.0 * reynolds, **given_too})
    assert (more > got).all()


def test_mercury_in_a_method_for_gases_is_refused():
    with pytest.raises(CellfuncsError, match=r"Pr 0\.5 to 1, here 0\.025"):
        METHODS["gas in a tube"].evaluate({"reynolds": 1e5, "prandtl": 0.025, "wall": "flux"})


def test_a_short_tube_is_refused_where_only_long_ones_were_measured():
    with pytest.raises(CellfuncsError, match="L/D from 60, here 10"):
        METHODS["Colburn"].evaluate({"reynolds": 1e5, "prandtl": 5.0, "length_over_diameter": 10.0})


@given(st.floats(0.02, 1.0))
def test_annulus_ends_in_the_tube_and_in_plates(ratio):
    inner, outer, both = (turbulent.petukhov_roizen(ratio, h) for h in ("inner", "outer", "both"))
    assert min(inner, outer) - 1e-12 <= both <= max(inner, outer) + 1e-12
    assert inner >= outer - 1e-9
    nusselt = [turbulent.gnielinski_annulus(1e5, 0.7, ratio, h) for h in ("inner", "outer")]
    assert nusselt[0] >= nusselt[1]


def test_annulus_has_no_jump_at_plates():
    near, at = (turbulent.gnielinski_annulus(1e5, 0.7, r, "inner") for r in (1.0 - 2e-4, 1.0))
    assert near == pytest.approx(at, rel=1e-4)


@given(st.floats(2e4, 5e5), st.floats(1.2, 5.9), st.floats(0.005, 0.04))
def test_rough_walls_take_more_heat(reynolds, prandtl, roughness):
    friction = colebrook_white(reynolds, roughness)
    if roughness_reynolds(reynolds, friction, roughness) < 70.0:
        return
    smooth = turbulent.petukhov_kirillov(reynolds, prandtl, smooth_friction(reynolds))
    one = duct_rough.dipprey_sabersky(reynolds, prandtl, friction, roughness)
    two = duct_rough.bhatti_shah(reynolds, prandtl, friction, roughness)
    assert one > smooth and two > smooth
    assert one == pytest.approx(two, rel=0.25)
    assert 1.0 < duct_rough.norris(prandtl, friction, smooth_friction(reynolds)) <= 4.0


def test_ribs_drag_more_than_sand_of_their_height():
    """Webb, Eckert and Goldstein 1971: ribs across the stream are rougher than sand grains of the same height."""
    for height in (0.01, 0.02, 0.04):
        assert duct_rough.webb_friction(height, 10.0) > fully_rough(height)
        assert duct_rough.webb_friction(height, 40.0) < duct_rough.webb_friction(height, 10.0)


@given(st.floats(1e4, 1e6), st.floats(0.004, 0.05))
def test_liquid_metals(reynolds, prandtl):
    """At uniform flux Nu is above that at uniform temperature; laws agree within what measurements scatter."""
    peclet = reynolds * prandtl
    if not 100.0 <= peclet <= 1e4:
        return
    assert liquid_metal.lyon(peclet) > liquid_metal.seban_shimazaki(peclet)
    flux = liquid_metal.notter_sleicher_flux(reynolds, prandtl)
    assert flux > liquid_metal.notter_sleicher_temperature(reynolds, prandtl)
    assert liquid_metal.chen_chiou_flux(reynolds, prandtl) > liquid_metal.chen_chiou_temperature(reynolds, prandtl)
    assert liquid_metal.skupinski(peclet) == pytest.approx(flux, rel=0.35)
    assert liquid_metal.lyon(peclet) == pytest.approx(flux, rel=0.5)


CORRECTIONS = [name for name, m in METHODS.items() if m.function.__module__ == corrections.__name__]


@pytest.mark.parametrize("name", CORRECTIONS)
def test_a_correction_is_one_without_a_difference_and_has_no_jump_there(name):
    parameter = METHODS[name].needed[0]
    below, at, above = (METHODS[name].evaluate({parameter: v}) for v in (1 - 1e-9, 1.0, 1 + 1e-9))
    assert at == pytest.approx(1.0, rel=1e-15)
    assert below == pytest.approx(1.0, rel=2e-9) and above == pytest.approx(1.0, rel=2e-9)


def test_corrections_point_the_right_way():
    """A heated liquid is thin at the wall: more Nu, less friction. A heated gas: less Nu, less turbulent friction."""
    for name, parameter, sign in (
        ("viscosity correction of laminar Nu", "viscosity_ratio", 1),
        ("viscosity correction of turbulent Nu", "viscosity_ratio", 1),
        ("viscosity correction of laminar friction", "viscosity_ratio", -1),
        ("viscosity correction of turbulent friction", "viscosity_ratio", -1),
        ("Prandtl correction of Nu", "prandtl_ratio", 1),
        ("temperature correction of turbulent Nu", "temperature_ratio", -1),
        ("temperature correction of turbulent friction", "temperature_ratio", -1),
        ("temperature correction of laminar friction", "temperature_ratio", 1),
    ):
        assert sign * (METHODS[name].evaluate({parameter: 1.5}) - 1.0) > 0, name
        assert sign * (METHODS[name].evaluate({parameter: 0.6}) - 1.0) <= 0, name


@given(st.floats(100.0, 3000.0), st.floats(0.7, 200.0), st.floats(0.005, 0.1))
def test_coils_take_more_heat_than_straight_tubes(reynolds, prandtl, curvature):
    for wall, straight in (("temperature", 3.657), ("flux", 4.364)):
        assert coil.manlapaz_churchill(reynolds, prandtl, curvature, wall) > straight
    assert coil.schmidt_transition(curvature) > 2300.0


def test_the_dean_number_follows():
    """De 2000 is where laminar coils were measured to: Re 20000 in a coil of 1:50 has 2828."""
    with pytest.raises(CellfuncsError, match=r"De up to 2000, here 2828"):
        METHODS["Manlapaz-Churchill coil"].evaluate(
            {"reynolds": 2e4, "prandtl": 5.0, "curvature": 0.02, "wall": "flux"}
        )


@pytest.mark.parametrize("curvature", [0.01, 0.05, 0.1])
def test_stated_jump_of_schmidt(curvature):
    """Schmidt 1967 gives two laws that meet near Re 22000; between them lie a few per cent."""
    below, above = (coil.schmidt_turbulent(2.2e4 * k, 5.0, curvature) for k in (1 - 1e-9, 1 + 1e-9))
    assert above == pytest.approx(below, rel=0.1)


@given(st.floats(2.2e4, 1.5e5), st.floats(0.7, 10.0), st.floats(0.01, 0.1))
def test_turbulent_coils_agree_within_their_scatter(reynolds, prandtl, curvature):
    one = coil.gnielinski_coil(reynolds, prandtl, curvature)
    assert coil.schmidt_turbulent(reynolds, prandtl, curvature) == pytest.approx(one, rel=0.33)
