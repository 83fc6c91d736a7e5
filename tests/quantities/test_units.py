"""Unit texts: spellings from engineering sheets, what is refused and how, bounds."""

import csv
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs import quantities
from cellfuncs.errors import UnitRefused
from cellfuncs.quantities import KINDS, unit_text

HERE = Path(__file__).resolve().parent
EXPECTED = HERE.parent / "data" / "units_expected.csv"

# Kinds of the table that are not ours: where the row is tried.
TRIED_AS = {
    "pressure_unspecified": ("pressure_absolute", "pressure_difference"),
    "gas_standard_volume_flow": ("volume_flow",),
    "refrigeration_power_or_mass": ("power", "mass"),
}


def expected_rows():
    with EXPECTED.open(encoding="utf-8", newline="") as file:
        for row in csv.DictReader(file):
            kinds = TRIED_AS.get(row["kind"], (row["kind"],))
            if row["kind"] == "pressure_difference" and row["text"] != "psid":
                kinds = (*kinds, "pressure_absolute")
            yield from ((row, kind) for kind in kinds)


ROWS = list(expected_rows())
READ = [(row, kind) for row, kind in ROWS if row["policy"] == "read"]
REFUSED = [(row, kind) for row, kind in ROWS if row["policy"] == "refuse"]


def test_the_table_is_whole():
    assert len(READ) + len(REFUSED) == len(ROWS) > 140
    assert len(REFUSED) >= 9


@pytest.mark.parametrize(("row", "kind"), READ, ids=[f"{row['text']}-{kind}" for row, kind in READ])
def test_a_spelling_reads_as_the_table_says(row, kind):
    unit = quantities.read_unit(row["text"], kind)
    assert unit.factor == pytest.approx(float(row["si_factor"]), rel=1e-12, abs=0)
    assert unit.offset == pytest.approx(float(row["si_offset"]), rel=1e-12, abs=0)
    assert unit.kind == kind
    assert kind in quantities.kinds_for(row["text"])


@pytest.mark.parametrize(("row", "kind"), REFUSED, ids=[f"{row['text']}-{kind}" for row, kind in REFUSED])
def test_an_ambiguous_spelling_asks(row, kind):
    with pytest.raises(UnitRefused, match=r"reference|may be|may multiply or divide"):
        quantities.read_unit(row["text"], kind)
    assert quantities.kinds_for(row["text"]) == ()


@pytest.mark.parametrize(
    ("text", "kind", "factor"),
    [
        ("Wm-2K-1", "heat_transfer_coefficient", 1),
        ("W m-2 K-1", "heat_transfer_coefficient", 1),
        ("W/m**2/K", "heat_transfer_coefficient", 1),
        ("W / m2 - K", "heat_transfer_coefficient", 1),
        ("W⋅m−2⋅K−1", "heat_transfer_coefficient", 1),
        ("Wm^{-2}K^{-1}", "heat_transfer_coefficient", 1),
        ("W/(m2)K", "heat_transfer_coefficient", 1),
        ("W per m2 per K", "heat_transfer_coefficient", 1),
        ("watts per square metre kelvin", "heat_transfer_coefficient", 1),
        ("BTU/(HR*SQ FT*DEG F)", "heat_transfer_coefficient", 5.678263341113488),
        ("Btu/hrft2F", "heat_transfer_coefficient", 5.678263341113488),
        ("W/m°C", "thermal_conductivity", 1),
        ("w/m°c", "thermal_conductivity", 1),
        ("W/MK", "thermal_conductivity", 1),
        ("BTU-in/hr-sqft-F", "thermal_conductivity", 0.1442278888642826),
        ("KJ/KG-C", "specific_heat", 1000),
        ("kg/ms", "dynamic_viscosity", 1),
        ("N·s/m²", "dynamic_viscosity", 1),
        ("lb-s/ft2", "dynamic_viscosity", 47.880258980335846),
        ("reyn", "dynamic_viscosity", 6894.757293168362),
        ("centipoise", "dynamic_viscosity", 0.001),
        ("m^2/s", "kinematic_viscosity", 1),
        ("in.", "length", 0.0254),
        ("″", "length", 0.0254),
        ("''", "length", 0.0254),
        ("[mm]", "length", 0.001),
        ("µm", "length", 1e-6),
        ("μm", "length", 1e-6),
        ("MM", "length", 0.001),
        ("cu. ft.", "volume", 0.028316846592),
        ("square feet", "area", 0.09290304),
        ("㎡", "area", 1),
        ("US gal", "volume", 0.003785411784),
        ("imp gal/min", "volume_flow", 0.00454609 / 60),
        ("cubic feet per minute", "volume_flow", 0.028316846592 / 60),
        ("Am3/h", "volume_flow", 1 / 3600),
        ("M3/HR", "volume_flow", 1 / 3600),
        ("lbs/sq in", "pressure_absolute", 6894.757293168362),
        ("kg/cm2", "pressure_difference", 98066.5),
        ("kg/m s2", "pressure_absolute", 1),
        ("kPa abs", "pressure_absolute", 1000),
        ("KPA", "pressure_absolute", 1000),
        ("Torr", "pressure_absolute", 101325 / 760),
        ("psi diff", "pressure_difference", 6894.757293168362),
        ("inches of water", "pressure_difference", 249.08891),
        ("ft wc", "pressure_difference", 2989.06692),
        ("kPa/100m", "pressure_gradient", 10),
        ("ft-lb", "torque", 1.3558179483314003),
        ("ft-lb", "energy", 1.3558179483314003),
        ("Nm", "torque", 1),
        ("KWH", "energy", 3.6e6),
        ("metric hp", "power", 735.49875),
        ("tons of refrigeration", "power", 3516.8528420666667),
        ("short ton/h", "mass_flow", 907.18474 / 3600),
        ("kg H2O/kg dry air", "humidity_ratio", 1),
        ("g/kg da", "humidity_ratio", 0.001),
        ("wt%", "fraction", 0.01),
        ("per K", "thermal_expansion", 1),
        ("/K", "thermal_expansion", 1),
        ("K^-1", "thermal_expansion", 1),
        ("K^(-1)", "thermal_expansion", 1),
        ("1/°F", "thermal_expansion", 1.8),
        ("g mol^-1", "molar_mass", 0.001),
        ("kg mol⁻¹", "molar_mass", 1),
        ("lb-mol/hr", "molar_flow", 453.59237 / 3600),
        ("g", "acceleration", 9.80665),
        ("g", "mass", 0.001),
        ("kn", "velocity", 1852 / 3600),
        ("KN", "force", 1000),
        ("mK", "temperature_difference", 0.001),
        ("rpm", "angular_velocity", 0.10471975511965978),
        ("Hz", "angular_velocity", 6.283185307179586),
        ("rad/s", "rotational_frequency", 0.15915494309189535),
        ("deg", "angle", 0.017453292519943295),
        ("W/(m²·K⁴)", "radiative_constant", 1),
        ("(m2·K)/W", "thermal_resistance_area", 1),
        ("1/(W/m2K)", "thermal_resistance_area", 1),
    ],
)
def test_more_spellings(text, kind, factor):
    unit = quantities.read_unit(text, kind)
    assert unit.factor == pytest.approx(factor, rel=1e-14, abs=0)
    assert unit.offset == 0


@pytest.mark.parametrize(
    ("text", "kind", "said"),
    [
        ("kg/s", "volume_flow", '"kg/s" is a mass flow, not a volume flow; write for instance 3 m3/h'),
        (
            "cSt",
            "dynamic_viscosity",
            "is a kinematic viscosity, not a dynamic viscosity; multiply .* density",
        ),
        ("Pa s", "kinematic_viscosity", "divide the value by the density"),
        ("fps2", "velocity", "write for instance 12 ft/s"),
        ("psid", "pressure_absolute", "is a pressure difference, not an absolute pressure"),
        ("psia", "pressure_difference", "is an absolute pressure, not a pressure difference"),
        ("bara", "pressure_difference", "is an absolute pressure, not a pressure difference"),
        ("psig", "pressure_difference", "is a gauge pressure, not a pressure difference"),
        ("psi", "pressure_gauge", "does not say that it is gauge"),
        ("inHg vac", "pressure_absolute", "counts downwards"),
        ("ΔC", "temperature", "is a temperature difference, not a temperature"),
        ("kJ/kg*K", "specific_heat", "open what stands below the solidus"),
        ("W/m-2", "heat_flux", "negative power below the solidus"),
        ("mpa", "pressure_absolute", "may be mPa or MPa"),
        ("MPA", "pressure_absolute", "may be mPa or MPa"),
        ("mw", "power", "may be mW or MW"),
        ("ton/h", "mass_flow", "short ton"),
        ("N m3/h", "volume_flow", "reference"),
        ("nm3/h", "volume_flow", "reference"),
        ("slpm", "volume_flow", "reference"),
        ("scfm", "volume_flow", "reference"),
        ("scfm", "volume", "reference"),
        ("mps", "linear_density", "no known unit"),
        ("kgph", "mass_flow", "no known unit"),
        ("m3h", "volume_flow", "is no unit of volume flow"),
        ("kJkgK", "specific_heat", "is no unit of specific heat"),
        ("SSU", "kinematic_viscosity", "ASTM D2161"),
        ("gr/lb", "humidity_ratio", "gram or grain"),
        ("Mlb/hr", "mass_flow", "klb"),
        ("ML", "volume", "millilitre or megalitre"),
        ("1000 kg/h", "mass_flow", "put it into the value"),
        ("10^-6 m2/s", "kinematic_viscosity", "power of ten"),
        ("×10⁻⁶ m²/s", "kinematic_viscosity", "power of ten"),
        ("1/s", "angular_velocity", "radians or turns"),
        ("%RH", "fraction", "is a relative humidity, not a fraction"),
        ("kg/kg", "relative_humidity", "is a humidity ratio, not a relative humidity"),
        ("W/mK", "thermal_conductance", "is a thermal conductivity"),
        ("mPas", "mass_flow", "is a dynamic viscosity"),
        ("kg/min", "pressure_absolute", "is a mass flow"),
        ("KJ/KG-C", "specific_enthalpy", "is a specific heat"),
        ("NM", "length", "is a torque"),
        ("water", "pressure_gradient", "no known unit"),
        ("((m/s))", "velocity", "bracket in a bracket"),
        ("(m/s", "velocity", "breaks off"),
        ("m/s)", "velocity", "bracket"),
        ("kg//s", "mass_flow", "two signs"),
        ("kg/", "mass_flow", "breaks off"),
        ("m^5", "length", "power"),
        ("m^0", "length", "power"),
        ("9**9**9", "length", "number|cannot be read"),
        ("m" * 41, "length", "41 characters"),
        ("m" * 200_000, "length", "200,000 characters"),
        ("(" * 5000, "length", "characters"),
        ("m s kg m s kg m s kg", "length", "more than 8 factors"),
        ("m\u200b/s", "velocity", "hidden character"),
        ("m\u202e/s", "velocity", "hidden character"),
        ("m\x07/s", "velocity", "hidden character"),
        ("", "velocity", "no unit"),
        ("  ", "velocity", "no unit"),
    ],
)
def test_a_refusal_says_why(text, kind, said):
    with pytest.raises(UnitRefused, match=said) as refused:
        quantities.read_unit(text, kind)
    assert len(str(refused.value)) < 200
    assert not quantities.unit_fits(text, kind)


def test_gauge_stands_on_the_given_atmosphere():
    assert quantities.read_unit("barg", "pressure_absolute", 95000.0).offset == 95000.0
    assert quantities.read_unit("bar(g)", "pressure_absolute").offset == 101325.0
    assert quantities.read_unit("bar", "pressure_absolute", 95000.0).offset == 0.0
    assert quantities.read_quantity("2 psi g", "pressure_absolute", 90000.0) == pytest.approx(
        90000 + 2 * 6894.757293168362, rel=1e-14
    )


def test_the_understood_form_is_shown():
    assert quantities.read_unit("kJ/kg·K", "specific_heat").understood == "kJ/(kg·K)"
    assert quantities.read_unit("in. wc/100 ft", "pressure_gradient").understood == "inH2O/100 ft"
    assert quantities.read_unit("kg/cm2g", "pressure_gauge").understood == "kgf/cm² gauge"
    assert quantities.read_unit("deg C", "temperature").understood == "°C"


def test_kinds_come_in_a_sensible_order():
    for text, first in {
        "degC": "temperature",
        "K": "temperature",
        "bar": "pressure_absolute",
        "kPa": "pressure_absolute",
        "psig": "pressure_gauge",
        "psid": "pressure_difference",
        "mmH2O": "pressure_difference",
        "Nm": "torque",
        "kJ": "energy",
        "cSt": "kinematic_viscosity",
        "rpm": "rotational_frequency",
        "rad/s": "angular_velocity",
        "Hz": "frequency",
        "%": "fraction",
        "-": "dimensionless",
        "%RH": "relative_humidity",
        "kJ/kgK": "specific_heat",
        "m/s": "velocity",
        "kg/cm2-d": "mass_flux",
        "kg/cm2-g": "pressure_gauge",
    }.items():
        assert quantities.kinds_for(text)[0] == first, text
    for text in ("", "foo", "kg3/s", "ton", "\x00", "x" * 100_000):
        assert quantities.kinds_for(text) == ()


@pytest.mark.parametrize(
    ("value", "unit", "wanted", "expected"),
    [
        (20, "degC", "degF", 68.0),
        (-40, "°F", "°C", -40.0),
        (5, "ΔC", "ΔF", 9.0),
        (0, "K", "degC", -273.15),
        (0, "barg", "psia", 14.695948775513),
        (1, "bar", "mmHg", 750.0615758456563),
        (1, "kPa", "inH2O", 1000 / 249.08891),
        (1, "kWh", "MJ", 3.6),
        (60, "rpm", "rad/s", 6.283185307179586),
        (3, "m3/h", "L/min", 50.0),
    ],
)
def test_converting(value, unit, wanted, expected):
    assert quantities.convert(value, unit, wanted) == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(
    ("unit", "wanted", "said"),
    [
        ("kg/s", "m3/h", "these cannot be converted"),
        ("psid", "psia", "these cannot be converted"),
        ("mmH2O", "psig", "add abs, g or diff"),
        ("degC", "ΔC", None),
        ("cSt", "cP", "these cannot be converted"),
        ("foo", "m", "no known unit"),
    ],
)
def test_kinds_never_mix(unit, wanted, said):
    if said is None:  # a temperature unit beside a difference can only mean a difference
        assert quantities.convert(5, unit, wanted) == 5
        return
    with pytest.raises(UnitRefused, match=said):
        quantities.convert(1.0, unit, wanted)


def test_arrays_convert_as_arrays():
    values = np.array([0.0, 100.0])
    assert quantities.to_si(values, "degC", "temperature").tolist() == [273.15, 373.15]
    assert quantities.from_si(values, "kPa", "pressure_absolute").tolist() == [0.0, 0.1]
    assert quantities.convert(values, "degC", "degF").tolist() == [32.0, 212.0]


@given(
    value=st.floats(-1e12, 1e12),
    place=st.sampled_from([(unit, kind) for kind in KINDS.values() for unit in kind.units]),
)
def test_there_and_back(value, place):
    unit, kind = place
    back = quantities.from_si(quantities.to_si(value, unit, kind.name), unit, kind.name)
    offset = quantities.read_unit(unit, kind.name).offset / quantities.read_unit(unit, kind.name).factor
    assert back == pytest.approx(value, rel=1e-14, abs=4e-15 * abs(offset) + 1e-290)


SOUP = st.text(
    alphabet="mskgKCFRNPaJWhdtinfLlbuoxper/-.·*^²⁻¹()[]'\"°ΔµΩ%0123456789 \u200b\u202e\x00½٣", max_size=60
)


@given(text=st.one_of(SOUP, st.text(max_size=60)), kind=st.sampled_from(list(KINDS)))
def test_garbage_is_refused_and_nothing_else(text, kind):
    try:
        unit = quantities.read_unit(text, kind)
    except UnitRefused as refused:
        assert 0 < len(str(refused)) < 200
        assert str(refused).isprintable()
    else:
        assert 0 < unit.factor < float("inf")
        assert kind in quantities.kinds_for(text)


@pytest.mark.parametrize("thing", [None, 5, 2.5, ["m"], {"kind": "Div"}, True])
def test_what_is_no_text_is_no_unit(thing):
    with pytest.raises(UnitRefused):
        quantities.read_unit(thing, "length")


@given(
    st.lists(st.sampled_from(["mpa", "MPA", "MW", "mw", "KN", "KT", "MS", "ms", "PAS", "D", "g"]), max_size=8)
)
def test_the_readings_of_a_text_are_bounded(words):
    try:
        found = unit_text.meanings(" ".join(words))
    except UnitRefused:
        return
    assert len(found) <= unit_text.MOST_COMBINATIONS


def test_what_is_remembered_is_bounded():
    module = sys.modules["cellfuncs.quantities.convert"]
    for place in range(module.MOST_REMEMBERED + 500):
        quantities.read_unit("barg", "pressure_gauge", 90000.0 + place)
        assert len(module._units) <= module.MOST_REMEMBERED


def test_importing_loads_nothing_heavy():
    script = (
        "import sys, cellfuncs.quantities as q; assert 'fractions' not in sys.modules;"
        "q.read_unit('W/m2K', 'heat_transfer_coefficient'); q.read_number('5 %');"
        "print([m for m in ('numpy', 'pint', 'CoolProp', 'scipy') if m in sys.modules])"
    )
    root = HERE.parents[1]
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, cwd=root)
    assert done.stdout.strip() == "[]", done.stderr
