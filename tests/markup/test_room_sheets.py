"""A sheet for each room: setting-out dimensions, key plan and schedule."""

from itertools import combinations

import numpy as np
import pytest
from markup.cases import L, classics, floor, moved, plan_of
from markup.hostile import HOSTILE, hostile_answers, hostile_plan

from kernelscan.coverage.wording import Custom
from kernelscan.markup.dimensions import Length, dimensions_on_paper, lengths_to_set_out
from kernelscan.markup.paper import Scale
from kernelscan.markup.placing import Occupied
from kernelscan.markup.room_sheets import compose_room_sheets
from kernelscan.markup.scene import Box, Fill, Scene, Text
from kernelscan.markup.sheet import SheetOptions
from kernelscan.markup.shown import shown
from kernelscan.markup.style import PALE
from kernelscan.markup.view import PlanView
from kernelscan.plain_text import plain_text

BLOCK = Box(0, 0, 200, 200)
VIEW = PlanView(BLOCK, Scale(100.0, "1:100"), (0.0, 0.0))


def values(sheet: Scene) -> list[str]:
    return [item.string for item in sheet.group("setting-out").items if isinstance(item, Text)]


def caption(sheet: Scene) -> str:
    return sheet.group("caption").items[0].string


def test_a_sheet_for_each_room_in_order() -> None:
    sheets = compose_room_sheets(plan_of(classics()), classics(), SheetOptions(paper="A3"))
    assert [caption(sheet).split(",")[0] for sheet in sheets] == [
        "R001 Reading room", "R002 Hall", "R003 Cloister", "R004 Store", "R005 Link", "R006 Star",
    ]  # fmt: skip


def test_the_points_of_an_l_are_set_out_in_millimetres() -> None:
    # The kernel is the square of 3 m in the corner: its middle is 1.5 m from both walls, and so is the wall's point.
    (sheet,) = compose_room_sheets(plan_of(classics()[:1]), classics()[:1], SheetOptions(paper="A3"))
    assert values(sheet) == ["1500", "1500", "1500"]


def test_in_feet_and_inches() -> None:
    ring = [(0, 0), (3.048, 0), (3.048, 3.048), (0, 3.048)]
    sheet, *_ = compose_room_sheets(
        plan_of([moved(1, "Ten", ring, ring)], "in"), [moved(1, "Ten", ring, ring)]
    )
    assert set(values(sheet)) == {"5'-0\""}


def test_a_room_without_a_point_has_nothing_to_set_out() -> None:
    assert lengths_to_set_out(shown(classics()[2])) == ()


def test_lengths_on_a_wall_stand_off_it_outside() -> None:
    lengths = [length for length in lengths_to_set_out(shown(classics()[0])) if length.away is not None]
    (length,) = lengths
    assert length.away == pytest.approx((0, -1))
    assert (length.end - length.start).tolist() == [1.5, 0.0]


@pytest.mark.parametrize("turn", range(0, 360, 15))
def test_a_dimension_in_any_direction_is_as_long_as_it_says_and_can_be_read(turn: int) -> None:
    end = 5 * np.array([np.cos(np.radians(turn)), np.sin(np.radians(turn))])
    length = Length(np.zeros(2), end, None)
    (dimension,) = dimensions_on_paper([length], VIEW, Custom(imperial=False), Occupied(BLOCK))
    (x0, y0), (x1, y1) = dimension.line
    assert np.hypot(x1 - x0, y1 - y0) == pytest.approx(50)
    assert dimension.value.string == "5000"
    assert -np.pi / 2 < dimension.value.angle <= np.pi / 2 + 1e-9


def test_a_short_dimension_has_its_value_beyond_its_end() -> None:
    length = Length(np.zeros(2), np.array([0.2, 0.0]), None)
    (dimension,) = dimensions_on_paper([length], VIEW, Custom(imperial=False), Occupied(BLOCK))
    assert dimension.value.box.left > dimension.line[1][0]


def test_values_keep_off_each_other_and_off_what_is_taken() -> None:
    taken = Occupied(BLOCK)
    taken.add(Box(95, 100, 135, 110))
    lengths = [Length(np.zeros(2), np.array([5.0, 0.01 * i]), None) for i in range(4)]
    boxes = [each.value.box for each in dimensions_on_paper(lengths, VIEW, Custom(imperial=False), taken)]
    assert not any(a.grown(-0.01).overlaps(b.grown(-0.01)) for a, b in combinations(boxes, 2))


def test_the_key_plan_fills_the_room_in_question() -> None:
    for i, sheet in enumerate(compose_room_sheets(plan_of(floor(4, 2)), floor(4, 2))):
        (filled,) = [item for item in sheet.group("key").items if isinstance(item, Fill) and item.ink == PALE]
        outlines = [item.points for item in sheet.group("key").items if hasattr(item, "points")]
        assert len(outlines) == 4
        assert outlines[i] == filled.rings[0]


def test_a_scale_that_was_asked_for_is_taken_where_the_room_fits_it() -> None:
    fits = compose_room_sheets(plan_of(floor(1)), floor(1), SheetOptions(scale="1:200", paper="A3"))
    assert caption(fits[0]).endswith("1:200 on A3")
    too_large = compose_room_sheets(plan_of(floor(1)), floor(1), SheetOptions(scale="1:1", paper="A3"))
    assert caption(too_large[0]).endswith("1:50 on A3")


def test_every_room_has_its_schedule() -> None:
    wide = moved(1, "A room of a very long name indeed", L, [(0, 0), (3, 0), (3, 3), (0, 3)])
    for paper in ("A4", "A3", "letter"):
        sheets = compose_room_sheets(plan_of([wide]), [wide], SheetOptions(paper=paper))
        assert sum(text.string == "Schedule of rooms" for sheet in sheets for text in sheet.texts()) == 1


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_text_comes_out_as_plain_text(name: str) -> None:
    for sheet in compose_room_sheets(hostile_plan(name), hostile_answers(name)):
        assert all(text.string == plain_text(text.string, 1000) for text in sheet.texts())
