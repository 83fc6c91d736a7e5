"""Flow from a pressure drop, flow or flux from a duty: what follows gives back what was stated."""

import pytest

from cellfuncs.cells.catalogue import functions

TUBE = [
    ["flow kind", "duct"],
    ["substance", "water"],
    ["diameter", 20.0, "mm"],
    ["length", 6.0, "m"],
    ["inlet temperature", 20.0, "degC"],
]
WALL = ["wall temperature", 60.0, "degC"]
BED = [
    ["flow kind", "bed"],
    ["substance", "air"],
    ["particle diameter", 5.0, "mm"],
    ["voidage", 0.4],
    ["length", 0.5, "m"],
    ["flow area", 0.1, "m2"],
    ["inlet temperature", 20.0, "degC"],
    WALL,
]


def case(block, what):
    answer = functions()["CF_CASE"].call(block, what)
    assert isinstance(answer, float), answer
    return answer


def call(name, *arguments):
    return functions()["CF_" + name].call(*arguments)


@pytest.mark.parametrize("kilopascals", [0.02, 1.0, 20.0, 300.0])
def test_the_flow_of_a_pressure_drop_has_that_pressure_drop(kilopascals):
    open_flow = [*TUBE, WALL, ["pressure drop", kilopascals, "kPa"], ["pressure", 20.0, "bar"]]
    velocity = case(open_flow, "velocity")
    again = [*TUBE, WALL, ["velocity", velocity, "m/s"], ["pressure", 20.0, "bar"]]
    assert case(again, "pressure drop") == pytest.approx(1000 * kilopascals, rel=1e-7)
    assert case(open_flow, "outlet temperature") == pytest.approx(case(again, "outlet temperature"), rel=1e-9)
    assert isinstance(call("TERMS", open_flow), list) and isinstance(call("PREMISES", open_flow), list)


def test_poiseuille_flow_of_a_pressure_drop():
    block = [
        ["flow kind", "duct"], ["diameter", 10.0, "mm"], ["length", 2.0, "m"], ["pressure drop", 640.0, "Pa"],
        ["density", 1000.0, "kg/m3"], ["viscosity", 0.1, "Pa.s"], ["conductivity", 0.1, "W/mK"],
        ["specific heat", 2000.0, "J/kgK"], ["temperature difference", 10.0, "K"],
    ]  # fmt: skip
    # Hagen-Poiseuille: U = Δp·D²/(32 μ L)
    assert case(block, "velocity") == pytest.approx(640 * 0.01**2 / (32 * 0.1 * 2.0), rel=1e-9)


def test_the_flow_of_a_bed():
    block = [*BED, ["pressure drop", 500.0, "Pa"]]
    velocity = case(block, "velocity")
    assert case([*BED, ["velocity", velocity, "m/s"]], "pressure drop") == pytest.approx(500.0, rel=1e-7)


def test_a_duty_with_a_flow_gives_flux_and_rise():
    block = [*TUBE, ["mass flow", 0.4, "kg/s"], ["duty", 25.0, "kW"]]
    assert case(block, "duty") == pytest.approx(25_000.0, rel=1e-9)
    rise = 25_000.0 / (0.4 * case(block, "specific heat"))
    assert case(block, "bulk rise") == pytest.approx(rise, rel=1e-9)
    assert case(block, "wall temperature") > case(block, "outlet temperature")


def test_a_duty_with_a_pressure_drop_gives_flow_and_flux():
    block = [*TUBE, ["pressure drop", 5.0, "kPa"], ["duty", 10.0, "kW"]]
    assert case(block, "duty") == pytest.approx(10_000.0, rel=1e-7)
    assert case(block, "pressure drop") == pytest.approx(5_000.0, rel=1e-6)


def test_a_duty_with_a_wall_gives_the_flow():
    block = [*TUBE, WALL, ["duty", 40.0, "kW"]]
    velocity = case(block, "velocity")
    assert case([*TUBE, WALL, ["velocity", velocity, "m/s"]], "duty") == pytest.approx(40_000.0, rel=1e-7)


def test_a_sweep_varies_what_is_stated():
    block = [*TUBE, WALL, ["pressure drop", 5.0, "kPa"]]
    found = call("VALUE_FOR", block, "pressure drop", "velocity", case(block, "velocity"))
    assert found == pytest.approx(5000.0, rel=1e-6)


@pytest.mark.parametrize(
    ("block", "word"),
    [
        ([*TUBE, WALL, ["pressure drop", -5.0, "kPa"]], "above zero"),
        ([*TUBE, WALL, ["duty", 0.0, "kW"]], "zero"),
        ([*TUBE, WALL, ["velocity", 1.0, "m/s"], ["duty", 9.0, "kW"]], "leave one"),
        ([*TUBE, WALL, ["duty", 1e9, "kW"]], "no velocity"),
        ([*TUBE, WALL, ["duty", -9.0, "kW"]], "no velocity"),
        ([*TUBE[:2], *TUBE[3:], ["hydraulic diameter", 20.0, "mm"], ["velocity", 1.0, "m/s"], ["duty", 9.0, "kW"]],
         "flow area"),
        ([["flow kind", "plate"], ["duty", 9.0, "kW"]], "no use"),
    ],
)  # fmt: skip
def test_what_has_no_answer_is_said(block, word):
    answer = call("CASE", block, "velocity")
    assert isinstance(answer, str) and answer.startswith("! ") and word in answer, answer
