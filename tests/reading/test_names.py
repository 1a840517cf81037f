"""Which of the labels in a room is its name, and which sizes they state."""

from pathlib import Path

import pytest
from ezdxf.layouts import Modelspace
from reading.drawings import saved, square_on

from kernelscan.plan import Room
from kernelscan.reading import read_plan
from kernelscan.reading.label_sizes import length_in_feet, stated_size

Text = tuple[str, float, float, float, str]


def room_with(folder: Path, *texts: Text) -> Room:
    """Read a 4 x 3 m room with lines of text, each with its place, height and layer."""

    def draw(space: Modelspace) -> None:
        square_on("ROOM")(space)
        for line, x, y, height, layer in texts:
            space.add_text(line, height=height, dxfattribs={"insert": (x, y), "layer": layer})

    (room,) = read_plan(saved(folder / "plan.dxf", draw)).rooms
    return room


def test_no_label_then_the_layer_then_the_number(tmp_path: Path) -> None:
    assert (room_with(tmp_path).name, room_with(tmp_path).name_from) == ("ROOM", "layer")

    def two(space: Modelspace) -> None:
        square_on("ROOM")(space)
        square_on("ROOM", at=(9, 0))(space)

    rooms = read_plan(saved(tmp_path / "plan.dxf", two)).rooms
    assert [(room.id, room.name, room.name_from) for room in rooms] == [
        ("R001", "Room 1", "number"),
        ("R002", "Room 2", "number"),
    ]


def test_a_stack_gives_the_name_without_the_size(tmp_path: Path) -> None:
    room = room_with(
        tmp_path, ("MASTER", 1, 2, 0.2, "T"), ("STUDIO", 1, 1.7, 0.2, "T"), ("13'8 x 14'", 1, 1.4, 0.15, "T")
    )
    assert (room.name, room.name_from) == ("MASTER STUDIO", "label")


def test_larger_letters_beat_smaller_and_notes_come_last(tmp_path: Path) -> None:
    assert room_with(tmp_path, ("see 4", 1, 1, 0.1, "T"), ("Foundry", 1, 2, 0.2, "T")).name == "Foundry"
    assert (
        room_with(tmp_path, ("DO NOT PAINT", 1, 1, 0.5, "A-NOTE"), ("Foundry", 1, 2, 0.2, "T")).name
        == "Foundry"
    )
    assert room_with(tmp_path, ("101", 1, 1, 0.3, "T"), ("Foundry", 1, 2, 0.2, "T")).name == "Foundry"
    assert room_with(tmp_path, ("101", 1, 1, 0.3, "T")).name == "101"
    assert room_with(tmp_path, ("Foundry", 40, 2, 0.2, "T")).name_from == "layer"


def test_formatting_codes_are_removed(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        square_on("ROOM")(space)
        space.add_mtext(r"{\fArial|b1;\H0.3;\C1;Dye} works\P39.4 m²", dxfattribs={"insert": (1, 2)})

    assert read_plan(saved(tmp_path / "plan.dxf", draw)).rooms[0].name == "Dye works"


@pytest.mark.parametrize(
    ("align", "place"), [("MIDDLE_CENTER", (2, 1.5)), ("BOTTOM_RIGHT", (3.5, 1)), ("LEFT", (3.6, 1))]
)
def test_alignments(tmp_path: Path, align: str, place: tuple[float, float]) -> None:
    from ezdxf.enums import TextEntityAlignment

    def draw(space: Modelspace) -> None:
        square_on("ROOM")(space)
        square_on("ROOM", at=(4, 0))(space)
        space.add_text("Bindery", height=0.2).set_placement(place, align=TextEntityAlignment[align])

    rooms = read_plan(saved(tmp_path / "plan.dxf", draw)).rooms
    expected = ["Room 1", "Bindery"] if align == "LEFT" else ["Bindery", "Room 2"]
    assert [room.name for room in rooms] == expected, "the middle of the text counts"


def test_a_label_belongs_to_the_smallest_room_around_it(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        square_on("ROOM", 4)(space)
        square_on("ROOM", at=(1, 1))(space)
        space.add_text("Vault", height=0.2, dxfattribs={"insert": (2, 2)})
        space.add_text("Hall", height=0.2, dxfattribs={"insert": (10, 8)})

    rooms = read_plan(saved(tmp_path / "plan.dxf", draw)).rooms
    assert [room.name for room in rooms] == ["Hall", "Vault"]


@pytest.mark.parametrize(
    ("text", "area"),
    [
        ("12'0 x 14'6", 12 * 14.5 * 0.3048**2),
        ("13'8 x 14'", (13 + 8 / 12) * 14 * 0.3048**2),
        ("5' x 5'7", 5 * (5 + 7 / 12) * 0.3048**2),
        ("12'-0\" x 14'-6 1/2\"", 12 * (14 + 6.5 / 12) * 0.3048**2),
        ("4.20 x 3.60", 15.12),
        ("4,20 x 3,60 m", 15.12),
        ("4200 mm x 3600 mm", 15.12),
        ("420x360 cm", 15.12),
        ("39.4 m2", 39.4),
        ("39,4 m²", 39.4),
        ("A = 39.4 m2", 39.4),
        ("Area: 12.5", 12.5),
        ("120 sq ft", 120 * 0.3048**2),
        ("NGF 12,50 qm", 12.5),
    ],
)
def test_stated_sizes(text: str, area: float) -> None:
    size = stated_size(text)
    assert size is not None
    assert size.area == pytest.approx(area)


@pytest.mark.parametrize(
    "text", ["Office 1", "101", "2 CAR GARAGE", "Bath", '16" O.C.', "x", "", "2668", '5/8" gyp']
)
def test_what_states_no_size(text: str) -> None:
    assert stated_size(text) is None


def test_lengths_in_feet() -> None:
    assert length_in_feet("7'-4 1/2\"") == pytest.approx((7 + 4.5 / 12) * 0.3048)
    assert length_in_feet("58'-0\"") == pytest.approx(58 * 0.3048)
    assert length_in_feet("5.05") is None
