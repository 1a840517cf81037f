"""A drawing file into a plan: open it, take its strokes and labels, find its unit and its rooms, name them.

Everything up to the rooms is in drawing units; from the outlines on, everything is in metres.
"""

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from os import PathLike
from pathlib import Path

import numpy as np

from kernelscan.plan import Plan, Problem, Room
from kernelscan.plan.room import NameSource
from kernelscan.reading.closed_rooms import FoundRoom, chosen_outlines, with_obstacles
from kernelscan.reading.explode import drawing_contents
from kernelscan.reading.files import open_drawing
from kernelscan.reading.layers import LayerPatterns, LayerRole, layer_role
from kernelscan.reading.names import RoomLabel, labels_in_rings, room_label
from kernelscan.reading.outlines import closed_outlines, open_outline_problems
from kernelscan.reading.strokes import Contents
from kernelscan.reading.unit_rules import absurd_unit, drawing_unit, no_unit
from kernelscan.tolerances import Tolerances

__all__ = ["read_plan"]


@dataclass(frozen=True, slots=True, eq=False)
class _Reading:
    """What does not depend on the unit: the contents, the layers' roles, the options."""

    contents: Contents
    roles: Mapping[str, LayerRole]
    patterns: LayerPatterns
    tolerances: Tolerances

    def rooms(self, metres: float) -> tuple[list[FoundRoom], str, list[Problem]]:
        """Return the rooms, the rule by which they were taken, and the problems, for a unit of so many metres."""
        strokes = self.contents.strokes
        outlines, faults = closed_outlines(strokes, metres, self.tolerances.snap)
        chosen, rule, problems = chosen_outlines(
            outlines, self.roles, bool(self.patterns.rooms), self.tolerances
        )
        obstacles = [outline for outline in outlines if self.roles[outline.stroke.layer].role == "obstacle"]
        found, more = with_obstacles(chosen, obstacles, self.tolerances.snap)
        parts = [stroke for stroke in strokes if self.roles[stroke.layer].role == "room"]
        gaps = open_outline_problems(parts, metres, self.tolerances.snap)
        faults = [
            fault
            for fault in faults
            if self.roles[fault.source.layer].role in {"room", "obstacle", "unknown"}
        ]
        return found, rule, [*faults, *gaps, *problems, *more]

    def areas(self, metres: float) -> Sequence[float]:
        """Return the areas of the rooms under a unit."""
        return [found.outline.area for found in self.rooms(metres)[0]]


def read_plan(
    path: str | PathLike[str],
    *,
    unit: str | None = None,
    layers: LayerPatterns = LayerPatterns(),
    tolerances: Tolerances = Tolerances(),
) -> Plan:
    """Read a DXF drawing.

    Parameters
    ----------
    path
        The drawing: DXF, text or binary, release 12 to 2018.
    unit
        The drawing's unit, over what its header says: ``mm``, ``cm``, ``dm``, ``m``, ``in`` or ``ft``.
    layers
        Which layers are what; by the published conventions where nothing is said.
    tolerances
        The chord error of curves, the snap distance and the smallest room.

    Returns
    -------
    Plan
        Its rooms in metres, the rule by which they were found, the problems met and the linework.

    Raises
    ------
    InputError
        If the file cannot be read as a drawing, or says no unit and none is given; the text is one line.
    """
    file = Path(path)
    drawing, repairs = open_drawing(file)
    said = drawing_unit(drawing, unit)
    contents = drawing_contents(drawing, tolerances.chord / (said[0].metres if said else 1.0))
    reading = _Reading(contents, _roles(contents, layers), layers, tolerances)
    if said is None:
        raise no_unit(file.name, drawing.header.get("$INSUNITS"), reading.areas)
    found, rule, problems = reading.rooms(said[0].metres)
    checked = (
        absurd_unit([f.outline.area for f in found], said[0], reading.areas) if said[1] == "header" else []
    )
    return Plan(
        file=file.name,
        unit=said[0],
        unit_from=said[1],
        rooms=_rooms(found, contents, said[0].metres),
        room_rule=rule,
        problems=(*repairs, *contents.problems, *checked, *problems),
        linework=_linework(contents, said[0].metres),
    )


def _roles(contents: Contents, patterns: LayerPatterns) -> dict[str, LayerRole]:
    """Return the role of each layer, and, by the same words, of each block."""
    roles = {
        stroke.blocks: layer_role(stroke.blocks, LayerPatterns())
        for stroke in contents.strokes
        if stroke.blocks
    }
    return roles | {layer: layer_role(layer, patterns) for layer in contents.layers()}


def _rooms(found: Sequence[FoundRoom], contents: Contents, metres: float) -> tuple[Room, ...]:
    rings = [room.outline.ring for room in found]
    labels = labels_in_rings(rings, contents.labels, metres)
    on_layer = Counter(room.outline.stroke.layer for room in found)
    rooms = []
    for number, (room, inside) in enumerate(zip(found, labels, strict=True), 1):
        outline = room.outline
        own_layer = outline.stroke.layer if on_layer[outline.stroke.layer] == 1 else ""
        x, y = outline.centre
        name, name_from = _name(number, room_label(inside, (x / metres, y / metres)), own_layer)
        rooms.append(
            Room(f"R{number:03d}", name, outline.ring, room.obstacles, (), name_from, outline.source)
        )
    return tuple(rooms)


def _name(number: int, label: RoomLabel, own_layer: str) -> tuple[str, NameSource]:
    """Return the name by the label, by a layer that only this room lies on, or by the number."""
    if label.name:
        return label.name, "label"
    if own_layer not in {"", "0"}:
        return own_layer, "layer"
    return f"Room {number}", "number"


def _linework(contents: Contents, metres: float) -> tuple[np.ndarray, ...]:
    """Return the strokes in metres for the background."""
    lines = []
    for stroke in contents.strokes:
        points = stroke.points * metres
        closing = stroke.closed and np.any(points[0] != points[-1])
        line = np.concatenate((points, points[:1])) if closing else points
        line.flags.writeable = False
        lines.append(line)
    return tuple(lines)
