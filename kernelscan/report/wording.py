"""Values as the terminal and the schedule say them: positions as the drawing counts them, lengths by its custom."""

from collections.abc import Sequence
from math import ceil, log10

from kernelscan.coverage import RoomZones
from kernelscan.coverage.wording import Custom, kernel_in_words
from kernelscan.plan import Plan, WallRef

__all__ = ["drawn_coordinate", "drawn_position", "kernel_or_reason", "range_in_words", "tolerance_in_words"]


def drawn_coordinate(plan: Plan, metres: float) -> str:
    """Return a coordinate in the drawing's own unit, to a millimetre or finer."""
    decimals = max(0, ceil(log10(plan.unit.metres / 0.001)))
    return f"{round(metres / plan.unit.metres, decimals) + 0.0:.{decimals}f}"


def drawn_position(plan: Plan, position: Sequence[float]) -> str:
    """Return a position in the drawing's own unit, such as ``(1200, 300) mm``."""
    return f"({', '.join(drawn_coordinate(plan, float(value)) for value in position)}) {plan.unit.name}"


def range_in_words(plan: Plan, metres: float) -> str:
    """Return a range that is needed, with its unit, rounded up."""
    custom = Custom(plan.unit.imperial)
    return custom.range_up(metres) + ("" if custom.imperial else " m")


def tolerance_in_words(plan: Plan, metres: float) -> str:
    """Return by how much something may be off, with its unit, rounded down."""
    custom = Custom(plan.unit.imperial)
    return custom.tolerance_down(metres) + ("" if custom.imperial else " mm")


def kernel_or_reason(plan: Plan, zones: RoomZones) -> str:
    """Return what part of the room sees every wall, or which walls keep any point from it."""
    if zones.kernel.kind != "empty":
        return kernel_in_words(zones, Custom(plan.unit.imperial))
    middles = []
    for wall in zones.kernel.conflict.tolist():
        start, end = zones.room.wall_ends(WallRef(*wall))
        middles.append(drawn_position(plan, (start / 2 + end / 2).tolist()))
    return f"nowhere: the walls at {', '.join(middles[:-1])} and {middles[-1]} exclude each other"
