"""± of the inputs: the surrogate against solved samples, what is said, and that nothing is done without ±."""

from dataclasses import replace

import numpy as np
import pytest

from cellfuncs.answers import solve
from cellfuncs.cases import read_case
from cellfuncs.terms import spread, table

WATER = {
    "flow kind": ("duct",),
    "substance": ("water",),
    "velocity": (1.2, "m/s"),
    "diameter": (25.0, "mm"),
    "length": (4.0, "m"),
    "inlet temperature": (20.0, "degC"),
    "wall temperature": (60.0, "degC"),
    "time scale": (45.0, "s"),
}
AIR = {
    "flow kind": ("plate",),
    "substance": ("air",),
    "velocity": (60.0, "m/s"),
    "length": (0.05, "m"),
    "stream temperature": (20.0, "degC"),
    "wall temperature": (28.0, "degC"),
}
FILM = {
    "flow kind": ("gap",),
    "velocity": (5.0, "m/s"),
    "gap": (50.0, "um"),
    "length": (0.1, "m"),
    "wall temperature": (320.0, "K"),
    "second wall temperature": (326.0, "K"),
    "density": (870.0, "kg/m3"),
    "viscosity": (0.03, "Pa s"),
    "conductivity": (0.13, "W/mK"),
    "specific heat": (2000.0, "J/kgK"),
}


def block(rows, **spreads):
    named = {name.replace("_", " "): value for name, value in spreads.items()}
    assert set(named) <= set(rows)
    return [[label, *cells, *[""] * (2 - len(cells)), named.get(label, "")] for label, cells in rows.items()]


def sampling(cells, equation="energy"):
    case = read_case(tuple((k, *[None if c == "" else c for c in row]) for k, row in enumerate(cells, 1)))
    judged, effects, uncertainty = table._judged(solve(case), equation)
    rows = spread.uncertain(case)
    draws = np.random.default_rng(spread.SEED).standard_normal((spread.SAMPLES, len(rows)))
    sizes_of = table._sizes_of(case.flow, equation)
    return spread._Sampling(case, rows, judged, sizes_of, effects, uncertainty), draws


@pytest.mark.parametrize(
    ("cells", "equation"),
    [
        (block(WATER, velocity="5 %", diameter="2 %", time_scale="20 %", wall_temperature=1.0), "energy"),
        (block(WATER, velocity="10 %", time_scale="20 %", inlet_temperature=2.0), "momentum"),
        (block(AIR, velocity="10 %", stream_temperature=0.5, wall_temperature=0.5), "energy"),
        (block(FILM, velocity="5 %", gap="10 %", viscosity="20 %", second_wall_temperature=0.3), "energy"),
        (block(FILM, velocity="20 %", gap="20 %", viscosity="20 %", length="10 %"), "momentum"),
    ],
)
def test_the_surrogate_counts_as_solving_does(cells, equation):
    sampled, draws = sampling(cells, equation)
    quick, solved = sampled.by_surrogate(draws), sampled.by_solving(draws)
    assert quick is not None
    assert set(quick) == set(solved)
    for term, survival in solved.items():
        assert survival.answered == spread.SAMPLES
        assert quick[term].kept == pytest.approx(survival.kept, abs=0.02 * spread.SAMPLES), term


def test_some_of_these_verdicts_do_change(cf):
    """An effect at the edge of what is close to the tolerance holds in about half of the samples, one far away in all.

    The model of storage leaves a tenth open, which is more than ± here: the edge is 1.1 of the tolerance.
    """
    effect = cf("TERM", block(WATER), "storage", "effect")
    near = dict(WATER) | {"time scale": (45.0 * effect / (0.05 * 1.1), "s")}
    assert cf("TERM", block(near), "storage", "effect") == pytest.approx(0.055, rel=1e-3)
    reasons = {row[0]: row[5] for row in cf("TERMS", block(near, time_scale="1 %"))[1:]}
    kept = float(reasons["storage"].split("holds in ")[1].split(" %")[0])
    assert 40.0 < kept < 60.0
    assert "holds in all 2,000 samples within ±" in reasons["conduction along"]
    assert "sample" not in reasons["advection"] + reasons["wall radiation"]


def test_where_the_surrogate_cannot_be_trusted_samples_are_solved(cf):
    """A velocity so uncertain that some samples have none: they are refused and counted."""
    cells = block(WATER, velocity="60 %")
    sampled, draws = sampling(cells)
    assert sampled.by_surrogate(draws) is None
    reason = cf("TERM", cells, "storage", "reason")
    assert "are refused)" in reason
    assert "samples within ±" in reason


def test_across_a_change_of_regime_the_counts_are_those_of_solving(cf):
    """Laminar in half of the samples: whatever way is taken, the words follow the solved samples."""
    slow = dict(WATER) | {"velocity": (0.0737, "m/s"), "time scale": (900.0, "s")}
    cells = block(slow, velocity="8 %", diameter="8 %", time_scale="10 %")
    sampled, draws = sampling(cells)
    solved = sampled.by_solving(draws)
    reasons = {row[0]: row[5] for row in cf("TERMS", cells)[1:]}
    for term, survival in solved.items():
        words = reasons[term].split("holds in ")[1]
        kept = 100.0 if words.startswith("all") else float(words.split(" %")[0])
        assert kept == pytest.approx(100.0 * survival.kept / survival.answered, abs=6.0), term


def test_the_same_block_gives_the_same_words(cf):
    cells = block(AIR, velocity="10 %", wall_temperature=0.5)
    first = [row[5] for row in cf("TERMS", cells)]
    again = [row[5] for row in cf("TERMS", cells[:2] + cells[:1:-1])]
    assert first == again


def test_verdict_share_and_scale_are_those_without_spread(cf):
    plain, with_spread = cf("TERMS", block(WATER)), cf("TERMS", block(WATER, velocity="5 %"))
    assert [row[:5] for row in plain] == [row[:5] for row in with_spread]


def test_tolerance_and_smallest_are_not_sampled(cf):
    rows = dict(WATER) | {"tolerance": (5.0, "%")}
    assert "samples" not in cf("TERM", block(rows, tolerance=1.0), "storage", "reason")


def test_without_spread_nothing_is_drawn(cf, monkeypatch):
    def refuse(*_):
        raise AssertionError("samples are drawn")

    monkeypatch.setattr(np.random, "default_rng", refuse)
    assert isinstance(cf("TERMS", block(FILM)), list)
    assert "samples are drawn" in cf("TERMS", block(dict(FILM) | {"gap": (51.0, "um")}, velocity="5 %"))


@pytest.mark.parametrize("cells", [block(WATER, velocity="5 %", wall_temperature=1.0), block(FILM, gap="10 %")])
def test_the_samples_of_a_case_are_judged_as_one_alone_is(cells):
    sampled, draws = sampling(cells)
    columns = [
        {"size": size.size * np.exp(0.2 * draws[:200, 0])} if size.size > 0 else {} for size in sampled.base
    ]  # fmt: skip
    found = sampled._by_columns(columns, 200)
    for n in range(0, 200, 7):
        moved = [
            replace(s, **{k: float(v[n]) for k, v in c.items()}) for s, c in zip(sampled.base, columns, strict=True)
        ]
        assert [spread.VERDICTS[place] for place in found[:, n]] == sampled.verdicts(moved)
