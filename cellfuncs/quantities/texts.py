"""Small helpers for messages that quote what a user typed."""

import unicodedata

from ..errors import CellfuncsError


def a(words: str) -> str:
    """Words with their article."""
    return f"{'an' if words[0] in 'aeioAEIO' else 'a'} {words}"


def shortened(text: str, most: int = 40) -> str:
    """A user's text fit for a message: one line, no characters that cannot be shown, not long."""
    text = " ".join("".join(c if c.isprintable() else " " for c in text[: 4 * most]).split())
    return text if len(text) <= most else text[: most - 1] + "…"


def check_characters(text: str, refusal: type[CellfuncsError]) -> None:
    """Refuse control, direction and unassigned characters, which a cell can hide."""
    for character in text:
        if unicodedata.category(character) in ("Cc", "Cf", "Cs", "Co", "Cn"):
            raise refusal(f'"{shortened(text)}" holds a hidden character (U+{ord(character):04X}); type it anew')
