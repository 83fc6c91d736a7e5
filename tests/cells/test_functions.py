"""Cell functions that no outside source speaks about: lists, faults, tables against their cells."""

import pytest

from cellfuncs import __version__, groups, substances
from cellfuncs.cases import labels
from cellfuncs.terms import MEASURES, MOMENTUM_TERMS, TERMS


def test_faults_counts_and_names_the_first(cf):
    assert cf("FAULTS", [[1.0, "water"], [None, "fine!"]]) == 0.0
    answer = cf("FAULTS", [[1.0, "! velocity: empty"], ["! length: empty", {"kind": "Div"}]])
    assert answer == "3 faults, first: velocity: empty"


@pytest.mark.parametrize(
    "what", ["labels", "units", "kinds", "terms", "measures", "answers", "flow kinds", "properties", "groups"]
)
def test_lists_are_columns_of_texts(cf, what):
    column = cf("LIST", what)
    assert len(column) > 2
    assert all(len(row) == 1 and isinstance(row[0], str) and row[0] for row in column)


def test_lists_hold_what_may_be_typed(cf):
    assert [row[0] for row in cf("LIST", "terms", "energy")] == list(TERMS)
    assert [row[0] for row in cf("LIST", "terms", "momentum")] == list(MOMENTUM_TERMS)
    assert [row[0] for row in cf("LIST", "terms")] == list(dict.fromkeys((*TERMS, *MOMENTUM_TERMS)))
    assert cf("LIST", "terms", "entropy").startswith("! of: ")
    assert [row[0] for row in cf("LIST", "measures")] == list(MEASURES)
    for (name,) in cf("LIST", "labels", "duct"):
        assert labels.candidates(name)
    for (unit,) in cf("LIST", "units", "pressure absolute"):
        assert cf("UNIT_FITS", unit, "pressure absolute") == 1.0
    assert cf("LIST", "lables").startswith("! what: ")


def test_unit_fits(cf):
    assert cf("UNIT_FITS", "W/m2K", "heat transfer coefficient") == 1.0
    assert cf("UNIT_FITS", "kg/s", "heat transfer coefficient") == 0.0
    assert cf("UNIT_FITS", "kg/s", "warmth").startswith("! ")


def test_version(cf):
    assert cf("VERSION") == __version__


def test_properties_table_agrees_with_its_cells(cf):
    rows = cf("PROPERTIES", "water", "40 degC", "2 bar")
    assert rows[0] == ["property", "value", "unit", "source"]
    assert [row[0] for row in rows[1:]] == [*(p.words for p in substances.PROPERTIES.values()), "phase"]
    assert rows[-1][1] == "liquid" and "degC" in rows[-1][3]
    for name, value, unit, source in rows[1:-1]:
        assert source
        if value != "not available":
            single = cf("PROPERTY", "water", name, "40 degC", "2 bar", unit if unit not in ("", "1") else None)
            assert single == pytest.approx(value, rel=1e-12)


def test_substances_are_found(cf):
    rows = cf("SUBSTANCES", "glycol")
    assert rows[0] == ["substance", "family", "other names"]
    assert any("ethylene glycol" in row[0].casefold() for row in rows[1:])
    assert cf("PROPERTY", "watr", "density", 300.0).startswith("! substance: ") or "water" in cf(
        "PROPERTY", "watr", "density", 300.0
    )


def test_block_and_vary(cf, stated_duct):
    rows = stated_duct()
    plain = [row + [""] * (4 - len(row)) for row in rows]
    names, values, units = ([[row[k]] for row in plain] for k in range(3))
    assert cf("TERM", cf("BLOCK", names, values, units), "viscous heating") == cf("TERM", rows, "viscous heating")
    faster = cf("VARY", rows, "U", 3.0)
    assert cf("CASE", faster, "velocity") == 3.0
    assert cf("CASE", cf("VARY", rows, "mean velocity", 300.0, "cm/s"), "velocity") == pytest.approx(3.0)
    assert cf("CASE", cf("VARY", rows, "velocity", "3 m/s"), "velocity") == 3.0
    added = cf("VARY", rows, "tolerance", 2.0, "%")
    assert cf("CASE", added, "tolerance") == pytest.approx(0.02)
    assert cf("VARY", rows, "velosity", 3.0).startswith('! label: "velosity" is not known')
    assert "equally long" in cf("BLOCK", names, values[:-1], units)


def test_every_group_says_what_it_compares():
    for group in groups.table().values():
        assert group.compares and group.decides and group.source and group.symbol


@pytest.mark.parametrize(
    ("name", "arguments", "blamed"),
    [
        ("PROPERTY", ("water", "colour", 300.0), "what"),
        ("PROPERTY", ("watr", "density", 300.0), "substance"),
        ("PROPERTY", ("water", "density", "3000 K"), "temperature"),
        ("PROPERTY", ("water", "density", 300.0, "20 GPa"), "pressure"),
        ("PROPERTY", ("water", "density", 300.0, 1.01), "pressure"),
        ("PROPERTY", ("1-butene", "viscosity", 300.0), "what"),
        ("MOIST_AIR", ("dew point", 300.0, 60.0), "relative humidity"),
        ("MOIST_AIR", ("dew", 300.0, 0.6), "what"),
        ("SATURATION", ("water", "density", "liquid", "700 K"), "temperature"),
        ("SATURATION", ("water", "density", "solid", "300 K"), "phase"),
        ("CASE", ([["flow kind", "gap"], ["fluid", "water"]], "Re"), "block"),
    ],
)
def test_a_fault_names_the_argument_to_blame(cf, name, arguments, blamed):
    assert cf(name, *arguments).startswith(f"! {blamed}: ")
