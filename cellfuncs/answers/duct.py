"""Answers of a duct: coefficient, outlet, wall and flux at its end, pressure drop, duty.

The plain balance ρcpU·dTb/dx = a·h·(Tw − Tb), a the heated perimeter over the cross-section; heating
by friction and pressure work are judged in ``terms/``, not mixed in here.
"""

import math
from dataclasses import dataclass
from typing import Any

from cellfuncs.answers.inputs import Inputs
from cellfuncs.answers.internal import Internal
from cellfuncs.answers.passage import Chosen, Passage, Values, solve_passage
from cellfuncs.answers.path import far_temperature
from cellfuncs.cases.case import Case, Properties
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import CaseRefused
from cellfuncs.methods import duct as methods
from cellfuncs.methods import recovery


@dataclass(frozen=True)
class DuctAnswers:
    """A solved duct; differences are signed, the fluid being heated is positive. SI units."""

    case: Case
    shape: Duct
    length: float
    property_temperature: float | None
    properties: Properties
    velocity: float
    reynolds: float
    nusselt: float
    friction: float
    coefficient: float
    method: str
    outside: str
    difference: float  # wall − inlet, or q/h for a prescribed flux
    flux: float | None  # the prescribed one
    inlet: float | None
    film: float = 0.0  # the inside coefficient, where ``coefficient`` is the overall one
    chosen: Chosen | None = None
    state: Inputs | None = None  # what methods may ask
    passage: Passage | None = None  # the case as methods see it
    values: Values | None = None  # coefficient and f with the factors of changing properties

    @property
    def exchange(self) -> float:
        """Heated perimeter over cross-section [1/m]."""
        return self.shape.heated_per_area

    @property
    def capacity_flux(self) -> float:
        """ρcpU [W/(m2 K)]."""
        return self.properties.density * self.properties.specific_heat * self.velocity

    @property
    def transfer_units(self) -> float:
        return self.coefficient * self.exchange * self.length / self.capacity_flux

    @property
    def bulk_rise(self) -> float:
        """Outlet minus inlet bulk temperature [K]."""
        if self.flux is not None:
            return self.flux * self.exchange * self.length / self.capacity_flux
        return -self.difference * math.expm1(-self.transfer_units)

    @property
    def outlet(self) -> float | None:
        return None if self.inlet is None else self.inlet + self.bulk_rise

    @property
    def wall(self) -> float | None:
        """Wall temperature at the outlet end [K]."""
        if self.inlet is None:
            return None
        if far_temperature(self.case) is not None:
            return self.inlet + self.bulk_rise + self.local_flux / self.film
        if self.flux is None:
            return self.inlet + self.difference
        return self.inlet + self.bulk_rise + self.difference

    @property
    def local_flux(self) -> float:
        """Wall flux at the outlet end [W/m2], with the mean coefficient."""
        if self.flux is not None:
            return self.flux
        return self.coefficient * (self.difference - self.bulk_rise)

    @property
    def pressure_drop(self) -> float:
        """Frictional pressure drop [Pa], stated or (f·L/D + ΣK)·ρU²/2."""
        stated = self.case.get("pressure_drop")
        if stated is not None:
            return stated
        losses = self.friction * self.length / self.shape.diameter + self.case.get("loss_coefficient", 0.0)
        return losses * self.properties.density * self.velocity**2 / 2.0

    @property
    def duty(self) -> float:
        if self.shape.area is None:
            raise CaseRefused(f'a duty needs the row "{self.shape.area_needs}"')
        return self.capacity_flux * self.shape.area * self.bulk_rise

    @property
    def recovery_rise(self) -> float:
        """By how much friction warms a wall that takes no heat, ΔT_rec [K]; refused outside its table."""
        p = self.properties
        if self.reynolds <= methods.LAMINAR_UP_TO:
            share = 27.0 / 35.0 if self.shape.section == "plates" else 1.0
            return share * p.viscosity * self.velocity**2 / p.conductivity
        factor = recovery.turbulent_tube(self.reynolds, p.prandtl)
        return factor * self.velocity**2 / (2.0 * p.specific_heat)


def solve_duct(case: Case) -> DuctAnswers:
    """The answers of a duct case; closes the loops on the mean bulk temperature and on that of the wall."""
    length = case.need("length")
    return solve_passage(DuctPassage(case, case.duct, length))


class DuctPassage(Internal):
    """A duct whose answers are ``DuctAnswers``."""

    def answers(self, **known: Any) -> DuctAnswers:
        p, shape = known["properties"], known["shape"]
        u = self.case.velocity(p.density)
        return DuctAnswers(velocity=u, reynolds=p.density * u * shape.diameter / p.viscosity, **known)
