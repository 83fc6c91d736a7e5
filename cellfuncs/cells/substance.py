"""Cell functions of the family Substances."""

from collections.abc import Callable
from typing import Any

from cellfuncs import quantities, sources, substances
from cellfuncs.cells.catalogue import Answer, cell_function
from cellfuncs.errors import CellfuncsError, NoModel, NumberRefused, UnknownName

_SOURCE = "CoolProp and the sources that CF_PROPERTIES names for each property"
_KINDS = {key: entry.kind for key, entry in substances.PROPERTIES.items()}
_NOT_AVAILABLE = "not available"


def _blamed(argument: str, function: Callable[..., Any], *arguments: Any) -> Any:
    """Call, and let a refusal name ``argument`` unless it names another one; a missing model is about ``what``."""
    try:
        return function(*arguments)
    except CellfuncsError as error:
        if error.argument is None:
            error.argument = "what" if isinstance(error, NoModel) else argument
        raise


def _found(given: Any) -> substances.Substance:
    """The substance of a name, or the table that the reader has made one."""
    return given if isinstance(given, substances.Substance) else substances.find(given)


def _property_columns(substance: Any, what: Any, temperature: Any, pressure: Any = None) -> Answer:
    """Columns of properties: one state a temperature, whatever the number of properties."""
    import numpy as np

    if isinstance(substance, list) or (isinstance(what, list) and len(what) > 1):
        raise NumberRefused("one substance and one row of properties in a call over a range")
    keys = [substances.property_key(name) for name in (what[0] if isinstance(what, list) else [what])]
    found = _found(substance)
    states = np.broadcast_arrays(np.atleast_2d(temperature), np.atleast_2d(np.nan if pressure is None else pressure))
    shape = states[0].shape
    if len(keys) > 1 and shape[1] > 1:
        raise NumberRefused("a row of properties goes with a column of temperatures")
    pressures = None if pressure is None else states[1].ravel()
    values = found.get_many(tuple(keys), states[0].ravel(), pressures)
    kinds = {_KINDS[key] for key in keys}
    kind = kinds.pop() if len(kinds) == 1 else ""
    return Answer(values.reshape(shape) if len(keys) == 1 else values.T, kind)


@cell_function(
    "CF_PROPERTY",
    family="Substances",
    summary="A property of a substance at a temperature and pressure, inside its published range.",
    returns="quantity",
    source=_SOURCE,
    example='=CF_PROPERTY("water","viscosity","40 degC")',
    by_array=_property_columns,
)
def property_of(substance, what, temperature, pressure=None):
    key = _blamed("what", substances.property_key, what)
    found = _found(substance)
    return Answer(_blamed("temperature", found.get, key, temperature, pressure), _KINDS[key])


@cell_function(
    "CF_PROPERTIES",
    family="Substances",
    summary="All properties of a substance at a temperature and pressure, with unit and source.",
    returns="table",
    source=_SOURCE,
    example='=CF_PROPERTIES("ethylene glycol 30 % by mass","20 degC")',
)
def properties(substance, temperature, pressure=None):
    found = _found(substance)
    rows: list[list[Any]] = [["property", "value", "unit", "source"]]
    first_problem = None
    answered = False
    for key, entry in substances.PROPERTIES.items():
        unit = quantities.KINDS[entry.kind].si_unit
        try:
            value = found.get(key, temperature, pressure)
            note = found.note(key)
            source = sources.cite(found.source(key))
            rows.append([entry.words, float(value), unit, f"{source}; {note}" if note else source])
            answered = answered or key != "molar_mass"
        except CellfuncsError as error:
            first_problem = first_problem or error
            rows.append([entry.words, _NOT_AVAILABLE, unit, str(error)])
    if not answered and first_problem is not None:
        first_problem.argument = first_problem.argument or "temperature"
        raise first_problem
    rows.append(["phase", found.phase(temperature, pressure), "", _range(found)])
    return rows


def _range(found: substances.Substance) -> str:
    """The range in which a substance answers, and where it is from."""
    limits = found.limits()
    highest = "" if limits.p_max is None else f", up to {limits.p_max / 1e6:.4g} MPa"
    low, high = limits.t_min - 273.15, limits.t_max - 273.15
    return f"range {low:.5g} to {high:.5g} degC{highest}; {sources.cite(limits.source)}"


@cell_function(
    "CF_SATURATION",
    family="Substances",
    summary="A property of the saturated liquid or vapour at a temperature or a pressure.",
    returns="quantity",
    source=_SOURCE,
    example='=CF_SATURATION("R134a","density","liquid","25 degC")',
)
def saturation(substance, what, phase, temperature=None, pressure=None):
    key = _blamed("what", substances.property_key, what)
    if (temperature is None) == (pressure is None):
        given = "both are" if temperature is not None else "none is"
        raise NumberRefused(f"give either a temperature or a pressure; {given} given", argument="temperature")
    found = _found(substance)
    given = "temperature" if pressure is None else "pressure"
    value = _blamed(given, found.saturation, key, phase, temperature, pressure)
    return Answer(value, _KINDS[key])


@cell_function(
    "CF_MOIST_AIR",
    family="Substances",
    summary="A property of moist air; specific volume and enthalpy are per kilogram of dry air.",
    returns="quantity",
    source="CoolProp's moist air, after ASHRAE RP-1485 (Herrmann, Kretzschmar and Gatley 2009)",
    example='=CF_MOIST_AIR("dew point","25 degC","60 %",,"degC")',
)
def moist_air(what, temperature, relative_humidity, pressure=None):
    key = _blamed("what", substances.property_key, what, "moist air")
    given = substances.ATMOSPHERE if pressure is None else pressure
    value = _blamed("temperature", substances.moist_air, key, temperature, relative_humidity, given)
    return Answer(value, substances.MOIST_AIR[key].kind)


@cell_function(
    "CF_OIL_VISCOSITY",
    family="Substances",
    summary="Kinematic viscosity of an oil at a temperature from two known viscosities (ASTM D341).",
    returns="quantity",
    kind="kinematic_viscosity",
    source="ASTM D341",
    example='=CF_OIL_VISCOSITY("60 degC","40 degC","46 cSt","100 degC","6.8 cSt","cSt")',
)
def oil_viscosity(temperature, temperature_1, viscosity_1, temperature_2, viscosity_2):
    return substances.oil_viscosity(temperature, temperature_1, viscosity_1, temperature_2, viscosity_2)


@cell_function(
    "CF_SUBSTANCES",
    family="Substances",
    summary="The substances whose name or alias contains a text, with family and other names.",
    returns="table",
    source="names of cellfuncs/data",
    example='=CF_SUBSTANCES("glycol")',
)
def known_substances(contains=None):
    rows = [[cell or "none" for cell in row] for row in substances.names(contains or "")]
    if not rows:
        raise UnknownName(f'no substance has "{contains[:40]}" in its name')
    return [["substance", "family", "other names"], *rows]
