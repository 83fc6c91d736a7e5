"""`python -m cellfuncs.hosts.calc install`: the functions in LibreOffice Calc, calculated by this very Python."""

import argparse
import sys
from pathlib import Path

from . import installer, libreoffice

COMMANDS = {
    "install": "put the extension into LibreOffice, and see that a cell answers",
    "remove": "take it out again",
    "use": "an extension that was put in by hand calculates with this Python",
}


def main(words: list[str]) -> int:
    """Run one command; 2 with one line on stderr when it cannot be done."""
    listed = "\n".join(f"  {name.ljust(8)} {text}" for name, text in COMMANDS.items())
    parser = argparse.ArgumentParser(
        "python -m cellfuncs.hosts.calc",
        description=f"Cellfuncs in LibreOffice Calc. Close LibreOffice first.\n\n{listed}",
        formatter_class=argparse.RawDescriptionHelpFormatter,
    )
    parser.add_argument("command", choices=COMMANDS)
    command = parser.parse_args(words).command
    python = Path(sys.executable)
    try:
        if command == "install":
            print(installer.install(libreoffice.find(), lambda: python))
        elif command == "remove":
            print(installer.remove(libreoffice.find()))
        else:
            print(installer.use(python))
    except libreoffice.Unusable as unusable:
        print(f"cellfuncs: {unusable}", file=sys.stderr)
        return 2
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
