"""Transport properties beside CoolProp's: only in their phase and range, never zero, never without a word."""

import pytest
from CoolProp import CoolProp

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.sources import cite, read_table
from cellfuncs.substances import find
from cellfuncs.substances.additions import additions, collision_integral, published_up_to

ROWS = read_table("transport_additions.csv")
FLUIDS = {row["key"]: row for row in read_table("coolprop_fluids.csv")}


@pytest.mark.parametrize("row", ROWS, ids=[f"{row['fluid']}-{row['property']}-{row['phase']}" for row in ROWS])
def test_every_row_answers_in_its_phase(row):
    assert FLUIDS[row["fluid"]][f"{row['property']}_model"] == "none"  # nothing of CoolProp's is replaced
    fluid, facts = find(row["fluid"]), FLUIDS[row["fluid"]]
    one = additions(row["fluid"])[row["property"], row["phase"]]
    assert "%" in one.note
    if row["phase"] == "gas":
        warm = max(one.t_min + 20, 1.2 * float(facts["t_critical"]))
        pressure, temperature = 2e4, min(0.9 * float(facts["t_max"]), warm)
        low, high = {"viscosity": (5e-6, 1e-4), "conductivity": (5e-3, 0.3)}[row["property"]]
    else:
        pressure, temperature = 2e6, (max(one.t_min, float(facts["t_min"])) + one.t_max) / 2
        low, high = {"viscosity": (1e-4, 1.0), "conductivity": (0.1, 0.3)}[row["property"]]
    value = fluid.get(row["property"], temperature, pressure)
    assert low < value < high
    assert cite(fluid.source(row["property"])) and one.note in fluid.note(row["property"])
    far = (0.11 * float(facts["p_critical"])) if row["phase"] == "gas" else 6e6
    with pytest.raises((OutOfRange, NoModel)):
        fluid.get(row["property"], temperature, far)


def test_collision_integral():
    """Values of the table of Klein and Smith (1968) for Lennard-Jones molecules, from memory."""
    for reduced, wanted in ((0.5, 2.284), (1.0, 1.593), (2.0, 1.176), (5.0, 0.9268), (10.0, 0.8244), (50.0, 0.6504)):
        assert collision_integral(reduced) == pytest.approx(wanted, rel=0.003)


@pytest.mark.parametrize("name", ["Nitrogen", "Argon", "Methane"])
def test_kinetic_theory_where_coolprop_has_a_model(name):
    """The same formula with Svehla's constants against CoolProp's reference equations of the dilute gas.

    The tolerance is the smallest uncertainty that the rows state.
    """
    from cellfuncs.substances.additions import _chapman_enskog

    constants = {"Nitrogen": (3.798, 71.4), "Argon": (3.542, 93.3), "Methane": (3.758, 148.6)}[name]
    value = _chapman_enskog(*constants)
    for temperature in (250.0, 300.0, 500.0):
        wanted = CoolProp.PropsSI("V", "T", temperature, "P", 1e4, name)
        assert value(temperature, CoolProp.PropsSI("M", name), 0.0) == pytest.approx(wanted, rel=0.04)


def test_derived_properties_and_saturation():
    krypton = find("krypton")
    values = [krypton.get(key, 300.0, 1e5) for key in ("viscosity", "specific_heat", "conductivity")]
    assert krypton.get("prandtl", 300.0, 1e5) == pytest.approx(values[0] * values[1] / values[2])
    assert krypton.get("nu", 300.0, 1e5) == pytest.approx(values[0] / krypton.get("density", 300.0, 1e5))
    assert krypton.get("prandtl", 300.0, 1e5) == pytest.approx(2 / 3, rel=0.01)  # a monatomic ideal gas
    acetone = find("acetone")
    assert acetone.saturation("viscosity", "liquid", temperature=298.15) == pytest.approx(3.06e-4)
    assert acetone.saturation("viscosity", "vapour", temperature=300.0) == pytest.approx(7.5e-6, rel=0.06)
    with pytest.raises(NoModel, match="only of its vapour"):
        krypton.saturation("viscosity", "liquid", temperature=150.0)
    with pytest.raises(NoModel):
        find("n-undecane").get("conductivity", 300.0)
    assert krypton.get_many(("mu", "rho"), [300.0, 350.0], 1e5).shape == (2, 2)


def test_no_row_no_value():
    for name in ("R113", "1-butene", "R1336mzz(Z)"):
        with pytest.raises(NoModel, match="no published model"):
            find(name).get("viscosity", 300.0, 1e5)


def test_hot_gases_say_where_they_are_extrapolated():
    """Air and common gases answer to 1500 K, and tell up to where their equations are published."""
    for name in ("air", "nitrogen", "oxygen", "CO2", "steam", "argon", "helium"):
        fluid = find(name)
        for key in ("density", "specific_heat", "viscosity", "conductivity", "prandtl"):
            assert 0 < fluid.get(key, 1500.0, 1e5) < 1e5
        limits = published_up_to(fluid.key)
        assert limits and all(value < fluid.limits().t_max for value in limits.values())
        assert "extrapolated above" in fluid.note("conductivity")
    assert "1000 K" in find("air").note("viscosity") and "extrapolated" not in find("air").note("density")
    assert "1273.15 K" in find("water").note("density") and "1173.15 K" in find("water").note("prandtl")
    with pytest.raises(OutOfRange):
        find("hydrogen").get("viscosity", 1500.0, 1e5)  # its equation ends at 1000 K
