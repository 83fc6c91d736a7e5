"""Tables of the user's own: interpolated between their rows, refused outside, asked about where they are none."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError, NoModel, NumberRefused, OutOfRange, UnknownName
from cellfuncs.substances import find, from_table

T = [293.15, 313.15, 333.15]
COLUMNS = {
    "density": [998.0, 992.0, 983.0],
    "mu": [1.0e-3, 0.65e-3, 0.47e-3],
    "k": [0.60, None, 0.65],
    "cp": [4180.0, 4180.0, 4184.0],
}


def test_rows_come_out_and_derived_properties_follow():
    table = from_table(T, COLUMNS)
    for temperature, density, viscosity in zip(T, COLUMNS["density"], COLUMNS["mu"], strict=True):
        assert table.get("rho", temperature) == pytest.approx(density, rel=1e-13)
        assert table.get("viscosity", temperature, 3e7, "liquid") == pytest.approx(viscosity, rel=1e-13)
    assert table.get("k", 313.15) == pytest.approx(0.625)
    assert table.get("nu", 313.15) == pytest.approx(0.65e-3 / 992)
    assert table.get("Pr", 293.15) == pytest.approx(1e-3 * 4180 / 0.6)
    assert table.get("beta", 313.15) == pytest.approx(7.2 / 20 / 992, rel=0.01)  # harmonic mean of both slopes
    assert table.source("Pr") == "own-table" and table.family == "own table"
    assert table.phase(300.0) == "as tabled"
    assert table.get_many(("rho", "mu"), T).shape == (2, 3)


def test_falling_temperatures_and_kinematic_viscosity():
    turned = from_table(T[::-1], {key: values[::-1] for key, values in COLUMNS.items()})
    assert turned.get("mu", 300.0) == from_table(T, COLUMNS).get("mu", 300.0)
    kinematic = from_table(T, {"rho": [900.0, 890.0, 880.0], "nu": [5e-5, 3e-5, 2e-5]})
    assert kinematic.get("viscosity", 313.15) == pytest.approx(890 * 3e-5)


def test_never_outside():
    table = from_table(T, COLUMNS)
    for temperature in (293.0, 334.0):
        with pytest.raises(OutOfRange, match="outside the range of the density of the table"):
            table.get("density", temperature)
    short = from_table(T, {"rho": COLUMNS["density"], "k": [None, 0.6, 0.65]})
    with pytest.raises(OutOfRange, match="thermal conductivity"):
        short.get("k", 300.0)
    with pytest.raises(NoModel, match="no column"):
        table.get("surface tension", 300.0)
    with pytest.raises(NoModel, match="no column"):
        short.get("Pr", 320.0)


@pytest.mark.parametrize(
    ("temperatures", "columns", "error", "words"),
    [
        ([300.0], {"rho": [1.0]}, NumberRefused, "two rows"),
        ([300.0, 310.0], {}, NumberRefused, "a column"),
        ([300.0, 310.0, 305.0], {"rho": [1.0, 2.0, 3.0]}, OutOfRange, "rise or fall"),
        ([300.0, 300.0], {"rho": [1.0, 2.0]}, OutOfRange, "rise or fall"),
        ([300.0, -1.0], {"rho": [1.0, 2.0]}, OutOfRange, "absolute zero"),
        ([300.0, 310.0], {"rho": [1.0, None]}, NumberRefused, "two values"),
        ([300.0, 310.0], {"rho": [1.0]}, NumberRefused, "as long as"),
        ([300.0, 310.0], {"rho": [1.0, 0.0]}, OutOfRange, "not above zero"),
        ([300.0, 310.0], {"rho": [1.0, float("inf")]}, OutOfRange, "not above zero"),
        ([300.0, 310.0], {"rho": [1.0, 2.0], "density": [1.0, 2.0]}, NumberRefused, "twice"),
        ([300.0, 310.0], {"colour": [1.0, 2.0]}, UnknownName, "no property"),
    ],
)
def test_what_is_no_table(temperatures, columns, error, words):
    with pytest.raises(error, match=words):
        from_table(temperatures, columns)


@given(st.lists(st.tuples(st.floats(1, 60), st.floats(1e-9, 1e6)), min_size=2, max_size=9))
def test_values_stay_between_their_neighbours(rows):
    temperatures, total = [], 250.0
    for step, _ in rows:
        total += step
        temperatures.append(total)
    values = [value for _, value in rows]
    table = from_table(temperatures, {"viscosity": values, "density": values})
    for k in range(len(rows) - 1):
        low, high = sorted(values[k : k + 2])
        middle = (temperatures[k] + temperatures[k + 1]) / 2
        for key in ("viscosity", "density"):
            assert low * (1 - 1e-9) <= table.get(key, middle) <= high * (1 + 1e-9)


def test_a_dense_table_of_water_gives_water_back():
    """Against the equation of IAPWS: rows 10 K apart, error of the interpolation below one in a thousand."""
    water = find("water")
    rows = [280.0 + 10.0 * k for k in range(9)]
    table = from_table(rows, {key: [water.get(key, t) for t in rows] for key in ("density", "viscosity", "k", "cp")})
    for temperature in (283.0, 305.5, 327.0, 351.0):
        for key, tolerance in (("density", 1e-4), ("viscosity", 2e-3), ("k", 1e-3), ("cp", 1e-3), ("Pr", 3e-3)):
            assert table.get(key, temperature) == pytest.approx(water.get(key, temperature), rel=tolerance), key


@given(st.lists(st.floats(allow_nan=True), min_size=0, max_size=5), st.lists(st.floats(), min_size=0, max_size=5))
def test_any_numbers_are_read_or_refused(temperatures, values):
    try:
        assert from_table(temperatures, {"density": values}).get("density", temperatures[0]) > 0
    except CellfuncsError as error:
        assert 0 < len(str(error)) < 230
