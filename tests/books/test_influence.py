"""The reach of formulas, against a plain walk written out."""

from hypothesis import given, settings
from hypothesis import strategies as st

from cellfuncs.books.influence import Readers

_side = st.integers(1, 6)


def _areas():
    return st.tuples(_side, _side, st.integers(0, 2), st.integers(0, 2)).map(
        lambda t: ("s", (t[0], t[1], t[0] + t[2], t[1] + t[3]))
    )


def _touch(a, b):
    return a[0] <= b[2] and b[0] <= a[2] and a[1] <= b[3] and b[1] <= a[3]


@settings(max_examples=200)
@given(st.lists(st.tuples(st.lists(_areas(), max_size=3), _areas()), min_size=1, max_size=12), st.integers(0, 11))
def test_reach_is_that_of_a_plain_walk(formulas, first):
    reads = [r for r, _ in formulas]
    writes = [[w] for _, w in formulas]
    start = {first % len(formulas)}
    wanted, grown = set(start), True
    while grown:
        new = {
            n
            for n, places in enumerate(reads)
            if n not in wanted and any(_touch(p[1], writes[m][0][1]) for p in places for m in wanted)
        }
        wanted |= new
        grown = bool(new)
    assert Readers(reads).reached(start, writes) == wanted


def test_sheets_are_apart_and_columns_whole():
    reads = [[], [("a", (1, 1, 1048576, 1))], [("b", (1, 1, 1048576, 1))], [("a", (1, 2, 1, 2))]]
    writes = [[("a", (5, 1, 5, 1))], [("a", (9, 2, 9, 2))], [("b", (9, 2, 9, 2))], [("a", (9, 3, 9, 3))]]
    assert Readers(reads).reached({0}, writes) == {0, 1}


def test_large_extents():
    """An array over a million cells reaches the single cells that read from it."""
    reads = [[], [("a", (700_000, 3, 700_000, 3))], [("a", (1, 9, 1, 9))]]
    writes = [[("a", (1, 1, 1_000_000, 5))], [("a", (1, 9, 1, 9))], [("a", (1, 10, 1, 10))]]
    assert Readers(reads).reached({0}, writes) == {0, 1, 2}
