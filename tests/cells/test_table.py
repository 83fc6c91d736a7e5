"""A range of cells as a substance: heads, units, blanks, faults."""

import pytest

from cellfuncs.cells import table
from cellfuncs.substances import find

HEADS = ["temperature [degC]", "density [kg/m3]", "viscosity (mPa s)", "cp, kJ/kgK", "k [W/(m K)]", "note"]
ROWS = [
    [20.0, 998.0, 1.0, 4.18, 0.60, None],
    [40.0, 992.0, 0.65, "4.18", 0.63, "seen"],
    [60.0, 983.0, 0.47, 4.18, 0.65, None],
]
TABLE = [HEADS, *ROWS, [None] * 6]


def test_values_in_units(cf):
    assert cf("PROPERTY", TABLE, "density", "40 degC") == pytest.approx(992.0, rel=1e-12)
    assert cf("PROPERTY", TABLE, "mu", 313.15, None, "mPa s") == pytest.approx(0.65, rel=1e-12)
    assert cf("PROPERTY", TABLE, "Pr", "40 degC") == pytest.approx(0.65e-3 * 4180 / 0.63, rel=1e-12)
    column = cf("PROPERTY", TABLE, "density", [["20 degC"], ["30 degC"], ["70 degC"]])
    assert column[0][0] == pytest.approx(998.0) and 992 < column[1][0] < 998
    assert column[2][0].startswith("! temperature: ") and "outside the range" in column[2][0]
    both = cf("PROPERTY", TABLE, [["density", "cp"]], [[300.0], [310.0]])
    assert len(both) == 2 and both[0][1] == pytest.approx(4180.0)


def test_tuples_blanks_as_texts_and_units_below_the_heads(cf):
    """As LibreOffice hands a range over: tuples, blank cells as empty texts."""
    cells = (
        ("T", "rho", "nu", ""),
        ("degC", "kg/m3", "cSt", ""),
        (60.0, 870.0, 20.0, ""),
        ("", "", "", ""),
        (40, 880.0, "46 cSt", ""),
    )
    assert cf("PROPERTY", cells, "viscosity", "40 degC") == pytest.approx(880 * 46e-6)
    assert cf("PROPERTY", cells, "nu", "60 degC", 0.0, "cSt") == pytest.approx(20.0)


def test_properties_of_a_table(cf):
    rows = {row[0]: row for row in cf("PROPERTIES", TABLE, "40 degC")}
    assert rows["density"][1] == pytest.approx(992.0)
    assert "user's own values" in rows["density"][3]
    assert rows["surface tension"][1] == "not available"
    assert rows["phase"][1] == "as tabled" and "20 to 60 degC" in rows["phase"][3]
    assert cf("SATURATION", TABLE, "density", "liquid", 300.0).startswith("! ")


def with_cell(row, column, value):
    rows = [list(cells) for cells in TABLE]
    rows[row][column] = value
    return rows


@pytest.mark.parametrize(
    ("cells", "words"),
    [
        (with_cell(0, 1, "density"), "write its unit into the head: density [kg/m3]"),
        (with_cell(0, 1, "dens [kg/m3]"), 'the nearest is "density"'),
        (with_cell(0, 1, "density [m/s]"), "is no unit of a density"),
        (with_cell(0, 1, "viscosity [mPa s]"), "stands twice"),
        (with_cell(0, 1, None), "column 2 of the table has values but no head"),
        (with_cell(0, 1, 7.0), "7 stands where a head is wanted"),
        (with_cell(0, 0, "degrees"), "begins with a row of heads"),
        (with_cell(1, 0, None), "row 2 of the table has a density but no temperature"),
        (with_cell(2, 0, 20.0), "rise or fall"),
        (with_cell(2, 1, -5.0), "row 3 of the table, density"),
        (with_cell(2, 1, "about 990"), "row 3 of the table, density"),
        (with_cell(2, 1, "990 m/s"), "row 3 of the table, density"),
        (with_cell(2, 1, {"kind": "Div"}), "shows an error"),
        (with_cell(2, 0, -300.0), "row 3 of the table, temperature"),
        (TABLE[:2], "at least two rows"),
        (ROWS, "begins with a row of heads"),
        ([[1.0, 2.0]] * 2001, "at most 2,000 rows"),
    ],
)
def test_refusals_name_the_place(cf, cells, words):
    answer = cf("PROPERTY", cells, "density", "30 degC")
    assert isinstance(answer, str) and answer.startswith("! substance: ") and words in answer
    assert len(answer) <= 255


def test_a_fault_in_a_cell_passes_through(cf):
    assert cf("PROPERTY", with_cell(2, 1, "! velocity: empty"), "density", "30 degC") == "! velocity: empty"


def test_a_range_of_names_is_no_table(cf):
    column = cf("PROPERTY", [["water"], ["copper"], ["nothing"]], "density", 300.0)
    assert column[0][0] == pytest.approx(996.6, abs=0.1) and column[1][0] == 8933.0
    assert column[2][0].startswith("! substance: ")
    assert cf("PROPERTY", [["water", "copper"]], "density", 300.0)[0][1] == 8933.0
    assert not table.is_table([["water", "T 5"]]) and table.is_table([["T", "rho"]])


def test_a_substance_may_be_handed_in_from_python(cf):
    assert cf("PROPERTY", find("copper"), "k", 300.0) == 401.0


def test_the_same_range_is_read_once():
    assert table.from_rows(TABLE) is table.from_rows(tuple(map(tuple, TABLE)))
