"""What flows over a surface have in common: a method is chosen, loops on film temperature and difference closed.

The difference of wall and stream is prescribed, or follows from a flux or from a heat path beyond the wall.
"""

from collections.abc import Callable
from dataclasses import replace
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers import driving as driving_difference
from cellfuncs.answers.choice import Candidate
from cellfuncs.answers.inputs import Inputs
from cellfuncs.answers.loop import told
from cellfuncs.answers.path import far_temperature, refuse_without_end, resistance
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused
from cellfuncs.methods import Method

STATED = "stated"
_MOST_CHOICES = 4

StateOf = Callable[[float | None], Inputs]
# state, method of the coefficient (None: it is stated), beyond its range -> answers
AnswersOf = Callable[[Inputs, Method | None, str], Any]


def choose(state: Inputs, allow: bool, flow: str | None = None) -> Candidate | None:
    """The method of the coefficient of a state; None where the coefficient is stated."""
    case = state.case
    if case.has("coefficient"):
        return None
    name = choice.row(case, "method", choice.NUSSELT)
    if name is not None:
        return choice.named(state, name, choice.NUSSELT, "coefficient", allow, flow)
    methods = choice.in_order(flow or case.flow, choice.NUSSELT)
    return choice.first(state, methods, "coefficient", allow)


def close(
    case: Case, state_of: StateOf, answers_of: AnswersOf, stream: float | None, difference: float | None, form: str,
    radius: float,
) -> Any:  # fmt: skip
    """The answers at the difference that is prescribed or follows; ``form`` and ``radius`` are the surface's."""
    chosen: Method | None = None
    first_round = True
    for _ in range(_MOST_CHOICES):

        def solved(driving: float, fixed: Method | None = chosen, choosing: bool = first_round) -> Any:
            state = state_of(driving)
            if choosing:
                found = choose(state, True)
                return answers_of(state, None if found is None else found.method, "")
            return answers_of(state, fixed, "")

        apart = difference if difference is not None else _follows(case, solved, stream, form, radius)
        found = solved(apart)
        best = choose(found.state, case.allow)
        name = STATED if best is None else best.method.name
        if name == found.chosen:
            break
        chosen, first_round = None if best is None else best.method, False
    found = replace(found, outside="" if best is None else best.outside)
    if stream is not None and case.get("property_temperature") is None and not case.fixed:
        case.refuse_phase_change(stream, found.property_temperature)
    return found


def _follows(
    case: Case, solved: Callable[[float], Any], stream: float | None, form: str, radius: float
) -> float:
    """The difference that a flux or a path asks for."""

    def coefficient(driving: float) -> float:
        if stream is None or case.fixed or case.has("property_temperature"):
            return solved(driving).coefficient
        return told(lambda _: solved(driving).coefficient, stream + 0.5 * driving, "film temperature")

    far = far_temperature(case)
    if far is None:
        return driving_difference.for_flux(coefficient, case.get("heat_flux"))
    return driving_difference.for_path(coefficient, far - stream, resistance(case, form, radius))


def property_temperature(state: Inputs, rule: str) -> float | None:
    """The temperature at which a method takes properties [K], also where they are all stated."""
    return state.temperature(rule)


def stream_and_difference(case: Case) -> tuple[float | None, float | None]:
    """Temperature of the stream or still fluid, and wall minus it, as far as they are stated."""
    stream = case.get("stream_temperature")
    refuse_without_end(case)
    if case.wall == "flux":
        if case.get("heat_flux") == 0:
            raise CaseRefused(f'"{case.stated["heat_flux"].label}" is zero; nothing is exchanged')
        if stream is None and not (case.fixed or case.has("property_temperature")):
            case.need("stream_temperature")
        return stream, None
    far = far_temperature(case)
    if far is not None:
        stream = case.need("stream_temperature")
        if far == stream:
            raise CaseRefused("both ends of the heat path have the same temperature; nothing is exchanged")
        return stream, None
    wall, difference = case.get("wall_temperature"), case.get("temperature_difference")
    if wall is not None and difference is not None and stream is not None:
        raise CaseRefused("wall temperature, stream temperature and their difference are all stated; state two")
    if wall is not None and difference is not None:
        stream = wall - difference
    elif wall is not None:
        stream = case.need("stream_temperature")
        difference = wall - stream
    if difference == 0:
        raise CaseRefused("wall and stream have the same temperature; there is no driving difference to judge by")
    return stream, difference
