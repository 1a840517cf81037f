"""What devices can do in a room, as entries of the report."""

from collections.abc import Sequence
from math import degrees, isfinite
from typing import TypedDict

import numpy as np

from kernelscan.coverage.device_spots import DeviceAnswer, DeviceSpot, PartialSpot, cheapest
from kernelscan.coverage.device_zones import Place
from kernelscan.coverage.setting_out import Offset
from kernelscan.geometry.shapes import Patch
from kernelscan.plan import WallRef

__all__ = ["DeviceEntry", "device_entries"]

Position = list[float]
Wall = list[int]

PARTIAL_SPOTS = 3
"""How many of the places from which a device sees only a part are reported."""


class OffsetEntry(TypedDict):
    """One setting-out distance: from a face or a corner of a wall, and where the tape begins."""

    wall: Wall
    start: Position
    distance: float


class SettingOutEntry(TypedDict):
    """The two distances that fix a point; ``by`` is ``faces`` or ``corners``."""

    by: str
    offsets: list[OffsetEntry]
    on_grid: bool


class DeviceSpotEntry(TypedDict):
    """A point at which a device covers the whole room."""

    fixed_to: str
    walls: list[Wall]
    point: Position
    lens: Position
    bearing_deg: float | None
    bearing_slack_deg: float | None
    field_needed_deg: float
    farthest: float
    density: float | None
    floor_from: float | None
    floor_to: float | None
    tolerance: float
    binding: list[Wall]
    setting_out: SettingOutEntry


class PartialEntry(TypedDict):
    """A point from which a device sees a part of the room, well aimed."""

    fixed_to: str
    walls: list[Wall]
    point: Position
    bearing_deg: float
    floor_seen: float
    wall_seen: float


class PieceEntry(TypedDict):
    """A piece of the area in which a lens may be."""

    outline: list[Position]
    holes: list[list[Position]]


class PlaceEntry(TypedDict):
    """A stretch of wall on which a device covers the room."""

    wall: Wall
    ends: list[Position]


class DeviceZonesEntry(TypedDict):
    """Where a device covers the whole room."""

    area: list[PieceEntry]
    walls: list[PlaceEntry]
    corners: list[Position]


class DeviceEntry(TypedDict):
    """What one device can do in one room."""

    device: str
    covers: bool
    cheapest: bool
    reach: float | None
    reach_limit: str
    obstruction: str | None
    zones: DeviceZonesEntry
    spots: list[DeviceSpotEntry]
    alternatives: list[DeviceSpotEntry]
    partial: list[PartialEntry]


def device_entries(answers: Sequence[DeviceAnswer]) -> list[DeviceEntry]:
    """Return an entry for each device, in the file's order."""
    best = cheapest(answers)
    return [_entry(answer, answer is best) for answer in answers]


def _entry(answer: DeviceAnswer, is_cheapest: bool) -> DeviceEntry:
    return {
        "device": answer.device.name,
        "covers": answer.covers,
        "cheapest": is_cheapest,
        "reach": _finite(answer.limits.reach),
        "reach_limit": answer.limits.reach_limit,
        "obstruction": answer.obstruction,
        "zones": {
            "area": [_piece(piece) for piece in answer.area.pieces] if answer.area else [],
            "walls": [_place(place) for place in answer.stretches],
            "corners": [_position(place.ends[0]) for place in answer.corners],
        },
        "spots": [_spot(spot) for spot in answer.spots],
        "alternatives": [_spot(spot) for spot in answer.alternatives],
        "partial": [_partial(spot) for spot in answer.partial[:PARTIAL_SPOTS]],
    }


def _spot(spot: DeviceSpot) -> DeviceSpotEntry:
    near, far = (None, None) if spot.floor_edges is None else spot.floor_edges
    return {
        "fixed_to": spot.fixing,
        "walls": _walls(spot.walls),
        "point": _position(spot.point),
        "lens": _position(spot.lens),
        "bearing_deg": None if spot.bearing is None else degrees(spot.bearing),
        "bearing_slack_deg": None if spot.bearing_slack is None else degrees(spot.bearing_slack),
        "field_needed_deg": degrees(spot.field),
        "farthest": spot.farthest,
        "density": spot.density,
        "floor_from": None if near is None else _finite(near),
        "floor_to": None if far is None else _finite(far),
        "tolerance": spot.tolerance,
        "binding": _walls(spot.binding),
        "setting_out": {
            "by": spot.setting_out.by,
            "offsets": [_offset(offset) for offset in spot.setting_out.offsets],
            "on_grid": spot.on_grid,
        },
    }


def _partial(spot: PartialSpot) -> PartialEntry:
    return {
        "fixed_to": spot.fixing,
        "walls": _walls(spot.walls),
        "point": _position(spot.point),
        "bearing_deg": degrees(spot.aim.bearing),
        "floor_seen": spot.aim.floor,
        "wall_seen": spot.aim.wall,
    }


def _offset(offset: Offset) -> OffsetEntry:
    return {"wall": list(offset.wall), "start": _position(offset.start), "distance": offset.distance}


def _place(place: Place) -> PlaceEntry:
    return {"wall": list(place.walls[0]), "ends": [_position(end) for end in place.ends]}


def _piece(piece: Patch) -> PieceEntry:
    holes = [np.asarray(hole).tolist() for hole in piece.holes]
    return {"outline": np.asarray(piece.outline).tolist(), "holes": holes}


def _position(point: np.ndarray) -> Position:
    return [float(value) for value in point]


def _walls(walls: Sequence[WallRef]) -> list[Wall]:
    return [list(wall) for wall in walls]


def _finite(value: float) -> float | None:
    """JSON has no infinity: what is unbounded is null."""
    return value if isfinite(value) else None
