"""Options that more than one command takes, each said once."""

from enum import StrEnum
from pathlib import Path
from typing import Annotated

import typer

__all__ = [
    "DeviceFile",
    "DrawingPath",
    "DrawingUnit",
    "ObstacleLayers",
    "Quiet",
    "RoomLayers",
    "RoomNames",
    "UnitChoice",
]


class DrawingUnit(StrEnum):
    """The units that ``--unit`` takes."""

    MM = "mm"
    CM = "cm"
    DM = "dm"
    M = "m"
    IN = "in"
    FT = "ft"


DrawingPath = Annotated[Path, typer.Argument(metavar="PLAN.dxf", help="The drawing, DXF text or binary.")]
UnitChoice = Annotated[
    DrawingUnit | None, typer.Option("--unit", help="The drawing's unit, over what its header says.")
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
DeviceFile = Annotated[
    Path | None,
    typer.Option("--devices", metavar="FILE.toml", help="The devices to place, see docs/devices.md."),
]
Quiet = Annotated[bool, typer.Option("--quiet", "-q", help="Print nothing but errors.")]
