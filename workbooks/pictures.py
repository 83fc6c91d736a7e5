"""The pictures of the README, from the built samples: ``python workbooks/pictures.py``.

Needs LibreOffice (soffice) and poppler (pdftoppm), for the report of a check Chromium as well; Pillow comes with
matplotlib. Look at every picture before it goes into the tree.
"""

import os
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path
from typing import Any

HERE = Path(__file__).resolve().parent
RESOLUTION = 96
_WHITE_MARGIN = 8
# picture -> workbook, and the pages of it that are put one below the other, counted from 1 or, below 0, from the end
PICTURES = {
    "coolant_channel.png": ("coolant_channel.xlsx", (2, 3)),
    "oil_film.png": ("oil_film.xlsx", (2, 3)),
    "sodium_duct.png": ("sodium_duct.xlsx", (-1,)),
    "flat_die.png": ("flat_die.xlsx", (-2,)),
    "gas_line.png": ("gas_line.xlsx", (-2,)),
    "warm_pipe.png": ("warm_pipe.xlsx", (-1,)),
    "methods.png": ("methods.xlsx", (-1,)),
    "twenty_cases.png": ("twenty_cases.xlsx", (1,)),
}
REPORT = ("check_report.png", "inherited/cooling_water_line.html", (1,))


def _run(*words: str | Path) -> None:
    # an activated environment of Python's would start in the office instead of its own
    clean = {k: v for k, v in os.environ.items() if not k.startswith(("PYTHON", "VIRTUAL_ENV"))}
    subprocess.run([str(word) for word in words], env=clean, check=True, capture_output=True, timeout=180)


def _pages(source: Path, folder: Path) -> list[Any]:
    """The pages of a workbook or web page as they print."""
    from PIL import Image

    printed = folder / f"{source.stem}.pdf"
    if source.suffix == ".html":
        browser = shutil.which("chromium") or shutil.which("google-chrome") or "chromium"
        given = f"--user-data-dir={folder / 'browser'}", "--no-pdf-header-footer", f"--print-to-pdf={printed}"
        _run(browser, "--headless", "--no-sandbox", "--disable-gpu", *given, source.as_uri())
    else:
        profile = f"-env:UserInstallation={(folder / 'office').as_uri()}"
        _run("soffice", profile, "--headless", "--convert-to", "pdf", "--outdir", folder, source)
    _run("pdftoppm", "-r", str(RESOLUTION), "-png", printed, folder / source.stem)
    return [Image.open(path).convert("RGB") for path in sorted(folder.glob(f"{source.stem}-*.png"))]


def _trimmed(page: Any, foot: bool) -> Any:
    """A page without its white margins, and without the line at its foot."""
    from PIL import Image, ImageChops

    if foot:
        page = page.crop((0, 0, page.width, round(page.height * 0.94)))
    box = ImageChops.difference(page, Image.new("RGB", page.size, "white")).getbbox() or (0, 0, *page.size)
    left, top = (max(0, edge - _WHITE_MARGIN) for edge in box[:2])
    right, bottom = (min(edge + _WHITE_MARGIN, end) for edge, end in zip(box[2:], page.size, strict=True))
    return page.crop((left, top, right, bottom))


def picture(source: Path, wanted: tuple[int, ...], target: Path) -> None:
    """Write some pages of a source below one another."""
    from PIL import Image

    with tempfile.TemporaryDirectory() as temporary:
        pages = _pages(source, Path(temporary))
        parts = [_trimmed(pages[number - (number > 0)], source.suffix == ".xlsx") for number in wanted]
        whole = Image.new("RGB", (max(p.width for p in parts), sum(p.height for p in parts)), "white")
        top = 0
        for part in parts:
            whole.paste(part, (0, top))
            top += part.height
        whole.quantize(128).save(target, optimize=True)


def main() -> int:
    for name, (book, wanted) in PICTURES.items():
        picture(HERE / book, wanted, HERE / name)
        print("drawn", name)
    name, page, wanted = REPORT
    picture(HERE / page, wanted, HERE / name)
    print("drawn", name)
    return 0


if __name__ == "__main__":
    sys.exit(main())
