"""Solutions and liquids: limits, concentrations, freezing and boiling."""

from itertools import pairwise

import pytest

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.substances import find
from cellfuncs.substances.solutions import liquid_rows, mass_fraction, volume_fraction, water_vapour_pressure


def sample(row, share):
    """The liquid of a row at a share of its concentration range."""
    if not row["basis"]:
        return find(row["name"])
    low, high = float(row["x_min"]), float(row["x_max"])
    return find(f"{row['name']} {100 * (low + share * (high - low)):.10f} % by {row['basis']}")


@pytest.mark.parametrize("key", liquid_rows())
def test_every_liquid_inside_and_outside_its_limits(key):
    row = liquid_rows()[key]
    for share in (0.0, 0.5, 1.0) if row["basis"] else (0.0,):
        liquid = sample(row, share)
        limits = liquid.limits()
        refused = set(row["refused"].split())
        for temperature in (limits.t_min, limits.t_max):
            for what, low, high in (
                ("density", 400.0, 3000.0),
                ("viscosity", 5e-5, 10.0),
                ("conductivity", 0.03, 100.0),
                ("specific_heat", 900.0, 5000.0),
                ("prandtl", 1e-3, 1e5),
            ):
                if refused & {what} or (what == "prandtl" and refused):
                    with pytest.raises(NoModel):
                        liquid.get(what, temperature, 9e6)
                else:
                    assert low < liquid.get(what, temperature, 9e6) < high, (what, temperature, share)
        for temperature in (limits.t_min * (1 - 1e-6), limits.t_max * (1 + 1e-6)):
            with pytest.raises(OutOfRange, match=r"outside the range|freezing point"):
                liquid.get("density", temperature, 9e6)
        with pytest.raises(OutOfRange, match="highest pressure"):
            liquid.get("density", limits.t_min, 1.001e7)
        with pytest.raises(OutOfRange, match="nearly a vacuum"):
            liquid.get("density", limits.t_min, 5.0)
    for share in (-0.01, 1.01) if row["basis"] else ():
        if share > 0 or float(row["x_min"]) > 0.01:
            with pytest.raises(OutOfRange, match="outside the data"):
                sample(row, share)


@pytest.mark.parametrize(
    "key", [key for key, row in liquid_rows().items() if "viscosity" not in row["refused"]]
)
def test_viscosity_falls_with_temperature(key):
    """A fit that turns upwards inside its range is no property: such ranges are cut in the data file."""
    row = liquid_rows()[key]
    for share in (0.0, 0.5, 1.0) if row["basis"] else (0.0,):
        liquid = sample(row, share)
        limits = liquid.limits()
        steps = [limits.t_min + (limits.t_max - limits.t_min) * i / 12 for i in range(13)]
        values = [liquid.get("viscosity", temperature, 9e6) for temperature in steps]
        assert all(low > high for low, high in pairwise(values)), share


def test_boiling_is_refused():
    with pytest.raises(OutOfRange, match="boils"):
        find("sea water 3.5 %").get("density", 385.0)
    assert find("sea water 3.5 %").get("density", 385.0, 3e5) > 900
    with pytest.raises(OutOfRange, match="boils"):
        find("TVP1").get("density", 600.0)
    assert find("TVP1").get("density", 600.0, 1e6) > 700
    assert find("TVP1").get("saturation_pressure", 530.15) == pytest.approx(101325, rel=0.03)
    with pytest.raises(OutOfRange, match="boils"):
        find("MEG 30 % by mass").get("density", 360.0, 2e4)


def test_volume_and_mass():
    """Pure ethylene glycol 1113.5, water 998.2 kg/m3 at 20 degC: 50 % by volume is 52.7 % by mass."""
    assert mass_fraction(0.5, "ethylene glycol") == pytest.approx(1113.5 / (1113.5 + 998.2), rel=1e-12)
    for solute in ("ethylene glycol", "propylene glycol", "ethanol", "methanol", "glycerol"):
        assert volume_fraction(mass_fraction(0.37, solute), solute) == pytest.approx(0.37, rel=1e-12)
    by_volume = find("ethylene glycol 50 % by volume")
    assert "52.73 % by mass" in by_volume.note("density")
    assert by_volume.get("density", 300.0) == pytest.approx(
        find("ethylene glycol 52.73011 % by mass").get("density", 300.0), rel=1e-6
    )
    inhibited = find("inhibited ethylene glycol 50 % by mass")
    assert "by volume" in inhibited.note("density")


def test_expansion_coefficient_is_the_slope_of_the_density():
    for name in ("MEG 40 % by mass", "TVP1", "NaCl 15 %"):
        liquid, step = find(name), 0.01
        low, high = (liquid.get("density", 300.0 + sign * step) for sign in (-1, 1))
        slope = -(high - low) / (2 * step) / liquid.get("density", 300.0)
        assert liquid.get("beta", 300.0) == pytest.approx(slope, rel=1e-4)


def test_sea_water_of_no_salt_is_water():
    """Sharqawy et al. 2010 reduce to pure water at zero salinity (within their stated 1 %)."""
    sea, water = find("sea water 0 %"), find("water")
    for what, tolerance in (
        ("density", 1e-3),
        ("specific_heat", 5e-3),
        ("viscosity", 0.015),
        ("conductivity", 0.015),
    ):
        assert sea.get(what, 320.0) == pytest.approx(water.get(what, 320.0), rel=tolerance)


def test_vapour_pressure_of_water():
    water = find("water")
    for temperature in (280.0, 320.0, 373.0, 450.0, 600.0):
        wanted = water.get("saturation_pressure", temperature)
        assert water_vapour_pressure(temperature) == pytest.approx(wanted, rel=2e-4)


def test_placeholders_of_the_library_never_come_out():
    """CoolProp answers 1 Pa s and 0 W/(m K) for lithium bromide, and slips for three other liquids."""
    for name, what in (
        ("LiBr 50 %", "viscosity"),
        ("LiBr 50 %", "conductivity"),
        ("LiBr 50 %", "prandtl"),
        ("PCL", "viscosity"),
        ("HFE", "conductivity"),
        ("HFE2", "kinematic_viscosity"),
        ("TVP1", "speed_of_sound"),
        ("TVP1", "surface_tension"),
    ):
        with pytest.raises(NoModel, match="no published model"):
            find(name).get(what, 300.0)


def test_columns_and_phase():
    liquid = find("MEG 30 % by mass")
    values, faults = liquid.get_many(("density", "mu"), [300.0, 200.0, 350.0], errors="collect")
    assert [index for index, _ in faults] == [1]
    assert values[0, 0] == liquid.get("density", 300.0)
    assert liquid.phase(300.0) == "liquid"
    with pytest.raises(NoModel, match="is a liquid here"):
        liquid.get("density", 300.0, 1e5, "vapour")
