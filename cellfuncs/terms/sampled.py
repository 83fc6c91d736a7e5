"""The rule of ``verdicts.judge`` for many samples of one case at once, in arrays and without the words.

A test holds both side by side, sample for sample. Rows are the terms of the case, columns the samples.
"""

from collections.abc import Mapping, Sequence
from typing import Any

from cellfuncs.terms.priced import Effects, Priced
from cellfuncs.terms.verdicts import BORDERLINE, CLOSE_BELOW, KEEP, LEAVE_OUT, Judged, band

VERDICTS = (LEAVE_OUT, BORDERLINE, KEEP)
_OUT, _CLOSE, _KEEP = range(3)


def verdicts(
    judged: Sequence[Judged],
    moved: Sequence[Mapping[str, Any]],
    tolerance: float,
    smallest: float,
    effects: Effects,
    uncertainty: Mapping[str, float],
) -> Any:
    """Places in ``VERDICTS``, an array of terms by samples.

    ``moved`` holds, for each term, those numbers of its size that differ between samples, as arrays of finite
    numbers (one at least in all). The effect of a term changes as its share does.
    """
    import numpy as np

    samples = next(len(column) for term in moved for column in term.values())

    def number(t: int, name: str) -> Any:
        value = moved[t].get(name, getattr(judged[t].size, name))
        return value if value is None or name in moved[t] else np.full(samples, value)

    sizes = [number(t, "size") for t in range(len(judged))]
    nets = [number(t, "nets_to") for t in range(len(judged))]
    largest = np.max([size if net is None else net for size, net in zip(sizes, nets, strict=True)], axis=0)
    sound = np.where(largest > 0, largest, 1.0)
    table = _Table(np, len(judged), samples)
    for t, j in enumerate(judged):
        asked, kelvins = number(t, "asked"), number(t, "kelvins")
        share = asked if asked is not None else np.where(largest > 0, sizes[t] / sound, 0.0)
        table.share[t] = table.weight[t] = share
        if kelvins is not None:
            table.kelvins[t] = kelvins
        effect = effects.get(j.size.term)
        if isinstance(effect, Priced) and not j.size.leading:
            factor = share / j.share if j.share else np.ones(samples)
            table.by_effect(t, effect, factor, tolerance, smallest, uncertainty.get(j.size.term, 0.0))
        else:
            table.by_share(t, j, kelvins, number(t, "uncancelled"), tolerance, smallest)
    table.take_back(np.array([j.size.pair for j in judged]), tolerance, smallest)
    return table.verdict


class _Table:
    """Shares, weights, kelvins and verdicts of all terms in all samples; see ``Judged``."""

    def __init__(self, np: Any, terms: int, samples: int):
        self.np = np
        self.share, self.weight, self.kelvins = (np.zeros((terms, samples)) for _ in range(3))
        self.verdict = np.zeros((terms, samples), dtype=np.int8)
        self.by_kelvins = np.zeros((terms, samples), dtype=bool)

    def by_effect(
        self, t: int, effect: Priced, factor: Any, tolerance: float, smallest: float, uncertainty: float
    ) -> None:
        """As ``verdicts._by_effect``."""
        np = self.np
        ratio = None if effect.ratio is None else effect.ratio * factor
        if ratio is not None:
            self.weight[t] = ratio
        if effect.kelvins is not None:
            self.kelvins[t] = effect.kelvins * factor
        if not effect.words:
            return
        if ratio is None:
            self.verdict[t] = _KEEP
            matters: Any = True
        else:
            low, high = band(effect.doubt, uncertainty)
            place = ratio / tolerance
            self.verdict[t] = np.where(place < low, _OUT, np.where(place <= high, _CLOSE, _KEEP))
            matters = ratio >= CLOSE_BELOW * tolerance
        if effect.kelvins is not None:
            small = (self.kelvins[t] < smallest) & matters
            self.verdict[t][small] = _OUT
            self.by_kelvins[t] = small

    def by_share(self, t: int, j: Judged, kelvins: Any, uncancelled: Any, tolerance: float, smallest: float) -> None:
        """As ``verdicts._one``."""
        np, s, share = self.np, j.size, self.share[t]
        if s.settled is not None or s.leading:
            self.verdict[t] = VERDICTS.index(s.settled if s.settled is not None else KEEP)
            return
        low, high = s.thresholds or (tolerance / 3.0, tolerance * 3.0)
        found = np.where(share < low, _OUT, np.where(share > high, _KEEP, _CLOSE))
        if uncancelled is not None:
            found[(share < low) & (uncancelled > tolerance)] = _CLOSE
        if kelvins is not None:
            small = (kelvins < smallest) & (share >= low) & (share != 0)
            found[small] = _OUT
            self.by_kelvins[t] = small
        found[share == 0] = _OUT
        self.verdict[t] = found

    def take_back(self, pair: Any, tolerance: float, smallest: float) -> None:
        """As ``verdicts._take_back``, in all samples where it is called for."""
        np = self.np
        while True:
            out = (self.verdict == _OUT) & ((self.share > 0) | (self.weight > 0))
            counted = np.zeros(out.shape[1], dtype=bool)
            for t in pair.nonzero()[0]:
                out[t] &= ~counted
                counted |= out[t]
            by_share, by_kelvins = out & ~self.by_kelvins, out & self.by_kelvins
            over = np.where(by_share, self.weight, 0.0).sum(axis=0) > tolerance
            warm = ~over & (np.where(by_kelvins, self.kelvins, 0.0).sum(axis=0) > smallest)
            called = (over | warm).nonzero()[0]
            if not called.size:
                return
            weighed = np.where(by_share, self.weight, -np.inf)
            back = np.where(over, weighed.argmax(axis=0), np.where(by_kelvins, self.kelvins, -np.inf).argmax(axis=0))
            chosen = np.zeros(out.shape, dtype=bool)
            chosen[back[called], called] = True
            both = (over | warm) & pair[back]
            chosen |= pair[:, None] & both & (self.verdict == _OUT)
            self.verdict[chosen] = _CLOSE
            self.by_kelvins[chosen] = False
