"""The marched duct with a viscosity that depends on temperature: closed forms, the solved duct at constant viscosity,
published corrections for it, and what it refuses."""

import math
import warnings

import pytest

from cellfuncs.errors import CellfuncsError, NoModel, OutOfRange, UnknownName
from cellfuncs.models import duct_thinning
from cellfuncs.models.duct import DuctProblem, solve
from cellfuncs.models.duct_thinning import Thinning, ThinningProblem, march


@pytest.mark.parametrize("section", ["tube", "plates"])
@pytest.mark.parametrize("wall", ["temperature", "flux"])
@pytest.mark.parametrize("index", [1.0, 0.4])
def test_constant_viscosity_is_the_solved_duct(section, wall, index):
    """Two ways of solving, which share no equation but the profile; the told error covers the difference."""
    acts = {"brinkman": 0.3, "source": 0.2}
    marched = march(ThinningProblem(section, wall, length=0.1, power_law=index, **acts))
    solved = solve(DuctProblem(section, wall=wall, power_law=index))
    for x in (2e-4, 3e-3, 0.04, 0.1):
        for what in ("bulk", "wall", "flux", "nusselt"):
            found, error = marched.with_error(what, x)
            exact = getattr(solved, what)(x, **acts)
            assert abs(found - exact) <= error + 1e-7 * abs(exact)
            # where wall and bulk are nearly alike Nu has fewer digits
            assert what == "nusselt" or error <= 1e-3 * abs(exact) + 1e-4
        assert marched.read("mean_flux", x) == pytest.approx(solved.mean_flux(0.0, x, **acts), rel=1e-4)
        assert marched.read("gradient", x) == pytest.approx(1.0, rel=1e-12)
        assert marched.read("drop", x) == pytest.approx(1.0, rel=1e-12)


@pytest.mark.parametrize("nahme", [0.5, 3.0, 30.0, 1000.0])
def test_friction_heat_alone_far_downstream(nahme):
    """Tube wall at the inlet's temperature, far downstream, K₀·exp(−bT): the equation in r² is that of a reacting rod
    (Frank-Kamenetskii 1955) with closed form θ = 2 ln((1 + B)/(1 + B·c²)), B = Na/2; the flow then gives a pressure
    gradient 1/(1 + Na/2) of the isothermal one (Sukanek 1971 treats the same limit)."""
    marched = march(ThinningProblem(thinning=1.0, brinkman=nahme, drive=0.0, length=3.0))
    gradient, error = marched.with_error("gradient", 3.0)
    assert gradient == pytest.approx(1.0 / (1.0 + nahme / 2.0), rel=1e-8)
    assert error < 1e-8
    # all the work of pressure leaves through the wall: 4q = −Br·32·gradient
    assert marched.read("flux", 3.0) == pytest.approx(-8.0 * nahme * gradient, rel=1e-7)


@pytest.mark.parametrize("thinning", [0.5, 3.0, -0.5, -3.0])
def test_developed_with_a_flux(thinning):
    """Deissler 1951, Kays and London in Rohsenow, Hartnett and Cho 1998: Nu ~ (μ_w/μ_b)^−0.14 and f ~ (μ_w/μ_b)^0.58
    heated, 0.50 cooled, on properties of the bulk."""
    marched = march(ThinningProblem(wall="flux", thinning=thinning, length=0.5))
    bulk, wall, gradient, nusselt = (marched.read(what, 0.5) for what in ("bulk", "wall", "gradient", "nusselt"))
    log_ratio = -thinning * (wall - bulk)
    exponent = 0.58 if thinning > 0 else 0.50
    assert math.log(gradient * math.exp(thinning * bulk)) / log_ratio == pytest.approx(exponent, abs=0.045)
    assert math.log(nusselt * 11 / 48) / log_ratio == pytest.approx(-0.14, abs=0.016)


@pytest.mark.parametrize("thinning", [-2.0, -1.0, 1.0, 2.0])
@pytest.mark.parametrize("length", [2e-3, 2e-2])
def test_sieder_and_tate(thinning, length):
    """Sieder and Tate 1936: the mean coefficient times (μ_b/μ_w)^0.14, μ_b halfway from inlet to outlet; within 6 %."""
    marched = march(ThinningProblem(thinning=thinning, length=length))
    bulk = marched.read("bulk", length)
    over = math.log1p(-bulk) / math.log1p(-solve(DuctProblem()).bulk(length))
    assert over == pytest.approx(math.exp(0.14 * thinning * (1.0 - bulk / 2.0)), rel=0.06)


def test_heated_and_cooled():
    """A heated liquid flows more easily and takes more heat; cooling is the mirror of a viscosity that rises."""
    constant = solve(DuctProblem()).bulk(0.01)
    heated = march(ThinningProblem(thinning=2.0, length=0.01))
    cooled = march(ThinningProblem(thinning=2.0, drive=-1.0, length=0.01))
    rising = march(ThinningProblem(thinning=-2.0, length=0.01))
    assert heated.read("bulk", 0.01) > constant > -cooled.read("bulk", 0.01)
    assert heated.read("drop", 0.01) < 1.0 < cooled.read("drop", 0.01)
    assert rising.read("bulk", 0.01) == pytest.approx(-cooled.read("bulk", 0.01), rel=1e-12)


@pytest.mark.parametrize(
    "problem",
    [
        ThinningProblem(thinning=2.0, length=0.03, brinkman=0.5),
        ThinningProblem("plates", thinning=-1.5, length=0.01),
        ThinningProblem("plates", "flux", thinning=3.0, length=0.3, power_law=0.5),
    ],
)
def test_error_is_told_truly(problem, monkeypatch):
    """The told error covers the difference from twice the steps and a third more polynomials."""
    answers = ("bulk", "wall", "flux", "gradient", "drop")
    told = {what: march(problem).with_error(what, problem.length) for what in answers}
    monkeypatch.setattr(duct_thinning, "_STEPS", 320)
    monkeypatch.setattr(duct_thinning, "_TERMS", 40)
    better = Thinning(problem)
    for what, (found, error) in told.items():
        assert abs(better.read(what, problem.length) - found) <= error + 1e-10


@pytest.mark.parametrize("thinning", [-40.0, -5.0, 5.0, 25.0, 1e3])
@pytest.mark.parametrize("brinkman", [-3.0, 0.0, 1e4])
@pytest.mark.parametrize("length", [1e-7, 0.1, 1e6])
def test_extremes_answer_or_refuse(thinning, brinkman, length):
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        try:
            found = [
                number
                for what in ("bulk", "wall", "flux", "gradient", "drop", "mean_flux")
                for number in march(ThinningProblem(thinning=thinning, brinkman=brinkman, length=length)).with_error(
                    what, length
                )
            ]
        except CellfuncsError as refused:
            assert str(refused)
        else:
            assert all(map(math.isfinite, found))


def test_runaway_is_told():
    """A viscosity that rises with temperature and feeds on its own heat has no state far downstream."""
    with pytest.raises(NoModel, match="viscosity changes"):
        march(ThinningProblem(thinning=-1.0, brinkman=10.0, drive=0.0, length=10.0)).read("bulk", 10.0)


def test_refusals():
    for wrong in (
        ThinningProblem(length=0.0),
        ThinningProblem(length=math.nan),
        ThinningProblem(thinning=math.inf),
        ThinningProblem(power_law=0.01),
    ):
        with pytest.raises(OutOfRange):
            march(wrong)
    for wrong in (ThinningProblem("square"), ThinningProblem(wall="cold")):
        with pytest.raises(UnknownName):
            march(wrong)
    with pytest.raises(OutOfRange, match="outside what was marched"):
        march(ThinningProblem()).read("bulk", 0.2)
    with pytest.raises(NoModel, match="same temperature"):
        march(ThinningProblem(drive=0.0)).read("nusselt", 0.1)
