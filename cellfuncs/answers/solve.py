"""One solution a case, and everything in it by name."""

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cached_property

from cellfuncs import groups
from cellfuncs.answers import choice
from cellfuncs.answers.body import BodyAnswers, solve_body
from cellfuncs.answers.completed import completed
from cellfuncs.answers.duct import DuctAnswers, solve_duct
from cellfuncs.answers.free import FreeAnswers, solve_enclosure, solve_free
from cellfuncs.answers.gap import GapAnswers, solve_gap
from cellfuncs.answers.layer import LayerAnswers, solve_layer
from cellfuncs.answers.mixed import solve_mixed
from cellfuncs.answers.path import far_temperature
from cellfuncs.answers.through import solve_through
from cellfuncs.cases import labels
from cellfuncs.cases.case import Case
from cellfuncs.errors import CaseRefused, CellfuncsError
from cellfuncs.methods.duct import LAMINAR_UP_TO

Answers = DuctAnswers | LayerAnswers | FreeAnswers | GapAnswers | BodyAnswers
_SOLVERS: Mapping[str, Callable[[Case], Answers]] = {
    "duct": solve_duct,
    "plate": solve_layer,
    "cylinder": solve_layer,
    "sphere": solve_layer,
    "jet": solve_layer,
    "bank": solve_through,
    "bed": solve_through,
    "falling film": solve_through,
    "free": solve_free,
    "enclosure": solve_enclosure,
    "mixed": solve_mixed,
    "body": solve_body,
    "gap": solve_gap,
}


@dataclass(frozen=True)
class Solution:
    """A case with its answers; ``value`` gives any stated or derived quantity of it."""

    case: Case
    answers: Answers

    @cached_property
    def driving(self) -> float:
        """Size of the driving difference [K]; refused where nothing is exchanged."""
        if not self.answers.difference:
            self.case.need("wall_temperature", "heat_flux", "temperature_difference")
            raise CaseRefused("wall and fluid have the same temperature; there is no driving difference to judge by")
        return abs(self.answers.difference)

    def value(self, key: str) -> float | str:
        """A stated or derived quantity in SI, or the text of a choice."""
        derived = _DERIVED.get(key)
        if key in _OF_A_FLOW and isinstance(self.answers, BodyAnswers):
            derived = None
        found = self.case.get(key)
        if found is None and derived:
            found = derived(self)
        if found is None:
            entry = labels.dictionary()[key]
            raise CaseRefused(f'"{entry.label}" is neither stated nor does it follow for this {self.case.flow}')
        return found

    @property
    def group_length(self) -> float:
        """The length that Re, Nu and the like are on: diameter, plate length, or gap."""
        a = self.answers
        if isinstance(a, DuctAnswers):
            return a.shape.diameter
        if isinstance(a, FreeAnswers | BodyAnswers):
            return a.length
        return a.group_length if isinstance(a, LayerAnswers) else a.gap

    def mach(self) -> float | None:
        sound = self.case.speed_of_sound(self.answers.property_temperature)
        return None if sound is None else groups.mach(self.answers.velocity, sound)

    def nahme(self) -> float | None:
        """b·μU²/k with the fall of the viscosity at the property temperature, or None where it is not known."""
        at, p = self.answers.property_temperature, self.answers.properties
        if self.case.fixed or at is None:
            return None
        try:
            warmer = self.case.properties(at + 1.0).viscosity
        except CellfuncsError:
            return None
        slope = math.log(p.viscosity / warmer)
        if slope <= 0:
            return None
        return groups.nahme(self.answers.velocity, p.viscosity, p.conductivity, slope)


def solve(case: Case) -> Solution:
    """Solve a case of any flow kind."""
    _refuse_other_methods(case)
    solver = _SOLVERS[case.flow]
    case = completed(case, solver)
    return Solution(case, solver(case))


def _refuse_other_methods(case: Case) -> None:
    """A named method that gives neither a coefficient nor friction would be passed over in silence."""
    if not case.has("method"):
        return
    method = choice.find(case.get("method"))
    friction = (*choice.FRICTION, *choice.DROP) if case.flow in ("duct", "bank", "bed") else ()
    if method.gives not in (*choice.NUSSELT, *friction):
        raise CaseRefused(f"{method.name} gives a {method.gives}; a {case.flow} takes it from CF_NUSSELT_OF, not here")


def _attribute(name: str) -> Callable[[Solution], float | None]:
    return lambda s: getattr(s.answers, name, None)


def _property(name: str) -> Callable[[Solution], float | None]:
    return lambda s: getattr(s.answers.properties, name, None)


def _duct(find: Callable[[DuctAnswers], float | None]) -> Callable[[Solution], float | None]:
    return lambda s: find(s.answers) if isinstance(s.answers, DuctAnswers) else None


def _mass_flow(s: Solution) -> float | None:
    a = s.answers
    if not isinstance(a, DuctAnswers) or a.shape.area is None:
        return None
    return a.properties.density * a.velocity * a.shape.area


def _local_flux(s: Solution) -> float:
    a = s.answers
    if isinstance(a, GapAnswers):
        return a.cold_wall_flux
    return a.local_flux


def _wall_shear(s: Solution) -> float | None:
    a = s.answers
    if isinstance(a, GapAnswers):
        return a.shear
    if isinstance(a, DuctAnswers):
        return a.pressure_drop * a.shape.diameter / (4.0 * a.length)
    return None


def _shear_rate(s: Solution) -> float | None:
    """At the wall: of a melt as it thins, of other fluids in laminar flow τ/μ."""
    if isinstance(s.answers, BodyAnswers):
        return None
    sheared = s.case.sheared(s.answers.property_temperature)
    if sheared is not None:
        return sheared.wall
    laminar = isinstance(s.answers, GapAnswers) or s.answers.reynolds <= LAMINAR_UP_TO
    stress = _wall_shear(s) if laminar else None
    return None if stress is None else stress / s.answers.properties.viscosity


def _overall(s: Solution) -> float | None:
    """U from the stream to the far side of a stated path, on the wetted surface."""
    a, far = s.answers, far_temperature(s.case)
    if far is None:
        return None
    return a.coefficient if isinstance(a, DuctAnswers) else a.mean_flux / (far - a.stream)


def _friction_rise(s: Solution) -> float | None:
    a = s.answers
    if not isinstance(a, DuctAnswers):
        return None
    return a.pressure_drop / (a.properties.density * a.properties.specific_heat)


def _friction_power(s: Solution) -> float | None:
    a = s.answers
    if isinstance(a, GapAnswers):
        return a.friction_power
    if isinstance(a, DuctAnswers) and a.shape.area is not None:
        return a.pressure_drop * a.velocity * a.shape.area
    return None


def _chosen(which: str) -> Callable[[Solution], str | None]:
    """The name of the method that was taken for the coefficient or for friction."""

    def name(s: Solution) -> str | None:
        chosen = getattr(s.answers, "chosen", None)
        if isinstance(chosen, str) or chosen is None:
            blended = getattr(s.answers, "blended", None) is not None  # the method chosen is that of the stream alone
            found = getattr(s.answers, "method", None) if blended or not chosen else chosen
            return found if which == "nusselt" else None
        return getattr(chosen, which, None)

    return name


_DERIVED: Mapping[str, Callable[[Solution], float | str | None]] = {
    "flow_kind": lambda s: s.case.flow,
    "answer": lambda s: s.case.answer,
    "tolerance": lambda s: s.case.tolerance,
    "smallest": lambda s: s.case.smallest,
    "pressure": lambda s: s.case.pressure,
    "velocity": _attribute("velocity"),
    "mass_flow": _mass_flow,
    "volume_flow": _duct(lambda a: None if a.shape.area is None else a.velocity * a.shape.area),
    "hydraulic_diameter": _duct(lambda a: a.shape.diameter),
    "flow_area": _duct(lambda a: a.shape.area),
    "method": _chosen("nusselt"),
    "friction_method": _chosen("friction"),
    "section": _duct(lambda a: a.shape.section),
    "heated_walls": _duct(lambda a: a.shape.heated),
    "property_temperature": _attribute("property_temperature"),
    "inlet_temperature": _attribute("inlet"),
    "stream_temperature": _attribute("stream"),
    "wall_temperature": _attribute("wall"),
    "outlet_temperature": _attribute("outlet"),
    "peak_temperature": _attribute("peak"),
    "temperature_difference": _attribute("difference"),
    "driving_difference": lambda s: s.driving,
    "density": _property("density"),
    "viscosity": _property("viscosity"),
    "kinematic_viscosity": lambda s: s.answers.properties.viscosity / s.answers.properties.density,
    "conductivity": _property("conductivity"),
    "specific_heat": _property("specific_heat"),
    "expansion": _property("expansion"),
    "diffusivity": _property("diffusivity"),
    "speed_of_sound": lambda s: s.case.speed_of_sound(s.answers.property_temperature),
    "reynolds": _attribute("reynolds"),
    "prandtl": _property("prandtl"),
    "peclet": lambda s: s.answers.reynolds * s.answers.properties.prandtl,
    "eckert": lambda s: s.answers.velocity**2 / (s.answers.properties.specific_heat * s.driving),
    "brinkman": lambda s: groups.brinkman(
        s.answers.velocity, s.driving, s.answers.properties.viscosity, s.answers.properties.conductivity
    ),
    "nusselt": _attribute("nusselt"),
    "stanton": lambda s: None if isinstance(s.answers, GapAnswers) else s.answers.coefficient / s.answers.capacity_flux,
    "graetz": _duct(lambda a: a.reynolds * a.properties.prandtl * a.shape.diameter / a.length),
    "euler": _duct(lambda a: a.pressure_drop / (a.properties.density * a.velocity**2)),
    "mach": lambda s: s.mach(),
    "nahme": lambda s: s.nahme(),
    "bulk_rise": _attribute("bulk_rise"),
    "rayleigh": _attribute("rayleigh"),
    "grashof": _attribute("grashof"),
    "overall_coefficient": _overall,
    "second_wall_temperature": _attribute("second_wall"),
    "biot": _attribute("biot"),
    "fourier": _attribute("fourier"),
    "time_constant": _attribute("time_constant"),
    "final_temperature": _attribute("final_temperature"),
    "transfer_units": _duct(lambda a: a.transfer_units),
    "coefficient": _attribute("coefficient"),
    "friction_factor": _attribute("friction"),
    "pressure_drop": _attribute("pressure_drop"),
    "duty": _attribute("duty"),
    "local_flux": _local_flux,
    "recovery_rise": _attribute("recovery_rise"),
    "friction_rise": _friction_rise,
    "shear_rate": _shear_rate,
    "wall_shear": _wall_shear,
    "friction_power": _friction_power,
}

# what a solid body does not have
_OF_A_FLOW = frozenset(
    {
        "kinematic_viscosity",
        "peclet",
        "eckert",
        "brinkman",
        "stanton",
        "mach",
        "nahme",
        "local_flux",
        "viscosity",
        "expansion",
        "prandtl",
    }
)
