"""Slips of typing: neighbouring digits changed places, the decimal point, the sign, a digit twice or left out."""

from collections.abc import Iterator
from decimal import Decimal
from itertools import pairwise

from cellfuncs.checks.causes.guess import Guess

_MOST_DIGITS = 12


def shown(value: float) -> str:
    """A number as it was typed, without exponent."""
    return format(Decimal(repr(float(value))), "f")


def slips(value: float) -> Iterator[tuple[float, str, float]]:
    """The numbers that may have been meant where ``value`` was typed: number, words, prior."""
    text = shown(abs(value)).rstrip("0").rstrip(".") if "." in shown(abs(value)) else shown(abs(value))
    digits = [k for k, letter in enumerate(text) if letter.isdigit()]
    sign = -1.0 if value < 0 else 1.0
    if len(digits) > _MOST_DIGITS or not value:
        return
    for power in (1, -1, 2, -2):
        yield value * 10.0**power, "the decimal point is misplaced", 1.2
    yield -value, "the sign is wrong", 1.0
    for a, b in pairwise(digits):
        if text[a] != text[b]:
            changed = list(text)
            changed[a], changed[b] = text[b], text[a]
            yield sign * float("".join(changed)), f"digits {text[a]} and {text[b]} changed places", 1.0
    whole = text.split(".")[0]
    for k in range(len(whole)):
        if len(whole) > 1:
            yield sign * float(text[:k] + text[k + 1 :]), f"digit {text[k]} is one too many", 0.4
        yield sign * float(text[: k + 1] + text[k] + text[k + 1 :]), f"digit {text[k]} is missing once", 0.3


def guesses(stated: float, si: float, expected: float, tolerance: float) -> Iterator[Guess]:
    """Slips that turn what comes out into what is stated; ``tolerance`` is that of the comparison [SI].

    The stated number and its SI value may differ by a factor and an offset; slips are of the number as it stands.
    """
    if not stated or si == 0:
        return
    factor = si / stated
    for meant, words, prior in slips(stated):
        if abs(meant * factor - expected) <= tolerance:
            # the slip explains all but what the right number would have missed
            words = f"{words}: {stated:.6g} for {meant:.6g}"
            yield Guess("typing-slip", words, si + (meant * factor - expected), prior)
