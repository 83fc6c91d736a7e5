"""Which stated number fills a parameter of a relation, and what follows where none is stated."""

import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from cellfuncs.cases import labels
from cellfuncs.checks.references import References
from cellfuncs.checks.relation import Admissible, Relation, giving
from cellfuncs.checks.stated import SheetCase, Stated

# how many relations one behind the other: fewer for a typed number, which is mostly an input
_DEEPEST, _DEEPEST_TYPED = 3, 1
# relative: a formula that names no property has it as a constant, 500 Btu/h for a gpm and °F, good for some temperature
_CONSTANT = 0.05


_LIMIT = re.compile(
    r"\b(max|maximum|min|minimum|allow\w*|permi\w*|admissible|limit\w*|rated|rating|nominal|recommended|target|"
    r"set\s?point|criterion|guide\w*|typical|design|guarantee\w*|installed|selected|available|provided|existing|"
    r"chosen)\b",
    re.IGNORECASE,
)


# the part of the numbers around that must be formulas for a typed one to count as pasted
PASTED = 0.5


@lru_cache(maxsize=4096)
def is_limit(label: str, key: str) -> bool:
    """Whether a label speaks of what is allowed, rated or wished for; a largest duty is a quantity of its own.

    Nothing follows from such a number but what a formula makes of it, and a typed one follows from nothing.
    """
    found = _LIMIT.search(label)
    if not found:
        return False
    word, entry = found.group().casefold(), labels.dictionary()[key]
    return not (word.startswith(("max", "min")) and any(word in n.casefold() for n in (entry.label, *entry.synonyms)))


@dataclass(frozen=True)
class Resolved:
    """A value [SI] with the cells it rests on, and the relative scatter of what it was derived by.

    ``entry`` is the stated number itself where it is one.
    """

    value: float
    cells: frozenset[str]
    scatter: float = 0.0
    entry: Stated | None = None


class Resolver:
    """Fills the parameters of relations for one case."""

    def __init__(self, case: SheetCase, references: References):
        self.case = case
        self.references = references
        self._of: tuple[Stated | None, dict[tuple[str, ...], Stated | None], list[Stated]] = (None, {}, [])

    def pick(self, keys: tuple[str, ...], owner: Stated) -> Stated | None:
        """The stated number of one of ``keys`` that belongs to ``owner``: what its formula uses, then what is near."""
        if self._of[0] is not owner:
            self._of = (owner, {}, self._found_above(owner))
        known = self._of[1]
        if keys not in known:
            known[keys] = self._picked(keys, owner)
        return known[keys]

    def _picked(self, keys: tuple[str, ...], owner: Stated) -> Stated | None:
        refs = self.references
        for group in (refs.direct(owner.cell), self._of[2]):
            for key in keys:
                found = [entry for entry in group if entry.key == key and entry.cell != owner.cell]
                if found:
                    return found[-1]
        for key in keys:
            found = self._near(key, owner)
            if found is not None:
                return found
        return None

    def _found_above(self, owner: Stated) -> list[Stated]:
        by_cell, place = self.references.by_cell, self.references.place
        cells = [cell for cell in self.references.above(owner.cell) if cell in by_cell]
        return [by_cell[cell] for cell in sorted(cells, key=place.__getitem__)]

    def _near(self, key: str, owner: Stated) -> Stated | None:
        """The nearest before the owner in reading order, else the first after it; never what rests on the owner."""
        entries = self.case.stated.get(key)
        if not entries:
            return None
        below = self.references.below(owner.cell)
        entries = [e for e in entries if e.cell != owner.cell and e.cell not in below]
        plain = [e for e in entries if not is_limit(e.label, key)]
        # an input may differ from what is installed; a number among results was computed with it
        given = owner.typed and self.references.pasted(owner.cell) < PASTED
        entries = plain if plain or given else entries
        if not entries:
            return None
        place = self.references.place
        here = place.get(owner.cell, 0)
        before = [e for e in entries if place.get(e.cell, 0) < here]
        return before[-1] if before else entries[0]

    def find(self, keys: tuple[str, ...], owner: Stated, depth: int = 0, path: tuple[str, ...] = ()) -> Resolved | None:
        """A stated number, or what follows from others by relations."""
        entry = self.pick(keys, owner)
        if entry is not None:
            return Resolved(entry.si, frozenset((entry.cell,)), 0.0, entry)
        if depth >= (_DEEPEST_TYPED if owner.typed else _DEEPEST):
            return None
        wanted = [key for key in keys if key not in path and key != owner.key]
        found = [r for key in wanted for r in self._derive(key, owner, depth, path)]
        return min(found, key=lambda r: (not r.cells <= self._own(owner), r.scatter), default=None)

    def _own(self, owner: Stated) -> frozenset[str]:
        return self.references.above(owner.cell)

    def _derive(self, key: str, owner: Stated, depth: int, path: tuple[str, ...]) -> Iterator[Resolved]:
        for relation in giving().get(key, ()):
            if not relation.derives or relation.source == "methods" or not relation.applies(self.case):
                continue
            inputs = self.inputs(relation, owner, depth + 1, (*path, key))
            if inputs is None:
                continue
            answers = evaluate(relation, self.case, {name: r.value for name, r in inputs.items()})
            tight = [a for a in answers if not a.code and not a.loose]
            if tight:
                cells = frozenset().union(*(r.cells for r in inputs.values()))
                scatter = tight[0].scatter + sum(r.scatter for r in inputs.values())
                if relation.source == "properties" and not owner.typed:
                    scatter = max(scatter, _CONSTANT)
                yield Resolved(tight[0].value, cells, scatter)

    def inputs(
        self, relation: Relation, owner: Stated, depth: int = 0, path: tuple[str, ...] = ()
    ) -> dict[str, Resolved] | None:
        """Every parameter of a relation filled, or None where one cannot be."""
        found: dict[str, Resolved] = {}
        for need in relation.needs:
            keys = tuple(k for k in relation.keys_for(need, self.case) if k not in path)
            resolved = self.find(keys, owner, depth, path) if keys else None
            if resolved is None:
                return None
            found[need] = resolved
        direct = {entry.cell for entry in self.references.direct(owner.cell)}
        for need in relation.optional:
            entry = self.pick(relation.keys_for(need, self.case), owner)
            # what a formula leaves out it leaves out; a method may need whatever the sheet says
            if entry is not None and (relation.takes_case or owner.typed or entry.cell in direct):
                found[need] = Resolved(entry.si, frozenset((entry.cell,)), 0.0, entry)
        return found


def evaluate(relation: Relation, case: SheetCase, values: dict[str, float]) -> list[Admissible]:
    """The answers of a relation; none where it cannot answer."""
    try:
        answer: Any = relation.answer(case, values)
    except (ArithmeticError, ValueError, TypeError, AttributeError):
        return []
    if isinstance(answer, list):
        return answer
    if isinstance(answer, complex) or answer != answer or abs(answer) > 1e30:
        return []
    return [Admissible(float(answer), relation.name, relation.scatter)]
