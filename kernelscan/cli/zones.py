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
    from kernelscan.coverage import RoomAnswer
    from kernelscan.plan import Plan

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
    ignore_depth: Annotated[
        float,
        typer.Option(
            "--ignore-depth",
            metavar="METRES",
            min=0.0,
            max=2.0,
            help="Leave out pilasters, niches and the like up to so deep.",
        ),
    ] = 0.0,
    room: RoomNames = [],  # noqa: B006 - typer copies it
    room_layer: RoomLayers = [],  # noqa: B006
    obstacle_layer: ObstacleLayers = [],  # noqa: B006
    quiet: Quiet = False,
) -> None:
    """Find from where every wall of each room is seen; write the report and sheets."""
    from kernelscan.coverage import room_answer
    from kernelscan.reading import read_devices

    wanted = read_devices(devices) if devices is not None else ()
    whole = read_drawing(plan_file, unit, room_layer, obstacle_layer)
    spot = wanted_spot(whole, near, towards)
    plan = with_rooms(whole, room)
    answers = [
        room_answer(each, wanted, ignore_depth=ignore_depth, near=spot)
        for each in with_progress(plan.rooms, "rooms", quiet)
    ]
    outdated = write_folder(out, _files(plan, answers), SHEET_NAMES)
    if not quiet:
        _print(plan, answers, out, outdated)


def _files(plan: "Plan", answers: Sequence["RoomAnswer"]) -> dict[str, bytes]:
    from kernelscan.markup.dxf import zones_dxf
    from kernelscan.markup.sheet import SheetOptions, compose_zone_sheets
    from kernelscan.markup.svg import svg_text
    from kernelscan.report.document import report_text, zones_report
    from kernelscan.report.schedule import schedule_csv

    sheets = compose_zone_sheets(plan, answers, SheetOptions(date=date.today().isoformat()))
    return {
        "report.json": report_text(zones_report(plan, answers)).encode(),
        "schedule.csv": schedule_csv(plan, answers),
        "markup.dxf": zones_dxf(plan, answers).encode(),
        **{f"sheet-{number:02}.svg": svg_text(sheet).encode() for number, sheet in enumerate(sheets, 1)},
    }


def _print(plan: "Plan", answers: Sequence["RoomAnswer"], out: Path, outdated: Sequence[str]) -> None:
    from kernelscan.coverage.cautions import cautions_for
    from kernelscan.report.device_choices import print_device_choices
    from kernelscan.report.tables import print_problems, print_reasons, print_zones

    print_zones(plan, answers, sys.stdout)
    print_reasons(plan, answers, sys.stdout)
    print_device_choices(plan, answers, sys.stdout)
    print_problems(plan, sys.stdout)
    if outdated:
        print(f"Removed from an earlier run: {', '.join(outdated)}")
    print(f"Written to {out}: sheet-01.svg and on, schedule.csv, markup.dxf, report.json")
    kinds = {each.device.kind: None for answer in answers for each in answer.devices}
    print("Caution: " + " ".join(cautions_for(kinds)))
