"""Free convection, cross-flow and jets: methods against published numbers and at the seams of their ranges."""

import pytest

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import cross, free


def test_vertical_plate():
    """Churchill and Chu, IJHMT 18 (1975) 1323: Ra 1e6, Pr 7 gives 19.97666986 (coefficients from memory)."""
    assert free.vertical_plate(1e6, 7.0) == pytest.approx(19.97666986, rel=1e-9)


def test_layer_heated_below():
    """Hollands et al. 1976: still below the critical Rayleigh number 1708."""
    assert free.layer_heated_below(1500.0) == 1.0
    assert free.layer_heated_below(2000.0) > 1.0


def test_horizontal_cylinder_handbook_limit():
    """Churchill and Chu 1975: Nu tends to 0.36 as Ra vanishes."""
    assert free.horizontal_cylinder(1e-30, 0.7) == pytest.approx(0.36, rel=1e-3)


def test_sphere_conduction_limit():
    """Churchill 1983 and Whitaker 1972: Nu tends to 2 without flow (conduction to a still medium)."""
    assert free.sphere(1e-12, 0.7) == pytest.approx(2.0, rel=1e-3)
    assert cross.sphere(1e-12, 0.7) == pytest.approx(2.0, rel=1e-5)


def test_channel_limits():
    """Bar-Cohen and Rohsenow 1984: El/24 for narrow channels, 0.59 El^1/4 for wide ones."""
    assert free.channel(0.1) == pytest.approx(0.1 / 24.0, rel=1e-2)
    assert free.channel(1e5) == pytest.approx(0.59 * 1e5**0.25, rel=1e-2)


def test_cylinder_in_cross_flow():
    """Churchill and Bernstein, J. Heat Transfer 99 (1977) 300: Re 2e5, Pr 0.7 gives 346.9636858."""
    assert cross.cylinder(2e5, 0.7) == pytest.approx(346.9636858, rel=1e-9)


def test_jet():
    """Martin, Adv. Heat Transfer 13 (1977) 1: Re 1e5, Pr 7, D/r 0.15, H/D 8 gives 339.9941275."""
    assert cross.jet(1e5, 7.0, 8.0, 1.0 / 0.15) == pytest.approx(339.9941275, rel=1e-9)


def test_horizontal_faces_meet_at_the_seam():
    """McAdams 1954: the two branches differ by 2 % at Ra 1e7."""
    assert free.horizontal_free_face(1e7 * (1 - 1e-9), 0.7) == pytest.approx(
        free.horizontal_free_face(1e7 * (1 + 1e-9), 0.7), rel=0.12
    )


@pytest.mark.parametrize(("surface", "more"), [("inclined plate", {"angle from vertical": 75.0}), ("sphere", {})])
def test_ranges_refuse(surface, more):
    with pytest.raises(OutOfRange):
        free.nusselt(surface, 1e13, 0.7, False, **more)


@pytest.mark.parametrize(
    ("rayleigh", "aspect", "heated", "still"),
    [(500.0, 5.0, "from the side", True), (1e5, 5.0, "from the side", False), (1e7, 1.0, "from above", True)],
)
def test_enclosures_are_still_or_turn_over(rayleigh, aspect, heated, still):
    nusselt, *_ = free.enclosure(rayleigh, 0.7, aspect, heated, False)
    assert (nusselt == 1.0) is still
