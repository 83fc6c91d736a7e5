"""Which workbooks are meant, and what the outputs of each are called."""

from __future__ import annotations

import os
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

# .xls, .xlsb and .ods are not read, which has to be said of each: silence would look like a clean file
ENDINGS = (".xlsx", ".xlsm", ".xls", ".xlsb", ".ods")
_OPEN = ("~$", ".~lock.")  # files that a spreadsheet program keeps while a workbook is open


@dataclass(frozen=True)
class Found:
    """A file to check: where it is, and its name in outputs, a relative path without ``..``.

    ``why`` tells of a folder that could not be looked into.
    """

    path: Path
    place: str
    why: str = ""


def found(named: Sequence[str | Path], left_out: Iterable[Path] = ()) -> list[Found]:
    """The files that are named and those in named folders, each once, in the order of the paths.

    Folders ``left_out`` (those of the outputs) are not looked into, nor are links to folders followed.
    """
    aside = {_real(folder) for folder in left_out}
    labels = _labels([Path(name) for name in named])
    seen: set[Path] = set()
    files = []
    for root, label in labels:
        listed = _walked(root, label, aside) if root.is_dir() else iter([Found(root, label)])
        for file in listed:
            real = _real(file.path)
            if real not in seen:
                seen.add(real)
                files.append(file)
    return files


def _real(path: Path) -> Path:
    """Where a path leads; itself where it leads in a circle."""
    try:
        return path.resolve()
    except (OSError, RuntimeError):
        return path.absolute()


def _labels(roots: Sequence[Path]) -> list[tuple[Path, str]]:
    """What stands for each named thing in outputs: its name, no two alike; nothing for a single folder."""
    if len(roots) == 1 and roots[0].is_dir():
        return [(roots[0], "")]
    labels: list[tuple[Path, str]] = []
    taken: set[str] = set()
    for root in roots:
        name = root.name if root.name not in ("", "..") else root.resolve().name or "root"
        stem, ending = (name, "") if root.is_dir() else (Path(name).stem, Path(name).suffix)
        number = 1
        while name.casefold() in taken:
            number += 1
            name = f"{stem} {number}{ending}"
        taken.add(name.casefold())
        labels.append((root, name))
    return labels


def _walked(root: Path, label: str, aside: set[Path]) -> Iterator[Found]:
    refused: list[OSError] = []
    for folder, folders, names in os.walk(root, onerror=refused.append):
        here = Path(folder)
        folders[:] = sorted(name for name in folders if _real(here / name) not in aside)
        for name in sorted(names):
            path = here / name
            if path.suffix.casefold() in ENDINGS and not name.startswith(_OPEN) and path.is_file():
                yield Found(path, str(Path(label, path.relative_to(root)).as_posix()))
    for error in refused:
        path = Path(error.filename or root)
        yield Found(path, path.as_posix(), f"the folder cannot be looked into: {error.strerror}")
