"""What a building is: frozen values with their rules, and nothing about files, questions or paper."""

from kernelscan.plan.device import Clearances, Device, Fixing, Projection
from kernelscan.plan.plan import LayerUse, Plan, Problem, View
from kernelscan.plan.room import Fixture, Obstacle, Opening, Room, Source, WallRef

__all__ = [
    "Clearances",
    "Device",
    "Fixing",
    "Fixture",
    "LayerUse",
    "Obstacle",
    "Opening",
    "Plan",
    "Problem",
    "Projection",
    "Room",
    "Source",
    "View",
    "WallRef",
]
