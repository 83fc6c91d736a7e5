"""From effects and sizes to verdicts.

Where a model gives the effect of a term, the effect decides: leave out below 0.8 of the tolerance, keep above 1.25,
borderline between, or where ± or the model's own doubt straddle the tolerance. Where none does, the share decides:
leave out below a third of the tolerance, keep above three times. All that is left out is taken together; where it
exceeds the tolerance, the largest comes back as borderline.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from cellfuncs.terms.priced import SILENT, Effects, Priced, Scaled
from cellfuncs.terms.size import Size, num, percent

KEEP, BORDERLINE, LEAVE_OUT = "keep", "borderline", "leave out"
CLOSE_BELOW, CLOSE_ABOVE = 0.8, 1.25  # of the tolerance
APART = 3.0  # between share and effect, from which the reason says so
_SURE = 2.0  # standard uncertainties to either side


@dataclass
class Judged:
    """A size with its share, its verdict and why; ``effect`` where a model gives one."""

    size: Size
    share: float
    verdict: str
    why: str
    by_kelvins: bool = False
    effect: Priced | Scaled | None = None

    @property
    def weight(self) -> float:
        """What the term may do to the answer: its effect, or its share where no model gives one."""
        return self.share if self.effect is None or self.effect.ratio is None else self.effect.ratio

    @property
    def kelvins(self) -> float:
        if self.effect is not None and self.effect.kelvins is not None:
            return self.effect.kelvins
        return self.size.kelvins or 0.0


def judge(
    sizes: Sequence[Size],
    tolerance: float,
    smallest: float,
    effects: Effects | None = None,
    uncertainty: Mapping[str, float] | None = None,
) -> list[Judged]:
    """Shares, effects and verdicts of all terms of a case; ``uncertainty`` is the relative ± of each effect."""
    largest = max(s.size if s.nets_to is None else s.nets_to for s in sizes)
    judged = []
    for s in sizes:
        effect = None if effects is None else effects.get(s.term)
        if effect is None or isinstance(effect, str) or s.leading:
            judged.append(_one(s, largest, tolerance, smallest))
        else:
            doubt = 0.0 if uncertainty is None else uncertainty.get(s.term, 0.0)
            judged.append(_by_effect(s, _share(s, largest), effect, tolerance, smallest, doubt))
    _take_back(judged, tolerance, smallest)
    return judged


def _share(s: Size, largest: float) -> float:
    return s.asked if s.asked is not None else s.size / largest if largest > 0 else 0.0


def band(doubt: float, uncertainty: float) -> tuple[float, float]:
    """Between which multiples of the tolerance an effect is close to it."""
    wide = max(doubt, _SURE * uncertainty)
    if uncertainty:  # then the ± decide what is close, not the fixed band
        return 1.0 / (1.0 + wide), 1.0 + wide
    return min(CLOSE_BELOW, 1.0 / (1.0 + wide)), max(CLOSE_ABOVE, 1.0 + wide)


def _by_effect(
    s: Size, share: float, effect: Priced | Scaled, tolerance: float, smallest: float, uncertainty: float
) -> Judged:
    """The verdict of a term whose effect is known."""
    ratio, kelvins, words = effect.ratio, effect.kelvins, effect.words
    if not words:  # the case does not have it
        return Judged(s, share, LEAVE_OUT, "", effect=effect)
    silent = words == SILENT
    why = words if silent else words + _apart(share, ratio, s)
    if kelvins is not None and kelvins < smallest and (ratio is None or ratio >= CLOSE_BELOW * tolerance):
        why = why if silent else f"{why}; less than {num(smallest)} K that matters"
        return Judged(s, share, LEAVE_OUT, why, True, effect)
    if ratio is None:
        return Judged(s, share, KEEP, why if silent else f"{why}; {num(smallest)} K matter", effect=effect)
    low, high = band(effect.doubt, uncertainty)
    place = ratio / tolerance
    if low <= place <= high:
        why = why if silent else f"{why}; close to the tolerance {percent(tolerance)}"
        return Judged(s, share, BORDERLINE, why, effect=effect)
    return Judged(s, share, LEAVE_OUT if place < low else KEEP, why, effect=effect)


def _apart(share: float, ratio: float | None, s: Size) -> str:
    """Says so where share and effect differ by more than a factor of three."""
    if not share or not ratio or s.no_share:
        return f"; share {percent(share)}" if share and not s.no_share else ""
    factor = max(share / ratio, ratio / share)
    said = f"; share {percent(share)}"
    return f"{said}, {num(factor)} times {'more' if share > ratio else 'less'}" if factor > APART else said


def _one(s: Size, largest: float, tolerance: float, smallest: float) -> Judged:
    share = _share(s, largest)
    if s.settled is not None:
        return Judged(s, share, s.settled, "")
    if s.leading:
        return Judged(s, share, KEEP, "never left out: the coefficient rests on it")
    if share == 0:
        return Judged(s, share, LEAVE_OUT, "")
    low, high = s.thresholds or (tolerance / 3.0, tolerance * 3.0)
    if s.kelvins is not None and s.kelvins < smallest and share >= low:
        why = f"moves the answer by {num(s.kelvins)} K at most, less than {num(smallest)} K that matters"
        return Judged(s, share, LEAVE_OUT, why, by_kelvins=True)
    against = f"tolerance {percent(tolerance)}"
    if s.thresholds:
        against = f"limits {num(low)} and {num(high)}"
    if share < low and s.uncancelled is not None and s.uncancelled > tolerance:
        why = f"share {percent(share)} rests on a cancellation that is not sure; apart {percent(s.uncancelled)}"
        return Judged(s, share, BORDERLINE, why)
    if share < low:
        return Judged(s, share, LEAVE_OUT, f"share {percent(share)}, below a third of {against}" if not s.thresholds
                      else f"below {num(low)}")  # fmt: skip
    if share > high:
        return Judged(s, share, KEEP, f"share {percent(share)}, above three times {against}" if not s.thresholds
                      else f"above {num(high)}")  # fmt: skip
    return Judged(s, share, BORDERLINE, f"share {percent(share)}, between {percent(low)} and {percent(high)}")


def left_out(judged: Sequence[Judged]) -> list[Judged]:
    """The terms left out, a pair counted once."""
    found: list[Judged] = []
    pair_counted = False
    for j in judged:
        if j.verdict == LEAVE_OUT and (j.share > 0 or j.weight > 0):
            if j.size.pair and pair_counted:
                continue
            pair_counted = pair_counted or j.size.pair
            found.append(j)
    return found


def _take_back(judged: list[Judged], tolerance: float, smallest: float) -> None:
    """Bring the largest back as borderline while all that is left out exceeds the tolerance together."""
    while True:
        out = left_out(judged)
        by_share = [j for j in out if not j.by_kelvins]
        by_kelvins = [j for j in out if j.by_kelvins]
        if sum(j.weight for j in by_share) > tolerance:
            back = max(by_share, key=lambda j: j.weight)
            together = f"{percent(sum(j.weight for j in by_share))} together, above {percent(tolerance)}"
        elif sum(j.kelvins for j in by_kelvins) > smallest:
            back = max(by_kelvins, key=lambda j: j.kelvins)
            together = f"{num(sum(j.kelvins for j in by_kelvins))} K together"
        else:
            return
        for j in judged:
            if j is back or (back.size.pair and j.size.pair and j.verdict == LEAVE_OUT):
                j.verdict, j.by_kelvins = BORDERLINE, False
                j.why = f"small alone, but all left out come to {together}"
                if j.effect is not None and j.effect.words:
                    j.why += f"; {j.effect.words}"
