"""The sheets of one run as files: numbered SVGs, the plan's and if wanted each room's, and all of them as one PDF."""

import re
from collections.abc import Collection, Sequence
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from kernelscan.coverage import RoomAnswer
    from kernelscan.markup.options import SheetOptions
    from kernelscan.plan import Plan

__all__ = ["SHEET_NAMES", "check_sheets", "print_written", "sheet_files"]

PDF_NAME = "sheets.pdf"
SHEET_NAMES = re.compile(r"(room-)?sheet-\d{2,}\.svg|sheets\.pdf")
"""What files of an earlier run are called."""


def check_sheets(options: "SheetOptions", pdf: bool) -> None:
    """Raise ``InputError`` where the sheets that are asked for cannot be made, before any room is looked at."""
    from kernelscan.markup.options import check_options
    from kernelscan.markup.pdf import check_library

    check_options(options)
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


def print_written(out: Path, names: Collection[str], outdated: Sequence[str]) -> None:
    """Print what was written and what of an earlier run was removed."""
    if outdated:
        print(f"Removed from an earlier run: {', '.join(outdated)}")
    first_ones = [f"{name} and on" for name in ("sheet-01.svg", "room-sheet-01.svg") if name in names]
    others = [name for name in (PDF_NAME, "schedule.csv", "markup.dxf", "report.json") if name in names]
    print(f"Written to {out}: {', '.join([*first_ones, *others])}")
