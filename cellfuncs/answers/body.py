"""Answers of a solid body in a fluid: one temperature (lumped), its time constant, and whether that is allowed (Bi)."""

import math
from dataclasses import dataclass
from typing import NamedTuple

from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused


class SolidProperties(NamedTuple):
    """Properties of a solid, SI."""

    density: float
    conductivity: float
    specific_heat: float

    @property
    def diffusivity(self) -> float:
        return self.conductivity / (self.density * self.specific_heat)


@dataclass(frozen=True)
class BodyAnswers:
    """A solved body; the difference is body minus fluid at the start. SI units."""

    case: Case
    length: float  # volume over surface
    property_temperature: float | None
    properties: SolidProperties
    coefficient: float
    difference: float
    stream: float | None
    time: float
    volume: float | None

    @property
    def method(self) -> str:
        return "stated"

    @property
    def biot(self) -> float:
        return self.coefficient * self.length / self.properties.conductivity

    @property
    def fourier(self) -> float:
        return self.properties.diffusivity * self.time / self.length**2

    @property
    def time_constant(self) -> float:
        """ρcL/h [s], L volume over surface."""
        p = self.properties
        return p.density * p.specific_heat * self.length / self.coefficient

    @property
    def wall(self) -> float | None:
        """Temperature of the body after the time [K], lumped."""
        if self.stream is None:
            return None
        return self.stream + self.difference * math.exp(-self.time / self.time_constant)

    final_temperature = wall

    @property
    def mean_flux(self) -> float:
        return self.coefficient * self.difference

    @property
    def duty(self) -> float:
        """Heat flow at the start [W]."""
        if self.volume is None:
            raise CaseRefused('a duty needs the rows "volume" and "surface area"')
        return self.mean_flux * self.volume / self.length


def solve_body(case: Case) -> BodyAnswers:
    """A body that starts at one temperature and is left in a fluid with a stated coefficient."""
    coefficient, time = case.need("coefficient"), case.need("time")
    if case.has("length"):
        length, volume = case.get("length"), case.get("volume")
    else:
        volume = case.need("volume")
        length = volume / case.need("surface_area")
    start, stream = case.get("initial_temperature"), case.get("stream_temperature")
    difference = case.get("temperature_difference")
    if difference is None:
        difference = case.need("initial_temperature") - case.need("stream_temperature")
    if difference == 0:
        raise CaseRefused("body and fluid have the same temperature; there is no driving difference to judge by")
    at = case.get("property_temperature", start)
    names = ("density", "conductivity", "specific_heat")
    properties = SolidProperties(*(case.property_of(name, at) for name in names))
    return BodyAnswers(case, length, at, properties, coefficient, difference, stream, time, volume)
