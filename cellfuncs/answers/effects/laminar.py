"""Developed laminar flow in a tube or between plates, solved: friction heat, expansion, conduction along, source."""

import math

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
    EffectModel,
    expansion_part,
    source_density,
)
from cellfuncs.answers.path import far_temperature
from cellfuncs.errors import NoModel
from cellfuncs.methods.duct import LAMINAR_UP_TO

_FRICTION = {"tube": 64.0, "plates": 96.0}  # f·Re
_SAME = 0.02
_DIGITS = 12  # of Pe: points of a map that differ by rounding are one duct


class LaminarDuct(EffectModel):
    """The spectral solution of the case's duct; the wall goes on behind its end, upstream it is adiabatic."""

    name = "laminar duct, solved"
    terms = PAIR | {ALONG, SOURCE}
    answers = (OUTLET, WALL, COEFFICIENT, DUTY, FLUX)

    def __init__(self, solution: Solution):
        a = solution.answers
        if not isinstance(a, DuctAnswers) or solution.case.flow != "duct" or a.reynolds > LAMINAR_UP_TO:
            raise NoModel("the flow is not laminar")
        if a.shape.section not in _FRICTION:
            raise NoModel(f"laminar flow is solved in tubes and between plates, not in a section {a.shape.section}")
        if far_temperature(solution.case) is not None or a.method == "stated":
            raise NoModel("laminar flow is solved for a wall temperature or flux, with no coefficient stated")
        p, d = a.properties, a.shape.diameter
        sheared = solution.case.sheared(a.property_temperature)
        self.index = 1.0 if sheared is None else sheared.exponent
        stress_like = a.pressure_drop * d**2 * 2.0 / (a.length * a.velocity * p.viscosity)
        if abs(stress_like / _FRICTION[a.shape.section] - 1.0) > _SAME:
            raise NoModel("the stated friction is not that of developed laminar flow, which is what is solved")
        self.solution, self.a = solution, a
        self.peclet = a.capacity_flux * d / p.conductivity
        self.place = a.length / d / self.peclet
        self.flux = a.flux is not None
        # θ = 1 in kelvin, and the flux that goes with it
        self.unit = a.flux * d / p.conductivity if self.flux else a.difference
        if not self.unit:
            raise NoModel("wall and fluid have the same temperature; there is no driving difference")
        self.unit_flux = self.unit * p.conductivity / d
        self.source = source_density(solution)
        self.expansion = expansion_part(solution)

    def _brinkman(self) -> float:
        """K·U^(n+1)·D^(1−n)/(kΔT), from the viscosity that gives the right wall stress at the apparent rate."""
        a, n = self.a, self.index
        p = a.properties
        apparent, factor = (8.0, (3.0 * n + 1.0) / (4.0 * n))
        if a.shape.section == "plates":
            apparent, factor = (12.0, (2.0 * n + 1.0) / (3.0 * n))
        newtonian = p.viscosity * a.velocity**2 / (p.conductivity * self.unit)
        return newtonian * apparent ** (1.0 - n) / factor**n

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        from cellfuncs.models import duct

        a = self.a
        acts = {}
        if not left & PAIR:
            acts = {"brinkman": self._brinkman(), "expansion": self.expansion}
        if SOURCE not in left and self.source:
            acts["source"] = self.source * a.shape.diameter**2 / (a.properties.conductivity * self.unit)
        peclet = None if ALONG in left else float(f"{self.peclet:.{_DIGITS}g}")
        solved = duct.solve(duct.DuctProblem(
            a.shape.section, "one" if a.shape.heated == "one" else "both", "flux" if self.flux else "temperature",
            self.index, peclet,
        ))  # fmt: skip
        return tuple(self._answer(answer, on, acts) for on in (solved, solved.coarse))

    def _answer(self, answer: str, solved, acts: dict[str, float]) -> float:
        x, a = self.place, self.a
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
        if answer == FLUX and not self.flux:
            # over the local difference: what is left of the driving one
            local = abs(self.unit) * math.exp(-min(a.transfer_units, 600.0)) * a.coefficient
            return max(abs(without), local) if without else local
        return abs(without)
