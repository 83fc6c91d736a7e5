"""Unit texts as workbooks hold them, made plain: one sign for each meaning, words as symbols."""

import re
import unicodedata

from ..errors import UnitRefused
from .kinds import shortened

LONGEST = 40

_SIGNS = str.maketrans(
    {
        **dict.fromkeys("º˚", "°"),
        "µ": "μ",
        "∆": "Δ",
        **dict.fromkeys("′’‘´`ʹ", "'"),
        **dict.fromkeys("″”“„ʺ", '"'),
        **dict.fromkeys("·⋅•∙‧・・∘", "·"),
        **dict.fromkeys("×✕*∗", "*"),
        **dict.fromkeys("−–—‐‑‒﹣－", "-"),
        **dict.fromkeys("⁄∕÷／", "/"),
        "ℓ": "l",
        "\t": " ",
    }
)
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")
_SUPERSCRIPT = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+")
_POWER_IN_BRACKETS = re.compile(r"\^ ?[({] ?([+-]?\d) ?[)}]")

# (pattern, replacement), in this order; each is linear in a text of forty characters
_WORDS = tuple(
    (re.compile(pattern, re.IGNORECASE), replacement)
    for pattern, replacement in (
        (r"\bper ?cent\b", "%"),
        (r"(?<![a-z])per(?![a-z])", "/"),
        # deg C, degree F, degC, °C: one token; "deg" alone stays the angle
        (r"(?<![a-zΔ])(?:°|deg(?:ree)?s?\b\.?|deg(?=[CFRK](?![a-z]))) ?[-.]? ?"
         r"(?:([CFRK])(?![a-z])|([CFRK])(?:elsius|ahrenheit|ankine|elvin)\b)", r"°\1\2"),
        (r"(?<=[a-z])°([CFRK])(?![a-z])", r"°\1"),
        (r"(?:Δ|(?<![a-z])(?:delta|diff\.?)) ?[-_]?T?(?: |_)?(?:°|deg(?:ree)?s?\b\.?|deg(?=[CFRK]))? ?([CFRK])(?![a-z])",
         r"Δ\1"),
        (r"^([CFRK]) ?°$", r"Δ\1"),
        (r"h_?2o", "WC"),
        (r"(?<![a-z])w\. ?([cgs])\.?(?![a-z])", r"W\1"),
        (r"[. ]*\b(?:of )?(?:water|WC)(?: (?:column|gauge|gage))\b\.?", " WC"),
        (r"\bof (?=water|WC|mercury|Hg)", ""),
        (r"\b(?:square|sq)\b[. -]*([a-z]+)(?![a-z^0-9])", r"\1^2"),
        (r"\b(?:cubic|cu)\b[. -]*([a-z]+)(?![a-z^0-9])", r"\1^3"),
        (r"(?<![a-z])(lb|kg|g)m?[ -]?mol(?:es?)?(?![a-z])", r"\1mol"),
        (r"(?<![a-z])(short|long|metric)[ .-]?(tons?|hp|horsepower)(?![a-z])", r"\1\2"),
        (r"(?<![a-z])(us|uk|imp|imperial)[ .]{1,2}(gal|gpm|gallon|ton)", r"\1\2"),
        (r"(?<![a-z])(tons?)[ .]?(?:of )?ref(?:r|rig|rigeration)?\.?(?![a-z])", "RT"),
        (r"(?<![a-z])fl\.?[ -]?oz\b", "floz"),
        (r"(?<![a-z])nautical miles?", "nmi"),
        (r"(?<![a-z])boiler hp", "boilerhp"),
        (r"(?<![a-z])(wt|vol|mol|mass)\.? ?%|% ?(?:by )?(wt|vol|mol|mass|volume|weight)\b\.?", "wt%"),
        (r"% ?r\.? ?h\.?(?![a-z])|\brh ?%", "%RH"),
        (r"(?<![a-z])[aA]m(?=\^?3)", "m"),
    )
)
_LABELS = re.compile(r"(?<=[a-z])[ _]?(?:dry air|da|d\.a\.|water|w)(?=/|$)", re.IGNORECASE)
_HUMIDITY = re.compile(r"^(?:k?g|lb|lbm|grains?)[ _]?(?:WC|water|w|v)?/k?(?:g|lb|lbm)[ _]?(?:dry ?air|da|air|d\.a\.)?$")
_STANDARD_VOLUME = re.compile(r"(?<![a-z])(?:n ?|s)m\^?3(?!\d)", re.IGNORECASE)
_NUMBER_FIRST = re.compile(r"^(?:[*x·] ?\d|10 ?\^|10-\d|\d+[.,]?\d*e[-+]?\d)|[*x· ]10\^?-?\d", re.IGNORECASE)


def check_characters(text: str) -> None:
    """Refuse control, direction and unassigned characters, which a cell can hide."""
    for character in text:
        if unicodedata.category(character) in ("Cc", "Cf", "Cs", "Co", "Cn"):
            raise UnitRefused(
                f'"{shortened(text)}" holds a hidden character (U+{ord(character):04X}); type the unit anew'
            )


def clean(text: str) -> str:
    """A unit text made plain.

    Raises
    ------
    UnitRefused
        When it is empty, too long, holds hidden characters, a power of ten, or a standard gas volume.
    """
    text = text.strip()
    if not text:
        raise UnitRefused("no unit; write one")
    if len(text) > LONGEST:
        raise UnitRefused(f'"{shortened(text, 30)}" has {len(text)} characters; a unit has at most {LONGEST}')
    check_characters(text)
    plain = _SUPERSCRIPT.sub(lambda found: "^" + found.group().translate(_SUPERSCRIPTS), text.translate(_SIGNS))
    plain = unicodedata.normalize("NFKC", plain).translate(_SIGNS).replace("**", "^")
    if len(plain) > 2 * LONGEST:
        raise UnitRefused(f'"{shortened(text, 30)}" is too long for a unit')
    plain = " ".join(plain.split()).replace("''", '"')
    plain = _POWER_IN_BRACKETS.sub(r"^\1", plain)
    for left, right in ("[]", "{}", "()"):
        inner = plain[1:-1]
        if plain[:1] == left and plain[-1:] == right and not any(sign in inner for sign in "()[]{}"):
            plain = inner.strip()
    if _NUMBER_FIRST.search(plain):
        raise UnitRefused(
            f'"{shortened(text)}" holds a power of ten, and whether it multiplies or divides the value is open; '
            "put it into the value and write the plain unit"
        )
    if _HUMIDITY.match(plain):
        plain = re.sub(r"[ _]?(?:WC|water|dry ?air|da|d\.a\.|air|(?<=g)[wv]|(?<=lb)[wv])(?=/|$)", "", plain)
    for pattern, replacement in _WORDS:
        plain = pattern.sub(replacement, plain)
    if _STANDARD_VOLUME.search(plain):
        raise UnitRefused(
            f'"{shortened(text)}" is a gas volume at normal or standard conditions and needs its reference '
            "(temperature, pressure); write mol/s, kg/h, or the actual m3/h"
        )
    return " ".join(plain.split())
