"""A recalculation in a process of its own, so that no workbook can take all memory or time of the machine.

It gets what to do on its input, and answers with progress and the result on its output. The parent alone writes
the file, so that a process that is ended at any moment leaves nothing behind.
"""

from __future__ import annotations

import contextlib
import os
import pickle
import signal
import sys
import threading
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

from cellfuncs.books.child import GRACE, MEMORY, bound_memory, ended, start_of, started
from cellfuncs.errors import BookRefused

if TYPE_CHECKING:
    from cellfuncs.hosts.embedded import Calculated

_START = start_of("cellfuncs.hosts.apart")
_TOO_MUCH = "The calculation needs more than {:.3g} GB of memory and was stopped."
_TOO_LONG = "The calculation took longer than it may and was stopped."
_BROKEN = "The calculation broke off in the engine (code {}); no values were written."


def calculated_apart(path: Path, *, progress: Callable[[str], None] | None, seconds: float, **how: Any) -> Calculated:
    """As ``embedded.calculated``, in a process whose memory (where the system can do that) and time are bounded."""
    process = started(_START)
    late = threading.Event()

    def end() -> None:
        late.set()
        process.kill()

    timer = threading.Timer(seconds + GRACE, end)
    timer.daemon = True
    timer.start()
    try:
        with contextlib.suppress(BrokenPipeError):  # it died at once: the reading says so
            pickle.dump((str(path.absolute()), seconds, MEMORY, how), process.stdin)
            process.stdin.flush()
        while True:
            word, content = pickle.load(process.stdout)
            if word == "progress":
                if progress is not None:
                    progress(content)
            elif word == "done":
                return content
            else:
                raise content
    except (EOFError, pickle.UnpicklingError) as error:
        code = process.wait()
        if late.is_set():
            raise BookRefused(_TOO_LONG) from error
        # The engine aborts the process where it gets no memory.
        text = _TOO_MUCH.format(MEMORY / 1024**3) if code == -signal.SIGABRT else _BROKEN.format(code)
        raise BookRefused(text) from error
    finally:
        timer.cancel()
        ended(process)


def main() -> None:
    """The process itself."""
    from cellfuncs.hosts import embedded

    outgoing = os.fdopen(os.dup(1), "wb")
    os.dup2(2, 1)  # what a library prints must not get between the messages

    def tell(word: str, content: Any) -> None:
        pickle.dump((word, content), outgoing)
        outgoing.flush()

    path, seconds, memory, how = pickle.load(sys.stdin.buffer)
    try:
        import formualizer  # noqa: F401  (its own size and that of numpy are not the workbook's)
        import numpy  # noqa: F401

        bound_memory(memory)
        tell(
            "done",
            embedded.calculated(Path(path), progress=lambda text: tell("progress", text), seconds=seconds, **how),
        )
    except MemoryError:
        tell("failed", BookRefused(_TOO_MUCH.format(memory / 1024**3)))
    except (KeyboardInterrupt, BrokenPipeError):
        os._exit(130)  # the parent knows, or is gone
    except BaseException as error:
        tell("failed", _portable(error))
    os._exit(0)  # threads of the engine that do not listen need not be waited for


def _portable(error: BaseException) -> BaseException:
    """The exception, or its like where it cannot be sent; the trace goes with it as a note."""
    import traceback

    trace = "".join(traceback.format_exception(error))
    try:
        pickle.loads(pickle.dumps(error))
    except Exception:  # kinds of other libraries may need more than their text
        error = RuntimeError(f"{type(error).__name__}: {error}")
    error.add_note(trace)
    return error
