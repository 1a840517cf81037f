"""What every command does first: read the drawing and keep the rooms that were asked for."""

import re
from collections.abc import Sequence
from dataclasses import replace
from math import isfinite
from pathlib import Path
from typing import TYPE_CHECKING

from kernelscan.cli.options import DrawingUnit
from kernelscan.errors import InputError
from kernelscan.plain_text import plain_text

if TYPE_CHECKING:
    import numpy as np
    import numpy.typing as npt

    from kernelscan.plan import Plan, Room

    Point = npt.NDArray[np.float64]

__all__ = ["read_drawing", "wanted_spot", "with_rooms"]


def read_drawing(
    path: Path, unit: DrawingUnit | None, room_layers: Sequence[str], obstacle_layers: Sequence[str]
) -> "Plan":
    """Return the plan of a drawing, read by the shared options."""
    from kernelscan.reading import read_plan
    from kernelscan.reading.layers import LayerPatterns

    layers = LayerPatterns(rooms=tuple(room_layers), obstacles=tuple(obstacle_layers))
    return read_plan(path, unit=unit, layers=layers)


def with_rooms(plan: "Plan", names: Sequence[str]) -> "Plan":
    """Return the plan with only the rooms named, by name or number and case-blind; all of them if none is named."""
    if not names:
        return plan
    chosen = {room.id for name in names for room in _rooms_called(plan, name)}
    return replace(plan, rooms=tuple(room for room in plan.rooms if room.id in chosen))


def wanted_spot(plan: "Plan", near: str | None, towards: str | None) -> "Point | None":
    """Return the spot in metres that ``--near`` gives in drawing units or ``--towards`` by a room, or ``None``."""
    if near is not None and towards is not None:
        raise InputError("--near and --towards say two different things; give one of them")
    if towards is not None:
        from kernelscan.geometry.shapes import interior_point

        room = _rooms_called(plan, towards)[0]
        return _point(interior_point(room.outline, room.holes))
    if near is None:
        return None
    numbers = re.fullmatch(r"\s*([-+.\deE]+)\s*,\s*([-+.\deE]+)\s*", near)
    try:
        if numbers is None:
            raise ValueError
        x, y = (float(number) * plan.unit.metres for number in numbers.groups())
        if not (isfinite(x) and isfinite(y)):
            raise ValueError
    except ValueError:
        raise InputError(f"--near {plain_text(near)!r}: expected two numbers, such as 1200,300") from None
    return _point((x, y))


def _point(position: tuple[float, float]) -> "Point":
    """Return a position as an array of two."""
    import numpy as np

    return np.array(position, dtype=np.float64)


def _rooms_called(plan: "Plan", name: str) -> list["Room"]:
    """The rooms of that name or number, at least one."""
    wanted = name.casefold()
    found = [room for room in plan.rooms if wanted in {room.id.casefold(), room.name.casefold()}]
    if not found:
        listed = plain_text(", ".join(f"{room.id} {room.name}" for room in plan.rooms), 300)
        raise InputError(f"{plan.file}: no room {plain_text(name)!r}; the rooms are: {listed or 'none'}")
    return found
