"""What Excel's side reads: the settings file of the add-in, in xlwings' format, and our record of what was built.

Excel's side reads the file in the code page of Windows and hands its paths on in it. So a path goes in only if
that code page has all its letters; otherwise its short name (8.3) does, and without one the path is refused.
"""

import csv
import json
import os
from collections.abc import Iterable
from pathlib import Path

ADD_IN = "Cellfuncs.xlam"
PROJECT = "cellfuncs"  # xlwings derives the place of a custom add-in's settings from its project name
MODULE = "cellfuncs.hosts.excel"
LONGEST = 240  # Windows' own limit is 260, the name of xlwings' DLL comes on top
# They mean something to the command line or to xlwings' list of folders on the way to Python.
MEANING_SOMETHING = ";%^"


def folder() -> Path:
    """The user's folder for settings and record: where xlwings' VBA looks, from the same variable."""
    return Path(os.environ.get("USERPROFILE") or Path.home()) / f".{PROJECT}"


def file() -> Path:
    return folder() / f"{PROJECT}.conf"


def record_file() -> Path:
    return folder() / "add-in.json"


def code_page() -> str:
    """The encoding that VBA reads and writes files in (elsewhere than on Windows, for the tests, a common one)."""
    return "mbcs" if os.name == "nt" else "cp1252"


def short_name(path: str) -> str:
    """The 8.3 name of an existing path; the path itself where the disk keeps none."""
    import ctypes

    room = ctypes.create_unicode_buffer(1024)
    got = ctypes.windll.kernel32.GetShortPathNameW(path, room, len(room))
    return room.value if 0 < got < len(room) else path


def spelled(path: Path) -> str:
    """A path as Excel's side can take it; ValueError in words where there is no such spelling."""
    text = str(path)
    bad = sorted(set(text) & set(MEANING_SOMETHING))
    if bad:
        raise ValueError(f'the folder "{text}" has {" ".join(bad)} in its name: give it another name')
    if not _fits(text):
        text = short_name(text)
    if not _fits(text):
        raise ValueError(
            f'"{path}" has letters that Windows does not know in its own code page, and its disk keeps no short '
            "names: move the project, or set CELLFUNCS_ENV, to a folder with plain letters"
        )
    if len(text) > LONGEST:
        raise ValueError(f'"{text}" has more than {LONGEST} characters: move it to a shorter path')
    return text


def _fits(text: str) -> bool:
    try:
        text.encode(code_page())
    except UnicodeEncodeError:
        return False
    return True


def wanted(interpreter: str, project: str) -> dict[str, str]:
    """Our settings. The workbook's folder stays out of Python's path: it may be a web address, and not ours."""
    return {
        "INTERPRETER_WIN": interpreter,
        "PYTHONPATH": project,
        "UDF MODULES": MODULE,
        "ADD_WORKBOOK_TO_PYTHONPATH": "False",
    }


def load() -> dict[str, str]:
    """The settings as they stand; empty where there are none."""
    try:
        text = file().read_text(code_page(), errors="replace")
    except FileNotFoundError:
        return {}
    rows = [row for row in csv.reader(text.splitlines()) if len(row) >= 2]
    return {row[0].upper(): row[1] for row in rows}


def save(ours: dict[str, str]) -> None:
    """Write our settings whole or not at all, and keep what the user has added (SHOW CONSOLE, for instance)."""
    lines = (f'"{name}","{value}"' for name, value in (load() | ours).items())
    _write(file(), lines, code_page())


def load_record() -> dict:
    """What was built, when the add-in was made last: its file, fingerprint and versions."""
    try:
        record = json.loads(record_file().read_text("utf-8"))
    except (OSError, ValueError):
        return {}
    return record if isinstance(record, dict) else {}


def save_record(record: dict) -> None:
    _write(record_file(), json.dumps(record, indent=1).splitlines(), "utf-8")


def _write(path: Path, lines: Iterable[str], encoding: str) -> None:
    path.parent.mkdir(parents=True, exist_ok=True)
    part = path.with_name(path.name + ".part")
    part.write_text("".join(f"{line}\n" for line in lines), encoding, newline="\r\n")
    os.replace(part, path)


def remove() -> list[Path]:
    """Delete settings and record; what was there."""
    gone = []
    for path in (file(), record_file()):
        if path.exists():
            path.unlink()
            gone.append(path)
    if folder().is_dir() and not any(folder().iterdir()):
        folder().rmdir()
    return gone
