"""Effects by hand, in their limits, and one model against another."""

import math

import pytest

from cellfuncs.answers import effects, solve
from cellfuncs.answers.effects.balance import BalancedDuct, ExpandingDuct
from cellfuncs.answers.effects.duct import SolvedDuct
from cellfuncs.cases import read_case
from cellfuncs.errors import NoModel

OIL = {
    "flow kind": "duct", "density": (870.0, "kg/m3"), "viscosity": (0.01, "Pa s"), "conductivity": (0.13, "W/mK"),
    "specific heat": (2000.0, "J/kgK"), "expansion coefficient": (7e-4, "1/K"), "velocity": (6.0, "m/s"),
    "diameter": (40.0, "mm"), "length": (30.0, "m"), "inlet temperature": (320.0, "K"),
    "wall temperature": (326.0, "K"),
}  # fmt: skip
GAS = {
    "flow kind": "duct", "substance": "air", "pressure": (8.0, "bar"), "velocity": (30.0, "m/s"),
    "diameter": (50.0, "mm"), "length": (5.0, "m"), "inlet temperature": (300.0, "K"),
    "wall temperature": (320.0, "K"),
}  # fmt: skip
PLATE = {
    "flow kind": "plate", "density": (1.2, "kg/m3"), "viscosity": (2e-5, "Pa s"), "conductivity": (0.026, "W/mK"),
    "specific heat": (1000.0, "J/kgK"), "velocity": (60.0, "m/s"), "length": (0.05, "m"), "width": (1.0, "m"),
    "stream temperature": (300.0, "K"), "wall temperature": (330.0, "K"),
}  # fmt: skip
GREY = {"emissivity": (0.8, None), "surroundings temperature": (290.0, "K")}


def solved(rows, **more):
    """A solved case; ``more`` adds rows, or takes them out with None."""
    rows = {**rows, **{name.replace("_", " "): value for name, value in more.items()}}
    cells = [(label, *(value if isinstance(value, tuple) else (value,))) for label, value in rows.items() if value]
    return solve(read_case(tuple((k, *row) for k, row in enumerate(cells, 1))))


@pytest.mark.parametrize("answer", ["outlet temperature", "duty"])
def test_the_solved_turbulent_duct_and_the_balance_agree_within_their_doubt(answer):
    solution = solved(OIL)
    across = SolvedDuct(solution).effect(answer, frozenset({"viscous heating"}))
    along = BalancedDuct(solution).effect(answer, frozenset({"viscous heating"}))
    assert across.change == pytest.approx(along.change, rel=0.25)
    assert across.base == pytest.approx(along.base, rel=0.1)
    assert across.error < abs(across.change) / 100


def test_friction_and_pressure_work_are_left_out_as_a_pair():
    solution = solved(OIL)
    one, other = (effects.effect(solution, term) for term in ("viscous heating", "pressure work"))
    assert one == other
    found, rest = effects.together(solution, ["viscous heating", "pressure work"])
    assert rest == [] and [e.change for e in found] == [one.change]


def test_terms_of_one_model_are_left_out_at_once():
    metal = {
        **OIL, "viscosity": (2e-4, "Pa s"), "conductivity": (25.0, "W/mK"), "specific heat": (1000.0, "J/kgK"),
        "velocity": (0.03, "m/s"), "diameter": (10.0, "mm"), "length": (15.0, "mm"),
        "volumetric source": (3e7, "W/m3"),
    }  # fmt: skip
    solution = solved(metal)
    terms = ["conduction along", "volumetric source"]
    (both,), rest = effects.together(solution, terms, "outlet temperature")
    apart = [effects.effect(solution, term).change for term in terms]
    assert rest == [] and both.change == pytest.approx(sum(apart), rel=0.2)
    assert abs(both.change - sum(apart)) > 1e-6 * abs(both.change)  # a source is felt through conduction too


def test_a_slow_gas_is_the_plain_balance(monkeypatch):
    """Hardly heated, too: a gas that is warmed also gets faster, which the plain balance does not know."""
    solution = solved(GAS, wall_temperature=(302.0, "K"))
    with pytest.raises(NoModel, match="the density hardly falls"):
        ExpandingDuct(solution)
    monkeypatch.setattr(ExpandingDuct, "_FROM_MACH", 0.0)
    left = frozenset({"viscous heating"})
    whole, plain = (kind(solution).effect("outlet temperature", left) for kind in (ExpandingDuct, BalancedDuct))
    assert whole.change == pytest.approx(plain.change, rel=0.1)


def test_an_ideal_gas_without_exchange_keeps_its_total_temperature():
    """In stagnation temperatures friction moves nothing but the wall; here by hardly any exchange."""
    fast = solved(GAS, velocity=(150.0, "m/s"), length=(0.1, "m"), temperature_basis="stagnation")
    found = effects.effect(fast, "viscous heating")
    static = effects.effect(solved(GAS, velocity=(150.0, "m/s"), length=(0.1, "m")), "viscous heating")
    assert abs(found.change) < 0.1 * abs(static.change)


def test_storage_behind_an_even_ramp_by_hand():
    """A flux that rises in t*: the stream that leaves has seen (1 − passing/2) of it."""
    solution = solved(OIL, wall_temperature=None, heat_flux=(5000.0, "W/m2"), time_scale=(40.0, "s"))
    a = solution.answers
    expected = a.bulk_rise * (a.length / a.velocity / 40.0) / 2.0
    assert effects.effect(solution, "storage", "outlet temperature").change == pytest.approx(expected, rel=1e-12)
    with pytest.raises(NoModel, match="what storage does to the coefficient is not solved"):
        effects.effect(solution, "storage", "coefficient")


def test_a_wall_too_slow_for_the_change_is_told():
    wall = {"wall thickness": (50.0, "mm"), "wall density": (7800.0, "kg/m3"), "wall specific heat": (480.0, "J/kgK")}
    with pytest.raises(NoModel, match="too slow to follow"):
        effects.effect(solved({**OIL, **wall}, time_scale=(1.0, "s")), "storage")


def test_conduction_in_the_wall_needs_a_wall_that_is_not_prescribed():
    wall = {"wall thickness": (3.0, "mm"), "wall conductivity": (390.0, "W/mK")}
    with pytest.raises(NoModel, match="prescribed all along"):
        effects.effect(solved({**OIL, **wall}), "wall conduction")
    flux = solved({**OIL, **wall}, wall_temperature=None, heat_flux=(5000.0, "W/m2"))
    assert effects.effect(flux, "wall conduction").change > 0  # without it the end of the wall is hotter


def test_recovery_of_a_plate_by_its_coefficient_and_by_its_wall():
    prescribed = solved(PLATE)
    found = effects.effect(prescribed, "viscous heating", "coefficient")
    rise = math.sqrt(2e-5 * 1000.0 / 0.026) * 60.0**2 / 2000.0  # r is √Pr within a percent here (Pohlhausen 1921)
    assert found.change == pytest.approx(prescribed.answers.coefficient * rise / 30.0, rel=1e-2)
    assert found.base == pytest.approx(prescribed.answers.coefficient, rel=1e-12)
    flux = solved(PLATE, wall_temperature=None, heat_flux=(3000.0, "W/m2"))
    assert effects.effect(flux, "viscous heating", "wall temperature").change == pytest.approx(-rise, rel=1e-2)


def test_radiation_of_a_prescribed_wall_is_what_it_radiates():
    solution = solved({**PLATE, **GREY})
    flux = 0.8 * 5.670374419e-8 * (330.0**4 - 290.0**4)
    assert effects.effect(solution, "wall radiation", "coefficient").change == pytest.approx(-flux / 30.0, rel=1e-9)


def test_radiation_cools_a_wall_of_given_flux_until_the_fluxes_balance():
    solution = solved({**PLATE, **GREY}, wall_temperature=None, heat_flux=(3000.0, "W/m2"))
    a = solution.answers
    wall = a.wall - effects.effect(solution, "wall radiation", "wall temperature").change
    radiated = 0.8 * 5.670374419e-8 * (wall**4 - 290.0**4)
    assert a.coefficient * (wall - 300.0) + radiated == pytest.approx(3000.0, rel=1e-9)


def test_still_air_at_a_plate_hardly_feels_friction():
    """gβL/cp = 3e-5·… of the coefficient (Gebhart 1962): tiny, of the sign that a warm wall gives less."""
    rows = {**PLATE, "flow kind": "free", "surface": "vertical plate", "expansion coefficient": (1 / 315, "1/K")}
    still = solved(rows, velocity=None, length=(0.5, "m"))
    friction = effects.effect(still, "viscous heating")
    weight = 9.80665 * 0.5 / 1000.0
    assert 0 < friction.change / friction.base < weight / 315
    cooled = effects.effect(
        solved(rows, velocity=None, length=(0.5, "m"), wall_temperature=(270.0, "K")), "viscous heating"
    )
    assert cooled.change < 0


def test_a_film_thins_as_it_warms():
    rows = {
        "flow kind": "gap", "substance": "ISO VG 46 VI 95", "velocity": (4.0, "m/s"), "gap": (0.05, "mm"),
        "length": (0.3, "m"), "wall temperature": (313.0, "K"),
    }  # fmt: skip
    solution = solved(rows)
    found = effects.effect(solution, "viscous heating")
    constant = solution.answers.full_rise / 8.0
    assert 0.7 * constant < -found.change < 0.99 * constant
    short = effects.effect(solved(rows, length=(0.01, "m")), "viscous heating")
    assert 0.2 < short.change / found.change < 0.9 and short.spread > 0.05  # carried off before heat has crossed it


def test_a_body_with_a_source_by_hand():
    rows = {
        "flow kind": "body", "density": (2000.0, "kg/m3"), "conductivity": (50.0, "W/mK"),
        "specific heat": (800.0, "J/kgK"), "coefficient": (20.0, "W/m2K"), "length": (0.01, "m"), "time": (600.0, "s"),
        "initial temperature": (360.0, "K"), "stream temperature": (300.0, "K"), "volumetric source": (4e4, "W/m3"),
    }  # fmt: skip
    solution = solved(rows)
    faded = math.exp(-600.0 / (2000.0 * 800.0 * 0.01 / 20.0))
    expected = -4e4 * 0.01 / 20.0 * (1.0 - faded)
    assert effects.effect(solution, "volumetric source").change == pytest.approx(expected, rel=1e-12)
    assert effects.effect(solution, "storage").change == pytest.approx(
        20.0 - 60.0 * faded - 20.0 * (1 - faded), rel=1e-9
    )


@pytest.mark.parametrize(
    ("rows", "more", "term", "why"),
    [
        (OIL, {"section": "other"}, "conduction along", "plates are solved, not a section other|balance"),
        (PLATE, {}, "storage", "no model of storage is solved for a plate"),
        (PLATE, {"flow_kind": "cylinder", "diameter": (0.02, "m"), "length": (1.0, "m"), "width": None},
         "viscous heating", "no recovery factor of a cylinder is solved"),
    ],
)  # fmt: skip
def test_where_nothing_is_solved_the_reason_says_so(rows, more, term, why):
    try:
        found = effects.effect(solved(rows, **more), term)
    except NoModel as refusal:
        assert any(part in str(refusal) for part in why.split("|"))
    else:
        assert any(part in found.model for part in why.split("|"))
