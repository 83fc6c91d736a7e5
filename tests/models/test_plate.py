"""The plate's layer: exact cases, asymptotes, decay of the error, and an independent solution."""

import math

import numpy as np
import pytest

from cellfuncs.errors import OutOfRange
from cellfuncs.models import plate as model


def test_at_prandtl_one_heat_and_momentum_are_alike():
    found = model.plate(1.0)
    assert found.nusselt == pytest.approx(model.blasius().shear, rel=1e-13)
    assert found.recovery == pytest.approx(1.0, rel=1e-13)


def test_thin_layers_follow_leveque():
    """Pr → ∞: u = shear·y; uniform temperature (shear/12)^⅓/Γ(4/3), Lévêque 1928 by way of Pohlhausen 1921."""
    limit = (model.blasius().shear / 12.0) ** (1 / 3) / math.gamma(4 / 3)
    assert model.plate(1e4).nusselt / 1e4 ** (1 / 3) == pytest.approx(limit, rel=2e-5)


def test_thick_layers_follow_slug_flow():
    """Pr → 0: u = U; 1/√π uniform temperature, √π/2 uniform flux, times √Pr (Carslaw and Jaeger)."""
    near = [model.plate(pr).nusselt / math.sqrt(pr) * math.sqrt(math.pi) for pr in (1e-2, 1e-3)]
    assert 0.9 < near[0] < near[1] < 1 and near[1] > 0.97
    near = [model.plate(pr).nusselt_flux / math.sqrt(pr) * 2 / math.sqrt(math.pi) for pr in (1e-2, 1e-3)]
    assert 0.85 < near[0] < near[1] < 1


@pytest.mark.parametrize("prandtl", [1e-3, 0.05, 0.71, 7.0, 300.0, 1e4])
def test_the_error_falls_by_orders_with_every_few_points(prandtl):
    exact = np.array(model._constants(prandtl, 24))
    errors = [np.abs(np.array(model._constants(prandtl, count)) / exact - 1).max() for count in (4, 7, 10)]
    rounding = 1e-9  # where the thermal layer is far thicker than Blasius' a few points are enough
    assert errors[1] < max(errors[0] / 10, rounding) and errors[2] < max(errors[1] / 8, rounding), errors
    assert errors[2] < 1e-5
    assert model.plate(prandtl).error < 1e-8


@pytest.mark.parametrize("prandtl", [0.05, 0.71, 7.0])
def test_an_independent_solution_of_the_boundary_value_problem_agrees(prandtl):
    from scipy.integrate import solve_bvp

    def equations(eta, y):  # f, f', f''; θ, θ'; φ, φ'; recovery and its slope
        f, slope, shear, _, heat, phi, rise, _, warm = y
        half = prandtl / 2
        return np.array([
            slope, shear, -0.5 * f * shear, heat, -half * f * heat, rise, -half * (f * rise - slope * phi), warm,
            -half * f * warm - 2 * prandtl * shear**2,
        ])  # fmt: skip

    def ends(a, b):
        return np.array([a[0], a[1], b[1] - 1, a[3] - 1, b[3], a[6] + 1, b[5], a[8], b[7]])

    end = 14.0 + 10.0 / math.sqrt(prandtl)
    eta = np.linspace(0, end, 300)
    start = np.zeros((9, 300))
    start[0], start[1], start[2] = eta - 1.7 * np.tanh(eta), np.tanh(0.33 * eta), 0.33 * np.exp(-eta)
    start[3], start[4], start[5] = np.exp(-eta), -np.exp(-eta), np.exp(-eta)
    found = solve_bvp(equations, ends, eta, start, tol=1e-9, max_nodes=50_000)
    assert found.success
    ours = model.plate(prandtl)
    assert -found.sol(0)[4] == pytest.approx(ours.nusselt, rel=1e-6)
    assert 1 / found.sol(0)[5] == pytest.approx(ours.nusselt_flux, rel=1e-6)
    assert found.sol(0)[7] == pytest.approx(ours.recovery, rel=1e-6)
    assert found.sol(0)[2] == pytest.approx(model.blasius().shear, rel=1e-7)


def test_means():
    found = model.plate(0.71)
    assert found.mean_nusselt == 2 * found.nusselt and found.mean_nusselt_flux == 1.5 * found.nusselt_flux


@pytest.mark.parametrize("prandtl", [0.0, 9e-4, 1.1e4, -1.0, math.nan, math.inf])
def test_other_fluids_are_refused(prandtl):
    with pytest.raises(OutOfRange, match="solved for Pr"):
        model.plate(prandtl)


def test_inside_the_range_all_is_smooth_and_finite():
    values = [model.plate(10 ** (k / 4)) for k in range(-12, 17)]
    for name in ("nusselt", "nusselt_flux", "recovery"):
        numbers = [getattr(v, name) for v in values]
        assert all(math.isfinite(n) and n > 0 for n in numbers)
        assert numbers == sorted(numbers)
