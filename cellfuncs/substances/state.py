"""One AbstractState of CoolProp with its readers, and what guards of states share."""

import math

from .engine import coolprop
from .texts import kelvin, pascal

NEAR_CRITICAL_T = 0.01  # share of the critical temperature ...
NEAR_CRITICAL_P = 0.05  # ... and pressure, within which diverging properties are refused
NEAR_SATURATION = 1e-5  # relative in pressure: nearer than this liquid or vapour must be said
ORDINARY_PRESSURE = 1e7  # [Pa] the melting line is looked at in two steps, for speed
SURE = 0.10  # farther from the saturation ancillary than this no exact saturation pressure is needed
HUGE = 1e300
# These diverge or dip at the critical point, or rest on quantities that do.
DIVERGING = frozenset(
    [
        "viscosity",
        "kinematic_viscosity",
        "conductivity",
        "specific_heat",
        "thermal_diffusivity",
        "prandtl",
        "expansion_coefficient",
        "speed_of_sound",
    ]
)
SIGNED = frozenset(("enthalpy", "entropy", "expansion_coefficient"))
NEEDS_VISCOSITY = frozenset(("viscosity", "kinematic_viscosity", "prandtl"))
NEEDS_CONDUCTIVITY = frozenset(("conductivity", "thermal_diffusivity", "prandtl"))
ESTIMATES = {
    "ECS": "estimated by extended corresponding states, about 20 %",
    "Chung": "estimated by the method of Chung et al., about 20 %",
    "rhosr-CS": "estimated by residual-entropy scaling, about 10 %",
}


class _Codes:
    """CoolProp's input codes, read when the first fluid is opened (importing CoolProp takes seconds)."""

    __slots__ = ("pq", "pressure", "pt", "qt", "temperature")

    def __init__(self):
        self.pt = self.qt = self.pq = self.pressure = self.temperature = 0

    def load(self) -> None:
        """Read the codes from the module."""
        module = coolprop()
        self.pt, self.qt, self.pq = module.PT_INPUTS, module.QT_INPUTS, module.PQ_INPUTS
        self.pressure, self.temperature = module.iP, module.iT


CODES = _Codes()


class Handle:
    """One AbstractState of one thread, with the state it stands at (nan: unknown)."""

    __slots__ = ("ancillary", "p", "read", "state", "t", "update")

    def __init__(self, state, has_viscosity: bool, has_conductivity: bool):
        self.state = state
        self.update = state.update
        self.ancillary = state.saturation_ancillary
        self.t = self.p = math.nan
        density, heat = state.rhomass, state.cpmass
        self.read = {
            "density": density,
            "specific_heat": heat,
            "expansion_coefficient": state.isobaric_expansion_coefficient,
            "speed_of_sound": state.speed_sound,
            "enthalpy": state.hmass,
            "entropy": state.smass,
        }
        if has_viscosity:
            viscosity = state.viscosity
            self.read["viscosity"] = viscosity
            self.read["kinematic_viscosity"] = lambda: viscosity() / density()
        if has_conductivity:
            conductivity = state.conductivity
            self.read["conductivity"] = conductivity
            self.read["thermal_diffusivity"] = lambda: conductivity() / (density() * heat())
        if has_viscosity and has_conductivity:
            self.read["prandtl"] = lambda: viscosity() * heat() / conductivity()


def melting_temperature(state, pressure: float) -> float | None:
    """The melting temperature [K] at a pressure [Pa]; None outside the melting line that CoolProp knows."""
    module = coolprop()
    if not state.has_melting_line():
        return None
    try:
        melting = state.melting_line(module.iT, module.iP, pressure)
    except ValueError:
        return None
    return melting if math.isfinite(melting) and melting > 0 else None


def place(temperature: float, pressure: float) -> str:
    parts = []
    if math.isfinite(temperature):
        parts.append(kelvin(temperature))
    if math.isfinite(pressure):
        parts.append(pascal(pressure))
    return " and ".join(parts)
