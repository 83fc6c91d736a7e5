"""A process that checks one workbook after another, with bounded time and memory for each.

What is imported once stays imported, which saves seconds a file. A process that dies, takes too long or runs out of
memory is replaced; its file gets one more go in a new one, since an end may come from outside or from what the files
before have left behind. Only a file that takes too long gets none.
"""

from __future__ import annotations

import contextlib
import os
import pickle
import signal
import subprocess
import sys
import threading
from importlib import import_module
from typing import Any

from cellfuncs.books.child import GRACE, MEMORY, bound_memory, ended, own_memory, start_of, started
from cellfuncs.sheets.many.one import Answer, Task, checked_one, failed

SECONDS = 120.0  # for one file; the largest that are let in need a quarter of it
START = 120.0  # s, for the imports on a machine that is busy
FOR_MANY = ("CoolProp.CoolProp", "scipy.optimize")
_ALWAYS = ("formualizer", "cellfuncs.sheets.check")
_START = start_of("cellfuncs.sheets.many.worker")
_GROWN = 4  # a process that has grown by this part of the memory is replaced
# what reading an answer raises that is cut off, or none
_NO_ANSWER = (OSError, pickle.UnpicklingError, EOFError, AttributeError, ImportError, LookupError, ValueError)
TOO_LONG = "the check took longer than {:.3g} s and was stopped"
TOO_MUCH = "the check needs more than {:.3g} GB of memory and was stopped"
BROKEN = "the check broke off (code {})"


class Ended(Exception):
    """The process is no more; ``text`` says of its file what happened, ``again`` whether it may have another go."""

    def __init__(self, text: str, again: bool) -> None:
        super().__init__(text)
        self.text, self.again = text, again


class Worker:
    """A worker of its own process. ``check`` is for one thread, ``stop`` for any.

    One that is for many workbooks imports beforehand what only most of them need.
    """

    def __init__(self, seconds: float | None = None, memory: int | None = None, is_for_many: bool = True) -> None:
        self.imports = FOR_MANY if is_for_many else ()
        self.seconds = SECONDS if seconds is None else seconds
        self.memory = MEMORY if memory is None else memory
        self._process: subprocess.Popen | None = None
        self._lock = threading.Lock()
        self._stopped = False

    def check(self, task: Task) -> Answer | None:
        """The answer for a file, whatever happens to the process; None once the worker was stopped."""
        try:
            return self._asked(task)
        except Ended as first:
            if self._stopped or not first.again:
                return None if self._stopped else failed(task, first.text)
        try:
            return self._asked(task)
        except Ended as second:
            return None if self._stopped else failed(task, second.text)

    def stop(self) -> None:
        """End the process; a check under way comes back without an answer."""
        with self._lock:
            self._stopped = True
            if self._process is not None:
                self._process.kill()

    def close(self) -> None:
        """End the process and all that belongs to it."""
        self.stop()
        self._replace()

    def _asked(self, task: Task) -> Answer:
        process = self._running()
        answer, replace = self._heard(process, self.seconds, task)
        if answer is None:
            self._replace()
            raise Ended(TOO_MUCH.format(self.memory / 1024**3), True)
        if replace:
            self._replace()
        return answer

    def _running(self) -> subprocess.Popen:
        """The process, a new one where there is none."""
        with self._lock:
            if self._stopped:
                raise Ended("", False)
            if self._process is not None:
                return self._process
            process = self._process = started(_START)
        self._heard(process, START, (self.seconds, self.memory, self.imports))
        return process

    def _heard(self, process: subprocess.Popen, seconds: float, said: Any) -> Any:
        """What the process answers, within its time; raises Ended."""
        late = threading.Event()

        def end() -> None:
            late.set()
            process.kill()

        timer = threading.Timer(seconds, end)
        timer.daemon = True
        timer.start()
        try:
            with contextlib.suppress(BrokenPipeError):  # it died before: the reading says so
                pickle.dump(said, process.stdin)
                process.stdin.flush()
            return pickle.load(process.stdout)
        except _NO_ANSWER as error:
            raise self._end_of(process, seconds if late.is_set() else None) from error
        finally:
            timer.cancel()

    def _end_of(self, process: subprocess.Popen, late: float | None) -> Ended:
        with contextlib.suppress(subprocess.TimeoutExpired):
            process.wait(1.0)  # its output has ended: it ends itself, with a code that tells why
        code = self._replace()
        if late is not None:
            return Ended(TOO_LONG.format(late), False)
        # The engine aborts the process where it gets no memory.
        aborted = code == -signal.SIGABRT
        return Ended(TOO_MUCH.format(self.memory / 1024**3) if aborted else BROKEN.format(code), True)

    def _replace(self) -> int:
        with self._lock:
            process, self._process = self._process, None
        return ended(process) if process is not None else 0


def main() -> None:
    """The process itself: answers come with a word whether it wants to be replaced; no answer is want of memory."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)  # Ctrl+C goes to all processes of a terminal; the parent decides
    outgoing = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)  # what a library prints must not get between the messages

    def tell(answer: Answer | None, replace: bool) -> None:
        pickle.dump((answer, replace), outgoing)
        outgoing.flush()

    try:
        seconds, memory, imports = pickle.load(sys.stdin.buffer)
        for name in (*_ALWAYS, *imports):  # so that their size and their time are not counted as a file's
            import_module(name)
        bound_memory(memory)
        own = own_memory()
        tell(None, False)  # ready
        while True:
            task: Any = pickle.load(sys.stdin.buffer)
            _bound_time(seconds + GRACE)
            try:
                answer = checked_one(task)
            except MemoryError:
                tell(None, True)
                break
            _bound_time(0.0)
            now = own_memory()
            tell(answer, own is not None and now is not None and now - own > memory / _GROWN)
    except (EOFError, BrokenPipeError):  # no more files, or the parent is gone
        pass
    os._exit(0)  # threads of libraries need not be waited for


def _bound_time(seconds: float) -> None:
    """End this process after so many seconds (0: never), should the parent be gone and nobody else do it."""
    if hasattr(signal, "setitimer"):
        signal.signal(signal.SIGALRM, signal.SIG_DFL)
        signal.setitimer(signal.ITIMER_REAL, seconds)
