"""The saturation line of pure and pseudo-pure fluids, and the region around the critical point."""

import math

from ..errors import CellfuncsError, NoModel, OutOfRange
from .base import SLACK, phase_word
from .properties import PROPERTIES, property_key
from .state import CODES, DIVERGING, SIGNED, Handle, place
from .texts import kelvin, pascal


class SaturationLine:
    """The part of a pure fluid that concerns saturation; ``fluids.PureFluid`` is built on it."""

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
        if read is None and not self._can_add(key):
            raise self._no_model(key)
        if key in DIVERGING and self._near_critical(state.T(), state.p()):
            raise self._critical_text(key)
        try:
            value = read() if read else self._added(handle, key, phase)
        except ValueError as error:
            if isinstance(error, CellfuncsError):
                raise
            raise self._not_given(key, state.T(), state.p()) from error
        return self._checked(key, value, state.T(), state.p())

    def _saturation_inputs(self, handle: Handle, temperature, pressure) -> tuple[str, float, float]:
        """Check the place on the saturation line; return ("T" or "p", temperature, pressure)."""
        if (temperature is None) == (pressure is None):
            raise OutOfRange("a saturated state needs a temperature or a pressure, one of the two")
        if temperature is not None:
            temperature = float(temperature)
            if not self._t_min * (1 - SLACK) <= temperature < self._t_critical:
                raise OutOfRange(
                    f"{self._bare} has no saturation line at {kelvin(temperature)}: it runs from "
                    f"{kelvin(self._t_min)} to the critical point, {kelvin(self._t_critical)}"
                )
            return "T", max(temperature, self._t_min), math.nan
        pressure = float(pressure)
        lowest = self._saturation_pressures(handle, self._t_min)[1]
        if not lowest * (1 - SLACK) <= pressure < self._p_critical:
            raise OutOfRange(
                f"{self._bare} has no saturation line at {pascal(pressure)}: it runs from {pascal(lowest)} "
                f"to the critical point, {pascal(self._p_critical)}"
            )
        return "p", math.nan, pressure

    def _saturated(self, handle: Handle, inputs: tuple[str, float, float], quality: float):
        """The state on the saturation line."""
        handle.t = math.nan
        kind, temperature, pressure = inputs
        try:
            if kind == "T":
                handle.update(CODES.qt, quality, temperature)
            else:
                handle.update(CODES.pq, pressure, quality)
        except ValueError as error:
            raise self._no_solution(temperature, pressure) from error
        return handle.state

    def _surface_tension(self, handle: Handle, inputs: tuple[str, float, float]) -> float:
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

    def _saturation_pressures(self, handle: Handle, temperature: float) -> tuple[float, float]:
        """Bubble and dew pressure [Pa] (the same for a pure fluid) at a temperature [K]."""
        handle.t = math.nan
        try:
            handle.update(CODES.qt, 0.0, temperature)
            bubble = handle.state.p()
            if not self.pseudo_pure:
                return bubble, bubble
            handle.update(CODES.qt, 1.0, temperature)
            return bubble, handle.state.p()
        except ValueError:  # a hair below the critical point; the ancillaries hold there
            return (
                handle.ancillary(CODES.pressure, 0, CODES.temperature, temperature),
                handle.ancillary(CODES.pressure, 1, CODES.temperature, temperature),
            )

    def _near_critical(self, temperature: float, pressure: float) -> bool:
        t_low, t_high, p_low, p_high = self._box
        return t_low < temperature < t_high and p_low < pressure < p_high

    def _critical_text(self, key: str) -> OutOfRange:
        return OutOfRange(
            f"within 1 % of the critical temperature of {self._bare} ({kelvin(self._t_critical)}) and 5 % "
            f"of its pressure ({pascal(self._p_critical)}) the {PROPERTIES[key].words} runs away: no value"
        )

    def _no_solution(self, temperature: float, pressure: float) -> OutOfRange:
        return OutOfRange(f"the equation of state of {self._bare} has no answer at {place(temperature, pressure)}")

    def _not_given(self, key: str, temperature: float, pressure: float) -> NoModel:
        return NoModel(
            f"the model of the {PROPERTIES[property_key(key)].words} of {self._bare} gives no value at "
            f"{place(temperature, pressure)}"
        )

    def _checked(self, key: str, value: float, temperature: float, pressure: float) -> float:
        """Pass a value that can be true; refuse infinities, NaN, and zero or less where it cannot be."""
        if math.isfinite(value) and (value > 0 or key in SIGNED):
            return value
        raise self._not_given(key, temperature, pressure)


def water_surface_tension(temperature: float) -> float:
    """Surface tension of ordinary water against its vapour [N/m], 273.16 K to 647.096 K (IAPWS R1-76)."""
    tau = 1 - temperature / 647.096
    return 235.8e-3 * tau**1.256 * (1 - 0.625 * tau)
