"""Formulas changed wherever a part writes one."""

import pytest

from cellfuncs.books import inspect
from cellfuncs.books.formulas import normalised
from cellfuncs.books.rewrite import parts_with_formulas, rewritten


def ours(name):
    return "CF_X" if name.casefold() == "cf_x" else None


def long(text):
    return normalised(text, ours, "A.B.").text


@pytest.mark.parametrize(
    "data, wanted",
    [
        (b"<s><c><f>CF_X(1)</f></c></s>", b"<s><c><f>A.B.CF_X(1)</f></c></s>"),
        (b"<x:f a='>'>1+cf_x(2)*2</x:f>", b"<x:f a='>'>1+A.B.CF_X(2)*2</x:f>"),
        (b"<f>IF(A1&lt;2,CF_X(&quot;\xc3\xa9&quot;),CF_X())</f>", b'<f>IF(A1&lt;2,A.B.CF_X("&#233;"),A.B.CF_X())</f>'),
        (b"<f><![CDATA[CF_X(1)]]></f>", b"<f>A.B.CF_X(1)</f>"),
        (
            b"<definedName name='CF_X'>[1]!CF_X(A1)</definedName>",
            b"<definedName name='CF_X'>A.B.CF_X(A1)</definedName>",
        ),
        (b"<formula1>CF_X(1)</formula1>", b"<formula1>A.B.CF_X(1)</formula1>"),
        (b"<xm:f>q.CF_X(1)</xm:f>", b"<xm:f>A.B.CF_X(1)</xm:f>"),
        (b"<f>A.B.CF_X(1)</f>", b"<f>A.B.CF_X(1)</f>"),
    ],
)
def test_names_behind_a_prefix(data, wanted):
    assert rewritten(data, long) == wanted


@pytest.mark.parametrize(
    "data",
    [
        b"<s><v>CF_X(1)</v><t>=CF_X(1)</t></s>",
        b'<f>"CF_X("&amp;A1</f>',
        b"<f t='shared' si='0'/>",
        b"<f>CF_XY(1)+XCF_X(2)</f>",
        b"<f>CF_X</f>",
        b"<f> SUM( A1 , 2 ) </f>",
    ],
)
def test_everything_else_stays(data):
    assert rewritten(data, long) is data


def test_cells_can_be_left_out():
    data = b"<s><c><f>CF_X(1)</f></c><cf><formula>CF_X(2)</formula></cf></s>"
    assert rewritten(data, long, in_cells=False) == data.replace(b"CF_X(2)", b"A.B.CF_X(2)")


def test_which_parts(make):
    book = inspect(make("", ""))
    assert parts_with_formulas(book) == [
        ("xl/workbook.xml", None),
        ("xl/worksheets/sheet1.xml", "S1"),
        ("xl/worksheets/sheet2.xml", "S2"),
    ]
