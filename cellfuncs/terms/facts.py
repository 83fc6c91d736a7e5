"""What a solved case of any flow kind can tell: one place that knows which flow has what.

Premises, momentum and the table of groups ask here. What a flow kind does not have is refused with a text, so
that a row says why it is not judged.
"""

import math
from functools import cached_property
from typing import Any

from cellfuncs.answers import Solution
from cellfuncs.cases import labels
from cellfuncs.cases.case import Properties
from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.groups import STANDARD_GRAVITY
from cellfuncs.methods.duct import LAMINAR_UP_TO

FALLING_FILM = "falling film"
GAS_CONSTANT = 8.31446261815324  # J/(mol K), exact by definition of the SI


class Facts:
    """A solution by what it has in common with others. SI units throughout."""

    def __init__(self, solution: Solution):
        self.solution = solution
        self.case = solution.case
        self.answers: Any = solution.answers
        self.flow: str = solution.case.flow

    # -- what kind of flow ------------------------------------------------------------------

    @cached_property
    def family(self) -> str:
        """``through`` (a passage with a pressure drop), ``layer``, ``gap``, ``free``, ``body`` or ``other``."""
        a = self.answers
        if hasattr(a, "rayleigh"):
            return "free"
        if hasattr(a, "pressure_drop") and hasattr(a, "transfer_units"):
            return "through"
        if hasattr(a, "walls_apart"):
            return "gap"
        if hasattr(a, "transition"):
            return "layer"
        return "other" if hasattr(a, "velocity") else "body"

    def attribute(self, name: str, words: str) -> Any:
        """A field of the answers, or a refusal that says that this flow has none."""
        value = getattr(self.answers, name, None)
        if value is None:
            raise NoModel(f"the {words} is not known for this {self.flow}")
        return value

    def stated(self, key: str) -> float:
        """A stated row, or a refusal that asks for it."""
        if not self.case.has(key):
            raise NoModel(f'not stated; add the row "{labels.dictionary()[key].label}" to judge it')
        return self.case.get(key)

    # -- motion and lengths -----------------------------------------------------------------

    @property
    def properties(self) -> Properties:
        return self.attribute("properties", "fluid")

    @property
    def velocity(self) -> float:
        return self.attribute("velocity", "velocity")

    @property
    def length(self) -> float:
        """The length along the stream."""
        return self.attribute("length", "length along the stream")

    @property
    def group_length(self) -> float:
        return self.solution.group_length

    @property
    def reynolds(self) -> float:
        return self.attribute("reynolds", "Reynolds number")

    @property
    def coefficient(self) -> float:
        """The coefficient between fluid and wall (not the overall one to the surroundings)."""
        if self.family == "gap":
            return self.properties.conductivity / self.answers.gap
        return getattr(self.answers, "film", 0.0) or self.attribute("coefficient", "coefficient")

    @property
    def driving(self) -> float:
        return self.solution.driving

    @cached_property
    def laminar(self) -> bool:
        """Whether the flow is laminar by its own limit."""
        a = self.answers
        if hasattr(a, "laminar"):
            return a.laminar
        if hasattr(a, "turbulent"):
            return not a.turbulent
        return self.family == "gap" or self.reynolds <= LAMINAR_UP_TO

    @cached_property
    def drop(self) -> float:
        """Frictional pressure drop; zero where a flow has none. A falling film has a weight, no pressure drop."""
        through = self.family == "through" and self.flow != FALLING_FILM
        return abs(self.answers.pressure_drop) if through else 0.0

    @property
    def gravity(self) -> float:
        return self.case.get("gravity", STANDARD_GRAVITY)

    @property
    def upright(self) -> bool | None:
        """Whether the stream runs more along gravity than across it; None where it is not stated."""
        angle = self.case.get("inclination")
        return None if angle is None else abs(math.cos(angle)) >= math.sqrt(0.5)

    # -- temperatures and state -------------------------------------------------------------

    @cached_property
    def temperatures(self) -> dict[str, float]:
        """The temperatures that the fluid meets, by name [K]."""
        a = self.answers
        named = {
            "inlet": getattr(a, "inlet", None),
            "stream": getattr(a, "stream", None),
            "outlet": getattr(a, "outlet", None),
            "wall": getattr(a, "wall", None),
            "peak": getattr(a, "peak", None),
            "colder wall": getattr(a, "cold", None),
            "second wall": self.case.get("second_wall_temperature"),
        }
        return {name: value for name, value in named.items() if value is not None}

    def hottest(self) -> tuple[str, float]:
        return self._end(max)

    def coldest(self) -> tuple[str, float]:
        return self._end(min)

    def _end(self, pick: Any) -> tuple[str, float]:
        if not self.temperatures:
            raise NoModel("no temperature of the flow is stated")
        return pick(self.temperatures.items(), key=lambda item: item[1])

    @property
    def temperature(self) -> float:
        """The temperature at which properties are taken."""
        return self.attribute("property_temperature", "property temperature")

    @cached_property
    def far(self) -> tuple[str, float]:
        """Where the fluid differs most from where properties are taken: the wall, in a film the peak."""
        if self.family == "gap":
            return "peak", self.attribute("peak", "peak temperature")
        return "wall", self.attribute("wall", "wall temperature")

    @cached_property
    def lowest_pressure(self) -> float:
        """The pressure behind the friction; where none is stated the atmosphere is taken to stand there."""
        return self.case.pressure - self.drop if self.pressure_stated else self.case.pressure

    @property
    def pressure_stated(self) -> bool:
        return self.case.has("pressure") or self.case.has("gauge_pressure")

    @property
    def pressure_remark(self) -> str:
        return "" if self.pressure_stated else "; no pressure is stated, the atmosphere is taken"

    @property
    def substance(self) -> Any:
        """The named substance, or a refusal."""
        if self.case.substance is None:
            raise NoModel("no substance is named, only its properties are stated")
        return self.case.substance

    def property_of(self, what: str, temperature: float) -> float:
        return self.substance.get(what, temperature, self.case.pressure)

    @cached_property
    def phase(self) -> str:
        """liquid, gas or supercritical where properties are taken."""
        return self.substance.phase(self.temperature, self.case.pressure)

    @cached_property
    def sound(self) -> float:
        return self.property_of("speed_of_sound", self.temperature)

    @cached_property
    def mach(self) -> float:
        return self.velocity / self.sound

    @cached_property
    def heat_ratio(self) -> float:
        """γ = cp/cv from cp, β and the speed of sound, 1 + β²c²T/cp, exact for any simple fluid."""
        p = self.properties
        return 1.0 + (p.expansion * self.sound) ** 2 * self.temperature / p.specific_heat

    @cached_property
    def mean_free_path(self) -> float:
        """λ = μ/p·√(πRT/(2M)) of a gas."""
        if self.phase != "gas":
            raise NoModel(f"{self.substance.name} is {self.phase}: no mean free path")
        molar_mass = self.property_of("molar_mass", self.temperature)
        thermal = math.sqrt(math.pi * GAS_CONSTANT * self.temperature / (2.0 * molar_mass))
        return self.properties.viscosity / self.case.pressure * thermal

    def far_properties(self) -> Properties:
        """Properties there, in the phase of the stream; or a refusal."""
        if self.case.fixed:
            raise NoModel("all properties are stated, so that their change with temperature is not known")
        if self.case.substance is not None:
            other = self.case.substance.phase(self.far[1], self.case.pressure)
            if {other, self.phase} == {"liquid", "gas"}:
                raise NoModel(f"at the {self.far[0]} the fluid is {other}, in the stream {self.phase}")
        return self.case.properties(self.far[1])

    @cached_property
    def thinning(self) -> float:
        """b = −d ln μ/dT where properties are taken [1/K]."""
        if self.case.fixed or self.case.has("viscosity"):
            raise NoModel("the viscosity is stated, so that its fall with temperature is not known")
        t = self.temperature
        try:
            low, high = (self.case.properties(t + step).viscosity for step in (-0.5, 0.5))
        except CellfuncsError:
            low, high = self.case.properties(t - 1.0).viscosity, self.properties.viscosity
        return math.log(low / high)
