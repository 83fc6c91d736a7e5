"""A film that is still warming: an independent march, limits, the error it tells."""

import math
from itertools import pairwise

import numpy as np
import pytest

from cellfuncs.errors import NoModel
from cellfuncs.models.developing_film import _parts, developing


def _march(place: float, cells: int, steps: int) -> float:
    """Peak over μU²/(8k) by implicit finite differences, first order along and second across."""
    from scipy.linalg import solve_banded

    y = np.linspace(0.0, 1.0, cells + 1)[1:-1]
    theta = np.zeros(cells - 1)
    across, along = cells**2, y * steps / place
    bands = np.zeros((3, cells - 1))
    bands[0, 1:] = bands[2, :-1] = -across
    bands[1] = 2.0 * across + along
    for _ in range(steps):
        theta = solve_banded((1, 1), bands, along * theta + 1.0)
    return 8.0 * theta.max()


@pytest.mark.parametrize("place", [0.01, 0.05, 0.2])
def test_an_independent_march_comes_to_it_by_its_order(place):
    exact = developing(place).peak
    off = [abs(_march(place, 400, steps) - exact) for steps in (100, 200, 400)]
    assert off[0] / off[1] == pytest.approx(2.0, rel=0.15) and off[1] / off[2] == pytest.approx(2.0, rel=0.25)
    assert off[2] < 2e-3


def test_the_error_falls_spectrally_and_is_told():
    exact = _parts(0.02, 44)[0]
    errors = [abs(_parts(0.02, count)[0] - exact) for count in (6, 10, 14)]
    assert all(later < earlier / 20 for earlier, later in pairwise(errors)), errors
    found = developing(0.02)
    assert abs(found.peak - exact) <= found.error < 1e-8


def test_a_long_film_is_developed_and_a_short_one_warms_evenly():
    assert developing(3.0).peak == pytest.approx(1.0, abs=1e-12) and developing(1e9).low_flux == 1.0
    # no heat has crossed: the middle warms as Br·x*/y, most where the stream is slow
    short = developing(2e-3)
    assert 0.0 < short.high_flux < short.low_flux < 0.3


def test_the_heat_that_is_made_leaves_or_is_carried_off():
    """d/dx*(∫y·θ) = Br − fluxes: over a step, against the fluxes at its middle."""
    before, middle, after = (developing(x) for x in (0.099, 0.1, 0.101))
    assert before.peak < middle.peak < after.peak
    assert (middle.low_flux + middle.high_flux) / 2.0 < 1.0


@pytest.mark.parametrize("place", [0.0, -1.0, math.nan, math.inf])
def test_what_is_no_place_is_refused(place):
    with pytest.raises(NoModel):
        developing(place)
