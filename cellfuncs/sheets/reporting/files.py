"""Checking files: which workbooks are meant, and the outputs of each, written whole or not at all."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from cellfuncs.books import inspect
from cellfuncs.books.package import write_whole
from cellfuncs.errors import BookRefused
from cellfuncs.sheets.check import checked
from cellfuncs.sheets.inherited.reading import read_book
from cellfuncs.sheets.reporting.report import Report

ENDINGS = (".xlsx", ".xlsm")
_SAVED = "~$"  # files that a spreadsheet program keeps while a workbook is open


@dataclass(frozen=True)
class Outputs:
    """Where outputs go: a file, or with several workbooks a folder; None for those that are not wanted."""

    json: Path | None = None
    html: Path | None = None
    annotate: Path | None = None

    def refuse_input(self, books: Sequence[Path]) -> None:
        """Refuse outputs that would lie upon a workbook, or on one another."""
        wanted = [path for path in (self.json, self.html, self.annotate) if path is not None]
        for path in wanted:
            if any(_same(path, book) for book in books):
                raise BookRefused(f"{path} is the workbook itself, which is never changed; name another file.")
        if len({path.absolute() for path in wanted}) < len(wanted) and len(books) == 1:
            raise BookRefused("two outputs have the same name; name a file for each.")


def _same(one: Path, other: Path) -> bool:
    try:
        return one.exists() and one.samefile(other)
    except OSError:
        return False


def workbooks(named: Sequence[str | Path]) -> Iterator[Path]:
    """The workbooks that are named, and those in folders that are named, in the order of their paths."""
    for name in named:
        path = Path(name)
        if not path.is_dir():
            yield path
            continue
        for found in sorted(path.rglob("*")):
            if found.suffix.casefold() in ENDINGS and not found.name.startswith(_SAVED) and found.is_file():
                yield found


def names_of(books: Sequence[Path]) -> dict[Path, str]:
    """What outputs of several workbooks are called, no two alike; nothing for a single one."""
    if len(books) < 2:
        return {}
    names: dict[Path, str] = {}
    for book in books:
        number, name = 1, book.stem
        while name.casefold() in {taken.casefold() for taken in names.values()}:
            number += 1
            name = f"{book.stem} {number}"
        names[book] = name
    return names


def check_file(path: Path, outputs: Outputs | None = None, name: str | None = None) -> Report:
    """Check a workbook and write what is wanted of it; raises BookRefused where it cannot be read.

    Outputs go into folders under ``name`` where one is given.
    """
    outputs = outputs or Outputs()
    book = inspect(path)
    report = checked(read_book(book))
    report.workbook = path.name
    if outputs.json is not None:
        from cellfuncs.sheets.reporting.written import as_json

        write_whole(_target(outputs.json, path, ".json", name), as_json(report).encode())
    if outputs.html is not None:
        from cellfuncs.sheets.reporting.page import as_html

        write_whole(_target(outputs.html, path, ".html", name), as_html(report).encode())
    if outputs.annotate is not None:
        from cellfuncs.sheets.reporting.annotated import annotated

        write_whole(_target(outputs.annotate, path, f".checked{path.suffix}", name), annotated(book, report))
    return report


def _target(wanted: Path, book: Path, ending: str, name: str | None) -> Path:
    """The file of an output: as named, or in the folder that is named."""
    if name is None and not wanted.is_dir():
        return wanted
    if wanted.exists() and not wanted.is_dir():
        raise BookRefused(f"{wanted} is a file; with several workbooks name a folder.")
    wanted.mkdir(parents=True, exist_ok=True)
    return wanted / f"{name or book.stem}{ending}"
