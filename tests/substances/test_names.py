"""Names as engineers write them, and the questions where a name leaves something open."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import CellfuncsError, OutOfRange, UnknownName
from cellfuncs.substances import find, property_key
from cellfuncs.substances.solutions import liquid_rows

SAME = {
    "water": ["Water", " water ", "H2O", "R718", "WATER", "r-718"],
    "R134a": ["r134a", "R-134a", "R 134a", "r_134A", "HFC-134a", "1,1,1,2-tetrafluoroethane"],
    "carbon dioxide": ["CO2", "co2", "R744", "CarbonDioxide", "carbon  dioxide"],
    "ammonia": ["NH3", "R717", "R-717", "Ammonia"],
    "nitrogen": ["N2", "R728", "NITROGEN"],
    "air": ["Air", "R729", "dry air"],
    "propane": ["R290", "n-propane", "C3H8"],
    "n-butane": ["butane", "R600", "nButane"],
    "isobutane": ["R600a", "2-methylpropane"],
    "R1234ze(E)": ["R1234zeE", "R-1234ze(E)", "r1234ze", "HFO-1234ze(E)"],
    "ethylene glycol solution 30 % by mass": [
        "ethylene glycol 30 % by mass",
        "30 % ethylene glycol by mass",
        "MEG 30% mass",
        "MEG 30 wt%",
        "ethylene glycol 30 % w/w",
        "Ethylene Glycol 30% (by weight)",
        "ethylene glycol in water, 30 % by mass",
        "30 mass-% ethylene glycol",
    ],
    "ethylene glycol solution 30 % by volume": [
        "ethylene glycol 30 % by volume",
        "ethylene glycol 30 vol %",
        "ethylene glycol 30 vol.-%",
        "ethylene glycol 30% v/v",
        "MEG 30 %vol",
    ],
    "sea water 3.5 % by mass": ["sea water 3.5 %", "seawater 3.5%", "sea water 35 g/kg", "sea water 3,5 %"],
    "sodium chloride brine 20 % by mass": ["NaCl 20 %", "sodium chloride 20 %", "salt water 20%"],
    "thermal oil TVP1 (biphenyl and diphenyl ether)": ["TVP1", "thermal oil TVP1"],
    "moist air 50 %": [
        "moist air 50 %",
        "humid air RH 50 %",
        "moist air 0.5",
        "moist air, relative humidity 50 %",
    ],
    "ISO VG 46 VI 95": [
        "ISO VG 46 VI 95",
        "iso vg46, vi 95",
        "mineral oil ISO VG 46 VI=95",
        "ISO-VG-46 viscosity index 95",
    ],
}


@pytest.mark.parametrize(("name", "spelling"), [(n, s) for n, many in SAME.items() for s in (n, *many)])
def test_spellings(name, spelling):
    assert find(spelling).name == name
    assert find(spelling) is find(name)


@pytest.mark.parametrize(
    ("text", "phase"),
    [
        ("water liquid", "liquid"),
        ("liquid water", "liquid"),
        ("R134a (vapour)", "gas"),
        ("R134a, vapor", "gas"),
        ("steam", "gas"),
    ],
)
def test_phase_words(text, phase):
    substance = find(text)
    assert substance.saturation("density", temperature=300.0) == find(substance.key).saturation(
        "density", phase, temperature=300.0
    )
    assert find(text) is substance


ASKS = {
    "ethylene glycol 30 %": "by mass or by volume",
    "propylene glycol 30%": "by mass or by volume",
    "ethanol 40 %": "by mass or by volume",
    "inhibited ethylene glycol 50 %": "by mass or by volume",
    "glycol 30 % by mass": "which glycol",
    "brine 20 %": "which salt",
    "sea water": "needs its concentration",
    "ethylene glycol": "needs its concentration",
    "moist air": "relative humidity",
    "moist air 50": "if percent is meant",
    "ISO VG 46": "viscosity index",
    "ISO VG 47 VI 95": "no grade VG 47",
    "oil 46 cSt at 40 degC": "at two temperatures",
    "hydraulic oil": "which oil",
    "ISO VG 46 VI 95 with additives": "not understood",
    "NaCl 10 % by volume": "give the percentage by mass",
    "ethylene glycol 0.3 by mass": "in percent",
    "watr": 'the nearest is "water"',
    "R134b": "the nearest is",
    "isobutan": 'the nearest is "isobutane"',
    "NaK": "write NaK-78",
    "": "a substance is wanted",
    "x" * 500: "too long",
}


@pytest.mark.parametrize(("text", "words"), ASKS.items(), ids=[text[:30] for text in ASKS])
def test_questions(text, words):
    with pytest.raises(CellfuncsError) as caught:
        find(text)
    assert words in str(caught.value)
    assert len(str(caught.value)) < 230


@pytest.mark.parametrize(
    "text", ["MEG 70 % by mass", "sodium chloride 30 %", "sea water 13 %", "moist air 120 %"]
)
def test_concentrations_outside_the_data(text):
    with pytest.raises(OutOfRange):
        find(text)


@pytest.mark.parametrize("key", liquid_rows())
def test_every_liquid_by_name_and_key(key):
    row = liquid_rows()[key]
    tail = ""
    if row["basis"]:
        tail = f" {50 * (float(row['x_min']) + float(row['x_max'])):.3g} % by {row['basis']}"
    substance = find(row["name"] + tail)
    assert substance.key == key
    if key != "NaK":  # CoolProp's key for a nitrate salt, everybody else's for an alloy
        assert find(key + tail) is substance


def test_properties_by_many_names():
    for name, key in {
        "mu": "viscosity",
        "Dynamic viscosity": "viscosity",
        "cp": "specific_heat",
        "k": "conductivity",
        "thermal conductivity": "conductivity",
        "rho": "density",
        "Pr": "prandtl",
        "beta": "expansion_coefficient",
        "latent heat": "heat_of_vaporisation",
        "boiling point": "saturation_temperature",
        "vapour pressure": "saturation_pressure",
        "molecular weight": "molar_mass",
    }.items():
        assert property_key(name) == key
    with pytest.raises(UnknownName, match="conductivity"):
        property_key("conductivty")


@given(st.text(max_size=60))
def test_no_text_breaks_the_reader(text):
    try:
        assert find(text).name
    except CellfuncsError as error:
        assert 0 < len(str(error)) < 230
