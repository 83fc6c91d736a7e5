"""One line of a diagnosis, a question put to another Python, and output that no letter can break."""

import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path

from environment import clean_variables

OK, NOTE, FAILS, NOT_SET_UP = "ok", "note", "FAILS", "not set up"
PATIENCE = 120  # [s]


@dataclass(frozen=True)
class Line:
    """What was looked at, OK, NOTE, FAILS or NOT_SET_UP, what was found, and what to do."""

    subject: str
    state: str
    text: str
    advice: str = ""


@dataclass(frozen=True)
class Answer:
    """What a Python printed, or None and why it printed nothing."""

    text: str | None
    error: str = ""


def in_python(python: Path, script: str) -> Answer:
    """Run a script in a Python, apart from the current folder and the user's own packages."""
    try:
        done = subprocess.run(
            [str(python), "-I", "-B", "-c", script],
            stdin=subprocess.DEVNULL,
            capture_output=True,
            encoding="utf-8",
            errors="replace",
            env=clean_variables(),
            timeout=PATIENCE,
        )
    except OSError as error:
        return Answer(None, f"it does not start ({error.strerror})")
    except subprocess.TimeoutExpired:
        return Answer(None, f"no answer within {PATIENCE} s")
    if done.returncode:
        said = [line.strip() for line in done.stderr.splitlines() if line.strip()]
        return Answer(None, said[-1] if said else f"it ended with code {done.returncode}")
    return Answer(done.stdout.strip())


def print_any_letter() -> None:
    """A path may have letters that a redirected output cannot take: they are written as escapes then."""
    if hasattr(sys.stdout, "reconfigure"):
        sys.stdout.reconfigure(errors="backslashreplace")
