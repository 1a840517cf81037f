"""``kernelscan rooms``: which rooms the drawing outlines, how it was understood, and what was wrong with it."""

import sys
from pathlib import Path
from typing import Annotated

import typer

from kernelscan.cli.drawing import read_drawing, reading_choices, with_rooms
from kernelscan.cli.options import (
    DeviceLayers,
    DoorGap,
    DrawingPath,
    DrawnWindow,
    ObstacleLayers,
    OpeningLayers,
    Quiet,
    ReadingFile,
    RoomLayers,
    RoomNames,
    UnitChoice,
    WallLayers,
)
from kernelscan.cli.writing import write_file

__all__ = ["rooms"]


def rooms(
    plan_file: DrawingPath,
    unit: UnitChoice = None,
    room: RoomNames = [],  # noqa: B006 - typer copies it
    room_layer: RoomLayers = [],  # noqa: B006
    wall_layer: WallLayers = [],  # noqa: B006
    opening_layer: OpeningLayers = [],  # noqa: B006
    obstacle_layer: ObstacleLayers = [],  # noqa: B006
    device_layer: DeviceLayers = [],  # noqa: B006
    door_gap: DoorGap = None,
    window: DrawnWindow = None,
    reading: ReadingFile = None,
    json: Annotated[
        Path | None, typer.Option("--json", metavar="FILE", help="Write the report there too.")
    ] = None,
    picture: Annotated[
        Path | None,
        typer.Option("--picture", metavar="FILE.svg", help="Draw there what was understood."),
    ] = None,
    write_reading: Annotated[
        Path | None,
        typer.Option(
            "--write-reading", metavar="FILE.toml", help="Write there how it was read, for --reading."
        ),
    ] = None,
    quiet: Quiet = False,
) -> None:
    """List the rooms of a drawing, their areas and names, its layers, and the problems met."""
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
    plan = with_rooms(whole, room)
    from kernelscan.markup.picture import picture_of_plan
    from kernelscan.markup.svg import svg_text
    from kernelscan.reading.reading_file import used_choices
    from kernelscan.report.document import report_text, rooms_report
    from kernelscan.report.tables import print_layers, print_problems, print_rooms

    read = [plan_file, *([reading] if reading is not None else [])]
    if json is not None:
        write_file(json, report_text(rooms_report(plan)).encode(), read)
    if picture is not None:
        write_file(picture, svg_text(picture_of_plan(plan)).encode(), read)
    if write_reading is not None:
        settled = used_choices(whole, choices.window, choices.door_gap)
        write_file(write_reading, settled.text.encode(), read)
    if not quiet:
        print_rooms(plan, sys.stdout)
        print_layers(plan, sys.stdout)
        print_problems(plan, sys.stdout)
