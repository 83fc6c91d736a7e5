"""Sizes of the energy terms of a solid body: what it stores against what its surface exchanges; no advection."""

import math
from typing import Any

from cellfuncs.answers import Solution
from cellfuncs.methods import radiation
from cellfuncs.terms.size import Size, absent, num, percent


def sizes(solution: Solution) -> list[Size]:
    """The terms of a body in the order of the table."""
    a: Any = solution.answers
    p, difference = a.properties, solution.driving
    faded = math.exp(-min(a.time / a.time_constant, 700.0))
    made = solution.case.get("volumetric_source", 0.0) * a.length / (a.coefficient * a.difference)
    whole = solution.case.answer == "wall temperature"  # then shares are those of the lumped solution
    exchange = a.coefficient * difference / a.length
    stored = p.density * p.specific_heat * difference / a.time
    lumped = "one temperature may be assumed" if a.biot < 0.1 else "the inside lags behind: Bi from 0.1"
    says = f"h {num(a.coefficient)} W/(m2 K), Bi {num(a.biot)}: {lumped}"
    radiated = _radiation(solution, a, exchange, 1.0 - faded if whole else None)
    return [
        Size(
            "storage",
            a.time_constant / a.time,
            stored,
            f"time constant {num(a.time_constant)} s, time {num(a.time)} s",
            asked=(abs(1.0 - made) + radiated.size / exchange) * faded if whole else None,
        ),
        absent("advection", "nothing flows through a solid body"),
        Size("conduction across", 1.0, exchange, says, leading=True),
        absent("conduction along", "the body is judged as one; see its Biot number"),
        absent("wall conduction", "the body is the wall"),
        absent("viscous heating", "nothing flows in a solid body"),
        absent("pressure work", "nothing flows in a solid body"),
        _source(solution, a, exchange, 1.0 - faded if whole else None),
        radiated,
    ]


def _source(solution: Solution, a: Any, exchange: float, done: float | None) -> Size:
    q = solution.case.get("volumetric_source")
    if q is None:
        return absent("volumetric source", "no source is stated; add one for electric or reaction heat")
    says = f"{num(q)} W/m3, exchange {num(exchange)} W/m3"
    asked = None if done is None else abs(q) / exchange * done
    return Size("volumetric source", abs(q) / exchange, abs(q), says, asked=asked)


def _radiation(solution: Solution, a: Any, exchange: float, done: float | None) -> Size:
    case = solution.case
    if not (case.has("emissivity") and case.has("surroundings_temperature") and case.has("initial_temperature")):
        return absent("wall radiation", "not stated; add emissivity and surroundings temperature to judge it")
    start, around = case.get("initial_temperature"), case.get("surroundings_temperature")
    emissivity = case.get("emissivity")
    # the largest of its flux at the start, where the body goes to, and where a source would take it
    made = case.get("volumetric_source", 0.0) * a.length / a.coefficient
    ends = [start] if a.stream is None else [start, a.stream, a.stream + made]
    fluxes = [radiation.to_surroundings(t, around, emissivity) * (t - around) for t in ends if t > 0]
    flux = max(fluxes, key=abs)
    share = abs(flux) / (a.coefficient * solution.driving)
    when = "at the start" if flux == fluxes[0] else "at the end"
    says = f"the body radiates {num(flux)} W/m2 {when}, {percent(share)} of what it gives to the fluid at the start"
    return Size("wall radiation", share, share * exchange, says, asked=None if done is None else share * done)
