"""Small helpers for names and for the sentences of refusals."""

import re
import unicodedata
from collections.abc import Iterable
from difflib import get_close_matches


def folded(text: str) -> str:
    """One spelling for all ways to write a name: case, spaces, hyphens, commas, brackets do not count."""
    plain = unicodedata.normalize("NFKC", text).casefold()
    return re.sub(r"[\s\-‐‑‒–—_,/.'()\[\]]", "", plain)


def nearest(text: str, choices: Iterable[str]) -> str:
    """Return '; the nearest is "x"' for the choice nearest to `text`, or an empty text."""
    table = {folded(choice): choice for choice in choices}
    found = get_close_matches(folded(text), table, 1, 0.6)
    return f'; the nearest is "{table[found[0]]}"' if found else ""


def shown(text: str, length: int = 40) -> str:
    """`text` in quotes, cut to a length that fits any message."""
    text = " ".join(text.split())
    return f'"{text[: length - 1]}…"' if len(text) > length else f'"{text}"'


def kelvin(temperature: float) -> str:
    """A temperature in words, both scales: "400 K (126.85 degC)"."""
    return f"{temperature:.7g} K ({temperature - 273.15:.6g} degC)"


def pascal(pressure: float) -> str:
    """A pressure in words, in Pa, kPa or MPa."""
    for size, unit in ((1e6, "MPa"), (1e3, "kPa")):
        if abs(pressure) >= size:
            return f"{pressure / size:.6g} {unit}"
    return f"{pressure:.6g} Pa"


def percent(fraction: float) -> str:
    """A fraction in percent: "30 %"."""
    return f"{100 * fraction:.4g} %"
