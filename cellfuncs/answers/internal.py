"""Coefficient and friction of a duct from the methods recommended for it, with what changing properties do to both."""

from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers.inputs import Inputs, View
from cellfuncs.cases.case import Case, Properties
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import OutOfRange
from cellfuncs.methods import METHODS, Method
from cellfuncs.methods.duct import LAMINAR_UP_TO, TURBULENT_FROM

BLEND = "blend of the regimes"  # laminar at Re 2300 and turbulent at 4000, linear in Re (Gnielinski 2013)
# what changing properties do; which of them is taken follows the rule of ``choice``
NUSSELT_FACTORS = (
    "viscosity correction of laminar Nu",
    "viscosity correction of turbulent Nu",
    "Prandtl correction of Nu",
    "temperature correction of turbulent Nu",
    "Gnielinski temperature correction of Nu",
)
FRICTION_FACTORS = (
    "viscosity correction of laminar friction",
    "viscosity correction of turbulent friction",
    "temperature correction of laminar friction",
    "temperature correction of turbulent friction",
)
ANNULUS_FACTOR = "Petukhov-Roizen"
_RATIOS = frozenset(("viscosity_ratio", "prandtl_ratio", "temperature_ratio"))
STATED = "stated"


@dataclass(frozen=True)
class Chosen:
    """The methods of a duct: of the coefficient and of friction, and what lies outside their ranges."""

    nusselt: str
    friction: str
    outside: str = ""


@dataclass(frozen=True)
class Values:
    """Nu on the hydraulic diameter, Darcy's f, and the factors of changing properties in them."""

    nusselt: float
    friction: float
    nusselt_factor: float = 1.0
    friction_factor: float = 1.0
    words: str = ""


class Internal:
    """A duct case as methods see it; states of it are made by ``state``."""

    def __init__(self, case: Case, shape: Duct, length: float):
        self.case, self.shape = case, shape
        slender = length / shape.diameter
        self.at_end = case.wall == "flux"
        self.known: dict[str, Any] = {
            "section": "tube" if shape.section == "other" else shape.section,
            "wall": case.wall,
            "heated": shape.heated,
            "ratio": shape.ratio,
            "shape": "straight",
            "length_over_diameter": slender,
            "diameter_over_length": 0.0 if self.at_end else 1.0 / slender,
            "relative_roughness": case.get("roughness", 0.0) / shape.diameter,
            "diameter": shape.diameter,
        }
        if case.has("coil_diameter"):
            self.known |= {"shape": "coil", "curvature": shape.diameter / case.get("coil_diameter")}
        elif case.has("rib_pitch"):
            case.need("roughness")
            self.known |= {"shape": "ribbed", "rib_pitch": case.get("rib_pitch") / case.get("roughness")}
        self.lengths = {"": shape.diameter}
        self.memo: dict[Any, Properties] = {}

    def state(self, bulk: float | None, difference: float | None) -> Inputs:
        """The case at a mean bulk temperature, with the mean difference of the wall to it."""
        return Inputs(self.case, self.known, self.lengths, bulk, difference, self.memo, friction=self._plain_friction)

    def at_bulk(self, state: Inputs) -> View:
        """The inputs at the mean bulk temperature, on the hydraulic diameter."""
        return state.view_at("mean bulk")

    # -- which methods ----------------------------------------------------------------------

    def choose(self, state: Inputs, allow: bool) -> Chosen:
        """The methods for a state: those named by the case, else those recommended."""
        nusselt, outside = self._choose_nusselt(state, allow)
        # a friction factor beyond its range is refused only where it is not just a companion of a stated coefficient
        friction, other = self._choose_friction(state, allow or nusselt == STATED)
        return Chosen(nusselt, friction, "; ".join(filter(None, (outside, other))))

    def _choose_nusselt(self, state: Inputs, allow: bool) -> tuple[str, str]:
        if self.case.has("coefficient"):
            return STATED, ""
        name = self.case.get("method")
        if name is not None and choice.find(name).gives in choice.NUSSELT:
            found = choice.named(state, name, choice.NUSSELT, "coefficient", allow)
            return found.method.name, found.outside
        try:
            found = choice.recommended(state, choice.NUSSELT, "coefficient", False, self.at_end)
        except OutOfRange:
            if self._between(state):
                ends = [choice.recommended(end, choice.NUSSELT, "coefficient", allow, self.at_end)
                        for end in self._ends(state)]  # fmt: skip
                return BLEND, "; ".join(dict.fromkeys(e.outside for e in ends if e.outside))
            if not allow:
                raise
            found = choice.recommended(state, choice.NUSSELT, "coefficient", True, self.at_end)
        return found.method.name, found.outside

    def _choose_friction(self, state: Inputs, allow: bool) -> tuple[str, str]:
        if self.case.has("friction_factor"):
            return STATED, ""
        name = self.case.get("friction_method")
        if name is None and self.case.has("method") and choice.find(self.case.get("method")).gives in choice.FRICTION:
            name = self.case.get("method")
        if name is not None:
            found = choice.named(state, name, choice.FRICTION, "friction factor", allow)
            return found.method.name, found.outside
        if self._between(state):
            return BLEND, ""
        found = choice.recommended(state, choice.FRICTION, "friction factor", allow)
        return found.method.name, found.outside

    def _between(self, state: Inputs) -> bool:
        reynolds = self.at_bulk(state).get("reynolds")
        return self.known["shape"] == "straight" and LAMINAR_UP_TO < reynolds < TURBULENT_FROM

    def _ends(self, state: Inputs) -> tuple[Inputs, Inputs]:
        """The state with Re at either end of the transition."""
        return tuple(_Moved(state, re) for re in (LAMINAR_UP_TO, TURBULENT_FROM))

    # -- their numbers ----------------------------------------------------------------------

    def values(self, state: Inputs, chosen: Chosen) -> Values:
        """Nu and f of a state with methods chosen before."""
        p = self.at_bulk(state).p
        if chosen.nusselt == STATED:
            nusselt, more, words = self.case.get("coefficient") * self.shape.diameter / p.conductivity, 1.0, ""
        else:
            nusselt, view = self._nusselt(state, chosen.nusselt)
            more, words = self._factor(state, chosen.nusselt, NUSSELT_FACTORS)
            nusselt *= more * view.p.conductivity / p.conductivity  # on the conductivity of the mean bulk temperature
        friction, other = self._friction(state, chosen.friction)
        return Values(nusselt, friction, more, other, words)

    def _nusselt(self, state: Inputs, name: str) -> tuple[float, View]:
        if name == BLEND:
            low, high = (
                choice.recommended(end, choice.NUSSELT, "coefficient", True, self.at_end) for end in self._ends(state)
            )
            share = self._share(state)
            one = choice.value(low) * self._section_factor(low.method, low.view)
            other = choice.value(high) * self._section_factor(high.method, high.view)
            return (1.0 - share) * one + share * other, low.view
        method = METHODS[name]
        view = state.view(method)
        return choice.number(method, view) * self._section_factor(method, view), view

    def _share(self, state: Inputs) -> float:
        reynolds = self.at_bulk(state).get("reynolds")
        return (reynolds - LAMINAR_UP_TO) / (TURBULENT_FROM - LAMINAR_UP_TO)

    def _section_factor(self, method: Method, view: View) -> float:
        """Petukhov and Roizen's factor of a turbulent annulus for methods of any section."""
        if self.known["section"] != "annulus" or "section" in method.where or view.get("reynolds") < TURBULENT_FROM:
            return 1.0
        return choice.number(METHODS[ANNULUS_FACTOR], view)

    def _factor(self, state: Inputs, name: str, names: tuple[str, ...]) -> tuple[float, str]:
        """The factor of changing properties in range, and its name; 1 where the method counts them itself."""
        if state.at_wall is None or (name in METHODS and not _RATIOS.isdisjoint(METHODS[name].inputs)):
            return 1.0, ""
        if name in METHODS and METHODS[name].property_temperature == "film":
            return 1.0, ""
        for method in _ordered(names):
            found = choice.look(state, method)
            if found is not None and found.in_range:
                return choice.value(found), method.name
        return 1.0, ""

    def _friction(self, state: Inputs, name: str) -> tuple[float, float]:
        """Darcy's f, and the factor of changing properties in it."""
        if name == STATED:
            return self.case.get("friction_factor"), 1.0
        plain = self._friction_by(name, self.at_bulk(state))
        factor, _ = self._factor(state, name, FRICTION_FACTORS)
        return plain * factor, factor

    def _friction_by(self, name: str, view: View) -> float:
        if name != BLEND:
            return choice.number(METHODS[name], view)
        share = self._share(view.state)
        low, high = (
            choice.value(choice.recommended(end, choice.FRICTION, "friction factor", True))
            for end in self._ends(view.state)
        )
        return (1.0 - share) * low + share * high

    def _plain_friction(self, view: View) -> float | None:
        """Darcy's f of constant properties, as methods of Nu take it."""
        if self.case.has("friction_factor"):
            return self.case.get("friction_factor")
        try:
            name, _ = self._choose_friction(view.state, True)
            return self._friction_by(name, view)
        except OutOfRange:
            return None


class _Moved(Inputs):
    """A state whose Re is moved to an end of the transition, everything else kept."""

    def __init__(self, state: Inputs, reynolds: float):
        known = {**state.known, "reynolds": reynolds}
        super().__init__(
            state.case, known, state.lengths, state.bulk, state.difference, state.memo, friction=state.friction_of
        )


@lru_cache(maxsize=8)
def _ordered(names: tuple[str, ...]) -> tuple[Method, ...]:
    inside = [METHODS[name] for name in names if name in METHODS]
    return tuple(sorted(inside, key=lambda m: (m.scatter, -choice.narrowness(m))))
