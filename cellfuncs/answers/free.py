"""Answers of free convection: a surface in a still fluid, or a layer between two walls."""

import math
from dataclasses import dataclass

from cellfuncs.answers import driving as driving_difference
from cellfuncs.answers.layer import close_on_film, stream_and_difference
from cellfuncs.answers.loop import told
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
    def second_wall(self) -> float | None:
        """The other wall of an enclosure [K]; with a stated flux the one that gives it."""
        if self.case.flow != "enclosure" or self.stream is None:
            return None
        stated = self.case.get("wall_temperature")
        return self.stream if stated is not None and stated > self.stream else self.wall

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
    size = _size(case, surface)
    gravity = case.get("gravity", STANDARD_GRAVITY) * math.cos(case.get("inclination", 0.0))

    def at(temperature: float | None, driving: float, allow: bool) -> FreeAnswers:
        p = case.properties(temperature)
        if p.expansion <= 0:
            raise CaseRefused("free convection needs an expansion coefficient above zero; state it (gases: 1/T)")
        nu = p.viscosity / p.density
        ra = rayleigh(size.length, abs(driving), nu, p.diffusivity, p.expansion, gravity)
        h = case.get("coefficient")
        if h is not None:
            nusselt, method, outside = h * size.length / p.conductivity, "stated", ""
        else:
            more = _more(case, surface, size.length, ra, p.prandtl)
            nusselt, method, outside = methods.nusselt(surface, ra, p.prandtl, allow, **more)
            h = nusselt * p.conductivity / size.length
        flux = case.get("heat_flux")
        return FreeAnswers(
            case, size.length, temperature, p, ra, nusselt, h, method, outside, driving, flux, stream, gravity,
            size.area,
        )  # fmt: skip

    form = "cylinder" if surface.endswith("cylinder") else "sphere" if surface == "sphere" else "plane"
    return close_on_film(case, at, stream, difference, 0.5, form, case.get("diameter", 0.0) / 2.0)


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
    """A layer of still fluid between two walls; properties at the mean of the walls.

    With a heat flux and one wall temperature the other wall follows: it gives the flux to the fluid.
    """
    gap = case.need("gap")
    heated = case.get("heated_from", "from the side")
    width, length = case.get("width"), case.get("length")
    aspect = case.need("length") / gap if heated == "from the side" else 1.0
    area = None if width is None or length is None else width * length
    gravity = case.get("gravity", STANDARD_GRAVITY)
    flux = case.get("heat_flux")
    known, apart = _walls(case)
    stated = case.get("property_temperature")

    def at(driving: float, allow: bool) -> FreeAnswers:
        temperature = stated if stated is not None or known is None else known + 0.5 * driving
        p = case.properties(temperature)
        nu = p.viscosity / p.density
        ra = rayleigh(gap, abs(driving), nu, p.diffusivity, max(p.expansion, 1e-12), gravity)
        nusselt, method, outside = methods.enclosure(ra, p.prandtl, aspect, heated, allow)
        h = nusselt * p.conductivity / gap
        cold = None if known is None else min(known, known + driving)
        return FreeAnswers(
            case, gap, temperature, p, ra, nusselt, h, method, outside, abs(driving), flux, cold, gravity, area
        )

    def coefficient(driving: float) -> float:
        if known is None:
            return at(driving, True).coefficient
        return told(lambda _: at(driving, True).coefficient, known + 0.5 * driving, "mean of the walls")

    if apart is None:
        apart = driving_difference.for_flux(coefficient, flux)
    return at(apart, case.allow)


def _walls(case: Case) -> tuple[float | None, float | None]:
    """One wall's temperature, and how far the other is from it; None for what is not known."""
    one, other = case.get("wall_temperature"), case.get("second_wall_temperature")
    apart = case.get("temperature_difference")
    flux = case.get("heat_flux")
    if flux is not None:
        if flux == 0:
            raise CaseRefused(f'"{case.stated["heat_flux"].label}" is zero; nothing is exchanged')
        if apart is not None or (one is not None and other is not None):
            raise CaseRefused("a heat flux goes with one wall temperature; the other one follows")
        known = other if one is None else one
        if known is None and not (case.fixed or case.has("property_temperature")):
            case.need("wall_temperature")
        return known, None
    if one is not None and other is not None:
        one, apart = min(one, other), abs(one - other)
    if not apart:
        case.need("second_wall_temperature" if one is not None else "wall_temperature")
        raise CaseRefused("both walls have the same temperature; there is no driving difference to judge by")
    return other if one is None else one, abs(apart)
