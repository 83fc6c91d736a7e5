"""Heat exchangers: effectiveness by number of transfer units, mean temperature difference and its correction.

NTU = UA/C_min, C = C_min/C_max, effectiveness = heat over C_min times the difference of the inlets. For F:
P = (t2 − t1)/(T1 − t1), R = (T1 − T2)/(t2 − t1), with t the tube side or either stream of a cross-flow.
One U, no loss, no phase change but for C = 0, both streams evenly spread.
"""

from collections.abc import Callable
from typing import Any

from cellfuncs.errors import OutOfRange
from cellfuncs.methods.algebra import expm1, holds, larger, log, log1p, smaller, sqrt, tanh, where
from cellfuncs.methods.base import Range, method

_CAPACITY = (Range("Cmin/Cmax", 0.0, 1.0),)
_KAYS = "kays-london-1984"
_BOWMAN = "bowman-1940"
_MOST_UNITS = 1e3
_STEP, _STEPS = 1.1, 25  # up to eleven times the surface of counter-flow
_ROUNDS = 40
_EQUAL = 1e-9  # how close to 1 a quotient counts as 1


def _exact(name: str, source: str, ranges: tuple[Range, ...] = _CAPACITY, scatter: float = 0.0, **more: Any) -> Any:
    gives = more.pop("gives", "effectiveness")
    return method(name, gives=gives, ranges=ranges, scatter=scatter, property_temperature="none", source=source, **more)


def _part(x: Any) -> Any:
    """(1 − e^−x)/x, 1 at zero."""
    safe = larger(x, 1e-12)
    return -expm1(-safe) / safe


# -- effectiveness ---------------------------------------------------------------------------------------------------


@_exact("evaporator or condenser", _KAYS, ranges=())
def one_temperature(ntu: Any) -> Any:
    """Effectiveness where one stream keeps its temperature (C = 0), any arrangement."""
    return -expm1(-ntu)


@_exact("counter-flow", _KAYS)
def counter_flow(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of counter-flow."""
    gained = ntu * _part(ntu * larger(1.0 - capacity_ratio, 0.0))
    return gained / (1.0 + capacity_ratio * gained)


@_exact("parallel flow", _KAYS)
def parallel_flow(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of parallel flow."""
    return -expm1(-ntu * (1.0 + capacity_ratio)) / (1.0 + capacity_ratio)


@_exact("one shell pass", _BOWMAN)
def one_shell(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of one shell pass, mixed, with two tube passes; close for four, six and more."""
    spread = sqrt(1.0 + capacity_ratio**2)
    return 2.0 / (1.0 + capacity_ratio + spread / tanh(0.5 * ntu * spread))


@_exact("shell passes in series", _BOWMAN)
def shells(ntu: Any, capacity_ratio: Any, passes: Any) -> Any:
    """Effectiveness of n shell passes in counter-flow series, each with an even number of tube passes; NTU of all."""
    each = one_shell(ntu / passes, capacity_ratio)
    # a^n − 1 over a^n − C, a = (1 − e·C)/(1 − e); written with l = ln a so that C = 1 (a = 1) is no special case
    gained = each / larger(1.0 - each, 1e-300)
    apart = larger(1.0 - capacity_ratio, 0.0)
    l = passes * log1p(gained * apart)  # noqa: E741
    grown = where(l > 1e-12, expm1(smaller(l, 600.0)) / larger(apart, 1e-300), passes * gained)
    return grown / (1.0 + grown)


@_exact("cross-flow, both unmixed", "mason-1955")
def cross_flow(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of cross-flow with both streams unmixed, the exact series."""
    from scipy.special import gammainc

    # Σ P(n + 1, NTU)·P(n + 1, C·NTU)/(C·NTU), P the incomplete gamma function; terms end soon after n = C·NTU
    lean = larger(capacity_ratio, 1e-12) * ntu
    most = float(getattr(lean, "max", lambda: lean)())
    if most > _MOST_UNITS:
        raise OutOfRange(f"the series of cross-flow is summed for C·NTU up to {_MOST_UNITS:g}, here {most:.3g}")
    terms = range(1, int(most + 12.0 * most**0.5) + 30)
    if isinstance(lean, (float, int)):
        return float((gammainc(terms, ntu) * gammainc(terms, lean)).sum() / lean)
    return sum(gammainc(n, ntu) * gammainc(n, lean) for n in terms) / lean


@_exact("cross-flow, both unmixed, short", "rohsenow-1998-exchangers", scatter=0.04)
def cross_flow_short(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of cross-flow with both streams unmixed, the usual closed form; within 4 % of the series."""
    capacity = larger(capacity_ratio, 1e-12)
    return -expm1(ntu**0.22 * expm1(-capacity * ntu**0.78) / capacity)


@_exact("cross-flow, larger mixed", _KAYS)
def cross_flow_larger_mixed(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of cross-flow with the stream of the larger capacity mixed and the other unmixed."""
    own = -expm1(-ntu)
    return own * _part(capacity_ratio * own)


@_exact("cross-flow, smaller mixed", _KAYS)
def cross_flow_smaller_mixed(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of cross-flow with the stream of the smaller capacity mixed and the other unmixed."""
    return -expm1(-ntu * _part(capacity_ratio * ntu))


@_exact("cross-flow, both mixed", _KAYS)
def cross_flow_mixed(ntu: Any, capacity_ratio: Any) -> Any:
    """Effectiveness of cross-flow with both streams mixed."""
    return 1.0 / (1.0 / -expm1(-ntu) + 1.0 / (ntu * _part(capacity_ratio * ntu)) - 1.0 / ntu)


# -- mean temperature difference -------------------------------------------------------------------------------------


@_exact("mean logarithmic difference", _BOWMAN, ranges=(), gives="factor")
def mean_difference(first_difference: Any, second_difference: Any) -> Any:
    """Mean logarithmic temperature difference [K] of the differences at the two ends [K]."""
    low = where(first_difference < second_difference, first_difference, second_difference)
    high = first_difference + second_difference - low
    x = high / low - 1.0
    # x/ln(1 + x); close to 1 the logarithm loses digits, its series does not
    plain = larger(x, 1e-4) / log(1.0 + larger(x, 1e-4))
    return low * where(x > 1e-4, plain, 1.0 + x * (0.5 - x * (1.0 / 12.0 - x / 24.0)))


def _units_counter(part: Any, quotient: Any) -> Any:
    """UA over the stream's capacity that counter-flow needs for P and R: ln((1 − PR)/(1 − P))/(1 − R)."""
    _within(part, quotient)
    gained, apart = part / (1.0 - part), 1.0 - quotient
    equal = abs(apart) < _EQUAL
    return where(equal, gained, log1p(gained * apart) / where(equal, 1.0, apart))


def _within(part: Any, quotient: Any) -> None:
    if not holds((part < 1.0) & (part * quotient < 1.0)):
        raise OutOfRange("P and P·R must be below 1: no stream can go beyond the other's inlet temperature")


@_exact("correction factor, shells", _BOWMAN, ranges=(), gives="factor")
def correction_shells(part: Any, quotient: Any, passes: Any = 1.0) -> Any:
    """F of n shell passes in series with even numbers of tube passes, from P and R; refused where it does not exist."""
    _within(part, quotient)
    apart = 1.0 - quotient
    equal = abs(apart) < _EQUAL
    # a = ((1 − PR)/(1 − P))^1/n; P of one shell is (a − 1)/(a − R)
    grown = expm1(log1p(part / (1.0 - part) * apart) / passes)
    one = where(equal, part / (passes - (passes - 1.0) * part), grown / where(equal, 1.0, grown + apart))
    spread = sqrt(quotient**2 + 1.0)
    left = 2.0 - one * (quotient + 1.0 + spread)
    if not holds(left > 0.0):
        raise OutOfRange(
            "no surface reaches this P and R with so few shell passes (the temperatures cross too far): "
            "take more shell passes or counter-flow"
        )
    needed = log((2.0 - one * (quotient + 1.0 - spread)) / left) / spread
    return _units_counter(one, quotient) / needed


def units_for(effectiveness: Callable[[Any, Any], Any], wanted: Any, capacity_ratio: Any) -> Any:
    """NTU with which an arrangement reaches an effectiveness; ``effectiveness`` is that of NTU and C.

    Some arrangements lose effectiveness with much surface: the smaller NTU is meant. Raises OutOfRange where none
    reaches it with eleven times the surface of counter-flow.
    """
    low = high = _units_counter(wanted, capacity_ratio) * (1.0 - 1e-12)
    missing = lacking = effectiveness(high, capacity_ratio) - wanted
    for _ in range(_STEPS):  # the first step in which the wanted effectiveness is reached
        short = missing < 0.0
        if holds(missing >= 0.0):
            break
        low, lacking, high = where(short, high, low), where(short, missing, lacking), where(short, _STEP * high, high)
        missing = effectiveness(high, capacity_ratio) - wanted
    if not holds(missing >= 0.0):
        raise OutOfRange("no surface reaches this P and R in such an arrangement with F above 0.1; take counter-flow")
    last, ntu = missing < missing, high
    for _ in range(_ROUNDS):  # false position; an end that stays twice is given half its weight (Illinois)
        apart = missing - lacking
        ntu = high - missing * (high - low) / where(apart > 0.0, apart, 1.0)
        found = effectiveness(ntu, capacity_ratio) - wanted
        short = found < 0.0
        low, high = where(short, ntu, low), where(short, high, ntu)
        stays = where(short == last, 0.5, 1.0)
        lacking, missing, last = where(short, found, stays * lacking), where(short, stays * missing, found), short
        if holds(abs(found) <= 1e-14):
            break
    return ntu


def correction(effectiveness: Callable[[Any, Any], Any], part: Any, quotient: Any) -> Any:
    """F of an arrangement from its effectiveness: units that counter-flow needs over the units that it needs.

    ``effectiveness`` is for the stream of the smaller capacity: P and R where R is up to 1, else P·R and 1/R.
    """
    wanted, capacity = where(quotient <= 1.0, part, part * quotient), where(quotient <= 1.0, quotient, 1.0 / quotient)
    return _units_counter(wanted, capacity) / units_for(effectiveness, wanted, capacity)


@_exact("correction factor, cross-flow", "mason-1955;bowman-1940", ranges=(), gives="factor")
def correction_cross_flow(part: Any, quotient: Any) -> Any:
    """F of cross-flow with both streams unmixed, from P and R; refused where it does not exist."""
    return correction(cross_flow, part, quotient)


@_exact("correction factor, cross-flow mixed", _BOWMAN, ranges=(), gives="factor")
def correction_cross_flow_mixed(part: Any, quotient: Any) -> Any:
    """F of cross-flow with both streams mixed, from P and R; refused where it does not exist."""
    return correction(cross_flow_mixed, part, quotient)


@_exact("correction factor, cross-flow one mixed", _BOWMAN, ranges=(), gives="factor")
def correction_cross_flow_one_mixed(part: Any, quotient: Any) -> Any:
    """F of cross-flow with one stream mixed, from P and R of the unmixed stream; refused where it does not exist."""

    def effectiveness(ntu: Any, capacity: Any) -> Any:
        larger_mixed, smaller_mixed = cross_flow_larger_mixed(ntu, capacity), cross_flow_smaller_mixed(ntu, capacity)
        return where(quotient <= 1.0, larger_mixed, smaller_mixed)

    return correction(effectiveness, part, quotient)
