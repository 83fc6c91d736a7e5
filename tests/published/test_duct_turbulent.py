"""The solved turbulent duct against published correlations, within the scatter that they have themselves."""

import math

import numpy as np
import pytest
from scipy.integrate import cumulative_simpson, simpson

from cellfuncs.models.duct import DuctProblem, recovery_rise, solve
from cellfuncs.models.duct_eddy import eddy, friction_scale, turbulent

FAR = 10.0


def filonenko(reynolds):
    """Darcy's f of a smooth tube (Filonenko 1954, as in Petukhov 1970)."""
    return (1.82 * math.log10(reynolds) - 1.64) ** -2


def gnielinski(reynolds, prandtl):
    """Gnielinski 1976; most data within 20 %, those of newer work within 10 % (from memory)."""
    f = filonenko(reynolds) / 8
    return f * (reynolds - 1000) * prandtl / (1 + 12.7 * math.sqrt(f) * (prandtl ** (2 / 3) - 1))


def developed(reynolds, prandtl, wall="flux"):
    return solve(DuctProblem(wall=wall, reynolds=reynolds, prandtl=prandtl)).nusselt(FAR)


@pytest.mark.parametrize(("reynolds", "scatter"), [(1e4, 0.045), (3e4, 0.02), (1e5, 0.02), (1e6, 0.02), (5e6, 0.02)])
def test_friction(reynolds, scatter):
    found = 8.0 / friction_scale("tube", reynolds)[1] ** 2
    assert found == pytest.approx(filonenko(reynolds), rel=scatter)
    heat = solve(DuctProblem(reynolds=reynolds, prandtl=1.0)).friction_heat
    assert heat == pytest.approx(found * reynolds / 2, rel=1e-6)  # the mean of friction heat is the pressure's work


def test_friction_of_plates():
    """Plates follow the tube's law on the hydraulic diameter within a tenth (Beavers, Sparrow and Lloyd 1971)."""
    for reynolds in (1e4, 1e5, 1e6):
        assert 8.0 / friction_scale("plates", reynolds)[1] ** 2 == pytest.approx(filonenko(reynolds), rel=0.1)


def test_velocity_near_the_wall():
    """u⁺ = y⁺ at the wall, 2.44 ln y⁺ + 5.0 in the logarithmic part, half a unit either way (Coles 1968, 1/0.41, 5)."""
    half, mean = friction_scale("tube", 1e6)
    profile = turbulent("tube", "both", 1e6, 1.0)
    for wall_units, expected, within in ((1.0, 1.0, 0.01), (100.0, 2.44 * math.log(100) + 5, 0.6), (500.0, 20.16, 0.6)):
        c = np.array([(1.0 - wall_units / half) ** 2])
        assert profile.velocity(c)[0] * mean == pytest.approx(expected, abs=within)


def test_eddies_at_the_wall():
    """Cubic in y⁺, the factor near the 0.0009 of Notter and Sleicher 1971 (from memory), the middle κ·y⁺."""
    assert eddy(1.0, 0.01) / 1e-6 == pytest.approx(0.41 / 17**2, rel=1e-3)
    assert 0.0008 < 0.41 / 17**2 < 0.0016
    assert eddy(1.0, 200.0) == pytest.approx(0.41 * 200, rel=1e-4)


@pytest.mark.parametrize("prandtl", [0.7, 1.0, 2.0, 6.0, 20.0])
@pytest.mark.parametrize("reynolds", [1e4, 3e4, 1e5, 3e5, 1e6])
def test_gnielinski(reynolds, prandtl):
    assert developed(reynolds, prandtl) == pytest.approx(gnielinski(reynolds, prandtl), rel=0.1)


@pytest.mark.parametrize("prandtl", [100.0, 500.0])
@pytest.mark.parametrize("reynolds", [1e4, 3e4, 1e5, 1e6])
def test_gnielinski_of_oils(reynolds, prandtl):
    assert developed(reynolds, prandtl) == pytest.approx(gnielinski(reynolds, prandtl), rel=0.2)


@pytest.mark.parametrize("prandtl", [0.7, 6.0, 100.0, 500.0])
@pytest.mark.parametrize("reynolds", [1e4, 1e5, 1e6])
def test_sleicher_and_rouse(reynolds, prandtl):
    """Sleicher and Rouse 1975: Nu = 5 + 0.015·Re^a·Pr^b, 0.1 < Pr < 1e5, within 15 % (from memory)."""
    a, b = 0.88 - 0.24 / (4 + prandtl), 1 / 3 + 0.5 * math.exp(-0.6 * prandtl)
    assert developed(reynolds, prandtl) == pytest.approx(5 + 0.015 * reynolds**a * prandtl**b, rel=0.15)


@pytest.mark.parametrize("prandtl", [0.005, 0.01, 0.025])
@pytest.mark.parametrize("reynolds", [1e4, 3e4, 1e5, 3e5, 1e6])
def test_liquid_metals(reynolds, prandtl):
    """Notter and Sleicher 1972, 0.004 < Pr < 0.1: 4.8 and 6.3 + 0.0156 and 0.0167·Re^0.85·Pr^0.93; within 15 %
    (measurements scatter by more)."""
    power = reynolds**0.85 * prandtl**0.93
    assert developed(reynolds, prandtl, "temperature") == pytest.approx(4.8 + 0.0156 * power, rel=0.15)
    assert developed(reynolds, prandtl, "flux") == pytest.approx(6.3 + 0.0167 * power, rel=0.15)


def test_entrance():
    """Mean over developed Nu of air at L/D = 10 and 20, Re 5e4: 1 + 1.4·D/L to 1 + 6·D/L, as entrances differ
    (Mills 1962, Gnielinski's 1 + (D/L)^⅔ between; common practice)."""
    reynolds, prandtl = 5e4, 0.7
    duct = solve(DuctProblem(reynolds=reynolds, prandtl=prandtl))
    for length in (10.0, 20.0):
        x = length / (reynolds * prandtl)
        mean = -math.log1p(-duct.bulk(x)) / (4 * x)
        over = mean / duct.nusselt(FAR)
        assert 1 + 0.9 / length < over < 1 + length ** (-2 / 3)


@pytest.mark.parametrize(
    ("reynolds", "prandtl", "factor", "within"),
    [
        (1e5, 0.71, 0.89, 0.1),  # McAdams, Nicolai and Keenan 1946: 0.87 to 0.91 in tubes (from memory)
        (1e6, 0.71, 0.89, 0.05),
        (1e5, 2.0, 1.16, 0.03),  # computed with van Driest's mixing length, an independent profile
        (1e5, 6.0, 1.47, 0.03),
        (1e5, 20.0, 2.0, 0.06),
        (1e4, 0.025, 0.23, 0.05),
        (1e6, 0.1, 0.73, 0.02),
    ],
)
def test_recovery(reynolds, prandtl, factor, within):
    rise, error = recovery_rise("tube", reynolds, prandtl)
    assert 2 * prandtl * rise == pytest.approx(factor, rel=within)
    assert error < 1e-6 * rise


def test_conduction_along_matters_for_metals_alone():
    """The shift of the bulk of a flux is the conducted share, (k + k_t mean)·4/Pe² of qD/k; at Pr 0.7 it is nothing."""
    for reynolds, prandtl in ((1e4, 0.005), (1e4, 0.7)):
        peclet = reynolds * prandtl
        duct = solve(DuctProblem(wall="flux", reynolds=reynolds, prandtl=prandtl, peclet=peclet))
        shift = duct.bulk(FAR) - 4 * FAR
        assert shift > 4 / peclet**2
        assert (shift < 1e-5) == (prandtl > 0.1)


@pytest.mark.parametrize(("reynolds", "prandtl"), [(1e4, 0.01), (1e5, 0.7), (1e5, 10.0), (1e6, 100.0)])
def test_integral_of_lyon(reynolds, prandtl):
    """Lyon 1951: 1/Nu = 2∫(∫u·R·dR)²/(R(1 + k_t/k))·dR on the same profile, by Simpson's rule on crowded points."""
    profile = turbulent("tube", "both", reynolds, prandtl)
    t = np.linspace(0.02, 1.0, 20_001)[:-1]
    c = 1.0 - t**5
    share = np.concatenate([[0.0], cumulative_simpson(profile.velocity(c), x=1.0 - c)])  # of the flow, from the wall
    inner = 1.0 - (share + profile.velocity(c[:1]) * (1.0 - c[0]) / 2)
    integrand = inner**2 / (c * profile.conductivity(c))  # 2(∫uRdR)²/R dR = (inner²/4)·dc/c
    resistance = simpson(integrand, x=1.0 - c) / 4.0
    near_wall, near_middle = (1.0 - c[0]) / 4.0, c[-1] * integrand[-1] / 8.0
    assert developed(reynolds, prandtl) == pytest.approx(1.0 / (resistance + near_wall + near_middle), rel=1e-6)
