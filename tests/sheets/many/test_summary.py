"""The summary: the worst first, and no text of a workbook that does anything."""

import csv
import io
import re
from html.parser import HTMLParser
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.errors import BookRefused
from cellfuncs.sheets.many import summary, told
from cellfuncs.sheets.many.one import CHECKED, FAILED, REFUSED, Outcome, Worst

STARTS = "=+-@\t\r＝＋－＠"


def outcome(place="a.xlsx", state=CHECKED, **more):
    return Outcome(f"/x/{place}", place, state, **more)


def faulty(place, errors=1, warnings=0, text="of by 1000", code="unit-factor"):
    worst = (Worst("Sheet1!B4", "error", "velocity", code, text),) if errors or warnings else ()
    codes = {code: errors + warnings} if errors or warnings else {}
    return outcome(place, errors=errors, warnings=warnings, codes=codes, worst=worst, numbers=4, agreed=2)


MANY = [
    faulty("clean.xlsx", 0), faulty("one.xlsx"), outcome("broken.xlsx", REFUSED, why="it is damaged"),
    faulty("three.xlsx", 3), faulty("warned.xlsx", 0, 2), outcome("crashed.xlsx", FAILED, why="it broke off"),
]  # fmt: skip


def rows(outcomes):
    return list(csv.DictReader(io.StringIO(summary.as_csv(outcomes).decode("utf-8-sig"), newline="")))


def test_the_worst_first():
    wanted = ["three.xlsx", "one.xlsx", "broken.xlsx", "crashed.xlsx", "warned.xlsx", "clean.xlsx"]
    assert [row["workbook"] for row in rows(MANY)] == wanted
    page = summary.as_html(MANY).decode()
    assert sorted(wanted, key=page.index) == wanted
    assert summary.headline(MANY) == "6 workbooks: 2 with errors, 1 with warnings, 1 with neither, 2 not checked"


def test_one_row_tells_all_of_a_workbook():
    row = rows(MANY)[0]
    assert (row["errors"], row["that agree"], row["labelled numbers"]) == ("3", "2", "4")
    assert (row["cell"], row["quantity"], row["cause"], row["message"]) == (
        "Sheet1!B4", "velocity", "unit-factor", "of by 1000",
    )  # fmt: skip
    refused = rows(MANY)[2]
    assert (refused["state"], refused["errors"], refused["message"]) == (REFUSED, "", "it is damaged")


def test_causes_are_counted():
    more = [*MANY, faulty("d.xlsx", 2, code="log-base")]
    assert summary.causes(more) == [("unit-factor", 6, 3), ("log-base", 2, 1)]


EVIL = [
    "=cmd|' /C calc'!A1", "+1", "-1", "@SUM(A1)", "\t=1", "\r=1", "  =1", "＝1", "a;=1+1", 'x",=1', "a\n=1", "'=1",
    "\u200b=1", "\ufeff=1", "a\t@b",
]  # fmt: skip


@pytest.mark.parametrize("evil", EVIL)
def test_no_text_starts_a_formula(evil):
    outcomes = [outcome(evil, errors=1, worst=(Worst(evil, evil, evil, evil, evil),), why=evil)]
    text = summary.as_csv(outcomes).decode("utf-8-sig")
    for delimiter in ",;\t|":
        for quoting in (csv.QUOTE_MINIMAL, csv.QUOTE_NONE):
            for row in csv.reader(io.StringIO(text), delimiter=delimiter, quoting=quoting):
                for cell in row:
                    assert not re.match(r"[\s\"\u200b\ufeff]*[=+\-@＝＋－＠]", cell), (delimiter, cell)


@given(st.text(alphabet=st.one_of(st.sampled_from(STARTS + ";,|\"' ax1"), st.characters()), max_size=40))
def test_no_text_at_all_starts_a_formula(text):
    written = summary.harmless(text)
    assert not re.match(rf"\s*[{re.escape(STARTS)}]", written) and written.isprintable()


def test_harmless_texts_stay():
    for text in ("Reynolds number", "deep/b-1.xlsx", "1e-3 m²/s", "a = b", "0.5 m - 1 m"):
        assert summary.harmless(text) == text


class _Page(HTMLParser):
    def __init__(self, text):
        super().__init__()
        self.tags, self.attributes = set(), []
        self.feed(text)

    def handle_starttag(self, tag, attributes):
        self.tags.add(tag)
        self.attributes += attributes


def test_the_page_needs_nothing_else_and_runs_nothing():
    evil = '<script>alert("x")</script>"><img src=x onerror=alert(1)>\u202e'
    more = (Worst(evil, evil, evil, evil, evil),)
    outcomes = [outcome(evil, errors=1, worst=more, codes={evil: 1}), outcome("b" + evil, REFUSED, why=evil)]
    text = summary.as_html(outcomes, {evil: summary.link(Path("/p") / f"{evil}.html", Path("/p/s"))}).decode()
    page = _Page(text)
    assert not page.tags & {"script", "img", "iframe", "link", "form"} and "\u202e" not in text
    assert not any(name.startswith("on") or name == "src" for name, _ in page.attributes)
    (link,) = [value for name, value in page.attributes if name == "href"]
    assert link.startswith("./../") and not re.search(r"[\s<>\"]", link)
    assert "http" not in text.replace("http-equiv", "")


def test_links_lead_to_the_pages(tmp_path):
    page = tmp_path / "pages" / "deep" / "a b#1.xlsx.html"
    assert summary.link(page, tmp_path / "out") == "./../pages/deep/a%20b%231.xlsx.html"
    text = summary.as_html([outcome("javascript:x")], {"javascript:x": summary.link(Path("javascript:x"), Path("."))})
    assert b'href="./javascript%3Ax"' in text


def test_both_are_written_whole_or_not_at_all(tmp_path, monkeypatch):
    folder = tmp_path / "new" / "folder"
    written = summary.write(MANY, folder)
    before = {path.name: path.read_bytes() for path in folder.iterdir()}
    assert {path.name for path in written} == set(before) == set(summary.NAMES)
    with monkeypatch.context() as patch, pytest.raises(ZeroDivisionError):
        patch.setattr(summary, "as_csv", lambda _: 1 / 0)
        summary.write(MANY[:1], folder)
    assert {path.name: path.read_bytes() for path in folder.iterdir()} == before
    (tmp_path / "file").write_text("")
    with pytest.raises((BookRefused, OSError)):
        summary.write(MANY, tmp_path / "file" / "x")


def test_nothing_that_steers_reaches_the_terminal():
    out = io.StringIO()
    evil = "\x1b[31m[bold]x[/]\u202e\n=1"
    outcomes = [outcome(evil, errors=1, worst=(Worst(evil, evil, evil, evil, evil),)), outcome("b", REFUSED, why=evil)]
    told.show(outcomes, out)
    told.refusals(outcomes, out)
    assert "\x1b" not in out.getvalue() and "\u202e" not in out.getvalue() and "[bold]x[/]" in out.getvalue()


def test_long_lists_are_cut_and_say_so():
    out, err = io.StringIO(), io.StringIO()
    outcomes = [faulty(f"{n}.xlsx") for n in range(40)] + [outcome(f"r{n}.xlsx", REFUSED, why="no") for n in range(30)]
    told.show(outcomes, out)
    told.refusals(outcomes, err)
    assert "and 15 more workbooks" in out.getvalue() and "40 with errors, 30 not checked" in out.getvalue()
    assert err.getvalue().count("\n") == told.MOST_LINES + 1 and "and 10 more" in err.getvalue()
