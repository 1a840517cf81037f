"""Terminal tables: what a run found, for reading at a glance; full figures stand in the report."""

from collections.abc import Sequence
from typing import TextIO

from rich.table import Table
from rich.text import Text

from kernelscan.coverage import RoomAnswer, RoomZones, Spot
from kernelscan.coverage.wording import Custom, angle_in_words
from kernelscan.plain_text import plain_text
from kernelscan.plan import Plan, Problem, Room
from kernelscan.report.no_rooms import no_room_reason
from kernelscan.report.reason_lines import feature_lines, reason_lines
from kernelscan.report.terminal import cell, print_parts, table_of
from kernelscan.report.wording import (
    drawn_coordinate,
    drawn_position,
    kernel_or_reason,
    range_in_words,
    tolerance_in_words,
)

__all__ = ["print_layers", "print_problems", "print_reasons", "print_rooms", "print_zones"]


def print_rooms(plan: Plan, out: TextIO) -> None:
    """Print a row for each room: what it is, how large, and what stands or opens in it."""
    table = table_of("room", "name", "area", "corners", "openings", "obstacles", "closed by", "layer")
    for room in plan.rooms:
        table.add_row(
            room.id,
            cell(room.name),
            _area(plan, room),
            str(room.corner_count),
            str(room.opening_count),
            str(len(room.obstacles)),
            room.closed_by,
            cell(room.source.layer),
        )
    print_parts(out, _heading(plan), *_no_rooms(plan), table)


def print_zones(plan: Plan, answers: Sequence[RoomAnswer], out: TextIO) -> None:
    """Print for each room the kernel and the recommended spot of each mount, or why there is none."""
    unit = plain_text(plan.unit.name)
    table = table_of(
        "room",
        "name",
        "area",
        "sees every wall",
        "mount",
        f"x ({unit})",
        f"y ({unit})",
        "field",
        "range",
        "sight within",
    )
    for answer in answers:
        room = answer.room
        head: list[str | Text] = [room.id, cell(room.name), _area(plan, room)]
        _add_spots(table, plan, head, answer.zones, "")
        if answer.tolerant is not None:
            depth = tolerance_in_words(plan, answer.tolerant.simplified.depth)
            _add_spots(table, plan, ["", "", ""], answer.tolerant.zones, f"without features to {depth}: ")
    print_parts(out, _heading(plan), *_no_rooms(plan), table)


def _add_spots(table: Table, plan: Plan, head: list[str | Text], zones: RoomZones, kind: str) -> None:
    """Add a row for each recommended spot, or one that says why there is none."""
    what = kind + kernel_or_reason(plan, zones)
    for spot in zones.recommended or (None,):
        table.add_row(*head, what, *(["–"] * 6 if spot is None else _spot_cells(plan, spot)))
        head, what = ["", "", ""], ""


def print_reasons(plan: Plan, answers: Sequence[RoomAnswer], out: TextIO) -> None:
    """Print for each room that no point sees whole why that is, and what could be done; and what was left out."""
    for answer in answers:
        lines = [*reason_lines(plan, answer), *feature_lines(plan, answer)]
        if lines:
            print_parts(
                out, f"{answer.room.id} {plain_text(answer.room.name)}:", *(f"  {line}" for line in lines)
            )


def print_layers(plan: Plan, out: TextIO) -> None:
    """Print a row for each layer on which something was found: the part it was given, and why."""
    if plan.layers:
        table = table_of("layer", "taken for", "because of", "lines")
        for use in plan.layers:
            table.add_row(cell(use.layer), use.role, cell(use.reason), str(use.strokes))
        print_parts(out, table)


def print_problems(plan: Plan, out: TextIO) -> None:
    """Print each problem of the drawing with its place, layer and handle."""
    if plan.problems:
        print_parts(out, "Notes on the drawing:", *(_problem(plan, each) for each in plan.problems))


def _heading(plan: Plan) -> str:
    said_by = {"header": "its header", "option": "the option", "proposal": "its own sizes"}[plan.unit_from]
    rule = plain_text(plan.room_rule, 400)
    return f"{plain_text(plan.file)}: {_count(len(plan.rooms), 'room')}; unit {plan.unit.name}, from {said_by}. {rule}"


def _no_rooms(plan: Plan) -> list[str]:
    """Return the line that says that there is no room, and why, where there is none."""
    return [] if plan.rooms else [f"No room found: {no_room_reason(plan)}."]


def _count(number: int, noun: str) -> str:
    return f"{number} {noun}" if number == 1 else f"{number} {noun}s"


def _spot_cells(plan: Plan, spot: Spot) -> list[str]:
    return [
        spot.mount,
        *(drawn_coordinate(plan, float(value)) for value in spot.point),
        angle_in_words(spot.field_of_view),
        range_in_words(plan, spot.farthest),
        tolerance_in_words(plan, spot.tolerance),
    ]


def _area(plan: Plan, room: Room) -> str:
    custom = Custom(plan.unit.imperial)
    return f"{custom.area(room.area)} {custom.area_unit}"


def _problem(plan: Plan, problem: Problem) -> str:
    place = [
        f"at {drawn_position(plan, problem.at)}" if problem.at else "",
        f"layer {plain_text(problem.source.layer)}" if problem.source.layer else "",
        f"handle {plain_text(problem.source.handle)}" if problem.source.handle else "",
    ]
    where = ", ".join(part for part in place if part)
    return f"  {problem.code}: {plain_text(problem.message, 400)}" + (f" ({where})" if where else "")
