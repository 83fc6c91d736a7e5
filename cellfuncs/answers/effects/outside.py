"""Layers on bodies and in still fluid: recovery, friction and pressure work by similarity, radiation of the wall."""

import math

from cellfuncs.answers import Solution
from cellfuncs.answers.effects.model import (
    COEFFICIENT,
    DUTY,
    FLUX,
    PAIR,
    RADIATION,
    WALL,
    EffectModel,
    twice,
)
from cellfuncs.answers.free import FreeAnswers
from cellfuncs.answers.layer import LayerAnswers
from cellfuncs.answers.path import far_temperature
from cellfuncs.errors import NoModel
from cellfuncs.methods import radiation as radiative
from cellfuncs.methods import recovery

_TURBULENT_SPREAD = 0.05
_ROUGH_SPREAD = 0.2  # Pr^1/3 is meant for gases
_LAMINAR_FREE = 1e9  # Ra of a vertical plate, common practice


class _Surface(EffectModel):
    """Answers of a surface in a fluid, from how terms change its coefficient or its temperature."""

    answers = (COEFFICIENT, WALL, DUTY, FLUX)

    def __init__(self, solution: Solution):
        self.solution, self.a = solution, solution.answers
        self.difference = self.a.difference
        if not self.difference:
            raise NoModel("wall and fluid have the same temperature; there is no driving difference")

    def _with(self, answer: str, coefficient: float, rise: float) -> float:
        """An answer with an apparent coefficient, or (flux or path given) with a wall that is ``rise`` warmer."""
        a = self.a
        far = far_temperature(self.solution.case)
        if answer == COEFFICIENT:
            return coefficient
        if answer == WALL:
            if a.flux is None and far is None:
                raise NoModel("the wall temperature is prescribed")
            return rise
        if a.flux is not None:
            raise NoModel("the flux is prescribed")
        part = coefficient / a.coefficient
        if far is not None:  # what the wall gains in temperature the path gives less
            part = 1.0 - rise / (far - a.stream - self.difference) if far - a.stream != self.difference else 1.0
        return part * (a.duty if answer == DUTY else a.local_flux)

    def base(self, answer: str, without: float) -> float | None:
        return self.solution.driving if answer == WALL else abs(without)


class RecoveringLayer(_Surface):
    """Friction in the layer of a plate: the wall exchanges against the stream's recovery temperature."""

    terms = frozenset({"viscous heating"})

    def __init__(self, solution: Solution):
        super().__init__(solution)
        a = self.a
        if solution.case.flow != "plate":
            raise NoModel(f"no recovery factor of a {solution.case.flow} is solved")
        prandtl = a.properties.prandtl
        if a.laminar:
            from cellfuncs.models import plate

            solved = plate.plate(prandtl)
            factor, self.error, self.name = solved.recovery, solved.error, "laminar plate, similarity"
        else:
            factor, rough = recovery.turbulent_plate(prandtl)
            self.error, self.name = 0.0, "turbulent plate, recovery"
            self.spread = _ROUGH_SPREAD if rough else _TURBULENT_SPREAD
        self.rise = factor * a.velocity**2 / (2.0 * a.properties.specific_heat)

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        a = self.a
        values = []
        for rise in (self.rise, self.rise * (1.0 + self.error)):
            acting = 0.0 if left & self.terms else rise
            far = far_temperature(self.solution.case)
            moved = acting
            if far is not None:  # the wall takes its share of the resistance
                moved = acting * (1.0 - self.difference / (far - a.stream))
            values.append(self._with(answer, a.coefficient * (1.0 - acting / self.difference), moved))
        return values[0], values[1]


class StillPlate(_Surface):
    """A laminar vertical plate in a still fluid: friction heat and pressure work to first order (Gebhart 1962)."""

    name = "vertical plate, similarity"
    terms = PAIR
    pairs = False  # they act at different places and do not cancel

    def __init__(self, solution: Solution):
        super().__init__(solution)
        a, case = self.a, solution.case
        if not isinstance(a, FreeAnswers) or case.get("surface", "vertical plate") != "vertical plate":
            raise NoModel("solved for a vertical plate only")
        if a.rayleigh > _LAMINAR_FREE:
            raise NoModel(f"solved for laminar layers, Ra up to {_LAMINAR_FREE:.0e}; here {a.rayleigh:.3g}")
        from cellfuncs.models import free

        p = a.properties
        self.plate = free.free_plate(p.prandtl, uniform_flux=a.flux is not None)
        at = a.property_temperature or 0.0
        weight = a.gravity * a.length / p.specific_heat
        self.friction = math.copysign(weight * p.expansion, self.difference)
        self.pressure = p.expansion * at * weight / abs(self.difference)

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        a = self.a
        friction = 0.0 if "viscous heating" in left else self.friction
        pressure = 0.0 if "pressure work" in left else self.pressure
        mean = answer in (COEFFICIENT, DUTY)
        change = self.plate.relative_change(friction, pressure, mean)
        values = []
        # the second order is left out
        for relative in (change, change * (1.0 + self.plate.error + abs(change))):
            if a.flux is not None:
                values.append(self._with(answer, a.coefficient / (1.0 + relative), relative * self.difference))
            else:
                values.append(self._with(answer, a.coefficient * (1.0 + relative), 0.0))
        return values[0], values[1]


class RadiatingWall(_Surface):
    """A grey wall that radiates to surroundings beside what it gives to the fluid (of an enclosure: to the other)."""

    name = "balance of the wall with radiation"
    terms = frozenset({RADIATION})

    def __init__(self, solution: Solution):
        super().__init__(solution)
        a, case = self.a, solution.case
        self.between = case.flow == "enclosure"
        stated = case.has("emissivity") and (self.between or case.has("surroundings_temperature"))
        if not stated or a.stream is None:
            raise NoModel("radiation is not stated")
        if not isinstance(a, FreeAnswers | LayerAnswers):
            raise NoModel(f"radiation in a {case.flow} is not solved")
        self.spread = 0.1 if isinstance(a, FreeAnswers) and a.flux is not None else 0.0  # h ~ ΔT^¼ is held

    def _radiated(self, wall: float) -> float:
        """Flux from a wall of this temperature [W/m2]."""
        a, case = self.a, self.solution.case
        one = case.get("emissivity")
        if self.between:
            other = case.get("second_emissivity", one)
            return radiative.between_walls(wall, a.stream, one, other) * (wall - a.stream) if one and other else 0.0
        around = case.get("surroundings_temperature")
        return radiative.to_surroundings(wall, around, one) * (wall - around)

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        a = self.a
        if left & self.terms:
            return twice(self._with(answer, a.coefficient, 0.0))
        wall = a.stream + self.difference
        far = far_temperature(self.solution.case)
        if (a.flux is not None or far is not None) and answer in (WALL, FLUX, DUTY):
            return twice(self._with(answer, a.coefficient, self._balanced(wall, far) - wall))
        return twice(self._with(answer, a.coefficient + self._radiated(wall) / self.difference, 0.0))

    def _balanced(self, wall: float, far: float | None) -> float:
        """The wall's temperature with radiation, where the flux or a path feeds it."""
        from scipy.optimize import brentq

        a = self.a
        given = a.coefficient * self.difference

        def missing(t: float) -> float:
            fed = given if far is None else given * (far - t) / (far - wall)
            return fed - a.coefficient * (t - a.stream) - self._radiated(t)

        around = a.stream if self.between else self.solution.case.get("surroundings_temperature")
        temperatures = (a.stream, wall, around, *((far,) if far is not None else ()))
        low, high = min(temperatures), max(temperatures)
        if missing(low) * missing(high) > 0:
            raise NoModel("no wall temperature balances convection and radiation here")
        return brentq(missing, low, high, xtol=1e-12 * high, rtol=1e-14)
