"""All outcomes on the terminal, and how far a run is."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from typing import Any, TextIO

from cellfuncs.sheets.inherited.page import printable
from cellfuncs.sheets.many.one import CHECKED, Outcome
from cellfuncs.sheets.many.summary import headline, ranked

MOST_ROWS = 25
MOST_LINES = 20  # of files that were not checked
_WIDTH = 118  # where the output is no terminal


def show(outcomes: Sequence[Outcome], out: TextIO) -> None:
    """A table of the worst workbooks, and the line of all."""
    from rich.console import Console
    from rich.table import Table
    from rich.text import Text

    console = Console(file=out, width=None if out.isatty() else _WIDTH, highlight=False, markup=False)
    listed = [o for o in ranked(outcomes) if o.state == CHECKED and (o.errors or o.warnings)]
    if listed:
        table = Table(box=None, pad_edge=False, padding=(0, 2, 0, 0))
        for head, share in (("workbook", 4), ("errors", None), ("warnings", None), ("first finding", 6)):
            side = "left" if share else "right"
            table.add_column(head, ratio=share, overflow="fold", justify=side, header_style="underline")
        for outcome in listed[:MOST_ROWS]:
            cells = (outcome.place, str(outcome.errors), str(outcome.warnings), _first(outcome))
            table.add_row(*(Text(printable(text), style="bold" if outcome.errors else "") for text in cells))
        console.print(table)
    if len(listed) > MOST_ROWS:
        console.print(Text(f"and {len(listed) - MOST_ROWS} more workbooks with findings (--summary lists all)"))
    console.print(Text(headline(outcomes), style="bold"))


def _first(outcome: Outcome) -> str:
    if not outcome.worst:
        return ""
    worst = outcome.worst[0]
    return f"{worst.cell} {worst.code}: {worst.quantity}"


def refusals(outcomes: Sequence[Outcome], out: TextIO) -> None:
    """A line for each file that was not checked, the first of them."""
    lines = [f"{o.place}: {o.why}" for o in ranked(outcomes) if o.state != CHECKED]
    for line in lines[:MOST_LINES]:
        print(f"cellfuncs: {printable(' '.join(line.split()))}", file=out)
    if len(lines) > MOST_LINES:
        print(f"cellfuncs: and {len(lines) - MOST_LINES} more that were not checked (--summary lists all)", file=out)


class Progress:
    """A bar on the terminal while a run goes on; silent elsewhere."""

    def __init__(self, total: int) -> None:
        self._bar: Any = None
        if not sys.stderr.isatty():
            return
        from rich import progress
        from rich.console import Console

        self._bar = progress.Progress(
            progress.TextColumn("{task.description}"),
            progress.BarColumn(complete_style="default", finished_style="default"),
            progress.MofNCompleteColumn(),
            progress.TimeElapsedColumn(),
            progress.TextColumn("left"),
            progress.TimeRemainingColumn(),
            console=Console(stderr=True),
            transient=True,
            redirect_stdout=False,  # our answers belong to the output, which may be a file
            redirect_stderr=False,
        )
        self._task = self._bar.add_task("checking", total=total)

    def __enter__(self) -> Progress:
        if self._bar is not None:
            self._bar.start()
        return self

    def __exit__(self, *_: object) -> None:
        if self._bar is not None:
            self._bar.stop()

    def step(self) -> None:
        """One more file is done."""
        if self._bar is not None:
            self._bar.advance(self._task)
