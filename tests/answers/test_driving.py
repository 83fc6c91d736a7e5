"""Differences that follow from a flux or a heat path beyond the wall: bodies, still fluids and enclosures."""

import math

import pytest

from cellfuncs.cells.catalogue import functions
from cellfuncs.sheets import starters

PATH = {
    "temperature beyond the wall": (90.0, "degC"),
    "coefficient beyond the wall": (500.0, "W/m2K"),
    "wall thickness": (2.0, "mm"),
    "wall conductivity": (15.0, "W/mK"),
    "insulation thickness": (3.0, "mm"),
    "insulation conductivity": (0.04, "W/mK"),
    "fouling resistance": (1e-4, "m2-K/W"),
}
DROPPED = ("wall temperature", "second wall temperature", "temperature difference", "answer", "heat flux")


def call(name, *arguments):
    return functions()[name].call(*arguments)


def case(block, what, unit=None):
    answer = call("CF_CASE", block, what, unit) if unit else call("CF_CASE", block, what)
    assert isinstance(answer, float), answer
    return answer


def block_of(kind, drop=DROPPED, **changes):
    rows = [list(row) for row in starters.starter(kind).rows if row[1] is not None and row[0] not in (*drop, *changes)]
    return [*rows, *([label, *cells] for label, cells in changes.items())]


@pytest.mark.parametrize("kind", ["plate", "cylinder", "sphere", "jet", "free", "mixed"])
def test_a_flux_gives_the_wall_that_the_coefficient_asks_for(kind):
    block = block_of(kind, **{"heat flux": (150.0, "W/m2")})
    assert case(block, "coefficient") * case(block, "temperature difference") == pytest.approx(150.0, rel=1e-9)
    stream, difference = case(block, "stream temperature"), case(block, "temperature difference")
    at = case(block, "property temperature")  # that of the stream or of the film, as the method's author meant
    assert min(abs(at - stream), abs(at - stream - 0.5 * difference)) < 1e-7


def test_a_wall_from_its_flux_is_the_wall_with_that_flux():
    kind = "cylinder"
    by_flux = block_of(kind, **{"heat flux": (150.0, "W/m2")})
    wall = case(by_flux, "wall temperature")
    by_wall = block_of(kind, **{"wall temperature": (wall, "K")})
    assert case(by_wall, "coefficient") * case(by_wall, "temperature difference") == pytest.approx(150.0, rel=1e-7)


@pytest.mark.parametrize("kind", ["plate", "jet", "free"])
def test_a_plane_path_is_a_series_of_resistances(kind):
    block = block_of(kind, **PATH)
    beyond = 1e-4 + 0.002 / 15 + 0.003 / 0.04 + 1 / 500
    overall = 1 / (1 / case(block, "coefficient") + beyond)
    assert case(block, "overall coefficient") == pytest.approx(overall, rel=1e-8)
    flux = overall * (363.15 - case(block, "stream temperature"))
    assert case(block, "coefficient") * case(block, "temperature difference") == pytest.approx(flux, rel=1e-8)


@pytest.mark.parametrize(("kind", "power"), [("cylinder", 1), ("sphere", 2)])
def test_a_round_path_leads_inwards(kind, power):
    block = block_of(kind, **PATH)
    outer = case(block, "diameter") / 2
    middle, inner = outer - 0.003, outer - 0.005
    if power == 1:
        layers = outer * (math.log(outer / middle) / 0.04 + math.log(middle / inner) / 15)
    else:
        layers = outer**2 * ((1 / middle - 1 / outer) / 0.04 + (1 / inner - 1 / middle) / 15)
    beyond = 1e-4 + layers + (outer / inner) ** power / 500
    assert case(block, "overall coefficient") == pytest.approx(1 / (1 / case(block, "coefficient") + beyond), rel=1e-8)


@pytest.mark.parametrize("kind", ["bank", "falling film"])
def test_a_path_behind_the_tubes_of_a_bank_and_behind_a_film(kind):
    rows = {key: PATH[key] for key in ("temperature beyond the wall", "coefficient beyond the wall")}
    bare = block_of(kind, **rows)
    fouled = block_of(kind, **rows, **{"fouling resistance": (1e-3, "m2-K/W")})
    difference = 1 / case(fouled, "overall coefficient") - 1 / case(bare, "overall coefficient")
    assert difference == pytest.approx(1e-3, rel=0.02)  # the properties move a little with the mean temperature
    low, high = sorted((case(bare, "outlet temperature"), 363.15))
    assert low < case(bare, "wall temperature") < high


@pytest.mark.parametrize("heated", ["from the side", "from below"])
def test_the_other_wall_of_an_enclosure_follows_from_its_flux(heated):
    rows = {"heated from": (heated,), "wall temperature": (20.0, "degC"), "heat flux": (40.0, "W/m2")}
    block = block_of("enclosure", **rows)
    other = case(block, "second wall temperature")
    assert other > 293.15
    assert case(block, "coefficient") * (other - 293.15) == pytest.approx(40.0, rel=1e-9)
    again = block_of("enclosure", **{**rows, "heat flux": (None,), "second wall temperature": (other, "K")})
    assert case(again, "local flux") == pytest.approx(40.0, rel=1e-8)


def test_a_cooling_flux_makes_the_other_wall_colder():
    block = block_of("enclosure", **{"wall temperature": (20.0, "degC"), "heat flux": (-40.0, "W/m2")})
    assert case(block, "second wall temperature") < 293.15


@pytest.mark.parametrize(
    ("kind", "rows", "word"),
    [
        ("plate", {"temperature beyond the wall": (90.0, "degC")}, "coefficient beyond the wall"),
        ("plate", {"fouling resistance": (1e-4, "m2-K/W"), "heat flux": (9.0, "W/m2")}, "beyond the wall"),
        ("plate", {**PATH, "heat flux": (9.0, "W/m2")}, "both stated"),
        ("cylinder", {**PATH, "insulation thickness": (30.0, "mm")}, "thicker than the body"),
        ("enclosure", {"heat flux": (9.0, "W/m2")}, "wall temperature"),
        ("enclosure", {"heat flux": (0.0, "W/m2"), "wall temperature": (20.0, "degC")}, "zero"),
        ("free", {"heat flux": (1e9, "W/m2")}, "film temperature"),
    ],
)
def test_what_cannot_be_closed_is_refused_in_words(kind, rows, word):
    block = block_of(kind, **rows)
    if rows.get("heat flux") == (0.0, "W/m2"):
        word = "zero"
    answer = call("CF_CASE", block, "coefficient")
    assert isinstance(answer, str) and answer.startswith("! ") and word in answer, answer
