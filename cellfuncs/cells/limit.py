"""Cell functions that search: the input that gives a target, the input at which a term begins to count."""

from collections.abc import Iterator
from contextlib import contextmanager
from functools import lru_cache
from typing import Any

from cellfuncs import quantities
from cellfuncs.answers.effects.model import KINDS
from cellfuncs.cases import labels, read_case
from cellfuncs.cases.vary import row_key
from cellfuncs.cells import convert, solved
from cellfuncs.cells.case import quantity_key
from cellfuncs.cells.catalogue import Answer, cell_function
from cellfuncs.cells.term import term_name
from cellfuncs.errors import CaseRefused, CellfuncsError, NoModel, NumberRefused, OutOfRange, UnknownName
from cellfuncs.terms import limits

_MOST_SEARCHES = 512
_SOURCE = "bracketing root search (Brent 1973) on the case"


@cell_function(
    "CF_VALUE_FOR",
    family="Cases",
    summary="The value of one row of the block that gives a target: for instance the length for an outlet "
    "temperature. Says when there is none, or more than one.",
    returns="quantity",
    source=_SOURCE,
    example='=CF_VALUE_FOR(coolant,"length","outlet temperature","30 degC","m")',
)
def value_for(block, vary, what, target):
    case = read_case(block)
    key = _row(case, vary)
    wanted = _wanted(block, what, case.flow)
    aim, unit = _target(target, labels.dictionary()[wanted].kind)
    return Answer(_value_for(block, key, wanted, aim, unit), labels.dictionary()[key].kind)


@cell_function(
    "CF_TERM_LIMIT",
    family="Terms",
    summary="The value of one row of the block at which the share of a term reaches a level (the tolerance of the "
    "case, another share, or an effect such as 1 K). Says when there is none, or more than one.",
    returns="quantity",
    source=_SOURCE,
    example='=CF_TERM_LIMIT(coolant,"storage","time scale",,"s")',
)
def term_limit(block, term, vary, level=None):
    case = read_case(block)
    name = term_name(term)
    key = _row(case, vary)
    kind = labels.dictionary()[key].kind
    share, effect, unit = _level(level, case.answer)
    if effect is not None:
        return Answer(_effect_limit(block, key, name, effect, unit), kind)
    return Answer(_share_limit(block, key, name, case.tolerance if share is None else share), kind)


@lru_cache(maxsize=_MOST_SEARCHES)
def _value_for(block: Any, vary: str, what: str, target: float, unit: str) -> float:
    return limits.value_for(read_case(block), vary, what, target, unit)


@lru_cache(maxsize=_MOST_SEARCHES)
def _share_limit(block: Any, vary: str, term: str, level: float) -> float:
    return limits.share_limit(read_case(block), vary, term, level)


@lru_cache(maxsize=_MOST_SEARCHES)
def _effect_limit(block: Any, vary: str, term: str, level: float, unit: str) -> float:
    case = read_case(block)
    kind = KINDS[case.answer]
    return limits.effect_limit(
        case, vary, term, level, lambda change: f"{quantities.from_si(change, unit, kind):.3g} {unit}"
    )


@contextmanager
def _blaming(argument: str) -> Iterator[None]:
    """Refusals inside name this argument."""
    try:
        yield
    except CellfuncsError as error:
        error.argument = argument
        raise


def _row(case: Any, text: str) -> str:
    with _blaming("vary"):
        return row_key(case, text)


def _wanted(block: Any, text: str, flow: str) -> str:
    """The quantity aimed at; of several meanings the one that the case has, where it has any yet."""
    with _blaming("what"):
        try:
            key = labels.find(text, flow)
        except CaseRefused:
            key = quantity_key(solved.solution(block), text)
        entry = labels.dictionary()[key]
        if entry.role not in ("stated", "derived"):
            raise UnknownName(f'"{entry.label}" is no number; name a quantity or answer')
        return key


def _target(value: Any, kind: str) -> tuple[float, str]:
    """The target in SI, and the unit it is written in."""
    with _blaming("target"):
        value = _cell(value)
        if value is None:
            raise NumberRefused(f"empty; give a {quantities.KINDS[kind].words}")
        si = convert.QuantityReader(kind, "signed")(value)
        return si, quantities.read_number(value).unit_text if isinstance(value, str) else ""


def _level(value: Any, answer: str) -> tuple[float | None, float | None, str]:
    """The level as a share, or as an effect on the answer in SI with its unit; neither where none is given."""
    with _blaming("level"):
        value = _cell(value)
        if value is None or value == 0.0:
            return None, None, ""
        reading = quantities.read_number(value) if isinstance(value, str) else quantities.Reading(value, None, "")
        unit = reading.unit_text
        kind = "fraction" if not unit or quantities.unit_fits(unit, "fraction") else KINDS[answer]
        if unit and not quantities.unit_fits(unit, kind):
            usual = quantities.example(kind)
            raise NoModel(
                f"an effect in {unit} is none on the {answer}, which the case asks for; write a share such as 0.05, "
                f"an effect such as {usual}, or another answer in the block"
            )
        level = quantities.to_si(reading.value, unit, kind) if unit else reading.value
        if not level > 0:
            raise OutOfRange(f"{value} is not above zero; write for instance 0.05 or 1 K")
        return (level, None, "") if kind == "fraction" else (None, level, unit)


def _cell(value: Any) -> Any:
    """A cell that holds a number or a text; blank is None."""
    value = convert.unwrap(value)
    convert.refuse_foreign(value)
    return convert.plain_cell(value)
