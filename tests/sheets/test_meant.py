"""What a number is meant to be: a mean of the stream or of the film, a section or a surface, a method's exponent.

The stored values follow from the formulas of each sheet, evaluated here in the same terms; continuity, the section of
a circle and Dittus-Boelter's exponents 0.4 (heated) and 0.3 (cooled) are all that is asked.
"""

from math import log, log10, pi

import pytest

from cellfuncs.sheets.check import check_book


def found(book):
    return [(f.cell.rpartition("!")[2], f.code, f.severity) for f in check_book(book).findings]


def condenser(exponent=0.4, mean="Mean water temperature", typed=False):
    """Cooling water in the tubes of a condenser, heated by a wall at 35 °C."""
    section = pi / 4.0 * 0.016**2
    speed = 18.0 / 3600.0 / 24.0 / section
    prandtl = 0.9107e-3 * 4182.0 / 0.6049
    reynolds = 997.3 * speed * 0.016 / 0.9107e-3
    nusselt = 0.023 * reynolds**0.8 * prandtl**exponent
    rows = (
        ("Number of tubes in parallel", 24.0, "-"),
        ("Total water flow", 18.0, "m3/h"),
        ("Tube ID", 16.0, "mm"),
        ("Tube length", 2.5, "m"),
        ("Water inlet temperature", 20.0, "°C"),
        ("Water outlet temperature", 28.0, "°C"),
        (mean, 24.0 if typed else ("=(B7+B8)/2", 24.0), "°C"),
        ("Density", 997.3, "kg/m3"),
        ("Dynamic viscosity", 0.9107, "mPa s"),
        ("Thermal conductivity", 0.6049, "W/mK"),
        ("Specific heat", 4.182, "kJ/kgK"),
        ("Prandtl number", ("=B11/1000*B13*1000/B12", prandtl), "-"),
        ("Flow area per tube", ("=PI()/4*(B5/1000)^2", section), "m2"),
        ("Water velocity", ("=B4/3600/B3/B15", speed), "m/s"),
        ("Reynolds number", ("=B10*B16*B5/1000/(B11/1000)", reynolds), "-"),
        ("Tube wall temperature", 35.0, "°C"),
        ("Nusselt number, Dittus-Boelter", (f"=0.023*B17^0.8*B14^{exponent}", nusselt), "-"),
        ("Heat transfer coefficient", ("=B19*B12/(B5/1000)", nusselt * 0.6049 / 0.016), "W/m2K"),
        ("LMTD", ("=((B18-B7)-(B18-B8))/LN((B18-B7)/(B18-B8))", 8.0 / log(15.0 / 7.0)), "K"),
    )
    cells = {"A1": "Condenser tubes, cooling water side", "A2": "Fluid", "B2": "water"}
    for number, row in enumerate(rows, 3):
        cells |= dict(zip((f"A{number}", f"B{number}", f"C{number}"), row, strict=True))
    return cells


def line(velocity="=B4/3600/B8", factor=1.0, label="Flow area", section="=PI()/4*(B5/1000)^2", area=None):
    """Water pumped through a pipe; ``factor`` is what its formula makes of the right velocity."""
    area = area or pi / 4.0 * 0.08**2
    speed = factor * 25.0 / 3600.0 / (pi / 4.0 * 0.08**2)
    reynolds = 998.2 * speed * 0.08 / 1.0016e-3
    friction = 0.25 / log10(0.05 / 80.0 / 3.7 + 5.74 / reynolds**0.9) ** 2
    rows = (
        ("Fluid", "Water", ""),
        ("Temperature", 20.0, "°C"),
        ("Flow", 25.0, "m3/h"),
        ("Pipe ID", 80.0, "mm"),
        ("Length", 120.0, "m"),
        ("Roughness", 0.05, "mm"),
        (label, (section, area), "m2"),
        ("Velocity", (velocity, speed), "m/s"),
        ("Density", 998.2, "kg/m3"),
        ("Viscosity", 1.0016, "mPa s"),
        ("Reynolds number", ("=B10*B9*B5/1000/(B11/1000)", reynolds), "-"),
        ("Friction factor, Swamee-Jain", ("=0.25/LOG10(B7/B5/3.7+5.74/B12^0.9)^2", friction), "-"),
        ("Pressure drop", ("=B13*B6/(B5/1000)*B10*B9^2/2/1000", friction * 1500 * 998.2 * speed**2 / 2e3), "kPa"),
    )
    cells = {"A1": "Pump line, water"}
    for number, row in enumerate(rows, 2):
        cells |= dict(zip((f"A{number}", f"B{number}", f"C{number}"), row, strict=True))
    return cells


@pytest.mark.parametrize("typed", [False, True])
@pytest.mark.parametrize("mean", ["Mean water temperature", "Bulk temperature"])
def test_a_mean_of_the_stream_is_no_film_temperature(make_book, mean, typed):
    assert not found(make_book(condenser(mean=mean, typed=typed)))


def test_the_exponent_of_cooling_is_wrong_where_water_is_heated(make_book):
    ((cell, code, severity),) = found(make_book(condenser(exponent=0.3)))
    assert (cell, code) == ("B19", "exponent-heating-cooling")
    assert severity in ("warning", "error")


@pytest.mark.parametrize(
    ("velocity", "factor", "code"),
    [
        ("=B4/3600/(PI()*(B5/1000)^2)", 0.25, "radius-for-diameter"),
        ("=B4/3600/(PI()/4*(B5/2000)^2)", 4.0, "radius-for-diameter"),
        ("=B4/3600/(B5/1000)^2", pi / 4.0, "area-factor"),
        ("=1.3*B4/3600/(PI()/4*(B5/1000)^2)", 1.3, None),
        ("=2*B4/3600/(PI()/4*(B5/1000)^2)", 2.0, None),
    ],
)
def test_a_velocity_is_flow_over_area_whatever_its_formula_uses(make_book, velocity, factor, code):
    ((cell, cause, severity),) = found(make_book(line(velocity, factor)))
    assert (cell, severity) == ("B9", "error")
    assert code in (None, cause)


@pytest.mark.parametrize("label", ["Area", "Area A", "Flow area"])
def test_an_area_that_a_flow_is_divided_by_is_its_section(make_book, label):
    assert not found(make_book(line(label=label)))
    assert not found(make_book(line("=4*B4/3600/(PI()*(B5/1000)^2)", label=label)))
    wrong = found(make_book(line(factor=0.25, label=label, section="=PI()*(B5/1000)^2", area=pi * 0.08**2)))
    assert wrong == [("B8", "radius-for-diameter", "error")]


def test_an_area_of_the_wall_stays_one(make_book):
    whole = line("=4*B4/3600/(PI()*(B5/1000)^2)", label="Area", section="=PI()*B5/1000*B6", area=pi * 0.08 * 120.0)
    assert not found(make_book(whole))


def test_a_rectangle_is_a_section_by_its_use(make_book):
    cells = {
        "A1": "Air duct", "A2": "Width", "B2": 0.4, "C2": "m", "A3": "Height", "B3": 0.25, "C3": "m",
        "A4": "Air flow", "B4": 1800.0, "C4": "m3/h", "A5": "Area", "B5": ("=B2*B3", 0.1), "C5": "m2",
        "A6": "Velocity", "B6": ("=B4/3600/B5", 5.0), "C6": "m/s",
    }  # fmt: skip
    report = check_book(make_book(cells))
    assert not report.findings
    assert ("Sheet1!B5", "flow area") in report.agreed


def glycol(density=65.2, viscosity=6.6, substance="propylene glycol 40 % by mass", temperature=50.0):
    return {
        "A1": "Glycol line", "A2": "Fluid", "B2": substance, "A3": "Temperature", "B3": temperature, "C3": "°F",
        "A4": "Density", "B4": density, "C4": "lb/ft3", "A5": "Viscosity", "B5": viscosity, "C5": "cP",
        "A6": "Pressure", "B6": 60.0, "C6": "psia", "A7": "Pipe ID", "B7": 3.068, "C7": "in",
    }  # fmt: skip


@pytest.mark.parametrize("viscosity", [6.6, 7.3, 6.4])
def test_another_table_of_a_solution_is_no_error(make_book, viscosity):
    """Makers' tables of glycols differ by about 1 % in density and 5 % and more in viscosity (common practice)."""
    report = check_book(make_book(glycol(viscosity=viscosity)))
    assert not report.has_errors
    assert all(f.code != "gauge-for-absolute" for f in report.findings)


@pytest.mark.parametrize(("density", "viscosity", "cell"), [(72.0, 6.6, "Sheet1!B4"), (65.2, 14.0, "Sheet1!B5")])
def test_a_solution_far_off_stays_an_error(make_book, density, viscosity, cell):
    ((found_at, severity),) = [(f.cell, f.severity) for f in check_book(make_book(glycol(density, viscosity))).findings]
    assert (found_at, severity) == (cell, "error")


def test_a_liquid_hardly_feels_an_atmosphere(make_book):
    report = check_book(make_book(glycol(61.5, 1.31, "water")))
    assert [f.cell for f in report.findings] == ["Sheet1!B4"]
    assert "gauge-for-absolute" not in " ".join((report.findings[0].code, *report.findings[0].reasoning))


def test_what_rests_on_a_finding_names_totals_and_remarks(make_book):
    """Results that others use are results too: a total, and what somebody wrote a remark beside."""
    cells = line("=B4/3600/(PI()*(B5/1000)^2)", 0.25)
    drop = cells["B14"][1]
    cells |= {
        "A15": "Loss of fittings", "B15": 5.0, "C15": "kPa",
        "A16": "Total pressure loss", "B16": ("=B14+B15", drop + 5.0), "C16": "kPa",
        "A17": "Hydraulic power", "B17": ("=B4*B16/3600", 25.0 * (drop + 5.0) / 3600.0), "C17": "kW",
        "D12": "the maker asks for more",
    }  # fmt: skip
    report = check_book(make_book(cells))
    (finding,) = report.findings
    assert set(report.changes[finding.cell]) == {"Sheet1!B12", "Sheet1!B16", "Sheet1!B17"}
    before, after = report.changes[finding.cell]["Sheet1!B12"]
    assert after / before == pytest.approx(4.0, rel=1e-3)
    assert "Total pressure loss (Sheet1!B16)" in report.consequence(finding)
