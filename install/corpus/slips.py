"""Slips that any calculation can have: a conversion left out, a pasted number, digits changed, an odd factor."""

import random
import re

from corpus.calculation import Calculation, Line, Slip, rounded
from corpus.formula import UNITS

_TOKEN = re.compile(r"\{(\w+)\}")
# below this a changed number may still be within what handbooks differ by
_LEAST = 0.08


def all_slips(c: Calculation, values: dict[str, float], rng: random.Random) -> list[Slip]:
    """The calculation's own slips and the general ones; ``values`` are the right numbers by line."""
    return [*c.slips, *_conversions(c), *_pasted(c, values, rng), *_digits(c, values, rng), *_odd(c, rng)]


def _results(c: Calculation) -> list[Line]:
    return [line for line in c.lines if line.pattern is not None and not line.pattern.startswith("=")]


def _conversions(c: Calculation) -> list[Slip]:
    """One input without its conversion, or the result without its own."""
    found = []
    for line in _results(c):
        for name in dict.fromkeys(_TOKEN.findall(line.pattern)):
            unit = c.line(name).unit
            factor, offset = UNITS[unit]
            if factor != 1.0 and not offset and not 0.9 < factor < 1.1:
                found.append(Slip("unit-factor", line.name, line.pattern.replace(f"{{{name}}}", f"{{{name}:raw}}")))
        factor, offset = UNITS[line.unit]
        if factor != 1.0 and not offset and not 0.9 < factor < 1.1:
            found.append(Slip("unit-factor", line.name, "=" + line.pattern))
    return found


def _pasted(c: Calculation, values: dict[str, float], rng: random.Random) -> list[Slip]:
    """A number pasted before an input changed."""
    found = []
    for line in _results(c):
        if line.unit.startswith("deg"):
            continue
        stale = values[line.name] * rng.choice((0.83, 0.87, 1.12, 1.17, 1.23))
        found.append(Slip("hard-coded", line.name, value=rounded(stale, 5)))
    return found


def _digits(c: Calculation, values: dict[str, float], rng: random.Random) -> list[Slip]:
    """A typed property, or a pasted result, with two digits changed or the point misplaced."""
    lines = [
        line for line in c.lines if line.name in ("rho", "mu", "k", "cp") and line.value and c.facts.get("substance")
    ]
    lines += [line for line in _results(c) if not line.unit.startswith("deg")]
    found = []
    for line in lines:
        right = rounded(values[line.name], 4)
        text = f"{right:.3e}"
        digits, power = text.split("e")
        a, b, d, e = digits[0], digits[2], digits[3], digits[4]
        for changed in (f"{b}.{a}{d}{e}", f"{a}.{d}{b}{e}"):
            value = float(f"{changed}e{power}")
            if value > 0 and abs(value / right - 1.0) > _LEAST and changed[0] != "0":
                found.append(Slip("typing-slip", line.name, value=value))
        if rng.random() < 0.3:
            found.append(Slip("typing-slip", line.name, value=right * 10.0))
    return found


def _odd(c: Calculation, rng: random.Random) -> list[Slip]:
    """A factor that nobody can explain."""
    lines = _results(c)
    line = rng.choice([line for line in lines if not line.unit.startswith("deg")])
    return [Slip("unknown", line.name, f"({line.pattern})*{rng.choice(('1.37', '0.71', '1.21'))}")]
