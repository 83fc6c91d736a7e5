"""Makes the add-in file in the user's own Excel, puts it where Excel loads it at its start and proves it in a cell.

Runs inside the private environment, as `python -m excel.build` in the folder install/:
`fingerprint` prints what an add-in made now would be made from; `make TEMPLATE` makes one from xlwings' template
for custom add-ins. One line of JSON a step goes to standard output.
"""

import contextlib
import hashlib
import json
import os
import shutil
import sys
from collections.abc import Iterator
from importlib import metadata
from pathlib import Path

from . import settings
from .office import TRUST_WORDS

SHEET = "Cellfuncs"
ANSWER_OF_REYNOLDS = 2 * 0.05 * 998 / 0.001
NAME_ERROR = -2146826259  # CVErr(xlErrName), #NAME?

# Lines of xlwings' VBA module as its template has them, what stands there in our add-in, and why.
CHANGES = (
    (
        'Public Const PROJECT_NAME As String = "myaddin"',
        f'Public Const PROJECT_NAME As String = "{settings.PROJECT}"',
        "settings of our own, apart from those of a user who has other add-ins made with xlwings",
    ),
    (
        'If source = "" Or source = "sheet" Then',
        'If source = "sheet" Then',
        "a sheet of somebody's workbook must not say which program is started",
    ),
    (
        'If source = "" Or source = "directory" Then',
        'If source = "directory" Then',
        "nor may a file beside that workbook",
    ),
    (
        'PYTHONPATH = AddExcelDir & ";" & ActiveWorkbook.FullName & ";" & ThisWorkbook.FullName & ";"',
        'PYTHONPATH = AddExcelDir & ";;;"',
        "the name of a workbook, often a web address, has no business in the command that starts Python",
    ),
    (
        'tail = " -B -c ',
        'tail = " -I -B -c ',
        "isolated: the current folder and the user's PYTHONPATH or own packages cannot shadow the environment",
    ),
)


class Refused(Exception):
    """The add-in cannot be made; the text says why and what to do."""


def changed(text: str) -> str:
    """xlwings' VBA module with our changes; Refused when it is not the module they were written for."""
    for old, new, _ in CHANGES:
        if text.count(old) != 1:
            raise Refused(
                f"xlwings {metadata.version('xlwings')} has another VBA module than the one known here (it lacks "
                f"{old!r}): install the version in install/lock.txt"
            )
        text = text.replace(old, new)
    return text


def fingerprint() -> str:
    """What the add-in is made from: as long as it stays the same, an add-in made earlier is up to date."""
    from cellfuncs.cells import catalogue

    functions = [
        (one.name, one.family, one.summary, [(arg.name, arg.help, arg.optional) for arg in one.arguments])
        for one in catalogue.functions().values()
    ]
    parts = (metadata.version("xlwings"), CHANGES, functions, settings.MODULE)
    return hashlib.sha256(json.dumps(parts).encode()).hexdigest()


def components_of(book):
    """The VBA parts of a workbook; Refused where Excel does not let programs see them."""
    from pywintypes import com_error

    try:
        components = book.VBProject.VBComponents
        components.Count  # noqa: B018  (the question that Excel answers or refuses)
    except com_error as error:
        raise Refused(f"Excel does not let its VBA projects be seen. {TRUST_WORDS}") from error
    return components


def make(excel, template: Path) -> None:
    """Turn a copy of xlwings' template into our add-in and save it."""
    import xlwings

    book = excel.Workbooks.Open(str(template))
    components = components_of(book)
    module = components("xlwings").CodeModule
    number = module.CountOfLines
    text = changed(module.Lines(1, number))
    module.DeleteLines(1, number)
    module.AddFromString(text)
    components.Remove(components("Module1"))  # the template's sample macro
    sheet = book.Worksheets(1)
    sheet.Cells.ClearContents()
    sheet.Name = SHEET
    sheet.Range("A1").Value = f"Cellfuncs {metadata.version('cellfuncs')}, made by install/start.py excel"
    book.Title = "Cellfuncs"
    # Help texts can only be set while the workbook is not hidden, as an add-in is.
    book.IsAddin = False
    xlwings.import_udfs(settings.MODULE, book)
    book.IsAddin = True
    book.Save()
    book.Close(False)


def prove(excel) -> None:
    """Let a cell of a fresh workbook call two functions; Refused with what the cell shows instead."""
    from cellfuncs.cells import catalogue

    cell = excel.Workbooks.Add().Worksheets(1).Range("A1")
    for formula, wanted in (
        ("=CF_VERSION()", catalogue.functions()["CF_VERSION"].call()),
        ("=CF_REYNOLDS(2,0.05,998,0.001)", ANSWER_OF_REYNOLDS),
    ):
        cell.Formula = formula
        got = cell.Value
        if got == NAME_ERROR:
            raise Refused("Excel did not run the add-in: macros are switched off there (by a policy?)")
        if got != wanted and not (isinstance(got, float) and abs(got - wanted) <= 1e-12 * abs(wanted)):
            raise Refused(f"a cell with {formula} shows {got!r} instead of {wanted!r}")


def place(template: Path, startup: Path) -> Path:
    """Put the finished file into Excel's start folder in one step."""
    target = startup / settings.ADD_IN
    part = startup.parent / (settings.ADD_IN + ".part")  # Excel would open it inside
    try:
        startup.mkdir(parents=True, exist_ok=True)
        shutil.copyfile(template, part)
        os.replace(part, target)
    except PermissionError as error:
        raise Refused(f"{target} cannot be written: close Excel (also one without a window) and try again") from error
    finally:
        part.unlink(missing_ok=True)
    return target


@contextlib.contextmanager
def on_trial(excel, template: Path, startup: Path) -> Iterator[Path]:
    """The add-in where Excel loads it, and open; if it does not prove itself, what was there before comes back."""
    from pywintypes import com_error

    known = startup / settings.ADD_IN
    before = known.read_bytes() if known.exists() else None
    target = place(template, startup)
    add_in, proved = None, False
    try:
        add_in = excel.Workbooks.Open(str(target))
        yield target
        proved = True
    finally:
        if add_in is not None:
            with contextlib.suppress(com_error):
                add_in.Close(False)  # Excel does not count an add-in among its workbooks, but keeps its file open
        if not proved and before is None:
            target.unlink()
        elif not proved:
            target.write_bytes(before)


def close_all(excel) -> None:
    """Close every workbook of our Excel without saving."""
    for number in range(excel.Workbooks.Count, 0, -1):
        excel.Workbooks(number).Close(False)


@contextlib.contextmanager
def started() -> Iterator:
    """An Excel of our own, without a window, beside any other; its process number is told first."""
    import win32process
    from pywintypes import com_error
    from win32com.client import DispatchEx

    try:
        excel = DispatchEx("Excel.Application")
    except com_error as error:
        raise Refused(
            f"Excel did not start ({told(error)}): start it once by hand, answer its first questions, close it"
        ) from error
    try:
        tell(pid=win32process.GetWindowThreadProcessId(excel.Hwnd)[1])
        excel.Visible = False
        excel.DisplayAlerts = False
        excel.EnableEvents = False
        yield excel
    finally:
        with contextlib.suppress(com_error, AttributeError):
            close_all(excel)
        with contextlib.suppress(com_error, AttributeError):
            excel.Quit()


def told(error: Exception) -> str:
    """What COM says about an error, in one line."""
    details = error.args[2] if len(error.args) > 2 else None
    said = details[2] if isinstance(details, tuple) and len(details) > 2 else None
    return " ".join(str(said or (error.args[1] if len(error.args) > 1 else error)).split())


def tell(**what: object) -> None:
    print(json.dumps(what), flush=True)


def run(template: Path) -> None:
    """Make, place, prove; tell where the add-in is."""
    from pywintypes import com_error

    try:
        with started() as excel:
            version = str(excel.Version)
            make(excel, template)
            with on_trial(excel, template, Path(excel.StartupPath)) as target:
                prove(excel)
    except com_error as error:
        raise Refused(f"Excel refused a step: {told(error)}") from error
    except OSError as error:
        raise Refused(f"{error.filename}: {error.strerror}") from error
    tell(
        add_in=str(target),
        fingerprint=fingerprint(),
        excel=version,
        xlwings=metadata.version("xlwings"),
        cellfuncs=metadata.version("cellfuncs"),
    )


def main(words: list[str]) -> int:
    """Do one step; 1 and a line with "trouble" when it cannot be done."""
    try:
        if words == ["fingerprint"]:
            tell(fingerprint=fingerprint())
        elif len(words) == 2 and words[0] == "make":
            run(Path(words[1]))
        else:
            raise Refused("say fingerprint, or make and the copy of the template")
    except Refused as refused:
        tell(trouble=str(refused))
        return 1
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
