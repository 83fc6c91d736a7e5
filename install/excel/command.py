"""`start.py excel`: the steps in order, and in words whatever stands in their way."""

import json
import os
import subprocess
import sys
import tempfile
from pathlib import Path

from environment import ROOT, Trouble, clean_variables, environment_folder, interpreter, prepare
from findings import print_any_letter

from . import office, settings

ELSEWHERE = (
    "this cannot be done here: user-defined functions through xlwings need Excel on Windows (not the Store edition); "
    "for LibreOffice Calc: start.py calc"
)
NO_EXCEL = "Excel was not found on this machine; for LibreOffice Calc: start.py calc"
STORE = (
    "this Excel comes from the Microsoft Store, where user-defined functions through xlwings do not work: install "
    "the desktop edition (from the Microsoft account's page, or by your administrator)"
)
OPEN = "Excel is open: save your work, close it (without a window: end EXCEL.EXE in the Task Manager) and try again"
PYTHON_32 = (
    "this is a 32-bit Python, and Cellfuncs' packages need a 64-bit one (python.org): start this file with it; "
    "a 64-bit Python serves a 32-bit Excel too"
)
IN_STEP = (
    "note: {folder} lies in a folder that OneDrive keeps in step: set CELLFUNCS_ENV to a folder outside of it, "
    "for instance %LOCALAPPDATA%\\cellfuncs, before the first start"
)
PATIENCE = 240  # [s] Excel's first start after an update can take a minute


def on_windows() -> bool:
    return os.name == "nt"


def main(words: list[str]) -> int:
    """Install; `--repair` makes settings and add-in anew, `--remove` takes them away."""
    if not on_windows():
        raise Trouble(ELSEWHERE)
    if words not in ([], ["--repair"], ["--remove"]):
        raise Trouble("excel takes --repair or --remove or nothing")
    print_any_letter()
    return remove() if words == ["--remove"] else install(repair=words == ["--repair"])


def install(repair: bool) -> int:
    """The functions in every workbook of this user's Excel."""
    remember_environment()
    excel = office.find()
    if excel is None or excel.kind == "Store":
        raise Trouble(NO_EXCEL if excel is None else STORE)
    if not repair and settings.load_record() and is_whole(prepare()):
        print(f"The functions are in {excel} already (--repair makes them anew). Type =CF_VERSION() in a cell.")
        return 0
    in_the_way = obstacles(excel)
    if in_the_way:
        raise Trouble("\nstart.py: ".join(in_the_way))
    if office.synced(environment_folder()):
        print(IN_STEP.format(folder=environment_folder()), file=sys.stderr)
    python = prepare()
    fresh = not settings.file().exists()
    settings.save(wanted(python))
    try:
        made = make_add_in(python)
    except BaseException:
        if fresh:
            settings.remove()
        raise
    before = settings.load_record().get("add_in")
    if before and before != made["add_in"]:
        Path(before).unlink(missing_ok=True)
    settings.save_record(made)
    for place, name in office.disabled_items(excel.version, settings.ADD_IN):
        office.delete_value(place, name)
    print(f"A cell of {excel} has proved the functions. From its next start they are there in every workbook.")
    print(f"Installed for {os.environ.get('USERNAME', 'this user')}: {made['add_in']}, {settings.file()}")
    return 0


def remove() -> int:
    """Take add-in, settings and record away; the environment stays, other hosts use it."""
    if office.is_open():
        raise Trouble(OPEN)
    add_in = add_in_file()
    gone = []
    try:
        if add_in.exists():
            add_in.unlink()
            gone.append(add_in)
        gone += settings.remove()
    except PermissionError as error:
        raise Trouble(f"{error.filename} cannot be deleted: close Excel and try again") from error
    if gone:
        print("\n".join(f"removed {path}" for path in gone))
        print(f"The environment {environment_folder()} is left; delete it if no other host uses it.")
    else:
        print("Nothing of Cellfuncs was installed in Excel for this user.")
    return 0


def add_in_file() -> Path:
    """Where the add-in is, or would be."""
    return Path(settings.load_record().get("add_in") or office.startup_folder() / settings.ADD_IN)


def remember_environment() -> None:
    """An environment named by CELLFUNCS_ENV when installing is used again when it is not named."""
    known = settings.load().get("INTERPRETER_WIN", "")
    if known and not os.environ.get("CELLFUNCS_ENV", "").strip() and Path(known).is_file():
        os.environ["CELLFUNCS_ENV"] = str(Path(known).parent.parent)


def obstacles(excel: office.Excel) -> list[str]:
    """Everything that is in the way of installing, so that it can be mended at once."""
    found = []
    if sys.maxsize < 2**32:
        found.append(PYTHON_32)
    security = office.security(excel.version)
    if not security.trusts_access:
        words = "a policy of your organisation forbids it: ask your administrator" if security.by_policy else ""
        found.append(f"Excel does not let its VBA projects be seen. {words or office.TRUST_WORDS}")
    if security.add_ins_off or security.only_signed:
        found.append("the Trust Center switches off add-ins, or those that are not signed: ask your administrator")
    if office.is_open():
        found.append(OPEN)
    for path in (ROOT, interpreter(environment_folder())):
        try:
            settings.spelled(path)
        except ValueError as error:
            found.append(str(error))
    return found


def wanted(python: Path) -> dict[str, str]:
    """Our settings for an environment, in the spelling that Excel's side can take."""
    try:
        return settings.wanted(settings.spelled(python), settings.spelled(ROOT))
    except ValueError as error:
        raise Trouble(str(error)) from error


def is_whole(python: Path) -> bool:
    """Whether settings and add-in are there and made from what there is now."""
    record = settings.load_record()
    return (
        settings.load().items() >= wanted(python).items()
        and is_add_in(Path(record.get("add_in", "")))
        and record.get("fingerprint") == in_environment(python, "fingerprint")["fingerprint"]
    )


def is_add_in(path: Path) -> bool:
    """Whether a file is a workbook with VBA in it."""
    import zipfile

    try:
        with zipfile.ZipFile(path) as packed:
            return "xl/vbaProject.bin" in packed.namelist()
    except (OSError, zipfile.BadZipFile):
        return False


def make_add_in(python: Path) -> dict:
    """Let the environment make the add-in in Excel; what it says about it."""
    with tempfile.TemporaryDirectory(prefix="cellfuncs-", ignore_cleanup_errors=True) as folder:
        # The documented way to xlwings' template for custom add-ins; it puts NAME/NAME.xlam into the folder.
        name = Path(settings.ADD_IN).stem
        words = [python, "-m", "xlwings.cli", "quickstart", name, "--addin"]
        done = subprocess.run(
            [str(word) for word in words],
            env=clean_variables(),
            cwd=folder,
            capture_output=True,
            text=True,
            errors="replace",
        )
        template = Path(folder) / name / settings.ADD_IN
        if done.returncode or not template.is_file():
            last = (done.stderr or done.stdout).strip().splitlines()[-1:]
            raise Trouble(f"xlwings gave no template for the add-in: {' '.join(last)}")
        return in_environment(python, "make", str(template), temporary=Path(folder))


def in_environment(python: Path, *words: str, temporary: Path | None = None) -> dict:
    """What `python -m excel.build` answers; Trouble with its words when it refuses, fails or hangs."""
    variables = clean_variables()
    if temporary is not None:
        # VBA reads the imported text from there, so its name must have a spelling for VBA as well.
        try:
            variables |= dict.fromkeys(("TEMP", "TMP"), settings.spelled(temporary))
        except ValueError as error:
            raise Trouble(f"the folder for temporary files will not do: {error}") from error
    process = subprocess.Popen(
        [str(python), "-m", "excel.build", *words],
        env=variables,
        cwd=ROOT / "install",
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        encoding="utf-8",
        errors="replace",
    )
    try:
        output, errors = process.communicate(timeout=PATIENCE)
    except subprocess.TimeoutExpired:
        process.kill()
        output, _ = process.communicate()
        _end(_answers(output).get("pid"))
        raise Trouble(
            f"Excel did not answer within {PATIENCE} s, it may wait behind a question: start it by hand, answer what "
            "it asks, close it and try again"
        ) from None
    answers = _answers(output)
    if "trouble" in answers:
        raise Trouble(str(answers["trouble"]))
    if process.returncode:
        last = errors.strip().splitlines()[-1:] or ["it printed nothing"]
        raise Trouble(f"making the add-in failed: {last[0]}; start.py diagnose may say more")
    return {name: value for name, value in answers.items() if name != "pid"}


def _answers(output: str) -> dict:
    """The lines of JSON among what the builder and xlwings print."""
    found: dict = {}
    for line in output.splitlines():
        if line.startswith("{"):
            found |= json.loads(line)
    return found


def _end(pid: object) -> None:
    """End the Excel that the builder had started, and no other."""
    if isinstance(pid, int):
        subprocess.run(["taskkill", "/F", "/PID", str(pid)], capture_output=True)
