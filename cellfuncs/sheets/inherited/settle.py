"""Which quantity of the dictionary a number is: by its label, its unit, its value, and what stands beside it."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import repeat

from cellfuncs import quantities
from cellfuncs.cases import labels
from cellfuncs.errors import CellfuncsError
from cellfuncs.quantities import KINDS, Unit
from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.found import Found

UNITLESS = frozenset(("dimensionless", "fraction", "relative_humidity"))
_NUMBERS = ("stated", "derived", "sheet")  # roles of labels that stand for numbers
_SPELLED = 0.85  # from which a name in words counts as known
_CLEAR = 0.2  # how far the best label must be ahead to need no neighbours
_NOTHING = Unit(1.0, 0.0, "dimensionless", "-")
_SHARES = frozenset(("fraction", "relative_humidity"))
_LARGEST_SHARE = 1.5


@dataclass(frozen=True, slots=True)
class Option:
    """One quantity that a number may be."""

    key: str
    score: float
    unit_text: str
    unit: Unit

    @property
    def kind(self) -> str:
        return labels.dictionary()[self.key].kind


@dataclass(frozen=True, slots=True)
class Settled:
    """What a number may be, the likeliest first, or why it is nothing that is known."""

    options: tuple[Option, ...]
    why: str = ""

    @property
    def clear(self) -> bool:
        return len(self.options) == 1 or (
            len(self.options) > 1 and self.options[0].score - self.options[1].score >= _CLEAR
        )

    def as_key(self, key: str) -> Option:
        """The likeliest option, read as another quantity of the same kind."""
        return replace(self.options[0], key=key)


def options_for(found: Found, in_si: bool, atmosphere: float, computed: bool = False) -> Settled:
    """All quantities that fit the label, the unit and the value of a number.

    A temperature that a formula computed is one even below absolute zero: that is the fault to be found.
    """
    settled = _fitting(found.names, found.units, in_si, atmosphere)
    if all(map(_possible, repeat(found.value), settled.options)):
        return settled
    possible = tuple(option for option in settled.options if _possible(found.value, option))
    if not possible and computed and {option.kind for option in settled.options} == {"temperature"}:
        return settled
    return Settled(possible, settled.why)


@lru_cache(maxsize=8192)
def _fitting(names: tuple[str, ...], units: tuple[str, ...], in_si: bool, atmosphere: float) -> Settled:
    """All quantities that fit a label and its unit, the likeliest first."""
    best: dict[str, Option] = {}
    misfits: list[str] = []
    unitless: list[str] = []
    remark = False
    symbols = [name for name in names if texts.is_symbol(name) and not texts.is_name(name)]
    spelled = any(k.score > _SPELLED for name in names if name not in symbols for k in texts.known(name))
    for place, name in enumerate(names):
        if spelled and best and name in symbols:
            continue  # beside a name in words its symbol says nothing more
        for candidate in texts.known(name):
            entry = labels.dictionary()[candidate.key]
            if entry.role not in _NUMBERS:
                remark |= entry.role == "note" and candidate.score > 0.95 and place == 0
                continue
            read = _unit_of(units, entry.kind, in_si, atmosphere)
            if read is None:
                (misfits if units else unitless).append(entry.label)
                continue
            score = candidate.score - 0.1 * place
            if candidate.key not in best or best[candidate.key].score < score:
                best[candidate.key] = Option(candidate.key, score, *read)
    if remark:
        return Settled((), "remark")
    if best:
        ranked = sorted(best.values(), key=lambda option: -option.score)
        return Settled(tuple(ranked), f"{labels.dictionary()[ranked[0].key].label} cannot have this value")
    if misfits:
        return Settled((), f"{units[0]} is no unit of {' or '.join(dict.fromkeys(misfits))}")
    if unitless:
        return Settled((), f"{' or '.join(dict.fromkeys(unitless))} without a unit")
    return Settled((), "label not known" if names else "no label")


def _unit_of(units: Sequence[str], kind: str, in_si: bool, atmosphere: float) -> tuple[str, Unit] | None:
    for text in units:
        # where the label says gauge, the unit need not
        for spelling in (text, f"{text}g") if kind == "pressure_gauge" else (text,):
            try:
                return spelling, quantities.read_unit(spelling, kind, atmosphere)
            except CellfuncsError:
                continue
    if units and any(quantities.kinds_for(text) for text in units):
        return None
    if kind in UNITLESS:
        return "", _NOTHING
    if in_si:
        return KINDS[kind].si_unit, quantities.read_unit(KINDS[kind].si_unit, kind, atmosphere)
    return None


def _possible(value: float, option: Option) -> bool:
    """Whether a value can be that quantity at all."""
    si = value * option.unit.factor + option.unit.offset
    entry = labels.dictionary()[option.key]
    if not 0.0 < si < math.inf:
        try:
            quantities.check_physical(si, entry.kind)
        except CellfuncsError:
            return False
    return not (abs(si) > _LARGEST_SHARE and entry.kind in _SHARES and entry.role == "stated")


# -- neighbours --------------------------------------------------------------------------------------------


@lru_cache(maxsize=1)
def _companions() -> Mapping[str, tuple[tuple[tuple[str, ...], ...], ...]]:
    """For each label the other quantities of every relation that it takes part in."""
    from cellfuncs.checks.relations import RELATIONS
    from cellfuncs.checks.stated import SheetCase

    empty = SheetCase("")
    table: dict[str, list[tuple[tuple[str, ...], ...]]] = {}
    for relation in RELATIONS:
        places = [(relation.gives,), *(relation.keys_for(need, empty) for need in relation.needs)]
        for number, keys in enumerate(places):
            others = tuple(other for place, other in enumerate(places) if place != number)
            for key in keys:
                table.setdefault(key, []).append(others)
    return {key: tuple(groups) for key, groups in table.items()}


def companions(key: str, beside: Iterable[str]) -> int:
    """How many relations tie a quantity to others that are stated beside it."""
    known = set(beside)
    return sum(all(known & set(keys) for keys in others) for others in _companions().get(key, ()))


def by_neighbours(settled: Settled, beside: Iterable[str], flow: str | None) -> Option | None:
    """The one option that its neighbours and the flow kind speak for; None where it stays open."""
    known = set(beside)
    ranked = []
    for option in settled.options:
        flows = labels.dictionary()[option.key].flows
        fits = 0.0 if not flow or not flows else 0.3 if flow in flows else -0.3
        ties = min(companions(option.key, known - {option.key}), 4)
        ranked.append((option.score + fits + 0.25 * ties - 0.15 * (option.key in known), option))
    ranked.sort(key=lambda pair: -pair[0])
    level = [option for rank, option in ranked if ranked[0][0] - rank < 0.1]
    if len(level) > 1 and not _one_for_another([option.key for option in level]):
        return None
    return ranked[0][1]


def _one_for_another(keys: Sequence[str]) -> bool:
    """Whether quantities stand for each other in all relations, so that it does not matter which is meant."""
    from cellfuncs.checks.relation import STAND_INS

    return any(set(keys) <= set(group) for group in STAND_INS.values())
