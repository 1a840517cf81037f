"""Hostile text comes out as one harmless printable line."""

import unicodedata

import pytest
from hypothesis import given
from hypothesis import strategies as st

from kernelscan.plain_text import plain_text


@pytest.mark.parametrize(
    ("text", "plain"),
    [
        ("Office 1", "Office 1"),
        ("Küche – 2. étage 台所", "Küche – 2. étage 台所"),
        ("two\nlines\tand  spaces ", "two lines and spaces"),
        ("nul\0bell\x07escape\x1b[31m", "nul bell escape [31m"),
        ("right\u202eto left\u2066x\u200f", "rightto leftx"),
        ("lone \ud800 surrogate", "lone surrogate"),
        ("<script>", "<script>"),
        ("", ""),
        ("\0\u200b", ""),
    ],
)
def test_examples(text, plain):
    assert plain_text(text) == plain


def test_long_text_is_cut_with_a_mark():
    assert plain_text("x" * 10_000, 20) == "x" * 19 + "…"
    assert plain_text("x" * 20, 20) == "x" * 20


@given(st.text(st.characters(codec=None)))
def test_nothing_unprintable_is_left_and_twice_is_once(text):
    line = plain_text(text)
    assert not any(unicodedata.category(sign) in {"Cc", "Cs", "Co", "Cn"} for sign in line)
    assert not any(
        unicodedata.bidirectional(sign) in {"RLO", "LRO", "RLE", "LRE", "RLI", "LRI", "FSI"} for sign in line
    )
    assert len(line) <= 200
    assert plain_text(line) == line
