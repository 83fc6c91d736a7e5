"""A run over many workbooks: what is done already is left, outputs and journal are written as each is finished."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from cellfuncs.books.package import write_whole
from cellfuncs.errors import BookRefused
from cellfuncs.sheets.many import cluster, pool, summary
from cellfuncs.sheets.many.journal import Journal
from cellfuncs.sheets.many.process import SECONDS
from cellfuncs.sheets.many.task import BROKEN, CHECKED, Done, Task

ENDINGS = {"json": ".json", "html": ".html", "annotate": ".checked"}


@dataclass(frozen=True)
class Run:
    """What is wanted of many workbooks; ``outputs`` are folders by what goes there, ``names`` the names of outputs."""

    books: Sequence[Path]
    names: Mapping[Path, str]
    outputs: Mapping[str, Path]
    summary: Path | None = None
    scheduler: str | None = None
    seconds: float = SECONDS

    def go(self, tell: Callable[[int, int, str], None]) -> list[Mapping[str, Any]]:
        """Check all; the lines of the summary, the worst first. ``tell`` hears how many of how many are done."""
        for folder in self.outputs.values():
            if folder.exists() and not folder.is_dir():
                raise BookRefused(f"{folder} is a file; with several workbooks name a folder.")
            folder.mkdir(parents=True, exist_ok=True)
        wanted = tuple(sorted(self.outputs))
        journal = Journal(self.summary, wanted) if self.summary else None
        old = [book for book in self.books if journal and journal.is_done(book)]
        known = set(old)
        rows = [journal.row(book) for book in old] if journal else []
        tasks = [Task(str(book), wanted) for book in self.books if book not in known]
        tell(len(rows), len(self.books), "")
        for done in self._examined(tasks):
            row = self._kept(done)
            # what broke off may do better next time
            if journal and row["state"] != BROKEN:
                journal.note(row)
            rows.append(row)
            tell(len(rows), len(self.books), done.path)
        rows = summary.worst_first(rows)
        if self.summary:
            summary.write(self.summary, rows, self._links())
        return rows

    def _examined(self, tasks: list[Task]) -> Iterator[Done]:
        if not tasks:
            return iter(())
        if self.scheduler:
            return cluster.examine_all(self.scheduler, tasks)
        return pool.examine_all(tasks, None, self.seconds)

    def _kept(self, done: Done) -> Mapping[str, Any]:
        """The line of a workbook, its outputs written."""
        if done.state == CHECKED:
            for what, content in done.outputs.items():
                write_whole(self._target(what, Path(done.path)), content)
        return done.row()

    def _target(self, what: str, book: Path) -> Path:
        ending = ENDINGS[what] + (book.suffix if what == "annotate" else "")
        return self.outputs[what] / f"{self.names.get(book, book.stem)}{ending}"

    def _links(self) -> dict[str, str]:
        """Pages of single workbooks, from the summary's folder."""
        if "html" not in self.outputs or self.summary is None:
            return {}
        import os

        pages = {book: self._target("html", book) for book in self.books}
        start = self.summary.absolute()
        return {
            str(book): Path(os.path.relpath(page.absolute(), start)).as_posix()
            for book, page in pages.items()
            if page.exists()
        }
