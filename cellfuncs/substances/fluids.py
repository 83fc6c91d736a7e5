"""Pure and pseudo-pure fluids from CoolProp's equations of state, with the guards that CoolProp leaves out.

CoolProp answers far outside its ranges, inside the two-phase region and at the critical point, mostly without an
error. Here a state is checked first, by plain comparisons where it is clearly fine (the usual case, see
``PureFluid.get``) and step by step with a text that names the limit where it is not (``_careful``).
"""

import copy
import math
import threading

import numpy as np

from ..errors import CellfuncsError, NoModel, OutOfRange
from .base import ATMOSPHERE, PLAUSIBLE_PRESSURE, Limits, Substance, check_state, near_vacuum, phase_word
from .engine import coolprop, open_state
from .properties import PROPERTIES, property_key
from .texts import kelvin, pascal

NEAR_CRITICAL_T = 0.01  # share of the critical temperature ...
NEAR_CRITICAL_P = 0.05  # ... and pressure, within which diverging properties are refused
NEAR_SATURATION = 1e-5  # relative in pressure: nearer than this liquid or vapour must be said
SURE = 0.10  # farther from the saturation ancillary than this no exact saturation pressure is needed
HUGE = 1e300
# These diverge or dip at the critical point, or rest on quantities that do.
DIVERGING = frozenset(
    ["viscosity", "kinematic_viscosity", "conductivity", "specific_heat", "thermal_diffusivity", "prandtl", "expansion_coefficient", "speed_of_sound"]
)
SIGNED = frozenset(("enthalpy", "entropy", "expansion_coefficient"))
NEEDS_VISCOSITY = frozenset(("viscosity", "kinematic_viscosity", "prandtl"))
NEEDS_CONDUCTIVITY = frozenset(("conductivity", "thermal_diffusivity", "prandtl"))
ESTIMATES = {
    "ECS": "estimated by extended corresponding states, about 20 %",
    "Chung": "estimated by the method of Chung et al., about 20 %",
    "rhosr-CS": "estimated by residual-entropy scaling, about 10 %",
}


class _Handle:
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


class PureFluid(Substance):
    """A pure or pseudo-pure fluid by its equation of state; made by ``names.find``, one object a fluid."""

    family = "pure fluid"

    def __init__(self, name: str, row: dict[str, str]):
        self.name = name
        self.key = row["key"]
        self.pseudo_pure = row["pseudo_pure"] == "yes"
        self.molar_mass = float(row["molar_mass"])
        self._row = row
        self._t_min, self._t_max, self._p_max, self._t_critical, self._p_critical, t_triple = (
            float(row[column]) for column in ["t_min", "t_max", "p_max", "t_critical", "p_critical", "t_triple"]
        )
        self._limits = Limits(
            self._t_min,
            self._t_max,
            self._p_max,
            row["eos_source"],
            self._t_critical,
            self._p_critical,
            t_triple,
        )
        self._box = (
            self._t_critical * (1 - NEAR_CRITICAL_T),
            self._t_critical * (1 + NEAR_CRITICAL_T),
            self._p_critical * (1 - NEAR_CRITICAL_P),
            self._p_critical * (1 + NEAR_CRITICAL_P),
        )
        self._stated: str | None = None
        self._t_sure = math.inf  # above this no melting line is near; found at the first touch
        self._threads = threading.local()

    def in_phase(self, phase: str) -> "PureFluid":
        """Return this fluid with its phase stated ("liquid", "gas"); the states are shared."""
        other = copy.copy(self)
        other._stated = phase_word(phase)
        other.name = f"{self.name} {'vapour' if other._stated == 'gas' else other._stated}"
        return other

    # ---- the fast path

    def get(
        self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None
    ) -> float:
        """Return property `what` [SI]; see ``Substance.get``.

        The state of the last call is kept: further properties of the same state cost no new update.
        """
        try:
            handle = self._threads.handle
        except AttributeError:
            handle = self._open()
        read = handle.read.get(what)
        if pressure is None:
            pressure = ATMOSPHERE
        if read is None or phase is not None or self._stated is not None:
            return self._slowly(handle, what, temperature, pressure, phase)
        if temperature != handle.t or pressure != handle.p:
            if not (
                self._t_sure < temperature <= self._t_max and PLAUSIBLE_PRESSURE <= pressure <= self._p_max
            ):
                return self._slowly(handle, what, temperature, pressure, None)
            if temperature < self._t_critical:
                # 0.2 us, and within 5 % of the exact saturation pressure wherever that exceeds 500 Pa
                ratio = pressure / handle.ancillary(_SATURATION_P, 0, _SATURATION_T, temperature)
                if 1 - SURE < ratio < 1 + SURE or self.pseudo_pure:
                    return self._slowly(handle, what, temperature, pressure, None)
            t_low, t_high, p_low, p_high = self._box
            if t_low < temperature < t_high and p_low < pressure < p_high:
                return self._slowly(handle, what, temperature, pressure, None)
            handle.t = math.nan
            try:
                handle.update(_PT, pressure, temperature)
            except ValueError as error:
                raise self._no_solution(temperature, pressure) from error
            handle.t = temperature
            handle.p = pressure
        try:
            value = read()
        except ValueError as error:
            raise self._not_given(what, temperature, pressure) from error
        if 0.0 < value < HUGE:
            return value
        return self._checked(what, value, temperature, pressure)

    def _fill(self, keys, temperatures, pressures, phase, values) -> list[tuple[int, CellfuncsError]]:
        handle = self._handle()
        reads = [handle.read.get(key) for key in keys]
        if None in reads or phase is not None or self._stated is not None or self.pseudo_pure:
            return super()._fill(keys, temperatures, pressures, phase, values)
        plain = self._plain(handle, temperatures, pressures)
        update, pair = handle.update, _PT
        handle.t = math.nan
        rows, careful, gap = [], [], [math.nan] * len(keys)
        add = rows.append
        for index, (temperature, pressure, clear) in enumerate(
            zip(temperatures.tolist(), pressures.tolist(), plain.tolist(), strict=True)
        ):
            if clear:
                try:
                    update(pair, pressure, temperature)
                    add([read() for read in reads])
                    continue
                except ValueError:
                    pass  # asked again below, with a text
            add(gap)
            careful.append(index)
        values[:] = np.array(rows).T
        unsigned = np.array([key not in SIGNED for key in keys])
        odd = ~np.isfinite(values).all(axis=0) | (values[unsigned] <= 0).any(axis=0)
        odd[careful] = True
        indices = np.flatnonzero(odd)
        part = np.empty((len(keys), len(indices)))
        faults = super()._fill(keys, temperatures[indices], pressures[indices], phase, part)
        values[:, indices] = part
        return [(int(indices[index]), error) for index, error in faults]

    def _plain(self, handle: _Handle, temperatures: np.ndarray, pressures: np.ndarray) -> np.ndarray:
        """True where the comparisons of ``get`` find a state clearly fine."""
        t_low, t_high, p_low, p_high = self._box
        boxed = (t_low < temperatures) & (temperatures < t_high) & (p_low < pressures) & (pressures < p_high)
        plain = (
            (self._t_sure < temperatures)
            & (temperatures <= self._t_max)
            & (pressures >= PLAUSIBLE_PRESSURE)
            & (pressures <= self._p_max)
            & ~boxed
        )
        below = np.flatnonzero(plain & (temperatures < self._t_critical))
        ancillary, p_code, t_code = handle.ancillary, _SATURATION_P, _SATURATION_T
        line = np.array([ancillary(p_code, 0, t_code, value) for value in temperatures[below].tolist()])
        plain[below] = np.abs(pressures[below] / line - 1) >= SURE
        return plain

    # ---- the careful path

    def _slowly(self, handle: _Handle, what: str, temperature: float, pressure: float, phase: str | None):
        """Check step by step, with a text for each limit, then answer."""
        key = property_key(what)
        phase = phase_word(phase) or self._stated
        if key == "molar_mass":
            return self.molar_mass
        if key in ("saturation_pressure", "heat_of_vaporisation", "surface_tension"):
            return self.saturation(key, phase, temperature=temperature)
        if key == "saturation_temperature":
            return self.saturation(key, phase, pressure=pressure)
        read = handle.read.get(key)
        if read is None:
            raise self._no_model(key)
        temperature, pressure = float(temperature), float(pressure)
        region = self._region(handle, temperature, pressure, phase)
        if key in DIVERGING and self._near_critical(temperature, pressure):
            raise self._critical_text(key)
        if region == "boundary":
            return self._on_the_line(handle, key, temperature, pressure, phase)
        handle.t = math.nan
        try:
            handle.update(_PT, pressure, temperature)
        except ValueError as error:
            raise self._no_solution(temperature, pressure) from error
        if not self._near_critical(temperature, pressure) and phase is None:
            handle.t, handle.p = temperature, pressure
        try:
            return self._checked(key, read(), temperature, pressure)
        except ValueError as error:
            if isinstance(error, CellfuncsError):
                raise
            raise self._not_given(key, temperature, pressure) from error

    def _region(self, handle: _Handle, temperature: float, pressure: float, phase: str | None) -> str:
        """Return "liquid", "gas", "supercritical", or "boundary" where only a stated phase decides."""
        check_state(self.name, temperature, pressure, self._t_min, self._t_max, self._p_max)
        if pressure < PLAUSIBLE_PRESSURE and phase is None:
            raise near_vacuum(self.name, pressure)
        self._check_frozen(handle.state, temperature, pressure)
        if temperature >= self._t_critical:
            region = "supercritical" if pressure >= self._p_critical else "gas"
            # Above the critical temperature "vapour" is how people say it at any pressure.
            if phase is None or phase == region or (phase, region) == ("gas", "supercritical"):
                return region
            raise OutOfRange(
                f"{self._bare} is {region} at {kelvin(temperature)} and {pascal(pressure)}, not {phase}: "
                f"its critical temperature is {kelvin(self._t_critical)}"
            )
        bubble, dew = self._saturation_pressures(handle, temperature)
        if pressure > bubble * (1 + NEAR_SATURATION):
            region = "liquid"
        elif pressure < dew * (1 - NEAR_SATURATION):
            region = "gas"
        elif self.pseudo_pure and dew * (1 + NEAR_SATURATION) < pressure < bubble * (1 - NEAR_SATURATION):
            raise OutOfRange(
                f"{self._bare} is boiling at {kelvin(temperature)} and {pascal(pressure)}, between its dew "
                f"pressure {pascal(dew)} and its bubble pressure {pascal(bubble)}: no single value holds"
            )
        else:
            region = "boundary"
        if region == "boundary" and phase not in ("liquid", "gas"):
            raise OutOfRange(
                f"{self._bare} boils at {kelvin(temperature)} and {pascal(pressure)}: "
                f"write {self._bare} liquid or {self._bare} vapour"
            )
        if region != "boundary" and phase not in (None, region):
            side = f"at least {pascal(bubble)}" if phase == "liquid" else f"at most {pascal(dew)}"
            raise OutOfRange(
                f"{self._bare} at {kelvin(temperature)} and {pascal(pressure)} is "
                f"{'vapour' if region == 'gas' else region}; {'vapour' if phase == 'gas' else phase} "
                + (f"needs {side}" if phase != "supercritical" else f"needs {kelvin(self._t_critical)}")
            )
        return region

    def _check_frozen(self, state, temperature: float, pressure: float) -> None:
        """Refuse a state beyond the melting line, where CoolProp knows one."""
        if temperature > self._t_sure:
            return
        melting = _melting_temperature(state, pressure)
        if melting is not None and temperature < melting:
            raise OutOfRange(
                f"{self._bare} is solid at {kelvin(temperature)} and {pascal(pressure)}: "
                f"it melts at {kelvin(melting)}"
            )

    def _saturation_pressures(self, handle: _Handle, temperature: float) -> tuple[float, float]:
        """Bubble and dew pressure [Pa] (the same for a pure fluid) at a temperature [K]."""
        handle.t = math.nan
        try:
            handle.update(_QT, 0.0, temperature)
            bubble = handle.state.p()
            if not self.pseudo_pure:
                return bubble, bubble
            handle.update(_QT, 1.0, temperature)
            return bubble, handle.state.p()
        except ValueError:  # a hair below the critical point; the ancillaries hold there
            return (
                handle.ancillary(_SATURATION_P, 0, _SATURATION_T, temperature),
                handle.ancillary(_SATURATION_P, 1, _SATURATION_T, temperature),
            )

    def _on_the_line(self, handle: _Handle, key: str, temperature: float, pressure: float, phase: str):
        """The stated phase within 1e-5 of the saturation pressure: the equation's own root, else saturation."""
        module, state = coolprop(), handle.state
        handle.t = math.nan
        try:
            state.specify_phase(module.iphase_liquid if phase == "liquid" else module.iphase_gas)
            handle.update(_PT, pressure, temperature)
            return self._checked(key, handle.read[key](), temperature, pressure)
        except ValueError as error:
            if isinstance(error, CellfuncsError):
                raise
        finally:
            state.unspecify_phase()
        return self.saturation(key, phase, temperature=temperature)

    # ---- saturation

    def saturation(
        self,
        what: str,
        phase: str | None = None,
        temperature: float | None = None,
        pressure: float | None = None,
    ) -> float:
        """Return property `what` [SI] of the saturated liquid or vapour; see ``Substance.saturation``.

        Saturation pressure and temperature, heat of vaporisation and surface tension need no phase (of a
        pseudo-pure fluid, whose bubble and dew lines differ, the first two do).
        """
        key = property_key(what)
        phase = phase_word(phase) or self._stated
        if key == "molar_mass":
            return self.molar_mass
        handle = self._handle()
        inputs = self._saturation_inputs(handle, temperature, pressure)
        if key == "surface_tension":
            return self._surface_tension(handle, inputs)
        if key == "heat_of_vaporisation":
            vapour = self._saturated(handle, inputs, 1.0).hmass()
            return self._checked(key, vapour - self._saturated(handle, inputs, 0.0).hmass(), *inputs[1:])
        if phase not in ("liquid", "gas"):
            if key not in ("saturation_pressure", "saturation_temperature"):
                raise OutOfRange(f"which phase of saturated {self._bare}: liquid or vapour?")
            if self.pseudo_pure:
                raise OutOfRange(
                    f"bubble and dew lines of {self._bare} differ: write liquid for the bubble line "
                    "or vapour for the dew line"
                )
        state = self._saturated(handle, inputs, 1.0 if phase == "gas" else 0.0)
        if key == "saturation_pressure":
            return self._checked(key, state.p(), *inputs[1:])
        if key == "saturation_temperature":
            return self._checked(key, state.T(), *inputs[1:])
        read = handle.read.get(key)
        if read is None:
            raise self._no_model(key)
        if key in DIVERGING and self._near_critical(state.T(), state.p()):
            raise self._critical_text(key)
        try:
            value = read()
        except ValueError as error:
            raise self._not_given(key, state.T(), state.p()) from error
        return self._checked(key, value, state.T(), state.p())

    def _saturation_inputs(self, handle: _Handle, temperature, pressure) -> tuple[str, float, float]:
        """Check the place on the saturation line; return ("T" or "p", temperature, pressure)."""
        if (temperature is None) == (pressure is None):
            raise OutOfRange("a saturated state needs a temperature or a pressure, one of the two")
        if temperature is not None:
            temperature = float(temperature)
            if not self._t_min <= temperature < self._t_critical:
                raise OutOfRange(
                    f"{self._bare} has no saturation line at {kelvin(temperature)}: it runs from "
                    f"{kelvin(self._t_min)} to the critical point, {kelvin(self._t_critical)}"
                )
            return "T", temperature, math.nan
        pressure = float(pressure)
        lowest = self._saturation_pressures(handle, self._t_min)[1]
        if not lowest <= pressure < self._p_critical:
            raise OutOfRange(
                f"{self._bare} has no saturation line at {pascal(pressure)}: it runs from {pascal(lowest)} "
                f"to the critical point, {pascal(self._p_critical)}"
            )
        return "p", math.nan, pressure

    def _saturated(self, handle: _Handle, inputs: tuple[str, float, float], quality: float):
        """The state on the saturation line."""
        handle.t = math.nan
        kind, temperature, pressure = inputs
        try:
            if kind == "T":
                handle.update(_QT, quality, temperature)
            else:
                handle.update(_PQ, pressure, quality)
        except ValueError as error:
            raise self._no_solution(temperature, pressure) from error
        return handle.state

    def _surface_tension(self, handle: _Handle, inputs: tuple[str, float, float]) -> float:
        if self._row["surface_tension"] != "yes":
            raise self._no_model("surface_tension")
        state = self._saturated(handle, inputs, 0.0)
        if self.key == "Water":
            return water_surface_tension(state.T())
        try:
            return self._checked("surface_tension", state.surface_tension(), state.T(), state.p())
        except ValueError as error:
            if isinstance(error, CellfuncsError):
                raise
            raise self._not_given("surface_tension", state.T(), state.p()) from error

    # ---- what it says about itself

    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return "liquid", "gas" or "supercritical"; on the saturation line the stated phase decides."""
        pressure = ATMOSPHERE if pressure is None else float(pressure)
        region = self._region(self._handle(), float(temperature), pressure, self._stated)
        return self._stated if region == "boundary" else region

    def source(self, what: str) -> str:
        """Return the bibliography key behind a property; several are parted by ";"."""
        key, row = property_key(what), self._row
        parts = []
        if key == "surface_tension":
            parts.append(row["surface_tension_source"])
        if key in NEEDS_VISCOSITY:
            parts.append(row["viscosity_source"])
        if key in NEEDS_CONDUCTIVITY:
            parts.append(row["conductivity_source"])
        if key not in ("surface_tension", "viscosity", "conductivity"):
            parts.append(row["eos_source"])
        if "" in parts:
            raise self._no_model(key)
        return ";".join(dict.fromkeys(";".join(parts).split(";")))

    def note(self, what: str) -> str:
        """Return estimates with their model class and uncertainty, and reference states."""
        key = property_key(what)
        notes = []
        for words, keys in (("viscosity", NEEDS_VISCOSITY), ("conductivity", NEEDS_CONDUCTIVITY)):
            estimate = ESTIMATES.get(self._row[words + "_model"].split(" ")[0])
            if key in keys and estimate:
                notes.append(f"{words} {estimate}")
        if key in ("enthalpy", "entropy"):
            reference = self._row["reference_state"]
            notes.append(f"only differences count; reference: {reference}")
        if self.pseudo_pure:
            notes.append("mixture treated as one fluid (pseudo-pure)")
        return "; ".join(notes)

    def limits(self) -> Limits:
        """Return the range of the equation of state."""
        return self._limits

    # ---- helpers

    @property
    def _bare(self) -> str:
        """The name without a stated phase."""
        return self.name.rsplit(" ", 1)[0] if self._stated else self.name

    def _handle(self) -> _Handle:
        try:
            return self._threads.handle
        except AttributeError:
            return self._open()

    def _open(self) -> _Handle:
        """Open this thread's state, and find once above which temperature nothing can be frozen."""
        _read_codes()
        state = open_state("HEOS", self.key)
        row = self._row
        handle = _Handle(state, row["viscosity_model"] != "none", row["conductivity_model"] != "none")
        if self._t_sure == math.inf:
            self._t_sure = self._highest_melting(state)
        self._threads.handle = handle
        return handle

    def _highest_melting(self, state) -> float:
        """The highest melting temperature up to the highest pressure [K], or just below t_min without one."""
        found = [self._t_min]
        if state.has_melting_line():
            for pressure in np.geomspace(1e3, self._p_max, 60):
                melting = _melting_temperature(state, float(pressure))
                if melting is not None:
                    found.append(melting + 1.0)
        return math.nextafter(max(found), 0.0)

    def _near_critical(self, temperature: float, pressure: float) -> bool:
        t_low, t_high, p_low, p_high = self._box
        return t_low < temperature < t_high and p_low < pressure < p_high

    def _critical_text(self, key: str) -> OutOfRange:
        return OutOfRange(
            f"within 1 % of the critical temperature of {self._bare} ({kelvin(self._t_critical)}) and 5 % of its "
            f"pressure ({pascal(self._p_critical)}) the {PROPERTIES[key].words} runs away: no value"
        )

    def _no_solution(self, temperature: float, pressure: float) -> OutOfRange:
        return OutOfRange(f"the equation of state of {self._bare} has no answer at {_place(temperature, pressure)}")

    def _not_given(self, key: str, temperature: float, pressure: float) -> NoModel:
        return NoModel(
            f"the model of the {PROPERTIES[property_key(key)].words} of {self._bare} gives no value at "
            f"{_place(temperature, pressure)}"
        )

    def _checked(self, key: str, value: float, temperature: float, pressure: float) -> float:
        """Pass a value that can be true; refuse infinities, NaN, and zero or less where there is no such thing."""
        if math.isfinite(value) and (value > 0 or key in SIGNED):
            return value
        raise self._not_given(key, temperature, pressure)


def _place(temperature: float, pressure: float) -> str:
    parts = []
    if math.isfinite(temperature):
        parts.append(kelvin(temperature))
    if math.isfinite(pressure):
        parts.append(pascal(pressure))
    return " and ".join(parts)


def water_surface_tension(temperature: float) -> float:
    """Surface tension of ordinary water against its vapour [N/m], 273.16 K to 647.096 K (IAPWS R1-76)."""
    tau = 1 - temperature / 647.096
    return 235.8e-3 * tau**1.256 * (1 - 0.625 * tau)


# CoolProp's input codes, read when the first fluid is opened (importing CoolProp takes seconds).
_PT = _QT = _PQ = _SATURATION_P = _SATURATION_T = 0


def _read_codes() -> None:
    global _PT, _QT, _PQ, _SATURATION_P, _SATURATION_T
    module = coolprop()
    _PT, _QT, _PQ = module.PT_INPUTS, module.QT_INPUTS, module.PQ_INPUTS
    _SATURATION_P, _SATURATION_T = module.iP, module.iT


def _melting_temperature(state, pressure: float) -> float | None:
    """The melting temperature [K] at a pressure [Pa]; None outside the melting line that CoolProp knows."""
    module = coolprop()
    if not state.has_melting_line():
        return None
    try:
        melting = state.melting_line(module.iT, module.iP, pressure)
    except ValueError:
        return None
    return melting if math.isfinite(melting) and melting > 0 else None
