"""Solid bodies, mixed convection, and what a duct's wall and source add: closed forms and limits."""

import math

import pytest

from cellfuncs.methods import mixed


def body(**more):
    rows = {
        "flow kind": ("body",),
        "density": (7900.0, "kg/m3"),
        "conductivity": (15.0, "W/mK"),
        "specific heat": (480.0, "J/kgK"),
        "length": (4.0, "mm"),
        "coefficient": (60.0, "W/m2K"),
        "initial temperature": (400.0, "K"),
        "stream temperature": (300.0, "K"),
        "time scale": (300.0, "s"),
    }
    return [[label, *cells] for label, cells in (rows | more).items() if cells is not None]


def test_lumped_body(cf):
    """One temperature: (T − Tf)/(T0 − Tf) = exp(−Bi·Fo) (Carslaw and Jaeger, lumped limit)."""
    bi, fo = cf("CASE", body(), "Biot number"), cf("CASE", body(), "Fourier number")
    assert bi == pytest.approx(60 * 0.004 / 15)
    assert cf("CASE", body(), "final temperature") == pytest.approx(300 + 100 * math.exp(-bi * fo), rel=1e-12)
    assert cf("CASE", body(), "time constant of the body") == pytest.approx(7900 * 480 * 0.004 / 60)


def test_body_by_volume_and_surface(cf):
    by_volume = body(length=None, volume=(8e-6, "m3"), **{"surface area": (2e-3, "m2")})
    assert cf("CASE", by_volume, "Bi") == pytest.approx(cf("CASE", body(), "Bi"))
    assert cf("CASE", by_volume, "duty") == pytest.approx(60 * 100 * 2e-3)


def test_body_terms(cf):
    assert cf("TERM", body(), "advection", "verdict") == "leave out"
    slow = body(**{"time scale": (1e6, "s"), "answer": ("duty",)})
    assert cf("TERM", slow, "storage") == pytest.approx(7900 * 480 * 0.004 / 60 / 1e6)
    # of the final temperature: what the start still does to it, exp(−t/τ)
    tau = 7900 * 480 * 0.004 / 60
    assert cf("TERM", body(), "storage") == pytest.approx(math.exp(-300.0 / tau), rel=1e-9)
    assert cf("TERM", slow, "storage", "verdict") == "leave out"
    assert "lags" in cf("TERM", body(coefficient=(2000.0, "W/m2K")), "conduction across", "reason")


def test_blend_limits():
    """Churchill 1977: the cube blend tends to the stronger partner; opposing flows weaken each other."""
    assert mixed.blend(100.0, 1.0, "assisting") == pytest.approx(100.0, rel=1e-5)
    assert mixed.blend(10.0, 10.0, "assisting") == pytest.approx(10 * 2 ** (1 / 3))
    assert mixed.blend(10.0, 10.0, "opposing") == 0.0
    assert mixed.blend(10.0, 5.0, "opposing") < 10.0 < mixed.blend(10.0, 5.0, "transverse")


def test_electric_power_is_a_source(cf, stated_duct):
    area = math.pi / 4 * 0.02**2
    power = stated_duct(**{"electric power": (100.0, "W")})
    source = stated_duct(**{"volumetric source": (100.0 / (area * 4.0), "W/m3")})
    assert cf("TERM", power, "volumetric source") == pytest.approx(cf("TERM", source, "volumetric source"), rel=1e-12)


def test_the_wall_stores_too(cf, stated_duct):
    plain = {"time scale": (3600.0, "s"), "wall thickness": (1.0, "mm"), "wall conductivity": (15.0, "W/mK")}
    heavy = plain | {"wall density": (7900.0, "kg/m3"), "wall specific heat": (500.0, "J/kgK")}
    ratio = 7900 * 500 * 4 * 1.0 * 21 / 400 / (1000 * 5 * 0.6 / (1000 * 0.02 / 500))
    both = [cf("TERM", stated_duct(**rows), "storage") for rows in (plain, heavy)]
    assert both[1] / both[0] == pytest.approx(1 + ratio, rel=1e-9)
    quick = stated_duct(**(heavy | {"time scale": (0.01, "s")}))
    assert "too slow" in cf("TERM", quick, "storage", "reason")


def test_stagnation_temperature_leaves_little_to_the_wall(cf, stated_duct):
    """Air: recovery is 0.9 of the dynamic temperature; a sheet in stagnation temperature misses only the rest."""
    gas = {
        "density": (1.2, "kg/m3"), "conductivity": (0.026, "W/mK"), "viscosity": (1.8e-5, "Pa s"),
        "specific heat": (1005.0, "J/kgK"), "velocity": (150.0, "m/s"), "expansion coefficient": (1 / 300, "1/K"),
        "property temperature": (300.0, "K"), "length": (1.0, "m"), "wall temperature": None,
        "heat flux": (3000.0, "W/m2"),
    }  # fmt: skip
    static = cf("TERM", stated_duct(**gas), "viscous heating")
    total = cf("TERM", stated_duct(**gas, **{"temperature basis": ("stagnation",)}), "viscous heating")
    assert 0 < total < 0.2 * static
