"""Cell functions on what terms cost: the change of an answer without a term, and the map of a verdict."""

from functools import lru_cache
from typing import Any

from cellfuncs.answers.effects.model import KINDS
from cellfuncs.cases import labels, read_case
from cellfuncs.cases.case import answers_of, flow_words
from cellfuncs.cells import solved
from cellfuncs.cells.catalogue import Answer, cell_function
from cellfuncs.cells.term import term_name
from cellfuncs.errors import CaseRefused, CellfuncsError, NoModel
from cellfuncs.terms import regimes
from cellfuncs.terms.priced import change, on_pressure_drop
from cellfuncs.terms.table import MOMENTUM_TERMS, TERMS, sizes

_MOST = 2048
_MAPS = 16


@cell_function(
    "CF_WITHOUT",
    family="Terms",
    summary="By how much an answer changes when a term is left out: the flow solved without it minus the flow solved "
    "with it. Says why where no model gives it.",
    returns="quantity",
    source="solved models of cellfuncs/models; physics as cited there",
    example='=CF_WITHOUT(coolant,"conduction along","outlet temperature","K")',
)
def without(block, term, answer=None):
    value, wanted = _without(block, term_name(term), _answer(answer))
    return Answer(value, KINDS[wanted])


def _answer(text: str | None) -> str:
    """The answer meant, or nothing where none is named."""
    try:
        return "" if text is None else labels.choice("answer", text)
    except CellfuncsError as error:
        error.argument = "answer"
        raise


@lru_cache(maxsize=_MOST)
def _without(block: Any, term: str, answer: str) -> tuple[float, str]:
    solution = solved.solution(block)
    case = solution.case
    wanted = answer or case.answer
    if wanted not in answers_of(case.flow):
        raise CaseRefused(
            f"a {flow_words(case.flow)} has no {wanted}; write one of: {', '.join(answers_of(case.flow))}",
            argument="answer",
        )
    if term in MOMENTUM_TERMS and wanted == "pressure drop":
        s = next(s for s in sizes(solution, "momentum") if s.term == term)
        return on_pressure_drop(solution, s).change, wanted
    if term not in TERMS:
        equation = "momentum; its size stands in CF_TERMS" if term in MOMENTUM_TERMS else "the sum of several terms"
        raise NoModel(f"no model gives the effect of {term}, a term of {equation}", argument="term")
    if wanted == "duty":
        solution.value("duty")  # asks for what it needs
    s = next(s for s in sizes(solution) if s.term == term)
    return change(solution, s, wanted).change, wanted


@cell_function(
    "CF_REGIME_MAP",
    family="Terms",
    summary="The verdict and the share of a term over two rows or groups of the case (without them the two that rule "
    "the term): x, y, verdict, share, one row a point.",
    returns="table",
    source="CF_TERMS at every point",
    example='=CF_REGIME_MAP(coolant,"viscous heating","velocity","length",5)',
    takes={"x": "map_x", "y": "map_y"},
)
def regime_map(block, term, x=None, y=None, points=None):
    count = regimes.USUAL if points is None else round(points)
    return [list(regimes.COLUMNS), *map(list, _map(block, term_name(term), x, y, count))]


@lru_cache(maxsize=_MAPS)
def _map(block: Any, term: str, x: str | None, y: str | None, points: int) -> tuple[tuple[Any, ...], ...]:
    found = regimes.regime_map(read_case(block), term, x, y, points)
    return tuple(found.at(*place) for place in found.points())
