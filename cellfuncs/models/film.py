"""The equations of a heated film and their solutions on one resolution; ``gap.py`` says what they mean."""

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np

from cellfuncs.errors import NoModel
from cellfuncs.models.chebyshev import interpolate, nodes, second_derivative
from cellfuncs.models.thinning import Thinning, constant
from cellfuncs.models.trust import finite

_ROUNDS = 60
_STEPS_PER_DECADE = 4
_HOTTEST = 300.0  # |ln m| of a film: beyond, viscosities differ by more than a number can hold
_MILD = 20.0  # Na/8 up to which a film is found from a guess


@dataclass(frozen=True)
class Film:
    """A solved film; dimensionless, see above."""

    heating: float  # Br of this solution
    place: Any  # nodes across the gap
    rise: Any  # θ there
    peak: float  # largest θ
    low_flux: float  # θ'(0): heat into the fixed wall, over kΔ/h
    high_flux: float  # −θ'(1): heat into the moving wall
    stress: float  # at the fixed wall, over μ₀U/h
    moving_stress: float  # at the moving wall
    flow: float  # mean velocity over the wall's
    made: float  # H, the heat made by friction, over kΔ/h
    error: float  # of θ, absolute


@dataclass(frozen=True)
class Gap:
    """What is given: viscosity, walls (θ at each, None where insulated), pressure gradient P, source S."""

    thinning: Thinning = constant
    low: float | None = 0.0
    high: float | None = 0.0
    pressure: float = 0.0
    source: float | Callable[[Any], Any] = 0.0  # S, or S(y)

    def __post_init__(self) -> None:
        if self.low is None and self.high is None:
            raise NoModel("both walls insulated: the heat made by friction has no way out, and no steady film exists")
        source = 0.0 if callable(self.source) else self.source
        finite(wall=self.low or 0.0, second_wall=self.high or 0.0, pressure_gradient=self.pressure, source=source)


class Unresolved(Exception):
    """Newton's method found nothing on this resolution."""


class Beyond(Exception):
    """Asked beyond the turning point."""

    def __init__(self, largest: float):
        super().__init__()
        self.largest = largest


@dataclass
class State:
    """θ on the nodes for a given heat H, and what follows from it."""

    count: int
    theta: Any
    made: float
    heating: float  # Br
    stress: float
    squared_stress: float

    def theta_at(self, places: Any) -> Any:
        return interpolate(self.count, self.theta, places)


def difference(coarse: State, fine: State) -> float:
    return float(abs(fine.theta_at(nodes(coarse.count)[0]) - coarse.theta).max())


class Solver:
    """One gap on one resolution."""

    def __init__(self, gap: Gap, count: int):
        self.gap, self.count = gap, count
        self.x, self.d, self.w = nodes(count)
        self.second = second_derivative(count)
        self.source = gap.source(self.x) if callable(gap.source) else np.full(count, gap.source)
        self.still = self._linear(self.source)

    def _linear(self, source: Any) -> Any:
        """θ of a prescribed source."""
        matrix, right = self.second.copy(), -source
        self._ends(matrix, right)
        return np.linalg.solve(matrix, right)

    def _ends(self, matrix: Any, right: Any) -> None:
        for row, wall in ((0, self.gap.low), (-1, self.gap.high)):
            matrix[row] = 0.0
            if wall is None:
                matrix[row], right[row] = self.d[row], 0.0
            else:
                matrix[row, row], right[row] = 1.0, wall

    def spread(self, theta: Any) -> tuple[Any, Any, float, float]:
        """Where the heat is made: w = (τ − Py)²/m, its slope in θ at fixed τ, and τ and ∫w."""
        log_m, slope = self.gap.thinning(theta)
        if not np.isfinite(log_m).all() or abs(log_m).max() > _HOTTEST:
            raise Unresolved
        fluid = np.exp(-log_m)
        p = self.gap.pressure
        stress = (1.0 + p * float(self.w @ (self.x * fluid))) / float(self.w @ fluid)
        made = (stress - p * self.x) ** 2 * fluid
        return made, -slope * made, stress, float(self.w @ made)

    def solve(self, heat: float, start: Any) -> State:
        """The film that makes the heat H, by Newton's method from a start."""
        if heat == 0.0:  # then the equation is linear
            _, _, stress, total = self.spread(self.still)
            if not (0.0 < total < math.inf):
                raise Unresolved
            return State(self.count, self.still, 0.0, 0.0, stress, 0.0)
        theta = start.copy()
        for _ in range(_ROUNDS):
            made, slope, stress, total = self.spread(theta)
            if not (0.0 < total < math.inf):
                raise Unresolved
            share = made / total
            residual = self.second @ theta + heat * share + self.source
            # θ enters through where the heat is made and through its sum; τ's own change is left to the iteration
            weight = heat / total
            jacobian = self.second - np.outer(weight * share, self.w * slope)
            jacobian.flat[:: self.count + 1] += weight * slope
            if self.gap.pressure:
                jacobian = jacobian + heat * self._by_stress(theta, made, stress, total)
            theta, done = self._newton(theta, residual, jacobian)
            if done:
                _, _, stress, total = self.spread(theta)
                heating = heat / total
                return State(self.count, theta, heat, heating, stress, heating * stress**2)
        raise Unresolved

    def _at_heating(self, heating: float, start: Any) -> State:
        """The film at a given Br without a pressure gradient, by Newton's method from a start."""
        theta = start.copy()
        for _ in range(_ROUNDS):
            made, slope, stress, total = self.spread(theta)
            residual = self.second @ theta + heating * made + self.source
            # w = τ²/m: θ enters through m in its place, and everywhere through τ = 1/∫(1/m)
            jacobian = self.second - np.outer((2.0 * heating / stress) * made, self.w * slope)
            jacobian.flat[:: self.count + 1] += heating * slope
            theta, done = self._newton(theta, residual, jacobian)
            if done:
                _, _, stress, total = self.spread(theta)
                return State(self.count, theta, heating * total, heating, stress, heating * stress**2)
        raise Unresolved

    def _newton(self, theta: Any, residual: Any, jacobian: Any) -> tuple[Any, bool]:
        """The next θ, and whether the step was so small that it is the last."""
        right = -residual
        self._ends(jacobian, right)
        right[0] -= theta[0] if self.gap.low is not None else self.d[0] @ theta
        right[-1] -= theta[-1] if self.gap.high is not None else self.d[-1] @ theta
        step = np.linalg.solve(jacobian, right)
        size = float(abs(step).max())
        if not math.isfinite(size):
            raise Unresolved
        theta = theta + step * min(1.0, 4.0 / max(size, 1e-300)) if self._thins else theta + step
        return theta, size <= 1e-11 * max(float(abs(theta).max()), 1e-12)

    @property
    def _thins(self) -> bool:
        return self.gap.thinning is not constant

    def _by_stress(self, theta: Any, made: Any, stress: float, total: float) -> Any:
        """The part of the Jacobian by which θ moves τ and so the places where heat is made."""
        p, x = self.gap.pressure, self.x
        log_m, slope = self.gap.thinning(theta)
        fluid = np.exp(-log_m)
        mobility = float(self.w @ fluid)
        moves = self.w * (-slope * fluid) * (p * x - stress) / mobility  # dτ/dθ
        by = 2.0 * (stress - p * x) * fluid
        changed = by / total - made / total**2 * float(self.w @ by)
        return np.outer(changed, moves)

    def _branch(self, most: float) -> Any:
        """States with rising H, each from the one before."""
        state = self.solve(0.0, self.still)
        yield state
        thinnest = max(abs(self.gap.thinning(np.array([0.0, 1.0]))[1]).max(), 1e-300)
        heat = min(0.1, 0.1 / thinnest)
        while heat < most:
            state = self._step(state, heat)
            yield state
            heat *= 10.0 ** (1.0 / _STEPS_PER_DECADE)

    def _step(self, state: State, heat: float) -> State:
        """From one heat to another, in smaller steps where Newton's method does not reach."""
        parts = 1
        while parts <= 16:
            try:
                found = state
                for n in range(1, parts + 1):
                    found = self.solve(state.made + (heat - state.made) * n / parts, found.theta)
                return found
            except Unresolved:
                parts *= 4
        raise Unresolved

    def at_speed(self, heating: float, near: State | None = None) -> State:
        if heating == 0.0:
            return self.solve(0.0, self.still)
        if near is not None:
            start = near.theta_at(self.x)
            if self._thins and not self.gap.pressure and (self.gap.thinning(start)[1] <= 0.0).all():
                try:
                    return self._at_heating(heating, start)
                except Unresolved:
                    pass
            return self._root(lambda s: s.heating, heating, near, near)
        if not self._thins:
            still = self.solve(0.0, self.still)
            return self.solve(heating * self.spread(self.still)[3], still.theta)
        direct = self._directly(heating)
        if direct is not None:
            return direct
        earlier, before = None, None
        for state in self._branch(math.inf):
            if state.heating >= heating:
                return self._root(lambda s: s.heating, heating, before or state, state)
            if before is not None and state.heating < before.heating:
                top = self._summit(lambda s: s.heating, before)
                if top.heating >= heating:
                    foot = before if before.made < top.made else earlier or before
                    return self._root(lambda s: s.heating, heating, foot, top)
                raise NoModel(
                    f"no steady film: at this pressure gradient and viscosity Br reaches {top.heating:.4g} at most, "
                    f"asked {heating:.4g}; beyond it the film runs away"
                )
            earlier, before = before, state
        raise Unresolved

    def _directly(self, heating: float) -> State | None:
        """Without a pressure gradient a film that thins has one solution at each Br: found from a guess of its heat."""
        if self.gap.pressure:
            return None
        _, slopes = self.gap.thinning(self.still)
        if not (slopes <= 0.0).all():
            return None
        guess = heating * self.spread(self.still)[3]
        weakening = -float(self.w @ slopes) * guess / 8.0
        if weakening > _MILD:
            return None
        guess /= 1.0 + weakening
        try:
            return self._at_heating(heating, self._linear(self.source + guess))
        except Unresolved:
            return None

    def at_stress(self, squared_stress: float) -> list[State]:
        if squared_stress == 0:
            return [self.solve(0.0, self.still)]

        def asked(state: State) -> float:
            return state.squared_stress

        found: list[State] = []
        earlier, before, falling = None, None, False
        for state in self._branch(1e6):
            if before is not None and not falling and state.squared_stress < before.squared_stress:
                top = self._summit(asked, before)
                if top.squared_stress < squared_stress:
                    raise Beyond(top.squared_stress)
                foot = before if before.made < top.made else earlier or before
                if not found:
                    found.append(self._root(asked, squared_stress, foot, top))
                if before.made > top.made and before.squared_stress <= squared_stress:
                    return [*found, self._root(asked, squared_stress, top, before)]
                falling, before = True, max(top, before, key=lambda s: s.made)
            if before is not None:
                low, high = sorted((before.squared_stress, state.squared_stress))
                if low < squared_stress <= high:
                    found.append(self._root(asked, squared_stress, before, state))
                    if falling or not self._thins:
                        return found
            earlier, before = before, state
        return found

    def top(self, of: Callable[[State], float]) -> State | None:
        if not self._thins:
            return None
        before: State | None = None
        for state in self._branch(1e4):
            if before is not None and of(state) < of(before):
                return self._summit(of, before)
            before = state
        return None

    def _summit(self, of: Callable[[State], float], near: State) -> State:
        """The state with the largest value near a state of the branch."""
        from scipy.optimize import minimize_scalar

        step = 10.0 ** (1.0 / _STEPS_PER_DECADE)
        best = near

        def height(log_heat: float) -> float:
            nonlocal best
            state = self._step(near, math.exp(log_heat))
            if of(state) > of(best):
                best = state
            return -of(state)

        middle = math.log(max(near.made, 1e-300))
        minimize_scalar(
            height, bounds=(middle - math.log(step), middle + math.log(step)), method="bounded",
            options={"xatol": 1e-9},
        )  # fmt: skip
        return best

    def _root(self, of: Callable[[State], float], wanted: float, low: State, high: State) -> State:
        """The state whose value is ``wanted``; secant steps from two states, or from one."""
        if low is high:  # another resolution's state: bring it here first
            low = self.solve(high.made, high.theta_at(self.x))
            high = low
            if of(low) == wanted or low.made == 0.0:
                return low
            high = self._step(low, low.made * (1.0 + 1e-6))
        a, b = low, high
        fa, fb = of(a) - wanted, of(b) - wanted
        best = b if abs(fb) < abs(fa) else a
        for _ in range(_ROUNDS):
            if fb == 0.0 or abs(fb) <= 1e-13 * wanted:
                return b
            if fa == fb or abs(b.made - a.made) <= 1e-14 * b.made:
                return best
            guess = b.made - fb * (b.made - a.made) / (fb - fa)
            if fa * fb < 0.0:
                inside = sorted((a.made, b.made))
                if not inside[0] < guess < inside[1]:
                    guess = 0.5 * (a.made + b.made)
            c = self._step(b, max(guess, 0.0))
            fc = of(c) - wanted
            if abs(fc) < abs(of(best) - wanted):
                best = c
            if fa * fb < 0.0 and fb * fc > 0.0:
                fa *= 0.5  # the kept end weighs less: the Illinois rule
                b, fb = c, fc
            else:
                a, fa, b, fb = b, fb, c, fc
        raise Unresolved

    def film(self, state: State, error: float) -> Film:
        theta, p = state.theta, self.gap.pressure
        within = getattr(self.gap.thinning, "within", None)
        if within is not None:
            within(theta)
        log_m, _ = self.gap.thinning(theta)
        flux = self.d @ theta
        shear = (state.stress - p * self.x) * np.exp(-log_m)
        # mean velocity by parts: ∫u = 1 − ∫y·u'
        flow = 1.0 - float(self.w @ (self.x * shear))
        return Film(
            state.heating, self.x, theta, self._peak(theta), float(flux[0]), float(-flux[-1]), state.stress,
            state.stress - p, flow, state.made, error,
        )  # fmt: skip

    def _peak(self, theta: Any) -> float:
        """The largest θ between the nodes, by the polynomial through them."""
        from scipy.optimize import minimize_scalar

        k = int(np.argmax(theta))
        if k in (0, self.count - 1):
            slope = float(self.d[k] @ theta)
            if (slope <= 0) if k == 0 else (slope >= 0):
                return float(theta[k])
        low, high = self.x[max(k - 1, 0)], self.x[min(k + 1, self.count - 1)]
        found = minimize_scalar(
            lambda y: -float(interpolate(self.count, theta, y)[0]), bounds=(low, high), method="bounded",
            options={"xatol": 1e-9},
        )  # fmt: skip
        return max(float(theta[k]), -float(found.fun))
