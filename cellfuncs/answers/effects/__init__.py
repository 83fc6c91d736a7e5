"""What leaving out a term does to the answer of a case: the flow solved with it and without it.

``effect`` gives the change of an answer for one term, ``together`` for several at once. Each file has the models of one
family; the first that fits the case and knows the term answers. Where none does, NoModel says why.
"""

from collections.abc import Iterable
from dataclasses import dataclass

from cellfuncs.answers import Solution
from cellfuncs.answers.effects.balance import BalancedDuct, ExpandingDuct, RampedDuct
from cellfuncs.answers.effects.duct import DIGITS, SolvedDuct
from cellfuncs.answers.effects.film import HeatedFilm
from cellfuncs.answers.effects.model import ALONG, KINDS, PAIR, TEMPERATURES, Effect, EffectModel
from cellfuncs.answers.effects.outside import RadiatingWall, RecoveringLayer, StillPlate
from cellfuncs.answers.effects.solid import CoolingBody
from cellfuncs.errors import CellfuncsError, NoModel

__all__ = ["KINDS", "PAIR", "TEMPERATURES", "Effect", "Fitting", "effect", "models_of", "together"]

_WORDS = {"free": "surface in a still fluid", "mixed": "mixed convection", "gap": "sheared gap", "body": "solid body"}
_DUCT = (ExpandingDuct, SolvedDuct, BalancedDuct, RampedDuct)
_LAYER = (RecoveringLayer, RadiatingWall)
_MODELS: dict[str, tuple[type[EffectModel], ...]] = {
    "duct": _DUCT,
    "plate": _LAYER,
    "cylinder": _LAYER,
    "sphere": _LAYER,
    "jet": _LAYER,
    "mixed": (RadiatingWall,),
    "free": (StillPlate, RadiatingWall),
    "enclosure": (RadiatingWall,),
    "gap": (HeatedFilm,),
    "body": (CoolingBody,),
}


@dataclass(frozen=True)
class Fitting:
    """The models that fit a case, the first choice first, and why the others do not."""

    models: tuple[EffectModel, ...]
    reasons: tuple[tuple[frozenset[str], str], ...]  # terms that a model would have had, why it does not fit

    def why_not(self, terms: frozenset[str]) -> str:
        """Why no model has these terms; the last choice speaks, which asks for least."""
        for model in reversed(self.models):
            for term in terms & model.lacks.keys():
                return model.lacks[term]
        for known, reason in reversed(self.reasons):
            if terms & known:
                return reason
        return ""


def models_of(solution: Solution, digits: int = DIGITS) -> Fitting:
    """The models of a case; ducts are solved at groups of so many digits, few where neighbours shall share them."""
    found, reasons = [], []
    for build in _MODELS.get(solution.case.flow, ()):
        try:
            model = build(solution, digits) if build is SolvedDuct else build(solution)
        except CellfuncsError as error:
            reasons.append((build.terms, str(error)))
        else:
            found.append(model)
    return Fitting(tuple(found), tuple(reasons))


def effect(solution: Solution, term: str, answer: str | None = None, fitting: Fitting | None = None) -> Effect:
    """The effect of leaving out a term on an answer (default: the one the case asks for); NoModel where none is known.

    Friction heat and pressure work of a duct are left out as a pair. ``fitting`` spares finding the models again.
    """
    answer = answer or solution.case.answer
    fitting = fitting or models_of(solution)
    terms = frozenset({term})
    reason = ""
    # models that would cost more than a small term is worth come last
    for model in sorted(fitting.models, key=lambda m: m.passes(terms, answer)):
        if terms <= model.terms and answer in model.answers:
            try:
                return model.effect(answer, terms)
            except CellfuncsError as error:
                reason = reason or str(error)
    if not reason and any(terms <= model.terms for model in fitting.models):
        reason = f"what {term} does to the {answer} is not solved"
    flow = solution.case.flow
    reason = reason or fitting.why_not(terms)
    raise NoModel(f"no model: {reason}" if reason else f"no model of {term} is solved for a {_WORDS.get(flow, flow)}")


def together(
    solution: Solution, terms: Iterable[str], answer: str | None = None, fitting: Fitting | None = None
) -> tuple[list[Effect], list[str]]:
    """The effects of leaving out all these terms: one for each model that has some of them, solved without all of its
    own at once; and the terms that no model has."""
    answer = answer or solution.case.answer
    rest = list(dict.fromkeys(terms))
    effects: list[Effect] = []
    fitting = fitting or models_of(solution)
    small = frozenset(rest)
    for model in sorted(fitting.models, key=lambda m: m.passes(small & m.terms - {ALONG}, answer)):
        own = frozenset(t for t in rest if t in model.terms)
        if not own or answer not in model.answers:
            continue
        try:
            effects.append(model.effect(answer, own))
        except CellfuncsError:
            continue
        dropped = own | PAIR if own & PAIR and model.pairs else own
        rest = [t for t in rest if t not in dropped]
    return effects, rest
