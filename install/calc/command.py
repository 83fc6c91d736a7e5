"""`start.py calc`: makes the environment, and puts the extension into LibreOffice or takes it out."""

from pathlib import Path

from environment import Trouble, prepare

from . import installer, libreoffice


def main(words: list[str]) -> int:
    """Install; `--remove` takes it out, `--out FILE.oxt` only writes the extension."""
    try:
        if words[:1] == ["--out"] and len(words) == 2:
            out = Path(words[1]).absolute()
            installer.write(out, prepare())
            print(f"wrote {out}; it calculates with the environment of this installation only")
        elif words == ["--remove"]:
            print(installer.remove(libreoffice.find()))
        elif not words:
            print(installer.install(libreoffice.find(), prepare))
        else:
            raise Trouble("calc takes no argument, --remove, or --out FILE.oxt")
    except libreoffice.Unusable as unusable:
        raise Trouble(str(unusable)) from unusable
    except OSError as error:
        raise Trouble(f"the extension cannot be written ({error.strerror})") from error
    return 0
