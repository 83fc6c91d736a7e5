"""Premises of safety and of one phase: boiling, freezing, flash point, choking, cavitation, condensing, critical point.

Each takes the facts of a case and gives a figure, or refuses with why it is not judged.
"""

import math

from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.terms.facts import Facts
from cellfuncs.terms.figure import Figure
from cellfuncs.terms.size import num
from cellfuncs.terms.thresholds import FAILS, HOLDS


def celsius(kelvin: float) -> str:
    return f"{kelvin - 273.15:.4g} degC"


def _vapour_pressure(f: Facts, temperature: float) -> float:
    """Vapour pressure of the liquid [Pa]: the stated row, or that of the substance."""
    if f.case.has("vapour_pressure"):
        return f.case.get("vapour_pressure")
    try:
        return f.substance.saturation("saturation_pressure", "liquid", temperature=temperature)
    except CellfuncsError as error:
        if f.case.substance is None:
            raise NoModel('no substance is named; state the row "vapour pressure" at the hottest point') from None
        raise NoModel(f'{error}; state the row "vapour pressure" at the hottest point') from None


def _needs_liquid(f: Facts, words: str) -> None:
    if f.case.substance is None:
        return
    if f.phase == "gas":
        raise NoModel(f"{f.substance.name} is a gas here: {words}")
    if f.phase == "solid":
        raise NoModel(f"{f.substance.name} is a solid; the fluid around it is judged in a case of its own")


def boiling(f: Facts) -> Figure:
    """Vapour pressure at the hottest point over the lowest pressure."""
    _needs_liquid(f, "it cannot boil")
    where, hot = f.hottest()
    lowest = f.lowest_pressure
    if lowest <= 0:
        reason = f"friction takes {num(f.drop)} Pa, more than the pressure of {num(f.case.pressure)} Pa"
        return Figure(1.0, reason, state=FAILS)
    limits = f.case.substance.limits() if f.case.substance is not None else None
    if limits is not None and limits.p_critical is not None and lowest > limits.p_critical:
        reason = f"the lowest pressure, {num(lowest)} Pa, is above the critical one: no boiling"
        return Figure(0.0, reason, state=HOLDS)
    if limits is not None and limits.t_critical is not None and hot >= limits.t_critical:
        return Figure(1.0, f"the {where} at {celsius(hot)} is above the critical temperature", state=FAILS)
    vapour = _vapour_pressure(f, hot)
    return Figure(
        vapour / lowest,
        f"hottest is the {where}, {celsius(hot)}: vapour pressure {num(vapour)} Pa, lowest pressure {num(lowest)} Pa"
        f"{f.pressure_remark}",
    )


def condensing(f: Facts) -> Figure:
    """Pressure over the saturation pressure at the coldest point of a gas."""
    if f.phase != "gas":
        raise NoModel(f"{f.substance.name} is {f.phase} here: nothing condenses")
    where, cold = f.coldest()
    limits = f.substance.limits()
    if limits.t_critical is not None and cold >= limits.t_critical:
        return Figure(0.0, f"coldest is the {where}, {celsius(cold)}, above the critical temperature", state=HOLDS)
    vapour = f.substance.saturation("saturation_pressure", "gas", temperature=cold)
    return Figure(
        f.case.pressure / vapour,
        f"coldest is the {where}, {celsius(cold)}: saturation at {num(vapour)} Pa, pressure {num(f.case.pressure)} Pa",
    )


def freezing(f: Facts) -> Figure:
    """Kelvins from the coldest point down to freezing."""
    _needs_liquid(f, "see condensing")
    where, cold = f.coldest()
    if f.case.has("freezing_point"):
        point, words = f.case.get("freezing_point"), "stated freezing point"
    else:
        if f.case.substance is None:
            raise NoModel('no substance is named; state the row "freezing point"')
        limits = f.substance.limits()
        point, words = limits.t_min, "freezing point or end of its properties"
        if limits.t_triple is not None:
            point, words = limits.t_triple, "triple point"
    return Figure(cold - point, f"coldest is the {where}, {celsius(cold)}; {words} {celsius(point)}")


def flash_point(f: Facts) -> Figure:
    """Kelvins from the hottest point up to the stated flash point."""
    point = f.stated("flash_point")
    where, hot = f.hottest()
    return Figure(
        point - hot,
        f"hottest is the {where}, {celsius(hot)}; stated flash point {celsius(point)}: keep air and ignition away, "
        "follow the local code",
    )


def choking(f: Facts) -> Figure:
    """fL/D of the duct over that which brings the stream to Mach 1, adiabatic flow of a perfect gas."""
    if f.family != "through" or f.drop == 0:
        raise NoModel("no passage: external and still flows do not choke")
    if f.phase == "liquid":
        raise NoModel(f"{f.substance.name} is liquid here: it does not choke unless it flashes, see cavitation")
    mach, ratio = f.mach, f.heat_ratio
    if mach >= 1.0:
        return Figure(1.0, f"Mach {num(mach)} at the mean state", state=FAILS)
    friction = f.drop / (0.5 * f.properties.density * f.velocity**2)
    most = choking_length(mach, ratio)
    return Figure(
        friction / most,
        f"Mach {num(mach)}, fL/D {num(friction)}; it chokes at {num(most)} (γ {num(ratio)}, adiabatic)",
    )


def choking_length(mach: float, heat_ratio: float) -> float:
    """fL/D (Darcy) from a Mach number to 1, adiabatic flow of a perfect gas with friction (Shapiro 1953)."""
    m2, above = mach * mach, heat_ratio + 1.0
    squared_ratio = above * m2 / (2.0 + (heat_ratio - 1.0) * m2)  # of the velocity to that at Mach 1
    return (1.0 - m2) / (heat_ratio * m2) + above / (2.0 * heat_ratio) * math.log(squared_ratio)


def cavitation(f: Facts) -> Figure:
    """2(p_lowest − p_v)/(ρU²) of a liquid."""
    _needs_liquid(f, "it cannot cavitate")
    if f.family in ("free", "body"):
        raise NoModel("no stream that draws the pressure down")
    if f.family == "gap":
        raise NoModel("the pressure in a plain sheared film is that of its surroundings; a bearing film needs its own")
    where, hot = f.hottest() if f.temperatures else ("property temperature", f.temperature)
    vapour = _vapour_pressure(f, hot)
    head = 0.5 * f.properties.density * f.velocity**2
    lowest = f.lowest_pressure
    return Figure(
        (lowest - vapour) / head,
        f"lowest mean pressure {num(lowest)} Pa, vapour pressure {num(vapour)} Pa at the {where}, dynamic head "
        f"{num(head)} Pa{f.pressure_remark}",
    )


def critical_point(f: Facts) -> Figure:
    """The larger of |T/Tc − 1| and |p/pc − 1|."""
    limits = f.substance.limits()
    if limits.t_critical is None or limits.p_critical is None:
        raise NoModel(f"no critical point of {f.substance.name} is at hand")
    temperature, pressure = f.temperature / limits.t_critical, f.case.pressure / limits.p_critical
    return Figure(
        max(abs(temperature - 1.0), abs(pressure - 1.0)),
        f"T/Tc {num(temperature)}, p/pc {num(pressure)}; close to it properties run away",
    )
