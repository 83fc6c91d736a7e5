"""Properties as functions of temperature alone: tabled points or a published equation, each with its range.

``relation`` reads one row of a data file; ``Related`` is a substance made of such relations, which solids,
liquid metals, polymer melts and the user's own tables share.

Forms of a row (column ``form``; T is in K or degC as the column ``scale`` says):

* ``table``: ``points`` and ``values``, interpolated by a monotone cubic
* ``constant``: one value, taken as constant between t_min and t_max
* ``terms``: a sum of coefficient:power, for instance ``176.2:0;-0.04923:1;-1.524e6:-2``
* ``exp``: ``factor|terms``: factor x exp(sum); the power ``ln`` stands for ln T
* ``reduced``: ``Tc|terms``: the sum with 1 - T/Tc in place of T
* ``wagner``: ``Tc|pc|terms``: pc x exp(Tc/T x the sum in 1 - T/Tc)
* ``ratio``: ``terms|terms``: one sum over another
* ``volumes``: ``w|terms|terms``: density of a mixture with mass fraction w of the first, volumes added
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass

from ..errors import NoModel, OutOfRange
from .base import ATMOSPHERE, SLACK, Limits, Substance, check_state, phase_word
from .curve import Curve
from .properties import PROPERTIES, property_key
from .texts import kelvin, pascal

ZERO_CELSIUS = 273.15  # [K]
P_MAX = 1e7  # [Pa] relations without pressure hold near atmospheric pressure; common practice below this
STEP = 0.05  # [K] for the slope of a density
EXPONENTIAL = frozenset(("viscosity", "kinematic_viscosity", "saturation_pressure"))


@dataclass(frozen=True)
class Relation:
    """One property over temperature: value(T [K]) in SI, its range [K], and where it is from."""

    value: Callable[[float], float]
    t_min: float
    t_max: float
    source: str
    note: str = ""
    constant: bool = False


def relation(row: Mapping[str, str]) -> Relation:
    """The relation that a row of a data file describes."""
    shift = ZERO_CELSIUS if row["scale"] == "degC" else 0.0
    points = [float(part) + shift for part in row["points"].split(";")] if row["points"] else []
    low, high = (
        float(row[end]) + shift if row[end] else found
        for end, found in (("t_min", points[0] if points else math.nan), ("t_max", points[-1] if points else math.nan))
    )
    if row["form"] == "table":
        value = _tabled(points, [float(part) for part in row["values"].split(";")], row["property"])
    elif row["form"] == "constant":
        value = _constant(float(row["values"]))
    else:
        value = equation(row["form"], row["values"], shift)
    return Relation(value, low, high, row["source"], row["place"], row["form"] == "constant")


def _tabled(points: list[float], values: list[float], key: str) -> Callable[[float], float]:
    return Curve(points, values, logarithmic=key in EXPONENTIAL)


def _constant(number: float) -> Callable[[float], float]:
    return lambda temperature: number


def equation(form: str, text: str, shift: float = 0.0) -> Callable[[float], float]:
    """The function of temperature [K] that a form and its coefficients describe; see the top of this file."""
    parts = text.split("|")
    if form == "terms":
        (series,) = map(_series, parts)
        return lambda t: series(t - shift)
    if form == "exp":
        factor, series = float(parts[0]), _series(parts[1])
        return lambda t: factor * math.exp(series(t - shift))
    if form == "reduced":
        critical, series = float(parts[0]), _series(parts[1])
        return lambda t: series(1 - t / critical)
    if form == "wagner":
        critical, pressure, series = float(parts[0]), float(parts[1]), _series(parts[2])
        return lambda t: pressure * math.exp(critical / t * series(1 - t / critical))
    if form == "ratio":
        above, below = map(_series, parts)
        return lambda t: above(t - shift) / below(t - shift)
    if form == "volumes":
        share, one, other = float(parts[0]), _series(parts[1]), _series(parts[2])
        return lambda t: 1 / (share / one(t - shift) + (1 - share) / other(t - shift))
    raise KeyError(form)


def _series(text: str) -> Callable[[float], float]:
    """A sum of coefficient:power; the power ``ln`` is the natural logarithm."""
    terms = [term.split(":") for term in text.split(";")]
    powers = [(float(factor), float(power)) for factor, power in terms if power != "ln"]
    logarithm = sum(float(factor) for factor, power in terms if power == "ln")
    if logarithm:
        return lambda t: sum(factor * t**power for factor, power in powers) + logarithm * math.log(t)
    return lambda t: sum(factor * t**power for factor, power in powers)


def slope(one: Relation, temperature: float) -> float:
    """Change of a relation per kelvin, by a difference over 0.1 K (one-sided at the ends of the range)."""
    low, high = max(temperature - STEP, one.t_min), min(temperature + STEP, one.t_max)
    return (one.value(high) - one.value(low)) / (high - low)


# property -> what it follows from, and how
DERIVED: dict[str, tuple[tuple[str, ...], Callable[..., float]]] = {
    "viscosity": (("kinematic_viscosity", "density"), lambda nu, rho: nu * rho),
    "kinematic_viscosity": (("viscosity", "density"), lambda mu, rho: mu / rho),
    "thermal_diffusivity": (("conductivity", "density", "specific_heat"), lambda k, rho, cp: k / (rho * cp)),
    "prandtl": (("viscosity", "specific_heat", "conductivity"), lambda mu, cp, k: mu * cp / k),
    "expansion_coefficient": (("density",), lambda rho: rho),
}


class Related(Substance):
    """A substance whose properties are relations over temperature; the pressure changes nothing."""

    state = "liquid"  # its one phase
    p_max: float | None = P_MAX

    def __init__(self, name: str, family: str, relations: Mapping[str, Relation], source: str):
        self.name = name
        self.spoken = name  # in refusals
        self.family = family
        self._relations = dict(relations)
        self._source = source

    # ---- values

    def get(self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None) -> float:
        """Return property `what` [SI]; see ``Substance.get``. Refused outside the property's own range."""
        found = self._relations.get(what)
        if found is not None and pressure is None and phase is None and found.t_min <= temperature <= found.t_max:
            if what != "saturation_pressure":
                self._check_boiling(temperature, ATMOSPHERE)
            return found.value(temperature)
        key = property_key(what)
        self._check_phase(phase)
        temperature, pressure = float(temperature), ATMOSPHERE if pressure is None else float(pressure)
        self._check_kind(key)
        check_state(self.spoken, temperature, pressure, 0.0, math.inf, self.p_max)
        if key != "saturation_pressure":
            self._check_boiling(temperature, pressure)
        return self._value(key, temperature)

    def _value(self, key: str, temperature: float) -> float:
        found = self._relations.get(key)
        if found is None:
            return self._derived(key, temperature)
        if not found.t_min * (1 - SLACK) <= temperature <= found.t_max * (1 + SLACK):
            raise self._outside(key, temperature, found)
        return found.value(min(max(temperature, found.t_min), found.t_max))

    def _derived(self, key: str, temperature: float) -> float:
        if not self._follows(key):
            raise self._no_model(key)
        needs, rule = DERIVED[key]
        values = [self._value(need, temperature) for need in needs]
        if key == "expansion_coefficient":
            return -slope(self._relations["density"], temperature) / values[0]
        return rule(*values)

    def _has(self, key: str) -> bool:
        return key in self._relations or self._follows(key)

    def _follows(self, key: str) -> bool:
        """Whether a property that has no relation of its own follows from those that have."""
        needs = DERIVED.get(key, ((),))[0]
        twins = ("viscosity", "kinematic_viscosity")
        has = self._relations.__contains__ if key in twins else self._has
        if key == "expansion_coefficient" and has("density") and self._relations["density"].constant:
            return False  # a density taken as constant says nothing about its change
        return bool(needs) and all(map(has, needs))

    # ---- refusals

    def _outside(self, key: str, temperature: float, found: Relation) -> OutOfRange:
        return OutOfRange(
            f"{kelvin(temperature)} is outside the range of the {PROPERTIES[key].words} of {self.spoken}, "
            f"{kelvin(found.t_min)} to {kelvin(found.t_max)}"
        )

    def _no_model(self, key: str) -> NoModel:
        return NoModel(f"no published model of the {PROPERTIES[key].words} of {self.spoken} is at hand")

    def _check_phase(self, phase: str | None) -> None:
        if phase_word(phase) not in (None, self.state):
            raise NoModel(f"{self.spoken} is a {self.state} here; no model of another phase is at hand")

    def _check_kind(self, key: str) -> None:
        """For properties that cannot be of this kind of substance."""

    def _check_boiling(self, temperature: float, pressure: float) -> None:
        line = self._relations.get("saturation_pressure")
        if line is None or not line.t_min <= temperature <= line.t_max:
            return
        boiling = line.value(temperature)
        if pressure < boiling:
            raise OutOfRange(
                f"{self.spoken} boils at {kelvin(temperature)} under {pascal(pressure)}: "
                f"it stays liquid from about {pascal(boiling)}"
            )

    # ---- what it says about itself

    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return the one phase of this substance, where any property is known."""
        pressure = ATMOSPHERE if pressure is None else float(pressure)
        limits = self.limits()
        check_state(self.spoken, float(temperature), pressure, limits.t_min, limits.t_max, self.p_max)
        self._check_boiling(float(temperature), pressure)
        return self.state

    def saturation(self, what, phase=None, temperature=None, pressure=None) -> float:
        """Return the vapour pressure [Pa] at a temperature [K] where it is known; nothing else."""
        key = property_key(what)
        if key != "saturation_pressure" or temperature is None:
            raise NoModel(f"{self.spoken} has no saturation line here")
        return self._value(key, float(temperature))

    def source(self, what: str) -> str:
        """Return the bibliography keys behind a property."""
        return ";".join(dict.fromkeys(key for found in self._behind(what) for key in found.source.split(";")))

    def note(self, what: str) -> str:
        """Return place in the source, uncertainty and range of a property."""
        pieces = (piece for found in self._behind(what) for piece in found.note.split("; ") if piece)
        return "; ".join(dict.fromkeys(pieces))

    def _behind(self, what: str) -> list[Relation]:
        key = property_key(what)
        self._check_kind(key)
        if key in self._relations:
            return [self._relations[key]]
        if not self._follows(key):
            raise self._no_model(key)
        return [found for need in DERIVED[key][0] for found in self._behind(need)]

    def limits(self) -> Limits:
        """Return the range in which any property is known; each has its own, which its refusal names."""
        ranges = self._ranges()
        return Limits(min(low for low, _ in ranges), max(high for _, high in ranges), self.p_max, self._source)

    def _ranges(self) -> list[tuple[float, float]]:
        return [(found.t_min, found.t_max) for found in self._relations.values()]

