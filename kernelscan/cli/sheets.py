"""The sheets of one run as files: numbered SVGs, all of them as one PDF, and the mark-up for CAD."""

import re
from collections.abc import Collection, Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from kernelscan.errors import InputError

if TYPE_CHECKING:
    from kernelscan.coverage import RoomAnswer
    from kernelscan.markup.options import SheetOptions
    from kernelscan.plan import Plan

__all__ = ["SHEET_NAMES", "check_sheets", "markup_files", "print_written", "sheet_files"]

PDF_NAME = "sheets.pdf"
MERGED_NAME = "merged.dxf"
SHEET_NAMES = re.compile(r"(room-)?sheet-\d{2,}\.svg|sheets\.pdf|merged\.dxf")
"""What files of an earlier run are called."""


def check_sheets(options: "SheetOptions", pdf: bool, prefix: str | None) -> None:
    """Raise ``InputError`` where the sheets that are asked for cannot be made, before any room is looked at."""
    from kernelscan.markup.dxf import checked_prefix
    from kernelscan.markup.options import check_options
    from kernelscan.markup.pdf import check_library

    check_options(options)
    if prefix is not None:
        checked_prefix(prefix)
    if pdf:
        check_library()


def sheet_files(
    plan: "Plan", answers: Sequence["RoomAnswer"], options: "SheetOptions", room_sheets: bool, pdf: bool
) -> dict[str, bytes]:
    """Return the sheets by file name; no name has anything of the drawing in it."""
    from kernelscan.markup.pdf import pdf_bytes
    from kernelscan.markup.room_sheets import compose_room_sheets
    from kernelscan.markup.sheet import compose_zone_sheets
    from kernelscan.markup.svg import svg_text

    of_plan = compose_zone_sheets(plan, answers, options)
    of_rooms = compose_room_sheets(plan, answers, options) if room_sheets else ()
    named = {f"sheet-{number:02}.svg": sheet for number, sheet in enumerate(of_plan, 1)}
    named |= {f"room-sheet-{number:02}.svg": sheet for number, sheet in enumerate(of_rooms, 1)}
    files = {name: svg_text(sheet).encode() for name, sheet in named.items()}
    return {**files, PDF_NAME: pdf_bytes([*of_plan, *of_rooms])} if pdf else files


def markup_files(
    plan: "Plan", answers: Sequence["RoomAnswer"], drawing: Path | None, prefix: str | None
) -> dict[str, bytes]:
    """Return the mark-up by file name: on its own and, where a drawing is given, within a copy of it."""
    from kernelscan.markup.dxf import zones_dxf
    from kernelscan.markup.dxf_blocks import PREFIX
    from kernelscan.markup.dxf_merge import merged_dxf
    from kernelscan.reading.files import open_drawing

    named = PREFIX if prefix is None else prefix
    files = {"markup.dxf": zones_dxf(plan, answers, named).encode()}
    if drawing is None:
        return files
    opened, repairs = open_drawing(drawing)
    if repairs:
        raise InputError(
            f"{plan.file}: was repaired to be read, so a copy would differ; save it anew to --merge"
        )
    return {**files, MERGED_NAME: merged_dxf(opened, plan, answers, named)}


def print_written(out: Path, names: Collection[str], outdated: Sequence[str]) -> None:
    """Print what was written and what of an earlier run was removed."""
    if outdated:
        print(f"Removed from an earlier run: {', '.join(outdated)}")
    first_ones = [f"{name} and on" for name in ("sheet-01.svg", "room-sheet-01.svg") if name in names]
    others = [
        name for name in (PDF_NAME, "schedule.csv", "markup.dxf", MERGED_NAME, "report.json") if name in names
    ]
    print(f"Written to {out}: {', '.join([*first_ones, *others])}")
