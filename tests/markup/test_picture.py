"""The picture of a reading: what each group of it shows."""

import numpy as np
import pytest

from kernelscan.geometry.rings import as_ring
from kernelscan.markup.picture import OPENING_PENS, picture_of_plan
from kernelscan.markup.scene import Fill, Stroke
from kernelscan.plan import Obstacle, Opening, Plan, Problem, Room, WallRef
from kernelscan.units import unit_by_name

SQUARE = np.array([(0, 0), (4, 0), (4, 3), (0, 3)], dtype=float)


def plan_of(*rooms, problems=(), origin=(0.0, 0.0)):
    lines = tuple(np.concatenate((room.outline, room.outline[:1])) for room in rooms)
    return Plan("plan.dxf", unit_by_name("m"), "header", rooms, "A rule.", tuple(problems), lines)


def room(number, x=0.0, **more):
    return Room(f"R{number:03d}", f"Hall {number}", as_ring(SQUARE + np.array((x, 0))), **more)


def test_rooms_are_tinted_apart_and_lie_on_the_paper():
    scene = picture_of_plan(plan_of(room(1), room(2, 5)))
    first, second = scene.group("rooms").items
    assert isinstance(first, Fill)
    assert first.ink != second.ink
    points = np.array([*first.rings[0], *second.rings[0]])
    assert (points > 0).all()
    assert (points < (scene.width, scene.height)).all()
    sides = np.ptp(np.array(first.rings[0]), axis=0)
    assert sides[0] / sides[1] == pytest.approx(4 / 3)


def test_openings_by_kind_and_gaps_circled():
    kinds = ("door", "window", "gap")
    openings = tuple(Opening(WallRef(0, k), kind, 1.0, (0.2, 0.5)) for k, kind in enumerate(kinds))
    items = picture_of_plan(plan_of(room(1, openings=openings))).group("openings").items
    assert [item.pen for item in items[:3]] == [OPENING_PENS[kind] for kind in kinds]
    (circle,) = items[3:]
    assert isinstance(circle, Stroke)
    assert circle.closed
    assert np.mean(circle.points, axis=0) == pytest.approx(np.mean(items[2].points, axis=0))


def test_an_obstacle_is_a_hole_of_the_tint():
    pillar = Obstacle(as_ring(np.array([(1, 1), (1.4, 1), (1.4, 1.4), (1, 1.4)]), hole=True))
    scene = picture_of_plan(plan_of(room(1, obstacles=(pillar,))))
    (tint,) = scene.group("rooms").items
    (grey,) = scene.group("obstacles").items
    assert tint.rings[1] == grey.rings[0]


def test_problems_are_circled_where_they_are_and_listed():
    problems = [Problem("open-outline", "is open", (2.0, 1.5)), Problem("far-off", "a stray", None)]
    scene = picture_of_plan(plan_of(room(1), problems=problems))
    circle, number = scene.group("problems").items
    middle = np.mean(np.array(scene.group("rooms").items[0].rings[0]), axis=0)
    assert np.mean(circle.points, axis=0) == pytest.approx(middle)
    assert number.string == "1"
    listed = [text.string for text in scene.group("notes").items]
    assert listed[1:] == ["1  open-outline: is open", "2  far-off: a stray"]


@pytest.mark.parametrize("count", [60, 61, 500])
def test_long_lists_say_how_many_more(count):
    problems = [Problem("far-off", f"stray {k}") for k in range(count)]
    last = picture_of_plan(plan_of(room(1), problems=problems)).group("notes").items[-1].string
    assert last == ("60  far-off: stray 59" if count == 60 else f"and {count - 60} more")


@pytest.mark.parametrize("problem_at", [(1e9, 1e9), (-50.0, 0.0)])
def test_problems_far_off_do_not_shrink_the_plan(problem_at):
    plain = picture_of_plan(plan_of(room(1)))
    stray = picture_of_plan(plan_of(room(1), problems=[Problem("far-off", "a stray", problem_at)]))
    width = [np.ptp(np.array(s.group("rooms").items[0].rings[0])[:, 0]) for s in (plain, stray)]
    assert width[0] == pytest.approx(width[1])
    assert not stray.group("problems").items
