"""Formulas as texts: prefixes, shared formulas, references, one value of a range."""

import pytest

from cellfuncs.books.formulas import (
    as_one_value,
    calls,
    canonical,
    normalised,
    pieces,
    reference,
    shifted,
)

OURS = {"cf_x": "CF_X", "cf_y_z": "CF_Y_Z"}


def is_ours(name):
    return OURS.get(name.casefold())


@pytest.mark.parametrize(
    "written",
    [
        "CF_X",
        "cf_x",
        "[1]!CF_X",
        "[12]!cf_X",
        "'C:\\add ins\\[x.xlam]'!CF_X",
        "'C:\\it''s here\\cellfuncs.xlam'!CF_X",
        "cellfuncs.xlam!CF_X",
        "'cell funcs.xlam'!CF_X",
        "_xlfn.CF_X",
        "_xludf.CF_X",
        "_xldudf_CF_X",
        "COM.SUN.STAR.SHEET.ADDIN.ORG.CELLFUNCS.ADDIN.CF_X",
        "org.cellfuncs.CellfuncsAddIn.cf_x",
        "ORG.CELLFUNCS.CELLFUNCSADDIN.GETCF_X",
        "org.cellfuncs.CellfuncsAddIn.getCf_x",
    ],
)
def test_prefixes(written):
    text, ours = normalised(f'SUM({written}(A1,"{written}("),2)', is_ours)
    assert text == f'SUM(CF_X(A1,"{written}("),2)'
    assert ours == {"CF_X"}


@pytest.mark.parametrize("name", ["CF_XX", "XCF_X", "CF_X.A", "SUM", "[1]!OTHER", "ERF.PRECISE", "get", "CF_Y"])
def test_other_names_stay(name):
    assert canonical(name, is_ours) is None
    assert normalised(f"{name}(1)", is_ours) == (f"{name}(1)", frozenset())


def test_names_in_texts_and_sheets_are_no_calls():
    text = "\"CF_X(1)\"&'CF_X(1)'!A1"
    assert normalised(text, is_ours) == (text, frozenset())


def test_unreadable():
    assert pieces('"never closed') is None
    assert pieces("A1+" * 5000 + "1") is None
    assert normalised('CF_X("', is_ours).text == 'CF_X("'
    assert shifted('CF_X("', 1, 1) == 'CF_X("'


@pytest.mark.parametrize(
    "text, rows, columns, wanted",
    [
        ("A1+$B2*C$3-$D$4", 2, 1, "B3+$B4*D$3-$D$4"),
        ("SUM(A1:B2,$A$1:B2)", 1, 0, "SUM(A2:B3,$A$1:B3)"),
        ("SUM(A:B)+SUM($A:B)+SUM(1:2)+SUM($1:2)", 1, 1, "SUM(B:C)+SUM($A:C)+SUM(2:3)+SUM($1:3)"),
        ("'It''s A1'!A1&Sheet1!B2&\"A1\"&LOG10(A1)", 1, 1, "'It''s A1'!B2&Sheet1!C3&\"A1\"&LOG10(B2)"),
        ("A1", -1, 0, "A1048576"),
        ("A1", 0, -1, "XFD1"),
        ("name+Table[col]+TRUE", 5, 5, "name+Table[col]+TRUE"),
        ("[1]Sheet1!A1", 1, 0, "[1]Sheet1!A2"),
    ],
)
def test_shared_formulas_move(text, rows, columns, wanted):
    assert shifted(text, rows, columns) == wanted


@pytest.mark.parametrize(
    "text, kind, sheet, area",
    [
        ("$B$3", "cells", None, (3, 2, 3, 2)),
        ("C9:A1", "cells", None, (1, 1, 9, 3)),
        ("'a b'!A1:B2", "cells", "a b", (1, 1, 2, 2)),
        ("'it''s'!A1", "cells", "it's", (1, 1, 1, 1)),
        ("Übersicht!A1", "cells", "Übersicht", (1, 1, 1, 1)),
        ("A:C", "cells", None, (1, 1, 1048576, 3)),
        ("2:$3", "cells", None, (2, 1, 3, 16384)),
        ("coolant", "name", None, None),
        ("S1!coolant", "name", "S1", None),
        ("Tab[[#This Row],[a b]]", "table", None, None),
        ("[1]S!A1", "external", "[1]S", (1, 1, 1, 1)),
        ("'[1]a b'!A1:B2", "external", "[1]a b", (1, 1, 2, 2)),
        ("[1]!name", "external", "[1]", None),
        ("S1:S3!A1", "unknown", "S1:S3", (1, 1, 1, 1)),
        ("A1048577", "unknown", None, None),
        ("#REF!", "unknown", None, None),
    ],
)
def test_references(text, kind, sheet, area):
    found = reference(text)
    assert (found.kind, found.sheet, found.area) == (kind, sheet, area)


@pytest.mark.parametrize(
    "text, wanted",
    [
        ("A1", "@(A1)"),
        ("A1:A9*2", "@(@A1:A9*2)"),
        ("2*(B1+A1:A9)", "@(2*(B1+@A1:A9))"),
        ("SUM(A1:A9*2)", "@(SUM(A1:A9*2))"),
        ("block+1", "@(@block+1)"),
        ("A1:INDEX(B:B,3)", "@(A1:INDEX(B:B,3))"),
        ("A1:A9", "@(@A1:A9)"),
    ],
)
def test_one_value(text, wanted):
    assert as_one_value(text) == wanted


def test_calls():
    text = 'SUM(1,CF_X( A1 ,"a,b",{1,2;3,4},(B1,B2)),CF_Y())'
    assert calls(text) == [
        ("SUM", ["1", 'CF_X( A1 ,"a,b",{1,2;3,4},(B1,B2))', "CF_Y()"]),
        ("CF_X", ["A1", '"a,b"', "{1,2;3,4}", "(B1,B2)"]),
        ("CF_Y", [""]),
    ]
