"""Answers of a layer on a body in a stream: plate, cylinder, sphere, jet. Mean coefficient, wall, flux, duty.

The length is that of the plate, the diameter of cylinder and sphere, the radius that a jet covers.
"""

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any

from cellfuncs.answers.loop import settle
from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CaseRefused
from cellfuncs.methods import cross, recovery
from cellfuncs.methods import plate as methods


@dataclass(frozen=True)
class LayerAnswers:
    """A solved layer; differences are wall minus stream. SI units.

    ``group_length`` is what Re and Nu are on: the length, but the nozzle's diameter for a jet.
    """

    case: Case
    length: float
    property_temperature: float | None
    properties: Properties
    velocity: float
    reynolds: float
    transition: float
    nusselt: float
    coefficient: float
    method: str
    outside: str
    difference: float
    flux: float | None
    stream: float | None
    group_length: float

    @property
    def laminar(self) -> bool:
        return self.reynolds <= self.transition

    @property
    def capacity_flux(self) -> float:
        """ρcpU [W/(m2 K)]."""
        return self.properties.density * self.properties.specific_heat * self.velocity

    @property
    def wall(self) -> float | None:
        return None if self.stream is None else self.stream + self.difference

    @property
    def mean_flux(self) -> float:
        return self.coefficient * self.difference

    @property
    def local_flux(self) -> float:
        """Wall flux at the far end of a plate, the mean elsewhere [W/m2]."""
        if self.flux is not None:
            return self.flux
        if self.case.flow != "plate" or (self.method == "stated" and not self.laminar):
            return self.mean_flux
        if self.laminar:
            return 0.5 * self.mean_flux
        local = methods.turbulent_local(self.reynolds, self.properties.prandtl)
        return local * self.properties.conductivity / self.length * self.difference

    @property
    def surface(self) -> float:
        """Exchanging surface [m2]: one side of a plate, all of a cylinder or sphere, the jet's circle."""
        case, flow = self.case, self.case.flow
        if flow == "sphere":
            return math.pi * self.length**2
        if flow == "jet":
            return math.pi * self.length**2
        across = {"plate": "width", "cylinder": "length"}[flow]
        if not case.has(across):
            raise CaseRefused(f'a duty needs the row "{across}"')
        return case.get(across) * self.length * (math.pi if flow == "cylinder" else 1.0)

    @property
    def duty(self) -> float:
        """Heat given to the stream [W]."""
        return self.mean_flux * self.surface

    @property
    def recovery_rise(self) -> float:
        """ΔT_rec = rU²/(2cp) [K]; refused outside the range of r."""
        pr = self.properties.prandtl
        factor = recovery.laminar_plate(pr) if self.laminar else recovery.turbulent_plate(pr)[0]
        return factor * self.velocity**2 / (2.0 * self.properties.specific_heat)


def solve_layer(case: Case) -> LayerAnswers:
    """The answers of an external flow; with a prescribed flux it closes the loop on the film temperature."""
    length, group_length = _lengths(case)
    transition = case.get("transition", methods.TRANSITION) if case.flow == "plate" else _BODY_TRANSITION
    flux = case.get("heat_flux")
    stream, difference = stream_and_difference(case)
    film = 0.0 if case.flow == "sphere" else 0.5  # Whitaker's sphere takes the stream's properties

    def at(temperature: float | None) -> LayerAnswers:
        p = case.properties(temperature)
        u = case.velocity(p.density)
        re = p.density * u * group_length / p.viscosity
        h = case.get("coefficient")
        if h is not None:
            nusselt, method, outside = h * group_length / p.conductivity, "stated", ""
        elif case.flow == "plate":
            nusselt, method, outside = methods.nusselt(re, p.prandtl, case.wall, transition, case.allow)
        else:
            nusselt, method, outside = cross.nusselt(case.flow, re, p.prandtl, case.allow, **_shape(case, p, stream))
        h = nusselt * p.conductivity / group_length
        driving = flux / h if flux is not None else difference
        return LayerAnswers(
            case,
            length,
            temperature,
            p,
            u,
            re,
            transition,
            nusselt,
            h,
            method,
            outside,
            driving,
            flux,
            stream,
            group_length,
        )

    return close_on_film(case, at, stream, difference, film)


def close_on_film(
    case: Case, at: Callable[[float | None], Any], stream: float | None, difference: float | None, film: float = 0.5
) -> Any:
    """The answers at the film temperature, which a prescribed flux sets itself; or at the stated temperature.

    ``film`` is the part of the difference that lies between the stream and the temperature of the properties.
    """
    stated = case.get("property_temperature")
    if stated is not None or stream is None:
        return at(stated)
    if case.fixed:
        found = at(None)
        return replace(found, property_temperature=stream + film * found.difference)
    if difference is not None or not film:
        found = at(stream + film * (difference or 0.0))
    else:
        found = at(settle(stream, lambda t: stream + film * at(t).difference, "film temperature"))
    case.refuse_phase_change(stream, found.property_temperature)
    return found


_BODY_TRANSITION = 2e5  # Re from which the layer on a cylinder or sphere is turbulent, common practice


def _lengths(case: Case) -> tuple[float, float]:
    """Length of the layer, and the length that the groups are on."""
    if case.flow == "plate":
        return case.need("length"), case.need("length")
    diameter = case.need("diameter")
    return (case.need("radius"), diameter) if case.flow == "jet" else (diameter, diameter)


def _shape(case: Case, p: Properties, stream: float | None) -> dict[str, float]:
    """What the methods of cross-flow and jets ask for besides Re and Pr."""
    if case.flow == "jet":
        diameter = case.need("diameter")
        return {"height": case.need("distance") / diameter, "radius": case.need("radius") / diameter}
    if case.flow == "sphere" and case.has("wall_temperature") and stream is not None and not case.fixed:
        return {"viscosity_ratio": p.viscosity / case.properties(case.get("wall_temperature")).viscosity}
    return {}


def stream_and_difference(case: Case) -> tuple[float | None, float | None]:
    """Temperature of the stream or still fluid, and wall minus it, as far as they are stated."""
    stream = case.get("stream_temperature")
    if case.wall == "flux":
        if case.get("heat_flux") == 0:
            raise CaseRefused(f'"{case.stated["heat_flux"].label}" is zero; nothing is exchanged')
        if stream is None and not (case.fixed or case.has("property_temperature")):
            case.need("stream_temperature")
        return stream, None
    wall, difference = case.get("wall_temperature"), case.get("temperature_difference")
    if wall is not None and difference is not None and stream is not None:
        raise CaseRefused("wall temperature, stream temperature and their difference are all stated; state two")
    if wall is not None and difference is not None:
        stream = wall - difference
    elif wall is not None:
        stream = case.need("stream_temperature")
        difference = wall - stream
    if difference == 0:
        raise CaseRefused("wall and stream have the same temperature; there is no driving difference to judge by")
    return stream, difference
