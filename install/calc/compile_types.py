"""Makes cellfuncs.idl, cellfuncs.rdb and cellfuncs.oxt anew, after the catalogue or hosts/calc/office has changed.

Run it in Cellfuncs' environment. A function that is new, gone or has other arguments needs LibreOffice's SDK
(Debian: libreoffice-dev); other changes do not.
"""

import hashlib
import subprocess
import sys
import tempfile
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

from calc import extension, libreoffice
from cellfuncs.hosts.calc.installer import READY
from cellfuncs.hosts.calc.libreoffice import Office, Unusable

IDL = extension.HERE / "cellfuncs.idl"


def compile_types(office: Office, text: str) -> bytes:
    """The types of an interface as the office reads them. Raises Unusable."""
    writer = office.sdk()
    if writer is None:
        raise Unusable("the SDK's unoidl-write is not here (Debian, Ubuntu: apt install libreoffice-dev)")
    types = [path for path in (office.folder / "types.rdb", *_more_types(office)) if path.exists()]
    with tempfile.TemporaryDirectory() as folder:
        source, out = Path(folder) / "cellfuncs.idl", Path(folder) / "cellfuncs.rdb"
        source.write_text(text, "utf-8")
        done = subprocess.run([writer, *types, source, out], capture_output=True, text=True)
        if done.returncode:
            raise Unusable(f"unoidl-write: {done.stderr.strip()}")
        return out.read_bytes()


def _more_types(office: Office) -> tuple[Path, ...]:
    resources = office.folder.parent / "Resources"
    return (office.folder / "types" / "offapi.rdb", resources / "ure" / "share" / "misc" / "types.rdb")


def mark(types: bytes) -> str:
    """The first line of cellfuncs.idl: which cellfuncs.rdb belongs to it."""
    return f"// cellfuncs.rdb made from this: {hashlib.sha256(types).hexdigest()}\n"


def in_order(text: str) -> bool:
    """Whether both files in the repository are those of this interface."""
    try:
        return IDL.read_text("utf-8") == mark(extension.RDB.read_bytes()) + text
    except FileNotFoundError:
        return False


def main() -> int:
    """Write the files; 2 with one line when it cannot be done."""
    text = extension.idl()
    if not in_order(text):
        try:
            types = compile_types(libreoffice.find(), text)
        except Unusable as unusable:
            print(unusable, file=sys.stderr)
            return 2
        extension.RDB.write_bytes(types)
        IDL.write_text(mark(types) + text, "utf-8", newline="\n")
        print(f"wrote {IDL} and {extension.RDB}")
    extension.build(READY)
    print(f"wrote {READY}")
    return 0


if __name__ == "__main__":
    sys.exit(main())
