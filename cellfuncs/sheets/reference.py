"""The function reference: the facts about each cell function, gathered once.

The command line, the workbook (``reference_book.py``) and the pages (``reference_pages.py``) all show what stands
here. The answers of the examples are computed when the workbooks are built and kept in ``data/examples.json``, so
that showing them costs nothing.
"""

import json
import re
import textwrap
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any, NamedTuple

from cellfuncs import groups, quantities, sources
from cellfuncs.cells.catalogue import FAMILIES, CellFunction, functions

EXAMPLES_FILE = "examples.json"
EXAMPLE_CELLS = "with the cells of the sheet Example in functions.xlsx"
MOST_ROWS = 20  # of an example's answer that are kept

FAMILY_WORDS = {
    "Quantities": "Units as engineers write them, lists of what may be typed, and the count of faults.",
    "Substances": "Properties of fluids, solutions, oils and moist air, inside their published ranges.",
    "Groups": "One function for each characteristic number, from its definition.",
    "Cases": "Quantities, properties and answers of a case block, and blocks made from other blocks.",
    "Terms": "Which terms of the equations matter for a case, and why.",
    "Methods": "Coefficients, friction and pressure drop from published correlations.",
    "Checks": "Whether a number agrees with what it rests on, and what was probably done where it does not.",
}
_FORM_WORDS = {
    "text": "text",
    "unit": "text, a unit",
    "block": "case block",
    "range": "range of cells",
    "value": "number or text",
}


class ArgumentFacts(NamedTuple):
    """One argument: name, what it is, its SI unit ("" where it is no quantity), optional or not, help."""

    name: str
    kind: str
    unit: str
    optional: bool
    help: str


@dataclass(frozen=True)
class Example:
    """A formula and what it answers: rows of numbers and texts, at most MOST_ROWS of ``count`` rows."""

    formula: str
    rows: tuple[tuple[Any, ...], ...]
    count: int
    unit: str

    @property
    def is_table(self) -> bool:
        return self.count > 1 or len(self.rows[0]) > 1

    @property
    def where(self) -> str:
        """Where the cells are that the formula names; "" where it names none."""
        outside = "".join(self.formula.split('"')[::2])
        return EXAMPLE_CELLS if re.search(r"\b(coolant|[A-Z]+\d+:[A-Z]+\d+)\b", outside) else ""

    @property
    def single(self) -> str:
        """The answer of one cell as a reader wants to see it."""
        return f"{shown(self.rows[0][0])} {self.unit}".rstrip()


@dataclass(frozen=True)
class Facts:
    """All there is to say about a cell function."""

    name: str
    family: str
    call: str
    summary: str
    arguments: tuple[ArgumentFacts, ...]
    answers: str
    group: groups.Group | None
    formula: str
    example: Example | None
    source: str


class Table(NamedTuple):
    """A table that goes with the functions: methods, kinds of quantity, labels of a block."""

    key: str
    title: str
    intro: str
    heads: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]


def shown(value: Any) -> str:
    """A cell value with six digits, as the command line shows it."""
    return f"{value:.6g}" if isinstance(value, float) else str(value)


def call_of(function: CellFunction) -> str:
    """CF_X(a, b, [c]) as one reads it in a formula."""
    words = [f"[{one.name}]" if one.optional else one.name for one in function.arguments]
    return f"{function.name}({', '.join(words)})"


@cache
def stored() -> Mapping[str, Any]:
    """The block of the examples and their answers, as they were when the workbooks were built."""
    path = sources.DATA / EXAMPLES_FILE
    return json.loads(path.read_text("utf-8")) if path.exists() else {"block": [], "answers": {}}


def example_of(function: CellFunction) -> Example | None:
    """The example with its answer; None where the catalogue has another example by now."""
    kept = stored()["answers"].get(function.name)
    if kept is None or kept["formula"] != function.example:
        return None
    return Example(kept["formula"], tuple(map(tuple, kept["rows"])), kept["count"], kept["unit"])


def facts(function: CellFunction) -> Facts:
    """The facts about one cell function."""
    example = example_of(function)
    group = groups.table().get(function.name.removeprefix("CF_").lower()) if function.family == "Groups" else None
    return Facts(
        function.name, function.family, call_of(function), function.summary,
        tuple(_argument(one) for one in function.arguments), _answers(function, example), group,
        function.example, example, function.source,
    )  # fmt: skip


def by_family() -> dict[str, list[Facts]]:
    """The facts about all cell functions, family by family."""
    found: dict[str, list[Facts]] = {family: [] for family in FAMILIES}
    for function in functions().values():
        found[function.family].append(facts(function))
    return {family: entries for family, entries in found.items() if entries}


def _argument(one: Any) -> ArgumentFacts:
    kind = quantities.KINDS.get(one.kind)
    if kind is None:
        return ArgumentFacts(one.name, _FORM_WORDS.get(one.form, one.form), "", one.optional, one.help)
    return ArgumentFacts(one.name, kind.words, kind.si_unit, one.optional, one.help)


def _answers(function: CellFunction, example: Example | None) -> str:
    """What comes back, in words."""
    if function.returns == "quantity":
        if function.kind is None:
            return "a quantity in SI units, or in the unit wanted"
        kind = quantities.KINDS[function.kind]
        return f"{kind.words} in {kind.si_unit}, or in the unit wanted"
    if function.returns == "number":
        return "a number without dimension" if function.family == "Groups" else "a number"
    if function.returns == "text":
        return "a text"
    if not function.example.startswith(f"={function.name}("):
        return "rows of cells, for use inside another function"
    if example is None:
        return "a number, a text or a table"
    if not example.is_table:
        return "a number or a text"
    heads = example.rows[0]
    if len(heads) == 1:
        return "a column"
    return f"a table with the columns {', '.join(map(str, heads))}"


# -- for the command line ----------------------------------------------------------------------------


def listing(width: int = 100) -> str:
    """All functions with their summaries, under their families."""
    lines: list[str] = []
    family = None
    for function in functions().values():
        if function.family != family:
            family = function.family
            lines += ["", family] if lines else [family]
        lines += ["  " + call_of(function), *_wrapped(function.summary, "      ", width)]
    return "\n".join(lines)


def text(function: CellFunction, width: int = 100) -> str:
    """The facts as plain text, lines of at most ``width`` characters."""
    told = facts(function)
    lines = [told.call, *_wrapped(told.summary, "  ", width), "", "Arguments"]
    for one in told.arguments:
        notes = [f"{one.kind}, SI unit {one.unit}" if one.unit else one.kind]
        notes += ["optional"] if one.optional else []
        lines += [f"  {one.name} ({', '.join(notes)})", *_wrapped(one.help, "      ", width)]
    if not told.arguments:
        lines.append("  none")
    lines += ["", *_wrapped(f"Answers: {told.answers}", "", width)]
    if told.group is not None:
        lines += [f"Symbol: {told.group.symbol}", f"Formula: {told.group.formula}"]
        lines += _wrapped(f"Compares: {told.group.compares}", "", width)
        lines += _wrapped(f"Decides: {told.group.decides}", "", width)
    lines += ["", "Example", f"  {told.formula}", *_answer_lines(told.example, width), ""]
    lines += [f"Family: {told.family}", *_wrapped(f"Source: {told.source}", "", width)]
    return "\n".join(lines)


def _answer_lines(example: Example | None, width: int) -> list[str]:
    if example is None:
        return []
    gives = f"gives, {example.where}," if example.where else "gives"
    if not example.is_table:
        return _wrapped(f"{gives} {example.single}", "  ", width)
    rows = [[shown(cell) for cell in row] for row in example.rows]
    widths = [max(map(len, column)) for column in zip(*rows, strict=True)]
    lines = _wrapped(gives, "  ", width)
    for row in rows:
        line = "    " + "  ".join(cell.ljust(size) for cell, size in zip(row, widths, strict=True)).rstrip()
        lines.append(line if len(line) <= width else line[: width - 1].rstrip() + "…")
    if example.count > len(rows):
        lines.append(f"    … and {example.count - len(rows)} more rows")
    return lines


def _wrapped(words: str, indent: str, width: int) -> list[str]:
    return textwrap.wrap(words, width, initial_indent=indent, subsequent_indent=indent)


# -- tables that go with the functions ---------------------------------------------------------------


def tables() -> tuple[Table, ...]:
    """Published methods, labels of a case block, kinds of quantity."""
    return (_methods(), _labels(), _kinds())


def _methods() -> Table:
    from cellfuncs.methods import METHODS

    functions()  # the methods are recorded by the modules that use them
    rows = tuple(
        (
            one.name,
            (one.function.__doc__ or "").strip().splitlines()[0],
            one.gives,
            "; ".join(r.words() for r in one.ranges) or "any",
            f"{100 * one.scatter:g} %" if one.scatter else "exact",
            one.property_temperature,
            sources.cite(one.source),
        )
        for one in METHODS.values()
    )
    return Table(
        "correlations",
        "Published correlations",
        "What CF_CASE takes a coefficient or a friction factor from. Outside its range a correlation refuses, unless "
        "the case has the row: beyond range | allow.",
        ("name", "what it is", "gives", "range", "scatter", "properties at", "source"),
        rows,
    )


def _labels() -> Table:
    from cellfuncs.cases import labels

    rows = []
    for key, entry in labels.dictionary().items():
        kind = quantities.KINDS.get(entry.kind)
        if entry.role == "choice":
            takes = ", ".join(labels.choices(key))
        else:
            takes = kind.words if kind else "text"
        role = "follows from the case" if entry.role == "derived" else "stated in the block"
        flows = ", ".join(entry.flows) or "all"
        also = ", ".join((*entry.symbols, *entry.synonyms))
        rows.append((entry.label, role, takes, kind.si_unit if kind else "", flows, also))
    return Table(
        "labels",
        "Labels of a case block",
        "What may stand in the first column of a case block, and what CF_CASE may be asked for.",
        ("label", "where it comes from", "what it takes", "SI unit", "flow kinds", "also written"),
        tuple(rows),
    )


def _kinds() -> Table:
    rows = tuple(
        (kind.words, kind.symbol, kind.si_unit, ", ".join(kind.units), kind.example, ", ".join(kind.aliases))
        for kind in quantities.KINDS.values()
    )
    return Table(
        "kinds",
        "Kinds of quantity",
        "The kinds that arguments and labels have, with usual units; every other unit of the same dimension will do.",
        ("kind", "symbol", "SI unit", "usual units", "for instance", "also called"),
        rows,
    )
