"""A device file becomes devices, or one error that holds every fault of it."""

import tomllib
from math import degrees, inf, pi
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from kernelscan.errors import InputError
from kernelscan.plan import Clearances, Device
from kernelscan.reading import read_devices
from kernelscan.reading.device_keys import CLEARANCE_KEYS, DEVICE_KEYS, FIXINGS, PROJECTIONS
from kernelscan.reading.devices import LARGEST_FILE

LEAST = {
    "name": '"Eye"',
    "kind": '"camera"',
    "fixed_to": '["corner"]',
    "horizontal_field_deg": "90",
}


def described(inner="", **keys):
    """A device table with the least that it needs, some keys set, and those set to ``None`` left out."""
    lines = [f"{key} = {value}" for key, value in {**LEAST, **keys}.items() if value is not None]
    return "\n".join(["[[device]]", *lines, *(["[device.clearance]", inner] if inner else [])]) + "\n"


@pytest.fixture
def read(tmp_path):
    def from_text(text):
        (tmp_path / "devices.toml").write_text(text, encoding="utf-8")
        return read_devices(tmp_path / "devices.toml")

    return from_text


def assert_lines(error):
    assert error.args
    assert all(line.isprintable() for line in error.args)


@pytest.fixture
def faults(read):
    def of(text):
        with pytest.raises(InputError) as caught:
            read(text)
        lines = str(caught.value).split("\n")
        assert tuple(lines) == caught.value.args
        assert all(line.startswith("devices.toml: ") and line.isprintable() for line in lines)
        return [line.removeprefix("devices.toml: ") for line in lines]

    return of


def test_the_least_device(read):
    assert read(described()) == (Device("Eye", "camera", ("corner",), pi / 2),)


def test_every_key(read):
    text = described(
        inner='walls_m = 0.5\nopenings_mm = 100\nobstacles_m = { "*AIR*" = 1, "*HEAT*" = 2.5 }',
        fixed_to='["wall", "ceiling"]',
        vertical_field_deg="50",
        nearest_m="1",
        farthest_m="9.5",
        pixels_across="1920",
        density_px_per_m="100",
        projection='"equidistant"',
        height_m="2.5",
        tilt_deg="30",
        target_height_m="1",
        grazing_deg="5",
        stand_off_mm="80",
        placing_error_mm="20",
        cost="99",
    )
    (device,) = read(text)
    assert device == Device(
        name="Eye",
        kind="camera",
        fixings=("wall", "ceiling"),
        horizontal_field=pi / 2,
        vertical_field=50 * (pi / 180),
        tilt=30 * (pi / 180),
        height=2.5,
        target_height=1.0,
        nearest=1.0,
        farthest=9.5,
        pixels_across=1920,
        density=100.0,
        projection="equidistant",
        grazing=5 * (pi / 180),
        stand_off=0.08,
        clearances=Clearances(0.5, 0.1, (("*AIR*", 1.0), ("*HEAT*", 2.5))),
        placing_error=0.02,
        cost=99.0,
    )


def test_a_full_turn_is_read_as_one(read):
    (device,) = read(described(horizontal_field_deg="360"))
    assert device.sees_all_round


def test_devices_keep_the_order_of_the_file(read):
    text = "".join(described(name=f'"{name}"') for name in ("Zed", "Ann", "Mid"))
    assert [device.name for device in read(text)] == ["Zed", "Ann", "Mid"]


@pytest.mark.parametrize(("unit", "metres"), [("m", 1), ("mm", 0.001), ("ft", 0.3048), ("in", 0.0254)])
def test_lengths_in_four_units(read, unit, metres):
    (device,) = read(described(**{f"farthest_{unit}": "120", f"nearest_{unit}": "1.5"}))
    assert device.farthest == pytest.approx(120 * metres, rel=1e-15)
    assert device.nearest == pytest.approx(1.5 * metres, rel=1e-15)


def test_a_density_to_the_foot(read):
    # 76.2 px over a foot of 0.3048 m are 250 over a metre.
    (device,) = read(described(pixels_across="1920", density_px_per_ft="76.2"))
    assert device.density == pytest.approx(250, rel=1e-12)


def test_a_density_by_level(read):
    level = '"IEC 62676-4:2014 identify"'
    assert read(described(pixels_across="1920", density_level=level))[0].density == 250


def test_fields_by_sensor_and_lens(read):
    lens = {
        "horizontal_field_deg": None,
        "sensor_width_mm": "8",
        "sensor_height_mm": "6",
        "focal_length_mm": "3",
    }
    (device,) = read(described(**lens, height_m="3"))
    # tan of half the vertical field is 3/3.
    assert device.vertical_field == pytest.approx(pi / 2, rel=1e-12)
    (device,) = read(described(**lens, height_m="3", projection='"equidistant"'))
    assert (device.horizontal_field, device.vertical_field) == pytest.approx((8 / 3, 2), rel=1e-12)


def test_one_field_by_the_lens_and_one_as_it_is(read):
    (device,) = read(described(sensor_height_mm="6", focal_length_mm="3", height_m="3"))
    assert (device.horizontal_field, device.vertical_field) == pytest.approx((pi / 2, pi / 2))


lengths = st.floats(1e-6, 1e6)


@given(
    st.builds(
        Device,
        name=st.text(st.characters(codec="ascii", categories=("L", "N")), min_size=1),
        kind=st.sampled_from(["camera", "motion", "line of sight"]),
        fixings=st.lists(st.sampled_from(FIXINGS), min_size=1, unique=True).map(tuple),
        horizontal_field=st.floats(0.1, 3.1),
        tilt=st.floats(-1.5, 1.5),
        height=st.none() | lengths,
        farthest=st.just(inf) | st.floats(1e3, 1e6),
        pixels_across=st.none() | st.integers(10**4, 10**6),
        projection=st.sampled_from(PROJECTIONS),
        grazing=st.floats(0, 1.5),
        stand_off=lengths,
        placing_error=lengths,
        cost=st.none() | lengths,
    ),
    st.sampled_from([("m", 1), ("mm", 0.001), ("ft", 0.3048), ("in", 0.0254)]),
)
def test_what_is_written_is_what_is_read(tmp_path_factory, device, unit):
    ending, metres = unit
    given_lengths = {
        "height": device.height,
        "farthest": None if device.farthest == inf else device.farthest,
        "stand_off": device.stand_off,
        "placing_error": device.placing_error,
    }
    plain = {"name": f'"{device.name}"', "kind": f'"{device.kind}"', "projection": f'"{device.projection}"'}
    text = described(
        **plain,
        fixed_to=str(list(device.fixings)),
        horizontal_field_deg=repr(degrees(device.horizontal_field)),
        tilt_deg=repr(degrees(device.tilt)),
        grazing_deg=repr(degrees(device.grazing)),
        pixels_across=device.pixels_across,
        cost=device.cost,
        **{f"{key}_{ending}": repr(size / metres) for key, size in given_lengths.items() if size is not None},
    )
    path = tmp_path_factory.getbasetemp() / "written.toml"
    path.write_text(text, encoding="utf-8")
    (read,) = read_devices(path)
    for key in Device.__dataclass_fields__:
        expected, found = getattr(device, key), getattr(read, key)
        assert found == (pytest.approx(expected, rel=1e-12) if isinstance(expected, float) else expected), key


@pytest.mark.parametrize(
    ("keys", "fault"),
    [
        ({"farthest_m": "-3"}, "device[1].farthest_m: got -3, expected a length above 0 m"),
        ({"farthest_ft": "0"}, "device[1].farthest_ft: got 0, expected a length above 0 ft"),
        ({"nearest_m": "-0.1"}, "device[1].nearest_m: got -0.1, expected a length of at least 0 m"),
        ({"farthest_m": '"9"'}, 'device[1].farthest_m: got "9", expected a length above 0 m'),
        ({"farthest_m": "true"}, "device[1].farthest_m: got true, expected a length above 0 m"),
        ({"farthest_m": "inf"}, "device[1].farthest_m: got inf, expected a length above 0 m"),
        ({"farthest_m": "nan"}, "device[1].farthest_m: got nan, expected a length above 0 m"),
        (
            {"farthest_m": "1e12"},
            "device[1].farthest_m: got 1000000000000.0, expected a size between 1e-09 and 1e+09",
        ),
        ({"farthest_m": "1979-05-27"}, "device[1].farthest_m: got 1979-05-27, expected a length above 0 m"),
        (
            {"horizontal_field_deg": "361"},
            "device[1].horizontal_field_deg: got 361, expected an angle above 0 and at most 360 deg",
        ),
        (
            {"vertical_field_deg": "0", "height_m": "2"},
            "device[1].vertical_field_deg: got 0, expected an angle above 0 and at most 180 deg",
        ),
        ({"tilt_deg": "91"}, "device[1].tilt_deg: got 91, expected an angle from -90 to 90 deg"),
        (
            {"grazing_deg": "90"},
            "device[1].grazing_deg: got 90, expected an angle of at least 0 and under 90 deg",
        ),
        ({"cost": "-1"}, "device[1].cost: got -1, expected a number of at least 0"),
        (
            {"density_px_per_ft": "0", "pixels_across": "9"},
            "device[1].density_px_per_ft: got 0, expected a density above 0 px/ft",
        ),
        (
            {"pixels_across": "1920.0"},
            "device[1].pixels_across: got 1920.0, expected a whole number from 1 to 1000000000",
        ),
        ({"name": '" "'}, 'device[1].name: got "", expected a text such as "Corner camera"'),
        ({"kind": "7"}, 'device[1].kind: got 7, expected a text such as "camera"'),
        (
            {"projection": '"flat"'},
            'device[1].projection: got "flat", expected one of "pinhole", "equidistant"',
        ),
        (
            {"fixed_to": '"wall"'},
            'device[1].fixed_to: got "wall", expected a list of one or more of "ceiling", "wall", "corner", "floor"',
        ),
        (
            {"fixed_to": '["wall", "roof"]'},
            'device[1].fixed_to: got "roof" in it, expected a list of one or more of '
            '"ceiling", "wall", "corner", "floor"',
        ),
        ({"fixed_to": '["wall", "Wall"]'}, "device[1].fixed_to: names a word twice; once is enough"),
        (
            {"clearance": "0.5"},
            "device[1].clearance: got 0.5, expected a table of its own, [device.clearance]",
        ),
        (
            {"density_level": '"identify"', "pixels_across": "1920"},
            'device[1].density_level: got "identify", expected an edition and a level: IEC 62676-4:2014 monitor, '
            "detect, observe, recognise, identify, inspect; IEC 62676-4:2025 20, 40, 80, 125, 250, 500, 1500",
        ),
        ({"name": None}, 'device[1].name: missing; expected for example name = "Corner camera"'),
        (
            {"fixed_to": None},
            'device[1].fixed_to: missing; expected for example fixed_to = ["corner", "wall"]',
        ),
        (
            {"horizontal_field_deg": None},
            "device[1].horizontal_field_deg: missing; give it, or sensor_width_mm with focal_length_mm",
        ),
        ({"height_m": "2", "height_ft": "7"}, "device[1].height_ft: given beside height_m; keep one of them"),
        (
            {"sensor_width_mm": "5", "focal_length_mm": "3"},
            "device[1].sensor_width_mm: given beside horizontal_field_deg; keep one of them",
        ),
        (
            {"horizontal_field_deg": None, "sensor_width_mm": "5"},
            "device[1].focal_length_mm: missing; sensor_width_mm says nothing without it",
        ),
        (
            {"focal_length_mm": "3"},
            "device[1].focal_length_mm: says nothing without sensor_width_mm or sensor_height_mm",
        ),
        (
            {
                "horizontal_field_deg": None,
                "sensor_width_mm": "20",
                "focal_length_mm": "3",
                "projection": '"equidistant"',
            },
            "device[1].sensor_width_mm: makes a field of 382.0 deg with focal_length_mm, expected an angle above "
            "0 and at most 360 deg",
        ),
        (
            {"density_px_per_m": "250", "density_level": '"IEC 62676-4:2025 250"', "pixels_across": "1920"},
            "device[1].density_level: given beside density_px_per_m; keep one of them",
        ),
        (
            {"density_px_per_m": "250"},
            "device[1].pixels_across: missing; density_px_per_m says nothing without it",
        ),
        (
            {"horizontal_field_deg": "180", "pixels_across": "1920", "density_px_per_m": "50"},
            "device[1].horizontal_field_deg: got 180 deg with pixels_across, expected under 180 deg, as a pinhole's "
            'picture is; if it is a fisheye, add projection = "equidistant"',
        ),
        (
            {"vertical_field_deg": "50"},
            "device[1].height_m: missing; what a vertical field sees depends on it",
        ),
        (
            {"target_height_in": "60", "height_m": "3"},
            "device[1].target_height_in: says nothing without vertical_field_deg and height_m",
        ),
        (
            {"vertical_field_deg": "50", "tilt_deg": "-30", "height_m": "3", "target_height_m": "0"},
            "device[1].tilt_deg: with this tilt and vertical field, nothing at target_height_m is ever in view",
        ),
        (
            {"nearest_m": "5", "farthest_ft": "10"},
            "device[1].nearest_m: starts at 5.00 m, where farthest_ft has ended at 3.05 m: no distance is left",
        ),
        (
            {"nearest_m": "5", "farthest_mm": "5000"},
            "device[1].nearest_m: starts at 5.00 m, where farthest_mm has ended at 5.00 m: no distance is left",
        ),
        (
            {"nearest_m": "5", "pixels_across": "1000", "density_px_per_m": "250"},
            "device[1].nearest_m: starts at 5.00 m, where density_px_per_m has ended at 2.00 m: no distance is left",
        ),
        (
            {"vertical_field_deg": "10", "height_m": "3", "farthest_m": "2", "target_height_m": "0"},
            "device[1].vertical_field_deg: starts at 34.29 m, where farthest_m has ended at 2.00 m: "
            "no distance is left",
        ),
        ({"height": "2.5"}, "device[1].height: unknown key; did you mean height_m?"),
        ({"Farthest_M": "2.5"}, "device[1].Farthest_M: unknown key; did you mean farthest_m?"),
        ({"fixedto": "1"}, "device[1].fixedto: unknown key; did you mean fixed_to?"),
        ({'"a b\\u001b"': "1"}, 'device[1]."a b": unknown key; the keys are name, kind, '),
    ],
)
def test_one_fault_one_line(faults, keys, fault):
    (line,) = faults(described(**keys))
    assert line == fault or (fault.endswith(", ") and line.startswith(fault))


@pytest.mark.parametrize(
    ("clearance", "fault"),
    [
        ("walls_m = -1", "walls_m: got -1, expected a length of at least 0 m"),
        ("wall_m = 1", "wall_m: unknown key; did you mean walls_m?"),
        ("obstacles = 1", "obstacles: unknown key; did you mean obstacles_m?"),
        (
            "obstacles_m = 1",
            "obstacles_m: got 1, expected a table of its own, [device.clearance.obstacles_m]",
        ),
        (
            'obstacles_ft = { "*AIR*" = "x" }',
            'obstacles_ft."*AIR*": got "x", expected a length of at least 0 ft',
        ),
        (
            'obstacles_m = { " " = 1 }',
            'obstacles_m."": an empty pattern fits nothing; name what to stay away from',
        ),
    ],
)
def test_one_fault_of_a_clearance(faults, clearance, fault):
    assert faults(described(clearance)) == [f"device[1].clearance.{fault}"]


def test_obstacles_in_two_units_are_joined(read):
    (device,) = read(described("obstacles_m = { a = 1 }\nobstacles_in = { b = 10 }"))
    assert device.clearances.obstacles == (("a", 1.0), ("b", 0.254))


def test_all_faults_of_all_devices_at_once(faults):
    text = (
        described(farthest_m="-3", kind=None)
        + described(name='"EYE"', tilt_deg="true")
        + described(name='"Third"')
    )
    assert faults(text) == [
        'device[1].kind: missing; expected for example kind = "camera"',
        "device[1].farthest_m: got -3, expected a length above 0 m",
        "device[2].tilt_deg: got true, expected an angle from -90 to 90 deg",
        'device[2].name: got "EYE", expected a name other than that of device[1]',
    ]


def test_a_rule_is_silent_on_values_that_are_wrong_themselves(faults):
    assert len(faults(described(nearest_m="5", farthest_m="-3"))) == 1
    assert len(faults(described(vertical_field_deg="50", height_m='"high"', tilt_deg="-30"))) == 1
    fisheye = {"horizontal_field_deg": "360", "pixels_across": "3000", "projection": '"fisheye"'}
    assert len(faults(described(**fisheye))) == 1
    assert len(faults(described(height="3", vertical_field_deg="50", tilt_deg="-30"))) == 2


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "the file is empty"),
        (" \n\n", "the file is empty"),
        ("# nothing but a remark\n", "no device; describe each in a table headed [[device]]"),
        ("name = 'Eye'\n", "name: unknown key; the keys are device"),
        (
            "[device]\nname = 'Eye'\n",
            "device: got a table, expected tables headed [[device]], one for each device",
        ),
        ("[[devices]]\nname = 'Eye'\n", "devices: unknown key; did you mean device?"),
        ("device = []\n", "device: got [], expected tables headed [[device]], one for each device"),
        ("device = [1]\n", "device[1]: got 1, expected a table headed [[device]]"),
        ("[[device]]\nname = Eye\n", "is not TOML: Invalid value (at line 2, column 8)"),
        (
            "[[device]]\nname = 'A'\nname = 'B'\n",
            "is not TOML: Cannot overwrite a value (at line 3, column 11)",
        ),
        (f"[[device]]\ncost = {'9' * 6000}\n", "is not TOML: Exceeds the limit"),
        ("x = " + "[" * 100_000, "is not a device file: lists within lists"),
    ],
)
def test_files_that_are_no_device_file(faults, text, words):
    (line,) = faults(text)
    assert line.startswith(words)


@pytest.mark.parametrize(("number", "shown"), [("9" * 400, "999"), ("0x" + "f" * 5000, "a huge number")])
def test_a_number_of_hundreds_of_digits(faults, number, shown):
    (line,) = faults(described(cost=number))
    assert line.startswith(f"device[1].cost: got {shown}")
    assert len(line) < 150


def test_keys_without_end_are_cut(faults):
    (line,) = faults(described(**{"k" * 5000: "1"}))
    assert len(line) < 800


@pytest.mark.parametrize(
    ("raw", "words"),
    [
        (
            "[[device]]\nname = 'Caf\xe9'\n".encode("latin-1"),
            "line 2 is not UTF-8 text; save the file as UTF-8",
        ),
        ("[[device]]".encode("utf-16"), "line 1 is not UTF-8 text"),
        (b"\x00" * 100, "is not TOML"),
        (b"#" * (LARGEST_FILE + 1), "over 250,000 bytes is no device file"),
    ],
)
def test_bytes_that_are_no_device_file(tmp_path, raw, words):
    (tmp_path / "d.toml").write_bytes(raw)
    with pytest.raises(InputError) as caught:
        read_devices(tmp_path / "d.toml")
    assert str(caught.value).startswith("d.toml: " + words)


def test_a_mark_of_byte_order_and_foreign_line_ends_are_no_fault(tmp_path):
    (tmp_path / "d.toml").write_bytes(b"\xef\xbb\xbf" + described().replace("\n", "\r\n").encode())
    assert read_devices(str(tmp_path / "d.toml"))[0].name == "Eye"


def test_a_missing_file_a_folder_and_a_strange_name(tmp_path):
    for path, words in [("gone.toml", "no such file"), (".", "folder"), ("a\0b.toml", "cannot be read")]:
        with pytest.raises(InputError, match=words):
            read_devices(tmp_path / path)


def test_an_unreadable_file(tmp_path, monkeypatch):
    def refuse(*_):
        raise PermissionError(13, "Permission denied")

    (tmp_path / "d.toml").write_text(described(), encoding="utf-8")
    monkeypatch.setattr(Path, "open", refuse)
    with pytest.raises(
        InputError, match=r"^d.toml: cannot be read \(Permission denied\); check its permissions$"
    ):
        read_devices(tmp_path / "d.toml")


def test_names_that_attack_are_one_printable_line(read):
    (device,) = read(described(name='"a\\u001b[31m\\u202eb\\nc"'))
    assert device.name == "a [31mb c"


values = st.one_of(
    st.integers(-(10**12), 10**12),
    st.floats(),
    st.sampled_from([0, 1, 90, 180, 360, 1e-9, 1e9, 5e-324]),
    st.booleans(),
    st.sampled_from(
        ['"pinhole"', '"equidistant"', '["wall"]', "[]", "{}", "{ a = 1 }", '"IEC 62676-4:2025 80"']
    ),
)


@given(
    st.dictionaries(st.sampled_from([*DEVICE_KEYS, "x"]), values, max_size=12),
    st.dictionaries(st.sampled_from(CLEARANCE_KEYS), values),
)
def test_whatever_stands_in_it_is_read_or_refused(tmp_path_factory, keys, clearances):
    """No values make it fail in any other way, and what is read can be asked for anything."""
    plain = {key: str(value).lower() if isinstance(value, bool) else value for key, value in keys.items()}
    plain.pop("clearance", None)
    inner = "\n".join(
        f"{key} = {str(value).lower() if isinstance(value, bool) else value}"
        for key, value in clearances.items()
    )
    text = described(inner, **plain)
    tomllib.loads(text)
    path = tmp_path_factory.getbasetemp() / "any.toml"
    path.write_text(text, encoding="utf-8")
    try:
        (device,) = read_devices(path)
    except InputError as error:
        assert_lines(error)
        return
    near, far = device.target_seen
    assert near < far
    assert device.density_range > device.nearest
    assert device.floor_seen[0] >= 0
    assert (device.density_at(1.0) is None) == (device.pixels_across is None)
