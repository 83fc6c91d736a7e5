"""Characteristic numbers from the quantities that define them.

Each function is its definition: SI floats or numpy arrays in, the dimensionless number out. What a
group compares and which decision uses it stands in ``data/groups.csv`` under the function's name,
with its symbol and its item in ISO 80000-11 where it has one.

To add a group, write its definition here and its row there; the cell function follows by itself.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from cellfuncs.sources import read_table

STANDARD_GRAVITY = 9.80665  # m/s2, exact by definition (NIST SP 811, table B.8)


@dataclass(frozen=True)
class Group:
    """A characteristic number: its definition and what it says."""

    key: str
    name: str
    symbol: str
    formula: str
    compares: str
    decides: str
    source: str
    function: Callable[..., Any]


def reynolds(velocity, length, density, viscosity):
    """Re = ρUL/μ. Velocity [m/s], length [m], density [kg/m3], dynamic viscosity [Pa s]."""
    return density * velocity * length / viscosity


def prandtl(viscosity, specific_heat, conductivity):
    """Pr = μcp/k. Dynamic viscosity [Pa s], specific heat [J/(kg K)], conductivity [W/(m K)]."""
    return viscosity * specific_heat / conductivity


def peclet(velocity, length, diffusivity):
    """Pe = UL/α. Velocity [m/s], length [m], thermal diffusivity [m2/s]."""
    return velocity * length / diffusivity


def eckert(velocity, temperature_difference, specific_heat):
    """Ec = U²/(cpΔT). Velocity [m/s], temperature difference [K], specific heat [J/(kg K)]."""
    return velocity**2 / (specific_heat * temperature_difference)


def brinkman(velocity, temperature_difference, viscosity, conductivity):
    """Br = μU²/(kΔT). Velocity [m/s], difference [K], viscosity [Pa s], conductivity [W/(m K)]."""
    return viscosity * velocity**2 / (conductivity * temperature_difference)


def nahme(velocity, viscosity, conductivity, temperature_coefficient):
    """Na = bμU²/k with μ = μ0·exp(−b(T−T0)); b in 1/K."""
    return temperature_coefficient * viscosity * velocity**2 / conductivity


def grashof(length, temperature_difference, kinematic_viscosity, expansion, gravity=STANDARD_GRAVITY):
    """Gr = gβΔTL³/ν². Length [m], difference [K], ν [m2/s], β [1/K], g [m/s2]."""
    return gravity * expansion * temperature_difference * length**3 / kinematic_viscosity**2


def rayleigh(length, temperature_difference, kinematic_viscosity, diffusivity, expansion, gravity=STANDARD_GRAVITY):
    """Ra = gβΔTL³/(να) = Gr·Pr."""
    return gravity * expansion * temperature_difference * length**3 / (kinematic_viscosity * diffusivity)


def richardson(velocity, length, temperature_difference, expansion, gravity=STANDARD_GRAVITY):
    """Ri = gβΔTL/U² = Gr/Re², the form that decides on mixed convection."""
    return gravity * expansion * temperature_difference * length / velocity**2


def nusselt(length, conductivity, coefficient):
    """Nu = hL/k with the conductivity of the fluid."""
    return coefficient * length / conductivity


def stanton(velocity, density, specific_heat, coefficient):
    """St = h/(ρUcp) = Nu/(Re·Pr)."""
    return coefficient / (density * velocity * specific_heat)


def graetz(velocity, diameter, stream_length, diffusivity):
    """Gz = U·D²/(αL) = Re·Pr·D/L."""
    return velocity * diameter**2 / (diffusivity * stream_length)


def biot(length, conductivity, coefficient):
    """Bi = hL/k with the conductivity of the solid."""
    return coefficient * length / conductivity


def fourier(length, time, diffusivity):
    """Fo = αt/L²."""
    return diffusivity * time / length**2


def mach(velocity, speed_of_sound):
    """Ma = U/c."""
    return velocity / speed_of_sound


def knudsen(length, mean_free_path):
    """Kn = λ/L."""
    return mean_free_path / length


def euler(velocity, density, pressure_difference):
    """Eu = Δp/(ρU²)."""
    return pressure_difference / (density * velocity**2)


def froude(velocity, length, gravity=STANDARD_GRAVITY):
    """Fr = U/√(gL), not squared (ISO 80000-11)."""
    return velocity / (gravity * length) ** 0.5


def weber(velocity, length, density, surface_tension):
    """We = ρU²L/σ."""
    return density * velocity**2 * length / surface_tension


def strouhal(velocity, length, frequency):
    """Sr = fL/U."""
    return frequency * length / velocity


@cache
def table() -> Mapping[str, Group]:
    """All groups by the name of their function, in the order of the data file."""
    return {row["key"]: Group(**row, function=globals()[row["key"]]) for row in read_table("groups.csv")}
