"""Paper sizes, scales and the choice among them."""

from itertools import islice, pairwise

import numpy as np
import pytest
from markup.cases import classics, floor, moved, plan_of

from kernelscan.errors import InputError
from kernelscan.markup.paper import (
    ANSI_PAPERS,
    ISO_PAPERS,
    customary_scales,
    largest_scale,
    metric_scales,
    paper_by_name,
    scale_by_text,
)
from kernelscan.markup.scene import Stroke
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets

SQUARE = [(0, 0), (1, 0), (1, 1), (0, 1)]


def test_a_sheets_are_halved_from_one_square_metre() -> None:
    # ISO 216: A0 has one square metre, sides in the ratio of 1 to the root of 2; each size is half the one before.
    assert ISO_PAPERS[-1].width * ISO_PAPERS[-1].height == pytest.approx(1e6, rel=1e-3)
    for small, large in pairwise(ISO_PAPERS):
        assert small.width == large.height
        assert small.height == pytest.approx(large.width / 2, abs=0.5)


def test_ansi_sheets_are_doubled_from_letter() -> None:
    # ANSI/ASME Y14.1 (from memory): A is 8.5 by 11 in, B 11 by 17, C 17 by 22, D 22 by 34, E 34 by 44.
    assert [(round(p.height / 25.4, 6), round(p.width / 25.4, 6)) for p in ANSI_PAPERS] == [
        (8.5, 11), (11, 17), (17, 22), (22, 34), (34, 44),
    ]  # fmt: skip


def test_an_a3_sheet_at_1_to_50_shows_19_5_by_13_85_metres() -> None:
    # The margins of ISO 5457 (20 mm left, 10 mm else), as worked out from the sizes.
    frame = paper_by_name("A3").frame
    assert (frame.width * 50 / 1000, frame.height * 50 / 1000) == pytest.approx((19.5, 13.85))


def test_scales_of_iso_5455() -> None:
    assert [scale.denominator for scale in islice(metric_scales(), 10)] == [
        1,
        2,
        5,
        10,
        20,
        50,
        100,
        200,
        500,
        1000,
    ]


def test_customary_scales_get_smaller_and_say_what_they_are() -> None:
    scales = list(islice(customary_scales(), 30))
    assert scales == sorted(scales, key=lambda scale: scale.denominator)
    assert {scale.text: scale.denominator for scale in scales}['1/8" = 1\'-0"'] == 96
    assert {scale.text: scale.denominator for scale in scales}['1 1/2" = 1\'-0"'] == 8
    assert {scale.text: scale.denominator for scale in scales}["1\" = 50'"] == 600


@pytest.mark.parametrize("text", ["1:50", "1 : 50", "2:100"])
def test_a_scale_by_ratio(text: str) -> None:
    assert scale_by_text(text).denominator == 50


@pytest.mark.parametrize("text", ['1/4" = 1\'-0"', '1/4"', "1/4", '1/4"=1\'-0"'])
def test_a_scale_by_inches(text: str) -> None:
    assert scale_by_text(text).denominator == 48


@pytest.mark.parametrize("text", ["", "1:0", "0:1", "1:-5", "a:b", "1:inf", "1:nan", "half", "7/64"])
def test_what_is_no_scale_is_refused(text: str) -> None:
    with pytest.raises(InputError, match="scale"):
        scale_by_text(text)


@pytest.mark.parametrize(("name", "found"), [("a3", "A3"), (" ANSI  d ", "ANSI D"), ("tabloid", "ANSI B")])
def test_paper_by_name(name: str, found: str) -> None:
    assert paper_by_name(name).name == found


def test_unknown_paper_is_refused_with_the_list() -> None:
    with pytest.raises(InputError, match="A4, A3"):
        paper_by_name("B5")


@pytest.mark.parametrize(
    ("size", "denominator"), [((1.0, 1.0), 10), ((1.001, 1.0), 20), ((1e9, 1.0), 1e10), ((0.0, 0.0), 1)]
)
def test_the_largest_scale_that_fits(size: tuple[float, float], denominator: float) -> None:
    assert largest_scale(size, (100, 100), imperial=False).denominator == denominator


def paper_of(answers: list, unit: str = "m", **options: str) -> tuple[tuple[float, float], str]:
    sheet = compose_zone_sheets(plan_of(answers, unit), answers, SheetOptions(**options))[0]
    caption = sheet.group("caption").items[0].string
    return (sheet.width, sheet.height), caption


def test_a_small_plan_takes_the_smallest_paper() -> None:
    size, caption = paper_of([moved(1, "Cell", np.array(SQUARE) * 3, np.array(SQUARE) * 3)])
    assert sorted(size) == [210, 297]
    assert caption.endswith("on A4")


def test_feet_and_inches_take_their_own_papers_and_scales() -> None:
    size, caption = paper_of(floor(), "in")
    assert sorted(size) == pytest.approx([279.4, 431.8])
    assert "1'-0\"" in caption


def test_a_large_floor_takes_large_paper() -> None:
    assert sorted(paper_of(floor(200, 20))[0]) == [594, 841]


def test_paper_and_scale_as_given() -> None:
    size, caption = paper_of(classics(), paper="A2", scale="1:100")
    assert sorted(size) == [420, 594]
    assert caption == "Plan, 1:100 on A2"


@pytest.mark.parametrize("unit", ["m", "ft"])
def test_10_m_are_as_long_as_the_scale_says(unit: str) -> None:
    wide = [moved(1, "Long", [(0, 0), (10, 0), (10, 4), (0, 4)], [(0, 0), (10, 0), (10, 4), (0, 4)])]
    sheet = compose_zone_sheets(plan_of(wide, unit), wide, SheetOptions(scale="1:100", paper="A3"))[0]
    outline = next(item for item in sheet.group("rooms").items if isinstance(item, Stroke))
    assert outline.points[1][0] - outline.points[0][0] == pytest.approx(100.0, abs=1e-9)


def test_survey_coordinates_keep_their_millimetres() -> None:
    outline = [(0, 0), (10, 0), (10, 4), (0, 4)]
    far = [moved(1, "Far", outline, outline, (5_123_456.0, 512_345.0))]
    near = [moved(1, "Far", outline, outline)]
    first, second = (
        np.array(compose_zone_sheets(plan_of(answers), answers)[0].group("rooms").items[0].points)
        for answers in (far, near)
    )
    assert first - first[0] == pytest.approx(second - second[0], abs=1e-4)
