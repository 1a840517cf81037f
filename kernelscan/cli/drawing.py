"""What every command does first: read the drawing and keep the rooms that were asked for."""

import re
from collections.abc import Sequence
from dataclasses import replace
from math import inf, isfinite
from pathlib import Path
from typing import TYPE_CHECKING

from kernelscan.cli.options import DrawingUnit
from kernelscan.errors import InputError
from kernelscan.plain_text import plain_text

if TYPE_CHECKING:
    import numpy as np
    import numpy.typing as npt

    from kernelscan.plan import Plan, Room
    from kernelscan.reading.reading_file import ReadingChoices
    from kernelscan.reading.window import Window

    Point = npt.NDArray[np.float64]

__all__ = ["read_drawing", "reading_choices", "wanted_spot", "with_rooms"]


def reading_choices(
    reading: Path | None,
    *,
    unit: DrawingUnit | None,
    window: str | None,
    door_gap: float | None,
    room: Sequence[str],
    wall: Sequence[str],
    opening: Sequence[str],
    obstacle: Sequence[str],
    device: Sequence[str],
) -> "ReadingChoices":
    """Return what the shared options settle about the reading; each counts before the reading file's word."""
    from kernelscan.reading.reading_file import ReadingChoices, read_choices

    said = read_choices(reading) if reading is not None else ReadingChoices()
    layers = replace(
        said.layers,
        rooms=tuple(room) or said.layers.rooms,
        walls=tuple(wall) or said.layers.walls,
        openings=tuple(opening) or said.layers.openings,
        obstacles=tuple(obstacle) or said.layers.obstacles,
        devices=tuple(device) or said.layers.devices,
    )
    return ReadingChoices(
        unit.value if unit is not None else said.unit,
        _window(window) if window is not None else said.window,
        layers,
        door_gap if door_gap is not None else said.door_gap,
    )


def read_drawing(path: Path, choices: "ReadingChoices") -> "Plan":
    """Return the plan of a drawing, read as it was settled."""
    from kernelscan.reading import read_plan
    from kernelscan.tolerances import Tolerances

    usual = Tolerances()
    gap = usual.door_gap if choices.door_gap is None else choices.door_gap
    return read_plan(
        path,
        unit=choices.unit,
        layers=choices.layers,
        tolerances=replace(usual, door_gap=gap),
        window=choices.window,
    )


def _window(text: str) -> "Window":
    """Return the corners that ``--window`` gives."""
    try:
        x0, y0, x1, y1 = (float(number) for number in text.split(","))
    except ValueError:
        x0 = y0 = x1 = y1 = inf
    if not all(map(isfinite, (x0, y0, x1, y1))) or x0 == x1 or y0 == y1:
        raise InputError(
            f"--window {plain_text(text)!r}: expected two opposite corners in drawing units, such as 0,0,42000,29700"
        )
    return x0, y0, x1, y1


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
