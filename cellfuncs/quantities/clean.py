"""Unit texts as workbooks hold them, made plain: one sign for each meaning, words as symbols."""

import re
import unicodedata

from ..errors import UnitRefused
from . import atoms
from .texts import check_characters, shortened

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
        (
            r"(?<![a-zΔ])(?:°|deg(?:ree)?s?\b\.?|deg(?=[CFRK](?![a-z]))) ?[-.]? ?"
            r"(?:([CFRK])(?![a-z])|([CFRK])(?:elsius|ahrenheit|ankine|elvin)\b)",
            r"°\1\2",
        ),
        (r"(?<=[a-z])°([CFRK])(?![a-z])", r"°\1"),
        (
            r"(?:Δ|(?<![a-z])(?:delta|diff\.?)) ?[-_]?T?(?: |_)?"
            r"(?:°|deg(?:ree)?s?\b\.?|deg(?=[CFRK]))? ?([CFRK])(?![a-z])",
            r"Δ\1",
        ),
        (r"^([CFRK]) ?°$", r"Δ\1"),
        (r"h_?2o", "WC"),
        (r"(?<![a-z])w\. ?([cgs])\.?(?![a-z])", r"W\1"),
        (r"[. ]*\b(?:of )?(?:water|WC)(?: (?:column|gauge|gage))\b\.?", " WC"),
        (r"\bof (?=water|WC|mercury|Hg)", ""),
        (r"\b(?:square|sq)\b[. -]*([a-z]+)(?![a-z^0-9])", r"\1^2"),
        (r"\b(?:cubic|cu)\b[. -]*([a-z]+)(?![a-z^0-9])", r"\1^3"),
        (r"(?<![a-z])(wt|vol|mol|mass)\.?[ -]?%", r"\1%"),
        (r"% ?(?:by )?(vol|mol|mass)(?:ume)?\b\.?", r"\1%"),
        (r"% ?(?:by )?(?:weight|wt)\b\.?", "wt%"),
        (r"% ?r\.? ?h\.?(?![a-z])|\brh ?%", "%RH"),
        (r"(?<![a-z])[aA]m(?=\^?3)", "m"),
    )
)
# kg water/kg dry air, g/kg da, kgw/kgda: what is weighed is a label, not a unit
_HUMIDITY = re.compile(
    r"^(k?g|lbm?|grains?)[ _]?(?:h_?2o|water|vapou?r|w|v)?[ ]?/"
    r"[ ]?(k?g|lbm?)[ _]?(?:dry[ _]?air|da|d\.a\.|air|a)?$",
    re.IGNORECASE,
)
_STANDARD_VOLUME = re.compile(r"(?<![a-z])(?:n ?|s)c?m\^?3(?!\d)", re.IGNORECASE)
_NUMBER_FIRST = re.compile(r"^(?:[*x·] ?\d|10 ?\^|10-\d|\d+[.,]?\d*e[-+]?\d)|[*x· ]10\^?-?\d", re.IGNORECASE)


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
    check_characters(text, UnitRefused)
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
            f'"{shortened(text)}" holds a power of ten that may multiply or divide the value; '
            "put it into the value and write the plain unit"
        )
    plain = atoms.join_phrases(_HUMIDITY.sub(r"\1/\2", plain))
    for pattern, replacement in _WORDS:
        plain = pattern.sub(replacement, plain)
    if _STANDARD_VOLUME.search(plain):
        raise UnitRefused(
            f'"{shortened(text)}" is a gas volume at normal or standard conditions and needs its reference '
            "(temperature, pressure); write mol/s, kg/h, or the actual m3/h"
        )
    return " ".join(plain.split())
