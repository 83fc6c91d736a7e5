"""Hypotheses: a slip of typing, a factor, and how several are ranked."""

import pytest

from cellfuncs.checks.causes import Guess, causes_of_ratio, ranked
from cellfuncs.checks.causes.digits import slips


@pytest.mark.parametrize(
    ("typed", "meant"), [(17.508, 15.708), (98.2, 982.0), (-4.2, 4.2), (112.0, 12.0), (0.00798, 0.0798)]
)
def test_slips_of_typing_are_undone(typed, meant):
    assert any(value == pytest.approx(meant) for value, _, _ in slips(typed))


def test_an_unrelated_number_is_no_slip():
    assert not any(value == pytest.approx(3.1) for value, _, _ in slips(17.508))


@pytest.mark.parametrize(
    ("ratio", "code"),
    [(4.0, "radius-for-diameter"), (1000.0, "unit-factor"), (2.302585, "log-base"), (25.4, "unit-factor")],
)
def test_a_bare_ratio_has_names(ratio, code):
    assert causes_of_ratio(ratio * 0.7, 0.7)[0].guess.code == code


def test_no_name_for_an_odd_ratio():
    assert causes_of_ratio(1.37, 1.0) == []


def test_confidence_is_shared_and_never_complete():
    guesses = [Guess("unit-factor", "a", 10.0), Guess("log-base", "b", 10.0), Guess("log-base", "c", 11.0)]
    found = ranked(guesses, 10.0, 0.1)
    assert [r.guess.words for r in found] == ["a", "b"]
    assert found[0].confidence == pytest.approx(1.0 / 2.08)
    assert sum(r.confidence for r in found) < 1.0
