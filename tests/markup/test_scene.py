"""The scene: its canonical text, its measures, and the golden scenes of whole sheets."""

from collections.abc import Callable
from dataclasses import replace
from math import pi

import pytest
from markup.cases import classics, floor, moved, plan_of

from kernelscan.markup.scene import Box, Fill, Group, Hatch, Pen, Scene, Stroke, Text, canonical_text
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets

Golden = Callable[[str, str], None]


def one_of_each() -> Scene:
    items = (
        Stroke(((0, 0), (10, 0), (10, 5)), Pen(0.5), closed=True),
        Stroke(((0, 0), (1.23456, 0)), Pen(0.25, "#0072b2", (4, 1))),
        Fill((((0, 0), (1, 0), (0, 1)), ((2, 2), (3, 2), (2, 3))), "#ffffff", Pen(0.18)),
        Hatch((((0, 0), (5, 5)), ((1, 0), (6, 5))), Pen(0.18)),
        Text((3, 4), "Hall", 3.5, "middle", True, "#595959", pi / 2),
    )
    return Scene(100, 50, "one of each", "for the test", (Group("all", items), Group("none", ())))


def test_the_canonical_text_says_everything_once() -> None:
    assert canonical_text(one_of_each()) == (
        "scene 100 x 50 'one of each' 'for the test'\n"
        "group all\n"
        "  loop 0.5#000000 0,0 10,0 10,5\n"
        "  line 0.25#0072b2/4-1 0,0 1.235,0\n"
        "  fill #ffffff 0.18#000000 0,0 1,0 0,1 | 2,2 3,2 2,3\n"
        "  hatch 0.18#000000 0,0 5,5 | 1,0 6,5\n"
        "  text 3,4 3.5 bold middle #595959 turned 1.5708 'Hall'\n"
        "group none\n"
    )


@pytest.mark.parametrize("change", [{"width": 100.001}, {"title": "other"}, {"groups": ()}])
def test_a_changed_scene_has_another_text(change: dict) -> None:
    assert canonical_text(replace(one_of_each(), **change)) != canonical_text(one_of_each())


def test_a_box_of_text_turns_with_it_and_covers_ascent_and_descent() -> None:
    flat = Text((10, 10), "Hall", 2.5).box
    upright = Text((10, 10), "Hall", 2.5, angle=pi / 2).box
    assert upright.height == pytest.approx(flat.width)
    assert upright.width == pytest.approx(flat.height)
    assert flat.bottom < 10 < 12.5 < flat.top


def test_boxes_that_only_touch_do_not_overlap() -> None:
    assert not Box(0, 0, 1, 1).overlaps(Box(1, 0, 2, 1))
    assert Box(0, 0, 1, 1).overlaps(Box(0.999, 0.999, 2, 2))


def rooms_with_and_without_a_point() -> list:
    return [classics()[0], classics()[2]]


CASES = {
    "l-and-u": (
        rooms_with_and_without_a_point,
        "mm",
        SheetOptions(date="2026-01-15", owner="Invented Estates"),
    ),
    "segment-and-point-in-feet": (lambda: classics()[4:], "in", SheetOptions(title="Link and star")),
    "nothing-found": (list, "m", SheetOptions(paper="A3")),
}


@pytest.mark.parametrize("name", CASES)
def test_sheets_are_as_they_were_approved(name: str, golden: Golden) -> None:
    answers, unit, options = CASES[name]
    sheets = compose_zone_sheets(plan_of(answers(), unit), answers(), options)
    golden(name, "".join(map(canonical_text, sheets)))


def test_the_comparison_with_a_golden_scene_can_fail(golden: Golden, request: pytest.FixtureRequest) -> None:
    if request.config.getoption("--refresh-golden"):
        pytest.skip("would write a wrong golden file")
    answers = rooms_with_and_without_a_point()
    answers[0] = moved(1, "Reading room", [(0, 0), (8.001, 0), (8.001, 3), (3, 3), (3, 6), (0, 6)],
                       [(0, 0), (3, 0), (3, 3), (0, 3)])  # fmt: skip
    sheets = compose_zone_sheets(plan_of(answers, "mm"), answers, CASES["l-and-u"][2])
    with pytest.raises(AssertionError):
        golden("l-and-u", "".join(map(canonical_text, sheets)))


def test_the_same_values_give_the_same_sheets() -> None:
    first, second = (compose_zone_sheets(plan_of(floor()), floor()) for _ in range(2))
    assert first == second
