"""Friction of ducts: Colebrook to the last digits, laws beside one another, coils, losses of fittings."""

import math

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError, UnknownName
from cellfuncs.methods import METHODS, friction, minor_losses
from cellfuncs.methods import coil_friction as coil
from cellfuncs.methods import friction_laminar as laminar

REYNOLDS = st.floats(math.log(4000.0), math.log(1e8)).map(math.exp)
ROUGHNESS = st.one_of(st.just(0.0), st.floats(math.log(1e-7), math.log(0.05)).map(math.exp))


def iterated(reynolds, relative_roughness):
    """Colebrook 1939 solved with 30 digits."""
    with mpmath.workdps(30):
        rough = mpmath.mpf(relative_roughness) / mpmath.mpf("3.7")
        slope = mpmath.mpf("2.51") / mpmath.mpf(reynolds)
        start = 1 / mpmath.sqrt(friction.haaland(reynolds, relative_roughness))
        return float(mpmath.findroot(lambda x: x + 2 * mpmath.log10(rough + slope * x), start) ** -2)


@given(REYNOLDS, ROUGHNESS)
def test_colebrook_is_solved_to_rounding(reynolds, relative_roughness):
    got = friction.colebrook_white(reynolds, relative_roughness)
    assert got == pytest.approx(iterated(reynolds, relative_roughness), rel=5e-15)


def test_colebrook_on_a_column():
    reynolds = np.geomspace(4000.0, 1e8, 10000)
    roughness = np.geomspace(1e-8, 0.05, 10000)
    got = METHODS["Colebrook-White"].evaluate({"reynolds": reynolds, "relative_roughness": roughness})
    left = got**-0.5
    right = -2.0 * np.log10(roughness / 3.7 + 2.51 / reynolds * left)
    assert left == pytest.approx(right, rel=1e-13)


@given(REYNOLDS, ROUGHNESS)
def test_explicit_laws_stay_near_colebrook(reynolds, relative_roughness):
    """Haaland 1983 and Serghides 1984 state 2 % and a few thousandths of a per cent."""
    exact = friction.colebrook_white(reynolds, relative_roughness)
    assert friction.haaland(reynolds, relative_roughness) == pytest.approx(exact, rel=0.025)
    assert friction.serghides(reynolds, relative_roughness) == pytest.approx(exact, rel=5e-5)
    assert friction.churchill(reynolds, relative_roughness) == pytest.approx(exact, rel=0.07)


@given(REYNOLDS, st.floats(1e-6, 0.01))
def test_swamee_jain(reynolds, relative_roughness):
    """Swamee and Jain 1976 say 1 % for Re from 5000 and roughness 1e-6 to 0.01; it is up to 3.5 % below Re 1e4."""
    exact = friction.colebrook_white(max(reynolds, 5000.0), relative_roughness)
    got = friction.swamee_jain(max(reynolds, 5000.0), relative_roughness)
    assert got == pytest.approx(exact, rel=0.035)


@given(REYNOLDS)
def test_rough_walls_drag_more_and_the_rough_law_is_the_limit(reynolds):
    rising = [friction.colebrook_white(reynolds, e) for e in (0.0, 1e-6, 1e-4, 1e-2, 5e-2)]
    assert rising == sorted(rising)
    assert friction.colebrook_white(1e12, 0.01) == pytest.approx(friction.fully_rough(0.01), rel=3e-3)


@given(st.floats(math.log(4000.0), math.log(1e6)).map(math.exp))
def test_smooth_laws_agree(reynolds):
    """They were all drawn through the same measurements (Nikuradse 1932 and others)."""
    laws = (friction.smooth_friction, friction.konakov, friction.karman_nikuradse)
    values = [law(reynolds) for law in laws] + [friction.colebrook_white(reynolds, 0.0)]
    assert max(values) / min(values) < 1.04


def test_limits_of_roughness():
    """Nikuradse 1933: smooth below 5, fully rough above 70 in wall units; made walls are felt from 0.25."""
    height = friction.roughness_reynolds(1e6, 0.0196, 1e-3)
    assert height == pytest.approx(49.5, rel=1e-3)
    with pytest.raises(CellfuncsError, match=r"Reε 0 to 0\.25, here 49\.5"):
        METHODS["smooth wall friction"].evaluate({"reynolds": 1e6, "roughness_reynolds": height})
    METHODS["smooth wall friction"].evaluate({"reynolds": 1e6, "relative_roughness": 5e-6})
    assert friction.colebrook_white(1e6, 5e-6) == pytest.approx(friction.colebrook_white(1e6, 0.0), rel=0.02)
    with pytest.raises(CellfuncsError, match=r"Reε 0 to 0\.25"):
        METHODS["smooth wall friction"].evaluate({"reynolds": 1e6, "relative_roughness": 1e-3})
    with pytest.raises(CellfuncsError, match=r"Reε from 70"):
        METHODS["Nikuradse fully rough"].evaluate({"relative_roughness": 1e-3, "roughness_reynolds": height})


@pytest.mark.parametrize("name", ["Colebrook-White", "Haaland", "Serghides", "Churchill, all regimes", "Blasius"])
def test_no_stream_has_no_friction_factor(name):
    with pytest.raises(CellfuncsError, match="no finite"):
        METHODS[name].evaluate({"reynolds": 0.0, "relative_roughness": 1e-3}, allow=True)


def test_a_tube_is_its_own_laminar_equivalent():
    got = laminar.laminar_equivalent(1e5, "ellipse", 1.0)
    assert got == pytest.approx(friction.colebrook_white(1e5, 0.0), rel=1e-6)
    assert laminar.laminar_equivalent(1e5, "plates") > friction.colebrook_white(1e5, 0.0)


@given(st.floats(0.003, 0.06), st.floats(13.5, 2000.0))
def test_laminar_coils_drag_more_than_straight_tubes(curvature, dean):
    reynolds = dean / math.sqrt(curvature)
    straight = 64.0 / reynolds
    values = [
        coil.white(reynolds, curvature),
        coil.mishra_gupta_laminar(reynolds, curvature),
        coil.manlapaz_churchill_friction(reynolds, curvature),
    ]
    assert min(values) >= straight * (1.0 - 0.02)
    assert max(values) / min(values) < 1.2


@pytest.mark.parametrize(("dean", "jump"), [(20.0, 0.06), (40.0, 0.06)])
def test_stated_jumps_of_manlapaz_and_churchill(dean, jump):
    """Their power changes by steps at De 20 and 40 (Manlapaz and Churchill 1980)."""
    below = coil.manlapaz_churchill_friction(dean * 10.0 * (1 - 1e-9), 0.01)
    above = coil.manlapaz_churchill_friction(dean * 10.0 * (1 + 1e-9), 0.01)
    assert 0 < abs(above / below - 1.0) < jump


@given(st.floats(1e4, 1e6), st.floats(0.003, 0.06))
def test_turbulent_coils(reynolds, curvature):
    ito = coil.ito_turbulent(reynolds, curvature)
    assert coil.mishra_gupta_turbulent(reynolds, curvature) == pytest.approx(ito, rel=0.06)
    assert coil.rough_coil(reynolds, curvature, 1e-3) > coil.rough_coil(reynolds, curvature, 0.0)


def test_every_fitting_has_a_loss_and_a_stranger_is_named():
    assert len(minor_losses.fittings()) >= 30
    for name in minor_losses.fittings():
        small, large = (minor_losses.hooper(1e5, name, d) for d in (0.02, 0.5))
        assert small >= large >= 0
        assert minor_losses.hooper(10.0, name, 0.05) >= large
    with pytest.raises(UnknownName, match="elbow 90 welded"):
        minor_losses.hooper(1e5, "elbow 90 weldet", 0.1)


@given(st.floats(0.02, 0.99))
def test_an_orifice_is_a_contraction_and_an_expansion(area_ratio):
    """Idelchik 1986: the root of the whole is the sum of the roots; one of each alone is less."""
    parts = minor_losses.contraction(area_ratio) ** 0.5 + minor_losses.borda_carnot(area_ratio) ** 0.5
    assert minor_losses.orifice(area_ratio) * area_ratio**2 == pytest.approx(parts**2, rel=1e-9)


@given(st.floats(0.1, 0.9), st.floats(3.0, 39.0))
def test_a_diffuser_loses_less_than_a_step(area_ratio, cone_angle):
    assert minor_losses.diffuser(area_ratio, cone_angle, 1e-9) < minor_losses.borda_carnot(area_ratio)


def test_bends_are_continuous_in_the_angle():
    for angle in (90.0,):
        below, above = (minor_losses.ito_bend(1e5, 2.0, angle * k) for k in (1 - 1e-9, 1 + 1e-9))
        assert below == pytest.approx(above, rel=1e-6)
    assert minor_losses.ito_bend(1e5, 2.0, 45.0) < minor_losses.ito_bend(1e5, 2.0, 180.0)
