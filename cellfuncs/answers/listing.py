"""Every method that gives the coefficient or the friction of a solved case, the recommended first, with the reason."""

from dataclasses import dataclass, replace

from cellfuncs.answers import choice
from cellfuncs.answers.choice import Candidate
from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.inputs import Inputs
from cellfuncs.answers.internal import BLEND
from cellfuncs.answers.passage import STATED, Chosen
from cellfuncs.answers.solve import Solution
from cellfuncs.errors import CaseRefused, CellfuncsError, NoModel
from cellfuncs.methods import Method


@dataclass(frozen=True)
class Listed:
    """A method as it stands in the table; ``coefficient`` [W/(m2 K)] counts what changing properties do."""

    candidate: Candidate
    nusselt: float
    coefficient: float
    reason: str

    @property
    def method(self) -> Method:
        return self.candidate.method


@dataclass(frozen=True)
class _Found:
    """A candidate with its coefficient, and what changing properties do to it."""

    candidate: Candidate
    coefficient: float
    factor: str

    @property
    def method(self) -> Method:
        return self.candidate.method


def listed(solution: Solution) -> list[Listed]:
    """The methods that give the wanted answer of a case: in range first, in the order of the rule."""
    answers, flow = solution.answers, solution.case.flow
    state: Inputs | None = getattr(answers, "blended", None) or getattr(answers, "state", None)
    if state is None:
        raise NoModel(f"no method is chosen for a {flow}: it is solved exactly or its coefficient is stated")
    at_end = isinstance(answers, DuctAnswers) and answers.passage.at_end
    found = []
    for candidate in choice.candidates(state, choice.in_order(flow, choice.NUSSELT), at_end):
        try:
            found.append(_Found(candidate, *_coefficient(solution, candidate)))
        except CellfuncsError:
            continue  # a formula without a value so far outside its range
    if not found:
        raise NoModel(f"no method at hand gives the coefficient of this {flow}")
    found.sort(key=lambda f: (f.candidate.missed != (), f.candidate.distance or f.candidate.rank))
    inside = [(f.method, f.coefficient) for f in found if f.candidate.in_range]
    scale = solution.group_length / answers.properties.conductivity
    taken = getattr(answers, "method", "")
    return [
        Listed(f.candidate, f.coefficient * scale, f.coefficient, _reason(f, k, inside, taken))
        for k, f in enumerate(found)
    ]


@dataclass(frozen=True)
class ListedFriction:
    """A method of friction as it stands in the table; ``drop`` [Pa] is the case's with that method."""

    candidate: Candidate
    friction: float
    drop: float
    reason: str

    @property
    def method(self) -> Method:
        return self.candidate.method


def listed_friction(solution: Solution) -> list[ListedFriction]:
    """The methods of friction of a passage, each with the pressure drop at the temperatures that the case has."""
    case, answers = solution.case, solution.answers
    passage = getattr(answers, "passage", None)
    if passage is None or case.flow == "falling film":
        raise NoModel(f"no method of friction is chosen for the flow kind {case.flow}")
    if case.has("pressure_drop"):
        raise CaseRefused("the case states its pressure drop; leave the row out to compare methods of friction")
    found = []
    for candidate in choice.candidates(answers.state, choice.in_order(case.flow, passage.friction_wanted)):
        try:
            chosen = Chosen(answers.chosen.nusselt, candidate.method.name)
            friction = passage.values(answers.state, chosen).friction
        except CellfuncsError:
            continue  # a formula without a value so far outside its range
        if isinstance(answers, DuctAnswers):  # the losses of fittings stay
            drop = replace(answers, friction=friction).pressure_drop
        else:
            drop = answers.pressure_drop * friction / answers.friction
        found.append((candidate, friction, drop))
    found.sort(key=lambda f: (f[0].missed != (), f[0].other_regime, f[0].distance))
    inside = [(c.method, drop) for c, _, drop in found if c.in_range]
    taken = answers.chosen.friction
    return [
        ListedFriction(c, friction, drop, _reason_of_friction(c, k, inside, taken))
        for k, (c, friction, drop) in enumerate(found)
    ]


def _reason_of_friction(candidate: Candidate, k: int, inside: list[tuple[Method, float]], taken: str) -> str:
    method = candidate.method
    parts = ["outside its range"] if candidate.missed else [_place(method, k, inside)]
    if taken == STATED and k == 0:
        parts.append("but the case states its friction factor")
    elif taken == BLEND and k == 0:
        parts.append("between the regimes a blend of both ends is taken")
    elif taken == method.name and k:
        parts.append("taken: the case names it")
    return "; ".join(filter(None, (*parts, method.warning)))


def _place(method: Method, k: int, inside: list[tuple[Method, float]]) -> str:
    """Where a method in range stands beside the others in range."""
    if k == 0:
        return "; ".join(filter(None, (_why_first(inside), choice.disagreement(inside))))
    return "in range, larger scatter" if method.scatter > inside[0][0].scatter else "in range, wider range"


def _coefficient(solution: Solution, candidate: Candidate) -> tuple[float, str]:
    answers = solution.answers
    if isinstance(answers, DuctAnswers):
        found, factor, words = answers.passage.coefficient(answers.state, candidate.method.name)
        return found, f"times {factor:.3g} by {words}" if words else ""
    return choice.value(candidate) * candidate.view.p.conductivity / candidate.view.length, ""


def _reason(found: _Found, k: int, inside: list[tuple[Method, float]], taken: str) -> str:
    candidate, method = found.candidate, found.method
    parts = []
    if not candidate.in_range:
        parts.append("outside its range")
    else:
        parts.append(_place(method, k, inside))
    if candidate.rank:
        parts.append("mean over the length, not the value at its end")
    if taken == STATED and k == 0:
        parts.append("but the case states its coefficient")
    elif taken == method.name and k:
        parts.append("taken: the case names it")
    parts.append(found.factor)
    if method.property_temperature != "none":
        parts.append(f"properties: {method.property_temperature}")
    parts.append(method.warning)
    return "; ".join(filter(None, parts))


def _why_first(inside: list[tuple[Method, float]]) -> str:
    """Why the first of the methods in range is recommended."""
    if len(inside) == 1:
        return "recommended: the only one in range"
    if inside[1][0].scatter > inside[0][0].scatter:
        return f"recommended: smallest scatter of {len(inside)} in range"
    return f"recommended: of {len(inside)} in range the narrowest with the smallest scatter"
