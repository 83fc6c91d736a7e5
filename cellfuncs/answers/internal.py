"""Coefficient and friction of a duct from the methods recommended for it, with what changing properties do to both."""

from functools import lru_cache

from cellfuncs.answers import choice
from cellfuncs.answers.inputs import Inputs, View
from cellfuncs.answers.passage import STATED, Chosen, Passage, Values
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
_NOTHING = 5e-3  # a factor nearer to 1 is not spoken of
RATIOS = frozenset(("viscosity_ratio", "prandtl_ratio", "temperature_ratio"))


class Internal(Passage):
    """A duct case as methods see it."""

    def __init__(self, case: Case, shape: Duct, length: float):
        super().__init__(case, {}, {"": shape.diameter}, length)
        self.section = shape
        self.settled_friction: str | None = None  # the method of friction chosen last
        slender = length / shape.diameter
        self.known |= {
            "section": "tube" if shape.section == "other" else shape.section,
            "wall": case.wall,
            "heated": shape.heated,
            "ratio": shape.ratio,
            "apex_angle": shape.apex_angle,
            "shape": "straight",
            "profile": case.get("inlet_profile", "developed"),
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

    def shape(self, p: Properties) -> Duct:
        return self.section

    # -- which methods ----------------------------------------------------------------------

    def choose_nusselt(self, state: Inputs, allow: bool) -> tuple[str, str]:
        try:
            return super().choose_nusselt(state, False)
        except OutOfRange:
            if self._between(state) and choice.row(self.case, "method", self.wanted) is None:
                try:
                    ends = [choice.recommended(end, self.wanted, "coefficient", allow, self.at_end)
                            for end in self._ends(state)]  # fmt: skip
                except OutOfRange as error:
                    re = self.at_bulk(state).get("reynolds")
                    raise OutOfRange(
                        f"Re {re:.4g} lies between laminar (2300) and turbulent (4000), and a blend needs a method at "
                        f"both: {error}"
                    ) from None
                return BLEND, "; ".join(dict.fromkeys(e.outside for e in ends if e.outside))
            if not allow:
                raise
            return super().choose_nusselt(state, True)

    def choose(self, state: Inputs, allow: bool) -> Chosen:
        self.settled_friction = None
        found = super().choose(state, allow)
        self.settled_friction = None if found.friction == STATED else found.friction
        return found

    def choose_friction(self, state: Inputs, allow: bool) -> tuple[str, str]:
        if self._between(state) and not self.case.has("friction_factor") and self.friction_row() is None:
            return BLEND, ""
        return super().choose_friction(state, allow)

    def _between(self, state: Inputs) -> bool:
        reynolds = self.at_bulk(state).get("reynolds")
        return self.known["shape"] == "straight" and LAMINAR_UP_TO < reynolds < TURBULENT_FROM

    def _ends(self, state: Inputs) -> tuple[Inputs, Inputs]:
        """The state with Re at either end of the transition."""
        return tuple(_Moved(state, re) for re in (LAMINAR_UP_TO, TURBULENT_FROM))

    # -- their numbers ----------------------------------------------------------------------

    def values(self, state: Inputs, chosen: Chosen) -> Values:
        h, more, words = self.coefficient(state, chosen.nusselt)
        friction, other = self._friction(state, chosen.friction)
        return Values(h, friction, more, other, words)

    def coefficient(self, state: Inputs, name: str) -> tuple[float, float, str]:
        if name == STATED:
            return self.case.get("coefficient"), 1.0, ""
        nusselt, view = self._nusselt(state, name)
        factor, words = self._factor(state, name, NUSSELT_FACTORS)
        if abs(factor - 1.0) < _NOTHING:
            words = ""
        if name in METHODS and self._section_factor(METHODS[name], view) != 1.0:
            words = " and ".join(filter(None, (words, f"that of the annulus by {ANNULUS_FACTOR}")))
        return factor * nusselt * view.p.conductivity / view.length, factor, words

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
        if state.at_wall is None or (name in METHODS and _counts_properties(METHODS[name])):
            return 1.0, ""
        for found in choice.candidates(state, _ordered(names)):
            if found.in_range:
                return choice.value(found), found.method.name
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

    def plain_friction(self, view: View) -> float | None:
        """Darcy's f of constant properties, as methods of Nu take it."""
        if self.case.has("friction_factor"):
            return self.case.get("friction_factor")
        try:
            name = self.settled_friction
            if name is None or isinstance(view.state, _Moved):
                name, _ = self.choose_friction(view.state, True)
            return self._friction_by(name, view)
        except OutOfRange:
            return None


def _counts_properties(method: Method) -> bool:
    """Whether a method counts changing properties itself: by a ratio, the film, or for heating and cooling apart."""
    return (
        not RATIOS.isdisjoint(method.inputs) or method.property_temperature == "film" or "heating" in method.where
    )


class _Moved(Inputs):
    """A state whose Re is moved to an end of the transition, everything else kept."""

    def __init__(self, state: Inputs, reynolds: float):
        known = {**state.known, "reynolds": reynolds}
        super().__init__(
            state.case, known, state.lengths, state.bulk, state.difference, state.memo, friction=state.friction_of
        )


@lru_cache(maxsize=8)
def _ordered(names: tuple[str, ...]) -> choice.Order:
    return choice.by_rule(METHODS[name] for name in names)
