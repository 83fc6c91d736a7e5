"""CF_VALUE_FOR and CF_TERM_LIMIT: found values give back what was aimed at; the others are told in words."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

DUCT = [
    ["flow kind", "duct", ""],
    ["velocity", 2.0, "m/s"],
    ["diameter", 20.0, "mm"],
    ["length", 4.0, "m"],
    ["inlet temperature", 20.0, "degC"],
    ["wall temperature", 60.0, "degC"],
    ["coefficient", 3000.0, "W/m2K"],
    ["friction factor", 0.02, ""],
    ["density", 1000.0, "kg/m3"],
    ["viscosity", 1.0, "mPa.s"],
    ["conductivity", 0.6, "W/mK"],
    ["specific heat", 4.2, "kJ/kgK"],
]


@settings(max_examples=25)
@given(outlet=st.floats(21.0, 59.0))
def test_the_velocity_for_an_outlet_temperature_by_hand(cf, outlet):
    """NTU = 4hL/(ρcpUD) = ln(ΔT_in/ΔT_out)."""
    got = cf("VALUE_FOR", DUCT, "velocity", "outlet temperature", f"{outlet!r} degC")
    wanted = 4 * 3000.0 * 4.0 / (1000.0 * 4200.0 * 0.02) / math.log(40.0 / (60.0 - outlet))
    if 2e-3 < wanted < 2e3:
        assert got == pytest.approx(wanted, rel=1e-7)
    else:
        assert got.startswith("! target: no velocity")


@pytest.mark.parametrize(
    ("vary", "what", "target", "unit"),
    [
        ("velocity", "pressure drop", "12 kPa", "ft/s"),
        ("length", "duty", "40 kW", "m"),
        ("wall temperature", "outlet temperature", "30 degC", "degC"),
        ("inlet temperature", "outlet temperature", "30 degC", "degC"),
        ("diameter", "Reynolds number", 5e4, "mm"),
        ("density", "mass flow", "1 kg/s", "kg/m3"),
        ("U", "velocity", "3 m/s", "m/s"),
    ],
)
def test_the_value_found_gives_the_target(cf, vary, what, target, unit):
    got = cf("VALUE_FOR", DUCT, vary, what, target, unit)
    assert isinstance(got, float), got
    si = target if isinstance(target, float) else None
    again = cf("CASE", cf("VARY", DUCT, vary, got, unit), what, None if si else target.split()[1])
    assert again == pytest.approx(si or float(target.split()[0]), rel=1e-7)
    assert cf("VALUE_FOR", DUCT, vary, what, target) == pytest.approx(cf("SI", got, unit), rel=1e-9)


def test_a_row_that_is_missing_may_be_searched(cf):
    block = [row for row in DUCT if row[0] != "velocity"]
    got = cf("VALUE_FOR", block, "velocity", "pressure drop", "8 kPa", "m/s")
    assert got == pytest.approx(math.sqrt(8000.0 / (0.02 * 4.0 / 0.02 * 500.0)), rel=1e-7)


@pytest.mark.parametrize(
    ("arguments", "start"),
    [
        (("velocity", "outlet temperature", "70 degC"), "! target: no velocity from"),
        (("velocity", "outlet temperature", 45.0), "! target: 45 means 45 K"),
        (("velocity", "outlet temperature", "45 kPa"), "! target: "),
        (("velocity", "outlet temperature", None), "! target: empty"),
        (("velocity", "outlet temperature", [[1.0], [2.0]]), "! target: a range"),
        (("velocity", "section", 1.0), "! what: "),
        (("colour", "outlet temperature", "45 degC"), "! vary: "),
        (("section", "outlet temperature", "45 degC"), "! vary: "),
        (("outlet temperature", "outlet temperature", "45 degC"), "! vary: "),
        (("velocity", "outlet temperature", "! velocity: empty"), "! velocity: empty"),
        (("mass flow", "pressure drop", "8 kPa"), "! block: no value of mass flow gives an answer"),
        (("velocity", "peak temperature", "45 degC"), "! block: no value of velocity gives an answer"),
        (("velocity", "outlet temperature", "30 degC", "kg"), "! unit: "),
    ],
)
def test_what_cannot_be_searched_is_told(cf, arguments, start):
    answer = cf("VALUE_FOR", DUCT, *arguments)
    assert isinstance(answer, str) and answer.startswith(start), answer
    assert len(answer) <= 255


def test_more_than_one_value_is_told(cf):
    """Between laminar and turbulent flow the outlet rises with velocity, on both sides it falls."""
    laminar = [row for row in DUCT if row[0] not in ("coefficient", "friction factor")]
    low, high = (cf("CASE", cf("VARY", laminar, "velocity", u), "outlet temperature", "degC") for u in (0.115, 0.2))
    assert low < high
    answer = cf("VALUE_FOR", laminar, "velocity", "outlet temperature", f"{0.5 * (low + high)} degC")
    assert answer.startswith("! target: more than one velocity gives it: "), answer
    assert " m/s and " in answer


def test_the_limit_of_a_share_by_hand(cf, stated_plate):
    """Laminar plate: √Pr·U²/(2cp)/ΔT = 5 %, with the velocity alone changing (Pohlhausen)."""
    block = stated_plate(reynolds=1e3, prandtl=0.7, transition=("1e9", ""))
    cp = 0.7 * 0.026 / (1.2 * 20.0 * 0.5 / 1e3)
    wanted = math.sqrt(0.05 * 2.0 * cp * 40.0 / math.sqrt(0.7))
    assert cf("TERM_LIMIT", block, "viscous heating", "velocity") == pytest.approx(wanted, rel=1e-7)
    assert cf("TERM_LIMIT", block, "viscous heating", "velocity", "5 %", "ft/s") == pytest.approx(
        wanted / 0.3048, rel=1e-7
    )
    share = cf("TERM", cf("VARY", block, "velocity", wanted, "m/s"), "viscous heating")
    assert share == pytest.approx(0.05, rel=1e-9)


def test_the_limit_of_an_effect_in_kelvin(cf, stated_gap):
    """Peak between equal walls μU²/(8k) = 1 K, at the end of a film long enough to be warm."""
    wanted = math.sqrt(8.0 * 0.13 / 0.03)
    film = stated_gap(length=(10.0, "m"))
    assert cf("TERM_LIMIT", film, "viscous heating", "velocity", "1 K") == pytest.approx(wanted, rel=1e-9)
    assert cf("TERM_LIMIT", film, "viscous heating", "velocity", "1.8 degF") == pytest.approx(wanted, rel=1e-9)


@pytest.mark.parametrize(
    ("term", "vary", "level", "kind"),
    [
        ("storage", "time scale", "1 K", "outlet temperature"),
        ("viscous heating", "velocity", "0.02 K", "outlet temperature"),
        ("viscous heating", "velocity", "2 W", "duty"),
    ],
)
def test_at_the_limit_of_an_effect_leaving_out_changes_the_answer_by_it(cf, term, vary, level, kind):
    block = [*DUCT, ["time scale", 60.0, "s"], ["answer", kind, ""]]
    if kind == "duty":
        block = [row for row in block if row[0] != "time scale"]
    block = [row for k, row in enumerate(block) if row[0] not in {r[0] for r in block[k + 1 :]}]
    found = cf("TERM_LIMIT", block, term, vary, level)
    assert isinstance(found, float), found
    unit = {"time scale": "s", "velocity": "m/s"}[vary]
    changed = cf("WITHOUT", cf("VARY", block, vary, found, unit), term, None, level.split()[1])
    assert abs(changed) == pytest.approx(float(level.split()[0]), rel=1e-4)


def test_a_term_of_momentum_has_its_limit(cf, stated_gap):
    """ρUh²/(μL) = 5 %."""
    wanted = 0.05 * 0.03 * 0.1 / (870.0 * (50e-6) ** 2)
    got = cf("TERM_LIMIT", stated_gap(**{"beyond range": ("allow", "")}), "inertia", "velocity", None, "m/s")
    assert got == pytest.approx(wanted, rel=1e-9)


def test_a_wall_is_searched_on_its_own_side(cf, stated_plate):
    """The share of friction rises on both sides of the stream's temperature; the stated side answers."""
    for wall, side in ((333.0, 1.0), (253.0, -1.0)):
        block = stated_plate(reynolds=4e5, **{"wall temperature": (wall, "K")})
        share = cf("TERM", block, "viscous heating") * 2.0
        got = cf("TERM_LIMIT", block, "viscous heating", "wall temperature", share)
        assert got == pytest.approx(293.0 + side * 20.0, rel=1e-9)


@pytest.mark.parametrize(
    ("arguments", "start"),
    [
        (("advection", "velocity"), "! term: advection is never left out"),
        (("advektion", "velocity"), "! term: "),
        (("viscous heating", "velocity", "5 kPa"), "! level: an effect in kPa"),
        (("inertia", "velocity", "1 K"), "! level: no model gives an effect of inertia"),
        (("advection", "velocity", "1 K"), "! term: advection is never left out"),
        (("viscous heating", "velocity", -0.1), "! level: "),
        (("viscous heating", "velocity", "-1 K"), "! level: "),
        (("viscous heating", "velocity", "fast"), "! level: "),
        (("rotation", "velocity"), "! level: no velocity from"),
        (("viscous heating", "substance"), "! vary: "),
    ],
)
def test_what_has_no_limit_is_told(cf, arguments, start):
    answer = cf("TERM_LIMIT", DUCT, *arguments)
    assert isinstance(answer, str) and answer.startswith(start), answer
    assert len(answer) <= 255
