"""Answers of a flat plate in a parallel stream: mean coefficient, wall temperature, flux, duty."""

from dataclasses import dataclass, replace

from cellfuncs.answers.loop import settle
from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CaseRefused
from cellfuncs.methods import plate as methods
from cellfuncs.methods import recovery


@dataclass(frozen=True)
class LayerAnswers:
    """A solved plate; differences are wall minus stream. SI units."""

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
        """Wall flux at the far end [W/m2]."""
        if self.flux is not None:
            return self.flux
        if self.laminar or self.method == "stated":
            return 0.5 * self.mean_flux if self.laminar else self.mean_flux
        local = methods.turbulent_local(self.reynolds, self.properties.prandtl)
        return local * self.properties.conductivity / self.length * self.difference

    @property
    def duty(self) -> float:
        """Heat given by one side of the plate [W]."""
        if not self.case.has("width"):
            raise CaseRefused('a duty needs the row "width"')
        return self.mean_flux * self.length * self.case.get("width")

    @property
    def recovery_rise(self) -> float:
        """ΔT_rec = rU²/(2cp) [K]; refused outside the range of r."""
        pr = self.properties.prandtl
        factor = recovery.laminar_plate(pr) if self.laminar else recovery.turbulent_plate(pr)[0]
        return factor * self.velocity**2 / (2.0 * self.properties.specific_heat)


def solve_layer(case: Case) -> LayerAnswers:
    """The answers of a plate case; with a prescribed flux it closes the loop on the film temperature."""
    length = case.need("length")
    transition = case.get("transition", methods.TRANSITION)
    flux = case.get("heat_flux")
    stream, difference = _temperatures(case)
    stated = case.get("property_temperature")

    def at(temperature: float | None) -> LayerAnswers:
        p = case.properties(temperature)
        u = case.velocity(p.density)
        re = p.density * u * length / p.viscosity
        h = case.get("coefficient")
        if h is not None:
            nusselt, method, outside = h * length / p.conductivity, "stated", ""
        else:
            nusselt, method, outside = methods.nusselt(re, p.prandtl, case.wall, transition, case.allow)
        h = nusselt * p.conductivity / length
        driving = flux / h if flux is not None else difference
        return LayerAnswers(
            case, length, temperature, p, u, re, transition, nusselt, h, method, outside, driving, flux, stream
        )

    if stated is not None or stream is None:
        return at(stated)
    if case.fixed:
        found = at(None)
        return replace(found, property_temperature=stream + 0.5 * found.difference)
    if difference is not None:
        found = at(stream + 0.5 * difference)
    else:
        found = at(settle(stream, lambda t: stream + 0.5 * at(t).difference, "film temperature"))
    case.refuse_phase_change(stream, found.property_temperature)
    return found


def _temperatures(case: Case) -> tuple[float | None, float | None]:
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
