"""Whatever a file turns out to be, the outcome is a plan or one line."""

import os
import random
import sys
from pathlib import Path

import ezdxf
import pytest
from reading.drawings import SQUARE, new_drawing, saved, square_on

from kernelscan.errors import InputError
from kernelscan.plan import Plan
from kernelscan.reading import read_plan


def refusal(path: Path, unit: str | None = "m") -> str:
    with pytest.raises(InputError) as caught:
        read_plan(path, unit=unit)
    text = str(caught.value)
    assert "\n" not in text
    assert text.startswith(path.name)
    return text


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"", "empty"),
        (b"A note to myself: the plan.\n", "DXF"),
        (b"AC1027\x00\x00\x00\x00\x00\x00\x12\x34", "DWG drawing (2013)"),
        (b"AC1032" + b"\x00" * 100, "save it as DXF"),
        (b"%PDF-1.7\n...", "PDF"),
        (b"PK\x03\x04" + b"\x00" * 50, "zip"),
        (bytes(range(256)) * 20, "DXF"),
        (b"\x00" * 5000, "encrypted"),
        (b"AutoCAD Binary DXF\r\n\x1a\x00" + b"\x00\x01\x02" * 40, "binary DXF"),
        (b"  0\nSECTION\n  2\nENTITIES\n  0\nENDSEC\n  0\nEOF\n", "room"),
    ],
)
def test_what_is_no_drawing_is_refused_in_one_line(tmp_path: Path, content: bytes, words: str) -> None:
    path = tmp_path / "plan.dxf"
    path.write_bytes(content)
    if words == "room":
        assert read_plan(path, unit="m").rooms == ()
    else:
        assert words in refusal(path)


def test_a_missing_file_a_folder_and_a_strange_name(tmp_path: Path) -> None:
    assert "no such file" in refusal(tmp_path / "gone.dxf")
    assert "folder" in refusal(tmp_path)
    assert "cannot be read" in refusal(tmp_path / "a\0b.dxf")


@pytest.mark.skipif(
    sys.platform == "win32" or not hasattr(os, "geteuid"), reason="permissions of this system differ"
)
def test_an_unreadable_file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = saved(tmp_path / "plan.dxf", square_on("A-AREA"))

    def closed(*_: object, **__: object) -> None:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "open", closed)
    assert "Permission denied" in refusal(path)


@pytest.mark.parametrize("release", ["R12", "R2000", "R2004", "R2007", "R2010", "R2013", "R2018"])
@pytest.mark.parametrize("binary", [False, True])
def test_every_release_as_text_and_binary(tmp_path: Path, release: str, binary: bool) -> None:
    drawing = new_drawing(4, release)
    space = drawing.modelspace()
    if release == "R12":
        space.add_polyline2d(
            [(x * 1000, y * 1000) for x, y in SQUARE], close=True, dxfattribs={"layer": "A-AREA"}
        )
    else:
        square_on("A-AREA", 1000)(space)
    path = tmp_path / "plan.dxf"
    drawing.saveas(path, fmt="bin" if binary else "asc")
    (room,) = read_plan(path, unit="mm").rooms
    assert room.area == pytest.approx(12)


@pytest.mark.parametrize(
    ("encoding", "name"), [("cp1250", "Łazienka"), ("cp932", "会議室"), ("cp950", "辦公室")]
)
def test_code_pages(tmp_path: Path, encoding: str, name: str) -> None:
    drawing = new_drawing(6, "R2000")
    drawing.encoding = encoding
    square_on("A-AREA")(drawing.modelspace())
    drawing.modelspace().add_text(name, height=0.2, dxfattribs={"insert": (1, 1)})
    path = tmp_path / "plan.dxf"
    drawing.saveas(path, encoding=encoding)
    (room,) = read_plan(path).rooms
    assert room.name == name


def test_a_damaged_drawing_is_recovered_and_says_so(tmp_path: Path) -> None:
    path = saved(tmp_path / "plan.dxf", square_on("A-AREA"))
    text = path.read_text(encoding="utf-8")
    assert "\n4.0\n" in text
    path.write_text(text.replace("\n4.0\n", "\n4.0 m\n"), encoding="utf-8")
    plan = read_plan(path)
    assert {problem.code for problem in plan.problems} == {"damaged-drawing"}
    assert plan.rooms[0].area == pytest.approx(12)


def outcome(path: Path, unit: str | None) -> Plan | str:
    """Return the plan, or the refusal's text; any other exception passes."""
    try:
        return read_plan(path, unit=unit)
    except InputError as refused:
        return str(refused)


def test_the_odd_drawings_end_in_a_plan_or_in_one_line(shared_odd: Path) -> None:
    kinds = set()
    for path in sorted(shared_odd.glob("*.dxf")):
        for unit in (None, "mm", "m"):
            result = outcome(path, unit)
            kinds.add(type(result))
            assert isinstance(result, Plan) or (path.name in result and "\n" not in result)
    assert kinds == {Plan, str}


def test_no_mutation_of_a_drawing_brings_a_traceback(tmp_path: Path) -> None:
    whole = _rich_drawing(tmp_path).read_bytes()
    path = tmp_path / "mutated.dxf"
    dice = random.Random(20)
    results = []
    for _ in range(150):
        path.write_bytes(_mutated(whole, dice))
        results.append(outcome(path, "m"))
    refusals = [result for result in results if isinstance(result, str)]
    assert refusals
    assert len(refusals) < len(results)
    assert not any("\n" in text for text in refusals)
    assert all(room.area > 0 for plan in results if isinstance(plan, Plan) for room in plan.rooms)


def _mutated(whole: bytes, dice: random.Random) -> bytes:
    if dice.random() < 0.3:
        return whole[: dice.randrange(len(whole))]
    changed = bytearray(whole)
    for _ in range(dice.choice([1, 5, 50, 500])):
        place = dice.randrange(len(changed))
        kind = dice.random()
        if kind < 0.5:
            changed[place] = dice.randrange(256)
        elif kind < 0.75:
            changed[place : place + 1] = dice.choice([b"9" * 30, b"nan", b"-", b"1e308", b"\n"])
        else:
            del changed[place : place + dice.randrange(1, 20)]
    return bytes(changed)


def _rich_drawing(folder: Path) -> Path:
    drawing = ezdxf.new("R2000")
    drawing.header["$INSUNITS"] = 6
    space = drawing.modelspace()
    square_on("A-AREA")(space)
    space.add_circle((10, 10), 2, dxfattribs={"layer": "A-AREA"})
    space.add_spline([(0, 0), (1, 3), (4, 4), (5, 0)], dxfattribs={"layer": "A-WALL"})
    space.add_ellipse((5, 5), (2, 1), 0.4)
    space.add_lwpolyline([(20, 0, 0.5), (24, 0, 0), (24, 3, -0.2)], format="xyb", close=True)
    space.add_mtext("{\\fArial|b0;Office}\\P12 m2", dxfattribs={"insert": (1, 2)})
    space.add_hatch().paths.add_polyline_path([(30, 0), (33, 0), (33, 3)], is_closed=True)
    block = drawing.blocks.new("DOOR")
    block.add_arc((0, 0), 0.9, 0, 90)
    block.add_line((0, 0), (0, 0.9))
    space.add_blockref("DOOR", (1, 0), dxfattribs={"xscale": -1, "rotation": 30})
    path = folder / "rich.dxf"
    drawing.saveas(path)
    return path
