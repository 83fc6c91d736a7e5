"""A passage whose flow or flux is left open: the flow from a stated pressure drop or duty, the flux from a stated duty.

A duct, bank or bed that states a pressure drop and no flow has the velocity at which friction takes that pressure. One
that states a duty has, with its flow stated, the flux that gives the duty; with wall or surroundings stated instead,
the velocity at which it is reached. The searched row is found by bracketed roots (``search``).
"""

from collections.abc import Callable
from typing import Any

from cellfuncs.answers import search
from cellfuncs.cases import labels
from cellfuncs.cases.block import Stated
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused, CellfuncsError

_FLOWS = ("velocity", "volume_flow", "mass_flow")
_PASSAGES = ("duct", "bank", "bed")
_WALL = ("wall_temperature", "temperature_difference", "heat_flux", "ambient_temperature", "beyond_temperature")
_SLOWEST, _FASTEST, _PER_DECADE = 1e-5, 1e3, 3  # m/s: where a velocity is looked for

Solver = Callable[[Case], Any]


def completed(case: Case, solver: Solver) -> Case:
    """The case with the row that its pressure drop or its duty stands for; unchanged where nothing is open."""
    found = _completed(case, solver)
    if found is not case:
        found.origin = case
    return found


def _completed(case: Case, solver: Solver) -> Case:
    if case.has("duty"):
        return _by_duty(case, solver)
    if case.flow in _PASSAGES and case.has("pressure_drop") and not any(map(case.has, _FLOWS)):
        drop = case.get("pressure_drop")
        if drop <= 0:
            raise CaseRefused(f'"{case.stated["pressure_drop"].label}" drives no flow; it must be above zero')
        bare = case.without("pressure_drop")
        velocity = _velocity(bare, solver, lambda answers: answers.pressure_drop, drop, "pressure drop")
        return _with(case, "velocity", velocity)
    return case


def _by_duty(case: Case, solver: Solver) -> Case:
    label = case.stated["duty"].label
    if case.flow not in _PASSAGES:
        raise CaseRefused(f'"{label}" of a {case.flow} follows from the other rows; CF_VALUE_FOR finds what gives it')
    duty = case.get("duty")
    if duty == 0:
        raise CaseRefused(f'"{label}" is zero; nothing is exchanged')
    bare = case.without("duty")
    walled, flowing = any(map(case.has, _WALL)), any(map(case.has, (*_FLOWS, "pressure_drop")))
    if walled and flowing:
        raise CaseRefused(f'"{label}" follows where flow and wall are both stated; leave one of them out')
    if walled:
        velocity = _velocity(bare, solver, lambda answers: answers.duty, duty, "duty")
        return _with(bare, "velocity", velocity)
    return _with(_completed(bare, solver), "heat_flux", duty / _surface(bare, solver))


def _surface(case: Case, solver: Solver) -> float:
    """The exchanging surface [m2] of a passage."""
    trial = _with(case, "heat_flux", 1.0)
    if not any(map(case.has, _FLOWS)):
        trial = _with(trial.without("pressure_drop"), "velocity", 1.0)
    shape, length = (found := solver(trial)).shape, found.length
    if shape.area is None:
        raise CaseRefused(f'a flux from the duty needs the row "{shape.area_needs}"')
    return shape.heated_per_area * shape.area * length


def _velocity(case: Case, solver: Solver, of: Callable[[Any], float], target: float, what: str) -> float:
    """The velocity at which the answers meet a target; refused where there is none, or more than one."""
    decades = range(-5 * _PER_DECADE, 3 * _PER_DECADE + 1)
    places = [10.0 ** (k / _PER_DECADE) for k in decades]

    def answer(velocity: float) -> float:
        return of(solver(_with(case, "velocity", velocity)))

    found = search.scan(answer, target, places)
    roots = found.roots(None)
    if len(roots) > 1:
        shown = " and ".join(f"{root:.4g} m/s" for root in roots[:3])
        raise CaseRefused(f"more than one velocity gives this {what}: {shown}; state the velocity you mean")
    if roots:
        return roots[0]
    if found.jumps():
        raise CaseRefused(
            f"the {what} jumps past its value at {found.jumps()[0]:.4g} m/s, where another method takes over; "
            "state the velocity, or name a method"
        )
    raise _no_velocity(found, what)


def _no_velocity(found: search.Scan, what: str) -> CellfuncsError:
    if not found.stretches and found.refusal is not None:
        return found.refusal
    low, high = (f"{x:.3g}" for x in (_SLOWEST, _FASTEST))
    beyond = str(found.refusal or "").split("; change the case")[0]
    why = f"; beyond the velocities that answer: {beyond}" if beyond else ""
    return CaseRefused(f"no velocity between {low} and {high} m/s gives this {what}{why}"[:225])


def _with(case: Case, key: str, value: float) -> Case:
    """The case with a row that follows."""
    entry = Stated(key, labels.dictionary()[key].label, 0, value, None, "")
    return case.stating({**case.stated, key: entry})
