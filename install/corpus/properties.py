"""Properties from outside the package: water by IAPWS-IF97, air and carbon dioxide by published formulas."""

from functools import lru_cache

_ATMOSPHERE = 101_325.0


@lru_cache(maxsize=4096)
def water(temperature: float, pressure: float = 200_000.0) -> dict[str, float]:
    """Liquid water at a temperature [K] and pressure [Pa], SI (IAPWS-IF97 and its transport formulations)."""
    from iapws import IAPWS97

    at = IAPWS97(T=temperature, P=pressure / 1e6)
    return {"density": at.rho, "viscosity": at.mu, "conductivity": at.k, "specific_heat": at.cp * 1000.0}


def air(temperature: float, pressure: float = _ATMOSPHERE) -> dict[str, float]:
    """Dry air, SI: ideal gas, Sutherland's viscosity and the conductivity of the U.S. Standard Atmosphere 1976."""
    t = temperature
    return {
        "density": pressure / (287.05 * t),
        "viscosity": 1.458e-6 * t**1.5 / (t + 110.4),
        "conductivity": 2.64638e-3 * t**1.5 / (t + 245.4 * 10.0 ** (-12.0 / t)),
        "specific_heat": 1002.5 + 275e-6 * (t - 200.0) ** 2,
    }


def carbon_dioxide(temperature: float, pressure: float = _ATMOSPHERE) -> dict[str, float]:
    """Carbon dioxide as an ideal gas, SI, Sutherland's viscosity (constant 240 K, 14.8 μPa s at 293.15 K)."""
    t = temperature
    return {
        "density": pressure / (188.92 * t),
        "viscosity": 1.480e-5 * (293.15 + 240.0) / (t + 240.0) * (t / 293.15) ** 1.5,
        "conductivity": 0.0146 + 8.0e-5 * (t - 273.15),
        "specific_heat": 815.0 + 0.95 * (t - 273.15),
    }


def methanol(temperature: float) -> dict[str, float]:
    """Methanol near room temperature, SI (handbook values at 20 °C, slopes from memory)."""
    c = temperature - 273.15
    return {
        "density": 791.4 - 0.93 * (c - 20.0),
        "viscosity": 0.000585 * 2.718281828 ** (-0.0132 * (c - 20.0)),
        "conductivity": 0.203 - 0.0002 * (c - 20.0),
        "specific_heat": 2510.0 + 5.0 * (c - 20.0),
    }
