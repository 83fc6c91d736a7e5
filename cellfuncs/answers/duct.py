"""Answers of a duct: coefficient, outlet, wall and flux at its end, pressure drop, duty.

The plain balance ρcpU·dTb/dx = a·h·(Tw − Tb), a the heated perimeter over the cross-section; heating
by friction and pressure work are judged in ``terms/``, not mixed in here.
"""

import math
from collections.abc import Callable
from dataclasses import dataclass, replace

from cellfuncs.answers import driving as driving_difference
from cellfuncs.answers.internal import STATED, Chosen, Internal, Values
from cellfuncs.answers.loop import settle
from cellfuncs.answers.path import duct_resistance, far_temperature, overall, refuse_without_end
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
    friction_method: str = ""
    wall_difference: float | None = None  # mean of wall minus bulk, where it is known
    values: Values | None = None  # Nu and f with the factors of changing properties

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
    shape = case.duct
    inlet, difference = temperatures(case)
    internal = Internal(case, shape, length)
    chosen: Chosen | None = None
    for _ in range(_MOST_CHOICES):

        def at(bulk: float | None, chosen: Chosen | None = chosen) -> DuctAnswers:
            return _duct_at(internal, length, bulk, inlet, difference, chosen)

        found = close_on_bulk(case, at, inlet, difference)
        state = internal.state(found.property_temperature, found.wall_difference)
        last, chosen = chosen, internal.choose(state, case.allow)
        if last is None or (last.nusselt, last.friction) == (chosen.nusselt, chosen.friction):
            if found.method == chosen.nusselt and found.friction_method == chosen.friction:
                break
    return replace(found, outside=chosen.outside)


_MOST_CHOICES = 4  # rounds of choosing methods at temperatures that the methods set


def _duct_at(
    internal: Internal,
    length: float,
    bulk: float | None,
    inlet: float | None,
    difference: float | None,
    chosen: Chosen | None,
) -> DuctAnswers:
    """The answers at a mean bulk temperature; without methods chosen, with those for the temperature of the stream."""
    case, shape = internal.case, internal.shape
    flux, far = case.get("heat_flux"), far_temperature(case)
    apart = _mean_difference(case, bulk, inlet, difference)
    case.velocity(internal.at_bulk(internal.state(bulk, apart)).p.density)  # asks for what is missing first
    if chosen is None:
        chosen = internal.choose(internal.state(bulk, apart), True)
    values = None

    def film_coefficient(driving: float | None) -> float:
        nonlocal values
        state = internal.state(bulk, driving)
        values = internal.values(state, chosen)
        return values.nusselt * internal.at_bulk(state).p.conductivity / shape.diameter

    follows = bulk is not None and not case.fixed and chosen.nusselt != STATED
    if flux is not None and follows:
        apart = driving_difference.for_flux(film_coefficient, flux)
    elif far is not None and follows:
        apart = driving_difference.for_path(film_coefficient, far - bulk, duct_resistance(case, shape))
    h = film = film_coefficient(apart)
    method = chosen.nusselt
    driving = difference
    if flux is not None:
        driving = apart = flux / h
    if far is not None:
        h, method = overall(case, shape, h), f"overall, inside {h:.4g} by {method}"
    p = internal.at_bulk(internal.state(bulk, apart)).p
    u = case.velocity(p.density)
    return DuctAnswers(
        case, shape, length, bulk, p, u, p.density * u * shape.diameter / p.viscosity, values.nusselt, values.friction,
        h, method, chosen.outside, driving, flux, inlet, film, chosen.friction, apart, values,
    )  # fmt: skip


def _mean_difference(
    case: Case, bulk: float | None, inlet: float | None, difference: float | None
) -> float | None:
    """Wall minus mean bulk temperature where the wall is prescribed, None where it follows or is not known."""
    if case.has("heat_flux") or far_temperature(case) is not None or not difference or bulk is None:
        return None
    return inlet + difference - bulk if inlet is not None else difference


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
