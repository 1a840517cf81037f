"""The schedule: a row for each recommended spot, of the room and of each device, or a row with the reason for none."""

import csv
import io
from collections.abc import Iterator, Sequence
from math import ceil, degrees, floor

import numpy as np

from kernelscan.coverage import RoomAnswer, RoomZones
from kernelscan.coverage.device_spots import DeviceAnswer
from kernelscan.coverage.device_words import set_out_in_words, shortfall_in_words
from kernelscan.coverage.wording import Custom
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
    "device",
    "mount",
    "x_m",
    "y_m",
    "x_drawing",
    "y_drawing",
    "bearing_deg",
    "field_of_view_deg",
    "range_m",
    "tolerance_m",
    "density_px_per_m",
    "set_out",
    "remarks",
)
"""The header of ``schedule.csv``; positions also in the drawing's own unit, bearings from the x axis."""

FORMULA_SIGNS = ("=", "+", "-", "@", "|", "%", "＝", "＋", "－", "＠")
"""A text that begins with one of these may be taken for a formula (common practice; the wide forms from memory)."""

SLACK = 1e-6
"""In the last place: what is whole but for its rounding is not pushed over."""


def schedule_csv(plan: Plan, answers: Sequence[RoomAnswer]) -> bytes:
    """Return ``schedule.csv``, in UTF-8 with a byte-order mark, so that spreadsheet programs read names right.

    Ranges are rounded up and tolerances down, to the millimetre.
    """
    text = io.StringIO(newline="")
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow(SCHEDULE_COLUMNS)
    for answer in answers:
        remark = ""
        writer.writerows(_rows(plan, answer.zones, remark))
        if answer.tolerant is not None:
            remark = f"small features up to {answer.tolerant.simplified.depth:.3g} m left out"
            writer.writerows(_rows(plan, answer.tolerant.zones, remark))
        for of_device in answer.devices:
            writer.writerows(_device_rows(plan, (answer.tolerant or answer).zones, of_device, remark))
    return text.getvalue().encode("utf-8-sig")


def _head(zones: RoomZones, device: str) -> list[str]:
    room, kernel = zones.room, zones.kernel
    return [
        room.id,
        _harmless(room.name),
        f"{room.area:.3f}",
        kernel.kind,
        f"{kernel.area:.3f}",
        _harmless(device),
    ]


def _rows(plan: Plan, zones: RoomZones, remark: str) -> Iterator[list[str]]:
    """The recommended spots without any device file, or the reason why there is none."""
    for spot in zones.recommended:
        yield [
            *_head(zones, ""),
            spot.mount,
            *_place(plan, spot.point),
            _bearing(spot.bearing),
            _up(degrees(spot.field_of_view), 1),
            _up(spot.farthest, 3),
            _down(spot.tolerance, 3),
            "",
            "",
            remark,
        ]
    if not zones.recommended:
        yield [
            *_head(zones, ""),
            *[""] * 11,
            "; ".join(filter(None, (remark, kernel_or_reason(plan, zones)))),
        ]


def _device_rows(plan: Plan, zones: RoomZones, answer: DeviceAnswer, remark: str) -> Iterator[list[str]]:
    """The spots of one device, or what it falls short by."""
    name = answer.device.name
    for spot in answer.spots:
        yield [
            *_head(zones, name),
            spot.fixing,
            *_place(plan, spot.point),
            _bearing(spot.bearing),
            _up(degrees(spot.field), 1),
            _up(spot.farthest, 3),
            _down(spot.tolerance, 3),
            "" if spot.density is None else _down(spot.density, 1),
            _harmless(set_out_in_words(answer.room, spot.setting_out, Custom(plan.unit.imperial))),
            remark,
        ]
    if not answer.spots:
        yield [*_head(zones, name), *[""] * 11, "; ".join(filter(None, (remark, shortfall_in_words(answer))))]


def _place(plan: Plan, point: np.ndarray) -> list[str]:
    """A position in metres and as the drawing counts it."""
    return [
        *(f"{value + 0.0:.3f}" for value in point.tolist()),
        *(f"{v:.10g}" for v in point / plan.unit.metres),
    ]


def _bearing(radians: float | None) -> str:
    return "" if radians is None else f"{degrees(radians) % 360:.1f}"


def _up(value: float, decimals: int) -> str:
    return f"{ceil(value * 10**decimals - SLACK) / 10**decimals:.{decimals}f}"


def _down(value: float, decimals: int) -> str:
    return f"{floor(value * 10**decimals + SLACK) / 10**decimals:.{decimals}f}"


def _harmless(text: str) -> str:
    """Return text that no spreadsheet program takes for a formula."""
    line = plain_text(text)
    return f"'{line}" if line.startswith(FORMULA_SIGNS) else line
