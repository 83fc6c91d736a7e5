"""One file's check: from its bytes to what is told of it, and to the bytes of the outputs."""

from __future__ import annotations

import hashlib
import io
import time
from collections import Counter
from dataclasses import dataclass, field
from pathlib import Path
from typing import TYPE_CHECKING

from cellfuncs import __version__
from cellfuncs.errors import BookRefused, CellfuncsError

if TYPE_CHECKING:
    from cellfuncs.sheets.many.found import Found
    from cellfuncs.sheets.reporting.report import Report

CHECKED, REFUSED, FAILED = "checked", "refused", "failed"
KINDS = ("json", "html", "annotate")
WORST = 3  # findings of a file that a summary names


@dataclass(frozen=True)
class Screen:
    """How a report is to be shown: characters in a line (None: as without a terminal), and whether bold shows."""

    width: int | None
    terminal: bool


@dataclass(frozen=True)
class Task:
    """A file's bytes, and what is wanted of it: kinds of outputs, and the report as text for a screen."""

    path: str
    place: str
    data: bytes = field(repr=False)
    wanted: tuple[str, ...] = ()
    screen: Screen | None = None
    version: str = __version__

    @property
    def digest(self) -> str:
        return digest_of(self.data)


@dataclass(frozen=True)
class Worst:
    """A finding as a summary names it."""

    cell: str
    severity: str
    quantity: str
    code: str
    message: str


@dataclass(frozen=True)
class Outcome:
    """What is told of a file.

    ``state`` is ``checked``; ``refused`` for a file that cannot be read; ``failed`` where the check itself broke off,
    which is tried anew the next time. ``why`` is the reason of the last two. ``digest`` is that of the checked bytes.
    """

    path: str
    place: str
    state: str
    why: str = ""
    digest: str = ""
    seconds: float = 0.0
    errors: int = 0
    warnings: int = 0
    notes: int = 0
    numbers: int = 0
    agreed: int = 0
    remarks: int = 0
    codes: dict[str, int] = field(default_factory=dict)
    worst: tuple[Worst, ...] = ()

    @property
    def rank(self) -> tuple:
        """The worst first: errors, then what could not be checked, then warnings and notes."""
        return (-self.errors, self.state == CHECKED, -self.warnings, -self.notes, self.place)


@dataclass(frozen=True)
class Answer:
    """An outcome with the bytes of the outputs, by kind, and the text for the screen."""

    outcome: Outcome
    products: dict[str, bytes] = field(default_factory=dict, repr=False)
    text: str = field(default="", repr=False)


def digest_of(data: bytes) -> str:
    """What a file is known again by."""
    return hashlib.sha256(data).hexdigest()


def read(path: Path) -> bytes:
    """A file's bytes, of one too large for the gate no more than shows it; raises BookRefused."""
    from cellfuncs.books.package import MAX_FILE

    try:
        if not path.is_file():
            word = "is a folder, not a workbook" if path.is_dir() else "does not exist"
            raise BookRefused(f"{path.name or path} {word}.")
        with path.open("rb") as file:
            return file.read(MAX_FILE + 1)
    except OSError as error:
        raise BookRefused(f"{path.name} cannot be read: {error.strerror}.") from error


def task_of(file: Found, wanted: tuple[str, ...] = (), screen: Screen | None = None) -> Task | Answer:
    """What a worker gets; an answer at once where there is nothing to check."""
    try:
        if file.why:
            raise BookRefused(file.why)
        return Task(str(file.path), file.place, read(file.path), wanted, screen)
    except BookRefused as error:
        return Answer(Outcome(str(file.path), file.place, REFUSED, str(error)))


def failed(task: Task, why: str) -> Answer:
    """The answer where the check itself broke off."""
    return Answer(Outcome(task.path, task.place, FAILED, why, task.digest))


def checked_one(task: Task) -> Answer:
    """Check a workbook. Raises MemoryError alone; all else becomes an answer."""
    start = time.perf_counter()
    try:
        return _checked(task, start)
    except MemoryError:
        raise
    except CellfuncsError as error:
        seconds = time.perf_counter() - start
        return Answer(Outcome(task.path, task.place, REFUSED, str(error), task.digest, seconds))
    except Exception as error:  # the next file is none the worse for it
        return failed(task, f"an error of the program itself, {type(error).__name__}: {error}")


def _checked(task: Task, start: float) -> Answer:
    from cellfuncs.books import inspect
    from cellfuncs.sheets.check import checked
    from cellfuncs.sheets.inherited.page import printable
    from cellfuncs.sheets.inherited.reading import read_book

    book = inspect(task.data)
    report = checked(read_book(book))
    report.workbook = printable(Path(task.path).name)
    products: dict[str, bytes] = {}
    if "json" in task.wanted:
        from cellfuncs.sheets.reporting.written import as_json

        products["json"] = as_json(report).encode("utf-8", "replace")
    if "html" in task.wanted:
        from cellfuncs.sheets.reporting.page import as_html

        products["html"] = as_html(report).encode("utf-8", "replace")
    if "annotate" in task.wanted:
        from cellfuncs.sheets.reporting.annotated import annotated

        products["annotate"] = annotated(book, report)
    text = _text(report, task.screen) if task.screen else ""
    return Answer(_outcome(task, report, time.perf_counter() - start), products, text)


def _outcome(task: Task, report: Report, seconds: float) -> Outcome:
    return Outcome(
        path=task.path,
        place=task.place,
        state=CHECKED,
        digest=task.digest,
        seconds=seconds,
        errors=report.count("error"),
        warnings=report.count("warning"),
        notes=report.count("note"),
        numbers=len(report.labels),
        agreed=len(report.agreed),
        remarks=len(report.not_understood),
        codes=dict(Counter(finding.code for finding in report.findings if finding.severity != "note")),
        worst=tuple(Worst(f.cell, f.severity, f.quantity, f.code, f.message) for f in report.findings[:WORST]),
    )


class _Terminal(io.StringIO):
    """Text for a terminal that this process does not have."""

    def isatty(self) -> bool:
        return True


def _text(report: Report, screen: Screen) -> str:
    from cellfuncs.sheets.reporting import terminal

    out = _Terminal() if screen.terminal else io.StringIO()
    terminal.show([report], out, screen.width)
    return out.getvalue()
