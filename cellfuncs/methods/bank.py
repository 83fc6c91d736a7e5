"""Tube banks across a stream: heat transfer and pressure drop. Re with the tubes' diameter and the velocity of the
narrowest section; pitches over the diameter, across and along the stream.

Scatters are those that authors or handbooks give, mostly from memory.
"""

import math
from typing import Any

from cellfuncs.methods import cylinder
from cellfuncs.methods.algebra import between, exp, smaller, sqrt, steps, where
from cellfuncs.methods.base import Range, follows, method

_CHOICE = {"arrangement": ("inline", "staggered")}

# arrangement -> starts of the steps of Re, C, exponent; a staggered bank carries (ST/SL)^1/5 in the third step
_STEPS_1972 = {
    "inline": ((10.0, 100.0, 1e3, 2e5), (0.80, 0.51, 0.27, 0.021), (0.40, 0.50, 0.63, 0.84)),
    "staggered": ((10.0, 100.0, 1e3, 2e5), (0.90, 0.51, 0.40, 0.022), (0.40, 0.50, 0.60, 0.84)),
}
_STEPS_1987 = {
    "inline": ((1.6, 100.0, 1e3, 2e5), (0.90, 0.52, 0.27, 0.033), (0.40, 0.50, 0.63, 0.80)),
    "staggered": ((1.6, 40.0, 1e3, 2e5), (1.04, 0.71, 0.35, 0.031), (0.40, 0.50, 0.60, 0.80)),
}
_ROWS = (1.0, 2.0, 3.0, 4.0, 5.0, 7.0, 10.0, 13.0, 16.0, 20.0)
_ROW_FACTOR = {
    "inline": (0.70, 0.80, 0.86, 0.90, 0.92, 0.95, 0.97, 0.98, 0.99, 1.0),
    "staggered": (0.64, 0.76, 0.84, 0.89, 0.92, 0.95, 0.97, 0.98, 0.99, 1.0),
}


@follows("ST/SL")
def pitch_ratio(across: Any, along: Any) -> Any:
    return across / along


@method(
    "Zukauskas row factor",
    gives="factor",
    ranges=(Range("rows", low=1.0),),
    scatter=0.05,
    property_temperature="none",
    source="zukauskas-1972",
    where=_CHOICE,
)
def row_factor(arrangement: str, rows: float) -> float:
    """Mean coefficient of a bank of few rows over that of a deep one, linear between tabulated rows; Re above 1e3."""
    return between(rows, _ROWS, _ROW_FACTOR[arrangement])


@method(
    "Zukauskas bank",
    gives="mean Nu",
    ranges=(Range("Re", 10.0, 2e6), Range("Pr", 0.7, 500.0), Range("ST/SL", low=0.7)),
    scatter=0.2,
    property_temperature="mean bulk",
    source="zukauskas-1972",
    flows=("bank",),
    where=_CHOICE,
    length="diameter",
)
def zukauskas(
    reynolds: float, prandtl: float, arrangement: str, across: float, along: float, rows: float,
    prandtl_ratio: float = 1.0,
) -> float:  # fmt: skip
    """Mean Nu of a tube bank, C Re^m Pr^0.36 (Pr/Prw)^1/4 by steps of Re, times the factor of few rows.

    Below Re 1e3 it takes the numbers of a single cylinder and jumps there by a third."""
    starts, constants, exponents = _STEPS_1972[arrangement]
    constant = steps(reynolds, starts, constants)
    if arrangement == "staggered":
        close = (reynolds >= 1e3) & (reynolds < 2e5) & (across / along < 2.0)
        constant = where(close, 0.35 * (across / along) ** 0.2, constant)
    lead = constant * reynolds ** steps(reynolds, starts, exponents) * prandtl**0.36
    return row_factor(arrangement, rows) * lead * prandtl_ratio**0.25


@method(
    "Zukauskas bank 1987",
    gives="mean Nu",
    ranges=(Range("Re", 1.6, 2e6), Range("Pr", 0.7, 500.0), Range("ST/SL", low=0.7)),
    scatter=0.15,
    property_temperature="mean bulk",
    source="zukauskas-1987",
    flows=("bank",),
    where=_CHOICE,
    length="diameter",
)
def zukauskas_1987(
    reynolds: float, prandtl: float, arrangement: str, across: float, along: float, rows: float,
    prandtl_ratio: float = 1.0,
) -> float:  # fmt: skip
    """Mean Nu with his later constants, Pr^0.36 and from Re 2e5 Pr^0.4; constants from memory.

    In line the steps jump by a quarter at Re 1e3."""
    starts, constants, exponents = _STEPS_1987[arrangement]
    constant = steps(reynolds, starts, constants)
    if arrangement == "staggered":
        constant = where(reynolds >= 1e3, constant * (across / along) ** 0.2, constant)
    power = where(reynolds >= 2e5, 0.4, 0.36)
    lead = constant * reynolds ** steps(reynolds, starts, exponents) * prandtl**power
    return row_factor(arrangement, rows) * lead * prandtl_ratio**0.25


def narrowest(arrangement: str, across: Any, along: Any) -> Any:
    """Narrowest flow area over the area before the bank: between neighbours of a row, or on the diagonals."""
    between_neighbours = (across - 1.0) / across
    if arrangement == "inline":
        return between_neighbours
    return smaller(between_neighbours, 2.0 * (sqrt(along**2 + 0.25 * across**2) - 1.0) / across)


@method(
    "Gnielinski bank",
    gives="mean Nu",
    ranges=(Range("Re", 10.0, 6e5), Range("Pr", 0.6, 1000.0)),
    scatter=0.25,
    property_temperature="mean bulk",
    source="gnielinski-1979",
    flows=("bank",),
    where=_CHOICE,
    length="diameter",
)
def gnielinski(reynolds: float, prandtl: float, arrangement: str, across: float, along: float, rows: float) -> float:
    """Mean Nu by the single row at the velocity of the voids, times a factor of the arrangement; range of Re converted.

    The single row is a cylinder on its streamed length with Re of the mean velocity in the voids; fewer than ten rows
    count (1 + (N − 1) fA)/N, more fA alone.
    """
    void = where(along >= 1.0, 1.0 - math.pi / (4.0 * across), 1.0 - math.pi / (4.0 * across * along))
    inside = reynolds * cylinder.HALF_ROUND * narrowest(arrangement, across, along) / void
    if arrangement == "inline":
        ratio = along / across
        factor = 1.0 + 0.7 * (ratio - 0.3) / (void**1.5 * (ratio + 0.7) ** 2)
    else:
        factor = 1.0 + 2.0 / (3.0 * along)
    factor = where(rows < 10.0, (1.0 + (rows - 1.0) * factor) / rows, factor)
    return factor * cylinder.streamed(inside, prandtl) / cylinder.HALF_ROUND


# -- pressure drop ---------------------------------------------------------------------------------------


@method(
    "Jakob bank friction",
    gives="pressure drop",
    ranges=(Range("Re", 2000.0, 4e4),),
    scatter=0.25,
    property_temperature="mean bulk",
    source="jakob-1938",
    flows=("bank",),
    where=_CHOICE,
)
def jakob_drop(
    reynolds: float, density: float, velocity: float, arrangement: str, across: float, along: float, rows: float
) -> float:
    """Pressure drop [Pa] of a bank, 2f'·N·ρU² with the velocity of the narrowest section."""
    open_ratio = across - 1.0
    if arrangement == "staggered":
        factor = (0.25 + 0.118 / open_ratio**1.08) * reynolds**-0.16
    else:
        factor = (0.044 + 0.08 * along / open_ratio ** (0.43 + 1.13 / along)) * reynolds**-0.15
    return 2.0 * factor * rows * density * velocity**2


@method(
    "Gaddis-Gnielinski bank friction",
    gives="pressure drop",
    ranges=(Range("Re", 1.0, 3e5), Range("ST/D", 1.25, 3.0), Range("SL/D", 0.6, 3.0), Range("rows", low=5.0)),
    scatter=0.35,
    property_temperature="mean bulk",
    source="gaddis-gnielinski-1985",
    flows=("bank",),
    where=_CHOICE,
)
def gaddis_gnielinski_drop(
    reynolds: float, density: float, velocity: float, arrangement: str, across: float, along: float, rows: float
) -> float:
    """Pressure drop [Pa] of a bank, ξ·N·ρU²/2, laminar part and turbulent part blended in; constants from memory."""
    spread = 280.0 * math.pi * ((sqrt(along) - 0.6) ** 2 + 0.75) / (4.0 * across * along - math.pi)
    if arrangement == "inline":
        viscous = spread / (across**1.6 * reynolds)
        shape = 0.22 + 1.2 * (1.0 - 0.94 / along) ** 0.6 / (across - 0.85) ** 1.3
        shape = shape * 10.0 ** (0.47 * (along / across - 1.5)) + 0.03 * (across - 1.0) * (along - 1.0)
        whole = viscous + shape / reynolds ** (0.1 * along / across) * (1.0 - exp(-(reynolds + 1000.0) / 2000.0))
    else:
        diagonal = sqrt(along**2 + 0.25 * across**2)
        on_diagonals = along < 0.5 * sqrt(2.0 * across + 1.0)
        viscous = spread / (where(on_diagonals, diagonal, across) ** 1.6 * reynolds)
        shape = 2.5 + 1.2 / (across - 0.85) ** 1.08 + 0.4 * (along / across - 1.0) ** 3
        shape = shape - 0.01 * (across / along - 1.0) ** 3
        whole = viscous + shape / reynolds**0.25 * (1.0 - exp(-(reynolds + 200.0) / 1000.0))
    return 0.5 * whole * rows * density * velocity**2
