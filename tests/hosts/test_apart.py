"""The calculation in a process of its own: same answers, bounded, and nothing left behind."""

import signal
import subprocess
import sys
import threading
import time
from pathlib import Path

import pytest
import xlsxwriter

from cellfuncs.errors import BookRefused
from cellfuncs.hosts import apart, embedded


def book(path, *formulas):
    with xlsxwriter.Workbook(path) as made:
        sheet = made.add_worksheet("S")
        for row, formula in enumerate(formulas):
            sheet.write_formula(row, 0, formula)
    return path


@pytest.fixture
def small(tmp_path):
    return book(tmp_path / "a.xlsx", "=CF_REYNOLDS(2,0.05,998,0.001)", "=A1*2", '=CF_REYNOLDS("x",1,1,1)')


@pytest.mark.parametrize("how", [{}, {"values": True}, {"written_for": "calc"}])
def test_the_same_answers_and_the_same_file(small, tmp_path, how):
    told = []
    here = embedded.recalc(small, tmp_path / "here.xlsx", **how)
    there = embedded.recalc(small, tmp_path / "there.xlsx", apart=True, progress=told.append, **how)
    assert (there.areas, there.warnings) == (here.areas, here.warnings)
    assert there.out.read_bytes() == here.out.read_bytes()
    assert told[0] == "examining the file" and told[-1] == "writing"


def test_refusals_come_through(tmp_path):
    path = tmp_path / "a.xlsx"
    path.write_bytes(b"a,b\n1,2\n")
    with pytest.raises(BookRefused, match="plain text"):
        embedded.recalc(path, apart=True)
    assert [p.name for p in tmp_path.iterdir()] == ["a.xlsx"]


@pytest.mark.skipif(sys.platform != "linux", reason="memory is bounded on Linux")
def test_a_formula_that_would_take_all_memory(tmp_path, monkeypatch):
    """Two million cells, for which the engine wants some 300 MB."""
    monkeypatch.setattr(apart, "MEMORY", 256 * 1024**2)
    path = tmp_path / "a.xlsx"
    with xlsxwriter.Workbook(path) as made:
        made.add_worksheet().write_dynamic_array_formula("A1", "=SEQUENCE(1000000,2)+CF_REYNOLDS(1,1,1,1)")
    with pytest.raises(BookRefused, match=r"more than 0\.25 GB of memory"):
        embedded.recalc(path, apart=True)
    assert [p.name for p in tmp_path.iterdir()] == ["a.xlsx"]


def test_a_calculation_that_does_not_end_is_ended(small, monkeypatch):
    monkeypatch.setattr(apart, "GRACE", 0.0)
    monkeypatch.setattr(apart, "_START", "import time; time.sleep(600)")
    with pytest.raises(BookRefused, match="longer than it may"):
        embedded.recalc(small, apart=True, seconds=0.3)


@pytest.mark.parametrize("start", ["pass", "import os; os.kill(os.getpid(), 11)", "raise ValueError", "not python"])
def test_a_process_that_dies_is_one_line(small, tmp_path, monkeypatch, start):
    monkeypatch.setattr(apart, "_START", start)
    with pytest.raises(BookRefused, match="broke off"):
        embedded.recalc(small, apart=True)
    assert [p.name for p in tmp_path.iterdir()] == ["a.xlsx"]


def test_an_error_of_the_program_keeps_its_trace(small, monkeypatch):
    start = "import cellfuncs.hosts.embedded as e; e.calculated = lambda *a, **k: 1 / 0; import json, sys; "
    monkeypatch.setattr(
        apart, "_START", start + "sys.stdin.buffer.readline(); from cellfuncs.hosts.apart import main; main()"
    )
    with pytest.raises(ZeroDivisionError) as caught:
        embedded.recalc(small, apart=True)
    assert "Traceback" in caught.value.__notes__[0]


def test_progress_may_stop_it(small, tmp_path):
    def stop(_):
        raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        embedded.recalc(small, apart=True, progress=stop)
    assert [p.name for p in tmp_path.iterdir()] == ["a.xlsx"]


def test_a_module_beside_the_workbook_is_not_taken(small, tmp_path):
    (tmp_path / "pickle.py").write_text("raise SystemExit('taken')")
    (tmp_path / "json.py").write_text("raise SystemExit('taken')")
    code = (
        "import sys; from cellfuncs.hosts import embedded;"
        " print(len(embedded.recalc(sys.argv[1], 'out.xlsx', apart=True).areas))"
    )
    done = subprocess.run([sys.executable, "-P", "-c", code, str(small)], cwd=tmp_path, capture_output=True, text=True)
    assert (done.stdout.strip(), done.returncode) == ("2", 0), done.stderr


@pytest.mark.skipif(sys.platform != "linux", reason="looks for processes in /proc")
def test_an_interrupt_ends_both_processes(tmp_path):
    path = book(tmp_path / "a.xlsx", *(f"=CF_REYNOLDS({n},0.05,998,0.001)" for n in range(1, 30_000)))
    process = subprocess.Popen(
        [sys.executable, "-m", "cellfuncs", "recalc", str(path), "-o", str(tmp_path / "out.xlsx")],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
        start_new_session=True,
    )
    timer = threading.Timer(60.0, process.kill)
    timer.start()
    children = []
    while not children and process.poll() is None:
        children = Path(f"/proc/{process.pid}/task/{process.pid}/children").read_text().split()
        time.sleep(0.05)
    time.sleep(0.3)  # it has begun, and is far from the end
    process.send_signal(signal.SIGINT)  # to the parent alone; a terminal sends it to both
    out, err = process.communicate()
    timer.cancel()
    assert (process.returncode, out) == (130, "") and err == "cellfuncs: interrupted, nothing was written\n"
    assert children and not Path(f"/proc/{children[0]}").exists()
    assert [p.name for p in tmp_path.iterdir()] == ["a.xlsx"]
