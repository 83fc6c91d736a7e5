"""Every input that a method may ask of a case, at the temperature at which its author meant properties to be taken.

``Inputs`` is a state of a case: the temperature of the stream, the wall's difference to it, what does not depend on
properties. ``View`` is the same at one property temperature and on one length; it finds inputs when they are asked for.
"""

import math
from collections.abc import Callable, Mapping
from functools import cached_property
from typing import Any

from cellfuncs.cases.case import Case, Properties
from cellfuncs.errors import CellfuncsError
from cellfuncs.groups import grashof, rayleigh
from cellfuncs.methods import Method
from cellfuncs.methods.base import following
from cellfuncs.methods.base import inputs as all_inputs

GAS_CONSTANT = 8.31446261815324  # J/(mol K), exact by definition of the SI
_AT_WALL = ("wall",)
_AT_FILM = ("film", "mean of the walls")

Length = float | Callable[[Properties], float]


class Known(dict[str, Any]):
    """What is known of a case besides its properties: numbers, choices, or functions of a state that give them."""

    @cached_property
    def choices(self) -> tuple[tuple[str, str], ...]:
        """The choices that are settled, as a key."""
        return tuple(sorted((key, value) for key, value in self.items() if isinstance(value, str)))


class Inputs:
    """A state of a case. SI units; temperatures [K]; None for what is not known.

    ``known`` holds inputs and choices that do not depend on properties, ``lengths`` the lengths that methods name
    (``""`` is the usual one), ``bulk`` the temperature of the stream, ``difference`` wall minus stream, ``memo``
    properties by temperature, shared by the states of one solution. What is known may be a function of the state, a
    length one of the properties; ``must`` names inputs that a method has to take.
    """

    def __init__(
        self,
        case: Case,
        known: Mapping[str, Any],
        lengths: Mapping[str, Length],
        bulk: float | None,
        difference: float | None,
        memo: dict[float | None, Properties],
        *,
        gravity: float | None = None,
        flux: float | None = None,
        friction: Callable[["View"], float] | None = None,
    ):
        self.case, self.lengths, self.memo = case, lengths, memo
        self.known = known if isinstance(known, Known) else Known(known)
        self.bulk, self.difference, self.flux, self.gravity = bulk, difference, flux, gravity
        self.friction_of = friction
        self._views: dict[tuple[float | None, str], View] = {}

    # -- temperatures and properties --------------------------------------------------------

    @property
    def wall(self) -> float | None:
        """Temperature of the wall [K]."""
        return None if self.bulk is None or self.difference is None else self.bulk + self.difference

    def temperature(self, rule: str) -> float | None:
        """The temperature that a method's rule means [K]; one that is stated stands before every rule."""
        stated = self.case.get("property_temperature")
        if stated is not None or self.bulk is None or self.difference is None:
            return self.bulk if stated is None else stated
        if rule in _AT_FILM:
            return self.bulk + 0.5 * self.difference
        return self.bulk + self.difference if rule in _AT_WALL else self.bulk

    def properties(self, temperature: float | None) -> Properties:
        """Properties at a temperature, remembered."""
        found = self.memo.get(temperature)
        if found is None:
            found = self.memo[temperature] = self.case.properties(temperature)
        return found

    @cached_property
    def at_wall(self) -> Properties | None:
        """Properties at the wall in the phase of the stream, or None where they are not known."""
        wall, case = self.wall, self.case
        if wall is None or case.fixed:
            return None
        try:
            if {self.phase, case.substance.phase(wall, case.pressure)} == {"liquid", "gas"}:
                return None
            return self.properties(wall)
        except CellfuncsError:
            return None

    @cached_property
    def phase(self) -> str | None:
        """``liquid`` or ``gas`` of the stream, None where it is not known."""
        at = self.case.get("property_temperature", self.bulk)
        if self.case.substance is None or at is None:
            return None
        key = ("phase", at)
        if key not in self.memo:
            try:
                self.memo[key] = self.case.substance.phase(at, self.case.pressure)
            except CellfuncsError:
                self.memo[key] = None
        return self.memo[key]

    # -- choices ----------------------------------------------------------------------------

    def choice(self, key: str) -> str | None:
        """What is known of a condition on choices; None where nothing is."""
        found = self.known.get(key)
        if found is not None:
            return found(self) if callable(found) else found
        if key == "phase":
            return self.phase if self.phase in ("liquid", "gas") else None
        if key == "heating" and self.difference:
            return "heating" if self.difference > 0 else "cooling"
        return None

    def agrees(self, conditions: tuple[tuple[str, tuple[str, ...]], ...]) -> bool:
        """Whether nothing known contradicts the conditions of a method."""
        for key, allowed in conditions:
            found = self.choice(key)
            if found is not None and found not in allowed:
                return False
        return True

    def view(self, method: Method) -> "View":
        """The inputs as a method takes them."""
        return self.view_at(method.property_temperature, method.length)

    def view_at(self, rule: str, length: str = "") -> "View":
        """The inputs at the temperature of a rule, on a length by its words."""
        temperature = self.temperature(rule)
        if length not in self.lengths:
            length = ""
        found = self._views.get((temperature, length))
        if found is None:
            found = self._views[temperature, length] = View(self, temperature, self.lengths[length])
        return found


class View:
    """The inputs of a state at one property temperature and on one length."""

    def __init__(self, state: Inputs, temperature: float | None, length: "Length"):
        self.state, self.temperature = state, temperature
        self.p = state.properties(None if state.case.fixed else temperature)
        self.length = length(self.p) if callable(length) else length
        self._found: dict[str, Any] = {}

    @cached_property
    def velocity(self) -> float | None:
        try:
            return self.state.case.velocity(self.p.density)
        except CellfuncsError:
            return None

    def get(self, name: str) -> Any:
        """An input by its name in Python, None where the case does not tell it."""
        try:
            return self._found[name]
        except KeyError:
            pass
        found = self.state.known.get(name)
        if callable(found):
            found = found(self.state)
        if found is None:
            formula = _FORMULAS.get(name)
            found = formula(self) if formula else self.state.choice(name) if name in _CHOICES else None
        self._found[name] = found
        return found

    def given(self, method: Method) -> dict[str, Any]:
        """What a method's function takes, without what is not known."""
        found = {}
        for name in method.inputs:
            value = self.get(name)
            if value is not None:
                found[name] = value
        return found

    def missing(self, method: Method) -> list[str]:
        """Words of the needed inputs that the case does not tell."""
        return [all_inputs()[name].words for name in method.needed if self.get(name) is None]

    def of_symbol(self, symbol: str) -> float | None:
        """The value of a variable of a range, by its symbol."""
        name = parameter_of(symbol)
        value = None if name is None else self.get(name)
        return following(symbol, self.get) if value is None else value


_BY_SYMBOL: dict[str, str] = {}
_CHOICES = ("phase", "heating")


def parameter_of(symbol: str) -> str | None:
    """The input that a symbol of a range stands for."""
    if not _BY_SYMBOL:
        _BY_SYMBOL.update({entry.symbol: name for name, entry in all_inputs().items()})
    return _BY_SYMBOL.get(symbol)


# -- formulas of the inputs ------------------------------------------------------------------


def _reynolds(v: View) -> float | None:
    u = v.velocity
    return None if u is None else v.p.density * u * v.length / v.p.viscosity


def _product(name: str, other: str) -> Callable[[View], float | None]:
    def product(v: View) -> float | None:
        one, two = v.get(name), v.get(other)
        return None if one is None or two is None else one * two

    return product


def _x_star(v: View) -> float | None:
    slender, peclet = v.get("length_over_diameter"), v.get("peclet")
    return slender / peclet if slender and peclet else None


def _x_plus(v: View) -> float | None:
    slender, reynolds = v.get("length_over_diameter"), v.get("reynolds")
    return slender / reynolds if slender and reynolds else None


def _rayleigh(v: View) -> float | None:
    s, p = v.state, v.p
    if s.gravity is None or not s.difference or p.expansion <= 0:
        return None
    return rayleigh(v.length, abs(s.difference), p.viscosity / p.density, p.diffusivity, p.expansion, s.gravity)


def _grashof(v: View) -> float | None:
    s, p = v.state, v.p
    if s.gravity is None or not s.difference or p.expansion <= 0:
        return None
    return grashof(v.length, abs(s.difference), p.viscosity / p.density, p.expansion, s.gravity)


def _rayleigh_flux(v: View) -> float | None:
    """gβqL⁴/(kνα)."""
    s, p = v.state, v.p
    if s.gravity is None or not s.flux or p.expansion <= 0:
        return None
    kinematic = p.viscosity / p.density
    return s.gravity * p.expansion * abs(s.flux) * v.length**4 / (p.conductivity * kinematic * p.diffusivity)


def _over_height(name: str) -> Callable[[View], float | None]:
    """A Rayleigh number on a spacing, times spacing over height."""

    def scaled(v: View) -> float | None:
        value, height = v.get(name), v.state.known.get("height_of_channel")
        return None if value is None or height is None else value * v.length / height

    return scaled


def _stoutness(v: View) -> float | None:
    slender, gr = v.get("length_over_diameter"), v.get("grashof")
    return None if not slender or gr is None else gr**0.25 / slender


def _mixing(v: View) -> float | None:
    gr, re = v.get("grashof"), v.get("reynolds")
    return None if gr is None or not re else gr / re**2


def _bulk_over_wall(of: Callable[[Properties], float]) -> Callable[[View], float | None]:
    def ratio(v: View) -> float | None:
        s = v.state
        wall = s.at_wall
        if wall is None:
            return None
        return of(s.properties(s.case.get("property_temperature", s.bulk))) / of(wall)

    return ratio


def _temperature_ratio(v: View) -> float | None:
    wall = v.state.wall
    return None if wall is None or v.state.case.fixed else wall / v.state.bulk


def _friction(v: View) -> float | None:
    return None if v.state.friction_of is None else v.state.friction_of(v)


def _smooth_friction(v: View) -> float | None:
    re = v.get("reynolds")
    return None if not re or re < 3000.0 else (0.790 * math.log(re) - 1.64) ** -2.0


def _roughness_reynolds(v: View) -> float | None:
    """Re·√(f/8)·ε/D with f by Haaland's formula."""
    re, rough = v.get("reynolds"), v.get("relative_roughness")
    if re is None or rough is None:
        return None
    if rough == 0 or re < 100.0:
        return 0.0
    from cellfuncs.methods.friction import haaland

    return re * math.sqrt(haaland(re, rough) / 8.0) * rough


def _dean(v: View) -> float | None:
    curvature, re = v.get("curvature"), v.get("reynolds")
    return None if not curvature or re is None else re * math.sqrt(curvature)


def _knudsen(v: View) -> float | None:
    """Mean free path of a gas over the length."""
    case = v.state.case
    if v.state.phase != "gas" or v.temperature is None:
        return None
    try:
        mass = case.substance.get("molar_mass", v.temperature, case.pressure)
    except CellfuncsError:
        return None
    thermal = math.sqrt(math.pi * GAS_CONSTANT * v.temperature / (2.0 * mass))
    return v.p.viscosity / case.pressure * thermal / v.length


def _film_reynolds(v: View) -> float | None:
    flow = v.state.known.get("film_flow")
    return None if flow is None else 4.0 * flow / v.p.viscosity


def _over_solid(v: View) -> float | None:
    re, free = v.get("reynolds"), v.state.known.get("voidage")
    return None if re is None or not free or free >= 1.0 else re / (1.0 - free)


def _over_free(v: View) -> float | None:
    re, free = v.get("reynolds"), v.state.known.get("voidage")
    return None if re is None or not free else re / free


def _property(name: str) -> Callable[[View], float]:
    return lambda v: getattr(v.p, name)


_FORMULAS: Mapping[str, Callable[[View], Any]] = {
    "reynolds": _reynolds,
    "prandtl": _property("prandtl"),
    "peclet": _product("reynolds", "prandtl"),
    "x_star": _x_star,
    "x_plus": _x_plus,
    "grashof": _grashof,
    "rayleigh": _rayleigh,
    "rayleigh_flux": _rayleigh_flux,
    "elenbaas": _over_height("rayleigh"),
    "elenbaas_flux": _over_height("rayleigh_flux"),
    "stoutness": _stoutness,
    "mixing": _mixing,
    "viscosity_ratio": _bulk_over_wall(lambda p: p.viscosity),
    "prandtl_ratio": _bulk_over_wall(lambda p: p.prandtl),
    "temperature_ratio": _temperature_ratio,
    "friction": _friction,
    "smooth_friction": _smooth_friction,
    "roughness_reynolds": _roughness_reynolds,
    "dean": _dean,
    "knudsen": _knudsen,
    "film_reynolds": _film_reynolds,
    "bed_reynolds": _over_solid,
    "void_reynolds": _over_free,
    "density": _property("density"),
    "viscosity": _property("viscosity"),
    "conductivity": _property("conductivity"),
    "specific_heat": _property("specific_heat"),
    "velocity": lambda v: v.velocity,
}
