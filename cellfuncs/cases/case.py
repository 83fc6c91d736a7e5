"""The case: what is stated, and what follows from it by definition.

What needs a coefficient (outlet temperature, a wall temperature under a given flux, and so the
property temperature of some flows) comes from ``answers/``.
"""

from collections.abc import Mapping
from functools import cached_property
from typing import Any, NamedTuple

from cellfuncs import substances
from cellfuncs.cases import labels, shear, tabled
from cellfuncs.cases.sections import Duct, section_of
from cellfuncs.errors import CaseRefused, CellfuncsError

STANDARD_ATMOSPHERE = 101_325.0
DEFAULT_TOLERANCE = 0.05
DEFAULT_SMALLEST = 0.1  # K

# property of a substance -> label that overrides it
_PRESCRIBED = ("wall_temperature", "heat_flux", "temperature_difference", "ambient_temperature", "beyond_temperature")
_OVERRIDES = {
    "density": "density",
    "viscosity": "viscosity",
    "conductivity": "conductivity",
    "specific_heat": "specific_heat",
    "expansion_coefficient": "expansion",
}
_THROUGH = ("outlet temperature", "wall temperature", "coefficient", "duty", "local flux", "pressure drop")
_EXTERNAL = ("coefficient", "wall temperature", "duty", "local flux")
_ANSWERS = {
    "duct": _THROUGH,
    "plate": _EXTERNAL,
    "cylinder": _EXTERNAL,
    "sphere": _EXTERNAL,
    "jet": _EXTERNAL,
    "bank": _THROUGH,
    "bed": _THROUGH,
    "falling film": _THROUGH,
    "free": _EXTERNAL,
    "mixed": _EXTERNAL,
    "body": ("wall temperature", "duty"),
    "enclosure": ("coefficient", "duty", "local flux"),
    "gap": ("peak temperature", "local flux"),
}


def flow_words(flow: str) -> str:
    """The flow kind as a noun in a sentence."""
    return f"surface in {flow} convection" if flow in ("free", "mixed") else flow


def answers_of(flow: str) -> tuple[str, ...]:
    """The answers that the verdicts of a flow kind may be for."""
    return _ANSWERS[flow]


class Properties(NamedTuple):
    """Properties at one temperature, SI."""

    density: float
    viscosity: float
    conductivity: float
    specific_heat: float
    expansion: float

    @property
    def prandtl(self) -> float:
        return self.viscosity * self.specific_heat / self.conductivity

    @property
    def diffusivity(self) -> float:
        return self.conductivity / (self.density * self.specific_heat)


class Case:
    """One operating point: a flow kind and its stated rows."""

    def __init__(self, flow: str, stated: Mapping[str, Any], points: tuple[tabled.Point, ...] = ()):
        self.flow = flow
        self.stated = stated
        self.points = points  # properties at temperatures
        self.origin: Case | None = None  # the case as stated, where a row was put in that follows

    def stating(self, stated: Mapping[str, Any], flow: str | None = None) -> "Case":
        """The case with other rows, of another flow kind where one is named."""
        return Case(flow or self.flow, stated, self.points)

    def without(self, key: str) -> "Case":
        """The case without a row."""
        return self.stating({name: entry for name, entry in self.stated.items() if name != key})

    def get(self, key: str, default: Any = None) -> Any:
        """The stated value in SI, or the default."""
        entry = self.stated.get(key)
        return default if entry is None else entry.value

    def has(self, key: str) -> bool:
        return key in self.stated

    def need(self, *keys: str) -> Any:
        """The first stated of ``keys``, or a refusal that asks for them by name."""
        for key in keys:
            if key in self.stated:
                return self.stated[key].value
        names = [f'"{labels.dictionary()[k].label}"' for k in keys]
        listed = " or ".join([", ".join(names[:-1]), names[-1]] if len(names) > 1 else names)
        raise CaseRefused(f"the row {listed} is missing for a {flow_words(self.flow)}")

    @property
    def tolerance(self) -> float:
        return self.get("tolerance", DEFAULT_TOLERANCE)

    @property
    def smallest(self) -> float:
        return self.get("smallest", DEFAULT_SMALLEST)

    @property
    def allow(self) -> bool:
        """Whether methods may answer beyond their published range."""
        return self.get("beyond_range") == "allow"

    @property
    def _has_path(self) -> bool:
        """Whether a temperature beyond the wall is stated instead of one at it."""
        return self.has("ambient_temperature") or self.has("beyond_temperature")

    @cached_property
    def wall(self) -> str:
        """``temperature`` or ``flux``: what is prescribed at the wall."""
        prescribed = [k for k in _PRESCRIBED if self.has(k)]
        if self.has("heat_flux") and len(prescribed) > 1:
            names = " and ".join(f'"{self.stated[k].label}"' for k in prescribed)
            raise CaseRefused(f"{names} are both stated; prescribe the flux or the wall temperature, not both")
        if self._has_path and len(prescribed) > 1:
            names = " and ".join(f'"{self.stated[k].label}"' for k in prescribed)
            raise CaseRefused(f"{names} are both stated; give the wall or what lies beyond it")
        if not prescribed and self.flow != "duct":
            self.need("wall_temperature", "heat_flux", "temperature_difference")
        return "flux" if self.has("heat_flux") else "temperature"

    @cached_property
    def answer(self) -> str:
        """The answer the verdicts are for: the row, or the default of the flow kind."""
        if _ANSWERS[self.flow] is _THROUGH:
            default = "wall temperature" if self.wall == "flux" else "outlet temperature"
        else:
            default = _ANSWERS[self.flow][0]
        wanted = self.get("answer", default)
        if wanted not in _ANSWERS[self.flow] or self._wall_is_given(wanted):
            none = f"a {flow_words(self.flow)} has none"
            why = "the wall temperature is prescribed" if wanted == "wall temperature" else none
            rest = [a for a in _ANSWERS[self.flow] if not self._wall_is_given(a)]
            raise CaseRefused(f'"answer" is {wanted}, but {why}; write one of: {", ".join(rest)}')
        return wanted

    def _wall_is_given(self, answer: str) -> bool:
        """Whether the answer is the wall's temperature where that is prescribed."""
        if answer != "wall temperature" or self.flow == "body" or self._has_path:
            return False
        return self.wall == "temperature"

    # -- geometry and flow ------------------------------------------------------------------

    @cached_property
    def duct(self) -> Duct:
        """The cross-section, from the rows that describe it."""
        return section_of(self)

    def velocity(self, density: float) -> float:
        """Mean velocity [m/s], stated or from the one flow that is stated."""
        given = [k for k in ("velocity", "volume_flow", "mass_flow") if self.has(k)]
        if len(given) > 1:
            names = " and ".join(f'"{self.stated[k].label}"' for k in given)
            raise CaseRefused(f"{names} are both stated; state one of velocity, volume flow, mass flow")
        if self.has("velocity"):
            return self.get("velocity")
        if self.flow != "duct":
            return self.need("velocity")
        flow = self.need("velocity", "volume_flow", "mass_flow")
        area = self.duct.area
        if area is None:
            missing = self.duct.area_needs
            raise CaseRefused(f'a velocity from "{self.stated[given[0]].label}" needs the row "{missing}"')
        return flow / area if self.has("volume_flow") else flow / (density * area)

    # -- properties -------------------------------------------------------------------------

    @cached_property
    def substance(self) -> Any:
        """The substance named, or the table of the block, or None when every property is stated."""
        found = self.table
        if self.has("substance"):
            try:
                found = substances.find(self.get("substance"))
            except CellfuncsError as error:
                raise CaseRefused(f'"{self.stated["substance"].label}": {error}') from None
        if self.has("shear_rate") and not shear.thins(found):
            label = self.stated["shear_rate"].label
            raise CaseRefused(f'"{label}" is for a melt whose name leaves its shear rate open')
        return found

    @cached_property
    def table(self) -> Any:
        """The table that rows such as ``viscosity at 40 degC`` make, or None."""
        return tabled.substance_of(self.points) if self.points else None

    @cached_property
    def pressure(self) -> float:
        if self.has("pressure") and self.has("gauge_pressure"):
            raise CaseRefused("pressure and gauge pressure are both stated; keep one")
        return self.get("pressure", self.get("gauge_pressure", self.get("atmosphere", STANDARD_ATMOSPHERE)))

    @cached_property
    def fixed(self) -> bool:
        """Whether all properties are stated, so that no temperature enters them."""
        return not self._wanted

    @cached_property
    def _stated_properties(self) -> dict[str, float]:
        found = {name: self.get(label) for name, label in _OVERRIDES.items() if self.has(label)}
        if self.has("kinematic_viscosity"):
            if self.has("viscosity"):
                raise CaseRefused("viscosity and kinematic viscosity are both stated; keep one")
            if "density" in found:
                found["viscosity"] = self.get("kinematic_viscosity") * found["density"]
        if "expansion_coefficient" not in found and not self._expands:
            found["expansion_coefficient"] = 0.0  # said in the reason of pressure work
        return found

    @property
    def _expands(self) -> bool:
        """Whether an expansion coefficient follows; constants of a melt or a table may leave it open."""
        if self.table is not None and self.table.has("expansion_coefficient"):
            return True
        return self.has("substance") and getattr(self.substance, "expands", True)

    @cached_property
    def _wanted(self) -> tuple[str, ...]:
        return tuple(name for name in _OVERRIDES if name not in self._stated_properties)

    def properties(self, temperature: float | None) -> Properties:
        """Properties at a temperature [K], each overridden by its row where there is one."""
        known = dict(self._stated_properties)
        wanted = self._wanted
        if self.has("kinematic_viscosity") and "density" not in known:
            wanted = tuple(w for w in wanted if w != "viscosity")
        if wanted:
            if self.substance is None:
                missing = next(w for w in wanted if w != "expansion_coefficient")
                label = labels.dictionary()[_OVERRIDES[missing]].label
                raise CaseRefused(f'the row "{label}" is missing; state it, or name a "substance"')
            if temperature is None:
                raise CaseRefused(
                    'properties need a temperature; add the row "property temperature" or the temperatures of the flow'
                )
            self._from_substance(known, wanted, temperature)
        if "viscosity" not in known:
            known["viscosity"] = self.get("kinematic_viscosity") * known["density"]
        return Properties(*(known[name] for name in _OVERRIDES))

    def property_of(self, name: str, temperature: float | None) -> float:
        """One property of the substance, or the row that overrides it."""
        stated = self._stated_properties.get(name)
        if stated is not None:
            return stated
        if self.substance is None:
            self.need(_OVERRIDES[name])
        if temperature is None:
            self.need("property_temperature")
        return self._source_of(name).get(name, temperature, self.pressure)

    def _source_of(self, name: str) -> Any:
        """The table of the block where it has the property, else the substance named."""
        table = self.table
        return table if table is not None and table.has(name) else self.substance

    def _from_substance(self, known: dict[str, float], wanted: tuple[str, ...], temperature: float) -> None:
        """Put the wanted properties at a temperature into ``known``; density stands first in the order."""
        pressure = self.pressure
        for name in wanted:
            source = self.substance if self.table is None else self._source_of(name)
            if name == "viscosity":
                if self.table is not None and self.table.has_column("kinematic_viscosity"):
                    nu = self.table.get("kinematic_viscosity", temperature, pressure)
                    known[name] = nu * known["density"]
                    continue
                if shear.thins(source):
                    known[name] = shear.sheared(self, source, temperature, known["density"]).viscosity
                    continue
            known[name] = source.get(name, temperature, pressure)

    def sheared(self, temperature: float | None) -> shear.Sheared | None:
        """The melt of the case at the shear rate it has, or None where no melt is named or its rate is."""
        if "viscosity" not in self._wanted or temperature is None or not shear.thins(self._source_of("viscosity")):
            return None
        density = self.property_of("density", temperature)
        return shear.sheared(self, self._source_of("viscosity"), temperature, density)

    def refuse_phase_change(self, entering: float | None, *others: float | None) -> None:
        """Refuse a fluid that is liquid where it enters and gas elsewhere, or the other way round."""
        if self.fixed or entering is None:
            return
        first = self.substance.phase(entering, self.pressure)
        for temperature in others:
            if temperature is None:
                continue
            then = self.substance.phase(temperature, self.pressure)
            if {first, then} == {"liquid", "gas"}:
                raise CaseRefused(
                    f"{self.substance.name} is {first} where it enters and {then} at {temperature - 273.15:.1f} degC; "
                    "one phase is assumed: change temperatures or pressure, or split the case"
                )

    def is_gas(self, temperature: float | None) -> bool:
        """Whether the substance is a gas there; False where all properties are stated."""
        if self.fixed or temperature is None:
            return False
        return self.substance.phase(temperature, self.pressure) == "gas"

    def speed_of_sound(self, temperature: float | None) -> float | None:
        """Speed of sound of the substance, or None where it is not known."""
        if self.substance is None or temperature is None:
            return None
        try:
            return self.substance.get("speed_of_sound", temperature, self.pressure)
        except CellfuncsError:
            return None
