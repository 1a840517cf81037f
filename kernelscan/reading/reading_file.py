"""The reading file: what a project settles about its drawings once, so that it need not be said at every run.

It is TOML, with keys that may each be left out::

    unit = "mm"
    window = [0, 0, 42000, 29700]      # two opposite corners, in drawing units
    door_gap_m = 1.3

    [layers]                           # shell-style patterns, case-blind
    rooms = ["A-AREA*"]
    walls = ["A-WALL*"]
    openings = ["A-DOOR*", "A-GLAZ*"]
    obstacles = ["S-COLS"]
    ignored = ["A-FURN*"]
"""

import json
import re
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, fields
from math import isfinite
from os import PathLike
from pathlib import Path

from kernelscan.errors import InputError
from kernelscan.plan import Plan
from kernelscan.reading.layers import LayerPatterns
from kernelscan.reading.texts import clean_text
from kernelscan.reading.window import Window
from kernelscan.units import OPTION_UNITS

__all__ = ["ReadingChoices", "read_choices", "used_choices"]

KEYS = ("unit", "window", "door_gap_m", "layers")
ROLES = {
    "rooms": "room",
    "walls": "wall",
    "openings": "opening",
    "obstacles": "obstacle",
    "devices": "device",
}


@dataclass(frozen=True, slots=True)
class ReadingChoices:
    """What is settled about a drawing: unit, window (drawing units), layers, widest bare gap (metres)."""

    unit: str | None = None
    window: Window | None = None
    layers: LayerPatterns = LayerPatterns()
    door_gap: float | None = None

    @property
    def text(self) -> str:
        """The choices as TOML."""
        lines = ['# What kernelscan settled about this drawing; give it back by "--reading".']
        if self.unit is not None:
            lines.append(f"unit = {json.dumps(self.unit)}")
        if self.window is not None:
            lines.append(f"window = [{', '.join(map(repr, self.window))}]")
        if self.door_gap is not None:
            lines.append(f"door_gap_m = {self.door_gap!r}")
        lines += ["", "[layers]"]
        for role in fields(LayerPatterns):
            patterns = getattr(self.layers, role.name)
            if patterns:
                lines.append(f"{role.name} = [{', '.join(_quoted(pattern) for pattern in patterns)}]")
        return "\n".join(lines) + "\n"


def read_choices(path: str | PathLike[str]) -> ReadingChoices:
    """Read a reading file.

    Raises
    ------
    InputError
        If it cannot be read or is no TOML, or for whatever is wrong in it, all in one line.
    """
    file = Path(path)
    try:
        table = tomllib.loads(file.read_text(encoding="utf-8"))
    except (OSError, ValueError, RecursionError) as fault:
        reason = clean_text(getattr(fault, "strerror", None) or str(fault))
        raise InputError(f"{file.name}: cannot be read as TOML ({reason[:150]})") from fault
    faults: list[str] = []
    choices = _choices(table, faults)
    if faults:
        raise InputError(f"{file.name}: {'; '.join(faults)}")
    return choices


def _choices(table: Mapping[str, object], faults: list[str]) -> ReadingChoices:
    faults += [
        f"{clean_text(key)}: unknown, expected one of {', '.join(KEYS)}" for key in table if key not in KEYS
    ]
    unit = table.get("unit")
    if unit is not None and unit not in (*OPTION_UNITS, "auto"):
        faults.append(f"unit: got {unit!r}, expected auto or one of {', '.join(OPTION_UNITS)}")
    gap = table.get("door_gap_m")
    if gap is not None and not (_is_number(gap) and 0 <= gap <= 10):  # type: ignore[operator]
        faults.append(f"door_gap_m: got {gap!r}, expected metres from 0 to 10")
    window = table.get("window")
    if window is not None and not (
        isinstance(window, list) and len(window) == 4 and all(map(_is_number, window))
    ):
        faults.append("window: expected [x0, y0, x1, y1] in drawing units")
    layers = _layers(table.get("layers", {}), faults)
    if faults:
        return ReadingChoices()
    return ReadingChoices(
        unit if isinstance(unit, str) else None,
        (window[0], window[1], window[2], window[3]) if isinstance(window, list) else None,
        layers,
        float(gap) if isinstance(gap, int | float) else None,
    )


def _layers(table: object, faults: list[str]) -> LayerPatterns:
    known = [role.name for role in fields(LayerPatterns)]
    if not isinstance(table, dict):
        faults.append("layers: expected a table of patterns")
        return LayerPatterns()
    found: dict[str, tuple[str, ...]] = {}
    for key, value in table.items():
        if key not in known:
            faults.append(f"layers.{clean_text(key)}: unknown, expected one of {', '.join(known)}")
        elif not (isinstance(value, list) and all(isinstance(pattern, str) for pattern in value)):
            faults.append(f'layers.{key}: expected a list of patterns, such as ["A-WALL*"]')
        else:
            found[key] = tuple(value)
    return LayerPatterns(**found) if not faults else LayerPatterns()


def used_choices(plan: Plan, window: Window | None = None, door_gap: float | None = None) -> ReadingChoices:
    """Return the choices that read a plan again in the same way: its unit, and the role of each of its layers.

    Layers named for rooms are settled only where they outline the rooms: a choice of them is kept to, even where it
    gives no room.
    """
    by_role = {
        key: tuple(_escaped(use.layer) for use in plan.layers if use.role == role)
        for key, role in ROLES.items()
    }
    if not any(room.closed_by == "outline" for room in plan.rooms):
        by_role["rooms"] = ()
    rest = ("furniture", "stairs", "annotation", "other")
    ignored = tuple(_escaped(use.layer) for use in plan.layers if use.role in rest)
    unit = plan.unit.name if plan.unit.name in OPTION_UNITS else None
    return ReadingChoices(unit, window, LayerPatterns(**by_role, ignored=ignored), door_gap)


def _escaped(layer: str) -> str:
    """Return a pattern that only this layer's name matches."""
    return re.sub(r"([*?[])", r"[\1]", layer)


def _quoted(text: str) -> str:
    return json.dumps(text, ensure_ascii=False)


def _is_number(value: object) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and isfinite(value)
