"""The term table: fixed columns, fixed rows, a reason in words in each."""

from collections.abc import Callable, Mapping

from cellfuncs.answers import Solution
from cellfuncs.answers.effects import Fitting, models_of
from cellfuncs.errors import UnknownName
from cellfuncs.terms import body, duct, free, gap, layer, momentum, priced
from cellfuncs.terms.size import Size, num, percent
from cellfuncs.terms.spread import Doubt, Survival, relative, survival, uncertainty_of
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
NO_MODEL = priced.NO_MODEL
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


def judged(solution: Solution, equation: str = "energy", quickly_for: str = "") -> list[Judged]:
    """Every term of an equation with its share, its effect where a model gives one, and its verdict."""
    return _judged(solution, equation, quickly_for)[0]


def _judged(
    solution: Solution, equation: str, quickly_for: str = "", fitting: Fitting | None = None
) -> tuple[list[Judged], priced.Effects, Mapping[str, Doubt]]:
    if equation not in EQUATIONS:
        named = " or ".join(EQUATIONS)
        raise UnknownName(f'"{equation[:40]}" is not an equation that is judged; write {named}', argument="equation")
    case = solution.case
    sizes_of = _sizes_of(case.flow, equation)
    sizes = sizes_of(solution)
    if equation != "energy":
        effects = priced.priced_momentum(solution, sizes)
        uncertain = uncertainty_of(solution, sizes, sizes_of)
        return judge(sizes, case.tolerance, case.smallest, effects, relative(uncertain)), effects, uncertain
    effects = priced.priced(solution, sizes, quickly_for, fitting)
    uncertain = {} if quickly_for else uncertainty_of(solution, sizes, sizes_of)
    return judge(sizes, case.tolerance, case.smallest, effects, relative(uncertain)), effects, uncertain


def sizes(solution: Solution, equation: str = "energy") -> list[Size]:
    """The terms of an equation as they are, without verdicts."""
    return _sizes_of(solution.case.flow, equation)(solution)


def _sizes_of(flow: str, equation: str) -> Callable[[Solution], list[Size]]:
    return momentum.sizes if equation == "momentum" else _SIZES[flow]


def equation_of(term: str) -> str:
    """The equation that has a term; storage and what both have is the energy equation's."""
    return "energy" if term in (*TERMS, ALL_LEFT_OUT) else "momentum"


def term_rows(solution: Solution, equation: str = "energy") -> list[Row]:
    """Rows of the term table (without the head): term, one-scale, share, effect, verdict, reason."""
    fitting = models_of(solution) if equation == "energy" else None  # what they have solved serves all rows
    terms, effects, uncertain = _judged(solution, equation, fitting=fitting)
    survives = survival(solution, terms, _sizes_of(solution.case.flow, equation), effects, uncertain)
    driving = solution.driving
    rows = [_row(j, survives.get(j.size.term), effects.get(j.size.term, NO_MODEL), driving) for j in terms]
    return [*rows, _together(solution, terms, equation, fitting)]


def _row(j: Judged, survives: Survival | None, effect: priced.Priced | str, driving: float) -> Row:
    missing = ""
    if isinstance(effect, str) and not j.size.leading and j.verdict != KEEP:
        missing = effect if effect != NO_MODEL else ""
    parts = (j.why, survives.words() if survives else "", j.size.says, missing)
    share = NO_SHARE if j.size.no_share else j.share
    shown = priced.NOT_LEFT_OUT if j.size.leading else NO_MODEL
    if isinstance(effect, priced.Priced):
        # between equal walls a peak has no base; the driving difference gives the number its size
        shown = effect.ratio if effect.ratio is not None else (effect.kelvins or 0.0) / driving
    return j.size.term, j.size.one_scale, share, shown, j.verdict, "; ".join(filter(None, parts))


def _together(solution: Solution, judged: list[Judged], equation: str, fitting: Fitting | None) -> Row:
    tolerance = solution.case.tolerance
    out = left_out(judged)
    share = sum(j.share for j in out)
    one_scale = sum(j.size.one_scale for j in judged if j.verdict == LEAVE_OUT)
    if not any(j.verdict == LEAVE_OUT for j in judged):
        return ALL_LEFT_OUT, 0.0, 0.0, 0.0, KEEP, "every term is kept"
    names = ", ".join(f"{j.size.term} with pressure work" if j.size.pair else j.size.term for j in out)
    if not names:
        return ALL_LEFT_OUT, one_scale, 0.0, 0.0, LEAVE_OUT, "only terms that the case as stated does not have"
    ratio, kelvins, rest, models = None, None, [], ""
    if equation == "energy":
        ratio, kelvins, rest, models = priced.together(solution, [j.size.term for j in out], fitting)
    elif all(j.effect is not None for j in out):
        ratio, models = sum(j.weight for j in out), "balance of momentum"
    by_share = [j for j in out if j.size.term in rest]
    effect: float | str = NO_MODEL
    reason = f"{names}: shares {percent(share)} together, tolerance {percent(tolerance)}"
    if ratio is not None:
        effect = ratio + sum(j.share for j in by_share)
        moved = f", {num(kelvins)} K" if kelvins is not None else ""
        reason = f"{names}: effect {percent(effect)}{moved} together ({models}), tolerance {percent(tolerance)}"
        if by_share:
            reason += f"; {', '.join(j.size.term for j in by_share)} by share"
    if any(j.by_kelvins for j in out):
        reason += "; some are left out because the kelvins do not matter"
    return ALL_LEFT_OUT, one_scale, share, effect, LEAVE_OUT, reason
