"""The user's own table as a substance: a range with a row of heads, a column of temperatures, columns of properties.

A head is a property with its unit: ``temperature [degC]``, ``viscosity (mPa s)``; the units may also stand in a
row of their own below the heads. Columns headed note, remark, comment or source, and columns without a head and
without values, are passed over.
"""

import re
from functools import lru_cache
from typing import Any

from cellfuncs import quantities, substances
from cellfuncs.cases import labels
from cellfuncs.cases.tabled import PROPERTY_OF, property_key, split_temperature
from cellfuncs.cells import convert, faults
from cellfuncs.errors import CellfuncsError, NumberRefused, UnitRefused, UnknownName

MOST_ROWS = 2_000
MOST_COLUMNS = 40
REMEMBERED = 64
EXAMPLE = "temperature [degC] | density [kg/m3] | viscosity [mPa s]"
TEMPERATURE_HEADS = frozenset(("temperature", "temp", "temp.", "t", "θ", "ϑ"))
WITHOUT_VALUES = frozenset(("note", "notes", "remark", "remarks", "comment", "comments", "source", "sources", ""))
_BRACKETS = (re.compile(r"^(.+?)\s*\[([^\[\]]*)\]\s*$"), re.compile(r"^([^(]+?)\s*\((.*)\)\s*$"))
_COMMA = re.compile(r"^(.+?)\s*[,;]\s*([^,;]+)$")


class SubstanceReader(convert.TextReader):
    """Reads a substance: its name, a range of names, or a table of the user's own."""

    def __call__(self, value: Any) -> Any:
        if type(value) is str:
            return super().__call__(value)
        if isinstance(value, substances.Substance):
            return value
        value = convert.unwrap(value)
        if convert.is_range(value):
            rows = convert.as_rows(value)
            if is_table(rows):
                return from_rows(rows)
        return super().__call__(value)


def is_table(rows: list[list[Any]]) -> bool:
    """Whether a range is meant as a table of properties: several columns, and heads or numbers in them."""
    if len(rows[0]) < 2:
        return False
    if any(_is_temperature(cell) for cell in rows[0]):
        return True
    return any(isinstance(cell, (int, float)) and not isinstance(cell, bool) for row in rows for cell in row)


def _is_temperature(cell: Any) -> bool:
    return isinstance(cell, str) and _split(cell)[0].casefold() in TEMPERATURE_HEADS


def from_rows(rows: list[list[Any]]) -> substances.Substance:
    """The substance of a table; a fault or an error value in any of its cells goes out as it is."""
    return _remembered(_plain(rows))


def _plain(rows: list[list[Any]]) -> tuple[tuple[Any, ...], ...]:
    """The rows that are not blank, with plain cells."""
    if len(rows) > MOST_ROWS or len(rows[0]) > MOST_COLUMNS:
        raise NumberRefused(f"a table of at most {MOST_ROWS:,} rows and {MOST_COLUMNS} columns is wanted")
    plain = []
    for row in rows:
        cells = tuple(map(convert.plain_cell, row))
        for cell in cells:
            if faults.is_fault(cell):
                raise convert.Handed(cell)
        if any(cell is not None for cell in cells):
            plain.append(cells)
    return tuple(plain)


def block_rows(rows: list[list[Any]]) -> list[list[Any]]:
    """The table as rows of a case block: ``viscosity at 313.15 K``, value, unit; refused where it is none.

    Only properties that cases use are put into the block.
    """
    from_rows(rows)
    temperatures, columns = _columns(_plain(rows))
    found = []
    for label, key in PROPERTY_OF.items():
        entry = labels.dictionary()[label]
        unit = quantities.KINDS[entry.kind].si_unit
        for temperature, value in zip(temperatures, columns.get(key, ()), strict=False):
            if value is not None:
                found.append([f"{entry.label} at {temperature!r} K", value, unit, None])
    return found


@lru_cache(maxsize=REMEMBERED)
def _remembered(rows: tuple[tuple[Any, ...], ...]) -> substances.Substance:
    return substances.from_table(*_columns(rows))


def is_point(label: str) -> bool:
    """Whether a label of a block states a property at a temperature."""
    parts = split_temperature(label)
    return parts is not None and property_key(parts[0]) is not None


def _columns(rows: tuple[tuple[Any, ...], ...]) -> tuple[list[float], dict[str, list[float | None]]]:
    """Temperatures, and the values of each property, SI."""
    if not rows or not any(map(_is_temperature, rows[0])):
        raise NumberRefused(f"a table of properties begins with a row of heads: {EXAMPLE}")
    heads = [_head(cell) for cell in rows[0]]
    body = list(enumerate(rows[1:], start=2))
    if body and _are_units(heads, body[0][1]):
        units = body.pop(0)[1]
        heads = [(key, kind, unit or units[k] or "") for k, (key, kind, unit) in enumerate(heads)]
    columns: dict[str, list[float | None]] = {}
    for place, (key, kind, unit) in enumerate(heads):
        if not key:
            _refuse_headless(rows, place)
            continue
        if key in columns:
            raise NumberRefused(f'"{key.replace("_", " ")}" stands twice in the heads of the table')
        columns[key] = [_value(row[place], key, kind, unit, number) for number, row in body]
    temperatures = columns.pop("temperature")
    filled = [k for k, one in enumerate(temperatures) if one is not None]
    for key, values in columns.items():
        for k, one in enumerate(values):
            if one is not None and temperatures[k] is None:
                raise NumberRefused(f"row {body[k][0]} of the table has a {key.replace('_', ' ')} but no temperature")
        columns[key] = [values[k] for k in filled]
    return [temperatures[k] for k in filled], columns


def _head(cell: Any) -> tuple[str, str, str]:
    """(key, kind, unit) of a head; key "" where the column holds no values."""
    if cell is None or (isinstance(cell, str) and cell.casefold() in WITHOUT_VALUES):
        return "", "", ""
    if not isinstance(cell, str):
        raise NumberRefused(f"{cell:g} stands where a head is wanted; write the heads so: {EXAMPLE}")
    name, unit = _split(cell)
    if name.casefold() in TEMPERATURE_HEADS:
        key, kind = "temperature", "temperature"
    else:
        try:
            key = substances.property_key(name)
        except UnknownName as error:
            raise UnknownName(f"head of the table: {error}") from None
        kind = substances.PROPERTIES[key].kind
    if unit and not quantities.unit_fits(unit, kind):
        words = quantities.KINDS[kind].words
        raise UnitRefused(f'"{unit[:30]}" in the head "{cell[:40]}" is no unit of a {words}')
    return key, kind, unit


def _split(text: str) -> tuple[str, str]:
    """``viscosity [mPa s]`` -> ``viscosity``, ``mPa s``; no unit where there is none."""
    text = " ".join(text.split()).rstrip(":")
    for pattern in (*_BRACKETS, _COMMA):
        found = pattern.match(text)
        if found:
            return found[1].strip(), found[2].strip()
    return text, ""


def _are_units(heads: list[tuple[str, str, str]], row: tuple[Any, ...]) -> bool:
    """Whether a row below the heads holds their units: texts only, one at least, each a unit of its column."""
    found = [
        isinstance(cell, str) and bool(key) and quantities.unit_fits(cell, kind)
        for (key, kind, _), cell in zip(heads, row, strict=True)
        if cell is not None
    ]
    return bool(found) and all(found)


def _refuse_headless(rows: tuple[tuple[Any, ...], ...], place: int) -> None:
    if rows[0][place] is None and any(isinstance(row[place], float) for row in rows):
        raise NumberRefused(f"column {place + 1} of the table has values but no head")


def _value(cell: Any, key: str, kind: str, unit: str, number: int) -> float | None:
    """One value in SI; None for a blank cell."""
    if cell is None:
        return None
    words = key.replace("_", " ")
    try:
        if isinstance(cell, str) and cell.startswith("#error "):
            raise NumberRefused(f"the cell shows an error ({cell.removeprefix('#error ')}); mend that cell first")
        if isinstance(cell, str):
            reading = quantities.read_number(cell)
            if reading.unit_text:
                value = quantities.read_quantity(cell, kind)
                quantities.check_physical(value, kind)
                return value
            cell = reading.value
        if not unit and kind != "dimensionless":
            raise UnitRefused(f"write its unit into the head: {words} [{quantities.KINDS[kind].units[0]}]")
        value = quantities.to_si(cell, unit or "1", kind)
        quantities.check_physical(value, kind)
    except CellfuncsError as error:
        raise type(error)(f"row {number} of the table, {words}: {error}") from None
    return value
