"""Answers of a layer on a body in a stream: plate, cylinder, sphere, jet. Mean coefficient, wall, flux, duty.

The length is that of the plate, the diameter of cylinder and sphere, the radius that a jet covers.
"""

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any

from cellfuncs.answers import driving as driving_difference
from cellfuncs.answers.loop import told
from cellfuncs.answers.path import far_temperature, refuse_without_end, resistance
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


def solve_layer(
    case: Case, finish: Callable[[LayerAnswers, bool], LayerAnswers] = lambda found, allow: found
) -> LayerAnswers:
    """The answers of an external flow; closes the loops on film temperature and, where it follows, the difference.

    ``finish`` may change the answers at each step of the loops, for instance blend them with free convection.
    """
    length, group_length = _lengths(case)
    transition = case.get("transition", methods.TRANSITION) if case.flow == "plate" else _BODY_TRANSITION
    stream, difference = stream_and_difference(case)
    film = 0.0 if case.flow == "sphere" else 0.5  # Whitaker's sphere takes the stream's properties
    form = case.flow if case.flow in ("cylinder", "sphere") else "plane"

    def at(temperature: float | None, driving: float, allow: bool) -> LayerAnswers:
        p = case.properties(temperature)
        u = case.velocity(p.density)
        re = p.density * u * group_length / p.viscosity
        h = case.get("coefficient")
        if h is not None:
            nusselt, method, outside = h * group_length / p.conductivity, "stated", ""
        elif case.flow == "plate":
            nusselt, method, outside = methods.nusselt(re, p.prandtl, case.wall, transition, allow)
        else:
            shape = _shape(case, p, stream, driving)
            nusselt, method, outside = cross.nusselt(case.flow, re, p.prandtl, allow, **shape)
        h = nusselt * p.conductivity / group_length
        flux = case.get("heat_flux")
        found = LayerAnswers(
            case, length, temperature, p, u, re, transition, nusselt, h, method, outside, driving, flux, stream,
            group_length,
        )  # fmt: skip
        return finish(found, allow)

    return close_on_film(case, at, stream, difference, film, form, group_length / 2.0)


def close_on_film(
    case: Case,
    at: Callable[[float | None, float, bool], Any],
    stream: float | None,
    difference: float | None,
    film: float,
    form: str,
    radius: float,
) -> Any:
    """The answers at the film temperature, or at the stated one; the difference from a flux or a path where it is open.

    ``at`` gives the answers at a temperature of the properties and a difference, beyond the range of methods where
    it may; ``film`` is the part of the difference between the stream and the properties' temperature; ``form`` and
    ``radius`` are those of the surface.
    """
    stated = case.get("property_temperature")
    follows = stated is None and stream is not None

    def solved(driving: float, allow: bool) -> Any:
        return at(stream + film * driving if follows and not case.fixed else stated, driving, allow)

    if difference is None:

        def coefficient(driving: float) -> float:
            if not follows or case.fixed:
                return solved(driving, True).coefficient
            return told(lambda _: solved(driving, True).coefficient, stream + film * driving, "film temperature")

        far = far_temperature(case)
        if far is None:
            difference = driving_difference.for_flux(coefficient, case.get("heat_flux"))
        else:
            difference = driving_difference.for_path(coefficient, far - stream, resistance(case, form, radius))
    found = solved(difference, case.allow)
    if follows and case.fixed:
        return replace(found, property_temperature=stream + film * difference)
    if follows:
        case.refuse_phase_change(stream, found.property_temperature)
    return found


_BODY_TRANSITION = 2e5  # Re from which the layer on a cylinder or sphere is turbulent, common practice


def _lengths(case: Case) -> tuple[float, float]:
    """Length of the layer, and the length that the groups are on."""
    if case.flow == "plate":
        return case.need("length"), case.need("length")
    diameter = case.need("diameter")
    return (case.need("radius"), diameter) if case.flow == "jet" else (diameter, diameter)


def _shape(case: Case, p: Properties, stream: float | None, driving: float) -> dict[str, float]:
    """What the methods of cross-flow and jets ask for besides Re and Pr."""
    if case.flow == "jet":
        diameter = case.need("diameter")
        return {"height": case.need("distance") / diameter, "radius": case.need("radius") / diameter}
    if case.flow == "sphere" and stream is not None and not case.fixed and driving:
        return {"viscosity_ratio": p.viscosity / case.properties(stream + driving).viscosity}
    return {}


def stream_and_difference(case: Case) -> tuple[float | None, float | None]:
    """Temperature of the stream or still fluid, and wall minus it, as far as they are stated."""
    stream = case.get("stream_temperature")
    refuse_without_end(case)
    if case.wall == "flux":
        if case.get("heat_flux") == 0:
            raise CaseRefused(f'"{case.stated["heat_flux"].label}" is zero; nothing is exchanged')
        if stream is None and not (case.fixed or case.has("property_temperature")):
            case.need("stream_temperature")
        return stream, None
    far = far_temperature(case)
    if far is not None:
        stream = case.need("stream_temperature")
        if far == stream:
            raise CaseRefused("both ends of the heat path have the same temperature; nothing is exchanged")
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
