"""Answers of flows that exchange along a surface spread through them: tube bank, bed of particles, falling film.

Everything is as in a duct, with a the exchanging surface per volume of the stream: NTU = h·a·L/(ρcpU).
"""

import math
from abc import abstractmethod
from dataclasses import dataclass
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.inputs import Inputs
from cellfuncs.answers.passage import STATED, Chosen, Passage, Values, solve_passage
from cellfuncs.cases.case import Case, Properties
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import CaseRefused, OutOfRange
from cellfuncs.groups import STANDARD_GRAVITY
from cellfuncs.methods import METHODS


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
    """The answers of a bank, bed or film; closes the loops on mean bulk and wall temperature."""
    return solve_passage({"bank": Bank, "bed": Bed, "falling film": Film}[case.flow](case))


class _Through(Passage):
    """What the three have in common: a size, a surface per volume, a pressure drop."""

    friction_wanted = choice.DROP
    what_friction = "pressure drop"

    def size(self, p: Properties) -> float:
        return self.lengths[""]

    @abstractmethod
    def per_volume(self, p: Properties) -> float:
        """Exchanging surface per volume of the stream [1/m]."""

    def area(self, p: Properties) -> float | None:
        return self.case.get("flow_area")

    def velocity(self, p: Properties) -> float:
        return self.case.need("velocity")

    def drop(self, state: Inputs, chosen: Chosen) -> float:
        """Frictional pressure drop [Pa]."""
        method = METHODS[chosen.friction]
        found = choice.number(method, state.view(method))
        return found * self.length if method.gives == "pressure gradient" else found

    def shape(self, p: Properties) -> Duct:
        return Duct(self.size(p), self.area(p), self.case.flow, "both", self.per_volume(p) * self.size(p) / 4.0)

    def values(self, state: Inputs, chosen: Chosen) -> Values:
        p = self.at_bulk(state).p
        h, *_ = self.coefficient(state, chosen.nusselt)
        u = self.velocity(p)
        if chosen.friction == STATED:
            friction = self.case.get("friction_factor")
        else:
            friction = 2.0 * self.drop(state, chosen) * self.size(p) / (self.length * p.density * u**2)
        return Values(h, friction)

    def coefficient(self, state: Inputs, name: str) -> tuple[float, float, str]:
        if name == STATED:
            return self.case.get("coefficient"), 1.0, ""
        method = METHODS[name]
        view = state.view(method)
        return choice.number(method, view) * view.p.conductivity / view.length, 1.0, ""

    def answers(self, **known: Any) -> ThroughAnswers:
        p, shape = known["properties"], known["shape"]
        u = self.velocity(p)
        drop = known["friction"] * self.length * p.density * u**2 / (2.0 * shape.diameter)
        reynolds = p.density * u * shape.diameter / p.viscosity
        return ThroughAnswers(velocity=u, reynolds=reynolds, drop=drop, **known)


class Bank(_Through):
    """A bank of tubes across the stream; the velocity is that of the narrowest section."""

    def __init__(self, case: Case):
        diameter, rows = case.need("diameter"), case.need("rows")
        self.across, self.along = case.need("pitch_across") / diameter, case.need("pitch_along") / diameter
        if self.across <= 1.0 or self.along <= 0.5:
            raise CaseRefused("the tubes of the bank touch; the pitches are larger than the diameter")
        known = {
            "arrangement": case.get("arrangement", "staggered"),
            "across": self.across,
            "along": self.along,
            "pitch_ratio": self.across / self.along,
            "rows": rows,
            "wall": case.wall,
        }
        super().__init__(case, known, {"": diameter}, rows * self.along * diameter)

    def per_volume(self, p: Properties) -> float:
        # per volume swept at the velocity of the narrowest section
        return math.pi / ((self.across - 1.0) * self.along * self.size(p))


class Bed(_Through):
    """A bed of particles; the velocity is that in the empty vessel."""

    def __init__(self, case: Case):
        diameter, voidage = case.need("particle_diameter"), case.need("voidage")
        if voidage >= 1.0:
            raise CaseRefused(f'"{case.stated["voidage"].label}" is the free part of the volume, below 1')
        known = {"voidage": voidage, "diameter": diameter, "wall": case.wall}
        super().__init__(case, known, {"": diameter}, case.need("length"))

    def per_volume(self, p: Properties) -> float:
        return 6.0 * (1.0 - self.known["voidage"]) / self.size(p)


class Film(_Through):
    """A film that falls along a wall; its size is its thickness, its weight carries its friction."""

    def __init__(self, case: Case):
        self.flow = case.need("film_flow")
        self.gravity = case.get("gravity", STANDARD_GRAVITY) * math.cos(case.get("inclination", 0.0))
        if self.gravity <= 0:
            raise CaseRefused("a falling film needs a wall that is inclined less than 90 deg from the vertical")
        known = {"film_flow": self.flow, "gravity": self.gravity, "wall": case.wall, "film": "heated"}
        lengths = {
            "": self.size,
            "thickness of the film": self.size,
            "(ν²/g)^1/3": lambda p: ((p.viscosity / p.density) ** 2 / self.gravity) ** (1.0 / 3.0),
        }
        super().__init__(case, known, lengths, case.need("length"))

    def choose_friction(self, state: Inputs, allow: bool) -> tuple[str, str]:
        """The method of the film's thickness."""
        found = choice.recommended(state, ("length",), "thickness", True)
        return found.method.name, found.outside if allow else ""

    def size(self, p: Properties) -> float:
        laminar = 4.0 * self.flow / p.viscosity <= METHODS["Nusselt film thickness"].ranges[0].high
        method = METHODS["Nusselt film thickness" if laminar else "Brauer film thickness"]
        return method.function(self.flow, p.density, p.viscosity, self.gravity)

    def per_volume(self, p: Properties) -> float:
        return 1.0 / self.size(p)

    def area(self, p: Properties) -> float | None:
        width = self.case.get("width")
        return None if width is None else width * self.size(p)

    def velocity(self, p: Properties) -> float:
        return self.flow / (p.density * self.size(p))

    def drop(self, state: Inputs, chosen: Chosen) -> float:
        """The weight of the film on its area [Pa]."""
        return self.at_bulk(state).p.density * self.gravity * self.length
