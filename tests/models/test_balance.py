"""The one-dimensional balance: an independent collocation, limits, heat kept, closed forms in time."""

import math

import numpy as np
import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from cellfuncs.errors import NoModel
from cellfuncs.models import balance as model
from cellfuncs.models.balance import AMBIENT, FLUX, TEMPERATURE, Balance
from cellfuncs.models.chebyshev import nodes


def _by_collocation(b: Balance, count: int) -> tuple[np.ndarray, np.ndarray]:
    """Fluid and wall by Chebyshev collocation of the equations as they stand in the docstring."""
    _, d, _ = nodes(count)
    one, zero = np.eye(count), np.zeros((count, count))
    second = d @ d
    fluid = [b.along * second - d - b.transfer * one, b.transfer * one]
    wall = [b.transfer * one, b.wall * second - (b.transfer + b.outer) * one]
    right = np.concatenate([
        np.full(count, b.transfer * b.recovery - b.heating),
        np.full(count, -b.transfer * b.recovery - b.flux - b.outer),
    ])  # fmt: skip
    if b.outside == TEMPERATURE:
        wall, right[count:] = [zero, one], 1.0
    matrix = np.block([fluid, wall])
    matrix[0] = 0.0
    matrix[0, :count] = one[0] - b.along * d[0]
    right[0] = 0.0
    if b.along > 0:
        matrix[count - 1] = 0.0
        matrix[count - 1, :count] = d[-1]
        right[count - 1] = 0.0
    if b.wall > 0 and b.outside != TEMPERATURE:
        for row, edge in ((count, 0), (2 * count - 1, -1)):
            matrix[row] = 0.0
            matrix[row, count:] = d[edge]
            right[row] = 0.0
    found = np.linalg.solve(matrix, right)
    return found[:count], found[count:]


CASES = [
    Balance(TEMPERATURE, 2.0),
    Balance(TEMPERATURE, 0.7, heating=0.3, recovery=0.2, along=0.05),
    Balance(FLUX, 3.0, flux=1.0, wall=0.02),
    Balance(FLUX, 3.0, flux=0.8, heating=-0.2, recovery=0.1, wall=0.05, along=0.02),
    Balance(AMBIENT, 5.0, outer=2.0, wall=0.02, along=0.03, heating=0.1, recovery=0.05),
    Balance(AMBIENT, 5.0, outer=2.0, heating=0.1),
]


@pytest.mark.parametrize("case", CASES)
def test_an_independent_solution_agrees_and_comes_nearer_by_orders(case):
    x = nodes(40)[0]
    modes = model._Modes(case)
    off = []
    for count in (8, 18, 40):
        fluid, wall = _by_collocation(case, count)
        at = nodes(count)[0]
        off.append(max(abs(fluid - modes.fluid(at)).max(), abs(wall - modes.wall(at)).max()))
    assert off[2] < 1e-9 and off[1] < off[0] / 20, off
    found = model.solve(case)
    assert found.outlet == pytest.approx(float(modes.fluid(x[-1:])[0])) and found.error < 1e-12


@pytest.mark.parametrize("outside", [TEMPERATURE, FLUX, AMBIENT])
def test_the_closed_form_without_conduction_is_what_the_exponentials_tend_to(outside):
    case = Balance(outside, 2.3, heating=-0.4, recovery=0.2, flux=0.9 if outside == FLUX else 0.0,
                   outer=1.1 if outside == AMBIENT else 0.0)  # fmt: skip
    plain, modes = model.solve(case), model._Modes(case).profile()
    for name in ("outlet", "wall", "hottest_wall", "local_flux", "duty"):
        assert getattr(plain, name) == pytest.approx(getattr(modes, name), rel=1e-13, abs=1e-14), name


def test_plain_exchange_is_the_exponential():
    assert model.solve(Balance(TEMPERATURE, 2.0)).outlet == pytest.approx(-math.expm1(-2.0), rel=1e-15)


@pytest.mark.parametrize("transfer", [0.01, 1.0, 5.0, 40.0])
def test_friction_moves_the_answers_as_the_closed_forms_say(transfer):
    """With R and w: outlet (R − w)(1 − e^−NTU), local flux w + R(e^NTU − 1) over the local difference."""
    ratio, recovery = 0.02, 0.005
    plain = model.solve(Balance(TEMPERATURE, transfer))
    full = model.solve(Balance(TEMPERATURE, transfer, heating=ratio * transfer, recovery=recovery))
    assert full.outlet - plain.outlet == pytest.approx((ratio - recovery) * -math.expm1(-transfer), rel=1e-9)
    local = (plain.local_flux - full.local_flux) / (transfer * math.exp(-transfer))
    assert local == pytest.approx(recovery + ratio * math.expm1(transfer), rel=1e-6)


@pytest.mark.parametrize(
    ("nusselt", "friction", "recovery", "limit"),
    [(48 / 11, 32.0, 1.0, 48 / 5), (140 / 17, 48.0, 27 / 35, 35 / 2)],
    ids=["tube", "plates"],
)
def test_the_long_laminar_limits_come_out(nusselt, friction, recovery, limit):
    """Far downstream only friction is left; the wall flux is even, and Nu on T_b − T_w is 48/5 or 35/2."""
    br, transfer = 0.3, 50.0
    heating = friction * br / (4 * nusselt) * transfer  # f·Re/2 · μU²/D² over 4hΔT/D
    found = model.solve(Balance(TEMPERATURE, transfer, heating=heating, recovery=recovery * br))
    assert -found.local_flux / transfer * nusselt / (found.outlet - 1.0) == pytest.approx(limit, rel=1e-9)


_SIZES = st.floats(-9, 9).map(lambda power: 10.0**power)
_NONE_OR_SIZES = st.one_of(st.just(0.0), _SIZES)


@example(FLUX, 0.671875, 1e7, 10.0**3.5625, 4.25, 0.0, 0.0)  # rounding beyond what the condition tells
@settings(max_examples=300, deadline=None)
@given(
    st.sampled_from([TEMPERATURE, FLUX, AMBIENT]), st.floats(-6, 4), _NONE_OR_SIZES, _NONE_OR_SIZES,
    st.floats(-10, 10), st.floats(0, 3), st.floats(-3, 3),
)  # fmt: skip
def test_any_numbers_are_answered_with_the_heat_kept_or_refused(outside, power, along, wall, heating, recovery, outer):
    case = Balance(outside, 10.0**power, heating, recovery, along, wall, flux=1.0, outer=0.0)
    if outside == AMBIENT:
        case = Balance(outside, 10.0**power, heating, recovery, along, wall, outer=10.0**outer)
    try:
        found = model.solve(case)
    except NoModel as refusal:
        assert len(str(refusal)) < 230
        return
    values = (found.outlet, found.wall, found.hottest_wall, found.local_flux, found.duty, found.error)
    assert all(math.isfinite(v) for v in values)
    if outside == FLUX:
        assert found.duty == pytest.approx(1.0, abs=10 * found.error + 1e-9)
    if outside == TEMPERATURE and heating == 0.0:
        assert -1e-9 - recovery <= found.outlet <= 1.0 + 1e-9


def test_much_conduction_along_makes_one_temperature():
    """Pe → 0: a stirred tank, N(1 − θ) = θ."""
    assert model.solve(Balance(TEMPERATURE, 2.0, along=1e6)).outlet == pytest.approx(2 / 3, rel=1e-6)


def test_a_well_conducting_wall_has_one_temperature():
    found = model.solve(Balance(FLUX, 2.0, flux=1.0, wall=1e7))
    assert found.wall == pytest.approx(1.0 / -math.expm1(-2.0), rel=1e-5)


@pytest.mark.parametrize("case", [
    Balance(TEMPERATURE, 0.0), Balance(TEMPERATURE, math.nan), Balance(FLUX, 1.0, along=-1.0), Balance(AMBIENT, 1.0),
])  # fmt: skip
def test_what_has_no_answer_is_refused(case):
    with pytest.raises(NoModel):
        model.solve(case)


@pytest.mark.parametrize("flux", [False, True])
@pytest.mark.parametrize("passing", [0.001, 0.3, 1.0, 4.0])
def test_the_ramp_is_the_integral_along_the_way(flux, passing):
    """What left at the end of the ramp met at s (from the outlet) a wall of 1 − passing·s, never below 0."""
    s = (np.arange(400_000) + 0.5) / 400_000
    transfer = 2.5
    weight = np.ones_like(s) if flux else transfer * np.exp(-transfer * s)
    met = np.clip(1 - passing * s, 0, None)
    expected = np.mean(weight * met) / np.mean(weight)
    assert model.ramped_outlet(transfer, passing, flux) == pytest.approx(expected, rel=1e-6)


def test_a_slow_ramp_leaves_no_trace():
    assert model.ramped_outlet(2.0, 1e-9) == pytest.approx(1.0, abs=1e-8)
    assert model.ramped_inlet(0.0) == 1.0 and model.ramped_inlet(3.0) == 0.0


def test_a_front_far_away_neither_overflows_nor_is_lost():
    assert model.advancing_front(1e4, 1e4) == pytest.approx(0.5, abs=0.01)
    assert model.advancing_front(5e3, 1.0) == 0.0
    assert model.advancing_front(1e-9, 1e9) == pytest.approx(1.0, abs=1e-12)


@settings(max_examples=300, deadline=None)
@given(
    outside=st.sampled_from([TEMPERATURE, FLUX, AMBIENT]), transfer=st.floats(-5, 3), along=st.floats(-9, 5),
    heating=st.floats(-3, 3), recovery=st.floats(-3, 3), other=st.floats(-3, 3),
)  # fmt: skip
def test_two_exponentials_in_closed_form_are_the_modes(outside, transfer, along, heating, recovery, other):
    case = Balance(
        outside, 10**transfer, heating, recovery, 10**along,
        flux=other if outside == FLUX else 0.0, outer=10**other if outside == AMBIENT else 0.0,
    )  # fmt: skip
    found, modes = model.solve(case), model._Modes(case).profile()
    close = 100.0 * (found.error + modes.error) + 1e-13
    for name in ("outlet", "wall", "hottest_wall", "local_flux", "duty"):
        one, other_one = getattr(found, name), getattr(modes, name)
        assert abs(one - other_one) <= close + 1e-13 * abs(other_one), name
