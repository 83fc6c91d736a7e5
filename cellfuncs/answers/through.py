"""Answers of flows that exchange along a surface spread through them: tube bank, bed of particles, falling film.

Everything is as in a duct, with a the exchanging surface per volume of the stream: NTU = h·a·L/(ρcpU).
"""

import math
from dataclasses import dataclass

from cellfuncs.answers.duct import DuctAnswers, close_on_bulk, temperatures
from cellfuncs.answers.path import far_temperature, overall
from cellfuncs.cases.case import Case, Properties
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import CaseRefused, OutOfRange
from cellfuncs.groups import STANDARD_GRAVITY
from cellfuncs.methods import METHODS, packed


@dataclass(frozen=True)
class ThroughAnswers(DuctAnswers):
    """A solved bank, bed or film; ``drop`` is the frictional pressure drop or, in a film, the weight per area."""

    drop: float = 0.0

    @property
    def pressure_drop(self) -> float:
        return self.case.get("pressure_drop", self.drop)

    @property
    def recovery_rise(self) -> float:
        raise OutOfRange(f"no recovery factor of a {self.case.flow} is published that we know of")


def solve_through(case: Case) -> ThroughAnswers:
    """The answers of a bank, bed or film; closes the loop on the mean bulk temperature."""
    inlet, difference = temperatures(case)
    build = {"bank": _bank, "bed": _bed, "falling film": _film}[case.flow]

    def at(temperature: float | None) -> ThroughAnswers:
        return build(case, temperature, case.properties(temperature), inlet, difference)

    return close_on_bulk(case, at, inlet, difference)


def _answers(
    case: Case, temperature: float | None, p: Properties, inlet: float | None, difference: float | None, *,
    size: float, per_volume: float, area: float | None, length: float, velocity: float, nusselt: float, method: str,
    outside: str, drop: float,
) -> ThroughAnswers:  # fmt: skip
    h, flux = case.get("coefficient"), case.get("heat_flux")
    if h is not None:
        nusselt, method, outside = h * size / p.conductivity, "stated", ""
    else:
        h = nusselt * p.conductivity / size
    shape = Duct(size, area, case.flow, "both", per_volume * size / 4.0)
    reynolds = p.density * velocity * size / p.viscosity
    friction = 2.0 * drop * size / (length * p.density * velocity**2)
    driving = difference if flux is None else flux / h
    film = h
    if far_temperature(case) is not None:
        h, method = overall(case, shape, h), f"overall, film {h:.4g} by {method}"
    return ThroughAnswers(
        case, shape, length, temperature, p, velocity, reynolds, nusselt, friction, h, method, outside, driving, flux,
        inlet, film, drop,
    )  # fmt: skip


def _bank(case: Case, temperature: float | None, p: Properties, *ends: float | None) -> ThroughAnswers:
    diameter, rows = case.need("diameter"), case.need("rows")
    across, along = case.need("pitch_across") / diameter, case.need("pitch_along") / diameter
    arrangement = case.get("arrangement", "staggered")
    if across <= 1.0 or along <= 0.5:
        raise CaseRefused("the tubes of the bank touch; the pitches are larger than the diameter")
    u = case.need("velocity")
    re = p.density * u * diameter / p.viscosity
    outside = METHODS["Zukauskas bank"].check(case.allow, Re=re, Pr=p.prandtl)
    nusselt = packed.bank(re, p.prandtl, arrangement, across, along, rows)
    drop = packed.bank_drop(re, p.density, u, arrangement, across, along, rows)
    length = rows * along * diameter
    surface = math.pi / ((across - 1.0) * along * diameter)  # per volume swept at the velocity of the narrowest section
    return _answers(
        case, temperature, p, *ends, size=diameter, per_volume=surface, area=case.get("flow_area"), length=length,
        velocity=u, nusselt=nusselt, method="Zukauskas bank", outside=outside, drop=drop,
    )  # fmt: skip


def _bed(case: Case, temperature: float | None, p: Properties, *ends: float | None) -> ThroughAnswers:
    diameter, voidage, length = case.need("particle_diameter"), case.need("voidage"), case.need("length")
    if voidage >= 1.0:
        raise CaseRefused(f'"{case.stated["voidage"].label}" is the free part of the volume, below 1')
    u = case.need("velocity")
    re = p.density * u * diameter / p.viscosity
    outside = METHODS["Wakao bed"].check(case.allow, Re=re) or METHODS["Ergun"].check(case.allow, voidage=voidage)
    drop = length * packed.bed_gradient(u, diameter, voidage, p.density, p.viscosity)
    return _answers(
        case, temperature, p, *ends, size=diameter, per_volume=6.0 * (1.0 - voidage) / diameter,
        area=case.get("flow_area"), length=length, velocity=u, nusselt=packed.bed(re, p.prandtl), method="Wakao bed",
        outside=outside, drop=drop,
    )  # fmt: skip


def _film(case: Case, temperature: float | None, p: Properties, *ends: float | None) -> ThroughAnswers:
    flow, length = case.need("film_flow"), case.need("length")
    gravity = case.get("gravity", STANDARD_GRAVITY) * math.cos(case.get("inclination", 0.0))
    if gravity <= 0:
        raise CaseRefused("a falling film needs a wall that is inclined less than 90 deg from the vertical")
    thickness = packed.film_thickness(flow, p.density, p.viscosity, gravity)
    outside = packed.film_outside(flow, p.viscosity, case.allow)
    width = case.get("width")
    return _answers(
        case, temperature, p, *ends, size=thickness, per_volume=1.0 / thickness,
        area=None if width is None else width * thickness, length=length, velocity=flow / (p.density * thickness),
        nusselt=packed.film(case.wall), method="laminar film", outside=outside, drop=p.density * gravity * length,
    )  # fmt: skip
