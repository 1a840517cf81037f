"""Columns and free-standing walls drawn in loose lines: they block sight, or are reported; nothing else does."""

from collections import Counter
from collections.abc import Callable, Sequence
from pathlib import Path

import numpy as np
import pytest
from ezdxf.layouts import Modelspace
from reading.drawings import saved

from kernelscan.geometry.rings import as_rings
from kernelscan.plan import Plan
from kernelscan.reading import read_plan

Points = Sequence[tuple[float, float]]
ROOM = [(0, 0), (8, 0), (8, 6), (0, 6)]


def box(x: float, y: float, wide: float, deep: float) -> list[tuple[float, float]]:
    return [(x, y), (x + wide, y), (x + wide, y + deep), (x, y + deep)]


def lines(space: Modelspace, layer: str, points: Points, *, closed: bool = True) -> None:
    """Draw a polygon as separate lines."""
    ends = [*points[1:], points[0]] if closed else points[1:]
    for start, end in zip(points, ends, strict=False):
        space.add_line(start, end, dxfattribs={"layer": layer})


def outlined(space: Modelspace) -> None:
    space.add_lwpolyline(ROOM, close=True, dxfattribs={"layer": "A-AREA"})


def walled(space: Modelspace) -> None:
    lines(space, "A-WALL", ROOM)


def plan_of(folder: Path, *parts: Callable[[Modelspace], None]) -> Plan:
    def draw(space: Modelspace) -> None:
        for part in parts:
            part(space)

    return read_plan(saved(folder / "plan.dxf", draw))


def codes(plan: Plan) -> Counter[str]:
    return Counter(problem.code for problem in plan.problems)


def on(layer: str, points: Points, *, closed: bool = True) -> Callable[[Modelspace], None]:
    return lambda space: lines(space, layer, points, closed=closed)


@pytest.mark.parametrize("room", [outlined, walled])
def test_four_lines_are_a_column(tmp_path: Path, room: Callable[[Modelspace], None]) -> None:
    plan = plan_of(tmp_path, room, on("S-COLS", box(3, 2, 0.4, 0.4)))
    (found,) = plan.rooms
    (column,) = found.obstacles
    assert {tuple(p) for p in column.ring.round(4).tolist()} == {(3, 2), (3.4, 2), (3.4, 2.4), (3, 2.4)}
    assert column.source.layer == "S-COLS"
    assert column.source.handle
    assert found.area == pytest.approx(48 - 0.16, abs=1e-4)
    assert not plan.problems


@pytest.mark.parametrize("room", [outlined, walled])
def test_a_closed_column_blocks_in_every_kind_of_room(
    tmp_path: Path, room: Callable[[Modelspace], None]
) -> None:
    def column(space: Modelspace) -> None:
        space.add_lwpolyline(box(3, 2, 0.4, 0.4), close=True, dxfattribs={"layer": "S-COLS"})
        space.add_solid([(3, 2), (3.4, 2), (3, 2.4), (3.4, 2.4)], dxfattribs={"layer": "S-COLS"})

    plan = plan_of(tmp_path, room, column)
    (found,) = plan.rooms
    assert len(found.obstacles) == 1
    assert found.area == pytest.approx(48 - 0.16)
    assert not plan.problems


def test_two_arcs_are_a_round_column(tmp_path: Path) -> None:
    def arcs(space: Modelspace) -> None:
        space.add_arc((4, 3), 0.2, 0, 180, dxfattribs={"layer": "S-COLS"})
        space.add_arc((4, 3), 0.2, 180, 360, dxfattribs={"layer": "S-COLS"})

    plan = plan_of(tmp_path, outlined, arcs)
    (column,) = plan.rooms[0].obstacles
    assert np.hypot(*(column.ring - (4, 3)).T) == pytest.approx(0.2, abs=1e-4)
    assert not plan.problems


@pytest.mark.parametrize("miss", [-0.004, 0.004, 0.3])
def test_ends_that_miss_or_overshoot_close(tmp_path: Path, miss: float) -> None:
    def column(space: Modelspace) -> None:
        lines(space, "S-COLS", [(3, 2), (3.4, 2), (3.4, 2.4), (3, 2.4)], closed=False)
        space.add_line((3, 2.4), (3, 2 - miss), dxfattribs={"layer": "S-COLS"})

    plan = plan_of(tmp_path, outlined, column)
    assert plan.rooms[0].area == pytest.approx(48 - 0.16, abs=0.003)
    assert len(plan.rooms[0].obstacles) == 1


def test_a_crossed_column_is_one(tmp_path: Path) -> None:
    plan = plan_of(
        tmp_path,
        outlined,
        on("S-COLS", box(3, 2, 0.4, 0.4)),
        on("S-COLS", [(3, 2), (3.4, 2.4)], closed=False),
        on("S-COLS", [(3.4, 2), (3, 2.4)], closed=False),
    )
    (column,) = plan.rooms[0].obstacles
    assert len(column.ring) == 4
    assert not plan.problems


def test_three_lines_against_a_wall_are_cut_out(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, outlined, on("S-COLS", [(3, 0), (3, 0.5), (3.5, 0.5), (3.5, 0)], closed=False))
    (room,) = plan.rooms
    assert room.area == pytest.approx(48 - 0.25, abs=1e-4)
    assert not room.obstacles
    assert set(codes(plan)) == {"obstacle-at-wall"}


def test_what_does_not_close_is_reported_with_its_place(tmp_path: Path) -> None:
    def open_column(space: Modelspace) -> None:
        space.add_lwpolyline(box(3, 2, 0.4, 0.4), dxfattribs={"layer": "S-COLS"})

    plan = plan_of(tmp_path, outlined, open_column, on("COLUMN", box(6, 2, 0.4, 0.4)[:3], closed=False))
    assert not plan.rooms[0].obstacles
    first, second = sorted(plan.problems, key=lambda problem: problem.source.layer)
    assert {first.code, second.code} == {"open-obstacle"}
    assert first.message.startswith("2 lines on layer COLUMN inside R001 do not close")
    assert second.message.startswith("1 line on layer S-COLS inside R001 does not close")
    assert second.at == pytest.approx((3.2, 2))
    assert second.source.handle


def test_axes_on_the_columns_layer_enclose_no_column(tmp_path: Path) -> None:
    plan = plan_of(
        tmp_path,
        outlined,
        on("S-COLS", box(1, 1, 3, 3)),
        on("S-COLS", box(0.8, 0.8, 0.4, 0.4)),
    )
    (column,) = plan.rooms[0].obstacles
    assert column.ring.max() == pytest.approx(1.2, abs=1e-4)
    assert codes(plan) == {"wide-obstacle": 1}


@pytest.mark.parametrize("as_lines", [True, False])
def test_a_free_wall_in_an_outlined_room_blocks(tmp_path: Path, as_lines: bool) -> None:
    def wall(space: Modelspace) -> None:
        if as_lines:
            lines(space, "A-WALL", box(2, 3, 2, 0.2))
        else:
            space.add_lwpolyline(box(2, 3, 2, 0.2), close=True, dxfattribs={"layer": "A-WALL"})

    plan = plan_of(tmp_path, outlined, wall)
    (found,) = plan.rooms
    assert found.area == pytest.approx(48 - 0.4, abs=1e-4)
    as_rings(found.outline, found.holes)
    assert [obstacle.source.layer for obstacle in found.obstacles] == ["A-WALL"]
    assert not plan.problems


def test_a_closet_with_double_walls_is_one_obstacle(tmp_path: Path) -> None:
    plan = plan_of(
        tmp_path, outlined, on("A-WALL", box(3, 2, 1.5, 1.5)), on("A-WALL", box(3.1, 2.1, 1.3, 1.3))
    )
    (closet,) = plan.rooms[0].obstacles
    assert len(closet.ring) == 4
    assert plan.rooms[0].area == pytest.approx(48 - 2.25, abs=1e-3)


def test_the_walls_around_an_outlined_room_are_no_obstacles(tmp_path: Path) -> None:
    """Outlines on inner faces, on centre lines and on outer faces; wall ends that touch the outline."""
    inner, outer = box(0, 0, 8, 6), box(-0.2, -0.2, 8.4, 6.4)
    for outline in (inner, box(-0.1, -0.1, 8.2, 6.2), outer):

        def draw(space: Modelspace, outline: Points = outline) -> None:
            space.add_lwpolyline(outline, close=True, dxfattribs={"layer": "A-AREA"})
            lines(space, "A-WALL", inner)
            lines(space, "A-WALL", outer)
            lines(space, "A-WALL", box(-0.2, 2, 0.2, 1))

        (room,) = plan_of(tmp_path, draw).rooms
        assert not room.obstacles
        assert room.area == pytest.approx(
            abs(outline[2][0] - outline[0][0]) * (outline[2][1] - outline[0][1])
        )


def test_door_leaves_and_furniture_on_wall_layers_are_no_obstacles(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        space.add_arc((2, 0), 0.9, 0, 90, dxfattribs={"layer": "A-WALL"})
        space.add_line((2, 0), (2, 0.9), dxfattribs={"layer": "A-WALL"})
        sofa = space.doc.blocks.new("SOFA-3")
        sofa.add_lwpolyline(box(0, 0, 1.6, 0.8), close=True)
        space.add_blockref("SOFA-3", (4, 3), dxfattribs={"layer": "A-WALL"})
        space.add_lwpolyline(box(6, 3, 1, 1), close=True, dxfattribs={"layer": "A-FURN"})

    plan = plan_of(tmp_path, outlined, draw)
    assert not plan.rooms[0].obstacles
    assert not plan.problems


def test_a_wall_that_juts_into_an_outlined_room_is_reported(tmp_path: Path) -> None:
    plan = plan_of(tmp_path, outlined, on("A-WALL", [(4, 0), (4, 2), (4.2, 2), (4.2, 0)], closed=False))
    assert codes(plan) == {"open-obstacle": 1}
    assert "3 lines on layer A-WALL inside R001" in plan.problems[0].message


def test_no_obstacle_where_a_person_sees_none(shared_plans: Path) -> None:
    counts = {}
    for name, unit in (("cottage", "m"), ("apartment", "m"), ("house-level-1", "in")):
        rooms = read_plan(shared_plans / f"{name}.dxf", unit=unit).rooms
        counts[name] = sum(len(room.obstacles) for room in rooms)
    assert counts == {"cottage": 0, "apartment": 0, "house-level-1": 0}
