"""`start.py calc`: builds the extension, puts it into LibreOffice and sees that a cell answers; or takes it out."""

import subprocess
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

from environment import Trouble, clean_variables, prepare

from . import office as offices
from .office import Office, Unusable

HERE = Path(__file__).resolve().parent
IDENTIFIER = "cellfuncs.calc"
# The first start after a change may fail while another one is still ending.
ATTEMPTS, PAUSE = 2, 2.0  # s
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


def main(words: list[str]) -> int:
    """Install; `--remove` takes it out, `--out FILE.oxt` only writes the extension."""
    try:
        if words[:1] == ["--out"] and len(words) == 2:
            out = Path(words[1]).absolute()
            build(prepare(), out)
            print(f"wrote {out}; it calculates with the environment of this installation only")
        elif words == ["--remove"]:
            print(remove(offices.find()))
        elif not words:
            print(install(offices.find(), prepare))
        else:
            raise Trouble("calc takes no argument, --remove, or --out FILE.oxt")
    except Unusable as unusable:
        raise Trouble(str(unusable)) from unusable
    return 0


def build(python: Path, out: Path) -> None:
    """Write the extension, made in Cellfuncs' environment, because the catalogue lives there."""
    done = subprocess.run(
        [str(python), str(HERE / "extension.py"), str(out)],
        capture_output=True,
        encoding="utf-8",
        errors="replace",
        env=clean_variables(),
    )
    if done.returncode:
        last = (done.stderr.strip().splitlines() or ["it said nothing"])[-1]
        raise Unusable(f"the extension cannot be built: {last}")


def install(office: Office, environment: Callable[[], Path], private: Path | None = None) -> str:
    """Add the extension and calculate one cell with it; what to tell. Raises Unusable.

    `environment` gives the Python that calculates. With `private` everything goes into that folder, and nothing
    of the user is touched.
    """
    if not office.has_python():
        raise Unusable(offices.NO_PYTHON)
    _refuse_running(private)
    python = environment()
    with tempfile.TemporaryDirectory() as folder:
        built = Path(folder) / "cellfuncs.oxt"
        build(python, built)
        _unopkg(office, private, "add", "--force", "--suppress-license", built)
        version = _tried(office, private, Path(folder))
    whom = "all users of this machine" if offices.is_root() and private is None else "you"
    return (
        f"Cellfuncs {version} is in LibreOffice ({office.folder}) for {whom}; a cell answered.\n"
        f"It calculates with {python}: run this again when that moves, and after an update of Cellfuncs."
    )


def remove(office: Office, private: Path | None = None) -> str:
    """Take the extension out of the office; what to tell. Raises Unusable."""
    _refuse_running(private)
    if IDENTIFIER not in _unopkg(office, private, "list"):
        return f"Cellfuncs is not in LibreOffice ({office.folder}); there is nothing to remove."
    _unopkg(office, private, "remove", IDENTIFIER)
    return f"Cellfuncs is removed from LibreOffice ({office.folder})."


def _refuse_running(private: Path | None) -> None:
    lock = offices.user_profile() / ".lock"
    if private is None and lock.exists():
        raise Unusable(
            f"LibreOffice is running: close all its windows and try again (if it is not running, delete {lock})"
        )


def _unopkg(office: Office, private: Path | None, command: str, *words: object) -> str:
    shared = ["--shared"] if offices.is_root() else []
    done = offices.run([office.program("unopkg"), command, *shared, *words, *offices.settings_of(private)])
    if done.returncode:
        if "lock file" in done.stdout.lower():
            raise Unusable("LibreOffice or its extension manager is running: close it and try again")
        lines = [line.strip() for line in done.stdout.splitlines() if line.strip()]
        said = [line for line in lines if line.startswith("ERROR")] or lines[-1:] or ["it said nothing"]
        raise Unusable(f"unopkg {command} failed: {said[0]}")
    return done.stdout


def _tried(office: Office, private: Path | None, folder: Path) -> str:
    """Calculate in the office as with any user's file; the version that answered. Raises Unusable."""
    book = folder / "tried.fods"
    book.write_text(TRIED, "utf-8")
    words = ["--headless", "--convert-to", "csv", "--outdir", folder, book]
    for _ in range(ATTEMPTS):
        done = offices.run([office.program("soffice"), *offices.settings_of(private), *words])
        if (folder / "tried.csv").exists():
            break
        time.sleep(PAUSE)
    try:
        line = (folder / "tried.csv").read_text("utf-8").strip()
    except FileNotFoundError:
        raise Unusable(
            f"the extension is in, but LibreOffice did not calculate: {done.stdout.strip()[-200:]}"
        ) from None
    version, _, number = line.partition(",")
    try:
        right = abs(float(number) / EXPECTED - 1) < 1e-6
    except ValueError:
        right = False
    if not right:
        raise Unusable(f"the extension is in, but a cell did not answer as it must: {line[:200]}")
    return version
