"""`start.py diagnose`: which part of an installation fails, and what to do. Changes nothing, needs no network."""

import json
import os
import platform
import re
import sys
import textwrap
from collections.abc import Callable, Iterator
from pathlib import Path

import environment
from environment import LOCK_FILE, ROOT, Trouble, environment_folder, interpreter
from findings import FAILS, NOT_SET_UP, NOTE, OK, Line, in_python, print_any_letter

START = "python install\\start.py" if os.name == "nt" else "python3 install/start.py"
SETUP, CALC = f"{START} setup", f"{START} calc"
HOSTS = ("excel", "calc")

# Water at 300 K: IAPWS R6-95(2018), table 7, has 99 241.8352 Pa at 996.556 kg/m3.
DENSITY = (
    "from CoolProp.CoolProp import PropsSI; import CoolProp;"
    "print(CoolProp.__version__, PropsSI('Dmass', 'T', 300, 'P', 99241.8352, 'Water'))"
)
WATER = 996.556  # [kg/m3]
PACKAGE = (
    "import cellfuncs; from cellfuncs.cells import catalogue;"
    "print(cellfuncs.__version__, len(catalogue.functions()), cellfuncs.__file__)"
)


def main(words: list[str]) -> int:
    """Print the lines; 1 when something fails, or when a host that is named (excel, calc) is not set up."""
    if [word for word in words if word not in HOSTS]:
        raise Trouble("diagnose takes excel, calc or nothing")
    print_any_letter()
    found: list[Line] = []
    for subject, check in CHECKS.items():
        for line in looked_at(subject, check):
            if line.state == NOT_SET_UP and subject.casefold() in words:
                line = Line(line.subject, FAILS, line.text, line.advice)
            print(shown(line), flush=True)
            found.append(line)
    failed = sum(line.state == FAILS for line in found)
    print(f"\n{failed} of {len(found)} fail" if failed else "\nnothing fails")
    return 1 if failed else 0


def looked_at(subject: str, check: Callable[[], Iterator[Line]]) -> Iterator[Line]:
    """The lines of a check; one that breaks is a finding too, and never ends the others."""
    try:
        yield from check()
    except Exception as error:
        text = " ".join(str(error).split()) or type(error).__name__
        yield Line(subject, FAILS, f"could not be looked at: {text}")


def shown(line: Line) -> str:
    """One finding as text, its advice indented below it."""
    head = f"{line.subject:<15} {line.state:<10}  {line.text}"
    return head + (textwrap.indent(f"\n-> {line.advice}", " " * 28) if line.advice else "")


def python_here() -> Iterator[Line]:
    bits = "64-bit" if sys.maxsize > 2**32 else "32-bit"
    text = f"{platform.python_version()}, {bits}, {platform.platform(terse=True)}, {sys.executable}"
    if bits == "32-bit":
        yield Line("Python", FAILS, text, "Cellfuncs' packages need a 64-bit Python: start this file with one")
    else:
        yield Line("Python", OK, text)


def environment_here() -> Iterator[Line]:
    folder, python = environment_folder(), interpreter(environment_folder())
    if not python.exists():
        yield Line("environment", FAILS, f"there is none in {folder}", SETUP)
        return
    version = in_python(python, "import sys; print('%d.%d.%d' % sys.version_info[:3])")
    if version.text is None:
        advice = f"the Python below it was moved, removed or belongs to another user: delete {folder}, then {SETUP}"
        yield Line("environment", FAILS, f"{python} does not run: {version.error}", advice)
        return
    stamp = environment._read_stamp(folder)
    if not stamp:
        yield Line("environment", NOTE, f"{folder}, Python {version.text}, not made by start.py")
    elif stamp.get("state") != "ready":
        yield Line("environment", FAILS, f"{folder} is half made", SETUP)
    elif stamp.get("key") != environment._key(python):
        text = f"{folder} was made for other package versions, another Python or another place of the project"
        yield Line("environment", FAILS, text, SETUP)
    else:
        yield Line("environment", OK, f"{folder}, Python {version.text}")
    yield from packages(python, stamp.get("how"))
    yield from package(python)


def locked() -> dict[str, str]:
    """Package and version of every line of the lock file that counts on this system."""
    pins = {}
    for line in LOCK_FILE.read_text("utf-8").splitlines():
        pin, _, condition = line.partition(";")
        if "==" in pin and not pin.startswith("#") and condition.strip() in ("", f'sys_platform == "{sys.platform}"'):
            name, version = pin.split("==")
            pins[plain(name)] = version.strip()
    return pins


def plain(name: str) -> str:
    return re.sub(r"[-_.]+", "-", name.strip()).lower()


def packages(python: Path, how: str | None) -> Iterator[Line]:
    answer = in_python(python, environment.INSTALLED)
    if answer.text is None:
        yield Line("packages", FAILS, f"they cannot be listed: {answer.error}", SETUP)
        return
    there = {plain(name): version for name, version in json.loads(answer.text).items()}
    pins = locked()
    other = [
        f"{name} {there.get(name, 'missing')} instead of {pin}" for name, pin in pins.items() if there.get(name) != pin
    ]
    if not other:
        yield Line("packages", OK, f"all {len(pins)} as in install/lock.txt")
    elif how == "bounds":
        yield Line("packages", NOTE, f"by the bounds of pyproject.toml: {listed(other)}")
    else:
        yield Line("packages", FAILS, listed(other), SETUP)


def listed(texts: list[str]) -> str:
    return ", ".join(texts[:4]) + (f" and {len(texts) - 4} more" if len(texts) > 4 else "")


def package(python: Path) -> Iterator[Line]:
    answer = in_python(python, PACKAGE)
    if answer.text is None:
        yield Line("Cellfuncs", FAILS, f"it cannot be imported: {answer.error}", SETUP)
    else:
        version, number, place = answer.text.split(" ", 2)
        if Path(place).resolve().parent.parent != ROOT:
            yield Line("Cellfuncs", FAILS, f"the environment has another one, {place}", SETUP)
        else:
            yield Line("Cellfuncs", OK, f"{version}, {number} functions")
    answer = in_python(python, DENSITY)
    if answer.text is None:
        advice = "Windows: install the Microsoft Visual C++ Redistributable (x64)" if os.name == "nt" else SETUP
        yield Line("CoolProp", FAILS, f"it cannot be loaded: {answer.error}", advice)
        return
    version, density = answer.text.split()
    if abs(float(density) / WATER - 1) < 1e-6:
        yield Line("CoolProp", OK, f"{version}, water at 300 K as IAPWS has it")
    else:
        yield Line("CoolProp", FAILS, f"{version} answers {density} kg/m3 for water instead of {WATER}", SETUP)


def excel_here() -> Iterator[Line]:
    from excel import diagnosis

    yield from diagnosis.lines()


def calc_here() -> Iterator[Line]:
    from calc import libreoffice as offices

    try:
        office = offices.find()
    except offices.Unusable as unusable:
        yield Line("Calc", NOT_SET_UP, str(unusable))
        return
    yield Line("Calc", OK, f"LibreOffice in {office.folder}")
    if not office.has_python():
        yield Line("Calc's Python", FAILS, "components in Python cannot run in it", offices.NO_PYTHON)
    else:
        yield Line("Calc's Python", OK, "LibreOffice can run components in Python")
    yield from calc_extension(extensions_of(offices.user_profile(), office.folder))


def extensions_of(profile: Path, program: Path) -> list[Path]:
    """helper.json of every installed copy of our extension, the user's own and those for all users.

    LibreOffice keeps the files of a removed extension for a while and marks them beside their folder.
    """
    shares = (program.parent / "share", program.parent / "Resources" / "share")
    caches = [folder / "uno_packages" / "cache" for folder in (profile / "user", *shares)]
    files = [file for cache in caches for file in sorted(cache.glob("uno_packages/*/cellfuncs.oxt/helper.json"))]
    folders = [file.parent.parent for file in files]
    marks = [folder.with_name(folder.name.removesuffix("_") + "removed") for folder in folders]
    return [file for file, mark in zip(files, marks, strict=True) if not mark.exists()]


def calc_extension(copies: list[Path]) -> Iterator[Line]:
    from calc import interpreter as of_user

    if not copies:
        yield Line("Calc extension", NOT_SET_UP, "not installed for this user", CALC)
        return
    here = in_python(
        interpreter(environment_folder()),
        "import cellfuncs; from cellfuncs.cells import catalogue;"
        "print(cellfuncs.__version__, ' '.join(catalogue.functions()))",
    )
    for copy in copies:
        made = json.loads(copy.read_text("utf-8"))
        try:
            python = Path((made["command"] or of_user.find())[0])
        except of_user.Unknown as unknown:
            yield Line("Calc extension", FAILS, f"it names no Python: {unknown}", CALC)
            continue
        if not python.exists():
            yield Line("Calc extension", FAILS, f"its interpreter {python} is not there", CALC)
        elif here.text is None:
            yield Line("Calc extension", FAILS, f"it cannot be compared: {here.error}", SETUP)
        elif [made["version"], *sorted(made["functions"])] != [here.text.split()[0], *sorted(here.text.split()[1:])]:
            text = f"version {made['version']} is not the one here, {here.text.split()[0]}, or has other functions"
            yield Line("Calc extension", FAILS, text, CALC)
        else:
            yield Line("Calc extension", OK, f"{made['version']}, calculates with {python}")


CHECKS: dict[str, Callable[[], Iterator[Line]]] = {
    "Python": python_here,
    "environment": environment_here,
    "Excel": excel_here,
    "Calc": calc_here,
}
