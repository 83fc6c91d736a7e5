"""The layouts in which people write quantities: each is read as the same numbers."""

import pytest

from cellfuncs.sheets.check import check_book

# velocity, inside diameter, density, viscosity and Reynolds number, as every layout below states them
WANTED = {"velocity": 2.0, "diameter": 0.025, "density": 998.0, "viscosity": 0.001, "reynolds": 49900.0}
RE = 49900.0

LABEL_VALUE_UNIT = {
    "A1": "Mean velocity", "B1": 2.0, "C1": "m/s", "A2": "Inside diameter", "B2": 25.0, "C2": "mm",
    "A3": "Density", "B3": 998.0, "C3": "kg/m³", "A4": "Dynamic viscosity", "B4": 1.0, "C4": "mPa·s",
    "A5": "Reynolds number", "B5": ("=B3*B1*B2/B4", RE), "C5": "-",
}  # fmt: skip
WITH_SYMBOLS = {
    "A1": "Quantity", "B1": "Symbol", "C1": "Value", "D1": "Unit", "E1": "Remark",
    "A2": "Mean velocity", "B2": "w", "C2": 2.0, "D2": "m/s", "E2": "from the pump curve, 3 pumps",
    "A3": "Inside diameter", "B3": "d", "C3": 25.0, "D3": "mm", "A4": "Density", "B4": "ρ", "C4": 998.0, "D4": "kg/m³",
    "A5": "Dynamic viscosity", "B5": "η", "C5": 1.0, "D5": "mPa s",
    "A6": "Reynolds number", "B6": "Re", "C6": ("=C4*C2*C3/C5", RE), "D6": "-",
}  # fmt: skip
SYMBOL_EQUALS = {
    "A1": "w =", "B1": 2.0, "C1": "m/s", "A2": "d =", "B2": 25.0, "C2": "mm", "A3": "rho =", "B3": 998.0, "C3": "kg/m3",
    "A4": "mu =", "B4": 1.0, "C4": "cP", "A5": "Re =", "B5": ("=B3*B1*B2/B4", RE),
}  # fmt: skip
UNIT_IN_LABEL = {
    "A1": "Velocity [m/s]", "B1": 2.0, "A2": "Tube ID (mm)", "B2": 25.0, "A3": "Density, kg/m3", "B3": 998.0,
    "A4": "Dynamic viscosity / mPa s", "B4": 1.0, "A5": "Re [-]", "B5": ("=B3*B1*B2/B4", RE),
}  # fmt: skip
UNIT_IN_CELL = {
    "A1": "Velocity", "B1": "2 m/s", "A2": "Tube ID", "B2": "25 mm", "A3": "Density", "B3": "998 kg/m³",
    "A4": "Viscosity: 1 mPa s", "A5": "Re = 49900",
}  # fmt: skip
UNIT_BEFORE_VALUE = {
    "A1": "Velocity", "B1": "m/s", "C1": 2.0, "A2": "Diameter", "B2": "mm", "C2": 25.0,
    "A3": "Density", "B3": "kg/m3", "C3": 998.0, "A4": "Viscosity", "B4": "mPa.s", "C4": 1.0,
    "A5": "Reynolds number", "B5": "-", "C5": ("=C3*C1*C2/C4", RE),
}  # fmt: skip
SIDE_BY_SIDE = {
    "A1": "Velocity", "B1": 2.0, "C1": "m/s", "A2": "Diameter", "B2": 25.0, "C2": "mm",
    "E1": "Density", "F1": 998.0, "G1": "kg/m³", "E2": "Viscosity", "F2": 1.0, "G2": "mPa·s",
    "E3": "Re", "F3": ("=F1*B1*B2/F2", RE), "G3": "-",
}  # fmt: skip
ONE_ROW = {
    "A1": "Velocity", "B1": "Tube ID", "C1": "ρ", "D1": "μ", "E1": "Re", "A2": "m/s", "B2": "mm", "C2": "kg/m³",
    "D2": "mPa s", "E2": "-", "A3": 2.0, "B3": 25.0, "C3": 998.0, "D3": 1.0, "E3": ("=C3*A3*B3/D3", RE),
}  # fmt: skip
WITH_GAPS = {
    "A3": "Velocity of the water", "D3": 2.0, "E3": "m/s", "A6": "Tube inside dia.", "D6": 25.0, "E6": "mm",
    "A7": "Note: taken from the data sheet of 2019", "A9": "Densitty", "D9": 998.0, "E9": "kg/m³",
    "A10": "Dyn. viscosity", "D10": 1.0, "E10": "mPa·s", "A12": "Reynolds no.", "D12": ("=D9*D3*D6/D10", RE),
}  # fmt: skip


@pytest.mark.parametrize(
    "cells",
    [LABEL_VALUE_UNIT, WITH_SYMBOLS, SYMBOL_EQUALS, UNIT_IN_LABEL, UNIT_IN_CELL, UNIT_BEFORE_VALUE, SIDE_BY_SIDE,
     ONE_ROW, WITH_GAPS],
    ids=["label value unit", "with symbols", "symbol equals", "unit in label", "unit in cell", "unit before value",
         "side by side", "one row", "gaps, remarks, typing errors"],
)  # fmt: skip
def test_a_layout_is_read(read, cells):
    reading = read(cells)
    (case,) = reading.cases
    assert {key: entries[0].si for key, entries in case.stated.items()} == pytest.approx(WANTED), reading.notes.notes


def test_units_in_number_formats(read):
    cells = {"A1": "Pressure drop", "B1": 0.25, "A2": "Duty", "B2": 12500.0, "A3": "Efficiency", "B3": 0.71}
    formats = {"B1": '0.00 "bar"', "B2": '0.0,"kW"', "B3": "0 %"}
    stated = read(cells, formats=formats).cases[0].stated
    assert stated["pressure_drop"][0].si == pytest.approx(25000.0)
    assert stated["duty"][0].si == pytest.approx(12500.0) and stated["duty"][0].value == pytest.approx(12.5)
    assert stated["pump_efficiency"][0].si == pytest.approx(0.71)
    assert stated["pump_efficiency"][0].rounding == pytest.approx(0.005)


def test_one_column_a_case(read):
    cells = {"A1": "Quantity", "B1": "Unit", "C1": "Summer", "D1": "Winter", "A2": "Velocity", "B2": "m/s", "C2": 1.0,
             "D2": 2.0, "A3": "Diameter", "B3": "mm", "C3": 25.0, "D3": 25.0, "A4": "Kinematic viscosity",
             "B4": "mm²/s", "C4": 1.0, "D4": 1.2}  # fmt: skip
    cases = read(cells).cases
    assert [case.name for case in cases] == ["Summer", "Winter"]
    assert [case.stated["velocity"][0].si for case in cases] == [1.0, 2.0]
    assert [case.stated["kinematic_viscosity"][0].cell for case in cases] == ["Sheet1!C4", "Sheet1!D4"]


def test_one_row_a_case_with_what_they_share(read):
    cells = {"A1": "Density", "B1": 998.0, "C1": "kg/m³", "A3": "Run", "B3": "Velocity [m/s]", "C3": "Tube ID (mm)"}
    for row in (4, 5, 6):
        cells |= {f"A{row}": f"run {row}", f"B{row}": float(row), f"C{row}": 25.0}
    cases = read(cells).cases
    assert [case.name for case in cases] == ["run 4", "run 5", "run 6"]
    assert all(case.stated["density"][0].cell == "Sheet1!B1" for case in cases)


def long_table(**more):
    """Three hundred rows of one formula."""
    cells = {"A1": "Velocity [m/s]", "B1": "Diameter [mm]", "C1": "Kinematic viscosity [mm²/s]", "D1": "Re [-]"}
    for row in range(2, 302):
        cells |= {f"A{row}": 2.0, f"B{row}": 25.0 + row, f"C{row}": 1.0}
        cells[f"D{row}"] = (f"=A{row}*B{row}/C{row}*1000", 2.0 * (25.0 + row) * 1000)
    return cells | more


def test_of_many_rows_with_the_same_formulas_some_are_recomputed_and_it_is_said(read):
    reading = read(long_table())
    assert 6 <= len(reading.cases) < 12
    assert any("more rows with the same formulas were not recomputed" in why for _, why in reading.notes.notes)


def test_a_row_that_differs_in_a_long_table_is_found(make_book):
    pasted = check_book(make_book(long_table(D150=123456.0)))
    assert [finding.cell for finding in pasted.findings] == ["Sheet1!D150"]
    other = check_book(make_book(long_table(D151=("=A151*B151*C151", 352.0))))
    assert [finding.cell for finding in other.findings] == ["Sheet1!D151"]


def test_value_in_two_units_is_one_case(read):
    cells = {"A1": "Velocity", "B1": 2.0, "C1": "m/s", "D1": ("=B1/0.3048", 6.562), "E1": "ft/s",
             "A2": "Diameter", "B2": 25.4, "C2": "mm", "D2": ("=B2/25.4", 1.0), "E2": "in"}  # fmt: skip
    (case,) = read(cells).cases
    assert [entry.unit for entry in case.stated["velocity"]] == ["m/s", "ft/s"]


def test_several_sheets_make_one_case_where_formulas_join_them(read):
    sheets = {
        "Input": {"A1": "Velocity (m/s)", "B1": 2.0, "A2": "Diameter (m)", "B2": 0.025},
        "My calc": {"A1": "Kinematic viscosity", "B1": 1e-6, "C1": "m²/s", "A2": "Re",
                    "B2": ("=Input!B1*Input!B2/B1", 5e4)},
    }  # fmt: skip
    reading = read(sheets=sheets)
    (case,) = reading.cases
    assert set(case.stated) == {"velocity", "diameter", "kinematic_viscosity", "reynolds"}
    assert reading.graph["My calc!B2"] == ("Input!B1", "Input!B2", "My calc!B1")


def test_two_calculations_on_one_sheet_stay_apart(read):
    pump = {"A1": "Pump 1", "A2": "Flow", "B2": 10.0, "C2": "m³/h", "A3": "Head", "B3": 20.0, "C3": "m",
            "A4": "Efficiency", "B4": 0.6, "C4": "-"}  # fmt: skip
    second = {"E1": "Pump 2", "E2": "Flow", "F2": 30.0, "G2": "m³/h", "E3": "Head", "F3": 15.0, "G3": "m",
              "E4": "Efficiency", "F4": 0.7, "G4": "-"}  # fmt: skip
    cases = read({**pump, **second}).cases
    assert [case.name for case in cases] == ["Pump 1", "Pump 2"]
    assert [case.stated["head"][0].si for case in cases] == [20.0, 15.0]


def test_hot_and_cold_stream_by_their_headings(read):
    cells = {"A1": "Hot side", "A2": "Inlet temperature", "B2": 90.0, "C2": "°C", "A3": "Mass flow", "B3": 2.0,
             "C3": "kg/s", "A5": "Cold side", "A6": "Inlet temperature", "B6": 20.0, "C6": "°C", "A7": "Mass flow",
             "B7": 3.0, "C7": "kg/s"}  # fmt: skip
    (case,) = read(cells).cases
    assert case.stated["hot_inlet_temperature"][0].value == 90.0
    assert case.stated["cold_mass_flow"][0].value == 3.0


def test_streams_that_do_not_say_which_is_hot(read):
    cells = {"A1": "Tube side", "E1": "Shell side"}
    rows = [("Inlet temperature", 20.0, 90.0, "°C"), ("Outlet temperature", 45.0, 60.0, "°C")]
    for row, (label, tube, shell, unit) in enumerate([*rows, ("Mass flow", 2.0, 1.7, "kg/s")], 2):
        cells |= {f"A{row}": label, f"B{row}": tube, f"C{row}": unit}
        cells |= {f"E{row}": label, f"F{row}": shell, f"G{row}": unit}
    cells |= {"A8": "LMTD", "B8": ("=((F2-B3)-(F3-B2))/LN((F2-B3)/(F3-B2))", 42.45), "C8": "K"}
    cases = {case.name: case for case in read(cells).cases}
    both = cases["Sheet1, both streams"].stated
    assert both["hot_inlet_temperature"][0].cell == "Sheet1!F2" and both["cold_mass_flow"][0].cell == "Sheet1!B4"
    assert both["log_mean_difference"][0].cell == "Sheet1!B8"


def test_facts_belong_to_their_calculation(read):
    cells = {}
    for number, substance in enumerate(("Water", "Air")):
        top = 1 + 10 * number
        cells |= {f"A{top}": f"Line {number + 1}", f"A{top + 1}": "Fluid", f"B{top + 1}": substance}
        for row, (label, unit) in enumerate((("Velocity", "m/s"), ("Inside diameter", "mm"), ("Density", "kg/m³")), 2):
            cells |= {f"A{top + row}": label, f"B{top + row}": 2.0 + number, f"C{top + row}": unit}
    cases = read(cells).cases
    assert [(case.name, case.facts["substance"]) for case in cases] == [("Line 1", "Water"), ("Line 2", "Air")]


def test_calculations_below_one_another_without_headings(read):
    cells = {}
    for number in range(3):
        top = 1 + 5 * number
        for row, (label, value, unit) in enumerate(
            (("Fluid", ("water", "air", "nitrogen")[number], None), ("Velocity", 1.0 + number, "m/s"),
             ("Diameter", 20.0, "mm"), ("Density", 998.0, "kg/m³"))
        ):  # fmt: skip
            cells |= {f"A{top + row}": label, f"B{top + row}": value} | ({f"C{top + row}": unit} if unit else {})
    cases = read(cells).cases
    assert [case.stated["velocity"][0].si for case in cases] == [1.0, 2.0, 3.0]
    assert [case.facts["substance"] for case in cases] == ["water", "air", "nitrogen"]


def test_blank_rows_within_one_calculation(read):
    cells = {"A1": "Velocity", "B1": 2.0, "C1": "m/s", "A4": "Diameter", "B4": 20.0, "C4": "mm", "A9": "Density",
             "B9": 998.0, "C9": "kg/m³"}  # fmt: skip
    (case,) = read(cells).cases
    assert set(case.stated) == {"velocity", "diameter", "density"}


def test_defined_names_are_labels_and_are_followed(read):
    cells = {"A1": (2.0), "B1": "m/s", "A2": 0.025, "B2": "m", "A3": 1e-6, "B3": "m²/s",
             "A4": ("=w_mean*d_i/nu", 50000.0)}  # fmt: skip
    names = [("velocity", "=Sheet1!$A$1"), ("w_mean", "=Sheet1!$A$1"), ("diameter", "=Sheet1!$A$2"),
             ("d_i", "=Sheet1!$A$2"), ("nu", "=Sheet1!$A$3"), ("Reynolds_number", "=Sheet1!$A$4")]  # fmt: skip
    reading = read(cells, names=names)
    assert reading.quantities["Sheet1!A4"].stated.key == "reynolds"
    assert reading.graph["Sheet1!A4"] == ("Sheet1!A1", "Sheet1!A2", "Sheet1!A3")


def test_merged_titles_and_labels(read):
    cells = {"D4": 2.0, "E4": "m/s", "D5": 25.0, "E5": "mm"}
    merges = [("A1:F2", "Cooling water in a tube"), ("A4:C4", "Velocity"), ("A5:C5", "Inside diameter")]
    reading = read(cells, merges=merges)
    (case,) = reading.cases
    assert set(case.stated) == {"velocity", "diameter"}
    assert case.flow == "duct" and case.facts["substance"] == "water"


def test_what_stays_open_is_told_and_not_guessed(read):
    cells = {"A1": "Widget count", "B1": 7.0, "A2": "Velocity", "B2": 2.0, "A3": "Density", "B3": 5.0, "C3": "m"}
    reading = read(cells)
    why = dict(reading.notes.notes)
    assert "label not known" in why["Sheet1!B1"]
    assert "without a unit" in why["Sheet1!B2"]
    assert "m is no unit of density" in why["Sheet1!B3"]
    assert not reading.cases


def test_units_settle_a_symbol_that_means_several_things(read):
    cells = {"A1": "U", "B1": 850.0, "C1": "W/m²K", "A2": "U", "B2": 2.0, "C2": "m/s", "A3": "Q", "B3": 5.0, "C3": "kW",
             "A4": "Q", "B4": 5.0, "C4": "m³/h", "A5": "h", "B5": 400.0, "C5": "W/m2K", "A6": "h", "B6": 3.0,
             "C6": "mm", "A7": "k", "B7": 0.6, "C7": "W/mK"}  # fmt: skip
    keys = {cell: q.stated.key for cell, q in read(cells).quantities.items()}
    assert keys == {
        "Sheet1!B1": "overall_coefficient", "Sheet1!B2": "velocity", "Sheet1!B3": "duty", "Sheet1!B4": "volume_flow",
        "Sheet1!B5": "coefficient", "Sheet1!B6": "gap", "Sheet1!B7": "conductivity",
    }  # fmt: skip


@pytest.mark.parametrize(
    ("label", "unit", "key"),
    [
        ("Viscosity", "cSt", "kinematic_viscosity"), ("Viscosity", "cP", "viscosity"),
        ("Heat loss", "W/m", "heat_per_length"), ("Heat loss", "kW", "duty"),
        ("Heat loss", "W/m²", "heat_flux"), ("Pressure drop", "m", "head"),
        ("Pressure drop", "Pa/m", "pressure_gradient"), ("Pressure drop", "psi", "pressure_drop"),
        ("Thermal resistance", "m²K/W", "total_insulance"), ("Thermal resistance", "K/W", "total_resistance"),
        ("Pressure", "barg", "pressure"), ("Flow rate", "gpm", "volume_flow"), ("Flow rate", "lb/h", "mass_flow"),
    ],
)  # fmt: skip
def test_the_unit_tells_which_of_several_is_meant(read, label, unit, key):
    assert read({"A1": label, "B1": 2.0, "C1": unit}).quantities["Sheet1!B1"].stated.key == key


def test_neighbours_settle_what_the_unit_leaves_open(read):
    beside = {"A1": "NTU", "B1": 1.5, "C1": "-", "A2": "Minimum capacity rate", "B2": 4.0, "C2": "kW/K",
              "A3": "Largest possible duty", "B3": 200.0, "C3": "kW", "A4": "Duty", "B4": 140.0,
              "C4": "kW"}  # fmt: skip
    keys = {c: q.stated.key for c, q in read({**beside, "A5": "ε", "B5": 0.7, "C5": "-"}).quantities.items()}
    assert keys["Sheet1!B5"] == "effectiveness"


@pytest.mark.parametrize(
    ("text", "fact", "value"),
    [
        ("Counter-flow exchanger", "arrangement", "countercurrent"),
        ("Viscous heating is neglected.", "neglects", ["viscous heating"]),
        ("Axial conduction and radiation ignored", "neglects", ["conduction along", "wall radiation"]),
        ("Nu after Gnielinski", "method", ("Gnielinski",)),
        ("Laminar flow", "regime", "laminar"),
        ("Fluid: ethylene glycol 30 % by mass", "substance", "ethylene glycol 30 % by mass"),
        ("Air flow over a flat plate", "flow", "plate"),
        ("Water, fluid is heated", "heating", "heating"),
    ],
)
def test_texts_count(read, text, fact, value):
    case = read({"A1": text, "A2": "Velocity", "B2": 2.0, "C2": "m/s"}).cases[0]
    found = case.flow if fact == "flow" else case.facts[fact]
    assert found == value
    assert case.fact_cells.get(fact, "Sheet1!A1") == "Sheet1!A1"


@pytest.mark.parametrize(
    "text",
    ["Viscous heating cannot be neglected", "Viscous heating is not neglected", "Where viscous heating may be left out",
     "Is viscous heating negligible?", "viscous heating: included"],
)  # fmt: skip
def test_not_neglected_is_not_neglected(read, text):
    case = read({"A1": text, "A2": "Velocity", "B2": 2.0, "C2": "m/s"}).cases[0]
    assert "neglects" not in case.facts
