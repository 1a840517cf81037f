"""Options that more than one command takes, each said once."""

from enum import StrEnum
from pathlib import Path
from typing import Annotated

import typer

__all__ = [
    "AsPdf",
    "DeviceFile",
    "DeviceLayers",
    "DoorGap",
    "DrawingPath",
    "DrawingUnit",
    "DrawnWindow",
    "LayerPrefix",
    "Merge",
    "ObstacleLayers",
    "OpeningLayers",
    "Quiet",
    "ReadingFile",
    "RoomLayers",
    "RoomNames",
    "RoomSheets",
    "SheetApprover",
    "SheetCreator",
    "SheetDate",
    "SheetDocumentType",
    "SheetNumber",
    "SheetOwner",
    "SheetPaper",
    "SheetScale",
    "SheetTitle",
    "UnitChoice",
    "WallLayers",
]


class DrawingUnit(StrEnum):
    """The units that ``--unit`` takes, and ``auto`` for the one that the drawing's own sizes speak for."""

    MM = "mm"
    CM = "cm"
    DM = "dm"
    M = "m"
    IN = "in"
    FT = "ft"
    AUTO = "auto"


DrawingPath = Annotated[Path, typer.Argument(metavar="PLAN.dxf", help="The drawing, DXF text or binary.")]
UnitChoice = Annotated[
    DrawingUnit | None,
    typer.Option(
        "--unit",
        help="The drawing's unit, over what its header says; auto takes the one its sizes speak for.",
    ),
]
RoomNames = Annotated[
    list[str], typer.Option("--room", metavar="NAME", help="Only this room, by name or number; repeatable.")
]
RoomLayers = Annotated[
    list[str],
    typer.Option(
        "--room-layer",
        metavar="PATTERN",
        help="Layers whose closed outlines are rooms, as A-AREA*; repeatable.",
    ),
]
ObstacleLayers = Annotated[
    list[str],
    typer.Option(
        "--obstacle-layer", metavar="PATTERN", help="Layers whose closed outlines block sight; repeatable."
    ),
]
WallLayers = Annotated[
    list[str],
    typer.Option("--wall-layer", metavar="PATTERN", help="Layers whose lines are walls; repeatable."),
]
OpeningLayers = Annotated[
    list[str],
    typer.Option("--opening-layer", metavar="PATTERN", help="Layers of doors and windows; repeatable."),
]
DeviceLayers = Annotated[
    list[str],
    typer.Option("--device-layer", metavar="PATTERN", help="Layers that devices are drawn on; repeatable."),
]
DoorGap = Annotated[
    float | None,
    typer.Option(
        "--door-gap",
        metavar="METRES",
        min=0.0,
        max=10.0,
        help="Close bare gaps in walls up to this width, else 1.3 m.",
    ),
]
DrawnWindow = Annotated[
    str | None,
    typer.Option(
        "--window", metavar="X0,Y0,X1,Y1", help="Read only what lies between these corners, in drawing units."
    ),
]
ReadingFile = Annotated[
    Path | None,
    typer.Option("--reading", metavar="FILE.toml", help="Unit, window and layers, as settled for a project."),
]
DeviceFile = Annotated[
    Path | None,
    typer.Option("--devices", metavar="FILE.toml", help="The devices to place, see docs/devices.md."),
]
Quiet = Annotated[bool, typer.Option("--quiet", "-q", help="Print nothing but errors.")]

SheetPaper = Annotated[
    str | None,
    typer.Option("--paper", metavar="PAPER", help="A4 to A0, letter, ANSI B to ANSI E; else chosen."),
]
SheetScale = Annotated[
    str | None,
    typer.Option(
        "--scale", metavar="SCALE", help='Such as 1:50, or 1/4" = 1\'-0"; else the largest that fits.'
    ),
]
SheetOwner = Annotated[str, typer.Option("--owner", metavar="TEXT", help="Legal owner, for the title block.")]
SheetNumber = Annotated[str, typer.Option("--number", metavar="TEXT", help="Document number.")]
SheetTitle = Annotated[str, typer.Option("--title", metavar="TEXT", help="Title.")]
SheetCreator = Annotated[str, typer.Option("--creator", metavar="TEXT", help="Created by.")]
SheetApprover = Annotated[str, typer.Option("--approver", metavar="TEXT", help="Approved by.")]
SheetDocumentType = Annotated[str, typer.Option("--document-type", metavar="TEXT", help="Document type.")]
SheetDate = Annotated[
    str | None,
    typer.Option("--date", metavar="TEXT", help="Date of issue; today's if it is left out."),
]
RoomSheets = Annotated[
    bool,
    typer.Option("--room-sheets", help="Also a sheet for each room, with its dimensions."),
]
AsPdf = Annotated[
    bool,
    typer.Option("--pdf", help="Also all sheets as one PDF; needs kernelscan[pdf]."),
]
LayerPrefix = Annotated[
    str | None,
    typer.Option(
        "--layer-prefix", metavar="TEXT", help="Begins the names of the mark-up's layers; A-KSCN else."
    ),
]
Merge = Annotated[
    bool, typer.Option("--merge", help="Also a copy of the drawing with the mark-up in it, merged.dxf.")
]
