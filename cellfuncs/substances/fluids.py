"""Pure and pseudo-pure fluids from CoolProp's equations of state, with the guards that CoolProp leaves out.

CoolProp answers far outside its ranges, inside the two-phase region and at the critical point, mostly without
an error. Here a state is checked first, by plain comparisons where it is clearly fine (the usual case, see
``PureFluid.get``) and step by step with a text that names the limit where it is not (``_slowly``).
"""

from __future__ import annotations

import copy
import math
import threading
from operator import call
from typing import TYPE_CHECKING

from ..errors import CellfuncsError, OutOfRange
from .additions import AddedTransport, extrapolation_note
from .base import ATMOSPHERE, PLAUSIBLE_PRESSURE, Limits, Substance, check_state, near_vacuum, phase_word
from .engine import coolprop, open_state
from .properties import property_key
from .saturation import SaturationLine
from .state import (
    CODES,
    DIVERGING,
    ESTIMATES,
    NEAR_CRITICAL_P,
    NEAR_CRITICAL_T,
    NEAR_SATURATION,
    NEEDS_CONDUCTIVITY,
    NEEDS_VISCOSITY,
    ORDINARY_PRESSURE,
    SIGNED,
    SURE,
    Handle,
    melting_temperature,
)

if TYPE_CHECKING:
    import numpy as np
from .texts import kelvin, pascal


class PureFluid(SaturationLine, AddedTransport, Substance):
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
        # Above these no melting line is near, up to ORDINARY_PRESSURE and at any pressure.
        self._t_clear = self._t_sure = math.inf
        self._threads = threading.local()

    def in_phase(self, phase: str) -> PureFluid:
        """Return this fluid with its phase stated ("liquid", "gas"); the states are shared."""
        other = copy.copy(self)
        other._stated = phase_word(phase)
        other.name = f"{self.name} {'vapour' if other._stated == 'gas' else other._stated}"
        return other

    # ---- the fast path

    def get(self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None) -> float:
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
            melting = self._t_clear if pressure <= ORDINARY_PRESSURE else self._t_sure
            if not (melting < temperature <= self._t_max and PLAUSIBLE_PRESSURE <= pressure <= self._p_max):
                return self._slowly(handle, what, temperature, pressure, None)
            if temperature < self._t_critical:
                # 0.2 us, and within 5 % of the exact saturation pressure wherever that exceeds 500 Pa
                ratio = pressure / handle.ancillary(CODES.pressure, 0, CODES.temperature, temperature)
                if 1 - SURE < ratio < 1 + SURE or self.pseudo_pure:
                    return self._slowly(handle, what, temperature, pressure, None)
            t_low, t_high, p_low, p_high = self._box
            if t_low < temperature < t_high and p_low < pressure < p_high:
                return self._slowly(handle, what, temperature, pressure, None)
            handle.t = math.nan
            try:
                handle.update(CODES.pt, pressure, temperature)
            except ValueError as error:
                raise self._no_solution(temperature, pressure) from error
            handle.t = temperature
            handle.p = pressure
        try:
            value = read()
        except ValueError as error:
            raise self._not_given(what, temperature, pressure) from error
        if 0.0 < value < 1e300:
            return value
        return self._checked(what, value, temperature, pressure)

    def _fill(self, keys, temperatures, pressures, phase, values) -> list[tuple[int, CellfuncsError]]:
        handle = self._handle()
        reads = [handle.read.get(key) for key in keys]
        if None in reads or phase is not None or self._stated is not None:
            return super()._fill(keys, temperatures, pressures, phase, values)
        plain = self._plain(handle, temperatures, pressures)
        update, pair = handle.update, CODES.pt
        handle.t = math.nan
        careful, flat, width = [], [], len(keys)
        extend, gap = flat.extend, [math.nan] * width
        points = zip(temperatures.tolist(), pressures.tolist(), plain.tolist(), strict=True)
        for index, (temperature, pressure, clear) in enumerate(points):
            if clear:
                try:
                    update(pair, pressure, temperature)
                    extend(map(call, reads))
                    continue
                except ValueError:
                    del flat[index * width :]  # asked again below, with a text
            extend(gap)
            careful.append(index)
        import numpy as np

        values[:] = np.array(flat).reshape(-1, width).T
        unsigned = np.array([key not in SIGNED for key in keys])
        odd = ~np.isfinite(values).all(axis=0) | (values[unsigned] <= 0).any(axis=0)
        odd[careful] = True
        indices = np.flatnonzero(odd)
        part = np.empty((len(keys), len(indices)))
        faults = super()._fill(keys, temperatures[indices], pressures[indices], phase, part)
        values[:, indices] = part
        return [(int(indices[index]), error) for index, error in faults]

    def _plain(self, handle: Handle, temperatures: np.ndarray, pressures: np.ndarray) -> np.ndarray:
        """True where the comparisons of ``get`` find a state clearly fine."""
        import numpy as np

        t_low, t_high, p_low, p_high = self._box
        boxed = (t_low < temperatures) & (temperatures < t_high) & (p_low < pressures) & (pressures < p_high)
        melting = np.where(pressures <= ORDINARY_PRESSURE, self._t_clear, self._t_sure)
        plain = (
            (melting < temperatures)
            & (temperatures <= self._t_max)
            & (pressures >= PLAUSIBLE_PRESSURE)
            & (pressures <= self._p_max)
            & ~boxed
        )
        below = np.flatnonzero(plain & (temperatures < self._t_critical))
        if self.pseudo_pure:  # bubble and dew differ: each of these points is asked for with care
            plain[below] = False
            return plain
        ancillary, p_code, t_code = handle.ancillary, CODES.pressure, CODES.temperature
        line = np.array([ancillary(p_code, 0, t_code, value) for value in temperatures[below].tolist()])
        plain[below] = np.abs(pressures[below] / line - 1) >= SURE
        return plain

    # ---- the careful path

    def _slowly(self, handle: Handle, what: str, temperature: float, pressure: float, phase: str | None):
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
        if read is None and not self._can_add(key):
            raise self._no_model(key)
        temperature, pressure = float(temperature), float(pressure)
        region = self._region(handle, temperature, pressure, phase)
        if key in DIVERGING and self._near_critical(temperature, pressure):
            raise self._critical_text(key)
        if region == "boundary":
            return self._on_the_line(handle, key, temperature, pressure, phase)
        handle.t = math.nan
        try:
            handle.update(CODES.pt, pressure, temperature)
        except ValueError as error:
            raise self._no_solution(temperature, pressure) from error
        if not self._near_critical(temperature, pressure) and phase is None:
            handle.t, handle.p = temperature, pressure
        try:
            value = read() if read else self._added(handle, key, region)
            return self._checked(key, value, temperature, pressure)
        except ValueError as error:
            if isinstance(error, CellfuncsError):
                raise
            raise self._not_given(key, temperature, pressure) from error

    def _region(self, handle: Handle, temperature: float, pressure: float, phase: str | None) -> str:
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
        melting = melting_temperature(state, pressure)
        if melting is not None and temperature < melting:
            raise OutOfRange(
                f"{self._bare} is solid at {kelvin(temperature)} and {pascal(pressure)}: it melts at {kelvin(melting)}"
            )

    def _on_the_line(self, handle: Handle, key: str, temperature: float, pressure: float, phase: str):
        """The stated phase within 1e-5 of the saturation pressure: the equation's root, else saturation."""
        if key not in handle.read:
            return self.saturation(key, phase, temperature=temperature)
        module, state = coolprop(), handle.state
        handle.t = math.nan
        try:
            state.specify_phase(module.iphase_liquid if phase == "liquid" else module.iphase_gas)
            handle.update(CODES.pt, pressure, temperature)
            return self._checked(key, handle.read[key](), temperature, pressure)
        except ValueError as error:
            if isinstance(error, CellfuncsError):
                raise
        finally:
            state.unspecify_phase()
        return self.saturation(key, phase, temperature=temperature)

    # ---- what it says about itself

    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return "liquid", "gas" or "supercritical"; on the saturation line the stated phase decides."""
        pressure = ATMOSPHERE if pressure is None else float(pressure)
        region = self._region(self._handle(), float(temperature), pressure, self._stated)
        return self._stated if region == "boundary" else region

    def source(self, what: str) -> str:
        """Return the bibliography key behind a property; several are parted by ";"."""
        key, row = property_key(what), self._row
        lacking = self._lacking(key)
        if key == "emissivity" or (lacking and not self._can_add(key)):
            raise self._no_model(key)
        parts = list(self._added_texts(key)[0])
        if key == "surface_tension":
            parts.append(row["surface_tension_source"])
        for name, keys in (("viscosity", NEEDS_VISCOSITY), ("conductivity", NEEDS_CONDUCTIVITY)):
            if key in keys and name not in lacking:
                parts.append(row[name + "_source"])
        if key not in ("surface_tension", "viscosity", "conductivity"):
            parts.append(row["eos_source"])
        if "" in parts:
            raise self._no_model(key)
        return ";".join(dict.fromkeys(";".join(parts).split(";")))

    def note(self, what: str) -> str:
        """Return estimates with their model class and uncertainty, reference states, and extrapolations."""
        key = property_key(what)
        notes = list(self._added_texts(key)[1])
        for words, keys in (("viscosity", NEEDS_VISCOSITY), ("conductivity", NEEDS_CONDUCTIVITY)):
            estimate = ESTIMATES.get(self._row[words + "_model"].split(" ")[0])
            if key in keys and estimate:
                notes.append(f"{words} {estimate}")
        if key in ("enthalpy", "entropy"):
            reference = self._row["reference_state"]
            notes.append(f"only differences count; reference: {reference}")
        if self.pseudo_pure:
            notes.append("mixture treated as one fluid (pseudo-pure)")
        notes.append(extrapolation_note(self.key, key))
        return "; ".join(filter(None, notes))

    def limits(self) -> Limits:
        """Return the range of the equation of state."""
        return self._limits

    # ---- helpers

    @property
    def _bare(self) -> str:
        """The name without a stated phase."""
        return self.name.rsplit(" ", 1)[0] if self._stated else self.name

    def _handle(self) -> Handle:
        try:
            return self._threads.handle
        except AttributeError:
            return self._open()

    def _open(self) -> Handle:
        """Open this thread's state, and find once above which temperature nothing can be frozen."""
        CODES.load()
        state = open_state("HEOS", self.key)
        row = self._row
        handle = Handle(state, row["viscosity_model"] != "none", row["conductivity_model"] != "none")
        if self._t_sure == math.inf:
            self._t_clear = self._highest_melting(state, min(ORDINARY_PRESSURE, self._p_max))
            self._t_sure = self._highest_melting(state, self._p_max)
        self._threads.handle = handle
        return handle

    def _highest_melting(self, state, highest: float) -> float:
        """The highest melting temperature up to a pressure [K], with a margin; else just below t_min."""
        found = [self._t_min]
        if state.has_melting_line():
            steps = 39
            for step in range(steps + 1):  # evenly spaced in the logarithm from 1 kPa
                melting = melting_temperature(state, 1e3 * (highest / 1e3) ** (step / steps))
                if melting is not None:
                    found.append(melting + 0.5)
        return math.nextafter(max(found), 0.0)
