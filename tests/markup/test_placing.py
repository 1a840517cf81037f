"""Where labels go: no two touch, whatever the rooms."""

from itertools import combinations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from markup.cases import POINT, L, U, classics, floor, moved, plan_of

from kernelscan.coverage.wording import Custom
from kernelscan.markup.paper import Scale
from kernelscan.markup.placing import Occupied, boxes_inside, inner_points
from kernelscan.markup.scene import Box
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.markup.shown import shown
from kernelscan.markup.tags import placed_tags
from kernelscan.markup.view import PlanView, clipped_segment

WINDOW = Box(0, 0, 400, 300)


def overlapping(boxes: list[Box]) -> list[tuple[Box, Box]]:
    return [(a, b) for a, b in combinations(boxes, 2) if a.grown(-1e-6).overlaps(b.grown(-1e-6))]


def test_a_box_is_taken_once() -> None:
    occupied, box = Occupied(WINDOW), Box(10, 10, 30, 20)
    assert occupied.takes(box)
    occupied.add(box)
    assert not occupied.takes(box)
    assert not occupied.takes(Box(0, 0, 50, 50))
    assert occupied.takes(Box(30, 10, 50, 20))


def test_a_box_must_lie_in_the_window() -> None:
    assert not Occupied(WINDOW).takes(Box(-1, 0, 5, 5))
    assert not Occupied(WINDOW).takes(Box(395, 0, 401, 5))


def test_lines_are_kept_clear_across_cells() -> None:
    occupied = Occupied(WINDOW)
    occupied.add_line((0, 0), (100, 100))
    assert not occupied.takes(Box(48, 40, 60, 52))
    assert occupied.takes(Box(60, 10, 70, 20))
    occupied.add(Box(60, 10, 70, 20))
    assert not occupied.takes_line((65, 0), (65, 100))
    assert occupied.takes_line((80, 0), (80, 100))


@pytest.mark.parametrize(
    ("start", "end", "kept"),
    [
        ((-5, 5), (15, 5), ((0, 5), (10, 5))),
        ((2, 2), (3, 3), ((2, 2), (3, 3))),
        ((-5, 20), (15, 20), None),
        ((-5, 0), (5, 20), None),
        ((5, -5), (5, 15), ((5, 0), (5, 10))),
        ((20, 5), (20, 9), None),
    ],
)
def test_a_segment_cut_to_a_box(start: tuple, end: tuple, kept: tuple | None) -> None:
    assert clipped_segment(start, end, Box(0, 0, 10, 10)) == kept


def test_boxes_in_an_l() -> None:
    ring = np.array(L, dtype=float)
    boxes = np.array([(1, 1, 2, 2), (1, 1, 7, 2), (1, 1, 4, 4), (4, 4, 5, 5), (0, 0, 3, 3)], dtype=float)
    assert boxes_inside((ring,), boxes).tolist() == [True, True, False, False, True]


def test_a_box_around_a_column_is_not_inside() -> None:
    column = np.array([(1, 1), (1, 2), (2, 2), (2, 1)], dtype=float)
    boxes = np.array([(0.5, 0.5, 2.5, 2.5), (1.2, 1.2, 1.8, 1.8), (2.1, 0.5, 2.9, 2.9)])
    assert boxes_inside((np.array(L, dtype=float), column), boxes).tolist() == [False, False, True]


@pytest.mark.parametrize(
    "ring",
    [L, U, POINT, [(0, 0), (100, 0.001), (100, 0.002), (0, 0.001)], [(0, 0), (100, 99), (100, 99.001)]],
)
def test_inner_points_are_inside(ring: list) -> None:
    array = np.array(ring, dtype=float)
    points, clearance = inner_points((array,))
    assert clearance.tolist() == sorted(clearance, reverse=True)
    for x, y in points:
        assert boxes_inside((array,), np.array([(x, y, x, y)]))[0]


def view_of(scale: float) -> PlanView:
    return PlanView(Box(-1000, -1000, 1000, 1000), Scale(scale, f"1:{scale:g}"), (7.5, 7.0))


@pytest.mark.parametrize("scale", [20, 50, 100, 200, 500])
@pytest.mark.parametrize("answers", [classics(), floor(30, 6)], ids=["classics", "floor"])
def test_no_two_labels_touch_at_any_scale(answers: list, scale: float) -> None:
    tags = placed_tags([shown(each) for each in answers], view_of(scale), Custom(imperial=False))
    assert overlapping([placement.box for placement in tags.placements]) == []
    said = {line.string for placement in tags.placements for line in placement.label.lines} | set(
        tags.missing
    )
    assert {zones.room.id for zones in answers} <= said


@settings(deadline=None, max_examples=60)
@given(
    st.lists(st.tuples(st.floats(0, 20), st.floats(0, 15), st.floats(0.2, 6), st.floats(0.2, 6)), max_size=12)
)
def test_rooms_anywhere_even_over_each_other_never_make_labels_touch(rooms: list) -> None:
    answers = []
    for i, (x, y, width, depth) in enumerate(rooms, 1):
        ring = [(0, 0), (width, 0), (width, depth), (0, depth)]
        answers.append(moved(i, f"Room of some name {i}", ring, ring, (x, y)))
    tags = placed_tags([shown(each) for each in answers], view_of(100), Custom(imperial=False))
    assert overlapping([placement.box for placement in tags.placements]) == []


def test_a_tag_that_does_not_fit_stands_outside_on_a_leader() -> None:
    duct = [(0, 0), (0.4, 0), (0.4, 0.4), (0, 0.4)]
    tags = placed_tags([shown(moved(1, "Duct", duct, duct))], view_of(100), Custom(imperial=False))
    (placement,) = [each for each in tags.placements if each.foot is not None]
    assert [line.string for line in placement.label.lines] == ["R001", "Duct"]
    assert not tags.missing


def test_what_finds_no_place_is_named_on_the_sheet() -> None:
    ring = [(0, 0), (1.0, 0), (1.0, 1.0), (0, 1.0)]
    answers = [moved(i, "Cell", ring, ring, (i % 10, i // 10)) for i in range(1, 101)]
    sheet = compose_zone_sheets(plan_of(answers), answers, SheetOptions(scale="1:500"))[0]
    drawn = {
        text.string
        for group in sheet.groups
        if group.name == "tags"
        for text in group.items
        if hasattr(text, "string")
    }
    caption = sheet.group("caption").items[0].string
    missing = {zones.room.id for zones in answers} - drawn
    assert missing
    assert "Without a place here" in caption
