"""Condensation and boiling: Nusselt's film integrated anew, seams, limits, warnings."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import NumberRefused, OutOfRange, UnknownName
from cellfuncs.methods import METHODS, boiling, condensation
from cellfuncs.sources import cite, read_table

STEAM = {
    "density_liquid": 975.0,
    "density_vapour": 0.596,
    "viscosity_liquid": 375e-6,
    "conductivity_liquid": 0.668,
    "heat_of_vaporisation": 2257e3,
    "wall_subcooling": 10.0,
    "gravity": 9.80665,
}
PHASE = [m for m in METHODS.values() if m.function.__module__.rsplit(".", 1)[1] in ("condensation", "boiling")]


@pytest.mark.parametrize("method", PHASE, ids=lambda m: m.name)
def test_each_carries_a_warning_that_fits_a_cell(method):
    assert 40 < len(method.warning) <= 255
    assert "local codes" in method.warning


def nusselt_constant(order):
    """h/(ρΔρg k³hfg/(μΔT D))^1/4 of a film round a cylinder (0) or sphere (1).

    With the film's flow y, y^1/3 dy = 3 r^4n/3 sin^1/3 along the arc.
    """
    from scipy.integrate import quad

    spread = quad(lambda p: math.sin(p) ** (1 / 3 + 4 * order / 3), 0, math.pi)[0]
    flow = (4.0 * spread) ** 0.75
    return flow / 3.0 / (math.pi, 2.0)[order] * 2**0.25


@pytest.mark.parametrize(
    ("function", "order"), [(condensation.tube, 0), (condensation.sphere, 1)], ids=["cylinder", "sphere"]
)
def test_nusselts_film_integrated(function, order):
    scale = (975.0 * (975.0 - 0.596) * 9.80665 * 0.668**3 * 2257e3 / (375e-6 * 10.0 * 0.02)) ** 0.25
    assert function(**STEAM, diameter=0.02) / scale == pytest.approx(nusselt_constant(order), rel=2e-3)


def test_wall_and_tube_alike_at_a_height_of_2_8_diameters():
    """Nusselt 1916: 2.86 diameters with his 0.725."""
    wall, tube = condensation.wall(**STEAM, height_of_wall=0.0286), condensation.tube(**STEAM, diameter=0.01)
    assert wall == pytest.approx(tube, rel=0.01)


def at_number(number):
    """The height at which P has the value."""
    return number / condensation.condensation_number(**STEAM, height_of_wall=1.0)


def test_films_meet_where_waves_and_turbulence_begin():
    height = at_number(condensation.WAVES)
    smooth, waves = (
        condensation.wall(**STEAM, height_of_wall=height),
        condensation.kutateladze(**STEAM, height_of_wall=height),
    )
    assert waves == pytest.approx(smooth, rel=0.005)
    height = at_number(condensation.TURBULENT)
    water = STEAM | {"specific_heat_liquid": 0.668 / 375e-6, "height_of_wall": height}  # Pr 1
    assert condensation.labuntsov(**water) == pytest.approx(condensation.kutateladze(**water), rel=0.005)


@given(st.floats(16.0, 2500.0))
def test_height_form_and_flow_form_are_the_same_film(number):
    """Re at the foot is 4P·Nu; the equation by Re then gives the same Nu."""
    height = at_number(number)
    scale = condensation.film_length(975.0, 0.596, 375e-6, 9.80665)
    nusselt = condensation.kutateladze(**STEAM, height_of_wall=height) * scale / 0.668
    assert condensation.film_with_waves(4.0 * number * nusselt) == pytest.approx(nusselt, rel=1e-9)


def test_a_smooth_film_is_refused_on_a_tall_wall():
    with pytest.raises(OutOfRange, match="P up to"):
        METHODS["Nusselt condensation, wall"].evaluate({**STEAM, "height_of_wall": 1.0})
    assert METHODS["Nusselt condensation, wall"].evaluate({**STEAM, "height_of_wall": 0.01}) > 0


def test_a_vapour_heavier_than_its_liquid_is_refused():
    with pytest.raises(NumberRefused, match="density of the vapour"):
        METHODS["Nusselt condensation, tube"].evaluate(
            {**STEAM, "density_vapour": 1000.0, "diameter": 0.02}, allow=True
        )


def test_subcooling_of_the_condensate_adds_to_its_heat():
    plain = condensation.tube(**STEAM, diameter=0.02)
    more = condensation.tube(**STEAM, diameter=0.02, specific_heat_liquid=4190.0)
    assert more / plain == pytest.approx((1 + 0.68 * 4190 * 10 / 2257e3) ** 0.25)


@given(st.floats(0.01, 20.0))
def test_radiation_with_film_boiling(ratio):
    """Bromley 1950: h = hc (hc/h)^1/3 + hr, solved here; his explicit form within 0.3 %."""
    from scipy.optimize import brentq

    exact = brentq(lambda h: h - h ** (-1 / 3) - ratio, 0.5, 30.0)
    assert boiling.with_radiation(1.0, ratio) == pytest.approx(exact, rel=4e-3)


def test_surfaces():
    assert boiling.surface("Water", "polished copper") == (0.0128, 1.0)
    with pytest.raises(UnknownName, match="scored copper"):
        boiling.surface("water", "glass")
    for row in read_table("boiling_surfaces.csv"):
        assert cite(row["source"])
        assert 0.002 < float(row["factor"]) < 0.02


@given(st.floats(0.15, 50.0))
def test_critical_heat_flux_of_bodies_about_that_of_the_wall(size):
    water = (957.9, 0.5955, 2257e3, 58.9e-3, 9.8)
    length = boiling.capillary_length(957.9, 0.5955, 58.9e-3, 9.8)
    flat = boiling.zuber(*water)
    assert 0.88 * flat < boiling.cylinder(*water, 2 * size * length) < 1.6 * flat
    assert 0.83 * flat < boiling.sphere(*water, 2 * size * length) < 4.6 * flat


def test_too_thin_a_wire_has_no_crisis_of_its_own():
    given = {
        "density_liquid": 957.9, "density_vapour": 0.5955, "heat_of_vaporisation": 2257e3, "surface_tension": 58.9e-3,
        "gravity": 9.8, "diameter": 1e-4,
    }  # fmt: skip
    with pytest.raises(OutOfRange, match="R'"):
        METHODS["Sun-Lienhard cylinder"].evaluate(given)


def test_gorenflos_pressure_factor_is_one_at_its_reference():
    assert boiling.gorenflo(4000.0, 0.1, 2e4) == pytest.approx(4000.0, rel=0.01)
    assert boiling.gorenflo_water(0.1, 2e4) == pytest.approx(5600.0, rel=0.01)
