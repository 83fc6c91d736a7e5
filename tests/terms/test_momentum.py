"""The momentum terms: what holds by construction, pairs that cancel, and where the rows are looked up."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.terms import COLUMNS, MOMENTUM_TERMS


def table(cf, block):
    rows = cf("TERMS", block, "momentum")
    assert isinstance(rows, list), rows
    assert tuple(rows[0]) == COLUMNS
    assert [row[0] for row in rows[1:]] == [*MOMENTUM_TERMS, "all left out"]
    return {row[0]: dict(zip(COLUMNS, row, strict=True)) for row in rows[1:]}


@settings(max_examples=60, deadline=None)
@given(reynolds=st.floats(math.log(1.0), math.log(4.9e6)).map(math.exp))
def test_in_a_duct_pressure_pays_for_friction(cf, reynolds):
    viscosity = 1000.0 * 1.0 * 0.02 / reynolds
    block = [
        ["flow kind", "duct"],
        ["velocity", 1.0, "m/s"],
        ["diameter", 0.02, "m"],
        ["length", 4.0, "m"],
        ["temperature difference", 20.0, "K"],
        ["density", 1000.0, "kg/m3"],
        ["viscosity", viscosity, "Pa s"],
        ["conductivity", 0.6, "W/mK"],
        ["specific heat", 5.0 * 0.6 / viscosity, "J/kgK"],
    ]
    rows = table(cf, block)
    assert rows["pressure"]["share"] == pytest.approx(rows["viscous across"]["share"], rel=1e-12)
    assert rows["pressure"]["verdict"] == rows["viscous across"]["verdict"] == "keep"


def test_laminar_tube_by_hand(cf, stated_duct):
    """Friction fρU²/(2D) with f = 64/Re; the entrance costs 1.25 dynamic heads: share 1.25·D/(f·L)."""
    still = {"expansion coefficient": (0.0, "1/K")}
    rows = table(cf, stated_duct(reynolds=500.0, prandtl=5.0, **still, **{"time scale": (100.0, "s")}))
    friction = 64.0 / 500.0 * 1000.0 * 1.0 / (2.0 * 0.02)
    assert rows["inertia"]["share"] == pytest.approx(1.25 * 0.02 / (64.0 / 500.0 * 4.0), rel=1e-12)
    assert rows["storage"]["share"] == pytest.approx(1000.0 * 1.0 / 100.0 / friction, rel=1e-12)
    assert rows["viscous along"]["share"] == pytest.approx(0.04 * 1.0 / 16.0 / friction, rel=1e-12)


def test_from_a_uniform_inlet_the_growing_profile_is_in_the_friction_once(cf, stated_duct):
    """Far behind the entrance K is 1.25 heads, of which 2(4/3 − 1) went into momentum; wall and momentum are paid."""
    still = {"expansion coefficient": (0.0, "1/K")}
    block = [*stated_duct(reynolds=100.0, prandtl=5.0, **still), ["inlet profile", "uniform", ""]]
    rows = table(cf, block)
    friction, drop = 64.0 / 100.0 * 4.0 / 0.02, cf("CASE", block, "pressure drop") / 500.0  # in dynamic heads
    assert drop - friction == pytest.approx(1.25, rel=0.1)
    assert rows["inertia"]["share"] == pytest.approx(2.0 / 3.0 / 1.25 * (drop - friction) / drop, rel=1e-9)
    assert rows["viscous across"]["share"] + rows["inertia"]["share"] == pytest.approx(1.0, rel=1e-9)


def test_buoyancy_is_its_size_over_friction(cf, stated_duct):
    rows = table(cf, stated_duct(reynolds=500.0, prandtl=5.0))
    friction = 64.0 / 500.0 * 1000.0 / (2.0 * 0.02)
    assert rows["buoyancy"]["share"] == pytest.approx(1000.0 * 9.80665 * 0.0003 * 20.0 / friction, rel=1e-12)


def test_weight_and_hydrostatic_pressure_cancel(cf, stated_duct, stated_plate, stated_gap):
    """Without a free surface weight never dilutes the shares of the others."""
    for block in (stated_duct(), stated_plate(), stated_gap()):
        rows = table(cf, block)
        assert rows["gravity"]["share"] == 0.0
        assert rows["gravity"]["verdict"] == "leave out"
        assert rows["viscous across"]["share"] == pytest.approx(1.0)


def test_a_plate_balances_inertia_and_friction(cf, stated_plate):
    rows = table(cf, stated_plate(reynolds=1e4))
    assert rows["inertia"]["share"] == rows["viscous across"]["share"] == 1.0
    assert rows["viscous along"]["share"] == pytest.approx(1e-4, rel=1e-12)


def test_inertia_of_a_film_is_its_reduced_reynolds_number(cf, stated_gap):
    """ρUh²/(μL), lubrication theory."""
    rows = table(cf, stated_gap())
    assert rows["inertia"]["share"] == pytest.approx(870.0 * 5.0 * (50e-6) ** 2 / (0.03 * 0.1), rel=1e-9)


def test_rotation_and_surface_tension_are_asked_for(cf, stated_duct):
    rows = table(cf, stated_duct())
    assert "angular velocity" in rows["rotation"]["reason"]
    more = {"angular velocity": (10.0, "rad/s"), "surface tension": (0.07, "N/m")}
    rows = table(cf, stated_duct(reynolds=500.0, **more))
    friction = 64.0 / 500.0 * 1000.0 / (2.0 * 0.02)
    assert rows["rotation"]["share"] == pytest.approx(2.0 * 1000.0 * 10.0 / friction, rel=1e-12)
    assert rows["rotation"]["one-scale"] == pytest.approx(2.0 * 10.0 * 4.0, rel=1e-12)
    assert rows["surface tension"]["share"] == pytest.approx(0.07 / 16.0 / friction, rel=1e-12)


def test_term_looks_up_what_only_momentum_has(cf, stated_duct):
    block = stated_duct(**{"time scale": (100.0, "s")})
    rows = table(cf, block)
    for name in MOMENTUM_TERMS:
        if name != "storage":
            assert cf("TERM", block, name) == rows[name]["share"]
            assert cf("TERM", block, name, "reason") == rows[name]["reason"]
    assert cf("TERM", block, "storage", "reason") != rows["storage"]["reason"]


def test_reasons_fit_a_cell(cf, stated_duct, stated_plate, stated_gap):
    for block in (stated_duct(), stated_plate(), stated_gap()):
        for row in table(cf, block).values():
            assert 0 < len(row["reason"]) <= 255
