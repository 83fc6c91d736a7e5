"""The table of groups: values by definition and as CF_CASE gives them, words by the limits of the premises."""

import pytest

from cellfuncs import groups
from cellfuncs.cases import labels
from cellfuncs.terms.determined import _HERE, COLUMNS
from cellfuncs.terms.thresholds import threshold


def table(cf, block):
    rows = cf("GROUPS", block)
    assert isinstance(rows, list), rows
    assert tuple(rows[0]) == COLUMNS
    return {row[0]: dict(zip(COLUMNS, row, strict=True)) for row in rows[1:]}


def test_values_are_those_of_the_case(cf, stated_duct, stated_plate, stated_gap):
    known = {entry.label for entry in labels.dictionary().values() if entry.role == "derived"}
    for block in (stated_duct(), stated_plate(), stated_gap()):
        rows = table(cf, block)
        compared = [name for name in rows if name in known]
        assert {"Reynolds number", "Prandtl number", "Péclet number", "Brinkman number"} <= set(compared)
        for name in compared:
            single = cf("CASE", block, name)
            if isinstance(single, float):
                assert rows[name]["value"] == pytest.approx(single, rel=1e-12), name


def test_names_symbols_and_words_are_those_of_the_groups(cf, stated_duct):
    by_name = {group.name: group for group in groups.table().values()}
    for name, row in table(cf, stated_duct()).items():
        assert row["symbol"] == by_name[name].symbol
        assert row["compares"] == by_name[name].compares
        assert 0 < len(row["here"]) <= 255


def test_every_group_with_words_exists():
    assert set(_HERE) <= set(groups.table())


def test_a_group_needs_its_quantities(cf, stated_duct, stated_plate):
    plain = table(cf, stated_duct())
    assert not {"Mach number", "Knudsen number", "Fourier number", "Biot number", "Rossby number"} & set(plain)
    more = {
        "time scale": (50.0, "s"),
        "wall thickness": (2.0, "mm"),
        "wall conductivity": (16.0, "W/mK"),
        "angular velocity": (3.0, "rad/s"),
        "surface tension": (0.07, "N/m"),
    }
    rows = table(cf, stated_duct(**more))
    assert {"Fourier number", "Strouhal number", "Biot number", "Rossby number", "Weber number"} <= set(rows)
    assert rows["Biot number"]["value"] == pytest.approx(cf("CASE", stated_duct(**more), "coefficient") * 0.002 / 16.0)
    assert "Graetz number" not in table(cf, stated_plate())


def test_words_follow_the_limits_of_the_premises(cf):
    """One source: at the Mach number where the premise is strained, the words change."""
    limit = threshold("density change by velocity").strained
    said = {_HERE["mach"](value, None) for value in (0.99 * limit, 1.01 * limit, 2.1 * limit)}
    assert len(said) == 3


def test_gas_in_a_duct_has_its_mach_and_knudsen_numbers(cf):
    block = [
        ["flow kind", "duct"],
        ["substance", "air"],
        ["diameter", 10.0, "mm"],
        ["length", 2.0, "m"],
        ["velocity", 60.0, "m/s"],
        ["inlet temperature", 20.0, "degC"],
        ["wall temperature", 60.0, "degC"],
    ]
    rows = table(cf, block)
    assert rows["Mach number"]["here"].startswith("as incompressible")
    assert rows["Knudsen number"]["value"] < 1e-5
    assert rows["Rayleigh number"]["here"].startswith("forced flow rules")
