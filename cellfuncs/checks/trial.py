"""One relation tried on one stated number: what comes out, within what, and whether the number agrees."""

import re
from dataclasses import dataclass
from functools import cached_property

from cellfuncs.checks.references import References
from cellfuncs.checks.relation import DEFINITION, Admissible, Relation, giving, solve
from cellfuncs.checks.relations import RELATIONS
from cellfuncs.checks.resolve import PASTED, Resolved, Resolver, evaluate, is_limit
from cellfuncs.checks.stated import SheetCase, Stated

# K: 273 for 273.15, or a temperature shown to a tenth
_TEMPERATURE = 0.2
# relative: how near a pasted number must come to a method
_PASTED_NEAR = 0.03
# a temperature of properties that belongs to the stream alone
_OF_A_STREAM = re.compile(r"^(?!.*\b(film|wall|surface)).*\b(bulk|mean|average|water|fluid|oil|air)\b", re.IGNORECASE)
# what is given or taken: the sign is a convention of the sheet
_EITHER_SIGN = frozenset(
    {"power", "energy", "heat_flux", "heat_per_length", "temperature_difference", "pressure_difference"}
)


_CONVERSION = Relation(
    "the same in another unit", "", ("other",), (), lambda other: other, 0.0, "conversion of units"
)


@dataclass
class Trial:
    """``relation`` on ``entry``, which fills ``role`` (None: it is what the relation gives)."""

    relation: Relation
    entry: Stated
    role: str | None
    inputs: dict[str, Resolved]
    case: SheetCase
    references: References

    @cached_property
    def values(self) -> dict[str, float]:
        return {name: resolved.value for name, resolved in self.inputs.items()}

    @cached_property
    def support(self) -> frozenset[str]:
        """The cells that the recomputed number rests on."""
        return frozenset().union(*(r.cells for r in self.inputs.values()))

    @cached_property
    def local(self) -> bool:
        """Whether the number's own formula rests on all these cells, or on all that they rest on themselves."""
        own = self.references.above(self.entry.cell)
        behind = ((cell, self.references.above(cell)) for cell in self.support - own)
        return all(above and above <= own for _, above in behind)

    @cached_property
    def coverage(self) -> float:
        """The part of the cells that the formula uses which this relation uses too."""
        direct = self.references.direct(self.entry.cell)
        if not direct:
            return 1.0
        if not self.support:
            # a property of the substance rests on a temperature, whoever computes it
            warm = any(e.kind == "temperature" for e in direct)
            return 1.0 if warm and self.relation.source == "properties" else 0.0
        own = self.references.above(self.entry.cell)
        # what stands behind an input that the formula itself rests on is used through it
        known = self.support.union(*(self.references.above(cell) for cell in self.support & own))
        # so is what an input was computed from that the formula computes once more itself
        again = [above for cell in self.support - own if (above := self.references.above(cell)) and above <= own]
        known = known.union(*again)
        unread = self.references.unread(self.entry.cell)
        return sum(e.cell in known for e in direct) / (len(direct) + unread)

    @cached_property
    def answers(self) -> list[Admissible]:
        """What the number should be."""
        if self.role is None:
            return evaluate(self.relation, self.case, self.values)
        return self._solved()

    def _solved(self) -> list[Admissible]:
        target = self.inputs[""].value
        others = {name: value for name, value in self.values.items() if name}

        def forward(x: float) -> float:
            found = evaluate(self.relation, self.case, {**others, self.role: x})
            if not found:
                raise ValueError(self.relation.name)
            return found[0].value

        x = solve(forward, target, self.entry.si)
        return [] if x is None else [Admissible(x, self.relation.name, self.relation.scatter)]

    def tolerance(self, answer: Admissible) -> float:
        """Within what the number agrees with an answer [SI]: its rounding, those of its inputs, the scatter."""
        relative = max(DEFINITION, answer.scatter) + sum(r.scatter for r in self.inputs.values())
        if self.entry.kind == "temperature":
            allowed = _TEMPERATURE + relative * self._reach(answer.value)
        else:
            allowed = relative * abs(answer.value)
        own = self.entry.rounding if self.entry.typed else min(self.entry.rounding, DEFINITION * abs(answer.value))
        return allowed + own + self._propagated(answer)

    def _reach(self, value: float) -> float:
        """The largest difference of temperatures that takes part [K]."""
        known = [r.entry.si for r in self.inputs.values() if r.entry and r.entry.kind == "temperature"]
        known += [value, self.entry.si]
        return max(known) - min(known)

    def _propagated(self, answer: Admissible) -> float:
        """What the shown roundings of typed inputs do to a typed number that was computed from finer ones."""
        if not self.entry.typed or self.role is not None:
            return 0.0
        square = 0.0
        for name, resolved in self.inputs.items():
            if resolved.entry is None or not resolved.entry.rounding:
                continue
            moved = evaluate(self.relation, self.case, {**self.values, name: resolved.value + resolved.entry.rounding})
            near = min((abs(a.value - answer.value) for a in moved), default=0.0)
            square += near**2
        return square**0.5

    @cached_property
    def match(self) -> Admissible | None:
        """The first answer that the number agrees with; one with a code is a known mistake."""
        pasted = self.references.pasted(self.entry.cell) >= PASTED
        for answer in self.answers:
            if answer.loose and not answer.assumed and pasted and not self._near_a_method(answer):
                continue
            stated = self.entry.si
            if self.entry.kind in _EITHER_SIGN and stated * answer.value < 0:
                stated = -stated
            if abs(stated - answer.value) <= self.tolerance(answer):
                return answer
        return None

    def _near_a_method(self, loose: Admissible) -> bool:
        """Whether a number pasted among formulas is near one method; their spread excuses only typed inputs."""
        right = [a for a in self.answers if not a.code and not a.loose] or [loose]
        return any(abs(self.entry.si - a.value) <= _PASTED_NEAR * abs(a.value) for a in right)

    @cached_property
    def derived(self) -> int:
        """How many inputs are not stated but follow from others."""
        return sum(r.entry is None for r in self.inputs.values())

    @property
    def passed(self) -> bool:
        return self.match is not None and not self.match.code

    @cached_property
    def expected(self) -> Admissible | None:
        """The answer that the number should have had: the nearest of the right ones."""
        right = [a for a in self.answers if not a.code and not a.loose] or [a for a in self.answers if not a.code]
        return min(right, key=lambda a: abs(a.value - self.entry.si), default=None)


def trials(entry: Stated, resolver: Resolver) -> list[Trial]:
    """Every relation that can be tried on a number."""
    case, references = resolver.case, resolver.references
    found = []
    for relation in giving().get(entry.key, ()):
        if not relation.applies(case):
            continue
        inputs = resolver.inputs(relation, entry)
        if inputs is not None:
            found.append(Trial(relation, entry, None, inputs, case, references))
    if not entry.typed:
        found += _solved_for(entry, resolver)
    elif not found and references.pasted(entry.cell) >= PASTED:
        found += _solved_for_pasted(entry, resolver)
    return [trial for trial in found if trial.answers]


def _may_be_meant(relation: Relation, given: Stated, resolver: Resolver) -> bool:
    """Whether a temperature of properties may be what ``relation`` says: a bulk mean of a duct is no film temperature,
    and one that another relation gives is explained already. Of other quantities all relations hold at once."""
    if given.key != "property_temperature":
        return True
    if resolver.case.flow == "duct" and _OF_A_STREAM.search(given.label) and "wall_temperature" in relation.needs:
        return False
    return not any(
        trial.passed
        for other in giving()[given.key]
        if other is not relation and other.applies(resolver.case)
        for inputs in [resolver.inputs(other, given)]
        if inputs is not None
        for trial in [Trial(other, given, None, inputs, resolver.case, resolver.references)]
    )


def converted(entry: Stated, resolver: Resolver) -> list[Trial]:
    """The same quantity in another unit, where a formula uses nothing else that is labelled."""
    direct = resolver.references.direct(entry.cell)
    if len(direct) != 1 or direct[0].key != entry.key or direct[0].unit == entry.unit:
        return []
    other = direct[0]
    inputs = {"other": Resolved(other.si, frozenset((other.cell,)), 0.0, other)}
    return [Trial(_CONVERSION, entry, None, inputs, resolver.case, resolver.references)]


def _solved_for(entry: Stated, resolver: Resolver) -> list[Trial]:
    """Relations solved for a number whose formula uses what they give."""
    direct = resolver.references.direct(entry.cell)
    keys = {e.key for e in direct}
    found = []
    for relation in (r for key in keys for r in giving().get(key, ())):
        if relation.takes_case or not relation.applies(resolver.case):
            continue
        for role in (*relation.needs, *relation.optional):
            if entry.key not in relation.keys_for(role, resolver.case):
                continue
            inputs = _inputs_but(relation, role, entry, resolver)
            given = next(e for e in direct if e.key == relation.gives)
            if inputs is not None and given.cell != entry.cell:
                inputs[""] = Resolved(given.si, frozenset((given.cell,)), 0.0, given)
                trial = Trial(relation, entry, role, inputs, resolver.case, resolver.references)
                found.append(trial)
    return found


def _solved_for_pasted(entry: Stated, resolver: Resolver) -> list[Trial]:
    """Relations solved for a number that was pasted among formulas, from all that does not rest on it."""
    case = resolver.case
    found = []
    for relation in RELATIONS:
        if relation.takes_case or not case.stated.get(relation.gives):
            continue
        role = next((r for r in relation.needs if entry.key in relation.keys_for(r, case)), None)
        if role is None or not relation.applies(case):
            continue
        picks = {need: resolver.pick(relation.keys_for(need, case), entry) for need in relation.needs if need != role}
        given = resolver.pick((relation.gives,), entry)
        if given is None or not _may_be_meant(relation, given, resolver):
            continue
        if any(picked is None or is_limit(picked.label, picked.key) for picked in picks.values()):
            continue
        optional = {need: resolver.pick(relation.keys_for(need, case), entry) for need in relation.optional}
        picks |= {need: picked for need, picked in optional.items() if picked is not None}
        inputs = {need: Resolved(p.si, frozenset((p.cell,)), 0.0, p) for need, p in picks.items() if p is not None}
        inputs[""] = Resolved(given.si, frozenset((given.cell,)), 0.0, given)
        found.append(Trial(relation, entry, role, inputs, case, resolver.references))
    return found


def _inputs_but(relation: Relation, role: str, entry: Stated, resolver: Resolver) -> dict[str, Resolved] | None:
    own = resolver.references.above(entry.cell)
    direct = {e.cell for e in resolver.references.direct(entry.cell)}
    found = {}
    for need in (*relation.needs, *relation.optional):
        if need == role:
            continue
        picked = resolver.pick(relation.keys_for(need, resolver.case), entry)
        if need in relation.optional and (picked is None or picked.cell not in direct):
            continue
        if picked is None:
            return None
        found[need] = Resolved(picked.si, frozenset((picked.cell,)), 0.0, picked)
    # one of the inputs may have been forgotten
    missing = sum(resolved.entry is None or resolved.entry.cell not in own for resolved in found.values())
    return found if missing <= 1 and len(found) > missing else None
