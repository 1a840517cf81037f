"""A drawing file into a plan: open it, take its strokes and labels, find its unit and its rooms, name them.

Everything up to the rooms is in drawing units; from the outlines on, everything is in metres.
"""

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from os import PathLike
from pathlib import Path

import numpy as np

from kernelscan.plan import Opening, Plan, Problem, Room, WallRef
from kernelscan.plan.room import NameSource
from kernelscan.reading.closed_rooms import FoundRoom, RoomEdge, chosen_outlines, with_obstacles
from kernelscan.reading.drawn_openings import drawn_openings, with_drawn
from kernelscan.reading.explode import drawing_contents
from kernelscan.reading.files import open_drawing
from kernelscan.reading.layers import LayerPatterns, LayerRole, layer_role
from kernelscan.reading.loose_rooms import barriers_by_content, barriers_by_name, loose_rooms
from kernelscan.reading.names import RoomLabel, labels_in_rings, room_label
from kernelscan.reading.outlines import closed_outlines, open_outline_problems
from kernelscan.reading.strokes import Contents
from kernelscan.reading.unit_rules import absurd_unit, drawing_unit, no_unit
from kernelscan.reading.wall_layers import double_layers
from kernelscan.tolerances import Tolerances

__all__ = ["read_plan"]


BY_NAMED_WALLS = "No room is outlined; rooms are what the lines on wall, door and window layers enclose."
OPEN_PLAN = "No room is outlined, and the lines on wall, door and window layers close none: an open plan."
BY_DOUBLE_LINES = (
    "No layer is named for rooms or walls, so by content: rooms are what the double lines on {} enclose."
)
BY_LINES = (
    "No room is outlined and no layer is named for walls, so by content: rooms are what all lines enclose."
)


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
        obstacles = [outline for outline in outlines if self.roles[outline.stroke.layer].role == "obstacle"]
        parts = [stroke for stroke in strokes if self.roles[stroke.layer].role == "room"]
        gaps = open_outline_problems(parts, metres, self.tolerances.snap)
        faults = [
            fault
            for fault in faults
            if self.roles[fault.source.layer].role in {"room", "obstacle", "unknown"}
        ]
        by_option = bool(self.patterns.rooms)
        chosen, rule, problems = chosen_outlines(outlines, self.roles, by_option, self.tolerances)
        if not by_option and not any(part.is_ring(self.tolerances.snap / metres) for part in parts):
            loose = self._loose(metres, len(chosen))
            if loose is not None:
                return [*loose[0]], loose[1], [*gaps, *loose[2]]
        found, more = with_obstacles(chosen, obstacles, self.tolerances.snap)
        return found, rule, [*faults, *gaps, *problems, *more]

    def _loose(self, metres: float, outlined: int) -> tuple[list[FoundRoom], str, list[Problem]] | None:
        """Return the rooms that loose lines enclose, by names, else by content.

        By content only if there are more of them than are outlined; ``None`` means: keep to those.
        """
        strokes = self.contents.strokes
        named = barriers_by_name(strokes, self.roles)
        found, problems = loose_rooms(named, self.contents.labels, metres, self.tolerances)
        if found or any(problem.code == "open-plan" for problem in problems):
            return found, BY_NAMED_WALLS if found else OPEN_PLAN, problems
        every = barriers_by_content(strokes, self.roles, metres, self.tolerances)
        layers = double_layers(every.walls, metres, self.tolerances)
        if layers:
            walls = replace(every, walls=[stroke for stroke in every.walls if stroke.layer in layers])
            found, problems = loose_rooms(walls, self.contents.labels, metres, self.tolerances)
            if len(found) > outlined:
                return found, BY_DOUBLE_LINES.format(", ".join(sorted(layers))), problems
        if outlined:
            return None
        found, problems = loose_rooms(every, self.contents.labels, metres, self.tolerances)
        return found, BY_LINES, problems

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
        rooms=_rooms(found, reading, said[0].metres),
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


def _rooms(found: Sequence[FoundRoom], reading: _Reading, metres: float) -> tuple[Room, ...]:
    rings = [room.outline.ring for room in found]
    contents, thickest = reading.contents, reading.tolerances.thickest_wall
    labels = labels_in_rings(rings, contents.labels, metres)
    drawn = drawn_openings(rings, contents.strokes, reading.roles, metres, reading.tolerances)
    on_layer = Counter(room.outline.stroke.layer for room in found)
    rooms = []
    for number, (room, inside) in enumerate(zip(found, labels, strict=True), 1):
        outline = room.outline
        alone = on_layer[outline.stroke.layer] == 1 and room.closed_by == "outline"
        own_layer = outline.stroke.layer if alone else ""
        x, y = outline.centre
        known = _openings(outline.ring, room.edges)
        openings = with_drawn(known, drawn[number - 1], outline.ring, thickest)
        name, name_from = _name(number, room_label(inside, (x / metres, y / metres)), own_layer)
        rooms.append(
            Room(
                f"R{number:03d}",
                name,
                outline.ring,
                obstacles=room.obstacles,
                openings=openings,
                name_from=name_from,
                source=outline.source,
            )
        )
    return tuple(rooms)


def _openings(ring: np.ndarray, edges: Sequence[RoomEdge]) -> tuple[Opening, ...]:
    """Return which walls of a ring are openings: those whose middle lies on an opening edge."""
    found = []
    for k in range(len(ring)) if edges else ():
        a, b = ring[k], ring[(k + 1) % len(ring)]
        kind = next((edge.kind for edge in edges if _covers(edge.ends, (a + b) / 2)), None)
        if kind is not None:
            found.append(Opening(WallRef(0, k), kind, float(np.hypot(*(b - a)))))
    return tuple(found)


def _covers(ends: np.ndarray, point: np.ndarray) -> bool:
    along = ends[1] - ends[0]
    to = point - ends[0]
    long = float(np.hypot(*along))
    share = float(to @ along) / (long * long)
    return bool(abs(along[0] * to[1] - along[1] * to[0]) <= 1e-6 * long and 0 < share < 1)


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
