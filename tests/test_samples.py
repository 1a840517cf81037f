"""The sample plans: the committed files are what the script draws, and their rooms are what their sizes say."""

import os
import subprocess
import sys
from collections.abc import Iterator
from itertools import pairwise
from math import atan, pi, sin, sqrt, tan
from pathlib import Path

import ezdxf
import numpy as np
import pytest
from ezdxf.disassemble import recursive_decompose
from ezdxf.math import Vec2

from kernelscan import Plan, Room, read_plan, verify_kernel, visibility_kernel
from kernelscan.coverage import room_answer, room_zones

NAMES = (
    "annex-feet-and-inches",
    "library-wing",
    "mezzanine",
    "pavilion-on-survey-grid",
    "small-features",
    "studios-in-blocks",
    "workshop-ground-floor",
)
IDENTITY = {"5", "105", "330", "331", "340", "350", "360", "390"}
"""Group codes of handles: which object a thing is, not what is drawn."""

SQUARE_INCH = 0.0254**2

# By hand from the coordinates in the script, in square metres: room, area, kind of kernel, area of the kernel.
STRAIGHT = {
    "workshop-ground-floor": [
        ("Reading room", 8 * 5 + 3 * 7, "area", 3 * 5),
        ("Workshop", 9.8 * 5 + 3.8 * 3, "area", 3.8 * 5),
        ("Entrance hall", 7.8 * 2.8 + 2.4 * 4, "area", 2.4 * 2.8),
        ("Office", 5.2 * 3.8 + 1.2 * 0.15, "area", 1.2 * 3.8),
        ("Materials store", 3.8**2 - 0.4**2, "empty", 0),
        ("Plant room", 2.8**2, "area", 2.8**2),
        ("Tool store", 2.8 * 3.8 - 0.4 * 0.15, "empty", 0),
    ],
    "library-wing": [
        ("Gallery", 12 * 3.2 + 2 * 3.7 * 4.8, "empty", 0),
        ("Archive", 6 * 4 - 0.4**2, "area", 5.6 * 3.6),
        ("Study", 5.8 * 4 + (1.8 + 1.5) / 2 * 0.15, "area", 5.8 * 4 - 2 * (2 * 2 / 2)),
    ],
    "annex-feet-and-inches": [
        ("Wood shop", (288 * 144 + 144 * 176) * SQUARE_INCH, "area", 144 * 144 * SQUARE_INCH),
        ("Finishing room", (84 * 128 + 87 * 320) * SQUARE_INCH, "area", 87 * 128 * SQUARE_INCH),
        ("Glue-up room", 139 * 171 * SQUARE_INCH, "area", 139 * 171 * SQUARE_INCH),
        ("Tool crib", 79 * 91 * SQUARE_INCH, "area", 79 * 91 * SQUARE_INCH),
        ("Timber rack", 79 * 91 * SQUARE_INCH, "area", 79 * 91 * SQUARE_INCH),
    ],
    "studios-in-blocks": [(f"Studio {n}", 4.8 * 6 - 1.2 * 1.8, "area", 3.6 * 4.2) for n in range(1, 7)],
    "mezzanine": [("Crossing", 16 + 4 * 4, "point", 0), ("Landing", 2 * 16, "segment", 0)],
    "pavilion-on-survey-grid": [("Garden room", 44, "area", 36)],
    "small-features": [
        ("Pilaster", 24 - 0.4 * 0.2, "empty", 0),
        ("Window reveal", 24 + 1.8 * 0.15, "area", 1.8 * 4),
        ("Skirting jog", 24 - 3 * 0.02, "area", 3 * 3.98),
        ("Chamfer", 24 - 0.3**2 / 2, "area", 24 - 0.3**2 / 2),
        ("Column", 24 - 0.3**2, "empty", 0),
    ],
}

# The true arcs, by hand: area of the segment of a circle of radius r and angle a is r^2 (a - sin a) / 2.
BAY_ANGLE, DIP_ANGLE = 4 * atan(0.5), 4 * atan(0.25)
BAY = 1.875**2 / 2 * (BAY_ANGLE - sin(BAY_ANGLE))
DIP = 4.25**2 / 2 * (DIP_ANGLE - sin(DIP_ANGLE))
CURVED = [
    ("library-wing", "Reading bay", 29 + BAY),
    ("library-wing", "Quiet room", 5.8 * 2.8 - DIP),
    ("library-wing", "Map room", 5.8 * 4 - pi * 0.25**2),
    ("pavilion-on-survey-grid", "Drum", 9 * pi),
    ("pavilion-on-survey-grid", "Oval", 11 * pi),
]


def drawn_tags(path: Path) -> list[tuple[str, str]]:
    """Return the group codes and values of the layers, blocks and entities of a DXF text, handles left out."""
    lines = path.read_text(encoding="utf-8").splitlines()
    tags = [(code.strip(), value.strip()) for code, value in zip(lines[::2], lines[1::2], strict=True)]
    return [*_layers(tags), *_section(tags, "BLOCKS"), *_section(tags, "ENTITIES")]


def _section(tags: list[tuple[str, str]], name: str) -> Iterator[tuple[str, str]]:
    inside = False
    for before, tag in pairwise(tags):
        inside = (inside or (before == ("0", "SECTION") and tag == ("2", name))) and tag != ("0", "ENDSEC")
        if inside and tag[0] not in IDENTITY:
            yield tag


def _layers(tags: list[tuple[str, str]]) -> Iterator[tuple[str, str]]:
    inside = False
    for tag in _section(tags, "TABLES"):
        inside = tag == ("0", "LAYER") if tag[0] == "0" else inside
        if inside:
            yield tag


def same_tag(one: tuple[str, str], other: tuple[str, str]) -> bool:
    """Whether two tags say the same: numbers to 1e-9, for the last digit of a sine may differ between systems."""
    if one == other:
        return True
    try:
        return one[0] == other[0] and abs(float(one[1]) - float(other[1])) <= 1e-9 * max(
            1, abs(float(one[1]))
        )
    except ValueError:
        return False


@pytest.fixture(scope="module")
def drawn_twice(sample_plans: Path, tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, Path]:
    folders = (tmp_path_factory.mktemp("first"), tmp_path_factory.mktemp("second"))
    for seed, folder in zip(("4", "5"), folders, strict=True):
        command = [sys.executable, str(sample_plans / "make_samples.py"), str(folder)]
        subprocess.run(command, check=True, env={**os.environ, "PYTHONHASHSEED": seed})
    return folders


@pytest.fixture(scope="module")
def plans(sample_plans: Path) -> dict[str, Plan]:
    return {name: read_plan(sample_plans / f"{name}.dxf") for name in NAMES}


def room_named(plan: Plan, name: str) -> Room:
    (room,) = [room for room in plan.rooms if room.name == name]
    return room


@pytest.mark.parametrize("name", NAMES)
def test_script_draws_the_same_bytes_every_time(name: str, drawn_twice: tuple[Path, Path]) -> None:
    first, second = ((folder / f"{name}.dxf").read_bytes() for folder in drawn_twice)
    assert first == second


@pytest.mark.parametrize("name", NAMES)
def test_committed_files_are_what_the_script_draws(
    name: str, sample_plans: Path, drawn_twice: tuple[Path, Path]
) -> None:
    committed, drawn = drawn_tags(sample_plans / f"{name}.dxf"), drawn_tags(drawn_twice[0] / f"{name}.dxf")
    assert len(committed) == len(drawn)
    assert [pair for pair in zip(committed, drawn, strict=True) if not same_tag(*pair)] == []


def test_comparison_of_drawings_can_fail(sample_plans: Path, tmp_path: Path) -> None:
    text = (sample_plans / "annex-feet-and-inches.dxf").read_text(encoding="utf-8")
    changed = tmp_path / "annex-feet-and-inches.dxf"
    changed.write_text(text.replace("\n296.0\n", "\n297.0\n", 1), encoding="utf-8")
    pairs = zip(drawn_tags(sample_plans / "annex-feet-and-inches.dxf"), drawn_tags(changed), strict=True)
    assert len([pair for pair in pairs if not same_tag(*pair)]) == 1


def test_no_drawing_is_left_over(sample_plans: Path, drawn_twice: tuple[Path, Path]) -> None:
    committed = {path.name for path in sample_plans.glob("*.dxf")}
    assert committed == {path.name for path in drawn_twice[0].iterdir()} == {f"{name}.dxf" for name in NAMES}


@pytest.mark.parametrize("name", NAMES)
def test_every_drawing_is_described(name: str, sample_plans: Path) -> None:
    assert f"| `{name}.dxf` |" in (sample_plans / "README.md").read_text(encoding="utf-8")


@pytest.mark.parametrize(
    ("name", "unit", "count"),
    [
        ("annex-feet-and-inches", "in", 5),
        ("library-wing", "m", 6),
        ("mezzanine", "m", 3),
        ("pavilion-on-survey-grid", "m", 4),
        ("studios-in-blocks", "cm", 6),
        ("workshop-ground-floor", "mm", 7),
    ],
)
def test_units_and_number_of_rooms(name: str, unit: str, count: int, plans: dict[str, Plan]) -> None:
    plan = plans[name]
    assert (plan.unit.name, plan.unit_from, len(plan.rooms)) == (unit, "header", count)


@pytest.mark.parametrize(
    ("sample", "name", "area", "kind", "kernel_area"),
    [(sample, *row) for sample, rows in STRAIGHT.items() for row in rows],
)
def test_rooms_with_straight_walls(
    sample: str, name: str, area: float, kind: str, kernel_area: float, plans: dict[str, Plan]
) -> None:
    room = room_named(plans[sample], name)
    kernel = visibility_kernel(room.outline, room.holes)
    # Doubles 5.4e6 m away are 1e-9 m apart, so that the pavilion's area is good to some 1e-8.
    tolerance = 1e-7 if sample == "pavilion-on-survey-grid" else 1e-9
    assert room.area == pytest.approx(area, abs=tolerance)
    assert (kernel.kind, kernel.area) == (kind, pytest.approx(kernel_area, abs=tolerance))


@pytest.mark.parametrize(("sample", "name", "area"), CURVED)
def test_areas_of_rooms_with_curved_walls(
    sample: str, name: str, area: float, plans: dict[str, Plan]
) -> None:
    # Chords within 1 mm of walls of at most 22 m leave out, or add, less than 0.022 m2.
    assert room_named(plans[sample], name).area == pytest.approx(area, abs=0.022)


@pytest.mark.parametrize("name", ["Drum", "Oval"])
def test_round_rooms_are_seen_whole_from_everywhere(name: str, plans: dict[str, Plan]) -> None:
    room = room_named(plans["pavilion-on-survey-grid"], name)
    assert visibility_kernel(room.outline).area == pytest.approx(room.area, abs=1e-7)


def test_kernel_beside_a_bay(plans: dict[str, Plan]) -> None:
    room = room_named(plans["library-wing"], "Reading bay")
    chords = len(room.outline) - 5
    # The last chord leans from the bay's opening by half the arc's angle, less half a chord's; drawn on, it cuts a
    # triangle off either corner, whose legs are the 1 m of straight wall and 1 m times the tangent.
    lean = BAY_ANGLE / 2 * (1 - 1 / chords)
    assert visibility_kernel(room.outline).area == pytest.approx(29 - tan(lean), abs=1e-9)
    assert tan(BAY_ANGLE / 2) == pytest.approx(4 / 3)


def test_kernel_under_a_wall_that_curves_inward(plans: dict[str, Plan]) -> None:
    room = room_named(plans["library-wing"], "Quiet room")
    chords = len(room.outline) - 5
    # Both last chords, drawn on, meet 2 m from either end of the arc and reach the side walls 4.9 m from their own.
    slope = tan(DIP_ANGLE / 2 * (1 - 1 / chords))
    ridge, eaves = 2.8 - 2 * slope, 2.8 - 4.9 * slope
    assert visibility_kernel(room.outline).area == pytest.approx(5.8 * (ridge + eaves) / 2, abs=1e-9)


def test_round_column_leaves_no_point(plans: dict[str, Plan]) -> None:
    room = room_named(plans["library-wing"], "Map room")
    assert visibility_kernel(room.outline, room.holes).kind == "empty"


# By hand from the lists in the script: each room's doors and windows. Both rooms beside a wall have its door.
OPENINGS = {
    "workshop-ground-floor": {
        "Reading room": (1, 4), "Workshop": (4, 2), "Entrance hall": (4, 0), "Office": (1, 1),
        "Materials store": (2, 0), "Plant room": (1, 0), "Tool store": (1, 0),
    },
    "library-wing": {
        "Gallery": (5, 3), "Archive": (1, 1), "Study": (1, 0), "Map room": (1, 1), "Reading bay": (2, 0),
        "Quiet room": (1, 0),
    },
    "annex-feet-and-inches": {
        "Wood shop": (3, 2), "Finishing room": (3, 1), "Glue-up room": (1, 1), "Tool crib": (1, 0),
        "Timber rack": (1, 0),
    },
    "studios-in-blocks": {f"Studio {n}": (1, 2) for n in range(1, 7)},
    "mezzanine": {"Crossing": (2, 2), "Landing": (2, 2), "Room 3": (1, 0)},
    "pavilion-on-survey-grid": {"Garden room": (1, 1), "Grotto Room": (0, 0)},
    "small-features": {
        "Pilaster": (1, 0), "Window reveal": (1, 1), "Skirting jog": (1, 0), "Chamfer": (1, 0), "Column": (1, 0),
    },
}  # fmt: skip


@pytest.mark.parametrize("name", NAMES)
def test_rooms_have_the_doors_and_windows_drawn_in_their_walls(name: str, plans: dict[str, Plan]) -> None:
    kinds = {room.name: [opening.kind for opening in room.openings] for room in plans[name].rooms}
    found = {room: (kinds[room].count("door"), kinds[room].count("window")) for room in OPENINGS[name]}
    assert found == OPENINGS[name]
    assert {kind for each in kinds.values() for kind in each} <= {"door", "window"}


# The oval's end has the radius b^2 / a. The line's ends lie 0.02 m behind the wall and go to it along its normals,
# 0.005 m nearer to the axis; an arc of chord c and rise h is c (1 + 8 h^2 / 3 c^2) long.
OVAL_RISE = 0.435**2 / 2 / (2.75**2 / 4)
OVAL_DOOR = 0.87 * (1 + 8 / 3 * (OVAL_RISE / 0.87) ** 2)


@pytest.mark.parametrize(("name", "width"), [("Drum", 2 * 3 * atan(0.5 / 2.98)), ("Oval", OVAL_DOOR)])
def test_doors_in_round_walls_lie_on_several_of_their_chords(
    name: str, width: float, plans: dict[str, Plan]
) -> None:
    doors = room_named(plans["pavilion-on-survey-grid"], name).openings
    assert len(doors) > 5
    assert sum(door.width for door in doors) == pytest.approx(width, abs=0.003)


def glass_and_doors(path: Path, metres: float) -> np.ndarray:
    """Return what a device must not be fixed to, straight from the drawing: panes, door lines, leaves open and shut."""
    found = []
    for entity in recursive_decompose(ezdxf.readfile(path).modelspace()):
        layer, kind = entity.dxf.layer, entity.dxftype()
        if layer in {"A-GLAZ", "A-DOOR"} and kind == "LINE":
            found.append((Vec2(entity.dxf.start), Vec2(entity.dxf.end)))
        elif layer == "A-DOOR" and kind == "ARC":
            hinge = Vec2(entity.ocs().to_wcs(entity.dxf.center))
            found += [(hinge, Vec2(entity.start_point)), (hinge, Vec2(entity.end_point))]
    return np.array([[(p.x, p.y) for p in pair] for pair in found]) * metres


@pytest.mark.parametrize("name", NAMES)
def test_no_device_is_recommended_on_a_door_or_window(
    name: str, sample_plans: Path, plans: dict[str, Plan]
) -> None:
    plan = plans[name]
    lines = glass_and_doors(sample_plans / f"{name}.dxf", plan.unit.metres)
    spots = [spot for room in plan.rooms for spot in room_zones(room).recommended if spot.mount != "ceiling"]
    assert spots
    for spot in spots:
        assert not _in_front_of(spot.point, lines).any(), spot


@pytest.mark.parametrize("name", NAMES)
def test_no_wall_zone_runs_over_a_window(name: str, sample_plans: Path, plans: dict[str, Plan]) -> None:
    plan = plans[name]
    lines = glass_and_doors(sample_plans / f"{name}.dxf", plan.unit.metres)
    for room in plan.rooms:
        for zone in room_zones(room).walls:
            for start, end in pairwise(zone.path):
                way = (end - start) / np.hypot(*(end - start))
                along = (lines[:, 1] - lines[:, 0]) @ way
                parallel = np.abs(along) > 0.999 * np.hypot(*(lines[:, 1] - lines[:, 0]).T)
                for share in np.linspace(0.01, 0.99, 50):
                    assert not _in_front_of(start + share * (end - start), lines[parallel]).any()


def _in_front_of(point: np.ndarray, lines: np.ndarray) -> np.ndarray:
    """Whether a point lies between the ends of lines, no farther off than the samples' thickest wall, 0.3 m."""
    way = lines[:, 1] - lines[:, 0]
    length = np.hypot(*way.T)
    to = point - lines[:, 0]
    along = (to * way).sum(axis=1) / length
    apart = np.abs(to[:, 0] * way[:, 1] - to[:, 1] * way[:, 0]) / length
    return np.asarray((along > 1e-6) & (along < length - 1e-6) & (apart < 0.301))


def test_glass_in_front_of_a_point_is_noticed(sample_plans: Path) -> None:
    lines = glass_and_doors(sample_plans / "workshop-ground-floor.dxf", 0.001)
    assert _in_front_of(np.array([13.4, 0.3]), lines).any()
    assert _in_front_of(np.array([0.3, 2.8]), lines).any()
    assert not _in_front_of(np.array([11.7, 0.3]), lines).any()


@pytest.mark.parametrize("name", NAMES)
def test_every_kernel_passes_the_exact_checker(name: str, plans: dict[str, Plan]) -> None:
    for room in plans[name].rooms:
        verify_kernel(room.outline, visibility_kernel(room.outline, room.holes), room.holes)


def test_grotto_is_named_by_its_layer_and_seen_whole_from_a_part(plans: dict[str, Plan]) -> None:
    (grotto,) = [room for room in plans["pavilion-on-survey-grid"].rooms if room.name_from == "layer"]
    kernel = visibility_kernel(grotto.outline, grotto.holes)
    assert grotto.name == "Grotto Room"
    assert 0 < kernel.area < grotto.area


def test_landing_is_seen_whole_from_its_line_alone(plans: dict[str, Plan]) -> None:
    kernel = visibility_kernel(room_named(plans["mezzanine"], "Landing").outline)
    assert sorted(kernel.vertices.tolist()) == [[12.25, 4.0], [12.25, 6.0]]


def test_crossing_is_seen_whole_from_its_middle_alone(plans: dict[str, Plan]) -> None:
    kernel = visibility_kernel(room_named(plans["mezzanine"], "Crossing").outline)
    assert kernel.vertices.tolist() == [[4.0, 4.0]]


def test_store_that_nobody_named_goes_by_its_number(plans: dict[str, Plan]) -> None:
    (store,) = [room for room in plans["mezzanine"].rooms if room.name_from == "number"]
    assert store.area == pytest.approx(3.75**2, abs=1e-9)


def test_every_other_room_is_named_by_its_label(plans: dict[str, Plan]) -> None:
    unlabelled = {
        (name, room.name_from)
        for name, plan in plans.items()
        for room in plan.rooms
        if room.name_from != "label"
    }
    assert unlabelled == {("mezzanine", "number"), ("pavilion-on-survey-grid", "layer")}


@pytest.mark.parametrize(
    ("sample", "name", "corners"),
    [("workshop-ground-floor", "Materials store", 4), ("library-wing", "Map room", None)],
)
def test_columns_stand_in_their_rooms(
    sample: str, name: str, corners: int | None, plans: dict[str, Plan]
) -> None:
    (column,) = room_named(plans[sample], name).holes
    assert corners is None or len(column) == corners


def test_one_corner_camera_covers_the_plant_room_from_each_corner(plans: dict[str, Plan]) -> None:
    zones = room_zones(room_named(plans["workshop-ground-floor"], "Plant room"))
    assert [zone.spot.field_of_view for zone in zones.corners] == pytest.approx([pi / 2] * 4)
    assert zones.recommended[-1].mount == "corner"
    assert zones.recommended[-1].farthest == pytest.approx(2.8 * sqrt(2))


@pytest.mark.parametrize(
    ("sample", "name"), [("library-wing", "Gallery"), ("workshop-ground-floor", "Materials store")]
)
def test_nothing_covers_the_rooms_without_a_kernel(sample: str, name: str, plans: dict[str, Plan]) -> None:
    zones = room_zones(room_named(plans[sample], name))
    assert (zones.ceiling, zones.walls, zones.corners, zones.recommended) == (None, (), (), ())


def test_a_column_in_the_corner_is_no_obstacle_inside_the_room(plans: dict[str, Plan]) -> None:
    assert room_named(plans["library-wing"], "Archive").holes == ()


def test_outlines_on_the_layer_switched_off_are_noted(plans: dict[str, Plan]) -> None:
    assert [
        problem for problem in plans["workshop-ground-floor"].problems if "A-AREA-PREV" in problem.message
    ]


# By hand: 6 x 4 m without the feature; of the jog the longer part of the wall stays, and of equal ones the inner.
WITHOUT_FEATURES = {
    "Pilaster": ("area", 24),
    "Window reveal": ("area", 24),
    "Skirting jog": ("area", 6 * 3.98),
    "Chamfer": ("area", 24),
    "Column": ("empty", 0),
}


@pytest.mark.parametrize("name", WITHOUT_FEATURES)
def test_small_features_left_out(name: str, plans: dict[str, Plan]) -> None:
    """Exact and tolerant answers are those that an experienced fitter would expect; a column stays a column."""
    answer = room_answer(room_named(plans["small-features"], name), ignore_depth=0.25)
    assert answer.tolerant is not None
    kernel = answer.tolerant.zones.kernel
    assert (kernel.kind, kernel.area) == (WITHOUT_FEATURES[name][0], pytest.approx(WITHOUT_FEATURES[name][1]))
    assert len(answer.tolerant.simplified.features) == (0 if name == "Column" else 1)
    for hidden in answer.tolerant.hidden:
        assert hidden is not None
        assert hidden.floor_fraction > 0.95
