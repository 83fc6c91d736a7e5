"""A process that checks workbook after workbook. It has what it needs imported, and bounds on memory and time.

The parent hands over one task at a time and waits at most so many seconds for its answer. A process that takes
longer, dies, or runs out of memory is ended; the next task gets a new one.
"""

from __future__ import annotations

import contextlib
import os
import pickle
import subprocess
import sys
import threading
import time
from typing import Any

from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets.many.task import BROKEN, REFUSED, Done, Task, examine

MEMORY = 2 * 1024**3  # bytes beyond what the libraries take
SECONDS = 60.0  # for one workbook
START = 60.0  # s, for the imports of a new process on a busy machine

_COMMAND = (
    "import json, sys; sys.path[:] = json.loads(sys.stdin.buffer.readline());"
    " from cellfuncs.sheets.many.process import main; main()"
)
_READY = "ready"


class Process:
    """One process, started when it is needed. For use by one thread at a time."""

    def __init__(self, seconds: float = SECONDS, memory: int = MEMORY):
        self.seconds = seconds
        self.memory = memory
        self._running: subprocess.Popen | None = None

    def examine(self, task: Task) -> Done:
        """Check one workbook; never raises for what a workbook does."""
        try:
            running = self._running or self._start()
        except (EOFError, OSError, pickle.UnpicklingError) as error:
            self.close()
            return Done(task.path, BROKEN, f"no process could be started ({error or type(error).__name__})")
        late = threading.Event()
        timer = self._timer(running, self.seconds, late)
        try:
            pickle.dump(task, running.stdin)
            running.stdin.flush()
            return pickle.load(running.stdout)
        except (EOFError, OSError, pickle.UnpicklingError):
            code = self.close()
            why = f"took longer than {self.seconds:g} s" if late.is_set() else f"broke off (code {code})"
            return Done(task.path, BROKEN, f"the check {why} and was stopped")
        finally:
            timer.cancel()

    def _start(self) -> subprocess.Popen:
        import json

        # -P: a file beside the user's workbooks must not be taken for a module
        command = [sys.executable, "-P", "-X", "utf8", "-c", _COMMAND]
        variables = {"OPENBLAS_NUM_THREADS": "1", "OMP_NUM_THREADS": "1"} | os.environ
        running = self._running = subprocess.Popen(
            command, stdin=subprocess.PIPE, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, env=variables
        )
        timer = self._timer(running, START, threading.Event())
        try:
            running.stdin.write(json.dumps(sys.path).encode() + b"\n")
            pickle.dump(self.memory, running.stdin)
            running.stdin.flush()
            if pickle.load(running.stdout) != _READY:
                raise EOFError("the process said something else than that it is ready")
        finally:
            timer.cancel()
        return running

    @staticmethod
    def _timer(running: subprocess.Popen, seconds: float, late: threading.Event) -> threading.Timer:
        def end() -> None:
            late.set()
            running.kill()

        timer = threading.Timer(seconds, end)
        timer.daemon = True
        timer.start()
        return timer

    def stop(self) -> None:
        """End the process at once, from another thread; the one that waits for it gets an answer that says so."""
        running = self._running
        if running is not None:
            running.kill()

    def close(self) -> int | None:
        """End the process; its exit code."""
        running, self._running = self._running, None
        if running is None:
            return None
        for pipe in (running.stdin, running.stdout):
            with contextlib.suppress(OSError):
                pipe.close()
        with contextlib.suppress(subprocess.TimeoutExpired):
            return running.wait(timeout=1.0)
        running.kill()
        return running.wait()


def main() -> None:
    """The process itself: ready, then task by task until its input ends."""
    outgoing = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)  # what a library prints must not get between the answers
    memory = pickle.load(sys.stdin.buffer)
    _warm_up()
    _bound_memory(memory)
    _tell(outgoing, _READY)
    while True:
        try:
            task = pickle.load(sys.stdin.buffer)
        except EOFError:
            os._exit(0)
        done = _answer(task)
        try:
            _tell(outgoing, done)
        except (KeyboardInterrupt, BrokenPipeError):
            os._exit(130)  # the parent is gone


def _answer(task: Task) -> Done:
    start = time.perf_counter()
    try:
        done = examine(task)
        done.seconds = time.perf_counter() - start
        return done
    except CellfuncsError as error:
        return Done(task.path, REFUSED, str(error))
    except OSError as error:
        return Done(task.path, REFUSED, error.strerror or str(error))
    except MemoryError:
        return Done(task.path, BROKEN, "the check needs more memory than it may and was stopped")
    except KeyboardInterrupt:
        os._exit(130)
    except BaseException as error:
        return Done(task.path, BROKEN, f"an error of the program itself, {type(error).__name__}: {error}")


def _tell(outgoing: Any, what: Any) -> None:
    pickle.dump(what, outgoing)
    outgoing.flush()


def _warm_up() -> None:
    """Import once what every check needs, so that no workbook pays for it."""
    from cellfuncs import substances
    from cellfuncs.sheets import check  # noqa: F401

    substances.find("water").get("density", 300.0)


def _bound_memory(memory: int) -> None:
    """Bound the memory [bytes] of this process where the system can."""
    try:
        import resource
    except ImportError:  # Windows
        return
    with contextlib.suppress(OSError, ValueError):
        with open("/proc/self/statm") as file:
            own = int(file.read().split()[0]) * resource.getpagesize()
        _, hard = resource.getrlimit(resource.RLIMIT_AS)
        resource.setrlimit(resource.RLIMIT_AS, (own + memory if hard < 0 else min(own + memory, hard), hard))
