"""Laminar ducts: the tables computed anew by other means, and the published fits against the exact series."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.polynomial import chebyshev, legendre
from scipy.linalg import eigh
from scipy.special import ellipe

from cellfuncs.errors import CellfuncsError, OutOfRange
from cellfuncs.methods import METHODS, duct_entry, duct_laminar, duct_series, duct_simultaneous, slip
from cellfuncs.methods import friction_laminar as friction
from cellfuncs.sources import read_table

NODES, WEIGHTS = legendre.leggauss(420)


# -- spectral solution across a coordinate, for the series and the annulus -------------------------------------------


def shapes(count, left, right):
    """Legendre polynomials combined in threes so that value ("D") or slope ("N") vanishes at each end."""

    def end(kind, n, side):
        return side**n if kind == "D" else side ** (n - 1) * n * (n + 1) / 2.0

    rows = np.zeros((count, count + 2))
    for k in range(count):
        rows[k, k] = 1.0
        if (left, right, k) == ("N", "N", 0):
            continue
        matrix = [[end(kind, k + j, side) for j in (1, 2)] for kind, side in ((left, -1.0), (right, 1.0))]
        known = [-end(kind, k, side) for kind, side in ((left, -1.0), (right, 1.0))]
        rows[k, k + 1 : k + 3] = np.linalg.solve(matrix, known)
    return rows


def across(count, left, right, stretch, radius, flow):
    """Eigenvalues, and fields at nodes and right end, of −(rφ')' = m·flow·φ on −1..1 stretched."""
    basis = shapes(count, left, right)
    values = legendre.legval(NODES, np.eye(count + 2)).T @ basis.T
    slopes = np.array([legendre.legval(NODES, legendre.legder(row)) for row in basis]).T / stretch
    weights = WEIGHTS * stretch
    stiff = (slopes * (weights * radius)[:, None]).T @ slopes
    mass = (values * (weights * flow)[:, None]).T @ values
    decay, mix = eigh(stiff, mass)
    return decay, values @ mix, (basis @ np.ones(count + 2)) @ mix, weights * flow


def series(section, wall, heated):
    """Decays and weights of the thermal entry, as the data file has them."""
    kind = "D" if wall == "temperature" else "N"
    if section == "tube":
        r = (NODES + 1.0) / 2.0
        decay, fields, end, weights = across(150, "N", kind, 0.5, r, r * 2.0 * (1.0 - r * r) / 4.0)
        part = 1.0
    else:
        left = kind if heated == "both" else "N"
        decay, fields, end, weights = across(120, left, kind, 1.0, 1.0 + 0.0 * NODES, 1.5 * (1.0 - NODES**2) / 16.0)
        part = 1.0 if heated == "both" else 0.5
    total = weights.sum()
    if wall == "temperature":
        weight = (fields * weights[:, None]).sum(axis=0) ** 2 / total
    else:
        decay, end = decay[1:], end[1:]
        weight = 4.0 * part * end**2 * total / decay
    keep = weight > 1e-14  # plates heated alike on both sides keep the even half
    return decay[keep], weight[keep]


@pytest.mark.parametrize(
    ("section", "wall", "heated"),
    [(s, w, h) for s, h in (("tube", "both"), ("plates", "both"), ("plates", "one")) for w in ("temperature", "flux")],
)
def test_every_term_of_the_series_is_found_anew(section, wall, heated):
    rows = [
        r for r in read_table("graetz_series.csv") if (r["section"], r["wall"], r["heated"]) == (section, wall, heated)
    ]
    decay, weight = series(section, wall, heated)
    if (section, heated, wall) == ("plates", "both", "flux"):
        decay, weight = decay[1::2], weight[1::2]  # odd fields take no heat from walls that heat alike
    assert len(rows) >= 40
    assert [float(r["decay"]) for r in rows] == pytest.approx(list(decay[: len(rows)]), rel=1e-7)
    assert [float(r["weight"]) for r in rows] == pytest.approx(list(weight[: len(rows)]), rel=1e-6)


@pytest.mark.parametrize(
    ("n", "eigenvalue", "constant"),
    [
        (0, 2.70436, 0.7487745551),
        (1, 6.67903, 0.5438279562),
        (2, 10.67338, 0.4628610602),
        (3, 14.67108, 0.4154184535),
        (4, 18.66987, 0.3829191881),
    ],
)
def test_published_constants_of_graetz(n, eigenvalue, constant):
    """Shah and London 1978, table of the Graetz problem: eigenvalues and G (digits from memory)."""
    (decay, weight) = duct_series._series()["tube", "temperature", "both"][n]
    assert math.sqrt(decay / 2.0) == pytest.approx(eigenvalue, abs=6e-6)
    assert weight * decay / 16.0 == pytest.approx(constant, rel=1e-6)


@pytest.mark.parametrize(("n", "squared"), [(1, 25.6796), (2, 83.8618), (3, 174.1667), (4, 296.5363), (5, 450.9472)])
def test_published_constants_of_uniform_flux(n, squared):
    """Siegel, Sparrow and Hallman 1958: squares of the eigenvalues (digits from memory)."""
    assert duct_series._series()["tube", "flux", "both"][n - 1][0] / 2.0 == pytest.approx(squared, rel=2e-6)


@pytest.mark.parametrize(("n", "eigenvalue"), [(0, 1.6816), (1, 5.6699), (2, 9.6682)])
def test_published_eigenvalues_of_plates(n, eigenvalue):
    """Shah and London 1978, parallel plates at one temperature: 1.6816, 5.6699, 9.6682 (digits from memory)."""
    decay = duct_series._series()["plates", "temperature", "both"][n][0]
    assert math.sqrt(decay * 3.0 / 32.0) == pytest.approx(eigenvalue, abs=6e-5)


# -- annulus --------------------------------------------------------------------------------------------------------


def annulus_temperature(ratio, heated):
    """Developed Nu of an annulus with the heated walls at one temperature; the coordinate is ln r."""
    inner, outer = ratio / (1.0 - ratio), 1.0 / (1.0 - ratio)
    stretch = math.log(outer / inner) / 2.0
    r = np.exp(math.log(inner) + stretch * (NODES + 1.0))
    b = (ratio**2 - 1.0) / math.log(ratio)
    u = 2.0 / (1.0 + ratio**2 - b) * (1.0 - (r / outer) ** 2 + b * np.log(r / outer))
    assert (WEIGHTS * r * r * (u - 1.0)).sum() == pytest.approx(0.0, abs=1e-9)
    left, right = {"both": "DD", "inner": "DN", "outer": "ND"}[heated]
    decay, *_ = across(60, left, right, stretch, 1.0 + 0.0 * r, r * r * u / 4.0)
    part = {"both": 1.0, "inner": inner / (inner + outer), "outer": outer / (inner + outer)}[heated]
    return decay[0] / (4.0 * part)


@pytest.mark.parametrize("heated", ["inner", "outer", "both"])
@pytest.mark.parametrize("ratio", [0.01, 0.017, 0.05, 0.09, 0.25, 0.45, 0.5, 0.85])
def test_annulus_at_one_temperature_is_found_anew(ratio, heated):
    got = METHODS["developed laminar, annulus"].evaluate({"wall": "temperature", "heated": heated, "ratio": ratio})
    assert got == pytest.approx(annulus_temperature(ratio, heated), rel=2e-3)


def test_annulus_with_two_fluxes_in_general():
    """Shah and London 1978: both influence coefficients of an annulus are bound by reciprocity, q per own surface."""
    for ratio in (0.05, 0.1, 0.25, 0.5, 1.0):
        inner = duct_laminar.table_value("annulus", "influence", "inner", ratio)
        outer = duct_laminar.table_value("annulus", "influence", "outer", ratio)
        flux_inner = duct_laminar.table_value("annulus", "flux", "inner", ratio)
        flux_outer = duct_laminar.table_value("annulus", "flux", "outer", ratio)
        assert inner / flux_inner * ratio == pytest.approx(outer / flux_outer, rel=1e-4)
    with pytest.raises(OutOfRange, match="two fluxes"):
        duct_laminar.developed_value("annulus", "flux", "both", 0.5)
    with pytest.raises(OutOfRange, match="1:100"):
        duct_laminar.developed_value("annulus", "temperature", "both", 0.001)


# -- sections in two dimensions ---------------------------------------------------------------------------------------


def in_two_dimensions(x, y, w, bump, bump_x, bump_y, diameter, degree, step):
    """f·Re, Nu at uniform temperature and at uniform flux, with polynomials times a bump that vanishes on the wall."""
    size_x, size_y, unit = np.abs(x).max(), np.abs(y).max(), np.eye(degree + 1)
    at_x, at_y = chebyshev.chebval(x / size_x, unit), chebyshev.chebval(y / size_y, unit)
    slope_x = np.array([chebyshev.chebval(x / size_x, chebyshev.chebder(e)) / size_x for e in unit])
    slope_y = np.array([chebyshev.chebval(y / size_y, chebyshev.chebder(e)) / size_y for e in unit])
    pairs = [(i, j) for i in range(0, degree + 1, step[0]) for j in range(0, degree + 1 - i, step[1])]
    fields = np.array([bump * at_x[i] * at_y[j] for i, j in pairs])
    along_x = np.array([(bump_x * at_x[i] + bump * slope_x[i]) * at_y[j] for i, j in pairs])
    along_y = np.array([(bump_y * at_y[j] + bump * slope_y[j]) * at_x[i] for i, j in pairs])
    w = w / w.sum()
    stiff = ((along_x * w) @ along_x.T + (along_y * w) @ along_y.T) * diameter**2
    values, vectors = np.linalg.eigh(stiff)
    kept = values > values.max() * 1e-13
    root = vectors[:, kept] / np.sqrt(values[kept])
    velocity = (root @ (root.T @ ((fields * w).sum(axis=1)))) @ fields
    mean = (velocity * w).sum()
    flow = w * velocity / mean
    slowest = np.linalg.eigvalsh(root.T @ ((fields * flow) @ fields.T) @ root)[-1]
    warmth = 4.0 * (root @ (root.T @ ((fields * flow).sum(axis=1)))) @ fields
    return 2.0 / mean, 1.0 / slowest / 4.0, 1.0 / (warmth * flow).sum()


def ellipse(ratio):
    g, wg = legendre.leggauss(40)
    angle = np.linspace(0.0, 2.0 * np.pi, 96, endpoint=False)
    r, angle = np.meshgrid((g + 1.0) / 2.0, angle, indexing="ij")
    x, y, w = (r * np.cos(angle)).ravel(), (ratio * r * np.sin(angle)).ravel(), (wg[:, None] * r).ravel()
    diameter = 4.0 * math.pi * ratio / (4.0 * ellipe(1.0 - ratio**2))
    bump = 1.0 - x * x - (y / ratio) ** 2
    return in_two_dimensions(x, y, w, bump, -2.0 * x, -2.0 * y / ratio**2, diameter, 18, (2, 2))


def triangle(apex_angle):
    g, wg = legendre.leggauss(40)
    slope = math.tan(math.radians(apex_angle) / 2.0)
    up, side = np.meshgrid((g + 1.0) / 2.0, g, indexing="ij")
    y, x, w = up.ravel(), (slope * up * side).ravel(), (wg[:, None] * up * wg[None, :]).ravel()
    diameter = 4.0 * slope / (2.0 * slope + 2.0 * math.hypot(slope, 1.0))
    sides = slope**2 * y * y - x * x
    bump_y = -sides + (1.0 - y) * 2.0 * slope**2 * y
    return in_two_dimensions(x, y, w, (1.0 - y) * sides, -2.0 * x * (1.0 - y), bump_y, diameter, 16, (2, 1))


def rectangle(ratio):
    g, wg = legendre.leggauss(40)
    x, y = (v.ravel() for v in np.meshgrid(g, g * ratio, indexing="ij"))
    bump, w = (1.0 - x * x) * (ratio**2 - y * y), (wg[:, None] * wg[None, :]).ravel()
    bump_x, bump_y = -2.0 * x * (ratio**2 - y * y), -2.0 * y * (1.0 - x * x)
    return in_two_dimensions(x, y, w, bump, bump_x, bump_y, 4.0 * ratio / (1.0 + ratio), 16, (2, 2))


@pytest.mark.parametrize(
    ("section", "solve", "at"),
    [("ellipse", ellipse, a) for a in (0.1, 0.27, 0.5, 0.95)]
    + [("triangle", triangle, a) for a in (20.0, 35.0, 60.0, 90.0)]
    + [("rectangle", rectangle, a) for a in (0.15, 0.4, 0.7, 1.0)],
)
def test_sections_are_found_anew(section, solve, at):
    friction_re, temperature, flux = solve(at)
    assert duct_laminar.friction_times_re(section, at) == pytest.approx(friction_re, rel=2e-3)
    assert duct_laminar.developed_value(section, "temperature", "both", at) == pytest.approx(temperature, rel=5e-3)
    assert duct_laminar.developed_value(section, "flux", "both", at) == pytest.approx(flux, rel=4e-3)


@pytest.mark.parametrize("ratio", [0.05, 0.2, 0.5, 0.8, 1.0])
def test_ellipse_friction_is_the_closed_form(ratio):
    """Shah and London 1978: f·Re (Fanning) = 2 (1 + α²) (π/E)², E the complete elliptic integral."""
    exact = 8.0 * (1.0 + ratio**2) * (math.pi / ellipe(1.0 - ratio**2)) ** 2
    assert duct_laminar.friction_times_re("ellipse", ratio) == pytest.approx(exact, rel=1e-3)


# -- fits ---------------------------------------------------------------------------------------------------------

PLACES = np.geomspace(1e-4, 20.0, 400)


@pytest.mark.parametrize(
    ("name", "given_too", "exact", "exact_too"),
    [
        ("Hausen entry", {}, "Graetz series, mean", {"section": "tube"}),
        ("tube entry", {}, "Graetz series, mean", {"section": "tube"}),
        ("Gnielinski laminar", {}, "Graetz series, mean", {"section": "tube"}),
        ("tube entry, local", {}, "Graetz series, local", {"section": "tube"}),
        ("plates entry", {}, "Graetz series, mean", {"section": "plates"}),
        ("plates entry, local", {}, "Graetz series, local", {"section": "plates"}),
        ("flux entry", {"section": "tube"}, "Graetz series, flux", {"section": "tube"}),
        ("flux entry", {"section": "plates"}, "Graetz series, flux", {"section": "plates"}),
        ("Gnielinski laminar, flux", {}, "Graetz series, flux", {"section": "tube"}),
        ("Churchill-Ozoe entry", {"wall": "temperature"}, "Graetz series, local", {"section": "tube"}),
        ("Churchill-Ozoe entry", {"wall": "flux"}, "Graetz series, flux", {"section": "tube"}),
    ],
)
def test_a_fit_stays_within_its_scatter_of_the_series(name, given_too, exact, exact_too):
    """The series are exact: every place of the entry, beginning where they have terms enough."""
    got = METHODS[name].evaluate({"x_star": PLACES, **given_too})
    wanted = METHODS[exact].evaluate({"x_star": PLACES, **exact_too})
    assert np.abs(got / wanted - 1.0).max() <= METHODS[name].scatter


@pytest.mark.parametrize("wall", ["temperature", "flux"])
def test_the_simultaneous_entry_lies_above_the_thermal_one(wall):
    both = duct_simultaneous.churchill_ozoe_simultaneous(PLACES, 0.7, wall)
    assert (both >= duct_entry.churchill_ozoe_entry(PLACES, wall) * (1.0 - 1e-12)).all()
    viscous = duct_simultaneous.churchill_ozoe_simultaneous(PLACES, 1e9, wall)
    assert viscous == pytest.approx(duct_entry.churchill_ozoe_entry(PLACES, wall), rel=0.02)


@given(st.floats(1e-4, 100.0))
def test_mean_is_above_local_and_the_series_falls(x_star):
    for section in ("tube", "plates"):
        mean, local = (
            METHODS[f"Graetz series, {k}"].evaluate({"x_star": x_star, "section": section}) for k in ("mean", "local")
        )
        assert mean > local * (1.0 - 1e-12)
        assert duct_series.graetz_flux(x_star, section) >= local


def test_series_on_columns_of_any_shape():
    grid = np.array([[0.001, 0.01], [0.1, 50.0]])
    for function in (duct_series.graetz_mean, duct_series.graetz_local, duct_series.graetz_flux):
        got = function(grid, "tube")
        assert got.shape == grid.shape
        assert got[1, 0] == pytest.approx(function(0.1, "tube"), rel=1e-13)


def test_apparent_friction_lies_above_developed_friction():
    x_plus = np.geomspace(1e-5, 10.0, 200)
    for section in ("tube", "plates", "rectangle", "annulus"):
        got = friction.shah_entry_friction(100.0, x_plus, section, 0.5)
        assert (got >= friction.laminar_friction(100.0, section, 0.5)).all()
        assert (np.diff(got) < 0).all()


@given(st.floats(0.0, 0.1), st.floats(0.5, 1.0))
def test_slip_lowers_friction_and_jump_lowers_nu(knudsen, accommodation):
    assert slip.slip_friction(100.0, knudsen, "tube", accommodation) <= 0.64
    assert slip.slip_flux(knudsen, 0.7, "tube", accommodation, accommodation) <= 48.0 / 11.0 * (1 + 1e-12)


def test_an_entry_method_is_refused_in_turbulent_flow():
    with pytest.raises(CellfuncsError, match=r"Re up to 2300, here 1e\+04"):
        METHODS["Graetz series, mean"].evaluate({"x_star": 0.01, "section": "tube", "reynolds": 1e4})
