"""The sample workbooks: built by their script, free of faults, with stored values that the embedded host repeats."""

import importlib.util
import zipfile
from pathlib import Path

import openpyxl
import pytest

from cellfuncs.cells import catalogue
from cellfuncs.hosts import embedded
from cellfuncs.terms import COLUMNS, TERMS

FOLDER = Path(__file__).parents[2] / "workbooks"
OTHERS = {"functions.xlsx", "self_test.xlsx"}  # tested in test_reference.py and test_self_test.py
NOT_A_CASE = {"twenty_cases.xlsx", "methods.xlsx"}
SAMPLES = sorted(path for path in FOLDER.glob("*.xlsx") if path.name not in OTHERS)
CASES = [path for path in SAMPLES if path.name not in NOT_A_CASE]
MAPS = [path for path in SAMPLES if path.name in ("sodium_duct.xlsx", "flat_die.xlsx", "gas_line.xlsx")]


@pytest.fixture(scope="module")
def builder():
    spec = importlib.util.spec_from_file_location("build_samples", FOLDER / "build.py")
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    return module


def cells(path, stored):
    book = openpyxl.load_workbook(path, data_only=stored)
    return {
        (sheet.title, cell.coordinate): cell.value
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    }


def is_of_a_chart(formula):
    """A cell that means to be #N/A where its chart has no point."""
    return isinstance(formula, str) and formula.startswith("=IF(") and formula.endswith("NA())")


def test_all_samples_are_there(builder):
    assert [path.name for path in SAMPLES] == sorted(builder.WRITERS)


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_the_script_writes_what_is_there(builder, path, tmp_path):
    """Inputs and formulas; that the stored values follow from them is the next test's."""
    builder.WRITERS[path.name](tmp_path / path.name)
    assert cells(tmp_path / path.name, False) == cells(path, False)


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_recalculation_repeats_the_stored_values(path, tmp_path):
    before = path.read_bytes()
    result = embedded.recalc(path, tmp_path / "again.xlsx")
    assert path.read_bytes() == before
    assert not result.warnings
    new, old = cells(tmp_path / "again.xlsx", True), cells(path, True)
    assert new.keys() == old.keys()
    for place, value in new.items():
        assert value == (pytest.approx(old[place], rel=1e-9) if isinstance(value, float) else old[place]), place


@pytest.mark.parametrize("path", CASES, ids=lambda p: p.name)
def test_a_sheet_an_engineer_would_be_glad_of(path):
    formulas, stored = cells(path, False), cells(path, True)
    ours = [v for v in formulas.values() if isinstance(v, str) and "CF_" in v and v.startswith("=")]
    assert len(ours) > 50
    plain = {place: v for place, v in stored.items() if not is_of_a_chart(formulas.get(place))}
    assert not any(isinstance(v, str) and v.startswith(("! ", "#")) for v in plain.values())
    texts = " ".join(v for v in stored.values() if isinstance(v, str))
    assert "licensed engineer" in texts and "local codes" in texts
    assert "CF_FAULTS" in str(formulas["Case", "B3"])
    assert stored["Case", "B3"] == 0
    head = [v for (_, place), v in stored.items() if place[0] in "ABCDEF" and v in COLUMNS]
    assert set(COLUMNS) <= set(head)
    assert {v for (_, place), v in stored.items() if place.startswith("A")} >= set(TERMS)
    with zipfile.ZipFile(path) as book:
        assert any(name.startswith("xl/charts/chart") for name in book.namelist())
        sheet = book.read("xl/worksheets/sheet2.xml").decode()
        assert 't="array"' not in sheet
        assert "<dataValidations" in sheet
        assert "Print_Area" in book.read("xl/workbook.xml").decode()
        chart = book.read("xl/charts/chart1.xml").decode()
        assert "logBase" in chart


@pytest.mark.parametrize("path", MAPS, ids=lambda p: p.name)
def test_maps_and_effects(path):
    """One formula a cell, no faults; every place of the map has a verdict, and all three occur."""
    formulas, stored = cells(path, False), cells(path, True)
    sheets = {sheet for sheet, _ in stored if sheet.startswith(("Map", "Effects"))}
    assert "Effects" in sheets and len(sheets) >= 2
    for sheet in sheets:
        assert stored[sheet, "B2"] == 0 and "CF_FAULTS" in formulas[sheet, "B2"]
    for sheet in sheets - {"Effects"}:
        asked = {place for (name, place), f in formulas.items() if name == sheet and str(f).endswith(',"verdict")')}
        verdicts = [stored[sheet, place] for place in asked]
        assert len(verdicts) >= 30 and set(verdicts) == {"keep", "borderline", "leave out"}
        points = [v for (name, place), v in stored.items() if name == sheet and is_of_a_chart(formulas[name, place])]
        assert sum(v != "#N/A" for v in points) == len(verdicts)
    with zipfile.ZipFile(path) as book:
        charts = [book.read(name).decode() for name in book.namelist() if name.startswith("xl/charts/chart")]
        assert any("scatterChart" in chart and "the case" in chart for chart in charts)


def effects_of(path, sheet="Effects"):
    """Answer and term -> change, effect, verdict."""
    import xlsxwriter.utility as places

    stored = cells(path, True)
    found = {}
    answers = {c: stored.get((sheet, places.xl_rowcol_to_cell(6, c))) for c in range(1, 10)}
    for column, answer in answers.items():
        for row in range(8, 16) if answer else ():
            line = [stored.get((sheet, places.xl_rowcol_to_cell(row, c))) for c in (0, column, column + 1, column + 2)]
            found[answer, line[0]] = tuple(line[1:])
    return found


def test_friction_heat_shows_at_the_wall_and_not_in_the_stream():
    found = effects_of(FOLDER / "gas_line.xlsx")
    stream, wall = found["outlet temperature", "viscous heating"], found["wall temperature", "viscous heating"]
    assert (stream[2], wall[2]) == ("leave out", "keep")
    assert abs(wall[0]) > 4 * abs(stream[0])


def test_heat_made_by_shear_rules_the_die():
    found = effects_of(FOLDER / "flat_die.xlsx")
    assert all(found[answer, "viscous heating"][2] == "keep" for answer in ("outlet temperature", "duty", "local flux"))
    assert found["duty", "viscous heating"][1] > 1  # more than the walls give in all


def test_heat_runs_against_the_slow_sodium():
    found = effects_of(FOLDER / "sodium_duct.xlsx")
    outlet, wall = found["outlet temperature", "conduction along"], found["wall temperature", "conduction along"]
    assert outlet[2] == wall[2] == "keep"
    # with a prescribed flux Nu stays and bulk and wall rise by the same (Shah and London 1978: 4 Nu/Pe2 of q/h)
    assert outlet[0] == pytest.approx(wall[0], rel=1e-6)
    stored = cells(FOLDER / "sodium_duct.xlsx", True)
    peclet = next(
        stored["Case", f"G{row}"] for row in range(7, 20) if stored.get(("Case", f"F{row}")) == "Péclet number"
    )
    assert wall[1] == pytest.approx(4 * 48 / 11 / peclet**2, rel=0.02)


def test_the_outside_of_the_pipe():
    """Wind and buoyancy together are no less than either; radiation adds; the case takes the sum."""
    stored, formulas = cells(FOLDER / "warm_pipe.xlsx", True), cells(FOLDER / "warm_pipe.xlsx", False)
    rows = {stored["Outside", f"A{r}"]: r for r in range(7, 40) if ("Outside", f"A{r}") in stored}
    row = rows["convection"]
    wind, still, both = (stored["Outside", f"{c}{row}"] for c in "CDE")
    assert still < wind <= both < wind + still
    total = stored["Outside", f"E{rows['convection and radiation']}"]
    assert total == pytest.approx(both + stored["Outside", f"E{rows['radiation']}"])
    place = next(r for r in range(7, 40) if stored.get(("Case", f"A{r}")) == "outside coefficient")
    assert stored["Case", f"B{place}"] == total
    for label, formula in (("stream temperature", "outside temperature"), ("insulation thickness",) * 2):
        referred = formulas["Outside", f"C{rows[label]}"].removeprefix("=Case!$B$")
        assert stored["Case", f"A{referred}"] == formula
    wall, insulation, bore = (
        next(stored["Case", f"B{r}"] for r in range(7, 40) if stored.get(("Case", f"A{r}")) == label)
        for label in ("wall thickness", "insulation thickness", "diameter")
    )
    assert stored["Outside", f"C{rows['diameter']}"] == pytest.approx(bore + 2 * wall + 2 * insulation)


def test_every_method_in_range_is_compared(builder):
    formulas, stored = cells(FOLDER / "methods.xlsx", False), cells(FOLDER / "methods.xlsx", True)
    assert stored["Case", "B2"] == 0 and stored["Sweep", "C2"] == 0
    plain = {place: v for place, v in stored.items() if not is_of_a_chart(formulas.get(place))}
    assert not any(isinstance(v, str) and v.startswith(("! ", "#")) for v in plain.values())
    head = {v for (sheet, place), v in stored.items() if sheet == "Sweep" and place.rstrip("0123456789") >= "H"}
    from pages.methods import methods_in_range

    methods = methods_in_range(builder.METHODS)
    assert len(methods) >= 12 and set(methods) <= head
    with zipfile.ZipFile(FOLDER / "methods.xlsx") as book:
        charts = [book.read(name).decode() for name in book.namelist() if name.startswith("xl/charts/chart")]
        assert len(charts) == 2 and all("areaChart" in chart and "lineChart" in chart for chart in charts)


def test_the_sheet_of_twenty_cases():
    path = FOLDER / "twenty_cases.xlsx"
    formulas, stored = cells(path, False), cells(path, True)
    assert sum(isinstance(v, str) and v.startswith("=CF_") for v in formulas.values()) >= 200
    assert stored["Cases", "B3"] == 0
    assert not any(isinstance(v, str) and v.startswith(("! ", "#")) for v in stored.values())


def test_twenty_cases_stand_side_by_side_in_one_sheet(tmp_path):
    """One column a case through CF_BLOCK; every cell equals the case on its own."""
    import xlsxwriter

    labels = ["flow kind", "substance", "velocity", "diameter", "length", "inlet temperature", "wall temperature"]
    units = ["", "", "m/s", "mm", "m", "degC", "degC"]
    path = tmp_path / "twenty.xlsx"
    book = xlsxwriter.Workbook(path)
    sheet = book.add_worksheet("Cases")
    sheet.write_column(0, 0, labels)
    sheet.write_column(0, 1, units)
    blocks = []
    for k in range(20):
        values = ["duct", "water", 0.5 + 0.2 * k, 20 + k, 3, 15 + k / 2, 60]
        column = xlsxwriter.utility.xl_col_to_name(2 + k)
        sheet.write_column(0, 2 + k, values)
        block = f"CF_BLOCK($A$1:$A$7,{column}$1:{column}$7,$B$1:$B$7)"
        sheet.write_formula(8, 2 + k, f'=CF_CASE({block},"Reynolds number")')
        sheet.write_formula(9, 2 + k, f'=CF_TERM({block},"viscous heating")')
        sheet.write_formula(10, 2 + k, f'=CF_TERM({block},"storage","verdict")')
        blocks.append([[name, value, unit] for name, value, unit in zip(labels, values, units, strict=True)])
    book.close()
    embedded.recalc(path, tmp_path / "out.xlsx")
    stored = openpyxl.load_workbook(tmp_path / "out.xlsx", data_only=True)["Cases"]
    functions = catalogue.functions()
    for k, block in enumerate(blocks):
        assert stored.cell(9, 3 + k).value == pytest.approx(functions["CF_CASE"].call(block, "Re"), rel=1e-12)
        assert stored.cell(10, 3 + k).value == pytest.approx(
            functions["CF_TERM"].call(block, "viscous heating"), rel=1e-12
        )
        assert stored.cell(11, 3 + k).value == "leave out"
