"""Calls to the helper process: started on first use, watched, started anew when it is gone.

The helper runs in Cellfuncs' own environment; the office's Python needs nothing but its standard library.
A reply of the helper is a number, a text or rows of these; what goes wrong on the way is a fault text too.
"""

import contextlib
import os
import threading
import time

from . import interpreter, pipe

PATIENCE = 30.0  # s for one call
START = 90.0  # s until the helper answers for the first time; slow disks and virus scanners take their share
REST = 5.0  # s before a start that failed is tried again
WHOLE_COLUMN = 1_048_576  # rows of a sheet
AGAIN = "put it in again: install/start.py calc, or python -m cellfuncs.hosts.calc install"
SEARCHED = ("PYTHONHOME", "PYTHONPATH", "PYTHONSTARTUP", "PYTHONEXECUTABLE", "LD_LIBRARY_PATH", "LD_PRELOAD")


def fault(text: str) -> str:
    """A fault as cells show it, at most 255 characters."""
    text = "! Cellfuncs: " + " ".join(text.split())
    return text if len(text) <= 255 else text[:253] + " …"


class Failed(Exception):
    """The helper cannot be used; the text says why."""


class Helper:
    """The helper process as the cells see it. `patience` [s] ends a call that hangs.

    `command` starts it; an empty one is looked for anew at each start.
    """

    def __init__(self, command: "list[str]", patience: "float | None" = None) -> None:
        self.command = command
        self.patience = patience or _patience()
        self.lock = threading.Lock()
        self.process = None
        self.hello = {}
        self.told = None  # (answer,): what every call answers while stored values are put back
        self.failed = ("", 0.0)  # why the last start failed, and when another may be tried
        self.due = 0.0  # when the call that runs must be answered; 0 when none runs
        self.ended_for = 0.0  # the `due` of the call for which the watch ended the helper

    def ask(self, name: str, values: "tuple | list") -> object:
        """The helper's reply to one call; never raises."""
        if self.told is not None:
            return self.told[0]
        values = trimmed(values)
        with self.lock:
            try:
                return self._ask([name, *values])
            except Failed as failed:
                return fault(str(failed))
            except Exception as error:
                self._drop()
                return fault("the call could not be made (%s: %s); %s" % (type(error).__name__, error, AGAIN))

    def _ask(self, message: list) -> object:
        if self.process is None:
            self._start()
        try:
            return self._exchange(message)
        except OSError:
            # It could not even be handed over: the helper was gone before this call.
            self._drop()
        except pipe.Closed:
            ended_for, due = self.ended_for, self.due
            self._drop()
            if ended_for == due:
                raise Failed(
                    "no answer within %g s, so the calculation was ended; the next call starts it anew" % self.patience
                ) from None
            if not ended_for:
                raise Failed(
                    "the calculation ended while it worked on this cell; the next call starts it anew "
                    "(recalculate with Ctrl+Shift+F9)"
                ) from None
            # It was ended for the call before, whose reply came at the last moment.
        self._start()
        return self._exchange(message)

    def _exchange(self, message: list) -> object:
        process = self.process
        self.due = time.monotonic() + self.patience
        pipe.send(process.stdin.fileno(), message)
        try:
            pipe.look_out(process.stdout.fileno(), pipe.MOMENT)
            reply = pipe.receive(process.stdout.fileno())
        except OSError:
            raise pipe.Closed from None
        self.due = 0.0
        return reply

    def _start(self) -> None:
        """Start the helper and wait until it says that it is there. Raises Failed."""
        why, when = self.failed
        if time.monotonic() < when:
            raise Failed(why)
        try:
            self._try_start()
            self.failed = ("", 0.0)
        except Failed as failed:
            self._drop()
            self.failed = (str(failed), time.monotonic() + REST)
            raise

    def _try_start(self) -> None:
        import subprocess
        import tempfile

        try:
            command = self.command or interpreter.find()
        except interpreter.Unknown as unknown:
            raise Failed(str(unknown)) from None
        program = command[0]
        if not os.path.exists(program):
            raise Failed("its Python (%s) is not there; %s" % (program, AGAIN))
        variables = {name: value for name, value in os.environ.items() if name not in SEARCHED}
        with tempfile.TemporaryFile() as complaints:
            try:
                self.process = subprocess.Popen(
                    command,
                    stdin=subprocess.PIPE,
                    stdout=subprocess.PIPE,
                    stderr=complaints,
                    bufsize=0,
                    cwd=os.path.dirname(program),
                    env=variables,
                    creationflags=getattr(subprocess, "CREATE_NO_WINDOW", 0),
                )
            except OSError as error:
                raise Failed("its Python does not start (%s); %s" % (error.strerror or error, AGAIN)) from None
            watch = threading.Thread(target=self._watch, args=(self.process,), daemon=True)
            watch.start()
            self.due = time.monotonic() + START
            try:
                self.hello = pipe.receive(self.process.stdout.fileno())
            except (OSError, ValueError, pipe.Closed):
                complaints.seek(0)
                said = complaints.read().decode("utf-8", "replace").split("\n")
                last = ([line.strip() for line in said if line.strip()] or ["it printed nothing"])[-1]
                raise Failed("the calculation does not start (%s); %s" % (last[:120], AGAIN)) from None
            self.due = 0.0

    def _watch(self, process: object) -> None:
        """End the helper when a call runs over its time; a thread of its own, because reading waits."""
        pause = min(0.5, self.patience / 4)
        while self.process is process:
            due = self.due
            if due and time.monotonic() > due and self.process is process:
                self.ended_for = due
                process.kill()
                return
            time.sleep(pause)

    def _drop(self) -> None:
        process, self.process = self.process, None
        if process is not None:
            for end in (process.stdin, process.stdout):
                with contextlib.suppress(OSError):
                    end.close()
            process.kill()
            process.wait()
        self.due = self.ended_for = 0.0


def _patience() -> float:
    try:
        return max(0.1, float(os.environ.get("CELLFUNCS_PATIENCE", "")))
    except ValueError:
        return PATIENCE


def trimmed(values: "tuple | list") -> "tuple | list":
    """The arguments without those left out at the end, and whole columns without the blank rows below.

    Whole columns of one call are cut at the same row, so that they still fit together.
    """
    last = len(values)
    while last and values[last - 1] is None:
        last -= 1
    values = values[:last]
    whole = [value for value in values if type(value) is tuple and len(value) == WHOLE_COLUMN]
    if not whole:
        return values
    used = max(_used_rows(value) for value in whole) or 1
    return [value[:used] if type(value) is tuple and len(value) == WHOLE_COLUMN else value for value in values]


def _used_rows(rows: tuple) -> int:
    blank = ("",) * len(rows[0])
    count = len(rows)
    while count and rows[count - 1] == blank:
        count -= 1
    return count
