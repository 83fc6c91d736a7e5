"""Answers of a layer on a body in a stream: plate, cylinder, sphere, jet. Mean coefficient, wall, flux, duty.

The length is that of the plate, the diameter of cylinder and sphere, what a jet covers to each side of its middle.
"""

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers.inputs import Inputs, Known
from cellfuncs.answers.surface import STATED, close, stream_and_difference
from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CaseRefused
from cellfuncs.groups import STANDARD_GRAVITY
from cellfuncs.methods import Method, recovery
from cellfuncs.methods import plate as methods


@dataclass(frozen=True)
class LayerAnswers:
    """A solved layer; differences are wall minus stream. SI units.

    ``group_length`` is what Re and Nu are on: the length, but the nozzle's diameter for a jet (twice the
    width of a slot).
    """

    case: Case
    length: float
    property_temperature: float | None
    properties: Properties
    velocity: float
    reynolds: float
    transition: float
    nusselt: float
    coefficient: float
    method: str
    outside: str
    difference: float
    flux: float | None
    stream: float | None
    group_length: float
    chosen: str = ""
    state: Inputs | None = None  # what methods may ask
    blended: Inputs | None = None  # ... and what a blend with free convection asks

    @property
    def laminar(self) -> bool:
        return self.reynolds <= self.transition

    @property
    def capacity_flux(self) -> float:
        """ρcpU [W/(m2 K)]."""
        return self.properties.density * self.properties.specific_heat * self.velocity

    @property
    def wall(self) -> float | None:
        return None if self.stream is None else self.stream + self.difference

    @property
    def mean_flux(self) -> float:
        return self.coefficient * self.difference

    @property
    def local_flux(self) -> float:
        """Wall flux at the far end of a plate, the mean elsewhere [W/m2]."""
        if self.flux is not None:
            return self.flux
        if self.case.flow != "plate" or (self.method == "stated" and not self.laminar):
            return self.mean_flux
        if self.laminar:
            return 0.5 * self.mean_flux
        local = methods.turbulent_local(self.reynolds, self.properties.prandtl)
        return local * self.properties.conductivity / self.length * self.difference

    @property
    def surface(self) -> float:
        """Exchanging surface [m2]: one side of a plate, all of a cylinder or sphere, the jet's circle."""
        case, flow = self.case, self.case.flow
        if flow == "sphere":
            return math.pi * self.length**2
        if flow == "jet" and "slot" not in _nozzle(case):
            return math.pi * self.length**2
        if flow == "jet":
            return 2.0 * self.length * case.need("width")
        across = {"plate": "width", "cylinder": "length"}[flow]
        if not case.has(across):
            raise CaseRefused(f'a duty needs the row "{across}"')
        return case.get(across) * self.length * (math.pi if flow == "cylinder" else 1.0)

    @property
    def duty(self) -> float:
        """Heat given to the stream [W]."""
        return self.mean_flux * self.surface

    @property
    def recovery_rise(self) -> float:
        """ΔT_rec = rU²/(2cp) [K]; refused outside the range of r."""
        pr = self.properties.prandtl
        factor = recovery.laminar_plate(pr) if self.laminar else recovery.turbulent_plate(pr)[0]
        return factor * self.velocity**2 / (2.0 * self.properties.specific_heat)


def solve_layer(
    case: Case, finish: Callable[[LayerAnswers], LayerAnswers] = lambda found: found
) -> LayerAnswers:
    """The answers of an external flow; closes the loops on film temperature and, where it follows, the difference.

    ``finish`` may change the answers at each step of the loops, for instance blend them with free convection.
    """
    length, group_length = _lengths(case)
    transition = case.get("transition", methods.TRANSITION) if case.flow == "plate" else _BODY_TRANSITION
    stream, difference = stream_and_difference(case)
    known, memo = Known(_known(case, length, group_length, transition)), {}
    flux, gravity = case.get("heat_flux"), case.get("gravity", STANDARD_GRAVITY)

    def state_of(driving: float | None) -> Inputs:
        return Inputs(case, known, {"": group_length}, stream, driving, memo, flux=flux, gravity=gravity)

    def answers_of(state: Inputs, method: Method | None, outside: str) -> LayerAnswers:
        view = state.view_at("film") if method is None else state.view(method)
        p = view.p
        u = case.velocity(p.density)
        if method is None:
            h = case.get("coefficient")
        else:
            h = choice.number(method, view) * p.conductivity / view.length
        return finish(LayerAnswers(
            case, length, view.temperature, p, u, p.density * u * group_length / p.viscosity, transition,
            h * group_length / p.conductivity, h, STATED if method is None else method.name, outside, state.difference,
            flux, stream, group_length, STATED if method is None else method.name, state,
        ))  # fmt: skip

    case.velocity(1.0)  # asks for what is missing first
    form = case.flow if case.flow in ("cylinder", "sphere") else "plane"
    return close(case, state_of, answers_of, stream, difference, form, group_length / 2.0)


_TRIPPED = 1e4  # a transition stated below this Re: the layer is taken turbulent from its edge
_BODY_TRANSITION = 2e5  # Re from which the layer on a cylinder or sphere is turbulent, common practice


def _lengths(case: Case) -> tuple[float, float]:
    """Length of the layer, and the length that the groups are on."""
    if case.flow == "plate":
        return case.need("length"), case.need("length")
    if case.flow == "jet":
        return _jet_lengths(case)
    diameter = case.need("diameter")
    return diameter, diameter


def _nozzle(case: Case) -> str:
    """What a jet comes from; a row "slot width" says slot, a row "open area" says many."""
    natural = "slot" if case.has("slot_width") else "round"
    return case.get("nozzle", f"{natural} array" if case.has("open_area") else natural)


def _jet_lengths(case: Case) -> tuple[float, float]:
    """What a nozzle covers to each side, and the hydraulic diameter; in an array the first follows from the open area:
    a circle that is as large as a nozzle's part of the wall, half the pitch of slots."""
    nozzle = _nozzle(case)
    slot = "slot" in nozzle
    diameter = 2.0 * case.need("slot_width") if slot else case.need("diameter")
    if "array" not in nozzle:
        return case.need("radius"), diameter
    share = case.need("open_area")
    if not 0.0 < share < 1.0:
        raise CaseRefused(f'"{case.stated["open_area"].label}" is a part of the wall, above 0 and below 1')
    if case.has("radius"):
        raise CaseRefused(f'"{case.stated["radius"].label}" follows from the open area of an array; leave it out')
    return 0.25 * diameter / share if slot else 0.5 * diameter / math.sqrt(share), diameter


def _known(case: Case, length: float, group_length: float, transition: float) -> dict[str, Any]:
    """What methods of external flows may ask besides properties."""
    known: dict[str, Any] = {"wall": case.wall}
    if case.flow == "plate":
        known |= {"regime": lambda state: _regime(state, transition), "transition": transition}
        if case.has("unheated_length"):
            known |= {"unheated": case.get("unheated_length") / length, "must": ("unheated",)}
    elif case.flow == "cylinder":
        known["shape"] = case.get("body_shape", "circle")
    elif case.flow == "jet":
        known |= {"jet": _nozzle(case), "height": case.need("distance") / group_length, "radius": length / group_length}
        if case.has("open_area"):
            known["open_area"] = case.get("open_area")
    return known


def _regime(state: Inputs, transition: float) -> str:
    """laminar, mixed (turbulent behind the transition) or turbulent from the edge (a transition stated below 1e4)."""
    if state.view_at("film").get("reynolds") <= transition:
        return "laminar"
    return "turbulent" if transition < _TRIPPED else "mixed"
