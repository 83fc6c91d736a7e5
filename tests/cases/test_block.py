"""The case block: rows in any order and dress, and every refusal by the row's own label."""

import random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

WATER = [
    ["flow kind", "duct"],
    ["fluid", "water"],
    ["velocity", 2.0, "m/s"],
    ["diameter", 25.0, "mm"],
    ["length", 3.0, "m"],
    ["inlet temperature", 20.0, "degC"],
    ["wall temperature", 60.0, "degC"],
]


def replaced(label, *cells):
    return [[label, *cells] if row[0] == label else row for row in WATER]


def without(*names):
    return [row for row in WATER if row[0] not in names]


@pytest.mark.parametrize(
    "row",
    [
        ["Velocity", 2.0, "m/s"],
        ["U", 2.0, "m/s"],
        ["u", 2.0, "m/s"],
        ["mean velocity [m/s]", 2.0],
        ["Mean velocity (m/s)", 2.0, None],
        ["  VELOCITY : ", 2.0, "m/s"],
        ["mean_velocity", "2 m/s"],
        ["flow velocity =", "200", "cm/s"],
        ["velocity", "2 ± 0.1 m/s"],
        ["velocity", 2.0, "m/s", 0.1],
        ["velocity", 2.0, "m/s", "± 5 %"],
    ],
    ids=repr,
)
def test_one_velocity_in_many_dresses(cf, row):
    assert cf("CASE", [*without("velocity"), row], "velocity") == pytest.approx(2.0)


@pytest.mark.parametrize("label", ["Tube ID (mm)", "D [mm]", "Inside diameter, mm", "bore (mm)", "Di (mm)"])
def test_the_unit_in_the_label(cf, label):
    unit = None if "(" in label or "[" in label else "mm"
    label = label.replace(", mm", "")
    assert cf("CASE", [*without("diameter"), [label, 25.0, unit]], "diameter") == pytest.approx(0.025)


@settings(max_examples=20, deadline=None)
@given(st.integers(0, 10**6))
def test_any_order_with_blanks_headings_and_notes(cf, seed):
    rows = [
        *WATER,
        [None, None, None],
        ["Geometry", None, None],
        ["quantity", "value", "unit"],
        ["remark", "after the shutdown", None],
        ["velocity at night", None, None],
    ]
    random.Random(seed).shuffle(rows)
    assert cf("CASE", rows, "Reynolds number") == cf("CASE", WATER, "Reynolds number")


@pytest.mark.parametrize(
    ("rows", "parts"),
    [
        ([*WATER, ["velosity", 2.0, "m/s"]], ['"velosity"', "velocity"]),
        ([*WATER, ["colour of the tube", "red", None]], ['"colour of the tube"', "nearest"]),
        ([*WATER, ["mean velocity", 3.0, "m/s"]], ["rows 3", "8", "velocity"]),
        (without("length"), ['"length"', "missing"]),
        (without("velocity"), ['"velocity"', "volume flow", "mass flow", "missing"]),
        (without("diameter"), ['"diameter"', "missing"]),
        (without("wall temperature"), ['"wall temperature"', "heat flux"]),
        (without("inlet temperature"), ['"inlet temperature"', "missing"]),
        (without("flow kind"), ['"flow kind"', "duct, plate"]),
        (replaced("flow kind", "river"), ["river", "duct, plate"]),
        (replaced("fluid", "watr"), ['"fluid"', "water"]),
        (replaced("velocity", 2.0), ['"velocity"', "no unit", "m/s"]),
        (replaced("velocity", 2.0, "kg"), ['"velocity"', "kg"]),
        (replaced("velocity", 0.0, "m/s"), ['"velocity"', "zero"]),
        (replaced("velocity", -1.0, "m/s"), ['"velocity"', "negative"]),
        (replaced("length", -3.0, "m"), ['"length"']),
        (replaced("inlet temperature", -300.0, "degC"), ['"inlet temperature"', "absolute zero"]),
        (replaced("velocity", "fast", "m/s"), ['"velocity"', "fast"]),
        (replaced("velocity", {"kind": "Div"}, "m/s"), ['"velocity"', "error"]),
        (replaced("velocity", float("inf"), "m/s"), ['"velocity"']),
        (replaced("velocity", "2 m/s", "ft/s"), ['"velocity"', "m/s", "ft/s"]),
        ([*WATER, ["volume flow", 2.0, "m3/h"]], ["velocity", "volume flow", "one of"]),
        ([*WATER, [None, 2.0, "m/s"]], ["row 8", "no label"]),
        ([*WATER, ["hydraulic diameter", 20.0, "mm"]], ["diameter", "hydraulic diameter"]),
        ([*WATER, ["heat flux", 1.0, "kW/m2"]], ["wall temperature", "heat flux", "not both"]),
        ([*WATER, ["viscosity", 1e-6, "m2/s"]], ['"viscosity"', "kinematic"]),
        ([*WATER, ["answer", "peak temperature"]], ["answer", "outlet temperature"]),
        ([*WATER, ["answer", "wall temperature"]], ["answer", "prescribed"]),
        ([*WATER, ["Reynolds number", 5e4]], ['"Reynolds number"', "follows"]),
        ([*WATER, ["tolerance", 5.0]], ['"tolerance"', "5 %"]),
        ([["flow kind"], ["velocity"]], ["one column"]),
        ([[row[0], row[1]] for row in WATER], ['"velocity"', "no unit"]),
        ([[*row, None, None, None, "x"] for row in WATER], ["columns"]),
        (replaced("wall temperature", 20.0, "degC"), ["no driving difference"]),
        (replaced("wall temperature", 900.0, "degC"), ["liquid", "gas", "degC"]),
        ([], ["empty block"]),
        ([[None, None, None]] * 20, ["empty block"]),
        ([["x", 1.0, "m"]] * 100_000, ["1,000 filled rows"]),
        ("water", ["not a block"]),
    ],
)
def test_refusals_name_the_row(cf, rows, parts):
    answer = cf("TERMS", rows)
    assert isinstance(answer, str), answer
    assert answer.startswith("! block: ")
    assert len(answer) <= 255
    for part in parts:
        assert part in answer


def test_a_block_without_dimensions_needs_no_unit_column(cf):
    rows = [["flow kind", "duct"], ["fluid", "water"], ["answer", "duty"], ["tolerance", "5 %"]]
    assert '"length" is missing' in cf("TERMS", rows)  # read as a block; only rows are missing


def test_velocity_from_flow(cf):
    area = 3.141592653589793 * 0.025**2 / 4
    by_volume = [*without("velocity"), ["flow rate", 2.0 * area * 3600.0, "m3/h"]]
    assert cf("CASE", by_volume, "velocity") == pytest.approx(2.0, rel=1e-12)
    density = cf("CASE", WATER, "density")
    by_mass = [*without("velocity"), ["flow rate", 2.0 * area * density, "kg/s"]]
    assert cf("CASE", by_mass, "velocity") == pytest.approx(2.0, rel=1e-9)
    slot = [*without("velocity", "diameter"), ["gap", 5.0, "mm"], ["volume flow", 1.0, "L/s"]]
    assert "width" in cf("CASE", slot, "velocity")
    assert cf("CASE", [*slot, ["width", 100.0, "mm"]], "velocity") == pytest.approx(2.0)


def test_stated_properties_stand_before_those_of_the_substance(cf):
    assert cf("CASE", [*WATER, ["viscosity", 0.9, "mPa s"]], "viscosity") == pytest.approx(0.9e-3)
    assert cf("CASE", [*WATER, ["nu", 1.0, "mm2/s"]], "kinematic viscosity") == pytest.approx(1e-6)
    twice = [*WATER, ["viscosity", 0.9, "mPa s"], ["nu", 1.0, "mm2/s"]]
    assert "keep one" in cf("CASE", twice, "viscosity")


def test_gauge_pressure_stands_on_the_stated_atmosphere(cf):
    rows = [*WATER, ["pressure", 2.0, "barg"], ["atmosphere", 0.8, "bar"]]
    assert cf("CASE", rows, "pressure") == pytest.approx(2.8e5)
    assert cf("CASE", [*WATER, ["pressure", 2.0, "barg"]], "pressure") == pytest.approx(301325.0)


def test_the_symbol_with_two_meanings_is_settled_by_its_unit(cf):
    assert cf("CASE", [*WATER, ["h", 900.0, "W/m2K"]], "coefficient") == 900.0
    slot = [*without("diameter"), ["h", 5.0, "mm"]]
    assert cf("CASE", slot, "hydraulic diameter") == pytest.approx(0.01)


def test_case_answers_in_units_and_by_symbol(cf):
    kelvin = cf("CASE", WATER, "outlet temperature")
    assert cf("CASE", WATER, "Tout", "degC") == pytest.approx(kelvin - 273.15)
    assert cf("CASE", WATER, "Re") == cf("CASE", WATER, "Reynolds number")
    assert cf("CASE", WATER, "fluid") == "water"
    assert "neither stated" in cf("CASE", WATER, "peak temperature")
    assert "nearest" in cf("CASE", WATER, "outlet temprature")


def test_property_temperature_closes_on_the_mean_bulk(cf):
    inlet, outlet = cf("CASE", WATER, "inlet temperature"), cf("CASE", WATER, "outlet temperature")
    assert cf("CASE", WATER, "property temperature") == pytest.approx(0.5 * (inlet + outlet), abs=1e-6)
    fixed = [*WATER, ["property temperature", 30.0, "degC"]]
    assert cf("CASE", fixed, "property temperature") == pytest.approx(303.15)


def test_identities_of_a_case(cf):
    get = lambda what: cf("CASE", WATER, what)  # noqa: E731
    assert get("Péclet number") == pytest.approx(get("Re") * get("Pr"))
    assert get("Stanton number") == pytest.approx(get("Nu") / get("Pe"))
    assert get("Graetz number") == pytest.approx(get("Pe") * 0.025 / 3.0)
    assert get("duty") == pytest.approx(
        get("mass flow") * get("specific heat") * (get("outlet temperature") - get("inlet temperature"))
    )
    assert get("Re") == pytest.approx(
        cf("REYNOLDS", get("velocity"), get("diameter"), get("density"), get("viscosity"))
    )


@pytest.mark.parametrize("value", [1e300, 1e-300])
def test_a_number_beyond_anything_physical_is_refused(cf, value):
    answer = cf("TERMS", [["flow kind", "duct", ""], ["velocity", value, "m/s"]])
    assert answer.startswith('! block: "velocity"') and "beyond anything physical" in answer
