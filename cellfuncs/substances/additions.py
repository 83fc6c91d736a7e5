"""Transport properties that CoolProp leaves out, where a published table or the kinetic theory fills the gap.

``data/transport_additions.csv``: one row a fluid, property and phase, with uncertainty in its note. Gases by the
theory of Chapman and Enskog with published molecular constants, up to a tenth of the critical pressure; liquids
by handbook tables, up to 5 MPa. What has no row stays refused. ``data/published_ranges.csv`` tells up to which
temperature the equations of common gases are published, where CoolProp goes on beyond.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache

from ..errors import NoModel, OutOfRange
from ..sources import read_table
from .properties import PROPERTIES
from .relations import DERIVED, relation
from .state import NEEDS_CONDUCTIVITY, NEEDS_VISCOSITY, Handle
from .texts import kelvin, pascal

GAS_CONSTANT = 8.314462618  # [J/(mol K)]
THIN = 0.1  # share of the critical pressure up to which a gas counts as dilute
TRANSPORT = (("viscosity", NEEDS_VISCOSITY), ("conductivity", NEEDS_CONDUCTIVITY))
LIQUID_P_MAX = 5e6  # [Pa] liquids at 0.1 MPa; viscosity grows by about 1 % per MPa


@dataclass(frozen=True)
class Addition:
    """One added property of one phase: value(temperature [K], molar mass [kg/mol], cv of the ideal gas)."""

    value: Callable[[float, float, float], float]
    t_min: float
    t_max: float
    source: str
    note: str


@cache
def additions(fluid: str) -> dict[tuple[str, str], Addition]:
    """(property, phase) -> addition, for one of CoolProp's fluids."""
    rows = [row for row in read_table("transport_additions.csv") if row["fluid"] == fluid]
    found = {}
    for row in sorted(rows, key=lambda row: row["form"] == "Eucken"):  # which needs the viscosity
        if row["form"] == "Eucken":
            value = _eucken(found[("viscosity", "gas")].value)
            low, high = float(row["t_min"]), float(row["t_max"])
        elif row["form"] == "Lennard-Jones":
            value = _chapman_enskog(*map(float, row["values"].split(";")))
            low, high = float(row["t_min"]), float(row["t_max"])
        else:
            tabled = relation(row)
            value, low, high = _plain(tabled.value), tabled.t_min, tabled.t_max
        note = f"{row['phase']}: {row['place']}"
        found[row["property"], row["phase"]] = Addition(value, low, high, row["source"], note)
    return found


def _plain(value: Callable[[float], float]) -> Callable[[float, float, float], float]:
    return lambda temperature, molar_mass, heat: value(temperature)


def collision_integral(reduced: float) -> float:
    """Collision integral of viscosity for the Lennard-Jones potential, 0.3 <= kT/eps <= 100 (Neufeld et al. 1972)."""
    return (
        1.16145 * reduced**-0.14874
        + 0.52487 * math.exp(-0.77320 * reduced)
        + 2.16178 * math.exp(-2.43787 * reduced)
    )


def _chapman_enskog(diameter: float, energy: float) -> Callable[[float, float, float], float]:
    """Viscosity [Pa s] of a dilute gas from the diameter [0.1 nm] and energy/k [K] of its molecules."""

    def value(temperature: float, molar_mass: float, heat: float) -> float:
        root = math.sqrt(1000 * molar_mass * temperature)
        return 2.6693e-6 * root / (diameter**2 * collision_integral(temperature / energy))

    return value


def _eucken(viscosity: Callable[[float, float, float], float]) -> Callable[[float, float, float], float]:
    """Conductivity [W/(m K)] from the viscosity: mu (cv + 9/4 R/M); exact kinetic theory for a monatomic gas."""

    def value(temperature: float, molar_mass: float, heat: float) -> float:
        return viscosity(temperature, molar_mass, heat) * (heat + 2.25 * GAS_CONSTANT / molar_mass)

    return value


class AddedTransport:
    """The part of a pure fluid that answers what CoolProp has no model of; ``fluids.PureFluid`` is built on it."""

    def _added(self, handle: Handle, key: str, region: str) -> float:
        """Property `key` at the state where the handle stands; `region` is its phase."""
        temperature, pressure = handle.state.T(), handle.state.p()

        def value(name: str) -> float:
            read = handle.read.get(name)
            return read() if read else self._added_value(handle, name, region, temperature, pressure)

        if key in ("viscosity", "conductivity"):
            return value(key)
        needs, rule = DERIVED[key]
        return rule(*map(value, needs))

    def _added_value(self, handle: Handle, key: str, region: str, temperature: float, pressure: float) -> float:
        found = additions(self.key)
        one = found.get((key, region))
        words = PROPERTIES[key].words
        if one is None:
            other = " and ".join("vapour" if phase == "gas" else phase for name, phase in found if name == key)
            only = f" (only of its {other})" if other else ""
            raise NoModel(f"no published model of the {words} of {self.name} is at hand{only}")
        if not one.t_min - 1e-6 <= temperature <= one.t_max + 1e-6:
            raise OutOfRange(
                f"{kelvin(temperature)} is outside the data on the {words} of {self._bare}, "
                f"{kelvin(one.t_min)} to {kelvin(one.t_max)}"
            )
        highest = THIN * self._p_critical if region == "gas" else LIQUID_P_MAX
        if pressure > highest:
            raise OutOfRange(
                f"{pascal(pressure)} is above {pascal(highest)}, up to which the {words} of {self._bare} "
                f"{'vapour' if region == 'gas' else 'liquid'} is at hand",
                "pressure",
            )
        gas_heat = handle.state.cp0mass() - GAS_CONSTANT / self.molar_mass
        return one.value(temperature, self.molar_mass, gas_heat)

    def _can_add(self, key: str) -> bool:
        """Whether additions make up, in any phase, for all that CoolProp lacks for a property."""
        lacking = self._lacking(key)
        known = {name for name, _ in additions(self.key)}
        return bool(lacking) and known.issuperset(lacking)

    def _lacking(self, key: str) -> list[str]:
        """The transport properties that a property needs and CoolProp has no model of."""
        wanted = []
        for name, needing in TRANSPORT:
            if key in needing and self._row[f"{name}_model"] == "none":
                wanted.append(name)
        return wanted

    def _added_texts(self, key: str) -> tuple[list[str], list[str]]:
        """Sources and notes of what is added for a property."""
        rows = [one for (name, _), one in additions(self.key).items() if name in self._lacking(key)]
        return [one.source for one in rows], list(dict.fromkeys(one.note for one in rows))


@cache
def published_up_to(fluid: str) -> dict[str, float]:
    """"state", "viscosity", "conductivity" -> highest published temperature [K], where CoolProp goes beyond it."""
    return {row["what"]: float(row["t_max"]) for row in read_table("published_ranges.csv") if row["fluid"] == fluid}


def extrapolation_note(fluid: str, key: str) -> str:
    """Where a property is extrapolated beyond its published range; "" where CoolProp stays inside."""
    ranges = published_up_to(fluid)
    needs = {name for name, keys in TRANSPORT if key in keys}
    if key not in ("viscosity", "conductivity"):
        needs.add("state")
    highest = min((ranges[name] for name in needs if name in ranges), default=None)
    return "" if highest is None else f"published up to {highest:g} K, extrapolated above"
