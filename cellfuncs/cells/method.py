"""Cell functions of the family Methods: published correlations, chosen for a case or named."""

from functools import lru_cache
from typing import Any

from cellfuncs import sources
from cellfuncs.answers import choice
from cellfuncs.answers.friction import friction_factor
from cellfuncs.answers.listing import listed, listed_friction
from cellfuncs.cases import labels
from cellfuncs.cells import faults, inputs_block, solved
from cellfuncs.cells.catalogue import cell_function
from cellfuncs.errors import CaseRefused, CellfuncsError, NoModel, UnknownName
from cellfuncs.methods import METHODS, Method

COLUMNS = ("method", "nusselt", "coefficient", "in range", "scatter", "property temperature", "source", "reason")
IN_RANGE = "in range"
_SOURCE = "the method's own, as CF_SOURCE tells it"

Block = tuple[tuple[Any, ...], ...]


def with_method(block: Block, method: str | None, label: str = "method") -> Block:
    """The block with a row that names the method; the rows that named one are left out."""
    if method is None:
        return block
    name = _named(method).name
    rows = [row for row in block if not (isinstance(row[1], str) and label in labels.candidates(row[1]))]
    return (*rows, (len(block) + 1, labels.dictionary()[label].label, name))


def _named(method: str) -> Method:
    """The method of a name; what is wrong is about the argument that names it."""
    try:
        return choice.find(method)
    except UnknownName as error:
        error.argument = "method_name"
        raise


def _solution(block: Block, method: str | None, label: str = "method") -> Any:
    """The solved case by a method; what the method refuses is about the method."""
    given = with_method(block, method, label)
    try:
        return solved.solution(given)
    except CellfuncsError as error:
        if method is not None and choice.find(method).name in str(error):
            error.argument = "method_name"
        raise


@cell_function(
    "CF_METHODS",
    family="Methods",
    summary="Every published method that gives the coefficient of a case (friction where the answer is the pressure "
    "drop): number, range, scatter, property temperature, source; the recommended one first, with the reason.",
    returns="table",
    source=_SOURCE,
    example="=CF_METHODS(coolant)",
)
def methods(block):
    solution = solved.solution(block)
    if solution.case.answer == "pressure drop":
        found = [(row, row.friction, row.drop) for row in listed_friction(solution)]
        head = ("method", "friction factor", "pressure drop", *COLUMNS[3:])
    else:
        found = [(row, row.nusselt, row.coefficient) for row in listed(solution)]
        head = COLUMNS
    rows: list[list[Any]] = [list(head)]
    for row, group, number in found:
        at = row.candidate.view.temperature
        method = row.method
        rows.append([
            method.name, group, number,
            faults.clip(f"outside: {row.candidate.outside}") if row.candidate.missed else IN_RANGE,
            method.scatter, method.property_temperature if at is None else at,
            _reference(method.source), faults.clip(row.reason),
        ])  # fmt: skip
    return rows


@lru_cache(maxsize=1024)
def _reference(keys: str) -> str:
    """The references where there is room for all of them, else the first."""
    full = sources.cite(keys)
    return full if len(full) <= faults.LONGEST_TEXT else faults.clip(sources.cite(keys.split(";")[0]))


@cell_function(
    "CF_COEFFICIENT",
    family="Methods",
    summary="The heat transfer coefficient of a case by the recommended or a named method; its loops on film and wall "
    "temperature are closed.",
    returns="quantity",
    kind="heat_transfer_coefficient",
    source=_SOURCE,
    example='=CF_COEFFICIENT(coolant,"Gnielinski","W/m2K")',
)
def coefficient(block, method_name=None):
    if not inputs_block.is_case(block):
        return inputs_block.coefficient(block, method_name)
    if method_name is not None and (named := _named(method_name)).gives not in choice.NUSSELT:
        raise NoModel(f"{named.name} gives a {named.gives}, no coefficient", argument="method_name")
    answers = _solution(block, method_name).answers
    found = getattr(answers, "film", 0.0) or getattr(answers, "coefficient", None)
    if found is None:
        raise NoModel("a sheared gap has no coefficient; its walls' fluxes are answers of CF_CASE")
    return found


@cell_function(
    "CF_PRESSURE_DROP",
    family="Methods",
    summary="The frictional pressure drop of a case by the recommended or a named method of friction, with the losses "
    "of fittings where the case states them.",
    returns="quantity",
    kind="pressure_difference",
    source=_SOURCE,
    example='=CF_PRESSURE_DROP(coolant,"Haaland","kPa")',
)
def pressure_drop(block, method_name=None):
    solution = _solution(block, method_name, "friction_method")
    if not hasattr(solution.answers, "pressure_drop"):
        raise NoModel(f"a case of the flow kind {solution.case.flow} has no pressure drop")
    if method_name is not None and solution.case.has("pressure_drop"):
        raise CaseRefused("the case states its pressure drop; leave the row out to compute it", argument="method_name")
    return solution.answers.pressure_drop


@cell_function(
    "CF_NUSSELT_OF",
    family="Methods",
    summary="The Nusselt number of a case by a method; or the number of any named method from a block of its inputs "
    "(Reynolds number, ratios, lengths), SI.",
    returns="number",
    source=_SOURCE,
    example='=CF_NUSSELT_OF(coolant,"Gnielinski")',
)
def nusselt_of(block, method_name=None):
    if inputs_block.is_case(block):
        solution = _solution(block, method_name)
        found = getattr(solution.answers, "nusselt", None)
        if found is None:
            raise NoModel(f"a case of the flow kind {solution.case.flow} has no Nusselt number")
        return found
    return inputs_block.number(block, method_name)


@cell_function(
    "CF_FRICTION",
    family="Methods",
    summary="Darcy's friction factor of a straight round tube from Reynolds number and relative roughness: 64/Re, "
    "Colebrook-White, a blend between, or a named method.",
    returns="number",
    source=_SOURCE,
    example='=CF_FRICTION(50000,0.001,"Colebrook-White")',
    by_array=friction_factor,
)
def friction(reynolds, relative_roughness, method_name=None):
    try:
        return friction_factor(reynolds, relative_roughness, method_name)
    except UnknownName as error:
        error.argument = "method_name"
        raise


@cell_function(
    "CF_SOURCE",
    family="Methods",
    summary="What stands behind a method: the reference in full, its range, its scatter, and the temperature at which "
    "its author took properties.",
    returns="text",
    source="cellfuncs/data/sources.csv",
    example='=CF_SOURCE("Gnielinski")',
)
def source(method_name):
    try:
        method = choice.find(method_name)
    except UnknownName as error:
        keys = [key.strip() for key in method_name.split(";")]
        if all(key in sources.bibliography() for key in keys):
            return faults.clip(sources.cite(";".join(keys)))
        error.argument = "method_name"
        raise
    return describe(METHODS[method.name])


def describe(method: Any) -> str:
    """What it gives, range, scatter, property temperature, reference; where a cell has no room for all of it, authors
    and year stand there with the keys under which CF_SOURCE tells the reference in full."""
    gives = f"{method.gives} on {method.length}" if method.length and "Nu" in method.gives else method.gives
    span = ", ".join(r.words() for r in method.ranges) or "no limits"
    scatter = f"±{100 * method.scatter:g} %" if method.scatter else "exact"
    at = "" if method.property_temperature == "none" else f"; properties: {method.property_temperature}"
    warning = f"{method.warning}. " if method.warning else ""
    facts = f"{gives}; {span}; {scatter}{at}. "
    whole = facts + warning + sources.cite(method.source)
    if len(whole) <= faults.LONGEST_TEXT:
        return whole
    keys = [key.strip() for key in method.source.split(";")]
    full = " and ".join(f'=CF_SOURCE("{key}")' for key in keys)
    for short in (f"{'; '.join(sources.cite(key).split(':')[0] for key in keys)}, in full {full}. ", f"{full}. "):
        room = faults.LONGEST_TEXT - len(facts) - len(short)
        if room >= min(len(warning), _WORTH):
            return facts + short + (faults.clip(warning, room) if warning else "").strip()
    return faults.clip(facts + f'in full =CF_SOURCE("{keys[0]}")')


_WORTH = 60  # characters of a warning that still say something
