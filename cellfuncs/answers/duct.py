"""Answers of a duct: coefficient, outlet, wall and flux at its end, pressure drop, duty.

The plain balance ρcpU·dTb/dx = a·h·(Tw − Tb), a the heated perimeter over the cross-section; heating
by friction and pressure work are judged in ``terms/``, not mixed in here.
"""

import math
from collections.abc import Callable
from dataclasses import dataclass, replace

from cellfuncs.answers.loop import settle
from cellfuncs.answers.path import far_temperature, overall, refuse_without_end
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
        """Frictional pressure drop [Pa], stated or f·L/D·ρU²/2."""
        stated = self.case.get("pressure_drop")
        if stated is not None:
            return stated
        return self.friction * self.length / self.shape.diameter * self.properties.density * self.velocity**2 / 2.0

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
    """The answers of a duct case; closes the loop on the mean bulk temperature."""
    length = case.need("length")
    shape = case.duct
    inlet, difference = temperatures(case)
    flux = case.get("heat_flux")

    def at(temperature: float | None) -> DuctAnswers:
        p = case.properties(temperature)
        u = case.velocity(p.density)
        re = p.density * u * shape.diameter / p.viscosity
        x_star = length / shape.diameter / (re * p.prandtl)
        nusselt, friction, method, outside = _coefficient(case, re, p, x_star, shape)
        h = nusselt * p.conductivity / shape.diameter
        driving = flux / h if flux is not None else difference
        film = h
        if far_temperature(case) is not None:
            h, method = overall(case, shape, h), f"overall, inside {h:.4g} by {method}"
        return DuctAnswers(
            case,
            shape,
            length,
            temperature,
            p,
            u,
            re,
            nusselt,
            friction,
            h,
            method,
            outside,
            driving,
            flux,
            inlet,
            film,
        )

    return close_on_bulk(case, at, inlet, difference)


def close_on_bulk(
    case: Case, at: Callable[[float | None], DuctAnswers], inlet: float | None, difference: float | None
) -> DuctAnswers:
    """The answers at the mean bulk temperature, which they themselves set; or at the stated temperature."""
    if case.get("heat_flux") == 0:
        raise CaseRefused(f'"{case.stated["heat_flux"].label}" is zero; nothing is exchanged')
    stated = case.get("property_temperature")
    if stated is not None or inlet is None:
        return at(stated)
    if case.fixed:
        found = at(None)
        return replace(found, property_temperature=inlet + 0.5 * found.bulk_rise)
    start = inlet if difference is None else inlet + 0.25 * difference
    found = at(settle(start, lambda t: inlet + 0.5 * at(t).bulk_rise, "mean bulk temperature"))
    case.refuse_phase_change(inlet, found.property_temperature, found.outlet)
    _refuse_vacuum(case, found)
    return found


def _refuse_vacuum(case: Case, found: DuctAnswers) -> None:
    """Refuse a friction that would use up the pressure there is; a liquid's pressure counts only where it is stated."""
    drop, pressure = found.pressure_drop, case.pressure
    known = case.has("pressure") or case.has("gauge_pressure") or case.is_gas(found.property_temperature)
    if known and drop >= pressure and case.flow != "falling film":
        raise CaseRefused(
            f"friction would take {drop / 1e5:.3g} bar, but the pressure is {pressure / 1e5:.3g} bar absolute; "
            "the duct is too long or the flow too fast for it"
        )


def _coefficient(
    case: Case, reynolds: float, p: Properties, x_star: float, shape: Duct
) -> tuple[float, float, str, str]:
    """Nu, Darcy f, the method and what lies outside its range; stated values stand before methods."""
    h, f = case.get("coefficient"), case.get("friction_factor")
    stated = None if h is None else h * shape.diameter / p.conductivity
    if stated is not None and f is not None:
        return stated, f, "stated", ""
    allow = case.allow or stated is not None  # then the method is only asked for its friction factor
    section = "tube" if shape.section == "other" else shape.section
    nusselt, friction, method, outside = methods.nusselt_and_friction(
        reynolds, p.prandtl, x_star, section, case.wall, shape.heated, allow, shape.ratio
    )
    if case.has("roughness") and reynolds > methods.LAMINAR_UP_TO:
        friction = max(friction, methods.rough_friction(reynolds, case.get("roughness") / shape.diameter))
    if f is not None:
        friction = f
    if stated is not None:
        return stated, friction, "stated", ""
    return nusselt, friction, method, outside


def temperatures(case: Case) -> tuple[float | None, float | None]:
    """Inlet temperature and driving difference, as far as they are stated."""
    inlet = case.get("inlet_temperature")
    refuse_without_end(case)
    if case.wall == "flux":
        if inlet is None and not (case.fixed or case.has("property_temperature")):
            case.need("inlet_temperature")
        return inlet, None
    wall, difference = case.get("wall_temperature"), case.get("temperature_difference")
    far = far_temperature(case)
    if far is not None:
        inlet = case.need("inlet_temperature")
        return inlet, _nonzero(far - inlet)
    if wall is None and difference is None:
        return inlet, 0.0  # no exchange: friction alone
    if wall is not None and difference is not None:
        if inlet is not None:
            raise CaseRefused("wall temperature, inlet temperature and their difference are all stated; state two")
        return wall - difference, _nonzero(difference)
    if wall is not None:
        inlet = case.need("inlet_temperature")
        return inlet, _nonzero(wall - inlet)
    return inlet, _nonzero(difference)


def _nonzero(difference: float) -> float:
    if difference == 0:
        raise CaseRefused("wall and fluid have the same temperature; there is no driving difference to judge by")
    return difference
