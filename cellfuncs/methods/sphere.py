"""Heat transfer of a sphere or drop in a stream; Re and Nu on the diameter, the limit without flow is 2.

Scatters are those that authors or handbooks give, mostly from memory.
"""

from cellfuncs.methods import plate
from cellfuncs.methods.algebra import larger, sqrt
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.cylinder import whitaker_flow

_LENGTH = "diameter"


@method(
    "Whitaker",
    gives="mean Nu",
    ranges=(Range("Re", 3.5, 7.6e4), Range("Pr", 0.7, 380.0), Range("viscosity ratio", 1.0, 3.2)),
    scatter=0.3,
    property_temperature="stream",
    source="whitaker-1972",
    flows=("sphere",),
    length=_LENGTH,
)
def whitaker(reynolds: float, prandtl: float, viscosity_ratio: float = 1.0) -> float:
    """Mean Nu, 2 + (0.4 Re^1/2 + 0.06 Re^2/3) Pr^0.4 (μ/μw)^1/4; the ratio is stream over wall."""
    return 2.0 + whitaker_flow(reynolds, prandtl) * viscosity_ratio**0.25


@method(
    "Ranz and Marshall",
    gives="mean Nu",
    ranges=(Range("Re", 0.0, 200.0), Range("Pr", 0.6, 380.0)),
    scatter=0.15,
    property_temperature="film",
    source="ranz-marshall-1952",
    flows=("sphere",),
    length=_LENGTH,
)
def ranz_marshall(reynolds: float, prandtl: float) -> float:
    """Mean Nu of drops and small spheres, 2 + 0.6 Re^1/2 Pr^1/3; range of Pr and scatter from memory."""
    return 2.0 + 0.6 * sqrt(reynolds) * prandtl ** (1.0 / 3.0)


@method(
    "Clift, Grace and Weber sphere",
    gives="mean Nu",
    ranges=(Range("Re", 0.0, 400.0), Range("Pr", 0.25, 100.0)),
    scatter=0.05,
    property_temperature="film",
    source="clift-1978",
    flows=("sphere",),
    length=_LENGTH,
)
def clift(reynolds: float, prandtl: float) -> float:
    """Mean Nu fitted to numerical solutions, 1 + (1 + Pe)^1/3 max(1, Re^0.077); scatter from memory."""
    return 1.0 + (1.0 + reynolds * prandtl) ** (1.0 / 3.0) * larger(1.0, reynolds**0.077)


@method(
    "Achenbach sphere",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 2e5), Range("Pr", 0.68, 0.76)),
    scatter=0.1,
    property_temperature="film",
    source="achenbach-1978",
    flows=("sphere",),
    where={"phase": ("gas",)},
    length=_LENGTH,
)
def achenbach(reynolds: float) -> float:
    """Mean Nu in air below the critical Re, 2 + (Re/4 + 3·10⁻⁴ Re^1.6)^1/2; scatter from memory."""
    return 2.0 + sqrt(0.25 * reynolds + 3e-4 * reynolds**1.6)


@method(
    "Gnielinski sphere",
    gives="mean Nu",
    ranges=(Range("Re", 100.0, 1e6), Range("Pr", 0.6, 1e4)),
    scatter=0.35,
    property_temperature="film",
    source="gnielinski-1975",
    flows=("sphere",),
    length=_LENGTH,
)
def gnielinski(reynolds: float, prandtl: float) -> float:
    """Mean Nu, 2 + √(laminar² + turbulent²) of a plate as long as the diameter.

    For streams of usual turbulence; in a quiet one up to a half high."""
    return 2.0 + plate.gnielinski(reynolds, prandtl)


@method(
    "Witte sphere",
    gives="mean Nu",
    ranges=(Range("Re", 3.6e4, 1.5e5), Range("Pr", 0.003, 0.03)),
    scatter=0.2,
    property_temperature="film",
    source="witte-1968",
    flows=("sphere",),
    where={"phase": ("liquid",)},
    length=_LENGTH,
)
def witte(reynolds: float, prandtl: float) -> float:
    """Mean Nu in liquid sodium, 2 + 0.386 Pe^1/2; range of Pr and scatter from memory."""
    return 2.0 + 0.386 * sqrt(reynolds * prandtl)
