"""The schedule: a row for each recommended spot, and a row with the reason for each room that has none."""

import csv
import io
from collections.abc import Iterator, Sequence
from math import degrees

from kernelscan.coverage import RoomZones, Spot
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan, Room, WallRef

__all__ = ["SCHEDULE_COLUMNS", "kernel_in_words", "schedule_csv"]

SCHEDULE_COLUMNS: tuple[str, ...] = (
    "room",
    "name",
    "area_m2",
    "kernel",
    "kernel_area_m2",
    "mount",
    "x_m",
    "y_m",
    "x_drawing",
    "y_drawing",
    "bearing_deg",
    "field_of_view_deg",
    "range_m",
    "tolerance_m",
    "remarks",
)
"""The header of ``schedule.csv``; positions also in the drawing's own unit, bearings from the x axis."""


def schedule_csv(plan: Plan, answers: Sequence[RoomZones]) -> bytes:
    """Return ``schedule.csv``: UTF-8 with a byte-order mark, so that spreadsheet programs read names right."""
    text = io.StringIO(newline="")
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow(SCHEDULE_COLUMNS)
    for zones in answers:
        writer.writerows(_rows(plan, zones))
    return text.getvalue().encode("utf-8-sig")


def kernel_in_words(zones: RoomZones) -> str:
    """Return one line: what part of the room sees every wall, or which walls keep any point from it."""
    kernel = zones.kernel
    if kernel.kind == "area":
        return f"{kernel.area:.2f} m2"
    if kernel.kind in {"segment", "point"}:
        return f"a {kernel.kind} only"
    return "none: " + _conflict(zones.room, [WallRef(*wall) for wall in kernel.conflict.tolist()])


def _conflict(room: Room, walls: Sequence[WallRef]) -> str:
    places = [_middle(room, wall) for wall in walls]
    return f"the walls at {', '.join(places[:-1])} and {places[-1]} m exclude each other"


def _middle(room: Room, wall: WallRef) -> str:
    start, end = room.wall_ends(wall)
    x, y = start / 2 + end / 2
    return f"({x:.2f}, {y:.2f})"


def _rows(plan: Plan, zones: RoomZones) -> Iterator[list[str]]:
    room, kernel = zones.room, zones.kernel
    head = [room.id, _harmless(room.name), f"{room.area:.3f}", kernel.kind, f"{kernel.area:.3f}"]
    for spot in zones.recommended:
        yield [*head, *_spot_cells(plan, spot), ""]
    if not zones.recommended:
        reason = kernel_in_words(zones) if kernel.kind == "empty" else "no wall or corner can carry a device"
        yield [*head, *[""] * 9, reason]


def _spot_cells(plan: Plan, spot: Spot) -> list[str]:
    drawn = spot.point / plan.unit.metres
    return [
        spot.mount,
        *(f"{value:.3f}" for value in spot.point),
        *(f"{value:.10g}" for value in drawn),
        "" if spot.bearing is None else f"{degrees(spot.bearing) % 360:.1f}",
        f"{degrees(spot.field_of_view):.1f}",
        f"{spot.farthest:.3f}",
        f"{spot.tolerance:.3f}",
    ]


def _harmless(text: str) -> str:
    """Return text that no spreadsheet program takes for a formula."""
    line = plain_text(text)
    return f"'{line}" if line[:1] in "=+-@|" else line
