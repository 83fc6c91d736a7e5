"""What an effect is, and what a model must give so that one can be told."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from cellfuncs.errors import NoModel
from cellfuncs.models.trust import trusted

OUTLET, WALL, PEAK = "outlet temperature", "wall temperature", "peak temperature"
COEFFICIENT, DUTY, FLUX, DROP = "coefficient", "duty", "local flux", "pressure drop"
TEMPERATURES = (OUTLET, WALL, PEAK)
# the quantity that a change of an answer is
KINDS = {
    OUTLET: "temperature_difference",
    WALL: "temperature_difference",
    PEAK: "temperature_difference",
    COEFFICIENT: "heat_transfer_coefficient",
    DUTY: "power",
    FLUX: "heat_flux",
    DROP: "pressure_difference",
}
PAIR = frozenset({"viscous heating", "pressure work"})
ALONG, SOURCE, STORAGE = "conduction along", "volumetric source", "storage"
WALL_CONDUCTION, RADIATION = "wall conduction", "wall radiation"


@dataclass(frozen=True)
class Effect:
    """What leaving out one or more terms does to an answer; SI units.

    ``change`` is the answer without them minus the answer with them, ``base`` what it is taken over (None where
    there is none), ``error`` the model's own numerical error, ``spread`` how far the model's physics may be off,
    relative (zero where the flow is solved).
    """

    answer: str
    change: float
    base: float | None
    error: float
    spread: float
    model: str

    @property
    def ratio(self) -> float | None:
        """The change over its base, without sign."""
        return None if not self.base else abs(self.change) / self.base

    @property
    def kelvins(self) -> float | None:
        """The size of the change where the answer is a temperature."""
        return abs(self.change) if self.answer in TEMPERATURES else None


class EffectModel:
    """A flow that can be solved with and without some terms.

    ``value`` gives an answer on two resolutions (twice the same from a closed form): temperatures count from any
    fixed level, as only differences are taken.
    """

    name = ""
    terms: frozenset[str] = frozenset()  # of the class: those it may have, of a model: those it has
    answers: tuple[str, ...] = ()
    spread = 0.0
    lacks: Mapping[str, str] = {}  # why this model, which fits, has not some term of its class
    pairs = True  # friction heat and pressure work are left out together

    def value(self, answer: str, left: frozenset[str]) -> tuple[float, float]:
        raise NoModel(f"{self.name}: {answer} is not solved")

    def base(self, answer: str, without: float) -> float | None:
        """What a change of this answer is taken over; ``without`` is the answer without the terms."""
        return abs(without)

    def scale(self, answer: str, without: float) -> float:
        """The size against which an error is nothing."""
        return self.base(answer, without) or abs(without)

    def passes(self, terms: frozenset[str], answer: str) -> bool:
        """Whether another model, that costs less, will do for these terms."""
        return False

    def effect(self, answer: str, left: frozenset[str]) -> Effect:
        """The effect of leaving out these terms together; NoModel where its error is too large for it."""
        if self.pairs and left & PAIR:
            left = left | PAIR
        known = self.__dict__.setdefault("known", {})
        if (answer, left) not in known:
            known[answer, left] = self._solved(answer, left)
        return known[answer, left]

    ignores_along = False  # set by ducts where conduction along is not followed

    def _kept(self, answer: str) -> tuple[float, float]:
        """The answer with every term, which all effects of a case share."""
        known = self.__dict__.setdefault("kept", {})
        key = answer, self.ignores_along
        if key not in known:
            known[key] = self.value(answer, frozenset())
        return known[key]

    def _solved(self, answer: str, left: frozenset[str]) -> Effect:
        kept, dropped = self._kept(answer), self.value(answer, left)
        change, coarse = dropped[0] - kept[0], dropped[1] - kept[1]
        error = abs(change - coarse) + 4e-16 * (abs(dropped[0]) + abs(kept[0]))
        change = trusted(change, error, self.scale(answer, dropped[0]), self.name)
        return Effect(answer, change, self.base(answer, dropped[0]), error, self.spread, self.name)


def twice(value: float) -> tuple[float, float]:
    """A value of a closed form."""
    return value, value


def source_density(solution: Any) -> float:
    """Heat made in the fluid [W/m3]: a stated source and electric power over the volume of a duct."""
    case, a = solution.case, solution.answers
    q = case.get("volumetric_source", 0.0)
    if case.has("electric_power"):
        if a.shape.area is None:
            case.need("flow_area")
        q += case.get("electric_power") / (a.shape.area * a.length)
    return q


def expansion_part(solution: Any) -> float:
    """βT of the stream: the part of the friction heat that expansion takes; zero where it is not known or not there."""
    a = solution.answers
    if a.property_temperature is None or solution.case.flow == "falling film":
        return 0.0
    return a.properties.expansion * a.property_temperature


def plain_size(a: Any, answer: str) -> float:
    """Duty or local flux of a duct as the case is solved without any of these terms: no remainder that a source leaves
    is taken for the size of an answer."""
    if answer == DUTY:
        return a.capacity_flux * (a.shape.area or 1.0) * abs(a.bulk_rise)
    return abs(a.local_flux) if answer == FLUX else 0.0
