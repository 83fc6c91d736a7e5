"""The recovery rise of a case, or a safe bound of it where no published factor reaches."""

from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.layer import LayerAnswers
from cellfuncs.errors import OutOfRange
from cellfuncs.methods import recovery


def rise_or_bound(answers: DuctAnswers | LayerAnswers) -> tuple[float, str]:
    """ΔT_rec [K], and a remark that it is only a bound from above (empty where it is known)."""
    try:
        return answers.recovery_rise, ""
    except OutOfRange:
        p = answers.properties
        factor = _duct_bound(answers) if isinstance(answers, DuctAnswers) else _plate_bound(answers)
        rise = factor * answers.velocity**2 / (2.0 * p.specific_heat)
        return rise, "an upper bound: outside the table of recovery factors"


def _duct_bound(answers: DuctAnswers) -> float:
    """Three times the nearest value of the table, and at least the laminar one while Re is low."""
    re = min(max(answers.reynolds, 1e4), 1e6)
    pr = answers.properties.prandtl
    if answers.case.flow != "duct":
        return 2.0 * max(1.0, pr)  # laminar flow through a section: ΔT_rec = μU²/k, own bound
    bound = 3.0 * recovery.turbulent_tube(re, min(max(pr, 0.005), 500.0)) * max(1.0, pr / 500.0)
    return max(bound, 2.0 * pr) if answers.reynolds < 1e4 else bound


def _plate_bound(answers: LayerAnswers) -> float:
    """Recovery of a laminar layer bounds the turbulent one above Pr 1, unity below; 0.1 below Pr 0.01."""
    pr = answers.properties.prandtl
    if answers.laminar:
        return 0.1
    return recovery.laminar_plate(pr) if pr > 1.0 else 1.0
