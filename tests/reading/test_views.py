"""Floors side by side, sections, a window, a unit found out, the reading file."""

from pathlib import Path

import pytest
from ezdxf.layouts import Modelspace
from reading.drawings import saved

from kernelscan.errors import InputError
from kernelscan.reading import read_plan
from kernelscan.reading.layers import LayerPatterns
from kernelscan.reading.reading_file import ReadingChoices, read_choices, used_choices


def floor_at(space: Modelspace, x: float, title: str, scale: float = 1.0) -> None:
    for low, high in ((0, 6), (6, 12)):
        points = [(x + low, 0), (x + high, 0), (x + high, 8), (x + low, 8)]
        space.add_lwpolyline(
            [(px * scale, py * scale) for px, py in points], close=True, dxfattribs={"layer": "A-WALL"}
        )
    space.add_text(title, height=0.5 * scale, dxfattribs={"insert": (x * scale, -2 * scale), "layer": "TEXT"})


def floors(space: Modelspace) -> None:
    floor_at(space, 0, "Ground floor")
    floor_at(space, 30, "First floor")
    floor_at(space, 60, "Section A-A")
    space.add_line((90, 0), (96, 8), dxfattribs={"layer": "A-WALL"})


def test_views_are_numbered_titled_and_sections_are_no_floors(tmp_path: Path) -> None:
    plan = read_plan(saved(tmp_path / "plan.dxf", floors))
    assert [(view.number, view.title, len(view.rooms)) for view in plan.views] == [
        (1, "Ground floor", 2),
        (2, "First floor", 2),
        (3, "Section A-A", 0),
        (4, "", 0),
    ]
    assert len(plan.rooms) == 4
    messages = [problem.message for problem in plan.problems if problem.code == "no-floor"]
    assert len(messages) == 2
    assert "section" in messages[0]
    assert messages[1] == "view 4 closes no room"


def test_a_window_in_drawing_units(tmp_path: Path) -> None:
    path = saved(tmp_path / "plan.dxf", floors)
    plan = read_plan(path, window=(45, 10, 28, -5))
    assert [view.title for view in plan.views] == ["First floor"]
    assert len(plan.rooms) == 2


@pytest.mark.parametrize(
    ("unit", "scale"), [("mm", 1000.0), ("cm", 100.0), ("m", 1.0), ("in", 1 / 0.0254), ("ft", 1 / 0.3048)]
)
def test_the_unit_is_found_out_from_stated_sizes(tmp_path: Path, unit: str, scale: float) -> None:
    def draw(space: Modelspace) -> None:
        floor_at(space, 0, "plan", scale)
        space.add_text(
            "48.0 m2", height=0.2 * scale, dxfattribs={"insert": (2 * scale, 3 * scale), "layer": "TEXT"}
        )

    path = saved(tmp_path / "plan.dxf", draw, unit=0)
    plan = read_plan(path, unit="auto")
    assert (plan.unit.name, plan.unit_from) == (unit, "proposal")
    assert plan.rooms[0].area == pytest.approx(48, rel=1e-6)
    with pytest.raises(InputError, match=rf"it seems to be {unit} .*--unit auto") as refused:
        read_plan(path)
    assert "1 of 1 stated room sizes are right" in str(refused.value)


def test_auto_refuses_where_nothing_speaks_for_a_unit(tmp_path: Path) -> None:
    path = saved(tmp_path / "plan.dxf", lambda space: space.add_line((0, 0), (7, 0)))
    with pytest.raises(InputError, match="no unit can be found out"):
        read_plan(path, unit="auto")


def test_a_stated_size_that_is_wrong_is_a_problem(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        floor_at(space, 0, "plan")
        space.add_text("50.4 m2", height=0.2, dxfattribs={"insert": (2, 3), "layer": "TEXT"})
        space.add_text("51.4 m2", height=0.2, dxfattribs={"insert": (8, 3), "layer": "TEXT"})

    (problem,) = [
        p for p in read_plan(saved(tmp_path / "plan.dxf", draw)).problems if p.code == "stated-size"
    ]
    assert "51.4 m2" in problem.message
    assert "48.00 m2" in problem.message


def test_layers_and_reasons_are_listed(tmp_path: Path) -> None:
    plan = read_plan(saved(tmp_path / "plan.dxf", floors))
    uses = {use.layer: (use.role, use.reason, use.strokes) for use in plan.layers}
    assert uses["A-WALL"] == ("wall", "the word 'wall'", 7)
    assert uses["TEXT"][0] == "annotation"


def test_a_reading_file_comes_back_as_it_was_written(tmp_path: Path) -> None:
    choices = ReadingChoices(
        "mm", (0.0, -1.5, 42e3, 29.7e3), LayerPatterns(rooms=("A-[*]*",), walls=('W"1', "mūr")), 1.25
    )
    path = tmp_path / "reading.toml"
    path.write_text(choices.text, encoding="utf-8")
    assert read_choices(path) == choices


def test_the_choices_used_read_the_plan_again(tmp_path: Path) -> None:
    drawing = saved(tmp_path / "plan.dxf", floors)
    plan = read_plan(drawing)
    path = tmp_path / "reading.toml"
    path.write_text(used_choices(plan).text, encoding="utf-8")
    again = read_choices(path)
    assert again.unit == "m"
    assert again.layers.walls == ("A-WALL",)
    second = read_plan(drawing, unit=again.unit, layers=again.layers)
    assert [room.area for room in second.rooms] == [room.area for room in plan.rooms]


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("unit = 3", "unit: got 3"),
        ("unit = 'cubit'\nwindow = [1, 2]", "window: expected"),
        ("door_gap_m = -1", "door_gap_m: got -1"),
        ("doors = 1", "doors: unknown"),
        ("[layers]\nwall = ['x']", "layers.wall: unknown"),
        ("[layers]\nwalls = 'x'", "layers.walls: expected a list"),
        ("layers = 1", "layers: expected a table"),
        ("unit = ", "cannot be read as TOML"),
    ],
)
def test_faults_of_a_reading_file(tmp_path: Path, text: str, words: str) -> None:
    path = tmp_path / "reading.toml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(InputError) as refused:
        read_choices(path)
    assert words in str(refused.value)
    assert str(refused.value).startswith("reading.toml: ")
    assert "\n" not in str(refused.value)


def test_a_missing_reading_file(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"gone\.toml: cannot be read"):
        read_choices(tmp_path / "gone.toml")
