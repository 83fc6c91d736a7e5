"""Free convection of plates, bodies and channels: limits, seams, regimes, and what answers for a surface."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import METHODS, chimney, free_body, free_plate
from cellfuncs.models.free import free_plate as free_plate_layer

FREE = [name for name, one in METHODS.items() if one.flows == ("free",)]
BY_RA = [name for name in FREE if METHODS[name].gives == "mean Nu" and "rayleigh" in METHODS[name].inputs]
STEPS_DOWN = {"Heat Atlas upper face": 0.86, "Goldstein-Sparrow-Jones upper face": 0.95, "Morgan cylinder": 0.99}
MORE = {"prandtl": 0.9, "length_over_diameter": 2.0, "facing": "held"}


def value(name, rayleigh, **more):
    inputs = METHODS[name].inputs
    return METHODS[name].evaluate(
        {"rayleigh": rayleigh, **{k: v for k, v in MORE.items() if k in inputs}, **more}, True
    )


def ends(name):
    low, high = next((r.low, r.high) for r in METHODS[name].ranges if r.variable == "Ra")
    return max(low, 1e-10), high


@pytest.mark.parametrize("name", BY_RA)
@given(st.floats(0.0, 1.0), st.floats(0.01, 1.0))
def test_more_drive_gives_more_heat(name, where, step):
    """Nu never falls as Ra grows, over the whole range; only where pieces step down, and by no more than they do."""
    low, high = np.log(ends(name))
    first = low + where * (high - low)
    more, less = value(name, float(np.exp(first + step))), value(name, float(np.exp(first)))
    assert more >= STEPS_DOWN.get(name, 1.0) * less > 0


@pytest.mark.parametrize(
    ("name", "seam", "step"),
    [
        ("McAdams upper face", 1e7, 1.0642),
        ("Lloyd-Moran upper face", 8e6, 1.0446),
        ("Goldstein-Sparrow-Jones upper face", 200.0, 0.9556),
        ("Morgan cylinder", 1e-2, 0.9984),
        ("Morgan cylinder", 1e2, 1.0019),
        ("Morgan cylinder", 1e4, 0.9996),
        ("Morgan cylinder", 1e7, 0.9924),
    ],
)
def test_steps_where_pieces_meet(name, seam, step):
    """The size of each step follows from the published powers; the docstrings tell them."""
    assert value(name, seam * (1 + 1e-12)) / value(name, seam) == pytest.approx(step, abs=2e-4)


def test_step_of_the_atlas():
    """VDI Heat Atlas F2: from the laminar to the turbulent upper face at Ra·f(Pr) 7e4."""
    at = 7e4 / (1.0 + (0.322 / 0.9) ** (11.0 / 20.0)) ** (-20.0 / 11.0)
    assert value("Heat Atlas upper face", at * 1.0001) / value("Heat Atlas upper face", at) == pytest.approx(
        0.866, abs=2e-3
    )


def test_plate_inclined_by_g_along_it_is_a_plate():
    """Fujii and Imura's inclined plate, Churchill and Chu's and Ede's at Pr 7 agree within their scatter."""
    ra = 1e8 * np.cos(np.radians(45.0))
    measured = free_plate.inclined_plate_held(ra, "held")
    assert measured == pytest.approx(free_plate.laminar_vertical_plate(ra, 7.0), rel=0.12)
    assert measured == pytest.approx(free_plate.laminar_integral(ra, 7.0), rel=0.1)


@given(st.floats(1.0, 1e8), st.floats(0.7, 100.0))
def test_thick_cylinder_is_a_plate(rayleigh, prandtl):
    cylinder = free_body.slender_cylinder_corrected(rayleigh, prandtl, 1e-8)
    assert cylinder == pytest.approx(free_plate.laminar_vertical_plate(rayleigh, prandtl), rel=1e-3)


@given(st.floats(1e6, 1e9), st.floats(0.7, 10.0), st.floats(0.1, 10.0))
def test_slender_cylinders_agree(rayleigh, prandtl, slenderness):
    one = free_body.slender_cylinder(rayleigh, prandtl, slenderness)
    assert one == pytest.approx(free_body.slender_cylinder_corrected(rayleigh, prandtl, slenderness), rel=0.11)


@pytest.mark.parametrize("prandtl", [0.01, 0.1, 0.72, 1.0, 7.0, 100.0, 1000.0])
def test_fits_of_similarity_beside_the_solved_layer(prandtl):
    """Le Fevre's fit is told to keep within 0.5 %, Ede's and Fujii and Fujii's within a few per cent, at any Pr."""
    solved = free_plate_layer(prandtl)
    assert free_plate.laminar_similarity(1e8, prandtl) == pytest.approx(solved.nusselt * 100.0, rel=6e-3)
    assert free_plate.laminar_integral(1e8 * prandtl, prandtl) == pytest.approx(solved.mean_nusselt * 100.0, rel=0.03)
    flux = free_plate_layer(prandtl, uniform_flux=True)
    assert free_plate.laminar_similarity_flux(1e10 * prandtl, prandtl) == pytest.approx(
        flux.nusselt_flux * 100.0, rel=0.015
    )


@pytest.mark.parametrize("prandtl", [0.01, 0.72, 7.0, 100.0])
def test_laminar_churchill_chu_beside_the_solved_layer(prandtl):
    """Its thin-layer part, 0.670 Ra^1/4 over the Prandtl function, was made from such solutions (Churchill and Chu)."""
    thin = free_plate.laminar_vertical_plate(1e8 * prandtl, prandtl) - 0.68
    assert thin == pytest.approx(free_plate_layer(prandtl).mean_nusselt * 100.0, rel=0.02)
    flux = free_plate_layer(prandtl, uniform_flux=True)
    half_height = 2.0 * (flux.slope / 2.0**0.5) * (1e8 / 8.0) ** 0.25  # Nu on the height, difference at half of it
    assert free_plate.laminar_vertical_plate_flux(1e8 * prandtl, prandtl) - 0.68 == pytest.approx(half_height, rel=0.02)


def test_the_other_face_of_an_inclined_plate_is_refused():
    with pytest.raises(OutOfRange, match="held face"):
        METHODS["Fujii-Imura inclined plate"].evaluate({"rayleigh": 1e6, "facing": "free"})


def test_stoutness_is_checked():
    with pytest.raises(OutOfRange, match="Gr"):
        METHODS["Churchill-Chu upright cylinder"].evaluate(
            {"rayleigh": 1e6, "prandtl": 0.7, "length_over_diameter": 10.0}
        )


def test_limits_of_channels():
    """Bar-Cohen and Rohsenow 1984: El/24 and El/12 for narrow channels, 0.59 El^1/4 for wide ones."""
    assert chimney.channel(0.1) == pytest.approx(0.1 / 24.0, rel=1e-3)
    assert chimney.channel_one_sided(0.1) == pytest.approx(0.1 / 12.0, rel=2e-3)
    assert chimney.channel(1e5) == pytest.approx(0.59 * 1e5**0.25, rel=1e-3)
    assert chimney.channel_measured(100.0) == pytest.approx(chimney.channel(100.0), rel=0.03)


@pytest.mark.parametrize(("heated", "nusselt"), [("both", chimney.channel), ("one", chimney.channel_one_sided)])
def test_best_spacing_carries_most(heated, nusselt):
    """Heat of a volume filled with thin plates goes as Nu/S², with El = Ra·(S/L)⁴ (Bar-Cohen and Rohsenow 1984)."""
    best = chimney.best_spacing(1e6, heated)
    spacings = best * np.linspace(0.7, 1.4, 701)
    heat = nusselt(1e6 * spacings**4) / spacings**2
    assert spacings[np.argmax(heat)] == pytest.approx(best, rel=2e-3)


@pytest.mark.parametrize(
    ("heated", "nusselt"), [("both", chimney.channel_flux), ("one", chimney.channel_flux_one_sided)]
)
def test_best_spacing_with_a_flux_joins_the_limits(heated, nusselt):
    """There the developed channel and the single plate alone give the same Nu, which the spacing was chosen by."""
    number = 1e10 * chimney.best_spacing_flux(1e10, heated) ** 5
    narrow = {"both": 12.0, "one": 6.0}[heated]
    assert nusselt(number) < (number / narrow) ** 0.5
    assert nusselt(number) == pytest.approx({"both": 0.62, "one": 0.49}[heated], abs=5e-3)
