"""Values as cell texts and back."""

import math
from xml.parsers import expat

import pytest
from hypothesis import given
from hypothesis import strategies as st

from cellfuncs.books.xmltext import ErrorValue, decoded, encoded, escaped, number_text, unescaped


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_numbers_come_back_exactly(number):
    mark, text = encoded(number)
    assert mark is None and decoded(mark, text) == number
    assert math.copysign(1, float(text)) == math.copysign(1, number)


@given(st.text(max_size=300))
def test_texts_come_back_through_xml(text):
    """Whatever stands in a text, the XML is well-formed and gives the text back (lone surrogates aside)."""
    got = []
    parser = expat.ParserCreate()
    parser.buffer_text = True
    parser.CharacterDataHandler = got.append
    parser.Parse(f"<v>{escaped(text)}</v>".encode(), True)
    assert decoded("str", "".join(got)) == text


def test_forms():
    assert number_text(7.0) == "7"
    assert number_text(-0.0) == "-0"
    assert number_text(0.1 + 0.2) == "0.30000000000000004"
    assert encoded(True) == ("b", "1") and encoded(False) == ("b", "0")
    assert encoded(ErrorValue("#N/A")) == ("e", "#N/A")
    assert encoded(None) == (None, None)
    assert encoded(math.inf) == ("e", "#NUM!") and encoded(math.nan) == ("e", "#NUM!")


@pytest.mark.parametrize("text", ["=1+1", "+1", "-1", "@A1", "\t=1", "\r=1", "1e5", "TRUE", "#N/A"])
def test_texts_stay_texts(text):
    """What could be taken for a formula or a number is marked as a text and stays one."""
    mark, written = encoded(text)
    assert mark == "str" and decoded(mark, written) == text


def test_escapes():
    assert escaped("a\x07b") == "a_x0007_b"
    assert escaped("_x0041_") == "_x005F_x0041_"
    assert unescaped("_x005F_x0041_") == "_x0041_"
    assert escaped("a\rb\nc\td") == "a_x000D_b\nc\td"
    assert escaped("<&>") == "&lt;&amp;&gt;"
    assert escaped("\ud800") == "\ufffd"
    assert len(escaped("x" * 40_000)) == 32_767


def test_decoding_other_forms():
    assert decoded("b", "true") is True and decoded("b", "0") is False
    assert decoded("e", "#REF!") == ErrorValue("#REF!")
    assert decoded("str", None) == "" and decoded(None, None) is None and decoded("n", "") is None
    assert decoded("d", "2024-01-02") == "2024-01-02"
    assert decoded("n", " 1.5 ") == 1.5
