"""Sizes of the energy terms in a sheared gap: conduction kΔT/h² against heating μU²/h²."""

from cellfuncs.answers import Solution
from cellfuncs.answers.gap import GapAnswers
from cellfuncs.terms.size import STEADY, Size, absent, num

_BETWEEN_WALLS = "none across a thin liquid film"


def sizes(solution: Solution) -> list[Size]:
    """The terms of a gap in the order of the table."""
    a: GapAnswers = solution.answers
    p = a.properties
    across = p.conductivity * a.difference / a.gap**2
    return [
        _storage(solution, a),
        _advection(solution, a, across),
        _across(a, across),
        _along(a),
        absent("wall conduction", "the walls' temperatures are prescribed in a gap"),
        _viscous(solution, a),
        absent("pressure work", "no pressure gradient along a plain sheared film"),
        _source(solution, a),
        absent("wall radiation", _BETWEEN_WALLS),
    ]


def _peclet(a: GapAnswers) -> float:
    return a.velocity * a.length / a.properties.diffusivity


def _across(a: GapAnswers, across: float) -> Size:
    if a.walls_apart:
        says = f"walls {num(a.walls_apart)} K apart over {num(1e6 * a.gap)} micron"
    else:
        says = f"equal walls: the difference μU²/k = {num(a.full_rise)} K is what heating makes"
    if a.outside:
        says += f"; beyond range: {a.outside}"
    return Size("conduction across", 1.0 / _peclet(a), across, says, leading=True)


def _advection(solution: Solution, a: GapAnswers, across: float) -> Size:
    ratio = _carried(a)
    kelvins = 3.0 * ratio * a.peak_rise if solution.case.answer == "peak temperature" and not a.walls_apart else None
    says = f"Uh²/(αL) = {num(ratio)}; the mean effect is about a fifth of that"
    return Size("advection", 1.0, ratio * across, says, kelvins=kelvins)


def _along(a: GapAnswers) -> Size:
    size = a.properties.conductivity * a.difference / a.length**2
    return Size("conduction along", 1.0 / _peclet(a), size, f"gap over length is {num(a.gap / a.length)}")


def _viscous(solution: Solution, a: GapAnswers) -> Size:
    p = a.properties
    size = p.viscosity * a.velocity**2 / a.gap**2
    one_scale = a.velocity**2 / (p.specific_heat * a.difference) / (p.density * a.velocity * a.length / p.viscosity)
    kelvins = a.peak_rise if solution.case.answer == "peak temperature" else None
    if kelvins is not None and solution.case.has("volumetric_source"):
        kelvins = max(kelvins, a.full_rise / 8.0)  # a source has made a peak already
    sheared = solution.case.sheared(a.property_temperature)
    melt = f"; {sheared.words()}" if sheared is not None else ""
    if not a.walls_apart:
        says = f"heats the film by μU²/(8k) = {num(a.peak_rise)} K above its walls{_feedback(solution)}{melt}"
        if kelvins is not None and kelvins >= solution.case.smallest:
            return Size("viscous heating", one_scale, size, says, exact=True, kelvins=kelvins, settled="keep")
    elif a.peak_rise > 0:
        says = f"Br {num(a.brinkman)}: a peak {num(a.peak_rise)} K above the hotter wall{_feedback(solution)}{melt}"
    else:
        says = f"Br {num(a.brinkman)}: no peak inside below Br 2, the flux at a wall changes by Br/2{melt}"
    return Size("viscous heating", one_scale, size, says, exact=True, kelvins=kelvins, asked=_asked(solution, a, size))


def _asked(solution: Solution, a: GapAnswers, size: float) -> float | None:
    """What heat made in the film does to the answer, where another large term would dilute its share.

    The flux through a wall changes by half of it; a peak by up to an eighth where another heat has made one already.
    """
    if not a.walls_apart:
        return None
    across = a.properties.conductivity * a.walls_apart / a.gap**2
    over = abs(size) / across
    if solution.case.answer == "local flux":
        return 0.5 * over
    q = solution.case.get("volumetric_source")
    if q is None:
        return None
    largest = max(1.0, _carried(a), abs(q) / across, a.brinkman)
    return max(over / largest, over / 8.0)


def _carried(a: GapAnswers) -> float:
    """Uh²/(αL), advection over conduction across."""
    return a.velocity * a.gap**2 / (a.properties.diffusivity * a.length)


def _feedback(solution: Solution) -> str:
    """A remark where the warming thins the liquid so that a constant viscosity overrates it (Nahme number)."""
    nahme = solution.nahme()
    if nahme is None or nahme < 0.3:
        return ""
    state = "strained" if nahme < 1.0 else "no longer true: the rise is less"
    return f"; Na {num(nahme)}, a constant viscosity is {state}"


def _storage(solution: Solution, a: GapAnswers) -> Size:
    time = solution.case.get("time")
    if time is None:
        return absent("storage", STEADY)
    p = a.properties
    settles = a.gap**2 / p.diffusivity
    return Size(
        "storage",
        a.length / (a.velocity * time),
        p.density * p.specific_heat * a.difference / time,
        f"heat crosses the film in {num(settles)} s, the change takes {num(time)} s",
    )


def _source(solution: Solution, a: GapAnswers) -> Size:
    q = solution.case.get("volumetric_source")
    if q is None:
        return absent("volumetric source", "no source is stated; add one for electric or reaction heat")
    p = a.properties
    one_scale = abs(q) * a.length / (p.density * p.specific_heat * a.velocity * a.difference)
    peak = abs(q) * a.gap**2 / (8.0 * p.conductivity)
    kelvins = peak if solution.case.answer == "peak temperature" else None
    says = f"{num(q)} W/m3 alone peaks at {num(peak)} K"
    return Size("volumetric source", one_scale, abs(q), says, kelvins=kelvins, asked=_asked(solution, a, q))
