"""The private environment: made, filled from the lock file, mended (standard library only)."""

import contextlib
import errno
import hashlib
import json
import os
import shutil
import subprocess
import sys
import tempfile
import time
import tomllib
from collections.abc import Callable, Iterator
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
LOCK_FILE = ROOT / "install" / "lock.txt"
PROJECT_FILE = ROOT / "pyproject.toml"
STAMP = "cellfuncs-setup.json"
# The filled environment takes 380 MB, its downloads 130 MB, measured on Linux with Python 3.11.
SPACE_NEEDED = 600_000_000

# Run inside the environment: exits 1 when a package that was installed, or its top folder, is gone.
PRESENT = """
import importlib.metadata as metadata, json, os, sys
for name, version in json.loads(sys.argv[1]).items():
    package = metadata.distribution(name)
    record = package.read_text("RECORD")
    tops = {line.strip('"').split(",")[0].split("/")[0] for line in record.splitlines()}
    tops -= {"", "..", "__pycache__"}
    here = str(package.locate_file(""))
    assert package.version == version and all(os.path.exists(os.path.join(here, top)) for top in tops)
"""
INSTALLED = """
import importlib.metadata as metadata, json
print(json.dumps({package.name: package.version for package in metadata.distributions()}))
"""

# What pip and venv print when something outside of them is wrong: marks, and what to tell about it.
CAUSES = (
    (
        ("No space left on device", "[Errno 28]", "not enough space on the disk"),
        "no space left on the disk of {folder} or of {temporary}: free some, about 0.6 GB are needed",
    ),
    (
        ("No module named venv", "No module named ensurepip", "ensurepip is not available"),
        "this Python has no venv module: install it (Debian, Ubuntu: apt install python3-venv)",
    ),
    (
        ("CERTIFICATE_VERIFY_FAILED", "certificate verify failed"),
        "the certificate of the package index is not trusted here: name the right one in PIP_CERT",
    ),
    (
        (
            "Failed to establish a new connection",
            "NameResolutionError",
            "name resolution",
            "getaddrinfo failed",
            "Network is unreachable",
            "Connection refused",
            "Connection reset",
            "connection broken",
            "ConnectTimeoutError",
            "Read timed out",
            "ProxyError",
        ),
        "no network: the packages cannot be fetched now. Connect once; after that everything works offline",
    ),
    (
        ("Permission denied", "Read-only file system", "[Errno 13]", "[Errno 30]"),
        "no right to write in {folder} or in {root}: set CELLFUNCS_ENV to a folder that you may write to",
    ),
)
NOT_TO_BE_HAD = ("No matching distribution found", "Could not find a version", "Failed to build", "conflict")


class Trouble(Exception):
    """Setting up cannot go on; the text is the one line to show."""


class Progress:
    """One line a step on stderr with the seconds since the start; on a terminal the last one moves."""

    def __init__(self) -> None:
        self.start = time.monotonic()
        self.moving = False

    def _line(self, text: str) -> str:
        return f"[{time.monotonic() - self.start:6.1f} s] {text}"

    def step(self, text: str) -> None:
        self.settle()
        print(self._line(text), file=sys.stderr, flush=True)

    def move(self, text: str) -> None:
        if sys.stderr.isatty():
            width = shutil.get_terminal_size().columns - 1
            print("\r" + self._line(text)[:width].ljust(width), end="", file=sys.stderr, flush=True)
            self.moving = True

    def settle(self) -> None:
        if self.moving:
            print(file=sys.stderr)
            self.moving = False


def environment_folder() -> Path:
    """Where the environment is: CELLFUNCS_ENV, or `.venv` in the project's folder."""
    named = os.environ.get("CELLFUNCS_ENV", "").strip()
    return Path(named).expanduser().absolute() if named else ROOT / ".venv"


def interpreter(folder: Path) -> Path:
    """The Python of an environment."""
    return folder / ("Scripts/python.exe" if os.name == "nt" else "bin/python")


def clean_variables() -> dict[str, str]:
    """The environment variables without those that would mix another Python's packages in."""
    unwanted = ("PYTHONHOME", "PYTHONPATH", "PIP_TARGET", "PIP_PREFIX", "PIP_REQUIREMENT", "PIP_CONSTRAINT")
    kept = {name: value for name, value in os.environ.items() if name not in unwanted}
    return kept | {
        "PYTHONNOUSERSITE": "1",
        "PYTHONUTF8": "1",
        "PIP_USER": "0",
        "PIP_DISABLE_PIP_VERSION_CHECK": "1",
        "PIP_NO_INPUT": "1",
    }


def prepare() -> Path:
    """Make, mend or just find the environment; return its Python. Raises Trouble with one clear line."""
    folder = environment_folder()
    progress = Progress()
    try:
        with _alone(folder, progress):
            return _prepare(folder, progress)
    except KeyboardInterrupt:
        raise Trouble("interrupted; the next start makes the environment anew") from None
    except OSError as error:
        raise Trouble(_told(f"[Errno {error.errno}] {error.strerror}", folder) or f"{error}") from error
    finally:
        progress.settle()


def _prepare(folder: Path, progress: Progress) -> Path:
    stamp = _read_stamp(folder)
    python = interpreter(folder)
    if stamp.get("state") == "ready" and stamp.get("key") == _key(python) and _complete(python, stamp):
        return python
    if folder.exists() and not _usable(folder, stamp):
        _clear(folder, stamp, progress)
    own = stamp.get("own", False)
    if not python.exists():
        _make(folder, progress)
        own = True
    _write_stamp(folder, {"state": "making", "own": own})
    how = _install(python, folder, progress)
    packages = json.loads(_run([python, "-I", "-c", INSTALLED], folder))
    stamp = {"state": "ready", "own": own, "key": _key(python), "how": how, "packages": packages}
    if not _complete(python, stamp):
        raise Trouble(f"the environment {folder} is not whole after installing: delete it and try again")
    _write_stamp(folder, stamp)
    progress.step("ready")
    return python


def _usable(folder: Path, stamp: dict) -> bool:
    """Whether packages may be installed into what is there; one half made by us is not worth mending."""
    if stamp.get("state") == "making" and stamp.get("own", True):
        return False
    packages = stamp.get("packages", {})
    return _version(interpreter(folder)) >= "3.11" and _complete(interpreter(folder), {"packages": packages})


def _clear(folder: Path, stamp: dict, progress: Progress) -> None:
    """Delete a broken environment, and never a folder that is anything else."""
    if not folder.is_dir():
        raise Trouble(f"{folder} is a file: move it away, or set CELLFUNCS_ENV to another place")
    own = stamp.get("own", False) or (folder == ROOT / ".venv" and (folder / "pyvenv.cfg").exists())
    if not own and any(folder.iterdir()):
        raise Trouble(f"{folder} holds something else: move it away, or set CELLFUNCS_ENV to another place")
    if own:
        progress.step(f"the environment in {folder} is broken or half made: making it anew")
        shutil.rmtree(folder)


def _make(folder: Path, progress: Progress) -> None:
    nearest = next(place for place in (folder, *folder.parents) if place.exists())
    if shutil.disk_usage(nearest).free < SPACE_NEEDED:
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))
    progress.step(f"making a private environment in {folder}")
    folder.mkdir(parents=True, exist_ok=True)
    _write_stamp(folder, {"state": "making", "own": True})
    # Started from inside an environment, the new one still has to stand on the Python below it.
    base = getattr(sys, "_base_executable", None) or sys.executable
    _run([base, "-m", "venv", folder], folder)


def _install(python: Path, folder: Path, progress: Progress) -> str:
    """Install the packages and the project; returns "lock" or "bounds"."""
    names = [line for line in LOCK_FILE.read_text("utf-8").splitlines() if line and line[0] != "#"]
    pip = [python, "-m", "pip", "install", "--progress-bar", "off", "--retries", "2", "--timeout", "60"]
    progress.step(f"installing up to {len(names)} packages as in install/lock.txt (needs the network)")
    count = 0

    def follow(line: str) -> None:
        nonlocal count
        if line.startswith(("Collecting ", "Requirement already satisfied")):
            count += 1
        if line.startswith(("Collecting ", "Installing ", "  Downloading ", "Downloading ")):
            progress.move(f"{count} of {len(names)}: {line.strip()}")

    how = "lock"
    try:
        _run([*pip, "-r", LOCK_FILE], folder, follow)
    except Trouble as trouble:
        output = trouble.args[1] if len(trouble.args) > 1 else ""
        if _told(output, folder) or not any(mark in output for mark in NOT_TO_BE_HAD):
            raise
        progress.step("a locked version is not to be had here: installing by the bounds in pyproject.toml")
        how = "bounds"
        _run([*pip, *_bounds()], folder, follow)
    progress.step("installing Cellfuncs itself")
    # compat: a plain path entry, so that every start of this Python is spared a finder of its own.
    editable = ["--no-build-isolation", "--no-deps", "--config-settings", "editable_mode=compat", "-e", ROOT]
    _run([*pip, *editable], folder)
    return how


def _bounds() -> list[str]:
    data = tomllib.loads(PROJECT_FILE.read_text("utf-8"))
    project = data["project"]
    extra = project["optional-dependencies"]["test"]
    return [*data["build-system"]["requires"], *project["dependencies"], *extra]


def _run(command: list, folder: Path, follow: Callable[[str], None] = lambda line: None) -> str:
    """Run a step; its output, or Trouble(one line, whole output)."""
    words = [str(word) for word in command]
    lines = []
    with subprocess.Popen(
        words,
        stdin=subprocess.DEVNULL,
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
        encoding="utf-8",
        errors="replace",
        env=clean_variables(),
        cwd=ROOT,
    ) as process:
        try:
            for line in process.stdout:
                lines.append(line)
                follow(line.rstrip())
        except KeyboardInterrupt:
            process.terminate()
            raise
    output = "".join(lines)
    if process.returncode:
        wrong = [line.strip() for line in lines if line.lower().startswith(("error", "fatal"))] or lines[-1:]
        last = wrong[-1].strip() if wrong else "it printed nothing"
        step = "pip" if "pip" in words else "venv" if "venv" in words else "python"
        told = _told(output, folder) or f"{step} failed with code {process.returncode}: {last}"
        raise Trouble(told, output)
    return output


def _told(output: str, folder: Path) -> str | None:
    for marks, text in CAUSES:
        if any(mark in output for mark in marks):
            return text.format(folder=folder, root=ROOT, temporary=tempfile.gettempdir())
    return None


def _version(python: Path) -> str:
    """ "3.11" of an environment's Python, or "" when it does not run."""
    try:
        done = subprocess.run(
            [python, "-I", "-c", "import sys, pip; print('%d.%d' % sys.version_info[:2])"],
            capture_output=True,
            text=True,
            timeout=60,
        )
    except (OSError, subprocess.TimeoutExpired):
        return ""
    return done.stdout.strip() if done.returncode == 0 else ""


def _key(python: Path) -> str:
    """What the environment depends on; another place of the project or another Python is another key."""
    try:
        config = (python.parent.parent / "pyvenv.cfg").read_bytes()
    except OSError:
        return ""
    parts = (LOCK_FILE.read_bytes(), PROJECT_FILE.read_bytes(), config, os.fsencode(ROOT))
    return hashlib.sha256(b"\0".join(parts)).hexdigest()


def _complete(python: Path, stamp: dict) -> bool:
    packages = json.dumps(stamp.get("packages", {}))
    try:
        done = subprocess.run([python, "-I", "-c", PRESENT, packages], capture_output=True, timeout=60)
    except (OSError, subprocess.TimeoutExpired):
        return False
    return done.returncode == 0


def _read_stamp(folder: Path) -> dict:
    try:
        stamp = json.loads((folder / STAMP).read_text("utf-8"))
    except FileNotFoundError:
        return {}
    except (OSError, ValueError):
        return {"state": "making", "own": True}
    return stamp if isinstance(stamp, dict) else {"state": "making", "own": True}


def _write_stamp(folder: Path, stamp: dict) -> None:
    part = folder / (STAMP + ".part")
    part.write_text(json.dumps(stamp, indent=1), "utf-8")
    os.replace(part, folder / STAMP)


@contextlib.contextmanager
def _alone(folder: Path, progress: Progress) -> Iterator[None]:
    """Only one process sets up an environment at a time; the lock goes with the process, however it ends."""
    name = hashlib.sha256(os.fsencode(folder)).hexdigest()[:16]
    user = str(os.getuid()) if hasattr(os, "getuid") else "user"
    with open(Path(tempfile.gettempdir()) / f"cellfuncs-{user}-{name}.lock", "a+b") as handle:
        waited = False
        while not _locked(handle):
            if not waited:
                progress.step("another process is setting up this environment: waiting for it")
                waited = True
            time.sleep(0.2)
        yield


def _locked(handle) -> bool:
    try:
        if os.name == "nt":
            import msvcrt

            handle.seek(0)
            msvcrt.locking(handle.fileno(), msvcrt.LK_NBLCK, 1)
        else:
            import fcntl

            fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except (BlockingIOError, PermissionError):
        return False
    return True
