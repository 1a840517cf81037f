"""Found outlines into rooms: numbered, named, with the openings of their walls, their stated sizes checked."""

from collections import Counter
from collections.abc import Sequence

import numpy as np

from kernelscan.plan import Opening, Problem, Room, WallRef
from kernelscan.plan.room import NameSource
from kernelscan.reading.closed_rooms import FoundRoom, RoomEdge
from kernelscan.reading.drawn_openings import drawn_openings, with_drawn
from kernelscan.reading.fixtures import fixtures_in_rings
from kernelscan.reading.interpretation import Interpretation
from kernelscan.reading.names import RoomLabel, labels_in_rings, room_label
from kernelscan.reading.outlines import Outline
from kernelscan.reading.strokes import Label

__all__ = ["made_rooms"]

STATED = 0.05
"""A label's size may differ from the measured one by this part."""


def made_rooms(
    found: Sequence[FoundRoom], reading: Interpretation, metres: float
) -> tuple[tuple[Room, ...], list[Problem]]:
    """Return the rooms, numbered and named, and a problem for each label that states another size than measured.

    Parameters
    ----------
    found
        In the order of their numbers; in metres.
    reading
        The contents, in drawing units, and the layers' roles.
    metres
        How many metres a drawing unit is.
    """
    rings = [room.outline.ring for room in found]
    contents, thickest = reading.contents, reading.tolerances.thickest_wall
    labels = labels_in_rings(rings, contents.labels, metres)
    drawn = drawn_openings(rings, contents.strokes, reading.roles, metres, reading.tolerances)
    fixtures = fixtures_in_rings(rings, contents.strokes, metres)
    on_layer = Counter(room.outline.stroke.layer for room in found)
    rooms: list[Room] = []
    problems: list[Problem] = []
    for number, (room, inside) in enumerate(zip(found, labels, strict=True), 1):
        outline = room.outline
        alone = on_layer[outline.stroke.layer] == 1 and room.closed_by == "outline"
        own_layer = outline.stroke.layer if alone else ""
        known = _openings(outline.ring, room.edges)
        more = drawn[number - 1]
        openings = with_drawn(known, more, outline.ring, thickest) if more else known
        label = _label(outline, inside, metres)
        name, name_from = _name(number, label, own_layer)
        rooms.append(
            Room(
                f"R{number:03d}",
                name,
                outline.ring,
                obstacles=room.obstacles,
                openings=openings,
                fixtures=fixtures[number - 1],
                name_from=name_from,
                source=outline.source,
                closed_by=room.closed_by,
            )
        )
        problems += _size_problems(rooms[-1], label, outline)
    return tuple(rooms), problems


def _label(outline: Outline, inside: Sequence[Label], metres: float) -> RoomLabel:
    if len(inside) < 2:
        return room_label(inside)
    x, y = outline.centre
    return room_label(inside, (x / metres, y / metres))


def _size_problems(room: Room, label: RoomLabel, outline: Outline) -> list[Problem]:
    """Return a problem if the label states a size that differs from the measured one by more than 5 %."""
    stated = label.size
    if stated is None or abs(room.area - stated.area) <= STATED * stated.area:
        return []
    said = f"the label says {stated.text}, {stated.area:.2f} m2"
    text = f"{room.id} {room.name}: {said}, but {room.area:.2f} m2 were measured"
    return [Problem("stated-size", text, outline.centre, room.source)]


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
