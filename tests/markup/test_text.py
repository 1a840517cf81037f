"""Widths of text, cutting and wrapping."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from kernelscan.markup.metrics import CAP_HEIGHT, em_width, font_size, text_width
from kernelscan.markup.text import clean_text, cut_to, wrapped


def test_widths_known_from_the_typeface() -> None:
    # Advance widths of Helvetica-compatible sans-serif, in thousandths of the em: space 278, digits 556, W 944, i 222
    # (published with the base PostScript fonts; from memory).
    assert [round(em_width(sign) * 1000) for sign in " 0Wi"] == [278, 556, 944, 222]


def test_font_size_makes_capitals_of_the_height() -> None:
    assert font_size(2.5) * CAP_HEIGHT == pytest.approx(2.5)
    assert text_width("0000", 2.5) == pytest.approx(4 * 1139 / 1409 * 2.5)


def test_unknown_characters_are_an_em_and_marks_nothing() -> None:
    assert em_width("漢") == 1.0
    assert em_width("e\u0301") == em_width("e")
    assert em_width("") == 0.0


def test_what_fits_is_not_cut_and_what_is_cut_says_so() -> None:
    assert cut_to("Hall", 50, 2.5) == "Hall"
    cut = cut_to("Reception and waiting", 20, 2.5)
    assert cut.endswith("…")
    assert text_width(cut, 2.5) <= 20
    assert cut_to("W", 1, 2.5) == "…"


@settings(deadline=None)
@given(st.text(st.characters(codec="utf-8"), max_size=200), st.floats(15, 100), st.integers(1, 5))
def test_wrapped_lines_fit_and_lose_nothing_but_space(text: str, width: float, most: int) -> None:
    lines = wrapped(text, width, 2.5)
    assert all(text_width(line, 2.5) <= width for line in lines)
    assert "".join(lines).replace(" ", "") == "".join(text.split())
    few = wrapped(text, width, 2.5, most=most)
    assert len(few) <= most
    assert all(text_width(line, 2.5) <= width for line in few)
    assert few == lines or few[-1].endswith("…")


@settings(deadline=None)
@given(st.text(max_size=300))
def test_clean_text_is_one_short_line(text: str) -> None:
    clean = clean_text(text)
    assert len(clean) <= 120
    assert clean == clean.strip()
    assert clean.isprintable()
