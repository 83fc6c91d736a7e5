"""From a problem to its solved stretches on one of two resolutions, and the reading of answers from them."""

import math
from typing import TYPE_CHECKING, Any

import numpy as np

from cellfuncs.errors import NoModel, OutOfRange
from cellfuncs.models.duct_eddy import friction_scale, turbulent
from cellfuncs.models.duct_matching import FIXED, SAME_WALL, stretches
from cellfuncs.models.duct_profile import Profile, laminar
from cellfuncs.models.duct_section import section

if TYPE_CHECKING:
    from cellfuncs.models.duct import DuctProblem

_COARSE = 0.84
_ALIKE = 1e-11  # what remains of a difference after its parts cancel, below which it is rounding


def resolved(problem: "DuctProblem", fine: bool) -> "Reader":
    """The stretches of a problem; the coarse resolution serves the error only."""
    along = 0.0 if problem.peclet is None else 1.0 / problem.peclet
    profile, terms, power = _flow(problem)
    matrices = section(profile, terms if fine else int(_COARSE * terms), power)
    parts = stretches(matrices, problem.wall, problem.upstream, along, problem.heated_length)
    return Reader(problem, matrices, tuple(part.rows_only() for part in parts))


def _flow(problem: "DuctProblem") -> tuple[Profile, int, int]:
    """The profile, and (polynomials, power of the wall distance): what it and the wall's steps ask for.

    A step from an insulated wall to a temperature is felt as √distance and wants the finest layer; the sum of modes
    that is set against a fixed inlet loses digits in it; a turbulent wall layer wants polynomials for its decades.
    """
    if problem.reynolds is not None:
        profile = turbulent(problem.section, problem.heated, problem.reynolds, problem.prandtl)
        layers = friction_scale(problem.section, problem.reynolds)[0] * max(1.0, problem.prandtl) ** (1.0 / 3.0)
        return profile, int(min(max(8.0 + 20.0 * math.log10(layers), 56.0), 130.0)), 4
    profile = laminar(problem.section, problem.heated, float(problem.power_law))
    if problem.peclet is None or problem.wall == "flux":
        return profile, 48, 3
    if problem.upstream == "adiabatic":
        return profile, 49, 5
    return (profile, 44, 4) if math.isfinite(problem.heated_length) else (profile, 48, 3)


class Reader:
    """Answers from solved stretches."""

    def __init__(self, problem: "DuctProblem", matrices: Any, parts: tuple[Any, ...]):
        self.problem, self.parts = problem, parts
        self.perimeter, self.heats = matrices.perimeter, matrices.heats
        self.along = problem.peclet is not None
        self.largest_number = max(1.0, 1.0 / problem.peclet**2) if problem.wall == "flux" and self.along else 1.0
        # a step of temperature at a plane makes the flux 1/x there, and the energy through it infinite
        self.broken = self.along and problem.wall == "temperature" and problem.upstream in (SAME_WALL, FIXED)

    def read(self, what: str, x: Any, responses: tuple[float, ...]) -> Any:
        """One answer at positions x*; responses as amplitudes of the four columns."""
        places = np.atleast_1d(np.asarray(x, dtype=float))
        if not np.isfinite(places).all():
            raise OutOfRange("a position must be a finite number")
        if not all(map(math.isfinite, responses)):
            raise OutOfRange("what drives the duct must be finite numbers")
        flat = places.ravel()
        if what in ("flux", "nusselt"):
            self._refuse_steps(flat)
        found = np.empty(len(flat))
        done = np.zeros(len(flat), dtype=bool)
        # at a step of the wall the flux is infinite, and the insulated side knows what passes
        for part in sorted(self.parts, key=lambda part: what == "energy" and not part.insulated):
            here = (flat >= part.start) & (flat <= part.end) & ~done
            if here.any():
                found[here] = self._in(part, what, flat[here], responses)
            done |= here
        if not done.all():
            found[~done] = self._before(what, flat[~done])
        return float(found[0]) if np.ndim(x) == 0 else found.reshape(np.shape(x))

    def _in(self, part: Any, what: str, x: Any, responses: tuple[float, ...]) -> Any:
        if what not in ("flux", "nusselt"):
            return part.read(what, x) @ responses
        if what == "nusselt":
            x = part.before_nothing_is_left(x)
        made = self.heats if part.start >= 0.0 else 0.0
        flux = (part.read("energy", x, slope=True) - made) @ responses / self.perimeter
        if what == "flux":
            return flux
        lags = part.read("lag", x) * responses
        lag = lags.sum(axis=1)
        if (np.abs(lag) <= _ALIKE * np.abs(lags).sum(axis=1)).any():
            raise NoModel("wall and bulk have the same temperature there; no coefficient describes that")
        return flux / lag

    def _before(self, what: str, x: Any) -> Any:
        if self.along:
            raise OutOfRange("with a fixed inlet there is no duct before x = 0")
        if what == "nusselt":
            raise OutOfRange("nothing is exchanged before x = 0")
        return np.zeros(len(x))

    def _refuse_steps(self, x: Any) -> None:
        if self.problem.wall != "temperature":
            return
        steps = [0.0] + ([self.problem.heated_length] if self.along else [])
        if np.isin(x, steps).any():
            raise OutOfRange("the wall flux is infinite at the step of the wall; ask behind it, or for a mean")

    def mean_flux(self, x0: float, x1: float, responses: tuple[float, ...]) -> float:
        """Mean wall flux between two planes."""
        if not (math.isfinite(x0) and math.isfinite(x1) and x1 > x0):
            raise OutOfRange(f"a mean needs two planes, the second behind the first, not {x0:.4g} and {x1:.4g}")
        gained = self._through(x1, responses, behind=True) - self._through(x0, responses, behind=False)
        made = (max(x1, 0.0) - max(x0, 0.0)) * float(self.heats @ responses)
        return (gained - made) / (self.perimeter * (x1 - x0))

    def _through(self, x: float, responses: tuple[float, ...], behind: bool) -> float:
        """Energy through a plane; at an end of the heated wall the side counts that leaves the end inside a mean."""
        if self.broken and x == 0.0 and responses[0] != 0.0:
            raise NoModel(
                "with conduction along and a step of temperature at x = 0 the duty from that plane is infinite; "
                "name another plane"
            )
        if x == 0.0 and not self.along:
            return 0.0
        parts = [part for part in self.parts if part.start <= x <= part.end]
        if not parts:
            return float(self._before("energy", np.array([x]))[0])
        part = parts[-1] if behind else parts[0]
        return float((part.read("energy", np.array([x])) @ responses)[0])

    def difference(self, other: "Reader") -> float:
        """Largest difference from the other resolution; see ``DuctSolution.error``."""
        length = self.problem.heated_length
        developing = 0.1 * max(1.0, 1.0 / (self.problem.peclet or math.inf))
        places = min(length, developing) * np.array([0.01, 0.03, 0.1, 0.3, 0.9, 1.1, 3.0, 10.0])
        # with a flux at a small Pe, temperatures are differences of numbers of the size of 1/Pe²
        largest = 4.0 * np.finfo(float).eps * self.largest_number
        for part, same in zip(self.parts, other.parts, strict=True):
            here = places[(places >= part.start) & (places <= part.end)]
            if not len(here):
                continue
            for what in ("bulk", "wall", "energy"):
                apart = part.read(what, here) - same.read(what, here)
                scale = np.maximum(np.abs(part.read(what, here)).max(axis=0), 1.0)
                largest = max(largest, float((np.abs(apart) / scale).max()))
        return largest
