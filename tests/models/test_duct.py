"""The solved duct: exact solutions with spectral decay, closed balances, limits, and what it refuses."""

import math
import warnings

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.special import j1, jn_zeros

from cellfuncs.errors import CellfuncsError, NoModel, OutOfRange, UnknownName
from cellfuncs.models.duct import UPSTREAM, DuctProblem, DuctSolution, effect, solve
from cellfuncs.models.duct_matching import stretches
from cellfuncs.models.duct_profile import Profile, laminar
from cellfuncs.models.duct_section import section

PLUG = Profile(np.ones_like, np.ones_like, np.ones_like, lambda c: 16.0 * c, 4.0)
PLACES = np.array([0.02, 0.1])


def plug_exact(peclet, places, upstream):
    """Bulk temperature of plug flow in a tube, wall stepping to 1: Bessel series, exact with conduction along."""
    roots = jn_zeros(0, 400)
    epsilon = 1.0 / peclet**2
    root = np.sqrt(1.0 + 16.0 * epsilon * roots**2)
    decay = 8.0 * roots**2 / (1.0 + root)  # of λ + ... : −λ + 4j² − ελ² = 0
    share = 1.0 if upstream == "fixed inlet" else (1.0 + root) / (2.0 * root)
    return 1.0 - np.exp(-np.outer(places, decay)) @ (4.0 / roots**2 * share)


@pytest.mark.parametrize("upstream", ["fixed inlet", "wall at inlet temperature"])
@pytest.mark.parametrize("peclet", [0.5, 10.0, 300.0])
def test_spectral_decay(peclet, upstream):
    """Errors against an exact solution fall by orders of magnitude for a few more polynomials."""
    exact = plug_exact(peclet, PLACES, upstream)
    errors = []
    for terms in (6, 10, 14, 24):
        part = stretches(section(PLUG, terms, 3), "temperature", upstream, 1.0 / peclet, math.inf)[-1]
        errors.append(np.abs(part.read("bulk", PLACES)[:, 0] - exact).max())
    assert errors[3] < 3e-9
    for more, fewer, factor in ((1, 0, 0.2), (2, 1, 0.2), (3, 2, 0.05)):
        assert errors[more] < max(factor * errors[fewer], 1e-12)


def test_plug_flow_without_conduction():
    roots = jn_zeros(0, 400)
    exact = 1.0 - np.exp(-np.outer(PLACES, 4.0 * roots**2)) @ (4.0 / roots**2)
    part = stretches(section(PLUG, 24, 3), "temperature", "adiabatic", 0.0, math.inf)[0]
    np.testing.assert_allclose(part.read("bulk", PLACES)[:, 0], exact, rtol=1e-12)
    assert abs(j1(roots[0])) > 0  # the series' own weights 2/(j·J1) integrate to 4/j²


@pytest.mark.parametrize("peclet", [0.3, 3.0, 30.0])
def test_one_dimension(peclet):
    """Plug flow with a flux from x = 0 on: the bulk obeys dθ/dx* − θ''/Pe² = 4 there, and is exact before and after."""
    before, after = stretches(section(PLUG, 24, 3), "flux", "adiabatic", 1.0 / peclet, math.inf)
    x = np.array([0.1, 1.0, 3.0]) / peclet**2
    np.testing.assert_allclose(before.read("bulk", -x)[:, 0], 4 / peclet**2 * np.exp(-x * peclet**2), rtol=1e-9)
    np.testing.assert_allclose(after.read("bulk", x)[:, 0], 4 * x + 4 / peclet**2, rtol=1e-11)


def problems():
    return st.builds(
        DuctProblem,
        section=st.sampled_from(["tube", "plates"]),
        heated=st.sampled_from(["both", "one"]),
        wall=st.sampled_from(["temperature", "flux"]),
        power_law=st.sampled_from([0.4, 1.0, 1.6]),
        peclet=st.one_of(st.none(), st.floats(-1, 5).map(lambda e: 10.0**e)),
        heated_length=st.one_of(st.just(math.inf), st.floats(-2, 1).map(lambda e: 10.0**e)),
        upstream=st.sampled_from(UPSTREAM),
    )


@given(problems(), st.floats(-50, 50), st.floats(-5, 5), st.floats(0, 1))
def test_the_balance_closes(problem, brinkman, source, expansion):
    """What the wall gives between two planes (integrated from local fluxes) and what is made is what is carried off."""
    duct = solve(problem)
    acts = {"brinkman": brinkman, "source": source, "expansion": expansion}
    x0, x1 = (
        (0.2, 0.8) if math.isinf(problem.heated_length) else (0.3 * problem.heated_length, 0.7 * problem.heated_length)
    )
    x, w = np.polynomial.legendre.leggauss(48)
    places = x0 + (x1 - x0) * (x + 1) / 2
    integrated = 0.5 * w @ duct.flux(places, **acts)
    flux = duct.flux(places, **acts)
    assert duct.mean_flux(x0, x1, **acts) == pytest.approx(integrated, rel=1e-9, abs=1e-9 * np.abs(flux).max() + 1e-11)


@pytest.mark.parametrize(("shape", "heated"), [("tube", "both"), ("plates", "both"), ("plates", "one")])
@pytest.mark.parametrize("wall", ["temperature", "flux"])
def test_flux_is_the_slope_at_the_wall(shape, heated, wall):
    """The flux from the balance and the gradient of the temperature itself are two ways to one number."""
    duct = solve(DuctProblem(shape, heated, wall))
    matrices = section(laminar(shape, heated, 1.0), 48, 3)
    slope = matrices.steepness @ stretches(matrices, wall, "adiabatic", 0.0, math.inf)[0].profile(0.05)[1]
    assert duct.flux(0.05) == pytest.approx(slope[0], rel=1e-6)
    assert duct.flux(0.05, drive=0.0, source=1.0) == pytest.approx(slope[2], rel=1e-6, abs=1e-7)


@pytest.mark.parametrize("upstream", UPSTREAM)
@pytest.mark.parametrize("wall", ["temperature", "flux"])
@pytest.mark.parametrize("peclet", [0.5, 20.0, None])
def test_stretches_join(wall, upstream, peclet):
    """Temperature and energy pass the ends of the heated length unbroken; behind a flux, all of it is in the fluid."""
    duct = solve(DuctProblem(wall=wall, upstream=upstream, peclet=peclet, heated_length=0.1))
    just = 0.1 * (1 + 1e-12)
    assert duct.bulk(just) == pytest.approx(duct.bulk(0.1), rel=1e-8)
    assert duct.energy(just) == pytest.approx(duct.energy(0.1), rel=1e-9)
    assert duct.with_error("energy", 0.1)[1] < 1e-7
    if upstream == "adiabatic" and peclet:
        assert duct.bulk(-1e-13) == pytest.approx(duct.bulk(0.0), rel=1e-7)
        if wall == "flux":
            assert duct.bulk(50.0) == pytest.approx(0.4, rel=1e-10)


def test_far_from_a_long_duct_conduction_along_vanishes():
    plain = solve(DuctProblem())
    for upstream in UPSTREAM:
        along = solve(DuctProblem(peclet=1e6, upstream=upstream))
        np.testing.assert_allclose(along.bulk(PLACES), plain.bulk(PLACES), rtol=1e-7)


def test_effect_of_conduction_along_has_the_sign_of_its_inlet():
    """Preheated upstream fluid raises the outlet; a fixed inlet temperature loses to the inlet's plane."""
    plain = solve(DuctProblem())
    raised, error = effect("bulk", (0.05,), (solve(DuctProblem(peclet=50.0)), {}), (plain, {}))
    lowered, _ = effect("bulk", (0.05,), (solve(DuctProblem(peclet=50.0, upstream="fixed inlet")), {}), (plain, {}))
    assert raised > 0 > lowered and error < 1e-6


def test_superposition():
    duct = solve(DuctProblem(peclet=30.0, heated_length=0.3))
    x = np.array([[-0.01, 0.1], [0.2, 0.4]])
    for what in ("bulk", "wall", "energy"):
        read = getattr(duct, what)
        together = read(x, brinkman=0.7, source=-0.2, expansion=0.5)
        alone = read(x) + 0.7 * read(x, drive=0.0, brinkman=1.0, expansion=0.5) - 0.2 * read(x, drive=0.0, source=1.0)
        np.testing.assert_allclose(together, alone, atol=1e-13)
        assert together.shape == x.shape and isinstance(read(0.1), float)


def test_expansion_that_takes_friction_back_leaves_the_bulk_alone():
    """βT = 1: with a wall that takes no heat the bulk keeps its temperature, the wall does not: +μU²/k in a tube."""
    duct = solve(DuctProblem(wall="flux"))
    acts = {"drive": 0.0, "brinkman": 1.0, "expansion": 1.0}
    assert abs(duct.bulk(20.0, **acts)) < 1e-10
    assert duct.wall(20.0, **acts) == pytest.approx(1.0, rel=1e-9)
    plates = solve(DuctProblem("plates", wall="flux"))
    assert plates.wall(20.0, **acts) == pytest.approx(27 / 35, rel=1e-9)


EXTREMES = [1e-6, 1e-3, 0.3, 30.0, 1e4, 1e7, 1e9]


@pytest.mark.parametrize("peclet", EXTREMES)
@pytest.mark.parametrize("upstream", UPSTREAM)
@pytest.mark.parametrize("wall", ["temperature", "flux"])
def test_extremes_answer_or_refuse(peclet, upstream, wall):
    """Finite numbers with a told error, or a refusal; nothing on the way warns."""
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        for length in (1e-12, 1e-3 / peclet, 1.0, 1e12, math.inf):
            duct = solve(DuctProblem(wall=wall, upstream=upstream, peclet=peclet, heated_length=length))
            for x in (-1.0, -1e-9, 1e-14, 0.5 * min(length, 1.0), length, 1e6):
                for brinkman in (0.0, 1e4, -3.0):
                    try:
                        found = [getattr(duct, what)(x, brinkman=brinkman) for what in ("bulk", "wall", "flux")]
                        found += [*duct.with_error("bulk", x, brinkman=brinkman), duct.nusselt(x, brinkman=brinkman)]
                    except CellfuncsError as refused:
                        assert str(refused)
                    else:
                        assert np.isfinite(found).all()
            assert math.isfinite(duct.error)


def test_error_is_told_truly():
    """The told error is above the true one, by a finer solution of the same equations."""
    problem = DuctProblem(peclet=10.0, heated_length=0.2)
    duct = solve(problem)
    x = np.array([-0.02, 0.005, 0.05, 0.15, 0.25])
    found, error = duct.with_error("bulk", x)
    matrices = section(laminar("tube", "both", 1.0), 56, 5)
    finer = stretches(matrices, "temperature", "adiabatic", 0.1, 0.2)
    for place, value, told in zip(x, found, error, strict=True):
        part = next(p for p in finer if p.start <= place <= p.end)
        true = abs(part.read("bulk", np.array([place]))[0, 0] - value)
        assert true <= told + 1e-12 and told < 2e-8


def test_refusals():
    duct = solve(DuctProblem())
    with pytest.raises(OutOfRange, match="infinite at the step"):
        duct.flux(0.0)
    with pytest.raises(OutOfRange, match="two planes"):
        duct.mean_flux(0.1, 0.1)
    with pytest.raises(OutOfRange, match="finite number"):
        duct.bulk(math.nan)
    with pytest.raises(OutOfRange, match="finite numbers"):
        duct.bulk(0.1, brinkman=math.inf)
    with pytest.raises(NoModel, match="duty from that plane is infinite"):
        solve(DuctProblem(peclet=10.0, upstream="fixed inlet")).mean_flux(0.0, 0.1)
    with pytest.raises(OutOfRange, match="no duct before"):
        solve(DuctProblem(peclet=10.0, upstream="fixed inlet")).bulk(-0.1)
    for wrong in (0.0, -1.0, 1e-7, 1e10, math.nan):
        with pytest.raises(OutOfRange):
            solve(DuctProblem(peclet=wrong))
    for wrong in (0.0, -1.0, math.nan):
        with pytest.raises(OutOfRange):
            solve(DuctProblem(heated_length=wrong))
    with pytest.raises(OutOfRange):
        solve(DuctProblem(power_law=0.01)).bulk(0.1)
    with pytest.raises(UnknownName):
        solve(DuctProblem("square")).bulk(0.1)
    with pytest.raises(UnknownName):
        solve(DuctProblem(upstream="cold"))
    with pytest.raises(NoModel, match="same temperature"):
        duct.nusselt(0.1, drive=0.0)


def test_an_effect_too_small_for_its_error_is_refused():
    """A made-up coarse solution that is a thousandth off: an effect of a tenth of that is no answer."""
    duct = solve(DuctProblem(peclet=10.0))

    class Off(DuctSolution):
        def bulk(self, x, **acts):
            return super().bulk(x, **acts) * 1.001

    fake = DuctSolution(duct.problem, fine=True)
    fake.coarse = Off(duct.problem, fine=True)
    with pytest.raises(NoModel, match="hundredth"):
        effect("bulk", (0.1,), (fake, {"brinkman": 1e-5}), (duct, {}))


@pytest.mark.parametrize(("reynolds", "prandtl"), [(4e3, 1e-3), (1e5, 0.7), (1e6, 500.0), (5e6, 1e3), (4e3, 1e3)])
@pytest.mark.parametrize("section_name", ["tube", "plates"])
def test_turbulent_corners_are_resolved(reynolds, prandtl, section_name):
    """At every corner of its range the model's own error stays far below its physics."""
    for wall in ("temperature", "flux"):
        duct = solve(DuctProblem(section_name, wall=wall, reynolds=reynolds, prandtl=prandtl))
        x = np.array([1.0, 30.0]) / (reynolds * prandtl)
        for what in ("bulk", "flux", "nusselt"):
            found, error = duct.with_error(what, x, brinkman=1e-3)
            assert (error < 2e-3 * np.abs(found)).all()


def test_turbulent_refusals():
    for wrong in (
        DuctProblem(reynolds=2e3, prandtl=1.0),
        DuctProblem(reynolds=1e5, prandtl=1e4),
        DuctProblem(reynolds=1e5),
        DuctProblem(reynolds=1e5, prandtl=1.0, peclet=10.0),
    ):
        with pytest.raises(OutOfRange):
            solve(wrong).bulk(0.1)
    for wrong in (
        DuctProblem(reynolds=1e5, prandtl=1.0, power_law=0.5),
        DuctProblem("plates", "one", reynolds=1e5, prandtl=1.0),
    ):
        with pytest.raises(NoModel):
            solve(wrong).bulk(0.1)
