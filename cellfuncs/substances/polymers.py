"""Molten polymers: the viscosity falls with the shear rate (power law or Carreau) and with temperature.

Two ways to name one: a published melt ("LDPE melt at 100 1/s", ``data/polymers.csv``, consistency and exponent
at each of its temperatures in ``polymer_viscosity.csv``), or constants in words, read by ``polymer_text``.
"""

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache

from ..errors import NoModel, OutOfRange
from ..sources import read_table
from .curve import Curve
from .properties import property_key
from .relations import DERIVED, Related, Relation, relation
from .texts import kelvin

GAS_CONSTANT = 8.314462618  # [J/(mol K)]
LONGEST_SPOKEN = 50  # characters of a name in a refusal
NEED_SHEAR = frozenset(("viscosity", "kinematic_viscosity", "prandtl"))


@dataclass(frozen=True)
class Rheology:
    """Viscosity [Pa s] over temperature [K] and shear rate [1/s], with the range of both."""

    viscosity: Callable[[float, float], float]
    t_min: float
    t_max: float
    rate_min: float
    rate_max: float
    source: str
    note: str


class PolymerMelt(Related):
    """A molten polymer; with a shear rate it answers as any liquid does, without one it asks for it."""

    def __init__(self, name: str, rheology: Rheology, relations: dict[str, Relation], shear_rate: float | None = None):
        self.melt, self.rheology, self.shear_rate = name, rheology, shear_rate
        title = name if shear_rate is None else f"{name} at {shear_rate:g} 1/s"
        super().__init__(title, "polymer melt", relations, rheology.source)
        self.spoken = name if len(name) <= LONGEST_SPOKEN else "the polymer melt"
        if shear_rate is not None:
            self._check_rate(shear_rate)

    def at(self, shear_rate: float) -> "PolymerMelt":
        """The same melt at a shear rate [1/s]."""
        return PolymerMelt(self.melt, self.rheology, self._relations, shear_rate)

    def viscosity_at(self, temperature: float, shear_rate: float, pressure: float | None = None) -> float:
        """Apparent viscosity [Pa s] at a temperature [K] and a shear rate [1/s]."""
        self._check_rate(shear_rate)
        one = self.rheology
        if not one.t_min - 1e-6 <= temperature <= one.t_max + 1e-6:
            raise OutOfRange(
                f"{kelvin(temperature)} is outside the range of the viscosity of {self.spoken}, "
                f"{kelvin(one.t_min)} to {kelvin(one.t_max)}"
            )
        return one.viscosity(min(max(temperature, one.t_min), one.t_max), shear_rate)

    def _check_rate(self, shear_rate: float) -> None:
        low, high = self.rheology.rate_min, self.rheology.rate_max
        if not low * (1 - 1e-9) <= shear_rate <= high * (1 + 1e-9):
            raise OutOfRange(
                f"a shear rate of {shear_rate:g} 1/s is outside the data of {self.spoken}, {low:g} to {high:g} 1/s"
            )

    def _value(self, key: str, temperature: float) -> float:
        if key in NEED_SHEAR and self.shear_rate is None:
            text = f"the viscosity of {self.spoken} depends on the shear rate: end its name with, say, at 100 1/s"
            raise NoModel(text, "substance")
        if key == "viscosity":
            return self.viscosity_at(temperature, self.shear_rate)
        return super()._value(key, temperature)

    @property
    def expands(self) -> bool:
        """Whether an expansion coefficient follows: not from constants without one."""
        return self._has("expansion_coefficient")

    def _has(self, key: str) -> bool:
        return key == "viscosity" or super()._has(key)

    def _follows(self, key: str) -> bool:
        if key == "kinematic_viscosity":
            return "density" in self._relations
        return super()._follows(key)

    def _behind(self, what: str) -> list[Relation]:
        key = property_key(what)
        one = self.rheology
        own = [Relation(lambda t: math.nan, one.t_min, one.t_max, one.source, one.note)]
        if key == "viscosity":
            return own
        if key in NEED_SHEAR and self._follows(key):
            return own + [found for need in DERIVED[key][0] if need != "viscosity" for found in self._behind(need)]
        return super()._behind(key)

    def _ranges(self) -> list[tuple[float, float]]:
        return [*super()._ranges(), (self.rheology.t_min, self.rheology.t_max)]


def power_law(consistency: float, exponent: float, shift: Callable[[float], float]) -> Callable[[float, float], float]:
    """K a_T rate^(n - 1), K [Pa s^n]."""
    return lambda temperature, rate: consistency * shift(temperature) * rate ** (exponent - 1)


def carreau(
    zero_shear: float, time: float, exponent: float, shift: Callable[[float], float]
) -> Callable[[float, float], float]:
    """eta0 a_T (1 + (time a_T rate)^2)^((n - 1)/2): a master curve moved along both axes."""

    def viscosity(temperature: float, rate: float) -> float:
        factor = shift(temperature)
        return zero_shear * factor * (1 + (time * factor * rate) ** 2) ** ((exponent - 1) / 2)

    return viscosity


def exponential_shift(coefficient: float, reference: float) -> Callable[[float], float]:
    """exp(-b (T - T0)), b [1/K]."""
    return lambda temperature: math.exp(-coefficient * (temperature - reference))


def arrhenius_shift(energy: float, reference: float) -> Callable[[float], float]:
    """exp(E/R (1/T - 1/T0)), E [J/mol]."""
    return lambda temperature: math.exp(energy / GAS_CONSTANT * (1 / temperature - 1 / reference))


def wlf_shift(first: float, second: float, reference: float) -> Callable[[float], float]:
    """10^(-C1 (T - T0)/(C2 + T - T0)), Williams, Landel and Ferry 1955; C2 [K]."""
    return lambda temperature: 10 ** (-first * (temperature - reference) / (second + temperature - reference))


# ---- published melts


@cache
def polymer_names() -> dict[str, str]:
    """Name or alias -> polymer, as written."""
    names = {}
    for row in read_table("polymers.csv"):
        for name in (row["polymer"], *row["aliases"].split(";")):
            names[name] = row["polymer"]
    return names


def published_melt(polymer: str) -> PolymerMelt:
    """The melt of a row of ``data/polymers.csv``."""
    rows = [row for row in read_table("polymer_viscosity.csv") if row["polymer"] == polymer]
    temperatures, consistency, exponent, slowest, fastest = (
        [float(row[column]) for row in rows]
        for column in ("temperature", "consistency", "exponent", "rate_min", "rate_max")
    )
    strength, power = Curve(temperatures, consistency, logarithmic=True), Curve(temperatures, exponent)
    rheology = Rheology(
        lambda temperature, rate: strength(temperature) * rate ** (power(temperature) - 1),
        temperatures[0],
        temperatures[-1],
        max(slowest),
        min(fastest),
        rows[0]["source"],
        f"power law, {rows[0]['place']}",
    )
    relations = {
        row["property"]: relation(row) for row in read_table("polymer_properties.csv") if row["polymer"] == polymer
    }
    return PolymerMelt(polymer, rheology, relations)
