"""Ellipse and triangle as rows of a case, nozzles of jets: what follows from them by geometry, and refusals."""

import math

import pytest

from cellfuncs.cells import catalogue


def cf(name, *given):
    return catalogue.functions()[f"CF_{name}"].call(*given)


def duct(*rows):
    return [
        ["flow kind", "duct", ""],
        ["substance", "water", ""],
        ["velocity", 0.02, "m/s"],
        ["length", 4, "m"],
        ["inlet temperature", 20, "degC"],
        ["wall temperature", 40, "degC"],
        *rows,
    ]


def box(height, width, section):
    return duct(["height", height, "mm"], ["width", width, "mm"], ["section", section, ""])


def jet(*rows):
    return [
        ["flow kind", "jet", ""],
        ["substance", "air", ""],
        ["velocity", 40, "m/s"],
        ["distance", 50, "mm"],
        ["stream temperature", 20, "degC"],
        ["wall temperature", 60, "degC"],
        *rows,
    ]


def test_an_ellipse_of_equal_axes_is_a_tube():
    tube = duct(["diameter", 10, "mm"])
    for what in ("hydraulic diameter", "flow area", "friction factor", "pressure drop"):
        assert cf("CASE", box(10, 10, "ellipse"), what) == pytest.approx(cf("CASE", tube, what), rel=2e-3)


def test_a_slender_ellipse_has_the_perimeter_of_ramanujan():
    a, b = 20.0, 5.0
    h = ((a - b) / (a + b)) ** 2
    around = math.pi * (a + b) * (1 + 3 * h / (10 + math.sqrt(4 - 3 * h)))
    wanted = 4 * math.pi * a * b / around / 1000
    assert cf("CASE", box(10, 40, "oval"), "hydraulic diameter") == pytest.approx(wanted, rel=1e-5)


def test_an_equilateral_triangle():
    side, height = 20.0, 10.0 * math.sqrt(3.0)
    block = box(height, side, "triangle")
    assert cf("CASE", block, "hydraulic diameter") == pytest.approx(side / math.sqrt(3.0) / 1000, rel=1e-12)
    still = [row for row in block if row[0] != "wall temperature"]  # no exchange: the friction of one temperature
    reynolds = cf("CASE", still, "Reynolds number")
    assert cf("CASE", still, "friction factor") * reynolds == pytest.approx(160 / 3, rel=1e-3)
    block[2] = ["velocity", 0.001, "m/s"]
    assert cf("NUSSELT_OF", block) == pytest.approx(2.47, rel=0.05)  # Shah and London 1978, from memory


@pytest.mark.parametrize("section", ["ellipse", "triangle"])
def test_a_box_is_needed(section):
    told = cf("COEFFICIENT", duct(["diameter", 10, "mm"], ["section", section, ""]))
    assert told.startswith("! block:") and '"height"' in told


@pytest.mark.parametrize("section", ["ellipse", "triangle", "rectangle"])
@pytest.mark.parametrize("wall", [["wall temperature", 40, "degC"], ["heat flux", 500, "W/m2"]])
@pytest.mark.parametrize("velocity", [0.01, 0.1, 0.3, 1.0])
def test_every_speed_has_a_coefficient(section, wall, velocity):
    block = box(10, 20, section)
    block[2], block[5] = ["velocity", velocity, "m/s"], wall
    assert cf("COEFFICIENT", block) > 0
    assert cf("PRESSURE_DROP", block) > 0


def test_a_nozzle_is_known_by_its_rows():
    rows = {
        "Martin jet": (["diameter", 10, "mm"], ["radius", 50, "mm"]),
        "Martin slot jet": (["slot width", 5, "mm"], ["radius", 50, "mm"]),
        "Martin jet array": (["diameter", 10, "mm"], ["open area", 2, "%"]),
        "Martin slot array": (["slot width", 5, "mm"], ["open area", 5, "%"]),
    }
    for name, given in rows.items():
        assert cf("CASE", jet(*given), "method") == name


def test_an_array_covers_what_its_open_area_leaves():
    round_array = jet(["diameter", 10, "mm"], ["open area", 2, "%"])
    cell = math.pi / 4 * 0.01**2 / 0.02
    assert cf("CASE", round_array, "duty") == pytest.approx(cf("COEFFICIENT", round_array) * 40 * cell, rel=1e-9)
    slots = jet(["slot width", 5, "mm"], ["open area", 5, "%"], ["width", 300, "mm"])
    pitch = 0.005 / 0.05
    assert cf("CASE", slots, "duty") == pytest.approx(cf("COEFFICIENT", slots) * 40 * pitch * 0.3, rel=1e-9)


def test_what_contradicts_an_array_is_refused():
    assert "follows" in cf("COEFFICIENT", jet(["diameter", 10, "mm"], ["open area", 2, "%"], ["radius", 50, "mm"]))
    assert "part of the wall" in cf("COEFFICIENT", jet(["diameter", 10, "mm"], ["open area", 100, "%"]))
    assert '"radius" is missing' in cf("COEFFICIENT", jet(["slot width", 5, "mm"]))
