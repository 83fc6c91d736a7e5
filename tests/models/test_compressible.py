"""A stream whose density falls: total temperature kept, Fanno's closed form, liquids, choking."""

import math

import pytest

from cellfuncs.errors import NoModel
from cellfuncs.models import compressible as model
from cellfuncs.models.compressible import Stream


def _air(mach: float, friction_length: float, **more: float) -> Stream:
    """fL/D and inlet Mach number of an ideal gas with γ = 1.4."""
    return Stream(drag=friction_length / 2, dynamic=1.4 * mach**2, expansion_ratio=0.4 / 1.4, **more)


@pytest.mark.parametrize(("mach", "length"), [(0.05, 100.0), (0.1, 30.0), (0.3, 4.0), (0.5, 1.0), (0.5, 1.06)])
def test_an_adiabatic_ideal_gas_keeps_its_total_temperature_exactly(mach, length):
    out = model.flow(_air(mach, length))
    assert out.total_temperature == pytest.approx(1 + 0.2 * mach**2, rel=1e-15)
    assert out.duty == pytest.approx(0.0, abs=1e-15)


@pytest.mark.parametrize(("mach", "length"), [(0.05, 100.0), (0.1, 30.0), (0.3, 4.0), (0.5, 1.06)])
def test_fanno_flow(mach, length):
    """Shapiro 1953: f·L/D to choking, closed form; the difference of two ends is the duct's."""
    out = model.flow(_air(mach, length))
    leaves = mach * out.velocity / math.sqrt(out.temperature)
    assert model.fanno_length(mach, 1.4) - model.fanno_length(leaves, 1.4) == pytest.approx(length, rel=1e-9)
    assert out.choking == pytest.approx(1 - leaves**2, rel=1e-9)


def test_the_error_falls_with_the_tolerance_and_is_told():
    given = _air(0.5, 1.0)
    out = model.flow(given)
    best = 1 - model._integrate(given, 1e-12)[1]
    errors = [abs(1 - model._integrate(given, tolerance)[1] - best) for tolerance in (1e-4, 1e-6, 1e-8)]
    assert errors[1] < errors[0] / 10 and errors[2] < errors[1] / 10, errors
    assert abs(1 - out.pressure - best) <= out.error


def test_choking_is_told_with_the_place():
    with pytest.raises(NoModel, match=r"at 9\d(\.\d)? % of the length"):
        model.flow(_air(0.5, 1.08))  # 1.0691 to choking
    with pytest.raises(NoModel, match="where it enters"):
        model.flow(_air(1.2, 0.1))


@pytest.mark.parametrize("expansion", [0.0, 0.23, 1.0, 1.6])
def test_slow_streams_change_by_one_minus_beta_t_of_the_pressure_drop(expansion):
    """Adiabatic and slow: ΔT = (1 − βT)·Δp/(ρcp) whatever the fluid (Joule-Thomson; an ideal gas does not change)."""
    given = Stream(drag=5000.0, dynamic=1e-6, expansion_ratio=0.01, expansion=expansion, compressibility=0.0)
    out = model.flow(given)
    assert 1 - out.pressure == pytest.approx(5e-3, rel=1e-3)
    expected = (1 - expansion) * 0.01 * (1 - out.pressure)
    assert out.temperature - 1 == pytest.approx(expected, rel=1e-3, abs=1e-8)


def test_a_slow_stream_is_warmed_as_by_the_plain_balance():
    out = model.flow(_air(1e-3, 1e-3, transfer=2.0, wall=1.3))
    assert (out.temperature - 1) / 0.3 == pytest.approx(-math.expm1(-2.0), rel=1e-6)


def test_isothermal_flow_has_its_closed_form():
    """A long duct at one temperature: (p₁² − p₂²)/p₁² = A·(fL/D + 2·ln(p₁/p₂)) (Shapiro 1953)."""
    given = Stream(drag=25.0, dynamic=1.4 * 0.05**2, expansion_ratio=0.4 / 1.4, transfer=1e4)
    out = model.flow(given)
    left = 1 - out.pressure**2
    assert left == pytest.approx(given.dynamic * (50.0 - 2 * math.log(out.pressure)), rel=1e-5)


@pytest.mark.parametrize(
    "given",
    [
        _air(0.1, math.nan), _air(0.1, -1.0), Stream(drag=1.0, dynamic=0.1, expansion_ratio=0.0),
        Stream(drag=1e9, dynamic=0.5, expansion_ratio=0.3),
    ],
)  # fmt: skip
def test_what_has_no_answer_is_refused(given):
    with pytest.raises(NoModel):
        model.flow(given)
