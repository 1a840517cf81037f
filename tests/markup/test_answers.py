"""Whole answers on the sheets and in the mark-up: small features, best points tried, devices, cautions."""

import io
from dataclasses import replace
from itertools import combinations
from math import pi

import ezdxf
import numpy as np
import pytest
from markup.cases import floor, plan_of, room

from kernelscan.coverage import RoomAnswer, room_answer
from kernelscan.coverage.cautions import CAUTIONS, cautions_for
from kernelscan.markup.dxf import zones_dxf
from kernelscan.markup.room_sheets import compose_room_sheets
from kernelscan.markup.scene import Scene, Stroke, Text
from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
from kernelscan.markup.shown import hatched_device, shown
from kernelscan.markup.style import AIM_PEN, FEATURE_EDGE_PEN, HIDDEN_PEN, MARKS
from kernelscan.plan import Device

SQUARE = [(0, 0), (6, 0), (6, 5), (0, 5)]
PILASTER = [(0, 0), (6, 0), (6, 5), (3.4, 5), (3.4, 4.8), (3, 4.8), (3, 5), (0, 5)]
COLUMN = [(2.8, 1.8), (2.8, 2.2), (3.2, 2.2), (3.2, 1.8)]

CEILING = Device("Dome", "camera", ("ceiling",), 2 * pi, cost=300.0)
NOOK = Device("Corner eye", "motion", ("corner", "wall"), pi / 2, 1.0, 0.4, 2.4, farthest=12.0, cost=100.0)
STAND = Device("Tripod", "scanner", ("floor",), 2 * pi, farthest=30.0)
NARROW = Device("Slit", "camera", ("wall",), pi / 3, pixels_across=2000, density=50.0)
SHORT = Device("Short", "flame", ("ceiling",), 2 * pi, farthest=1.0)


def square(*devices: Device) -> RoomAnswer:
    return room_answer(room(1, "Office", SQUARE), devices)


def pilaster(depth: float, *devices: Device) -> RoomAnswer:
    return room_answer(room(2, "Store", PILASTER, shift=(8, 0)), devices, ignore_depth=depth)


def words(sheets: tuple[Scene, ...]) -> str:
    return " ".join(text.string for sheet in sheets for text in sheet.texts())


def sheets_of(*answers: RoomAnswer, unit: str = "mm", **options: str) -> tuple[Scene, ...]:
    return compose_zone_sheets(plan_of(answers, unit), answers, SheetOptions(**options))


def model_of(*answers: RoomAnswer):
    drawing = ezdxf.read(io.StringIO(zones_dxf(plan_of(answers), answers)))
    audit = drawing.audit()
    assert not audit.errors
    assert not audit.fixes
    return drawing.modelspace()


def closed_lines(sheet: Scene, group: str, pen: object) -> list[np.ndarray]:
    items = sheet.group(group).items
    return [
        np.array(item.points)
        for item in items
        if isinstance(item, Stroke) and item.closed and item.pen == pen
    ]


def test_a_pilaster_left_out_is_drawn_listed_and_said_plainly() -> None:
    (sheet,) = sheets_of(pilaster(0.3), paper="A3", scale="1:100")
    (ring,) = closed_lines(sheet, "features", FEATURE_EDGE_PEN)
    assert np.ptp(ring, axis=0) == pytest.approx([4.0, 2.0])  # 0.40 m by 0.20 m at 1:100
    told = words((sheet,))
    assert "F1: pilaster, 0.40 m wide, 0.20 m deep." in told
    assert "exact: no single point" in told
    assert "without F: whole room" in told
    assert "Small features up to 300 mm left out: 1 of them." in told
    assert "C misses" in told


def test_the_zones_with_a_feature_left_out_are_those_of_the_simplified_room() -> None:
    answer = pilaster(0.3)
    assert shown(answer).basis is answer.tolerant.zones
    assert shown(answer).conflict == ()
    assert shown(pilaster(0.1)).conflict != ()


def test_a_room_without_features_is_shown_as_ever() -> None:
    answer = room_answer(room(1, "Office", SQUARE), ignore_depth=0.3)
    assert shown(answer).features == ()
    assert "without F" not in words(sheets_of(answer))


def test_the_best_point_tried_is_marked_and_so_is_the_floor_it_misses() -> None:
    answer = room_answer(room(1, "Store", SQUARE, [COLUMN]))
    (sheet,) = sheets_of(answer, paper="A3", scale="1:50")
    assert len(closed_lines(sheet, "hidden", HIDDEN_PEN)) == len(answer.reasons.hidden.patches) > 0
    told = words((sheet,))
    assert "T at x" in told
    assert "points tried, misses" in told
    assert "optim" not in told
    assert all(sentence in told for sentence in answer.reasons.because)


def test_each_device_has_its_mark_its_row_and_its_line_in_the_legend() -> None:
    (sheet, *_) = sheets = sheets_of(square(CEILING, NOOK, STAND))
    told = words(sheets)
    assert "Schedule of devices" in told
    assert "Corner eye (motion), field 90° by 58°, 2.40 m high, tilt 23°, range 12.00 m" in told
    assert {"D1", "D2", "D3"} <= {
        text.string.split(",")[0] for text in sheet.group("tags").items if hasattr(text, "string")
    }
    assert "Corner eye (cheapest): on the" in told


def test_devices_at_one_point_share_a_mark() -> None:
    spots = shown(square(CEILING, replace(CEILING, name="Other"), NOOK)).spots
    assert [(spot.tag, spot.devices) for spot in spots] == [("D1, D2", (0, 1)), ("D3", (2,))]


def test_the_zones_hatched_are_those_of_the_cheapest_device_that_covers_the_room() -> None:
    answer = square(CEILING, NOOK)
    assert hatched_device(answer.devices) is answer.devices[1]
    assert shown(answer).areas == ()
    assert len(shown(answer).nooks) == 4
    unpriced = square(replace(CEILING, cost=None), replace(NOOK, cost=None))
    assert hatched_device(unpriced.devices) is unpriced.devices[0]


def test_a_stand_has_a_hatch_of_its_own() -> None:
    looks = {(mark.angle, mark.spacing) for mark in MARKS.values()}
    assert len(looks) == len(MARKS) == len({mark.letter for mark in MARKS.values()})
    (area,) = shown(square(STAND)).areas
    assert area.fixing == "floor"


def test_where_no_device_covers_a_room_the_best_partial_point_is_marked_and_the_rest_said() -> None:
    answer = square(NARROW, SHORT)
    (spot,) = shown(answer).spots
    assert spot.is_partial
    best = max(each.partial[0].aim.floor for each in answer.devices if each.partial)
    assert spot.tag.endswith(f" {100 * best:.0f} %")
    told = words(sheets_of(answer))
    assert "no device covers it" in told
    assert "Slit: its field is too narrow" in told
    assert "does not reach far enough" in told
    point = next(each.partial[0].point for each in answer.devices if each.partial)
    assert f"(x {point[0]:.3f}, y {point[1]:.3f}, aim " in told


def test_the_mark_up_has_devices_with_attributes_on_their_own_layer() -> None:
    model = model_of(square(CEILING, NOOK))
    inserts = list(model.query('INSERT[layer=="A-KSCN-DEVC"]'))
    found = {insert.get_attrib_text("TAG"): insert for insert in inserts}
    assert set(found) == {"D1", "D2"}
    nook = found["D2"]
    assert nook.dxf.name == "KSCN-DEVICE-CORNER-090"
    assert nook.get_attrib_text("DEVICE") == "Corner eye"
    assert nook.get_attrib_text("HEIGHT") == "2.40 m"
    assert "wall" in nook.get_attrib_text("SETOUT")
    assert len(model.query('LINE[layer=="A-KSCN-DEVC"]')) == 1


def test_the_mark_up_has_features_and_best_points_tried_on_their_own_layers() -> None:
    assert len(model_of(pilaster(0.3)).query('LWPOLYLINE[layer=="A-KSCN-FEAT"]')) == 1
    (tried,) = model_of(pilaster(0.0)).query('INSERT[layer=="A-KSCN-HIDN"]')
    assert "points tried" in tried.get_attrib_text("REMARK")


@pytest.mark.parametrize("unit", ["mm", "in"])
def test_every_room_and_device_is_told_on_room_sheets(unit: str) -> None:
    answers = [square(CEILING, NOOK, STAND, NARROW), pilaster(0.3, CEILING, NOOK, STAND, NARROW)]
    told = words(compose_room_sheets(plan_of(answers, unit), answers))
    assert all(
        told.count(f"{name}: ") + told.count(f"{name} (cheapest): ") >= 2 for name in ("Dome", "Corner eye")
    )


def room_sheet_of(*devices: Device) -> Scene:
    answers = [square(*devices)]
    return compose_room_sheets(plan_of(answers), answers, SheetOptions(paper="A3"))[0]


def test_the_aim_is_an_arc_from_the_wall_with_its_angle() -> None:
    strings = [
        item.string for item in room_sheet_of(NOOK).group("setting-out").items if isinstance(item, Text)
    ]
    assert strings == ["45°"]
    narrow = square(NARROW)
    aim, bearing = narrow.devices[0].partial[0].aim.bearing, shown(narrow).spots[0].bearing
    turned = abs((aim - (bearing - pi / 2) + pi) % (2 * pi) - pi)
    told = [
        item.string for item in room_sheet_of(NARROW).group("setting-out").items if isinstance(item, Text)
    ]
    assert f"{np.degrees(turned):.0f}°" in told


def test_a_device_that_sees_all_round_has_no_arc() -> None:
    told = [
        item.string for item in room_sheet_of(CEILING).group("setting-out").items if isinstance(item, Text)
    ]
    assert not any("°" in string for string in told)


def test_height_and_tilt_are_in_a_tag_with_a_section() -> None:
    tags = room_sheet_of(NOOK).group("tags").items
    assert {"2.40 m high", "tilt 23°"} <= {item.string for item in tags if isinstance(item, Text)}
    (axis,) = [item for item in tags if isinstance(item, Stroke) and item.pen == AIM_PEN]
    (x0, y0), (x1, y1) = axis.points
    assert np.arctan2(y0 - y1, x1 - x0) == pytest.approx(NOOK.tilt)
    assert not any(
        "tilt" in item.string for item in room_sheet_of(CEILING).group("tags").items if isinstance(item, Text)
    )


def test_nothing_of_the_table_reaches_beyond_the_frame() -> None:
    answers = [square(CEILING, NOOK, STAND, NARROW, SHORT)]
    for paper in ("A4", "A3", "letter"):
        for sheet in (*sheets_of(*answers, paper=paper), *compose_room_sheets(plan_of(answers), answers)):
            for item in sheet.group("schedule").items if "schedule" in {g.name for g in sheet.groups} else ():
                points = item.points if isinstance(item, Stroke) else item.corners
                assert max(x for x, _ in points) <= sheet.width - 10 + 1e-6


def test_more_devices_than_the_legend_lists_are_counted() -> None:
    told = words(sheets_of(square(*(replace(CEILING, name=f"Eye {i}") for i in range(1, 16)))))
    assert "and 3 more: see the schedule" in told
    assert "Eye 15" in told


def test_a_thousand_rooms_with_devices_are_all_in_the_schedule() -> None:
    one = square(CEILING, NOOK)
    answers = []
    for plain in floor(1000, 40):
        moved = replace(one.zones, room=replace(one.room, id=plain.room.id, outline=plain.room.outline))
        answers.append(replace(one, zones=moved))
    told = words(compose_zone_sheets(plan_of(answers), answers))
    assert all(f" {answer.room.id} " in told for answer in answers)


@pytest.mark.parametrize(
    ("kinds", "wanted"),
    [
        ([], "Cameras"),
        (["Dome camera"], "Cameras"),
        (["presence"], "Motion"),
        (["FLAME detector"], "Fire"),
        (["laser scanner"], "Scanners"),
    ],
)
def test_cautions_go_by_the_kinds_of_device(kinds: list[str], wanted: str) -> None:
    given = cautions_for(kinds)
    special = [text for text in CAUTIONS if text.startswith(("Cameras", "Motion", "Fire", "Scanners"))]
    assert [text for text in given if text in special] == [
        text for text in special if text.startswith(wanted)
    ]
    assert [text for text in CAUTIONS if text not in special] == [
        text for text in given if text not in special
    ]


def test_all_cautions_together_keep_their_order() -> None:
    assert cautions_for(["camera", "motion", "heat", "scanner"]) == CAUTIONS


def test_an_unknown_kind_brings_no_caution_but_those_for_everybody() -> None:
    assert len(cautions_for(["beam"])) == 4


def test_the_sheets_carry_the_cautions_of_their_devices() -> None:
    assert "Scanners" in words(sheets_of(square(STAND)))
    assert "Cameras" not in words(sheets_of(square(STAND)))
    assert "Cameras" in words(sheets_of(square()))


@pytest.mark.parametrize("devices", [(), (CEILING, NOOK, STAND, NARROW)], ids=["none", "four"])
def test_no_two_texts_touch(devices: tuple[Device, ...]) -> None:
    column = room_answer(room(3, "Cellar", SQUARE, [COLUMN], (16, 0)), devices, ignore_depth=0.3)
    answers = [square(*devices), pilaster(0.3, *devices), column]
    for sheet in (*sheets_of(*answers), *compose_room_sheets(plan_of(answers), answers)):
        for a, b in combinations(sheet.texts(), 2):
            assert not a.box.grown(-0.1).overlaps(b.box.grown(-0.1)), (a.string, b.string)
