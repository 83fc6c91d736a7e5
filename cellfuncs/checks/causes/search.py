"""All hypotheses for one disagreement, and those for a bare ratio."""

from collections.abc import Iterator
from dataclasses import replace
from itertools import pairwise

from cellfuncs.checks.causes import digits, of_property, ratios, substitutes
from cellfuncs.checks.causes.guess import Guess, Ranked, ranked
from cellfuncs.checks.relation import DEFINITION
from cellfuncs.checks.relations.of_substance import temperatures
from cellfuncs.checks.resolve import evaluate
from cellfuncs.checks.trial import Trial

# relative: how near a hypothesis must come where the sheet computes, and where a number was typed
_EXACT, _TYPED = 0.004, 0.008


def causes_of(trial: Trial) -> list[Ranked]:
    """The hypotheses that reproduce the stated number, the likeliest first; empty where none does."""
    expected = trial.expected
    if expected is None:
        return []
    entry = trial.entry
    near = _TYPED if entry.typed else _EXACT
    scatter = max(expected.scatter if expected.scatter < 0.1 else 0.02, near)
    tolerance = scatter * abs(entry.si) + (entry.rounding if entry.typed else 0.0)
    if entry.kind == "temperature":
        tolerance = (0.2 if entry.typed else 0.02) + 0.004 * abs(entry.si - expected.value)
    return ranked(_all(trial, expected.value), entry.si, tolerance)


def _all(trial: Trial, expected: float) -> Iterator[Guess]:
    entry, case = trial.entry, trial.case
    if trial.match is not None and trial.match.code:
        yield Guess(trial.match.code, trial.match.words, entry.si, 3.0)
    yield from _declared(trial)
    yield from substitutes.of_result(entry, expected)
    yield from _less_likely(ratios.of_unit(entry.kind, entry.unit, entry.si, expected, entry.typed), trial)
    yield from _less_likely(ratios.of_number(entry.si, expected, entry.typed), trial)
    yield from substitutes.of_area(entry, expected, any("diameter" in name or name == "bore" for name in trial.inputs))
    if not entry.typed:
        yield from substitutes.upside_down(entry, expected)
    else:
        pasted = trial.references.pasted(entry.cell)
        if pasted and trial.relation.source != "properties":
            yield Guess("hard-coded", "a pasted number that no longer follows from its inputs", entry.si, 0.35 * pasted)
        answer = trial.expected
        yield from digits.guesses(entry.value, entry.si, expected, trial.tolerance(answer) if answer else 0.0)
    if trial.relation.source == "properties":
        at = next((t for t, _ in temperatures(case)), None)
        yield from of_property.guesses(entry, case, at)
    elif trial.relation.source != "methods":
        yield from _of_inputs(trial, expected)
    if trial.relation.source == "methods":
        yield from _of_exponents(trial, expected)


def _less_likely(guesses: Iterator[Guess], trial: Trial) -> Iterator[Guess]:
    """A factor explains less where the formula does not even use all that it should."""
    used = trial.references.above(trial.entry.cell)
    doubtful = bool(used) and not trial.support <= used
    for guess in guesses:
        yield replace(guess, prior=guess.prior * 0.4) if doubtful else guess


def _declared(trial: Trial) -> Iterator[Guess]:
    """The known wrong ways of the relation, solved for the stated quantity where it is not what the relation gives."""
    # a cell that nobody could read may hold any factor
    if trial.role is not None or trial.references.unread(trial.entry.cell):
        return
    for way in trial.relation.wrong:
        try:
            value = float(way.function(**trial.values))
        except (ArithmeticError, ValueError, TypeError):
            continue
        yield Guess(way.code, way.words, value, 1.5)


def _of_inputs(trial: Trial, expected: float) -> Iterator[Guess]:
    used_cells = None if trial.entry.typed else trial.references.above(trial.entry.cell)
    never = frozenset((trial.entry.cell, *trial.references.below(trial.entry.cell)))
    yield from substitutes.without_density(trial.inputs, lambda name, value: _changed(trial, name, value))
    stated = [r.entry for r in trial.inputs.values() if r.entry is not None]
    temperatures_in = [entry for entry in stated if entry.kind == "temperature"]
    for a, b in pairwise(temperatures_in):
        yield from substitutes.of_difference(a, b, expected)
    for name, resolved in trial.inputs.items():

        def answer(value: float, name: str = name) -> float:
            return _changed(trial, name, value)

        yield from substitutes.of_input(name, resolved, trial.case, answer, never)
        used = trial.references.direct(trial.entry.cell)
        yield from substitutes.in_place_of(name, resolved, used, trial.support, answer)
        yield from substitutes.left_out(resolved.entry, used_cells, expected)
        if resolved.entry is not None:
            entry = resolved.entry
            words = f'"{entry.label}"'
            found = ratios.of_input(words, entry.kind, entry.unit, resolved.value, answer)
            # a pasted number came from a formula that is no longer there
            yield from (replace(g, prior=g.prior * 0.25) for g in found) if trial.entry.typed else found
    yield from _together(trial)


def _changed(trial: Trial, name: str, value: float) -> float:
    """What the relation gives when one input has another value."""
    if trial.role is None:
        found = evaluate(trial.relation, trial.case, {**trial.values, name: value})
    else:
        inputs = {**trial.inputs, name: replace(trial.inputs[name], value=value)}
        found = Trial(trial.relation, trial.entry, trial.role, inputs, trial.case, trial.references).answers
    return found[0].value if found else float("nan")


def _together(trial: Trial) -> Iterator[Guess]:
    """All temperatures in °C or °F where absolute ones are meant."""
    absolute = {n: r.value for n, r in trial.inputs.items() if r.entry and r.entry.kind == "temperature"}
    if len(absolute) < 2 or trial.role is not None:
        return
    for zero, scale in ((273.15, "°C"), (459.67 / 1.8, "°F")):
        values = {**trial.values, **{name: value - zero for name, value in absolute.items()}}
        found = evaluate(trial.relation, trial.case, values)
        if found:
            yield Guess("celsius-for-kelvin", f"temperatures are taken in {scale}", found[0].value, 1.0)


def _of_exponents(trial: Trial, expected: float) -> Iterator[Guess]:
    """The exponent of Pr for cooling where the stream is heated, or the other way round."""
    prandtl = trial.values.get("prandtl")
    if trial.entry.key == "nusselt" and prandtl and abs(prandtl - 1.0) > 0.05:
        for power in (0.1, -0.1):
            yield Guess("exponent-heating-cooling", "0.3 and 0.4 are mixed up in the exponent of Pr",
                        expected * prandtl**power, 0.9)  # fmt: skip


def causes_of_ratio(stated: float, recomputed: float) -> list[Ranked]:
    """What a bare ratio of two SI numbers may mean."""
    if not recomputed or not stated:
        return []
    guesses = [
        *ratios.of_number(stated, recomputed, typed=False),
        *(Guess("area-factor", words, recomputed * factor, 0.8) for factor, words in substitutes.AREA_FACTORS),
        Guess("radius-for-diameter", "the radius stands for the diameter, or the other way round, squared",
              recomputed * 4.0, 1.0),
        Guess("radius-for-diameter", "the radius stands for the diameter, or the other way round, squared",
              recomputed / 4.0, 1.0),
        Guess("fanning-for-darcy", "Fanning's factor stands for Darcy's", recomputed / 4.0, 0.9),
        Guess("fanning-for-darcy", "4 stands beside a factor that is Darcy's already", recomputed * 4.0, 0.8),
        Guess("log-base", "the logarithm to base 10 stands for the natural one", recomputed * 2.302585092994046, 1.0),
        Guess("log-base", "the logarithm to base 10 stands for the natural one", recomputed / 2.302585092994046, 1.0),
        *digits.guesses(stated, stated, recomputed, DEFINITION * abs(recomputed)),
    ]  # fmt: skip
    return ranked(guesses, stated, DEFINITION * abs(stated))
