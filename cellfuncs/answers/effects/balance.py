"""Ducts by the one-dimensional balance q = h(Tw − Tb − ΔT_rec): turbulent flow, stated coefficients, heat paths.

Friction and expansion, source, conduction along in fluid and wall; storage while the imposed change rises; and gases
whose density falls along the duct.
"""

import math
from dataclasses import replace

from cellfuncs.answers import Solution
from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.effects import wall as walls
from cellfuncs.answers.effects.duct import recovery_rise
from cellfuncs.answers.effects.model import (
    ALONG,
    COEFFICIENT,
    DUTY,
    FLUX,
    OUTLET,
    PAIR,
    SOURCE,
    STORAGE,
    WALL,
    WALL_CONDUCTION,
    EffectModel,
    expansion_part,
    plain_size,
    source_density,
    twice,
)
from cellfuncs.answers.path import far_temperature
from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.methods.duct import LAMINAR_UP_TO

_TURBULENT_SPREAD, _LAMINAR_SPREAD = 0.1, 0.3  # of an effect, by h and recovery; own judgement
_ALONG_SPREAD = 0.3  # eddies also carry along
_UNKNOWN = 0.05  # of the effect, a recovery that is not known
_STORAGE_SPREAD = {True: 0.5, False: 0.1}  # laminar: the middle passes in half the time
_POINTS = 24


def _unit(solution: Solution) -> float:
    difference = solution.answers.difference
    if not difference:
        raise NoModel("wall and fluid have the same temperature; there is no driving difference")
    return difference


class BalancedDuct(EffectModel):
    """Constant coefficients along the duct; closed form."""

    name = "one-dimensional balance"
    terms = PAIR | {SOURCE, ALONG, WALL_CONDUCTION}
    answers = (OUTLET, WALL, COEFFICIENT, DUTY, FLUX)

    def __init__(self, solution: Solution):
        a, case = solution.answers, solution.case
        if not isinstance(a, DuctAnswers) or case.flow != "duct":
            raise NoModel(
                f"no one-dimensional balance of a {case.flow} is solved: its recovery factor is not published"
            )
        path = far_temperature(case) is not None
        laminar = a.reynolds <= LAMINAR_UP_TO
        self.solution, self.a, self.path, self.laminar = solution, a, path, laminar
        self.unit = _unit(solution)
        self.spread = _LAMINAR_SPREAD * (a.coefficient / a.film if path else 1.0) if laminar else _TURBULENT_SPREAD
        self.terms = frozenset({SOURCE})
        self.recovery = self._recovery()
        self.lacks = {}
        if self.recovery is not None:
            self.terms |= PAIR
        else:
            self.lacks = dict.fromkeys(PAIR, "no recovery factor is known for this flow, and it counts")
        if not laminar:
            self.terms |= {ALONG}
        self.number = walls.conduction_number(case, a)
        if not path and a.flux is None:
            self.lacks[WALL_CONDUCTION] = "the temperature of the wall is prescribed all along"
        elif self.number is not None:
            self.terms |= {WALL_CONDUCTION}

    def _recovery(self) -> float | None:
        """ΔT_rec [K], or None where it is not known and counts."""
        a = self.a
        if self.laminar and not self.path and a.flux is None:
            return None  # laminar at a wall temperature: the local h follows the friction
        try:
            return recovery_rise(self.solution)
        except CellfuncsError:
            net = (1.0 - expansion_part(self.solution)) * abs(a.pressure_drop)
            bulk = abs(net) / (a.properties.density * a.properties.specific_heat)
            bound = 2.0 * a.properties.viscosity * a.velocity**2 / a.properties.conductivity
            if self.path and bound * min(a.transfer_units, 1.0) < _UNKNOWN * bulk:
                return 0.0  # behind a path of some resistance it hardly counts beside what the bulk takes up
        return None

    def _profile(self, left: frozenset[str]):
        from cellfuncs.models import balance

        a, p = self.a, self.a.properties
        per_length = a.exchange * a.length / a.capacity_flux
        heating = recovery = 0.0
        if not left & PAIR and self.terms >= PAIR:
            fall = abs(a.pressure_drop)
            heating = (1.0 - expansion_part(self.solution)) * fall / (p.density * p.specific_heat)
            recovery = self.recovery or 0.0
        if SOURCE not in left:
            heating += source_density(self.solution) * a.length / a.capacity_flux
        stagnation = self.solution.case.get("temperature_basis") == "stagnation"
        if stagnation and not left & PAIR:
            # bulk on the stagnation temperature: expansion is in it; the wall misses what recovery leaves
            recovery -= a.velocity**2 / (2.0 * p.specific_heat)
        outer = 0.0
        if self.path:
            outer = per_length / (1.0 / a.coefficient - 1.0 / a.film)
        return balance.solve(balance.Balance(
            balance.AMBIENT if self.path else balance.FLUX if a.flux is not None else balance.TEMPERATURE,
            per_length * (a.film if self.path else a.coefficient),
            heating / self.unit,
            recovery / self.unit,
            0.0 if ALONG in left or ALONG not in self.terms else p.conductivity / (a.capacity_flux * a.length),
            0.0 if WALL_CONDUCTION in left or WALL_CONDUCTION not in self.terms else self.number,
            per_length * a.flux / self.unit if a.flux is not None else 0.0,
            outer,
        )), recovery / self.unit  # fmt: skip

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        a = self.a
        found, recovery = self._profile(left)
        flux = self.unit * a.capacity_flux / (a.exchange * a.length)
        if answer == OUTLET:
            value, size = found.outlet * self.unit, self.unit
        elif answer == WALL and (self.path or a.flux is not None):
            value, size = found.wall * self.unit, self.unit
        elif answer == FLUX:
            value, size = found.local_flux * flux, flux
        elif answer == DUTY:
            size = a.capacity_flux * (a.shape.area or 1.0) * self.unit
            value = found.duty * size
        elif answer == COEFFICIENT:
            size = a.film if self.path else a.coefficient
            units = size * a.exchange * a.length / a.capacity_flux
            between = found.duty + units * recovery  # N·(mean of wall minus bulk)
            if not between:
                raise NoModel("wall and bulk have the same temperature on the mean; no coefficient describes that")
            value = size * found.duty / between
        else:
            raise NoModel(f"{self.name}: {answer} is not solved")
        return value, value + found.error * size

    def base(self, answer: str, without: float) -> float | None:
        a = self.a
        if answer == OUTLET:
            return abs(a.bulk_rise) if a.flux is not None else abs(self.unit)
        if answer == WALL:
            if a.flux is not None:
                return self.solution.driving
            return abs(self.unit) * math.exp(-min(a.transfer_units, 600.0))
        return max(abs(without), plain_size(a, answer))

    def effect(self, answer, left):
        found = super().effect(answer, left)
        if left <= {ALONG}:
            return replace(found, spread=_ALONG_SPREAD)
        return found


class RampedDuct(EffectModel):
    """Storage of stream and wall at the end of an even ramp of the wall's temperature or flux, or of the inlet's."""

    name = "even ramp, plug flow"
    terms = frozenset({STORAGE})
    answers = (OUTLET, WALL, DUTY, FLUX)

    def __init__(self, solution: Solution):
        a, case = solution.answers, solution.case
        if not isinstance(a, DuctAnswers) or case.flow != "duct":
            raise NoModel(f"the start-up of a {case.flow} is not solved")
        time = case.get("time")
        if time is None:
            raise NoModel("no time scale is stated")
        self.solution, self.a = solution, a
        self.unit = _unit(solution)
        ratio = 0.0
        if walls.stores(case):
            if time <= walls.own_time(case, a):
                raise NoModel("the wall is too slow to follow the change; its temperature is not solved")
            ratio = walls.capacity_ratio(case, a)
        self.passing = a.length / (a.velocity * time) * (1.0 + ratio)
        self.spread = _STORAGE_SPREAD[a.reynolds <= LAMINAR_UP_TO]

    def _lag(self, part: float) -> float:
        """What the bulk misses of its rise at a part of the length, in units of the driving difference."""
        from cellfuncs.models import balance

        a = self.a
        n, passing = a.transfer_units * part, self.passing * part
        if a.flux is not None:
            return n * (1.0 - balance.ramped_outlet(n, passing, flux=True))
        return -math.expm1(-n) * (1.0 - balance.ramped_outlet(n, passing))

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        import numpy as np

        from cellfuncs.models import balance

        a = self.a
        kept = STORAGE not in left
        lag = self._lag(1.0) if kept else 0.0
        if answer == OUTLET:
            if kept and a.flux is None:  # a ramp of the inlet instead: what has not come through yet
                lag = max(lag, math.exp(-a.transfer_units) * (1.0 - balance.ramped_inlet(self.passing)))
            return twice(a.bulk_rise - lag * self.unit)
        if answer == WALL and a.flux is not None:
            return twice(a.bulk_rise + self.unit - lag * self.unit)
        if answer == FLUX and a.flux is None:
            return twice(a.local_flux + a.coefficient * lag * self.unit)
        if answer == DUTY and a.flux is None:
            s, w = np.polynomial.legendre.leggauss(_POINTS)
            lags = [self._lag((x + 1.0) / 2.0) for x in s] if kept else [0.0] * _POINTS
            more = a.transfer_units * float(w @ np.array(lags)) / 2.0
            return twice(a.capacity_flux * (a.shape.area or 1.0) * (a.bulk_rise + more * self.unit))
        raise NoModel(f"what storage does to the {answer} is not solved")

    def base(self, answer: str, without: float) -> float | None:
        if answer == OUTLET:
            return abs(self.a.bulk_rise) if self.a.flux is not None else abs(self.unit)
        return self.solution.driving if answer == WALL else max(abs(without), plain_size(self.a, answer))


class ExpandingDuct(EffectModel):
    """A gas whose pressure falls by a part that counts: friction, expansion and kinetic energy together."""

    name = "gas of falling density"
    terms = PAIR
    answers = (OUTLET, WALL, DUTY, FLUX)
    spread = _TURBULENT_SPREAD
    _FROM_MACH, _FROM_FALL = 0.1, 0.02

    def __init__(self, solution: Solution):
        a, case = solution.answers, solution.case
        mach = solution.mach() if isinstance(a, DuctAnswers) and case.flow == "duct" else None
        if mach is None or a.reynolds <= LAMINAR_UP_TO or a.inlet is None or not case.is_gas(a.property_temperature):
            raise NoModel("no gas in turbulent flow")
        if mach < self._FROM_MACH and abs(a.pressure_drop) < self._FROM_FALL * case.pressure:
            raise NoModel("the density hardly falls")
        self.solution, self.a = solution, a
        self.unit = _unit(solution)
        self.path = far_temperature(case)
        self.stagnation = case.get("temperature_basis") == "stagnation"

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        from cellfuncs.models import compressible

        a, p, case = self.a, self.a.properties, self.solution.case
        if left & PAIR:
            return twice(self._plain(answer))
        inlet = a.inlet - (a.velocity**2 / (2.0 * p.specific_heat) if self.stagnation else 0.0)
        pressure, head = case.pressure, p.density * a.velocity**2
        wall = self.path if self.path is not None else a.wall
        factor = recovery_rise(self.solution) / (a.velocity**2 / (2.0 * p.specific_heat))
        source = 0.0 if a.flux is None else a.bulk_rise / inlet
        found = compressible.flow(compressible.Stream(
            drag=abs(a.pressure_drop) / head, dynamic=head / pressure,
            expansion_ratio=pressure / (p.density * p.specific_heat * inlet), expansion=expansion_part(self.solution),
            compressibility=self._compressibility(), transfer=0.0 if a.flux is not None else a.transfer_units,
            wall=1.0 if a.flux is not None else wall / inlet, recovery=factor, source=source,
        ))  # fmt: skip
        bulk = found.total_temperature if self.stagnation else found.temperature
        beyond = inlet * found.adiabatic_wall
        flux = a.flux if a.flux is not None else a.coefficient * (wall - beyond)
        if answer == OUTLET:
            value = bulk * inlet - a.inlet
        elif answer == WALL and (a.flux is not None or self.path is not None):
            value = beyond + flux / (a.film if self.path is not None else a.coefficient) - a.inlet
        elif answer == FLUX:
            value = flux
        elif answer == DUTY:
            value = a.capacity_flux * (a.shape.area or 1.0) * inlet * found.duty
        else:
            raise NoModel(f"{self.name}: {answer} is not solved")
        size = {FLUX: a.coefficient, DUTY: a.capacity_flux * (a.shape.area or 1.0)}.get(answer, 1.0) * inlet
        return value, value + found.error * size

    def _plain(self, answer: str) -> float:
        a = self.a
        if answer == WALL:
            return a.wall - a.inlet
        return {OUTLET: a.bulk_rise, FLUX: a.local_flux, DUTY: a.capacity_flux * (a.shape.area or 1.0) * a.bulk_rise}[
            answer
        ]

    def _compressibility(self) -> float:
        """κp from the density a little above and below the pressure."""
        case, at = self.solution.case, self.a.property_temperature
        step = 1e-4
        high, low = (case.substance.get("density", at, case.pressure * (1.0 + s)) for s in (step, -step))
        return math.log(high / low) / (2.0 * step)

    base = BalancedDuct.base
