"""Incompressible liquids and solutions: CoolProp's fits, with limits, freezing and boiling looked after.

CoolProp checks neither pressure nor (for most) boiling of these fits, and some hold placeholders or slips;
what is refused and why stands row by row in ``data/coolprop_liquids.csv``.
"""

import math
import re
import threading
import unicodedata
from functools import cache

from ..errors import NoModel, OutOfRange, UnknownName
from ..sources import read_table
from .base import ATMOSPHERE, PLAUSIBLE_PRESSURE, SLACK, Limits, Substance, check_state, phase_word
from .engine import coolprop, open_state
from .properties import PROPERTIES, property_key
from .texts import folded, kelvin, pascal, percent, shown

P_MAX = 1e7  # [Pa] the fits hold for liquids near atmospheric pressure; common practice
_NEEDS = {
    "kinematic_viscosity": ("viscosity",),
    "thermal_diffusivity": ("conductivity", "specific_heat"),
    "prandtl": ("viscosity", "conductivity", "specific_heat"),
}
_NUMBER = re.compile(
    r"(?<![\w.,])(?P<value>\d+(?:[.,]\d+)?)\s*(?P<basis>vol(?:ume)?|v|wt|weight|mass|m|w)?[\s.\-]*"
    r"(?P<unit>%|percent|per ?cent|‰|g/kg)"
)
_BASIS = re.compile(
    r"\(?\b(?:by\s+)?(?P<word>mass|weight|wt|volume|vol)\b\.?\s*%?\)?"
    r"|\(?(?<!\w)(?P<slash>[wmv])/(?P=slash)(?!\w)\)?"
)
_WATER_WORDS = re.compile(r"\b(?:in|and|with|/|aqueous|aq\.?|solution|water mixture|of)\b|\+|/")


class Liquid(Substance):
    """A liquid fit of CoolProp, pure or at one concentration; made by ``names.find``."""

    def __init__(self, row: dict[str, str], name: str, fraction: float | None = None, note: str = ""):
        self.name = name
        self.family = row["family"]
        self.key = row["key"]
        self.fraction = fraction
        self._row = row
        self._notes = "; ".join(filter(None, (note, row["note"])))
        self._t_min, self._t_max = float(row["t_min"]), float(row["t_max"])
        self._t_boiling = float(row["t_boiling_min"] or "inf")
        self._aqueous = row["aqueous"] == "yes"
        refused = set(row["refused"].split())
        self._refused = refused | {key for key, needs in _NEEDS.items() if refused & set(needs)}
        self._threads = threading.local()
        self._frozen_below = 0.0  # [K] found when the first state is opened

    def get(self, what: str, temperature: float, pressure: float | None = None, phase: str | None = None) -> float:
        """Return property `what` [SI]; see ``Substance.get``. Only boiling depends on the pressure."""
        read = self._reads().get(what)
        if read is None:
            return self._other(what, temperature, pressure, phase)
        if pressure is None:
            pressure = ATMOSPHERE
        if not (
            self._t_low <= temperature <= self._t_max
            and temperature <= 372.0
            and temperature < self._t_boiling
            and ATMOSPHERE <= pressure <= P_MAX
            and phase is None
        ):
            self._check(temperature, pressure, phase)
        threads = self._threads
        try:
            threads.update(threads.pair, pressure, temperature)
            value = read()
        except ValueError as error:
            raise OutOfRange(
                f"the fit of {self.name} has no answer at {kelvin(temperature)} and {pascal(pressure)}"
            ) from error
        if 0.0 < value < 1e300 or (math.isfinite(value) and what in ("enthalpy", "entropy", "expansion_coefficient")):
            return value
        raise NoModel(f"the fit of {self.name} gives no true {PROPERTIES[what].words} at {kelvin(temperature)}")

    def _other(self, what, temperature, pressure, phase) -> float:
        key = property_key(what)
        if key in self._reads():
            return self.get(key, temperature, pressure, phase)
        if key == "saturation_pressure" and self._t_boiling < math.inf:
            return self.saturation(key, temperature=temperature)
        raise self._no_model(key)

    def _check(self, temperature: float, pressure: float, phase: str | None) -> None:
        """Refuse what is outside the fit, frozen, or boiling."""
        phase = phase_word(phase)
        if phase not in (None, "liquid"):
            raise NoModel(f"{self.name} is a liquid here; no model of its {phase} phase is at hand")
        low = self._t_low
        if low > self._t_min and 0 < temperature < low * (1 - SLACK):
            raise OutOfRange(f"{kelvin(temperature)} is below the freezing point of {self.name}, {kelvin(low)}")
        check_state(self.name, temperature, pressure, low, self._t_max, P_MAX)
        if pressure < PLAUSIBLE_PRESSURE and phase is None:
            raise OutOfRange(
                f"{pascal(pressure)} is nearly a vacuum; was bar or kPa meant? "
                f"If the low pressure is right, state the phase: liquid"
            )
        boiling = self._boiling_pressure(temperature)
        if pressure < boiling:
            raise OutOfRange(
                f"{self.name} boils at {kelvin(temperature)} under {pascal(pressure)}: "
                f"it stays liquid from about {pascal(boiling)}"
            )

    def _boiling_pressure(self, temperature: float) -> float:
        """Vapour pressure [Pa]: the fit's own, else for aqueous liquids water's times the water content.

        The product is a rough lower bound for solutes of little vapour pressure (common practice).
        """
        if temperature >= self._t_boiling:
            return self._own_boiling(temperature)
        if not self._aqueous:
            return 0.0
        water = 0.5 if self.fraction is None else 1 - self.fraction
        return water * water_vapour_pressure(temperature)

    def _own_boiling(self, temperature: float) -> float:
        self._reads()
        state = self._threads.state
        try:
            state.update(coolprop().QT_INPUTS, 0.0, temperature)
            return state.p()
        except ValueError:
            return 0.0

    def phase(self, temperature: float, pressure: float | None = None) -> str:
        """Return "liquid", after the checks of ``get``."""
        self._reads()
        self._check(float(temperature), ATMOSPHERE if pressure is None else float(pressure), None)
        return "liquid"

    def saturation(self, what, phase=None, temperature=None, pressure=None) -> float:
        """Return the vapour pressure [Pa] at a temperature [K], where the fit has one; nothing else."""
        key = property_key(what)
        if key != "saturation_pressure" or temperature is None or not self._t_boiling < math.inf:
            raise NoModel(f"only the vapour pressure of some liquids is at hand, not this of {self.name}")
        if not self._t_boiling <= temperature <= self._t_max:
            raise OutOfRange(
                f"{kelvin(temperature)} is outside the range of the vapour pressure of {self.name}, "
                f"{kelvin(self._t_boiling)} to {kelvin(self._t_max)}"
            )
        return self._own_boiling(float(temperature))

    def source(self, what: str) -> str:
        """Return the bibliography key of the fit."""
        key = property_key(what)
        if key not in self._reads() and key != "saturation_pressure":
            raise self._no_model(key)
        return self._row["source"]

    def note(self, what: str) -> str:
        """Return how a concentration was read, what the fit is, and reference states."""
        notes = [self._notes] if self._notes else []
        if property_key(what) in ("enthalpy", "entropy"):
            notes.append("only differences count; reference: 20 degC, 101325 Pa")
        return "; ".join(notes)

    def limits(self) -> Limits:
        """Return the range of the fit at this concentration; the lower end is the freezing point."""
        self._reads()
        return Limits(self._t_low, self._t_max, P_MAX, self._row["source"])

    @property
    def _t_low(self) -> float:
        return max(self._t_min, self._frozen_below)

    def _reads(self) -> dict:
        """The readers of this thread's state; the state is opened at the first touch."""
        try:
            return self._threads.read
        except AttributeError:
            return self._open()

    def _open(self) -> dict:
        module = coolprop()
        state = open_state("INCOMP", self.key, self.fraction, self._row["basis"] or "mass")
        if self._row["freezing"] == "yes":
            self._frozen_below = state.keyed_output(module.iT_freeze)
        density, viscosity, conductivity, heat = (
            state.rhomass,
            state.viscosity,
            state.conductivity,
            state.cpmass,
        )
        slope = state.first_partial_deriv
        d_code, t_code, p_code = module.iDmass, module.iT, module.iP
        read = {
            "density": density,
            "viscosity": viscosity,
            "kinematic_viscosity": lambda: viscosity() / density(),
            "conductivity": conductivity,
            "specific_heat": heat,
            "thermal_diffusivity": lambda: conductivity() / (density() * heat()),
            "prandtl": lambda: viscosity() * heat() / conductivity(),
            "expansion_coefficient": lambda: -slope(d_code, t_code, p_code) / density(),
            "enthalpy": state.hmass,
            "entropy": state.smass,
        }
        for key in self._refused:
            del read[key]
        threads = self._threads
        threads.state, threads.update, threads.pair = state, state.update, module.PT_INPUTS
        threads.read = read
        return read


def water_vapour_pressure(temperature: float) -> float:
    """Vapour pressure of water [Pa], auxiliary equation of Wagner and Pruss (1993), 273.16 to 647.096 K.

    Below 273.16 K it returns that of the supercooled liquid roughly, enough to see that nothing boils.
    """
    tau = 1 - temperature / 647.096
    if tau <= 0:
        return 22.064e6
    series = (
        -7.85951783 * tau
        + 1.84408259 * tau**1.5
        - 11.7866497 * tau**3
        + 22.6807411 * tau**3.5
        - 15.9618719 * tau**4
        + 1.80122502 * tau**7.5
    )
    return 22.064e6 * math.exp(series * 647.096 / temperature)


# ---- names and concentrations


@cache
def liquid_rows() -> dict[str, dict[str, str]]:
    """CoolProp's key -> row of every liquid that is admitted."""
    return {row["key"]: row for row in read_table("coolprop_liquids.csv") if row["family"] != "left out"}


@cache
def liquid_names(with_concentration: bool) -> dict[str, str]:
    """Folded name -> key of the liquids with or without a concentration."""
    names = {}
    for key, row in liquid_rows().items():
        if bool(row["basis"]) == with_concentration:
            for name in (row["name"], *row["aliases"].split(";")):
                names[folded(name)] = key
    return names


@cache
def _solute_densities() -> dict[str, float]:
    return {row["solute"]: float(row["density_at_20_degC"]) for row in read_table("solutes.csv")}


def mass_fraction(volume_fraction: float, solute: str) -> float:
    """Mass fraction from the volume fraction before mixing, with the densities of both at 20 degC."""
    table = _solute_densities()
    part = volume_fraction * table[solute]
    return part / (part + (1 - volume_fraction) * table["water"])


def volume_fraction(mass_fraction: float, solute: str) -> float:
    """Volume fraction before mixing from the mass fraction; see ``mass_fraction``."""
    table = _solute_densities()
    part = mass_fraction / table[solute]
    return part / (part + (1 - mass_fraction) / table["water"])


def solution(text: str) -> tuple[str, str, float, str] | None:
    """Read "ethylene glycol 30 % by mass": (key, name, fraction on the basis of the fit, note).

    None when the text has no concentration of a known solute. Raises UnknownName where it must be asked
    (which glycol, by mass or by volume), OutOfRange for a concentration outside the fit.
    """
    plain = unicodedata.normalize("NFKC", text).casefold()
    number = _NUMBER.search(plain)
    if not number:
        return None
    rest = plain[: number.start()] + " " + plain[number.end() :]
    basis = number["basis"]
    word = _BASIS.search(rest)
    if word:
        basis = basis or word["word"] or word["slash"]
        rest = rest[: word.start()] + " " + rest[word.end() :]
    names = liquid_names(True)
    key = names.get(folded(rest)) or names.get(folded(_WATER_WORDS.sub(" ", rest)))
    if key is None:
        _ask_which(rest)
        return None
    row = liquid_rows()[key]
    value = float(number["value"].replace(",", ".")) / (1000 if number["unit"] in ("‰", "g/kg") else 100)
    if number["unit"] in ("‰", "g/kg"):
        basis = basis or "mass"
    if basis is None and row["ask_basis"] == "yes":
        short = row["aliases"].split(";")[0]
        raise UnknownName(
            f"{percent(value)} of {short} by mass or by volume? Write {short} {percent(value)} by mass, or by volume"
        )
    basis = "volume" if basis and basis[0] == "v" else "mass"
    return (key, *_on_the_basis(row, value, basis))


def _on_the_basis(row: dict[str, str], value: float, basis: str) -> tuple[str, float, str]:
    """Name, fraction on the basis of the fit and note, for a concentration as it was given."""
    name = f"{row['name']} {percent(value)} by {basis}"
    note, fraction = "", value
    if basis != row["basis"]:
        if not row["solute"]:
            raise UnknownName(f"the data of {row['name']} go by {row['basis']}: give the percentage by {row['basis']}")
        convert = mass_fraction if basis == "volume" else volume_fraction
        fraction = convert(value, row["solute"])
        note = f"{percent(value)} by {basis} is {percent(fraction)} by {row['basis']} (densities at 20 degC)"
    low, high = float(row["x_min"]), float(row["x_max"])
    if not low - SLACK <= fraction <= high + SLACK:
        raise OutOfRange(
            f"{name}: {percent(fraction)} by {row['basis']} is outside the data, {percent(low)} to {percent(high)}"
        )
    return name, min(max(fraction, low), high), note


def _ask_which(rest: str) -> None:
    """Ask where a name means several solutes."""
    words = set(re.findall(r"\w+", rest))
    filler = {"in", "water", "and", "with", "solution", "aqueous", "of", "inhibited"}
    if words & {"glycol", "glycols", "antifreeze"} and words <= filler | {"glycol", "glycols", "antifreeze"}:
        raise UnknownName("which glycol: write ethylene glycol or propylene glycol")
    if "brine" in words and words <= filler | {"brine", "salt"}:
        raise UnknownName("which salt: write for instance sodium chloride 20 % or calcium chloride 20 %")


def ask_concentration(text: str) -> None:
    """Raise for the name of a solution without its concentration; return when it is none."""
    key = liquid_names(True).get(folded(text))
    if key is None:
        _ask_which(text.casefold())
        if _BASIS.search(text.casefold()) and re.search(r"\d", text) and not _NUMBER.search(text.casefold()):
            raise UnknownName(f"{shown(text)}: write the concentration in percent, with its sign, as in 30 %")
        return
    row = liquid_rows()[key]
    example = "3.5 %" if key == "MITSW" else "20 %" + (f" by {row['basis']}" if row["ask_basis"] == "yes" else "")
    short = row["aliases"].split(";")[0] if row["aliases"] and key != "MITSW" else row["name"]
    raise UnknownName(f"{shown(text)} needs its concentration: write for instance {short} {example}")
