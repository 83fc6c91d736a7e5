"""Cell functions of the family Quantities."""

from typing import Any

from cellfuncs import __version__, quantities
from cellfuncs.cells import convert, faults
from cellfuncs.cells.catalogue import cell_function
from cellfuncs.cells.grid import MOST_CELLS
from cellfuncs.errors import CellfuncsError, NumberRefused, UnknownName


def _with_unit(value: Any, unit: str) -> float:
    """A plain number for a value whose unit stands elsewhere."""
    value = convert.unwrap(value)
    convert.refuse_foreign(value)
    if value in convert.BLANK:
        raise NumberRefused("empty; give a number", argument="value")
    return convert.number_of(value)


def _over_values(value: Any, one: Any) -> Any:
    """Apply ``one`` to a cell, or to each cell of a range."""
    value = convert.unwrap(value)
    if not convert.is_range(value):
        return one(value)
    rows = convert.as_rows(value)
    if len(rows) * len(rows[0]) > MOST_CELLS:
        raise NumberRefused(f"more than {MOST_CELLS:,} cells")

    def safe(cell: Any) -> Any:
        try:
            return one(cell)
        except convert.Handed as handed:
            return str(handed)
        except CellfuncsError as error:
            return faults.from_error(error, "value")

    return [[safe(cell) for cell in row] for row in rows]


@cell_function(
    "CF_IN_UNIT",
    family="Quantities",
    summary="Converts a value from one unit to another; a temperature difference is not a temperature, "
    "and gauge pressure adds the standard atmosphere.",
    returns="number",
    source="NIST SP 811 (2008), appendix B",
    example='=CF_IN_UNIT(12,"ft/s","m/s")',
    takes={"unit": "quantity_unit"},
)
def in_unit(value, unit, wanted):
    return _over_values(value, lambda cell: quantities.convert(_with_unit(cell, unit), unit, wanted))


@cell_function(
    "CF_SI",
    family="Quantities",
    summary="A value in SI units from a number and the unit that stands elsewhere; "
    "the kind settles units with two meanings, such as degC for a difference.",
    returns="number",
    source="NIST SP 811 (2008), appendix B",
    example='=CF_SI(1250,"kJ/kg-K")',
    takes={"unit": "quantity_unit"},
)
def si(value, unit, kind=None):
    key = quantities.kind_key(kind) if kind else quantities.kinds_for(unit)[0]

    def one(cell: Any) -> float:
        result = quantities.to_si(_with_unit(cell, unit), unit, key)
        quantities.check_physical(result, key)
        return result

    return _over_values(value, one)


@cell_function(
    "CF_UNIT_FITS",
    family="Quantities",
    summary="1 where the unit is one of the kind, 0 where it is not.",
    returns="number",
    source="units of cellfuncs/data/units.csv",
    example='=CF_UNIT_FITS("W/m2K","heat transfer coefficient")',
    takes={"unit": "quantity_unit"},
)
def unit_fits(unit, kind):
    return 1.0 if quantities.unit_fits(unit, quantities.kind_key(kind)) else 0.0


@cell_function(
    "CF_FAULTS",
    family="Quantities",
    summary="Counts the faults in a range and shows the first; 0 where there is none.",
    returns="table",
    source="faults begin with an exclamation mark (cellfuncs/cells/faults.py)",
    example="=CF_FAULTS(A1:H60)",
)
def count_faults(range):
    found = [cell for row in range for cell in row if faults.is_fault(cell) or _is_error(cell)]
    if not found:
        return 0.0
    first = found[0][len(faults.MARK) :] if faults.is_fault(found[0]) else found[0].removeprefix("#error ")
    return f"{len(found)} fault{'s' if len(found) > 1 else ''}, first: {first}"


def _is_error(cell: Any) -> bool:
    return isinstance(cell, str) and cell.startswith("#error ")


@cell_function(
    "CF_LIST",
    family="Quantities",
    summary="A column of what may be typed: labels, choices, units, kinds, terms, measures, answers, properties, "
    "substances, groups or flow kinds.",
    returns="table",
    source="the catalogue and the data files",
    example='=CF_LIST("units","pressure absolute")',
)
def admissible(what, of=None):
    from cellfuncs.cells import lists

    entries = lists.entries(what, of)
    if not entries:
        raise UnknownName(f'nothing to list for "{of}"', argument="of")
    return [[entry] for entry in entries]


@cell_function(
    "CF_VERSION",
    family="Quantities",
    summary="The version of Cellfuncs that answers.",
    returns="text",
    source="cellfuncs/__init__.py",
    example="=CF_VERSION()",
)
def version():
    return __version__
