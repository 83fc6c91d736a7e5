"""The whole catalogue of methods: every one answers inside its range, and refuses in words what cannot be."""

import itertools
import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.answers import choice
from cellfuncs.answers.inputs import parameter_of
from cellfuncs.cells.catalogue import functions
from cellfuncs.errors import CellfuncsError
from cellfuncs.methods import METHODS
from cellfuncs.methods.base import inputs

# an admissible value of each choice that a method takes, where its own conditions do not say one
CHOICES = {
    "section": "tube", "wall": "temperature", "heated": "both", "arrangement": "staggered", "direction": "assisting",
    "fitting": "elbow 90, standard, screwed", "shape": "straight",
}  # fmt: skip
USUAL = {"angle": 10.0, "wall_temperature": 350.0, "surroundings_temperature": 300.0, "saturation_temperature": 373.0}
HUGE, TINY = 1e30, 1e-30


def numbers_of(method):
    return [name for name in method.inputs if inputs()[name].sign != "choice"]


def middle(low, high):
    """A value inside a range."""
    if low == -math.inf and high == math.inf:
        return 1.0
    if low == -math.inf:
        return high / 2 if high > 0 else high * 2
    if high == math.inf:
        return low * 2 if low > 0 else max(1.0, low + 1.0)
    return math.sqrt(low * high) if low > 0 else 0.5 * (low + high)


def inside(method):
    """Inputs in the middle of every range."""
    found = {}
    for name in method.inputs:
        entry = inputs()[name]
        if entry.sign == "choice":
            if name == "fitting":
                from cellfuncs.methods.minor_losses import fittings

                found[name] = next(iter(fittings()))
            else:
                found[name] = method.where.get(name, (CHOICES.get(name, ""),))[0]
        else:
            spans = [r for r in method.ranges if r.variable == entry.symbol]
            low = max([r.low for r in spans], default=-math.inf)
            high = min([r.high for r in spans], default=math.inf)
            if spans:
                found[name] = float(middle(low, high))
            else:
                found[name] = USUAL.get(name, 0.5 if entry.kind == "fraction" else 1.0)
    return found


@pytest.mark.parametrize("name", METHODS)
def test_every_variable_of_a_range_is_an_input_or_known_by_its_symbol(name):
    for r in METHODS[name].ranges:
        assert parameter_of(r.variable) in inputs(), (name, r.variable)


@pytest.mark.parametrize("name", METHODS)
@settings(max_examples=12, deadline=None)
@given(data=st.data())
def test_bad_numbers_are_refused_in_words(name, data):
    method = METHODS[name]
    numbers = numbers_of(method)
    if not numbers:
        return
    given_inputs = inside(method)
    victim = data.draw(st.sampled_from(numbers))
    bad = data.draw(st.sampled_from([0.0, -1.0, -HUGE, HUGE, TINY, math.nan, math.inf, -math.inf]))
    given_inputs[victim] = bad
    try:
        answer = method.evaluate(given_inputs)
    except CellfuncsError as error:
        text = str(error)
        assert text and len(text) < 400 and "Traceback" not in text
        return
    assert isinstance(answer, (float, int)) and math.isfinite(answer)
    assert math.isfinite(bad)


@pytest.mark.parametrize("name", METHODS)
@settings(max_examples=6, deadline=None)
@given(data=st.data())
def test_beyond_a_range_the_range_is_named_or_the_answer_allowed(name, data):
    method = METHODS[name]
    spans = [r for r in method.ranges if parameter_of(r.variable) in numbers_of(method)]
    if not spans:
        return
    r = data.draw(st.sampled_from(spans))
    parameter = parameter_of(r.variable)
    beyond = [x for x in (r.low * 0.5 if r.low > 0 else None, r.high * 1.5 if 0 < r.high < math.inf else None) if x]
    if not beyond:
        return
    given_inputs = inside(method)
    try:
        method.evaluate(given_inputs)
    except CellfuncsError:
        return
    given_inputs[parameter] = data.draw(st.sampled_from(beyond))
    with pytest.raises(CellfuncsError) as refused:
        method.evaluate(given_inputs)
    assert r.variable in str(refused.value) or inputs()[parameter].words in str(refused.value)
    try:
        answer = method.evaluate(given_inputs, allow=True)
    except CellfuncsError:
        return
    assert math.isfinite(answer)


@pytest.mark.parametrize("name", METHODS)
def test_a_missing_input_is_asked_for(name):
    method = METHODS[name]
    if not method.needed:
        return
    with pytest.raises(CellfuncsError, match="needs"):
        method.evaluate({})


@pytest.mark.parametrize("name", METHODS)
def test_every_method_is_reached_from_a_cell(name):
    """With its inputs in a block of labelled rows, a cell gives a number or says in words what is amiss."""
    method = METHODS[name]
    rows = []
    for parameter, value in inside(method).items():
        entry = inputs()[parameter]
        unit = None
        if entry.kind and entry.sign != "choice":
            from cellfuncs.quantities import KINDS

            unit = KINDS[entry.kind].si_unit
        rows.append([entry.words, value, unit if unit and unit != "1" else ""])
    if not rows:
        return
    answer = functions()["CF_NUSSELT_OF"].call([*rows, ["beyond range", "allow", ""]], name)
    if isinstance(answer, str):
        assert answer.startswith("! ") and "broke off" not in answer, answer
        with pytest.raises(CellfuncsError):
            method.evaluate(inside(method), allow=True)
        return
    assert answer == pytest.approx(method.evaluate(inside(method), allow=True), rel=1e-9)


@pytest.mark.parametrize("name", METHODS)
@pytest.mark.parametrize("text", ["", "abc", "1 m/s"])
def test_texts_where_numbers_belong(name, text):
    method = METHODS[name]
    numbers = numbers_of(method)
    if not numbers:
        return
    rows = [[inputs()[numbers[0]].words, text or "none", ""]]
    answer = functions()["CF_NUSSELT_OF"].call(rows, name)
    assert isinstance(answer, str) and answer.startswith("! ") and "broke off" not in answer


@pytest.mark.parametrize("name", METHODS)
def test_a_column_takes_the_place_of_a_number(name):
    method = METHODS[name]
    numbers = numbers_of(method)
    base = inside(method)
    try:
        one = method.evaluate(base)
    except CellfuncsError:
        return
    if not numbers:
        return
    column = {n: np.full(3, v) if n in numbers else v for n, v in base.items()}
    answer = np.broadcast_to(method.evaluate(column), 3)
    assert answer == pytest.approx(np.full(3, one), rel=1e-12)


def test_the_order_of_the_rule():
    for flow in ("duct", "plate", "cylinder", "sphere", "bank", "bed", "free", "enclosure"):
        methods = choice.in_order(flow, choice.NUSSELT)
        assert [m.scatter for m in methods] == sorted(m.scatter for m in methods)
        for one, other in itertools.pairwise(methods):
            if one.scatter == other.scatter:
                assert choice.narrowness(one) >= choice.narrowness(other)
