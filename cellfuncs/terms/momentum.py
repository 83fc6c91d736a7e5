"""Sizes of the terms of the momentum equation [N/m3], after the family of the flow.

One-scale form: everything on one length L along the stream, relative to inertia ρU²/L: viscous 1/Re_L, pressure
Eu, buoyancy Ri, gravity 1/Fr², rotation 2ΩL/U, surface tension 1/We, storage L/(U·t*).
"""

from typing import NamedTuple

from cellfuncs.answers import Solution
from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.methods.duct_laminar import friction_times_re
from cellfuncs.terms.facts import FALLING_FILM, Facts
from cellfuncs.terms.size import STEADY, Size, absent, num, percent

TERMS = (
    "storage",
    "inertia",
    "viscous across",
    "viscous along",
    "pressure",
    "buoyancy",
    "gravity",
    "rotation",
    "surface tension",
)
# what the entrance of a duct costs beyond developed friction, in dynamic heads (Shah and London 1978; turbulent
# common practice)
_LAMINAR_ENTRANCE = {"plates": 0.67, "tube": 1.25}
_TURBULENT_ENTRANCE = 0.05
APPARENT = "Shah entry friction"  # the method whose friction has the growing momentum in it
# of that, what goes into the growing momentum of a laminar profile: 2(β − 1) with β 4/3 in a tube, 6/5 between plates
_LAMINAR_MOMENTUM = {"plates": 0.4, "tube": 2.0 / 3.0}


class _Balance(NamedTuple):
    """What drives and what resists: inertia, viscous across and pressure of one family."""

    inertia: Size
    across: Size
    pressure: Size


def sizes(solution: Solution) -> list[Size]:
    """The terms of the momentum equation in the order of the table."""
    f = Facts(solution)
    if f.family == "body":
        raise NoModel(f"nothing flows in the flow kind {f.flow}: it has no momentum equation", argument="block")
    balance = {"through": _through, "layer": _layer, "gap": _gap, "free": _free}.get(f.family, _other)(f)
    return [
        _storage(f),
        balance.inertia,
        balance.across,
        _along(f),
        balance.pressure,
        _buoyancy(f),
        _gravity(f),
        _rotation(f),
        _surface_tension(f),
    ]


def _inertia(f: Facts) -> float:
    """ρU²/L, what the one-scale form is relative to."""
    return f.properties.density * f.velocity**2 / f.length


def _one_scale(f: Facts, size: float) -> float:
    return size / _inertia(f)


def _viscous_one_scale(f: Facts) -> float:
    return f.properties.viscosity / (f.properties.density * f.velocity * f.length)


def _through(f: Facts) -> _Balance:
    if f.flow == FALLING_FILM:
        return _falling(f)
    a = f.answers
    friction = f.drop / f.length
    inertia = _inertia(f)
    entrance, says = 0.0, "form drag is counted with friction"
    inside = _in_friction(f) if f.flow == "duct" else None
    if inside is not None:
        entrance = inside
        friction -= entrance
        says = "the profile that grows from the inlet; taken out of the apparent friction"
    elif f.flow == "duct":
        head = _LAMINAR_ENTRANCE.get(a.shape.section, 1.25) if f.laminar else _TURBULENT_ENTRANCE
        entrance = head * inertia / 2.0
        says = f"zero when developed; the entrance costs {num(head)} dynamic heads"
    rise = abs(f.properties.expansion * a.bulk_rise)
    if rise:
        says += f"; the stream speeds up by {percent(rise)} on heating"
    all_of_it, at_wall = (f"{num(x)} Pa over {num(f.length)} m" for x in (f.drop, friction * f.length))
    paid = f.drop / f.length
    return _Balance(
        Size("inertia", 1.0, entrance + inertia * rise, says),
        Size("viscous across", _viscous_one_scale(f), friction, f"friction at the wall takes {at_wall}", leading=True),
        Size("pressure", _one_scale(f, paid), paid, f"pressure pays for friction, {all_of_it}", leading=True),
    )


def _in_friction(f: Facts) -> float | None:
    """What of an apparent friction goes into the profile that grows from a uniform inlet [Pa/m]; None where the
    friction is not an apparent one. Of what it is above developed friction, momentum takes the part that it has
    once the profile is developed."""
    a = f.answers
    if getattr(a.chosen, "friction", "") != APPARENT:
        return None
    section = a.shape.section
    developed = friction_times_re(section, a.shape.ratio) / f.reynolds * a.values.friction_factor
    above = max(0.0, 1.0 - developed / a.friction)
    part = _LAMINAR_MOMENTUM.get(section, 0.55 * 1.25) / _LAMINAR_ENTRANCE.get(section, 1.25)
    return part * above * a.friction * a.length / a.shape.diameter * _inertia(f) / 2.0


def _falling(f: Facts) -> _Balance:
    weight = abs(f.answers.pressure_drop) / f.length
    return _Balance(
        Size("inertia", 1.0, _inertia(f), "none once the film is developed; ρU²/L bounds it"),
        Size("viscous across", _viscous_one_scale(f), weight, "friction at the wall carries the weight", leading=True),
        absent("pressure", "a free surface: the ambient pressure all along"),
    )


def _layer(f: Facts) -> _Balance:
    inertia = _inertia(f)
    body = f.flow != "plate" and f.case.get("surface") != "vertical plate"
    pressure = absent("pressure", "no pressure gradient along a flat plate")
    if body:
        says = "around a body pressure and inertia are of one size"
        pressure = Size("pressure", 1.0, inertia, says, leading=True)
    return _Balance(
        Size("inertia", 1.0, inertia, f"ρU²/L over {num(f.length)} m", leading=True),
        Size(
            "viscous across", _viscous_one_scale(f), inertia,
            "the layer grows until friction equals inertia", leading=True,
        ),
        pressure,
    )  # fmt: skip


def _gap(f: Facts) -> _Balance:
    a = f.answers
    across = f.properties.viscosity * a.velocity / a.gap**2
    inertia = _inertia(f)
    says = f"at most ρUh²/(μL) = {num(inertia / across)} of friction; none between parallel walls"
    return _Balance(
        Size("inertia", 1.0, inertia, says),
        Size("viscous across", _viscous_one_scale(f), across, f"shear {num(a.shear)} Pa", leading=True),
        absent("pressure", "no pressure gradient along a plain sheared film"),
    )


def _free(f: Facts) -> _Balance:
    a = f.answers
    thin = a.rayleigh if f.properties.prandtl >= 1.0 else a.rayleigh * f.properties.prandtl
    thickness = a.length * thin**-0.25 if f.laminar else a.length / a.nusselt
    across = f.properties.viscosity * a.velocity / thickness**2
    says = f"over a layer of {num(1000 * thickness)} mm"
    if not f.laminar:
        across, says = _buoyant(f), "set equal to buoyancy, which a turbulent layer balances"
    return _Balance(
        Size("inertia", 1.0, _inertia(f), f"ρU²/L with U about {num(a.velocity)} m/s"),
        Size("viscous across", _viscous_one_scale(f), across, says, leading=True),
        absent("pressure", "only the hydrostatic pressure, which carries the weight"),
    )


def _other(f: Facts) -> _Balance:
    """A flow kind without sizes of its own: friction from the pressure drop where it is known."""
    inertia = _inertia(f)
    says = f"ρU²/L over {num(f.length)} m; no sizes for a {f.flow}, friction set equal to it"
    return _Balance(
        Size("inertia", 1.0, inertia, says, leading=True),
        Size("viscous across", _viscous_one_scale(f), inertia, says, leading=True),
        absent("pressure", f"not judged in a {f.flow}"),
    )


def _storage(f: Facts) -> Size:
    time = f.case.get("time")
    if time is None:
        return absent("storage", STEADY)
    size = f.properties.density * f.velocity / time
    says = f"the stream passes in {num(f.length / f.velocity)} s, the change takes {num(time)} s"
    return Size("storage", f.length / (f.velocity * time), size, says)


def _along(f: Facts) -> Size:
    size = f.properties.viscosity * f.velocity / f.length**2
    return Size("viscous along", _viscous_one_scale(f), size, f"μU/L² over {num(f.length)} m")


def _buoyant(f: Facts) -> float:
    return f.properties.density * f.gravity * abs(f.properties.expansion) * f.driving


def _buoyancy(f: Facts) -> Size:
    p = f.properties
    if p.expansion == 0:
        why = "expansion coefficient 0: none"
        if not (f.case.has("substance") or f.case.has("expansion")):
            why = "expansion coefficient not stated, taken as 0: state it (gases: 1/T)"
        return absent("buoyancy", why)
    size = _buoyant(f)
    says = f"βΔT {num(abs(p.expansion) * f.driving)}"
    if f.family == "gap":
        says += "; balanced by hydrostatic pressure in a thin film"
        return Size("buoyancy", _one_scale(f, size), size, says, asked=0.0, nets_to=0.0)
    if f.family != "free":
        way = {True: "along the stream", False: "across the stream", None: "way of the stream not stated"}[f.upright]
        says += f"; {way}; see the premise mixed convection"
        # across the stream a pressure difference carries it: it must not make the other terms look small
        return Size("buoyancy", _one_scale(f, size), size, says, nets_to=size if f.upright else 0.0)
    return Size("buoyancy", _one_scale(f, size), size, says, leading=True)


def _gravity(f: Facts) -> Size:
    """Weight: carried by hydrostatic pressure where no surface is free, so that the pair nets to nothing."""
    size = f.properties.density * f.gravity
    if f.flow == FALLING_FILM:
        size = abs(f.answers.pressure_drop) / f.length
        return Size("gravity", _one_scale(f, size), size, "the weight drives the film", leading=True)
    says = f"weight {num(size)} N/m3 is carried by hydrostatic pressure: the pair cancels without a free surface"
    return Size("gravity", _one_scale(f, size), size, says, asked=0.0, nets_to=0.0)


def _rotation(f: Facts) -> Size:
    spin = f.case.get("angular_velocity")
    if spin is None:
        return absent("rotation", 'nothing turns; add the row "angular velocity" for a rotating machine')
    size = 2.0 * f.properties.density * spin * f.velocity
    says = f"2ρΩU at {num(spin)} rad/s; a pressure difference across the stream carries what is steady of it"
    return Size("rotation", _one_scale(f, size), size, says, nets_to=0.0)


def _surface_tension(f: Facts) -> Size:
    tension = f.case.get("surface_tension")
    if tension is None and f.flow == FALLING_FILM:
        try:
            tension = f.substance.saturation("surface_tension", temperature=f.temperature)
        except CellfuncsError:
            tension = None
    if tension is None:
        why = "surface tension is not stated" if f.flow == FALLING_FILM else "no free surface"
        return absent("surface tension", why)
    size = tension / f.length**2
    return Size("surface tension", _one_scale(f, size), size, f"σ/L² over {num(f.length)} m")
