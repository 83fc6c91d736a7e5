"""From sizes to verdicts, by shares: leave out below a third of the tolerance, keep above three times.

The effects of everything left out are taken together; where they exceed the tolerance, the largest
comes back as borderline.
"""

from collections.abc import Sequence
from dataclasses import dataclass

from cellfuncs.terms.size import Size, num, percent

KEEP, BORDERLINE, LEAVE_OUT = "keep", "borderline", "leave out"


@dataclass
class Judged:
    """A size with its share, its verdict and why."""

    size: Size
    share: float
    verdict: str
    why: str
    by_kelvins: bool = False


def judge(sizes: Sequence[Size], tolerance: float, smallest: float) -> list[Judged]:
    """Shares and verdicts of all terms of a case."""
    largest = max(s.size if s.nets_to is None else s.nets_to for s in sizes)
    judged = [_one(s, largest, tolerance, smallest) for s in sizes]
    _take_back(judged, tolerance, smallest)
    return judged


def _one(s: Size, largest: float, tolerance: float, smallest: float) -> Judged:
    share = s.asked if s.asked is not None else s.size / largest if largest > 0 else 0.0
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
        why = (
            f"share {percent(share)} rests on a cancellation that a developing profile does not have; "
            f"apart {percent(s.uncancelled)}"
        )
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
        if j.verdict == LEAVE_OUT and j.share > 0:
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
        if sum(j.share for j in by_share) > tolerance:
            back = max(by_share, key=lambda j: j.share)
            together = f"{percent(sum(j.share for j in by_share))} together, above {percent(tolerance)}"
        elif sum(j.size.kelvins or 0.0 for j in by_kelvins) > smallest:
            back = max(by_kelvins, key=lambda j: j.size.kelvins or 0.0)
            together = f"{num(sum(j.size.kelvins or 0.0 for j in by_kelvins))} K together"
        else:
            return
        for j in judged:
            if j is back or (back.size.pair and j.size.pair and j.verdict == LEAVE_OUT):
                j.verdict, j.by_kelvins = BORDERLINE, False
                j.why = f"small alone, but all left out come to {together}"
