"""The questions people ask of a room: where may one device go, and from where does it see everything."""

from kernelscan.coverage.zones import CornerZone, FloorZone, Mount, RoomZones, Spot, WallZone, room_zones

__all__ = ["CornerZone", "FloorZone", "Mount", "RoomZones", "Spot", "WallZone", "room_zones"]
