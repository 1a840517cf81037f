"""The drawing's unit: header, option, neither, absurd."""

from itertools import pairwise
from pathlib import Path

import pytest
from ezdxf.layouts import Modelspace
from reading.drawings import SQUARE, new_drawing, saved, square_on

from kernelscan.errors import InputError
from kernelscan.reading import read_plan
from kernelscan.units import HEADER_UNITS, OPTION_UNITS


@pytest.mark.parametrize("code", sorted(HEADER_UNITS))
def test_every_code_of_the_header(tmp_path: Path, code: int) -> None:
    """A square drawn as 4 x 3 m in each unit of the table; millimetre chords do not matter to straight lines."""
    size = 1 / HEADER_UNITS[code].metres
    plan_file = saved(tmp_path / "plan.dxf", square_on("ROOM", size), unit=code)
    if size * 4 >= 1e12:
        assert read_plan(plan_file).rooms == ()
        return
    plan = read_plan(plan_file)
    assert plan.rooms[0].area == pytest.approx(12)
    assert (plan.unit, plan.unit_from) == (HEADER_UNITS[code], "header")
    assert not plan.problems


@pytest.mark.parametrize("name", OPTION_UNITS)
def test_the_option_beats_the_header(tmp_path: Path, name: str) -> None:
    plan = read_plan(saved(tmp_path / "plan.dxf", square_on("ROOM"), unit=4), unit=name)
    assert plan.rooms[0].area == pytest.approx(12 * plan.unit.metres**2)
    assert (plan.unit.name, plan.unit_from) == (name, "option")
    assert not plan.problems, "what a person says is not questioned"


def test_coordinates_are_the_drawings_own_times_its_unit(tmp_path: Path) -> None:
    plan = read_plan(saved(tmp_path / "plan.dxf", square_on("ROOM", 0.1, (1234.567, 0.3)), unit=2), unit="ft")
    xs = {1234.567 * 0.3048, (1234.567 + 4 * 0.1) * 0.3048}
    assert set(plan.rooms[0].outline[:, 0].tolist()) == xs


@pytest.mark.parametrize("code", [0, 25, -3, None])
def test_no_unit_is_refused_with_what_the_rooms_would_measure(tmp_path: Path, code: int | None) -> None:
    drawing = new_drawing(0)
    if code is None:
        del drawing.header["$INSUNITS"]
    else:
        drawing.header["$INSUNITS"] = code
    square_on("ROOM", 100)(drawing.modelspace())
    path = tmp_path / "plan.dxf"
    drawing.saveas(path)
    with pytest.raises(InputError) as refused:
        read_plan(path)
    text = str(refused.value)
    assert "\n" not in text
    assert text.startswith("plan.dxf: ")
    assert "--unit" in text
    for part in (
        "0.12 m2 in mm",
        "12.00 m2 in cm",
        "120,000.00 m2 in m",
        "77.42 m2 in in",
        "11,148.36 m2 in ft",
    ):
        assert part in text


def test_an_unknown_option_is_refused(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="--unit: got 'cubit'"):
        read_plan(saved(tmp_path / "plan.dxf", square_on("ROOM")), unit="cubit")


@pytest.mark.parametrize(("size", "absurd"), [(0.2, True), (0.21, False), (20, False), (20.5, True)])
def test_an_absurd_header_is_refused(tmp_path: Path, size: float, absurd: bool) -> None:
    """The median room is 12 x size^2 m2; the bounds are 0.5 and 5,000 m2."""
    path = saved(tmp_path / "plan.dxf", square_on("ROOM", size), unit=6)
    assert len(read_plan(path, unit="m").rooms) == 1
    if not absurd:
        assert len(read_plan(path).rooms) == 1
        return
    with pytest.raises(InputError) as refused:
        read_plan(path)
    text = str(refused.value)
    assert text.startswith("plan.dxf: the unit of the header ($INSUNITS), m, makes the median room ")
    assert "\n" not in text
    assert " in mm" in text
    assert "give --unit" in text


def test_a_unit_that_leaves_no_room_is_refused_if_another_gives_some(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        for start, end in pairwise([*SQUARE, SQUARE[0]]):
            space.add_line(start, end, dxfattribs={"layer": "A-WALL"})

    path = saved(tmp_path / "plan.dxf", draw, unit=4)
    with pytest.raises(InputError, match=r"leaves no room at all; .*it seems to be m .*--unit auto"):
        read_plan(path)
    assert len(read_plan(path, unit="auto").rooms) == 1


def test_a_drawing_that_closes_no_room_under_any_unit_is_an_answer(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        space.add_line((0, 0), (9, 0), dxfattribs={"layer": "A-WALL"})
        space.add_arc((3, 3), 0.9, 0, 90, dxfattribs={"layer": "A-DOOR"})

    assert read_plan(saved(tmp_path / "plan.dxf", draw, unit=4)).rooms == ()


def test_a_unit_found_out_says_why(tmp_path: Path) -> None:
    plan = read_plan(saved(tmp_path / "plan.dxf", square_on("ROOM"), unit=4), unit="auto")
    assert (plan.unit.name, plan.unit_from) == ("m", "proposal")
    (note,) = plan.problems
    assert note.code == "proposed-unit"
    assert note.message == "the unit, m, was found out from the drawing: the only room has 12.0 m2"


def test_a_drawing_without_a_header_says_no_unit(tmp_path):
    """The reading library would make up a unit for it."""
    lines = ["0", "SECTION", "2", "ENTITIES", "0", "POLYLINE", "8", "A-AREA", "66", "1", "70", "1"]
    for x, y in [(0, 0), (6000, 0), (6000, 4000), (0, 4000)]:
        lines += ["0", "VERTEX", "8", "A-AREA", "10", str(x), "20", str(y), "30", "0"]
    lines += ["0", "SEQEND"]
    path = tmp_path / "bare.dxf"
    path.write_text("\n".join([*lines, "0", "ENDSEC", "0", "EOF", ""]), encoding="ascii")
    with pytest.raises(InputError, match="says no unit"):
        read_plan(path)
    assert read_plan(path, unit="mm").rooms[0].area == pytest.approx(24)
