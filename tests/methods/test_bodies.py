"""Fins, layers and transients: limits, balances, and the series beside other exact solutions."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError, OutOfRange
from cellfuncs.methods import fin, layers, transient

SHAPES = ("plane wall", "long cylinder", "sphere")
ANY_FIN = (st.floats(1.0, 1e4), st.floats(0.1, 400.0), st.floats(1e-4, 0.02), st.floats(1e-3, 0.5))


# -- fins ------------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("efficiency", [fin.straight, fin.pin, fin.triangular, fin.parabolic, fin.cone])
@given(*ANY_FIN)
def test_a_fin_is_never_better_than_its_root(efficiency, coefficient, conductivity, thickness, length):
    value = efficiency(coefficient, conductivity, thickness, length)
    assert 0.0 < value <= 1.0
    assert efficiency(2.0 * coefficient, conductivity, thickness, length) <= value


@given(*ANY_FIN, st.floats(1.001, 20.0))
def test_a_ring_is_never_better_than_its_root(coefficient, conductivity, thickness, diameter, ratio):
    assert 0.0 < fin.annular(coefficient, conductivity, thickness, diameter, ratio) <= 1.0 + 1e-9


@given(st.floats(10.0, 1000.0), st.floats(1e-3, 1e-2))
def test_a_ring_on_a_large_tube_is_straight(coefficient, length):
    """Both are lengthened by half the thickness."""
    ring = fin.annular(coefficient, 200.0, 1e-3, 100.0, 1.0 + 2.0 * length / 100.0)
    assert ring == pytest.approx(fin.straight(coefficient, 200.0, 1e-3, length), rel=1e-3)


@given(st.floats(1.2, 3.0), st.floats(0.1, 1.5))
def test_rings_beside_schmidt(ratio, number):
    """Schmidt, Refrig. Eng. 57 (1949) 351: tanh(m·ri·φ)/(m·ri·φ), φ = (ρ − 1)(1 + 0.35 ln ρ), within about 1 %."""
    radius, thickness = 0.01, 1e-7
    m = number / (radius * (ratio - 1.0))
    effective = number * (1.0 + 0.35 * math.log(ratio))
    exact = fin.annular(m * m * 100.0 * thickness, 200.0, thickness, 2.0 * radius, ratio)
    assert exact == pytest.approx(math.tanh(effective) / effective, rel=0.02)


def test_a_ring_inside_its_tube_is_refused():
    with pytest.raises(CellfuncsError, match="beyond the tube"):
        fin.annular(10.0, 200.0, 1e-3, 0.02, 0.5)


def conducted(area, surface, coefficient, conductivity, length, cells=4000):
    """Efficiency of a fin of any shape by balances over thin slices, the root at 0; areas of the place along it."""
    from scipy.linalg import solve_banded

    step = length / cells
    edges, middles = np.linspace(0.0, length, cells + 1), (np.arange(cells) + 0.5) * step
    along = conductivity * area(edges) / step
    along[0] *= 2.0  # from the root to the middle of the first slice
    along[-1] = 0.0  # nothing leaves through the tip
    lost = coefficient * surface(middles) * step
    rows = np.zeros((3, cells))
    rows[0, 1:], rows[1], rows[2, :-1] = -along[1:-1], along[:-1] + along[1:] + lost, -along[1:-1]
    source = np.zeros(cells)
    source[0] = along[0]
    warmth = solve_banded((1, 1), rows, source)
    return np.sum(lost * warmth) / np.sum(lost)


@pytest.mark.parametrize("coefficient", [20.0, 200.0, 2000.0])
def test_fins_beside_balances_over_slices(coefficient):
    """Thin fins: the surface of both sides, cross-sections by their shapes."""
    k, t, length = 50.0, 1e-3, 0.03
    x = {
        "triangular": (lambda z: t * (1 - z / length), lambda z: 2.0 + 0 * z),
        "parabolic": (lambda z: t * (1 - z / length) ** 2, lambda z: 2.0 + 0 * z),
        "cone": (lambda z: math.pi / 4 * (t * (1 - z / length)) ** 2, lambda z: math.pi * t * (1 - z / length)),
    }
    for name, shape in x.items():
        wanted = conducted(*shape, coefficient, k, length)
        assert getattr(fin, name)(coefficient, k, t, length) == pytest.approx(wanted, rel=2e-4)


@pytest.mark.parametrize(("coefficient", "ratio"), [(20.0, 1.5), (200.0, 2.0), (500.0, 4.0)])
def test_a_ring_beside_balances_over_slices(coefficient, ratio):
    k, t, inner = 50.0, 1e-3, 0.02
    length = inner * (ratio - 1.0)
    wanted = conducted(
        lambda z: 2 * math.pi * (inner + z) * t, lambda z: 4 * math.pi * (inner + z), coefficient, k, length
    )
    outer = 2.0 * inner * ratio - t  # the method lengthens the fin by half its thickness for its edge
    assert fin.annular(coefficient, k, t, 2.0 * inner, outer / (2.0 * inner)) == pytest.approx(wanted, rel=2e-4)


# -- layers ----------------------------------------------------------------------------------------------------------


@given(st.floats(0.01, 1.0), st.floats(1.0, 50.0), st.floats(1e-3, 1e-2))
def test_a_pipe_loses_most_at_its_critical_radius(conductivity, coefficient, inner):
    """Heat a metre of pipe for one kelvin: the layer and the film in series, on the outer surface."""
    critical = layers.critical_radius_cylinder(conductivity, coefficient)

    def loss(radius):
        wall = layers.cylindrical(2.0 * radius, radius / inner, conductivity)
        return 2.0 * math.pi * radius / (wall + 1.0 / coefficient)

    if critical > 1.1 * inner:
        assert loss(critical) >= max(loss(0.95 * critical), loss(1.05 * critical))


@given(st.floats(0.01, 1.0), st.floats(1.0, 50.0))
def test_a_sphere_loses_most_at_its_critical_radius(conductivity, coefficient):
    critical = layers.critical_radius_sphere(conductivity, coefficient)

    def loss(radius):
        wall = layers.spherical(2.0 * radius, radius / (0.5 * critical), conductivity)
        return 4.0 * math.pi * radius**2 / (wall + 1.0 / coefficient)

    assert loss(critical) >= max(loss(0.95 * critical), loss(1.05 * critical))


@given(st.floats(1.0, 1e4), st.floats(1.0, 1e4), st.floats(0.0, 1e-2), st.floats(0.0, 1e-2))
def test_the_overall_coefficient_is_below_each(one, other, wall, fouling):
    whole = layers.overall(one, other, wall, fouling)
    assert whole <= min(one, other)
    assert whole == pytest.approx(layers.overall(other, one, wall, 0.0, fouling), rel=1e-12)


# -- transients ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("shape", SHAPES)
@settings(deadline=None)
@given(st.floats(-3.0, 4.0), st.floats(-4.0, 1.5), st.floats(0.0, 1.0))
def test_a_body_goes_one_way(shape, log_biot, log_fourier, place):
    biot, fourier = 10.0**log_biot, 10.0**log_fourier
    ratio = transient.ratio_at(shape, biot, fourier, place)
    assert -1e-12 <= ratio <= 1.0 + 1e-10
    assert transient.ratio_at(shape, biot, 1.5 * fourier, place) <= ratio + 1e-12
    assert transient.ratio_at(shape, biot, fourier, 0.5 * place) >= ratio - 1e-12
    assert -1e-10 <= transient.heat_part(shape, biot, fourier) <= 1.0


@pytest.mark.parametrize(("shape", "power"), [*zip(SHAPES, (0, 1, 2), strict=True)])
@pytest.mark.parametrize(("biot", "fourier"), [(0.3, 0.2), (5.0, 0.02), (100.0, 0.5)])
def test_heat_given_off_is_what_the_profile_lacks(shape, power, biot, fourier):
    nodes, weights = np.polynomial.legendre.leggauss(40)
    places, weights = 0.5 * (nodes + 1.0), 0.5 * weights
    profile = transient.ratio_at(shape, biot, fourier, places)
    mean = (power + 1.0) * np.sum(weights * profile * places**power)
    assert transient.heat_part(shape, biot, fourier) == pytest.approx(1.0 - mean, abs=1e-10)


@pytest.mark.parametrize("biot", [1.0, 30.0, 1000.0])
@pytest.mark.parametrize("fourier", [1e-5, 1e-4, 1e-3])
def test_early_on_a_wall_is_a_semi_infinite_solid(biot, fourier):
    """The other face is too far to matter: the series against erfc and e^x²·erfc (an exact solution of its own)."""
    places = np.array([1.0, 0.99, 0.95, 0.9])
    depth, on_surface = (1.0 - places) / (2.0 * math.sqrt(fourier)), biot * math.sqrt(fourier)
    wanted = 1.0 - transient.deep_convection(depth, on_surface)
    assert transient.ratio_at("plane wall", biot, fourier, places) == pytest.approx(wanted, abs=1e-11)


@given(st.floats(0.05, 0.25), st.floats(0.5, 1.0))
def test_a_sphere_with_a_sudden_surface_beside_its_early_solution(fourier, place):
    """Carslaw and Jaeger's images of the sphere, (1/r) Σ (erfc((2n+1−r)/(2√Fo)) − erfc((2n+1+r)/(2√Fo)))."""
    from scipy.special import erfc

    far = 2.0 * np.arange(20) + 1.0
    images = erfc((far - place) / (2 * math.sqrt(fourier))) - erfc((far + place) / (2 * math.sqrt(fourier)))
    assert transient.ratio_at("sphere", 1e12, fourier, place) == pytest.approx(1.0 - images.sum() / place, abs=1e-9)


@pytest.mark.parametrize(("shape", "volume_over_surface"), [*zip(SHAPES, (1.0, 0.5, 1.0 / 3.0), strict=True)])
def test_a_good_conductor_is_lumped(shape, volume_over_surface):
    biot, fourier = 1e-5, 3e4
    wanted = transient.lumped(biot * volume_over_surface, fourier / volume_over_surface**2)
    assert transient.ratio_at(shape, biot, fourier, 0.0) == pytest.approx(wanted, rel=1e-4)


@pytest.mark.parametrize("shape", SHAPES)
def test_columns_of_bodies(shape):
    biot, fourier = np.geomspace(1e-3, 1e6, 30), np.geomspace(1e-4, 10.0, 30)
    got = transient.ratio_at(shape, biot, fourier, 0.3)
    for k in range(30):
        assert got[k] == pytest.approx(transient.ratio_at(shape, float(biot[k]), float(fourier[k]), 0.3), abs=1e-13)
    table = transient.ratio_at(shape, biot[:, None], fourier[None, :], 0.3)
    assert table.shape == (30, 30)
    assert np.diag(table) == pytest.approx(got, abs=1e-13)


def test_too_soon_is_said():
    with pytest.raises(OutOfRange, match="semi-infinite"):
        transient.ratio_at("sphere", 1.0, 1e-9, 0.0)
    with pytest.raises(OutOfRange, match="plane wall"):
        transient.ratio_at("cube", 1.0, 1.0, 0.0)


@given(st.floats(0.0, 5.0), st.floats(0.0, 1e3))
def test_the_deep_solid_warms_less_with_depth_and_film(depth, surface_biot):
    with_film = transient.deep_convection(depth, surface_biot)
    assert -1e-15 <= with_film <= transient.deep_temperature(depth) + 1e-15
    assert transient.deep_flux(depth) >= -1e-15
