"""The one place where an error becomes the text of a cell."""

from collections.abc import Sequence

from cellfuncs.errors import CellfuncsError

LONGEST_TEXT = 255
MARK = "! "


def is_fault(value: object) -> bool:
    """Whether a cell value is one of our fault texts."""
    return type(value) is str and value.startswith(MARK)


def clip(text: str, longest: int = LONGEST_TEXT) -> str:
    """The text, cut at a word when a cell could not hold it."""
    if len(text) <= longest:
        return text
    return text[: longest - 2].rsplit(" ", 1)[0] + " …"


def fault(argument: str, text: str) -> str:
    """``! argument: text`` in at most 255 characters."""
    shown = argument if argument.startswith("CF_") else argument.replace("_", " ")
    return clip(f"{MARK}{shown}: {' '.join(text.split())}")


def from_error(error: BaseException, argument: str, names: Sequence[str] = ()) -> str:
    """The fault text of an exception; ``argument`` is named unless the error blames another of ``names``."""
    if isinstance(error, CellfuncsError):
        return fault(error.argument if error.argument in names else argument, str(error))
    if isinstance(error, MemoryError):
        return fault(argument, "too much to hold in memory; give fewer cells")
    detail = f"{type(error).__name__}: {error}" if str(error) else type(error).__name__
    return fault(argument, f"the calculation broke off ({detail}); please report it with these inputs")
