"""Sizes of the energy terms in a duct: means over the cross-section, so that the balance closes.

With a = heated perimeter over area (4/D, or 2/D with one of two plates insulated) and the balance
a·h·ΔT_m = ρcpU·ΔT_b/L, conduction across and advection are equal at any Re and Pr.
"""

import math

from cellfuncs.answers import Solution
from cellfuncs.answers.duct import DuctAnswers
from cellfuncs.answers.effects import wall as walls
from cellfuncs.methods import radiation as radiative
from cellfuncs.methods.duct import LAMINAR_UP_TO
from cellfuncs.terms.recovery import rise_or_bound
from cellfuncs.terms.size import STEADY, Size, absent, num, percent

_MEANS = (0.01, 0.03)  # wall conduction number: leave out below, keep above, for mean answers
_LOCAL = (0.003, 0.009)  # ... for local answers (Maranzana et al. 2004)
_ROUGHLY = 1.25  # kelvins of a share may be so much more
_SOURCE_RISE = {"tube": 1.0 / 64.0, "plates": 3.0 / 560.0}  # of q‴D²/k, laminar, wall above bulk where insulated
_LOCAL_ANSWERS = ("wall temperature", "local flux")


def sizes(solution: Solution) -> list[Size]:
    """The terms of a duct in the order of the table."""
    a: DuctAnswers = solution.answers
    return [
        _storage(solution, a),
        *_exchange(solution, a),
        _conduction_along(solution, a),
        _wall_conduction(solution, a),
        *_friction_pair(solution, a),
        _source(solution, a),
        _radiation(solution, a),
    ]


def _radiation(solution: Solution, a: DuctAnswers) -> Size:
    """Radiation from the heated wall through a clear gas to what else it sees: q_r·a, a the heated part of 4/D."""
    case = solution.case
    if case.flow == "falling film":
        return absent("wall radiation", "the film between wall and surroundings is opaque")
    if not (case.has("emissivity") and case.has("surroundings_temperature")) or a.wall is None:
        return absent(
            "wall radiation",
            "none at one wall temperature; where the wall sees another (an open end, an insulated wall) add emissivity "
            "and surroundings temperature",
        )
    if case.substance is not None and case.substance.phase(a.property_temperature, case.pressure) == "liquid":
        return absent("wall radiation", "the liquid is opaque")
    around = case.get("surroundings_temperature")
    flux = radiative.to_surroundings(a.wall, around, case.get("emissivity")) * (a.wall - around)
    size = abs(flux) * a.exchange
    ratio = size / balance(solution, a)
    says = f"the wall radiates {num(flux)} W/m2 to what it sees at {num(around - 273.15)} degC, view factor 1 taken"
    return Size("wall radiation", ratio, size, says, kelvins=_kelvins(solution, a, 3.0 * ratio))


def _base(solution: Solution, a: DuctAnswers) -> float:
    """What the answer's change is taken over, where it is a temperature [K]."""
    if solution.case.answer == "outlet temperature" and a.flux is not None:
        return abs(a.bulk_rise)
    return solution.driving


def _kelvins(solution: Solution, a: DuctAnswers, share: float) -> float | None:
    if solution.case.answer in ("outlet temperature", "wall temperature"):
        return share * _base(solution, a)
    return None


def balance(solution: Solution, a: DuctAnswers) -> float:
    """The heat exchanged with the wall per volume [W/m3], which is what the stream carries away."""
    if a.flux is not None:
        return abs(a.flux) * a.exchange
    return a.capacity_flux * solution.driving * -math.expm1(-a.transfer_units) / a.length


def _exchange(solution: Solution, a: DuctAnswers) -> tuple[Size, Size]:
    p, n = a.properties, a.transfer_units
    peclet = a.capacity_flux * a.length / p.conductivity
    if a.flux is None:
        mean = solution.driving * -math.expm1(-n) / n
        across = a.exchange * a.coefficient * mean
        says = f"h {num(a.coefficient)} W/(m2 K) ({a.method}), NTU {num(n)}, mean difference {num(mean)} K"
    else:
        across = abs(a.flux) * a.exchange
        says = f"flux {num(abs(a.flux))} W/m2 given; h {num(a.coefficient)} W/(m2 K) ({a.method})"
        says += f", q/h {num(solution.driving)} K"
    if a.shape.section == "other" and a.reynolds < LAMINAR_UP_TO:
        says += "; tube value, by shape -35 to +50 %"
    if a.outside:
        says += f"; beyond range: {a.outside}"
    advection = balance(solution, a)
    carried = f"the stream takes up what the wall gives: {num(abs(a.bulk_rise))} K over {num(a.length)} m"
    return (
        Size("advection", 1.0, advection, carried, leading=True),
        Size("conduction across", 1.0 / peclet, across, says, leading=True),
    )


def _conduction_along(solution: Solution, a: DuctAnswers) -> Size:
    p = a.properties
    peclet_length = a.capacity_flux * a.length / p.conductivity
    peclet = a.reynolds * p.prandtl
    grows_over = min(a.length, a.length / a.transfer_units)
    size = p.conductivity * solution.driving / grows_over**2
    ratio = size / balance(solution, a)
    share = min(ratio, 1.0)  # over the balance itself: what else is large does not lessen it
    says = f"temperature changes over {num(grows_over)} m; Pe {num(peclet)}"
    if a.flux is not None:
        # the bulk runs ahead by (k/ρcpU)·dTb/dx, 4Nu/Pe² of q/h, whatever the length
        ahead = p.conductivity * abs(a.bulk_rise) / (a.capacity_flux * a.length)
        share = max(share, ahead / _base(solution, a))
    elif solution.case.answer in ("duty", "coefficient"):
        reach = a.shape.diameter / math.sqrt(8.0 * peclet)
        ends = 0.35 * reach / a.length
        if solution.case.answer == "coefficient":
            ends = 0.35 * reach / grows_over  # the mean difference lives near the inlet
        share = max(share, ends)
        says += f"; about {percent(ends)} of the {solution.case.answer} by the step at the inlet"
    steeper = _steeper(solution, a)
    if steeper > 1.0:
        share *= steeper
    kelvins = _kelvins(solution, a, 3.0 * max(ratio, share))
    return Size("conduction along", 1.0 / peclet_length, size, says, asked=share, kelvins=kelvins)


def _made(solution: Solution, a: DuctAnswers) -> float:
    """What friction and a source make in the stream, as temperatures over the driving difference."""
    p = a.properties
    beta_t = p.expansion * a.property_temperature if a.property_temperature is not None else 0.0
    friction = abs((1.0 - beta_t) * a.pressure_drop) / (p.density * p.specific_heat) + rise_or_bound(a)[0]
    source = abs(solution.case.get("volumetric_source", 0.0)) * a.length / a.capacity_flux
    return (friction + source) / solution.driving


def _steeper(solution: Solution, a: DuctAnswers) -> float:
    """By how much what is made in the stream makes larger temperature differences than the wall does, at least 1.

    Terms that act on these differences grow with them, and must not be diluted by the heat that makes them.
    """
    return max(1.0, _made(solution, a))


def _storage(solution: Solution, a: DuctAnswers) -> Size:
    time = solution.case.get("time")
    if time is None:
        return absent("storage", STEADY)
    p = a.properties
    moving = max(solution.driving, abs(a.bulk_rise))
    wall, words = _wall_capacity(solution, a, time)
    size = p.density * p.specific_heat * moving / time * (1.0 + wall)
    passing = a.length / (a.velocity * time)
    # over the balance itself: what else is large does not lessen a lag
    lagging = share = _steeper(solution, a) * size / balance(solution, a)
    n = a.transfer_units
    if a.flux is not None and solution.case.answer == "wall temperature":
        lagging = share * abs(a.bulk_rise) / solution.driving  # the wall rides on the bulk
    elif a.flux is None and solution.case.answer == "local flux":
        lagging = share * math.expm1(min(n, 300.0)) / max(n, 1.0)  # what the bulk misses, over what is left
    return Size(
        "storage",
        passing,
        size,
        f"the stream passes in {num(a.length / a.velocity)} s, the change takes {num(time)} s; {words}",
        asked=lagging,
        kelvins=_kelvins(solution, a, 3.0 * lagging),
    )


def _wall_capacity(solution: Solution, a: DuctAnswers, time: float) -> tuple[float, str]:
    """Capacity of the wall over that of the fluid, where the change is slower than the wall's own time ρcs/h."""
    case = solution.case
    if not walls.stores(case):
        return 0.0, "wall not counted"
    if time <= walls.own_time(case, a):
        return 0.0, f"the wall is too slow to follow ({num(walls.own_time(case, a))} s)"
    ratio = walls.capacity_ratio(case, a)
    return ratio, f"the wall stores {num(ratio)} times as much as the fluid"


def _wall_conduction(solution: Solution, a: DuctAnswers) -> Size:
    case = solution.case
    m = walls.conduction_number(case, a)
    if m is None:
        return absent("wall conduction", "no wall is stated; add wall thickness and wall conductivity to judge it")
    says = f"M = {num(m)} (Maranzana et al. 2004)"
    local = case.answer in _LOCAL_ANSWERS
    if local and a.flux is not None:
        # the end is felt over √(M/NTU) of the length, over which the wall gains that part of the stream's rise
        n = a.transfer_units
        end = min(math.sqrt(m / n), 0.5) * (n + _made(solution, a))
        says += f"; its end is felt over √(M/NTU) of the length: {num(end)}"
        return Size("wall conduction", m, m * balance(solution, a), says, asked=max(m, end))
    return Size(
        "wall conduction", m, m * balance(solution, a), says, asked=m, thresholds=_LOCAL if local else _MEANS
    )  # fmt: skip


def _friction_pair(solution: Solution, a: DuctAnswers) -> tuple[Size, Size]:
    """Viscous heating and pressure work: sizes of their own, one share and one verdict."""
    p = a.properties
    drop = abs(a.pressure_drop)
    heating = drop * a.velocity / a.length
    beta_t = p.expansion * a.property_temperature if a.property_temperature is not None else 0.0
    if solution.case.flow == "falling film":
        beta_t = 0.0  # weight drives the film, no pressure falls along it
    work = beta_t * heating
    net = (1.0 - beta_t) * heating
    rise, remark = rise_or_bound(a)
    if solution.case.get("temperature_basis") == "stagnation":
        # the wall then misses only what recovery leaves of the dynamic temperature, (1 − r)U²/(2cp)
        rise = abs(a.velocity**2 / (2.0 * p.specific_heat) - rise)
    share, exact = _friction_share(solution, a, net, rise)
    if remark:
        exact = False
    ec_re = (
        p.viscosity * a.velocity / (p.density * p.specific_heat * solution.driving * a.length)
    )  # Ec/Re = μU/(ρcpΔT·L), both on the length along the stream
    eu_ec = beta_t * drop / (p.density * p.specific_heat * solution.driving)
    bulk = (1.0 - beta_t) * drop / (p.density * p.specific_heat)
    says = f"friction {num(drop)} Pa warms the bulk by {num(bulk)} K net, an unheated wall by {num(rise)} K"
    if remark:
        says += f" ({remark})"
    elif beta_t > 0:
        says += "; a pair with pressure work" if beta_t < 0.999 or beta_t > 1.001 else ""
    says += _compressible(solution, a)
    sheared = solution.case.sheared(a.property_temperature)
    if sheared is not None:
        says += f"; {sheared.words()}"
    apart = _uncancelled(solution, a, net, rise)
    kelvins = _kelvins(solution, a, max(_ROUGHLY * share, apart or 0.0))
    shared = {"asked": share, "exact": exact, "kelvins": kelvins, "pair": True, "uncancelled": apart}
    viscous = Size("viscous heating", ec_re, heating, says, nets_to=abs(net), **shared)
    if beta_t == 0:
        why = "expansion coefficient 0: none"
        if solution.case.flow == "falling film":
            why = "no pressure falls along a film"
            return viscous, absent("pressure work", why)
        if not solution.case.has("expansion") and p.expansion == 0:
            why = "expansion coefficient not stated, taken as 0: state it (gases: 1/T)"
        elif a.property_temperature is None:
            why = "no temperature is stated, so that βT is not known and taken as 0"
        return viscous, absent("pressure work", why)
    takes = "takes" if beta_t > 0 else "adds"
    cools = f"βT {num(beta_t)}: expansion {takes} {percent(abs(beta_t))} of the friction heat; judged as a pair with it"
    return viscous, Size("pressure work", eu_ec, abs(work), cools, nets_to=0.0, **shared)


def _compressible(solution: Solution, a: DuctAnswers) -> str:
    """A remark where kinetic energy and falling density count (above Δp/p 10 % or Ma 0.3, common practice)."""
    mach = solution.mach()
    fall = abs(a.pressure_drop) / solution.case.pressure
    gas = mach is not None and a.properties.expansion * (a.property_temperature or 0.0) > 0.5
    if gas and (mach > 0.3 or fall > 0.1):
        return f"; Ma {num(mach)}, Δp/p {percent(fall)}: use the stagnation balance"
    return ""


def _uncancelled(solution: Solution, a: DuctAnswers, net: float, rise: float) -> float | None:
    """The larger of what bulk warming and recovery do by themselves at a wall temperature.

    The closed forms subtract one from the other; a share that is small because they cancel is none to rest on: a
    profile that still develops has less recovery, and of turbulent flow it is known to a tenth.
    """
    answer, n = solution.case.answer, a.transfer_units
    if a.flux is not None:
        return None
    taken = -math.expm1(-n)
    w = rise / solution.driving
    r = abs(net) * a.length / a.capacity_flux / solution.driving / n
    if answer == "outlet temperature":
        return max(r, w) * taken
    if answer == "duty":
        return max(w, r * (n / taken - 1.0))
    return max(w, r * math.expm1(min(n, 300.0))) if answer == "local flux" else None


def _friction_share(solution: Solution, a: DuctAnswers, net: float, rise: float) -> tuple[float, bool]:
    """The share that the answer calls for, and whether it is the effect itself."""
    answer, n = solution.case.answer, a.transfer_units
    if a.flux is not None:
        bulk = net * a.length / a.capacity_flux
        if answer == "outlet temperature":
            return abs(bulk) / abs(a.bulk_rise), True
        if answer == "wall temperature":
            return abs(bulk + rise) / solution.driving, True
        return max(abs(net) / balance(solution, a), rise / solution.driving), False
    r = net / (a.exchange * a.coefficient * solution.driving)
    w = rise / solution.driving
    taken = -math.expm1(-n)
    if answer == "outlet temperature":
        return abs(r - w) * taken, True
    if answer == "duty":
        return abs(w - r + r * n / taken), True
    if answer == "local flux":
        return abs(w + r * math.expm1(min(n, 300.0))), True
    if answer == "coefficient":
        return max(abs(net) / balance(solution, a), w * n / taken), False  # over the mean difference
    return abs(net) / balance(solution, a), False


def _source(solution: Solution, a: DuctAnswers) -> Size:
    q = solution.case.get("volumetric_source")
    if solution.case.has("electric_power"):
        if a.shape.area is None:
            solution.case.need("flow_area")
        q = (q or 0.0) + solution.case.get("electric_power") / (a.shape.area * a.length)
    if q is None:
        return absent("volumetric source", "no source is stated; add one for electric, absorbed or reaction heat")
    one_scale = abs(q) * a.length / (a.capacity_flux * solution.driving)
    p = a.properties
    # the wall's layer is slow and takes up more: an insulated wall stands above the bulk, when the layer has developed
    part = _SOURCE_RISE["plates" if a.shape.section == "plates" else "tube"] * a.shape.diameter**2 / p.conductivity
    rise = q * (part if a.reynolds <= LAMINAR_UP_TO else min(part, p.conductivity / a.coefficient**2))
    share, exact = max(_friction_share(solution, a, q, r) for r in (0.0, rise))
    share *= 1.0 + p.conductivity / (a.capacity_flux * a.length)  # conduction along brings back what is made farther on
    shift = abs(q) * a.length / a.capacity_flux
    return Size(
        "volumetric source",
        one_scale,
        abs(q),
        f"{num(q)} W/m3 alone would warm the stream by {num(shift)} K",
        asked=share,
        exact=exact,
        kelvins=_kelvins(solution, a, share),
    )
