"""Where a fault starts, what agrees, and which cause is named. Numbers are computed here from first principles."""

import math

import pytest

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.checks import SheetCase, Stated
from cellfuncs.checks.judge import judge

DIAMETER, FLOW = 0.05, 3e-3
AREA = math.pi / 4.0 * DIAMETER**2


def sheet(rows, **rest):
    """A case from rows of key, value, unit, keys that the formula uses; cells are B1, B2 …"""
    case, graph = SheetCase("case", **rest), {}
    cells = {row[0]: f"Sheet1!B{k}" for k, row in enumerate(rows, start=1)}
    for key, value, unit, refs in rows:
        kind = labels.dictionary()[key].kind
        understood = quantities.read_unit(unit, kind) if unit else None
        si = value * understood.factor + understood.offset if understood else value
        used = tuple(cells[ref] for ref in refs)
        formula = "=..." if refs else None
        case.add(Stated(key, kind, value, unit, si, 0.0, cells[key], key.replace("_", " "), formula, used))
        if used:
            graph[cells[key]] = used
    return case, graph, cells


def pipe(**changed):
    """Water in a pipe; ``changed`` numbers go on into what rests on them, as they do in a sheet."""
    area = changed.get("flow_area", AREA)
    velocity = changed.get("velocity", FLOW / area)
    density, viscosity = changed.get("density", 998.2), changed.get("viscosity", 1.002)
    reynolds = changed.get("reynolds", density * velocity * DIAMETER / (viscosity * 1e-3))
    return [
        ("diameter", 50.0, "mm", ()),
        ("volume_flow", 10.8, "m3/h", ()),
        ("density", density, "kg/m3", ()),
        ("viscosity", viscosity, "mPa.s", ()),
        ("property_temperature", 20.0, "degC", ()),
        ("flow_area", area, "m2", ("diameter",)),
        ("velocity", velocity, "m/s", ("volume_flow", "flow_area")),
        ("reynolds", reynolds, "", ("density", "velocity", "diameter", "viscosity")),
    ]


WATER = {"flow": "duct", "facts": {"substance": "water"}}


def test_a_right_sheet_is_clean_and_its_results_are_named():
    case, graph, cells = sheet(pipe(), **WATER)
    findings, agreed = judge([case], graph)
    assert findings == []
    judged = ("flow_area", "velocity", "reynolds", "density", "viscosity")
    assert {cells[key] for key in judged} == {cell for cell, _ in agreed}


@pytest.mark.parametrize(
    ("key", "value", "code"),
    [
        ("flow_area", 4 * AREA, "radius-for-diameter"),
        ("flow_area", AREA / 4, "radius-for-diameter"),
        ("flow_area", DIAMETER**2, "area-factor"),
        ("velocity", FLOW / AREA * 60, "unit-factor"),
        ("velocity", FLOW / AREA * 1.37, "unknown"),
        ("density", 898.2, "unknown"),
        ("density", 99.82, "typing-slip"),
        ("viscosity", 0.3543, "property-temperature"),
        ("viscosity", 1.004, None),
        ("reynolds", 998.2 * FLOW / AREA * DIAMETER / 1.0038e-6, "kinematic-for-dynamic"),
    ],
)
def test_the_cause_is_named_at_the_cell_where_it_starts(key, value, code):
    rows = pipe(**{key: value})
    if key == "viscosity" and code:
        rows.append(("wall_temperature", 80.0, "degC", ()))
    case, graph, cells = sheet(rows, **WATER)
    findings, _ = judge([case], graph)
    if code is None:
        assert findings == []
        return
    found = [f for f in findings if f.severity != "note"]
    assert [(f.cell, f.code) for f in found] == [(cells[key], code)], found


def test_what_rests_on_a_wrong_cell_is_listed_under_it():
    case, graph, cells = sheet(pipe(flow_area=4 * AREA), **WATER)
    (finding,), _ = judge([case], graph)
    assert finding.inherited == (cells["velocity"], cells["reynolds"])
    assert finding.recomputed == pytest.approx(AREA)


def test_a_number_pasted_among_formulas_is_hard_coded():
    rows = pipe()
    rows[6] = ("velocity", 1.31, "m/s", ())
    case, graph, cells = sheet(rows, **WATER)
    (finding,), _ = judge([case], graph)
    assert (finding.cell, finding.code) == (cells["velocity"], "hard-coded")


def test_an_assumed_coefficient_is_no_finding():
    case, graph, _ = sheet([*pipe(), ("coefficient", 900.0, "W/m2K", ()), ("friction_factor", 0.025, "", ())], **WATER)
    assert judge([case], graph)[0] == []


def exchanger(mean):
    hot, cold = (120.0, 80.0), (20.0, 60.0)
    return [
        ("hot_inlet_temperature", hot[0], "degC", ()),
        ("hot_outlet_temperature", hot[1], "degC", ()),
        ("cold_inlet_temperature", cold[0], "degC", ()),
        ("cold_outlet_temperature", cold[1], "degC", ()),
        ("log_mean_difference", mean, "K",
         ("hot_inlet_temperature", "hot_outlet_temperature", "cold_inlet_temperature", "cold_outlet_temperature")),
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("arrangement", "mean", "code"),
    [
        ("countercurrent", 60.0, None),
        ("cocurrent", 80.0 / math.log(5.0), None),
        ("cocurrent", 60.0, "mean-difference"),
        ("countercurrent", 80.0 / math.log(5.0), "mean-difference"),
        ("cocurrent", 80.0 / math.log10(5.0), "log-base"),
    ],
)
def test_mean_differences(arrangement, mean, code):
    case, graph, _ = sheet(exchanger(mean), facts={"arrangement": arrangement})
    findings, _ = judge([case], graph)
    assert [f.code for f in findings] == ([code] if code else [])


def test_a_neglected_effect_that_counts_is_told_where_it_is_said():
    rows = [
        ("velocity", 30.0, "m/s", ()),
        ("gap", 0.1, "mm", ()),
        ("viscosity", 50.0, "mPa.s", ()),
        ("density", 870.0, "kg/m3", ()),
        ("conductivity", 0.14, "W/mK", ()),
        ("specific_heat", 1.95, "kJ/kgK", ()),
        ("wall_temperature", 45.0, "degC", ()),
        ("second_wall_temperature", 65.0, "degC", ()),
        ("area", 0.02, "m2", ()),
    ]
    case, graph, _ = sheet(rows, flow="gap", facts={"neglects": ["viscous heating", "conduction along"]},
                           fact_cells={"neglects viscous heating": "Sheet1!A20"})  # fmt: skip
    (finding,), _ = judge([case], graph)
    assert (finding.code, finding.cell, finding.quantity) == ("dropped-term", "Sheet1!A20", "viscous heating")
    case.facts["neglects"] = ["conduction along"]
    assert judge([case], graph)[0] == []


def test_nothing_stated_says_nothing():
    assert judge([SheetCase("empty")], {}) == ([], [])
