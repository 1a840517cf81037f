"""What a building is: frozen values with their rules, and nothing about files, questions or paper."""

from kernelscan.plan.device import Clearances, Device, Fixing, Projection
from kernelscan.plan.plan import Plan, Problem
from kernelscan.plan.room import Fixture, Obstacle, Opening, Room, Source, WallRef

__all__ = [
    "Clearances",
    "Device",
    "Fixing",
    "Fixture",
    "Obstacle",
    "Opening",
    "Plan",
    "Problem",
    "Projection",
    "Room",
    "Source",
    "WallRef",
]
