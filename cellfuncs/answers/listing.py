"""Every method that gives the coefficient of a solved case, the recommended one first, with the reason in words."""

from dataclasses import dataclass

from cellfuncs.answers import choice
from cellfuncs.answers.choice import Candidate
from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.inputs import Inputs
from cellfuncs.answers.passage import STATED
from cellfuncs.answers.solve import Solution
from cellfuncs.errors import CellfuncsError, NoModel
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
    elif k == 0:
        parts += [_why_first(inside), choice.disagreement(inside)]
    else:
        parts.append("in range, larger scatter" if method.scatter > inside[0][0].scatter else "in range, wider range")
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
