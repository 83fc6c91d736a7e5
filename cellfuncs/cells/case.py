"""Cell functions of the family Cases."""

from typing import Any

from cellfuncs.cases import labels
from cellfuncs.cells import convert, solved, table
from cellfuncs.cells.catalogue import Answer, cell_function
from cellfuncs.errors import CaseRefused, CellfuncsError, UnknownName

_SOURCE = "the labels of cellfuncs/data/labels.csv"
_SPREAD = ("±", "+/-")
_SPREAD_BY = "by ±"
# an uncertainty is a difference, whatever the quantity counts from
_DIFFERENCES = {
    "temperature": "temperature_difference",
    "pressure_absolute": "pressure_difference",
    "pressure_gauge": "pressure_difference",
}


@cell_function(
    "CF_BLOCK",
    family="Cases",
    summary="Makes one case block from separate columns of labels, values, units and uncertainties, so that "
    "many cases stand side by side.",
    returns="table",
    source=_SOURCE,
    example='=CF_CASE(CF_BLOCK(A3:A12,D3:D12,B3:B12),"Reynolds number")',
)
def block(labels, values, units=None, plus_minus=None):
    columns = [_column(labels, "labels"), _column(values, "values")]
    for name, given in (("units", units), ("plus_minus", plus_minus)):
        empty = given is None or (len(given) == 1 and given[0][0] in (None, 0.0))
        columns.append([None] * len(columns[0]) if empty else _column(given, name))
    lengths = {len(column) for column in columns}
    if len(lengths) > 1:
        shown = " and ".join(str(n) for n in sorted(lengths))
        raise CaseRefused(f"the columns have {shown} rows; they must be equally long", argument="values")
    if not any(columns[0]):
        raise CaseRefused("empty; give the column of labels", argument="labels")
    return [["" if cell is None else cell for cell in row] for row in zip(*columns, strict=True)]


def _column(rows: list[list[Any]], name: str) -> list[Any]:
    if len(rows) == 1:
        return rows[0]
    if any(len(row) > 1 for row in rows):
        raise CaseRefused("more than one column; give one", argument=name)
    return [row[0] for row in rows]


@cell_function(
    "CF_VARY",
    family="Cases",
    summary="The block with one row replaced, or added where it is not there: for sweeps, inside another function.",
    returns="table",
    source=_SOURCE,
    example='=CF_TERM(CF_VARY(coolant,"velocity",2.5),"viscous heating")',
    takes={"value": "row_value", "unit": "row_unit"},
)
def vary(block, label, value, unit=None):
    value = convert.unwrap(value)
    rows = [list(cells) + [None] * (4 - len(cells)) for _, *cells in block]
    if convert.is_range(value) and "substance" in labels.candidates(label):
        return _with_table(rows, convert.as_rows(value))
    convert.refuse_foreign(value)
    value = convert.plain_cell(value)
    if value is None:
        raise CaseRefused("empty; give the value to put in its place", argument="value")
    wanted = set(labels.candidates(label) or labels.candidates(labels.split_unit(label)[0]))
    if not wanted:
        near = labels.nearest(label)
        raise UnknownName(f'"{label[:60]}" is not known; the nearest is "{near}"', argument="label")
    place = _place(rows, label, wanted)
    if place is None:
        rows.append([label, value, unit, None])
    else:
        old = rows[place]
        kept = unit if unit is not None else old[2]
        rows[place] = [old[0], value, None if isinstance(value, str) and unit is None else kept, None]
    return [["" if cell is None else cell for cell in row] for row in rows]


def _with_table(rows: list[list[Any]], given: list[list[Any]]) -> list[list[Any]]:
    """The block with the user's own table in the place of its substance."""
    tabled = table.block_rows(given)
    kept = [
        row for row in rows
        if not (isinstance(row[0], str) and ("substance" in labels.candidates(row[0]) or table.is_point(row[0])))
    ]  # fmt: skip
    if len(kept) + len(tabled) > convert.MOST_BLOCK_ROWS:
        raise CaseRefused(
            f"the table would put {len(tabled):,} rows into the block, which has at most {convert.MOST_BLOCK_ROWS:,}",
            argument="value",
        )
    return [["" if cell is None else cell for cell in row] for row in [*kept, *tabled]]


def _place(rows: list[list[Any]], label: str, wanted: set[str]) -> int | None:
    """The row that states what the label means: same words first, then the same entry of the dictionary."""
    written = [k for k, row in enumerate(rows) if isinstance(row[0], str)]
    for k in written:
        if rows[k][0].strip().casefold() == label.strip().casefold():
            return k
    flow = _flow(rows)
    for k in written:
        name, unit = labels.split_unit(rows[k][0])
        keys = labels.candidates(rows[k][0]) or labels.candidates(name)
        if not keys:
            continue
        unit = unit or (rows[k][2] if isinstance(rows[k][2], str) else "")
        try:
            if labels.settle(rows[k][0], keys, unit, flow) in wanted:
                return k
        except CaseRefused:
            continue
    return None


def _flow(rows: list[list[Any]]) -> str | None:
    for row in rows:
        if isinstance(row[0], str) and isinstance(row[1], str) and "flow_kind" in labels.candidates(row[0]):
            try:
                return labels.choice("flow_kind", row[1])
            except UnknownName:
                return None
    return None


@cell_function(
    "CF_CASE",
    family="Cases",
    summary="Any stated or derived quantity of a case: a row, a property, a characteristic number or an answer. With ± "
    "before its name its standard uncertainty, with \"by ±\" the rows that make it.",
    returns="quantity",
    source=_SOURCE,
    example='=CF_CASE(coolant,"outlet temperature","degC")',
)
def case_value(block, what):
    solution = solved.solution(block)
    asked = what.strip()
    if asked.startswith(_SPREAD):
        return _spread_of(solution, asked.lstrip("±+/- "))
    if asked.startswith(_SPREAD_BY):
        return _spread_of(solution, asked.removeprefix(_SPREAD_BY).strip(), in_words=True)
    key = quantity_key(solution, what)
    value = solution.value(key)
    if isinstance(value, str):
        return value
    return Answer(float(value), labels.dictionary()[key].kind)


def _spread_of(solution: Any, what: str, in_words: bool = False) -> Any:
    """The standard uncertainty of a quantity, or which rows make it."""
    from cellfuncs.answers.uncertainty import uncertainty

    key = quantity_key(solution, what)
    entry = labels.dictionary()[key]
    if entry.role not in ("stated", "derived") or isinstance(solution.value(key), str):
        raise UnknownName(f'"{entry.label}" is no number; it has no ±', argument="what")
    found = uncertainty(solution, key)
    if in_words:
        return found.words()
    kind = _DIFFERENCES.get(entry.kind, entry.kind)
    return Answer(found.standard, kind)


def quantity_key(solution: Any, what: str) -> str:
    """What a name or symbol means in a case: of several meanings the one that the case has."""
    keys = labels.find_all(what)
    if len(keys) > 1:
        keys = [key for key in keys if _has(solution, key)] or keys
    return labels.settle(what, keys, labels.split_unit(what)[1], solution.case.flow)


def _has(solution: Any, key: str) -> bool:
    try:
        solution.value(key)
    except CellfuncsError:
        return False
    return True
