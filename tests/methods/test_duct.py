"""Methods for ducts against published numbers and at the seams of their ranges."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import OutOfRange
from cellfuncs.methods import duct, plate, recovery


@pytest.mark.parametrize(
    ("reynolds", "prandtl", "wanted"),
    [(4000.0, 0.7, 13.4872199), (30000.0, 100.0, 564.3933851)],
)
def test_gnielinski(reynolds, prandtl, wanted):
    """Gnielinski, Int. Chem. Eng. 16 (1976) 359, f = (0.79 ln Re − 1.64)^−2; evaluated twice, from memory."""
    friction = (0.79 * math.log(reynolds) - 1.64) ** -2
    assert duct.gnielinski(reynolds, prandtl, friction) == pytest.approx(wanted, rel=1e-6)


@pytest.mark.parametrize(
    ("x_star", "mean"),
    [(0.005, 8.943242662), (0.02, 5.814639048), (0.1, 4.155646042)],
)
def test_hausen_entry_against_the_graetz_series(x_star, mean):
    """Mean Nu of the 60-term Graetz series; Hausen's fit is within 6 %."""
    assert duct.hausen_entry(x_star) == pytest.approx(mean, rel=0.06)


@pytest.mark.parametrize(
    ("x_star", "local"),
    [(0.005, 7.493676762), (0.02, 5.198390132), (0.1, 4.374792683)],
)
def test_flux_entry_against_the_series(x_star, local):
    """Local Nu of the 40-term Siegel-Sparrow-Hallman series; the fit is within 1 %."""
    assert duct.flux_entry(x_star, "tube") == pytest.approx(local, rel=0.01)


def test_developed_limits():
    """Shah and London 1978: 3.6568, 48/11, 7.5407, 140/17, 4.8607, 5.3846; 64/Re and 96/Re."""
    assert duct.developed_laminar("tube", "temperature", "both") == pytest.approx(3.6568, abs=1e-5)
    assert duct.developed_laminar("tube", "flux", "both") == pytest.approx(4.3636, abs=5e-5)
    assert duct.developed_laminar("plates", "temperature", "both") == pytest.approx(7.5407, abs=5e-6)
    assert duct.developed_laminar("plates", "flux", "both") == pytest.approx(8.2353, abs=5e-5)
    assert duct.developed_laminar("plates", "flux", "one") == pytest.approx(70.0 / 13.0, abs=5e-5)
    assert duct.laminar_friction(64.0, "tube") == 1.0


@pytest.mark.parametrize("section", ["tube", "plates"])
@pytest.mark.parametrize("wall", ["temperature", "flux"])
def test_entry_methods_end_in_the_developed_value(section, wall):
    """Hausen's form ends in the rounded 3.66 and decays as Gz, hence half a per cent at x* = 5."""
    nusselt, *_ = duct.laminar_nusselt(5.0, section, wall, "both", 100.0, False)
    assert nusselt == pytest.approx(duct.developed_value(section, wall, "both"), rel=5e-3)


@pytest.mark.parametrize("seam", [2300.0, 4000.0])
def test_no_jump_at_the_seams(seam):
    below = duct.nusselt_and_friction(seam * (1 - 1e-9), 5.0, 0.01, "tube", "temperature", "both")
    above = duct.nusselt_and_friction(seam * (1 + 1e-9), 5.0, 0.01, "tube", "temperature", "both")
    if seam == 4000.0:
        assert above[0] == pytest.approx(below[0], rel=1e-6)
        assert above[1] == pytest.approx(below[1], rel=1e-6)
    else:
        assert above[0] == pytest.approx(below[0], rel=1e-6)


def test_range_refuses_in_words_and_allows_on_demand():
    with pytest.raises(OutOfRange, match=r"Gnielinski.*Pr 0\.5 to 2000.*0\.2"):
        duct.nusselt_and_friction(2e4, 0.2, 0.5, "tube", "temperature", "both")
    nusselt, _, name, outside = duct.nusselt_and_friction(2e4, 0.2, 0.5, "tube", "temperature", "both", True)
    assert nusselt > 0
    assert name == "Gnielinski"
    assert "Pr" in outside


def test_short_plates_with_one_wall_heated_are_refused():
    with pytest.raises(OutOfRange, match=r"x\*"):
        duct.laminar_nusselt(0.01, "plates", "flux", "one", 100.0, False)


def test_churchill_ozoe_plate():
    """Churchill and Ozoe, J. Heat Transfer 95 (1973) 78: local Nu at Re 1e4, Pr 0.01 is 5.227125735."""
    assert plate.churchill_ozoe_local(1e4, 0.01) == pytest.approx(5.227125735, rel=1e-6)


def test_turbulent_plate_local():
    """0.0296 Re^0.8 Pr^(1/3) at Re 1e6, Pr 0.7 (Chilton-Colburn, from memory)."""
    assert plate.turbulent_local(1e6, 0.7) == pytest.approx(1658.279471, rel=1e-6)


def test_plate_handbook_constant():
    """0.037 Re^0.8 − 871 for a transition at 5e5 (handbooks of heat transfer, common practice)."""
    assert (0.037 * 1e7**0.8 - plate.mixed(1e7, 1.0)) == pytest.approx(871.0, abs=1.0)


@given(st.floats(1e4, 1e6), st.floats(0.005, 500.0))
def test_recovery_table_is_positive_and_bounded(reynolds, prandtl):
    assert 0.05 <= recovery.turbulent_tube(reynolds, prandtl) <= 10.9


@pytest.mark.parametrize(("pr", "wanted", "within"), [(0.7, 0.836, 0.01), (1.0, 1.0, 1e-12), (7.0, 2.515, 0.09)])
def test_plate_recovery(pr, wanted, within):
    """Schlichting, Boundary-Layer Theory, table of recovery factors: 0.835 at 0.7, 1 at 1, 2.515 at 7 (from memory)."""
    assert recovery.laminar_plate(pr) == pytest.approx(wanted, rel=within)


@pytest.mark.parametrize(
    ("ratio", "temperature", "flux", "friction"),
    [(1.0, 2.976, 3.608, 56.91), (0.5, 3.391, 4.123, 62.19), (0.25, 4.439, 5.331, 72.93), (0.125, 5.597, 6.490, 82.34)],
)
def test_rectangles(ratio, temperature, flux, friction):
    """Shah and London 1978, table of rectangular ducts: Nu_T, Nu_H1 and f·Re (Darcy); digits from memory."""
    assert duct.developed_value("rectangle", "temperature", "both", ratio) == pytest.approx(temperature, rel=2e-3)
    assert duct.developed_value("rectangle", "flux", "both", ratio) == pytest.approx(flux, rel=2e-3)
    assert duct.friction_times_re("rectangle", ratio) == pytest.approx(friction, rel=2e-3)


@pytest.mark.parametrize(("ratio", "friction"), [(0.05, 86.27), (0.1, 89.37), (0.5, 95.25), (1.0, 96.0)])
def test_annulus_friction(ratio, friction):
    """Shah and London 1978, table of concentric annuli: f·Re (Darcy); digits from memory."""
    assert duct.friction_times_re("annulus", ratio) == pytest.approx(friction, rel=1e-3)


def test_annulus_ends_in_plates():
    for heated in ("inner", "outer"):
        assert duct.developed_value("annulus", "flux", heated, 1.0) == pytest.approx(5.385, rel=1e-3)
        assert duct.developed_value("annulus", "temperature", heated, 1.0) == pytest.approx(4.861, rel=1e-3)


def test_haaland_against_colebrook():
    """Colebrook 1939 solved to 1e-25 at Re 1e4, ε/D 1e-5: f = 0.03089842305; Haaland is within 2 %."""
    assert duct.rough_friction(1e4, 1e-5) == pytest.approx(0.03089842305, rel=0.02)


def test_liquid_metals():
    """Lyon 1951, 7 + 0.025 Pe^0.8: Pe 1000 gives 13.28; Skupinski et al. 1965 give 10.42, within their scatter."""
    assert duct.lyon(1000.0) == pytest.approx(7 + 0.025 * 251.19, rel=1e-4)
    assert duct.seban_shimazaki(1000.0) == pytest.approx(5 + 0.025 * 251.19, rel=1e-4)
    nusselt, _, name, _ = duct.nusselt_and_friction(5e4, 0.007, 0.5, "tube", "flux", "both")
    assert name == "Lyon"
    assert nusselt == pytest.approx(duct.lyon(350.0))
