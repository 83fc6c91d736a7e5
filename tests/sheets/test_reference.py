"""The facts of the reference, and how they are told: on the command line, in pages, in a workbook."""

import re
import types
from html.parser import HTMLParser

import pytest

from cellfuncs import groups, quantities
from cellfuncs.cells import catalogue
from cellfuncs.methods import METHODS
from cellfuncs.sheets import examples, reference, reference_pages

NAMES = list(catalogue.functions())


def flat(text: str) -> str:
    return " ".join(text.split())


@pytest.mark.parametrize("name", NAMES)
def test_the_command_line_tells_all_that_the_catalogue_knows(name):
    function = catalogue.functions()[name]
    told = flat(reference.text(function))
    for said in (function.summary, function.source, function.example, function.family):
        assert flat(said) in told
    for one in function.arguments:
        kind = quantities.KINDS.get(one.kind)
        kind_words = f"{kind.words}, SI unit {kind.si_unit}" if kind else r"[a-z, ]+"
        pattern = rf" {one.name} \({re.escape(kind_words) if kind else kind_words}{', optional' * one.optional}\) "
        assert re.search(pattern, told), pattern
        assert flat(one.help) in told


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("width", [40, 100])
def test_lines_fit_the_terminal(name, width):
    function = catalogue.functions()[name]
    spared = {reference.call_of(function), function.example}  # what is typed is not broken
    lines = [line for line in reference.text(function, width).splitlines() if line.strip() not in spared]
    names = [argument.name for argument in function.arguments]
    assert [line for line in lines if len(line) > width and line.split()[0] not in names] == []


def test_a_group_tells_symbol_formula_and_use():
    told = reference.text(catalogue.functions()["CF_RICHARDSON"])
    group = groups.table()["richardson"]
    for said in (f"Symbol: {group.symbol}", f"Formula: {group.formula}", group.compares, group.decides):
        assert said in flat(told)


def test_a_function_of_no_group_has_none():
    grouped = {f.name for entries in reference.by_family().values() for f in entries if f.group is not None}
    assert grouped == {f"CF_{key.upper()}" for key in groups.table()}


def test_an_example_whose_answer_is_out_of_date_is_not_told(monkeypatch):
    function = catalogue.functions()["CF_REYNOLDS"]
    assert reference.example_of(function).rows == ((39920.0,),)
    kept = {"block": [], "answers": {"CF_REYNOLDS": {"formula": "=CF_REYNOLDS(1,1,1,1)", "rows": [[1.0]], "count": 1}}}
    monkeypatch.setattr(reference, "stored", lambda: kept)
    assert reference.example_of(function) is None
    assert "gives" not in reference.text(function)
    assert reference.example_of(catalogue.functions()["CF_PECLET"]) is None


@pytest.mark.parametrize(
    ("formula", "named"),
    [
        ("=CF_TERMS(coolant)", True),
        ("=CF_FAULTS(A1:H60)", True),
        ('=CF_SUBSTANCES("coolant")', False),
        ('=CF_LIST("A1:B2")', False),
        ("=CF_MACH(2,1480)", False),
    ],
)
def test_cells_that_an_example_names_are_pointed_to(formula, named):
    assert bool(reference.Example(formula, ((1.0,),), 1, "").where) is named


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("CF_OIL_VISCOSITY", "kinematic viscosity in m2/s, or in the unit wanted"),
        ("CF_PROPERTY", "a quantity in SI units, or in the unit wanted"),
        ("CF_REYNOLDS", "a number without dimension"),
        ("CF_VERSION", "a text"),
        ("CF_LIST", "a column"),
        ("CF_TERM", "a number or a text"),
        ("CF_VARY", "rows of cells, for use inside another function"),
    ],
)
def test_what_comes_back_is_said_in_words(name, words):
    assert reference.facts(catalogue.functions()[name]).answers == words


@pytest.mark.parametrize(
    ("name", "unit"),
    [
        ("CF_IN_UNIT", "m/s"),
        ("CF_SI", "J/(kg K)"),
        ("CF_PROPERTY", "Pa s"),
        ("CF_SATURATION", "kg/m3"),
        ("CF_MOIST_AIR", "degC"),
        ("CF_CASE", "degC"),
        ("CF_BLOCK", ""),
        ("CF_REYNOLDS", ""),
        ("CF_VERSION", ""),
    ],
)
def test_the_answer_of_an_example_has_its_unit(name, unit):
    assert examples.unit_of(catalogue.functions()[name]) == unit


def test_an_example_that_answers_a_fault_is_refused():
    places = dict(examples.places())
    areas = [types.SimpleNamespace(range=place, values=((1.0,),)) for place in places]
    assert examples.answers(areas).keys() == catalogue.functions().keys()
    for bad in ("! velocity: gone", None):
        areas[3] = types.SimpleNamespace(range=areas[3].range, values=((bad,),))
        with pytest.raises(ValueError, match=re.escape(list(places.values())[3].example)):
            examples.answers(areas)


def test_every_family_says_what_it_is_for():
    assert set(catalogue.FAMILIES) <= set(reference.FAMILY_WORDS)


def test_every_correlation_stands_in_its_table_with_range_and_source():
    table = next(t for t in reference.tables() if t.key == "correlations")
    rows = {row[0]: dict(zip(table.heads, row, strict=True)) for row in table.rows}
    assert rows.keys() == METHODS.keys()
    for name, method in METHODS.items():
        for one in method.ranges:
            assert one.words() in rows[name]["range"]
        assert rows[name]["properties at"] == method.property_temperature
        assert rows[name]["scatter"] == ("exact" if method.scatter == 0 else f"{100 * method.scatter:g} %")
        assert re.search(r"\b(1[89]|20)\d\d\b", rows[name]["source"])  # a reference, not its key
    assert all(cell for row in rows.values() for cell in row.values())


def test_numbers_have_six_digits():
    assert [reference.shown(value) for value in (39920.0, 0.0006527287265767436, "keep")] == [
        "39920",
        "0.000652729",
        "keep",
    ]


# -- pages ---------------------------------------------------------------------------------------


class Page(HTMLParser):
    """What stands in a page: anchors, links, and tags that are closed as they were opened."""

    EMPTY = ("meta", "input", "br")

    def __init__(self, text):
        super().__init__()
        self.open, self.anchors, self.links, self.loads, self.text = [], [], [], [], ""
        self.feed(text)
        self.close()
        assert self.open == []

    def handle_starttag(self, tag, attrs):
        given = dict(attrs)
        self.loads += [given[name] for name in ("src", "srcset", "data") if name in given]
        if tag == "link":
            self.loads.append(given.get("href"))
        if "id" in given:
            self.anchors.append(given["id"])
        if tag == "a":
            self.links.append(given["href"])
        if tag not in self.EMPTY:
            self.open.append(tag)

    def handle_endtag(self, tag):
        assert self.open.pop() == tag

    def handle_data(self, data):
        self.text += data


@pytest.fixture(scope="module")
def pages():
    return {name: Page(text) for name, text in reference_pages.pages().items()}


def test_there_is_an_index_a_page_a_family_and_a_page_a_table(pages):
    families = {function.family for function in catalogue.functions().values()}
    wanted = {"index.html", *(f"{family.lower()}.html" for family in families)}
    assert pages.keys() == wanted | {f"{table.key}.html" for table in reference.tables()}


def test_pages_are_whole_and_every_link_leads_somewhere(pages):
    for name, page in pages.items():
        assert len(set(page.anchors)) == len(page.anchors), name
        for link in page.links:
            file, _, anchor = link.partition("#")
            target = pages[file or name]
            assert not anchor or anchor in target.anchors, link


def test_pages_fetch_nothing(pages):
    for name, text in reference_pages.pages().items():
        assert pages[name].loads == []
        assert not re.search(r"@import|url\(|fetch\(|https?://", text), name


def test_every_function_stands_on_its_page_and_in_the_index(pages):
    for function in catalogue.functions().values():
        page = pages[f"{function.family.lower()}.html"]
        assert function.name in page.anchors
        text = flat(page.text)
        for said in (reference.call_of(function), function.summary, function.source, function.example):
            assert flat(said) in text
        assert f"{function.family.lower()}.html#{function.name}" in pages["index.html"].links


def test_texts_are_no_markup():
    assert reference_pages._cell("<b> & co") == '<td class="short">&lt;b&gt; &amp; co</td>'


def test_pages_of_earlier_times_go(tmp_path):
    (tmp_path / "gone.html").write_text("old")
    (tmp_path / "notes.txt").write_text("somebody's")
    written = reference_pages.write_pages(tmp_path)
    assert {path.name for path in tmp_path.iterdir()} == {path.name for path in written} | {"notes.txt"}


def test_pages_say_who_decides(pages):
    assert all("licensed engineer" in page.text and "local codes" in page.text for page in pages.values())
