"""Which Python calculates, where the extension itself names none: the one the user noted, else the one of PATH.

The user's own file, absolute paths and programs that exist: a folder that happens to be the current one, or a file
that somebody else put there, starts nothing.
"""

import json
import os

WINDOWS = os.name == "nt"
UNKNOWN = (
    "no Python with Cellfuncs is known here; install Cellfuncs in one (3.11 or newer) and run there: "
    "python -m cellfuncs.hosts.calc use"
)
# No packages but those of that Python, and the folder of Cellfuncs where it lies elsewhere.
START = (
    "import sys; sys.path[:0] = [folder for folder in sys.argv[1:] if folder not in sys.path]; "
    "from cellfuncs.hosts.calc.helper import main; main()"
)


class Unknown(Exception):
    """No Python can be named; the text says what to do."""


def command(python: str, folder: str = "") -> "list[str]":
    """The command line that starts the helper; `folder` holds the package cellfuncs."""
    return [python, "-I", "-X", "utf8", "-c", START] + ([folder] if folder else [])


def user_file() -> str:
    """Where a user notes her Python: the same place on every system."""
    return os.path.join(os.path.expanduser("~"), ".cellfuncs", "calc.json")


def find() -> "list[str]":
    """The command line that starts the helper. Raises Unknown."""
    python, folder = _noted(user_file()) or (_on_path(os.environ.get("PATH", "")), "")
    if not python:
        raise Unknown(UNKNOWN)
    return command(python, folder)


def _noted(path: str) -> "tuple | None":
    """Python and folder of the user's file, None where there is none. Raises Unknown where it is not to be trusted."""
    if not os.path.isabs(path):
        return None
    try:
        with open(path, encoding="utf-8") as file:
            state = os.fstat(file.fileno())
            noted = json.load(file)
        python, folder = noted["python"], noted["folder"]
        whole = os.path.isabs(python) and os.path.isabs(folder)
    except FileNotFoundError:
        return None
    except (OSError, ValueError, KeyError, TypeError):
        whole = False
    if not whole:
        raise Unknown("%s is damaged; write it anew: python -m cellfuncs.hosts.calc use" % path)
    # On Windows nobody else may write into the folder of a user.
    if not WINDOWS and (state.st_uid != os.geteuid() or state.st_mode & 0o022):
        raise Unknown("%s is not used, because others may write it; delete it" % path)
    return python, folder


def _on_path(folders: str) -> str:
    """The Python beside the command `cellfuncs`, or ""; a link to the command is followed."""
    pythons = ("python.exe", os.path.join("..", "python.exe")) if WINDOWS else ("python3", "python")
    for folder in folders.split(os.pathsep):
        script = os.path.join(folder, "cellfuncs.exe" if WINDOWS else "cellfuncs")
        if os.path.isabs(folder) and os.path.isfile(script) and os.access(script, os.X_OK):
            beside = os.path.dirname(os.path.realpath(script))
            for python in pythons:
                python = os.path.normpath(os.path.join(beside, python))
                if os.path.isfile(python):
                    return python
    return ""
