"""``kernelscan rooms``: which rooms the drawing outlines, and what was wrong with it."""

import sys
from pathlib import Path
from typing import Annotated

import typer

from kernelscan.cli.drawing import read_drawing, with_rooms
from kernelscan.cli.options import DrawingPath, ObstacleLayers, Quiet, RoomLayers, RoomNames, UnitChoice
from kernelscan.cli.writing import write_file

__all__ = ["rooms"]


def rooms(
    plan_file: DrawingPath,
    unit: UnitChoice = None,
    room: RoomNames = [],  # noqa: B006 - typer copies it
    room_layer: RoomLayers = [],  # noqa: B006
    obstacle_layer: ObstacleLayers = [],  # noqa: B006
    json: Annotated[
        Path | None, typer.Option("--json", metavar="FILE", help="Write the report there too.")
    ] = None,
    quiet: Quiet = False,
) -> None:
    """List the rooms of a drawing, their areas and names, and the problems met."""
    plan = with_rooms(read_drawing(plan_file, unit, room_layer, obstacle_layer), room)
    from kernelscan.report.document import report_text, rooms_report
    from kernelscan.report.tables import print_problems, print_rooms

    if json is not None:
        write_file(json, report_text(rooms_report(plan)).encode(), [plan_file])
    if not quiet:
        print_rooms(plan, sys.stdout)
        print_problems(plan, sys.stdout)
