"""Premises: fixed rows, states by their limits, figures by hand, and words where nothing can be judged."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.terms.one_phase import choking_length
from cellfuncs.terms.premises import COLUMNS, PREMISES
from cellfuncs.terms.thresholds import threshold

STATES = {"holds", "strained", "fails", "not judged"}
SAFETY = ["boiling", "freezing", "flash point", "choking", "cavitation"]


def table(cf, block):
    rows = cf("PREMISES", block)
    assert isinstance(rows, list), rows
    assert tuple(rows[0]) == COLUMNS
    assert [row[0] for row in rows[1:]] == list(PREMISES)
    return {row[0]: dict(zip(COLUMNS, row, strict=True)) for row in rows[1:]}


WATER = [
    ["flow kind", "duct"],
    ["substance", "water"],
    ["velocity", 0.5, "m/s"],
    ["diameter", 20.0, "mm"],
    ["length", 2.0, "m"],
    ["inlet temperature", 20.0, "degC"],
    ["wall temperature", 40.0, "degC"],
]


def changed(block, **rows):
    kept = {row[0]: row for row in block}
    for name, cells in rows.items():
        label = name.replace("_", " ")
        kept[label] = [label, *cells]
    return list(kept.values())


def test_safety_comes_first(cf):
    assert list(table(cf, WATER))[:5] == SAFETY


def test_rows_are_whole_for_every_flow(cf, stated_duct, stated_plate, stated_gap):
    for block in (WATER, stated_duct(), stated_plate(), stated_gap()):
        for row in table(cf, block).values():
            assert row["state"] in STATES
            assert row["source"] and 0 < len(row["reason"]) <= 255
            assert isinstance(row["limit"], float) or row["limit"] == "none"
            assert (row["figure"] == "none") == (row["state"] == "not judged")


def test_stated_properties_leave_words_where_a_substance_is_needed(cf, stated_duct):
    rows = table(cf, stated_duct())
    for name in ("boiling", "freezing", "choking", "continuum", "constant viscosity", "density change by velocity"):
        assert rows[name]["state"] == "not judged"
        assert "stated" in rows[name]["reason"] or "substance" in rows[name]["reason"]
    assert rows["flow regime"]["state"] == rows["Boussinesq"]["state"] == "holds"


@given(value=st.floats(-1e3, 1e3), name=st.sampled_from(["boiling", "freezing", "continuum", "thin layer"]))
def test_states_follow_the_limits_in_either_sense(value, name):
    limits = threshold(name)
    low_is_bad = limits.fails < limits.strained
    state = limits.state(value)
    if (value < limits.fails) if low_is_bad else (value > limits.fails):
        assert state == "fails"
    if (value > limits.strained) if low_is_bad else (value < limits.strained):
        assert state == "holds"


@pytest.mark.parametrize(
    ("mach", "wanted"), [(0.1, 66.922), (0.2, 14.533), (0.3, 5.2993), (0.5, 1.0691), (0.8, 0.07229)]
)
def test_friction_to_choking_is_that_of_the_tables(mach, wanted):
    """fL*/D at γ 1.4 as tabulated for adiabatic flow with friction (Shapiro 1953)."""
    assert choking_length(mach, 1.4) == pytest.approx(wanted, rel=2e-4)


def test_a_long_gas_duct_chokes(cf):
    block = changed(WATER, substance=("air", ""), velocity=(100.0, "m/s"), length=(20.0, "m"))
    row = table(cf, block)["choking"]
    assert row["state"] == "fails"
    assert row["figure"] > 1
    assert table(cf, WATER)["choking"]["state"] == "not judged"


def test_stated_vapour_pressure_and_freezing_point_serve_stated_properties(cf, stated_duct):
    more = {"vapour pressure": (0.9, "bar"), "freezing point": (10.0, "degC"), "flash point": (30.0, "degC")}
    rows = table(cf, stated_duct(**more))
    assert rows["boiling"]["state"] == "strained"
    assert rows["freezing"]["figure"] == pytest.approx(300.0 - 283.15)
    assert rows["flash point"]["state"] == "fails"
    assert rows["flash point"]["figure"] == pytest.approx(303.15 - 320.0)


def test_friction_lowers_the_pressure_that_is_stated(cf):
    """Water at 40 °C boils at 7.4 kPa; where no pressure is stated the atmosphere stands behind the friction."""
    fast = changed(WATER, velocity=(6.0, "m/s"), length=(12.0, "m"))
    unstated, stated = table(cf, fast), table(cf, changed(fast, pressure=(2.5, "bar")))
    drop = cf("CASE", fast, "pressure drop")
    assert unstated["boiling"]["figure"] == pytest.approx(7384.9 / 101325.0, rel=1e-3)
    assert "no pressure is stated" in unstated["boiling"]["reason"]
    assert stated["boiling"]["figure"] == pytest.approx(7384.9 / (250000.0 - drop), rel=1e-3)
    assert stated["cavitation"]["figure"] < unstated["cavitation"]["figure"] * 250.0 / 101.0


def test_the_limit_of_a_change_is_where_its_correction_is_the_tolerance(cf):
    for tolerance in (2.0, 5.0, 10.0):
        row = table(cf, changed(WATER, tolerance=(tolerance, "%")))["constant viscosity"]
        assert row["limit"] == pytest.approx((1.0 + tolerance / 100.0) ** (1.0 / 0.14) - 1.0)
        assert row["state"] == ("strained" if row["figure"] >= row["limit"] else "holds")


def test_time_scales(cf, stated_duct):
    rows = table(cf, stated_duct(reynolds=500.0, **{"time scale": (20.0, "s")}))
    assert rows["steady stream"]["figure"] == pytest.approx(4.0 / 1.0 / 20.0)
    assert rows["steady stream"]["state"] == "strained"
    assert table(cf, stated_duct())["steady stream"]["state"] == "not judged"


def test_mixed_convection_by_inclination(cf):
    slow = changed(WATER, velocity=(30.0, "mm/s"))
    unstated, upright, level = (
        table(cf, block)["mixed convection"]
        for block in (slow, changed(slow, inclination=(0.0, "deg")), changed(slow, inclination=(90.0, "deg")))
    )
    assert unstated["figure"] == upright["figure"]
    assert "not stated" in unstated["reason"]
    assert level["figure"] != upright["figure"]
    assert "level" in level["reason"]
    weightless = table(cf, changed(slow, gravity=(1e-9, "m/s2")))["mixed convection"]
    assert weightless["state"] == "holds"


def developed_upright_tube(grashof_over_reynolds, cells=1500):
    """Nu and wall shear of the developed upright tube at uniform flux, buoyancy aiding (finite volumes).

    u in mean velocities, r in radii, θ = (Tw − T)k/(qR). Momentum ∇²u = P + G·θ with G from Gr/Re on diameter
    and Tw − Tb; energy ∇²θ = −2u.
    """
    r = (np.arange(cells) + 0.5) / cells
    faces = np.arange(cells + 1) / cells
    weights = np.diff(faces**2) / 2.0
    across = faces[1:-1] / (r[1:] - r[:-1])
    laplace = np.zeros((cells, cells))
    inner = np.arange(cells - 1)
    laplace[inner, inner + 1] += across
    laplace[inner, inner] -= across
    laplace[inner + 1, inner] += across
    laplace[inner + 1, inner + 1] -= across
    laplace[-1, -1] -= 1.0 / (1.0 - r[-1])
    solve = np.linalg.inv(laplace)
    u = 2.0 * (1.0 - r**2)
    for _ in range(60):
        theta = solve @ (-2.0 * u * weights)
        bulk = 2.0 * np.sum(theta * u * weights)
        drive = grashof_over_reynolds / 4.0 * theta / bulk
        plain, buoyant = solve @ weights, solve @ (drive * weights)
        gradient = (0.5 - np.sum(buoyant * weights)) / np.sum(plain * weights)
        u = gradient * plain + buoyant
    shear = u[-1] / (1.0 - r[-1])
    return 2.0 / bulk, shear


def test_the_limits_of_upright_laminar_flow_are_five_per_cent():
    """Nu 48/11 and shear 4 without buoyancy; + 5 % at the two limits of data/premises.csv, solved here."""
    nusselt, shear = developed_upright_tube(0.0)
    assert nusselt == pytest.approx(48.0 / 11.0, rel=1e-3)
    assert shear == pytest.approx(4.0, rel=2e-3)
    limits = threshold("mixed convection, upright laminar duct")
    assert developed_upright_tube(limits.fails)[0] / nusselt == pytest.approx(1.05, abs=0.006)
    assert developed_upright_tube(limits.strained)[1] / shear == pytest.approx(1.05, abs=0.006)


def test_a_wall_in_another_phase_is_told(cf):
    rows = table(cf, changed(WATER, wall_temperature=(130.0, "degC"), length=(0.2, "m")))
    assert rows["boiling"]["state"] == "fails"
    assert rows["constant viscosity"]["state"] == "not judged"
    assert "gas" in rows["constant viscosity"]["reason"]


def test_a_refused_case_is_one_text(cf):
    assert cf("PREMISES", [["flow kind", "duct"], ["velocity", 1.0]]).startswith("! block:")


def test_film_feedback_by_hand(cf):
    block = [
        ["flow kind", "gap"],
        ["substance", "ISO VG 46 VI 95"],
        ["velocity", 6.0, "m/s"],
        ["gap", 40.0, "um"],
        ["length", 50.0, "mm"],
        ["wall temperature", 50.0, "degC"],
    ]
    mu = [cf("PROPERTY", "ISO VG 46 VI 95", "viscosity", f"{t} degC") for t in (49.5, 50.0, 50.5)]
    k = cf("PROPERTY", "ISO VG 46 VI 95", "conductivity", "50 degC")
    row = table(cf, block)["viscosity feedback"]
    assert row["figure"] == pytest.approx(math.log(mu[0] / mu[2]) * mu[1] * 36.0 / k, rel=1e-6)


def test_a_body_says_what_one_temperature_hides(cf):
    """Bi 0.1 on volume over surface: after one time constant a plane wall's middle stands 0.0183 above lumped."""
    block = [
        ["flow kind", "body"], ["density", 1000.0, "kg/m3"], ["specific heat", 1000.0, "J/kgK"],
        ["conductivity", 1.0, "W/mK"], ["coefficient", 10.0, "W/m2K"], ["length", 0.01, "m"], ["time", 1000.0, "s"],
        ["initial temperature", 400.0, "K"], ["stream temperature", 300.0, "K"],
    ]  # fmt: skip
    reason = next(row[5] for row in cf("PREMISES", block)[1:] if row[0] == "lumped body")
    middle = float(reason.split("the middle by ")[1].split(" K")[0])
    assert middle >= 100.0 * (0.3861332871 - 0.3678794412) - 0.01  # the plane wall; a sphere lags more
    assert middle < 10.0
