"""Melts that the flow itself shears, and properties stated at temperatures."""

import math

import pytest

from cellfuncs.cells.catalogue import functions

MELT = "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K, 740 kg/m3, 0.2 W/(m K), 2.4 kJ/(kg K)"
DIE = [
    ["flow kind", "duct"],
    ["substance", MELT],
    ["velocity", 20.0, "mm/s"],
    ["length", 50.0, "mm"],
    ["inlet temperature", 230.0, "degC"],
    ["wall temperature", 230.001, "degC"],
    ["property temperature", 230.0, "degC"],
    ["pressure", 90.0, "bar"],
]
OIL = [
    ["flow kind", "duct"],
    ["velocity", 1.0, "m/s"],
    ["diameter", 25.0, "mm"],
    ["length", 3.0, "m"],
    ["property temperature", 70.0, "degC"],
    ["temperature difference", 20.0, "K"],
    ["density", 870.0, "kg/m3"],
    ["conductivity", 0.13, "W/(m K)"],
    ["specific heat", 1.9, "kJ/(kg K)"],
]
TABLE = [
    ["temperature [degC]", "density [kg/m3]", "viscosity [mPa s]", "conductivity [W/mK]", "specific heat [kJ/kgK]"],
    [20.0, 1000.0, 1.5, 0.50, 4.0],
    [60.0, 980.0, 0.9, 0.55, 4.0],
    [90.0, 960.0, 0.6, 0.56, 4.1],
]
WATER = [
    ["flow kind", "duct"],
    ["fluid", "water"],
    ["velocity", 1.0, "m/s"],
    ["diameter", 25.0, "mm"],
    ["length", 3.0, "m"],
    ["inlet temperature", 50.0, "degC"],
    ["wall temperature", 70.0, "degC"],
]


def call(name, *arguments):
    return functions()[name].call(*arguments)


def test_a_power_law_melt_in_a_tube_has_the_exact_friction():
    # Bird, Armstrong and Hassager 1987: wall stress K((3n + 1)/(4n)·8U/D)^n of a power-law fluid in a tube
    block = [*DIE, ["diameter", 2.0, "mm"]]
    rate = 8 * 0.02 / 0.002
    stress = 12000 * ((3 * 0.35 + 1) / (4 * 0.35) * rate) ** 0.35
    assert call("CF_CASE", block, "pressure drop") == pytest.approx(4 * 0.05 / 0.002 * stress, rel=1e-4)
    assert call("CF_CASE", block, "shear rate") == pytest.approx((3 * 0.35 + 1) / (4 * 0.35) * rate, rel=1e-9)


def test_a_power_law_melt_in_a_slit_has_the_exact_friction():
    # the same: K((2n + 1)/(3n)·6U/h)^n between plates
    block = [*DIE, ["gap", 2.0, "mm"], ["width", 100.0, "mm"]]
    stress = 12000 * ((2 * 0.35 + 1) / (3 * 0.35) * 6 * 0.02 / 0.002) ** 0.35
    assert call("CF_CASE", block, "pressure drop") == pytest.approx(2 * 0.05 / 0.002 * stress, rel=1e-4)


def test_a_sheared_gap_has_the_rate_of_its_wall():
    block = [["flow kind", "gap"], ["substance", MELT], ["velocity", 0.2, "m/s"], ["gap", 2.0, "mm"],
             ["length", 0.1, "m"], ["wall temperature", 230.0, "degC"]]  # fmt: skip
    assert call("CF_CASE", block, "shear rate") == pytest.approx(100.0)
    assert call("CF_CASE", block, "viscosity") == pytest.approx(12000 * 100.0 ** (0.35 - 1))
    assert "n 0.35" in call("CF_TERM", block, "viscous heating", "reason")


def test_a_stated_shear_rate_is_taken():
    block = [*DIE, ["diameter", 2.0, "mm"], ["shear rate", 50.0, "1/s"]]
    assert call("CF_CASE", block, "viscosity") == pytest.approx(12000 * 50.0 ** (0.35 - 1))


def test_a_shear_rate_without_use_is_refused():
    answer = call("CF_CASE", [*WATER, ["shear rate", 5.0, "1/s"]], "viscosity")
    assert answer.startswith("! ") and "melt" in answer


def test_a_rate_outside_the_data_names_the_range():
    block = [*DIE, ["diameter", 20.0, "mm"]]
    block[1] = ["substance", "LDPE melt"]
    block[6] = ["property temperature", 200.0, "degC"]
    answer = call("CF_CASE", block, "Reynolds number")
    assert answer.startswith("! ") and "1/s" in answer


def test_two_viscosities_make_a_table():
    block = [*OIL, ["kinematic viscosity at 40 degC", 46.0, "cSt"], ["kinematic viscosity @ 100 °C", 6.8, "cSt"]]
    between = math.exp(math.log(46.0) + 0.5 * math.log(6.8 / 46.0)) * 1e-6  # a line of the logarithm
    assert call("CF_CASE", block, "kinematic viscosity") == pytest.approx(between, rel=1e-9)
    assert call("CF_CASE", block, "viscosity") == pytest.approx(870 * between, rel=1e-9)


def test_a_table_is_never_extrapolated():
    block = [*OIL, ["viscosity at 20 degC", 80.0, "mPa s"], ["viscosity at 60 degC", 20.0, "mPa s"]]
    answer = call("CF_CASE", block, "viscosity")
    assert answer.startswith("! ") and "range" in answer


@pytest.mark.parametrize(
    ("rows", "word"),
    [
        ([["viscosity at 40 degC", 46.0, "mPa s"]], "at least two"),
        ([["viscosity at 40 degC", 46.0, "mPa s"], ["viscosity at 40 °C", 45.0, "mPa s"]], "twice"),
        ([["viscosity at 40 degC", 46.0, "mPa s"], ["viscosity", 45.0, "mPa s"]], "both stated"),
        ([["viscosity at 40 degC", -46.0, "mPa s"]], "cannot be"),
        ([["viscosity at 40 degC", 46.0, "K"]], "viscosity"),
        ([["viscosity at 40", 46.0, "mPa s"]], "not known"),
        ([["colour at 40 degC", 46.0, "mPa s"]], "not known"),
    ],
)
def test_a_table_that_is_none_is_refused(rows, word):
    answer = call("CF_CASE", [*OIL, *rows], "viscosity")
    assert answer.startswith("! ") and word in answer


def test_a_range_of_properties_takes_the_place_of_the_substance():
    block = call("CF_VARY", WATER, "substance", TABLE)
    assert isinstance(block, list)
    at = call("CF_CASE", block, "property temperature")
    for what in ("density", "viscosity", "conductivity", "specific heat"):
        assert call("CF_CASE", block, what) == pytest.approx(call("CF_PROPERTY", TABLE, what, at), rel=1e-12)
    again = call("CF_VARY", block, "substance", TABLE)
    assert again == block


def test_a_table_beside_a_substance_overrides_what_it_holds():
    rows = [["viscosity at 40 degC", 2.0, "mPa s"], ["viscosity at 80 degC", 2.0, "mPa s"]]
    assert call("CF_CASE", [*WATER, *rows], "viscosity") == pytest.approx(2e-3)
    assert call("CF_CASE", [*WATER, *rows], "density") == pytest.approx(call("CF_CASE", WATER, "density"), rel=1e-3)


def test_a_fault_in_the_table_goes_out():
    faulty = [TABLE[0], [20.0, "! density: no", 1.5, 0.5, 4.0], *TABLE[2:]]
    assert call("CF_VARY", WATER, "substance", faulty) == "! density: no"
