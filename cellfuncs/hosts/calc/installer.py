"""Puts the extension into LibreOffice and sees that a cell answers; takes it out again. Standard library only.

`cellfuncs.oxt` is ready-made and names no Python. What is installed from here is a copy that does.
"""

import contextlib
import json
import os
import tempfile
import time
import zipfile
from collections.abc import Callable
from pathlib import Path

from . import libreoffice
from .libreoffice import Office, Unusable
from .office import interpreter

HERE = Path(__file__).resolve().parent
READY = HERE / "cellfuncs.oxt"
PARENT = HERE.parent.parent.parent  # the folder that holds the package
SETTINGS = "helper.json"
IDENTIFIER = "cellfuncs.calc"
SAME_TIME = (1980, 1, 1, 0, 0, 0)
# The first start after a change may fail while another one is still ending.
ATTEMPTS, PAUSE = 6, 3.0  # s
EXPECTED = 2 * 0.02 * 998 / 0.001
# A workbook in one text file, as the office itself would write it.
TRIED = """<?xml version="1.0" encoding="UTF-8"?>
<office:document xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0"
 xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0"
 xmlns:of="urn:oasis:names:tc:opendocument:xmlns:of:1.2" office:version="1.2"
 office:mimetype="application/vnd.oasis.opendocument.spreadsheet"><office:body><office:spreadsheet>
<table:table table:name="Tried"><table:table-row>
<table:table-cell table:formula="of:=CELLFUNCS.FUNCTIONS.CF_VERSION()"/>
<table:table-cell table:formula="of:=CELLFUNCS.FUNCTIONS.CF_REYNOLDS(2;0.02;998;0.001)"/>
</table:table-row></table:table></office:spreadsheet></office:body></office:document>
"""


def pack(out: Path, files: dict[str, bytes]) -> None:
    """Write the files of an extension; the same files make the same bytes, on any machine."""
    with zipfile.ZipFile(out, "w", zipfile.ZIP_STORED) as file:  # compressed, it would depend on the library
        for name in sorted(files):
            entry = zipfile.ZipInfo(name, SAME_TIME)
            entry.create_system, entry.external_attr = 3, 0o644 << 16
            file.writestr(entry, files[name])


def write(out: Path, python: Path) -> None:
    """Write a copy of the extension that calculates with `python` and the Cellfuncs that this file belongs to."""
    with zipfile.ZipFile(READY) as ready:
        files = {name: ready.read(name) for name in ready.namelist()}
    settings = json.loads(files[SETTINGS]) | {"command": interpreter.command(str(python), str(PARENT))}
    files[SETTINGS] = json.dumps(settings, indent=1).encode("utf-8")
    pack(out, files)


def install(office: Office, environment: Callable[[], Path], private: Path | None = None) -> str:
    """Add the extension and calculate one cell with it; what to tell. Raises Unusable.

    `environment` gives the Python that calculates. With `private` everything goes into that folder, and nothing
    of the user is touched.
    """
    if not office.has_python():
        raise Unusable(libreoffice.NO_PYTHON)
    _refuse_running(private)
    python = environment()
    with tempfile.TemporaryDirectory() as folder:
        extension = Path(folder) / READY.name
        write(extension, python)
        version = add(office, extension, private)
    whom = "all users of this machine" if libreoffice.is_root() and private is None else "you"
    return (
        f"Cellfuncs {version} is in LibreOffice ({office.folder}) for {whom}; a cell answered.\n"
        f"It calculates with {python}: run this again when that moves, and after an update of Cellfuncs."
    )


def add(office: Office, extension: Path, private: Path | None = None) -> str:
    """Put an extension in as it is; the version that answered in a cell. Raises Unusable."""
    _unopkg(office, private, "add", "--force", "--suppress-license", extension)
    line = calculated(office, private)
    version, _, number = line.partition(",")
    try:
        right = abs(float(number) / EXPECTED - 1) < 1e-6
    except ValueError:
        right = False
    if not right:
        raise Unusable(f"the extension is in, but a cell did not answer as it must: {line[:250]}")
    return version


def remove(office: Office, private: Path | None = None) -> str:
    """Take the extension out of the office, and the user's note with it; what to tell. Raises Unusable."""
    _refuse_running(private)
    there = IDENTIFIER in _unopkg(office, private, "list")
    if there:
        _unopkg(office, private, "remove", IDENTIFIER)
    if private is None:
        with contextlib.suppress(OSError):
            os.unlink(interpreter.user_file())
    if not there:
        return f"Cellfuncs is not in LibreOffice ({office.folder}); there is nothing to remove."
    return f"Cellfuncs is removed from LibreOffice ({office.folder})."


def use(python: Path) -> str:
    """Note for this user that `python` calculates wherever the extension names none; what to tell. Raises Unusable."""
    path = Path(interpreter.user_file())
    if not (path.is_absolute() and python.is_absolute()):
        raise Unusable(f"{path} and {python} must be whole paths")
    try:
        path.parent.mkdir(mode=0o700, exist_ok=True)
        path.unlink(missing_ok=True)
        descriptor = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, 0o600)
        with open(descriptor, "w", encoding="utf-8") as file:
            json.dump({"python": str(python), "folder": str(PARENT)}, file, indent=1)
    except OSError as error:
        raise Unusable(f"{path} cannot be written ({error.strerror})") from error
    return (
        f"wrote {path}: an extension put into LibreOffice by hand calculates with {python} now.\n"
        f"The extension is {READY} (in LibreOffice: Tools, Extensions, Add)."
    )


def _refuse_running(private: Path | None) -> None:
    lock = libreoffice.user_profile() / ".lock"
    if private is None and lock.exists():
        raise Unusable(
            f"LibreOffice is running: close all its windows and try again (if it is not running, delete {lock})"
        )


def _unopkg(office: Office, private: Path | None, command: str, *words: object) -> str:
    shared = ["--shared"] if libreoffice.is_root() else []
    settings = libreoffice.settings_of(private)
    done = libreoffice.run([office.program("unopkg"), command, *shared, *words, *settings])
    if done.returncode:
        if "lock file" in done.stdout.lower():
            raise Unusable("LibreOffice or its extension manager is running: close it and try again")
        lines = [line.strip() for line in done.stdout.splitlines() if line.strip()]
        said = [line for line in lines if line.startswith("ERROR")] or lines[-1:] or ["it said nothing"]
        raise Unusable(f"unopkg {command} failed: {said[0]}")
    return done.stdout


def calculated(office: Office, private: Path | None = None) -> str:
    """Version and a number, calculated in the office as with any user's file. Raises Unusable."""
    with tempfile.TemporaryDirectory() as folder:
        book, answer = Path(folder) / "tried.fods", Path(folder) / "tried.csv"
        book.write_text(TRIED, "utf-8")
        words = ["--headless", "--convert-to", "csv", "--outdir", folder, book]
        for _ in range(ATTEMPTS):
            done = libreoffice.run([office.program("soffice"), *libreoffice.settings_of(private), *words])
            if answer.exists():
                return answer.read_text("utf-8").strip()
            time.sleep(PAUSE)
    raise Unusable(f"the extension is in, but LibreOffice did not calculate: {done.stdout.strip()[-200:]}")
