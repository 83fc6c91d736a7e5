"""Answers of a sheared gap: plane Couette flow between a fixed and a moving wall, constant properties."""

from dataclasses import dataclass

from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CaseRefused, OutOfRange

TURBULENT_FROM = 1300.0  # ρUh/μ; plane Couette flow, common practice


@dataclass(frozen=True)
class GapAnswers:
    """A solved gap. SI units; ``walls_apart`` is the difference of the walls, zero for equal walls."""

    case: Case
    gap: float
    length: float
    property_temperature: float | None
    properties: Properties
    velocity: float
    reynolds: float
    walls_apart: float
    cold: float | None
    outside: str

    @property
    def full_rise(self) -> float:
        """μU²/k [K], the difference at which conduction balances the heating."""
        return self.properties.viscosity * self.velocity**2 / self.properties.conductivity

    @property
    def difference(self) -> float:
        """The driving difference: between the walls, or μU²/k where they are equal."""
        return self.walls_apart or self.full_rise

    @property
    def brinkman(self) -> float:
        return self.full_rise / self.difference

    @property
    def peak_rise(self) -> float:
        """Peak above the hotter wall [K]: μU²/8k for equal walls; with walls apart only beyond Br 2."""
        if not self.walls_apart:
            return self.full_rise / 8.0
        br = self.brinkman
        if br <= 2.0:
            return 0.0
        return ((1.0 + br / 2.0) ** 2 / (2.0 * br) - 1.0) * self.walls_apart

    @property
    def peak(self) -> float | None:
        return None if self.cold is None else self.cold + self.walls_apart + self.peak_rise

    @property
    def cold_wall_flux(self) -> float:
        """Flux into the colder wall [W/m2]."""
        k_over_h = self.properties.conductivity / self.gap
        return k_over_h * (self.walls_apart + self.full_rise / 2.0)

    @property
    def shear(self) -> float:
        return self.properties.viscosity * self.velocity / self.gap

    @property
    def friction_power(self) -> float:
        """Power lost to friction over the film [W]."""
        if not self.case.has("width"):
            raise CaseRefused('the friction power needs the row "width"')
        return self.shear * self.velocity * self.length * self.case.get("width")


def solve_gap(case: Case) -> GapAnswers:
    """The answers of a gap case; properties at the mean of the walls unless a temperature is stated."""
    gap, length = case.need("gap"), case.need("length")
    first, second = case.get("wall_temperature"), case.get("second_wall_temperature")
    apart = abs(case.get("temperature_difference", 0.0))
    if second is not None:
        first = case.need("wall_temperature")
        if case.has("temperature_difference"):
            raise CaseRefused("both wall temperatures and a temperature difference are stated; keep one")
        apart = abs(second - first)
    cold = first if second is None or first is None else min(first, second)
    if cold is None and not (case.fixed or case.has("property_temperature")):
        case.need("wall_temperature")
    mean = None if cold is None else cold + 0.5 * apart
    at = case.get("property_temperature", mean)
    p = case.properties(at)
    u = case.velocity(p.density)
    re = p.density * u * gap / p.viscosity
    outside = ""
    if re > TURBULENT_FROM:
        outside = f"laminar gap flow holds up to Re {TURBULENT_FROM:g}, here {re:.4g}"
        if not case.allow:
            raise OutOfRange(f"{outside}; change the case or add the row: beyond range | allow")
    return GapAnswers(case, gap, length, at, p, u, re, apart, cold, outside)
