"""What is right and wrong with Cellfuncs in Excel, line by line; nothing is changed and Excel is not started."""

import sys
from collections.abc import Iterator
from pathlib import Path

from environment import ROOT, Trouble, environment_folder, interpreter
from findings import FAILS, NOT_SET_UP, NOTE, OK, Line, in_python

from . import command, office, settings

REPAIR = "close Excel, then: python install\\start.py excel --repair"
SERVER = "import pythoncom, win32api, xlwings; from xlwings import udfs, serve; import cellfuncs.hosts.excel as host"
VERSION = "; print(xlwings.__version__, host.__file__)"


def lines() -> Iterator[Line]:
    """All lines about Excel; they end early where the rest has no ground to stand on."""
    if not command.on_windows():
        yield Line("Excel", NOT_SET_UP, "not on this system: functions through xlwings need Excel on Windows")
        return
    excel = office.find()
    if excel is None:
        yield Line("Excel", NOT_SET_UP, "not found on this machine")
        return
    if excel.kind == "Store":
        yield Line("Excel", FAILS, "the Microsoft Store edition cannot load the functions", command.STORE)
        return
    yield Line("Excel", OK, f"{excel.version}, {excel.bits}, {excel.kind}, {excel.program}")
    yield from trust(excel)
    if not (settings.load_record() or settings.load() or command.add_in_file().exists()):
        yield Line("Excel add-in", NOT_SET_UP, "not installed for this user", "python install\\start.py excel")
        return
    yield from started_python(excel)
    yield from add_in(excel)


def trust(excel: office.Excel) -> Iterator[Line]:
    """The Trust Center: what installing needs is only a note, what loading needs is not."""
    security = office.security(excel.version)
    if security.trusts_access:
        yield Line("trust setting", OK, "access to the VBA project object model is trusted (only installing needs it)")
    else:
        who = "forbidden by a policy" if security.by_policy else "off"
        yield Line("trust setting", NOTE, f"access to the VBA project object model is {who}; installing needs it")
    switched = (
        (security.add_ins_off, "add-ins are switched off"),
        (security.only_signed, "only signed add-ins are loaded, and this one is made on the user's machine, unsigned"),
        (security.startup_not_trusted, "trusted locations, Excel's start folder among them, are switched off"),
    )
    wrong = [text for is_so, text in switched if is_so]
    for text in wrong:
        yield Line("Trust Center", FAILS, text, "Excel, File, Options, Trust Center; or ask your administrator")
    if not wrong:
        yield Line("Trust Center", OK, "add-ins in Excel's start folder may run")


def started_python(excel: office.Excel) -> Iterator[Line]:
    """Settings, the Python that they name, and what Excel needs of it."""
    known = settings.load()
    named = known.get("INTERPRETER_WIN", "")
    python = Path(named)
    if not named:
        yield Line("settings", FAILS, f"{settings.file()} names no interpreter", REPAIR)
        return
    if not python.is_file():
        yield Line("interpreter", FAILS, f"{named} of {settings.file()} is not there", REPAIR)
        return
    try:
        wrong = [name for name, value in command.wanted(python).items() if known.get(name) != value]
    except Trouble as trouble:
        yield Line("settings", FAILS, str(trouble))
        wrong = []
    if wrong:
        yield Line("settings", FAILS, f"{', '.join(wrong)} in {settings.file()} is not as installed", REPAIR)
    else:
        yield Line("settings", OK, f"{settings.file()}")
    expected = interpreter(environment_folder())
    if not (expected.is_file() and expected.samefile(python)):
        text = f"Excel starts {named}, while the environment looked at here is {environment_folder()}"
        yield Line("interpreter", NOTE, text, "set CELLFUNCS_ENV to the one that is meant")
    done = in_python(python, SERVER + VERSION)
    if done.text is None:
        yield Line("interpreter", FAILS, f"{named} cannot serve Excel: {done.error}", REPAIR)
        return
    version, _, place = done.text.partition(" ")
    if Path(place).parent.parent.parent != ROOT:
        yield Line("interpreter", FAILS, f"{named} calculates with another Cellfuncs, {place}", REPAIR)
    else:
        yield Line("interpreter", OK, f"{named} can serve Excel")
    yield library(excel, python, version)
    made_with = settings.load_record().get("xlwings")
    if made_with == version:
        yield Line("xlwings", OK, f"{version} in the add-in and in the environment")
    else:
        yield Line("xlwings", FAILS, f"{made_with or 'unknown'} in the add-in, {version} in the environment", REPAIR)


def library(excel: office.Excel, python: Path, version: str) -> Line:
    """The DLL that Excel loads, looked for as xlwings' VBA does: of Excel's bitness and the package's version."""
    bits = "32" if excel.bits == "32-bit" else "64"
    name = f"xlwings{bits}-{version}.dll"
    for folder in (python.parent, python.parent.parent):
        if (folder / name).is_file():
            kind = office.bits_of(folder / name)
            if kind != f"{bits}-bit":
                return Line("xlwings DLL", FAILS, f"{folder / name} is damaged or of another kind ({kind})", REPAIR)
            return Line("xlwings DLL", OK, f"{folder / name}")
    advice = "a virus scanner may have taken it: allow it, delete the environment, then install again"
    return Line("xlwings DLL", FAILS, f"{name} is neither in {python.parent} nor above it", advice)


def add_in(excel: office.Excel) -> Iterator[Line]:
    """The file that Excel loads at its start."""
    path = command.add_in_file()
    if not path.exists():
        advice = f"a virus scanner may have taken it: allow {path}; {REPAIR}"
        yield Line("add-in file", FAILS, f"{path} is not there", advice)
    elif not command.is_add_in(path):
        yield Line("add-in file", FAILS, f"{path} is no add-in any more", REPAIR)
    else:
        record = settings.load_record()
        now = command.in_environment(Path(settings.load().get("INTERPRETER_WIN") or sys.executable), "fingerprint")
        if record.get("fingerprint") == now["fingerprint"]:
            yield Line("add-in file", OK, f"{path}, up to date")
        else:
            yield Line("add-in file", FAILS, f"{path} was made from other functions or another xlwings", REPAIR)
    if office.disabled_items(excel.version, settings.ADD_IN):
        yield Line("add-in file", FAILS, "Excel does not load it any more, after a crash it blamed on it", REPAIR)
    if office.synced(ROOT) or office.synced(environment_folder()):
        text = "project or environment lie in a synced folder: files kept online only make Excel wait or fail"
        yield Line("OneDrive", NOTE, text, "keep them always on this device, or set CELLFUNCS_ENV to a folder outside")
