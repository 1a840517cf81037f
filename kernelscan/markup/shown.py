"""What the sheets show of one room: whose zones are hatched, which points are marked, and how they are tagged.

The exact answer is shown unless small features were left out; then it is the answer without them. Without devices the
zones of the room's own answer are hatched and its best points marked. With devices the zones are those of one of them,
the cheapest that covers the room, or the first where none has a cost; and the best point of every device that covers
the room is marked, where several share a point once for all of them. Where none covers the room, the best partial point
is marked instead.
"""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from math import atan2, pi

import numpy as np

from kernelscan.coverage import RoomAnswer, RoomZones, WallZone
from kernelscan.coverage.device_spots import DeviceAnswer, PartialSpot, cheapest
from kernelscan.coverage.features import Feature
from kernelscan.coverage.reasons import Reasons
from kernelscan.markup.style import MARKS
from kernelscan.plan import Fixing, Room, WallRef

__all__ = [
    "Nook",
    "ShownArea",
    "ShownRoom",
    "ShownSpot",
    "conflict_walls",
    "device_tag",
    "shown",
    "wall_normal",
]

SAME_POINT = 1e-3
"""Metres: two devices fixed nearer to each other than this have one mark."""


@dataclass(frozen=True, slots=True, eq=False)
class ShownArea:
    """A zone in plan: its rings, an outline and holes; an outline of two points is a line, of one a point."""

    fixing: Fixing
    rings: tuple[np.ndarray, ...]


@dataclass(frozen=True, slots=True, eq=False)
class Nook:
    """A corner that is a zone: its point ``(2,)``, and the direction and the angle of the sector it encloses."""

    point: np.ndarray
    bearing: float
    field: float


@dataclass(frozen=True, slots=True, eq=False)
class ShownSpot:
    """A marked point.

    Attributes
    ----------
    tag
        The letter of its kind, or the devices that are fixed there.
    fixing, walls
        What it is fixed to.
    point
        ``(2,)`` metres.
    bearing, field
        The sector that its symbol shows: a full circle where there is no bearing.
    aims, devices
        Where devices are to point, radians from the x axis, and which these are by their places in the file.
    is_partial
        Whether the device covers the room only in part from there.
    """

    tag: str
    fixing: Fixing
    walls: tuple[WallRef, ...]
    point: np.ndarray
    bearing: float | None
    field: float
    aims: tuple[float, ...] = ()
    devices: tuple[int, ...] = ()
    is_partial: bool = False


@dataclass(frozen=True, slots=True, eq=False)
class ShownRoom:
    """What is shown of one room.

    Attributes
    ----------
    answer
        Everything that is known of it.
    basis
        The answer without any device that is shown: the exact one, or the one without small features.
    areas, stretches, nooks
        The zones that are hatched; walls are those of the basis.
    spots
        The points that are marked.
    """

    answer: RoomAnswer
    basis: RoomZones
    areas: tuple[ShownArea, ...]
    stretches: tuple[WallZone, ...]
    nooks: tuple[Nook, ...]
    spots: tuple[ShownSpot, ...]

    @property
    def room(self) -> Room:
        """The room as it is."""
        return self.answer.room

    @property
    def conflict(self) -> tuple[WallRef, ...]:
        """The walls of the basis that exclude each other."""
        return conflict_walls(self.basis)

    @property
    def features(self) -> tuple[tuple[str, Feature], ...]:
        """The small features that were left out, each with its tag."""
        if self.answer.tolerant is None:
            return ()
        features = self.answer.tolerant.simplified.features
        return tuple((f"F{number}", feature) for number, feature in enumerate(features, 1))

    @property
    def tried(self) -> Reasons | None:
        """The best point that was tried and what it misses, where no point of the basis sees every wall."""
        return self.answer.reasons if self.basis.kernel.kind == "empty" else None

    @property
    def is_uncovered(self) -> bool:
        """Whether there are devices, and none of them covers the room."""
        return bool(self.answer.devices) and not any(each.covers for each in self.answer.devices)


def shown(answer: RoomAnswer) -> ShownRoom:
    """Return what the sheets show of a room."""
    basis = answer.zones if answer.tolerant is None else answer.tolerant.zones
    if answer.devices:
        chosen = hatched_device(answer.devices)
        plain = ShownRoom(answer, basis, (), (), (), tuple(_device_spots(answer.devices, basis.room)))
        return plain if chosen is None else _with_zones(plain, chosen)
    ceiling = () if basis.ceiling is None else (ShownArea("ceiling", (basis.ceiling.vertices,)),)
    nooks = tuple(
        Nook(each.spot.point, each.spot.bearing or 0.0, each.spot.field_of_view) for each in basis.corners
    )
    return ShownRoom(answer, basis, ceiling, basis.walls, nooks, tuple(_plain_spots(basis)))


def hatched_device(devices: Iterable[DeviceAnswer]) -> DeviceAnswer | None:
    """Return the device whose zones are hatched in a room: the cheapest that covers it, else the first that does."""
    covering = [each for each in devices if each.covers]
    return cheapest(covering) or next(iter(covering), None)


def device_tag(index: int) -> str:
    """Return the tag of a device by its place in the file, from 0."""
    return f"D{index + 1}"


def conflict_walls(zones: RoomZones) -> tuple[WallRef, ...]:
    """Return the two or three walls that exclude each other; none where a point sees every wall."""
    if zones.kernel.kind != "empty":
        return ()
    return tuple(WallRef(int(ring), int(edge)) for ring, edge in zones.kernel.conflict)


def wall_normal(room: Room, wall: WallRef) -> np.ndarray:
    """Return the unit vector ``(2,)`` from a wall into its room: to the left of the ring's direction."""
    start, end = room.wall_ends(wall)
    along = (end - start) / np.hypot(*(end - start))
    return np.array([-along[1], along[0]])


def _plain_spots(zones: RoomZones) -> Iterator[ShownSpot]:
    for spot in zones.recommended:
        letter = MARKS[spot.mount].letter
        yield ShownSpot(letter, spot.mount, spot.walls, spot.point, spot.bearing, spot.field_of_view)


def _with_zones(plain: ShownRoom, device: DeviceAnswer) -> ShownRoom:
    fixing: Fixing = "ceiling" if "ceiling" in device.device.fixings else "floor"
    return replace(
        plain,
        areas=tuple(_areas(device, fixing)),
        stretches=tuple(WallZone(place.walls, place.ends) for place in device.stretches),
        nooks=tuple(Nook(place.ends[0], place.bearing, place.field) for place in device.corners),
    )


def _areas(device: DeviceAnswer, fixing: Fixing) -> Iterator[ShownArea]:
    if device.area is None:
        return
    for piece in device.area.pieces:
        rings = (np.asarray(piece.outline), *(np.asarray(hole) for hole in piece.holes))
        yield ShownArea(fixing, rings)
    if not device.area.pieces:
        yield ShownArea(fixing, (device.area.corners,))


def _device_spots(devices: Sequence[DeviceAnswer], room: Room) -> Iterator[ShownSpot]:
    """Yield the best point of each device that covers the room, or the best partial one of all."""
    spots: list[ShownSpot] = []
    for index, answer in enumerate(devices):
        for best in answer.spots[:1]:
            aims = () if best.bearing is None else (best.bearing,)
            sector = best.bearing, best.field
            _merge(
                spots,
                ShownSpot(device_tag(index), best.fixing, best.walls, best.point, *sector, aims, (index,)),
            )
    partial = [index for index, answer in enumerate(devices) if answer.partial]
    if not spots and partial:
        most = max(partial, key=lambda index: round(devices[index].partial[0].aim.floor, 6))
        spots.append(_partial_spot(most, devices[most].partial[0], room))
    yield from spots


def _merge(spots: list[ShownSpot], spot: ShownSpot) -> None:
    """Add a spot, or what it says to the one that is there already."""
    for index, other in enumerate(spots):
        if other.fixing == spot.fixing and np.hypot(*(other.point - spot.point)) < SAME_POINT:
            aims = tuple(dict.fromkeys((*other.aims, *spot.aims)))
            tag, both = f"{other.tag}, {spot.tag}", (*other.devices, *spot.devices)
            spots[index] = replace(other, tag=tag, aims=aims, devices=both)
            return
    spots.append(spot)


def _partial_spot(index: int, spot: PartialSpot, room: Room) -> ShownSpot:
    normals = [wall_normal(room, wall) for wall in spot.walls]
    bearing, field = None, 2 * pi
    if normals:
        x, y = sum(normals, start=np.zeros(2))
        bearing = atan2(y, x)
        field = pi - float(np.arccos(np.clip(normals[0] @ normals[-1], -1.0, 1.0)))
    tag = f"{device_tag(index)} {100 * spot.aim.floor:.0f} %"
    aims = (spot.aim.bearing,)
    return ShownSpot(
        tag, spot.fixing, spot.walls, spot.point, bearing, field, aims, (index,), is_partial=True
    )
