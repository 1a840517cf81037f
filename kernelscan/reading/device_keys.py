"""The keys of a device file: their names, units and what a value may be.

A key that measures something ends in its unit, as ``height_m`` does. Lengths may be given in metres, millimetres, feet
or inches, one of them for each length; inside, they are metres, angles radians and densities pixels a metre.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from math import pi
from types import MappingProxyType
from typing import get_args

from kernelscan.plan import Fixing, Projection

__all__ = [
    "CLEARANCE_KEYS",
    "CLEAR_OF_OBSTACLES",
    "CLEAR_OF_OPENINGS",
    "CLEAR_OF_WALLS",
    "COST",
    "DENSITY",
    "DEVICE_KEYS",
    "FARTHEST",
    "FIXINGS",
    "FOCAL_LENGTH",
    "GRAZING",
    "HEIGHT",
    "HORIZONTAL_FIELD",
    "NEAREST",
    "PLACING_ERROR",
    "PROJECTIONS",
    "QUANTITIES",
    "SENSOR_HEIGHT",
    "SENSOR_WIDTH",
    "STAND_OFF",
    "TARGET_HEIGHT",
    "TILT",
    "VERTICAL_FIELD",
    "Quantity",
]

FIXINGS: tuple[Fixing, ...] = get_args(Fixing)
PROJECTIONS: tuple[Projection, ...] = get_args(Projection)

LENGTH_UNITS = MappingProxyType({"_m": 1.0, "_mm": 0.001, "_ft": 0.3048, "_in": 0.0254})
ANGLE_UNITS = MappingProxyType({"_deg": pi / 180})
IMAGE_UNITS = MappingProxyType({"_mm": 1.0})
DENSITY_UNITS = MappingProxyType({"_px_per_m": 1.0, "_px_per_ft": 1 / 0.3048})
NUMBER_UNITS = MappingProxyType({"": 1.0})


@dataclass(frozen=True, slots=True, eq=False)
class Quantity:
    """Something that is measured.

    Attributes
    ----------
    name
        The key without its unit.
    units
        Endings of the key, the usual one first, and what one of each is inside the program.
    expected
        The bounds in words, to be followed by the unit.
    allows
        Whether a finite number, in the unit it is written in, is within the bounds.
    """

    name: str
    units: Mapping[str, float]
    expected: str
    allows: Callable[[float], bool]

    @property
    def keys(self) -> tuple[str, ...]:
        """The keys under which it may stand, the usual one first."""
        return tuple(self.name + unit for unit in self.units)

    def expected_in(self, key: str) -> str:
        """Return what is expected of one of its keys, in words, such as ``a length above 0 m``."""
        unit = key.removeprefix(self.name).removeprefix("_").replace("px_per_", "px/")
        return f"{self.expected} {unit}".rstrip()


def _above_zero(value: float) -> bool:
    return value > 0


def _not_below_zero(value: float) -> bool:
    return value >= 0


def _length(name: str) -> Quantity:
    return Quantity(name, LENGTH_UNITS, "a length of at least 0", _not_below_zero)


HORIZONTAL_FIELD = Quantity(
    "horizontal_field", ANGLE_UNITS, "an angle above 0 and at most 360", lambda value: 0 < value <= 360
)
VERTICAL_FIELD = Quantity(
    "vertical_field", ANGLE_UNITS, "an angle above 0 and at most 180", lambda value: 0 < value <= 180
)
SENSOR_WIDTH = Quantity("sensor_width", IMAGE_UNITS, "a length above 0", _above_zero)
SENSOR_HEIGHT = Quantity("sensor_height", IMAGE_UNITS, "a length above 0", _above_zero)
FOCAL_LENGTH = Quantity("focal_length", IMAGE_UNITS, "a length above 0", _above_zero)
NEAREST = _length("nearest")
FARTHEST = Quantity("farthest", LENGTH_UNITS, "a length above 0", _above_zero)
DENSITY = Quantity("density", DENSITY_UNITS, "a density above 0", _above_zero)
HEIGHT = Quantity("height", LENGTH_UNITS, "a length above 0", _above_zero)
TILT = Quantity("tilt", ANGLE_UNITS, "an angle from -90 to 90", lambda value: -90 <= value <= 90)
TARGET_HEIGHT = _length("target_height")
GRAZING = Quantity(
    "grazing", ANGLE_UNITS, "an angle of at least 0 and under 90", lambda value: 0 <= value < 90
)
STAND_OFF = _length("stand_off")
PLACING_ERROR = _length("placing_error")
COST = Quantity("cost", NUMBER_UNITS, "a number of at least 0", _not_below_zero)

QUANTITIES = (
    HORIZONTAL_FIELD,
    SENSOR_WIDTH,
    VERTICAL_FIELD,
    SENSOR_HEIGHT,
    FOCAL_LENGTH,
    NEAREST,
    FARTHEST,
    DENSITY,
    HEIGHT,
    TILT,
    TARGET_HEIGHT,
    GRAZING,
    STAND_OFF,
    PLACING_ERROR,
    COST,
)
"""What is measured of a device."""

CLEAR_OF_WALLS, CLEAR_OF_OPENINGS = _length("walls"), _length("openings")
CLEAR_OF_OBSTACLES = _length("obstacles")
"""Its keys are tables, and what stands in them are name patterns with a length each."""

WORDS = ("name", "kind", "fixed_to", "projection", "pixels_across", "density_level", "clearance")

DEVICE_KEYS = (*WORDS, *(key for quantity in QUANTITIES for key in quantity.keys))
"""Every key of a device."""

CLEARANCE_KEYS = (*CLEAR_OF_WALLS.keys, *CLEAR_OF_OPENINGS.keys, *CLEAR_OF_OBSTACLES.keys)
"""Every key of its ``clearance`` table."""
