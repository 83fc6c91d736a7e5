"""Solids: every row is whole, inside its range, refused outside, and never has the properties of a fluid."""

import iapws
import pytest
from iapws._iapws import _Ice

from cellfuncs.errors import NoModel, OutOfRange, UnknownName
from cellfuncs.sources import bibliography, read_table
from cellfuncs.substances import PROPERTIES, find
from cellfuncs.substances.solids import OF_SOLIDS, SURFACES, solid_rows, surfaces_of

ROWS = read_table("solid_properties.csv")
# what no solid at ordinary temperatures exceeds: diamond and osmium aside
PLAUSIBLE = {
    "density": (15, 22_000),
    "conductivity": (0.015, 900),
    "specific_heat": (80, 4_000),
    "emissivity": (0.01, 1.0),
}


def test_there_are_enough_of_each_group():
    groups = [row["group"] for row in solid_rows().values()]
    assert len(groups) >= 60
    for group in ("metal", "alloy", "plastic", "insulation", "building", "ceramic"):
        assert groups.count(group) >= 5


def test_every_row_belongs_to_a_solid_and_says_where_it_is_from():
    assert {row["solid"] for row in ROWS} == set(solid_rows())
    keys = [(row["solid"], row["property"], row["surface"]) for row in ROWS]
    assert len(set(keys)) == len(keys)
    for row in ROWS:
        assert "from memory" in row["place"] and set(row["source"].split(";")) <= set(bibliography())
        assert row["property"] in PLAUSIBLE
        assert row["surface"] == "" or (row["surface"] in SURFACES and row["property"] == "emissivity")
        assert len(row["points"].split(";")) == len(row["values"].split(";")) or row["form"] != "table"


@pytest.mark.parametrize("name", solid_rows())
def test_values_inside_and_refusals_outside(name):
    for surface in ("", *surfaces_of(name)):
        solid = find(f"{name} {surface}".strip())
        assert solid.family == "solid" and (solid.solid, solid.surface) == (name, surface)
        assert solid.phase(solid.limits().t_min) == "solid"
        for key, one in solid._relations.items():
            low, high = PLAUSIBLE[key]
            for share in (0.0, 0.3, 0.77, 1.0):
                value = solid.get(key, one.t_min + share * (one.t_max - one.t_min))
                assert low <= value <= high, key
            for outside in (one.t_min * 0.999, one.t_max * 1.001):
                with pytest.raises(OutOfRange, match="outside the range"):
                    solid.get(key, outside)
            assert one.t_min < one.t_max
            assert not one.t_max > solid._melting * 1.001
            assert len(solid.note(key)) < 250


@pytest.mark.parametrize("key", sorted(set(PROPERTIES) - set(OF_SOLIDS)))
def test_what_a_solid_does_not_have(key):
    with pytest.raises(NoModel, match="copper is a solid"):
        find("copper").get(key, 300.0)
    with pytest.raises(NoModel):
        find("copper").source(key)


def test_a_fluid_has_no_emissivity():
    for name in ("water", "ethylene glycol 30 % by mass", "ISO VG 46 VI 95", "moist air 50 %", "mercury"):
        with pytest.raises(NoModel, match="emissivity"):
            find(name).get("emissivity", 300.0)
        with pytest.raises(NoModel):
            find(name).source("emissivity")


def test_the_emissivity_asks_for_the_surface():
    with pytest.raises(NoModel, match="copper polished or copper oxidised"):
        find("copper").get("emissivity", 700.0)
    assert find("polished copper") is find("Copper, polished") is find("Cu polished")
    assert find("oxidized copper").get("emissivity", 800.0) == 0.58
    assert find("copper oxidised").get("k", 300.0) == find("copper").get("k", 300.0)
    with pytest.raises(UnknownName, match="no surface 'anodised' of copper"):
        find("anodised copper")


def test_diffusivity_follows():
    copper = find("copper")
    wanted = copper.get("k", 500.0) / copper.get("rho", 500.0) / copper.get("cp", 500.0)
    assert copper.get("thermal diffusivity", 500.0) == pytest.approx(wanted)
    assert "CRC-Handbook" in copper.source("alpha") and "Ho-JPCRD-1972" in copper.source("alpha")


def test_pressure_changes_nothing_and_bad_states_are_refused():
    assert find("brass").get("k", 300.0, 5e7) == find("brass").get("k", 300.0)
    for temperature, pressure, words in (
        (-1.0, None, "absolute zero"),
        (300.0, -1.0, "gauge"),
        (float("nan"), None, "finite"),
    ):
        with pytest.raises(OutOfRange, match=words):
            find("brass").get("k", temperature, pressure)
    with pytest.raises(NoModel, match="a solid here"):
        find("brass").get("k", 300.0, phase="liquid")


def test_molten_metals_are_told_apart():
    assert find("lead liquid") is find("molten lead") is find("liquid lead")
    assert find("lead").family == "solid"
    with pytest.raises(OutOfRange, match="write liquid lead above it"):
        find("lead").get("k", 650.0)
    with pytest.raises(UnknownName, match="leave the phase out"):
        find("liquid granite")


@pytest.mark.parametrize("temperature", [180.0, 220.0, 250.0, 272.0])
def test_ice_against_iapws(temperature):
    """The package iapws is an independent implementation of IAPWS R10-06."""
    assert iapws.__version__
    other = _Ice(temperature, 0.101325)
    ice = find("ice")
    assert ice.get("density", temperature) == pytest.approx(other["rho"], rel=0.005)
    assert ice.get("specific_heat", temperature) == pytest.approx(other["cp"] * 1000, rel=0.03)


@pytest.mark.parametrize("name", ["stainless steel 304", "copper"])
def test_columns(name):
    solid = find(name)
    values, faults = solid.get_many(("k", "cp"), [300.0, 5000.0, 400.0], errors="collect")
    assert [index for index, _ in faults] == [1]
    assert values[0, 2] == solid.get("k", 400.0)
