"""Solved models against published tables; the source stands beside every value.

Values marked "from memory" were remembered and not looked up when written; the tolerance is the digits they were
remembered with.
"""

import math

import pytest

from cellfuncs.models import balance, body, free, gap, plate

# Pohlhausen 1921; Evans 1968, Laminar Boundary Layer Theory, table of Nu_x/√Re_x: from memory
NUSSELT = [
    (0.001, 0.0173, 1e-4), (0.01, 0.0516, 1e-4), (0.1, 0.1400, 1e-4), (0.6, 0.2769, 2e-4), (0.7, 0.2927, 1e-4),
    (1.0, 0.3321, 1e-4), (7.0, 0.6459, 1e-4), (10.0, 0.7281, 1e-4), (100.0, 1.572, 1e-3), (1000.0, 3.387, 1e-3),
]  # fmt: skip
# Eckert and Drewitz 1940: recovery factors, from memory
RECOVERY = [
    (0.6, 0.770, 5e-3), (0.7, 0.835, 2e-3), (0.8, 0.895, 2e-3), (1.0, 1.0, 1e-9),
    (7.0, 2.515, 2e-2), (10.0, 2.965, 1e-2), (15.0, 3.535, 1e-2),
]  # fmt: skip


@pytest.mark.parametrize(("prandtl", "value", "digits"), NUSSELT)
def test_pohlhausen(prandtl, value, digits):
    assert plate.plate(prandtl).nusselt == pytest.approx(value, abs=digits)


@pytest.mark.parametrize(("prandtl", "value", "digits"), RECOVERY)
def test_recovery_factors(prandtl, value, digits):
    assert plate.plate(prandtl).recovery == pytest.approx(value, abs=digits)


@pytest.mark.parametrize("prandtl", [100.0, 300.0, 1000.0])
def test_recovery_at_high_prandtl(prandtl):
    """r = 1.922·Pr^⅓ − 1.341 for large Pr: Gersten and Körner 1968, Int. J. Heat Mass Transfer 11, 655; from memory."""
    assert plate.plate(prandtl).recovery == pytest.approx(1.922 * prandtl ** (1 / 3) - 1.341, rel=1e-2)


def test_blasius_wall_shear():
    """f''(0) = 0.332057336215196: Boyd 2008, SIAM Review 50, 791 (The Blasius function); from memory."""
    assert plate.blasius().shear == pytest.approx(0.33205733621519630, rel=1e-15)
    assert plate.blasius().end == pytest.approx(10.0 - 1.7207876575205, abs=1e-9)


@pytest.mark.parametrize(("prandtl", "value"), [(0.7, 0.4058), (10.0, 0.997), (100.0, 2.152)])
def test_uniform_flux_on_a_plate(prandtl, value):
    """Churchill and Ozoe 1973, J. Heat Transfer 95, 416: 0.4637·Pr^⅓/(1 + (0.0207/Pr)^⅔)^¼, within 1 %; from memory."""
    fit = 0.4637 * prandtl ** (1 / 3) / (1 + (0.0207 / prandtl) ** (2 / 3)) ** 0.25
    assert plate.plate(prandtl).nusselt_flux == pytest.approx(fit, rel=1.5e-2)
    assert plate.plate(prandtl).nusselt_flux == pytest.approx(value, rel=1e-3)  # regression


# Ostrach 1953, NACA TR 1111: f''(0) and −θ'(0), from memory
OSTRACH = [
    (0.01, 0.9862, 0.0812), (1.0, 0.6421, 0.5671), (2.0, 0.5713, 0.7165), (10.0, 0.4192, 1.1694),
    (100.0, 0.2517, 2.191), (1000.0, 0.1450, 3.966),
]  # fmt: skip


@pytest.mark.parametrize(("prandtl", "shear", "slope"), OSTRACH)
def test_ostrach(prandtl, shear, slope):
    digits = 1e-2 if prandtl < 0.1 else 5e-4  # his solution at 0.01 is known to be off by a percent
    found = free.free_plate(prandtl)
    assert found.shear == pytest.approx(shear, rel=digits)
    assert found.slope == pytest.approx(slope, rel=digits)


# Sparrow and Gregg 1956, Trans. ASME 78, 435: −θ(0) in Nu_x = (Gr*_x/5)^⅕/(−θ(0)), from memory
SPARROW_GREGG = [(0.1, 2.7507), (1.0, 1.3574), (10.0, 0.76746), (100.0, 0.46566)]


@pytest.mark.parametrize(("prandtl", "value"), SPARROW_GREGG)
def test_sparrow_and_gregg(prandtl, value):
    assert 0.2**0.2 / free.free_plate(prandtl, uniform_flux=True).nusselt_flux == pytest.approx(value, rel=2e-4)


def test_mean_is_four_thirds_of_the_local_value():
    """Ostrach 1953: local; the mean is 4/3 of it."""
    found = free.free_plate(0.72)
    assert found.mean_nusselt == pytest.approx(4 / 3 * found.nusselt, rel=1e-15)


# Nahme 1940; Gavis and Laurence 1968, Ind. Eng. Chem. Fundam. 7, 232: closed forms, checked by another collocation
NAHME = [(10.0, True, 0.2819830827, 1.791759469)]


@pytest.mark.parametrize(("nahme", "insulated", "stress", "peak"), NAHME)
def test_nahme_closed_forms(nahme, insulated, stress, peak):
    film = gap.at_speed(gap.Gap(gap.exponential(), high=None if insulated else 0.0), nahme)
    assert film.stress == pytest.approx(stress, rel=1e-8)
    assert film.peak == pytest.approx(peak, rel=1e-8)


@pytest.mark.parametrize(("insulated", "largest"), [(False, 3.513830719), (True, 0.878457680)])
def test_critical_stress_is_the_critical_frank_kamenetskii_number(insulated, largest):
    """δ = 3.514 over the gap (0.878 on half of it): Frank-Kamenetskii 1939; θ'' + δ·e^θ = 0 is the same equation."""
    assert gap.critical_nahme(insulated)[1] == pytest.approx(largest, rel=1e-9)
    top = gap.turning_point(gap.Gap(gap.exponential(), high=None if insulated else 0.0))
    assert top.heating * top.stress**2 == pytest.approx(largest, rel=1e-9)


def test_peak_of_a_heated_film():
    """μU²/(8k) above two equal walls; the flux through each is μU²/(2h): closed forms in dimensional numbers."""
    viscosity, speed, height, conductivity = 0.3, 12.0, 0.0005, 0.14
    film = gap.at_speed(gap.Gap(), viscosity * speed**2 / conductivity)
    assert film.peak == pytest.approx(viscosity * speed**2 / (8 * conductivity), rel=1e-12)
    assert film.low_flux * conductivity / height == pytest.approx(43_200.0, rel=1e-9)
    assert math.isclose(film.low_flux, film.high_flux, rel_tol=1e-12)


def test_ogata_and_banks():
    """Ogata and Banks 1961, USGS Professional Paper 411-A, equation 9, at vx/D = 0.1 and v²t/D = 5e-3."""
    assert balance.advancing_front(0.1, 0.005) == pytest.approx(0.3333604845, rel=1e-9)


# exact series of a plane wall (Carslaw and Jaeger), recomputed with another method: Bi, Fo, middle, surface, heat part
WALL = [(0.1, 5.0, 0.6263767236, 0.5963180708, 0.3836752537), (10.0, 0.2, None, 0.1224822381, 0.4167379674)]


@pytest.mark.parametrize(("biot", "fourier", "middle", "surface", "heat"), WALL)
def test_transient_plane_wall(biot, fourier, middle, surface, heat):
    found = body.body("plane wall", biot, fourier)
    assert middle is None or found.middle == pytest.approx(middle, rel=1e-9)
    assert found.surface == pytest.approx(surface, rel=1e-9)
    assert 1 - found.mean == pytest.approx(heat, rel=1e-9)


@pytest.mark.parametrize(
    ("biot", "middle", "off_at_surface"),
    [(0.01, 0.3697175023, None), (0.1, 0.3861332871, 7.507319861e-4), (1.0, None, 5.658787888e-2)],
)
def test_lumped_against_exact_at_one_time_constant(biot, middle, off_at_surface):
    """The same series: at Bi·Fo = 1 the lumped body is at 1/e; its error against the exact surface."""
    found = body.body("plane wall", biot, 1 / biot)
    assert found.lumped == pytest.approx(math.exp(-1), rel=1e-15)
    assert middle is None or found.middle == pytest.approx(middle, rel=1e-9)
    if off_at_surface is not None:
        assert abs(found.lumped / found.surface - 1) == pytest.approx(off_at_surface, rel=1e-8)


# Heisler 1947, Trans. ASME 69, 227; first roots and coefficients as handbooks print them, from memory
FIRST_ROOTS = [
    ("plane wall", 1.0, 0.8603, 1.1191), ("plane wall", 0.1, 0.3111, 1.0161), ("long cylinder", 1.0, 1.2558, 1.2071),
    ("sphere", 1.0, 1.5708, 1.2732), ("sphere", 0.1, 0.5423, 1.0298), ("plane wall", 10.0, 1.4289, 1.2620),
]  # fmt: skip


@pytest.mark.parametrize(("shape", "biot", "root", "factor"), FIRST_ROOTS)
def test_late_ratios_follow_the_first_root_and_coefficient(shape, biot, root, factor):
    late, later = body.body(shape, biot, 2.0).middle, body.body(shape, biot, 3.0).middle
    assert math.sqrt(math.log(late / later)) == pytest.approx(root, abs=1e-4)
    assert late * math.exp(2.0 * math.log(late / later)) == pytest.approx(factor, abs=2e-4)
