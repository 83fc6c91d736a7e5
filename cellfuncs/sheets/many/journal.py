"""What is done already: a line for each finished workbook, so that an interrupted run goes on where it was."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from cellfuncs import __version__

NAME = "checked.jsonl"


class Journal:
    """The journal of a folder. A workbook that changed since, or was checked by another version, counts as not done."""

    def __init__(self, folder: Path, wanted: tuple[str, ...] = ()):
        folder.mkdir(parents=True, exist_ok=True)
        self.path = folder / NAME
        self.wanted = list(wanted)
        self.rows: dict[str, dict[str, Any]] = {}
        if self.path.exists():
            for line in self.path.read_text("utf-8").splitlines():
                self._take(line)

    def _take(self, line: str) -> None:
        try:
            entry = json.loads(line)
            self.rows[entry["row"]["workbook"]] = entry
        except (ValueError, KeyError, TypeError):
            return  # the run was interrupted while it wrote this line

    def is_done(self, path: Path) -> bool:
        """Whether a workbook was checked as it is now."""
        entry = self.rows.get(str(path))
        return entry is not None and entry.get("mark") == self._mark(path)

    def _mark(self, path: Path) -> list[Any]:
        try:
            known = path.stat()
        except OSError:
            return []
        return [known.st_size, known.st_mtime_ns, __version__, self.wanted]

    def note(self, row: dict[str, Any]) -> None:
        """Add the outcome of a workbook."""
        entry = {"mark": self._mark(Path(row["workbook"])), "row": row}
        self.rows[row["workbook"]] = entry
        with self.path.open("a", encoding="utf-8") as file:
            file.write(json.dumps(entry, ensure_ascii=False) + "\n")

    def row(self, path: Path) -> dict[str, Any]:
        """The line of a workbook that is done."""
        return self.rows[str(path)]["row"]
