"""``kernelscan zones``: each room's visibility kernel, and where one device may be mounted."""

import sys
from collections.abc import Sequence
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from kernelscan.cli.drawing import read_drawing, reading_choices, wanted_spot, with_rooms
from kernelscan.cli.options import (
    AsPdf,
    DeviceFile,
    DeviceLayers,
    DoorGap,
    DrawingPath,
    DrawnWindow,
    LayerPrefix,
    Merge,
    ObstacleLayers,
    OpeningLayers,
    Quiet,
    ReadingFile,
    RoomLayers,
    RoomNames,
    RoomSheets,
    SheetApprover,
    SheetCreator,
    SheetDate,
    SheetDocumentType,
    SheetNumber,
    SheetOwner,
    SheetPaper,
    SheetScale,
    SheetTitle,
    UnitChoice,
    WallLayers,
)
from kernelscan.cli.progress import with_progress
from kernelscan.cli.sheets import SHEET_NAMES, check_sheets, markup_files, print_written, sheet_files
from kernelscan.cli.writing import write_folder
from kernelscan.errors import InputError

if TYPE_CHECKING:
    from kernelscan.coverage import RoomAnswer
    from kernelscan.plan import Plan

__all__ = ["zones"]


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
    paper: SheetPaper = None,
    scale: SheetScale = None,
    owner: SheetOwner = "",
    number: SheetNumber = "",
    title: SheetTitle = "",
    creator: SheetCreator = "",
    approver: SheetApprover = "",
    document_type: SheetDocumentType = "",
    issued: SheetDate = None,
    room_sheets: RoomSheets = False,
    pdf: AsPdf = False,
    layer_prefix: LayerPrefix = None,
    merge: Merge = False,
    room: RoomNames = [],  # noqa: B006 - typer copies it
    room_layer: RoomLayers = [],  # noqa: B006
    wall_layer: WallLayers = [],  # noqa: B006
    opening_layer: OpeningLayers = [],  # noqa: B006
    obstacle_layer: ObstacleLayers = [],  # noqa: B006
    device_layer: DeviceLayers = [],  # noqa: B006
    door_gap: DoorGap = None,
    window: DrawnWindow = None,
    reading: ReadingFile = None,
    quiet: Quiet = False,
) -> None:
    """Find from where every wall of each room is seen; write the report and sheets."""
    from kernelscan.coverage import room_answer
    from kernelscan.markup.options import SheetOptions
    from kernelscan.reading import read_devices

    options = SheetOptions(
        paper,
        scale,
        owner=owner,
        number=number,
        title=title,
        creator=creator,
        approver=approver,
        document_type=document_type,
        date=date.today().isoformat() if issued is None else issued,
    )
    check_sheets(options, pdf, layer_prefix)
    if devices is None and (near is not None or towards is not None):
        raise InputError("--near and --towards choose among the spots of devices; give --devices too")
    wanted = read_devices(devices) if devices is not None else ()
    choices = reading_choices(
        reading,
        unit=unit,
        window=window,
        door_gap=door_gap,
        room=room_layer,
        wall=wall_layer,
        opening=opening_layer,
        obstacle=obstacle_layer,
        device=device_layer,
    )
    whole = read_drawing(plan_file, choices)
    spot = wanted_spot(whole, near, towards)
    plan = with_rooms(whole, room)
    answers = [
        room_answer(each, wanted, ignore_depth=ignore_depth, near=spot)
        for each in with_progress(plan.rooms, "rooms", quiet)
    ]
    files = {
        **_data_files(plan, answers),
        **markup_files(plan, answers, plan_file if merge else None, layer_prefix),
        **sheet_files(plan, answers, options, room_sheets, pdf),
    }
    outdated = write_folder(out, files, SHEET_NAMES, [plan_file, *([devices] if devices else [])])
    if not quiet:
        _print(plan, answers)
        print_written(out, files, outdated)


def _data_files(plan: "Plan", answers: Sequence["RoomAnswer"]) -> dict[str, bytes]:
    from kernelscan.report.document import report_text, zones_report
    from kernelscan.report.schedule import schedule_csv

    return {
        "report.json": report_text(zones_report(plan, answers)).encode(),
        "schedule.csv": schedule_csv(plan, answers),
    }


def _print(plan: "Plan", answers: Sequence["RoomAnswer"]) -> None:
    from kernelscan.coverage.cautions import cautions_for
    from kernelscan.report.device_choices import print_device_choices
    from kernelscan.report.tables import print_problems, print_reasons, print_zones

    print_zones(plan, answers, sys.stdout)
    print_reasons(plan, answers, sys.stdout)
    print_device_choices(plan, answers, sys.stdout)
    print_problems(plan, sys.stdout)
    kinds = {each.device.kind: None for answer in answers for each in answer.devices}
    print("Caution: " + " ".join(cautions_for(kinds)))
