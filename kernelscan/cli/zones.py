"""``kernelscan zones``: each room's visibility kernel, and where one device may be mounted."""

import re
import sys
from collections.abc import Sequence
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from kernelscan.cli.drawing import read_drawing, wanted_spot, with_rooms
from kernelscan.cli.options import (
    DeviceFile,
    DrawingPath,
    ObstacleLayers,
    Quiet,
    RoomLayers,
    RoomNames,
    UnitChoice,
)
from kernelscan.cli.progress import with_progress
from kernelscan.cli.writing import write_folder

if TYPE_CHECKING:
    import numpy as np
    import numpy.typing as npt

    from kernelscan.coverage import RoomZones
    from kernelscan.coverage.device_spots import DeviceAnswer
    from kernelscan.plan import Device, Plan, Room

    Point = npt.NDArray[np.float64]
    Answer = tuple[RoomZones, tuple[DeviceAnswer, ...]]

__all__ = ["zones"]

SHEET_NAMES = re.compile(r"sheet-\d{2,}\.svg")


def zones(
    plan_file: DrawingPath,
    out: Annotated[Path, typer.Option("--out", metavar="FOLDER", help="Where the report and the sheets go.")],
    unit: UnitChoice = None,
    devices: DeviceFile = None,
    near: Annotated[
        str | None, typer.Option("--near", metavar="X,Y", help="Prefer spots near this point of the drawing.")
    ] = None,
    towards: Annotated[
        str | None,
        typer.Option("--towards", metavar="ROOM", help="Prefer spots near the middle of this room."),
    ] = None,
    room: RoomNames = [],  # noqa: B006 - typer copies it
    room_layer: RoomLayers = [],  # noqa: B006
    obstacle_layer: ObstacleLayers = [],  # noqa: B006
    quiet: Quiet = False,
) -> None:
    """Find from where every wall of each room is seen; write the report and sheets."""
    from kernelscan.reading import read_devices

    wanted = read_devices(devices) if devices is not None else ()
    whole = read_drawing(plan_file, unit, room_layer, obstacle_layer)
    spot = wanted_spot(whole, near, towards)
    plan = with_rooms(whole, room)
    answers = [_answer(each, wanted, spot) for each in with_progress(plan.rooms, "rooms", quiet)]
    outdated = write_folder(out, _files(plan, answers), SHEET_NAMES)
    if not quiet:
        _print(plan, answers, out, outdated)


def _answer(room: "Room", devices: Sequence["Device"], near: "Point | None") -> "Answer":
    """Return the answers for one room, after the exact checker has passed the kernel."""
    from kernelscan.coverage import room_zones
    from kernelscan.coverage.device_answers import device_answer
    from kernelscan.geometry.certificate import verify_kernel

    zones = room_zones(room)
    verify_kernel(room.outline, zones.kernel, room.holes)
    return zones, tuple(device_answer(room, zones.kernel, device, near=near) for device in devices)


def _files(plan: "Plan", answers: Sequence["Answer"]) -> dict[str, bytes]:
    from kernelscan.markup.dxf import zones_dxf
    from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
    from kernelscan.markup.svg import svg_text
    from kernelscan.report.document import report_text, zones_report
    from kernelscan.report.schedule import schedule_csv

    zones, of_devices = [zones for zones, _ in answers], [devices for _, devices in answers]
    sheets = compose_zone_sheets(plan, zones, SheetOptions(date=date.today().isoformat()))
    return {
        "report.json": report_text(zones_report(plan, zones, of_devices)).encode(),
        "schedule.csv": schedule_csv(plan, zones, of_devices),
        "markup.dxf": zones_dxf(plan, zones).encode(),
        **{f"sheet-{number:02}.svg": svg_text(sheet).encode() for number, sheet in enumerate(sheets, 1)},
    }


def _print(plan: "Plan", answers: Sequence["Answer"], out: Path, outdated: Sequence[str]) -> None:
    from kernelscan.coverage.cautions import CAUTIONS
    from kernelscan.report.device_choices import print_device_choices
    from kernelscan.report.tables import print_problems, print_zones

    print_zones(plan, [zones for zones, _ in answers], sys.stdout)
    if any(devices for _, devices in answers):
        print_device_choices(plan, [devices for _, devices in answers], sys.stdout)
    print_problems(plan, sys.stdout)
    if outdated:
        print(f"Removed from an earlier run: {', '.join(outdated)}")
    print(f"Written to {out}: sheet-01.svg and on, schedule.csv, markup.dxf, report.json")
    print("Caution: " + " ".join(CAUTIONS[:3]))
