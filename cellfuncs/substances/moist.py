"""Moist air as a real-gas mixture (ASHRAE RP-1485, by CoolProp), with checks before CoolProp is asked."""

import math
import re
import threading
import unicodedata

from ..errors import CellfuncsError, NoModel, OutOfRange, UnknownName
from .base import ATMOSPHERE, PLAUSIBLE_PRESSURE, Limits, Substance, check_state, phase_word
from .engine import coolprop
from .properties import property_key
from .solutions import water_vapour_pressure
from .texts import kelvin, pascal

T_RANGE = (173.15, 473.15)  # [K] where dry air, vapour and the enhancement factor are all established
P_RANGE = (PLAUSIBLE_PRESSURE, 1e7)  # [Pa] of the formulation, from a plausible low end
SOURCE = "RP-1485"
_KEYS = {
    "humidity_ratio": "W",
    "dew_point": "D",
    "wet_bulb": "B",
    "vapour_pressure": "P_w",
    "specific_volume": "V",
    "enthalpy": "H",
    "entropy": "S",
    "specific_heat": "cp_ha",
    "viscosity": "M",
    "conductivity": "K",
}
_LOCK = threading.Lock()  # CoolProp keeps one moist-air state for the whole process


def moist_air(what: str, temperature: float, relative_humidity: float, pressure: float = ATMOSPHERE) -> float:
    """Return property `what` [SI] of moist air at its dry-bulb temperature [K].

    The relative humidity goes from 0 to 1, the pressure [Pa] is that of the mixture.
    Enthalpy, entropy and specific volume are per kilogram of dry air (enthalpy zero for dry air and liquid
    water at 0 degC), density and specific heat those of the mixture. Below 0 degC humidity is
    relative to saturation over ice. Raises UnknownName, OutOfRange. Source: RP-1485.
    """
    key = property_key(what, "moist air")
    temperature, humidity, pressure = float(temperature), float(relative_humidity), float(pressure)
    _check(temperature, humidity, pressure)
    if key == "density":
        return 1 / _ask("Vha", temperature, humidity, pressure)
    if key == "dew_point" and humidity == 0:
        raise OutOfRange("dry air has no dew point")
    if key in ("humidity_ratio", "vapour_pressure") and humidity == 0:
        return 0.0
    if key in _KEYS:
        return _ask(_KEYS[key], temperature, humidity, pressure)
    if key == "expansion_coefficient":
        step = 0.05
        low, high = (
            _ask("Vha", temperature + sign * step, None, pressure, _ask("W", temperature, humidity, pressure))
            for sign in (-1, 1)
        )
        return (high - low) / (2 * step) * 2 / (high + low)
    volume = _ask("Vha", temperature, humidity, pressure)
    if key == "kinematic_viscosity":
        return _ask("M", temperature, humidity, pressure) * volume
    heat = _ask("cp_ha", temperature, humidity, pressure)
    conductivity = _ask("K", temperature, humidity, pressure)
    if key == "thermal_diffusivity":
        return conductivity * volume / heat
    return _ask("M", temperature, humidity, pressure) * heat / conductivity  # Prandtl number


def _check(temperature: float, humidity: float, pressure: float) -> None:
    if not math.isfinite(humidity):
        raise OutOfRange("the relative humidity must be a finite number", "relative_humidity")
    if 1 < humidity <= 100:
        raise OutOfRange(
            f"a relative humidity of {humidity:g} is above 1: write {humidity:g} % or {humidity / 100:g}",
            "relative_humidity",
        )
    if not 0 <= humidity <= 1:
        raise OutOfRange(f"a relative humidity of {humidity:g} is outside 0 to 1 (0 % to 100 %)", "relative_humidity")
    check_state("moist air", temperature, pressure, *T_RANGE, P_RANGE[1])
    if pressure < P_RANGE[0]:
        raise OutOfRange(
            f"{pascal(pressure)} is below {pascal(P_RANGE[0])}, the range for moist air; was kPa meant?", "pressure"
        )
    if temperature > 273.16 and humidity * water_vapour_pressure(temperature) >= 0.999 * pressure:
        raise OutOfRange(
            f"at {kelvin(temperature)} and {pascal(pressure)} a relative humidity of {humidity:g} leaves "
            "no air: the vapour alone would have the whole pressure"
        )


def _ask(name: str, temperature: float, humidity: float | None, pressure: float, ratio: float | None = None):
    """One answer of CoolProp, checked."""
    moisture = ("R", humidity) if ratio is None else ("W", ratio)
    try:
        with _LOCK:
            value = coolprop().HAPropsSI(name, "T", temperature, "P", pressure, *moisture)
    except ValueError as error:
        raise _no_answer(temperature, pressure) from error
    if not math.isfinite(value):
        raise _no_answer(temperature, pressure)
    return value


def _no_answer(temperature: float, pressure: float) -> OutOfRange:
    return OutOfRange(f"moist air has no answer at {kelvin(temperature)}, {pascal(pressure)} and this humidity")


class MoistAir(Substance):
    """Moist air of one relative humidity as a substance: "moist air 50 %"."""

    family = "moist air"

    def __init__(self, humidity: float):
        if not 0 <= humidity <= 1:
            raise OutOfRange(f"a relative humidity of {100 * humidity:g} % is outside 0 % to 100 %")
        self.humidity = humidity
        self.name = f"moist air {100 * humidity:g} %"

    def get(self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None) -> float:
        """Return property `what` [SI]; see ``Substance.get`` and ``moist_air``."""
        if phase_word(phase) not in (None, "gas"):
            raise NoModel(f"{self.name} is a gas here")
        key = self._key(what)
        return moist_air(key, temperature, self.humidity, ATMOSPHERE if pressure is None else pressure)

    def _key(self, what: str) -> str:
        try:
            return property_key(what, "moist air")
        except CellfuncsError:
            raise self._no_model(property_key(what)) from None

    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return "gas", after the checks of ``moist_air``."""
        _check(float(temperature), self.humidity, ATMOSPHERE if pressure is None else float(pressure))
        return "gas"

    def source(self, what: str) -> str:
        """Return the bibliography key of the formulation."""
        self._key(what)
        return SOURCE

    def note(self, what: str) -> str:
        """Return which kilogram a property counts, and the reference of the enthalpy."""
        key = self._key(what)
        notes = ["per kilogram of dry air"] if key in ("enthalpy", "entropy", "specific_volume") else []
        if key in ("enthalpy", "entropy"):
            notes.append("zero for dry air and liquid water at 0 degC")
        return "; ".join(notes)

    def limits(self) -> Limits:
        """Return the range in which moist air is answered here."""
        return Limits(*T_RANGE, P_RANGE[1], SOURCE)


_MOIST = re.compile(r"^\s*(?:moist|humid|wet)\s+air\b(?P<rest>.*)$")
_HUMIDITY = re.compile(
    r"^(?:rh|relative humidity|at|of|with)?\s*=?\s*(?P<value>\d+(?:\.\d+)?)\s*(?P<unit>%)?"
    r"\s*(?:rh|relative humidity)?$"
)


def humid_air(text: str) -> MoistAir | None:
    """Read "moist air 50 %"; None when it is no moist air. Asks for the humidity where it is missing."""
    found = _MOIST.match(unicodedata.normalize("NFKC", text).casefold())
    if not found:
        return None
    number = _HUMIDITY.match(found["rest"].strip(" ,;()"))
    if not number:
        raise UnknownName("moist air of which relative humidity? Write for instance moist air 50 %")
    value = float(number["value"])
    if not number["unit"] and value > 1:
        raise UnknownName(f"moist air {value:g}: write {value:g} % if percent is meant")
    return MoistAir(value / 100 if number["unit"] else value)
