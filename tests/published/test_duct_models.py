"""The solved duct against published values and against closed forms through general-purpose special functions.

Numbers of equations, chapters and tables of the sources are from memory, as are digits where it says so.
"""

import math

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from scipy.special import hyp1f1

from cellfuncs.models.duct import DuctProblem, solve

FAR = 60.0  # x*, where everything has developed
SHAH_LONDON = "Shah and London 1978"


@pytest.mark.parametrize(
    ("section", "heated", "wall", "nusselt", "source"),
    [
        ("tube", "both", "temperature", 3.6567934, f"{SHAH_LONDON}, eq. (175)"),
        ("tube", "both", "flux", 48.0 / 11.0, f"{SHAH_LONDON}, eq. (180)"),
        ("plates", "both", "temperature", 7.5407009, f"{SHAH_LONDON}, chapter VI"),
        ("plates", "both", "flux", 140.0 / 17.0, f"{SHAH_LONDON}, chapter VI"),
        ("plates", "one", "temperature", 4.8607367, f"{SHAH_LONDON}, chapter VI"),
        ("plates", "one", "flux", 70.0 / 13.0, f"{SHAH_LONDON}, chapter VI: 5.3846"),
    ],
)
def test_developed(section, heated, wall, nusselt, source):
    duct = solve(DuctProblem(section, heated, wall))
    assert duct.nusselt(FAR) == pytest.approx(nusselt, rel=2e-8), source
    assert duct.error < 1e-10


@pytest.mark.parametrize(
    ("section", "wall", "scale", "roots", "source"),
    [
        ("tube", "temperature", 2.0, (2.7043644, 6.6790315, 10.6733795, 14.6710785, 18.6698719), "Brown 1960, table 1"),
        ("plates", "temperature", 32 / 3, (1.6815953, 5.6698573, 9.6682425, 13.6676614, 17.6673736), "Brown 1960"),
        (
            "tube",
            "flux",
            2.0,
            (math.sqrt(25.679612), math.sqrt(83.8617555), math.sqrt(174.1667407), math.sqrt(296.5362993)),
            "Siegel, Sparrow and Hallman 1958 (25.6796, 83.8618, 174.167, 296.536)",
        ),
    ],
)
def test_eigenvalues(section, wall, scale, roots, source):
    modes = solve(DuctProblem(section, wall=wall))._stretches.parts[0].down
    found = np.sqrt(1.0 / (scale * modes.mu[::-1][: len(roots)]))
    np.testing.assert_allclose(found, roots, rtol=5e-8, err_msg=source)


def test_constants_of_the_series():
    """Nu = ΣG·e/(2ΣG/λ²·e); Shah and London 1978, table 12 (digits from memory, computed anew with mpmath)."""
    part = solve(DuctProblem())._stretches.parts[0]
    # bulk deficit Σ 8·(G/λ²)·exp(−2λ²x*)
    amplitude = -(part.down.bulk * part.down_amplitudes[:, 0])[::-1][:5]
    constants = amplitude / (8.0 * 2.0 * part.down.mu[::-1][:5])
    expected = (0.7487745551, 0.5438279562, 0.4628610602, 0.4154184535, 0.3829191881)
    np.testing.assert_allclose(constants, expected, rtol=1e-9)


PLACES = (1e-4, 1e-3, 5e-3, 1e-2, 2e-2, 5e-2, 0.1)
TABLES = {
    ("tube", "both", "temperature"): (22.28, 10.13, 6.002, 4.916, 4.172, 3.710, 3.658),
    ("tube", "both", "flux"): (27.28, 12.54, 7.494, 6.148, 5.198, 4.514, 4.375),
    ("plates", "both", "temperature"): (26.56, 12.82, 8.517, 7.741, 7.549, 7.541, 7.541),
    ("plates", "both", "flux"): (32.16, 15.43, 9.988, 8.803, 8.311, 8.236, 8.235),
}


@pytest.mark.parametrize("case", TABLES, ids=" ".join)
def test_developing(case):
    """Shah and London 1978, tables 13, 18, 30 and 33 (local Nu; digits from memory)."""
    section, heated, wall = case
    found = solve(DuctProblem(section, heated, wall)).nusselt(np.array(PLACES))
    np.testing.assert_allclose(found, TABLES[case], rtol=2e-4)


@pytest.mark.parametrize(
    ("wall", "place", "nusselt"),
    [
        ("temperature", 0.005, 6.001515328),
        ("temperature", 0.02, 4.172433177),
        ("temperature", 0.1, 3.658072653),
        ("flux", 0.005, 7.493676762),
        ("flux", 0.02, 5.198390132),
        ("flux", 0.1, 4.374792683),
    ],
)
def test_series_of_many_terms(wall, place, nusselt):
    """Graetz series of 60 terms, Siegel-Sparrow-Hallman series of 40 terms, both in mpmath."""
    assert solve(DuctProblem(wall=wall)).nusselt(place) == pytest.approx(nusselt, rel=1e-9)


@pytest.mark.parametrize(("place", "mean"), [(0.005, 8.943242662), (0.02, 5.814639048), (0.1, 4.155646042)])
def test_mean_over_the_length(place, mean):
    """Mean Nu on the logarithmic difference, 60 terms in mpmath: −ln(1 − θ_b)/(4x*)."""
    bulk = solve(DuctProblem()).bulk(place)
    assert -math.log1p(-bulk) / (4 * place) == pytest.approx(mean, rel=1e-9)


def test_near_the_step():
    """Lévêque 1928: Nu·x*^(1/3) → (8/9)^(1/3)/Γ(4/3)·… = 1.0773 in a tube; 1.2327 between plates (exact limit)."""
    wall_slope = {"tube": 8.0, "plates": 12.0}  # ∂(u/U)/∂(y/D)
    for section, slope in wall_slope.items():
        limit = (slope / 9.0) ** (1 / 3) / math.gamma(4 / 3)
        found = solve(DuctProblem(section)).nusselt(1e-7) * 1e-7 ** (1 / 3)
        assert found == pytest.approx(limit, rel=8e-3)


@pytest.mark.parametrize(
    ("index", "tube", "source"),
    [
        (1 / 3, 4.1753, "Lyche and Bird 1956; Rohsenow, Hartnett and Cho 1998: 4.18"),
        (0.5, 3.9494, "Lyche and Bird 1956: 3.95"),
        (1.0, 3.6568, "Lyche and Bird 1956: 3.66"),
    ],
)
def test_power_law_at_a_wall_temperature(index, tube, source):
    """Digits from memory; two of each are in the sources."""
    assert solve(DuctProblem(power_law=index)).nusselt(FAR) == pytest.approx(tube, rel=2e-5), source


@pytest.mark.parametrize("index", [0.1, 0.2, 1 / 3, 0.5, 0.8, 1.0, 1.5, 2.0, 5.0])
def test_power_law_with_a_flux(index):
    """Closed form 8(5n + 1)(3n + 1)/(31n² + 12n + 1), Rohsenow, Hartnett and Cho 1998, chapter 10."""
    n = index
    closed = 8 * (5 * n + 1) * (3 * n + 1) / (31 * n**2 + 12 * n + 1)
    duct = solve(DuctProblem(wall="flux", power_law=n))
    assert duct.nusselt(FAR) == pytest.approx(closed, rel=max(1e-9, 10 * duct.error))
    assert duct.error < 1e-6


@pytest.mark.parametrize(("section", "limit"), [("tube", 48 / 5), ("plates", 35 / 2)])
@pytest.mark.parametrize("brinkman", [1e-3, 1.0, 1e4, -1.0])
def test_friction_heat_far_downstream(section, limit, brinkman):
    """Shah and London 1978, eq. (177): 48/5; the same for plates, 35/2."""
    assert solve(DuctProblem(section)).nusselt(FAR, brinkman=brinkman) == pytest.approx(limit, rel=1e-9)


@pytest.mark.parametrize("brinkman", [0.0, 0.1, 1.0, 1e4, -0.2])
def test_friction_heat_with_a_flux(brinkman):
    """Shah and London 1978: Nu = 48/(11 + 48 Br), Br = μU²/(qD)."""
    found = solve(DuctProblem(wall="flux")).nusselt(FAR, brinkman=brinkman)
    assert found == pytest.approx(48 / (11 + 48 * brinkman), rel=1e-9)


@pytest.mark.parametrize(
    ("brinkman", "place", "bulk"),
    [
        (0.01, 0.005, 0.8371367352),
        (0.01, 0.1, 0.196304399),
        (0.01, 0.5, 0.00887416333),
        (0.1, 0.005, 0.845397216),
        (0.1, 0.5, 0.08382913168),
        (1.0, 0.005, 0.9280020232),
        (1.0, 0.1, 0.849144792),
    ],
)
def test_developing_with_friction_heat(brinkman, place, bulk):
    """Eigenfunction series in mpmath on Br(1 − r⁴), θ = (T − T_w)/(T_in − T_w): ours is 1 − that, our Br its −Br."""
    found = 1.0 - solve(DuctProblem()).bulk(place, brinkman=-brinkman)
    assert found == pytest.approx(bulk, rel=1e-8)


@pytest.mark.parametrize(
    ("peclet", "place", "bulk", "energy"),
    [
        (1.0, -0.2, None, 1.506750279),
        (1.0, -0.05, 0.6746454053, 2.803205453),
        (1.0, 0.05, None, 2.664165155),
        (1.0, 0.2, 0.2387791298, 1.046768399),
        (5.0, -0.02, 0.9042070695, 1.091466158),
        (5.0, 0.02, None, 0.8658377456),
        (5.0, 0.1, 0.2235961509, None),
        (10.0, -0.01, 0.9630003403, 1.023613085),
        (10.0, 0.01, None, 0.8424363843),
        (10.0, 0.1, 0.1999340938, 0.2192218375),
        (60.0, 0.01, 0.7499069779, 0.7537680592),
        (60.0, 0.05, None, 0.3964400341),
        (10.0, 0.0, 0.8596529054, None),
        (60.0, 0.0, 0.9737784551, None),
    ],
)
def test_step_with_conduction_along(peclet, place, bulk, energy):
    """Infinite tube, wall stepping from the inlet's temperature at x = 0: residue series in mpmath (slow near the
    step, so 1e-4 there), θ = (T − T_w)/(T_in − T_w)."""
    duct = solve(DuctProblem(peclet=peclet, upstream="wall at inlet temperature"))
    if bulk is not None:
        assert 1.0 - duct.bulk(place) == pytest.approx(bulk, rel=2e-5)
    if energy is not None:
        assert 1.0 - duct.energy(place) == pytest.approx(energy, rel=4e-5)


@pytest.mark.parametrize("peclet", [0.01, 1.0, 5.0, 10.0, 60.0, 1e3])
def test_decay_with_conduction_along(peclet):
    """The radial equation has Kummer's function for its solution: each of our μ makes it vanish at the wall."""
    part = solve(DuctProblem(peclet=peclet))._stretches.parts[-1]
    for decay in 1.0 / part.down.mu[::-1][:4]:

        def at_wall(rate):
            s = math.sqrt(2.0 * rate)
            a = 0.5 - (2.0 * rate + rate**2 / peclet**2) / (8.0 * s)
            return hyp1f1(a, 1.0, 0.5 * s)

        step = 1e-6 * decay
        slope = (at_wall(decay + step) - at_wall(decay - step)) / (2 * step)
        assert abs(at_wall(decay) / slope) < 2e-9 * decay


@pytest.mark.parametrize("heated", ["both", "one"])
@pytest.mark.parametrize("peclet", [0.5, 5.0, 100.0])
def test_decay_between_plates(heated, peclet):
    """The same equation between plates, integrated by a general-purpose solver: θ = 0 at the heated wall."""
    steep = 16.0 if heated == "both" else 4.0
    part = solve(DuctProblem("plates", heated, peclet=peclet))._stretches.parts[-1]
    for decay in 1.0 / part.down.mu[::-1][:3]:

        def slope(c, state, decay=decay):
            off = c if heated == "both" else 2.0 * c - 1.0
            push = decay * 1.5 * (1.0 - off * off) + decay**2 / peclet**2
            return state[1], -push * state[0] / steep

        end = solve_ivp(slope, (0.0, 1.0), (1.0, 0.0), rtol=1e-11, atol=1e-13).y[:, -1]
        assert abs(end[0]) < 1e-9 * abs(end[1])


@pytest.mark.parametrize(
    ("section", "peclet", "nusselt", "tolerance"),
    [
        ("tube", 1e-3, 4.180654, 1e-4),
        ("tube", 1.0, 4.0273, 1e-4),
        ("tube", 5.0, 3.7673, 1e-4),
        ("tube", 50.0, 3.656794 * (1 + 1.227 / 2500), 1e-5),
        ("plates", 1e-3, 8.11742, 1e-4),
    ],
)
def test_developed_with_conduction_along(section, peclet, nusselt, tolerance):
    """Michelsen and Villadsen 1974; Pahor and Strnad 1956, 1961, in Shah and London 1978 (digits from memory)."""
    far = FAR / min(1.0, peclet) ** 2
    assert solve(DuctProblem(section, peclet=peclet)).nusselt(far) == pytest.approx(nusselt, rel=tolerance)


def test_bulk_shift_of_a_flux():
    """Far downstream of a flux that starts at x = 0 in an infinite tube, conduction along adds 4/Pe² of qD/k to θ_b,
    and leaves Nu as it was (energy: bulk − (1/Pe²)·dθ/dx* = 4x*)."""
    for peclet in (0.5, 5.0, 50.0):
        duct = solve(DuctProblem(wall="flux", peclet=peclet))
        far = FAR * max(1.0, 1.0 / peclet**2)
        assert duct.bulk(far) - 4 * far == pytest.approx(4 / peclet**2, rel=1e-8, abs=1e-9)
        assert duct.nusselt(far) == pytest.approx(48 / 11, rel=1e-9)
