"""Liquid metals: equations against hand computation, ranges, boiling and names."""

import math

import pytest

from cellfuncs.errors import NoModel, OutOfRange, UnknownName
from cellfuncs.sources import read_table
from cellfuncs.substances import find
from cellfuncs.substances.liquid_metals import metal_rows
from cellfuncs.substances.relations import equation


def test_forms_by_hand():
    assert equation("terms", "2:0;3:1;-4:-1")(2.0) == 2 + 6 - 2
    assert equation("terms", "1:0;2:1", 273.15)(283.15) == pytest.approx(21)
    assert equation("exp", "2|3:0;-1:ln")(5.0) == pytest.approx(2 * math.exp(3) / 5)
    assert equation("reduced", "1000|5:0;2:0.5")(750.0) == pytest.approx(6)
    assert equation("wagner", "1000|10|-2:1")(500.0) == pytest.approx(10 * math.exp(-2))
    assert equation("ratio", "6:0|1:0;1:1")(2.0) == pytest.approx(2)
    assert equation("volumes", "0.25|2:0|4:0")(300.0) == pytest.approx(1 / (0.25 / 2 + 0.75 / 4))
    with pytest.raises(KeyError):
        equation("unheard of", "1:0")


@pytest.mark.parametrize("name", metal_rows())
def test_every_metal(name):
    metal = find(name)
    assert metal.family == "liquid metal" and metal.phase(metal.melting + 50) == "liquid"
    temperature = max(one.t_min for one in metal._relations.values() if one.t_min < metal.boiling * 0.5) + 20
    for key in ("density", "viscosity", "conductivity", "specific_heat", "expansion_coefficient", "prandtl", "alpha"):
        assert 0 < metal.get(key, temperature) < 3e4
        assert metal.source(key) and len(metal.note(key)) < 250
    assert 0.001 < metal.get("prandtl", temperature) < 0.05
    assert metal.get("viscosity", temperature) > metal.get("viscosity", temperature + 40)
    with pytest.raises(OutOfRange, match="is solid"):
        metal.get("density", metal.melting * 0.99)
    with pytest.raises(OutOfRange):
        metal.get("density", metal.boiling * 1.5)
    with pytest.raises(NoModel):
        metal.get("molar_mass", temperature)
    with pytest.raises(NoModel, match="is a liquid here"):
        metal.get("density", temperature, phase="vapour")


def test_expansion_is_the_slope_of_the_density():
    lead = find("liquid lead")
    assert lead.get("beta", 800.0) == pytest.approx(1 / (11441 / 1.2795 - 800), rel=1e-9)  # as the handbook writes it
    assert lead.get("beta", 600.6) == pytest.approx(1 / (11441 / 1.2795 - 600.6), rel=1e-4)


def test_boiling_depends_on_the_pressure():
    sodium = find("sodium")
    assert sodium.get("density", 1100.0) > 0
    with pytest.raises(OutOfRange, match="boils"):
        sodium.get("density", 1200.0)
    assert sodium.get("density", 1200.0, 2e5) > 0
    with pytest.raises(OutOfRange, match="boils"):
        find("mercury").get("density", 600.0, 2e4)
    assert sodium.saturation("psat", temperature=1000.0) == sodium.get("saturation_pressure", 1000.0)


def test_names():
    assert find("Hg") is find("mercury") is find("liquid mercury")
    assert find("NaK 78") is find("eutectic NaK")
    for text in ("NaK", "sodium-potassium alloy"):
        with pytest.raises(UnknownName, match="NaK-78"):
            find(text)
    assert find("solar salt").key == "NaK"  # CoolProp's key for a nitrate salt


def test_compositions_are_told():
    assert "78 % potassium" in find("NaK-78").note("density")
    assert "estimated" in find("gallium").note("conductivity")
    for row in read_table("liquid_metal_properties.csv"):
        assert "from memory" in row["place"] or "estimated" in row["place"]
