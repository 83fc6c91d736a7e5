"""Verdicts of many samples in arrays are those of the scalar rule, sample for sample."""

from collections import Counter
from dataclasses import replace

import numpy as np
import pytest

from cellfuncs.terms import sampled
from cellfuncs.terms.priced import Priced, Scaled
from cellfuncs.terms.size import Size
from cellfuncs.terms.verdicts import BORDERLINE, KEEP, LEAVE_OUT, judge

TOLERANCE, SMALLEST, SAMPLES = 0.05, 0.2, 12


def one_by_one(judged, moved, effects, uncertainty):
    """The same by the scalar rule, with the effects changed as the shares change."""
    found = []
    for n in range(SAMPLES):
        numbers = [{name: float(column[n]) for name, column in term.items()} for term in moved]
        sizes = [replace(j.size, **changed) for j, changed in zip(judged, numbers, strict=True)]
        largest = max(s.size if s.nets_to is None else s.nets_to for s in sizes)
        changed = {}
        for j, s in zip(judged, sizes, strict=True):
            share = s.asked if s.asked is not None else s.size / largest if largest > 0 else 0.0
            effect = effects.get(s.term)
            if isinstance(effect, Priced):
                changed[s.term] = Scaled(effect, share / j.share if j.share else 1.0)
        found.append([j.verdict for j in judge(sizes, TOLERANCE, SMALLEST, changed, uncertainty)])
    return np.array(found).T


def table(random):
    """A table of any make: about as many small terms as large ones, all that a size and an effect may hold."""

    def about(middle):
        return float(middle * 10 ** random.normal(0.0, 0.6))

    def maybe(chance, value):
        return value if random.random() < chance else None

    sizes, effects, uncertainty = [], {}, {}
    for t in range(int(random.integers(1, 9))):
        size = Size(
            f"term {t}", 1.0, maybe(0.9, about(random.choice([0.02, 0.3]))) or 0.0, "",
            asked=maybe(0.4, random.choice([0.0, about(0.05)])), kelvins=maybe(0.4, about(SMALLEST)),
            leading=random.random() < 0.1, thresholds=maybe(0.1, (0.01, 0.1)), pair=random.random() < 0.25,
            settled=maybe(0.05, random.choice([KEEP, BORDERLINE, LEAVE_OUT])), nets_to=maybe(0.15, about(0.1)),
            uncancelled=maybe(0.15, about(TOLERANCE)),
        )  # fmt: skip
        sizes.append(size)
        if random.random() < 0.5:
            words = "" if random.random() < 0.2 else "by a model"
            ratio, kelvins = maybe(0.85, about(0.03)), maybe(0.5, about(SMALLEST))
            effects[size.term] = Priced(ratio, kelvins, about(0.1), words)
        if random.random() < 0.5:
            uncertainty[size.term] = about(0.1)
    moved = []
    for size in sizes:
        names = [name for name in ("size", "asked", "kelvins", "nets_to", "uncancelled") if getattr(size, name)]
        moved.append({name: getattr(size, name) * np.exp(random.normal(0.0, 0.4, SAMPLES)) for name in names})
    moved[0].setdefault("size", np.full(SAMPLES, sizes[0].size))
    return sizes, effects, uncertainty, moved


@pytest.mark.parametrize("seed", range(10))
def test_arrays_judge_as_the_scalar_rule(seed):
    random = np.random.default_rng(seed)
    met = Counter()
    for _ in range(60):
        sizes, effects, uncertainty, moved = table(random)
        judged = judge(sizes, TOLERANCE, SMALLEST, effects, uncertainty)
        places = sampled.verdicts(judged, moved, TOLERANCE, SMALLEST, effects, uncertainty)
        scalar = one_by_one(judged, moved, effects, uncertainty)
        assert np.array(sampled.VERDICTS)[places].tolist() == scalar.tolist()
        met.update(scalar.ravel().tolist())
    assert min(met[verdict] for verdict in sampled.VERDICTS) > 100
