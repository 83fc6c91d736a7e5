"""Whether verdicts survive the ± of the inputs: 2,000 normal samples with a fixed seed.

Solving every sample would take too long for a cell, so the sizes of the terms are taken from a surrogate: each
input is moved alone to seven places within three standard uncertainties, each size is read between them (in its
logarithm where it is positive), and the changes by several inputs are put together, as is exact for products of
powers. The verdicts of the samples are made by the same rule as ever. The surrogate is compared with solved samples;
where it does not reproduce their verdicts, or where a place is refused, 500 samples are solved instead, and the
words say so.
"""

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from cellfuncs.answers import Solution, solve
from cellfuncs.cases import labels
from cellfuncs.cases.block import SIGNED
from cellfuncs.cases.case import Case
from cellfuncs.cases.vary import with_value
from cellfuncs.errors import CellfuncsError, OutOfRange
from cellfuncs.terms import sampled
from cellfuncs.terms.priced import Effects, Priced, Scaled
from cellfuncs.terms.sampled import VERDICTS
from cellfuncs.terms.size import Size
from cellfuncs.terms.verdicts import Judged, judge

SAMPLES = 2000
SOLVED = 500  # samples where every one is solved
SEED = 20260101
_PLACES = (-3.0, -2.0, -1.0, 0.0, 1.0, 2.0, 3.0)
_CHECKED = 24  # samples that are also solved
_MOST_WRONG = 1  # of these, a term may have another verdict than by the surrogate
_NUMBERS = ("size", "asked", "kelvins", "nets_to", "uncancelled")
_FIXED = ("tolerance", "smallest")  # rows of ours that a ± says nothing about

SizesOf = Callable[[Solution], Sequence[Size]]


@dataclass(frozen=True)
class Doubt:
    """Relative standard uncertainty of an effect by the ± of a case, and the input that makes most of its variance."""

    relative: float
    label: str
    part: float


@dataclass(frozen=True)
class Survival:
    """In how many of the samples that could be answered a term has the verdict of the table."""

    kept: int
    answered: int
    drawn: int
    doubt: Doubt | None = None

    def words(self) -> str:
        if self.answered == 0:
            return "no sample within ± can be answered"
        of = f"{self.answered:,} samples within ±"
        if self.answered < self.drawn:
            of += f" ({self.drawn - self.answered:,} are refused)"
        if self.doubt is not None:
            of += f", {100 * self.doubt.part:.0f} % by {self.doubt.label}"
        if self.kept == self.answered:
            return f"holds in all {of}"
        return f"holds in {1000 * self.kept // self.answered / 10:g} % of {of}"


def uncertain(case: Case) -> list[tuple[str, float, float]]:
    """Key, value and standard uncertainty of every row with a ±, in a fixed order."""
    return sorted(
        (key, float(entry.value), entry.plus_minus)
        for key, entry in case.stated.items()
        if entry.plus_minus and key not in _FIXED
    )


def survival(
    solution: Solution,
    judged: Sequence[Judged],
    sizes_of: SizesOf,
    effects: Effects | None = None,
    uncertainty: Mapping[str, Doubt] | None = None,
) -> dict[str, Survival]:
    """Term -> how its verdict survives the ± of the case; empty without ±, and without terms that could change.

    The effect of a term in a sample is the one of the case, changed as the share of the term changes.
    """
    rows = uncertain(solution.case)
    if not rows:
        return {}
    import numpy as np

    draws = np.random.default_rng(SEED).standard_normal((SAMPLES, len(rows)))
    sampling = _Sampling(solution.case, rows, judged, sizes_of, effects, uncertainty)
    counted = sampling.by_surrogate(draws)
    if counted is None:
        counted = sampling.by_solving(draws[:SOLVED])
    return counted


def _shares(sizes: Sequence[Any]) -> list[float]:
    """Share of each term, as the verdicts have it."""
    largest = max(s.size if s.nets_to is None else s.nets_to for s in sizes)
    return [s.asked if s.asked is not None else s.size / largest if largest > 0 else 0.0 for s in sizes]


def uncertainty_of(solution: Solution, sizes: Sequence[Size], sizes_of: SizesOf) -> dict[str, Doubt]:
    """Term -> uncertainty of its share and so its effect, by the ± of the case, to first order (one step each)."""
    rows = uncertain(solution.case)
    base = _shares(sizes) if rows else []
    parts: list[list[tuple[float, str]]] = [[] for _ in base]
    for key, value, spread in rows:
        try:
            moved = _shares(sizes_of(solve(with_value(solution.case, key, value + spread))))
        except (ArithmeticError, ValueError):
            continue
        for found, a, b in zip(parts, base, moved, strict=True):
            if a and b != a:
                found.append(((b / a - 1.0) ** 2, labels.dictionary()[key].label))
    doubts = {}
    for s, found in zip(sizes, parts, strict=False):
        variance = sum(v for v, _ in found)
        if variance > 0:
            most, label = max(found)
            doubts[s.term] = Doubt(math.sqrt(variance), label, most / variance)
    return doubts


def relative(doubts: Mapping[str, Doubt]) -> dict[str, float]:
    """Only how uncertain, as the verdicts want it."""
    return {term: doubt.relative for term, doubt in doubts.items()}


class _Sampling:
    """One case with its uncertain rows."""

    def __init__(
        self,
        case: Case,
        rows: list[tuple[str, float, float]],
        judged: Sequence[Judged],
        sizes_of: SizesOf,
        effects: Effects | None = None,
        uncertainty: Mapping[str, Doubt] | None = None,
    ):
        self.effects, self.doubts = effects or {}, uncertainty or {}
        self.relative = relative(self.doubts)
        self.case = case
        self.rows = rows
        self.judged = judged
        self.sizes_of = sizes_of
        self.base = [j.size for j in judged]

    def sizes(self, deviates: Sequence[float]) -> Sequence[Size]:
        """The sizes with every uncertain row moved by so many standard uncertainties; or a refusal."""
        case = self.case
        for (key, value, spread), z in zip(self.rows, deviates, strict=True):
            if not z:
                continue
            moved = value + z * spread
            if moved <= 0 < value and key not in SIGNED:
                raise OutOfRange("not above zero")
            case = with_value(case, key, moved)
        try:
            return self.sizes_of(solve(case))
        except (ArithmeticError, ValueError) as error:
            raise error if isinstance(error, CellfuncsError) else OutOfRange(str(error)) from None

    def verdicts(self, sizes: Sequence[Any]) -> list[str]:
        effects = {}
        if self.effects:
            shares = _shares(sizes)
            for j, share in zip(self.judged, shares, strict=True):
                effect = self.effects.get(j.size.term)
                if isinstance(effect, Priced):
                    effects[j.size.term] = Scaled(effect, share / j.share if j.share else 1.0)
        return [j.verdict for j in judge(sizes, self.case.tolerance, self.case.smallest, effects, self.relative)]

    def by_solving(self, draws: Any) -> dict[str, Survival]:
        """Every sample solved."""
        found = []
        for deviates in draws.tolist():
            try:
                found.append(self.verdicts(self.sizes(deviates)))
            except CellfuncsError:
                continue
        kept = [sum(verdicts[t] == j.verdict for verdicts in found) for t, j in enumerate(self.judged)]
        return self._survivals(kept, len(found), len(draws))

    def by_surrogate(self, draws: Any) -> dict[str, Survival] | None:
        """Every sample from the surrogate; None where it may not be trusted."""
        try:
            moves = [[self._moved(k, z) for z in _PLACES] for k in range(len(self.rows))]
            solved = [self.verdicts(self.sizes(deviates)) for deviates in draws[:_CHECKED].tolist()]
        except CellfuncsError:
            return None
        columns: list[dict[str, Any]] = []
        for t, size in enumerate(self.base):
            across = [[sizes[t] for sizes in row] for row in moves]
            if any(_kind(other) != _kind(size) for row in across for other in row):
                return None
            read = {name: _column([[getattr(s, name) for s in row] for row in across], draws) for name in _NUMBERS}
            columns.append({name: column for name, column in read.items() if column is not None})
        found = self._by_columns(columns, len(draws))
        if found is None:
            return None
        wrong = [sum(s[t] != VERDICTS[place] for s, place in zip(solved, row, strict=False))
                 for t, row in enumerate(found)]  # fmt: skip
        if max(wrong) > _MOST_WRONG:
            return None
        kept = [int((row == VERDICTS.index(j.verdict)).sum()) for row, j in zip(found, self.judged, strict=True)]
        return self._survivals(kept, len(draws), len(draws))

    def _by_columns(self, columns: Sequence[Mapping[str, Any]], samples: int) -> Any:
        """Verdicts of all samples as places in ``VERDICTS``; None where a number of them is none."""
        import numpy as np

        if not all(np.isfinite(column).all() for term in columns for column in term.values()):
            return None
        if not any(columns):  # no input moves any term
            return np.array([[VERDICTS.index(verdict)] * samples for verdict in self.verdicts(self.base)])
        case = self.case
        return sampled.verdicts(self.judged, columns, case.tolerance, case.smallest, self.effects, self.relative)

    def _moved(self, k: int, z: float) -> Sequence[Size]:
        """The sizes with one row alone moved."""
        return self.sizes([z if i == k else 0.0 for i in range(len(self.rows))]) if z else self.base

    def _survivals(self, kept: Sequence[int], answered: int, drawn: int) -> dict[str, Survival]:
        return {
            j.size.term: Survival(number, answered, drawn, self.doubts.get(j.size.term))
            for number, j in zip(kept, self.judged, strict=True)
            if not j.size.leading and (j.share != 0 or j.size.settled)
        }


def _kind(size: Size) -> tuple[Any, ...]:
    """What a surrogate cannot carry over: settled verdicts, leading terms, which numbers there are."""
    return size.settled, size.leading, size.thresholds, *(getattr(size, name) is None for name in _NUMBERS)


def _column(by_row: list[list[float | None]], draws: Any) -> Any:
    """One number of one term in all samples; None where no input moves it."""
    import numpy as np

    if by_row[0][0] is None or all(value == by_row[0][0] for row in by_row for value in row):
        return None
    values = np.array(by_row, dtype=float)
    logarithmic = bool((values > 0).all())
    if logarithmic:
        values = np.log(values)
    middle = values[0, len(_PLACES) // 2]
    total = np.full(len(draws), middle)
    for k, row in enumerate(values):
        if (row != middle).any():  # the input moves it
            total += np.interp(draws[:, k], _PLACES, row) - middle
    return np.exp(total) if logarithmic else total
