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

STEFAN_BOLTZMANN = 5.670374419e-8  # W/(m2 K4), CODATA 2018
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


def drag_coefficient(velocity, area, density, force):
    """c_D = 2F/(ρU²A)."""
    return 2.0 * force / (density * velocity**2 * area)


def pressure_coefficient(velocity, density, pressure_difference):
    """c_p = 2Δp/(ρU²)."""
    return 2.0 * pressure_difference / (density * velocity**2)


def bejan(length, viscosity, diffusivity, pressure_difference):
    """Be = ΔpL²/(μα)."""
    return pressure_difference * length**2 / (viscosity * diffusivity)


def bingham(velocity, length, viscosity, yield_stress):
    """Bm = τ0L/(μU)."""
    return yield_stress * length / (viscosity * velocity)


def hedstrom(length, density, viscosity, yield_stress):
    """He = τ0ρL²/μ²."""
    return yield_stress * density * length**2 / viscosity**2


def capillary(velocity, viscosity, surface_tension):
    """Ca = μU/σ."""
    return viscosity * velocity / surface_tension


def ohnesorge(length, density, viscosity, surface_tension):
    """Oh = μ/√(ρσL)."""
    return viscosity / (density * surface_tension * length) ** 0.5


def laplace(length, density, viscosity, surface_tension):
    """La = σρL/μ²."""
    return surface_tension * density * length / viscosity**2


def bond(length, density, surface_tension, gravity=STANDARD_GRAVITY):
    """Bo = ρgL²/σ."""
    return density * gravity * length**2 / surface_tension


def eotvos(length, density_difference, surface_tension, gravity=STANDARD_GRAVITY):
    """Eo = ΔρgL²/σ."""
    return density_difference * gravity * length**2 / surface_tension


def morton(density, density_difference, viscosity, surface_tension, gravity=STANDARD_GRAVITY):
    """Mo = gμ⁴Δρ/(ρ²σ³)."""
    return gravity * viscosity**4 * density_difference / (density**2 * surface_tension**3)


def dean(velocity, diameter, coil_diameter, kinematic_viscosity):
    """De = (UD/ν)√(D/D_c)."""
    return velocity * diameter / kinematic_viscosity * (diameter / coil_diameter) ** 0.5


def womersley(length, kinematic_viscosity, angular_velocity):
    """Wo = R√(ω/ν)."""
    return length * (angular_velocity / kinematic_viscosity) ** 0.5


def archimedes(length, density, density_difference, viscosity, gravity=STANDARD_GRAVITY):
    """Ar = gL³ρΔρ/μ²."""
    return gravity * length**3 * density * density_difference / viscosity**2


def galilei(length, kinematic_viscosity, gravity=STANDARD_GRAVITY):
    """Ga = gL³/ν²."""
    return gravity * length**3 / kinematic_viscosity**2


def rossby(velocity, length, angular_velocity):
    """Ro = U/(2ΩL)."""
    return velocity / (2.0 * angular_velocity * length)


def ekman(length, kinematic_viscosity, angular_velocity):
    """Ek = ν/(2ΩL²)."""
    return kinematic_viscosity / (2.0 * angular_velocity * length**2)


def taylor(length, kinematic_viscosity, angular_velocity):
    """Ta = 4Ω²L⁴/ν²."""
    return 4.0 * angular_velocity**2 * length**4 / kinematic_viscosity**2


def atwood(density_1, density_2):
    """At = (ρ1 − ρ2)/(ρ1 + ρ2)."""
    return (density_1 - density_2) / (density_1 + density_2)


def cavitation(velocity, density, pressure_absolute, vapour_pressure):
    """σ_c = 2(p − p_v)/(ρU²)."""
    return 2.0 * (pressure_absolute - vapour_pressure) / (density * velocity**2)


def stefan(temperature_difference, specific_heat, latent_heat):
    """Ste = cpΔT/h."""
    return specific_heat * temperature_difference / latent_heat


def jakob(temperature_difference, specific_heat, latent_heat):
    """Ja = cpΔT/h_v."""
    return specific_heat * temperature_difference / latent_heat


def clausius(velocity, length, temperature_difference, density, conductivity):
    """Cl = U³Lρ/(kΔT)."""
    return velocity**3 * length * density / (conductivity * temperature_difference)


def boltzmann(velocity, temperature, density, specific_heat, emissivity):
    """Bz = ρcpU/(εσT³)."""
    return density * specific_heat * velocity / (emissivity * STEFAN_BOLTZMANN * temperature**3)


def stark(length, temperature, conductivity, emissivity):
    """Sk = εσT³L/k."""
    return emissivity * STEFAN_BOLTZMANN * temperature**3 * length / conductivity


def pomerantsev(length, temperature_difference, conductivity, volumetric_source):
    """Po = q‴L²/(kΔT)."""
    return volumetric_source * length**2 / (conductivity * temperature_difference)


def schmidt(kinematic_viscosity, mass_diffusivity):
    """Sc = ν/D."""
    return kinematic_viscosity / mass_diffusivity


def lewis(diffusivity, mass_diffusivity):
    """Le = α/D."""
    return diffusivity / mass_diffusivity


def sherwood(length, mass_diffusivity, mass_transfer_coefficient):
    """Sh = k_mL/D."""
    return mass_transfer_coefficient * length / mass_diffusivity


def mass_peclet(velocity, length, mass_diffusivity):
    """Pe* = UL/D."""
    return velocity * length / mass_diffusivity


def mass_stanton(velocity, mass_transfer_coefficient):
    """St* = k_m/U."""
    return mass_transfer_coefficient / velocity


def mass_fourier(length, time, mass_diffusivity):
    """Fo* = Dt/L²."""
    return mass_diffusivity * time / length**2


def mass_grashof(length, density, density_difference, kinematic_viscosity, gravity=STANDARD_GRAVITY):
    """Gr* = gΔρL³/(ρν²)."""
    return gravity * density_difference * length**3 / (density * kinematic_viscosity**2)


def heat_colburn(velocity, density, viscosity, specific_heat, conductivity, coefficient):
    """j_H = St·Pr^2/3."""
    return (
        coefficient / (density * velocity * specific_heat) * (viscosity * specific_heat / conductivity) ** (2.0 / 3.0)
    )


def mass_colburn(velocity, kinematic_viscosity, mass_diffusivity, mass_transfer_coefficient):
    """j_M = St*·Sc^2/3."""
    return mass_transfer_coefficient / velocity * (kinematic_viscosity / mass_diffusivity) ** (2.0 / 3.0)


@cache
def table() -> Mapping[str, Group]:
    """All groups by the name of their function, in the order of the data file."""
    return {row["key"]: Group(**row, function=globals()[row["key"]]) for row in read_table("groups.csv")}
