"""The heated film: closed forms, a manufactured solution, turning points, and what is refused."""

import math
from itertools import pairwise

import numpy as np
import pytest

from cellfuncs.errors import NoModel
from cellfuncs.models import gap
from cellfuncs.models.film import Solver

NAHME = (1e-9, 1e-3, 0.3, 1.0, 10.0, 18.2137, 100.0, 1e4, 1e6, 1e9)


@pytest.mark.parametrize("insulated", [False, True])
@pytest.mark.parametrize("nahme", NAHME)
def test_exponential_viscosity_follows_the_closed_forms(nahme, insulated):
    film = gap.at_speed(gap.Gap(gap.exponential(), high=None if insulated else 0.0), nahme)
    assert film.peak == pytest.approx(gap.nahme_peak(nahme, insulated), rel=1e-7, abs=10 * film.error)
    assert film.stress == pytest.approx(gap.nahme_stress(nahme, insulated), rel=1e-9)
    # all the heat that is made leaves through the walls, and is the work of the moving wall
    assert film.low_flux + film.high_flux == pytest.approx(film.made, rel=1e-6)
    assert film.made == pytest.approx(nahme * film.stress, rel=1e-9)


@pytest.mark.parametrize("insulated", [False, True])
def test_the_turning_point_is_found_where_the_closed_form_has_it(insulated):
    walls = gap.Gap(gap.exponential(), high=None if insulated else 0.0)
    nahme, largest = gap.critical_nahme(insulated)
    top = gap.turning_point(walls)
    assert top.heating * top.stress**2 == pytest.approx(largest, rel=1e-10)
    assert top.heating == pytest.approx(nahme, rel=1e-5)  # a maximum is flat
    below = gap.at_stress(walls, 0.99 * largest)
    assert len(below) == 2 and below[0].heating < nahme < below[1].heating
    for film in below:
        assert film.heating * film.stress**2 == pytest.approx(0.99 * largest, rel=1e-10)
    with pytest.raises(NoModel, match="runs away"):
        gap.at_stress(walls, 1.01 * largest)


def test_a_constant_viscosity_has_no_turning_point():
    assert gap.turning_point(gap.Gap()) is None
    (film,) = gap.at_stress(gap.Gap(), 40.0)
    assert film.peak == pytest.approx(5.0, rel=1e-12)


@pytest.mark.parametrize("brinkman", [0.0, 0.5, 2.0, 12.342857, 1e4])
def test_constant_viscosity_with_walls_apart(brinkman):
    film = gap.at_speed(gap.Gap(low=0.0, high=1.0), brinkman)
    inside = (1 + brinkman / 2) ** 2 / (2 * brinkman) if brinkman > 2 else 1.0
    assert film.peak == pytest.approx(inside, rel=1e-12)
    assert film.low_flux == pytest.approx(1.0 + brinkman / 2, rel=1e-12)
    assert film.high_flux == pytest.approx(brinkman / 2 - 1.0, rel=1e-11, abs=1e-11)


@pytest.mark.parametrize("pressure", [-6.0, -1.0, 2.0, 30.0])
def test_constant_viscosity_with_a_pressure_gradient(pressure):
    """u' = 1 + P(1/2 − y): the heat made is Br·(1 + P²/12), the flow 1/2 + P/12."""
    film = gap.at_speed(gap.Gap(pressure=pressure), 3.0)
    assert film.made == pytest.approx(3.0 * (1 + pressure**2 / 12), rel=1e-12)
    assert film.flow == pytest.approx(0.5 + pressure / 12, rel=1e-12)
    assert film.stress == pytest.approx(1 + pressure / 2, rel=1e-12)
    assert film.moving_stress == pytest.approx(1 - pressure / 2, rel=1e-12, abs=1e-12)


def test_a_pressure_gradient_can_run_away_and_is_told():
    with pytest.raises(NoModel, match=r"reaches 52\.\d+ at most, asked 100; beyond it the film runs away"):
        gap.at_speed(gap.Gap(gap.exponential(), pressure=1.0), 100.0)


def test_a_viscosity_that_rises_with_temperature_can_run_away_at_a_given_speed():
    with pytest.raises(NoModel, match="runs away"):
        gap.at_speed(gap.Gap(gap.exponential(-10.0), 0.0, 1.0), 5.0)


def _manufactured(pressure: float, heating: float) -> tuple[gap.Gap, object]:
    """θ = sin(πy)·e^y with the source that makes it the solution; τ and ∫ by Gauss-Legendre quadrature."""
    y, w = np.polynomial.legendre.leggauss(200)
    y, w = (y + 1) / 2, w / 2

    def theta(at):
        return np.sin(np.pi * at) * np.exp(at)

    fluid = np.exp(theta(y))
    stress = (1 + pressure * (w @ (y * fluid))) / (w @ fluid)

    def source(at):
        second = np.exp(at) * ((1 - np.pi**2) * np.sin(np.pi * at) + 2 * np.pi * np.cos(np.pi * at))
        return -second - heating * (stress - pressure * at) ** 2 * np.exp(theta(at))

    return gap.Gap(gap.exponential(), pressure=pressure, source=source), theta


def test_a_manufactured_solution_is_met_with_spectral_decay():
    walls, theta = _manufactured(pressure=1.5, heating=0.8)
    errors = []
    for count in (8, 12, 16, 20):
        solver = Solver(walls, count)
        heat = 0.8 * solver.spread(theta(solver.x))[3]
        state = solver.solve(heat, theta(solver.x))
        errors.append(float(abs(state.theta - theta(solver.x)).max()))
    assert all(later < earlier / 30 for earlier, later in pairwise(errors)), errors
    assert errors[-1] < 1e-10


def test_a_table_of_an_exponential_is_the_exponential():
    places = np.linspace(0.0, 3.0, 400)
    film = gap.at_speed(gap.Gap(gap.tabulated(places, np.exp(-places))), 10.0)
    assert film.peak == pytest.approx(math.log1p(10 / 8), rel=1e-6)
    with pytest.raises(NoModel, match="is known from 0 to 3 only"):
        gap.at_speed(gap.Gap(gap.tabulated(places, np.exp(-places))), 1e4)


def test_a_smooth_range_of_an_exponential_is_the_exponential():
    from cellfuncs.models.chebyshev import nodes

    film = gap.at_speed(gap.Gap(gap.smooth(0.0, 3.0, np.exp(-3.0 * nodes(14)[0]))), 10.0)
    assert film.peak == pytest.approx(math.log1p(10 / 8), rel=1e-11)


@pytest.mark.parametrize(
    ("make", "why"),
    [
        (lambda: gap.at_speed(gap.Gap(), math.inf), "zero upwards"),
        (lambda: gap.at_speed(gap.Gap(), -1.0), "zero upwards"),
        (lambda: gap.Gap(low=None, high=None), "no way out"),
        (lambda: gap.Gap(source=math.nan), "finite"),
        (lambda: gap.at_stress(gap.Gap(pressure=1.0), 1.0), "without a pressure gradient"),
        (lambda: gap.at_speed(gap.Gap(gap.exponential(-200.0), 0.0, 1.0), 5.0), "too sharply layered"),
    ],
)
def test_what_has_no_answer_is_refused_in_words(make, why):
    with pytest.raises(NoModel, match=why):
        make()


def test_no_heating_leaves_the_conduction_profile():
    film = gap.at_speed(gap.Gap(gap.exponential(), low=0.0, high=2.0), 0.0)
    assert film.peak == pytest.approx(2.0) and film.low_flux == pytest.approx(2.0)


@pytest.mark.parametrize("walls", [(0.0, 0.0), (0.0, 1.0), (None, 0.0)])
@pytest.mark.parametrize("heating", [0.0, 0.3, 8.0, 60.0])
def test_a_film_found_at_its_speed_is_the_one_found_by_its_heat(walls, heating):
    """Newton's method at a given Br, and the branch of films of rising heat followed to that Br."""
    solver = Solver(gap.Gap(gap.exponential(0.7), *walls), 45)
    direct = solver.at_speed(heating)
    followed = solver.solve(0.0, solver.still)
    for part in range(1, 9):
        followed = solver.solve(direct.made * part / 8, followed.theta)
    assert followed.heating == pytest.approx(heating, rel=1e-9, abs=1e-14)
    assert followed.stress == pytest.approx(direct.stress, rel=1e-9)
    assert abs(followed.theta - direct.theta).max() <= 1e-9
