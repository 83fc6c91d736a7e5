"""Which checks the self-test holds, and how their formulas are written."""

import types

import pytest

from cellfuncs.cells import catalogue
from cellfuncs.sheets import self_test


def row(number, kind="published", **more):
    return {"call": "CF_MACH", "args": [number, 340], "expected": number / 340, "rel_tol": 1e-6,
            "source": f"source {number}", "kind": kind} | more  # fmt: skip


def of(name, rows=()):
    """The checks of one function, and the blocks they name."""
    found, blocks = self_test.checks(rows, {name: catalogue.functions()[name]})
    return [check for check in found if check.kind != "handing over"], blocks


def test_every_function_is_checked_even_without_published_rows():
    found, _ = self_test.checks([])
    assert {check.function for check in found} == set(catalogue.functions())
    assert {check.kind for check in found} == {"own answer", "handing over"}
    assert all(f"{check.function}(" in check.formula for check in found)


def test_a_published_row_takes_the_place_of_the_example():
    (check,), _ = of("CF_MACH", [row(34)])
    assert check.formula == "CF_MACH(34,340)"
    assert (check.expected, check.tolerance) == (0.1, pytest.approx(1e-7))
    assert (check.kind, check.source) == ("published", "source 34")


def test_the_best_sources_are_taken_and_regressions_are_none():
    rows = [row(1, "memory"), row(2, "regression"), row(3, "derived"), row(4)]
    found, _ = of("CF_MACH", rows)
    assert [check.source for check in found] == ["source 4", "source 3"]
    found, _ = of("CF_MACH", [row(2, "regression")])
    assert [check.kind for check in found] == ["own answer"]


@pytest.mark.parametrize(("count", "taken"), [(1, 1), (2, 2), (14, 2), (15, 6), (40, 6)])
def test_many_rows_give_more_checks_from_all_over(count, taken):
    found, _ = of("CF_MACH", [row(k + 1) for k in range(count)])
    assert len({check.source for check in found}) == len(found) == taken
    assert int(found[-1].source.split()[1]) > count // 2


def test_the_wider_tolerance_counts():
    (check,), _ = of("CF_MACH", [row(34, abs_tol=0.5)])
    assert check.tolerance == 0.5


def test_texts_are_quoted_and_blanks_left_out():
    args = ['2 "in"', "", 1e-7, 5.0, 3]
    (check,), _ = of("CF_MACH", [row(1, args=args)])
    assert check.formula == 'CF_MACH("2 ""in""",,1E-07,5,3)'


def test_equal_blocks_stand_once():
    one, other = [["flow kind", "duct"], ["velocity", 1.0, "m/s"]], [["flow kind", "gap"]]
    rows = [row(k, args=[block, "Re"]) for k, block in enumerate((one, one))]
    found, blocks = of("CF_MACH", rows)
    assert [check.formula for check in found] == ['CF_MACH(Blocks!$A$2:$C$3,"Re")'] * 2
    assert blocks.area(other) == "Blocks!$A$5:$C$5"
    assert len(blocks.places) == 2


def test_a_text_answer_has_no_tolerance():
    (check,), _ = of("CF_TERM", [row(1, call="CF_TERM", args=["x"], expected="keep")])
    assert (check.expected, check.tolerance) == ("keep", 0.0)


@pytest.mark.parametrize(
    ("formula", "written"),
    [
        ("CF_FAULTS(A1:H60)", "CF_FAULTS(Example!$A$1:$H$60)"),
        ('CF_LIST("A1:B2")', 'CF_LIST("A1:B2")'),
        ("CF_FAULTS(Blocks!A1:B2)", "CF_FAULTS(Blocks!A1:B2)"),
        ("CF_TERMS(coolant)", "CF_TERMS(coolant)"),
    ],
)
def test_ranges_of_an_example_mean_the_example_sheet(formula, written):
    assert self_test.on_example_sheet(formula) == written


@pytest.mark.parametrize(
    ("rows", "place"),
    [
        ((("property", "value"), ("density", 1.0)), (1, 1)),
        ((("a", "b"), ("c", "d")), (1, 0)),
        ((("only",),), (0, 0)),
        (((1.0, 2.0),), (0, 0)),
    ],
)
def test_the_telling_cell_of_a_table(rows, place):
    assert self_test._telling(rows) == place


def test_a_function_without_a_stored_answer_is_named(monkeypatch):
    monkeypatch.setattr(self_test.reference, "example_of", lambda function: None)
    with pytest.raises(ValueError, match="CF_IN_UNIT"):
        self_test.checks([])


def area(*answers):
    return types.SimpleNamespace(
        sheet="Self-test", range=f"D9:D{8 + len(answers)}", values=tuple((a,) for a in answers)
    )


@pytest.mark.parametrize(
    ("answers", "wrong"),
    [((0.1, "keep"), 0), ((0.1 + 1e-8, "keep"), 0), ((0.1 + 1e-6, "keep"), 1), (("! gone", "leave out"), 2)],
)
def test_what_does_not_agree_is_named_before_it_is_given_away(answers, wrong):
    found = [
        self_test.Check("CF_MACH", "CF_MACH(34,340)", 0.1, 1e-7, "derived", "definition"),
        self_test.Check("CF_TERM", 'CF_TERM(x,"y")', "keep", 0.0, "derived", "definition"),
    ]
    lines = self_test.differing(
        found, [types.SimpleNamespace(sheet="Example", range="D9:D9", values=()), area(*answers)]
    )
    assert len(lines) == wrong
    assert all(str(answers[-1 if wrong == 1 and k else k]) in line for k, line in enumerate(lines))
