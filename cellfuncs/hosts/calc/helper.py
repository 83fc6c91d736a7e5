"""The helper process: answers the calls of cells that the office sends over a pipe.

Started by the extension (``interpreter.command``) in Cellfuncs' own environment. It ends when the pipe does,
which is when the office ends.
"""

import os
import signal
import sys
import threading
import time
from typing import Any

from cellfuncs import __version__
from cellfuncs.hosts.calc.office import calls, pipe

LONGEST_CALL = 120.0  # s; the office ends a call long before, unless the office itself is gone


def answer(call: list[Any], functions: Any) -> Any:
    """The answer to one message: the name of a function and its arguments."""
    name, *values = call
    function = functions.get(name)
    if function is None:
        return f"! {name}: not in Cellfuncs {__version__}; {calls.AGAIN}"
    return function.call(*values)


def main() -> None:
    """Answer until the pipe closes."""
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # our matrices are small: threads cost more than they save
    from cellfuncs.cells import catalogue

    signal.signal(signal.SIGINT, signal.SIG_IGN)  # Ctrl+C in the terminal the office was started from
    incoming, outgoing = os.dup(0), os.dup(1)
    os.dup2(2, 1)  # what a library prints must not get between the messages
    functions = catalogue.functions()
    state = {"since": 0.0}
    threading.Thread(target=_end_when_stuck, args=(state,), daemon=True).start()
    try:
        pipe.send(outgoing, {"version": __version__})
        while True:
            pipe.look_out(incoming, pipe.MOMENT)
            call = pipe.receive(incoming)
            state["since"] = time.monotonic()
            pipe.send(outgoing, answer(call, functions))
            state["since"] = 0.0
    except (pipe.Closed, OSError):
        sys.exit(0)


def _end_when_stuck(state: dict[str, float]) -> None:
    """Without an office nobody ends a call that hangs."""
    while True:
        time.sleep(5.0)
        since = state["since"]
        if since and time.monotonic() - since > LONGEST_CALL:
            os._exit(1)
