"""The Methods family: the table, the choice, named methods, inputs without a case, texts for what cannot be."""

import math

import pytest

from cellfuncs.cells.catalogue import functions
from cellfuncs.methods import METHODS
from cellfuncs.sheets import starters

WATER = [
    ["flow kind", "duct"],
    ["substance", "water"],
    ["velocity", 1.5, "m/s"],
    ["diameter", 20.0, "mm"],
    ["length", 2.0, "m"],
    ["inlet temperature", 20.0, "degC"],
    ["wall temperature", 50.0, "degC"],
]
WITH_METHODS = [kind for kind in starters.kinds() if kind not in ("gap", "body")]


def call(name, *arguments):
    return functions()["CF_" + name].call(*arguments)


def block_of(kind, **changes):
    rows = [list(row) for row in starters.starter(kind).rows if row[1] is not None and row[0] not in changes]
    return [*rows, *([label, *cells] for label, cells in changes.items())]


def table(block):
    rows = call("METHODS", block)
    assert isinstance(rows, list), rows
    return [dict(zip(rows[0], row, strict=True)) for row in rows[1:]]


@pytest.mark.parametrize("kind", WITH_METHODS)
def test_the_table_of_every_kind(kind):
    rows = table(block_of(kind))
    assert len({row["method"] for row in rows}) == len(rows)
    inside = [row["in range"] == "in range" for row in rows]
    assert inside == sorted(inside, reverse=True)
    for row in rows:
        assert row["method"] in METHODS
        assert row["nusselt"] > 0 and row["coefficient"] > 0 and 0 <= row["scatter"] <= 0.5
        assert row["source"] and 0 < len(row["reason"]) <= 255
        assert row["in range"] == "in range" or ("here" in row["in range"] and "outside" in row["in range"])
    assert sum("recommended" in row["reason"] for row in rows) == 1
    assert "recommended" in rows[0]["reason"]
    scatters = [row["scatter"] for row in rows if row["in range"] == "in range"]
    assert scatters[0] == min(scatters)


@pytest.mark.parametrize("kind", WITH_METHODS)
def test_the_recommended_method_is_the_one_that_is_taken(kind):
    first = table(block_of(kind))[0]
    assert call("COEFFICIENT", block_of(kind)) == pytest.approx(first["coefficient"], rel=1e-6)
    assert call("COEFFICIENT", block_of(kind), first["method"]) == pytest.approx(first["coefficient"], rel=1e-6)


def test_a_named_method_is_taken_by_cell_and_by_row():
    by_cell = call("COEFFICIENT", WATER, "gnielinski")
    by_row = call("COEFFICIENT", [*WATER, ["method", "Gnielinski"]])
    assert by_cell == by_row != call("COEFFICIENT", WATER)
    taken = [row for row in table([*WATER, ["method", "Colburn"]]) if "taken" in row["reason"]]
    assert [row["method"] for row in taken] == ["Colburn"]
    assert call("COEFFICIENT", [*WATER, ["method", "Colburn"]], "Gnielinski") == by_cell


def test_the_unit_wanted():
    assert call("COEFFICIENT", WATER, None, "kW/m2K") == pytest.approx(call("COEFFICIENT", WATER) / 1000)
    pascals = call("PRESSURE_DROP", WATER, "Haaland")
    assert call("PRESSURE_DROP", WATER, "Haaland", "kPa") == pytest.approx(pascals / 1e3)


@pytest.mark.parametrize(
    ("function", "arguments", "word"),
    [
        ("COEFFICIENT", (WATER, "Hilpert"), "cylinder"),
        ("COEFFICIENT", (WATER, "Gnielinsky"), "Gnielinski"),
        ("COEFFICIENT", (WATER, "Haaland"), "friction factor"),
        ("COEFFICIENT", (WATER, "developed laminar"), "Re up to"),
        ("COEFFICIENT", (WATER, "Lyon"), "flux"),
        ("COEFFICIENT", (WATER, "Schmidt coil, turbulent"), "coil"),
        ("PRESSURE_DROP", (WATER, "Gnielinski"), "friction factor"),
        ("PRESSURE_DROP", (block_of("plate"),), "no pressure drop"),
        ("METHODS", (block_of("gap"),), "no method"),
        ("NUSSELT_OF", ([["Re", 5e4], ["Pr", 4.0]],), "name a method"),
        ("NUSSELT_OF", ([["Re", 5e4]], "Colburn"), "Prandtl"),
        ("NUSSELT_OF", ([["Re", -5.0], ["Pr", 1.0]], "Colburn"), "at least zero"),
        ("NUSSELT_OF", ([["Re", 5e4], ["Pr", 0.01]], "Colburn"), "Pr 0.7 to 160"),
        ("NUSSELT_OF", ([["Re", "many"], ["Pr", 1.0]], "Colburn"), "Re"),
        ("NUSSELT_OF", ([["colour", 5e4], ["Pr", 1.0]], "Colburn"), "no input"),
        ("FRICTION", (1e5, 0.2), "roughness"),
        ("FRICTION", (1e5, -0.1), "negative"),
        ("FRICTION", (0.0, 0.0), "zero"),
        ("FRICTION", (1e5, 0.0, "Hagen"), "no method"),
        ("FRICTION", (1e3, 0.0, "Haaland"), "Re 4000"),
        ("SOURCE", ("Gnielinsky",), "Gnielinski"),
    ],
)
def test_what_cannot_be_is_said(function, arguments, word):
    answer = call(function, *arguments)
    assert isinstance(answer, str) and answer.startswith("! ") and word in answer, answer


def test_beyond_range_answers_where_the_case_allows_it():
    allowed = [*WATER, ["beyond range", "allow"]]
    assert call("COEFFICIENT", allowed, "developed laminar") > 0
    assert "beyond range" in call("TERM", [*allowed, ["method", "developed laminar"]], "conduction across", "reason")


def test_groups_alone_give_what_the_case_gives():
    block = [["Reynolds number", 5e4], ["Prandtl number", 4.0], ["length over diameter", 100.0], ["flow kind", "duct"]]
    assert call("NUSSELT_OF", block) > 0
    named = call("NUSSELT_OF", [["Re", 5e4], ["Pr", 4.0]], "Colburn")
    assert named == pytest.approx(0.023 * 5e4**0.8 * 4 ** (1 / 3), rel=1e-12)


def test_two_methods_that_disagree_are_named():
    words = [row["reason"] for kind in WITH_METHODS for row in table(block_of(kind))[:1]]
    wire = block_of("cylinder", diameter=(0.05, "mm"), velocity=(1.0, "m/s"))
    words += [table(wire)[0]["reason"]]
    assert any("more than their scatter" in word for word in words) or len(words) == len(WITH_METHODS) + 1


def test_a_column_of_reynolds_numbers_in_one_call():
    column = [[10.0 ** (2 + 6 * k / 9999)] for k in range(10_000)]
    answer = call("FRICTION", column, 1e-4)
    assert len(answer) == 10_000
    for k in (0, 2500, 3900, 5000, 9999):
        assert answer[k][0] == pytest.approx(call("FRICTION", column[k][0], 1e-4), rel=1e-12)


def test_friction_in_a_case_is_the_friction_of_its_numbers():
    block = [row for row in WATER if row[0] not in ("wall temperature", "inlet temperature")]
    block += [["temperature difference", 0.001, "K"], ["property temperature", 30.0, "degC"], ["roughness", 0.05, "mm"]]
    re, f = call("CASE", block, "Reynolds number"), call("CASE", block, "friction factor")
    assert f == pytest.approx(call("FRICTION", re, 0.05 / 20), rel=1e-5)


@pytest.mark.parametrize("name", METHODS)
def test_the_source_of_every_method(name):
    answer = call("SOURCE", name)
    assert isinstance(answer, str) and not answer.startswith("!") and len(answer) <= 255
    assert METHODS[name].gives in answer


@pytest.mark.parametrize("reynolds", [2300.0, 4000.0])
def test_friction_has_no_jump_at_the_ends_of_the_transition(reynolds):
    below, above = (call("FRICTION", reynolds * (1 + side), 1e-3) for side in (-1e-9, 1e-9))
    assert below == pytest.approx(above, rel=1e-6)


STEAM = [["substance", "water"], ["pressure", 1.01325, "bar"], ["acceleration of gravity", 9.81, "m/s2"]]


def test_condensation_from_labelled_inputs_and_a_substance():
    """Nusselt 1916 on a wall: 0.943 (ρl(ρl − ρv) g hfg' k³/(μ H ΔT))^1/4, liquid at the film's temperature."""
    wall, height = 363.15, 0.3
    boiling = call("SATURATION", "water", "saturation temperature", "liquid", None, 101325.0)
    film = 0.5 * (wall + boiling)
    rho, mu, k, cp = (call("PROPERTY", "water", what, film, 101325.0)
                      for what in ("density", "viscosity", "conductivity", "specific heat"))  # fmt: skip
    vapour = call("SATURATION", "water", "density", "vapour", boiling)
    latent = call("SATURATION", "water", "heat of vaporisation", "vapour", boiling) + 0.68 * cp * (boiling - wall)
    falls = rho * (rho - vapour) * 9.81 * latent * k**3 / (mu * height * (boiling - wall))
    block = [*STEAM, ["wall temperature", 90.0, "degC"], ["height of the wall", height, "m"], ["beyond range", "allow"]]
    assert call("NUSSELT_OF", block, "Nusselt condensation, wall") == pytest.approx(0.943 * falls**0.25, rel=0.01)


def test_boiling_and_its_crisis_from_labelled_inputs_and_a_substance():
    """Zuber 1958: 0.131 hfg ρv^1/2 (σ g (ρl − ρv))^1/4, about 1.1 MW/m2 for water at one atmosphere."""
    assert call("NUSSELT_OF", STEAM, "Zuber") == pytest.approx(1.1e6, rel=0.03)
    surface = [["factor of liquid and surface", 0.013], ["exponent of Pr", 1.0]]
    by_superheat = call("NUSSELT_OF", [*STEAM, *surface, ["wall superheat", 10.0, "K"]], "Rohsenow")
    wall = call("SATURATION", "water", "saturation temperature", "liquid", None, 101325.0) + 10.0
    assert call("NUSSELT_OF", [*STEAM, *surface, ["wall temperature", wall, "K"]], "Rohsenow") == pytest.approx(
        by_superheat, rel=1e-9
    )
    hot = [*STEAM, ["wall temperature", 400.0, "degC"], ["diameter", 10.0, "mm"]]
    assert 50 < call("NUSSELT_OF", hot, "Bromley") < 500


def test_an_exchanger_from_labelled_inputs():
    ratio = math.exp(-2 * (1 - 0.5))
    expected = (1 - ratio) / (1 - 0.5 * ratio)  # Kays and London 1984, counter-flow
    block = [["number of transfer units", 2.0], ["Cmin/Cmax", 0.5]]
    assert call("NUSSELT_OF", block, "counter-flow") == pytest.approx(expected, rel=1e-12)


def test_a_fin_from_labelled_inputs():
    fin = [["heat transfer coefficient", 50.0, "W/m2K"], ["thermal conductivity", 200.0, "W/mK"],
           ["thickness", 1.0, "mm"], ["length", 20.0, "mm"]]  # fmt: skip
    m = math.sqrt(2 * 50 / (200 * 1e-3))
    corrected = 0.02 + 1e-3 / 2
    expected = math.tanh(m * corrected) / (m * corrected)
    assert call("NUSSELT_OF", fin, "straight fin") == pytest.approx(expected, rel=0.01)


def test_a_uniform_inlet_profile_asks_for_other_methods():
    oil = [
        ["flow kind", "duct"], ["velocity", 0.5, "m/s"], ["diameter", 20.0, "mm"], ["length", 1.0, "m"],
        ["density", 850.0, "kg/m3"], ["viscosity", 10.0, "mPa.s"], ["conductivity", 0.13, "W/mK"],
        ["specific heat", 2000.0, "J/kgK"], ["temperature difference", 10.0, "K"],
    ]  # fmt: skip
    developed, uniform = table(oil), table([*oil, ["inlet profile", "uniform"]])
    assert developed[0]["method"] == "Graetz series, mean"
    assert {row["method"] for row in uniform} != {row["method"] for row in developed}
    drops = [call("PRESSURE_DROP", block) for block in (oil, [*oil, ["inlet profile", "uniform"]])]
    # Shah and London 1978: an entry costs at most 1.25 dynamic heads beyond developed friction
    assert 0 < drops[1] - drops[0] <= 1.3 * 850 * 0.5**2 / 2


def test_a_coil_and_a_ribbed_tube():
    coil = [*WATER, ["coil diameter", 400.0, "mm"]]
    assert "coil" in table(coil)[0]["method"]
    assert call("COEFFICIENT", coil) > call("COEFFICIENT", WATER) * 0.9
    ribs = [*WATER, ["rib pitch", 4.0, "mm"], ["roughness", 0.4, "mm"]]
    assert table(ribs)[0]["method"] == "Webb ribs"
    assert call("PRESSURE_DROP", ribs) > 2 * call("PRESSURE_DROP", WATER)
