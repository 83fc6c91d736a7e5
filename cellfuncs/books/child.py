"""A second Python beside this one for work on files from strangers: started quickly, bounded, ended surely.

It is started as Python starts, which costs less than a tenth of a second, since what it imports the parent need not.
"""

from __future__ import annotations

import contextlib
import json
import os
import subprocess
import sys
from pathlib import Path

MEMORY = 2 * 1024**3  # bytes, beyond what the libraries take; the largest workbook that is let in needs half
GRACE = 30.0  # s, past the time in which the work should have ended by itself


def start_of(module: str) -> str:
    """What the child runs: it takes over the places of our modules, then runs ``main`` of that module."""
    return (
        "import json, sys; sys.path[:] = json.loads(sys.stdin.buffer.readline());"
        f" from {module} import main; main()"
    )


def started(start: str) -> subprocess.Popen:
    """The child, running ``start``; what it is to do goes to its input, what it answers comes from its output."""
    # -P: a file beside the user's workbook must not be taken for a module.
    command = [sys.executable, "-P", "-X", "utf8", "-c", start]
    # A linear algebra library takes room for as many threads as there are processors, all within the bound.
    variables = {"OPENBLAS_NUM_THREADS": "1", "OMP_NUM_THREADS": "1"} | os.environ
    process = subprocess.Popen(
        command, stdin=subprocess.PIPE, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, env=variables
    )
    with contextlib.suppress(BrokenPipeError):  # it died at once: the reading says so
        process.stdin.write(json.dumps(sys.path).encode() + b"\n")
    return process


def ended(process: subprocess.Popen) -> int:
    """End the child, whatever it does; its exit code (that of its own end, where it had ended)."""
    process.kill()
    code = process.wait()
    for pipe in (process.stdin, process.stdout):
        with contextlib.suppress(OSError):
            pipe.close()
    return code


def own_memory() -> int | None:
    """Address space of this process [bytes]; None where the system does not tell."""
    try:
        import resource

        return int(Path("/proc/self/statm").read_text().split()[0]) * resource.getpagesize()
    except (ImportError, OSError, ValueError):  # Windows, or no such file
        return None


def bound_memory(memory: int) -> None:
    """Bound what this process may take beyond what it has [bytes], where the system can (Linux)."""
    own = own_memory()
    if own is None:
        return
    import resource

    with contextlib.suppress(OSError, ValueError):  # the system does not bound it
        _, hard = resource.getrlimit(resource.RLIMIT_AS)
        wanted = own + memory
        resource.setrlimit(resource.RLIMIT_AS, (wanted if hard < 0 else min(wanted, hard), hard))
