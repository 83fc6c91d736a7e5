"""The run of ``cellfuncs check``: one workbook told in full, many in a table, both by bounded processes."""

from __future__ import annotations

import argparse
import os
import shutil
import sys
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path

from cellfuncs.errors import BookRefused
from cellfuncs.sheets.many import state as states
from cellfuncs.sheets.many import summary, told
from cellfuncs.sheets.many.found import Found, found
from cellfuncs.sheets.many.one import CHECKED, KINDS, Answer, Outcome, Screen, checked_one, digest_of, read, task_of

FINE, FOUND, UNUSABLE, INTERRUPTED = 0, 1, 2, 130


@dataclass
class Run:
    """What is wanted: workbooks and folders, kinds of outputs with their files or folders, summary, cluster."""

    named: Sequence[str]
    outputs: Mapping[str, Path] = field(default_factory=dict)
    summary: Path | None = None
    scheduler: str | None = None
    apart: bool = True  # otherwise a single workbook is checked in this process

    @property
    def is_many(self) -> bool:
        """Whether outcomes are told in one table, and kept for going on; otherwise each workbook is told in full."""
        return bool(self.summary or self.scheduler is not None) or any(Path(name).is_dir() for name in self.named)

    @property
    def wanted(self) -> tuple[str, ...]:
        return tuple(kind for kind in KINDS if kind in self.outputs)


def check(run: Run) -> int:
    """Check and tell; the exit code. Raises CellfuncsError where nothing can be checked at all."""
    folders = [path for path in (*run.outputs.values(), run.summary) if path is not None]
    files = found(run.named, folders)
    if not files:
        raise BookRefused(f"there is no workbook ({', '.join(('.xlsx', '.xlsm'))}) in {', '.join(map(str, run.named))}")
    targets = {file.path: _targets(run, file, len(files) == 1 and not run.is_many) for file in files}
    _refuse_input(run, files, targets)
    return _many(run, files, targets) if run.is_many else _few(run, files, targets)


def _few(run: Run, files: Sequence[Found], targets: Mapping[Path, Mapping[str, Path]]) -> int:
    """Workbooks told in full, in the order in which they were named."""
    width = shutil.get_terminal_size().columns if sys.stdout.isatty() else None
    answers: dict[Path, Answer] = {}
    try:
        with told.Progress(len(files)) as progress:
            for answer in _answers(run, files, Screen(width, sys.stdout.isatty())):
                path = Path(answer.outcome.path)
                _write(answer, targets[path])
                answers[path] = replace(answer, products={})
                progress.step()
    except KeyboardInterrupt:
        print(f"cellfuncs: interrupted, {len(answers)} of {len(files)} workbooks were done", file=sys.stderr)
        return INTERRUPTED
    code = FINE
    for file in files:
        answer = answers[file.path]
        sys.stdout.write(answer.text)
        if answer.outcome.state != CHECKED:
            named = f"{file.path}: " if len(files) > 1 else ""
            print(f"cellfuncs: {' '.join((named + answer.outcome.why).split())}", file=sys.stderr)
        code = _worse(code, _code(answer.outcome))
    return code


def _many(run: Run, files: Sequence[Found], targets: Mapping[Path, Mapping[str, Path]]) -> int:
    state = states.State(states.place_of(run.named))
    if state.trouble:
        print(f"cellfuncs: {state.trouble}", file=sys.stderr)
        state.trouble = ""
    outcomes: dict[Path, Outcome] = {}
    try:
        with told.Progress(len(files)) as progress:
            for file in files:
                if (known := _known(state, file, targets[file.path])) is not None:
                    outcomes[file.path] = known
                    progress.step()
            before = len(outcomes)
            by_path = {str(file.path): file for file in files}
            left = [file for file in files if file.path not in outcomes]
            for answer in _answers(run, left, None):
                file = by_path[answer.outcome.path]
                _write(answer, targets[file.path])
                outcomes[file.path] = answer.outcome
                if answer.outcome.digest:
                    written = {kind: targets[file.path][kind] for kind in answer.products}
                    state.add(str(file.path.absolute()), answer.outcome, written)
                progress.step()
    except KeyboardInterrupt:
        state.write()
        print(f"cellfuncs: interrupted, {len(outcomes)} of {len(files)} workbooks are done; {_going_on(state)}",
              file=sys.stderr)  # fmt: skip
        return INTERRUPTED
    except BaseException:
        state.write()
        if outcomes:
            print(f"cellfuncs: {len(outcomes)} of {len(files)} workbooks are done; {_going_on(state)}", file=sys.stderr)
        raise
    state.write()
    return _told(run, state, list(outcomes.values()), before, targets)


def _told(
    run: Run, state: states.State, outcomes: list[Outcome], before: int, targets: Mapping[Path, Mapping[str, Path]]
) -> int:
    told.show(outcomes, sys.stdout)
    told.refusals(outcomes, sys.stderr)
    if run.summary is not None:
        links = {}
        for outcome in outcomes:
            page = targets[Path(outcome.path)].get("html")
            if page is not None and outcome.state == CHECKED:
                links[outcome.place] = summary.link(page, run.summary)
        print("wrote", " and ".join(map(str, summary.write(outcomes, run.summary, links))))
    if before:
        print(f"{before} of them were checked before and have not changed")
    if state.trouble:
        print(f"cellfuncs: {state.trouble}", file=sys.stderr)
    elif len(state):
        print(f"what is done is kept in {state.place}; delete it to check everything anew")
    code = FINE
    for outcome in outcomes:
        code = _worse(code, _code(outcome))
    return code


def _going_on(state: states.State) -> str:
    if state.trouble:
        return state.trouble
    return f"the same command goes on from there ({state.place}; delete it to start anew)"


def _answers(run: Run, files: Sequence[Found], screen: Screen | None) -> Iterator[Answer]:
    if run.scheduler is not None:
        from cellfuncs.sheets.many.cluster import answers_from

        return answers_from(run.scheduler, files, run.wanted, screen)
    if not run.apart and len(files) == 1:
        return _here(files[0], run, screen)
    from cellfuncs.sheets.many.crew import answers_here

    return answers_here(files, run.wanted, screen)


def _here(file: Found, run: Run, screen: Screen | None) -> Iterator[Answer]:
    task = task_of(file, run.wanted, screen)
    yield task if isinstance(task, Answer) else checked_one(task)


def _known(state: states.State, file: Found, targets: Mapping[str, Path]) -> Outcome | None:
    """The outcome of an earlier run, where the file is still what it was."""
    path = str(file.path.absolute())
    if not state.digest(path) or file.why:
        return None
    try:
        outcome = state.known(path, digest_of(read(file.path)), targets)
    except BookRefused:
        return None
    return replace(outcome, path=str(file.path), place=file.place) if outcome else None


def _targets(run: Run, file: Found, is_single: bool) -> dict[str, Path]:
    """Where the outputs of a file go."""
    found_targets = {}
    for kind in run.wanted:
        wanted = run.outputs[kind]
        if is_single and not wanted.is_dir():
            found_targets[kind] = wanted
            continue
        if wanted.exists() and not wanted.is_dir():
            raise BookRefused(f"{wanted} is a file; with several workbooks name a folder.")
        place = Path(file.place)
        ending = f".checked{place.suffix}" if kind == "annotate" else f".{kind}"
        found_targets[kind] = wanted / place.with_name((place.stem if kind == "annotate" else place.name) + ending)
    return found_targets


def _refuse_input(run: Run, files: Sequence[Found], targets: Mapping[Path, Mapping[str, Path]]) -> None:
    """Refuse outputs that would lie upon a workbook, on one another, or where the next run would look."""
    roots = {Path(name).resolve() for name in run.named if Path(name).is_dir()}
    aimed = run.outputs.get("annotate")
    if aimed is not None and aimed.resolve() in roots:
        raise BookRefused(f"{aimed} is the folder that is checked; name another for the copies, it may lie in it.")
    books = {file.path.resolve() for file in files}
    taken: set[Path] = set()
    for wanted in targets.values():
        for target in wanted.values():
            real = target.resolve()
            if real in books or (len(files) == 1 and _same(target, files[0].path)):
                raise BookRefused(f"{target} is the workbook itself, which is never changed; name another file.")
            if real in taken:
                raise BookRefused("two outputs have the same name; name a file for each.")
            taken.add(real)


def _same(one: Path, other: Path) -> bool:
    try:
        return one.exists() and one.samefile(other)
    except OSError:
        return False


def _write(answer: Answer, targets: Mapping[str, Path]) -> None:
    """Write the outputs of a file, each whole."""
    from cellfuncs.books.package import write_whole

    for kind, content in answer.products.items():
        targets[kind].parent.mkdir(parents=True, exist_ok=True)
        write_whole(targets[kind], content)


def _code(outcome: Outcome) -> int:
    if outcome.state != CHECKED:
        return UNUSABLE
    return FOUND if outcome.errors else FINE


def _worse(one: int, other: int) -> int:
    """An error that was found outweighs a file that could not be used."""
    return FOUND if FOUND in (one, other) else max(one, other)


def from_options(options: argparse.Namespace) -> int:
    """Run what the command line asks for."""
    outputs = {kind: Path(wanted) for kind in KINDS if (wanted := getattr(options, kind))}
    run = Run(
        named=options.books,
        outputs=outputs,
        summary=Path(options.summary) if options.summary else None,
        scheduler=options.scheduler,
        apart=not os.environ.get("CELLFUNCS_TRACEBACK"),  # whoever looks for an error wants it here
    )
    if run.summary is not None and run.summary.exists() and not run.summary.is_dir():
        raise BookRefused(f"{run.summary} is a file; name a folder for the summary.")
    return check(run)
