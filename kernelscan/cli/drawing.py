"""What every command does first: read the drawing and keep the rooms that were asked for."""

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

from kernelscan.cli.options import DrawingUnit
from kernelscan.errors import InputError
from kernelscan.plain_text import plain_text

if TYPE_CHECKING:
    from kernelscan.plan import Plan, Room

__all__ = ["read_drawing"]


def read_drawing(
    path: Path,
    unit: DrawingUnit | None,
    rooms: Sequence[str],
    room_layers: Sequence[str],
    obstacle_layers: Sequence[str],
) -> "Plan":
    """Return the plan of a drawing, with only the rooms named (by name or number, case-blind) if any are."""
    from kernelscan.reading import read_plan
    from kernelscan.reading.layers import LayerPatterns

    layers = LayerPatterns(rooms=tuple(room_layers), obstacles=tuple(obstacle_layers))
    plan = read_plan(path, unit=unit, layers=layers)
    return replace(plan, rooms=_chosen(plan, rooms)) if rooms else plan


def _chosen(plan: "Plan", names: Sequence[str]) -> tuple["Room", ...]:
    wanted = {name.casefold() for name in names}
    known = {name.casefold() for room in plan.rooms for name in (room.id, room.name)}
    missing = [name for name in names if name.casefold() not in known]
    if missing:
        listed = plain_text(", ".join(f"{room.id} {room.name}" for room in plan.rooms), 300)
        raise InputError(
            f"{plan.file}: no room {plain_text(missing[0])!r}; the rooms are: {listed or 'none'}"
        )
    return tuple(room for room in plan.rooms if {room.id.casefold(), room.name.casefold()} & wanted)
