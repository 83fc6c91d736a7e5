"""Free and forced convection together: the blends at their ends, level tubes beside flow without buoyancy."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.methods import METHODS, mixed

NUSSELT = st.floats(0.1, 1e4)


@given(NUSSELT, NUSSELT)
def test_assisting_streams_give_more_than_either(forced, free):
    for nusselt in (
        mixed.blend(forced, free, "assisting"),
        mixed.blend_across_plate(forced, free),
        mixed.blend_across_body(forced, free),
    ):
        assert max(forced, free) <= nusselt * (1 + 1e-12)
        assert nusselt <= 2 ** (1 / 3) * max(forced, free) * (1 + 1e-12)


@given(NUSSELT, NUSSELT)
def test_opposing_streams_give_less_than_the_stronger(forced, free):
    assert mixed.blend(forced, free, "opposing") <= max(forced, free) * (1 + 1e-12)


def test_the_sharper_the_exponent_the_less_the_weaker_counts():
    values = (
        mixed.blend(10.0, 8.0, "transverse"),
        mixed.blend_across_plate(10.0, 8.0),
        mixed.blend_across_body(10.0, 8.0),
    )
    assert values == tuple(sorted(values, reverse=True))


@pytest.mark.parametrize("tube", [mixed.level_tube, mixed.long_level_tube])
@given(st.floats(1e-4, 0.05), st.floats(1.0, 1e6), st.floats(1.0, 1e6), st.floats(5.0, 1000.0))
def test_buoyancy_turns_a_level_tube_over(tube, x_star, grashof, more, prandtl):
    assert tube(x_star, 0.0, prandtl) <= tube(x_star, grashof, prandtl) <= tube(x_star, grashof + more, prandtl)
    assert tube(x_star, grashof, prandtl, 2.0) == pytest.approx(2.0**0.14 * tube(x_star, grashof, prandtl), rel=1e-12)


def test_transverse_blends_are_for_transverse_streams():
    assert METHODS["Churchill transverse body blend"].applies(direction="transverse", surface="sphere")
    assert not METHODS["Churchill transverse body blend"].applies(direction="assisting", surface="sphere")
    assert not METHODS["Churchill transverse plate blend"].applies(direction="transverse", surface="sphere")
