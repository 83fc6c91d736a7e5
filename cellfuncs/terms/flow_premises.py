"""Premises about the flow: continuum, density, heat of friction, steadiness, regime, development, buoyancy, bodies."""

from cellfuncs import groups
from cellfuncs.answers import gap as gap_answers
from cellfuncs.answers.effects.solid import lumping
from cellfuncs.answers.free import TURBULENT_FROM
from cellfuncs.errors import NoModel
from cellfuncs.methods import METHODS
from cellfuncs.methods import duct as duct_methods
from cellfuncs.terms.facts import FALLING_FILM, Facts
from cellfuncs.terms.figure import Figure
from cellfuncs.terms.recovery import rise_or_bound
from cellfuncs.terms.size import num, percent
from cellfuncs.terms.thresholds import FAILS, HOLDS, STRAINED

_ENTRY_LAMINAR, _ENTRY_TURBULENT = 0.05, 10.0  # of Re·D and of D
_NEAR_TRANSITION = (0.6, 6.0)  # times the transition Reynolds number, where a layer may be either
_ENTRY_INPUTS = frozenset(("x_star", "x_plus", "length_over_diameter", "diameter_over_length"))


def continuum(f: Facts) -> Figure:
    """Kn = λ/L on the length of the groups; in a layer on its thickness k/h where that is less."""
    if f.phase == "liquid":
        return Figure(0.0, f"{f.substance.name} is liquid: a continuum down to nanometres", state=HOLDS)
    size = _smallest(f)
    value = groups.knudsen(size, f.mean_free_path)
    return Figure(value, f"mean free path {num(1e9 * f.mean_free_path)} nm, size {num(1e6 * size)} micron")


def _smallest(f: Facts) -> float:
    if f.family == "gap":
        return f.answers.gap
    if f.family == "through":
        return f.group_length
    return min(f.group_length, f.properties.conductivity / f.coefficient)


def thermal_slip(f: Facts) -> Figure:
    """Share of the difference that the jump at the wall takes: 2γ/(γ+1)·λ/Pr over k/h."""
    if f.phase == "liquid":
        return Figure(0.0, f"{f.substance.name} is liquid: no jump at the wall", state=HOLDS)
    jump = 2.0 * f.heat_ratio / (f.heat_ratio + 1.0) * f.mean_free_path / f.properties.prandtl
    share = jump * f.coefficient / f.properties.conductivity
    return Figure(share, f"the jump is worth {num(1e9 * jump)} nm of gas, {percent(share)} of k/h")


def density_by_velocity(f: Facts) -> Figure:
    """Mach number."""
    if f.family == "body":
        raise NoModel("nothing flows")
    return Figure(f.mach, f"{num(f.velocity)} m/s beside {num(f.sound)} m/s")


def density_by_pressure(f: Facts) -> Figure:
    """Δp/p of a gas."""
    if f.family != "through" or f.flow == FALLING_FILM:
        raise NoModel("no pressure drop along the stream")
    if f.phase == "liquid":
        return Figure(0.0, f"{f.substance.name} is liquid: its density hardly feels {num(f.drop)} Pa", state=HOLDS)
    return Figure(f.drop / f.case.pressure, f"{num(f.drop)} Pa of {num(f.case.pressure)} Pa")


def compression_heat(f: Facts) -> Figure:
    """ΔT_rec over the driving difference."""
    if f.family == "gap":
        raise NoModel("heating by friction is a term of the film, see the term table")
    if f.family not in ("through", "layer") or f.flow == FALLING_FILM:
        raise NoModel(f"no recovery rise is known for the flow kind {f.flow}")
    rise, remark = rise_or_bound(f.answers)
    words = f"an unheated wall is {num(rise)} K warmer than the stream, difference {num(f.driving)} K"
    words += f"; {remark}" if remark else ""
    return Figure(rise / f.driving, words)


def steady_stream(f: Facts) -> Figure:
    """L/(U·t*)."""
    time = f.stated("time")
    passing = f.length / f.velocity
    return Figure(passing / time, f"the stream passes in {num(passing)} s, the change takes {num(time)} s")


def steady_layer(f: Facts) -> Figure:
    """δT²/(α·t*) with δT = k/h: above it the coefficient itself is unsteady."""
    if f.family == "body":
        raise NoModel("what a body stores is a term of its own, see the term table")
    time = f.stated("time")
    thickness = f.properties.conductivity / f.coefficient
    settles = thickness**2 / f.properties.diffusivity
    return Figure(
        settles / time,
        f"heat crosses k/h = {num(1e3 * thickness)} mm in {num(settles)} s, the change takes {num(time)} s",
    )


def regime(f: Facts) -> Figure:
    """Laminar, transitional or turbulent for this flow."""
    if f.family == "gap":
        limit = gap_answers.TURBULENT_FROM
        state = FAILS if f.reynolds > limit else HOLDS
        return Figure(f.reynolds, f"laminar up to {num(limit)} on the gap", limit=limit, state=state)
    if f.family == "body":
        raise NoModel("nothing flows")
    if f.family == "free":
        words = f"Ra: {'laminar up to' if f.laminar else 'turbulent from'} {num(TURBULENT_FROM)}{_assumed(f)}"
        return Figure(f.answers.rayleigh, words, limit=TURBULENT_FROM, state=HOLDS)
    if f.flow == "duct":
        low, high = duct_methods.LAMINAR_UP_TO, duct_methods.TURBULENT_FROM
        if low < f.reynolds < high:
            words = f"transitional: between {num(low)} and {num(high)} flow is unsettled, values are blended"
            words += _assumed(f)
            return Figure(f.reynolds, words, limit=low, state=STRAINED)
        if f.reynolds <= low:
            return Figure(f.reynolds, f"laminar: up to {num(low)}{_assumed(f)}", limit=low, state=HOLDS)
        return Figure(f.reynolds, f"turbulent: from {num(high)}{_assumed(f)}", limit=high, state=HOLDS)
    if f.family == "layer":
        limit = f.answers.transition
        near = _NEAR_TRANSITION[0] * limit < f.reynolds < _NEAR_TRANSITION[1] * limit
        words = f"{'laminar' if f.laminar else 'turbulent'}: transition taken at {num(limit)}"
        words += ", which depends on roughness and the stream's turbulence" if near else ""
        words += _assumed(f)
        return Figure(f.reynolds, words, limit=limit, state=STRAINED if near else HOLDS)
    raise NoModel(f"the method's range covers the regimes of a {f.flow}{_assumed(f)}")


def _assumed(f: Facts) -> str:
    """The method of the coefficient, and the regime that its range speaks of."""
    method = METHODS.get(getattr(f.answers, "chosen", None) and _name(f))
    if method is None:
        return ""
    spans = ", ".join(r.words() for r in method.ranges if r.variable in ("Re", "Ra", "Gr", "Pe", "film Re", "Ra*"))
    return f"; the coefficient is by {method.name} ({spans})" if spans else f"; the coefficient is by {method.name}"


def _name(f: Facts) -> str:
    return getattr(f.answers.chosen, "nusselt", f.answers.chosen)


def _entry(f: Facts, thermal: bool) -> tuple[float, str]:
    if f.flow != "duct":
        raise NoModel("concerns ducts")
    prandtl = f.properties.prandtl if thermal else 1.0
    diameter = f.answers.shape.diameter
    entry = (_ENTRY_LAMINAR * f.reynolds * prandtl if f.laminar else _ENTRY_TURBULENT) * diameter
    return entry, f"entry {num(entry)} m of {num(f.length)} m"


def developed_velocity(f: Facts) -> Figure:
    """Hydrodynamic entry length over length."""
    entry, words = _entry(f, thermal=False)
    return Figure(entry / f.length, words)


def developed_temperature(f: Facts) -> Figure:
    """Thermal entry length over length."""
    entry, words = _entry(f, thermal=True)
    method = METHODS.get(f.answers.chosen.nusselt)
    if method is not None and not _ENTRY_INPUTS.isdisjoint(method.inputs):
        words += f"; the coefficient ({method.name}) counts the entry in, developed values would not hold early on"
    elif method is not None:
        words += f"; {method.name} is for developed flow"
    return Figure(entry / f.length, words)


def thin_layer(f: Facts) -> Figure:
    """Re of a plate: below the limit the layer is as thick as the plate is long."""
    if f.flow != "plate":
        raise NoModel("concerns plates in a stream")
    return Figure(f.reynolds, f"Re over {num(f.length)} m")


def boussinesq(f: Facts) -> Figure:
    """βΔT."""
    beta = f.properties.expansion
    if beta == 0:
        raise NoModel("no expansion coefficient is stated")
    return Figure(abs(beta) * f.driving, f"β {num(beta)} 1/K, difference {num(f.driving)} K")


def _grashof(f: Facts, length: float, difference: float) -> float:
    p = f.properties
    if p.expansion == 0:
        raise NoModel("no expansion coefficient is stated")
    return groups.grashof(length, difference, p.viscosity / p.density, abs(p.expansion), f.gravity)


def mixed_convection(f: Facts) -> Figure:
    """Buoyancy against the forced flow, by the group that fits."""
    if f.family in ("free", "body", "other"):
        raise NoModel("no forced flow that buoyancy could mix with" if f.family != "other" else "not known here")
    if f.family == "gap":
        p = f.properties
        value = _grashof(f, f.answers.gap, f.driving) * p.prandtl
        return Figure(value, "Ra on the gap: below the limit no cells form", "mixed convection, thin film")
    if f.family == "layer":
        return _mixed_layer(f)
    if f.flow != "duct":
        raise NoModel(f"no limit is published for a {f.flow} that we know of")
    return _mixed_duct(f)


def _way(f: Facts) -> tuple[bool, str]:
    """Whether the upright limits are taken, and a remark."""
    if f.upright is None:
        return True, '; the row "inclination" is not stated, taken upright, which feels buoyancy first'
    return f.upright, ""


def _mixed_layer(f: Facts) -> Figure:
    upright, remark = _way(f)
    gr = _grashof(f, f.group_length, f.driving)
    re = f.reynolds
    if f.flow == "mixed":
        return Figure(gr / re**2, "Gr/Re²; the blend counts both", "mixed convection, upright surface", state=HOLDS)
    if upright or f.flow != "plate":
        return Figure(gr / re**2, f"Gr/Re² with Gr {num(gr)}{remark}", "mixed convection, upright surface")
    return Figure(gr / re**2.5, f"Gr/Re^5/2 with Gr {num(gr)}, level", "mixed convection, level surface")


def _mixed_duct(f: Facts) -> Figure:
    upright, remark = _way(f)
    d, re, pr = f.answers.shape.diameter, f.reynolds, f.properties.prandtl
    gr = _grashof(f, d, f.driving)
    if f.laminar and upright:
        words = f"Gr/Re; wall shear rises 5 % at 6, Nu 5 % at 18{remark}"
        return Figure(gr / re, words, "mixed convection, upright laminar duct")
    if f.laminar:
        return Figure(gr * pr, "Gr·Pr, level: cells across the stream", "mixed convection, level laminar duct")
    if upright:
        star = gr * f.answers.nusselt / (re**3.425 * pr**0.8)
        return Figure(star, f"Bo* = Gr·Nu/(Re^3.425·Pr^0.8){remark}", "mixed convection, upright turbulent duct")
    return Figure(gr / re**2, "Gr/Re², level", "mixed convection, level turbulent duct")


def lumped_body(f: Facts) -> Figure:
    """Bi of the body, or of the wall between stream and outside."""
    own = getattr(f.answers, "biot", None)
    if own is not None:
        mean, middle = lumping(f.solution)
        words = f"resistance inside over that at the surface; solved, the mean is off by up to {num(mean)} K, "
        return Figure(own, f"{words}the middle by {num(middle)} K")
    if not (f.case.has("wall_thickness") and f.case.has("wall_conductivity")):
        raise NoModel("no body or wall is stated; wall thickness and wall conductivity would be judged")
    thickness = f.case.get("wall_thickness")
    value = groups.biot(thickness, f.case.get("wall_conductivity"), f.coefficient)
    return Figure(value, f"Bi of the wall on its thickness of {num(1e3 * thickness)} mm")


def nahme(f: Facts) -> float:
    """Na = bμU²/k of a laminar liquid."""
    p = f.properties
    return groups.nahme(f.velocity, p.viscosity, p.conductivity, f.thinning)


def viscosity_feedback(f: Facts) -> Figure:
    """Na: how far friction heat thins the liquid that makes it."""
    if f.flow not in ("duct", "gap"):
        raise NoModel("concerns ducts and sheared films")
    if not f.laminar:
        raise NoModel("turbulent: friction hardly feels viscosity")
    if f.case.substance is not None and f.phase == "gas":
        raise NoModel("a gas thickens on heating, no feedback")
    value = nahme(f)
    falls = f"shear falls by about {percent(value / 12.0)}" if value < 1 else "shear falls without measure"
    return Figure(value, f"b {num(f.thinning)} 1/K; {falls} (Na/12, two equal walls)")
