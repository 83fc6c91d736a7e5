"""Bodies: the exact series against lumped, the first instants, radiation, and heat kept."""

import math

import numpy as np
import pytest

from cellfuncs.errors import NoModel, UnknownName
from cellfuncs.models import body as model

SHAPES = tuple(model.SHAPES)


@pytest.mark.parametrize("shape", SHAPES)
def test_thin_bodies_are_lumped(shape):
    found = model.body(shape, 1e-5, 3e4)
    for value in (found.middle, found.surface, found.mean):
        assert value == pytest.approx(found.lumped, rel=1e-5)


@pytest.mark.parametrize("shape", SHAPES)
def test_the_mean_loses_what_the_surface_gives(shape):
    """d(mean)/dFo = −(surface·L/volume)·Bi·surface ratio, checked over an interval by quadrature."""
    biot = 0.8
    x, w = np.polynomial.legendre.leggauss(20)
    fourier = 0.2 + 0.5 * (x + 1) / 2
    lost = model.SHAPES[shape] * biot * 0.25 * sum(
        weight * model.body(shape, biot, float(at)).surface for at, weight in zip(fourier, w, strict=True)
    )  # fmt: skip
    assert model.body(shape, biot, 0.2).mean - model.body(shape, biot, 0.7).mean == pytest.approx(lost, rel=1e-10)


@pytest.mark.parametrize("biot", [0.01, 1.0, 50.0])
@pytest.mark.parametrize("shape", SHAPES)
def test_the_first_instants_join_the_series_within_their_error(shape, biot):
    near = model._first_instants(shape, biot, 1e-4, 1.0)
    exact = model.body(shape, biot, 1e-4)
    assert exact.middle == pytest.approx(1.0, abs=1e-9)
    assert abs(near.surface - exact.surface) <= near.error
    assert abs(near.mean - exact.mean) <= near.error
    assert exact.error < 1e-12


@pytest.mark.parametrize("shape", SHAPES)
def test_an_independent_solution_agrees(shape):
    """Chebyshev collocation on the half (even powers by symmetry) and the exponential of its matrix."""
    from scipy.linalg import expm

    from cellfuncs.models.chebyshev import nodes

    biot, fourier, curved = 2.0, 0.3, model.SHAPES[shape] - 1.0
    off = []
    for count in (6, 9, 30):
        s, d, _ = nodes(count)  # s = r²: T is smooth in it; d²/dr² + c/r d/dr = 4s d²/ds² + (2 + 2c) d/ds
        operator = 4.0 * s[:, None] * (d @ d) + (2.0 + 2.0 * curved) * d
        edge = 2.0 * d[-1].copy()
        edge[-1] += biot  # −dT/dr = Bi·T
        inner = operator[:-1, :-1] - np.outer(operator[:-1, -1], edge[:-1] / edge[-1])
        ratio = expm(fourier * inner) @ np.ones(count - 1)
        surface = -float(edge[:-1] @ ratio) / edge[-1]
        found = model.body(shape, biot, fourier)
        off.append(max(abs(ratio[0] - found.middle), abs(surface - found.surface)))
    assert off[1] < off[0] and off[2] < 1e-7, off


@pytest.mark.parametrize(
    ("shape", "biot", "fourier", "kind"),
    [
        ("cube", 1.0, 1.0, UnknownName), ("sphere", 0.0, 1.0, NoModel), ("sphere", 1.0, -1.0, NoModel),
        ("sphere", math.nan, 1.0, NoModel), ("sphere", 1.0, math.inf, NoModel),
    ],
)  # fmt: skip
def test_what_has_no_answer_is_refused(shape, biot, fourier, kind):
    with pytest.raises(kind):
        model.body(shape, biot, fourier)


@pytest.mark.parametrize("biot", [1e-9, 1e-3, 1.0, 1e4, 1e9])
@pytest.mark.parametrize("fourier", [1e-12, 1e-6, 1e-3, 1.0, 1e9])
@pytest.mark.parametrize("shape", SHAPES)
def test_extremes_are_finite_and_ordered(shape, biot, fourier):
    found = model.body(shape, biot, fourier)
    assert -1e-12 <= found.surface <= found.mean + found.error + 1e-9 <= found.middle + found.error + 2e-9
    assert math.isfinite(found.error)


def test_a_lumped_body_with_a_source_has_its_closed_form():
    assert model.lumped(1.0, source=0.3).ratio == pytest.approx(0.3 + 0.7 * math.exp(-1.0), rel=1e-15)
    assert model.lumped(1e9, source=0.3).ratio == pytest.approx(0.3)


def test_radiation_alone_follows_its_closed_form():
    """R large: only radiation to cold surroundings, 1/T³ − 1/T₀³ = 3·R·t (T over T∞): separable."""
    rate, level = 1e6, 2.0
    found = model.lumped(1e-6, radiation=rate, level=level)
    expected = (3.0**-3 + 3 * rate * 1e-6) ** (-1 / 3)
    assert 1 + level * found.ratio == pytest.approx(expected, rel=1e-4)
    assert found.error < 1e-6


def test_weak_radiation_is_a_coefficient():
    """Small differences: 4εσT³ adds to h."""
    found = model.lumped(1.0, radiation=0.02, level=1e-4, seen=1.0)
    assert found.ratio == pytest.approx(math.exp(-1.08), rel=1e-4)


def test_radiation_of_a_body_below_absolute_zero_is_refused():
    with pytest.raises(NoModel, match="absolute zero"):
        model.lumped(1.0, radiation=0.1, level=-1.5)


def test_a_sink_below_absolute_zero_is_refused_and_a_hot_one_solved():
    with pytest.raises(NoModel, match="absolute zero"):
        model.lumped(5.0, source=-1e12, radiation=0.3, level=0.002, seen=1.0)
    hot = model.lumped(50.0, source=1e9, radiation=0.3, level=0.002, seen=1.0)
    assert 0.3 * (1 + 0.002 * hot.ratio) ** 4 / 0.002 == pytest.approx(1e9, rel=1e-2)
