"""The schedule: a row for each recommended spot, and a row with the reason for each room that has none."""

import csv
import io
from collections.abc import Iterator, Sequence
from math import ceil, degrees, floor

from kernelscan.coverage import RoomZones, Spot
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan
from kernelscan.report.wording import kernel_or_reason

__all__ = ["SCHEDULE_COLUMNS", "schedule_csv"]

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

SLACK = 1e-6
"""Millimetres: what is whole but for its rounding is not pushed over."""


def schedule_csv(plan: Plan, answers: Sequence[RoomZones]) -> bytes:
    """Return ``schedule.csv``, in UTF-8 with a byte-order mark, so that spreadsheet programs read names right.

    Ranges are rounded up and tolerances down, to the millimetre.
    """
    text = io.StringIO(newline="")
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow(SCHEDULE_COLUMNS)
    for zones in answers:
        writer.writerows(_rows(plan, zones))
    return text.getvalue().encode("utf-8-sig")


def _rows(plan: Plan, zones: RoomZones) -> Iterator[list[str]]:
    room, kernel = zones.room, zones.kernel
    head = [room.id, _harmless(room.name), f"{room.area:.3f}", kernel.kind, f"{kernel.area:.3f}"]
    for spot in zones.recommended:
        yield [*head, *_spot_cells(plan, spot), ""]
    if not zones.recommended:
        reason = (
            kernel_or_reason(plan, zones)
            if kernel.kind == "empty"
            else "no wall or corner can carry a device"
        )
        yield [*head, *[""] * 9, reason]


def _spot_cells(plan: Plan, spot: Spot) -> list[str]:
    drawn = spot.point / plan.unit.metres
    return [
        spot.mount,
        *(f"{value:.3f}" for value in spot.point),
        *(f"{value:.10g}" for value in drawn),
        "" if spot.bearing is None else f"{degrees(spot.bearing) % 360:.1f}",
        f"{degrees(spot.field_of_view):.1f}",
        f"{ceil(spot.farthest * 1000 - SLACK) / 1000:.3f}",
        f"{floor(spot.tolerance * 1000 + SLACK) / 1000:.3f}",
    ]


def _harmless(text: str) -> str:
    """Return text that no spreadsheet program takes for a formula."""
    line = plain_text(text)
    return f"'{line}" if line[:1] in "=+-@|" else line
