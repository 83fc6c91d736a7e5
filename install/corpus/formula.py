"""Formulas over named lines, written out as a spreadsheet has them: every conversion of units by hand.

In a pattern ``{D}`` is line D in SI, ``{D:raw}`` its number without conversion, ``{T:d}`` a temperature for use in
differences, ``{nu:as mu}`` the number of one line with the conversion of another.
"""

import math
import re
from collections.abc import Callable, Mapping

_TOKEN = re.compile(r"\{(\w+)(?::([^}]*))?\}")
_REFERENCE = re.compile(r"\[\[(\w+)\]\]")

# unit -> factor to SI, offset to SI, as engineers write them (NIST SP 811, appendix B)
UNITS: Mapping[str, tuple[float, float]] = {
    "": (1.0, 0.0), "-": (1.0, 0.0), "%": (0.01, 0.0), "m": (1.0, 0.0), "mm": (0.001, 0.0), "cm": (0.01, 0.0),
    "in": (0.0254, 0.0), "ft": (0.3048, 0.0), "m2": (1.0, 0.0), "cm2": (1e-4, 0.0), "ft2": (0.09290304, 0.0),
    "m3": (1.0, 0.0), "in2": (0.00064516, 0.0), "cm3": (1e-6, 0.0), "ft3": (0.028316846592, 0.0),
    "in3": (1.6387064e-5, 0.0), "s": (1.0, 0.0), "min": (60.0, 0.0), "h": (3600.0, 0.0), "m/s": (1.0, 0.0),
    "ft/s": (0.3048, 0.0), "m3/h": (1 / 3600, 0.0), "L/min": (1 / 60000, 0.0), "L/s": (0.001, 0.0),
    "gpm": (6.30901964e-5, 0.0), "cfm": (4.71947443e-4, 0.0), "kg/s": (1.0, 0.0), "kg/h": (1 / 3600, 0.0),
    "lb/h": (0.45359237 / 3600, 0.0), "lb/s": (0.45359237, 0.0), "kg": (1.0, 0.0), "lb": (0.45359237, 0.0),
    "kg/m3": (1.0, 0.0), "lb/ft3": (16.018463, 0.0), "Pa.s": (1.0, 0.0), "mPa.s": (0.001, 0.0), "cP": (0.001, 0.0),
    "lb/ft-h": (4.1337887e-4, 0.0), "mm2/s": (1e-6, 0.0), "m2/s": (1.0, 0.0), "cSt": (1e-6, 0.0),
    "ft2/s": (0.09290304, 0.0), "ft2/h": (0.09290304 / 3600, 0.0), "W/mK": (1.0, 0.0),
    "Btu/h-ft-F": (1.730735, 0.0), "kJ/kgK": (1000.0, 0.0), "J/kgK": (1.0, 0.0), "Btu/lb-F": (4186.8, 0.0),
    "W/m2K": (1.0, 0.0), "Btu/h-ft2-F": (5.678263, 0.0), "m2K/W": (1.0, 0.0), "h-ft2-F/Btu": (0.1761102, 0.0),
    "K/W": (1.0, 0.0), "h-F/Btu": (1.895634, 0.0), "W": (1.0, 0.0), "kW": (1000.0, 0.0), "Btu/h": (0.29307107, 0.0),
    "hp": (745.69987, 0.0), "W/m": (1.0, 0.0), "Btu/h-ft": (0.96152, 0.0), "W/m2": (1.0, 0.0),
    "kW/m2": (1000.0, 0.0), "Btu/h-ft2": (3.1545907, 0.0), "W/K": (1.0, 0.0), "kW/K": (1000.0, 0.0),
    "Btu/h-F": (0.52752793, 0.0), "kJ": (1000.0, 0.0), "Btu": (1055.05585, 0.0), "J/kg": (1.0, 0.0),
    "kJ/kg": (1000.0, 0.0), "Pa": (1.0, 0.0), "kPa": (1000.0, 0.0), "mbar": (100.0, 0.0), "bar": (1e5, 0.0),
    "psi": (6894.7573, 0.0), "barg": (1e5, 101325.0), "psig": (6894.7573, 101325.0), "bara": (1e5, 0.0),
    "psia": (6894.7573, 0.0), "K": (1.0, 0.0), "degC": (1.0, 273.15), "degF": (1 / 1.8, 459.67 / 1.8),
    "dK": (1.0, 0.0), "dF": (1 / 1.8, 0.0), "1/m": (1.0, 0.0), "1/ft": (1 / 0.3048, 0.0), "1/K": (1.0, 0.0),
    "1/s": (1.0, 0.0), "g/mol": (0.001, 0.0), "1/R": (1.8, 0.0),
}  # fmt: skip
# how a difference of temperatures is written beside its number
WRITTEN = {"dK": "K", "dF": "°F", "degC": "°C", "degF": "°F"}

_FUNCTIONS: Mapping[str, Callable[..., float]] = {
    "PI": lambda: math.pi, "LN": math.log, "LOG10": math.log10, "EXP": math.exp, "SQRT": math.sqrt,
    "TANH": math.tanh, "MIN": min, "MAX": max, "ABS": abs,
}  # fmt: skip


def _written(value: float) -> str:
    return f"{value:.10g}"


def _factor_text(factor: float) -> str:
    """How a conversion is written behind a cell: ``/1000``, ``*0.0254``."""
    inverse = 1.0 / factor
    if abs(inverse - round(inverse)) < 1e-9 * inverse and inverse >= 1.0:
        return f"/{round(inverse)}"
    return f"*{_written(factor)}"


def _converted(cell: str, unit: str, mode: str) -> str:
    factor, offset = UNITS[unit]
    if mode == "raw":
        return cell
    text = cell
    if unit == "degF":
        return f"({cell}/1.8)" if mode == "d" else f"(({cell}+459.67)/1.8)"
    if factor != 1.0:
        text += _factor_text(factor)
    if offset and mode not in ("d", "gauge"):
        text += f"+{_written(offset)}"
    return f"({text})" if text != cell else cell


def write_out(pattern: str, unit: str, units: Mapping[str, str]) -> str:
    """The formula with ``[[name]]`` where a cell will stand, from a pattern in SI, for a result in ``unit``."""

    def token(found: re.Match[str]) -> str:
        name, mode = found.group(1), found.group(2) or ""
        own = units[mode[3:]] if mode.startswith("as ") else units[name]
        return _converted(f"[[{name}]]", own, "" if mode.startswith("as ") else mode)

    body = _TOKEN.sub(token, pattern)
    if pattern.startswith("="):
        return body[1:]
    factor, offset = UNITS[unit]
    if unit == "degF":
        return f"({body})*1.8-459.67"
    if offset:
        body = f"({body})-{_written(offset)}"
    if factor == 1.0:
        return body
    body = f"({body})"
    inverse = 1.0 / factor
    if abs(inverse - round(inverse, 9)) < 1e-9 * inverse and inverse > 1.0:
        return f"{body}*{_written(inverse)}"
    return f"{body}/{_written(factor)}"


def evaluate(written: str, values: Mapping[str, float]) -> float:
    """The value of a written formula, computed as the spreadsheet would."""
    text = _REFERENCE.sub(lambda m: f"_v['{m.group(1)}']", written).replace("^", "**")
    # a spreadsheet binds a sign closer than a power; patterns write no sign before a power
    return float(eval(text, {"__builtins__": {}}, {**_FUNCTIONS, "_v": values}))


def with_cells(written: str, cells: Mapping[str, str]) -> str:
    """The formula with its cells."""
    return "=" + _REFERENCE.sub(lambda m: cells[m.group(1)], written)


def names_in(written: str) -> tuple[str, ...]:
    """The lines that a written formula uses, in their order."""
    return tuple(dict.fromkeys(_REFERENCE.findall(written)))
