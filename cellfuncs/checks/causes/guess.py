"""A hypothesis with the value that it reproduces, and the order of several."""

import math
from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True)
class Guess:
    """``code`` of the cause in words, the value [SI] that it gives, and how likely it is before looking at numbers."""

    code: str
    words: str
    value: float
    prior: float = 1.0


@dataclass(frozen=True)
class Ranked:
    """A hypothesis that fits, with its confidence from 0 to 1."""

    guess: Guess
    confidence: float


# what is left for causes that nobody thought of
_UNTHOUGHT = 0.08


def ranked(guesses: Iterable[Guess], stated: float, tolerance: float) -> list[Ranked]:
    """Those that reproduce the stated value within the tolerance [SI], the likeliest first.

    Of several with one code the best counts; confidence is shared among the codes.
    """
    best: dict[str, tuple[float, Guess]] = {}
    for guess in guesses:
        if not math.isfinite(guess.value) or abs(guess.value - stated) > tolerance:
            continue
        deviation = abs(guess.value - stated) / tolerance if tolerance else 0.0
        weight = guess.prior * math.exp(-2.0 * deviation**2)
        if guess.code not in best or weight > best[guess.code][0]:
            best[guess.code] = weight, guess
    total = sum(weight for weight, _ in best.values()) + _UNTHOUGHT
    order = sorted(best.values(), key=lambda pair: -pair[0])
    return [Ranked(guess, weight / total) for weight, guess in order]
