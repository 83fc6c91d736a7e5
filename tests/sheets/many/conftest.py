"""Small workbooks in folders, and a way to make the process that checks misbehave."""

import os
import signal
import time
from pathlib import Path

import pytest

from cellfuncs.sheets.many import one, worker

RIGHT = {
    "A1": "Diameter", "B1": 50.0, "C1": "mm", "A2": "Volume flow", "B2": 10.8, "C2": "m3/h",
    "A3": "Flow area", "B3": ("=PI()/4*(B1/1000)^2", 0.0019634954), "C3": "m2",
    "A4": "Velocity", "B4": ("=B2/3600/B3", 1.5278875), "C4": "m/s",
}  # fmt: skip
WRONG = RIGHT | {"B4": ("=B2/60/B3", 91.67325)}


@pytest.fixture
def right(make_book):
    return make_book(RIGHT)


@pytest.fixture
def wrong(make_book):
    return make_book(WRONG)


@pytest.fixture
def folder(right, wrong, tmp_path):
    """A tree with a right workbook, a wrong one, and a broken one."""
    inside = tmp_path / "in"
    (inside / "deep").mkdir(parents=True)
    (inside / "a.xlsx").write_bytes(right)
    (inside / "deep" / "b.xlsx").write_bytes(wrong)
    (inside / "c.xlsx").write_bytes(b"PK\x03\x04 broken")
    return inside


# What the process does with a file whose bytes begin with a word.
_TRAPS = """
import os, signal, time, pathlib
from cellfuncs.sheets.many import worker
real = worker.checked_one
def trapped(task):
    word, _, rest = task.data.partition(b":")
    if word == b"hang":
        time.sleep(600)
    if word == b"die":
        os.kill(os.getpid(), signal.SIGKILL)
    if word == b"once":
        mark = pathlib.Path(rest.decode())
        if not mark.exists():
            mark.write_text("")
            os.kill(os.getpid(), signal.SIGKILL)
        task = type(task)(task.path, task.place, mark.with_suffix(".good").read_bytes())
    if word == b"crash":
        import ctypes
        ctypes.string_at(0)
    if word == b"abort":
        os.abort()
    if word == b"memory":
        bytearray(1 << 40)
    if word == b"grow":
        kept.append(bytearray(200 << 20))
        task = type(task)(task.path, task.place, b"")
    if word == b"print":
        print("in between", flush=True)
        task = type(task)(task.path, task.place, b"")
    if word == b"error":
        raise SystemExit("out")
    return real(task)
kept = []
worker.checked_one = trapped
"""


@pytest.fixture
def traps(monkeypatch):
    """Files whose bytes begin with ``hang:``, ``die:`` … do so to the process that checks them."""
    head, _, rest = worker._START.partition(" from ")
    lines = f"{head}\n{_TRAPS}\nfrom {rest}"
    monkeypatch.setattr(worker, "_START", lines)


@pytest.fixture
def task():
    """A task from bytes."""
    return lambda data, name="x.xlsx", **more: one.Task(name, name, data, **more)


def processes(of: int | None = None):
    """Ids of the checking processes that a process has started."""
    parent = str(of or os.getpid())
    for entry in Path("/proc").glob("[0-9]*/stat"):
        try:
            fields = entry.read_text().rsplit(")", 1)[1].split()
            words = (entry.parent / "cmdline").read_text()
        except OSError:
            continue
        if fields[1] == parent and "cellfuncs.sheets.many" in words and fields[0] != "Z":
            yield int(entry.parent.name)


@pytest.fixture
def children():
    return processes


def _gone(pid: int, within: float = 20.0) -> bool:
    end = time.monotonic() + within
    while time.monotonic() < end:
        try:
            os.kill(pid, 0)
        except ProcessLookupError:
            return True
        time.sleep(0.05)
    return False


@pytest.fixture
def gone():
    return _gone


@pytest.fixture
def kill():
    return lambda pid: os.kill(pid, signal.SIGKILL)
