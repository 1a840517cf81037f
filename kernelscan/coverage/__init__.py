"""The questions people ask of a room: where may one device go, and from where does it see everything."""

from kernelscan.coverage.answers import RoomAnswer, TolerantAnswer, room_answer
from kernelscan.coverage.mounting import room_zones
from kernelscan.coverage.zones import CornerZone, FloorZone, Mount, RoomZones, Spot, WallZone

__all__ = [
    "CornerZone",
    "FloorZone",
    "Mount",
    "RoomAnswer",
    "RoomZones",
    "Spot",
    "TolerantAnswer",
    "WallZone",
    "room_answer",
    "room_zones",
]
