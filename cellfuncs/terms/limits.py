"""Where an input makes a quantity reach a target, or a term's share a level. Searches, with their words."""

from collections.abc import Callable
from dataclasses import dataclass

from cellfuncs import quantities
from cellfuncs.answers import Solution, solve
from cellfuncs.answers.search import Scan, scan
from cellfuncs.cases import labels
from cellfuncs.cases.case import Case
from cellfuncs.cases.vary import places, start_of, with_value
from cellfuncs.errors import CaseRefused, NoModel, OutOfRange
from cellfuncs.terms.priced import change, on_pressure_drop
from cellfuncs.terms.size import percent
from cellfuncs.terms.table import MOMENTUM_TERMS, TERMS, equation_of, sizes
from cellfuncs.terms.verdicts import Judged, judge

_MOST_SHOWN = 4
MOMENTUM_ONLY = frozenset(MOMENTUM_TERMS) - frozenset(TERMS)


@dataclass(frozen=True)
class Aim:
    """What a search aims at: its name, the level, the level as words, and the argument that states it."""

    name: str
    level: float
    words: Callable[[float], str]
    argument: str


def value_for(case: Case, vary: str, what: str, target: float, unit: str = "") -> float:
    """The value [SI] of the row ``vary`` at which the quantity ``what`` is ``target`` [SI].

    ``unit`` is the one in which ``what`` is shown in refusals. Raises OutOfRange when there is none, or more than one.
    """
    entry = labels.dictionary()[what]

    def quantity(x: float) -> float:
        found = solve(with_value(case, vary, x)).value(what)
        if isinstance(found, str):
            raise CaseRefused(f'"{entry.label}" is a text; a number can be aimed at', argument="what")
        return float(found)

    shown = unit or quantities.KINDS[entry.kind].si_unit
    return _the_one(case, vary, quantity, Aim(entry.label, target, lambda y: _in_unit(y, shown, entry.kind), "target"))


def share_limit(case: Case, vary: str, term: str, level: float) -> float:
    """The value [SI] of the row ``vary`` at which the share of ``term`` is ``level``."""

    def share(x: float) -> float:
        return _share(_judged(solve(with_value(case, vary, x)), term))

    return _the_one(case, vary, share, Aim("share", level, percent, "level"))


def effect_limit(case: Case, vary: str, term: str, level: float, words: Callable[[float], str]) -> float:
    """The value [SI] of the row ``vary`` at which leaving ``term`` out changes the answer by ``level`` [SI].

    ``words`` shows a change in refusals.
    """

    def changed(x: float) -> float:
        solution = solve(with_value(case, vary, x))
        size = next((s for s in sizes(solution, equation_of(term)) if s.term == term), None)
        if size is None:
            raise NoModel(f"no model gives an effect of {term} by itself; give a share, such as 0.05", argument="level")
        momentum = size.term in MOMENTUM_ONLY
        if momentum and (solution.case.answer != "pressure drop" or size.leading):
            raise NoModel(f"no model gives an effect of {term} on this answer; give a share, such as 0.05", "level")
        try:
            found = on_pressure_drop(solution, size) if momentum else change(solution, size)
            return abs(found.change)
        except NoModel as error:
            if error.argument != "term" or not size.leading:
                error.argument = "level"
            raise

    return _the_one(case, vary, changed, Aim("effect", level, words, "level"))


def _judged(solution: Solution, term: str) -> Judged:
    # shares alone: the effects, which cost more, do not enter them
    for j in judge(sizes(solution, equation_of(term)), solution.case.tolerance, solution.case.smallest):
        if j.size.term == term:
            return j
    raise NoModel(f'"{term}" is the sum of several terms; ask for one of them', argument="term")


def _share(j: Judged) -> float:
    if j.size.no_share:
        raise NoModel(f"{j.size.term}: {j.size.says}", argument="term")
    if j.size.leading:
        raise NoModel(f"{j.size.term} is never left out here, whatever its share", argument="term")
    return j.share


def _the_one(case: Case, vary: str, function: Callable[[float], float], aim: Aim) -> float:
    start = start_of(case, vary)
    looked = places(case, vary)
    if start is not None and start not in looked:
        looked = sorted([*looked, start])
    found = scan(function, aim.level, looked)
    roots = found.roots(start)
    if len(roots) == 1:
        return roots[0]
    entry = labels.dictionary()[vary]
    unit = _unit(case, vary)
    if not roots:
        raise _none(found, entry, unit, aim)
    listed = " and ".join(_in_unit(x, unit, entry.kind) for x in roots[:_MOST_SHOWN])
    more = f" and {len(roots) - _MOST_SHOWN} more" if len(roots) > _MOST_SHOWN else ""
    raise OutOfRange(
        f"more than one {entry.label} gives it: {listed}{more}; compute the one you mean with CF_VARY", aim.argument
    )


def _none(found: Scan, entry: labels.Label, unit: str, aim: Aim) -> Exception:
    """The refusal where nothing was found."""
    if not found.stretches:
        refusal = found.refusal
        if refusal is not None and refusal.argument in ("what", "term", "level"):
            return refusal
        why = f": {refusal}" if refusal is not None else ""
        return OutOfRange(f"no value of {entry.label} gives an answer{why}", "block")
    jumps = found.jumps()
    if jumps:
        place = _in_unit(jumps[0], unit, entry.kind)
        text = f"none: at a {entry.label} of {place} the {aim.name} jumps past {aim.words(aim.level)}"
        return OutOfRange(text, aim.argument)
    looked = [x for s in found.stretches for x in s.places]
    values = [y + aim.level for s in found.stretches for y in s.values]
    low, high = (_in_unit(x, unit, entry.kind) for x in (min(looked), max(looked)))
    return OutOfRange(
        f"no {entry.label} from {low} to {high} makes the {aim.name} {aim.words(aim.level)}; there it lies between "
        f"{aim.words(min(values))} and {aim.words(max(values))}",
        aim.argument,
    )


def _unit(case: Case, key: str) -> str:
    """The unit in which a row is written, or the SI unit of its kind."""
    written = case.stated[key].unit if case.has(key) else ""
    return written or quantities.KINDS[labels.dictionary()[key].kind].si_unit


def _in_unit(value: float, unit: str, kind: str) -> str:
    """The number in a unit, with the unit behind it."""
    if unit in ("", "1"):
        return f"{value:.5g}"
    return f"{quantities.from_si(value, unit, kind):.5g} {unit}"
