"""What always holds: no text breaks the reader, and the unit in which a sheet is written does not matter."""

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from cellfuncs import quantities
from cellfuncs.books.formulas import tree
from cellfuncs.sheets.check import check_book
from cellfuncs.sheets.dimensions import judge
from cellfuncs.sheets.inherited import texts
from cellfuncs.sheets.inherited.facts import substance_in
from cellfuncs.sheets.inherited.formats import shown_by
from cellfuncs.sheets.inherited.shapes import shape_of

SETTINGS = settings(max_examples=150, deadline=None, suppress_health_check=list(HealthCheck))
PIECES = st.sampled_from(
    ["velocity", "Re", "=", "[m/s]", "(mm)", "12", "1,5", "kg/m3", "°C", "h", "T", "ρ", "μ", "/", ":", " ", ".", "λ",
     "bar(g)", "Δp", "hot", "inlet", "no.", "(", "]", "%", "±", "½", "·", "-", "in", "ΔT [K]", "neglect", "water", "e5"]
)  # fmt: skip
TEXTS = st.one_of(
    st.lists(PIECES, max_size=7).map("".join), st.lists(PIECES, max_size=5).map(" ".join), st.text(max_size=60)
)


@SETTINGS
@given(TEXTS)
def test_no_text_breaks_the_reader(text):
    label = texts.label_in(text)
    assert all(name.strip() for name in label.names) and (not label.unit or texts.is_unit(label.unit))
    for name in label.names:
        assert all(0 < known.score <= 1 for known in texts.known(name))
    assigned = texts.assignment_in(text)
    assert assigned is None or assigned[0]
    reading = texts.quantity_in(text)
    assert reading is None or not reading.unit_text or texts.is_unit(reading.unit_text)
    substance_in(text)
    shown_by(text[:255]).half_digit(12.3, True)


@SETTINGS
@given(st.text(alphabet="AB12$:!'()+-*/^,.\"[]# xE=<>&%{};SUMpi_", max_size=60))
def test_no_formula_breaks_the_parser(text):
    shape = shape_of(text)
    assert shape.text.count("_r") >= len(shape.targets)
    tree(shape.text)


UNITS = {
    "velocity": ("m/s", "ft/s", "km/h", "cm/s", "m/min"),
    "length": ("m", "mm", "in", "ft", "cm"),
    "density": ("kg/m3", "lb/ft3", "g/cm3"),
    "dynamic_viscosity": ("Pa s", "mPa s", "cP", "lb/ft-s"),
}
PIPE = (("Velocity", "velocity", 2.0), ("Diameter", "length", 0.025), ("Density", "density", 998.0),
        ("Dynamic viscosity", "dynamic_viscosity", 0.001))  # fmt: skip


def _pipe(chosen, factors):
    """The pipe in some units, with the conversion of each written into the formula of Re."""
    cells, parts = {}, []
    for row, ((label, kind, si), unit) in enumerate(zip(PIPE, chosen, strict=True), 1):
        value = quantities.from_si(si, unit, kind)
        cells |= {f"A{row}": label, f"B{row}": value, f"C{row}": unit}
        factor = quantities.to_si(1.0, unit, kind)
        part = f"B{row}" if factor == 1.0 or not factors else f"(B{row}*{factor:.9g})"
        parts.append(part)
    formula = f"={parts[0]}*{parts[1]}*{parts[2]}/{parts[3]}"
    return {**cells, "A5": "Reynolds number", "B5": (formula, 49900.0), "C5": "-"}


@settings(max_examples=25, deadline=None, suppress_health_check=list(HealthCheck))
@given(chosen=st.tuples(*(st.sampled_from(UNITS[kind]) for _, kind, _ in PIPE)))
def test_a_right_conversion_is_no_finding_in_any_units(make_book, read, chosen):
    cells = _pipe(chosen, factors=True)
    reading = read(cells)
    assert not list(judge.findings(reading))
    assert [entries[0].si for entries in reading.cases[0].stated.values()] == pytest.approx(
        [2.0, 0.025, 998.0, 0.001, 49900.0], rel=1e-6
    )
    assert not check_book(make_book(cells)).findings


@settings(max_examples=25, deadline=None, suppress_health_check=list(HealthCheck))
@given(chosen=st.tuples(*(st.sampled_from(UNITS[kind]) for _, kind, _ in PIPE)))
def test_a_missing_conversion_is_one(read, chosen):
    factors = [quantities.to_si(1.0, unit, kind) for (_, kind, _), unit in zip(PIPE, chosen, strict=True)]
    together = factors[0] * factors[1] * factors[2] / factors[3]
    found = [f.code for f in judge.findings(read(_pipe(chosen, factors=False)))]
    assert found == ([] if abs(together - 1.0) < 0.005 else ["unit-factor"])


@settings(max_examples=30, deadline=None, suppress_health_check=list(HealthCheck))
@given(
    cells=st.dictionaries(
        st.sampled_from([f"{column}{row}" for column in "ABCDEF" for row in range(1, 9)]),
        st.one_of(
            st.floats(-1e6, 1e6),
            TEXTS.filter(lambda text: text.isprintable()),
            st.sampled_from([("=A1*B2", 3.0), ("=SUM(A1:F8)", 1.0), ("=B1/1000", 2.0), ("=LN(C3)-D4^2", 5.0)]),
        ),
        max_size=40,
    )
)
def test_any_sheet_gives_a_report(make_book, cells):
    report = check_book(make_book({place: value for place, value in cells.items() if value != ""}))
    assert report.headline()
