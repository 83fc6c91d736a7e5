"""The characteristic numbers that a case determines, what each compares and what its value says here.

The definitions are those of ``groups.py``; words about limits use the limits of the premises.
"""

import inspect
from collections.abc import Callable, Mapping
from functools import cache

from cellfuncs import groups
from cellfuncs.answers import Solution
from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.terms import flow_premises, one_phase
from cellfuncs.terms.facts import FALLING_FILM, Facts
from cellfuncs.terms.size import num, percent
from cellfuncs.terms.thresholds import FAILS, HOLDS, STRAINED, threshold

COLUMNS = ("group", "symbol", "value", "compares", "here")
_DEVELOPED_GRAETZ = 20.0  # x* 0.05 (Shah and London 1978)

Words = Callable[[float, Facts], str]


def group_rows(solution: Solution) -> list[tuple[str, str, float, str, str]]:
    """Rows of the table of groups (without the head), those whose quantities the case has."""
    facts = Facts(solution)
    rows = []
    for key, group in groups.table().items():
        if key not in _HERE:
            continue
        try:
            value = _value(key, facts)
        except (CellfuncsError, AttributeError, TypeError, ArithmeticError):
            continue  # the case does not have what the definition asks for
        rows.append((group.name, group.symbol, value, group.compares, _here(key, value, facts)))
    return rows


def _here(key: str, value: float, f: Facts) -> str:
    """What the value says; what the group decides where nothing is known about it in this flow."""
    try:
        return _HERE[key](value, f)
    except CellfuncsError:
        return f"decides: {groups.table()[key].decides}"


@cache
def _parameters(key: str) -> tuple[str, ...]:
    return tuple(inspect.signature(groups.table()[key].function).parameters)


def _value(key: str, f: Facts) -> float:
    """The group from its definition; what the case does not determine is refused."""
    if key in _ONLY and not _ONLY[key](f):
        raise NoModel("of no use in this flow")
    own = _OWN_INPUTS.get(key, {})
    inputs = {name: (own.get(name) or _INPUTS[name])(f) for name in _parameters(key)}
    return float(groups.table()[key].function(**inputs))


def _expansion(f: Facts) -> float:
    if f.properties.expansion == 0:
        raise NoModel("no expansion coefficient is stated")
    return abs(f.properties.expansion)


def _drop(f: Facts) -> float:
    if f.drop == 0:
        raise NoModel("no pressure drop")
    return f.drop


_INPUTS: Mapping[str, Callable[[Facts], float]] = {
    "velocity": lambda f: f.velocity,
    "length": lambda f: f.group_length,
    "diameter": lambda f: f.group_length,
    "stream_length": lambda f: f.length,
    "time": lambda f: f.stated("time"),
    "frequency": lambda f: 1.0 / f.stated("time"),
    "temperature": lambda f: f.far[1],
    "temperature_difference": lambda f: f.driving,
    "density": lambda f: f.properties.density,
    "viscosity": lambda f: f.properties.viscosity,
    "kinematic_viscosity": lambda f: f.properties.viscosity / f.properties.density,
    "conductivity": lambda f: f.properties.conductivity,
    "specific_heat": lambda f: f.properties.specific_heat,
    "diffusivity": lambda f: f.properties.diffusivity,
    "expansion": _expansion,
    "temperature_coefficient": lambda f: f.thinning,
    "coefficient": lambda f: f.attribute("coefficient", "coefficient"),
    "gravity": lambda f: f.gravity,
    "speed_of_sound": lambda f: f.sound,
    "mean_free_path": lambda f: f.mean_free_path,
    "pressure_difference": _drop,
    "surface_tension": lambda f: f.stated("surface_tension"),
    "angular_velocity": lambda f: f.stated("angular_velocity"),
    "volumetric_source": lambda f: abs(f.stated("volumetric_source")),
    "emissivity": lambda f: f.stated("emissivity"),
}
_OWN_INPUTS: Mapping[str, Mapping[str, Callable[[Facts], float]]] = {
    "strouhal": {"length": lambda f: f.length},
    "biot": {
        "length": lambda f: f.length if f.family == "body" else f.stated("wall_thickness"),
        "conductivity": lambda f: f.properties.conductivity if f.family == "body" else f.stated("wall_conductivity"),
        "coefficient": lambda f: f.coefficient,
    },
    "cavitation": {
        "pressure_absolute": lambda f: f.lowest_pressure,
        # the premise's own figure is this group: its vapour pressure is taken where the premise takes it
        "vapour_pressure": lambda f: (
            f.lowest_pressure - one_phase.cavitation(f).value * 0.5 * f.properties.density * f.velocity**2
        ),
    },
}
_ONLY: Mapping[str, Callable[[Facts], bool]] = {
    "graetz": lambda f: f.family == "through",
    "stanton": lambda f: f.family in ("through", "layer"),
    "heat_colburn": lambda f: f.family in ("through", "layer"),
    "nahme": lambda f: f.flow in ("duct", "gap") and f.laminar and (f.case.substance is None or f.phase != "gas"),
    "richardson": lambda f: f.family in ("through", "layer"),
    "strouhal": lambda f: f.family != "free",
    "galilei": lambda f: f.flow == FALLING_FILM,
    "nusselt": lambda f: f.family != "body",  # the conductivity of a body is not that of the fluid
    "froude": lambda f: f.flow == FALLING_FILM,
}


def _by_limits(premise: str, holds: str, strained: str, fails: str) -> Words:
    """Words by the state that the limits of a premise give."""

    def words(value: float, f: Facts) -> str:
        limits = threshold(premise)
        text = {HOLDS: holds, STRAINED: strained, FAILS: fails}[limits.state(value)]
        return f"{text} (limits {num(limits.strained)} and {num(limits.fails)})"

    return words


def _beside_one(first: str, second: str) -> Words:
    """Words by the side of 1 on which the group lies."""

    def words(value: float, f: Facts) -> str:
        if value > 3.0:
            return f"{first} outweighs {second}, {num(value)} to 1"
        if value == 0.0:
            return f"no {first}"
        if value < 1.0 / 3.0:
            return f"{second} outweighs {first}, {num(1.0 / value)} to 1"
        return f"{first} and {second} are of one size"

    return words


def _prandtl(value: float, f: Facts) -> str:
    if value < 0.1:
        return "heat spreads much farther than momentum, as in liquid metals"
    if value < 1.5:
        return "heat and momentum spread alike, as in gases"
    return f"the thermal layer is thinner than the velocity layer, about {num(value ** (1.0 / 3.0))} times"


def _graetz(value: float, f: Facts) -> str:
    if not f.laminar:
        return "turbulent: the entry is about ten diameters whatever Gz"
    if value <= _DEVELOPED_GRAETZ:
        return "the temperature profile is developed over most of the length"
    return "the temperature profile is developing"


def _buoyancy(value: float, f: Facts) -> str:
    if f.family == "free":
        return flow_premises.regime(f).reason
    figure = flow_premises.mixed_convection(f)
    state = threshold(figure.limits).state(figure.value)
    if f.family == "gap":
        return {HOLDS: "no cells form in the film"}.get(state, "cells may form in the film")
    said = {HOLDS: "forced flow rules", STRAINED: "mixes with the forced flow", FAILS: "buoyancy shapes the flow"}
    return f"{said[state]}, see the premise mixed convection"


def _brinkman(value: float, f: Facts) -> str:
    if f.laminar:
        return f"friction makes about {percent(value)} of what is conducted across"
    return "on one length; a turbulent layer is thinner, see the share of viscous heating"


def _fourier(value: float, f: Facts) -> str:
    if value > 1.0:
        return "heat has had time to cross: the profile follows the change"
    return "heat has reached a skin only" if value < 0.1 else "heat is still crossing"


def _colburn(value: float, f: Facts) -> str:
    friction = getattr(f.answers, "friction", None)
    if f.flow == "duct" and friction:
        return f"beside f/8 = {num(friction / 8.0)} of the analogy"
    return "for charts of surfaces"


_HERE: Mapping[str, Words] = {
    "reynolds": lambda value, f: flow_premises.regime(f).reason,
    "prandtl": _prandtl,
    "peclet": lambda value, f: f"the stream carries {num(value)} times what is conducted along one such length",
    "eckert": lambda value, f: f"kinetic energy is {percent(0.5 * value)} of the enthalpy of the difference",
    "brinkman": _brinkman,
    "nahme": _by_limits(
        "viscosity feedback", "friction does not thin the liquid", "friction thins the liquid somewhat",
        "friction thins the liquid that makes it: do not take viscosity as constant",
    ),
    "grashof": _buoyancy,
    "rayleigh": _buoyancy,
    "richardson": _by_limits(
        "mixed convection, upright surface", "forced flow", "forced and free convection mix", "buoyancy rules",
    ),
    "nusselt": lambda value, f: f"resistance of {num(1000.0 * f.group_length / value)} mm of still fluid",
    "stanton": lambda value, f: f"exchanges {percent(value)} of what it could, on a wall as large as the flow area",
    "graetz": _graetz,
    "biot": _by_limits(
        "lumped body", "one temperature inside", "the inside begins to lag",
        "the inside rules",
    ),
    "fourier": _fourier,
    "mach": _by_limits(
        "density change by velocity", "as incompressible", "density changes with velocity", "compressible flow",
    ),
    "knudsen": _by_limits("continuum", "a continuum", "slip at the wall", "no continuum"),
    "euler": lambda value, f: f"friction takes {num(2.0 * value)} dynamic heads",
    "froude": _beside_one("inertia", "gravity"),
    "weber": _beside_one("inertia", "surface tension"),
    "strouhal": _by_limits(
        "steady stream", "slow change: steady at each moment", "the change is felt along the stream",
        "the change outruns the stream",
    ),
    "capillary": _beside_one("friction", "surface tension"),
    "bond": _beside_one("weight", "surface tension"),
    "galilei": _beside_one("gravity", "friction"),
    "rossby": _beside_one("inertia", "the Coriolis force"),
    "ekman": _beside_one("friction", "the Coriolis force"),
    "cavitation": _by_limits(
        "cavitation", "far from cavitating", "sharp inlets and fittings may cavitate", "the liquid cavitates",
    ),
    "boltzmann": _beside_one("heat carried", "heat radiated"),
    "stark": _beside_one("heat radiated", "heat conducted"),
    "pomerantsev": _beside_one("heat made", "heat conducted"),
    "heat_colburn": _colburn,
}  # fmt: skip
