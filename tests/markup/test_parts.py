"""A plan in parts: an overview, then sheets that together show everything, each cut at its match lines."""

from math import dist

import pytest
from markup.cases import classics, floor, moved, plan_of

from kernelscan.errors import InputError
from kernelscan.markup.clipping import clipped
from kernelscan.markup.scene import Box, Fill, Hatch, Item, Pen, Scene, Stroke, Text
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets

WINDOW = Box(0, 0, 10, 10)
PEN = Pen(0.5)


def sheets_of(answers: list, **options: str) -> tuple[Scene, ...]:
    return compose_zone_sheets(plan_of(answers), answers, SheetOptions(**options))


def caption(sheet: Scene) -> str:
    return sheet.group("caption").items[0].string


def test_parts_follow_an_overview_and_the_schedule_comes_last() -> None:
    sheets = sheets_of(classics(), scale="1:50", paper="A4")
    captions = [caption(sheet) for sheet in sheets if any(group.name == "caption" for group in sheet.groups)]
    assert captions[0].startswith("Overview, 1:200 on A4")
    assert captions[1].startswith("Part A1, 1:50 on A4")
    assert sheets[-1].group("schedule").items
    numbers = [[text.string for text in sheet.texts() if " of " in text.string][-1] for sheet in sheets]
    assert numbers == [f"{i} of {len(sheets)}" for i in range(1, len(sheets) + 1)]


def test_what_fits_the_scale_that_was_asked_for_is_not_parted() -> None:
    assert [caption(sheet) for sheet in sheets_of(classics()[:1], scale="1:100", paper="A4")][:1] == [
        "Plan, 1:100 on A4"
    ]


def test_every_room_is_named_on_some_part() -> None:
    sheets = sheets_of(floor(), scale="1:50", paper="A4")
    named = {text.string for sheet in sheets[1:] for text in sheet.texts() if text.string.startswith("R0")}
    assert named == {f"R{i:03}" for i in range(1, 13)}
    assert not any("Without a place" in text.string for sheet in sheets for text in sheet.texts())


def test_a_part_without_a_room_is_left_out() -> None:
    cell = [(0, 0), (3, 0), (3, 3), (0, 3)]
    far = [moved(1, "Here", cell, cell), moved(2, "There", cell, cell, (60, 40))]
    sheets = sheets_of(far, scale="1:50", paper="A4")
    assert (
        sum(
            caption(sheet).startswith("Part")
            for sheet in sheets
            if "caption" in {g.name for g in sheet.groups}
        )
        == 2
    )


def test_the_parts_show_each_outline_once_and_the_overlap_twice() -> None:
    ring = [(0, 0), (30, 0), (30, 4), (0, 4)]
    sheets = sheets_of([moved(1, "Long", ring, ring)], scale="1:50", paper="A4")
    parts = [sheet for sheet in sheets if "parts" in {group.name for group in sheet.groups}][1:]
    drawn = sum(
        dist(*ends)
        for sheet in parts
        for stroke in sheet.group("rooms").items
        for ends in zip(stroke.points, stroke.points[1:], strict=False)
    )
    assert len(parts) > 1
    # Two walls run on over each match line, 8 mm beyond it from either side.
    assert drawn == pytest.approx(68 * 20 + (len(parts) - 1) * 2 * 2 * 8, abs=1e-6)


def test_a_legible_scale_is_taken_where_the_paper_that_was_given_is_small() -> None:
    sheets = sheets_of(floor(60, 10), paper="A4")
    assert caption(sheets[0]).startswith("Overview, 1:500")
    assert caption(sheets[1]).startswith("Part A1, 1:100")


def test_too_many_parts_are_refused_with_the_remedy() -> None:
    with pytest.raises(InputError, match="give a smaller scale or a larger paper"):
        sheets_of(floor(60, 10), scale="1:1", paper="A4")


@pytest.mark.parametrize(
    ("item", "expected"),
    [
        (Stroke(((1, 1), (9, 9)), PEN), [Stroke(((1, 1), (9, 9)), PEN)]),
        (Stroke(((-5, 5), (15, 5)), PEN), [Stroke(((0, 5), (10, 5)), PEN)]),
        (Stroke(((20, 20), (30, 30)), PEN), []),
        (Stroke(((5, 5), (15, 5), (15, 8), (5, 8)), PEN, closed=True),
         [Stroke(((5, 5), (10, 5)), PEN), Stroke(((10, 8), (5, 8), (5, 5)), PEN)]),
        (Hatch((((-1, 1), (5, 1)), ((20, 0), (30, 0))), PEN), [Hatch((((0, 1), (5, 1)),), PEN)]),
        (Hatch((((20, 0), (30, 0)),), PEN), []),
        (Text((5, 5), "x"), [Text((5, 5), "x")]),
        (Text((9.5, 5), "cut"), []),
        (Fill((((1, 1), (2, 1), (2, 2)),), "#ffffff", PEN), [Fill((((1, 1), (2, 1), (2, 2)),), "#ffffff", PEN)]),
        (Fill((((20, 1), (22, 1), (22, 2)),), "#ffffff"), []),
    ],
)  # fmt: skip
def test_items_are_cut_at_a_window(item: Item, expected: list[Item]) -> None:
    assert list(clipped([item], WINDOW)) == expected


def test_an_area_is_cut_without_a_border_where_it_is_cut() -> None:
    area = Fill((((5, 5), (15, 5), (15, 8), (5, 8)),), "#d9d9d9", PEN)
    fill, *strokes = clipped([area], WINDOW)
    assert fill.pen is None
    assert sorted(fill.rings[0]) == [(5, 5), (5, 8), (10, 5), (10, 8)]
    assert all(
        not (a[0] == b[0] == 10)
        for stroke in strokes
        for a, b in zip(stroke.points, stroke.points[1:], strict=False)
    )
