"""The options on how a drawing is read, the reading file and the picture, through the command line."""

import json
import xml.etree.ElementTree as ET
from itertools import pairwise

import ezdxf
import pytest

from kernelscan.cli.app import run


def walls(space, points, layer):
    for start, end in pairwise([*points, points[0]]):
        space.add_line(start, end, dxfattribs={"layer": layer})


def box(x, y, wide, deep):
    return [(x, y), (x + wide, y), (x + wide, y + deep), (x, y + deep)]


@pytest.fixture
def drawing(tmp_path):
    """Two rooms side by side, in metres under a header of millimetres, on layers whose names say nothing."""
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 4
    space = doc.modelspace()
    walls(space, box(0, 0, 4, 3), "ALPHA")
    walls(space, box(20, 0, 5, 4), "ALPHA")
    walls(space, box(21, 1, 0.4, 0.4), "BETA")
    path = tmp_path / "plan.dxf"
    doc.saveas(path)
    return path


def rooms_of(tmp_path, *words):
    target = tmp_path / "report.json"
    assert run(["rooms", *map(str, words), "--json", str(target)]) == 0
    return json.loads(target.read_text(encoding="utf-8"))


def test_auto_is_accepted_and_explained(drawing, tmp_path, capsys):
    report = rooms_of(tmp_path, drawing, "--unit", "auto")
    assert (report["plan"]["unit"], report["plan"]["unit_from"]) == ("m", "option")
    assert "proposed-unit: the unit, m, was found out" in capsys.readouterr().out
    assert [problem["code"] for problem in report["problems"]].count("proposed-unit") == 1


def test_the_message_names_an_option_that_works(drawing, capsys):
    assert run(["rooms", str(drawing)]) == 2
    assert "--unit auto" in capsys.readouterr().err
    assert run(["rooms", str(drawing), "--unit", "auto"]) == 0


def test_layers_are_listed_with_role_and_reason(drawing, capsys):
    assert (
        run(["rooms", str(drawing), "--unit", "m", "--wall-layer", "alph*", "--obstacle-layer", "BETA"]) == 0
    )
    lines = [line.split() for line in capsys.readouterr().out.splitlines()]
    assert ["ALPHA", "wall", "matches", "'alph*'", "8"] in lines
    assert ["BETA", "obstacle", "matches", "'BETA'", "4"] in lines


def test_a_window_leaves_out_the_rest(drawing, tmp_path):
    report = rooms_of(tmp_path, drawing, "--unit", "m", "--window", "-1,-1,10,10")
    assert [room["area"] for room in report["rooms"]] == pytest.approx([12])


@pytest.mark.parametrize("text", ["1,2,3", "a,b,c,d", "0,0,nan,1", "0,0,0,5", "0,0,inf,5", ""])
def test_a_window_that_is_none_is_refused(drawing, capsys, text):
    assert run(["rooms", str(drawing), "--unit", "m", "--window", text]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert err.count("\n") == 1
    assert "--window" in err


def test_the_door_gap(tmp_path):
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 6
    points = [(2.0, 0), (4, 0), (4, 3), (0, 3), (0, 0), (1.0, 0)]
    for start, end in pairwise(points):
        doc.modelspace().add_line(start, end, dxfattribs={"layer": "A-WALL"})
    path = tmp_path / "plan.dxf"
    doc.saveas(path)
    assert len(rooms_of(tmp_path, path)["rooms"]) == 1
    assert rooms_of(tmp_path, path, "--door-gap", "0.2")["rooms"] == []


def test_device_and_opening_layers_are_no_walls(drawing, tmp_path, capsys):
    for option, role in (("--device-layer", "device"), ("--opening-layer", "opening")):
        capsys.readouterr()
        report = rooms_of(tmp_path, drawing, "--unit", "m", "--wall-layer", "ALPHA", option, "BETA")
        assert [len(room["holes"]) for room in report["rooms"]] == [0, 0]
        assert ["BETA", role] in [line.split()[:2] for line in capsys.readouterr().out.splitlines()]


def test_the_reading_file_reads_again_in_the_same_way(drawing, tmp_path):
    settled = tmp_path / "reading.toml"
    options = ["--unit", "auto", "--wall-layer", "ALPHA", "--obstacle-layer", "B*", "--window", "-1,-1,40,9"]
    first = rooms_of(tmp_path, drawing, *options, "--door-gap", "1.1", "--write-reading", settled)
    text = settled.read_text(encoding="utf-8")
    for line in (
        'unit = "m"',
        "window = [-1.0, -1.0, 40.0, 9.0]",
        "door_gap_m = 1.1",
        'obstacles = ["BETA"]',
    ):
        assert line in text
    again = rooms_of(tmp_path, drawing, "--reading", settled)
    assert again["rooms"] == first["rooms"]
    assert len(again["rooms"][0]["holes"]) + len(again["rooms"][1]["holes"]) == 1
    rewritten = tmp_path / "again.toml"
    rooms_of(tmp_path, drawing, "--reading", settled, "--write-reading", rewritten)
    assert rewritten.read_bytes() == settled.read_bytes()


def test_options_count_before_the_reading_file(drawing, tmp_path):
    settled = tmp_path / "reading.toml"
    settled.write_text('unit = "ft"\nwindow = [-1, -1, 10, 10]\n', encoding="utf-8")
    report = rooms_of(tmp_path, drawing, "--reading", settled, "--unit", "m")
    assert [room["area"] for room in report["rooms"]] == pytest.approx([12])


def test_a_wrong_reading_file_is_refused(drawing, tmp_path, capsys):
    settled = tmp_path / "reading.toml"
    settled.write_text('unit = "cubit"\nwall = 3\n', encoding="utf-8")
    assert run(["rooms", str(drawing), "--reading", str(settled)]) == 2
    err = capsys.readouterr().err
    assert err.count("\n") == 1
    assert "reading.toml" in err
    assert "cubit" in err


def test_nothing_that_was_read_is_written_over(drawing, tmp_path, capsys):
    settled = tmp_path / "reading.toml"
    settled.write_text('unit = "m"\n', encoding="utf-8")
    before = settled.read_bytes(), drawing.read_bytes()
    for option, target in (("--write-reading", settled), ("--picture", drawing), ("--json", settled)):
        assert run(["rooms", str(drawing), "--reading", str(settled), option, str(target)]) == 2
    assert (settled.read_bytes(), drawing.read_bytes()) == before
    assert capsys.readouterr().out == ""


def test_zones_takes_the_reading_options(drawing, tmp_path):
    out = tmp_path / "out"
    words = ["--unit", "auto", "--window", "-1,-1,10,10", "--wall-layer", "ALPHA", "--quiet"]
    assert run(["zones", str(drawing), "--out", str(out), *words]) == 0
    report = json.loads((out / "report.json").read_text(encoding="utf-8"))
    assert [room["area"] for room in report["rooms"]] == pytest.approx([12])


def test_the_picture_shows_every_room_and_problem(drawing, tmp_path):
    picture = tmp_path / "picture.svg"
    words = ["--unit", "m", "--wall-layer", "ALPHA", "--obstacle-layer", "BETA"]
    report = rooms_of(tmp_path, drawing, *words, "--picture", picture)
    text = [element.text for element in ET.parse(picture).iter() if element.text]
    assert {room["id"] for room in report["rooms"]} <= set(text)
    assert {room["name"] for room in report["rooms"]} <= set(text)


def test_a_picture_of_nothing(tmp_path):
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 6
    path = tmp_path / "plan.dxf"
    doc.saveas(path)
    assert run(["rooms", str(path), "--picture", str(tmp_path / "p.svg"), "--quiet"]) == 0
    assert ET.parse(tmp_path / "p.svg").getroot().tag.endswith("svg")
