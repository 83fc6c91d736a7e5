"""Answers of free convection: a surface in a still fluid, or a layer between two walls."""

import math
from dataclasses import dataclass

from cellfuncs.answers.layer import close_on_film, stream_and_difference
from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CaseRefused
from cellfuncs.groups import STANDARD_GRAVITY, rayleigh
from cellfuncs.methods import free as methods

TURBULENT_FROM = 1e9  # Ra of a surface in a still fluid, common practice


@dataclass(frozen=True)
class FreeAnswers:
    """A solved case of free convection; differences are wall minus fluid, or between the walls. SI units."""

    case: Case
    length: float  # that of Ra and Nu
    property_temperature: float | None
    properties: Properties
    rayleigh: float
    nusselt: float
    coefficient: float
    method: str
    outside: str
    difference: float
    flux: float | None
    stream: float | None
    gravity: float
    area: float | None

    @property
    def turbulent(self) -> bool:
        return self.rayleigh > TURBULENT_FROM

    @property
    def velocity(self) -> float:
        """Scale of the velocity that buoyancy makes [m/s]."""
        p = self.properties
        if p.prandtl <= 1.0:
            return math.sqrt(self.gravity * p.expansion * abs(self.difference) * self.length)
        return p.diffusivity / self.length * math.sqrt(self.rayleigh)

    @property
    def reynolds(self) -> float:
        return self.properties.density * self.velocity * self.length / self.properties.viscosity

    @property
    def capacity_flux(self) -> float:
        """ρcpU [W/(m2 K)]."""
        return self.properties.density * self.properties.specific_heat * self.velocity

    @property
    def grashof(self) -> float:
        return self.rayleigh / self.properties.prandtl

    @property
    def wall(self) -> float | None:
        return None if self.stream is None else self.stream + self.difference

    @property
    def mean_flux(self) -> float:
        return self.coefficient * self.difference

    @property
    def local_flux(self) -> float:
        return self.mean_flux

    @property
    def duty(self) -> float:
        if self.area is None:
            raise CaseRefused('a duty needs the row "width" (plates, channels) or "length" (cylinders)')
        return self.mean_flux * self.area


def solve_free(case: Case) -> FreeAnswers:
    """Free convection at a surface; closes the loops on film temperature and, for a flux, on Ra itself."""
    surface = case.need("surface")
    stream, difference = stream_and_difference(case)
    flux = case.get("heat_flux")
    size = _size(case, surface)
    gravity = case.get("gravity", STANDARD_GRAVITY) * math.cos(case.get("inclination", 0.0))

    def with_difference(p: Properties, driving: float, temperature: float | None) -> FreeAnswers:
        if p.expansion <= 0:
            raise CaseRefused("free convection needs an expansion coefficient above zero; state it (gases: 1/T)")
        nu = p.viscosity / p.density
        ra = rayleigh(size.length, abs(driving), nu, p.diffusivity, p.expansion, gravity)
        h = case.get("coefficient")
        if h is not None:
            nusselt, method, outside = h * size.length / p.conductivity, "stated", ""
        else:
            more = _more(case, surface, size.length, ra, p.prandtl)
            nusselt, method, outside = methods.nusselt(surface, ra, p.prandtl, case.allow, **more)
            h = nusselt * p.conductivity / size.length
        return FreeAnswers(
            case,
            size.length,
            temperature,
            p,
            ra,
            nusselt,
            h,
            method,
            outside,
            driving,
            flux,
            stream,
            gravity,
            size.area,
        )

    def at(temperature: float | None) -> FreeAnswers:
        p = case.properties(temperature)
        if flux is None:
            return with_difference(p, difference, temperature)
        driving = _for_flux(lambda d: with_difference(p, math.copysign(d, flux), temperature).coefficient, abs(flux))
        return with_difference(p, math.copysign(driving, flux), temperature)

    return close_on_film(case, at, stream, difference)


def _for_flux(coefficient, flux: float) -> float:
    """The difference at which h·ΔT is the flux; h grows slowly with ΔT, so that halving the step converges."""
    driving = 10.0
    for _ in range(100):
        new = flux / coefficient(driving)
        if abs(new - driving) <= 1e-12 * new:
            return new
        driving = math.sqrt(new * driving)  # ΔT ~ q^4/5: the mean in the logarithm damps the swing
    return driving


@dataclass(frozen=True)
class _Size:
    length: float
    area: float | None


def _size(case: Case, surface: str) -> _Size:
    """The length of Ra, and the exchanging surface where it is stated."""
    width = case.get("width")
    if surface in ("vertical plate", "inclined plate"):
        length = case.need("length")
        return _Size(length, None if width is None else length * width)
    if surface.startswith("horizontal plate"):
        length, width = case.need("length"), case.need("width")
        return _Size(length * width / (2.0 * (length + width)), length * width)
    if surface == "channel":
        case.need("gap")
        length = case.need("length")
        return _Size(case.get("gap"), None if width is None else 2.0 * length * width)
    diameter = case.need("diameter")
    if surface == "sphere":
        return _Size(diameter, math.pi * diameter**2)
    if surface == "vertical cylinder":
        return _Size(case.need("length"), math.pi * diameter * case.need("length"))
    length = case.get("length")
    return _Size(diameter, None if length is None else math.pi * diameter * length)


def _more(case: Case, surface: str, length: float, ra: float, prandtl: float) -> dict[str, float]:
    if surface == "inclined plate":
        return {"angle from vertical": math.degrees(case.need("inclination"))}
    if surface == "vertical cylinder":
        return {"(D/L)Gr^1/4": case.need("diameter") / length * (ra / prandtl) ** 0.25}
    if surface == "channel":
        return {"Ra S/L": ra * length / case.need("length")}
    return {}


def solve_enclosure(case: Case) -> FreeAnswers:
    """A layer of still fluid between two walls; properties at the mean of the walls."""
    gap = case.need("gap")
    heated = case.get("heated_from", "from the side")
    one, other = case.get("wall_temperature"), case.get("second_wall_temperature")
    apart = case.get("temperature_difference")
    if one is not None and other is not None:
        apart = abs(one - other)
    if not apart:
        case.need("second_wall_temperature" if one is not None else "wall_temperature")
        raise CaseRefused("both walls have the same temperature; there is no driving difference to judge by")
    cold = None if one is None else min(one, other) if other is not None else one
    temperature = case.get("property_temperature", None if cold is None else cold + 0.5 * abs(apart))
    p = case.properties(temperature)
    gravity = case.get("gravity", STANDARD_GRAVITY)
    ra = rayleigh(gap, abs(apart), p.viscosity / p.density, p.diffusivity, max(p.expansion, 1e-12), gravity)
    aspect = case.need("length") / gap if heated == "from the side" else 1.0
    nusselt, method, outside = methods.enclosure(ra, p.prandtl, aspect, heated, case.allow)
    h = nusselt * p.conductivity / gap
    width, length = case.get("width"), case.get("length")
    area = None if width is None or length is None else width * length
    return FreeAnswers(
        case, gap, temperature, p, ra, nusselt, h, method, outside, abs(apart), None, cold, gravity, area
    )
