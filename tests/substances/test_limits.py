"""Every pure and pseudo-pure fluid, just inside and just outside each of its limits.

CoolProp answers outside most of them; the refusals here are ours, and each must name what is wrong.
"""

import math

import pytest

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.sources import cite, read_table
from cellfuncs.substances import find
from cellfuncs.substances.additions import additions
from cellfuncs.substances.fluids import PureFluid

ROWS = read_table("coolprop_fluids.csv")
IDS = [row["key"] for row in ROWS]
# Equations whose range ends below the critical temperature or pressure.
SHORT = {"R161", "R236EA", "R236FA"}
# Estimating models that find no corresponding state in thin vapour: they say so, and give no number.
NO_THIN_VAPOUR = {"R11", "R218", "R245fa", "R141b", "RC318", "R142b", "R227EA", "R236FA"}


def number(row, column):
    return float(row[column])


@pytest.fixture(params=ROWS, ids=IDS)
def row(request):
    return request.param


@pytest.fixture
def fluid(row) -> PureFluid:
    return find(row["key"])


def refused(call, words, kind=OutOfRange):
    with pytest.raises(kind) as caught:
        call()
    text = str(caught.value)
    assert words in text
    assert len(text) < 230
    return text


def test_all_fluids_are_here():
    assert len(ROWS) == 136
    assert len({id(find(key)) for key in IDS}) == 136


def test_lowest_temperature(row, fluid):
    low = number(row, "t_min")
    for phase in ("liquid", "vapour"):
        assert 0 < fluid.saturation("density", phase, temperature=low) < 3e4
    refused(lambda: fluid.get("density", low * (1 - 1e-6)), "outside the range")
    refused(lambda: fluid.saturation("density", "liquid", temperature=low * (1 - 1e-6)), "no saturation line")


def test_highest_temperature_and_pressure(row, fluid):
    high, most = number(row, "t_max"), number(row, "p_max")
    assert 0 < fluid.get("density", high) < 3e4
    assert 0 < fluid.get("density", high, most) < 3e4
    refused(lambda: fluid.get("density", high * (1 + 1e-6)), "outside the range")
    refused(lambda: fluid.get("density", high, most * (1 + 1e-6)), "highest pressure")


def test_saturation_must_be_named(row, fluid):
    critical = number(row, "t_critical")
    temperature = max(0.8 * critical, number(row, "t_min") * 1.001)
    for phase, side in (("liquid", 1), ("vapour", -1)):
        line = fluid.saturation("saturation_pressure", phase, temperature=temperature)
        beside = line * (1 + side * 1e-6)
        refused(lambda pressure=beside: fluid.get("density", temperature, pressure), "boils")
        saturated = fluid.saturation("density", phase, temperature=temperature)
        named = fluid.get("density", temperature, beside, phase)
        assert named == pytest.approx(saturated, rel=1e-4)
        away = line * (1 + side * 1e-4)
        region = "liquid" if phase == "liquid" else "gas"
        assert fluid.phase(temperature, away) == region
        assert fluid.get("density", temperature, away) == pytest.approx(saturated, rel=2e-3)
        wrong = "vapour" if phase == "liquid" else "liquid"
        refused(lambda p=away, phase=wrong: fluid.get("density", temperature, p, phase), "needs at")
        # a phase that is said and true changes nothing
        assert fluid.get("density", temperature, away, phase) == fluid.get("density", temperature, away)


def test_between_bubble_and_dew_line(row, fluid):
    if row["pseudo_pure"] == "no":
        return
    temperature = 0.8 * number(row, "t_critical")
    lines = [fluid.saturation("psat", phase, temperature=temperature) for phase in ("liquid", "vapour")]
    if lines[0] / lines[1] < 1 + 1e-4:
        return
    middle = sum(lines) / 2
    for phase in (None, "liquid", "vapour"):
        refused(lambda phase=phase: fluid.get("density", temperature, middle, phase), "is boiling")
    refused(lambda: fluid.get("saturation_pressure", temperature), "bubble and dew")


def test_critical_region(row, fluid):
    critical, pressure = number(row, "t_critical"), number(row, "p_critical")
    inside = critical * 0.999, pressure * 1.01
    if inside[1] > number(row, "p_max"):
        assert row["key"] in SHORT
        return
    assert 0 < fluid.get("density", *inside) < 3e4
    refused(lambda: fluid.get("specific_heat", *inside), "runs away")
    refused(lambda: fluid.saturation("specific_heat", "liquid", temperature=critical * 0.9995), "runs away")
    for outside in ((critical * 0.9899, pressure), (critical * 0.999, pressure * 1.0501)):
        assert 0 < fluid.get("specific_heat", *outside) < 1e7
    refused(lambda: fluid.saturation("density", "liquid", temperature=critical), "no saturation line")
    refused(lambda: fluid.saturation("density", "liquid", pressure=pressure), "no saturation line")


def test_supercritical_and_gas(row, fluid):
    hot = min(number(row, "t_critical") * 1.05, number(row, "t_max"))
    high = number(row, "p_critical") * 1.1
    if hot <= number(row, "t_critical") or high > number(row, "p_max"):
        assert row["key"] in SHORT
        return
    assert fluid.phase(hot, high) == "supercritical"
    assert fluid.phase(hot, high * 0.8) == "gas"
    assert fluid.get("density", hot, high, "vapour") == fluid.get("density", hot, high)
    refused(lambda: fluid.get("density", hot, high, "liquid"), "is supercritical")


def test_melting_line(row, fluid):
    if not row["melting_source"]:
        return
    from CoolProp import CoolProp

    state = CoolProp.AbstractState("HEOS", row["key"])
    for share in (0.05, 0.2, 0.5, 0.9):
        pressure = share * number(row, "p_max")
        try:
            melting = state.melting_line(CoolProp.iT, CoolProp.iP, pressure)
        except ValueError:
            continue  # beyond the line that CoolProp knows
        if number(row, "t_min") < melting * 0.999 and melting * 1.001 < number(row, "t_max"):
            refused(lambda p=pressure, t=melting * 0.999: fluid.get("density", t, p), "is solid")
            assert 0 < fluid.get("density", melting * 1.001, pressure) < 3e4


@pytest.mark.parametrize("quantity", ["viscosity", "conductivity"])
def test_transport_models(row, fluid, quantity):
    model = row[quantity + "_model"]
    temperature = max(0.8 * number(row, "t_critical"), number(row, "t_min") * 1.001)
    if model == "none" and any(name == quantity for name, _ in additions(row["key"])):
        # filled from elsewhere, and only as far as that goes: see test_additions
        refused(lambda: fluid.get(quantity, temperature, number(row, "p_max") / 2), "", (NoModel, OutOfRange))
        assert cite(fluid.source(quantity)) and "%" in fluid.note(quantity)
        return
    if model == "none":
        text = refused(lambda: fluid.get(quantity, temperature, number(row, "p_max") / 2), "", NoModel)
        assert fluid.name in text
        refused(lambda: fluid.saturation("prandtl", "liquid", temperature=temperature), "", NoModel)
        refused(lambda: fluid.source(quantity), "", NoModel)
        return
    value = fluid.saturation(quantity, "liquid", temperature=temperature)
    low, high = {"viscosity": (1e-6, 1e-2), "conductivity": (5e-3, 1.0)}[quantity]
    assert low < value < high
    assert ("estimated" in fluid.note(quantity)) == (model.split(" ")[0] in ("ECS", "Chung", "rhosr-CS"))
    try:
        assert 0 < fluid.get(quantity, temperature, 2000.0, "vapour") < value
    except NoModel as error:
        assert row["key"] in NO_THIN_VAPOUR
        assert "gives no value" in str(error)


def test_surface_tension(row, fluid):
    temperature = max(0.7 * number(row, "t_critical"), number(row, "t_min"))
    if row["surface_tension"] == "no":
        refused(lambda: fluid.get("surface_tension", temperature), "surface tension", NoModel)
        return
    assert 1e-5 < fluid.get("surface_tension", temperature) < 0.2


@pytest.mark.parametrize(
    ("temperature", "pressure", "words"),
    [
        (math.nan, 1e5, "finite"),
        (300.0, math.nan, "finite"),
        (math.inf, 1e5, "finite"),
        (300.0, math.inf, "finite"),
        (-10.0, 1e5, "absolute zero"),
        (0.0, 1e5, "absolute zero"),
        (300.0, 0.0, "gauge"),
        (300.0, -5e4, "gauge"),
        (300.0, 1.01, "was bar or kPa meant"),
        (300.0, 999.9, "was bar or kPa meant"),
    ],
)
def test_states_that_are_none(temperature, pressure, words):
    refused(lambda: find("nitrogen").get("density", temperature, pressure), words)


def test_known_solids():
    """Ice VI, solid nitrogen and dry ice: textbook states on the solid side (pressures from memory)."""
    for name, temperature, pressure in (("water", 290.0, 9e8), ("nitrogen", 70.0, 1e8), ("CO2", 220.0, 1e8)):
        refused(lambda n=name, t=temperature, p=pressure: find(n).get("density", t, p), "is solid")


def test_vacuum_when_it_is_meant():
    assert find("nitrogen vapour").get("density", 300.0, 1.01) == pytest.approx(
        1.01 * 0.0280134 / (8.314462618 * 300.0), rel=1e-4
    )


@pytest.mark.parametrize("name", ["R141b", "R218", "RC318"])
def test_saturated_vapour_without_a_viscosity(name):
    fluid = find(name)
    refused(lambda: fluid.saturation("viscosity", "vapour", temperature=270.0), "gives no value", NoModel)
    assert fluid.saturation("viscosity", "liquid", temperature=270.0) > 0


def test_no_state_is_left_behind():
    """After a refusal, a saturated state, or another property, the same question has the same answer."""
    water = find("water")
    wanted = water.get("density", 300.0, 2e5)
    water.get("saturation_pressure", 350.0)
    assert water.get("density", 300.0, 2e5) == wanted
    with pytest.raises(OutOfRange):
        water.get("density", 373.124295, 101325.0)
    assert water.get("density", 300.0, 2e5) == wanted
    water.get("surface_tension", 320.0)
    assert water.get("density", 300.0, 2e5) == wanted
    water.get("density", 373.124295, 101325.0, "vapour")
    assert water.get("density", 300.0, 2e5) == wanted
