"""The term table: fixed columns, fixed rows, a reason in words in each."""

from collections.abc import Callable, Mapping

from cellfuncs.answers import Solution
from cellfuncs.errors import UnknownName
from cellfuncs.terms import body, duct, free, gap, layer, momentum
from cellfuncs.terms.size import Size, percent
from cellfuncs.terms.spread import Survival, survival
from cellfuncs.terms.verdicts import KEEP, LEAVE_OUT, Judged, judge, left_out

COLUMNS = ("term", "one-scale", "share", "effect", "verdict", "reason")
MEASURES = COLUMNS[1:]
TERMS = (
    "storage",
    "advection",
    "conduction across",
    "conduction along",
    "wall conduction",
    "viscous heating",
    "pressure work",
    "volumetric source",
    "wall radiation",
)
MOMENTUM_TERMS = momentum.TERMS
EQUATIONS = ("energy", "momentum")
ALL_LEFT_OUT = "all left out"
NO_MODEL = "no model"
NO_SHARE = "no share"
_SIZES: Mapping[str, Callable[[Solution], list[Size]]] = {
    "duct": duct.sizes,
    "plate": layer.sizes,
    "cylinder": layer.sizes,
    "sphere": layer.sizes,
    "jet": layer.sizes,
    "bank": duct.sizes,
    "bed": duct.sizes,
    "falling film": duct.sizes,
    "free": free.sizes,
    "enclosure": free.enclosure_sizes,
    "mixed": layer.sizes,
    "body": body.sizes,
    "gap": gap.sizes,
}

Row = tuple[str, float, float | str, float | str, str, str]


def judged(solution: Solution, equation: str = "energy") -> list[Judged]:
    """Every term of an equation with its share and verdict."""
    if equation not in EQUATIONS:
        named = " or ".join(EQUATIONS)
        raise UnknownName(f'"{equation[:40]}" is not an equation that is judged; write {named}', argument="equation")
    case = solution.case
    return judge(_sizes_of(case.flow, equation)(solution), case.tolerance, case.smallest)


def _sizes_of(flow: str, equation: str) -> Callable[[Solution], list[Size]]:
    return momentum.sizes if equation == "momentum" else _SIZES[flow]


def equation_of(term: str) -> str:
    """The equation that has a term; storage and what both have is the energy equation's."""
    return "energy" if term in (*TERMS, ALL_LEFT_OUT) else "momentum"


def term_rows(solution: Solution, equation: str = "energy") -> list[Row]:
    """Rows of the term table (without the head): term, one-scale, share, effect, verdict, reason."""
    terms = judged(solution, equation)
    survives = survival(solution, terms, _sizes_of(solution.case.flow, equation))
    rows = [_row(j, survives.get(j.size.term)) for j in terms]
    return [*rows, _together(terms, solution.case.tolerance)]


def _row(j: Judged, survives: Survival | None) -> Row:
    reason = "; ".join(filter(None, (j.why, survives.words() if survives else "", j.size.says)))
    share = NO_SHARE if j.size.no_share else j.share
    return j.size.term, j.size.one_scale, share, NO_MODEL, j.verdict, reason


def _together(judged: list[Judged], tolerance: float) -> Row:
    out = left_out(judged)
    share = sum(j.share for j in out)
    one_scale = sum(j.size.one_scale for j in judged if j.verdict == LEAVE_OUT)
    if not any(j.verdict == LEAVE_OUT for j in judged):
        return ALL_LEFT_OUT, 0.0, 0.0, NO_MODEL, KEEP, "every term is kept"
    names = ", ".join(f"{j.size.term} with pressure work" if j.size.pair else j.size.term for j in out)
    if not names:
        return ALL_LEFT_OUT, one_scale, 0.0, NO_MODEL, LEAVE_OUT, "only terms that the case as stated does not have"
    reason = f"{names}: {percent(share)} together, tolerance {percent(tolerance)}"
    if any(j.by_kelvins for j in out):
        reason += "; some are left out because the kelvins do not matter"
    return ALL_LEFT_OUT, one_scale, share, NO_MODEL, LEAVE_OUT, reason
