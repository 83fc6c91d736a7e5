"""The process that checks: what happens to it is told of one file and harms no other."""

import sys

import pytest

from cellfuncs.sheets.many.one import CHECKED, FAILED, REFUSED
from cellfuncs.sheets.many.worker import Worker

on_linux = pytest.mark.skipif(sys.platform != "linux", reason="memory is bounded and processes are seen on Linux")


@pytest.fixture
def worker():
    made = Worker(seconds=60.0, is_for_many=False)
    yield made
    made.close()


def test_what_is_told_of_a_file(worker, task, right, wrong):
    clean, faulty = worker.check(task(right)).outcome, worker.check(task(wrong)).outcome
    assert (clean.state, clean.errors, clean.warnings) == (CHECKED, 0, 0) and clean.agreed >= 2
    assert (faulty.errors, faulty.codes) == (1, {"unit-factor": 1})
    assert faulty.worst[0].cell == "Sheet1!B4" and faulty.rank < clean.rank


def test_a_refusal_is_told_and_the_process_stays(worker, task, right):
    worker.check(task(right))
    process = worker._process
    for data, word in ((b"PK\x03\x04 broken", "damaged"), (b"", "empty"), (b"a;b\n", "plain text")):
        outcome = worker.check(task(data)).outcome
        assert outcome.state == REFUSED and word in outcome.why
    assert worker.check(task(right)).outcome.state == CHECKED and worker._process is process


def test_outputs_come_as_bytes(worker, task, wrong):
    answer = worker.check(task(wrong, wanted=("json", "html", "annotate")))
    assert set(answer.products) == {"json", "html", "annotate"}
    assert b"unit-factor" in answer.products["json"] and answer.products["annotate"][:2] == b"PK"


def test_a_file_that_takes_too_long_is_ended_and_gets_no_second_go(traps, worker, task, right):
    worker.check(task(right))
    worker.seconds = 1.0
    outcome = worker.check(task(b"hang:")).outcome
    assert outcome.state == FAILED and "longer than 1 s" in outcome.why
    worker.seconds = 60.0
    assert worker.check(task(right)).outcome.state == CHECKED


@pytest.mark.parametrize("word", ["die", "crash", "abort", "error"])
def test_a_file_that_ends_the_process_is_one_line(traps, worker, task, right, word):
    outcome = worker.check(task(f"{word}:".encode())).outcome
    assert outcome.state == FAILED and "\n" not in outcome.why and outcome.digest
    assert "broke off" in outcome.why or (word == "abort" and "memory" in outcome.why)
    assert worker.check(task(right)).outcome.state == CHECKED


def test_a_process_that_was_killed_from_outside_costs_its_file_nothing(traps, worker, task, right, tmp_path):
    (tmp_path / "mark.good").write_bytes(right)
    outcome = worker.check(task(f"once:{tmp_path / 'mark'}".encode())).outcome
    assert (tmp_path / "mark").exists() and outcome.state == CHECKED


def test_one_that_died_between_two_files_is_replaced(worker, task, right):
    worker.check(task(right))
    before = worker._process
    before.kill()
    before.wait()
    assert worker.check(task(right)).outcome.state == CHECKED and worker._process is not before


@on_linux
def test_memory_is_bounded(traps, worker, task, right):
    outcome = worker.check(task(b"memory:")).outcome
    assert outcome.state == FAILED and "2 GB of memory" in outcome.why
    assert worker.check(task(right)).outcome.state == CHECKED


@on_linux
def test_the_bound_holds_for_what_a_check_takes(task, make_book):
    """A thousand times the cells, in a process with hardly any memory beyond its imports."""
    data = make_book({f"{column}{row}": float(row) for row in range(1, 8000) for column in "ABCDEFGH"})
    worker = Worker(memory=4 * 1024**2, is_for_many=False)
    try:
        outcome = worker.check(task(data)).outcome
        assert outcome.state == FAILED
    finally:
        worker.close()


@on_linux
def test_a_process_that_has_grown_is_replaced(traps, worker, task):
    pids = set()
    for _ in range(8):
        assert worker.check(task(b"grow:")).outcome.state == REFUSED
        pids.add(worker._process.pid if worker._process else None)
    assert None in pids and len(pids) > 2


def test_what_a_library_prints_does_not_get_between(traps, worker, task):
    assert worker.check(task(b"print:")).outcome.state == REFUSED


@pytest.mark.parametrize("start", ["pass", "raise ValueError", "not python", "print('hello')"])
def test_a_process_that_does_not_even_start_is_one_line(monkeypatch, task, right, start):
    monkeypatch.setattr("cellfuncs.sheets.many.worker._START", start)
    worker = Worker()
    outcome = worker.check(task(right)).outcome
    worker.close()
    assert outcome.state == FAILED and "broke off" in outcome.why


def test_one_that_was_stopped_answers_nothing(worker, task, right):
    worker.stop()
    assert worker.check(task(right)) is None


@on_linux
def test_a_process_whose_parent_is_gone_ends(worker, task, right, gone):
    worker.check(task(right))
    process = worker._process
    process.stdin.close()
    process.wait(20.0)
    assert process.returncode == 0
