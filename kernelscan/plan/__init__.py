"""What a building is: frozen values with their rules, and nothing about files, questions or paper."""

from kernelscan.plan.plan import Plan, Problem
from kernelscan.plan.room import Obstacle, Opening, Room, Source, WallRef

__all__ = ["Obstacle", "Opening", "Plan", "Problem", "Room", "Source", "WallRef"]
