"""Blocks: nested, mirrored, stretched, in arrays, hidden, missing, and made in bad faith."""

from math import cos, pi, radians, sin
from pathlib import Path

import numpy as np
import pytest
from ezdxf.document import Drawing
from reading.drawings import SQUARE, new_drawing, square_on

from kernelscan.plan import Plan
from kernelscan.reading import read_plan
from kernelscan.reading.explode import drawing_contents


def plan_of(drawing: Drawing, folder: Path) -> Plan:
    path = folder / "plan.dxf"
    drawing.saveas(path)
    return read_plan(path)


def with_block(name: str = "UNIT", layer: str = "0") -> Drawing:
    drawing = new_drawing()
    drawing.blocks.new(name).add_lwpolyline(
        [(0, 0), (4, 0), (4, 1), (2, 1), (2, 3), (0, 3)], close=True, dxfattribs={"layer": layer}
    )
    return drawing


def test_a_mirrored_and_turned_block(tmp_path: Path) -> None:
    drawing = with_block()
    drawing.modelspace().add_blockref(
        "UNIT", (10, 20), dxfattribs={"layer": "ROOM", "xscale": -2, "yscale": 1, "rotation": 30}
    )
    (room,) = plan_of(drawing, tmp_path).rooms
    turn = radians(30)
    expected = {
        (10 + -2 * x * cos(turn) - y * sin(turn), 20 + -2 * x * sin(turn) + y * cos(turn))
        for x, y in [(0, 0), (4, 0), (4, 1), (2, 1), (2, 3), (0, 3)]
    }
    assert np.array(sorted(room.outline.tolist())) == pytest.approx(np.array(sorted(expected)))
    assert room.area == pytest.approx(16)
    assert room.source.layer == "ROOM", "layer 0 of a block is the layer of its insertion"


def test_nested_blocks_with_base_points_and_an_array(tmp_path: Path) -> None:
    drawing = with_block("INNER", "A-AREA")
    outer = drawing.blocks.new("OUTER", base_point=(1, 1))
    outer.add_blockref("INNER", (1, 1), dxfattribs={"xscale": 0.5, "yscale": 0.5})
    drawing.modelspace().add_blockref(
        "OUTER",
        (100, 0),
        dxfattribs={"row_count": 3, "column_count": 2, "row_spacing": 10, "column_spacing": 20, "yscale": 2},
    )
    rooms = plan_of(drawing, tmp_path).rooms
    corners = sorted(tuple(room.outline.min(axis=0).tolist()) for room in rooms)
    assert corners == [(x, y) for x in (100, 120) for y in (0, 10, 20)]
    assert [room.area for room in rooms] == pytest.approx([8 * 0.25 * 2] * 6)


def test_a_round_room_in_an_enlarged_block_keeps_the_chord_error(tmp_path: Path) -> None:
    drawing = new_drawing()
    drawing.blocks.new("DISC").add_circle((0, 0), 0.005, dxfattribs={"layer": "ROOM"})
    drawing.modelspace().add_blockref(
        "DISC", (0, 0), dxfattribs={"xscale": 1000, "yscale": 1000, "zscale": 1000}
    )
    (room,) = plan_of(drawing, tmp_path).rooms
    assert room.area == pytest.approx(pi * 25, rel=1e-3)


def test_names_from_attributes(tmp_path: Path) -> None:
    drawing = with_block()
    insert = drawing.modelspace().add_blockref("UNIT", (0, 0), dxfattribs={"layer": "ROOM"})
    insert.add_attrib("NAME", "Kiln room", (0.5, 0.5)).dxf.height = 0.2
    (room,) = plan_of(drawing, tmp_path).rooms
    assert (room.name, room.name_from) == ("Kiln room", "label")


def test_labels_move_with_their_block(tmp_path: Path) -> None:
    drawing = with_block()
    drawing.blocks["UNIT"].add_text("Loom room", height=0.2, dxfattribs={"insert": (0.3, 0.5)})
    space = drawing.modelspace()
    space.add_blockref("UNIT", (0, 0), dxfattribs={"layer": "ROOM"})
    space.add_blockref("UNIT", (-50, 9), dxfattribs={"layer": "ROOM", "xscale": -1})
    assert [room.name for room in plan_of(drawing, tmp_path).rooms] == ["Loom room", "Loom room"]


@pytest.mark.parametrize("state", ["off", "freeze"])
def test_hidden_layers_are_left_out_with_a_note(tmp_path: Path, state: str) -> None:
    drawing = new_drawing()
    square_on("ROOM")(drawing.modelspace())
    square_on("ROOM OLD", at=(10, 0))(drawing.modelspace())
    getattr(drawing.layers.add("ROOM OLD"), state)()
    plan = plan_of(drawing, tmp_path)
    assert len(plan.rooms) == 1
    (problem,) = plan.problems
    assert (problem.code, problem.source.layer) == ("hidden-layer", "ROOM OLD")
    assert ("off" if state == "off" else "frozen") in problem.message


def test_a_frozen_insertion_hides_all_and_one_that_is_off_only_its_own(tmp_path: Path) -> None:
    drawing = with_block(layer="ROOM")
    space = drawing.modelspace()
    layer = drawing.layers.add("PARTS")
    space.add_blockref("UNIT", (0, 0), dxfattribs={"layer": "PARTS"})
    layer.off()
    assert len(plan_of(drawing, tmp_path).rooms) == 1
    layer.on()
    layer.freeze()
    assert len(plan_of(drawing, tmp_path).rooms) == 0


def test_a_missing_block_and_an_external_reference_are_named(tmp_path: Path) -> None:
    drawing = new_drawing()
    square_on("ROOM")(drawing.modelspace())
    drawing.add_xref_def("walls.dwg", "WALLS")
    drawing.modelspace().add_blockref("WALLS", (0, 0))
    drawing.modelspace().add_blockref("GONE", (0, 0))
    codes = [(problem.code, problem.message) for problem in plan_of(drawing, tmp_path).problems]
    assert [code for code, _ in codes] == ["external-reference"] * 2
    assert "WALLS" in codes[0][1]
    assert "GONE" in codes[1][1]


def test_a_block_in_itself(tmp_path: Path) -> None:
    drawing = with_block("ONE", "ROOM")
    drawing.blocks["ONE"].add_blockref("TWO", (5, 0))
    drawing.blocks.new("TWO").add_blockref("ONE", (5, 0))
    drawing.modelspace().add_blockref("ONE", (0, 0))
    plan = plan_of(drawing, tmp_path)
    assert len(plan.rooms) == 1
    assert [problem.code for problem in plan.problems] == ["block-in-itself"]


def test_a_million_copies_are_refused_not_made(tmp_path: Path) -> None:
    drawing = with_block(layer="ROOM")
    square_on("ROOM", at=(-10, 0))(drawing.modelspace())
    drawing.modelspace().add_blockref(
        "UNIT",
        (0, 0),
        dxfattribs={"row_count": 1000, "column_count": 1000, "row_spacing": 5, "column_spacing": 5},
    )
    plan = plan_of(drawing, tmp_path)
    assert len(plan.rooms) == 1
    assert [problem.code for problem in plan.problems] == ["broken-entity"]
    assert "1000000 copies" in plan.problems[0].message


def test_doubling_nesting_is_bounded(tmp_path: Path) -> None:
    drawing = new_drawing()
    drawing.blocks.new("L0").add_lwpolyline(SQUARE, close=True)
    for level in range(1, 39):
        block = drawing.blocks.new(f"L{level}")
        for x in (0, 5):
            block.add_blockref(f"L{level - 1}", (x, 0))
    drawing.modelspace().add_blockref("L38", (0, 0))
    plan = plan_of(drawing, tmp_path)
    assert "broken-entity" in {problem.code for problem in plan.problems}


def test_nesting_deeper_than_the_bound(tmp_path: Path) -> None:
    drawing = new_drawing()
    drawing.blocks.new("L0").add_lwpolyline(SQUARE, close=True, dxfattribs={"layer": "ROOM"})
    for level in range(1, 60):
        drawing.blocks.new(f"L{level}").add_blockref(f"L{level - 1}", (0, 0))
    drawing.modelspace().add_blockref("L59", (0, 0))
    assert [problem.code for problem in plan_of(drawing, tmp_path).problems] == ["deep-nesting"]


@pytest.mark.parametrize("value", ["nan", "1e300", "-1e300", "inf"])
def test_absurd_numbers(tmp_path: Path, value: str) -> None:
    drawing = new_drawing()
    square_on("ROOM")(drawing.modelspace())
    square_on("ROOM", at=(123.5, 0))(drawing.modelspace())
    path = tmp_path / "plan.dxf"
    drawing.saveas(path)
    text = path.read_text(encoding="utf-8")
    assert "\n123.5\n" in text
    path.write_text(text.replace("\n123.5\n", f"\n{value}\n"), encoding="utf-8")
    plan = read_plan(path)
    assert len(plan.rooms) == 1
    assert "absurd-coordinates" in {problem.code for problem in plan.problems}


def test_regions_cannot_be_read_and_are_counted() -> None:
    drawing = new_drawing()
    square_on("ROOM")(drawing.modelspace())
    drawing.modelspace().add_region(dxfattribs={"layer": "ROOM"})
    drawing.modelspace().add_region(dxfattribs={"layer": "ROOM"})
    (problem,) = drawing_contents(drawing, 0.001).problems
    assert problem.code == "unread-entity"
    assert problem.message.startswith("2 REGION")
