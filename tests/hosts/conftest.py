"""One LibreOffice with the extension and one without, each in a profile of its own."""

import os
import sys
from pathlib import Path

import pytest

INSTALL = Path(__file__).resolve().parent.parent.parent / "install"
if str(INSTALL) not in sys.path:
    sys.path.insert(0, str(INSTALL))

from calc import installer, session  # noqa: E402
from calc import libreoffice as offices  # noqa: E402

PATIENCE = 10.0  # s; a call that hangs on purpose is waited for


@pytest.fixture(scope="session")
def libreoffice():
    """The LibreOffice of this machine; missing, it is a failure where everything must be there."""
    try:
        office = offices.find()
        session.python_with_uno(office)
    except offices.Unusable as unusable:
        if os.environ.get("CI") == "true":
            pytest.fail(str(unusable))
        pytest.skip(str(unusable))
    return office


@pytest.fixture(scope="session")
def calc(libreoffice, tmp_path_factory):
    """Calc with the extension, put in by the installer into a folder with a space and an umlaut."""
    folder = tmp_path_factory.mktemp("Büro neu")
    installer.install(libreoffice, lambda: Path(sys.executable), folder)
    running = session.Session(libreoffice, folder, PATIENCE)
    yield running
    running.close()


@pytest.fixture(scope="session")
def bare_calc(libreoffice, tmp_path_factory):
    """Calc as a colleague without Cellfuncs has it."""
    running = session.Session(libreoffice, tmp_path_factory.mktemp("bare"))
    yield running
    running.close()
