"""The extension for LibreOffice Calc: building it, `start.py calc`, and a Calc led from here for tests and bench."""

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent.parent))

# Those who only have the package install with these too; they ask for the standard library only.
from cellfuncs.hosts.calc import installer, libreoffice
from cellfuncs.hosts.calc.office import interpreter

__all__ = ["installer", "interpreter", "libreoffice"]
