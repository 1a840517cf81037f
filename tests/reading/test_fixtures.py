"""Named blocks in a room: found one by one, and devices kept away from them."""

from math import hypot, pi

import numpy as np
import pytest
from reading.drawings import new_drawing

from kernelscan import read_plan
from kernelscan.coverage.device_answers import device_answer
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.plan import Clearances, Device

ROOM = [(0, 0), (6, 0), (6, 4), (0, 4)]


def plan(tmp_path, places, *, unit=6, size=1.0, nested=False):
    drawing = new_drawing(unit)
    outlet = drawing.blocks.new("AIR-OUTLET")
    outlet.add_line((-0.3 * size, -0.4 * size), (0.3 * size, 0.4 * size))
    outlet.add_line((-0.3 * size, 0.4 * size), (0.3 * size, -0.4 * size))
    unit_block = drawing.blocks.new("UNIT")
    unit_block.add_blockref("AIR-OUTLET", (0, 0))
    space = drawing.modelspace()
    space.add_lwpolyline([(x * size, y * size) for x, y in ROOM], close=True, dxfattribs={"layer": "A-AREA"})
    for x, y in places:
        space.add_blockref("UNIT" if nested else "AIR-OUTLET", (x * size, y * size))
    drawing.saveas(tmp_path / "plan.dxf")
    return read_plan(tmp_path / "plan.dxf")


def test_none(tmp_path):
    assert plan(tmp_path, []).rooms[0].fixtures == ()


@pytest.mark.parametrize("nested", [False, True])
def test_each_copy_is_one(tmp_path, nested):
    found = plan(tmp_path, [(1, 1), (3, 2), (3, 2), (20, 20)], nested=nested).rooms[0].fixtures
    assert [fixture.name for fixture in found] == ["AIR-OUTLET"] * 3
    assert [fixture.centre.tolist() for fixture in found] == [[1, 1], [3, 2], [3, 2]]
    assert all(fixture.radius == pytest.approx(0.5) for fixture in found)


def test_in_metres(tmp_path):
    (found,) = plan(tmp_path, [(1, 1)], unit=4, size=1000).rooms[0].fixtures
    assert found.centre == pytest.approx([1, 1])
    assert found.radius == pytest.approx(0.5)


def test_a_device_keeps_away_by_name(tmp_path):
    room = plan(tmp_path, [(3, 2)]).rooms[0]
    device = Device("d", "presence", ("ceiling",), 2 * pi, clearances=Clearances(obstacles=(("air*", 1.0),)))
    answer = device_answer(room, kernel_of_rings(room.rings), device)
    (spot,) = answer.spots
    assert hypot(*(spot.point - [3, 2])) >= 1.5
    assert spot.tolerance > 0
    assert answer.area.tolerances(np.array([[3.0, 2.0]]))[0] < 0
    other = Device("d", "presence", ("ceiling",), 2 * pi, clearances=Clearances(obstacles=(("lamp*", 1.0),)))
    assert device_answer(room, kernel_of_rings(room.rings), other).spots[0].point == pytest.approx([3, 2])
    greedy = Device("d", "presence", ("ceiling",), 2 * pi, clearances=Clearances(obstacles=(("air*", 9.0),)))
    assert device_answer(room, kernel_of_rings(room.rings), greedy).obstruction == "clearance"
