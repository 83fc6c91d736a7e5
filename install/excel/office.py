"""What there is of Excel on this machine, from the registry and the program file; Excel is not started."""

import csv
import os
import re
import struct
import subprocess
from dataclasses import dataclass
from pathlib import Path

EXCEL_CLASS = "{00024500-0000-0000-C000-000000000046}"
MACHINES = {0x014C: "32-bit", 0x8664: "64-bit", 0xAA64: "ARM64"}
PACKAGES = (
    r"HKCU\Software\Classes\Local Settings\Software\Microsoft\Windows\CurrentVersion\AppModel\Repository\Packages"
)
PROGRAM_PLACES = (
    r"HKCU\SOFTWARE\Microsoft\Windows\CurrentVersion\App Paths\excel.exe",
    r"HKLM\SOFTWARE\Microsoft\Windows\CurrentVersion\App Paths\excel.exe",
    rf"HKCR\CLSID\{EXCEL_CLASS}\LocalServer32",
    rf"HKCR\WOW6432Node\CLSID\{EXCEL_CLASS}\LocalServer32",
)
TRUST_WORDS = (
    'In Excel: File, Options, Trust Center, Trust Center Settings, Macro Settings: tick "Trust access to the VBA '
    'project object model", press OK twice and close Excel. Only installing needs it; untick it afterwards'
)


@dataclass(frozen=True)
class Excel:
    """An installed Excel: its program, "16.0", "64-bit", and "Click-to-Run", "installer package" or "Store"."""

    program: Path
    version: str
    bits: str
    kind: str

    def __str__(self) -> str:
        return f"Excel {self.version}, {self.bits}, {self.kind}"


@dataclass(frozen=True)
class Security:
    """What Excel's Trust Center says; a policy of the organisation goes before the user's own choice."""

    trusts_access: bool
    by_policy: bool
    add_ins_off: bool
    only_signed: bool
    startup_not_trusted: bool


def _open(place: str):
    """An open registry key, or None."""
    import winreg

    root, _, rest = place.partition("\\")
    hives = {
        "HKCU": winreg.HKEY_CURRENT_USER,
        "HKLM": winreg.HKEY_LOCAL_MACHINE,
        "HKCR": winreg.HKEY_CLASSES_ROOT,
    }
    try:
        return winreg.OpenKey(hives[root], rest)
    except OSError:
        return None


def read(place: str, name: str = "") -> object:
    """A value of the registry (its default value without a name), or None."""
    import winreg

    key = _open(place)
    if key is None:
        return None
    with key:
        try:
            return winreg.QueryValueEx(key, name)[0]
        except OSError:
            return None


def values(place: str) -> dict[str, object]:
    """All values of a registry key."""
    import winreg

    found: dict[str, object] = {}
    key = _open(place)
    if key is not None:
        with key:
            for number in range(winreg.QueryInfoKey(key)[1]):
                name, value, _ = winreg.EnumValue(key, number)
                found[name] = value
    return found


def subkeys(place: str) -> list[str]:
    """The names of the keys below a registry key."""
    import winreg

    key = _open(place)
    if key is None:
        return []
    with key:
        return [winreg.EnumKey(key, number) for number in range(winreg.QueryInfoKey(key)[0])]


def delete_value(place: str, name: str) -> None:
    """Take one value out of the user's part of the registry."""
    import winreg

    with winreg.OpenKey(winreg.HKEY_CURRENT_USER, place.removeprefix("HKCU\\"), 0, winreg.KEY_SET_VALUE) as key:
        winreg.DeleteValue(key, name)


def bits_of(program: Path) -> str:
    """ "32-bit", "64-bit" or "ARM64" from the head of a Windows program (the PE/COFF format); "" for another file."""
    try:
        with program.open("rb") as file:
            head = file.read(64)
            if len(head) < 64 or head[:2] != b"MZ":
                return ""
            file.seek(struct.unpack_from("<I", head, 60)[0])
            mark = file.read(6)
    except OSError:
        return ""
    if len(mark) < 6 or mark[:4] != b"PE\0\0":
        return ""
    return MACHINES.get(struct.unpack_from("<H", mark, 4)[0], "")


def program_in(command: object) -> Path | None:
    """The program of a registered command, which may be quoted, have switches and name environment variables."""
    if not isinstance(command, str):
        return None
    match = re.match(r'\s*"?([^"]*?\.exe)\b', os.path.expandvars(command), re.IGNORECASE)
    return Path(match.group(1)) if match else None


def find() -> Excel | None:
    """The Excel that Windows would start, or None."""
    programs = (program_in(read(place)) for place in PROGRAM_PLACES)
    program = next((one for one in programs if one is not None and one.is_file()), None)
    in_store = any(name.startswith("Microsoft.Office.Desktop") for name in subkeys(PACKAGES))
    if program is None:
        return Excel(Path(), "", "", "Store") if in_store else None
    number = re.search(r"(\d+)$", str(read(r"HKCR\Excel.Application\CurVer") or ""))
    version = f"{number.group(1)}.0" if number else "16.0"
    platform = read(r"HKLM\SOFTWARE\Microsoft\Office\ClickToRun\Configuration", "Platform")
    registered = {"x86": "32-bit", "x64": "64-bit"}.get(str(platform), "unknown bitness")
    if "windowsapps" in str(program).casefold():
        kind = "Store"
    else:
        kind = "Click-to-Run" if platform else "installer package"
    return Excel(program, version, bits_of(program) or registered, kind)


def security(version: str) -> Security:
    """The settings of the Trust Center that decide whether the add-in can be built and loaded."""
    own = rf"Software\Microsoft\Office\{version}\Excel\Security"
    policies = rf"Software\Policies\Microsoft\Office\{version}\Excel\Security"

    def setting(name: str, below: str = "") -> tuple[object, bool]:
        for place, by_policy in ((rf"HKCU\{policies}", True), (rf"HKLM\{policies}", True), (rf"HKCU\{own}", False)):
            value = read(place + below, name)
            if value is not None:
                return value, by_policy
        return None, False

    access, by_policy = setting("AccessVBOM")
    return Security(
        trusts_access=access == 1,
        by_policy=by_policy,
        add_ins_off=setting("DisableAllAddins")[0] == 1,
        only_signed=setting("RequireAddinSig")[0] == 1,
        startup_not_trusted=setting("AllLocationsDisabled", r"\Trusted Locations")[0] == 1,
    )


def disabled_items(version: str, file_name: str) -> list[tuple[str, str]]:
    """(key, value name) of Excel's notes that it will not load a file any more, after a crash it blamed on it."""
    place = rf"HKCU\Software\Microsoft\Office\{version}\Excel\Resiliency\DisabledItems"
    mark = file_name.casefold()
    return [
        (place, name)
        for name, value in values(place).items()
        if isinstance(value, bytes)
        and any(mark in value[shift:].decode("utf-16-le", "ignore").casefold() for shift in (0, 1))
    ]


def is_open() -> bool:
    """Whether this user has Excel open, also without a window; other users of the machine do not count."""
    user = f"{os.environ.get('USERDOMAIN', '')}\\{os.environ.get('USERNAME', '')}".strip("\\")
    command = ["tasklist", "/FO", "CSV", "/NH", "/FI", "IMAGENAME eq EXCEL.EXE", "/FI", f"USERNAME eq {user}"]
    try:
        done = subprocess.run(command, capture_output=True, text=True, errors="replace", timeout=60)
    except (OSError, subprocess.TimeoutExpired):
        return False  # then the locked add-in file will say it
    return any(row and row[0].casefold() == "excel.exe" for row in csv.reader(done.stdout.splitlines()))


def startup_folder() -> Path:
    """Where this user's Excel looks for files to load at its start."""
    roaming = os.environ.get("APPDATA") or Path.home() / "AppData" / "Roaming"
    return Path(roaming) / "Microsoft" / "Excel" / "XLSTART"


def synced(path: Path) -> bool:
    """Whether a path lies in a folder that OneDrive keeps in step with the network."""
    roots = {os.environ.get(name) for name in ("OneDrive", "OneDriveConsumer", "OneDriveCommercial")}
    folder = os.path.normcase(path.absolute())
    return any(root and (folder + os.sep).startswith(os.path.normcase(root).rstrip("\\/") + os.sep) for root in roots)
