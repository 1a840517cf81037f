"""Rooms from loose lines: gaps, openings, niches, frames, obstacles, and what is no room."""

from collections.abc import Sequence
from itertools import pairwise
from pathlib import Path

import pytest
from ezdxf.layouts import Modelspace
from reading.drawings import saved

from kernelscan.plan import Plan
from kernelscan.reading import read_plan
from kernelscan.tolerances import Tolerances

Point = tuple[float, float]
Polyline = Sequence[Point]


def plan_of(
    folder: Path, *runs: Polyline, layer: str = "A-WALL", extra: object = None, door_gap: float = 1.3
) -> Plan:
    """Read a drawing of runs of LINEs."""

    def draw(space: Modelspace) -> None:
        for run in runs:
            for a, b in pairwise(run):
                space.add_line(a, b, dxfattribs={"layer": layer})
        if callable(extra):
            extra(space)

    return read_plan(saved(folder / "plan.dxf", draw), tolerances=Tolerances(door_gap=door_gap))


def box(x: float, y: float, wide: float, deep: float) -> list[Point]:
    return [(x, y), (x + wide, y), (x + wide, y + deep), (x, y + deep), (x, y)]


def areas(plan: Plan) -> list[float]:
    return sorted(round(room.area, 6) for room in plan.rooms)


def test_four_lines_are_a_room(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 4, 3))
    assert areas(plan) == [12]
    assert plan.rooms[0].closed_by == "walls"
    assert plan.rooms[0].corner_count == 4
    assert plan.rooms[0].openings == ()


@pytest.mark.parametrize("miss", [-0.004, -0.001, 0.0, 1e-9, 0.001, 0.004, 0.3])
def test_corners_that_miss_or_overshoot(tmp_path: Path, miss: float) -> None:
    """Undershoots up to the snap distance are joined; overshoots of any length do no harm."""
    runs = [
        [(-miss, 0), (4 + miss, 0)],
        [(4, -miss), (4, 3 + miss)],
        [(4 + miss, 3), (-miss, 3)],
        [(0, 3 + miss), (0, -miss)],
    ]
    (room,) = plan_of(tmp_path, *runs).rooms
    assert room.area == pytest.approx(12, rel=1e-4)
    assert room.corner_count == 4


def test_a_corner_that_misses_by_more_stays_open(tmp_path: Path) -> None:
    assert areas(plan_of(tmp_path, [(0.1, 0), (4, 0), (4, 3), (0, 3), (0, 0.1)])) == []


def test_pieces_copies_and_overlaps_are_one_wall(tmp_path: Path) -> None:
    pieces = [[(0, 0), (1.7, 0)], [(1.2, 0), (4, 0)], [(0, 0), (4, 0)], [(0.5, 0), (0.9, 0)]]
    plan = plan_of(tmp_path, [(4, 0), (4, 3), (0, 3), (0, 0)], *pieces)
    assert areas(plan) == [12]
    assert plan.rooms[0].corner_count == 4


@pytest.mark.parametrize(("gap", "closed"), [(0.8, True), (1.3, True), (1.6, True), (1.7, False)])
def test_a_bare_gap_between_free_ends(tmp_path: Path, gap: float, closed: bool) -> None:
    """Between two free ends in one line 1.25 times the door gap is closed: a double door."""
    wall = [[(4, 0), (4, 0.6)], [(4, 0.6 + gap), (4, 3)]]
    plan = plan_of(tmp_path, box(0, 0, 8, 3), *wall)
    assert areas(plan) == ([12, 12] if closed else [24])
    left = [(problem.message, problem.at) for problem in plan.problems if problem.code == "wide-gap"]
    assert left == ([] if closed else [("a gap of 1.70 m between two wall ends is left open", (4, 1.45))])
    if closed:
        for room in plan.rooms:
            (opening,) = room.openings
            assert (opening.kind, round(opening.width, 6)) == ("gap", gap)
            assert sorted(y for _, y in room.opening_ends(opening).tolist()) == pytest.approx(
                [0.6, 0.6 + gap]
            )


def test_the_door_gap_is_a_tolerance(tmp_path: Path) -> None:
    wall = [[(4, 0), (4, 0.5)], [(4, 2.5), (4, 3)]]
    assert areas(plan_of(tmp_path, box(0, 0, 8, 3), *wall)) == [24]
    assert areas(plan_of(tmp_path, box(0, 0, 8, 3), *wall, door_gap=2.0)) == [12, 12]


def test_a_door_beside_a_cross_wall(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 8, 3), [(4, 0), (4, 2.1)])
    assert areas(plan) == [12, 12]
    assert [o.width for room in plan.rooms for o in room.openings] == pytest.approx([0.9, 0.9])


def double(x: float, y: float, wide: float, deep: float, thick: float) -> list[list[Point]]:
    return [box(x, y, wide, deep), box(x - thick, y - thick, wide + 2 * thick, deep + 2 * thick)]


def test_a_double_wall_gives_the_inner_face(tmp_path: Path) -> None:
    assert areas(plan_of(tmp_path, *double(0, 0, 4, 3, 0.3))) == [12]


def test_a_gap_in_a_double_wall_has_a_threshold_at_either_face(tmp_path: Path) -> None:
    faces = [
        [(1.5, 0), (0, 0), (0, 3), (4, 3), (4, 0), (2.4, 0), (2.4, -0.2), (4.2, -0.2), (4.2, 3.2)],
        [(4.2, 3.2), (-0.2, 3.2), (-0.2, -0.2), (1.5, -0.2), (1.5, 0)],
    ]
    (room,) = plan_of(tmp_path, *faces).rooms
    assert room.area == pytest.approx(12)
    assert [(o.kind, round(o.width, 6)) for o in room.openings] == [("gap", 0.9)]


def test_a_niche_is_part_of_its_room(tmp_path: Path) -> None:
    """The wall goes on in the same line after the niche, as it would after a door, but behind it is only wall."""
    run = [(0, 0), (1, 0), (1, -0.3), (2, -0.3), (2, 0), (4, 0), (4, 3), (0, 3), (0, 0)]
    (room,) = plan_of(tmp_path, run, box(-0.6, -0.6, 5.2, 4.2)).rooms
    assert room.area == pytest.approx(12.3)
    assert room.openings == ()


@pytest.mark.parametrize(("layer", "kind"), [("A-DOOR", "door"), ("A-GLAZ", "window"), ("Fenster", "window")])
def test_what_is_drawn_in_a_wide_gap_closes_it(tmp_path: Path, layer: str, kind: str) -> None:
    def opening(space: Modelspace) -> None:
        space.add_line((1, 0.05), (3.5, 0.05), dxfattribs={"layer": layer})

    walls = [[(1, 0), (0, 0), (0, 3), (4, 3), (4, 0), (3.5, 0)]]
    assert areas(plan_of(tmp_path, *walls)) == []
    (room,) = plan_of(tmp_path, *walls, extra=opening).rooms
    assert room.area == pytest.approx(12)
    assert [(o.kind, round(o.width, 6)) for o in room.openings] == [(kind, 2.5)]


def test_swings_and_leaves_are_no_walls(tmp_path: Path) -> None:
    def door(space: Modelspace) -> None:
        space.add_arc((4, 1), 0.9, 0, 90, dxfattribs={"layer": "A-DOOR"})
        space.add_line((4, 1), (4.9, 1), dxfattribs={"layer": "A-DOOR"})

    plan = plan_of(tmp_path, box(0, 0, 8, 3), [(4, 0), (4, 1)], [(4, 1.9), (4, 3)], extra=door)
    assert areas(plan) == [12, 12]
    assert {o.kind for room in plan.rooms for o in room.openings} == {"door"}
    unnamed = plan_of(tmp_path, box(0, 0, 8, 3), [(4, 0), (4, 1)], [(4, 1.9), (4, 3)], layer="0", extra=door)
    assert areas(unnamed) == [12, 12]


def test_a_free_standing_body_is_an_obstacle_and_no_room(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 8, 6), box(3, 3, 2, 1.5), box(1, 1, 0.4, 0.4))
    (room,) = plan.rooms
    assert room.area == pytest.approx(48 - 3 - 0.16)
    assert len(room.obstacles) == 2


def test_a_room_in_a_room_with_a_door_is_a_room(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 12, 9), [(5, 3), (3, 3), (3, 6), (7, 6), (7, 3), (6, 3)])
    assert areas(plan) == [12, 96]


def test_a_frame_around_the_building_is_no_room(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 8, 6), [(4, 0), (4, 6)], box(-5, -5, 30, 20), layer="0")
    assert areas(plan) == [24, 24]


def test_narrow_and_small_faces_are_no_rooms_unless_named(tmp_path: Path) -> None:
    closet = [box(0, 0, 4, 3), [(3, 0), (3, 1.2), (4, 1.2)], [(0, 2.6), (4, 2.6)]]
    assert len(plan_of(tmp_path, *closet).rooms) == 1

    def name(space: Modelspace) -> None:
        space.add_text("Store", height=0.1, dxfattribs={"insert": (3.3, 0.5), "layer": "TEXT"})

    assert sorted(room.name for room in plan_of(tmp_path, *closet, extra=name).rooms) == ["Room 1", "Store"]


def test_an_open_plan_has_no_rooms_and_says_so(tmp_path: Path) -> None:
    walls = [[(k * 5.0, 0), (k * 5.0, 20)] for k in range(8)]
    plan = plan_of(tmp_path, *walls, box(60, 0, 2, 1.5))
    assert plan.rooms == ()
    assert "open plan" in plan.room_rule
    assert [problem.code for problem in plan.problems if problem.code != "no-floor"] == ["open-plan"]


def test_a_far_off_stray_is_left_out_and_named(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 4, 3), [(1e6, 1e6), (1e6 + 1, 1e6)])
    assert areas(plan) == [12]
    (problem,) = [p for p in plan.problems if p.code == "far-off"]
    assert problem.at == (1e6, 1e6)


def test_survey_coordinates_keep_their_digits(tmp_path: Path) -> None:
    shifted = [(x + 512345.678, y + 5403210.987) for x, y in box(0, 0, 4, 3)]
    assert plan_of(tmp_path, shifted).rooms[0].area == pytest.approx(12, rel=1e-5)


COUNTS = {
    "apartment": ("m", 4),
    "cottage": ("m", 6),
    "family-home": ("in", 15),
    "gallery": ("m", 52),
    "house-level-1": ("in", 2),
    "house-level-2": ("in", 2),
    "mixed-use": ("m", 7),
    "office": ("m", 14),
    "pavilion-open-plan": ("m", 0),
    "single-lines": ("m", 8),
}


@pytest.mark.parametrize("file", COUNTS)
def test_real_plans(shared_plans: Path, file: str) -> None:
    """The counts of the table in docs/reading.md, with the unit given and with the unit found out."""
    unit, rooms = COUNTS[file]
    path = shared_plans / f"{file}.dxf"
    assert len(read_plan(path, unit=unit).rooms) == rooms
    found_out = read_plan(path, unit="auto")
    assert (found_out.unit.name, found_out.unit_from, len(found_out.rooms)) == (unit, "proposal", rooms)


def test_the_offices_measure_what_their_dimensions_say(shared_plans: Path) -> None:
    """Depth 5.000 and widths 7.885, 10.000, 9.770, 9.885, 9.885 m, by the drawing's own dimensions."""
    plan = read_plan(shared_plans / "mixed-use.dxf", unit="m")
    sizes = {room.name: room.outline.max(axis=0) - room.outline.min(axis=0) for room in plan.rooms}
    assert set(sizes) == {"Factory hall", "Hallway", *(f"Office {k}" for k in range(1, 6))}
    for k, width in enumerate((7.885, 10.0, 9.77, 9.885, 9.885), 1):
        assert sizes[f"Office {k}"] == pytest.approx([width, 5.0], abs=0.01)


def test_the_family_home_measures_what_its_labels_say(shared_plans: Path) -> None:
    """14 of the 15 rooms are within 5 % of their labels; the great room is open to others with labels of their own."""
    plan = read_plan(shared_plans / "family-home.dxf", unit="in")
    wrong = [problem.message for problem in plan.problems if problem.code == "stated-size"]
    assert len(plan.rooms) == 15
    assert all(room.name_from == "label" for room in plan.rooms)
    assert len(wrong) <= 1
    assert all("GREAT ROOM" in text for text in wrong)


def test_a_single_line_that_stands_free_is_named(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, box(0, 0, 8, 6), box(3, 3, 2, 1.5), [(6, 0), (6, 3)])
    (problem,) = [p for p in plan.problems if p.code == "free-wall"]
    assert problem.at == (6, 1.5)
    assert "3.00 m" in problem.message
    assert problem.source.handle


def test_a_drawing_too_dense_to_be_walls_ends_soon(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        for k in range(1100):
            space.add_line((k * 0.01, 0), (k * 0.01, 15), dxfattribs={"layer": "A-WALL"})
            space.add_line((0, k * 0.01), (15, k * 0.01), dxfattribs={"layer": "A-WALL"})

    plan = read_plan(saved(tmp_path / "plan.dxf", draw))
    assert plan.rooms == ()
    assert "too-dense" in {problem.code for problem in plan.problems}


def test_many_copies_of_one_outline_end_soon(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        for _ in range(2500):
            space.add_lwpolyline(box(0, 0, 4, 3), dxfattribs={"layer": "A-AREA"})

    assert "too-dense" in {problem.code for problem in read_plan(saved(tmp_path / "plan.dxf", draw)).problems}
