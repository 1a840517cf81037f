"""The commands from outside: what they print, write and return, over plans of every kind."""

import json
import os
import re
import subprocess
import sys
from pathlib import Path

import ezdxf
import pytest
from jsonschema import Draft202012Validator

from kernelscan import coverage
from kernelscan.cli.app import run
from kernelscan.errors import CertificateError
from kernelscan.report.document import report_schema

L_ROOM = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
U_ROOM = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
STEPPED = [(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)]
SQUARE = [(0, 0), (4, 0), (4, 4), (0, 4)]
OUTPUTS = {"report.json", "schedule.csv", "markup.dxf", "sheet-01.svg"}


def draw(path, rooms, labels=(), unit=6):
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = unit
    for k, points in enumerate(rooms):
        moved = [(x + 20 * k, y) for x, y in points]
        doc.modelspace().add_lwpolyline(moved, close=True, dxfattribs={"layer": "A-AREA"})
        if k < len(labels):
            doc.modelspace().add_text(labels[k], height=0.3).set_placement((20 * k + 1, 1))
    doc.saveas(path)
    return path


PLANS = {
    "empty": ([], ()),
    "one room": ([L_ROOM], ["Hall"]),
    "degenerate": ([STEPPED, U_ROOM], ["Step", "You"]),
    "same name twice": ([SQUARE, SQUARE], ["Office", "Office"]),
    "hostile names": (
        [SQUARE] * 4,
        ["=cmd()|' /C calc'!A0", "<script>alert(1)</script>", "../../x", "a\u202eb"],
    ),
}


@pytest.fixture(params=PLANS, ids=[name.replace(" ", "-") for name in PLANS])
def plan(request, tmp_path):
    rooms, labels = PLANS[request.param]
    return draw(tmp_path / "plan.dxf", rooms, labels)


def checked_report(path):
    report = json.loads(path.read_text(encoding="utf-8"))
    Draft202012Validator(report_schema()).validate(report)
    return report


def test_the_schema_is_a_schema():
    Draft202012Validator.check_schema(report_schema())


def test_rooms_over_every_plan(plan, tmp_path, capsys):
    code = run(["rooms", str(plan), "--json", str(tmp_path / "r.json")])
    out, err = capsys.readouterr()
    if "no closed outline" in err:
        assert (code, out) == (2, "")
        return
    assert (code, err) == (0, "")
    report = checked_report(tmp_path / "r.json")
    assert all(room["id"] in out for room in report["rooms"])
    assert all("kernel" not in room for room in report["rooms"])


def test_zones_over_every_plan(plan, tmp_path, capsys):
    out_folder = tmp_path / "out"
    code = run(["zones", str(plan), "--out", str(out_folder)])
    out, err = capsys.readouterr()
    if code == 2:
        assert err.count("\n") == 1
        assert not out_folder.exists()
        return
    assert (code, err) == (0, "")
    assert {path.name for path in out_folder.iterdir()} == OUTPUTS
    report = checked_report(out_folder / "report.json")
    assert all("kernel" in room for room in report["rooms"])
    assert "codes" in out


def test_names_that_attack_come_out_harmless(tmp_path, capsys):
    rooms, labels = PLANS["hostile names"]
    assert run(["zones", str(draw(tmp_path / "p.dxf", rooms, labels)), "--out", str(tmp_path / "out")]) == 0
    assert "\u202e" not in capsys.readouterr().out
    sheet = (tmp_path / "out" / "sheet-01.svg").read_text(encoding="utf-8")
    assert "<script" not in sheet
    assert "\u202e" not in sheet
    table = (tmp_path / "out" / "schedule.csv").read_bytes().decode("utf-8-sig")
    assert not re.search(r'(?m)(^|,)"?[=+@]', table)
    assert {path.name for path in tmp_path.iterdir()} == {"p.dxf", "out"}


def test_the_report_gives_the_very_doubles(tmp_path):
    points = [(0.1, 0.2), (7.3, 0.1), (7.7, 5.9), (0.3, 6.1)]
    assert (
        run(["zones", str(draw(tmp_path / "p.dxf", [points])), "--out", str(tmp_path / "out"), "--quiet"])
        == 0
    )
    (room,) = checked_report(tmp_path / "out" / "report.json")["rooms"]
    assert {tuple(point) for point in room["outline"]} == set(points)


def test_quiet_prints_nothing(tmp_path, capsys):
    assert run(["zones", str(draw(tmp_path / "p.dxf", [L_ROOM])), "--out", str(tmp_path / "out"), "-q"]) == 0
    assert run(["rooms", str(tmp_path / "p.dxf"), "--quiet"]) == 0
    assert capsys.readouterr() == ("", "")


def test_a_room_is_chosen_by_name_or_number(tmp_path, capsys):
    plan = draw(tmp_path / "p.dxf", [L_ROOM, SQUARE, U_ROOM], ["Hall", "Store", "Yard"])
    assert (
        run(["rooms", str(plan), "--room", "hall", "--room", "R003", "--json", str(tmp_path / "r.json")]) == 0
    )
    assert [room["name"] for room in checked_report(tmp_path / "r.json")["rooms"]] == ["Hall", "Yard"]
    assert run(["rooms", str(plan), "--room", "Cellar"]) == 2
    assert "no room 'Cellar'; the rooms are: R001 Hall, R002 Store, R003 Yard" in capsys.readouterr().err


def test_room_layers_are_patterns(tmp_path, capsys):
    doc = ezdxf.new("R2010", units=6)
    doc.modelspace().add_lwpolyline(SQUARE, close=True, dxfattribs={"layer": "ZONES-NEW"})
    doc.modelspace().add_lwpolyline(
        [(x + 9, y) for x, y in SQUARE], close=True, dxfattribs={"layer": "A-AREA"}
    )
    doc.saveas(tmp_path / "p.dxf")
    assert (
        run(["rooms", str(tmp_path / "p.dxf"), "--room-layer", "zones-*", "--json", str(tmp_path / "r.json")])
        == 0
    )
    assert [room["layer"] for room in checked_report(tmp_path / "r.json")["rooms"]] == ["ZONES-NEW"]


def test_the_unit_option_is_over_the_header(tmp_path):
    plan = draw(tmp_path / "p.dxf", [[(x * 1000, y * 1000) for x, y in L_ROOM]], unit=6)
    assert run(["rooms", str(plan), "--unit", "mm", "--json", str(tmp_path / "r.json"), "-q"]) == 0
    report = checked_report(tmp_path / "r.json")
    assert report["plan"]["unit"] == "mm"
    assert report["plan"]["unit_from"] == "option"
    assert report["rooms"][0]["area"] == pytest.approx(33)


def test_sheets_of_an_earlier_run_do_not_stay(tmp_path, capsys):
    out = tmp_path / "out"
    out.mkdir()
    (out / "sheet-09.svg").write_text("old", encoding="utf-8")
    (out / "notes.txt").write_text("mine", encoding="utf-8")
    assert run(["zones", str(draw(tmp_path / "p.dxf", [L_ROOM])), "--out", str(out)]) == 0
    assert {path.name for path in out.iterdir()} == OUTPUTS | {"notes.txt"}
    assert "Removed from an earlier run: sheet-09.svg" in capsys.readouterr().out


@pytest.mark.parametrize(
    "arguments",
    [
        ["zones", "missing.dxf", "--out", "out"],
        ["zones", "missing.dxf"],
        ["rooms"],
        ["rooms", "missing.dxf", "--unit", "furlong"],
        ["rooms", "missing.dxf", "--no-such-option"],
        ["paint", "missing.dxf"],
    ],
)
def test_a_wrong_call_is_one_line_and_2(arguments, tmp_path, monkeypatch, capsys):
    monkeypatch.chdir(tmp_path)
    assert run(arguments) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert re.fullmatch(r"kernelscan: [^\n]+\n", err)
    assert list(tmp_path.iterdir()) == []


def test_nothing_is_written_when_the_checker_refuses(tmp_path, monkeypatch, capsys):
    def refuse(*_, **__):
        raise CertificateError("a wall cuts the kernel")

    monkeypatch.setattr(coverage, "room_answer", refuse)
    assert run(["zones", str(draw(tmp_path / "p.dxf", [L_ROOM])), "--out", str(tmp_path / "out")]) == 70
    assert "a wall cuts the kernel" in capsys.readouterr().err
    assert not (tmp_path / "out").exists()


def test_a_fault_of_the_program_is_one_line_and_70(tmp_path, monkeypatch, capsys):
    def fail(*_, **__):
        raise ZeroDivisionError("by nothing")

    plan = draw(tmp_path / "p.dxf", [L_ROOM])
    monkeypatch.setattr(coverage, "room_answer", fail)
    assert run(["zones", str(plan), "--out", str(tmp_path / "out")]) == 70
    err = capsys.readouterr().err
    assert re.fullmatch(
        r"kernelscan: a fault of the program, please report it: ZeroDivisionError: by nothing [^\n]+\n", err
    )
    monkeypatch.setenv("KERNELSCAN_DEBUG", "1")
    with pytest.raises(ZeroDivisionError):
        run(["zones", str(plan), "--out", str(tmp_path / "out")])


def test_an_interruption_is_said_and_130(tmp_path, monkeypatch, capsys):
    def interrupt(*_, **__):
        raise KeyboardInterrupt

    monkeypatch.setattr(coverage, "room_answer", interrupt)
    assert run(["zones", str(draw(tmp_path / "p.dxf", [L_ROOM])), "--out", str(tmp_path / "out")]) == 130
    assert capsys.readouterr().err == "kernelscan: stopped\n"


def test_help_and_version(capsys):
    assert run(["--help"]) == 0
    out = capsys.readouterr().out
    assert "rooms" in out
    assert "zones" in out
    assert run(["--version"]) == 0
    assert re.fullmatch(r"kernelscan \d+\.\d+\.\d+\n", capsys.readouterr().out)
    assert run(["zones", "--help"]) == 0
    assert "--out" in capsys.readouterr().out


DEVICES = """
[[device]]
name = "Wide corner"
kind = "camera"
fixed_to = ["corner", "wall"]
horizontal_field_deg = 100
farthest_m = 12
cost = 90
[[device]]
name = "=Dome()"
kind = "camera"
fixed_to = ["ceiling"]
horizontal_field_deg = 360
farthest_m = 5
pixels_across = 2000
projection = "equidistant"
height_m = 2.7
vertical_field_deg = 180
tilt_deg = 90
cost = 60
"""


def test_zones_with_devices_and_without_small_features(tmp_path, capsys):
    pilaster = [(0, 0), (2.8, 0), (2.8, 0.2), (3.2, 0.2), (3.2, 0), (6, 0), (6, 4), (0, 4)]
    plan = draw(tmp_path / "p.dxf", [L_ROOM, pilaster, U_ROOM], ["Hall", "Store", "Yard"])
    (tmp_path / "d.toml").write_text(DEVICES, encoding="utf-8")
    out = tmp_path / "out"
    options = ["--devices", str(tmp_path / "d.toml"), "--ignore-depth", "0.2", "--out", str(out)]
    assert run(["zones", str(plan), *options]) == 0
    printed = capsys.readouterr().out
    assert "Wide corner" in printed
    assert "Left out: a pilaster 0.40 m wide and 0.20 m deep" in printed
    hall, store, yard = checked_report(out / "report.json")["rooms"]
    assert [entry["covers"] for entry in hall["tolerant"]["devices"]] == [True, False]
    assert [entry["cheapest"] for entry in hall["tolerant"]["devices"]] == [True, False]
    assert hall["tolerant"]["devices"][1]["obstruction"] == "reach"
    assert hall["tolerant"]["devices"][0]["spots"][0]["point"] == [0, 0]
    assert (store["kernel"]["kind"], store["tolerant"]["kernel"]["kind"]) == ("empty", "area")
    assert store["tolerant"]["kernel"]["area"] == pytest.approx(24)
    assert [feature["kind"] for feature in store["tolerant"]["features"]] == ["pilaster"]
    assert store["why_not"]["ignore_depth"] == pytest.approx(0.2)
    assert [entry["cheapest"] for entry in store["tolerant"]["devices"]] == [False, True]
    assert yard["tolerant"]["devices"][0]["obstruction"] == "sight"
    table = (out / "schedule.csv").read_bytes().decode("utf-8-sig")
    assert "'=Dome()" in table
    assert not re.search(r'(?m)(^|,)"?[=+@]', table)


def test_wanted_spots(tmp_path, capsys):
    plan = draw(tmp_path / "p.dxf", [SQUARE, SQUARE], ["Hall", "Store"])
    (tmp_path / "d.toml").write_text(DEVICES, encoding="utf-8")
    base = ["zones", str(plan), "--devices", str(tmp_path / "d.toml"), "--out", str(tmp_path / "out"), "-q"]

    def dome_of_the_hall():
        hall, _ = checked_report(tmp_path / "out" / "report.json")["rooms"]
        return hall["devices"][1]["spots"][0]["point"]

    assert run([*base, "--near", "1,3"]) == 0
    assert dome_of_the_hall() == pytest.approx([1, 3], abs=0.06)
    assert run([*base, "--towards", "store"]) == 0
    assert dome_of_the_hall()[0] > 2.5
    assert run([*base, "--near", "1;3"]) == 2
    assert "--near '1;3': expected two numbers" in capsys.readouterr().err
    assert run([*base, "--near", "1,3", "--towards", "Store"]) == 2
    assert "give one of them" in capsys.readouterr().err


def test_heavy_libraries_wait_until_they_are_needed():
    heavy = ("numpy", "ezdxf", "shapely", "svgwrite", "rich")
    code = f"import sys, kernelscan.cli.app; print([name for name in {heavy} if name in sys.modules])"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


def test_as_a_module_and_with_a_reader_that_leaves(tmp_path):
    plan = draw(tmp_path / "p.dxf", [L_ROOM] * 50)
    command = [sys.executable, "-m", "kernelscan", "rooms", str(plan)]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, env=os.environ) as process:
        process.stdout.close()
        assert process.stderr.read() == b""
        assert process.wait() == 0


def test_the_report_on_standard_paths_only(tmp_path):
    """A folder that cannot be made is one line, with nothing written."""
    plan = draw(tmp_path / "p.dxf", [L_ROOM])
    (tmp_path / "file").write_text("x", encoding="utf-8")
    assert run(["zones", str(plan), "--out", str(tmp_path / "file" / "out")]) == 2
    assert run(["rooms", str(plan), "--json", str(Path(tmp_path, "file", "r.json"))]) == 2
    assert {path.name for path in tmp_path.iterdir()} == {"p.dxf", "file"}
