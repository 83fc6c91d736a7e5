"""One LibreOffice with the extension and one without, each in a profile of its own."""

import json
import os
import subprocess
import sys
import uuid
from pathlib import Path

import pytest

HERE = Path(__file__).resolve().parent
INSTALL = HERE.parent.parent / "install"
if str(INSTALL) not in sys.path:
    sys.path.insert(0, str(INSTALL))

from calc import command  # noqa: E402
from calc import office as offices  # noqa: E402

PATIENCE = 10.0  # s; a call that hangs on purpose is waited for


def _fails(reason):
    """A missing part is a failure where everything must be there, and a reason to skip elsewhere."""
    if os.environ.get("CI") == "true":
        pytest.fail(reason)
    pytest.skip(reason)


class Office:
    """A LibreOffice with its driver; an unknown attribute is a method of the driver."""

    def __init__(self, office, python, folder):
        self.mark = uuid.uuid4().hex
        variables = offices.variables() | {"CELLFUNCS_PATIENCE": str(PATIENCE), "CELLFUNCS_MARK": self.mark}
        self.process = subprocess.Popen(
            [python, HERE / "calc_driver.py", office.program("soffice"), *offices.settings_of(folder)],
            stdin=subprocess.PIPE,
            stdout=subprocess.PIPE,
            encoding="utf-8",
            env=variables,
        )

    def __getattr__(self, name):
        def call(*arguments):
            arguments = [str(one) if isinstance(one, Path) else one for one in arguments]
            self.process.stdin.write(json.dumps([name, arguments]) + "\n")
            self.process.stdin.flush()
            line = self.process.stdout.readline()
            assert line, "the office or its driver is gone"
            reply = json.loads(line)
            assert "result" in reply, reply.get("error")
            return reply["result"]

        return call

    def helpers(self):
        """The processes that calculate for this office."""
        return with_mark(self.mark)


def with_mark(mark):
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


@pytest.fixture(scope="session")
def libreoffice():
    """The LibreOffice of this machine, and a Python that can talk to it."""
    try:
        office = offices.find()
    except offices.Unusable as unusable:
        _fails(str(unusable))
    for python in office.pythons_with_uno():
        if subprocess.run([python, "-c", "import uno"], capture_output=True, env=offices.variables()).returncode == 0:
            return office, python
    _fails(offices.NO_PYTHON)


def _office(libreoffice, folder):
    office, python = libreoffice
    running = Office(office, python, folder)
    yield running
    running.end()
    running.process.wait(60)


@pytest.fixture(scope="session")
def calc(libreoffice, tmp_path_factory):
    """Calc with the extension, put in by the installer into a folder with a space and an umlaut."""
    folder = tmp_path_factory.mktemp("Büro neu")
    command.install(libreoffice[0], lambda: Path(sys.executable), folder)
    yield from _office(libreoffice, folder)


@pytest.fixture(scope="session")
def bare_calc(libreoffice, tmp_path_factory):
    """Calc as a colleague without Cellfuncs has it."""
    yield from _office(libreoffice, tmp_path_factory.mktemp("bare"))
