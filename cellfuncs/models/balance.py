"""The one-dimensional balance along a duct: fluid and wall, each a temperature that changes along x = 0 … 1.

In units of the driving difference, everything over the stream's capacity flux ρcpU:

    θ' = N·(w − θ − r) + H + θ''/Pe               fluid;  N = h·a·L/(ρcpU), r = ΔT_rec/ΔT
    0 = M·w'' − N·(w − θ − r) + outside            wall;   M = k_s·A_s/(L·ρcpU·A_f)

H is the rise that friction (less what expansion takes) and a source give over the length. Outside is a prescribed
temperature (w = 1), a flux Q = q·a·L/(ρcpUΔT), or an ambient behind an outer conductance, N_o·(1 − w). The ends of
wall and stream are adiabatic beyond the heated length: θ − θ'/Pe = 0 where the stream enters (it has been warmed
by conduction against the stream; Danckwerts 1953), θ' = 0 where it leaves. Coefficients are constant, so the
solution is a sum of exponentials, anchored at the end where each is largest: any Pe and M, nothing overflows.
"""

import math
from dataclasses import dataclass, replace

import numpy as np

from cellfuncs.errors import NoModel
from cellfuncs.models.trust import finite

TEMPERATURE, FLUX, AMBIENT = "temperature", "flux", "ambient"
_PLACES = 201
_POLISH = 4
_ROUNDING = 4e-16
_WORST = 1e13  # condition of the equations for the weights
_APART = "conduction along and exchange differ by too much to be solved together"


@dataclass(frozen=True)
class Balance:
    """What is given; see above. ``along`` is 1/Pe, zero for none."""

    outside: str
    transfer: float  # N
    heating: float = 0.0  # H
    recovery: float = 0.0  # r
    along: float = 0.0  # 1/Pe
    wall: float = 0.0  # M
    flux: float = 0.0  # Q
    outer: float = 0.0  # N_o


@dataclass(frozen=True)
class Profile:
    """A solved duct; temperatures in units of the driving difference above the inlet."""

    outlet: float
    wall: float  # at the outlet end
    hottest_wall: float  # the wall temperature that is farthest from the inlet's
    local_flux: float  # N·(w − θ − r) at the outlet end: heat to the fluid over ρcpU·ΔT/(a·L)
    duty: float  # what the wall gives in all, over ρcpU·A·ΔT
    error: float  # absolute, of all these


def solve(given: Balance) -> Profile:
    """The temperatures along the duct; NoModel where nothing can be told."""
    finite(
        transfer_units=given.transfer, heating=given.heating, recovery=given.recovery,
        conduction_along=given.along, wall_conduction=given.wall, flux=given.flux, outer_transfer_units=given.outer,
    )  # fmt: skip
    if min(given.transfer, given.along, given.wall, given.outer) < 0:
        raise NoModel("transfer units and conduction are numbers from zero upwards")
    if given.transfer == 0:
        raise NoModel("without exchange with the wall there is no wall temperature to solve for")
    if given.outside == AMBIENT and given.outer == 0:
        raise NoModel("the outer conductance is zero: the ambient does not count; prescribe a flux of zero")
    if given.outside == TEMPERATURE:
        given = replace(given, wall=0.0)
    if not given.along and not given.wall:
        return _plain(given)
    return _Modes(given).profile() if given.wall else _two(given)


def _plain(g: Balance) -> Profile:
    """Without conduction along one exponential is left, θ' = n·(1 − θ − r) + H, or none where a flux is given."""
    if g.outside == FLUX:
        outlet = g.heating + g.flux
        wall = outlet + g.recovery + g.flux / g.transfer
        first = g.recovery + g.flux / g.transfer
        return Profile(outlet, wall, max(wall, first, key=abs), g.flux, g.flux, _ROUNDING * (abs(wall) + abs(outlet)))
    series = g.transfer if g.outside == TEMPERATURE else g.transfer * g.outer / (g.transfer + g.outer)
    end = 1.0 - g.recovery + g.heating / series
    outlet = -end * math.expm1(-series)
    local = series * (end * math.exp(-series) - g.heating / series)
    walls = (1.0, 1.0)
    if g.outside == AMBIENT:
        total = g.transfer + g.outer
        walls = tuple((g.transfer * (fluid + g.recovery) + g.outer) / total for fluid in (0.0, outlet))
    size = abs(end) + abs(g.heating) + max(map(abs, walls))
    return Profile(outlet, walls[1], max(walls, key=abs), local, outlet - g.heating, _ROUNDING * size)


def _two(g: Balance) -> Profile:
    """Without conduction along the wall two exponentials are left, whose rates are real: the rates of θ''/Pe − θ' = c·θ
    in closed form. As ``_Modes`` has it, in plain numbers."""
    e, n = g.along, g.transfer
    slope, constant, wall_constant = _particular(g)
    if g.outside == TEMPERATURE:
        back, ratio = n, 0.0
    else:  # the wall follows: its temperature is a mean of both sides
        back, ratio = n * g.outer / (n + g.outer), n / (n + g.outer)
    larger = 0.5 * (1.0 + math.sqrt(1.0 + 4.0 * e * back))
    up, down = larger / e, -back / larger  # anchored at the outlet and at the inlet
    faded, sunk = math.exp(-up), math.exp(down)
    # the inlet's condition and the outlet's, weighed alike
    inlet, outlet = [(1.0 - e * up) * faded, 1.0 - e * down], [up, down * sunk]
    size_in, size_out = max(map(abs, inlet)), max(map(abs, outlet))
    a, b, c, d = *(v / size_in for v in inlet), *(v / size_out for v in outlet)
    right = (e * slope - constant) / size_in, -slope / size_out
    determinant = a * d - b * c
    squares = a * a + b * b + c * c + d * d
    largest = 0.5 * (squares + math.sqrt(max(squares * squares - 4.0 * determinant * determinant, 0.0)))
    condition = largest / abs(determinant) if determinant else math.inf
    if not math.isfinite(condition) or condition > _WORST:
        raise NoModel(_APART)
    weight_up = (right[0] * d - b * right[1]) / determinant
    weight_down = (a * right[1] - c * right[0]) / determinant
    end = weight_up + weight_down * sunk
    mean = weight_up * -math.expm1(-up) / up + weight_down * (math.expm1(down) / down if down else 1.0)
    steady = n * (wall_constant - constant - g.recovery)
    leaves, wall, duty = constant + slope + end, wall_constant + slope + ratio * end, steady + n * (ratio - 1.0) * mean
    hottest = wall
    if ratio or slope:
        x = np.linspace(0.0, 1.0, _PLACES)
        waves = weight_up * np.exp(up * (x - 1.0)) + weight_down * np.exp(down * x)
        walls = wall_constant + slope * x + ratio * waves
        hottest = float(walls[np.argmax(abs(walls))])
    error = abs(leaves - duty - g.heating) + condition * 2e-16 * max(abs(leaves), abs(hottest), abs(duty))
    return Profile(leaves, wall, hottest, steady + n * (ratio - 1.0) * end, duty, error)


def _particular(g: Balance) -> tuple[float, float, float]:
    """Slope of both temperatures, constant of the fluid and of the wall far from both ends."""
    if g.outside == TEMPERATURE:
        return 0.0, 1.0 - g.recovery + g.heating / g.transfer, 1.0
    if g.outside == FLUX:
        return g.heating + g.flux, 0.0, g.recovery + g.flux / g.transfer
    wall = 1.0 + g.heating / g.outer
    return 0.0, wall - g.recovery + g.heating / g.transfer, wall


class _Modes:
    """The particular solution and the exponentials of one balance."""

    def __init__(self, given: Balance):
        self.given = given
        self.slope, self.constant, self.wall_constant = _particular(given)
        self.roots = self._roots()
        self.anchors = np.where(self.roots.real > 0, 1.0, 0.0)
        self.ratios = self._ratios()
        self.weights = self._weights()

    def _polynomial(self) -> list[float]:
        """Coefficients of the characteristic equation, highest power first."""
        g = self.given
        n, e = g.transfer, g.along
        if g.outside == TEMPERATURE:
            return [e, -1.0, -n]
        total, m = n + g.outer, g.wall
        if m == 0:  # the wall follows: its temperature is a mean of both sides
            return [e, -1.0, -n * g.outer / total]
        return [m * e, -m, -(n * m + total * e), total, n * g.outer]

    def _roots(self) -> np.ndarray:
        polynomial = np.trim_zeros(np.array(self._polynomial()), "f")
        if self.given.outside == FLUX and self.given.outer == 0:
            found = np.append(np.roots(polynomial[:-1]), 0.0)  # a constant for both
        else:
            found = np.roots(polynomial)
        found = np.asarray(found, dtype=complex)
        slope = np.polyder(polynomial)
        for _ in range(_POLISH):  # large and small roots apart by many powers of ten lose digits
            steep = np.polyval(slope, found)
            step = np.where(found == 0, 0.0, np.polyval(polynomial, found) / np.where(steep == 0, 1.0, steep))
            found = found - np.where(abs(step) < 1e-3 * abs(found), step, 0.0)
        return found

    def _ratios(self) -> np.ndarray:
        """Wall over fluid temperature in each exponential, from the fluid's equation or the wall's."""
        g, r = self.given, self.roots
        if g.outside == TEMPERATURE:
            return np.zeros_like(r)
        if g.wall == 0:
            return np.full_like(r, g.transfer / (g.transfer + g.outer))
        by_fluid = (g.transfer + r - g.along * r * r) / g.transfer
        below = g.transfer + g.outer - g.wall * r * r
        by_wall = g.transfer / np.where(below == 0, 1.0, below)
        # the one whose terms cancel less
        cancels = abs(below) / (g.transfer + g.outer + g.wall * abs(r) ** 2)
        return np.where(cancels > 0.5, by_wall, by_fluid)

    def _weights(self) -> np.ndarray:
        g, r = self.given, self.roots
        at_inlet, at_outlet = np.exp(-r * self.anchors), np.exp(r * (1.0 - self.anchors))
        rows, right = [], []
        rows.append((1.0 - g.along * r) * at_inlet)
        right.append(-self.constant + g.along * self.slope)
        if g.along > 0:
            rows.append(r * at_outlet)
            right.append(-self.slope)
        if g.wall > 0:
            rows += [self.ratios * r * at_inlet, self.ratios * r * at_outlet]
            right += [-self.slope, -self.slope]
        matrix = np.array(rows)
        # rows have the units of their conditions: weigh them alike
        size = abs(matrix).max(axis=1)
        self.condition = float(np.linalg.cond(matrix / size[:, None]))
        if not math.isfinite(self.condition) or self.condition > _WORST:
            raise NoModel(_APART)
        return np.linalg.solve(matrix / size[:, None], np.array(right) / size)

    def _sum(self, x: np.ndarray, factor: np.ndarray) -> np.ndarray:
        waves = np.exp(self.roots * (np.atleast_1d(x)[:, None] - self.anchors))
        return (waves @ (self.weights * factor)).real

    def fluid(self, x: np.ndarray) -> np.ndarray:
        return self.constant + self.slope * x + self._sum(x, np.ones_like(self.roots))

    def wall(self, x: np.ndarray) -> np.ndarray:
        return self.wall_constant + self.slope * x + self._sum(x, self.ratios)

    def _flux(self, x: np.ndarray) -> np.ndarray:
        """N·(w − θ − r), without the difference of two large temperatures."""
        g = self.given
        steady = g.transfer * (self.wall_constant - self.constant - g.recovery)
        return steady + g.transfer * self._sum(x, self.ratios - 1.0)

    def profile(self) -> Profile:
        g = self.given
        x = np.linspace(0.0, 1.0, _PLACES)
        wall, end = self.wall(x), np.array([1.0])
        outlet = float(self.fluid(end)[0])
        integral = np.where(
            self.roots == 0, 1.0,
            (np.exp(self.roots * (1.0 - self.anchors)) - np.exp(-self.roots * self.anchors))
            / np.where(self.roots == 0, 1.0, self.roots),
        )  # fmt: skip
        steady = g.transfer * (self.wall_constant - self.constant - g.recovery)
        duty = steady + g.transfer * float((self.weights * (self.ratios - 1.0) * integral).sum().real)
        scale = max(abs(outlet), float(abs(wall).max()), abs(duty))
        # the stream leaves with what it was given: what is missing there is an error
        error = abs(outlet - duty - g.heating) + self.condition * 2e-16 * scale
        if g.outside == FLUX:  # and so is what the wall does not pass on
            error += abs(duty - g.flux)
        return Profile(
            outlet, float(wall[-1]), float(wall[np.argmax(abs(wall))]), float(self._flux(end)[0]), duty, error
        )


# -- closed forms in time -------------------------------------------------------------------------------------------


def ramped_outlet(transfer: float, passing: float, flux: bool = False) -> float:
    """Outlet change (over the final one) when the wall's difference or flux has risen evenly for the time t*.

    ``passing`` = (L/U)·(1 + wall capacity/fluid capacity)/t*: the stream that leaves at the end of the ramp met a
    cooler wall on its way. One without storage. Plug flow along the characteristic.
    """
    finite(transfer_units=transfer, passing_time=passing)
    seen = 1.0 if passing <= 1.0 else 1.0 / passing  # of the length, counted from the outlet: before it no ramp
    if flux or transfer < 1e-6:
        return seen - 0.5 * passing * seen**2
    taken = -math.expm1(-transfer)
    upto = -math.expm1(-transfer * seen)
    delay = passing * (upto / transfer - seen * math.exp(-transfer * seen))
    return (upto - delay) / taken


def ramped_inlet(passing: float) -> float:
    """Change of what the inlet sends to the outlet (over the final one) at the end of an even ramp of the inlet."""
    return max(0.0, 1.0 - passing)


def advancing_front(place: float, time: float) -> float:
    """A step at the inlet of a stream with conduction along: θ at v·x/D and v²t/D (Ogata and Banks 1961, USGS 411-A).

    ½·erfc((X − T)/(2√T)) + ½·e^X·erfc((X + T)/(2√T)).
    """
    from scipy.special import erfc, erfcx

    finite(place=place, time=time)
    if place < 0 or time < 0:
        raise NoModel("place and time are numbers from zero upwards")
    if time == 0:
        return 1.0 if place == 0 else 0.0
    root = 2.0 * math.sqrt(time)
    z = (place - time) / root
    # e^X·erfc((X + T)/2√T) = e^(−z²)·erfcx(…): neither overflows
    return 0.5 * float(erfc(z)) + 0.5 * math.exp(-z * z) * float(erfcx((place + time) / root))
