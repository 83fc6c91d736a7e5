"""Our own functions in a sheet that is checked."""

import pytest

from cellfuncs.sheets.check import check_book

INPUT = {"A1": "Velocity", "B1": 2.0, "C1": "m/s", "A2": "Diameter", "B2": 25.0, "C2": "mm", "A3": "Density",
         "B3": 998.0, "C3": "kg/m³", "A4": "Dynamic viscosity", "B4": 1.0, "C4": "mPa·s"}  # fmt: skip
RIGHT = "=CF_REYNOLDS(B1,CF_SI(B2,C2),B3,B4:C4)"


def found(data):
    return [(f.cell, f.code) for f in check_book(data).findings]


def test_right_use_is_no_finding(make_book):
    assert not found(make_book(INPUT | {"A6": "Re", "B6": (RIGHT, 49900.0)}))


@pytest.mark.parametrize("name", ["CF_REYNOLDS", "cf_reynolds", "_xlfn.CF_REYNOLDS", "[1]!CF_REYNOLDS"])
def test_a_bare_number_beside_another_unit_is_one(make_book, name):
    cells = INPUT | {"A6": "Result", "B6": (f"={name}(B1,B2,B3,B4:C4)", 49900000.0)}
    assert found(make_book(cells)) == [("Sheet1!B6", "unit-factor")]


def test_a_bare_temperature_in_celsius(make_book):
    cells = {"A1": "Temperature", "B1": 250.0, "C1": "°C", "B3": ('=CF_PROPERTY("air","density",B1)', 1.4)}
    (finding,) = check_book(make_book(cells)).findings
    assert finding.cell == "Sheet1!B3" and "°C" in finding.message


FAULT = '! velocity: "12 fps2" is not a speed; write for instance 12 ft/s'


@pytest.mark.parametrize("formula", ["=SUM(B1:B3)", "=MAX(B1,B2)", "=IF(B2>5,1,0)", "=AVERAGE(B1:B3)", "=B2<7"])
def test_a_result_over_a_fault_is_one(make_book, formula):
    cells = {"B1": 1.0, "B2": ("=CF_REYNOLDS(1,2,3,4)", FAULT), "B3": 2.0, "B5": (formula, 3.0)}
    (finding,) = check_book(make_book(cells)).findings
    assert finding.cell == "Sheet1!B5" and "Sheet1!B2" in finding.cause


@pytest.mark.parametrize(
    ("formula", "stored"),
    [("=IF(CF_FAULTS(B1:B3)=0,SUM(B1:B3),0)", 0.0), ("=B2", FAULT), ("=CF_FAULTS(B1:B3)", 1.0), ("=SUM(B1,B3)", 3.0)],
)
def test_guarded_totals_are_fine(make_book, formula, stored):
    cells = {"B1": 1.0, "B2": ("=CF_REYNOLDS(1,2,3,4)", FAULT), "B3": 2.0, "B5": (formula, stored)}
    assert not found(make_book(cells))
