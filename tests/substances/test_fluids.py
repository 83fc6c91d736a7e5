"""Pure fluids: values are CoolProp's own, water's those of IAPWS; nothing depends on order or thread."""

import threading

import iapws
import numpy as np
import pytest
from CoolProp import CoolProp

from cellfuncs.errors import NoModel, OutOfRange, UnknownName
from cellfuncs.substances import find

WHATS = ("density", "viscosity", "conductivity", "specific_heat", "enthalpy", "entropy", "speed_of_sound")
READERS = ("rhomass", "viscosity", "conductivity", "cpmass", "hmass", "smass", "speed_sound")


@pytest.mark.parametrize(
    "key", ["Water", "R134a", "CarbonDioxide", "Nitrogen", "Ammonia", "Air", "R410A", "R32"]
)
def test_values_are_those_of_the_equation(key):
    fluid, state = find(key), CoolProp.AbstractState("HEOS", key)
    critical = state.T_critical()
    for temperature in (0.75 * critical, 0.95 * critical, 1.3 * critical):
        for pressure in (5e3, 2e5, 5e6, 2e7):
            if temperature > state.Tmax() or (temperature < critical and key == "Air" and pressure > 1e7):
                continue
            state.update(CoolProp.PT_INPUTS, pressure, temperature)
            for what, reader in zip(WHATS, READERS, strict=True):
                assert fluid.get(what, temperature, pressure) == pytest.approx(
                    getattr(state, reader)(), rel=1e-12
                )
            density, heat, conductivity, viscosity = (
                fluid.get(what, temperature, pressure) for what in ("density", "cp", "k", "mu")
            )
            assert fluid.get("prandtl", temperature, pressure) == pytest.approx(
                heat * viscosity / conductivity
            )
            assert fluid.get("alpha", temperature, pressure) == pytest.approx(conductivity / density / heat)
            assert fluid.get("nu", temperature, pressure) == pytest.approx(viscosity / density)


def test_expansion_coefficient_is_the_slope_of_the_density():
    for name, temperature, pressure in (("water", 320.0, 2e5), ("air", 300.0, 1e5), ("R134a", 290.0, 2e6)):
        fluid, step = find(name), 0.01
        low, high = (fluid.get("density", temperature + sign * step, pressure) for sign in (-1, 1))
        slope = -(high - low) / (2 * step) / fluid.get("density", temperature, pressure)
        assert fluid.get("expansion_coefficient", temperature, pressure) == pytest.approx(slope, rel=1e-4)
    assert find("water").get("beta", 275.0) < 0  # below 4 degC water expands when cooled


@pytest.mark.parametrize("pressure", [5e4, 1e5, 1e6, 1e7, 1e8])
def test_water_against_the_package_iapws(pressure):
    """iapws is an independent implementation of IAPWS-95, R12-08 and R15-11."""
    water = find("water")
    for temperature in (280.0, 340.0, 420.0, 560.0, 800.0):
        other = iapws.IAPWS95(T=temperature, P=pressure / 1e6)
        for what, value, tolerance in (
            ("density", other.rho, 1e-7),
            ("specific_heat", other.cp * 1e3, 1e-6),
            ("enthalpy", other.h * 1e3, 1e-5),
            ("speed_of_sound", other.w, 1e-6),
            ("viscosity", other.mu, 1e-4),
            ("conductivity", other.k, 2e-3),
            ("expansion_coefficient", other.alfav, 1e-5),
        ):
            assert water.get(what, temperature, pressure) == pytest.approx(value, rel=tolerance), what


def test_surface_tension_of_water_against_the_package_iapws():
    from iapws._iapws import _Tension

    for temperature in np.linspace(274.0, 640.0, 12):
        assert find("water").get("surface tension", temperature) == pytest.approx(
            _Tension(temperature), rel=1e-9
        )


def test_saturation_by_temperature_and_by_pressure():
    for name in ("water", "R134a", "ammonia", "propane", "nitrogen"):
        fluid = find(name)
        temperature = 0.8 * fluid.limits().t_critical
        pressure = fluid.get("saturation_pressure", temperature)
        assert fluid.get("saturation_temperature", 300.0, pressure) == pytest.approx(temperature, rel=1e-9)
        for phase in ("liquid", "vapour"):
            by_temperature = fluid.saturation("enthalpy", phase, temperature=temperature)
            assert fluid.saturation("h", phase, pressure=pressure) == pytest.approx(by_temperature, rel=1e-8)
        heat = fluid.saturation("h", "vapour", temperature=temperature) - fluid.saturation(
            "h", "liquid", temperature=temperature
        )
        assert fluid.get("heat_of_vaporisation", temperature) == pytest.approx(heat, rel=1e-12)


def test_saturation_asks():
    water = find("water")
    for arguments, words in (
        ({}, "one of the two"),
        ({"temperature": 300.0, "pressure": 1e5}, "one of the two"),
        ({"temperature": 300.0}, "which phase"),
        ({"temperature": 300.0, "phase": "solid"}, "is no phase"),
        ({"pressure": 100.0, "phase": "liquid"}, "no saturation line"),
    ):
        with pytest.raises((OutOfRange, UnknownName), match=words):
            water.saturation("density", **arguments)


def test_columns():
    fluid = find("water")
    temperatures = np.linspace(280.0, 460.0, 181)
    values = fluid.get_many(WHATS, temperatures)
    assert values.shape == (len(WHATS), len(temperatures))
    for row, what in zip(values, WHATS, strict=True):
        assert row.tolist() == [fluid.get(what, temperature) for temperature in temperatures.tolist()]
    pressures = np.linspace(1e5, 5e6, 181)
    both = fluid.get_many(("rho",), temperatures, pressures)[0]
    assert both.tolist() == [
        fluid.get("density", t, p) for t, p in zip(temperatures.tolist(), pressures.tolist(), strict=True)
    ]
    assert find("R410A").get_many(("density",), [250.0, 350.0]).shape == (1, 2)


def test_columns_with_bad_points():
    fluid = find("water")
    temperatures = np.array([300.0, 100.0, 373.124295, np.nan, 400.0])
    values, faults = fluid.get_many(("density", "cp"), temperatures, errors="collect")
    assert [index for index, _ in faults] == [1, 2, 3]
    assert np.isfinite(values[:, [0, 4]]).all()
    assert np.isnan(values[:, [1, 2, 3]]).all()
    with pytest.raises(OutOfRange, match="value 2 of the column"):
        fluid.get_many(("density", "cp"), temperatures)
    with pytest.raises(NoModel, match="1-butene"):
        find("1-butene").get_many(("density", "viscosity"), temperatures[:1])


def test_threads_have_their_own_states():
    """One shared state gave 150 wrong reads of 40,000; here every thread has its own."""
    fluid, wrong = find("propane"), []
    temperatures = [250.0 + i * 0.25 for i in range(200)]
    wanted = [fluid.get("viscosity", temperature, 2e6) for temperature in temperatures]

    def work(turn: int) -> None:
        order = range(200) if turn % 2 else reversed(range(200))
        for index in order:
            if fluid.get("viscosity", temperatures[index], 2e6) != wanted[index]:
                wrong.append(index)

    threads = [threading.Thread(target=work, args=(turn,)) for turn in range(6)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert not wrong


def test_sources_and_notes():
    water = find("water")
    assert water.source("density") == "IAPWS-R6-95"
    assert water.source("mu") == "IAPWS-R12-08"
    assert water.source("k") == "IAPWS-R15-11"
    assert water.source("sigma") == "IAPWS-R1-76"
    assert water.source("Pr") == "IAPWS-R12-08;IAPWS-R15-11;IAPWS-R6-95"
    assert "residual-entropy" in find("R32").note("viscosity")
    assert "200 kJ/kg" in find("R32").note("enthalpy")
    assert "pseudo-pure" in find("air").note("density")
    limits = water.limits()
    assert (limits.t_min, limits.t_max, limits.p_max) == (273.16, 2000.0, 1e9)
