"""The loop between a temperature at which properties are taken and the temperatures that follow."""

from collections.abc import Callable

from cellfuncs.errors import NoModel, OutOfRange

_SETTLED = 1e-9  # K, relative to a temperature of 1 K
_MOST_ROUNDS = 60
_FAR = 3000.0  # degC


def settle(start: float, follow: Callable[[float], float], what: str) -> float:
    """The temperature T [K] with follow(T) = T, by secant steps inside what has been seen.

    Raises OutOfRange, with the temperature reached, where the properties end or the loop does not close.
    """
    old, old_gap = start, _gap(follow, start, what)
    if abs(old_gap) < _SETTLED * max(1.0, abs(start)):
        return start
    new = start + old_gap
    for _ in range(_MOST_ROUNDS):
        gap = _gap(follow, new, what)
        if abs(gap) < _SETTLED * max(1.0, abs(new)):
            return new
        slope = (gap - old_gap) / (new - old) if new != old else -1.0
        step = -gap / slope if slope < -0.05 else gap
        if abs(step) > 2.0 * abs(gap):
            step = 2.0 * gap if (step > 0) == (gap > 0) else gap
        old, old_gap, new = new, gap, new + step
    raise OutOfRange(f"the {what} does not settle (near {new - 273.15:.1f} degC); state a property temperature")


def _gap(follow: Callable[[float], float], temperature: float, what: str) -> float:
    return told(follow, temperature, what) - temperature


def told(follow: Callable[[float], float], temperature: float, what: str) -> float:
    """``follow(temperature)``; a refusal says at which temperature it came up."""
    try:
        return follow(temperature)
    except (OutOfRange, NoModel) as error:
        celsius = temperature - 273.15
        if not -273.15 < celsius < _FAR:
            raise OutOfRange(
                f"the {what} would come to {celsius:.2g} degC, far outside the range of the properties; "
                "the fluid boils or freezes on the way, or the flow is too small for this heat"
            ) from None
        raise type(error)(f"at the {what} of {celsius:.1f} degC: {error}", error.argument) from None
