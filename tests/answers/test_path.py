"""The heat path beyond a wall: overall coefficient, and the temperatures that follow."""

import math

import pytest


@pytest.fixture
def pipe(stated_duct):
    def rows(**more):
        base = {"wall temperature": None, "outside temperature": (280.0, "K"), "outside coefficient": (10.0, "W/m2K")}
        return stated_duct(**(base | {"coefficient": (500.0, "W/m2K")} | more))

    return rows


def test_series_of_resistances(cf, pipe):
    """A tube with wall, insulation, fouling and outside film: the sum of resistances on the inside surface."""
    more = {
        "wall thickness": (2.0, "mm"),
        "wall conductivity": (15.0, "W/mK"),
        "insulation thickness": (30.0, "mm"),
        "insulation conductivity": (0.04, "W/mK"),
        "fouling resistance": (1e-4, "m2-K/W"),
    }
    resistance = 1 / 500 + 1e-4 + 0.01 * math.log(12 / 10) / 15 + 0.01 * math.log(42 / 12) / 0.04 + 10 / 42 / 10
    assert cf("CASE", pipe(**more), "overall coefficient") == pytest.approx(1 / resistance, rel=1e-12)


def test_wall_lies_between_stream_and_surroundings(cf, pipe):
    block = pipe()
    outlet, wall = cf("CASE", block, "outlet temperature"), cf("CASE", block, "wall temperature")
    assert 280.0 < wall < outlet < 300.0
    assert cf("CASE", block, "overall coefficient") * (outlet - 280.0) == pytest.approx(500.0 * (outlet - wall))


def test_more_insulation_loses_less(cf, pipe):
    layers = [{}, {"insulation thickness": (20.0, "mm")}, {"insulation thickness": (60.0, "mm")}]
    rise = [
        cf("CASE", pipe(**(layer and layer | {"insulation conductivity": (0.04, "W/mK")})), "bulk rise")
        for layer in layers
    ]
    assert rise == sorted(rise)


@pytest.mark.parametrize(
    ("more", "part"),
    [
        ({"outside temperature": None}, "outside temperature"),
        ({"outside coefficient": None}, "outside coefficient"),
        ({"insulation thickness": (20.0, "mm")}, "insulation conductivity"),
        ({"wall temperature": (320.0, "K")}, "both stated"),
    ],
)
def test_half_a_path_is_refused(cf, pipe, more, part):
    answer = cf("TERMS", pipe(**more))
    assert isinstance(answer, str) and part in answer


def test_the_balance_closes_on_the_overall_coefficient(cf, pipe):
    assert cf("TERM", pipe(), "advection") == pytest.approx(cf("TERM", pipe(), "conduction across"), rel=1e-9)
