"""Sizes of the energy terms in free convection, after the layer that buoyancy makes; the ambient is isothermal.

δT = L·Ra^−1/4 for Pr ≥ 1, L·(Ra·Pr)^−1/4 below; U = (α/L)√Ra or √(gβΔTL): so conduction across and advection
are equal. In a turbulent layer conduction across is set equal to advection. Viscous heating is gβL/cp of
advection, pressure work βT·gL/(cpΔT) (Gebhart 1962). The upright extent stands for L.
"""

from cellfuncs.answers import Solution
from cellfuncs.answers.free import FreeAnswers
from cellfuncs.methods import radiation as radiative
from cellfuncs.terms.layer import radiation
from cellfuncs.terms.size import STEADY, Size, absent, num, percent

_CRITICAL = 1708.0  # Ra of a layer heated from below


def sizes(solution: Solution) -> list[Size]:
    """The terms of a surface in a still fluid, in the order of the table."""
    a: FreeAnswers = solution.answers
    p, difference = a.properties, solution.driving
    advection = a.capacity_flux * difference / a.length
    says = f"h {num(a.coefficient)} W/(m2 K) ({a.method}), Ra {num(a.rayleigh)}, difference {num(difference)} K"
    if a.outside:
        says += f"; beyond range: {a.outside}"
    peclet = a.capacity_flux * a.length / p.conductivity
    along = p.conductivity * difference / a.length**2
    return [
        _storage(solution, a, advection),
        Size("advection", 1.0, advection, f"buoyancy makes about {num(a.velocity)} m/s", leading=True),
        Size("conduction across", 1.0 / peclet, advection, says, leading=True),
        Size("conduction along", 1.0 / peclet, along, f"layer {num(a.length / a.nusselt * 1000)} mm thick"),
        absent("wall conduction", "conduction along the wall itself is not judged here"),
        *_gebhart(solution, a, advection),
        _source(solution, a),
        radiation(solution, a, advection),
    ]


def enclosure_sizes(solution: Solution) -> list[Size]:
    """The terms of a layer between two walls."""
    a: FreeAnswers = solution.answers
    p, difference = a.properties, solution.driving
    still = a.nusselt <= 1.0 + 1e-9
    across = a.coefficient * difference / a.length
    peclet = a.capacity_flux * a.length / p.conductivity
    says = f"h {num(a.coefficient)} W/(m2 K) ({a.method}), Ra {num(a.rayleigh)}, Nu {num(a.nusselt)}"
    if still:
        stirring = absent("advection", f"the layer is still: Ra {num(a.rayleigh)}, heat crosses by conduction alone")
    else:
        stirring = Size("advection", 1.0, across, "the layer turns over", leading=True)
    extent = solution.case.get("length", a.length)
    along = p.conductivity * difference / extent**2
    return [
        _storage(solution, a, across),
        stirring,
        Size("conduction across", 1.0 / peclet, across, says, leading=True),
        Size("conduction along", 1.0 / peclet, along if extent > a.length else 0.0, "along the walls"),
        absent("wall conduction", "the walls' temperatures are prescribed"),
        *_gebhart(solution, a, 0.0 if still else across),
        _source(solution, a),
        _between_walls(solution, a, across),
    ]


def _between_walls(solution: Solution, a: FreeAnswers, across: float) -> Size:
    """Radiation across an enclosure, beside what the fluid carries; liquids are opaque."""
    case = solution.case
    known = case.substance is not None and a.property_temperature is not None
    if known and case.substance.phase(a.property_temperature, case.pressure) == "liquid":
        return absent("wall radiation", "the liquid between the walls is opaque")
    if not case.has("emissivity") or a.stream is None:
        return absent(
            "wall radiation", "not stated; add emissivity, second emissivity and the walls' temperatures to judge it"
        )
    one = case.get("emissivity")
    other = case.get("second_emissivity", one)
    if not one or not other:
        return absent("wall radiation", "emissivity 0: none")
    h = radiative.between_walls(a.stream + a.difference, a.stream, one, other)
    share = h / a.coefficient
    says = f"the walls exchange {num(h * a.difference)} W/m2, {percent(share)} of what the fluid carries"
    return Size("wall radiation", share, share * across, says, kelvins=None)


def _gebhart(solution: Solution, a: FreeAnswers, advection: float) -> tuple[Size, Size]:
    p = a.properties
    heating = a.gravity * p.expansion * a.length / p.specific_heat
    temperature = a.property_temperature or 0.0
    work = p.expansion * temperature * a.gravity * a.length / (p.specific_heat * solution.driving)
    return (
        Size("viscous heating", heating, heating * advection, f"gβL/cp = {num(heating)} (Gebhart 1962)"),
        Size("pressure work", work, work * advection, f"βT·gL/(cpΔT) = {num(work)}, hydrostatic"),
    )


def _storage(solution: Solution, a: FreeAnswers, advection: float) -> Size:
    time = solution.case.get("time")
    if time is None:
        return absent("storage", STEADY)
    p = a.properties
    size = p.density * p.specific_heat * solution.driving / time
    return Size(
        "storage", a.length / (a.velocity * time), size, f"the fluid rises past in {num(a.length / a.velocity)} s"
    )


def _source(solution: Solution, a: FreeAnswers) -> Size:
    q = solution.case.get("volumetric_source")
    if q is None:
        return absent("volumetric source", "no source is stated; add one for absorbed or reaction heat")
    share = abs(q) * a.length / (a.capacity_flux * solution.driving)
    return Size("volumetric source", share, abs(q), f"{num(q)} W/m3 in the fluid")
