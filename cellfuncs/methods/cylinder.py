"""Heat transfer of a cylinder, or of a bar of another section, across a stream. Re and Nu on the diameter.

Of a bar the diameter is its width across the stream. ``shape`` is one of the sections of
``data/cross_flow_sections.csv``; the other methods are for the round cylinder alone.

Scatters are those that authors or handbooks give, mostly from memory.
"""

from typing import Any

from cellfuncs.methods import plate
from cellfuncs.methods.algebra import sqrt, steps, where
from cellfuncs.methods.base import Range, method
from cellfuncs.sources import read_table

_LENGTH = "diameter"
_ROUND = {"shape": ("circle",)}


@method(
    "Churchill-Bernstein",
    gives="mean Nu",
    ranges=(Range("Pe", low=0.2), Range("Re", high=1e7)),
    scatter=0.2,
    property_temperature="film",
    source="churchill-bernstein-1977",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def churchill_bernstein(reynolds: float, prandtl: float) -> float:
    """Mean Nu at any Re and Pr, 0.3 + 0.62 Re^1/2 Pr^1/3/(…)^1/4 (1+(Re/282000)^5/8)^4/5."""
    return 0.3 + _lead(reynolds, prandtl) * (1.0 + (reynolds / 282_000.0) ** 0.625) ** 0.8


def _lead(reynolds: Any, prandtl: Any) -> Any:
    return 0.62 * sqrt(reynolds) * prandtl ** (1.0 / 3.0) / (1.0 + (0.4 / prandtl) ** (2.0 / 3.0)) ** 0.25


@method(
    "Churchill-Bernstein, middle Re",
    gives="mean Nu",
    ranges=(Range("Re", 2e4, 4e5), Range("Pe", low=0.2)),
    scatter=0.2,
    property_temperature="film",
    source="churchill-bernstein-1977",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def churchill_bernstein_middle(reynolds: float, prandtl: float) -> float:
    """Mean Nu where their main equation lies low, its last factor replaced by 1 + (Re/282000)^1/2."""
    return 0.3 + _lead(reynolds, prandtl) * (1.0 + sqrt(reynolds / 282_000.0))


def _power_law(name: str, shape: str) -> None:
    """Record C Re^m Pr^1/3 of one section, by its rows of the table."""
    rows = [row for row in read_table("cross_flow_sections.csv") if (row["method"], row["shape"]) == (name, shape)]
    starts, constants, exponents = (
        tuple(float(row[column]) for row in rows) for column in ("reynolds_low", "constant", "exponent")
    )

    def nusselt(reynolds: float, prandtl: float) -> float:
        return (
            steps(reynolds, starts, constants) * reynolds ** steps(reynolds, starts, exponents) * prandtl ** (1.0 / 3.0)
        )

    nusselt.__doc__ = f"Mean Nu of a {shape} across a stream, C Re^m Pr^1/3 by steps of Re, measured in air."
    method(
        name if shape == "circle" else f"{name} {shape}",
        gives="mean Nu",
        ranges=(Range("Re", starts[0], float(rows[-1]["reynolds_high"])), Range("Pr", low=0.7)),
        scatter=0.2 if name == "Sparrow" else 0.25 if shape == "circle" else 0.3,
        property_temperature="film",
        source=rows[0]["source"],
        flows=("cylinder",),
        where={"shape": (shape,)},
        length=_LENGTH if shape == "circle" else "width across the stream",
    )(nusselt)


for _row in {(row["method"], row["shape"]): row for row in read_table("cross_flow_sections.csv")}:
    _power_law(*_row)


@method(
    "Sparrow upright plate",
    gives="mean Nu",
    ranges=(Range("Re", 1e4, 5e4), Range("Pr", low=0.7)),
    scatter=0.2,
    property_temperature="film",
    source="sparrow-2004",
    flows=("cylinder",),
    where={"shape": ("upright plate",)},
    length="width across the stream",
)
def upright_plate(reynolds: float, prandtl: float) -> float:
    """Mean Nu of both faces of a thin plate across a gas: 0.667 Re^1/2 Pr^1/3 before, 0.191 Re^0.667 Pr^1/3 behind."""
    return 0.5 * (0.667 * sqrt(reynolds) + 0.191 * reynolds**0.667) * prandtl ** (1.0 / 3.0)


_ZUKAUSKAS_RE = (1.0, 40.0, 1e3, 2e5)


@method(
    "Zukauskas cylinder",
    gives="mean Nu",
    ranges=(Range("Re", 1.0, 1e6), Range("Pr", 0.7, 500.0)),
    scatter=0.2,
    property_temperature="stream",
    source="zukauskas-1972",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def zukauskas(reynolds: float, prandtl: float, prandtl_ratio: float = 1.0) -> float:
    """Mean Nu, C Re^m Pr^n (Pr/Prw)^1/4 by steps of Re; n is 0.37 up to Pr 10 and 0.36 beyond."""
    constant = steps(reynolds, _ZUKAUSKAS_RE, (0.75, 0.51, 0.26, 0.076))
    power = steps(reynolds, _ZUKAUSKAS_RE, (0.4, 0.5, 0.6, 0.7))
    return constant * reynolds**power * prandtl ** where(prandtl <= 10.0, 0.37, 0.36) * prandtl_ratio**0.25


@method(
    "Whitaker cylinder",
    gives="mean Nu",
    ranges=(Range("Re", 1.0, 1e5), Range("Pr", 0.67, 300.0), Range("viscosity ratio", 0.25, 5.2)),
    scatter=0.25,
    property_temperature="stream",
    source="whitaker-1972",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def whitaker(reynolds: float, prandtl: float, viscosity_ratio: float = 1.0) -> float:
    """Mean Nu, (0.4 Re^1/2 + 0.06 Re^2/3) Pr^0.4 (μ/μw)^1/4."""
    return whitaker_flow(reynolds, prandtl) * viscosity_ratio**0.25


def whitaker_flow(reynolds: Any, prandtl: Any) -> Any:
    """What flow adds to Nu by Whitaker, for cylinder and sphere alike."""
    return (0.4 * sqrt(reynolds) + 0.06 * reynolds ** (2.0 / 3.0)) * prandtl**0.4


@method(
    "Fand",
    gives="mean Nu",
    ranges=(Range("Re", 0.1, 1e5), Range("Pr", 0.7, 1000.0)),
    scatter=0.2,
    property_temperature="film",
    source="fand-1965",
    flows=("cylinder",),
    where=_ROUND | {"phase": ("liquid",)},
    length=_LENGTH,
)
def fand(reynolds: float, prandtl: float) -> float:
    """Mean Nu in liquids, (0.35 + 0.34 Re^0.5 + 0.15 Re^0.58) Pr^0.3; scatter and range of Pr from memory."""
    return (0.35 + 0.34 * sqrt(reynolds) + 0.15 * reynolds**0.58) * prandtl**0.3


@method(
    "Kramers",
    gives="mean Nu",
    ranges=(Range("Re", 0.1, 1e4), Range("Pr", 0.71, 525.0)),
    scatter=0.2,
    property_temperature="film",
    source="kramers-1946",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def kramers(reynolds: float, prandtl: float) -> float:
    """Mean Nu of wires in gases and liquids, 0.42 Pr^0.2 + 0.57 Pr^0.33 Re^0.5; scatter from memory."""
    return 0.42 * prandtl**0.2 + 0.57 * prandtl**0.33 * sqrt(reynolds)


@method(
    "Collis and Williams wire",
    gives="mean Nu",
    ranges=(Range("Re", 0.02, 140.0), Range("Pr", 0.68, 0.76)),
    scatter=0.1,
    property_temperature="film",
    source="collis-williams-1959",
    flows=("cylinder",),
    where=_ROUND | {"phase": ("gas",)},
    length=_LENGTH,
)
def wire(reynolds: float, temperature_ratio: float = 1.0) -> float:
    """Mean Nu of a fine wire in air, (0.24 + 0.56 Re^0.45)(Tf/T)^0.17 to Re 44, then 0.48 Re^0.51 (Tf/T)^0.17."""
    low = 0.24 + 0.56 * reynolds**0.45
    high = 0.48 * reynolds**0.51
    return where(reynolds < 44.0, low, high) * (0.5 * (1.0 + temperature_ratio)) ** 0.17


HALF_ROUND = 1.5707963267948966  # streamed length of a cylinder over its diameter


@method(
    "Gnielinski cylinder",
    gives="mean Nu",
    ranges=(Range("Re", 6.4, 6.4e6), Range("Pr", 0.6, 1000.0)),
    scatter=0.3,
    property_temperature="film",
    source="gnielinski-1975",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def gnielinski(reynolds: float, prandtl: float) -> float:
    """Mean Nu as of a plate as long as half the circumference, 0.3 + √(lam² + turb²), turned to the diameter.

    For streams of usual turbulence; in a quiet one up to a fifth high."""
    return streamed(reynolds * HALF_ROUND, prandtl) / HALF_ROUND


def streamed(reynolds: Any, prandtl: Any) -> Any:
    """Nu of a cylinder with Re, both on the streamed length."""
    return 0.3 + plate.gnielinski(reynolds, prandtl)


@method(
    "Grosh and Cess cylinder",
    gives="mean Nu",
    ranges=(Range("Pe", 100.0, 1e5), Range("Pr", 1e-4, 0.03)),
    scatter=0.3,
    property_temperature="film",
    source="grosh-cess-1958",
    flows=("cylinder",),
    where=_ROUND,
    length=_LENGTH,
)
def liquid_metal(reynolds: float, prandtl: float) -> float:
    """Mean Nu in liquid metals by potential flow, (4/π)(2Pe/π)^1/2 = 1.016 Pe^1/2; scatter from memory."""
    return 1.0158978 * sqrt(reynolds * prandtl)
