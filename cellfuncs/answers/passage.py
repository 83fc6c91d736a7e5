"""What every passage has in common: methods are chosen, loops on mean bulk and wall temperature closed, chosen again.

A ``Passage`` is a case of a duct, a bank, a bed or a film as methods see it; its subclasses say what its flow kind
knows, how its coefficient and its friction come from methods, and what answers they make.
"""

from abc import ABC, abstractmethod
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers import driving as driving_difference
from cellfuncs.answers.inputs import Inputs, Known, View
from cellfuncs.answers.loop import settle
from cellfuncs.answers.path import duct_resistance, far_temperature, refuse_without_end
from cellfuncs.cases.case import Case, Properties
from cellfuncs.cases.sections import Duct
from cellfuncs.errors import CaseRefused

STATED = "stated"
_MOST_CHOICES = 4  # rounds of choosing methods at temperatures that the methods set


@dataclass(frozen=True)
class Chosen:
    """The methods of a passage: of the coefficient and of friction, and what lies outside their ranges."""

    nusselt: str
    friction: str
    outside: str = ""


@dataclass(frozen=True)
class Values:
    """Film coefficient [W/(m2 K)], Darcy's f, and the factors of changing properties in them."""

    coefficient: float
    friction: float
    nusselt_factor: float = 1.0
    friction_factor: float = 1.0
    words: str = ""


class Passage(ABC):
    """A case with a stream that exchanges along it."""

    wanted = choice.NUSSELT
    friction_wanted = choice.FRICTION
    what_friction = "friction factor"

    def __init__(self, case: Case, known: dict[str, Any], lengths: dict[str, Any], length: float):
        self.case, self.lengths, self.length = case, lengths, length
        self.known = Known(known)
        self.at_end = case.wall == "flux" and case.flow == "duct"
        self.memo: dict[Any, Properties] = {}

    # -- states -----------------------------------------------------------------------------

    def state(self, bulk: float | None, difference: float | None) -> Inputs:
        """The case at a mean bulk temperature, with the mean difference of the wall to it."""
        return Inputs(
            self.case, self.known, self.lengths, bulk, difference, self.memo,
            flux=self.case.get("heat_flux"), friction=self.plain_friction,
        )  # fmt: skip

    def plain_friction(self, view: View) -> float | None:
        """Darcy's f of constant properties, as methods of Nu take it."""
        return self.case.get("friction_factor")

    def at_bulk(self, state: Inputs) -> View:
        """The inputs at the mean bulk temperature, on the usual length."""
        return state.view_at("mean bulk")

    # -- methods ----------------------------------------------------------------------------

    def choose(self, state: Inputs, allow: bool) -> Chosen:
        """The methods for a state: those named by the case, else those recommended."""
        nusselt, outside = self.choose_nusselt(state, allow)
        # a friction beyond its range is refused only where it is not just a companion of a stated coefficient
        friction, other = self.choose_friction(state, allow or nusselt == STATED)
        return Chosen(nusselt, friction, "; ".join(filter(None, (outside, other))))

    def choose_nusselt(self, state: Inputs, allow: bool) -> tuple[str, str]:
        """Name of the method of the coefficient, and what lies outside its range."""
        if self.case.has("coefficient"):
            return STATED, ""
        name = choice.row(self.case, "method", self.wanted)
        if name is not None:
            found = choice.named(state, name, self.wanted, "coefficient", allow)
        else:
            found = choice.recommended(state, self.wanted, "coefficient", allow, self.at_end)
        return found.method.name, found.outside

    def choose_friction(self, state: Inputs, allow: bool) -> tuple[str, str]:
        """Name of the method of friction, and what lies outside its range."""
        if self.case.has("friction_factor"):
            return STATED, ""
        name = self.friction_row()
        if name is not None:
            found = choice.named(state, name, self.friction_wanted, self.what_friction, allow)
        else:
            found = choice.recommended(state, self.friction_wanted, self.what_friction, allow)
        return found.method.name, found.outside

    def friction_row(self) -> str | None:
        """The method of friction that the case names."""
        return self.case.get("friction_method") or choice.row(self.case, "method", self.friction_wanted)

    # -- answers, of the flow kinds ---------------------------------------------------------

    @abstractmethod
    def shape(self, p: Properties) -> Duct:
        """The section at a state of the fluid."""

    @abstractmethod
    def values(self, state: Inputs, chosen: Chosen) -> Values:
        """Coefficient and friction of a state with methods chosen before."""

    @abstractmethod
    def coefficient(self, state: Inputs, name: str) -> tuple[float, float, str]:
        """Film coefficient [W/(m2 K)] by a method, the factor of changing properties in it, and that factor's name."""

    @abstractmethod
    def answers(self, **known: Any) -> Any:
        """The answers of the flow kind."""


def solve_passage(passage: Passage) -> Any:
    """The answers of a passage with the methods that hold where it comes to lie."""
    case = passage.case
    inlet, difference = temperatures(case)
    chosen: Chosen | None = None  # chosen at the first temperature that the loop tries, and kept for its round

    def at(bulk: float | None) -> Any:
        nonlocal chosen
        answers = _at(passage, bulk, inlet, difference, chosen)
        chosen = answers.chosen
        return answers

    for _ in range(_MOST_CHOICES):
        found = close_on_bulk(case, at, inlet, difference)
        chosen = passage.choose(found.state, case.allow)
        if (found.chosen.nusselt, found.chosen.friction) == (chosen.nusselt, chosen.friction):
            break
    return replace(found, outside=chosen.outside)


def _at(
    passage: Passage, bulk: float | None, inlet: float | None, difference: float | None, chosen: Chosen | None
) -> Any:
    """The answers at a mean bulk temperature; without methods chosen, with those for this temperature."""
    case = passage.case
    flux, far = case.get("heat_flux"), far_temperature(case)
    apart = _mean_difference(case, bulk, inlet, difference)
    start = passage.state(bulk, apart)
    p = passage.at_bulk(start).p
    shape = passage.shape(p)
    case.velocity(p.density) if case.flow != "falling film" else None  # asks for what is missing first
    if chosen is None:
        chosen = passage.choose(start, True)
    state, values = start, None

    def film_coefficient(driving: float | None) -> float:
        nonlocal state, values
        state = passage.state(bulk, driving)
        values = passage.values(state, chosen)
        return values.coefficient

    follows = bulk is not None and not case.fixed and chosen.nusselt != STATED
    if flux is not None and follows:
        apart = driving_difference.for_flux(film_coefficient, flux)
    elif far is not None and follows:
        apart = driving_difference.for_path(film_coefficient, far - bulk, duct_resistance(case, shape))
    h = film = film_coefficient(apart)
    driving, method = difference, chosen.nusselt
    if flux is not None:
        driving = flux / h
    if far is not None:
        h, method = 1.0 / (1.0 / h + duct_resistance(case, shape)), f"overall, film {h:.4g} by {method}"
    return passage.answers(
        case=case, shape=shape, length=passage.length, property_temperature=bulk, properties=p,
        nusselt=film * shape.diameter / p.conductivity, friction=values.friction, coefficient=h, method=method,
        outside=chosen.outside, difference=driving, flux=flux, inlet=inlet, film=film, chosen=chosen, state=state,
        values=values, passage=passage,
    )  # fmt: skip


def _mean_difference(case: Case, bulk: float | None, inlet: float | None, difference: float | None) -> float | None:
    """Wall minus mean bulk temperature where the wall is prescribed, None where it follows or is not known."""
    if case.has("heat_flux") or far_temperature(case) is not None or not difference or bulk is None:
        return None
    return inlet + difference - bulk if inlet is not None else difference


def close_on_bulk(
    case: Case, at: Callable[[float | None], Any], inlet: float | None, difference: float | None
) -> Any:
    """The answers at the mean bulk temperature, which they themselves set; or at the stated temperature."""
    if case.get("heat_flux") == 0:
        raise CaseRefused(f'"{case.stated["heat_flux"].label}" is zero; nothing is exchanged')
    stated = case.get("property_temperature")
    if stated is not None or inlet is None:
        return at(stated)
    if case.fixed:
        found = at(None)
        return replace(found, property_temperature=inlet + 0.5 * found.bulk_rise)
    start = inlet if difference is None else inlet + 0.25 * difference
    found = at(settle(start, lambda t: inlet + 0.5 * at(t).bulk_rise, "mean bulk temperature"))
    case.refuse_phase_change(inlet, found.property_temperature, found.outlet)
    _refuse_vacuum(case, found)
    return found


def _refuse_vacuum(case: Case, found: Any) -> None:
    """Refuse a friction that would use up the pressure there is; a liquid's pressure counts only where it is stated."""
    drop, pressure = found.pressure_drop, case.pressure
    known = case.has("pressure") or case.has("gauge_pressure") or case.is_gas(found.property_temperature)
    if known and drop >= pressure and case.flow != "falling film":
        raise CaseRefused(
            f"friction would take {drop / 1e5:.3g} bar, but the pressure is {pressure / 1e5:.3g} bar absolute; "
            "the duct is too long or the flow too fast for it"
        )


def temperatures(case: Case) -> tuple[float | None, float | None]:
    """Inlet temperature and driving difference, as far as they are stated."""
    inlet = case.get("inlet_temperature")
    refuse_without_end(case)
    if case.wall == "flux":
        if inlet is None and not (case.fixed or case.has("property_temperature")):
            case.need("inlet_temperature")
        return inlet, None
    wall, difference = case.get("wall_temperature"), case.get("temperature_difference")
    far = far_temperature(case)
    if far is not None:
        inlet = case.need("inlet_temperature")
        return inlet, _nonzero(far - inlet)
    if wall is None and difference is None:
        return inlet, 0.0  # no exchange: friction alone
    if wall is not None and difference is not None:
        if inlet is not None:
            raise CaseRefused("wall temperature, inlet temperature and their difference are all stated; state two")
        return wall - difference, _nonzero(difference)
    if wall is not None:
        inlet = case.need("inlet_temperature")
        return inlet, _nonzero(wall - inlet)
    return inlet, _nonzero(difference)


def _nonzero(difference: float) -> float:
    if difference == 0:
        raise CaseRefused("wall and fluid have the same temperature; there is no driving difference to judge by")
    return difference
