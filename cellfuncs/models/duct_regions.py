"""A stretch of duct with one wall condition: its particular solution, its modes with their amplitudes, and read-outs.

Every amplitude and every read-out has four columns, the responses to a unit of what drives the duct
(``duct_section.RESPONSES``): the wall's temperature step or flux, friction heat, a uniform source, and the cooling by
expansion that would balance friction in the mean. A case is a sum of them.
"""

import math
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from cellfuncs.models.duct_modes import Modes
from cellfuncs.models.duct_section import Section

WIDTH = 4
_FAR = 460.0  # exp(-460) = 1e-200


@dataclass(frozen=True, eq=False)
class Steady:
    """What is left far from the ends: θ = wall + slope·(x − start) + a profile p (0 at the wall), flux along g."""

    p: Any
    g: Any
    wall: Any
    slope: Any
    bulk: Any
    energy: Any

    def raised(self, level: Any) -> "Steady":
        """The same with a uniform temperature added."""
        return replace(self, wall=self.wall + level, bulk=self.bulk + level, energy=self.energy + level)

    def state(self) -> Any:
        return np.vstack([self.p, self.g])


def steady(section: Section, wall: str, along: float, *, driven: bool, heating: bool) -> Steady:
    """``wall``: temperature, or flux (an insulated wall where not driven); its own uniform level is left at zero."""
    drive = np.zeros(WIDTH)
    drive[0] = 1.0 if driven else 0.0
    on = 1.0 if heating else 0.0
    sides = len(section.whole) if along else 0
    if wall == "temperature":
        p, slope, level = on * section.loads, np.zeros(WIDTH), drive
    else:
        slope, level = section.perimeter * drive + on * section.heats, np.zeros(WIDTH)
        p = on * section.loads - np.outer(section.carried, slope)
    g = -along * np.outer(section.whole, slope) if along else np.zeros((sides, WIDTH))
    bulk = level + section.carried @ p
    carried = along * (section.whole @ g) if along else 0.0
    return Steady(p, g, level, slope, bulk, bulk + carried)


@dataclass(frozen=True, eq=False)
class Stretch:
    """From ``start`` to ``end`` in x*; downstream modes are measured from start, upstream ones from end."""

    start: float
    end: float
    rest: Steady
    down: Modes
    up: Modes
    down_amplitudes: Any
    up_amplitudes: Any
    insulated: bool = False

    def rows_only(self) -> "Stretch":
        """Without the modes' shapes, which only ``profile`` reads: what is remembered stays small."""
        down, up = (replace(modes, p=None, g=None) for modes in (self.down, self.up))
        return replace(self, rest=replace(self.rest, p=None, g=None), down=down, up=up)

    @property
    def reference(self) -> float:
        return self.start if math.isfinite(self.start) else self.end

    def read(self, what: str, x: Any, slope: bool = False) -> Any:
        """The four responses of ``wall``, ``bulk``, ``energy`` or ``lag`` (wall − bulk) at x, or their slopes."""
        if slope:
            found = np.tile(self.rest.slope, (len(x), 1))
        elif what == "lag":
            found = np.tile(self.rest.wall - self.rest.bulk, (len(x), 1))
        else:
            found = getattr(self.rest, what) + np.outer(x - self.reference, self.rest.slope)
        if len(self.down.mu) and math.isfinite(self.start):
            found += self._modes(what, self.down, self.down_amplitudes, x - self.start, -1.0 if slope else 0.0)
        if len(self.up.mu) and math.isfinite(self.end):
            found += self._modes(what, self.up, self.up_amplitudes, self.end - x, 1.0 if slope else 0.0)
        return found

    @staticmethod
    def _modes(what: str, modes: Modes, amplitudes: Any, distance: Any, sign: float) -> Any:
        row = modes.wall - modes.bulk if what == "lag" else getattr(modes, what)
        left = np.exp(np.maximum(-np.outer(np.maximum(distance, 0.0), 1.0 / modes.mu), -700.0))
        if sign:
            row = sign * row / modes.mu
        return (left * row) @ amplitudes

    def before_nothing_is_left(self, x: Any) -> Any:
        """Positions, moved up to where the slowest mode is still a number, if the end is farther than that too."""
        if not (len(self.down.mu) and math.isfinite(self.start)):
            return x
        far = self.start + _FAR * self.down.mu.max()
        back = self.end - x > _FAR * self.up.mu.max() if len(self.up.mu) else np.ones(len(x), dtype=bool)
        return np.where(back, np.minimum(x, far), x)

    def profile(self, x: float) -> tuple[Any, Any]:
        """(wall value, p coordinates) of the four responses at one position."""
        one = np.array([x])
        p = self.rest.p.copy()
        if math.isfinite(self.start):
            p += (self.down.p * np.exp(-np.minimum((x - self.start) / self.down.mu, 700.0))) @ self.down_amplitudes
        if math.isfinite(self.end):
            p += (self.up.p * np.exp(-np.minimum((self.end - x) / self.up.mu, 700.0))) @ self.up_amplitudes
        return self.read("wall", one)[0], p
