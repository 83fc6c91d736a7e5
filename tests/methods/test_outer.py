"""Cylinders, spheres, banks, beds, jets, drag and films: properties, seams, the authors' own conclusions."""

import itertools
import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import METHODS, bank, bed, cylinder, drag, film, high_speed, jet, sphere
from cellfuncs.methods.base import inputs
from cellfuncs.sources import read_table

FILES = ("plate", "cylinder", "sphere", "bank", "bed", "jet", "drag", "film", "high_speed")
OUTER = [m for m in METHODS.values() if m.function.__module__.rsplit(".", 1)[1] in FILES]
SPANS = {
    "reynolds": (1e-2, 1e7),
    "prandtl": (0.6, 50.0),
    "viscosity_ratio": (1.0, 3.0),
    "prandtl_ratio": (0.3, 3.0),
    "temperature_ratio": (0.5, 2.0),
    "unheated": (1e-3, 0.99),
    "transition": (1e5, 5e5),
    "across": (1.25, 3.0),
    "along": (1.0, 3.0),
    "rows": (1.0, 40.0),
    "height": (2.0, 12.0),
    "radius": (2.5, 7.5),
    "open_area": (0.008, 0.04),
    "voidage": (0.36, 0.42),
    "film_reynolds": (4.0, 2e4),
    "length_over_roughness": (1e2, 1e6),
    "velocity": (1e-3, 30.0),
    "density": (0.1, 2000.0),
    "viscosity": (1e-6, 1.0),
    "diameter": (1e-4, 0.1),
    "film_flow": (1e-3, 2.0),
    "gravity": (1.0, 10.0),
    "stream_temperature": (150.0, 400.0),
    "wall_temperature": (150.0, 900.0),
    "recovery_temperature": (400.0, 900.0),
    "stream_enthalpy": (1e5, 4e5),
    "wall_enthalpy": (1e5, 9e5),
    "recovery_enthalpy": (4e5, 9e5),
}
CHOICES = {"arrangement": ("inline", "staggered"), "wall": ("temperature", "flux")}


def drawn(method, data):
    """Inputs inside the method's range, as far as single variables go."""
    given = {}
    for name in method.inputs:
        if name in CHOICES:
            given[name] = data.draw(st.sampled_from(CHOICES[name]))
            continue
        low, high = SPANS[name]
        for r in method.ranges:
            if r.variable == inputs()[name].symbol:
                low, high = max(r.low, low), min(r.high, high)
                if low > high:
                    low, high = r.low, r.high
        given[name] = math.exp(data.draw(st.floats(math.log(low), math.log(high))))
        given[name] = min(max(given[name], low), high)
    return given


@pytest.mark.parametrize("name", [m.name for m in OUTER])
@settings(max_examples=25, deadline=None)
@given(data=st.data())
def test_inside_its_range_a_method_answers_something_positive(name, data):
    given = drawn(METHODS[name], data)
    assert METHODS[name].evaluate(given, allow=True) > 0


@pytest.mark.parametrize("name", [m.name for m in OUTER if "reynolds" in m.inputs and m.gives.endswith("Nu")])
@settings(max_examples=15, deadline=None)
@given(data=st.data())
def test_more_flow_more_heat(name, data):
    """But for the steps of a power law, which are stated below."""
    given = drawn(METHODS[name], data)
    low, high = (
        METHODS[name].evaluate(given, allow=True),
        METHODS[name].evaluate({**given, "reynolds": 2.0 * given["reynolds"]}, allow=True),
    )
    assert high > low * (1.0 - 1e-9)


def jump(function, at, *rest):
    return function(at * (1 + 1e-9), *rest) / function(at * (1 - 1e-9), *rest) - 1.0


@pytest.mark.parametrize(
    ("function", "at", "rest", "stated", "within"),
    [
        (METHODS["Hilpert"].function, 4.0, (0.7,), 0.0, 0.02),
        (METHODS["Hilpert"].function, 40.0, (0.7,), 0.0, 0.02),
        (METHODS["Hilpert"].function, 4e3, (0.7,), 0.0, 0.01),
        (METHODS["Hilpert"].function, 4e4, (0.7,), 0.01, 0.02),
        (cylinder.zukauskas, 40.0, (0.7,), -0.02, 0.01),
        (cylinder.zukauskas, 1e3, (0.7,), 0.02, 0.01),
        (cylinder.zukauskas, 2e5, (0.7,), -0.01, 0.02),
        (cylinder.wire, 44.0, (), -0.03, 0.05),
        (bank.zukauskas, 100.0, (0.7, "inline", 2.0, 2.0, 20.0), 0.01, 0.005),
        (bank.zukauskas, 1e3, (0.7, "inline", 2.0, 2.0, 20.0), 0.30, 0.01),
        (bank.zukauskas, 2e5, (0.7, "inline", 2.0, 2.0, 20.0), 0.01, 0.01),
        (bank.zukauskas, 1e3, (0.7, "staggered", 2.0, 2.0, 20.0), 0.37, 0.01),
        (bank.zukauskas, 2e5, (0.7, "staggered", 4.0, 2.0, 20.0), 0.03, 0.01),
        (bank.zukauskas_1987, 1e3, (0.7, "inline", 2.0, 2.0, 20.0), 0.275, 0.01),
        (bank.zukauskas_1987, 1e3, (0.7, "staggered", 2.0, 2.0, 20.0), -0.02, 0.01),
        (bank.zukauskas_1987, 2e5, (0.7, "inline", 2.0, 2.0, 20.0), -0.04, 0.01),
        (film.chun_seban, 5800.0 / 2.0**1.06, (2.0,), 0.0, 0.04),
    ],
)
def test_steps_between_regimes_are_as_stated(function, at, rest, stated, within):
    assert jump(function, at, *rest) == pytest.approx(stated, abs=within)


def test_sphere_without_flow():
    """Conduction into a still medium."""
    for function in (sphere.whitaker, sphere.ranz_marshall, sphere.clift):
        assert function(0.0, 0.7) == pytest.approx(2.0, abs=1e-12 if function is not sphere.clift else 1e-9)


def test_every_section_names_its_source_and_its_steps_follow_each_other():
    rows = read_table("cross_flow_sections.csv")
    for before, after in itertools.pairwise(rows):
        if (before["method"], before["shape"]) == (after["method"], after["shape"]):
            assert before["reynolds_high"] == after["reynolds_low"]


def test_a_round_cylinder_of_a_bar_and_a_bar_of_a_round_method_do_not_apply():
    assert METHODS["Hilpert"].applies(shape="circle") and not METHODS["Hilpert"].applies(shape="square")
    assert METHODS["Hilpert square"].applies(shape="square") and not METHODS["Zukauskas cylinder"].applies(
        shape="square"
    )


def test_narrowest_section_lies_on_the_diagonals_of_a_close_staggered_bank():
    assert bank.narrowest("inline", 2.0, 1.0) == 0.5
    assert bank.narrowest("staggered", 2.0, 2.0) == 0.5
    assert bank.narrowest("staggered", 3.0, 1.0) == pytest.approx(2 * (math.sqrt(1 + 2.25) - 1) / 3)


def test_wide_inline_pitches_beyond_use_are_refused():
    """Žukauskas 1972: in line with ST/SL below 0.7 the tubes stand in each other's wake."""
    given = {"reynolds": 1e4, "prandtl": 0.7, "arrangement": "inline", "across": 1.25, "along": 2.5, "rows": 10.0}
    with pytest.raises(OutOfRange, match="ST/SL"):
        METHODS["Zukauskas bank"].evaluate(given)


def test_martins_best_array_of_round_nozzles():
    """Martin 1977: for a given distance and blower power the coefficient is greatest at f 0.0152 and H/D 5.43.

    h D^1 ∝ Nu, Re ∝ uD with u ∝ f^-1/3 at a given power per area, D = H/(H/D).
    """
    from scipy.optimize import minimize

    def loss(x):
        area, height = math.exp(x[0]), math.exp(x[1])
        return -height * jet.martin_array(1e5 * area ** (-1 / 3) / height, 0.7, height, area)

    area, height = map(math.exp, minimize(loss, [math.log(0.02), math.log(6.0)], method="Nelder-Mead", tol=1e-10).x)
    assert area == pytest.approx(0.0152, rel=0.02)
    assert height == pytest.approx(5.43, rel=0.01)


def test_martins_best_array_of_slots():
    """Martin 1977: the best slots have f 0.0718 and a width of a tenth of the distance, H/S 5.0 (from memory)."""
    from scipy.optimize import minimize

    def loss(x):
        area, height = math.exp(x[0]), math.exp(x[1])
        return -height * jet.martin_slot_array(1e5 * area ** (-1 / 3) / height, 0.7, height, area)

    area, height = map(math.exp, minimize(loss, [math.log(0.05), math.log(6.0)], method="Nelder-Mead", tol=1e-10).x)
    assert area == pytest.approx(0.0718, rel=0.02)
    assert height == pytest.approx(5.0, rel=0.02)


def test_carman_tends_to_kozeny_and_ergun_to_its_parts():
    bedding = {"velocity": 1e-9, "diameter": 1e-3, "voidage": 0.4, "density": 1000.0, "viscosity": 1e-3}
    kozeny = bed.carman_kozeny(1e-9, 1e-3, 0.4, 1e-3)
    assert bed.carman(**bedding) == pytest.approx(kozeny, rel=1e-3)
    assert bed.ergun(**bedding) == pytest.approx(150 / 180 * kozeny, rel=1e-4)


def test_ergun_is_refused_beyond_its_flow():
    with pytest.raises(OutOfRange, match="Re/"):
        METHODS["Ergun"].evaluate(
            {"velocity": 10.0, "diameter": 0.1, "voidage": 0.4, "density": 1.2, "viscosity": 1.8e-5}
        )


@given(st.floats(1e-6, 1e-2))
def test_every_drag_of_a_sphere_tends_to_stokes(reynolds):
    for function in (drag.schiller_naumann, drag.clift_gauvin, drag.brown_lawler):
        assert function(reynolds) == pytest.approx(drag.stokes(reynolds), rel=0.01)


def test_drag_with_transition_begins_where_the_laminar_plate_ends():
    for transition in (3e5, 5e5, 1e6):
        assert drag.with_transition(transition, transition) == pytest.approx(drag.blasius(transition), rel=1e-12)


def test_recovery_factor_has_no_step():
    for prandtl in (5.0, 7.0):
        assert jump(high_speed.laminar_recovery, prandtl) == pytest.approx(0.0, abs=1e-8)


def test_reference_temperature_of_a_slow_stream_is_the_film_temperature():
    for function in (high_speed.eckert_temperature, high_speed.meador_smart_turbulent):
        assert function(300.0, 340.0, 300.0) == pytest.approx(320.0)


def test_film_thickness_has_no_step_where_it_turns_turbulent():
    """Brauer 1956: Γ/μ 400."""
    laminar = film.thickness(0.4, 1000.0, 1e-3, 9.81)
    assert film.turbulent_thickness(0.4, 1000.0, 1e-3, 9.81) == pytest.approx(laminar, rel=5e-3)
