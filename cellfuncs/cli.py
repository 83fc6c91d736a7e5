"""The command line: `cellfuncs recalc`, `cellfuncs check`, `cellfuncs functions`, `cellfuncs starter`.

Exit codes: 0 fine, 1 a check found an error, 2 the input could not be used (one line on stderr says why),
130 interrupted.
Whatever is heavy is imported inside the command that needs it, so that `--help` answers at once.
"""

import argparse
import os
import sys
from collections.abc import Sequence

from cellfuncs import __version__
from cellfuncs.errors import CellfuncsError

FINE, FOUND, UNUSABLE, INTERRUPTED = 0, 1, 2, 130


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the command line; returns the exit code. Never raises an error into the terminal."""
    _mend_streams()
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # our matrices are small: threads cost more than they save
    options = _parser().parse_args(arguments)
    try:
        code = options.run(options)
        sys.stdout.flush()
        return code
    except CellfuncsError as error:
        return _refuse(str(error))
    except BrokenPipeError:
        # The reader of our output (head, a pager) has left: nothing more to say, and no message at exit.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return FINE
    except OSError as error:
        where = f"{error.filename}: " if error.filename else ""
        return _refuse(f"{where}{error.strerror or error}")
    except KeyboardInterrupt:
        print("cellfuncs: interrupted, nothing was written", file=sys.stderr)
        return INTERRUPTED
    except MemoryError:
        return _refuse("not enough memory for this workbook")
    except Exception as error:
        if os.environ.get("CELLFUNCS_TRACEBACK"):
            raise
        kind = type(error).__name__
        return _refuse(f"an error of the program itself, {kind}: {error} (CELLFUNCS_TRACEBACK=1 shows where)")


def _mend_streams() -> None:
    """A terminal that lacks a sign shows a question mark instead of ending the program."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")


def _refuse(text: str) -> int:
    print(f"cellfuncs: {' '.join(text.split())}", file=sys.stderr)
    return UNUSABLE


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="cellfuncs",
        description="Cell functions for convection and fluid friction, from the command line.",
        epilog="Exit codes: 0 fine, 1 a check found an error, 2 the input could not be used.",
    )
    parser.add_argument("--version", action="version", version=f"cellfuncs {__version__}")
    commands = parser.add_subparsers(title="commands", metavar="COMMAND", required=True)

    recalc = commands.add_parser(
        "recalc",
        help="recalculate a workbook without a spreadsheet program and print what our formulas answer",
        description="Recalculates BOOK (.xlsx, .xlsm), prints every area of our formulas with its labels and "
        "heads, and writes a copy that holds the new values. BOOK itself is never changed.",
    )
    recalc.add_argument("book", metavar="BOOK", help="the workbook")
    recalc.add_argument(
        "-o",
        "--out",
        metavar="OUT",
        help="the copy to write (default: beside BOOK, NAME.recalculated.xlsx, with --values NAME.values.xlsx)",
    )
    form = recalc.add_mutually_exclusive_group()
    form.add_argument(
        "--values",
        action="store_true",
        help="for people without Cellfuncs: values in the place of our formulas, which are kept in notes",
    )
    form.add_argument(
        "--for",
        dest="written_for",
        choices=("excel", "calc"),
        help="write the names of our functions as this program reads them at once",
    )
    recalc.set_defaults(run=_recalc)

    check = commands.add_parser(
        "check",
        help="check workbooks that somebody else wrote: units, properties, correlations, neglected effects",
        description="Reads BOOK (.xlsx, .xlsm) as it stands, follows the units through its formulas, recomputes what "
        "it states from what else it states, and names the likely cause where they differ. BOOK is never changed. A "
        "folder is searched for workbooks; interrupted, the same command goes on where it was, and only what has "
        "changed is checked anew.",
    )
    check.add_argument("books", metavar="BOOK", nargs="+", help="a workbook, or a folder with workbooks")
    check.add_argument("--json", metavar="F", help="write the report as JSON (with several workbooks F is a folder)")
    check.add_argument("--html", metavar="F", help="write it as one page to read and print (likewise)")
    check.add_argument("--annotate", metavar="F", help="write a copy with notes on its cells (likewise)")
    check.add_argument(
        "--summary",
        metavar="FOLDER",
        help="write one summary of all workbooks into a folder, the worst first (HTML and CSV)",
    )
    check.add_argument(
        "--scheduler",
        metavar="ADDRESS",
        help="check on the running Dask cluster of that scheduler (pip install cellfuncs[cluster])",
    )
    check.set_defaults(run=_check)

    functions = commands.add_parser(
        "functions",
        help="list the cell functions, or tell all about one",
        description="Lists the cell functions by family, or tells all about one.",
    )
    functions.add_argument("name", metavar="NAME", nargs="?", help="a function, with or without CF_")
    functions.set_defaults(run=_functions)

    regime = commands.add_parser(
        "map",
        help="draw where a term of a case may be left out, as a picture",
        description="Draws the verdict on a term over two rows or groups of a case block of BOOK, with the case's own "
        "place. The block is read as it is stored in the file; BOOK is never changed.",
    )
    regime.add_argument("book", metavar="BOOK", help="the workbook")
    regime.add_argument("--block", metavar="NAME", help="the name of the case block (without it the only one)")
    regime.add_argument("--term", metavar="T", default="viscous heating", help="the term (default: viscous heating)")
    regime.add_argument("--x", metavar="A", help="the row or group of the horizontal axis (default: one that rules it)")
    regime.add_argument("--y", metavar="B", help="that of the vertical axis")
    regime.add_argument("--points", metavar="N", type=int, default=41, help="points on each axis (default: 41)")
    regime.add_argument("--png", metavar="F", required=True, help="the picture to write")
    regime.set_defaults(run=_map)

    starter = commands.add_parser(
        "starter",
        help="write a starter workbook for a flow kind",
        description="Writes BOOK with a case block of the flow kind KIND (duct, plate, gap), its term table, chart and "
        "fault count, to be filled with your own case.",
    )
    starter.add_argument("kind", metavar="KIND", help="duct, plate or gap")
    starter.add_argument("book", metavar="BOOK", help="the workbook to write (.xlsx); it must not exist yet")
    starter.set_defaults(run=_starter)
    return parser


def _recalc(options: argparse.Namespace) -> int:
    from cellfuncs.hosts import embedded

    show = _Progress()
    try:
        result = embedded.recalc(
            options.book,
            out=options.out,
            values=options.values,
            written_for=options.written_for,
            apart=not os.environ.get("CELLFUNCS_TRACEBACK"),  # whoever looks for an error wants it here
            progress=show,
        )
    finally:
        show.clear()
    print(embedded.render_areas(result.areas))
    for warning in result.warnings:
        print(f"warning: {warning}", file=sys.stderr)
    faults = embedded.fault_line(result.areas)
    if faults:
        print(faults)
    print(f"wrote {result.out}")
    return FINE


def _check(options: argparse.Namespace) -> int:
    from cellfuncs.sheets.many import command

    return command.from_options(options)


def _map(options: argparse.Namespace) -> int:
    from pathlib import Path

    from cellfuncs.books.package import write_whole
    from cellfuncs.cases import read_case
    from cellfuncs.cells.term import term_name
    from cellfuncs.sheets import regime_book, regime_picture

    target = Path(options.png)
    if target.suffix.casefold() != ".png":
        return _refuse(f"the picture is a .png; write for instance {target.stem or 'map'}.png")
    name, rows = regime_book.block_of(options.book, options.block)
    show = _Progress()
    try:
        drawn = regime_picture.draw(
            read_case(rows), term_name(options.term), options.x, options.y, options.points, progress=show
        )
    finally:
        show.clear()
    write_whole(target, drawn.png)
    counts = ", ".join(f"{verdict} {count}" for verdict, count in drawn.counts.items() if count)
    print(f"{name}: {term_name(options.term)} over {drawn.x} and {drawn.y}: {counts}")
    print(f"wrote {target}")
    return FINE


def _starter(options: argparse.Namespace) -> int:
    import tempfile
    from pathlib import Path

    from cellfuncs.hosts import embedded
    from cellfuncs.sheets import starters

    book = Path(options.book)
    if book.suffix.casefold() != ".xlsx":
        return _refuse(f"a starter is an .xlsx workbook; write for instance {book.stem or 'case'}.xlsx")
    if book.exists():
        return _refuse(f"{book} is there already; choose another name")
    with tempfile.TemporaryDirectory() as folder:
        raw = Path(folder) / "starter.xlsx"
        starters.write_starter(options.kind, raw)
        embedded.recalc(raw, out=book)
    print(f"wrote {book}")
    return FINE


class _Progress:
    """The step under way, on one line of a terminal that goes when it is done; silent elsewhere."""

    def __init__(self) -> None:
        self.shown = 0

    def __call__(self, text: str) -> None:
        if sys.stderr.isatty():
            import shutil

            self.clear()
            text = text[: shutil.get_terminal_size().columns - 1]
            self.shown = len(text)
            print(text, end="", file=sys.stderr, flush=True)

    def clear(self) -> None:
        if self.shown:
            print("\r" + " " * self.shown + "\r", end="", file=sys.stderr, flush=True)
            self.shown = 0


def _functions(options: argparse.Namespace) -> int:
    from cellfuncs.cells import catalogue
    from cellfuncs.sheets import reference

    known = catalogue.functions()
    if options.name is None:
        print(reference.listing(_width()))
        return FINE
    wanted = options.name.upper()
    name = wanted if wanted in known else f"CF_{wanted}"
    if name not in known:
        import difflib

        near = difflib.get_close_matches(name, known, n=3, cutoff=0.5)
        hint = f"; near it: {', '.join(near)}" if near else ""
        return _refuse(f'no function "{options.name}"{hint}. `cellfuncs functions` lists all')
    print(reference.text(known[name], _width()))
    return FINE


def _width() -> int:
    """Characters in a line of the terminal, within reason."""
    import shutil

    return min(100, shutil.get_terminal_size((100, 24)).columns)
