"""All outcomes as one page and one table, the worst first. Texts of workbooks stay texts in both."""

from __future__ import annotations

import csv
import io
import os
import re
from collections import Counter
from collections.abc import Mapping, Sequence
from functools import lru_cache
from pathlib import Path
from typing import Any
from urllib.parse import quote

from cellfuncs import __version__
from cellfuncs.sheets.inherited.page import printable
from cellfuncs.sheets.inks import CAUTION
from cellfuncs.sheets.many.one import CHECKED, Outcome

NAMES = ("summary.html", "summary.csv")
TEMPLATE = Path(__file__).parents[2] / "data" / "check_summary.html"
_HEAD = (
    "workbook", "state", "errors", "warnings", "notes", "labelled numbers", "that agree", "remarks",
    "cell", "quantity", "cause", "message", "seconds",
)  # fmt: skip
# A text that a spreadsheet program would run: at the start of a cell, or where a program that splits at another
# sign than the comma would start one.
_FORMULA = re.compile(r"(^|[;,|\t\r\n\"'])(\s*)([=+\-@＝＋－＠])")


def headline(outcomes: Sequence[Outcome]) -> str:
    """All outcomes in a line."""
    checked = [outcome for outcome in outcomes if outcome.state == CHECKED]
    counts = (
        (sum(o.errors > 0 for o in checked), "with errors"),
        (sum(o.errors == 0 < o.warnings for o in checked), "with warnings"),
        (sum(o.errors == o.warnings == 0 for o in checked), "with neither"),
        (len(outcomes) - len(checked), "not checked"),
    )
    number = len(outcomes)
    said = ", ".join(f"{count} {what}" for count, what in counts if count)
    return f"{number} workbook{'s' if number != 1 else ''}: {said}" if number else "no workbooks"


def ranked(outcomes: Sequence[Outcome]) -> list[Outcome]:
    """The worst first."""
    return sorted(outcomes, key=lambda outcome: outcome.rank)


def causes(outcomes: Sequence[Outcome]) -> list[tuple[str, int, int]]:
    """Causes of errors and warnings: code, how many findings, in how many workbooks; the most frequent first."""
    findings: Counter[str] = Counter()
    books: Counter[str] = Counter()
    for outcome in outcomes:
        findings.update(outcome.codes)
        books.update(outcome.codes.keys())
    return [(code, number, books[code]) for code, number in sorted(findings.items(), key=lambda p: (-p[1], p[0]))]


def as_csv(outcomes: Sequence[Outcome]) -> bytes:
    """One row a workbook with its worst finding; UTF-8 with the mark that spreadsheet programs look for."""
    out = io.StringIO()
    writer = csv.writer(out, quoting=csv.QUOTE_NONNUMERIC, lineterminator="\r\n")
    writer.writerow(_HEAD)
    for o in ranked(outcomes):
        counts = (o.errors, o.warnings, o.notes, o.numbers, o.agreed, o.remarks) if o.state == CHECKED else ("",) * 6
        worst = o.worst[0] if o.worst else None
        named = (worst.cell, worst.quantity, worst.code, worst.message) if worst else ("", "", "", o.why)
        row = (o.place, o.state, *counts, *named, round(o.seconds, 3))
        writer.writerow([harmless(value) if isinstance(value, str) else value for value in row])
    return out.getvalue().encode("utf-8-sig", "replace")


def harmless(text: str) -> str:
    """A text that no spreadsheet program takes for a formula, whichever sign it splits at."""
    return _FORMULA.sub(r"\1\2'\3", printable(text))


def as_html(outcomes: Sequence[Outcome], links: Mapping[str, str] | None = None) -> bytes:
    """A page that needs nothing else and prints; ``links`` from a workbook's place to its own page."""
    return (
        _template()
        .render(
            headline=headline(outcomes),
            outcomes=ranked(outcomes),
            causes=causes(outcomes),
            links=links or {},
            caution=CAUTION,
            version=__version__,
            checked=CHECKED,
        )
        .encode("utf-8", "replace")
    )


def link(page: Path, folder: Path) -> str:
    """A page's address as seen from the summary in a folder; "" where there is none that keeps when both move."""
    try:
        relative = os.path.relpath(page, folder)
    except ValueError:  # on another drive
        return ""
    return "./" + quote(Path(relative).as_posix(), errors="surrogateescape")


@lru_cache(maxsize=1)
def _template() -> Any:
    from jinja2 import Environment, StrictUndefined

    environment = Environment(autoescape=True, undefined=StrictUndefined, trim_blocks=True, lstrip_blocks=True)
    environment.filters["printable"] = printable
    return environment.from_string(TEMPLATE.read_text(encoding="utf-8"))


def write(outcomes: Sequence[Outcome], folder: Path, links: Mapping[str, str] | None = None) -> tuple[Path, ...]:
    """Write both into a folder, each whole, none before both are made; their paths."""
    from cellfuncs.books.package import write_whole

    contents = (as_html(outcomes, links), as_csv(outcomes))
    folder.mkdir(parents=True, exist_ok=True)
    for name, content in zip(NAMES, contents, strict=True):
        write_whole(folder / name, content)
    return tuple(folder / name for name in NAMES)
