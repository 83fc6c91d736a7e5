"""A LibreOffice in a private folder, led from here: for tests and bench."""

import json
import os
import subprocess
import uuid
from pathlib import Path
from typing import Any

from . import libreoffice

DRIVER = Path(__file__).resolve().parent / "driver.py"


def python_with_uno(office: libreoffice.Office) -> Path:
    """A Python that can talk to the office. Raises Unusable."""
    for python in office.pythons_with_uno():
        tried = subprocess.run([python, "-c", "import uno"], capture_output=True, env=libreoffice.variables())
        if tried.returncode == 0:
            return python
    raise libreoffice.Unusable(libreoffice.NO_PYTHON)


class Session:
    """A running office; an unknown attribute is a method of `driver.Driver`.

    `patience` [s] is how long a cell waits for its answer there.
    """

    def __init__(self, office: libreoffice.Office, folder: Path, patience: float = 30.0) -> None:
        self.mark = uuid.uuid4().hex
        variables = libreoffice.variables() | {"CELLFUNCS_PATIENCE": str(patience), "CELLFUNCS_MARK": self.mark}
        self._process = subprocess.Popen(
            [python_with_uno(office), DRIVER, office.program("soffice"), *libreoffice.settings_of(folder)],
            stdin=subprocess.PIPE,
            stdout=subprocess.PIPE,
            stderr=subprocess.DEVNULL,
            encoding="utf-8",
            env=variables,
        )

    def __getattr__(self, name: str) -> Any:
        def call(*arguments: Any) -> Any:
            self._process.stdin.write(json.dumps([name, arguments], default=os.fspath) + "\n")
            self._process.stdin.flush()
            line = self._process.stdout.readline()
            if not line:
                raise RuntimeError("the office or its driver is gone")
            reply = json.loads(line)
            if "result" not in reply:
                raise RuntimeError(reply["error"])
            return reply["result"]

        return call

    def helpers(self) -> list[int]:
        """The processes that calculate for this office (Linux)."""
        return with_mark(self.mark)

    def close(self) -> None:
        """End the office and its driver."""
        self.__getattr__("end")()
        self._process.wait(60)


def with_mark(mark: str) -> list[int]:
    """The helper processes that inherited the variable CELLFUNCS_MARK (Linux)."""
    found = []
    for path in Path("/proc").glob("[0-9]*"):
        try:
            variables, words = (path / "environ").read_bytes(), (path / "cmdline").read_bytes()
        except OSError:
            continue
        if f"CELLFUNCS_MARK={mark}".encode() in variables and b"cellfuncs.hosts.calc.helper" in words:
            found.append(int(path.name))
    return found
