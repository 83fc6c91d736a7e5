"""Numbers as people type them."""

import contextlib
import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs import quantities
from cellfuncs.errors import CellfuncsError, NumberRefused
from cellfuncs.quantities import read_number


@pytest.mark.parametrize(
    ("text", "value", "plus_minus", "unit"),
    [
        ("12", 12, None, ""),
        ("1,250.5 kPa", 1250.5, None, "kPa"),
        ("1 250,5", 1250.5, None, ""),
        ("1.250,5", 1250.5, None, ""),
        ("1\xa0250 kPa", 1250, None, "kPa"),
        ("1\u2009250.5", 1250.5, None, ""),
        ("1\u202f250\u202f000", 1250000, None, ""),
        ("1,250,000", 1250000, None, ""),
        ("1.250.000", 1250000, None, ""),
        ("0,5", 0.5, None, ""),
        ("0,250", 0.25, None, ""),
        ("12,75 mm", 12.75, None, "mm"),
        ("3,1416", 3.1416, None, ""),
        ("1234,567", 1234.567, None, ""),
        ("1.250", 1.25, None, ""),
        ("1.2e-3", 0.0012, None, ""),
        ("1.2E-3", 0.0012, None, ""),
        ("1e5Pa", 1e5, None, "Pa"),
        ("1.2×10^-3", 0.0012, None, ""),
        ("1.2×10⁻³ m2/s", 0.0012, None, "m2/s"),
        ("1.2 x 10^3 Pa", 1200, None, "Pa"),
        ("1.2*10**-3", 0.0012, None, ""),
        ("10⁻⁶ m²/s", 1e-6, None, "m²/s"),
        ("3/4 in", 0.75, None, "in"),
        ("1 3/4 in", 1.75, None, "in"),
        ("1-3/4 in", 1.75, None, "in"),
        ("½ in", 0.5, None, "in"),
        ("1½ in", 1.5, None, "in"),
        ('1 ½"', 1.5, None, '"'),
        ("-½", -0.5, None, ""),
        ("5 %", 5, None, "%"),
        ("5%", 5, None, "%"),
        ("20°C", 20, None, "°C"),
        ("−5 °C", -5, None, "°C"),
        ("+5", 5, None, ""),
        (".5 mm", 0.5, None, "mm"),
        (",5 mm", 0.5, None, "mm"),
        ("5. m", 5, None, "m"),
        ("１２ mm", 12, None, "mm"),
        ("5 1/K", 5, None, "1/K"),
        ("12 /s", 12, None, "/s"),
        ("5 -", 5, None, "-"),
        ("12 ± 0.5 m/s", 12, 0.5, "m/s"),
        ("12 +/- 0.5", 12, 0.5, ""),
        ("(12 ± 0.5) m/s", 12, 0.5, "m/s"),
        ("12 m/s ± 0.5 m/s", 12, 0.5, "m/s"),
        ("12 m/s ± 5 %", 12, 0.6, "m/s"),
        ("50 ± 2 %", 50, 2, "%"),
    ],
)
def test_a_number_as_typed(text, value, plus_minus, unit):
    reading = read_number(text)
    assert reading.value == pytest.approx(value, rel=1e-15, abs=0)
    assert reading.plus_minus == (None if plus_minus is None else pytest.approx(plus_minus, rel=1e-15))
    assert reading.unit_text == unit


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("1,250", "may be 1250 or 1.250"),
        ("1,250 kPa", "may be 1250 or 1.250"),
        ("12,500e3", "may be 12500 or 12.500"),
        ("10-20", "range"),
        ("10–20 m/s", "range"),
        ("10 - 20", "range"),
        ("10 to 20 m", "range"),
        ("1/2 - 3/4 in", "range"),
        ("inf", "does not begin with a number"),
        ("nan", "does not begin with a number"),
        ("-inf", "does not begin with a number"),
        ("1e999", "largest"),
        ("1e99999999999", "largest"),
        ("1e-999", "smallest"),
        ("~5 m", "does not begin with a number"),
        ("<5", "does not begin with a number"),
        ("=5", "does not begin with a number"),
        ("abc", "does not begin with a number"),
        ("12 13", "two numbers"),
        ("5'3\"", "no number as written"),
        ("1'250", "no number as written"),
        ("1_000", "no number as written"),
        ("0x10", "no number as written"),
        ("1.2.3", "no number as written"),
        ("1,25,000", "no number as written"),
        ("1.2,3", "mixes commas and dots"),
        ("12,", "ends its number with a comma"),
        ("5/0", "divides by zero"),
        ("5 ± -1", "negative"),
        ("12 ± 0.5 ± 1", "no number as written"),
        ("35 m ± 1 ft", "two units"),
        ("٣", "does not begin with a number"),
        ("12\u200b m", "hidden character"),
        ("", "empty"),
        ("   ", "empty"),
        ("9" * 61, "61 characters"),
        ("9" * 100_000, "characters"),
    ],
)
def test_what_is_no_single_number_is_refused(text, said):
    with pytest.raises(NumberRefused, match=said) as refused:
        read_number(text)
    assert len(str(refused.value)) < 200


@pytest.mark.parametrize("thing", [None, 5, ["5"]])
def test_what_is_no_text_is_refused(thing):
    with pytest.raises(NumberRefused):
        read_number(thing)


@given(st.floats(allow_nan=False, allow_infinity=False), st.sampled_from(["", " m", " W/m2K", " %", "kPa"]))
def test_what_python_writes_is_read_back(value, unit):
    reading = read_number(f"{value!r}{unit}")
    assert reading.value == value
    assert reading.unit_text == unit.strip()


@given(st.integers(1000, 999_999_999), st.integers(0, 99))
def test_grouped_numbers_are_read_in_every_custom(whole, part):
    value = float(f"{whole}.{part:02d}")
    grouped = f"{whole:,}"
    for text in (
        f"{grouped}.{part:02d}",
        f"{grouped.replace(',', '.')},{part:02d}",
        f"{grouped.replace(',', ' ')},{part:02d}",
        f"{grouped.replace(',', chr(0x202F))}.{part:02d}",
    ):
        assert read_number(text).value == value


@given(st.text(alphabet="0123456789.,eE+-±/ ½×^xm%°()\xa0−", max_size=62) | st.text(max_size=62))
def test_garbage_is_refused_and_nothing_else(text):
    try:
        reading = read_number(text)
    except NumberRefused as refused:
        assert 0 < len(str(refused)) < 200
        assert str(refused).isprintable()
    else:
        assert math.isfinite(reading.value)
        assert reading.plus_minus is None or reading.plus_minus >= 0


@pytest.mark.parametrize(
    ("text", "kind", "si"),
    [
        ("35 degC", "temperature", 308.15),
        ("300", "temperature", 300.0),
        ("50 K", "temperature", 50.0),
        ("12 ft/s", "velocity", 3.6576),
        ("5 %", "fraction", 0.05),
        ("½ in", "length", 0.0127),
        ("3 barg", "pressure_absolute", 401325.0),
        ("12", "velocity", 12.0),
        ("1.2×10^-3 Pa·s", "dynamic_viscosity", 0.0012),
    ],
)
def test_a_quantity_is_si(text, kind, si):
    assert quantities.read_quantity(text, kind) == pytest.approx(si, rel=1e-15)


def test_a_bare_cold_temperature_asks():
    with pytest.raises(NumberRefused, match="40 means 40 K; write 40 degC, or 40 K"):
        quantities.read_quantity("40", "temperature")


@given(st.text(max_size=70))
def test_a_garbage_quantity_is_refused(text):
    with contextlib.suppress(CellfuncsError):
        assert math.isfinite(quantities.read_quantity(text, "velocity"))
