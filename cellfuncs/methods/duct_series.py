"""Thermal entry of a developed laminar flow, exactly: Graetz's series and its relatives.

Uniform wall temperature: θb = Σ a exp(−m x*), Nu follows from the balance on the heated perimeter. Uniform flux:
1/Nu = 1/Nu∞ − Σ b exp(−m x*). Decays m and weights a, b stand in ``data/graetz_series.csv`` (40 or 60 terms, enough
from x* = 1e-4); ``tests/methods/test_duct_laminar.py`` computes them anew.
"""

from functools import lru_cache
from typing import Any

from cellfuncs.methods.algebra import exp, larger, log
from cellfuncs.methods.base import Range, method
from cellfuncs.methods.duct_laminar import LAMINAR, LENGTH, developed_value
from cellfuncs.sources import read_table

# part of the perimeter that is heated
HEATED_PART = {"both": 1.0, "one": 0.5}
ENTRY = Range("x*", low=1e-4)
SECTIONS = {
    "section": ("tube", "plates"),
    "heated": ("both", "one"),
    "profile": ("developed",),
    "shape": ("straight",),
}


@lru_cache(maxsize=1)
def _series() -> dict[tuple[str, str, str], tuple[tuple[float, float], ...]]:
    found: dict[tuple[str, str, str], list[tuple[float, float]]] = {}
    for row in read_table("graetz_series.csv"):
        key = (row["section"], row["wall"], row["heated"])
        found.setdefault(key, []).append((float(row["decay"]), float(row["weight"])))
    return {key: tuple(terms) for key, terms in found.items()}


@lru_cache(maxsize=8)
def _columns(key: tuple[str, str, str]) -> tuple[Any, Any]:
    import numpy as np

    decay, weight = np.array(_series()[key]).T
    return decay, weight


def _sums(x_star: Any, key: tuple[str, str, str]) -> tuple[Any, Any, float]:
    """Σ weight·exp(−(m − m1) x*), the same weighted with m, and m1: the first decay taken out of the sums."""
    if isinstance(x_star, (float, int)):
        terms = _series()[key]
        first = terms[0][0]
        parts = [(m, w * exp(-(m - first) * x_star)) for m, w in terms]
        return sum(p for _, p in parts), sum(m * p for m, p in parts), first
    import numpy as np

    decay, weight = _columns(key)
    powers = np.exp(-np.multiply.outer(np.asarray(x_star), decay - decay[0]))
    return powers @ weight, powers @ (decay * weight), float(decay[0])


@method(
    "Graetz series, mean",
    gives="mean Nu",
    ranges=(LAMINAR, ENTRY),
    scatter=0.005,
    property_temperature="mean bulk",
    source="graetz-series",
    flows=("duct",),
    where={"wall": ("temperature",), **SECTIONS},
    length=LENGTH,
)
def graetz_mean(x_star: float, section: str, heated: str = "both") -> float:
    """Mean Nu (on the logarithmic difference) of the thermal entry at uniform wall temperature, exact."""
    total, _, first = _sums(x_star, (section, "temperature", heated))
    return (first * x_star - log(total)) / (4.0 * HEATED_PART[heated] * x_star)


@method(
    "Graetz series, local",
    gives="local Nu",
    ranges=(LAMINAR, ENTRY),
    scatter=0.005,
    property_temperature="mean bulk",
    source="graetz-series",
    flows=("duct",),
    where={"wall": ("temperature",), **SECTIONS},
    length=LENGTH,
)
def graetz_local(x_star: float, section: str, heated: str = "both") -> float:
    """Local Nu of the thermal entry at uniform wall temperature, exact."""
    total, decaying, _ = _sums(x_star, (section, "temperature", heated))
    return decaying / total / (4.0 * HEATED_PART[heated])


@method(
    "Graetz series, flux",
    gives="local Nu",
    ranges=(LAMINAR, ENTRY),
    scatter=0.005,
    property_temperature="mean bulk",
    source="graetz-series",
    flows=("duct",),
    where={"wall": ("flux",), **SECTIONS},
    length=LENGTH,
)
def graetz_flux(x_star: float, section: str, heated: str = "both") -> float:
    """Local Nu of the thermal entry at uniform wall flux, exact."""
    total, _, first = _sums(x_star, (section, "flux", heated))
    return 1.0 / (1.0 / developed_value(section, "flux", heated) - larger(total, 0.0) * exp(-first * x_star))
