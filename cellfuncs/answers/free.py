"""Answers of free convection: a surface in a still fluid, or a layer between two walls."""

import math
from dataclasses import dataclass
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers import driving as driving_difference
from cellfuncs.answers.inputs import Inputs, Known
from cellfuncs.answers.loop import told
from cellfuncs.answers.surface import STATED, choose, close, stream_and_difference
from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CaseRefused, OutOfRange
from cellfuncs.groups import STANDARD_GRAVITY
from cellfuncs.methods import Method

TURBULENT_FROM = 1e9  # Ra of a surface in a still fluid, common practice
CONDUCTION = "conduction alone"
_CRITICAL = 1708.0  # Ra at which a level layer begins to turn over
_STILL_UPRIGHT = 1e3  # Ra below which an upright layer hardly moves, common practice


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
    chosen: str = ""
    state: Inputs | None = None  # what methods may ask

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
    flux, memo = case.get("heat_flux"), {}
    known, lengths = Known(free_known(case, surface, size.length)), free_lengths(case, surface, size.length)

    def state_of(driving: float | None) -> Inputs:
        return Inputs(case, known, lengths, stream, driving, memo, flux=flux, gravity=gravity)

    def answers_of(state: Inputs, method: Method | None, outside: str) -> FreeAnswers:
        view = state.view_at("film") if method is None else state.view(method)
        p = view.p
        if p.expansion <= 0:
            raise CaseRefused("free convection needs an expansion coefficient above zero; state it (gases: 1/T)")
        name = STATED if method is None else method.name
        ra = state.view_at("film" if method is None else method.property_temperature).get("rayleigh")
        if method is None:
            h = case.get("coefficient")
        else:
            h = choice.number(method, view) * p.conductivity / view.length
        return FreeAnswers(
            case, size.length, view.temperature, p, ra, h * size.length / p.conductivity, h, name, outside,
            state.difference, flux, stream, gravity, size.area, name, state,
        )  # fmt: skip

    form = "cylinder" if surface.endswith("cylinder") else "sphere" if surface == "sphere" else "plane"
    return close(case, state_of, answers_of, stream, difference, form, case.get("diameter", 0.0) / 2.0)


def free_known(case: Case, surface: str, length: float) -> dict[str, Any]:
    """What methods of free convection may ask besides properties."""
    known: dict[str, Any] = {"surface": surface, "wall": case.wall}
    if surface == "inclined plate":
        known |= {"angle": math.degrees(case.need("inclination")), "facing": case.get("facing", "not stated")}
    elif surface == "vertical cylinder":
        known["length_over_diameter"] = length / case.need("diameter")
    elif surface == "channel":
        known |= {"height_of_channel": case.need("length"), "heated": case.get("heated_walls", "both")}
    return known


def free_lengths(case: Case, surface: str, length: float) -> dict[str, float]:
    """The lengths that these methods name."""
    lengths = {"": length}
    if surface.startswith("horizontal plate"):
        lengths["short side of the face"] = min(case.need("length"), case.need("width"))
    return lengths


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


def solve_enclosure(case: Case) -> FreeAnswers:
    """A layer of still fluid between two walls; properties at the mean of the walls.

    With a heat flux and one wall temperature the other wall follows: it gives the flux to the fluid.
    """
    gap = case.need("gap")
    heated = case.get("heated_from", "from the side")
    width, length = case.get("width"), case.get("length")
    known: dict[str, Any] = {"shape": "layer", "heated_from": heated}
    if heated == "from the side":
        known["aspect"] = case.need("length") / gap
    elif heated == "tilted":
        known |= {"tilt": 90.0 - math.degrees(case.need("inclination")), "aspect": case.need("length") / gap}
    known = Known(known)
    area = None if width is None or length is None else width * length
    gravity, flux, memo = case.get("gravity", STANDARD_GRAVITY), case.get("heat_flux"), {}
    wall, difference = _walls(case)

    def state_of(driving: float | None) -> Inputs:
        return Inputs(case, known, {"": gap}, wall, driving, memo, flux=flux, gravity=gravity)

    def answers_of(state: Inputs, method: Method | None, outside: str) -> FreeAnswers:
        view = state.view_at("mean of the walls")
        p, driving = view.p, state.difference
        ra = view.get("rayleigh") or 0.0
        nusselt = 1.0 if method is None else choice.number(method, view)
        name = CONDUCTION if method is None else method.name
        cold = None if wall is None else min(wall, wall + driving)
        return FreeAnswers(
            case, gap, view.temperature, p, ra, nusselt, nusselt * p.conductivity / gap, name, outside, abs(driving),
            flux, cold, gravity, area, name, state,
        )  # fmt: skip

    return close_enclosure(case, state_of, answers_of, wall, difference)


def close_enclosure(
    case: Case, state_of: Any, answers_of: Any, wall: float | None, difference: float | None
) -> FreeAnswers:
    """The answers of an enclosure at the difference of its walls, or at the one that a flux asks for."""

    def solved(driving: float, allow: bool) -> FreeAnswers:
        state = state_of(driving)
        found = _enclosure_method(state, allow)
        return answers_of(state, *((None, "") if found is None else (found.method, found.outside)))

    def coefficient(driving: float) -> float:
        if wall is None or case.fixed or case.has("property_temperature"):
            return solved(driving, True).coefficient
        return told(lambda _: solved(driving, True).coefficient, wall + 0.5 * driving, "mean of the walls")

    if difference is None:
        difference = driving_difference.for_flux(coefficient, case.get("heat_flux"))
    return solved(difference, case.allow)


def _enclosure_method(state: Inputs, allow: bool) -> choice.Candidate | None:
    """The method of a layer; None where nothing stirs: heated from above, or Ra below where layers turn over."""
    if state.choice("heated_from") == "from above":
        return None
    ra = state.view_at("mean of the walls").get("rayleigh") or 0.0
    still = ra < (_STILL_UPRIGHT if state.choice("heated_from") == "from the side" else _CRITICAL)
    try:
        return choose(state, allow and not still)
    except OutOfRange:
        if still and choice.row(state.case, "method", choice.NUSSELT) is None:
            return None
        raise


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
