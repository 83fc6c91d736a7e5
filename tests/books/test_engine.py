"""Evaluation of workbooks with given functions: what is calculated, what is kept, arrays, links, names, limits."""

import time

import pytest

from cellfuncs.books import inspect
from cellfuncs.books.engine import evaluate
from cellfuncs.books.reading import read_sheet
from cellfuncs.books.xmltext import ErrorValue
from cellfuncs.errors import BookRefused


def double(x):
    return 2 * x if isinstance(x, float) else f"! x: {x!r}"


def table(rows, columns=2.0):
    return [[f"r{r}" if c == 0 else r + c / 10 for c in range(int(columns))] for r in range(int(rows))]


OURS = {"CF_DOUBLE": double, "CF_TABLE": table}


def cells(**formulas):
    """sheetData from `A1="<c .../>"`-like inner texts: A1='<f>..</f><v>..</v>' or (attributes, inner)."""
    rows = {}
    for place, inner in formulas.items():
        attributes, inner = inner if isinstance(inner, tuple) else ("", inner)
        letters = place.rstrip("0123456789")
        rows.setdefault(int(place[len(letters) :]), []).append(
            (len(letters), letters, f'<c r="{place}" {attributes}>{inner}</c>')
        )
    return "".join(f'<row r="{r}">' + "".join(c for *_, c in sorted(row)) + "</row>" for r, row in sorted(rows.items()))


def values(result, sheet="S1"):
    from cellfuncs.books.grid import area_text

    return {area_text((r, c, r, c)): v for (r, c), v in result.values.get(sheet, {}).items()}


# -- what is calculated --------------------------------------------------------------------------------


def test_ours_and_their_dependents_only(make):
    data = make(
        cells(
            A1="<v>3</v>",
            B1="<f>CF_DOUBLE(A1)</f><v>1</v>",
            C1="<f>B1+1</f><v>2</v>",
            D1="<f>SUM(C1:C9)</f><v>2</v>",
            E1="<f>A1*10</f><v>30</v>",
            F1="<f>A1+1</f>",
            G1='<f>INDIRECT("B1")</f><v>1</v>',
        )
    )
    result = evaluate(data, OURS)
    assert values(result) == {"B1": 6.0, "C1": 7.0, "D1": 7.0, "F1": 4.0, "G1": 6.0}
    assert result.warnings == []
    assert [(f.row, f.column) for f in result.ours["S1"]] == [(1, 2)]


def test_stored_values_are_the_truth_and_differences_are_told(make):
    """E1 stores what the engine would not find: it is kept, our function sees it, and a warning says so."""
    data = make(cells(A1="<v>3</v>", B1="<f>A1*10</f><v>31</v>", C1="<f>CF_DOUBLE(B1)</f><v>0</v>"))
    result = evaluate(data, OURS)
    assert values(result) == {"C1": 62.0}
    assert len(result.warnings) == 1 and "S1!B1 holds 31, recalculated it is 30" in result.warnings[0]


def test_what_changes_by_itself_is_not_compared(make):
    data = make(cells(A1="<f>RAND()</f><v>0.5</v>", A2="<f>A1+TODAY()</f><v>1</v>", B1="<f>CF_DOUBLE(A1)</f><v>1</v>"))
    assert evaluate(data, OURS).warnings == []


def test_full_calculation_asked_for(make):
    data = make(
        cells(A1="<v>3</v>", B1="<f>A1*10</f><v>0</v>", C1="<f>NOSUCH(A1)</f><v>5</v>"),
        calc='<calcPr fullCalcOnLoad="1"/>',
    )
    result = evaluate(data, OURS)
    assert values(result) == {"B1": 30.0, "C1": 5.0}
    assert "S1!C1 calls a function that is not known here" in result.warnings[0]


def test_nothing_of_ours(make):
    data = make(cells(A1="<v>3</v>", B1="<f>A1*10</f><v>30</v>"))
    result = evaluate(data, OURS)
    assert result.values == {} and result.ours == {} and result.warnings == []


def test_dependents_on_other_sheets_and_through_names(make):
    data = make(
        cells(A1="<f>CF_DOUBLE(2)</f><v>0</v>"),
        cells(
            A1="<f>S1!A1+1</f><v>0</v>",
            A2="<f>answer*3</f><v>0</v>",
            A3="<f>doubled+1</f><v>0</v>",
            A4="<f>S2!here</f><v>0</v>",
        ),
        names='<definedNames><definedName name="answer">S1!$A$1</definedName><definedName name="here" localSheetId="1">'
        'S2!$A$1</definedName><definedName name="doubled">[1]!cf_double(S1!$A$1)</definedName></definedNames>',
    )
    result = evaluate(data, OURS)
    assert values(result, "S2") == {"A1": 5.0, "A2": 12.0, "A3": 9.0, "A4": 5.0}
    assert [(f.row, f.column) for f in result.ours["S2"]] == [(3, 1)]


@pytest.mark.parametrize(
    "call",
    [
        "[1]!CF_DOUBLE",
        "'C:\\x y\\[a.xlam]b'!CF_DOUBLE",
        "COM.SUN.STAR.SHEET.ADDIN.X.cf_double",
        "_xludf.CF_DOUBLE",
    ],
)
def test_prefixes(make, call):
    data = make(cells(A1=f"<f>1+{call}(B1)</f><v>0</v>", B1="<v>4</v>"))
    assert values(evaluate(data, OURS)) == {"A1": 9.0}


def test_shared_formulas(make):
    data = make(
        cells(
            A1="<v>1</v>",
            A2="<v>2</v>",
            A3="<v>3</v>",
            B1='<f t="shared" si="0" ref="B1:B3">CF_DOUBLE(A1)+$A$1</f><v>0</v>',
            B2='<f t="shared" si="0"/><v>0</v>',
            B3='<f t="shared" si="0"/><v>0</v>',
        )
    )
    assert values(evaluate(data, OURS)) == {"B1": 3.0, "B2": 5.0, "B3": 7.0}


def test_prefixed_sheet(make):
    from cellfuncs.books.scans import MAIN

    text = (
        f"<x:worksheet xmlns:x='{MAIN}'><x:sheetData><x:row r='1'><x:c r='A1'><x:v>2</x:v></x:c>"
        "<x:c r='B1'><x:f>CF_DOUBLE(A1)</x:f></x:c></x:row></x:sheetData></x:worksheet>"
    )
    assert values(evaluate(make(text), OURS)) == {"B1": 4.0}


def test_date_system(parts_of, zipped):
    parts = parts_of(cells(A1="<f>DATE(1904,1,2)</f>", B1="<f>CF_DOUBLE(A1)</f>"))
    assert values(evaluate(zipped(parts), OURS)) == {"A1": 1463.0, "B1": 2926.0}
    parts["xl/workbook.xml"] = parts["xl/workbook.xml"].replace("<sheets>", '<workbookPr date1904="1"/><sheets>')
    assert values(evaluate(zipped(parts), OURS)) == {"A1": 1.0, "B1": 2.0}


# -- arrays --------------------------------------------------------------------------------------------

DYNAMIC = 'cm="1"'


def test_plain_formula_is_one_value(make):
    data = make(cells(A1="<f>CF_TABLE(3)</f><v>0</v>", A2="<f>ROWS(CF_TABLE(3))</f><v>0</v>", A3="<f>A2:A9*2</f>"))
    result = evaluate(data, OURS)
    assert values(result)["A1"] == "r0" and values(result)["A2"] == 3.0
    assert result.extents == {}


def test_range_beside_an_operator_means_the_own_row(make):
    data = make(
        cells(
            A1="<v>1</v>",
            A2="<v>2</v>",
            B1="<f>CF_DOUBLE(1)</f>",
            B2="<f>B1+A1:A5*10</f>",
            C2="<f>B1+A1:A5</f><v>1</v>",
        )
    )
    assert values(evaluate(data, OURS)) == {"B1": 2.0, "B2": 22.0, "C2": 4.0}


def test_dynamic_array_grows_and_shrinks(make, run):
    grown = make(
        cells(
            A1="<v>3</v>",
            C1=(DYNAMIC, '<f t="array" ref="C1:C1">CF_TABLE(A1)</f><v>0</v>'),
            F1="<f>SUM(D1:D9)</f><v>0</v>",
            F2="<f>COUNTA(C3:C9)</f><v>0</v>",
        )
    )
    result, data = run(grown, OURS)
    assert result.extents == {"S1": {(1, 3): (1, 3, 3, 4)}}
    assert values(result) == {
        "C1": "r0", "D1": 0.1, "C2": "r1", "D2": 1.1, "C3": "r2", "D3": 2.1, "F1": pytest.approx(3.3), "F2": 1.0,
    }  # fmt: skip
    again, same = run(data, OURS)
    assert same == data and again.warnings == []
    smaller = inspect(data).package.read("xl/worksheets/sheet1.xml").replace(b"<v>3</v>", b"<v>1</v>", 1)
    from cellfuncs.books.package import copy_with

    result, data = run(copy_with(inspect(data).package, {"xl/worksheets/sheet1.xml": smaller}), OURS)
    assert result.extents == {"S1": {(1, 3): (1, 3, 1, 4)}}
    found = values(result)
    assert [found[c] for c in ("C2", "D2", "C3", "D3")] == [None] * 4 and found["F1"] == 0.1 and found["F2"] == 0.0
    sheet = read_sheet(inspect(data), "S1")
    assert all(sheet.value(row, column) == (None, None) for row in (2, 3) for column in (3, 4))


def test_dynamic_array_without_room(make, run):
    data = make(
        cells(
            A1=(f'{DYNAMIC} t="str"', '<f t="array" ref="A1:B2">CF_TABLE(3)</f><v>old</v>'),
            B1="<v>1</v>",
            A2="<v>2</v>",
            B2="<v>3</v>",
            B3="<v>77</v>",
        )
    )
    result, new = run(data, OURS)
    found = values(result)
    assert found["A1"] == "! table: needs 3 rows and 2 columns, but B3 is not empty; clear it or move the formula"
    assert [found[c] for c in ("B1", "A2", "B2")] == [None, None, None]
    assert read_sheet(inspect(new), "S1").value(3, 2) == (None, "77")
    assert result.extents == {"S1": {(1, 1): (1, 1, 1, 1)}}
    assert run(new, OURS)[1] == new


def test_formatted_empty_cells_give_room(make):
    data = make(cells(A1=(DYNAMIC, '<f t="array" ref="A1">CF_TABLE(2)</f>'), B2=('s="0"', "")))
    assert values(evaluate(data, OURS))["B2"] == 1.1


def test_fixed_array_is_cut_or_padded(make):
    na = ErrorValue("#N/A")
    data = make(
        cells(
            A1='<f t="array" ref="A1:C3">CF_TABLE(2)</f><v>0</v>',
            B1="<v>9</v>",
            E1='<f t="array" ref="E1:E1">CF_TABLE(2)</f><v>0</v>',
            G1='<f t="array" ref="G1:H2">CF_DOUBLE(2)</f><v>0</v>',
            J1='<f t="array" ref="J1:K2">{1,2}*CF_DOUBLE(1)</f><v>0</v>',
        )
    )
    result = evaluate(data, OURS)
    found = values(result)
    assert [[found[f"{c}{r}"] for c in "ABC"] for r in (1, 2, 3)] == [
        ["r0", 0.1, na],
        ["r1", 1.1, na],
        [na, na, na],
    ]
    assert found["E1"] == "r0" and "E2" not in found
    assert [found[c] for c in ("G1", "H1", "G2", "H2")] == [4.0] * 4
    assert [found[c] for c in ("J1", "K1", "J2", "K2")] == [2.0, 4.0, 2.0, 4.0]
    assert result.extents == {}


def test_data_table_is_left(make):
    data = make(cells(A1='<f t="dataTable" ref="A1:A2" r1="B1" dt2D="0"/><v>5</v>', B1="<f>CF_DOUBLE(A1)</f>"))
    assert values(evaluate(data, OURS)) == {"B1": 10.0}


# -- tables, links, other things the engine does not know -------------------------------------------------


def test_table_references(parts_of, zipped):
    parts = parts_of(
        cells(
            A1=('t="inlineStr"', "<is><t>speed</t></is>"),
            B1=('t="inlineStr"', "<is><t>x [m]</t></is>"),
            A2="<v>1</v>",
            A3="<v>2</v>",
            B2="<f>CF_DOUBLE(Flow[[#This Row],[speed]])</f><v>0</v>",
            B3="<f>CF_DOUBLE(Flow[[#This Row],[speed]])</f><v>0</v>",
            A4="<f>SUM(Flow[speed])</f><v>3</v>",
            D1="<f>SUM(flow[x '[m']])</f><v>0</v>",
            E1="<f>CF_DOUBLE(1)</f>",
            D2="<f>Flow[[#Headers],[speed]]</f><v/>",
            D3="<f>ROWS(Flow[#All])+COLUMNS(Flow[[speed]:[x '[m']]])+Flow[[#Totals],[speed]]</f>",
            D4="<f>SUM(Flow[nothing])</f>",
        )
    )
    from cellfuncs.books.scans import MAIN, RELATIONS

    parts["xl/tables/table1.xml"] = (
        f'<table xmlns="{MAIN}" id="1" name="Flow" displayName="Flow" ref="A1:B4" totalsRowCount="1">'
        '<tableColumns count="2"><tableColumn id="1" name="speed"/><tableColumn id="2" name="x [m]"/></tableColumns>'
        "</table>"
    )
    parts["xl/worksheets/_rels/sheet1.xml.rels"] = (
        '<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1"'
        f' Type="{RELATIONS}/table" Target="../tables/table1.xml"/></Relationships>'
    )
    result = evaluate(zipped(parts), OURS)
    found = values(result)
    assert (found["B2"], found["B3"], found["D1"], found["D2"], found["D3"]) == (
        2.0,
        4.0,
        6.0,
        "speed",
        4.0 + 2.0 + 3.0,
    )
    assert found["D4"] == ErrorValue("#REF!") and "A4" not in found


def linked(parts_of, zipped, **formulas):
    from cellfuncs.books.scans import MAIN, RELATIONS

    parts = parts_of(
        cells(**formulas),
        names='<externalReferences><externalReference r:id="rIdX"/></externalReferences>'
        '<definedNames><definedName name="far">[1]Data!$B$1</definedName></definedNames>',
        extra_relations=f'<Relationship Id="rIdX" Type="{RELATIONS}/externalLink"'
        ' Target="externalLinks/externalLink1.xml"/>',
    )
    parts["xl/externalLinks/externalLink1.xml"] = (
        f'<externalLink xmlns="{MAIN}" xmlns:r="{RELATIONS}"><externalBook r:id="rId1"><sheetNames>'
        '<sheetName val="Other"/><sheetName val="Data"/></sheetNames><definedNames>'
        '<definedName name="speed" refersTo="=Data!$A$1"/></definedNames>'
        '<sheetDataSet><sheetData sheetId="1"><row r="1"><cell r="A1"><v>5</v></cell><cell r="B1"><v>-1.5</v></cell>'
        '<cell r="C1" t="str"><v>a &amp; b</v></cell></row><row r="2"><cell r="A2" t="b"><v>1</v></cell>'
        '<cell r="B2" t="e"><v>#N/A</v></cell></row></sheetData></sheetDataSet></externalBook></externalLink>'
    )
    return zipped(parts)


def test_other_workbooks_by_their_stored_values(parts_of, zipped):
    data = linked(
        parts_of,
        zipped,
        A1="<f>CF_DOUBLE([1]Data!$A$1)</f>",
        A2="<f>CF_DOUBLE(SUM([1]Data!A1:B1))+[1]Data!B1</f>",
        A3="<f>[1]Data!C1&amp;CF_DOUBLE(1)</f>",
        A4="<f>[1]!speed+CF_DOUBLE(1)</f>",
        A5="<f>far+CF_DOUBLE(1)</f>",
        A6="<f>[1]Data!Z99+CF_DOUBLE(1)</f>",
        A7="<f>'[1]Data'!B2+CF_DOUBLE(1)</f>",
        A8="<f>CF_DOUBLE([1]Gone!A1)</f>",
        A9="<f>[7]Data!A1+CF_DOUBLE(1)</f>",
        B1="<f>[1]!speed*100</f><v>123</v>",
        B2="<f>CF_DOUBLE(B1)</f>",
    )
    found = values(evaluate(data, OURS))
    assert [found[f"A{n}"] for n in range(1, 8)] == [10.0, 5.5, "a & b2", 7.0, 0.5, 2.0, ErrorValue("#N/A")]
    assert found["A8"].startswith("! x: ") and found["A9"] == ErrorValue("#REF!")
    assert found["B2"] == 246.0


@pytest.mark.parametrize(
    "bad",
    [
        "[9]Gone!A1",
        "'C:\\far\\[away.xlsx]S'!A1",
        "[1]!macro(1)",
        "#REF!+1",
        "Nowhere!A1",
        "undefined_name",
        "NOSUCH(1)",
        "Gone[col]",
        "(" * 70 + "1" + ")" * 70,
        "+".join("1" * 400),
        "_xlfn.LAMBDA(_xlpm.x,_xlpm.x)(1)",
        "A1:A2:A3",
        '"never closed',
        "S1:S9!A1",
    ],
)
def test_one_bad_formula_spoils_one_cell(make, bad):
    data = make(
        cells(
            A1=f"<f>{bad.replace('&', '&amp;')}</f>",
            A2="<f>CF_DOUBLE(4)</f>",
            A3=f"<f>CF_DOUBLE(1)+{bad}</f>",
        )
    )
    assert values(evaluate(data, OURS))["A2"] == 8.0


def test_three_dimensional_reference(make):
    data = make(*(cells(A1=f"<v>{n}</v>", B1="<f>CF_DOUBLE(SUM(S1:S3!A1))</f>") for n in (1, 2, 3)))
    assert values(evaluate(data, OURS), "S2") == {"B1": 12.0}


def test_circle(make):
    data = make(cells(A1="<f>CF_DOUBLE(B1)</f>", B1="<f>A1</f>", C1="<f>CF_DOUBLE(1)</f>"))
    result = evaluate(data, OURS)
    assert values(result) == {
        "A1": "! formula: refers to itself in a circle",
        "B1": ErrorValue("#VALUE!"),
        "C1": 2.0,
    }
    assert any("S1!A1 refers to itself" in warning for warning in result.warnings)


def test_function_that_raises(make):
    def broken(x):
        raise RuntimeError("no")

    data = make(cells(A1="<f>CF_BROKEN(1)</f>", A2="<f>CF_DOUBLE(1)</f>"))
    assert values(evaluate(data, {**OURS, "CF_BROKEN": broken})) == {"A1": ErrorValue("#VALUE!"), "A2": 2.0}


def test_a_formula_too_long_is_left(make):
    data = make(cells(A1=f"<f>{'1+' * 6000}1</f><v>6001</v>", A2="<f>CF_DOUBLE(A1)</f>"))
    result = evaluate(data, OURS)
    assert values(result) == {"A2": 12002.0}
    assert result.warnings == ["S1!A1 cannot be read; stored values were kept there."]


def test_names_that_grow(make):
    """Names that name each other many times over: bounded, and the rest of the workbook is calculated."""
    names = "".join(f'<definedName name="n_{n}">{"+".join([f"n_{n + 1}"] * 100)}</definedName>' for n in range(60))
    loop = '<definedName name="loop">loop+1</definedName>'
    data = make(
        cells(A1="<f>n_0+CF_DOUBLE(1)</f>", A2="<f>CF_DOUBLE(2)</f>", A3="<f>loop+CF_DOUBLE(1)</f>"),
        names=f"<definedNames>{names}{loop}</definedNames>",
    )
    found = values(evaluate(data, OURS))
    assert found["A2"] == 4.0 and isinstance(found["A1"], ErrorValue) and found["A3"] == ErrorValue("#REF!")


def test_one_long_shared_formula_many_times(make):
    long = "+".join(["A1"] * 2500)
    rows = f'<row r="1"><c r="B1"><f t="shared" si="0" ref="B1:B9000">{long}</f></c></row>' + "".join(
        f'<row r="{r}"><c r="B{r}"><f t="shared" si="0"/></c></row>' for r in range(2, 9000)
    )
    with pytest.raises(BookRefused, match="longer than any program"):
        evaluate(make(rows), OURS)


def test_tables_without_end(make, monkeypatch):
    from cellfuncs.books import outcome

    monkeypatch.setattr(outcome, "MAX_RESULTS", 50)
    data = make(cells(A1=(DYNAMIC, '<f t="array" ref="A1">CF_TABLE(40)</f>')))
    with pytest.raises(BookRefused, match="million cells"):
        evaluate(data, OURS)


# -- limits --------------------------------------------------------------------------------------------


def slow(x):
    time.sleep(0.02)
    return x


@pytest.fixture
def many(make):
    return make("".join(f'<row r="{r}"><c r="A{r}"><f>CF_SLOW({r})</f></c></row>' for r in range(1, 400)))


def test_time_limit(many):
    with pytest.raises(BookRefused, match="longer than it may"):
        evaluate(many, {"CF_SLOW": slow}, seconds=0.2)


def test_interrupt(many):
    """Whatever the progress callback raises (as Ctrl-C would in the waiting thread) stops the calculation."""
    told = []

    def progress(text):
        told.append(text)
        if sum("calculating" in t for t in told) > 2:
            raise KeyboardInterrupt

    before = time.monotonic()
    with pytest.raises(KeyboardInterrupt):
        evaluate(many, {"CF_SLOW": slow}, progress=progress)
    assert "reading" in told and time.monotonic() - before < 7.0  # all of them would take 8 s


def test_functions_are_passed_as_they_are(make):
    """The engine calls the very callables, without a wrapper of ours: that is what makes a cell cheap."""
    import inspect as python

    files = []

    def probe():
        files.extend(frame.filename for frame in python.stack()[1:])
        return 1.0

    evaluate(make(cells(A1="<f>CF_PROBE()</f>")), {"CF_PROBE": probe})
    assert [name for name in files if "cellfuncs" in name and not name.endswith("engine.py")] == []


def test_functions_run_in_one_thread(make):
    import threading

    seen = set()

    def probe(x):
        seen.add(threading.get_ident())
        return x

    rows = "".join(f'<row r="{r}"><c r="A{r}"><f>CF_PROBE({r})</f></c></row>' for r in range(1, 3000))
    evaluate(make(rows), {"CF_PROBE": probe})
    assert len(seen) == 1
