"""The shear rate of a melt in a case, and the viscosity that its laminar flow has.

A melt thins with the shear rate, which the flow itself sets. The apparent rate is 8U/D in a tube, 6U/h between
plates, U/h in a sheared gap. In tube and plates the profile of a thinning fluid is blunter: the rate at the wall is
(3n + 1)/(4n) or (2n + 1)/(3n) of the apparent one (Rabinowitsch 1929), n the local exponent. The viscosity given
is that with which Newtonian formulas give the right friction: wall stress over apparent rate (Metzner and Reed
1955), exact for a power law, with the local exponent at the apparent rate for other laws.
"""

import math
from typing import Any, NamedTuple

from cellfuncs.errors import CaseRefused, CellfuncsError

_STEP = 0.02  # of the logarithm of the rate, for the local exponent


class Sheared(NamedTuple):
    """A melt as sheared in a case; rates in 1/s, viscosity [Pa s]."""

    viscosity: float
    apparent: float
    wall: float
    exponent: float

    def words(self) -> str:
        """What stands in reasons."""
        return (
            f"melt: n {self.exponent:.3g}, {self.viscosity:.3g} Pa s at {self.apparent:.3g} 1/s"
            f" (wall {self.wall:.3g}, Rabinowitsch)"
        )


def thins(substance: Any) -> bool:
    """Whether a substance is a melt whose shear rate its name leaves open."""
    return getattr(substance, "shear_rate", 0.0) is None


def sheared(case: Any, melt: Any, temperature: float, density: float) -> Sheared:
    """The melt at the shear rate that the case has, or at the one it states."""
    stated = case.get("shear_rate")
    if stated is not None:
        return Sheared(melt.viscosity_at(temperature, stated), stated, stated, _exponent(melt, temperature, stated))
    apparent, blunt = _apparent(case, density)
    exponent = _exponent(melt, temperature, apparent)
    factor = blunt(exponent)
    return Sheared(factor * melt.viscosity_at(temperature, factor * apparent), apparent, factor * apparent, exponent)


def _apparent(case: Any, density: float) -> tuple[float, Any]:
    """The rate of a Newtonian fluid at the wall, and the factor of a thinning one by its exponent."""
    if case.flow == "gap":
        return case.velocity(density) / case.need("gap"), lambda n: 1.0
    if case.flow == "duct":
        shape = case.duct
        if shape.section in ("tube", "other"):
            return 8.0 * case.velocity(density) / shape.diameter, lambda n: (3.0 * n + 1.0) / (4.0 * n)
        if shape.section == "plates":
            return 12.0 * case.velocity(density) / shape.diameter, lambda n: (2.0 * n + 1.0) / (3.0 * n)
    raise CaseRefused(
        f"the shear rate of a melt is known for tubes, plates and sheared gaps; for this {case.flow} "
        'add the row "shear rate"'
    )


def _exponent(melt: Any, temperature: float, rate: float) -> float:
    """1 + d ln η/d ln rate, by a difference inside the melt's range."""
    ends = []
    for side in (-_STEP, _STEP):
        try:
            moved = rate * math.exp(side)
            ends.append((math.log(moved), math.log(melt.viscosity_at(temperature, moved))))
        except CellfuncsError:
            ends.append((math.log(rate), math.log(melt.viscosity_at(temperature, rate))))
    return 1.0 + (ends[1][1] - ends[0][1]) / (ends[1][0] - ends[0][0])
