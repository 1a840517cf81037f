"""Which closed outlines are rooms, and what stands in them."""

from collections import Counter
from collections.abc import Sequence
from pathlib import Path

import numpy as np
import pytest
from ezdxf.layouts import Modelspace
from reading.drawings import saved

from kernelscan.geometry.rings import as_rings
from kernelscan.plan import Plan
from kernelscan.reading import read_plan
from kernelscan.reading.layers import LayerPatterns

Box = tuple[str, float, float, float, float]


def plan_of(folder: Path, *boxes: Box, patterns: LayerPatterns | None = None) -> Plan:
    """Read a drawing of boxes, each a layer, a corner, a width and a depth."""

    def draw(space: Modelspace) -> None:
        for layer, x, y, wide, deep in boxes:
            points = [(x, y), (x + wide, y), (x + wide, y + deep), (x, y + deep)]
            space.add_lwpolyline(points, close=True, dxfattribs={"layer": layer})

    path = saved(folder / "plan.dxf", draw)
    return read_plan(path, layers=patterns or LayerPatterns())


def codes(plan: Plan) -> Counter[str]:
    return Counter(problem.code for problem in plan.problems)


def areas(plan: Plan) -> Sequence[float]:
    return [round(room.area, 9) for room in plan.rooms]


def test_room_layers_by_option_come_first(tmp_path: Path) -> None:
    boxes = [("A-AREA", 0, 0, 4, 3), ("ZONING", 10, 0, 5, 2), ("0", 20, 0, 6, 5)]
    plan = plan_of(tmp_path, *boxes, patterns=LayerPatterns(rooms=("zon*",)))
    assert areas(plan) == [10]
    assert "--room-layer" in plan.room_rule
    assert "ZONING" in plan.room_rule


def test_room_layers_by_convention_come_second(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, ("0", 20, 0, 6, 5), ("Pièces", 0, 0, 1, 1), ("A-FURN", 0, 9, 4, 4))
    assert areas(plan) == [1], "a layer named for rooms may hold small ones"
    assert "convention" in plan.room_rule


def test_content_comes_third(tmp_path: Path) -> None:
    plan = plan_of(
        tmp_path,
        ("0", 0, 0, 4, 3),
        ("0", 5, 0, 1, 1.4),
        ("0", 7, 0, 0.5, 9),
        ("A-FURN", 10, 0, 4, 4),
        ("DIMS", 20, 0, 5, 5),
    )
    assert areas(plan) == [12]
    assert "1.5 m2" in plan.room_rule


def test_an_option_that_matches_nothing_gives_no_rooms(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, ("A-AREA", 0, 0, 4, 3), patterns=LayerPatterns(rooms=("nothing",)))
    assert areas(plan) == []
    assert "none found" in plan.room_rule


def test_a_frame_and_an_outer_face_are_not_rooms(tmp_path: Path) -> None:
    rooms = [("0", x, y, 3.8, 2.8) for x in (0.0, 4.0) for y in (0.0, 3.0)]
    plan = plan_of(tmp_path, *rooms, ("0", -0.3, -0.3, 8.4, 6.4), ("0", -5, -5, 40, 30))
    assert len(plan.rooms) == 4
    assert codes(plan) == {"outer-outline": 2}


def test_by_content_what_lies_in_a_room_is_left_out_and_named(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, ("0", 0, 0, 8, 6), ("0", 1, 1, 2, 1))
    assert areas(plan) == [48]
    assert codes(plan)["inner-outline"] == 1


def test_a_duplicate_counts_once_and_is_reported(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, ("ROOM", 0, 0, 4, 3), ("ROOM", 0, 0, 4, 3), ("ROOM", 0.001, 0, 4, 3))
    assert areas(plan) == [12]
    assert codes(plan) == {"duplicate-outline": 2}
    assert plan.problems[0].source.layer == "ROOM"
    assert plan.problems[0].source.handle
    assert plan.problems[0].at == (2, 1.5)


def test_overlapping_rooms_are_both_kept_and_reported(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, ("ROOM", 0, 0, 4, 3), ("ROOM", 3, 0, 4, 3), ("ROOM", 7, 0, 4, 3))
    assert areas(plan) == [12, 12, 12]
    assert codes(plan) == {"overlapping-rooms": 1}
    assert "3.00 m2" in plan.problems[0].message


def test_a_crossing_outline_is_reported_with_its_place(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        space.add_lwpolyline([(0, 0), (4, 4), (4, 0), (0, 4)], close=True, dxfattribs={"layer": "ROOM"})
        space.add_lwpolyline([(0, 0), (4, 0), (8, 0)], close=True, dxfattribs={"layer": "ROOM"})

    plan = read_plan(saved(tmp_path / "plan.dxf", draw))
    assert plan.rooms == ()
    assert [p.code for p in plan.problems] == ["crossing-outline", "degenerate-outline"]
    assert "(2.000, 2.000)" in plan.problems[0].message
    assert plan.problems[0].source.handle
    assert plan.problems[0].at == (2, 2)


def test_an_open_outline_is_reported_with_its_gap(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        space.add_lwpolyline([(0, 0), (4, 0), (4, 3), (0, 3), (0, 0.25)], dxfattribs={"layer": "ROOM"})
        space.add_lwpolyline([(10, 0), (14, 0), (14, 3)], close=True, dxfattribs={"layer": "ROOM"})

    plan = read_plan(saved(tmp_path / "plan.dxf", draw))
    assert len(plan.rooms) == 1
    (problem,) = plan.problems
    assert problem.code == "open-outline"
    assert "250 mm" in problem.message
    assert problem.at == (0, 0.125)


def test_columns_inside_become_holes(tmp_path: Path) -> None:
    plan = plan_of(
        tmp_path,
        ("ROOM", 0, 0, 8, 6),
        ("S-COLS", 2, 2, 0.4, 0.4),
        ("Stützen", 5, 3, 0.3, 0.3),
        ("S-COLS", 50, 50, 1, 1),
    )
    (room,) = plan.rooms
    assert room.area == pytest.approx(48 - 0.16 - 0.09)
    assert [obstacle.source.layer for obstacle in room.obstacles] == ["S-COLS", "Stützen"]
    assert all(
        np.array_equal(a, b) for a, b in zip(as_rings(room.outline, room.holes), room.rings, strict=True)
    )
    assert not plan.problems


def test_the_obstacle_option(tmp_path: Path) -> None:
    patterns = LayerPatterns(obstacles=("racks",))
    plan = plan_of(tmp_path, ("ROOM", 0, 0, 8, 6), ("RACKS", 2, 2, 1, 1), patterns=patterns)
    assert areas(plan) == [47]


@pytest.mark.parametrize(
    ("columns", "area"),
    [
        ([(0, 2, 0.4, 0.4)], 48 - 0.16),
        ([(-0.2, 2, 0.4, 0.4)], 48 - 0.08),
        ([(7.9, 5.9, 0.4, 0.4)], 48 - 0.01),
        ([(2, 2, 0.4, 0.4), (2.4, 2, 0.4, 0.4)], 48 - 0.32),
        ([(2, 2, 0.4, 0.4), (2.2, 2.2, 0.4, 0.4)], 48 - 0.28),
    ],
)
def test_columns_that_meet_a_wall_or_each_other_are_cut_out(
    tmp_path: Path, columns: list[tuple[float, float, float, float]], area: float
) -> None:
    plan = plan_of(tmp_path, ("ROOM", 0, 0, 8, 6), *[("A-COLS", *column) for column in columns])
    (room,) = plan.rooms
    assert room.area == pytest.approx(area)
    as_rings(room.outline, room.holes)
    assert set(codes(plan)) == {"obstacle-at-wall"}


def test_obstacles_that_divide_or_fill_a_room(tmp_path: Path) -> None:
    divided = plan_of(tmp_path, ("ROOM", 0, 0, 8, 6), ("A-COLS", 5, -1, 0.2, 8))
    assert areas(divided) == [30]
    assert codes(divided) == {"obstacle-at-wall": 1, "room-divided": 1}
    filled = plan_of(tmp_path, ("ROOM", 0, 0, 8, 6), ("A-COLS", -1, -1, 10, 10))
    assert areas(filled) == [48]
    assert codes(filled) == {"obstacle-fills-room": 1}


def test_linework_is_what_is_drawn_without_annotation(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        space.add_line((0, 0), (1000, 0), dxfattribs={"layer": "A-WALL"})
        space.add_text("note", dxfattribs={"insert": (5, 5)})
        space.add_linear_dim((0, -100), (0, 0), (1000, 0)).render()
        space.add_lwpolyline([(0, 0), (4000, 0), (4000, 3000)], close=True, dxfattribs={"layer": "ROOM"})

    plan = read_plan(saved(tmp_path / "plan.dxf", draw, unit=4))
    assert [line.tolist() for line in plan.linework] == [
        [[0, 0], [1, 0]],
        [[0, 0], [4, 0], [4, 3], [0, 0]],
    ]
