"""The corpus of sheets with seeded slips: right arithmetic, every code, and the score on a few of them."""

import random
import sys
from pathlib import Path

import formualizer
import pytest

sys.path.insert(0, str(Path(__file__).resolve().parent.parent.parent / "install"))

import check_bench
from corpus.calculation import SI, US
from corpus.calculations import KINDS
from corpus.formula import evaluate, write_out
from corpus.layouts import LAYOUTS
from corpus.score import Score, is_aside, score
from corpus.sheet import calculation_of, make, worked
from corpus.slips import all_slips

from cellfuncs.checks.finding import CAUSES


def test_there_is_variety():
    assert len(LAYOUTS) >= 8 and len(KINDS) >= 12
    assert {kind.__name__ for kind in KINDS} == {k.__name__ for k in dict.fromkeys(KINDS)}


def test_every_cause_is_seeded():
    codes = set()
    for kind in KINDS:
        for seed in range(3):
            c = calculation_of(seed, kind, SI)
            codes |= {slip.code for slip in all_slips(c, worked(c).values, random.Random(seed))}
    assert codes == set(CAUSES)


def test_conversions_are_written_by_hand():
    units = {"D": "mm", "T": "degF", "w": "ft/s"}
    assert write_out("PI()/4*{D}^2", "cm2", units) == "(PI()/4*([[D]]/1000)^2)*10000"
    assert evaluate(write_out("{T}", "degC", units), {"T": 68.0}) == pytest.approx(20.0)
    assert evaluate(write_out("{T:d}", "dK", units), {"T": 18.0}) == pytest.approx(10.0)
    assert evaluate(write_out("{w}", "m/s", units), {"w": 10.0}) == pytest.approx(3.048)
    assert write_out("{D:raw}", "m", units) == "[[D]]"


@pytest.mark.parametrize("kind", KINDS, ids=lambda kind: kind.__name__)
def test_both_systems_state_the_same_case(kind):
    """A calculation in SI and in US units ends at the same numbers, rounded inputs aside."""
    from corpus.formula import UNITS

    ends = []
    for system in (SI, US):
        c = calculation_of(7, kind, system)
        line = c.lines[-1]
        factor, offset = UNITS[line.unit]
        ends.append(worked(c).values[line.name] * factor + offset)
    assert ends[0] == pytest.approx(ends[1], rel=0.08)


@pytest.mark.parametrize("seed", [3, 28, 61, 110, 153, 204])
def test_stored_values_are_what_the_formulas_give(seed, tmp_path):
    """Recalculated by the engine, which shares nothing with the corpus."""
    import openpyxl

    make(seed, tmp_path)
    path = str(tmp_path / f"{seed}.xlsx")
    stored = openpyxl.load_workbook(path, data_only=True)
    engine = formualizer.load_workbook(path)
    engine.evaluate_all()
    compared = 0
    for sheet in openpyxl.load_workbook(path):
        for row in sheet.iter_rows():
            for cell in row:
                if isinstance(cell.value, str) and cell.value.startswith("="):
                    found = engine.get_value(sheet.title, cell.row, cell.column)
                    assert found == pytest.approx(stored[sheet.title][cell.coordinate].value, rel=1e-9), cell.coordinate
                    compared += 1
    assert compared >= 4


def test_a_seed_gives_one_sheet(tmp_path):
    (tmp_path / "a").mkdir()
    (tmp_path / "b").mkdir()
    assert make(17, tmp_path / "a") == make(17, tmp_path / "b")


def test_the_score_of_some_sheets():
    """Far from all sheets: the bench prints the score of six hundred."""
    found = score(seed for seed in range(60) if not is_aside(seed))
    assert found.clean_errors == 0
    assert found.recall >= 0.9 and found.precision >= 0.9 and found.causes >= 0.8


def test_targets_that_are_missed_are_named():
    found = Score(slips=100, found=94, right_findings=94, findings=94, cause=94, clean=10, clean_errors=1, filled=200)
    assert check_bench.missed(found) == ["recall", "clean sheets"]
    assert check_bench.missed(Score(filled=200, seconds=0.31)) == ["time"]
