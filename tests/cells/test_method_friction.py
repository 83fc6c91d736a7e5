"""CF_METHODS for a pressure drop, the methods taken as answers, names that begin alike, sources that are too long."""

import pytest

WATER = [
    ["flow kind", "duct", ""],
    ["substance", "water", ""],
    ["velocity", 1.0, "m/s"],
    ["diameter", 20, "mm"],
    ["length", 2, "m"],
    ["inlet temperature", 20, "degC"],
    ["wall temperature", 40, "degC"],
    ["answer", "pressure drop", ""],
]


@pytest.mark.parametrize("more", [[], [["roughness", 0.1, "mm"]], [["loss coefficient", 4.0, ""]]])
def test_the_table_of_friction_says_what_the_single_function_says(cf, more):
    table = cf("METHODS", WATER + more)
    assert table[0][:3] == ["method", "friction factor", "pressure drop"]
    inside = [row for row in table[1:] if row[3] == "in range"]
    assert len(inside) >= 4 and inside[0][7].startswith("recommended")
    assert inside[0][2] == pytest.approx(cf("PRESSURE_DROP", WATER + more), rel=1e-9)
    assert inside[0][0] == cf("CASE", WATER + more, "friction method")
    for row in inside:  # with another friction the mean temperature is another one, a little
        assert row[2] == pytest.approx(cf("PRESSURE_DROP", WATER + more, row[0]), rel=2e-3)


def test_a_stated_pressure_drop_compares_nothing(cf):
    stated = [row for row in WATER if row[0] != "velocity"] + [["pressure drop", 2, "kPa"]]
    assert "states its pressure drop" in cf("METHODS", stated)


def test_the_methods_taken_are_answers(cf):
    assert cf("CASE", WATER, "method") == cf("METHODS", WATER[:-1])[1][0]
    plate = [
        ["flow kind", "mixed"],
        ["surface", "vertical plate"],
        ["substance", "air"],
        ["velocity", 0.5, "m/s"],
        ["length", 0.5, "m"],
        ["stream temperature", 20, "degC"],
        ["wall temperature", 60, "degC"],
    ]
    assert cf("CASE", plate, "method") == "Churchill blend"


def test_a_name_that_several_have_lists_them(cf):
    told = cf("COEFFICIENT", WATER[:-1], "dittus-boelter")
    assert told.startswith("! method name:")
    assert '"Dittus-Boelter, heating"' in told and '"Dittus-Boelter, cooling"' in told


def test_a_source_that_is_too_long_tells_where_it_stands_in_full(cf):
    told = cf("SOURCE", "Bromley")
    assert len(told) <= 255 and "Bromley, L. A. 1950" in told and '=CF_SOURCE("bromley-1950")' in told
    assert "Chem. Eng. Prog." in cf("SOURCE", "bromley-1950")


def test_friction_alone_speaks_of_no_case(cf):
    told = cf("FRICTION", 1e5, 0.0, "laminar friction")
    assert told.startswith("! reynolds: laminar friction holds for Re up to 2300") and "beyond range" not in told


@pytest.mark.parametrize("wrong", ["warm", 0, float("nan"), 7.5])
@pytest.mark.parametrize("row", ["wall condition", "heated walls", "section"])
def test_a_choice_that_no_method_knows_is_refused_in_words(cf, row, wrong):
    known = {"wall condition": "flux", "section": "plates", "heated walls": "both"}
    block = [[label, wrong if label == row else word] for label, word in known.items()]
    told = cf("NUSSELT_OF", block, "developed laminar")
    assert isinstance(told, str) and told.startswith("! block:") and "broke off" not in told
    right = [list(pair) for pair in known.items()]
    assert cf("NUSSELT_OF", right, "developed laminar") == pytest.approx(140 / 17, rel=1e-6)


def test_choices_that_do_not_go_together_are_refused_in_words(cf):
    block = [["wall condition", "flux"], ["section", "tube"], ["heated walls", "one"]]
    assert "is not tabulated" in cf("NUSSELT_OF", block, "developed laminar")


def test_a_tube_without_end_has_no_entry(cf):
    assert cf("NUSSELT_OF", [["diameter over length", 0]], "turbulent entry") == 1.0


@pytest.mark.parametrize(("velocity", "allowed"), [(30.0, "turbulent"), (0.02, "laminar")])
def test_allowed_beyond_its_range_is_a_method_of_the_same_regime(cf, velocity, allowed):
    """Of a smooth tube at Re 3e7, and of a short annulus in laminar flow, no method is in range."""
    if allowed == "turbulent":
        block = [["diameter", 1.0, "m"], ["velocity", velocity, "m/s"]]
    else:
        block = [["diameter", 100, "mm"], ["core diameter", 2, "mm"], ["velocity", velocity, "m/s"]]
    case = [row for row in WATER[:-1] if row[0] not in ("velocity", "diameter")] + block
    assert "beyond range" in cf("COEFFICIENT", case)
    method = cf("CASE", [*case, ["beyond range", "allow", ""]], "method")
    assert ("laminar" in method or "entry" in method) == (allowed == "laminar"), method
    assert "rough" not in method
