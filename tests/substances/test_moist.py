"""Moist air: definitions hold, and the slips that CoolProp answers or garbles are refused."""

import math

import pytest

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.substances import MOIST_AIR, find, moist_air, property_key

T, P = 298.15, 101325.0


def test_every_property_has_a_value():
    for key in MOIST_AIR:
        assert math.isfinite(moist_air(key, T, 0.5, P))


def test_definitions():
    ratio = moist_air("W", T, 0.5)
    vapour = moist_air("vapour_pressure", T, 0.5)
    # W = 0.621945 pw/(p - pw), ASHRAE Handbook Fundamentals ch. 1
    assert ratio == pytest.approx(0.621945 * vapour / (P - vapour), rel=1e-4)
    # density of the mixture = (1 + W)/v
    assert moist_air("rho", T, 0.5) == pytest.approx((1 + ratio) / moist_air("v", T, 0.5), rel=1e-9)
    assert moist_air("dew point", T, 1.0) == pytest.approx(T, abs=1e-4)
    assert moist_air("wet bulb", T, 1.0) == pytest.approx(T, abs=1e-4)
    assert moist_air("dew point", T, 0.5) < moist_air("wet bulb", T, 0.5) < T
    assert moist_air("nu", T, 0.5) == pytest.approx(moist_air("mu", T, 0.5) / moist_air("rho", T, 0.5))
    assert moist_air("Pr", T, 0.5) == pytest.approx(
        moist_air("mu", T, 0.5) * moist_air("cp", T, 0.5) / moist_air("k", T, 0.5)
    )
    assert moist_air("alpha", T, 0.5) == pytest.approx(
        moist_air("k", T, 0.5) / moist_air("cp", T, 0.5) / moist_air("rho", T, 0.5)
    )
    assert moist_air("beta", T, 0.5) == pytest.approx(1 / T, rel=0.02)


def test_dry_moist_air_is_air():
    air = find("air")
    for what, tolerance in (("density", 1e-4), ("cp", 1e-3), ("mu", 1e-2), ("k", 3e-2)):
        assert moist_air(what, T, 0.0) == pytest.approx(air.get(what, T), rel=tolerance)
    assert moist_air("W", T, 0.0) == 0.0
    with pytest.raises(OutOfRange, match="no dew point"):
        moist_air("dew point", T, 0.0)


def test_vapour_pressure_is_near_that_of_pure_water():
    """The enhancement factor is below 0.7 % at the atmosphere."""
    for temperature in (275.0, 300.0, 340.0):
        pure = find("water").get("saturation_pressure", temperature)
        assert 1 < moist_air("vapour_pressure", temperature, 1.0) / pure < 1.007


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ((T, 50.0, P), "write 50 % or 0.5"),
        ((T, 1.2, P), "write 1.2 %"),
        ((T, -0.1, P), "outside 0 to 1"),
        ((T, math.nan, P), "finite"),
        ((math.nan, 0.5, P), "finite"),
        ((T, 0.5, 101.325), "was kPa meant"),
        ((T, 0.5, 1.1e7), "highest pressure"),
        ((T, 0.5, -1.0), "gauge"),
        ((173.0, 0.5, P), "outside the range"),
        ((473.3, 0.001, P), "outside the range"),
        ((25.0, 0.5, P), "outside the range"),
        ((390.0, 0.9, P), "leaves no air"),
        ((360.0, 1.0, 5e4), "leaves no air"),
    ],
)
def test_slips(arguments, words):
    with pytest.raises(OutOfRange, match=words) as caught:
        moist_air("density", *arguments)
    assert len(str(caught.value)) < 230


def test_inside_the_limits():
    for temperature in (173.15, 473.15):
        assert moist_air("density", temperature, 0.01) > 0
    for pressure in (1000.0, 1e7):
        assert moist_air("density", 260.0, 0.5, pressure) > 0


def test_as_a_substance():
    air = find("moist air 50 %")
    assert air.get("density", T) == moist_air("density", T, 0.5)
    assert air.get("thermal conductivity", T) == moist_air("k", T, 0.5)
    assert air.get_many(("density", "mu"), [T, 310.0]).shape == (2, 2)
    assert air.phase(T) == "gas"
    assert "dry air" in air.note("enthalpy")
    assert air.source("density") == "RP-1485"
    with pytest.raises(NoModel):
        air.get("surface tension", T)
    with pytest.raises(NoModel):
        air.get("density", T, P, "liquid")
    assert property_key("dewpoint", "moist air") == "dew_point"
