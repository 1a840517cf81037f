"""Values as a sheet says them: metres and square metres, or feet and inches, by the custom of the drawing.

A range is rounded up and a tolerance down, so that what is printed is never kinder than what was found.
"""

from dataclasses import dataclass
from math import ceil, degrees, floor, isclose

from kernelscan.coverage.zones import RoomZones
from kernelscan.units import feet_and_inches

__all__ = ["Custom", "angle_in_words", "kernel_in_words"]

SLACK = 1e-9
"""In the last printed place: a value that is whole but for its rounding is not pushed over."""


@dataclass(frozen=True, slots=True)
class Custom:
    """Whether lengths are read in feet and inches or in metres."""

    imperial: bool

    @property
    def length_unit(self) -> str:
        """Unit of lengths in the head of a table."""
        return "ft-in" if self.imperial else "m"

    @property
    def area_unit(self) -> str:
        """Unit of areas in the head of a table."""
        return "ft²" if self.imperial else "m²"

    @property
    def tolerance_unit(self) -> str:
        """Unit of tolerances in the head of a table."""
        return "ft-in" if self.imperial else "mm"

    def area(self, square_metres: float) -> str:
        """Return an area without its unit; small ones keep the digits that matter."""
        value = square_metres / 0.3048**2 if self.imperial else square_metres
        return f"{value:.4f}" if 0 < value < 0.095 else f"{value:.2f}" if value < 99.995 else f"{value:.1f}"

    def position(self, metres: float) -> str:
        """Return a coordinate to the millimetre or the sixteenth of an inch."""
        return feet_and_inches(metres) if self.imperial else f"{round(metres, 3) + 0.0:.3f}"

    def range_up(self, metres: float) -> str:
        """Return a range needed, rounded up to the centimetre or the inch."""
        if self.imperial:
            return feet_and_inches(_up(metres / 0.0254) * 0.0254)
        return f"{_up(metres * 100) / 100:.2f}"

    def tolerance_down(self, metres: float) -> str:
        """Return a tolerance, rounded down to the millimetre or the sixteenth of an inch."""
        if self.imperial:
            return feet_and_inches(_down(metres / 0.0254 * 16) / 16 * 0.0254)
        return f"{_down(metres * 1000)}"

    def length_up(self, metres: float) -> str:
        """Return a length with its unit, rounded up to the millimetre or the sixteenth of an inch."""
        if self.imperial:
            return feet_and_inches(_up(metres / 0.0254 * 16) / 16 * 0.0254)
        return f"{_up(metres * 1000)} mm"

    def length(self, metres: float) -> str:
        """Return a length with its unit."""
        return feet_and_inches(metres) if self.imperial else f"{metres:.2f} m"


def _up(value: float) -> int:
    return ceil(value - SLACK)


def _down(value: float) -> int:
    return floor(value + SLACK)


def angle_in_words(radians: float) -> str:
    """Return a field of view in whole degrees, rounded up."""
    return f"{_up(degrees(radians))}°"


def kernel_in_words(zones: RoomZones, custom: Custom) -> str:
    """Return what part of the room sees every wall, in two or three words."""
    kernel = zones.kernel
    match kernel.kind:
        case "area" if isclose(kernel.area, zones.room.area, rel_tol=1e-9):
            return "whole room"
        case "area":
            return f"area {custom.area(kernel.area)} {custom.area_unit}"
        case "segment":
            ends = kernel.vertices
            return f"line {custom.length(float(((ends[1] - ends[0]) ** 2).sum() ** 0.5))}"
        case "point":
            return "one point"
        case _:
            return "no single point"
