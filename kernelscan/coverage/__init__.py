"""The questions people ask of a room: where may one device go, and from where does it see everything."""

from kernelscan.coverage.mounting import room_zones
from kernelscan.coverage.zones import CornerZone, FloorZone, Mount, RoomZones, Spot, WallZone

__all__ = ["CornerZone", "FloorZone", "Mount", "RoomZones", "Spot", "WallZone", "room_zones"]
