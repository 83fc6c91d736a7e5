"""The vertical plate in a still fluid: integral balances, decay of the error, an independent solution."""

import math

import numpy as np
import pytest

from cellfuncs.errors import OutOfRange
from cellfuncs.models import free as model
from cellfuncs.models.chebyshev import nodes

PRANDTL = (1e-3, 1e-2, 0.1, 0.72, 6.0, 100.0, 1e4)


def _integral(layer, values) -> float:
    """∫ over η by Clenshaw-Curtis on the stretched nodes."""
    _, derivative, w = nodes(layer.count)
    return float(w @ (values * (derivative @ layer.eta)))


@pytest.mark.parametrize("wall", [model.UNIFORM_TEMPERATURE, model.UNIFORM_FLUX])
@pytest.mark.parametrize("prandtl", PRANDTL)
def test_the_layer_carries_away_what_the_wall_gives(prandtl, wall):
    """∫u(T − T∞)dy ~ x^(3/4 + 5n/4): (3 + 5n)·Pr·∫f'θ dη = −θ'(0), the energy equation over the layer."""
    layer = model._Layer(prandtl, wall, 110)
    x = model._solved(prandtl, wall, 110)
    f, theta = x[:110], x[110:]
    carried = (3 + 5 * wall) * prandtl * _integral(layer, (layer.first @ f) * theta)
    assert carried == pytest.approx(-float(layer.first[0] @ theta), rel=2e-6)


@pytest.mark.parametrize("source", ["friction", "pressure"])
@pytest.mark.parametrize("prandtl", [0.01, 0.72, 6.0, 100.0])
def test_a_change_keeps_the_energy(prandtl, source):
    """A change that grows as x: (3 + 4)·Pr·∫(f₀'θ₁ + f₁'θ₀) = −θ₁'(0) + ∫source."""
    layer = model._Layer(prandtl, 0.0, 110)
    x = model._solved(prandtl, 0.0, 110)
    f, theta = x[:110], x[110:]
    made = 4 * prandtl * (layer.second @ f) ** 2 if source == "friction" else -4 * prandtl * (layer.first @ f)
    change = layer.perturbed(x, 1.0, made)
    f1, theta1 = change[:110], change[110:]
    carried = 7 * prandtl * _integral(layer, (layer.first @ f) * theta1 + (layer.first @ f1) * theta)
    fed = -float(layer.first[0] @ theta1) + _integral(layer, made)
    assert carried == pytest.approx(fed, rel=1e-5, abs=1e-7)


@pytest.mark.parametrize("prandtl", [0.05, 0.72, 7.0])
def test_the_error_falls_by_orders_with_more_points(prandtl):
    exact = np.array(model._constants(prandtl, 0.0, 100))
    errors = [np.abs(np.array(model._constants(prandtl, 0.0, count)) / exact - 1).max() for count in (20, 32, 44)]
    assert errors[1] < errors[0] / 30 and errors[2] < errors[1] / 30, errors
    assert errors[2] < 1e-5


@pytest.mark.parametrize("prandtl", PRANDTL)
@pytest.mark.parametrize("flux", [False, True])
def test_the_told_error_is_the_true_one_or_more(prandtl, flux):
    found = model.free_plate(prandtl, flux)
    better = model._constants(prandtl, found.wall, 128)
    ours = (found.slope, found.shear, found.friction, found.pressure)
    off = max(abs(a / b - 1) for a, b in zip(ours, better, strict=True))
    assert off <= found.error + 1e-7
    assert found.error < 1e-3


def test_an_independent_solution_of_the_boundary_value_problem_agrees():
    from scipy.integrate import solve_bvp

    pr = 0.72

    def equations(eta, y):
        f, slope, shear, theta, heat = y
        return np.array([slope, shear, 2 * slope**2 - 3 * f * shear - theta, heat, -3 * pr * f * heat])

    eta = np.linspace(0, 24, 400)
    decay = np.exp(-eta / 2)
    start = np.array([0.5 * (1 - np.exp(-eta)), 0.4 * eta * decay**2, 0.7 * decay**2, decay, -0.5 * decay])
    found = solve_bvp(
        equations, lambda a, b: np.array([a[0], a[1], b[1], a[3] - 1, b[3]]), eta, start, tol=1e-9, max_nodes=50_000
    )
    assert found.success
    ours = model.free_plate(pr)
    assert -found.sol(0)[4] == pytest.approx(ours.slope, rel=1e-6)
    assert found.sol(0)[2] == pytest.approx(ours.shear, rel=1e-6)


def test_asymptotes():
    """Pr → ∞: Nu = 0.503·Ra^¼; Pr → 0: Nu = 0.600·(Ra·Pr)^¼ (Le Fevre 1956)."""
    thick, thin = model.free_plate(1e-3), model.free_plate(1e4)
    assert thin.nusselt / 1e4**0.25 == pytest.approx(0.503, rel=4e-3)
    assert thick.nusselt / 1e-3**0.5 == pytest.approx(0.600, rel=2e-2)


def test_means_are_integrals_of_the_local_values():
    x = (np.arange(200_000) + 0.5) / 200_000
    one = model.free_plate(0.72)
    assert one.mean_nusselt / one.nusselt == pytest.approx(np.mean(x**-0.25), rel=1e-3)
    plain, changed = np.mean(x**-0.25), np.mean(x**-0.25 * (1 + one.friction / one.slope * 1e-3 * x))
    assert one.relative_change(1e-3, 0.0, mean=True) == pytest.approx(changed / plain - 1, rel=1e-2)
    flux = model.free_plate(0.72, uniform_flux=True)
    assert flux.mean_nusselt / flux.nusselt == pytest.approx(1 / np.mean(x**0.2), rel=1e-6)
    warmer = np.mean(x**0.2 * (1 + flux.friction * 1e-3 * x)) / np.mean(x**0.2) - 1
    assert flux.relative_change(1e-3, 0.0, mean=True) == pytest.approx(warmer, rel=1e-5)
    cooler = np.mean(x**0.2 * (1 + flux.pressure * 1e-3 * x**0.8)) / np.mean(x**0.2) - 1
    assert flux.relative_change(0.0, 1e-3, mean=True) == pytest.approx(cooler, rel=1e-5)


@pytest.mark.parametrize("prandtl", [0.0, 9e-4, 1.1e4, -1.0, math.nan, math.inf])
def test_other_fluids_are_refused(prandtl):
    with pytest.raises(OutOfRange, match="solved for Pr"):
        model.free_plate(prandtl)
