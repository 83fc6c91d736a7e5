"""The energy terms: what holds by construction, limits, and worked sizes."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.terms import COLUMNS, TERMS

RE = st.floats(math.log(1.0), math.log(4.99e6)).map(math.exp)
PR = st.floats(math.log(0.5), math.log(2000.0)).map(math.exp)


def table(cf, block):
    rows = cf("TERMS", block)
    assert isinstance(rows, list), rows
    assert tuple(rows[0]) == COLUMNS
    assert [row[0] for row in rows[1:]] == [*TERMS, "all left out"]
    return {row[0]: dict(zip(COLUMNS, row, strict=True)) for row in rows[1:]}


@settings(max_examples=150, deadline=None)
@given(reynolds=RE, prandtl=PR, flux=st.booleans())
def test_duct_balance_closes_for_any_re_and_pr(cf, reynolds, prandtl, flux):
    conductivity, viscosity = 0.6, 1000.0 * 1.0 * 0.02 / reynolds
    block = [
        ["flow kind", "duct"],
        ["velocity", 1.0, "m/s"],
        ["diameter", 0.02, "m"],
        ["length", 4.0, "m"],
        ["inlet temperature", 300.0, "K"],
        ["heat flux", 1e4, "W/m2"] if flux else ["wall temperature", 320.0, "K"],
        ["density", 1000.0, "kg/m3"],
        ["viscosity", viscosity, "Pa s"],
        ["conductivity", conductivity, "W/mK"],
        ["specific heat", prandtl * conductivity / viscosity, "J/kgK"],
        ["expansion coefficient", 0.0, "1/K"],
    ]
    rows = table(cf, block)
    across, advection = rows["conduction across"], rows["advection"]
    assert advection["share"] == pytest.approx(across["share"], rel=1e-9)
    assert across["verdict"] == advection["verdict"] == "keep"


@settings(max_examples=100, deadline=None)
@given(reynolds=st.floats(math.log(150.0), math.log(9e7)).map(math.exp), prandtl=st.floats(0.601, 59.9))
def test_plate_balance_closes_for_any_re_and_pr(cf, reynolds, prandtl):
    conductivity, viscosity = 0.026, 1.2 * 20.0 * 0.5 / reynolds
    block = [
        ["flow kind", "plate"],
        ["velocity", 20.0, "m/s"],
        ["length", 0.5, "m"],
        ["stream temperature", 293.0, "K"],
        ["wall temperature", 333.0, "K"],
        ["density", 1.2, "kg/m3"],
        ["viscosity", viscosity, "Pa s"],
        ["conductivity", conductivity, "W/mK"],
        ["specific heat", prandtl * conductivity / viscosity, "J/kgK"],
    ]
    rows = table(cf, block)
    assert rows["advection"]["share"] == pytest.approx(rows["conduction across"]["share"], rel=1e-9)
    assert rows["advection"]["verdict"] == rows["conduction across"]["verdict"] == "keep"


def test_with_little_friction_the_exchange_leads(cf, stated_duct):
    rows = table(cf, stated_duct(reynolds=500.0, prandtl=5.0))
    assert rows["advection"]["share"] == rows["conduction across"]["share"] == 1.0
    assert rows["viscous heating"]["verdict"] == "leave out"


def test_one_scale_form_is_what_people_write_down(cf, stated_duct):
    """Conduction 1/Pe, viscous heating Ec/Re, both on the length along the stream (definition)."""
    rows = table(cf, stated_duct(reynolds=500.0, prandtl=5.0))
    viscosity, cp = 1000.0 * 0.02 / 500.0, 5.0 * 0.6 / (1000.0 * 0.02 / 500.0)
    peclet = 1000.0 * 1.0 * 4.0 * cp / 0.6
    assert rows["conduction along"]["one-scale"] == pytest.approx(1.0 / peclet, rel=1e-12)
    eckert, reynolds = 1.0 / (cp * 20.0), 1000.0 * 4.0 / viscosity
    assert rows["viscous heating"]["one-scale"] == pytest.approx(eckert / reynolds, rel=1e-12)


def test_bulk_net_of_an_ideal_gas_vanishes_and_the_wall_still_feels_it(cf, stated_duct):
    """βT = 1: friction and expansion cancel in the bulk (Joule-Thomson); ΔT_rec remains."""
    gas = {
        "density": (1.2, "kg/m3"),
        "conductivity": (0.026, "W/mK"),
        "viscosity": (1.8e-5, "Pa s"),
        "specific heat": (1005.0, "J/kgK"),
        "velocity": (150.0, "m/s"),
        "expansion coefficient": (1.0 / 300.0, "1/K"),
        "property temperature": (300.0, "K"),
        "length": (1.0, "m"),
    }
    flux = gas | {"wall temperature": None, "heat flux": (3000.0, "W/m2")}
    bulk = table(cf, stated_duct(**flux, answer=("outlet temperature", "")))
    wall = table(cf, stated_duct(**flux, answer=("wall temperature", "")))
    assert bulk["viscous heating"]["share"] == pytest.approx(0.0, abs=1e-12)
    assert bulk["viscous heating"]["verdict"] == bulk["pressure work"]["verdict"] == "leave out"
    assert wall["viscous heating"]["share"] > 0.15
    assert wall["viscous heating"]["verdict"] == "keep"


def test_pair_carries_one_share_and_one_verdict(cf, stated_duct):
    rows = table(cf, stated_duct(reynolds=2e4, prandtl=50.0))
    viscous, pressure = rows["viscous heating"], rows["pressure work"]
    assert viscous["share"] == pressure["share"]
    assert viscous["verdict"] == pressure["verdict"]
    assert "pair" in pressure["reason"]


@pytest.mark.parametrize(
    ("answer", "wanted"),
    [
        ("outlet temperature", lambda r, w, n: abs(r - w) * (1 - math.exp(-n))),
        ("duty", lambda r, w, n: abs(w - r + r * n / (1 - math.exp(-n)))),
        ("local flux", lambda r, w, n: abs(w + r * (math.exp(n) - 1))),
    ],
)
def test_share_is_the_one_the_answer_calls_for(cf, stated_duct, answer, wanted):
    """Against the closed forms of the plain balance with ΔT_rec, worked here from the block's own numbers."""
    more = {"coefficient": (80.0, "W/m2K"), "friction factor": (0.064 / 0.5, "")}
    viscosity, cp = 0.04, 75.0
    n = 80.0 * (4 / 0.02) * 4.0 / (1000.0 * cp * 1.0)
    drop = 0.128 * 4.0 / 0.02 * 1000.0 / 2
    r = drop * 1.0 / 4.0 / (4 * 80.0 / 0.02 * 20.0)
    w = viscosity / 0.6 / 20.0
    block = stated_duct(
        reynolds=500.0, prandtl=5.0, answer=(answer, ""), **more, **{"expansion coefficient": (0.0, "1/K")}
    )
    share = cf("TERM", block, "viscous heating")
    assert share == pytest.approx(wanted(r, w, n), rel=1e-9)


def test_equal_walls_of_a_gap_peak_at_an_eighth(cf, stated_gap):
    """Couette flow between equal walls: peak μU²/(8k) (closed form)."""
    block = stated_gap()
    assert cf("CASE", block, "peak temperature") == pytest.approx(320.0 + 0.03 * 25.0 / (8 * 0.13), rel=1e-12)
    rows = table(cf, block)
    assert rows["viscous heating"]["share"] == pytest.approx(rows["conduction across"]["share"], rel=1e-12)
    assert rows["viscous heating"]["verdict"] == "keep"


def test_small_kelvins_are_left_out_whatever_the_ratio(cf, stated_gap):
    rows = table(cf, stated_gap(velocity=(0.5, "m/s")))
    assert rows["viscous heating"]["verdict"] == "leave out"
    assert "K" in rows["viscous heating"]["reason"]


@pytest.mark.parametrize(("reynolds", "verdict"), [(2000.0, "leave out"), (500.0, "borderline")])
def test_conduction_along_a_plate_is_the_premise_of_a_thin_layer(cf, stated_plate, reynolds, verdict):
    rows = table(cf, stated_plate(reynolds=reynolds))
    assert rows["conduction along"]["verdict"] == verdict
    assert rows["conduction along"]["share"] == "no share"


def test_plate_friction_is_the_recovery_rise(cf, stated_plate):
    """Laminar plate: ΔT_rec = √Pr·U²/(2cp) over the driving difference (Pohlhausen, Pr 0.7)."""
    block = stated_plate(reynolds=1e4, prandtl=0.7)
    cp = 0.7 * 0.026 / (1.2 * 20.0 * 0.5 / 1e4)
    assert cf("TERM", block, "viscous heating") == pytest.approx(math.sqrt(0.7) * 400.0 / (2 * cp) / 40.0, rel=1e-9)


def test_all_left_out_is_bounded_by_the_tolerance(cf, stated_duct):
    rows = table(cf, stated_duct(reynolds=300.0, prandtl=0.6, **{"time scale": (3000.0, "s")}))
    out = {row["term"]: row for row in rows.values() if row["verdict"] == "leave out" and row["term"] != "all left out"}
    assert rows["all left out"]["share"] <= 0.05
    assert rows["all left out"]["share"] == pytest.approx(
        sum(row["share"] for name, row in out.items() if name != "pressure work"), rel=1e-9
    )


def test_several_small_terms_bring_the_largest_back(cf, stated_duct):
    """Four terms, each below a third of the tolerance (3 %), together above it: the largest comes back."""
    base = {"tolerance": (3.0, "%"), "smallest that matters": (0.0, "K"), "wall thickness": (1.0, "mm")}

    def shares(time, source, wall, drop):
        more = base | {
            "time scale": (time, "s"),
            "volumetric source": (source, "W/m3"),
            "wall conductivity": (wall, "W/mK"),
            "pressure drop": (drop, "Pa"),
        }
        return table(cf, stated_duct(reynolds=500.0, prandtl=5.0, **more))

    unit = shares(1e6, 1.0, 1.0, 1.0)
    low, high = (shares(1e6, 1.0, 1.0, d)["viscous heating"]["share"] for d in (1e6, 2e6))
    drop = 1e6 + (0.0092 - low) / (high - low) * 1e6
    rows = shares(
        1e6 * unit["storage"]["share"] / 0.0095,
        0.0098 / unit["volumetric source"]["share"],
        0.0094 / unit["wall conduction"]["share"],
        drop,
    )
    small = {t: rows[t] for t in ("storage", "volumetric source", "wall conduction", "viscous heating")}
    assert {t: round(row["share"], 4) for t, row in small.items()} == {
        "storage": 0.0095,
        "volumetric source": 0.0098,
        "wall conduction": 0.0094,
        "viscous heating": 0.0092,
    }
    assert {t for t, row in small.items() if row["verdict"] == "borderline"} == {"volumetric source"}
    assert "together" in small["volumetric source"]["reason"]
    assert rows["all left out"]["share"] <= 0.03


def test_every_reason_fits_a_cell_and_has_numbers(cf, stated_duct, stated_plate, stated_gap):
    for block in (stated_duct(), stated_plate(), stated_gap()):
        for row in table(cf, block).values():
            assert 0 < len(row["reason"]) <= 255
            assert isinstance(row["effect"], float) or row["effect"] in ("no model", "never left out")


def test_term_reads_the_table(cf, stated_duct):
    block = stated_duct()
    rows = table(cf, block)
    for term, row in rows.items():
        assert cf("TERM", block, term) == row["share"]
        for measure in COLUMNS[1:]:
            assert cf("TERM", block, term, measure) == row[measure]


@pytest.mark.parametrize(
    ("arguments", "part"),
    [
        (("viscous heatin",), "viscous heating"),
        (("viscous heating", "shares"), "share"),
        ((None,), "term: empty"),
    ],
)
def test_wrong_words_name_the_nearest(cf, stated_duct, arguments, part):
    answer = cf("TERM", stated_duct(), *arguments)
    assert answer.startswith("! ")
    assert part in answer


def test_an_equation_that_is_none_is_refused_in_words(cf, stated_duct):
    assert cf("TERMS", stated_duct(), "entropy").startswith("! equation:")
