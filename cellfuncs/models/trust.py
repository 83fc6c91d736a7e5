"""When a model may be believed: its own error is at most a hundredth of the effect, or too small to matter."""

import math

from cellfuncs.errors import NoModel

OF_THE_EFFECT = 0.01
OF_THE_SCALE = 1e-6


def trusted(effect: float, error: float, scale: float, what: str) -> float:
    """The effect, or NoModel where the model's own error is above a hundredth of it and above 1e-6 of the scale.

    ``effect``, ``error`` and ``scale`` have one unit; ``what`` names the model in the refusal.
    """
    if not (math.isfinite(effect) and math.isfinite(error)):
        raise NoModel(f"{what}: the equations cannot be solved for this case")
    if error > max(OF_THE_EFFECT * abs(effect), OF_THE_SCALE * abs(scale)):
        raise NoModel(
            f"{what}: its own error, {error:.2g}, is more than a hundredth of the effect, {abs(effect):.2g}; "
            "no number is better than this one"
        )
    return effect


def finite(**named: float) -> None:
    """Refuse what is no finite number, by its words (underscores read as spaces)."""
    for name, value in named.items():
        if not math.isfinite(value):
            raise NoModel(f"{name.replace('_', ' ')} is not a finite number")
