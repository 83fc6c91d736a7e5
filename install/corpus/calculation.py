"""A calculation: lines with labels, units and formulas, texts beside them, and the slips it can have."""

import random
from collections.abc import Sequence
from dataclasses import dataclass, field

SI, US = "si", "us"


@dataclass
class Line:
    """One quantity: ``pattern`` is its formula in SI (see ``formula``), None for a typed ``value`` in ``unit``."""

    name: str
    labels: tuple[str, ...]
    symbol: str
    unit: str
    key: str
    value: float | None = None
    pattern: str | None = None
    digits: int = 4
    group: str = "input"


@dataclass(frozen=True)
class Slip:
    """A mistake: ``code``, the line where it is made, and its formula or its typed number there.

    ``lines`` are further lines that are wrong by the same mistake (properties read together); ``seen_at`` is the line
    where the mistake shows, if another. A name ``note:…`` is a remark that the mistake adds.
    """

    code: str
    name: str
    pattern: str | None = None
    value: float | None = None
    lines: tuple[tuple[str, float], ...] = ()
    seen_at: str = ""

    @property
    def cells(self) -> tuple[str, ...]:
        """The names of all lines where a finding is right."""
        return (self.seen_at or self.name, *(name for name, _ in self.lines))


@dataclass
class Calculation:
    """Lines in order, texts as label and value, and slips; ``flow`` is the flow kind of the case, where it is one."""

    title: str
    system: str
    flow: str | None = None
    lines: list[Line] = field(default_factory=list)
    texts: list[tuple[str, str]] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    facts: dict = field(default_factory=dict)
    slips: list[Slip] = field(default_factory=list)

    def line(self, name: str) -> Line:
        """A line by its name."""
        return next(line for line in self.lines if line.name == name)

    def unit(self, si: str, us: str) -> str:
        """The unit in this system."""
        return si if self.system == SI else us

    def typed(
        self, name: str, key: str, labels: str, units: tuple[str, str], si: float, symbol: str = "", digits: int = 4
    ) -> float:
        """Add a typed number, given in SI, rounded in its unit; returns the rounded number in SI."""
        from corpus.formula import UNITS

        unit = self.unit(*units)
        factor, offset = UNITS[unit]
        value = rounded((si - offset) / factor, digits)
        self.lines.append(Line(name, tuple(labels.split(";")), symbol, unit, key, value=value, digits=digits))
        return value * factor + offset

    def typed_si(self, name: str) -> float:
        """A typed number in SI, as it is after rounding."""
        from corpus.formula import UNITS

        line = self.line(name)
        factor, offset = UNITS[line.unit]
        return line.value * factor + offset

    def computed(
        self, name: str, key: str, labels: str, units: tuple[str, str], pattern: str, symbol: str = "", digits: int = 4
    ) -> None:
        """Add a computed line; its pattern is in SI."""
        unit = self.unit(*units)
        spelled = tuple(labels.split(";"))
        self.lines.append(Line(name, spelled, symbol, unit, key, pattern=pattern, digits=digits, group="result"))

    def fluid(
        self, name: str, prop: dict[str, float], wanted: str, others: Sequence[tuple[str, dict[str, float]]]
    ) -> None:
        """Typed properties of a fluid, and the slips of reading them elsewhere (code, properties)."""
        for letter in wanted.split():
            PROPERTY_LINES[letter](self, prop)
        for code, other in others:
            self._property_slips(code, prop, other, wanted.split())

    def _property_slips(self, code: str, right: dict[str, float], other: dict[str, float], wanted: list[str]) -> None:
        from corpus.formula import UNITS

        found = []
        for name in wanted:
            line = self.line(name)
            what = PROPERTY_NAMES[name]
            if abs(other[what] / right[what] - 1.0) > 0.12:
                factor, offset = UNITS[line.unit]
                found.append((name, rounded((other[what] - offset) / factor, line.digits)))
        if not found:
            return
        if code == "wrong-fluid":
            if len(found) > 1:
                self.slips.append(Slip(code, found[0][0], value=found[0][1], lines=tuple(found[1:])))
            return
        for name, value in found:
            self.slips.append(Slip(code, name, value=value))

    def slip(self, code: str, name: str, pattern: str | None = None, value: float | None = None) -> None:
        """Add a slip of this calculation."""
        self.slips.append(Slip(code, name, pattern, value))


def rounded(value: float, digits: int) -> float:
    """A number with so many digits."""
    return float(f"{value:.{digits}g}")


PROPERTY_NAMES = {"rho": "density", "mu": "viscosity", "k": "conductivity", "cp": "specific_heat"}
PROPERTY_LINES = {
    "rho": lambda c, p: c.typed("rho", "density", "Density;Fluid density;ρ", ("kg/m3", "lb/ft3"), p["density"], "ρ"),
    "mu": lambda c, p: c.typed("mu", "viscosity", "Dynamic viscosity;Viscosity;Absolute viscosity", ("mPa.s", "cP"),
                               p["viscosity"], "μ"),
    "k": lambda c, p: c.typed("k", "conductivity", "Thermal conductivity;Conductivity;Fluid conductivity",
                              ("W/mK", "Btu/h-ft-F"), p["conductivity"], "k"),
    "cp": lambda c, p: c.typed("cp", "specific_heat", "Specific heat;Specific heat capacity;Heat capacity",
                               ("kJ/kgK", "Btu/lb-F"), p["specific_heat"], "cp"),
}  # fmt: skip


def between(rng: random.Random, low: float, high: float) -> float:
    """A number between two, evenly in its logarithm."""
    return low * (high / low) ** rng.random()
