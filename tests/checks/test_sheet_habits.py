"""What sheets of practice do that is no mistake: limits beside results, factors left out, shapes told in words."""

import pytest

from cellfuncs.checks import SheetCase, Stated
from cellfuncs.checks.judge import judge
from cellfuncs.checks.references import References


def entry(key, kind, si, cell, label, refs=(), unit=""):
    return Stated(key, kind, si, unit, si, 0.0, cell, label, "=..." if refs else None, tuple(refs))


def judged(*entries, **rest):
    case = SheetCase("case", **rest)
    for one in entries:
        case.add(one)
    return judge([case], {e.cell: e.refs for e in entries if e.refs})


PIPE = (
    entry("volume_flow", "volume_flow", 7e-3, "S!B1", "Flow"),
    entry("flow_area", "area", 5e-3, "S!B2", "Area"),
    entry("velocity", "velocity", 1.4, "S!B4", "Velocity", ("S!B1", "S!B2")),
)


@pytest.mark.parametrize("label", ["Max. velocity", "Allowable velocity", "velocity limit", "Recommended velocity"])
def test_a_limit_beside_a_result_is_no_finding(label):
    findings, agreed = judged(*PIPE, entry("velocity", "velocity", 2.5, "S!B3", label))
    assert findings == [] and ("S!B4", "velocity") in agreed


def test_a_quantity_that_is_called_a_maximum_is_judged():
    rates = (
        entry("smallest_capacity_rate", "thermal_conductance", 2000.0, "S!B1", "Minimum capacity rate"),
        entry("hot_inlet_temperature", "temperature", 400.0, "S!B2", "Hot inlet temperature"),
        entry("cold_inlet_temperature", "temperature", 300.0, "S!B3", "Cold inlet temperature"),
    )
    refs = ("S!B1", "S!B2", "S!B3")
    (finding,), _ = judged(*rates, entry("largest_duty", "power", 9e5, "S!B4", "Maximum duty", refs))
    assert finding.cell == "S!B4" and finding.recomputed == pytest.approx(2e5)


def nusselt(value, **facts):
    return judged(
        entry("reynolds", "dimensionless", 43349.2, "S!B1", "Re"),
        entry("prandtl", "dimensionless", 3.5513, "S!B2", "Pr"),
        entry("friction_factor", "dimensionless", 0.021659, "S!B3", "f"),
        entry("diameter", "length", 0.016, "S!B5", "Tube ID"),
        entry("length", "length", 3.0, "S!B6", "Tube length"),
        entry("nusselt", "dimensionless", value, "S!B4", "Nu", ("S!B1", "S!B2", "S!B3")),
        flow="duct",
        facts={"method": "Gnielinski", **facts},
    )[0]


def test_a_method_without_its_entrance_factor_is_the_method():
    assert nusselt(216.89) == []
    assert nusselt(223.51) == []
    assert [f.cell for f in nusselt(190.0)] == ["S!B4"]


def test_a_cell_that_nobody_read_takes_the_blame():
    """A factor from a cell without a known label explains a difference: no finding says more than a note."""
    findings, _ = judged(
        *PIPE[:2], entry("velocity", "velocity", 0.7, "S!B4", "Velocity", ("S!B1", "S!B2", "S!B9"))
    )
    assert all(finding.severity == "note" for finding in findings)


def test_a_pasted_number_is_known_by_its_neighbours():
    numbers = [
        entry("velocity", "velocity", 1.0, "S!C4", "w", ("S!C1",)),
        entry("velocity", "velocity", 1.2, "S!D4", "w"),
        entry("diameter", "length", 0.1, "S!C1", "D"),
        entry("diameter", "length", 0.1, "S!D1", "D"),
    ]
    case = SheetCase("case")
    for number in numbers:
        case.add(number)
    references = References([case], {"S!C4": ("S!C1",)})
    assert references.pasted("S!D4") == 1.0
    assert references.pasted("S!D1") == 0.0 and references.pasted("S!C4") == 0.0
