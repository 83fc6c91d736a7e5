"""The effect of each term, ready for a verdict: what leaving it out does to the answer, or why that is not known."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from cellfuncs.answers import Solution, effects
from cellfuncs.errors import CellfuncsError, NoModel
from cellfuncs.terms.size import Size, num, percent

NO_MODEL = "no model"
NOT_LEFT_OUT = "never left out"
SILENT = " "  # words of an effect whose verdict alone is wanted
# terms of momentum that pressure pays for along a duct, and how far that may be off
_PAID = {"inertia": 0.3, "storage": 0.1, "buoyancy": 0.3}
_FEW_DIGITS = 3
_TINY = 1e-5  # a share
_UNITS = {
    "temperature_difference": "K",
    "heat_transfer_coefficient": "W/(m2 K)",
    "power": "W",
    "heat_flux": "W/m2",
    "pressure_difference": "Pa",
}


@dataclass(frozen=True)
class Priced:
    """An effect as a verdict needs it: over its base, in kelvins for a temperature, how sure it is, in words."""

    ratio: float | None
    kelvins: float | None
    doubt: float  # relative: how far the effect may be off, by the model's physics and its error
    words: str


class Scaled:
    """An effect in a case that differs a little: the same, changed as its share changes. Two thousand of them are made
    for the ± of a case, so that it has no words."""

    __slots__ = ("doubt", "kelvins", "ratio", "words")

    def __init__(self, effect: Priced, factor: float):
        self.ratio = None if effect.ratio is None else effect.ratio * factor
        self.kelvins = None if effect.kelvins is None else effect.kelvins * factor
        self.doubt = effect.doubt
        self.words = SILENT if effect.words else ""


Effects = Mapping[str, Priced | Scaled | str]


def priced(
    solution: Solution, sizes: Sequence[Size], quickly_for: str = "", fitting: effects.Fitting | None = None
) -> dict[str, Priced | str]:
    """Term -> its effect, or the words that stand where there is none.

    ``quickly_for`` one term, as a map wants it: groups are rounded so that neighbours share a solution, and tiny
    terms beside the one are not solved. ``fitting`` spares finding the models again.
    """
    if fitting is None or quickly_for:
        fitting = effects.models_of(solution, _FEW_DIGITS) if quickly_for else effects.models_of(solution)
    largest = max(s.size if s.nets_to is None else s.nets_to for s in sizes)
    found: dict[str, Priced | str] = {}
    for s in sizes:
        if s.leading:
            found[s.term] = NOT_LEFT_OUT
        elif quickly_for and s.term != quickly_for and max(s.asked or 0.0, s.size / (largest or 1.0)) < _TINY:
            found[s.term] = f"{NO_MODEL}: too small to be solved for"
        else:
            found[s.term] = _one(solution, s, fitting)
    return found


def _one(solution: Solution, s: Size, fitting: effects.Fitting) -> Priced | str:
    if is_absent(s):
        return Priced(0.0, 0.0 if solution.case.answer in effects.TEMPERATURES else None, 0.0, "")
    try:
        return in_words(effects.effect(solution, s.term, fitting=fitting))
    except CellfuncsError as error:
        text = str(error)
        return text if text.startswith(NO_MODEL) else f"{NO_MODEL}: {text}"


def is_absent(s: Size) -> bool:
    """Whether the case as stated does not have the term."""
    return s.size == 0.0 and not s.asked and s.settled is None and not s.no_share and not s.leading


def in_words(e: effects.Effect) -> Priced:
    """An effect with what its reason says."""
    unit = _UNITS[effects.KINDS[e.answer]]
    size = f"{e.change:+.3g} {unit}" if e.change else f"0 {unit}"
    over = f", {percent(e.ratio)} of {num(e.base)} {unit}" if e.ratio is not None else ""
    doubt = e.spread + (abs(e.error / e.change) if e.change else 0.0)
    words = f"without it {e.answer.removesuffix(' temperature')} {size}{over} ({e.model})"
    return Priced(e.ratio, e.kelvins, min(doubt, 1.0), words)


def together(
    solution: Solution, terms: Sequence[str], fitting: effects.Fitting | None = None
) -> tuple[float | None, float | None, list[str], str]:
    """All these left out at once: ratio and kelvins by models, the terms that none has, and the models' names."""
    found, rest = effects.together(solution, terms, fitting=fitting)
    if not found:
        return None, None, rest, ""
    ratios = [abs(e.ratio) for e in found if e.ratio is not None]
    kelvins = [e.kelvins for e in found if e.kelvins is not None]
    names = ", ".join(dict.fromkeys(e.model for e in found))
    return sum(ratios) if ratios else None, sum(kelvins) if kelvins else None, rest, names


def on_pressure_drop(solution: Solution, s: Size) -> effects.Effect:
    """The change of a duct's pressure drop without a term of the momentum equation: along a duct of one section the
    pressure pays for each of them, size times length."""
    if solution.case.flow != "duct" or s.term not in _PAID:
        raise NoModel(f"no model gives what {s.term} does to the pressure drop of a {solution.case.flow}", "term")
    a = solution.answers
    drop = abs(a.pressure_drop)
    return effects.Effect("pressure drop", -s.size * a.length, drop, 0.0, _PAID[s.term], "balance of momentum")


def priced_momentum(solution: Solution, sizes: Sequence[Size]) -> dict[str, Priced | str]:
    """Term -> its effect on the pressure drop, where that is the answer and the flow is a duct's."""
    if solution.case.answer != "pressure drop":
        return {}
    found: dict[str, Priced | str] = {}
    for s in sizes:
        try:
            found[s.term] = NOT_LEFT_OUT if s.leading else in_words(on_pressure_drop(solution, s))
        except CellfuncsError:
            continue
    return found


def change(solution: Solution, s: Size, answer: str | None = None) -> effects.Effect:
    """The effect of one term on an answer, with what has none refused in words (NoModel)."""
    answer = answer or solution.case.answer
    if s.leading:
        raise NoModel(f"{s.term} is never left out here: the coefficient rests on it", argument="term")
    if is_absent(s):
        return effects.Effect(answer, 0.0, None, 0.0, 0.0, f"the case has no {s.term}")
    try:
        return effects.effect(solution, s.term, answer)
    except NoModel as error:
        error.argument = error.argument or "term"
        raise
