"""CF_AGREES, CF_CAUSE and CF_CHECK as cells call them."""

import pytest

from cellfuncs.cells import catalogue

AGREES, CAUSE, CHECK = (catalogue.functions()[name].call for name in ("CF_AGREES", "CF_CAUSE", "CF_CHECK"))
BLOCK = [
    ["flow kind", "duct", ""],
    ["substance", "water", ""],
    ["diameter", 50, "mm"],
    ["velocity", 1.5, "m/s"],
    ["property temperature", 20, "degC"],
    ["kinematic viscosity", 1.004, "mm2/s"],
]


def test_the_difference_is_told_in_words():
    assert AGREES(10.0, 12.5) == "20 % less (0.8 times)"
    assert AGREES("30 degC", "293.15 K") == "10 K more"
    assert AGREES(3.0, 0.0) == "3 for 0"
    assert AGREES(-4.0, 4.0) == "-4 for 4"


def test_the_tolerance_is_a_share():
    assert AGREES(10.0, 10.4) == "3.8462 % less (0.96154 times)"
    assert AGREES(10.0, 10.4, 0.05) == "agrees"
    assert AGREES(10.0, 10.4, "5 %") == "agrees"


def test_units_of_two_quantities_are_refused():
    assert AGREES("3 kPa", "4 m").startswith("! recomputed: kPa and m")
    assert AGREES("", 4.0) == "! stated: empty; give a number"


def test_a_block_gives_more_than_the_ratio():
    right = 1.5 * 0.05 / 1.004e-6
    assert CAUSE(right / 2, right, BLOCK).startswith("radius-for-diameter:")
    assert CAUSE(right, right, BLOCK) == "agrees"
    assert CAUSE(1.37 * right, right, BLOCK).startswith("unknown:")


@pytest.mark.parametrize(
    ("row", "code"),
    [
        (["flow area", 0.0078540, "m2"], "radius-for-diameter"),
        (["flow area", 0.0025, "m2"], "area-factor"),
        (["Reynolds number", 37351.0, ""], "radius-for-diameter"),
        (["density", 789.0, "kg/m3"], "wrong-fluid"),
        (["specific heat", 1.84, "kJ/kgK"], None),
        (["density", 998.2, "kg/m3"], "agrees"),
        (["specific heat", 4184.0, "kJ/kgK"], "unit-factor"),
        (["specific heat", 4.814, "kJ/kgK"], "typing-slip"),
    ],
)
def test_check_names_the_cause(row, code):
    lines = CHECK([*BLOCK, row])
    assert lines[0] == ["quantity", "stated", "recomputed", "difference", "cause"]
    found = next(line for line in lines if line[0] == row[0])
    assert found[1] == row[1] and isinstance(found[2], float)
    if code:
        assert found[4].split(":")[0] == code
    assert all(len(str(cell)) <= 255 for cell in found)


def test_a_block_without_more_than_it_needs():
    assert CHECK([["flow kind", "duct", ""], ["diameter", 50, "mm"]])[1][0] == "nothing to check"


def test_an_unknown_label_is_named():
    assert CHECK([["flow kind", "duct", ""], ["diametr", 50, "mm"]]).startswith('! block: row 2: the label "diametr"')
