"""Developed flow in a tube or between plates, solved across the section: friction heat, expansion, conduction along.

Laminar flow, also of a power-law melt, and turbulent flow with an eddy diffusivity; a source in the fluid.
"""

import math
from dataclasses import replace
from functools import cached_property, lru_cache

from cellfuncs.answers import Solution
from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.effects.model import (
    ALONG,
    COEFFICIENT,
    DUTY,
    FLUX,
    OUTLET,
    PAIR,
    SOURCE,
    WALL,
    Effect,
    EffectModel,
    expansion_part,
    plain_size,
    source_density,
)
from cellfuncs.answers.path import far_temperature
from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.methods.duct import LAMINAR_UP_TO

_TURBULENT_SPREAD = 0.1  # of an effect, by the eddy diffusivity; own judgement
_FRICTION_SPREAD = 0.3  # ... by how far the friction of the case is from the solved one's, in its logarithm
_FRICTION_OFF = {True: 2.5, False: 1.3}  # laminar: changing viscosity; turbulent: a rough wall has another layer
_END_FELT = 0.06  # of the tolerance, a conducted part of the driving difference
_MUCH, _VERY_MUCH = 1e3, 1e4  # Pe from which conduction along is not followed: on a map, and else
_SMALL = 0.03  # of the tolerance
_FEW = 2  # digits of Re and Pr on a map of turbulent flow
# the rows of a block and what the solved duct calls them
_UPSTREAM = {
    "adiabatic": "adiabatic",
    "fixed inlet": "fixed inlet",
    "at inlet temperature": "wall at inlet temperature",
}
DIGITS = 10  # of Re, Pr and Pe: cases that differ by rounding are one duct


class SolvedDuct(EffectModel):
    """The spectral solution of the case's duct; upstream its wall is adiabatic unless the block says otherwise.

    With conduction along at a wall temperature, outlet and duty are those of a heated length that ends (the stream
    leaves with what it has been given in all); what is asked at the end itself, and what friction and sources do, is
    that of a wall that goes on.
    """

    terms = PAIR | {ALONG, SOURCE}
    answers = (OUTLET, WALL, COEFFICIENT, DUTY, FLUX)

    def __init__(self, solution: Solution, digits: int = DIGITS):
        self.digits, self.ignores_along = digits, False
        a, case = solution.answers, solution.case
        if not isinstance(a, DuctAnswers) or case.flow != "duct":
            raise NoModel(f"a {case.flow} is not solved across its section")
        if a.shape.section not in ("tube", "plates"):
            raise NoModel(f"tubes and plates are solved, not a section {a.shape.section}")
        if far_temperature(case) is not None or a.method == "stated":
            raise NoModel("the section is solved for a wall temperature or flux, with no coefficient stated")
        if case.get("temperature_basis") == "stagnation":
            raise NoModel("the section is solved in static temperatures")
        self.solution, self.a = solution, a
        self.laminar = a.reynolds <= LAMINAR_UP_TO
        self.name = "laminar duct, solved" if self.laminar else "turbulent duct, solved"
        p, d = a.properties, a.shape.diameter
        sheared = case.sheared(a.property_temperature) if self.laminar else None
        self.index = 1.0 if sheared is None else sheared.exponent
        self.peclet = a.capacity_flux * d / p.conductivity
        self.place = a.length / d / self.peclet
        self.flux = a.flux is not None
        self.upstream = _UPSTREAM[case.get("upstream", "adiabatic")]
        # θ = 1 in kelvin, and the flux that goes with it
        self.unit = a.flux * d / p.conductivity if self.flux else a.difference
        if not self.unit:
            raise NoModel("wall and fluid have the same temperature; there is no driving difference")
        self.unit_flux = self.unit * p.conductivity / d
        self.source = source_density(solution)
        self.expansion = expansion_part(solution)

    def _problem(self, peclet: float | None):
        from cellfuncs.models.duct import DuctProblem

        shape = self.a.shape
        wall = "flux" if self.flux else "temperature"
        heated = "one" if shape.heated == "one" else "both"
        if self.laminar:
            index = _short(self.index, self.digits)
            along = peclet and _short(peclet, self.digits)
            return DuctProblem(shape.section, heated, wall, index, along, upstream=self.upstream)
        digits = self.digits if self.digits >= DIGITS else _FEW  # the eddy diffusivity is not known any better
        prandtl = _short(self.a.properties.prandtl, digits)
        reynolds = _short(self.a.reynolds, digits)
        peclet = peclet and reynolds * prandtl
        return DuctProblem(
            shape.section, heated, wall, 1.0, peclet, upstream=self.upstream, reynolds=reynolds, prandtl=prandtl
        )

    @cached_property
    def brinkman(self) -> float:
        """Br with which the solved flow makes as much heat as the case's friction does, and what that leaves open.

        The bulk of an insulated duct rises by f·Re/2·Br a unit of x*; the case has Δp·D²/(L·U)·U²/(kΔT).
        """
        from cellfuncs.models.duct import solve

        a, p = self.a, self.a.properties
        heat = abs(a.pressure_drop) * a.velocity * a.shape.diameter**2 / (a.length * p.conductivity * self.unit)
        brinkman = heat / solve(self._problem(None)).friction_heat
        # what the friction would be by the viscosity of the properties alone
        newtonian = p.viscosity * a.velocity**2 / (p.conductivity * self.unit)
        off = brinkman / newtonian if self.index == 1.0 else 1.0
        allowed = _FRICTION_OFF[self.laminar]
        if not 1.0 / allowed <= off <= allowed:
            raise NoModel("the friction of the case is far from that of developed flow in a smooth duct")
        spread = _FRICTION_SPREAD * abs(math.log(off))
        self.spread = spread if self.laminar else max(spread, _TURBULENT_SPREAD)
        return brinkman

    def passes(self, terms: frozenset[str], answer: str) -> bool:
        """Whether the terms are so small in turbulent flow that the one-dimensional balance will do for them."""
        if self.laminar or ALONG in terms:
            return False
        a, p = self.a, self.a.properties
        heat = abs(self.source) * a.length / a.capacity_flux
        if terms & PAIR:
            try:
                wall = a.recovery_rise
            except CellfuncsError:
                return False
            heat += abs(a.pressure_drop) / (p.density * p.specific_heat) + wall
        grows = math.exp(min(a.transfer_units, 300.0)) if answer != OUTLET else 1.0
        return heat * grows < _SMALL * self.solution.case.tolerance * abs(a.difference)

    def effect(self, answer: str, left: frozenset[str]) -> Effect:
        if left == {ALONG} and self._nothing_along(answer):
            return self._small_along(answer)
        # what friction and sources do is not followed into a conduction along that is nothing beside them
        much = _MUCH if self.digits < DIGITS else _VERY_MUCH
        self.ignores_along = ALONG not in left and self.peclet > much
        found = super().effect(answer, left)
        return replace(found, error=found.error + abs(found.change) / self.peclet) if self.ignores_along else found

    def _nothing_along(self, answer: str) -> bool:
        """Whether conduction along is too small to be solved across the section, by far.

        Its effect has been found up to 150 times the share kΔT/L_T² over the balance (turbulent flow, short ducts).
        """
        if self.digits < DIGITS or answer not in (OUTLET, DUTY, WALL) or self.upstream != "adiabatic":
            return False
        a = self.a
        n = a.transfer_units
        along = a.properties.conductivity / (a.capacity_flux * a.length)
        return along * max(1.0, n) ** 2 * max(1.0, n) < _SMALL * self.solution.case.tolerance / 300.0

    def _small_along(self, answer: str) -> Effect:
        """The effect of next to nothing by the one-dimensional balance, right to its order of magnitude."""
        from cellfuncs.models import balance

        a, n = self.a, self.a.transfer_units
        given = balance.Balance(
            balance.FLUX if self.flux else balance.TEMPERATURE, n, flux=n if self.flux else 0.0,
            along=a.properties.conductivity / (a.capacity_flux * a.length),
        )  # fmt: skip
        kept, left = balance.solve(given), balance.solve(replace(given, along=0.0))
        name = {OUTLET: "outlet", WALL: "wall", DUTY: "duty"}[answer]
        size = a.difference * (a.capacity_flux * (a.shape.area or 1.0) if answer == DUTY else 1.0)
        change = (getattr(left, name) - getattr(kept, name)) * size
        error = (kept.error + left.error) * abs(size)
        return Effect(answer, change, self.base(answer, getattr(left, name) * size), error, 1.0, "small, by a balance")

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        from cellfuncs.models import duct

        a = self.a
        brinkman = self.brinkman  # refuses a friction that is not the solved one's
        acts = {} if left & PAIR else {"brinkman": brinkman, "expansion": self.expansion}
        if SOURCE not in left and self.source:
            acts["source"] = self.source * a.shape.diameter**2 / (a.properties.conductivity * self.unit)
        problem = self._problem(None if ALONG in left or self.ignores_along else self.peclet)
        solved = duct.solve(problem)
        both = (solved, solved.coarse)
        if problem.peclet is None or self.flux or answer not in (OUTLET, DUTY) or not self._ends(solved):
            return tuple(self._answer(answer, on, acts, self.place) for on in both)
        length = _short(self.place, self.digits)
        ending = duct.solve(replace(problem, heated_length=length))
        # what the wall gives ends with it; what is made in the stream does not, and must not be felt from behind
        made = tuple(self._answer(answer, on, {**acts, "drive": 0.0}, length) if acts else 0.0 for on in both)
        if answer == OUTLET:
            given = tuple(on.energy(length) * self.unit for on in (ending, ending.coarse))
        else:
            given = tuple(self._answer(DUTY, on, {}, length) for on in (ending, ending.coarse))
        return given[0] + made[0], given[1] + made[1]

    def _ends(self, solved) -> bool:
        """Whether the end of the heated length matters; on a map only where conduction carries something there."""
        if self.digits >= DIGITS:
            return True
        return abs(solved.bulk(self.place) - solved.energy(self.place)) > _END_FELT * self.solution.case.tolerance

    def _answer(self, answer: str, solved, acts: dict[str, float], x: float) -> float:
        a = self.a
        if answer == OUTLET:
            return solved.bulk(x, **acts) * self.unit
        if answer == WALL and self.flux:
            return solved.wall(x, **acts) * self.unit
        if answer == FLUX and self.flux:
            return a.flux
        if answer == FLUX:
            return solved.flux(x, **acts) * self.unit_flux
        if answer == COEFFICIENT and self.flux:
            return solved.nusselt(x, **acts) * self.unit_flux / self.unit
        if answer in (DUTY, COEFFICIENT):
            mean = solved.mean_flux(0.0, x, **acts) * self.unit_flux
            if answer == DUTY:
                return mean * a.exchange * a.length * (a.shape.area or 1.0)
            return mean / ((1.0 - self._mean_bulk(solved, acts)) * self.unit)
        raise NoModel(f"{self.name}: {answer} is not solved")

    def _mean_bulk(self, solved, acts: dict[str, float]) -> float:
        """Mean of θ_b over the length; it rises as x^⅔ from the inlet, so that x = L·s³ makes it smooth."""
        import numpy as np

        s, w = np.polynomial.legendre.leggauss(24)
        s, w = (s + 1.0) / 2.0, w / 2.0
        return float(w * 3.0 * s**2 @ solved.bulk(self.place * s**3, **acts))

    def base(self, answer: str, without: float) -> float | None:
        a = self.a
        if answer == OUTLET:
            return abs(a.bulk_rise) if self.flux else abs(self.unit)
        if answer == WALL:
            return self.solution.driving
        return max(abs(without), plain_size(a, answer))


@lru_cache(maxsize=256)
def _recovered(problem, far: float) -> float:
    """Wall minus bulk of an insulated duct far downstream, in μU²/k."""
    from cellfuncs.models.duct import solve

    solved = solve(problem)
    return solved.wall(far, drive=0.0, brinkman=1.0) - solved.bulk(far, drive=0.0, brinkman=1.0)


def recovery_rise(solution: Solution) -> float:
    """ΔT_rec [K] of a duct: from the table, and beyond it from the solved turbulent flow; NoModel where neither is."""
    a = solution.answers
    try:
        return a.recovery_rise
    except CellfuncsError:
        from cellfuncs.models.duct import DuctProblem

        p = a.properties
        section = a.shape.section if a.shape.section == "plates" else "tube"
        prandtl = _short(p.prandtl)
        rise = _recovered(DuctProblem(section, wall="flux", reynolds=_short(a.reynolds), prandtl=prandtl), 10.0)
        return rise * p.viscosity * a.velocity**2 / p.conductivity


def _short(value: float, digits: int = DIGITS) -> float:
    """A number to so many digits."""
    return float(f"{value:.{digits}g}")
