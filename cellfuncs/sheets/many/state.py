"""What is done already: kept in a file of the user's, so that an interrupted run goes on where it was.

A file counts as done when its bytes are those that were checked, by the same version, and every output that is wanted
is there. What failed is tried anew. The state is written whole, now and then and at the end.
"""

from __future__ import annotations

import hashlib
import json
import time
from collections.abc import Iterable, Mapping
from dataclasses import asdict, fields
from pathlib import Path
from typing import Any

from cellfuncs import __version__
from cellfuncs.errors import BookRefused
from cellfuncs.sheets.many.one import CHECKED, REFUSED, Outcome, Worst

BETWEEN = 5.0  # s, between two writings at least
_SHARE = 50  # writing may take this part of the time
_TYPES: Mapping[str, type | tuple[type, ...]] = {
    "str": str, "float": (int, float), "int": int, "dict[str, int]": dict, "tuple[Worst, ...]": list,
}  # fmt: skip


def place_of(named: Iterable[str | Path]) -> Path:
    """Where the state of a run over these folders and files lies: with the user, not in the folder that is checked."""
    from platformdirs import user_state_path

    roots = sorted(str(Path(name).absolute()) for name in named)
    key = hashlib.sha256("\0".join(roots).encode("utf-8", "surrogateescape")).hexdigest()[:16]
    return user_state_path("cellfuncs", appauthor=False) / f"check-{key}.json"


class State:
    """Outcomes by file. ``trouble`` says why the state of an earlier run is not used, or none can be kept."""

    def __init__(self, place: Path) -> None:
        self.place = place
        self.trouble = ""
        self._done: dict[str, Outcome] = {}
        self._outputs: dict[str, dict[str, str]] = {}
        self._last, self._pause, self._changed = time.monotonic(), BETWEEN, False
        self._read()

    def __len__(self) -> int:
        return len(self._done)

    def known(self, path: str, digest: str, outputs: Mapping[str, Path]) -> Outcome | None:
        """The outcome of a file that is unchanged and whose outputs are there; None where it has to be checked."""
        outcome = self._done.get(path)
        if outcome is None or outcome.digest != digest or outcome.state not in (CHECKED, REFUSED):
            return None
        if outcome.state == CHECKED:
            written = self._outputs.get(path, {})
            if any(written.get(kind) != str(target) or not target.is_file() for kind, target in outputs.items()):
                return None
        return outcome

    def digest(self, path: str) -> str:
        """The digest of a file as it was checked, "" where it was not."""
        return self._done[path].digest if path in self._done else ""

    def add(self, path: str, outcome: Outcome, outputs: Mapping[str, Path]) -> None:
        """Keep an outcome; written now and then."""
        self._done[path] = outcome
        self._outputs[path] = {kind: str(target) for kind, target in outputs.items()}
        self._changed = True
        if time.monotonic() - self._last > self._pause:
            self.write()

    def write(self) -> None:
        """Write the state whole, where something has changed."""
        if not self._changed or self.trouble.startswith("no state"):
            return
        from cellfuncs.books.package import write_whole

        start = time.monotonic()
        files = {
            path: asdict(outcome) | {"outputs": self._outputs.get(path, {})} for path, outcome in self._done.items()
        }
        content = {"version": __version__, "files": files}
        try:
            self.place.parent.mkdir(parents=True, exist_ok=True)
            write_whole(self.place, json.dumps(content, allow_nan=False).encode())  # ASCII: names may be no Unicode
        except (OSError, BookRefused) as error:
            self.trouble = f"no state can be kept, so this run cannot be gone on with later: {error}"
            return
        self._changed = False
        self._last = time.monotonic()
        self._pause = max(BETWEEN, _SHARE * (self._last - start))

    def _read(self) -> None:
        try:
            content = json.loads(self.place.read_bytes())
            if content["version"] != __version__:
                self.trouble = f"the state of an earlier run is of version {content['version']}: all is checked anew"
                return
            for path, values in content["files"].items():
                self._outputs[path] = {str(kind): str(target) for kind, target in values.pop("outputs").items()}
                self._done[path] = _outcome(values)
        except FileNotFoundError:
            return
        except (OSError, ValueError, TypeError, KeyError, AttributeError, RecursionError):
            self._done, self._outputs = {}, {}
            self.trouble = f"the state of an earlier run, {self.place}, cannot be read: all is checked anew"


def _outcome(values: dict[str, Any]) -> Outcome:
    """An outcome as it was written; raises where it is none."""
    for part in fields(Outcome):
        value = values[part.name]
        if not isinstance(value, _TYPES[part.type]) or isinstance(value, bool):
            raise TypeError(part.name)
    if len(values) != len(fields(Outcome)):
        raise TypeError("more than an outcome")
    worst = tuple(Worst(**finding) for finding in values["worst"])
    if not all(isinstance(text, str) for finding in worst for text in asdict(finding).values()):
        raise TypeError("worst")
    if not all(isinstance(number, int) for number in values["codes"].values()):
        raise TypeError("codes")
    return Outcome(**values | {"worst": worst})
