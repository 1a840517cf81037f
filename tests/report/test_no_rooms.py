"""Why there is no room, in words, for drawings that go wrong in different ways; and at the command line."""

import io
from itertools import pairwise

import pytest
from reading.drawings import SQUARE, saved, square_on

from kernelscan.cli.app import run
from kernelscan.reading import read_plan
from kernelscan.reading.layers import LayerPatterns
from kernelscan.report.no_rooms import no_room_reason
from kernelscan.report.tables import print_rooms


def nothing(space):
    """Draw nothing."""


def hidden(space):
    space.doc.layers.add("A-WALL").freeze()
    space.add_line((0, 0), (5, 0), dxfattribs={"layer": "A-WALL"})


def one_wall(space):
    space.add_line((0, 0), (5, 0), dxfattribs={"layer": "A-WALL"})


def unnamed(space):
    space.add_line((0, 0), (5, 0), dxfattribs={"layer": "X"})


def open_outline(space):
    space.add_lwpolyline([*SQUARE, (0, 1)], dxfattribs={"layer": "A-AREA"})


def crossing_outline(space):
    space.add_lwpolyline([(0, 0), (4, 4), (4, 0), (0, 4)], close=True, dxfattribs={"layer": "A-AREA"})


@pytest.mark.parametrize(
    ("draw", "reason"),
    [
        (nothing, "the drawing shows no lines"),
        (hidden, "the drawing shows no lines; some of its layers are off or frozen"),
        (
            one_wall,
            "no layer outlines rooms, and the lines on A-WALL and on door and window layers close none",
        ),
        (unnamed, "no layer is named for rooms or walls, and no lines enclose a room's area"),
        (open_outline, "no outline on A-AREA is closed; the notes tell of outlines that are open"),
        (
            crossing_outline,
            "no outline on A-AREA is closed; the notes tell of outlines that cross themselves",
        ),
    ],
)
def test_reasons(tmp_path, draw, reason):
    path = saved(tmp_path / "plan.dxf", draw)
    assert no_room_reason(read_plan(path, unit="m")) == reason
    assert run(["rooms", str(path), "--unit", "m", "--quiet"]) == 0


def test_a_room_layer_that_holds_none(tmp_path):
    path = saved(tmp_path / "plan.dxf", square_on("ROOM"))
    plan = read_plan(path, layers=LayerPatterns(rooms=("NONE*",)))
    assert no_room_reason(plan) == "no closed outline lies on the layers that --room-layer names"


@pytest.mark.parametrize("command", ["rooms", "zones"])
def test_the_commands_say_so(tmp_path, capsys, command):
    path = saved(tmp_path / "plan.dxf", one_wall)
    more = ["--out", str(tmp_path / "out")] if command == "zones" else []
    assert run([command, str(path), *more]) == 0
    assert "No room found: no layer outlines rooms" in capsys.readouterr().out


def test_nothing_is_said_where_there_are_rooms(tmp_path):
    out = io.StringIO()
    print_rooms(read_plan(saved(tmp_path / "plan.dxf", square_on("ROOM"))), out)
    assert "No room found" not in out.getvalue()


@pytest.mark.parametrize("command", ["rooms", "zones"])
def test_an_absurd_unit_is_refused_and_nothing_written(tmp_path, capsys, command):
    def walls(space):
        for start, end in pairwise([*SQUARE, SQUARE[0]]):
            space.add_line(start, end, dxfattribs={"layer": "A-WALL"})

    for draw in (walls, square_on("ROOM")):
        path = saved(tmp_path / "plan.dxf", draw, unit=4)
        more = ["--out", str(tmp_path / "out")] if command == "zones" else ["--json", str(tmp_path / "out")]
        assert run([command, str(path), *more]) == 2
        out, err = capsys.readouterr()
        assert out == ""
        assert err.count("\n") == 1
        assert "12.00 m2 in m" in err
        assert "--unit auto" in err
        assert not (tmp_path / "out").exists()
