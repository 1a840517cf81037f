"""``kernelscan devices`` from outside: what it prints of good files, and of files with faults."""

import re

import pytest

from kernelscan.cli.app import run
from kernelscan.reading import read_devices
from kernelscan.report.device_table import DEVICE_NOTE

TILTED = """
[[device]]
name = "Tilted"
kind = "camera"
fixed_to = ["corner", "wall"]
horizontal_field_deg = 90
vertical_field_deg = 50
tilt_deg = 30
height_m = 3
pixels_across = 1920
density_px_per_m = 125
farthest_m = 20
stand_off_mm = 80
cost = 1200

[[device]]
name = "Plain"
kind = "motion"
fixed_to = ["ceiling"]
horizontal_field_deg = 360
[device.clearance]
walls_m = 0.5
obstacles_m = { "*AIR*" = 1.5 }
"""


@pytest.fixture
def printed(tmp_path, capsys):
    def of(text, *options):
        (tmp_path / "devices.toml").write_text(text, encoding="utf-8")
        code = run(["devices", str(tmp_path / "devices.toml"), *options])
        out, err = capsys.readouterr()
        return code, out, err

    return of


def cells(out, name):
    """The cells of both tables' rows of a device."""
    return [re.split(r"\s{2,}", line.strip()) for line in out.splitlines() if line.startswith(name)]


def test_what_was_understood(printed):
    code, out, err = printed(TILTED)
    assert (code, err) == (0, "")
    # 2.1006 and 34.290 m by the floor edges; 1920 px over 2 d tan 45 deg are 125 px/m at 7.68 m.
    assert cells(out, "Tilted") == [
        ["Tilted", "camera", "90 x 50 deg", "3.00 m", "30 deg", "2.10 m", "34.29 m", "0.00 m to 7.68 m", "density",
         "125.0 px/m", "125.0 px/m"],
        ["Tilted", "corner, wall", "0.080 m", "0.000 m", "0.000 m", "–", "0 deg", "0.000 m", "1,200.00"],
    ]  # fmt: skip
    assert cells(out, "Plain") == [
        ["Plain", "motion", "360 deg", "–", "–", "–", "–", "0.00 m to unbounded", "none", "–", "–"],
        ["Plain", "ceiling", "0.000 m", "0.500 m", "0.000 m", "*AIR* 1.500 m", "0 deg", "0.000 m", "–"],
    ]
    assert out.rstrip().endswith(DEVICE_NOTE)


def test_the_range_may_govern(printed):
    _, out, _ = printed(TILTED.replace("farthest_m = 20", "farthest_m = 5"))
    # 1920 px over 10 m.
    assert cells(out, "Tilted")[0][7:] == ["0.00 m to 5.00 m", "range", "125.0 px/m", "192.0 px/m"]


def test_the_target_may_govern(printed):
    _, out, _ = printed(TILTED.replace("tilt_deg = 30", "tilt_deg = 60\ntarget_height_m = 0"))
    # 3 m / tan 35 deg.
    assert cells(out, "Tilted")[0][7:9] == ["0.00 m to 4.28 m", "vertical field"]


def test_at_an_unbounded_range_there_is_no_density(printed):
    text = "".join(
        line for line in TILTED.splitlines(keepends=True) if "density" not in line and "farthest" not in line
    )
    _, out, _ = printed(text.replace("tilt_deg = 30", "tilt_deg = 20"))
    assert cells(out, "Tilted")[0][7:] == ["0.00 m to unbounded", "none", "–", "–"]


def test_an_unbounded_floor(printed):
    _, out, _ = printed(TILTED.replace("tilt_deg = 30", "tilt_deg = 25"))
    assert cells(out, "Tilted")[0][6] == "unbounded"
    _, out, _ = printed(TILTED.replace("tilt_deg = 30", "tilt_deg = 25.001"))
    assert cells(out, "Tilted")[0][6] == "over 10 km"


def test_in_feet_and_inches(printed):
    _, out, _ = printed(TILTED.replace("height_m = 3", "height_ft = 10"), "--feet")
    assert cells(out, "Tilted")[0][3] == "10'-0\""
    # 125 px to 3.2808 ft.
    assert cells(out, "Tilted")[0][9] == "38.1 px/ft"


def test_quiet_only_checks(printed):
    assert printed(TILTED, "--quiet") == (0, "", "")
    assert printed("", "--quiet")[0] == 2


def test_every_fault_is_a_line_of_its_own(printed):
    text = TILTED.replace("farthest_m = 20", "farthest_m = -3").replace('"ceiling"', '"roof"')
    assert printed(text) == (
        2,
        "",
        "kernelscan: devices.toml: device[1].farthest_m: got -3, expected a length above 0 m\n"
        'kernelscan: devices.toml: device[2].fixed_to: got "roof" in it, expected a list of one or more of '
        '"ceiling", "wall", "corner", "floor"\n',
    )


def test_a_line_break_in_a_name_makes_no_second_line(tmp_path, capsys):
    assert run(["devices", str(tmp_path / "a\nb.toml")]) == 2
    assert capsys.readouterr().err.count("\n") == 1


@pytest.mark.parametrize(
    ("file", "kinds", "fixings"),
    [
        (
            "workshop-devices.toml",
            ["camera", "camera", "motion", "presence", "scanner"],
            {"corner", "wall", "ceiling", "floor"},
        ),
        ("annex-devices.toml", ["camera", "camera", "flame", "beam"], {"corner", "wall"}),
    ],
)
def test_the_sample_files(sample_plans, capsys, file, kinds, fixings):
    devices = read_devices(sample_plans / file)
    assert [device.kind for device in devices] == kinds
    assert {fixing for device in devices for fixing in device.fixings} == fixings
    assert run(["devices", str(sample_plans / file)]) == 0
    out = capsys.readouterr().out
    assert all(device.name.split()[0] in out for device in devices)
