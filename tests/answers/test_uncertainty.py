"""± of answers: to first order against sampling, which rows make it, intervals, and what is refused."""

import math

import numpy as np
import pytest

from cellfuncs.answers import solve
from cellfuncs.answers.uncertainty import uncertainty
from cellfuncs.cases import read_case
from cellfuncs.cases.vary import with_value

DUCT = [
    ["flow kind", "duct"], ["density", 900.0, "kg/m3", "2 %"], ["viscosity", 0.02, "Pa s", "6 %"],
    ["conductivity", 0.14, "W/mK", "3 %"], ["specific heat", 2000.0, "J/kgK"], ["velocity", 0.6, "m/s", "5 %"],
    ["diameter", 20.0, "mm", "1 %"], ["length", 3.0, "m"], ["inlet temperature", 330.0, "K", 0.5],
    ["wall temperature", 350.0, "K", 1.0],
]  # fmt: skip


def case_of(rows):
    return read_case(tuple((k, *row) for k, row in enumerate(rows, 1)))


@pytest.mark.parametrize("key", ["outlet_temperature", "duty", "pressure_drop", "coefficient"])
def test_first_order_is_what_sampling_finds(key):
    solution = solve(case_of(DUCT))
    found = uncertainty(solution, key)
    rows = [(k, e.value, e.plus_minus) for k, e in solution.case.stated.items() if e.plus_minus]
    random = np.random.default_rng(7)
    draws = random.standard_normal((3000, len(rows)))
    values, moved = [], []
    for deviates in draws:
        case = solution.case
        for (name, value, spread), z in zip(rows, deviates, strict=True):
            case = with_value(case, name, value + z * spread)
        values.append(float(solve(case).value(key)))
    assert found.standard == pytest.approx(np.std(values), rel=0.06)
    # the parts: the variance that goes when a row is held at its value
    for n, (name, value, _) in enumerate(rows):
        if n > 3:
            break
        held = []
        for deviates in draws[:1000]:
            case = solution.case
            for m, ((other, at, spread), z) in enumerate(zip(rows, deviates, strict=True)):
                case = with_value(case, other, at if m == n else at + z * spread)
            held.append(float(solve(case).value(key)))
        part = 1.0 - np.var(held) / np.var(values[:1000])
        label = name.replace("_", " ")
        assert dict(found.parts).get(label, 0.0) == pytest.approx(part, abs=0.08), label
        moved.append(value)
    assert sum(part for _, part in found.parts) == pytest.approx(1.0, rel=1e-12)


def test_by_hand():
    """Laminar drop 32μLU/D²: relative squares add, 1, 1 and 2 times the rows' own."""
    found = uncertainty(solve(case_of(DUCT)), "pressure_drop")
    drop = 32 * 0.02 * 3.0 * 0.6 / 0.02**2
    assert found.standard == pytest.approx(drop * math.sqrt(0.06**2 + 0.05**2 + 0.02**2), rel=1e-2)
    assert [label for label, _ in found.parts][:3] == ["viscosity", "velocity", "diameter"]


def test_an_interval_is_its_half_width_over_root_three(cf):
    plain = cf("CASE", [*DUCT[:-1], ["wall temperature", 350.0, "K", 3.0 / math.sqrt(3.0)]], "± outlet temperature")
    for text in ("347 … 353", "347 ... 353 K", "347 to 353"):
        block = [*DUCT[:-1], ["wall temperature", 350.0, "K", text]]
        assert cf("CASE", block, "± outlet temperature") == pytest.approx(plain, rel=1e-12)
    celsius = [*DUCT[:-1], ["wall temperature", 76.85, "degC", "73.85 … 79.85"]]
    assert cf("CASE", celsius, "± outlet temperature") == pytest.approx(plain, rel=1e-9)


def test_in_cells(cf):
    assert cf("CASE", DUCT, "± outlet temperature", "degF") == pytest.approx(
        1.8 * cf("CASE", DUCT, "± outlet temperature", "K"), rel=1e-12
    )
    assert cf("CASE", DUCT, "by ± pressure drop").startswith("viscosity 55")
    assert cf("CASE", DUCT, "± length") == 0.0
    assert "no row with a ±" in cf("CASE", DUCT, "by ± length")


@pytest.mark.parametrize(
    ("block", "what", "part"),
    [
        ([row[:3] for row in DUCT], "± duty", "no row has a ±"),
        (DUCT, "± section", "is no number"),
        (DUCT, "± warmth", "is not known"),
        ([*DUCT[:-1], ["wall temperature", 350.0, "K", "340 … 345"]], "± duty", "outside the interval"),
    ],
)
def test_what_has_no_uncertainty_is_told(cf, block, what, part):
    answer = cf("CASE", block, what)
    assert answer.startswith("! ") and part in answer
