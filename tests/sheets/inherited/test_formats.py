"""Number formats, as ECMA-376 part 1, 18.8.30 and 18.8.31 define them: what they show of a number."""

import pytest

from cellfuncs.sheets.inherited.formats import GENERAL, Shown, shown_by


@pytest.mark.parametrize(
    ("code", "shown"),
    [
        ("General", GENERAL),
        ("0.00", Shown(2)),
        ("#,##0.0", Shown(1)),
        ("0.0%", Shown(1, percent=True)),
        ("0.00E+00", Shown(2, exponent=True)),
        ('0.0 "bar"', Shown(1, text="bar")),
        ('0.0" kg/s"', Shown(1, text="kg/s")),
        ("0.0\\ \\°\\C", Shown(1, text="°C")),
        ("0.0 [$°C]", Shown(1, text="°C")),
        ('General" mm"', Shown(text="mm")),
        ('0.0,"kW"', Shown(1, scale=1000.0, text="kW")),
        ("0.00_);(0.00)", Shown(2)),
        ('"Re = "0', Shown(0)),
        ("yyyy-mm-dd", Shown(date=True)),
        ("h:mm:ss", Shown(date=True)),
        ("[Red]0.0;[Blue]-0.0", Shown(1)),
    ],
)
def test_a_format_says_what_it_shows(code, shown):
    assert shown_by(code) == shown


@pytest.mark.parametrize(
    ("code", "value", "typed", "half"),
    [
        ("0.00", 1.23456, False, 0.005),
        ("0.00E+00", 1.004e-6, False, 0.005e-6),
        ("0.0%", 0.1234, False, 0.0005),
        ('0.0,"kW"', 12345.0, False, 50.0),
        ("General", 4.18, True, 0.005),
        ("General", 1.004e-6, True, 0.0005e-6),
        ("General", 1234.5678, False, 0.0),  # a computed number shows all its digits
        ("General", 2.0, True, 0.05),  # a typed 2 is not 1.5 to 2.5
        ("0.00", 1.004e-6, False, 0.05e-6),  # shows 0.00, and is known to two digits all the same
        ("0", 0.0, False, 0.0),
    ],
)
def test_half_of_the_last_digit_shown(code, value, typed, half):
    assert shown_by(code).half_digit(value, typed) == pytest.approx(half, abs=0.0)
