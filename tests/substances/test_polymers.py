"""Polymer melts: the shear rate is asked for, laws and shifts by hand, texts and their refusals."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError, NoModel, OutOfRange
from cellfuncs.sources import read_table
from cellfuncs.substances import find
from cellfuncs.substances.polymers import PolymerMelt

POLYMERS = [row["polymer"] for row in read_table("polymers.csv")]
OWN = "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K"


@pytest.mark.parametrize("name", POLYMERS)
def test_every_published_melt(name):
    melt = find(name)
    assert isinstance(melt, PolymerMelt) and melt.family == "polymer melt"
    low, high = melt.rheology.t_min, melt.rheology.t_max
    at = find(f"{name} at 200 1/s")
    assert at is find(f"{name}, at 200 1/s")
    for temperature in (low, (low + high) / 2, high):
        assert at.get("viscosity", temperature) == melt.viscosity_at(temperature, 200.0)
        assert melt.viscosity_at(temperature, 400.0) < melt.viscosity_at(temperature, 200.0)
        assert 10 < at.get("viscosity", temperature) < 1e4
    assert melt.viscosity_at(high, 200.0) < melt.viscosity_at(low, 200.0)
    assert at.get("prandtl", low + 1) > 1e4 and at.source("prandtl") and at.note("prandtl")
    assert at.get("kinematic_viscosity", low + 1) > 0
    for key in ("viscosity", "kinematic_viscosity", "prandtl"):
        with pytest.raises(NoModel, match="depends on the shear rate"):
            melt.get(key, low)
    for temperature in (low - 1, high + 1):
        with pytest.raises(OutOfRange, match="outside the range of the viscosity"):
            at.get("viscosity", temperature)
    for rate in (0.1, 1e6):
        with pytest.raises(OutOfRange, match="shear rate"):
            melt.viscosity_at(low, rate)
        with pytest.raises(OutOfRange, match="shear rate"):
            find(f"{name} at {rate} 1/s")
    assert 600 < melt.get("density", low + 1) < 1300
    assert melt.phase(low) == "liquid"


def test_constant_density_gives_no_expansion():
    assert find("PP melt").get("beta", 460.0) == pytest.approx(6.7e-4, rel=1e-6)
    with pytest.raises(NoModel, match="expansion"):
        find("PMMA melt").get("beta", 500.0)


def test_other_substances_take_no_notice_of_the_shear_rate():
    assert find("water").viscosity_at(300.0, 1000.0) == find("water").get("viscosity", 300.0)


def test_constants_of_the_user():
    melt = find(OWN + ", 740 kg/m3, 0.2 W/mK, 2.3 kJ/kgK")
    assert melt.viscosity_at(503.15, 1.0) == pytest.approx(12000)
    assert melt.viscosity_at(513.15, 100.0) == pytest.approx(12000 * 100**-0.65 * math.exp(-0.2))
    assert [melt.get(key, 500.0) for key in ("rho", "k", "cp")] == pytest.approx([740, 0.2, 2300])
    assert melt.limits().t_min == pytest.approx(473.15) and melt.limits().t_max == pytest.approx(533.15)
    wide = find(OWN + ", 190 to 280 degC at 50 1/s")
    assert wide.get("viscosity", 464.0) > wide.get("viscosity", 553.0)
    other = find("polymer melt: 12 kPa s^n at 446 degF, n 0.35, b 0.02 1/K")
    assert other.viscosity_at(503.15, 1.0) == pytest.approx(12000)


def test_carreau_and_shifts():
    plain = find("polymer melt: 8000 Pa s at 200 degC, time 0.5 s, n 0.4, E 45 kJ/mol")
    factor = math.exp(45000 / 8.314462618 * (1 / 483.15 - 1 / 473.15))
    wanted = 8000 * factor * (1 + (0.5 * factor * 30) ** 2) ** -0.3
    assert plain.viscosity_at(483.15, 30.0) == pytest.approx(wanted, rel=1e-12)
    moved = find("polymer melt: 8000 Pa s at 200 degC, time 0.5 s, n 0.4, C1 8.86, C2 101.6 K")
    assert moved.viscosity_at(473.15, 1e-3) == pytest.approx(8000, rel=1e-6)
    factor = 10 ** (-8.86 * 10 / 111.6)
    assert moved.viscosity_at(483.15, 1e-3) == pytest.approx(8000 * factor, rel=1e-6)


def test_expansion_of_the_user():
    melt = find(OWN + ", 740 kg/m3, expansion 0.0007 1/K")
    assert melt.get("density", 503.15) == pytest.approx(740)
    assert melt.get("beta", 503.15) == pytest.approx(7e-4, rel=1e-6)
    with pytest.raises(NoModel, match="of the polymer melt is at hand"):
        find(OWN + ", 740 kg/m3").get("beta", 503.15)


REFUSED = {
    "polymer melt": "which polymer",
    "polymer melt: n 0.35": "needs its constants",
    "polymer melt: 12000 Pa s^n at 230 degC": "its exponent",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35": "how does it fall",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K, E 40 kJ/mol": "how does it fall",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, C1 8.86": "how does it fall",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b -0.02 1/K": "thinner when warmer",
    "polymer melt: 12000 Pa s^n at 230 degC, n 3, b 0.02 1/K": "n lies between",
    "polymer melt: 12000 Pa s at 230 degC, n 0.35, b 0.02 1/K": "add its time",
    "polymer melt: 12000 Pa s^n at 230 degC, time 2 s, n 0.35, b 0.02 1/K": "a power law",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K, beta 7e-4 1/K": "goes with a density",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K, sticky": "not understood",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, b 0.02 1/K, 250 to 300 degC": "inside its range",
    "polymer melt: 12000 Pa s^n at 230 degC, n 0.35, C1 8.86, C2 20 K": "C2 must be above",
}


@pytest.mark.parametrize(("text", "words"), REFUSED.items())
def test_refusals_of_texts(text, words):
    with pytest.raises(CellfuncsError) as caught:
        find(text)
    assert words in str(caught.value)
    assert len(str(caught.value)) < 230


@given(st.text(alphabet="0123456789.,;:eE+- nbCK1/Pas^atdegkgJmolW", max_size=80))
def test_no_constants_break_the_reader(text):
    try:
        assert find(f"polymer melt: {text}").name
    except CellfuncsError as error:
        assert 0 < len(str(error)) < 230


def test_a_solid_polymer_is_not_its_melt():
    assert find("LDPE").family == "solid"
    assert find("molten LDPE") is find("LDPE melt") is find("low density polyethylene melt")
