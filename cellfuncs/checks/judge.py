"""Every stated number against what follows from the others; the fault is laid to the cell where it starts."""

from collections.abc import Iterable
from dataclasses import dataclass

from cellfuncs.cases import labels
from cellfuncs.checks import neglected
from cellfuncs.checks.causes import causes_of
from cellfuncs.checks.causes.guess import Ranked
from cellfuncs.checks.finding import Finding
from cellfuncs.checks.references import References
from cellfuncs.checks.relations import of_substance
from cellfuncs.checks.resolve import Resolver, is_limit
from cellfuncs.checks.shown import in_unit, with_unit
from cellfuncs.checks.stated import Graph, SheetCase, Stated
from cellfuncs.checks.trial import Trial, converted, trials
from cellfuncs.methods import METHODS
from cellfuncs.sources import cite

# a relation this loose cannot excuse a number that a tight one contradicts
_LOOSE = 0.05
# how many trials are asked for a cause
_TRIED = 4
# what another trial must cover of the formula, and how sure its cause must be where it covers less than the first
_COVERED, _SURE = 0.5, 0.6
# relative: what tables of solutions and oils may differ by, and how near to it a cause must come, as a part of that
_VARIED, _SHARP = 0.1, 0.1
# relative: the same quantity, once typed and once referred to, in two units
_COPY = 0.002


@dataclass
class Doubt:
    """A number that disagrees, with the trial that says so."""

    entry: Stated
    trial: Trial
    causes: list[Ranked]


def judge(cases: Iterable[SheetCase], graph: Graph) -> tuple[list[Finding], list[tuple[str, str]]]:
    """Findings, and the cells that agree with the quantity they state.

    ``graph`` holds the cells that each formula uses. A number that a formula computes is judged by what the formula
    uses; a cell that is wrong only because it rests on another wrong one is listed under that one.
    """
    cases = list(cases)
    references = References(cases, graph)
    doubts: list[Doubt] = []
    agreed: list[tuple[str, str]] = []
    findings: list[Finding] = []
    for case in cases:
        resolver = Resolver(case, references)
        for entry in case.all():
            verdict = _judged(entry, resolver)
            if verdict is True:
                agreed.append((entry.cell, entry.key))
            elif isinstance(verdict, Doubt):
                doubts.append(verdict)
        findings += neglected.findings(case)
    kept = _origins(doubts, references)
    findings += [_finding(doubt, references) for doubt in kept]
    place = references.place
    return sorted(findings, key=lambda f: place.get(f.cell, len(place))), agreed


def _judged(entry: Stated, resolver: Resolver) -> Doubt | bool | None:
    """True where the number agrees, a doubt where it does not, None where nothing can be said."""
    if _copies(entry, resolver.references):
        return True
    if entry.typed and is_limit(entry.label, entry.key):
        return None
    tried = trials(entry, resolver) or converted(entry, resolver)
    if not tried:
        return None
    best = _pick(tried)
    if best.passed:
        return True
    causes = causes_of(best)
    if not causes or causes[0].guess.code == "unknown":
        best, causes = _better_explained(best, causes, tried)
    # a relation that misses part of what the formula uses may not be meant at all
    if not causes and not (best.coverage == 1.0 and (best.local or entry.typed or not best.derived)):
        return None
    if not entry.typed and best.coverage < 0.5 and not best.local:
        return None
    return Doubt(entry, best, causes)


def _better_explained(best: Trial, causes: list[Ranked], tried: list[Trial]) -> tuple[Trial, list[Ranked]]:
    """Another of the strongest trials, where only that one finds a cause."""
    others = sorted((t for t in tried if t is not best and t.expected is not None), key=_strength, reverse=True)
    for trial in others[:_TRIED]:
        if trial.coverage < min(best.coverage, _COVERED):
            continue
        found = causes_of(trial)
        sure = _SURE if trial.coverage < best.coverage else 0.0
        if found and found[0].guess.code != "unknown" and found[0].confidence > sure:
            return trial, found
    return best, causes


def _copies(entry: Stated, references: References) -> bool:
    """Whether the cell refers to the same quantity elsewhere and has its value."""
    direct = references.direct(entry.cell)
    if len(direct) != 1 or direct[0].key.split("_")[-1] != entry.key.split("_")[-1]:
        return False
    other = direct[0].si
    return abs(entry.si - other) <= _COPY * abs(other)


def _pick(tried: list[Trial]) -> Trial:
    """The trial that counts: a pass, unless only a loose one passes where a tight one of the own cells does not."""
    passes = [t for t in tried if t.passed]
    coded = [t for t in tried if t.match is not None and t.match.code]
    failures = [t for t in tried if not t.passed and t.expected is not None]

    strict = [t for t in passes if t.match is not None and not t.match.loose and t.match.scatter <= _LOOSE]
    if strict:
        return max(strict, key=_strength)
    if coded:
        return max(coded, key=_strength)
    firm = [t for t in failures if t.local and t.coverage == 1.0 and t.relation.scatter <= _LOOSE
            and t.relation.source != "methods"]  # fmt: skip
    if firm and not any(t.local and t.coverage == 1.0 for t in passes):
        return max(firm, key=_strength)
    if passes:
        return max(passes, key=_strength)
    return max(failures or tried, key=_strength)


def _strength(trial: Trial) -> tuple[float, ...]:
    """How much a trial says about a number: it should use what the formula uses, and little else."""
    tight = trial.expected.scatter if trial.expected else 1.0
    return (trial.coverage, trial.local, -trial.derived, trial.role is None, -tight, -_distance(trial))


def _distance(trial: Trial) -> float:
    if trial.expected is None or not trial.expected.value:
        return 1e9
    return min(abs(trial.entry.si / trial.expected.value - 1.0), 1e6)


def _origins(doubts: list[Doubt], references: References) -> list[Doubt]:
    """Those doubts that another one does not explain."""
    by_cell = {d.entry.cell: d for d in doubts}
    kept = []
    for doubt in doubts:
        rests = set(doubt.trial.support)
        if not doubt.trial.local or doubt.entry.typed or doubt.trial.relation.source == "methods":
            for cell in tuple(rests):
                rests |= references.above(cell)
        else:
            rests = set()
        others = [by_cell[cell] for cell in rests if cell in by_cell and cell != doubt.entry.cell]
        if not any(_explains(other, doubt, references) for other in others):
            kept.append(doubt)
    return kept


def _explains(other: Doubt, doubt: Doubt, references: References) -> bool:
    """Whether ``doubt`` may only follow from ``other``; of two that accuse each other the surer one stays."""
    rests = set(other.trial.support).union(*(references.above(cell) for cell in other.trial.support))
    if doubt.entry.cell in rests:
        return _sureness(other, references) > _sureness(doubt, references)
    return True


def _sureness(doubt: Doubt, references: References) -> tuple[float, ...]:
    """How sure it is that the fault starts here: computed here, or pasted among formulas rather than an input."""
    return (
        not doubt.entry.typed and doubt.trial.local,
        doubt.trial.role is None or not doubt.entry.typed,
        -doubt.trial.derived,
        references.pasted(doubt.entry.cell),
        doubt.trial.coverage,
        references.place[doubt.entry.cell],
    )


def _finding(doubt: Doubt, references: References) -> Finding:
    entry, trial = doubt.entry, doubt.trial
    answer = trial.expected
    expected = answer.value if answer else entry.si
    code, words, confidence = _cause(doubt, references)
    quantity = labels.dictionary()[entry.key].label
    recomputed = in_unit(expected, entry)
    message = (
        f"{entry.label}: {with_unit(entry.value, entry.unit)} is stated, {with_unit(recomputed, entry.unit)} comes out"
        f" of {_inputs_in_words(trial)} ({trial.relation.name})"
    )
    return Finding(
        cell=entry.cell,
        severity=_severity(doubt, code),
        quantity=quantity,
        stated=entry.value,
        recomputed=recomputed,
        unit=entry.unit,
        code=code,
        cause=words,
        confidence=round(confidence, 3),
        message=message,
        source=_source(trial),
        inherited=references.below(entry.cell),
        case=trial.case.name,
        reasoning=_reasoning(doubt, expected),
    )


def _source(trial: Trial) -> str:
    """The citation of a relation: that of the method or of the substance where these gave the number."""
    key = trial.relation.source
    answer = trial.match if trial.match is not None and trial.match.code else trial.expected
    if key == "methods" and answer is not None:
        method = METHODS.get(answer.words) or METHODS.get(answer.words.partition(" holds for ")[0])
        key = method.source if method else "published methods"
    if key == "properties":
        substance, what = of_substance.named(trial.case), of_substance.PROPERTIES.get(trial.entry.key)
        key = substance.source(what) if substance and what else "properties of the substance"
    try:
        return "; ".join(cite(part) for part in key.split(";"))
    except ValueError:
        return key


def _cause(doubt: Doubt, references: References) -> tuple[str, str, float]:
    if doubt.causes:
        best = doubt.causes[0]
        words = best.guess.words
        if len(doubt.causes) > 1:
            rest = "; ".join(f"{r.guess.words} ({r.guess.code}, {r.confidence:.0%})" for r in doubt.causes[1:3])
            words += f"; also possible: {rest}"
        return best.guess.code, words, best.confidence
    return "unknown", "no known mistake gives this number", 0.3


def _severity(doubt: Doubt, code: str) -> str:
    trial = doubt.trial
    if code == "outside-range" or _of_another_table(doubt):
        return "warning"
    if code == "unknown" and (trial.coverage < 1.0 or trial.relation.source == "methods"):
        return "note" if trial.coverage < 1.0 else "warning"
    return "error"


def _of_another_table(doubt: Doubt) -> bool:
    """Whether a property of a solution or an oil is off by little, and no cause meets it far better than chance."""
    trial, stated = doubt.trial, doubt.entry.si
    substance = of_substance.named(trial.case)
    if trial.relation.source != "properties" or trial.expected is None or not of_substance.varies(substance):
        return False
    off = abs(stated - trial.expected.value)
    if off > _VARIED * abs(trial.expected.value):
        return False
    near = max(_SHARP * off, doubt.entry.rounding if doubt.entry.rounding < off / 2.0 else 0.0)
    return not any(abs(ranked.guess.value - stated) <= near for ranked in doubt.causes)


def _inputs_in_words(trial: Trial) -> str:
    shown = []
    for resolved in trial.inputs.values():
        entry = resolved.entry
        if entry is not None:
            shown.append(f"{entry.label} {with_unit(entry.value, entry.unit)}")
    return ", ".join(shown[:6]) if shown else "the substance"


def _reasoning(doubt: Doubt, expected: float) -> tuple[str, ...]:
    trial, entry = doubt.trial, doubt.entry
    used = [r.entry for r in trial.inputs.values() if r.entry is not None]
    lines = [f"{e.label} = {with_unit(e.value, e.unit)} ({e.cell})" for e in used]
    answer = trial.expected
    if answer is not None:
        lines.append(f"{answer.words}: {with_unit(in_unit(expected, entry), entry.unit)}")
        allowed = trial.tolerance(answer) / abs(expected) if expected else 0.0
        lines.append(f"agreement within {allowed:.1%} was asked")
    if expected and entry.kind != "temperature":
        lines.append(f"stated over recomputed: {entry.si / expected:.4g}")
    lines += [f"{r.guess.code}, {r.confidence:.0%}: {r.guess.words}" for r in doubt.causes]
    return tuple(lines)
