"""Numbers back in the unit of the sheet, and as texts."""

from cellfuncs import quantities
from cellfuncs.checks.stated import Stated
from cellfuncs.errors import CellfuncsError


def _scale(entry: Stated) -> tuple[float, float]:
    """Factor and offset to SI of the unit that the cell states."""
    try:
        unit = quantities.read_unit(entry.unit, entry.kind) if entry.unit else None
    except CellfuncsError:
        unit = None
    if unit is None:
        return (entry.si / entry.value if entry.value and entry.si else 1.0), 0.0
    return unit.factor, unit.offset


def in_unit(si: float, entry: Stated) -> float:
    """An SI value in the unit that the cell states."""
    factor, offset = _scale(entry)
    return (si - offset) / factor


def from_unit(value: float, entry: Stated) -> float:
    """A number in the unit that the cell states, in SI."""
    factor, offset = _scale(entry)
    return value * factor + offset


def with_unit(value: float, unit: str) -> str:
    """A number with its unit; a dash stands for none."""
    return f"{number(value)} {unit.strip('-– ')}".strip()


def number(value: float) -> str:
    """Four to six digits, as an engineer writes them."""
    if value == 0:
        return "0"
    if 1e-3 <= abs(value) < 1e6:
        return f"{value:,.6g}" if abs(value) >= 1000 else f"{value:.5g}"
    return f"{value:.4e}"
