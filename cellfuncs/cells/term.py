"""Cell functions of the family Terms."""

from cellfuncs.cells import solved
from cellfuncs.cells.catalogue import cell_function
from cellfuncs.errors import UnknownName
from cellfuncs.sources import read_table
from cellfuncs.terms import ALL_LEFT_OUT, COLUMNS, MEASURES, MOMENTUM_TERMS, TERMS
from cellfuncs.terms.table import equation_of

_SOURCE = "scaled energy and momentum equations; recovery and friction as cited by the methods used"
_OTHER_NAMES = {name: row["term"] for row in read_table("term_names.csv") for name in row["names"].split(";")}
_NAMES = tuple(dict.fromkeys((*TERMS, *MOMENTUM_TERMS, ALL_LEFT_OUT)))


def term_name(text: str) -> str:
    """The name of a term of either equation, also by the other names that the trade has for it."""
    return _OTHER_NAMES.get(_plain(text)) or _named(text, _NAMES, "term")


def _plain(text: str) -> str:
    return " ".join(text.replace("-", " ").replace("_", " ").split()).casefold()


def _named(text: str, admissible: tuple[str, ...], argument: str) -> str:
    plain = _plain(text)
    for name in admissible:
        if name.replace("-", " ") == plain:
            return name
    from rapidfuzz import process

    near, score, _ = process.extractOne(plain, admissible)
    hint = f'the nearest is "{near}"' if score >= 75 else f"write one of: {', '.join(admissible)}"
    raise UnknownName(f'"{text[:40]}" is not known; {hint}', argument=argument)


def _equation(text: str | None) -> str:
    return "energy" if text is None else text.strip().casefold()


@cell_function(
    "CF_TERMS",
    family="Terms",
    summary="The term table of a case: how large each term of the energy (or momentum) equation is, its verdict "
    "and the reason.",
    returns="table",
    source=_SOURCE,
    example="=CF_TERMS(coolant)",
)
def terms(block, equation=None):
    return [list(COLUMNS), *map(list, solved.terms(block, _equation(equation)))]


@cell_function(
    "CF_TERM",
    family="Terms",
    summary="One cell of the term table: the share of a term, or its one-scale size, effect, verdict or reason. Terms "
    "that only momentum has are looked up there.",
    returns="table",
    source=_SOURCE,
    example='=CF_TERM(coolant,"viscous heating","verdict")',
)
def term(block, term, measure=None):
    name = term_name(term)
    column = 2 if measure is None else COLUMNS.index(_named(measure, MEASURES, "measure"))
    rows = solved.terms(block, equation_of(name))
    return next(row[column] for row in rows if row[0] == name)
