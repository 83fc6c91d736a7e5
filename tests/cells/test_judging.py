"""Searches, premises, groups and momentum on hostile blocks: every answer is a finite number or one clear text."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.cases import labels
from cellfuncs.sheets import starters
from cellfuncs.terms import MOMENTUM_TERMS, TERMS

KINDS = labels.choices("flow_kind")
BLOCKS = {kind: [list(row) for row in starters.starter(kind).rows] for kind in KINDS}
QUANTITIES = ("outlet temperature", "coefficient", "Re", "duty", "peak temperature", "pressure drop", "U", "colour")
FLOWING = [kind for kind in KINDS if kind != "body"]
ODD = st.one_of(
    st.floats(allow_nan=True, allow_infinity=True),
    st.sampled_from([0.0, -1.0, 1e-300, 1e300, "", None, "12 ± 3 m/s", "5 %", "1 K", "-40 degC", "! a: b", "#N/A"]),
    st.text(max_size=12),
)


def sound(answer):
    cells = [cell for row in answer for cell in row] if isinstance(answer, list) else [answer]
    for cell in cells:
        if isinstance(cell, float):
            assert math.isfinite(cell)
        else:
            assert isinstance(cell, str) and 0 < len(cell) <= 255, answer
            assert "broke off" not in cell, cell
    return answer


@st.composite
def mutated(draw):
    block = [list(row) for row in BLOCKS[draw(st.sampled_from(KINDS))]]
    row = draw(st.sampled_from(block[1:]))
    row[draw(st.sampled_from([1, 1, 1, 2, 3]))] = draw(ODD)
    if draw(st.booleans()):
        number = draw(st.sampled_from([row for row in block[1:] if isinstance(row[1], float)]))
        number[1] *= 10.0 ** draw(st.integers(-9, 9))
    return block


@settings(max_examples=120)
@given(block=mutated())
def test_tables_of_hostile_blocks(cf, block):
    sound(cf("PREMISES", block))
    sound(cf("GROUPS", block))
    sound(cf("TERMS", block, "momentum"))


@settings(max_examples=40)
@given(block=mutated(), what=st.sampled_from(QUANTITIES), target=ODD, data=st.data())
def test_searches_on_hostile_blocks(cf, block, what, target, data):
    vary = data.draw(st.sampled_from([row[0] for row in block] + ["time scale", "Re", "colour"]))
    sound(cf("VALUE_FOR", block, vary, what, target))
    term = data.draw(st.sampled_from([*TERMS, *MOMENTUM_TERMS, "all left out", "warmth"]))
    sound(cf("TERM_LIMIT", block, term, vary, target))


@pytest.mark.parametrize("kind", KINDS)
def test_every_flow_kind_has_its_tables(cf, kind):
    block = BLOCKS[kind]
    for name, rest in (("PREMISES", ()), ("GROUPS", ()), ("TERMS", ("momentum",))):
        answer = sound(cf(name, block, *rest))
        assert isinstance(answer, list) or (kind == "body" and "no momentum equation" in answer), answer


@pytest.mark.parametrize("kind", FLOWING)
def test_a_search_gives_back_the_stated_value(cf, kind):
    """The value of a row for which the coefficient is what it is: the row itself, unless another has it too."""
    block = BLOCKS[kind]
    label = next(row[0] for row in block if row[0] in ("velocity", "wall temperature", "film flow"))
    what = "local flux" if kind == "gap" else "coefficient"
    aim = cf("CASE", block, what)
    stated = next(cf("SI", row[1], row[2]) for row in block if row[0] == label)
    found = cf("VALUE_FOR", block, label, what, aim)
    if kind == "falling film":  # thin and smooth or thick and wavy: two flows have the same coefficient
        assert "more than one" in found and f"{stated:g}" in found
        return
    assert found == pytest.approx(stated, rel=1e-6)
