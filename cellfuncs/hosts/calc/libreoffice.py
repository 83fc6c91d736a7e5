"""Finds LibreOffice on this machine, and runs its parts. Standard library only.

Tried on Linux (Debian's packages); the places of macOS and Windows are those of LibreOffice's own installers.
"""

import os
import shutil
import subprocess
import sys
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

WINDOWS, MAC = os.name == "nt", sys.platform == "darwin"
LIBREOFFICE = "LibreOffice is not installed here, or not found: install it from libreoffice.org or the package manager"
NO_PYTHON = (
    "this LibreOffice has no Python support: install it"
    " (Debian, Ubuntu: apt install python3-uno; Fedora: dnf install libreoffice-pyuno)"
)
SECONDS = 180
SYSTEM_FOLDERS = (Path("/usr/bin"), Path("/bin"))


class Unusable(Exception):
    """LibreOffice cannot be used; the text is the one line to show."""


@dataclass(frozen=True)
class Office:
    """One LibreOffice: the folder of its programs."""

    folder: Path

    def program(self, name: str) -> Path:
        """A program of the office, `soffice` or `unopkg`."""
        # On Windows the .com kinds belong to a console: they wait, and what they say can be read.
        return self.folder / (f"{name}.com" if WINDOWS else name)

    def has_python(self) -> bool:
        """Whether components in Python can run in it."""
        places = (self.folder, self.folder.parent / "Resources", self.folder.parent / "Frameworks")
        return any((place / "pythonloader.py").exists() for place in places)

    def pythons_with_uno(self) -> Iterator[Path]:
        """Interpreters that may be able to talk to the office, its own first."""
        own = ("python.exe",) if WINDOWS else ("python", "../Resources/python")
        system = ("/usr/bin/python3",)
        for path in [self.folder / name for name in own] + [Path(name) for name in system]:
            if path.exists():
                yield path

    def sdk(self) -> Path | None:
        """unoidl-write of the SDK, or None."""
        name = "unoidl-write.exe" if WINDOWS else "unoidl-write"
        for place in (self.folder.parent / "sdk" / "bin", self.folder.parent.parent / "sdk" / "bin"):
            if (place / name).exists():
                return place / name
        found = shutil.which("unoidl-write")
        return Path(found) if found else None


def find() -> Office:
    """The LibreOffice to use: CELLFUNCS_OFFICE (its program folder), then the usual places. Raises Unusable."""
    named = os.environ.get("CELLFUNCS_OFFICE", "").strip()
    for folder in [Path(named)] if named else _places():
        office = Office(folder)
        if office.program("unopkg").exists() and office.program("soffice").exists():
            return office
    if named:
        raise Unusable(f"CELLFUNCS_OFFICE names {named}, but there is no soffice and unopkg in it")
    raise Unusable(LIBREOFFICE)


def _places() -> Iterator[Path]:
    for name in ("soffice", "libreoffice"):
        found = shutil.which(name)
        if found:
            yield Path(found).resolve().parent
    if WINDOWS:
        yield from _registered()
        for variable in ("ProgramW6432", "ProgramFiles", "ProgramFiles(x86)"):
            if os.environ.get(variable):
                yield Path(os.environ[variable]) / "LibreOffice" / "program"
    elif MAC:
        for above in (Path("/Applications"), Path.home() / "Applications"):
            yield above / "LibreOffice.app" / "Contents" / "MacOS"
    else:
        for folder in ("/usr/lib/libreoffice", "/usr/lib64/libreoffice", "/usr/local/lib/libreoffice"):
            yield Path(folder) / "program"
        yield from sorted(Path("/opt").glob("libreoffice*/program"), reverse=True)


def _registered() -> Iterator[Path]:
    import winreg

    for root in (winreg.HKEY_CURRENT_USER, winreg.HKEY_LOCAL_MACHINE):
        try:
            yield Path(winreg.QueryValue(root, r"SOFTWARE\LibreOffice\UNO\InstallPath"))
        except OSError:
            continue


def user_profile() -> Path:
    """Where LibreOffice keeps the settings of this user."""
    if WINDOWS:
        return Path(os.environ.get("APPDATA", "~")).expanduser() / "LibreOffice" / "4"
    if MAC:
        return Path.home() / "Library" / "Application Support" / "LibreOffice" / "4"
    return Path(os.environ.get("XDG_CONFIG_HOME") or Path.home() / ".config") / "libreoffice" / "4"


def is_root() -> bool:
    return hasattr(os, "geteuid") and os.geteuid() == 0


def settings_of(private: Path | None) -> list[str]:
    """The words that make the office use a private folder instead of the user's profile."""
    if private is None:
        return []
    return [
        f"-env:UserInstallation={(private / 'profile').as_uri()}",
        # unopkg refuses root without --shared; this keeps the shared extensions in the private folder as well
        f"-env:UNO_SHARED_PACKAGES_CACHE={(private / 'shared').as_uri()}",
    ]


def run(command: list[object], seconds: float = SECONDS) -> subprocess.CompletedProcess:
    """Run a program of the office; what it says comes back in one text."""
    try:
        return subprocess.run(
            [str(word) for word in command],
            stdin=subprocess.DEVNULL,
            stdout=subprocess.PIPE,
            stderr=subprocess.STDOUT,
            encoding="utf-8",
            errors="replace",
            timeout=seconds,
            env=variables(),
        )
    except OSError as error:
        raise Unusable(f"{command[0]} does not start ({error.strerror})") from error
    except subprocess.TimeoutExpired as error:
        raise Unusable(f"{Path(str(command[0])).name} did not end within {seconds:.0f} s") from error


def variables() -> dict[str, str]:
    """The environment variables without those that would mix another Python into the office's own."""
    unwanted = ("PYTHONHOME", "PYTHONPATH", "PYTHONNOUSERSITE", "PYTHONUTF8", "VIRTUAL_ENV")
    kept = {name: value for name, value in os.environ.items() if name not in unwanted}
    # An office that uses the system's Python takes the first python3 of PATH for it, and in any other Python
    # (an activated environment, a version manager's) there is no `uno`.
    folders = [folder for folder in kept.get("PATH", "").split(os.pathsep) if not _with_another_python(Path(folder))]
    return kept | {"PATH": os.pathsep.join(folders)}


def _with_another_python(folder: Path) -> bool:
    """Whether the programs in a folder include a Python that is not the system's."""
    if any((place / mark).exists() for place in (folder, folder.parent) for mark in ("pyvenv.cfg", "conda-meta")):
        return True
    return folder not in SYSTEM_FOLDERS and (folder / "python3").exists()
