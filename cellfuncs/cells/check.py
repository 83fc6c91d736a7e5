"""Cell functions of the family Checks: does a number agree, and what was probably done where it does not."""

from typing import Any

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.cells import convert
from cellfuncs.cells.catalogue import cell_function
from cellfuncs.checks import SheetCase, Stated
from cellfuncs.checks.causes import causes_of, causes_of_ratio
from cellfuncs.checks.causes.guess import Ranked
from cellfuncs.checks.from_block import sheet_case
from cellfuncs.checks.overview import Line, lines
from cellfuncs.checks.references import References
from cellfuncs.checks.relation import DEFINITION, giving
from cellfuncs.checks.resolve import Resolver
from cellfuncs.checks.shown import from_unit, number
from cellfuncs.checks.trial import trials
from cellfuncs.errors import NumberRefused, UnitRefused

_SOURCE = "the relations of cellfuncs/checks/relations"
_COLUMNS = ("quantity", "stated", "recomputed", "difference", "cause")
_LONGEST = 255
AGREES = "agrees"


def _number(value: Any, argument: str) -> tuple[float, str]:
    """A number with the unit written beside it, or none."""
    value = convert.unwrap(value)
    convert.refuse_foreign(value)
    if value in convert.BLANK:
        raise NumberRefused("empty; give a number", argument=argument)
    if isinstance(value, str):
        reading = quantities.read_number(value)
        return reading.value, reading.unit_text
    return convert.number_of(value), ""


def _pair(stated: Any, recomputed: Any) -> tuple[float, float, str]:
    """Both numbers in SI (or as they are, where neither has a unit), and their kind."""
    (a, unit_a), (b, unit_b) = _number(stated, "stated"), _number(recomputed, "recomputed")
    if not unit_a and not unit_b:
        return a, b, ""
    kinds = [set(quantities.kinds_for(unit)) for unit in (unit_a, unit_b) if unit]
    both = [kind for kind in quantities.KINDS if all(kind in found for found in kinds)]
    if not both:
        raise UnitRefused(f"{unit_a} and {unit_b} are no units of one quantity", argument="recomputed")
    kind = both[0]
    values = (quantities.to_si(x, u, kind) if u else x for x, u in ((a, unit_a), (b, unit_b)))
    return (*values, kind)


@cell_function(
    "CF_AGREES",
    family="Checks",
    summary="agrees where a stated number is that which was recomputed, within the tolerance; else the difference in "
    "words. A text carries its unit (12 ft/s); plain numbers are compared as they are.",
    returns="table",
    source=_SOURCE,
    example='=CF_AGREES("12.1 ft/s","3.69 m/s",2%)',
)
def agrees(stated, recomputed, agreement=None):
    a, b, kind = _pair(stated, recomputed)
    return _difference(a, b, kind, DEFINITION if agreement is None else agreement)


def _difference(a: float, b: float, kind: str, allowed: float) -> str:
    """``agrees``, or by how much the first is off; a temperature is judged by its distance, 1 % being one kelvin."""
    if kind == "temperature":
        return AGREES if abs(a - b) <= allowed * 100.0 else f"{number(abs(a - b))} K {'more' if a > b else 'less'}"
    if abs(a - b) <= allowed * abs(b):
        return AGREES
    if not b or a / b <= 0 or not 0.01 < a / b < 100.0:
        return f"{number(a)} for {number(b)}"
    return f"{number(100.0 * abs(a / b - 1.0))} % {'more' if a > b else 'less'} ({number(a / b)} times)"


@cell_function(
    "CF_CAUSE",
    family="Checks",
    summary="The likely cause where a stated number is not the recomputed one, with its code and how sure it is. With "
    "the block its inputs are tried too; without it only ratios can be named.",
    returns="table",
    source=_SOURCE,
    example='=CF_CAUSE(0.0078540,0.0019635)',
)
def cause(stated, recomputed, case_block=None):
    a, b, kind = _pair(stated, recomputed)
    if _difference(a, b, kind, DEFINITION) == AGREES:
        return AGREES
    found = _of_block(a, b, kind, sheet_case(case_block)) if case_block else []
    return _words(found or causes_of_ratio(a, b), a, b)


def _of_block(stated: float, recomputed: float, kind: str, case: SheetCase) -> list[Ranked]:
    """The causes that the inputs of a block allow, for the quantity that comes out as ``recomputed``."""
    resolver = Resolver(case, References([case], {}))
    best: list[Ranked] = []
    for key in giving():
        entry = Stated(key, labels.dictionary()[key].kind, stated, "", stated, 0.0, "stated", key, "=", ())
        if kind and entry.kind != kind:
            continue
        for trial in trials(entry, resolver):
            answer = trial.expected
            if answer is None or abs(answer.value - recomputed) > DEFINITION * abs(recomputed):
                continue
            found = causes_of(trial)
            if found and (not best or found[0].confidence > best[0].confidence):
                best = found
    return best


def _words(found: list[Ranked], stated: float, recomputed: float) -> str:
    if not found:
        ratio = f"the ratio is {number(stated / recomputed)}" if recomputed else "what comes out is zero"
        return f"unknown: no known mistake gives this number; {ratio}"
    told = [f"{r.guess.code}: {r.guess.words} ({r.confidence:.0%})" for r in found[:2]]
    text = "; or ".join(told)
    return text if len(text) <= _LONGEST else told[0][:_LONGEST]


@cell_function(
    "CF_CHECK",
    family="Checks",
    summary="Recomputes every number of a block that states more than it needs (derived quantities are allowed in it): "
    "stated and recomputed in the unit of the row, the difference, and the likely cause.",
    returns="table",
    source=_SOURCE,
    example='=CF_CHECK(CF_VARY(coolant,"Reynolds number",40000))',
)
def check(block):
    rows = [
        [
            line.entry.label,
            line.entry.value,
            line.recomputed,
            _difference(line.entry.si, _si(line), line.entry.kind, DEFINITION),
            line.cause[:_LONGEST],
        ]
        for line in lines(sheet_case(block))
    ]
    nothing = ["nothing to check", "none", "none", "none", "no row states more than the others give"]
    return [list(_COLUMNS), *(rows or [nothing])]


def _si(line: Line) -> float:
    entry = line.entry
    return from_unit(line.recomputed, entry)
