"""What is known of one term before a verdict, and numbers as words."""

from dataclasses import dataclass


@dataclass(frozen=True)
class Size:
    """One term of the energy equation in a case.

    ``size`` [W/m3] enters the balance. ``asked`` is the share that the answer calls for, where that is
    not the size over the largest one; ``exact`` says that it is the effect itself and not an estimate.
    ``kelvins`` is what leaving the term out may move the answer by, where the answer is a temperature.
    ``leading`` terms are never left out. ``thresholds`` replace the usual ones (leave out below, keep
    above). ``settled`` is a verdict that needs no share. ``nets_to`` is the size with which the term
    enters the largest, where it cancels against its partner. ``uncancelled`` is the share without a
    cancellation that the share rests on, where that may not have developed.
    """

    term: str
    one_scale: float
    size: float
    says: str
    asked: float | None = None
    exact: bool = False
    kelvins: float | None = None
    leading: bool = False
    thresholds: tuple[float, float] | None = None
    settled: str | None = None
    nets_to: float | None = None
    pair: bool = False
    no_share: bool = False
    uncancelled: float | None = None


def num(value: float) -> str:
    """Three significant digits, without a power of ten where it reads better so."""
    if 1e-3 <= abs(value) < 1e6:
        return f"{float(f'{value:.3g}'):g}"
    return f"{value:.3g}"


def percent(share: float) -> str:
    """A share in per cent, or as a power of ten where it is tiny."""
    if share == 0:
        return "0 %"
    if abs(share) < 1e-4:
        return f"{share:.1e}"
    return f"{100 * share:.3g} %"


STEADY = "steady: no time scale is stated; add one to judge start-up or swings"


def absent(term: str, why: str) -> Size:
    """A term that the case as stated does not have."""
    return Size(term, 0.0, 0.0, why, asked=0.0)
