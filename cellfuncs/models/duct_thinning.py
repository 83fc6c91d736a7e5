"""Laminar duct whose viscosity falls with temperature: profile, pressure gradient and temperature develop together.

Viscosity (power law: consistency) K₀·exp(−b(T − T_in)), conduction along and inertia left out, so that the shear
stress is proportional to the distance from the middle at every x. Marched along x in von Mises' coordinate ψ, the
share of the flow between the middle and a place: the velocity across drops out, energy is

    ∂θ/∂x* = ∂/∂ψ(g·u·∂θ/∂ψ) + (Br·Φ + S)/u,      ∂(u²)/∂ψ = −2A·w(c)·m^(−1/n),    m = exp(−β·θ), β = b·ΔT,

so that the velocity is a square root of an integral of the temperature. c is the coordinate of ``duct_profile``;
w = c^((1/n − 1)/2) in a tube, c^(1/n) between plates. A Galerkin method in t, 1 − ψ = t^(2q), and a linearly implicit
second-order march in ln x, extrapolated from two step widths.
Sources: von Mises 1927 (coordinate); Verwer, Spee, Blom and Hundsdorfer 1999 (ROS2); Sukanek 1971 (limits far
downstream).
"""

import math
from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import Any

import numpy as np
from numpy.polynomial import legendre

from cellfuncs.errors import NoModel, OutOfRange, UnknownName
from cellfuncs.models.duct_section import gauss, polynomials

_POWER = 3
_TERMS, _COARSE_TERMS = 30, 22
_STEPS, _DECADES = 160, 7.0  # steps, an even number, over the decades of x that end at the length
_SMOOTHING = 10  # first steps
_TRUSTED = 1e3  # times the first place: from there on the start is forgotten
_STAGE = 1.0 - math.sqrt(0.5)
_STEEPEST = 30.0  # |β·θ|/n: viscosities that differ by e^30
_ROUNDS = 60
READINGS = ("bulk", "wall", "flux", "gradient", "drop", "made")


@dataclass(frozen=True, eq=False)
class _Space:
    """Functions of t at Gauss points, and the integrals from the wall as matrices (last row: to the middle)."""

    t: Any
    weights: Any
    values: Any
    slopes: Any
    mass: Any
    carried: Any
    from_wall: Any  # ∫₀¹ f(t·s)·2q·s^(2q−1) ds at each t and at t = 1
    from_wall_thick: Any  # ∫₀¹ f(t·s)·2q·s^(q−1) ds


@lru_cache(maxsize=8)
def _space(terms: int) -> _Space:
    count, q = 2 * terms + 20, _POWER
    t, weights = gauss(count)
    values, slopes = polynomials(terms, count)
    # θ = θ_w + t^q·P; the uniform temperature comes first
    functions = np.column_stack([np.ones(count), t[:, None] ** q * values])
    gradients = np.column_stack([np.zeros(count), q * values + t[:, None] * slopes])  # of t^q·P, over t^(q−1)
    share = weights * 2 * q * t ** (2 * q - 1)
    # the polynomial through values at the points, at t·s
    through = legendre.legvander(2.0 * t - 1.0, count - 1) * (2 * np.arange(count) + 1.0) * weights[:, None]
    spread = legendre.legvander(2.0 * np.outer(np.append(t, 1.0), t) - 1.0, count - 1)
    matrices = [np.einsum("isk,s->ik", spread, weights * 2 * q * t ** (p - 1)) @ through.T for p in (2 * q, q)]
    mass = functions.T @ (share[:, None] * functions)
    return _Space(t, weights, functions, gradients, mass, functions.T @ share, *matrices)


@dataclass(frozen=True)
class ThinningProblem:
    """A duct in numbers without dimension, as ``duct.DuctProblem``, up to ``length`` in x*.

    ``thinning`` β = b·ΔT, positive for a liquid that is heated, |β·θ|/n up to 30; ``brinkman`` with K at the inlet's
    temperature; ``drive`` 0 leaves the wall at the inlet's temperature, or insulated. ``power_law`` 0.1 to 5.
    """

    section: str = "tube"
    wall: str = "temperature"
    thinning: float = 0.0
    length: float = 0.1
    power_law: float = 1.0
    brinkman: float = 0.0
    source: float = 0.0
    drive: float = 1.0


class _March:
    """One march on one resolution."""

    def __init__(self, problem: ThinningProblem, terms: int):
        self.problem, self.space = problem, _space(terms)
        self.tube = problem.section == "tube"
        self.held = problem.wall == "temperature"
        self.free = slice(1 if self.held else 0, None)
        self.c = 1.0 - self.space.t**_POWER
        self.isothermal, *_ = self.flow(np.zeros(terms + 1))

    def flow(self, a: Any) -> tuple[float, Any, Any, Any]:
        """(A, c, u/(t^q·√2A), m^(−1/n)) of a temperature."""
        p, sp = self.problem, self.space
        exponent = p.thinning * (sp.values @ a) / p.power_law
        if not np.abs(exponent).max() < _STEEPEST:  # a temperature that is no number fails too
            raise NoModel(f"the viscosity changes by more than e^{_STEEPEST:.0f} across the duct; no model does that")
        thin = np.exp(exponent)
        c, before = self.c, 0.0
        power = (1.0 / p.power_law - 1.0) / 2.0 if self.tube else 1.0 / p.power_law
        for _ in range(_ROUNDS):
            pull = thin * c**power if power else thin
            swift = np.sqrt((sp.from_wall @ pull)[:-1])
            thick = sp.from_wall_thick @ (1.0 / swift)
            root = thick[-1]  # √2A, since all the flow fits into the section
            c = np.maximum(1.0 - sp.t**_POWER * thick[:-1] / root, 1e-300)
            if not power or abs(root - before) < 1e-13 * root:
                break
            before = root
        self.c = c
        return 0.5 * root**2, c, swift, thin

    def rates(self, a: Any, jacobian: bool = False) -> "_Rates":
        """How the temperature changes with x, and by how much that does with the temperature, where it is asked for.

        The derivative leaves out that places of equal ψ move; the march is of second order with any derivative.
        """
        p, sp, q, n = self.problem, self.space, _POWER, self.problem.power_law
        pull, c, swift, thin = self.flow(a)
        root = math.sqrt(2.0 * pull)
        spread = 16.0 * c if self.tube else 16.0
        across = sp.weights * spread * sp.t ** (q - 1) / (2 * q)
        tilt = sp.slopes @ a
        shape = c ** (0.5 / n) if self.tube else c ** (1.0 / n)
        friction = p.brinkman * (4.0 * shape * pull) ** (n + 1.0) * thin
        share = sp.weights * 2 * q * sp.t ** (q - 1) / (root * swift)
        load = sp.values.T @ (share * (friction + p.source))
        made = load[0]
        if not self.held:
            load[0] += 4.0 * p.drive
        change = load - sp.slopes.T @ (across * root * swift * tilt)
        found = _Rates(change, (pull / self.isothermal) ** n, made)
        if jacobian:
            power = (1.0 / n - 1.0) / 2.0 if self.tube else 1.0 / n
            thinner = (p.thinning / n) * sp.values
            swifter = sp.from_wall[:-1] @ ((thin * c**power)[:, None] * thinner) / (2.0 * swift[:, None])
            faster = -(sp.from_wall_thick[-1] / swift**2) @ swifter  # of the root
            gain = share[:, None] * (
                friction[:, None] * ((n + 1.0) * 2.0 * faster / root + thinner)
                - (friction + p.source)[:, None] * (faster / root + swifter / swift[:, None])
            )
            moved = (across * tilt)[:, None] * (np.outer(swift, faster) + root * swifter)
            still = sp.slopes.T @ ((across * root * swift)[:, None] * sp.slopes)
            found.still = -still
            found.jacobian = sp.values.T @ gain - sp.slopes.T @ moved - still
        return found

    def run(self, places: Any) -> Any:
        """Readings at the places (rows), starting from the inlet's temperature at x = 0."""
        sp, free, drive = self.space, self.free, self.problem.drive
        a = np.zeros(sp.mass.shape[0])
        mass = sp.mass[free, free]
        # a step at the wall is no function of the space: implicit steps, the flow held in each, smooth it
        now, x, drop, made = self.rates(a, jacobian=True), 0.0, 0.0, 0.0
        found = np.zeros((len(places), len(READINGS)))
        step = -drive * sp.mass[1:, 0] if self.held else 0.0
        for k, place in enumerate(places):
            h = place - x
            if k < _SMOOTHING:
                left = mass - h * now.still[free, free]
                if k == 0 and self.held:
                    a[0] = drive
                a[free] += np.linalg.solve(left, h * now.change[free] + (step if k == 0 else 0.0))
            else:
                left = mass - _STAGE * h * now.jacobian[free, free]
                first = np.linalg.solve(left, now.change[free])
                ahead = a.copy()
                ahead[free] += h * first
                second = np.linalg.solve(left, self.rates(ahead).change[free] - 2.0 * mass @ first)
                a[free] += h * (1.5 * first + 0.5 * second)
            then = self.rates(a, jacobian=True)
            drop += 0.5 * h * (now.ratio + then.ratio)
            made += 0.5 * h * (now.made + then.made)
            x, now = place, then
            slope = np.zeros_like(a)
            slope[free] = np.linalg.solve(mass, now.change[free])
            found[k] = sp.carried @ a, a[0], (sp.carried @ slope - now.made) / 4.0, now.ratio, drop / x, made
        return found


@dataclass
class _Rates:
    change: Any
    ratio: float  # pressure gradient over that of the inlet's viscosity
    made: float  # mean heat made
    still: Any = None  # the derivative with the flow held
    jacobian: Any = None


@lru_cache(maxsize=64)
def march(problem: ThinningProblem) -> "Thinning":
    """The marched duct; refuses (NoModel, OutOfRange, UnknownName) what cannot be followed."""
    if problem.section not in ("tube", "plates"):
        raise UnknownName(f'no model of thinning in "{problem.section}"; there are tube and plates, heated alike')
    if problem.wall not in ("temperature", "flux"):
        raise UnknownName(f'the wall is a "temperature" or a "flux", not "{problem.wall}"')
    numbers = (problem.thinning, problem.length, problem.power_law, problem.brinkman, problem.source, problem.drive)
    if not all(map(math.isfinite, numbers)):
        raise OutOfRange("what describes the duct must be finite numbers")
    if not 1e-7 <= problem.length <= 1e9:
        raise OutOfRange(f"a length x* of {problem.length:.3g} is outside 1e-7 to 1e9")
    if not 0.1 <= problem.power_law <= 5.0:
        raise OutOfRange(f"power-law index {problem.power_law:.4g} is outside 0.1 to 5")
    return Thinning(problem)


class Thinning:
    """Answers of a marched duct at positions x* from a ten-thousandth of its length on, each with its error."""

    def __init__(self, problem: ThinningProblem):
        self.problem = problem
        self._places = problem.length * np.logspace(-_DECADES, 0.0, _STEPS + 1)

    @cached_property
    def _readings(self) -> tuple[Any, Any]:
        """(readings at every second place, their errors), extrapolated from two step widths."""
        with np.errstate(all="ignore"):
            both = [self._extrapolated(terms) for terms in (_TERMS, _COARSE_TERMS)]
        (best, step), (other, _) = both
        if not np.isfinite(best).all():
            raise NoModel("the march along the duct breaks down for this case")
        return best, np.abs(best - other) + 0.25 * step

    def _extrapolated(self, terms: int) -> tuple[Any, Any]:
        fine = _March(self.problem, terms).run(self._places)[::2]
        coarse = _March(self.problem, terms).run(self._places[::2])
        return fine + (fine - coarse) / 3.0, np.abs(fine - coarse) / 3.0

    def with_error(self, what: str, x: float) -> tuple[float, float]:
        """(answer, numerical error): bulk, wall, flux, nusselt, gradient (of pressure, over that of the inlet's
        viscosity), drop (its mean from the inlet on), mean_flux (from the inlet on)."""
        from scipy.interpolate import CubicSpline

        places, (readings, errors) = self._places[::2], self._readings
        if not _TRUSTED * places[0] <= x <= self.problem.length * (1 + 1e-12):
            raise OutOfRange(
                f"x* = {x:.4g} is outside what was marched, {_TRUSTED * places[0]:.3g} to {self.problem.length:.4g}"
            )
        log, place = np.log(places), math.log(min(x, self.problem.length))
        at = CubicSpline(log, readings)(place)
        between = np.abs(CubicSpline(log[::2], readings[::2])(place) - at) / 8.0
        told = errors[max(int(np.searchsorted(places, x)) - 1, 0) :][:2].max(axis=0) + between
        value = dict(zip(READINGS, at.tolist(), strict=True))
        error = dict(zip(READINGS, told.tolist(), strict=True))
        if what == "nusselt":
            lag, unsure = value["wall"] - value["bulk"], error["wall"] + error["bulk"]
            if abs(lag) <= 10.0 * unsure:
                raise NoModel("wall and bulk have the same temperature there; no coefficient describes that")
            nusselt = value["flux"] / lag
            return nusselt, (error["flux"] + abs(nusselt) * unsure) / abs(lag)
        if what == "mean_flux":
            return (value["bulk"] - value["made"]) / (4.0 * x), (error["bulk"] + error["made"]) / (4.0 * x)
        return value[what], error[what]

    def read(self, what: str, x: float) -> float:
        """The answer alone."""
        return self.with_error(what, x)[0]
