"""Methods from their inputs alone, without a case: numbers by name, what follows from them, properties of a substance.

``Told`` looks like a state of a case (``inputs.Inputs``) to the choice of methods, and like a view to a method.
"""

from collections.abc import Callable, Mapping
from typing import Any

from cellfuncs.answers import choice
from cellfuncs.answers.inputs import Known, parameter_of
from cellfuncs.errors import CellfuncsError, NumberRefused
from cellfuncs.groups import STANDARD_GRAVITY
from cellfuncs.methods import Method
from cellfuncs.methods.base import following
from cellfuncs.methods.base import inputs as all_inputs

_LIQUID, _VAPOUR = "_liquid", "_vapour"
_PROPERTIES = frozenset(
    ("density", "viscosity", "conductivity", "specific_heat", "prandtl", "surface_tension", "molar_mass")
)


# what else would do, for those who are asked for an input
_INSTEAD = {
    "friction": ' (or the row "relative roughness", 0 for a smooth wall)',
    "x_star": ' (or the rows "length over diameter", "Reynolds number" and "Prandtl number")',
    "x_plus": ' (or the rows "length over diameter" and "Reynolds number")',
}


class Told:
    """Inputs of methods as they are told, with what follows from them."""

    def __init__(self, known: Mapping[str, Any], substance: Any = None, pressure: float | None = None):
        self.known = Known({"gravity": STANDARD_GRAVITY, **known})
        self.substance, self.pressure = substance, pressure

    # -- as a state -------------------------------------------------------------------------

    def choice(self, key: str) -> str | None:
        return self.known.get(key)

    def agrees(self, conditions: tuple[tuple[str, tuple[str, ...]], ...]) -> bool:
        """Whether nothing told contradicts the conditions of a method."""
        return all(self.known.get(key, allowed[0]) in allowed for key, allowed in conditions)

    def view(self, method: Method) -> "Told":
        """The same with the properties of the substance at the temperature that the method means."""
        if self.substance is None:
            return self
        known = dict(self.known)
        if (boiling := _saturation(self)) is not None:
            known.setdefault("saturation_temperature", boiling)
        for name in (*method.inputs, *(parameter_of(r.variable) for r in method.ranges)):
            if name and name not in known:
                value = _property(self, name, method.property_temperature)
                if value is not None:
                    known[name] = value
        return Told(known)

    # -- as a view --------------------------------------------------------------------------

    def get(self, name: str) -> Any:
        """An input, told or following from others; None where it is not known."""
        found = self.known.get(name)
        if found is None and name in _FOLLOWS:
            names, formula = _FOLLOWS[name]
            given = [self.known.get(n) if n != name else None for n in names]
            try:
                found = None if any(value is None for value in given) else formula(*given)
            except ZeroDivisionError:  # of no number at all: what follows from it is not known
                found = None
        return found

    def given(self, method: Method) -> dict[str, Any]:
        return {name: value for name in method.inputs if (value := self.get(name)) is not None}

    def missing(self, method: Method) -> list[str]:
        return [all_inputs()[n].words + _INSTEAD.get(n, "") for n in method.needed if self.get(n) is None]

    def of_symbol(self, symbol: str) -> float | None:
        name = parameter_of(symbol)
        value = None if name is None else self.get(name)
        return following(symbol, self.get) if value is None else value


def evaluate(told: Told, name: str, allow: bool = False) -> float:
    """The number of a named method in SI, its signs and range checked."""
    method = choice.find(name)
    for key, allowed in method.where.items():
        known = told.choice(key)
        if known is not None and known not in allowed:
            raise NumberRefused(f"{method.name} is for {key.replace('_', ' ')} {' or '.join(allowed)}, not {known}")
    view = told.view(method)
    missing = view.missing(method)
    if missing:
        raise NumberRefused(f"{method.name} needs {' and '.join(missing)}")
    given = view.given(method)
    for r in method.ranges:
        parameter = parameter_of(r.variable)
        if parameter and parameter not in given and (value := view.get(parameter)) is not None:
            given[parameter] = value
    return float(method.evaluate(given, allow))


def recommended(told: Told, flow: str, allow: bool = False) -> tuple[Method, float]:
    """The method of a Nusselt number that the rule recommends for a flow kind, and its number."""
    methods = choice.in_order(flow, choice.NUSSELT)
    at_end = flow == "duct" and told.choice("wall") == "flux"
    found = choice.first(told, methods, f"Nusselt number of a {flow}", allow, at_end)
    return found.method, evaluate(told, found.method.name, allow)


# -- what follows ---------------------------------------------------------------------------

_FOLLOWS: Mapping[str, tuple[tuple[str, ...], Callable[..., float]]] = {
    "peclet": (("reynolds", "prandtl"), lambda re, pr: re * pr),
    "grashof": (("rayleigh", "prandtl"), lambda ra, pr: ra / pr),
    "rayleigh": (("grashof", "prandtl"), lambda gr, pr: gr * pr),
    "diameter_over_length": (("length_over_diameter",), lambda slender: 1.0 / slender),
    "length_over_diameter": (("diameter_over_length",), lambda short: 1.0 / short),
    "x_star": (("length_over_diameter", "reynolds", "prandtl"), lambda slender, re, pr: slender / (re * pr)),
    "x_plus": (("length_over_diameter", "reynolds"), lambda slender, re: slender / re),
    "dean": (("reynolds", "curvature"), lambda re, curvature: re * curvature**0.5),
    "pitch_ratio": (("across", "along"), lambda across, along: across / along),
    "bed_reynolds": (("reynolds", "voidage"), lambda re, free: re / (1.0 - free)),
    "void_reynolds": (("reynolds", "voidage"), lambda re, free: re / free),
    "density_ratio": (("density_liquid", "density_vapour"), lambda liquid, vapour: liquid / vapour),
    "wall_superheat": (("wall_temperature", "saturation_temperature"), lambda wall, ts: wall - ts),
    "wall_subcooling": (("wall_temperature", "saturation_temperature"), lambda wall, ts: ts - wall),
    "friction": (("reynolds", "relative_roughness"), lambda re, rough: _friction(re, rough)),
    "film_reynolds": (("film_flow", "viscosity"), lambda flow, viscosity: 4.0 * flow / viscosity),
}


def _friction(reynolds: float, relative_roughness: float) -> float:
    from cellfuncs.answers.friction import friction_factor

    return friction_factor(reynolds, relative_roughness)


# -- properties of a substance ----------------------------------------------------------------


def _saturation(told: Told) -> float | None:
    """Saturation temperature, told or by the substance's own curve at the pressure told."""
    known = told.known.get("saturation_temperature")
    if known is not None or told.pressure is None:
        return known
    try:
        return told.substance.saturation("saturation_temperature", "liquid", pressure=told.pressure)
    except CellfuncsError:
        return None


def _at(told: Told, rule: str) -> float | None:
    """The temperature of a rule, from those told."""
    known, ts = told.known, _saturation(told)
    wall = known.get("wall_temperature")
    stream = known.get("stream_temperature", ts)
    if wall is None and ts is not None:
        above, below = known.get("wall_superheat"), known.get("wall_subcooling")
        wall = ts + above if above is not None else ts - below if below is not None else None
    if rule == "saturation":
        return ts
    if rule in ("film", "vapour film", "mean of the walls") and wall is not None and stream is not None:
        return 0.5 * (wall + stream)
    return wall if rule == "wall" and wall is not None else stream


def _property(told: Told, name: str, rule: str) -> float | None:
    """A property that is not told, from the substance; None where it has none or no temperature is known."""
    substance, pressure = told.substance, told.pressure
    ts = _saturation(told)
    try:
        if name == "saturation_temperature":
            return ts
        if name in ("critical_pressure", "reduced_pressure"):
            critical = substance.limits().p_critical
            if name == "critical_pressure" or critical is None:
                return critical
            return None if pressure is None else pressure / critical
        at = _at(told, rule)
        if name in ("heat_of_vaporisation", "surface_tension", "molar_mass"):
            return substance.get(name, at if ts is None else ts)
        for ending, phase in ((_LIQUID, "liquid"), (_VAPOUR, "vapour")):
            if name.endswith(ending) and name.removesuffix(ending) in _PROPERTIES:
                key = name.removesuffix(ending)
                saturated = rule == "saturation" or (phase == "liquid") == (rule == "vapour film")
                if saturated and ts is not None:  # of the phase that the film is not made of
                    return substance.saturation(key, phase, temperature=ts)
                return substance.get(key, at, pressure, phase)
        if name in _PROPERTIES and at is not None:
            return substance.get(name, at, pressure)
    except CellfuncsError:
        return None
    return None
