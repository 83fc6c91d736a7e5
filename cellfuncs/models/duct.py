"""Developed flow in a duct whose wall is heated over a length: temperatures and fluxes at any position, solved.

Conventions. D hydraulic diameter, U mean velocity, Pe = UD/α, x* = (x/D)/Pe from the start of the heated wall.
Wall at a temperature: θ = (T − T_in)/(T_w − T_in), fluxes are qD/(k(T_w − T_in)), Br = μU²/(k(T_w − T_in)).
Wall with a flux: θ = (T − T_in)k/(qD), fluxes are over q, Br = μU²/(qD). Fluxes count into the fluid; Br may be
negative (cooling). Br of a power-law fluid is K·U^(n+1)·D^(1−n)/(k·ΔT); a source is q‴D²/(kΔT), for a flux q‴D/q.
``expansion`` = βT is the part of the friction work that pressure work takes back, spread like the velocity.
Nu = flux/(θ_w − θ_b). Friction heat, source and expansion act from x = 0 on, so that θ_b = 0 is the inlet's state.
``drive`` = 0 leaves the wall at the inlet temperature or insulated.
Energy along, where conduction along is kept, is what advection and conduction carry, over ρcpU·ΔT.
"""

import math
from dataclasses import dataclass, replace
from functools import cached_property, lru_cache
from typing import Any

from cellfuncs.errors import NoModel, OutOfRange, UnknownName
from cellfuncs.models.trust import trusted

UPSTREAM = ("adiabatic", "wall at inlet temperature", "fixed inlet")
_NOTHING_ALONG = 1e8  # Pe: beyond, conduction along moves bulk temperatures by less than 1e-11
_ROUNDING = 2.2e-16
_LONGEST = 1e15  # x*, or D: beyond, positions lose their digits


@dataclass(frozen=True)
class DuctProblem:
    """A duct in numbers without dimension.

    ``section`` tube or plates, ``heated`` both or one (the other insulated), ``wall`` temperature or flux;
    ``power_law`` index n of laminar flow; ``peclet`` None leaves conduction along out; ``heated_length`` in x*, the
    wall insulated behind it (inf: no end); ``upstream`` adiabatic, wall at inlet temperature, or fixed inlet (over
    the section x = 0); ``reynolds`` and ``prandtl`` make the flow turbulent (None: laminar), with both plates heated,
    and then a Péclet number is their product.
    """

    section: str = "tube"
    heated: str = "both"
    wall: str = "temperature"
    power_law: float = 1.0
    peclet: float | None = None
    heated_length: float = math.inf
    upstream: str = "adiabatic"
    reynolds: float | None = None
    prandtl: float | None = None


@lru_cache(maxsize=128)
def solve(problem: DuctProblem) -> "DuctSolution":
    """The solved duct; refuses (OutOfRange, UnknownName, NoModel) what no number would fit.

    Range: Pe 1e-6 to 1e9, power-law index 0.05 to 20. Source of the method: the modules ``duct_*``.
    """
    if problem.wall not in ("temperature", "flux"):
        raise UnknownName(f'the wall is a "temperature" or a "flux", not "{problem.wall}"')
    if problem.upstream not in UPSTREAM:
        raise UnknownName(f'upstream is {", ".join(UPSTREAM)}, not "{problem.upstream}"')
    pe, length = problem.peclet, problem.heated_length
    if pe is not None and not 1e-6 <= pe <= 1e9:
        raise OutOfRange(f"Péclet number {pe:.3g} is outside 1e-6 to 1e9")
    if (problem.reynolds is None) != (problem.prandtl is None):
        raise OutOfRange("turbulent flow needs both its Reynolds and its Prandtl number")
    if problem.reynolds is not None:
        if problem.power_law != 1.0:
            raise NoModel("there is no turbulent model of a power-law fluid")
        if pe is not None and not math.isclose(pe, problem.reynolds * problem.prandtl, rel_tol=1e-9):
            raise OutOfRange(f"a Péclet number of {pe:.4g} is not Re·Pr = {problem.reynolds * problem.prandtl:.4g}")
    if pe is not None and pe > _NOTHING_ALONG:
        problem = replace(problem, peclet=None)
    if not length > 0.0:
        raise OutOfRange(f"a heated length of {length:.3g} exchanges nothing; it must be above zero")
    if math.isfinite(length) and length > _LONGEST:
        problem = replace(problem, heated_length=math.inf)
    return DuctSolution(problem, fine=True)


class DuctSolution:
    """Answers at any position; every answer is a sum of precomputed responses, so another position or Br is cheap.

    Positions are x* (one or an array); the answers have their shape. Before x = 0 the duct is as ``upstream`` says.
    What acts is told by ``drive`` (1), ``brinkman``, ``source`` and ``expansion`` (0).
    """

    def __init__(self, problem: DuctProblem, fine: bool):
        self.problem = problem
        self._fine = fine

    @cached_property
    def _stretches(self) -> Any:
        from cellfuncs.models.duct_flow import resolved

        return resolved(self.problem, self._fine)

    @cached_property
    def coarse(self) -> "DuctSolution":
        """The same duct on three quarters of the resolution, for the error."""
        return DuctSolution(self.problem, fine=False)

    def bulk(self, x: Any, **acts: float) -> Any:
        """Bulk temperature θ_b."""
        return self._stretches.read("bulk", x, responses(**acts))

    def wall(self, x: Any, **acts: float) -> Any:
        """Temperature of the heated wall θ_w."""
        return self._stretches.read("wall", x, responses(**acts))

    def lag(self, x: Any, **acts: float) -> Any:
        """θ_w − θ_b, to full digits where both are nearly alike."""
        return self._stretches.read("lag", x, responses(**acts))

    def energy(self, x: Any, **acts: float) -> Any:
        """What advection and conduction along carry together through x, over ρcpU·ΔT."""
        return self._stretches.read("energy", x, responses(**acts))

    def flux(self, x: Any, **acts: float) -> Any:
        """Wall flux into the fluid; refuses the step itself, where it is infinite."""
        return self._stretches.read("flux", x, responses(**acts))

    def nusselt(self, x: Any, **acts: float) -> Any:
        """Nu = flux/(θ_w − θ_b); refuses where wall and bulk have the same temperature."""
        return self._stretches.read("nusselt", x, responses(**acts))

    def mean_flux(self, x0: float, x1: float, **acts: float) -> float:
        """Mean wall flux between two planes, from the energy that passes them; the duty is this times
        4·(x1 − x0) (one of two plates heated: 2·(x1 − x0)) of the capacity flow times ΔT."""
        return self._stretches.mean_flux(x0, x1, responses(**acts))

    @property
    def friction_heat(self) -> float:
        """Mean friction heat in μU²/D² (power law: K·(U/D)^(n+1)), which is f·Re/2 with Darcy's f."""
        return float(self._stretches.heats[1])

    def with_error(self, what: str, *at: Any, **acts: float) -> tuple[Any, Any]:
        """(answer, its numerical error): the answer named ``what`` and how far two resolutions differ in it."""
        fine = getattr(self, what)(*at, **acts)
        rounding = 4.0 * _ROUNDING * self._stretches.largest_number
        return fine, abs(fine - getattr(self.coarse, what)(*at, **acts)) + rounding

    @cached_property
    def error(self) -> float:
        """Largest difference of two resolutions in the energy, bulk and wall temperatures of all responses, over
        positions from a hundredth of the heated length (or of the developing length) on."""
        return self._stretches.difference(self.coarse._stretches)


@lru_cache(maxsize=256)
def recovery_rise(
    section: str, reynolds: float | None = None, prandtl: float | None = None, power_law: float = 1.0
) -> tuple[float, float]:
    """(how far friction warms a wall that takes no heat above the bulk, in μU²/k; its numerical error).

    Tube or plates; laminar without ``reynolds``, else turbulent (Re 4e3 to 5e6, Pr 1e-3 to 1e3). The recovery factor of
    a gas is 2·Pr times that. Laminar and Newtonian: 1 and 27/35.
    """
    problem = DuctProblem(section, wall="flux", power_law=power_law, reynolds=reynolds, prandtl=prandtl)
    rise, error = solve(problem).with_error("lag", 1e6, drive=0.0, brinkman=1.0, expansion=1.0)
    return float(rise), float(error)


def responses(
    drive: float = 1.0, brinkman: float = 0.0, source: float = 0.0, expansion: float = 0.0
) -> tuple[float, float, float, float]:
    """What acts in a duct, as amplitudes of the four solved responses."""
    return drive, brinkman, source, brinkman * expansion


Acting = tuple[DuctSolution, dict[str, float]]


def effect(what: str, at: tuple[Any, ...], kept: Acting, left: Acting) -> tuple[float, float]:
    """(change of an answer when something is left out, its numerical error).

    ``kept`` and ``left`` are solutions with what acts in each. Both are differenced on one resolution and two
    resolutions compared; refuses (NoModel) an error above a hundredth of the effect and 1e-6 of the scale.
    """
    fine = getattr(kept[0], what)(*at, **kept[1]) - getattr(left[0], what)(*at, **left[1])
    coarse = getattr(kept[0].coarse, what)(*at, **kept[1]) - getattr(left[0].coarse, what)(*at, **left[1])
    error = abs(fine - coarse)
    return trusted(float(fine), float(error), 1.0, "solved duct"), float(error)
