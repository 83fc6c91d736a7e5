"""The table of the bench: verdicts, exit codes, and that a refusal never counts as a quick answer."""

import sys
from pathlib import Path

import pytest

sys.path.insert(0, str(Path(__file__).resolve().parent.parent.parent / "install"))

import bench


def kept():
    """A row that is kept."""
    return bench.Row("one", 1.1, 1.3, "×")


def missed():
    """A row that is missed."""
    return bench.Row("two", 0.4, 0.25, "s", "a note")


def broken():
    """A row that cannot be measured."""
    raise RuntimeError("! velocity: gone")


@pytest.fixture
def rows(monkeypatch):
    monkeypatch.setattr(bench, "ROWS", {"a": kept, "b": missed, "c": broken})
    monkeypatch.setattr(bench, "best", lambda works, rounds: [0.01])


@pytest.mark.parametrize(
    ("words", "code"),
    [
        (["a"], 0),
        (["check", "a"], 0),
        (["b"], 0),
        (["check", "a", "b"], 1),
        (["a", "c"], 2),
        (["check", "d"], 2),
    ],
)
def test_exit_codes(rows, words, code):
    assert bench.main(words) == code


def test_the_table_names_measured_limit_share_of_the_loop_and_verdict(rows, capsys):
    bench.main(["a", "b"])
    shown = capsys.readouterr().out.splitlines()
    assert shown[0] == "fixed loop: 10.00 ms"
    first, second = (" ".join(line.split()) for line in shown[-2:])
    assert first == "a one 1.1 × 1.3 × kept"
    assert second == "b two 0.4 s 0.25 s 40 MISSED a note"


def test_the_limit_itself_is_kept():
    assert bench.Row("at the limit", 2.0, 2.0, "ms").kept
    assert not bench.Row("above", 2.0001, 2.0, "ms").kept


def test_a_fault_is_no_answer():
    assert bench.sound([[1.0, "text"]]) == [[1.0, "text"]]
    for answer in ("! velocity: gone", [[1.0], ["! velocity: gone"]]):
        with pytest.raises(RuntimeError, match="velocity"):
            bench.sound(answer)


def test_both_sides_run_by_turns():
    order = []
    bench.best([lambda: order.append("a"), lambda: order.append("b")], 3)
    assert order == ["a", "b"] * 3


def test_hostile_unit_texts_are_short_and_many():
    texts = bench.hostile_unit_texts()
    assert len(texts) > 500
    assert max(map(len, texts)) == 40
