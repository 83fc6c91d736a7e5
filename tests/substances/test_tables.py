"""The data files agree with the installed CoolProp and with the bibliography."""

import pytest
from CoolProp import CoolProp

from cellfuncs.errors import UnknownName
from cellfuncs.sources import bibliography, cite, read_table
from cellfuncs.substances import PROPERTIES, find, names
from cellfuncs.substances.liquid_metals import metal_names
from cellfuncs.substances.polymers import polymer_names
from cellfuncs.substances.solids import solid_names
from cellfuncs.substances.solutions import liquid_rows
from cellfuncs.substances.texts import folded

FLUIDS = {row["key"]: row for row in read_table("coolprop_fluids.csv")}


@pytest.mark.parametrize("row", FLUIDS.values(), ids=list(FLUIDS))
def test_fluid_table_is_what_coolprop_says(row):
    state = CoolProp.AbstractState("HEOS", row["key"])
    said = {
        "molar_mass": state.molar_mass(),
        "t_min": max(state.Tmin(), state.Ttriple()),
        "t_max": state.Tmax(),
        "p_max": state.pmax(),
        "t_critical": state.T_critical(),
        "p_critical": state.p_critical(),
    }
    for column, value in said.items():
        assert float(row[column]) == pytest.approx(value, rel=1e-7), column


def test_every_fluid_of_coolprop_is_in_the_tables():
    listed = set(CoolProp.get_global_param_string("fluids_list").split(","))
    assert listed == set(FLUIDS) == {row["key"] for row in read_table("fluid_names.csv")}


def test_transport_counts():
    """The counts found for CoolProp 8.0.0 by asking every fluid for every property."""
    models = [row["viscosity_model"] for row in FLUIDS.values()]
    assert models.count("none") == 70
    assert sum(model.split(" ")[0] in ("ECS", "Chung", "rhosr-CS") for model in models) == 24
    assert [row["conductivity_model"] for row in FLUIDS.values()].count("none") == 73
    assert [row["surface_tension"] for row in FLUIDS.values()].count("no") == 28


def test_every_liquid_of_coolprop_is_in_the_table():
    listed = set()
    for kind in ("pure", "solution"):
        listed |= set(CoolProp.get_global_param_string(f"incompressible_list_{kind}").split(","))
    rows = {row["key"]: row for row in read_table("coolprop_liquids.csv")}
    assert listed == set(rows)
    for row in rows.values():
        if row["family"] == "left out":
            assert row["note"], row["key"]


@pytest.mark.parametrize("key", liquid_rows())
def test_liquid_limits_are_never_wider_than_those_of_coolprop(key):
    row = liquid_rows()[key]
    state = CoolProp.AbstractState("INCOMP", key)
    fraction = None
    if row["basis"]:
        low, high = (
            state.trivial_keyed_output(code) for code in (CoolProp.ifraction_min, CoolProp.ifraction_max)
        )
        assert float(row["x_min"]) >= low - 1e-9 and float(row["x_max"]) <= high + 1e-9
        fraction = float(row["x_max"])
        (state.set_mass_fractions if row["basis"] == "mass" else state.set_volu_fractions)([fraction])
    assert float(row["t_min"]) >= state.Tmin() - 1e-6
    assert float(row["t_max"]) <= state.Tmax() + 1e-6


def test_every_source_exists():
    keys = set()
    for name in (
        "coolprop_fluids",
        "coolprop_liquids",
        "solutes",
        "oil_grades",
        "viscosity_index",
        "solids",
        "solid_properties",
        "liquid_metals",
        "liquid_metal_properties",
        "polymers",
        "polymer_viscosity",
        "polymer_properties",
        "transport_additions",
        "published_ranges",
    ):
        for row in read_table(f"{name}.csv"):
            columns = [column for column in row if column.endswith("_source")]
            if name != "coolprop_fluids":
                columns.append("source")
            keys |= {key for column in columns for key in row[column].split(";")}
    keys -= {""}
    assert len(keys) > 100
    assert not keys - set(bibliography())


def test_bibliography_is_sorted_and_cites():
    keys = [row["key"] for row in read_table("sources.csv")]
    assert keys == sorted(keys)
    assert len(keys) == len(set(keys))
    assert cite("IAPWS-R6-95").endswith("IAPWS R6-95(2018)")
    assert cite("IAPWS-R12-08;IAPWS-R6-95").count("IAPWS (") == 2
    with pytest.raises(UnknownName):
        cite("nobody")


def test_every_substance_says_where_its_numbers_come_from():
    for key in FLUIDS:
        substance = find(key)
        for what in ("density", "enthalpy", "molar_mass"):
            assert cite(substance.source(what))
            assert len(substance.note(what)) < 250


def test_no_name_means_two_things():
    taken = {}
    for row in read_table("fluid_names.csv"):
        for name in (row["key"], row["name"], *filter(None, row["aliases"].split(";"))):
            assert taken.setdefault(folded(name), row["key"]) == row["key"], name
    liquids = {}
    for key, row in liquid_rows().items():
        for name in (row["name"], *row["aliases"].split(";")):
            assert liquids.setdefault((bool(row["basis"]), folded(name)), key) == key, name
            if not row["basis"]:
                assert folded(name) not in taken, name
    for table in (metal_names(), solid_names(), {folded(name): polymer for name, polymer in polymer_names().items()}):
        for name, means in table.items():
            assert taken.setdefault(name, means) == means, name
            assert (False, name) not in liquids, name


def test_properties_have_units_and_words():
    assert {entry.kind for entry in PROPERTIES.values()} >= {"density", "dynamic_viscosity", "dimensionless"}
    for entry in PROPERTIES.values():
        assert entry.words and entry.symbol and entry.source


def test_list_of_substances():
    rows = names()
    assert len(rows) > 240
    families = {"pure fluid", "solution", "thermal oil", "liquid", "moist air", "mineral oil"}
    assert families | {"liquid metal", "solid", "polymer melt"} == {row[1] for row in rows}
    assert ("R134a", "pure fluid", "1,1,1,2-tetrafluoroethane") in names("r-134")
    assert names("no such thing") == []
    assert all(len(part) < 255 for row in rows for part in row)
