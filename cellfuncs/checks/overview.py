"""Every number of a case that says more than it needs, beside what comes out of the others."""

from dataclasses import dataclass

from cellfuncs.answers import solve
from cellfuncs.cases import labels
from cellfuncs.checks.judge import judge
from cellfuncs.checks.neglected import case_of
from cellfuncs.checks.references import References
from cellfuncs.checks.relation import Admissible
from cellfuncs.checks.resolve import Resolver
from cellfuncs.checks.shown import in_unit
from cellfuncs.checks.stated import SheetCase, Stated
from cellfuncs.checks.trial import trials
from cellfuncs.errors import CellfuncsError

# relative: what an answer by methods may differ from a stated one (common practice)
_ANSWERS, _KELVINS = 0.1, 2.0


@dataclass(frozen=True)
class Line:
    """One checked number, both in the unit of its row; ``cause`` is ``agrees``, or a code with its words."""

    entry: Stated
    recomputed: float
    cause: str


def lines(case: SheetCase) -> list[Line]:
    """Every number that can be recomputed from the others, in the order of the block."""
    findings, agreed = judge([case], {})
    by_cell = {finding.cell: finding for finding in findings}
    fine = {cell for cell, _ in agreed}
    references = References([case], {})
    resolver = Resolver(case, references)
    found = []
    for entry in case.all():
        finding = by_cell.get(entry.cell)
        if finding is not None and finding.recomputed is not None:
            found.append(Line(entry, finding.recomputed, f"{finding.code}: {finding.cause}"))
        elif entry.cell in fine:
            nearest = _nearest(entry, resolver)
            found.append(Line(entry, in_unit(nearest.value if nearest else entry.si, entry), "agrees"))
        else:
            found += _by_answer(case, entry)
    return sorted(found, key=lambda line: int(line.entry.cell.split()[-1]))


def _nearest(entry: Stated, resolver: Resolver) -> Admissible | None:
    tried = [trial.match for trial in trials(entry, resolver) if trial.passed]
    return min((m for m in tried if m), key=lambda m: abs(m.value - entry.si), default=None)


def _by_answer(case: SheetCase, entry: Stated) -> list[Line]:
    """What the solved case says of a derived quantity, where no relation gives it."""
    if labels.dictionary()[entry.key].role != "derived":
        return []
    try:
        solved = case_of(case)
        value = solve(solved).value(entry.key) if solved is not None else None
    except CellfuncsError:
        return []
    if not isinstance(value, float):
        return []
    allowed = _KELVINS if entry.kind == "temperature" else _ANSWERS * abs(value)
    near = abs(entry.si - value) <= allowed
    return [Line(entry, in_unit(value, entry), "agrees" if near else "unknown: the solved case gives another value")]
