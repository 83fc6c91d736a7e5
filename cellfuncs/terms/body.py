"""Sizes of the energy terms of a solid body: what it stores against what its surface exchanges; no advection."""

from typing import Any

from cellfuncs.answers import Solution
from cellfuncs.methods import radiation
from cellfuncs.terms.size import Size, absent, num, percent


def sizes(solution: Solution) -> list[Size]:
    """The terms of a body in the order of the table."""
    a: Any = solution.answers
    p, difference = a.properties, solution.driving
    exchange = a.coefficient * difference / a.length
    stored = p.density * p.specific_heat * difference / a.time
    lumped = "one temperature may be assumed" if a.biot < 0.1 else "the inside lags behind: Bi from 0.1"
    says = f"h {num(a.coefficient)} W/(m2 K), Bi {num(a.biot)}: {lumped}"
    return [
        Size(
            "storage", a.time_constant / a.time, stored, f"time constant {num(a.time_constant)} s, time {num(a.time)} s"
        ),
        absent("advection", "nothing flows through a solid body"),
        Size("conduction across", 1.0, exchange, says, leading=True),
        absent("conduction along", "the body is judged as one; see its Biot number"),
        absent("wall conduction", "the body is the wall"),
        absent("viscous heating", "nothing flows in a solid body"),
        absent("pressure work", "nothing flows in a solid body"),
        _source(solution, a, exchange),
        _radiation(solution, a, exchange),
    ]


def _source(solution: Solution, a: Any, exchange: float) -> Size:
    q = solution.case.get("volumetric_source")
    if q is None:
        return absent("volumetric source", "no source is stated; add one for electric or reaction heat")
    return Size("volumetric source", abs(q) / exchange, abs(q), f"{num(q)} W/m3, exchange {num(exchange)} W/m3")


def _radiation(solution: Solution, a: Any, exchange: float) -> Size:
    case = solution.case
    if not (case.has("emissivity") and case.has("surroundings_temperature") and case.has("initial_temperature")):
        return absent("wall radiation", "not stated; add emissivity and surroundings temperature to judge it")
    hot, cold = case.get("initial_temperature"), case.get("surroundings_temperature")
    flux = radiation.to_surroundings(hot, cold, case.get("emissivity")) * (hot - cold)
    share = abs(flux) / (a.coefficient * solution.driving)
    says = f"the body radiates {num(flux)} W/m2 at the start, {percent(share)} of what it gives to the fluid"
    return Size("wall radiation", share, share * exchange, says)
