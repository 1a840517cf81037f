"""``kernelscan zones``: each room's visibility kernel, and where one device may be mounted."""

import re
import sys
from collections.abc import Sequence
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from kernelscan.cli.drawing import read_drawing
from kernelscan.cli.options import DrawingPath, ObstacleLayers, Quiet, RoomLayers, RoomNames, UnitChoice
from kernelscan.cli.progress import with_progress
from kernelscan.cli.writing import write_folder

if TYPE_CHECKING:
    from kernelscan.coverage import RoomZones
    from kernelscan.plan import Plan, Room

__all__ = ["zones"]

SHEET_NAMES = re.compile(r"sheet-\d{2,}\.svg")


def zones(
    plan_file: DrawingPath,
    out: Annotated[Path, typer.Option("--out", metavar="FOLDER", help="Where the report and the sheets go.")],
    unit: UnitChoice = None,
    room: RoomNames = [],  # noqa: B006 - typer copies it
    room_layer: RoomLayers = [],  # noqa: B006
    obstacle_layer: ObstacleLayers = [],  # noqa: B006
    quiet: Quiet = False,
) -> None:
    """Find from where every wall of each room is seen, and write the report, the schedule and the sheets."""
    plan = read_drawing(plan_file, unit, room, room_layer, obstacle_layer)
    answers = [_answer(each) for each in with_progress(plan.rooms, "rooms", quiet)]
    outdated = write_folder(out, _files(plan, answers), SHEET_NAMES)
    if not quiet:
        _print(plan, answers, out, outdated)


def _answer(room: "Room") -> "RoomZones":
    """Return the answer for one room, after the exact checker has passed it."""
    from kernelscan.coverage import room_zones
    from kernelscan.geometry.certificate import verify_kernel

    zones = room_zones(room)
    verify_kernel(room.outline, zones.kernel, room.holes)
    return zones


def _files(plan: "Plan", answers: Sequence["RoomZones"]) -> dict[str, bytes]:
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


def _print(plan: "Plan", answers: Sequence["RoomZones"], out: Path, outdated: Sequence[str]) -> None:
    from kernelscan.coverage.cautions import CAUTIONS
    from kernelscan.report.tables import print_problems, print_zones

    print_zones(plan, answers, sys.stdout)
    print_problems(plan, sys.stdout)
    if outdated:
        print(f"Removed from an earlier run: {', '.join(outdated)}")
    print(f"Written to {out}: sheet-01.svg and on, schedule.csv, markup.dxf, report.json")
    print("Caution: " + " ".join(CAUTIONS[:3]))
