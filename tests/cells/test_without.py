"""CF_WITHOUT and CF_REGIME_MAP: what they answer and refuse, and that they agree with CF_TERM."""

import math

import pytest

from cellfuncs.terms import regimes

METAL = [
    ["flow kind", "duct"], ["density", 850.0, "kg/m3"], ["viscosity", 2e-4, "Pa s"], ["specific heat", 1000.0, "J/kgK"],
    ["conductivity", 25.0, "W/mK"], ["velocity", 0.03, "m/s"], ["diameter", 10.0, "mm"], ["length", 20.0, "mm"],
    ["inlet temperature", 300.0, "degC"], ["wall temperature", 350.0, "degC"],
]  # fmt: skip
DIE = [
    ["flow kind", "duct"], ["density", 780.0, "kg/m3"], ["viscosity", 300.0, "Pa s"],
    ["specific heat", 2500.0, "J/kgK"], ["conductivity", 0.25, "W/mK"], ["velocity", 0.05, "m/s"],
    ["diameter", 6.0, "mm"], ["length", 0.3, "m"], ["inlet temperature", 200.0, "degC"],
    ["wall temperature", 210.0, "degC"],
]  # fmt: skip
PLATE = [
    ["flow kind", "plate"], ["substance", "air"], ["velocity", 90.0, "m/s"], ["length", 0.05, "m"],
    ["stream temperature", 20.0, "degC"], ["wall temperature", 60.0, "degC"],
]  # fmt: skip


def test_the_effect_column_is_the_change_over_its_base(cf):
    rows = {row[0]: dict(zip(regimes_columns(cf, METAL), row, strict=True)) for row in cf("TERMS", METAL)[1:]}
    along = cf("WITHOUT", METAL, "conduction along")
    assert rows["conduction along"]["effect"] == pytest.approx(abs(along) / 50.0, rel=1e-12)
    assert rows["all left out"]["effect"] <= 0.05
    assert rows["advection"]["effect"] == "never left out"


def regimes_columns(cf, block):
    return cf("TERMS", block)[0]


def test_a_peak_between_equal_walls_is_told_in_kelvins_and_over_the_driving_difference(cf, stated_gap):
    """μU²/(8k) over μU²/k: an eighth, and the kelvins decide."""
    film = stated_gap(length=(10.0, "m"))
    assert cf("TERM", film, "viscous heating", "effect") == pytest.approx(0.125, rel=1e-9)
    assert "K matter" in cf("TERM", film, "viscous heating", "reason")


def test_friction_in_a_die_by_hand(cf):
    """Far downstream the bulk is 5/6·μU²/k above the wall, and without friction it is the wall's (laminar tube).

    Conduction along, which is kept, lets the end of the heated wall be felt: 1/Pe is 4e-4.
    """
    long = cf("VARY", DIE, "length", 300.0, "m")
    expected = 5 / 6 * 300.0 * 0.05**2 / 0.25
    assert cf("WITHOUT", long, "viscous heating") == pytest.approx(-expected, rel=2e-4)
    assert cf("WITHOUT", long, "viscous heating", None, "degF") == pytest.approx(-1.8 * expected, rel=2e-4)


def test_the_pair_is_one(cf):
    block = [*DIE, ["expansion coefficient", 5e-4, "1/K"]]
    assert cf("WITHOUT", block, "viscous heating") == cf("WITHOUT", block, "pressure work")


def test_answers_in_their_units(cf):
    duty = cf("WITHOUT", DIE, "viscous heating", "duty", "mW")
    assert duty == pytest.approx(1e3 * cf("WITHOUT", DIE, "viscous heating", "duty"), rel=1e-12)
    assert duty > 0  # without friction the wall gives more
    assert isinstance(cf("WITHOUT", DIE, "viscous heating", "local flux"), float)
    assert cf("WITHOUT", PLATE, "viscous heating", "coefficient") > 0


def test_the_entrance_in_the_pressure_drop(cf):
    """Inertia of a tube's laminar entrance: 1.25 dynamic heads (Shah and London 1978)."""
    block = [*METAL, ["answer", "pressure drop"]]
    entrance = 1.25 * 850.0 * 0.03**2 / 2
    assert cf("WITHOUT", block, "inertia") == pytest.approx(-entrance, rel=1e-9)
    assert cf("WITHOUT", METAL, "inertia", "pressure drop", "mbar") == pytest.approx(-entrance / 100.0, rel=1e-9)
    drop = cf("CASE", METAL, "pressure drop")
    row = next(row for row in cf("TERMS", block, "momentum") if row[0] == "inertia")
    assert row[3] == pytest.approx(entrance / drop, rel=1e-9) and row[4] == "keep"
    found = cf("TERM_LIMIT", block, "inertia", "velocity", "0.1 Pa")
    assert found == pytest.approx(0.03 * math.sqrt(0.1 / entrance), rel=1e-9)
    assert "pressure drop" in cf("WITHOUT", block, "gravity")


def test_what_is_upstream_decides_size_and_sign(cf):
    """Heat that runs back warms an insulated inlet length and the stream with it; a fixed inlet takes it away."""
    short = cf("VARY", cf("VARY", METAL, "length", 5.0, "mm"), "velocity", 0.05, "m/s")
    usual = cf("WITHOUT", short, "conduction along")
    assert cf("WITHOUT", [*short, ["upstream wall", "adiabatic"]], "conduction along") == usual < 0
    held = [
        cf("WITHOUT", [*METAL, ["upstream wall", kind]], "conduction along") for kind in ("fixed inlet", "adiabatic")
    ]
    assert held[0] > 10 * held[1] > 0
    endless = cf("WITHOUT", [*METAL, ["upstream wall", "fixed inlet"]], "conduction along", "duty")
    assert "infinite" in endless  # a step of temperature at the plane from which the duty counts


def test_a_term_that_the_case_does_not_have_changes_nothing(cf):
    assert cf("WITHOUT", METAL, "volumetric source") == 0.0


@pytest.mark.parametrize(
    ("block", "arguments", "start"),
    [
        (METAL, ("advection",), "! term: advection is never left out"),
        (METAL, ("gravity",), "! term: no model gives the effect of gravity"),
        (METAL, ("all left out",), "! term: no model gives the effect of all left out"),
        (METAL, ("conduction along", "peak temperature"), "! answer: a duct has no peak temperature"),
        (METAL, ("conduction along", "warmth"), '! answer: "warmth" is no answer'),
        (METAL, ("conduction along", None, "W"), '! unit: "W" is a power'),
        (METAL, ("conduction along", "wall temperature"), "! term: no model: "),
        (PLATE, ("conduction along",), "! term: no model of conduction along is solved for a plate"),
        (PLATE, ("viscous heating", "duty"), '! block: a duty needs the row "width"'),
    ],
)
def test_what_has_no_effect_is_told(cf, block, arguments, start):
    answer = cf("WITHOUT", block, *arguments)
    assert isinstance(answer, str) and answer.startswith(start), answer
    assert len(answer) <= 255


def test_the_map_says_what_the_table_says(cf):
    table = cf("REGIME_MAP", METAL, "conduction along", "velocity", "length", 5)
    assert table[0] == ["x", "y", "verdict", "share"] and len(table) == 26
    assert {row[2] for row in table[1:]} >= {"keep", "leave out"}
    for x, y, verdict, share in table[1::4]:
        if verdict == "no answer":
            continue
        here = cf("VARY", cf("VARY", METAL, "velocity", x, "m/s"), "length", y, "m")
        assert cf("TERM", here, "conduction along", "verdict") == verdict
        assert cf("TERM", here, "conduction along") == pytest.approx(share, rel=1e-9)


def test_the_usual_axes_are_the_groups_that_rule(cf):
    """Conduction along: Pe and length. The middle of the map is the case itself."""
    table = cf("REGIME_MAP", METAL, "conduction along")
    assert len(table) == regimes.USUAL**2 + 1
    middle = table[1 + regimes.USUAL**2 // 2]
    assert middle[0] == pytest.approx(cf("CASE", METAL, "Péclet number"), rel=1e-9)
    assert middle[1] == pytest.approx(0.02, rel=1e-9)
    xs = sorted({round(math.log10(row[0]), 6) for row in table[1:]})
    assert len(xs) == regimes.USUAL


def test_two_groups_make_a_rectangle(cf):
    """Pe and Br over velocity and another row: each point is where it should be, whatever the levers are."""
    table = cf("REGIME_MAP", DIE, "viscous heating", "peclet", "Brinkman number", 3)
    assert isinstance(table, list), table
    own = [cf("CASE", DIE, name) for name in ("Péclet number", "Brinkman number")]
    for k, row in enumerate(table[1:]):
        assert row[0] == pytest.approx(own[0] * 10 ** (1.5 * (k // 3 - 1)), rel=1e-6)
        assert row[1] == pytest.approx(own[1] * 10 ** (1.5 * (k % 3 - 1)), rel=1e-6)


@pytest.mark.parametrize(
    ("arguments", "start"),
    [
        (("advection",), "! term: advection has one verdict everywhere"),
        (("conduction along", "substance"), "! x: "),
        (("conduction along", "velocity", "velocity"), "! y: both axes are the same"),
        (("conduction along", "velocity", "length", 2), "! points: "),
        (("conduction along", "velocity", "length", 1000), "! points: "),
        (("conduction along", "time scale"), "! "),
        (("conduction along", "outlet temperature"), "! x: "),
    ],
)
def test_what_makes_no_map_is_told(cf, arguments, start):
    answer = cf("REGIME_MAP", METAL, *arguments)
    assert isinstance(answer, str) and answer.startswith(start), answer
    assert len(answer) <= 255
