"""What every substance can say: its properties, their source, range and phase."""

from __future__ import annotations

import math
from abc import ABC, abstractmethod
from dataclasses import dataclass
from typing import TYPE_CHECKING

from ..errors import CellfuncsError, NoModel, OutOfRange, UnknownName
from .properties import PROPERTIES, property_key
from .texts import kelvin, nearest, pascal, shown

if TYPE_CHECKING:
    import numpy as np

ATMOSPHERE = 101325.0  # [Pa] the pressure meant when none is given
PLAUSIBLE_PRESSURE = 1000.0  # [Pa] below this a slip of the unit is likelier than a vacuum
SLACK = 1e-9  # relative width of a limit: 0.01 degC comes out a digit below 273.16 K
PHASES = {
    "liquid": "liquid",
    "gas": "gas",
    "gaseous": "gas",
    "vapour": "gas",
    "vapor": "gas",
    "supercritical": "supercritical",
}


@dataclass(frozen=True)
class Limits:
    """The range in which a substance answers; None where a limit does not exist or is not known [SI]."""

    t_min: float
    t_max: float
    p_max: float | None
    source: str
    t_critical: float | None = None
    p_critical: float | None = None
    t_triple: float | None = None


def phase_word(text: str | None) -> str | None:
    """Return "liquid", "gas" or "supercritical" for a phase as people write it; None for nothing."""
    if not text:
        return None
    word = PHASES.get(str(text).strip().casefold())
    if word is None:
        raise UnknownName(
            f"{shown(str(text))} is no phase; write liquid or vapour{nearest(str(text), PHASES)}", "phase"
        )
    return word


class Substance(ABC):
    """Base of all substances. All numbers are plain SI floats.

    `name` is the readable name, `family` one of "pure fluid", "solution", "liquid", "thermal oil",
    "mineral oil", "moist air", "liquid metal", "polymer melt", "solid", "own table".
    """

    name: str
    family: str

    @abstractmethod
    def get(self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None) -> float:
        """Return property `what` [SI] at temperature [K] and pressure [Pa, 101 325 when None].

        Raises UnknownName (property), OutOfRange (state), NoModel (no published model for this substance).
        """

    def get_many(self, whats, temperature, pressure=None, phase: str | None = None, errors: str = "raise"):
        """Return the properties `whats` for a column of states: array (len(whats), n).

        Parameters
        ----------
        whats : names or keys of properties
        temperature [K], pressure [Pa] : arrays of n values, or one value for all; pressure None is 101 325 Pa
        errors : "raise" stops at the first bad point and names it (counted from 1); "collect" returns
            (array with NaN at bad points, list of (index from 0, error)).
        """
        import numpy as np

        keys = tuple(property_key(what) for what in whats)
        temperatures, pressures = _columns(temperature, pressure)
        values = np.empty((len(keys), len(temperatures)))
        faults = self._fill(keys, temperatures, pressures, phase_word(phase), values)
        return _finished(values, faults, errors)

    def _fill(self, keys, temperatures, pressures, phase, values) -> list[tuple[int, CellfuncsError]]:
        """Fill `values` point by point; return the faults in order of their index."""
        get = self.get
        faults = []
        for index, (temperature, pressure) in enumerate(zip(temperatures.tolist(), pressures.tolist(), strict=True)):
            try:
                values[:, index] = [get(key, temperature, pressure, phase) for key in keys]
            except CellfuncsError as error:
                values[:, index] = math.nan
                faults.append((index, error))
        return faults

    @abstractmethod
    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return "liquid", "gas", "supercritical" or "solid" at temperature [K] and pressure [Pa].

        A table of the user's own is "as tabled".
        """

    def viscosity_at(self, temperature: float, shear_rate: float, pressure: float | None = None) -> float:
        """Return the viscosity [Pa s] at temperature [K] and shear rate [1/s], on which only melts depend."""
        return self.get("viscosity", temperature, pressure)

    def saturation(
        self,
        what: str,
        phase: str | None = None,
        temperature: float | None = None,
        pressure: float | None = None,
    ) -> float:
        """Return property `what` [SI] of the saturated phase at a temperature [K] or a pressure [Pa]."""
        raise NoModel(f"{self.name} has no saturation line here")

    @abstractmethod
    def source(self, what: str) -> str:
        """Return the bibliography key (several parted by ";") behind property `what`."""

    def note(self, what: str) -> str:
        """Return what a reader of this property must know ("" when nothing): estimates, reference states."""
        return ""

    @abstractmethod
    def limits(self) -> Limits:
        """Return the range in which this substance answers."""

    def __repr__(self) -> str:
        return f"<{self.family}: {self.name}>"

    def _no_model(self, key: str) -> NoModel:
        return NoModel(f"no published model of the {PROPERTIES[key].words} of {self.name} is at hand")


def _columns(temperature, pressure) -> tuple[np.ndarray, np.ndarray]:
    import numpy as np

    temperatures = np.asarray(temperature, dtype=float)
    pressures = np.asarray(ATMOSPHERE if pressure is None else pressure, dtype=float)
    temperatures, pressures = np.broadcast_arrays(np.atleast_1d(temperatures), np.atleast_1d(pressures))
    if temperatures.ndim != 1:
        raise OutOfRange("a column of temperatures and pressures is wanted, not a block")
    return temperatures, pressures


def _finished(values, faults, errors):
    if errors == "collect":
        return values, faults
    if faults:
        index, error = faults[0]
        if len(values[0]) == 1:
            raise error
        raise type(error)(f"value {index + 1} of the column: {error}")
    return values


def check_state(
    name: str, temperature: float, pressure: float, t_min: float, t_max: float, p_max: float | None
) -> None:
    """Refuse a state that is no number or outside the range of a substance.

    A pressure below 1 kPa is not refused here: whether it is meant, the caller decides.
    """
    if not (math.isfinite(temperature) and math.isfinite(pressure)):
        raise OutOfRange(f"{name}: temperature and pressure must be finite numbers")
    if temperature <= 0:
        raise OutOfRange(f"{temperature:.6g} K is not above absolute zero")
    if pressure <= 0:
        raise OutOfRange(
            f"an absolute pressure of {pascal(pressure)} is not above zero; is it a gauge reading?", "pressure"
        )
    if not t_min * (1 - SLACK) <= temperature <= t_max * (1 + SLACK):
        raise OutOfRange(f"{kelvin(temperature)} is outside the range of {name}, {kelvin(t_min)} to {kelvin(t_max)}")
    if p_max is not None and pressure > p_max * (1 + SLACK):
        raise OutOfRange(f"{pascal(pressure)} is above {pascal(p_max)}, the highest pressure for {name}", "pressure")


def near_vacuum(name: str, pressure: float) -> OutOfRange:
    """The refusal of a pressure that is likelier a slip of the unit than a vacuum."""
    return OutOfRange(
        f"{pascal(pressure)} is nearly a vacuum; was bar or kPa meant? "
        f"If the low pressure is right, state the phase: {name} vapour",
        "pressure",
    )
