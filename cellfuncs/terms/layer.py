"""Sizes of the energy terms in the layer on a plate, cylinder or sphere, or under a jet.

The thickness comes from the energy integral, δ = hL/(ρcpU), so that conduction across and advection
are both ρcpU·ΔT/L; molecular k over a turbulent layer never enters.
"""

from typing import Any

from cellfuncs.answers import Solution
from cellfuncs.answers.layer import LayerAnswers
from cellfuncs.methods import radiation as radiative
from cellfuncs.terms.recovery import rise_or_bound
from cellfuncs.terms.size import STEADY, Size, absent, num, percent
from cellfuncs.terms.thresholds import FAILS, HOLDS, STRAINED, threshold

_ROUGHLY = 1.1  # the formulas of recovery are good to 6 or 8 %
_VERDICTS = {HOLDS: "leave out", STRAINED: "borderline", FAILS: "keep"}  # of conduction along, by the thin layer


def sizes(solution: Solution) -> list[Size]:
    """The terms of an external flow in the order of the table."""
    a: LayerAnswers = solution.answers
    balance = a.capacity_flux * solution.driving / a.length
    return [
        _storage(solution, a, balance),
        *_exchange(solution, a, balance),
        _conduction_along(a),
        absent("wall conduction", "conduction along the wall itself is not judged here; a duct case does"),
        _viscous(solution, a, balance),
        absent("pressure work", "the heat of compression is in the recovery rise, judged with viscous heating"),
        _source(solution, a),
        radiation(solution, a, balance),
    ]


def _kelvins(solution: Solution, share: float) -> float | None:
    return share * solution.driving if solution.case.answer == "wall temperature" else None


def _peclet(a: LayerAnswers) -> float:
    return a.reynolds * a.properties.prandtl


def _exchange(solution: Solution, a: LayerAnswers, balance: float) -> tuple[Size, Size]:
    thickness = a.properties.conductivity / a.coefficient
    says = (
        f"h {num(a.coefficient)} W/(m2 K) ({a.method}), difference {num(solution.driving)} K, "
        f"k/h {num(1000 * thickness)} mm"
    )
    if a.outside:
        says += f"; beyond range: {a.outside}"
    carried = f"the layer carries away what the wall gives; Re {num(a.reynolds)}"
    return (
        Size("advection", 1.0, balance, carried, leading=True),
        Size("conduction across", 1.0 / _peclet(a), balance, says, leading=True),
    )


def _conduction_along(a: LayerAnswers) -> Size:
    re = a.reynolds
    limits = threshold("thin layer")
    state = limits.state(re)
    says = f"no share: it is the premise of a thin layer, Re from {limits.strained:g}; here Re {num(re)}: {state}"
    return Size("conduction along", 1.0 / _peclet(a), 0.0, says, asked=0.0, settled=_VERDICTS[state], no_share=True)


def _storage(solution: Solution, a: LayerAnswers, balance: float) -> Size:
    time = solution.case.get("time")
    if time is None:
        return absent("storage", STEADY)
    p = a.properties
    size = p.density * p.specific_heat * solution.driving / time
    return Size(
        "storage",
        a.length / (a.velocity * time),
        size,
        f"the stream passes in {num(a.length / a.velocity)} s, the change takes {num(time)} s",
        kelvins=_kelvins(solution, 3.0 * size / balance),
    )


def _viscous(solution: Solution, a: LayerAnswers, balance: float) -> Size:
    p = a.properties
    rise, remark = rise_or_bound(a)
    share = rise / solution.driving
    ec_re = a.velocity**2 / (p.specific_heat * solution.driving) / a.reynolds
    says = f"friction warms an unheated wall by {num(rise)} K (recovery), difference {num(solution.driving)} K"
    if remark:
        says += f"; {remark}"
    elif not a.laminar and p.prandtl > 1.0:
        says += "; Pr^1/3 is meant for gases, rough here"
    kelvins = _kelvins(solution, _ROUGHLY * share)
    return Size("viscous heating", ec_re, share * balance, says, asked=share, kelvins=kelvins)


def _source(solution: Solution, a: LayerAnswers) -> Size:
    q = solution.case.get("volumetric_source")
    if q is None:
        return absent("volumetric source", "no source is stated; add one for absorbed or reaction heat")
    share = abs(q) * a.length / (a.capacity_flux * solution.driving)
    says = f"{num(q)} W/m3 alone would warm the layer by {num(share * solution.driving)} K"
    return Size("volumetric source", share, abs(q), says, kelvins=_kelvins(solution, share))


def radiation(solution: Solution, a: Any, balance: float) -> Size:
    """Radiation of the wall to its surroundings, where both are stated."""
    case = solution.case
    if not (case.has("emissivity") and case.has("surroundings_temperature")) or a.wall is None:
        return absent(
            "wall radiation", "not stated; add emissivity and surroundings temperature to judge radiation from the wall"
        )
    around = case.get("surroundings_temperature")
    flux = radiative.to_surroundings(a.wall, around, case.get("emissivity")) * (a.wall - around)
    share = abs(flux) / (a.coefficient * solution.driving)
    says = f"the wall radiates {num(flux)} W/m2, {percent(share)} of what it gives to the stream"
    return Size(
        "wall radiation", abs(flux) / a.capacity_flux / solution.driving, share * balance, says, asked=share,
        kelvins=_kelvins(solution, 3.0 * share),
    )  # fmt: skip
