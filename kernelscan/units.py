"""Drawing units: the table of the header's codes, the units an option may name, and lengths as a person reads them.

Inside the package every length is in metres. This module is what the edges (reading, command line, writers)
convert with.
"""

from dataclasses import dataclass
from math import floor

__all__ = ["HEADER_UNITS", "OPTION_UNITS", "Unit", "feet_and_inches", "unit_by_name"]

US_SURVEY_FOOT = 1200 / 3937


@dataclass(frozen=True, slots=True)
class Unit:
    """A drawing unit: its short name and how many metres it measures."""

    name: str
    metres: float

    @property
    def imperial(self) -> bool:
        """Whether people who draw in this unit read feet and inches."""
        return self.name in {"in", "ft", "mi", "yd", "mil", "microinch"} or self.name.startswith("US-survey")


HEADER_UNITS: dict[int, Unit] = {
    1: Unit("in", 0.0254),
    2: Unit("ft", 0.3048),
    3: Unit("mi", 1609.344),
    4: Unit("mm", 0.001),
    5: Unit("cm", 0.01),
    6: Unit("m", 1.0),
    7: Unit("km", 1000.0),
    8: Unit("microinch", 2.54e-8),
    9: Unit("mil", 2.54e-5),
    10: Unit("yd", 0.9144),
    11: Unit("angstrom", 1e-10),
    12: Unit("nm", 1e-9),
    13: Unit("micron", 1e-6),
    14: Unit("dm", 0.1),
    15: Unit("dam", 10.0),
    16: Unit("hm", 100.0),
    17: Unit("Gm", 1e9),
    18: Unit("au", 149597870700.0),
    19: Unit("ly", 9460730472580800.0),
    20: Unit("pc", 3.0856775814913673e16),
    21: Unit("US-survey ft", US_SURVEY_FOOT),
    22: Unit("US-survey in", US_SURVEY_FOOT / 12),
    23: Unit("US-survey yd", US_SURVEY_FOOT * 3),
    24: Unit("US-survey mi", US_SURVEY_FOOT * 5280),
}
"""$INSUNITS to units, as the DXF reference lists them; 0 (no unit) is left out on purpose."""

OPTION_UNITS: tuple[str, ...] = ("mm", "cm", "dm", "m", "in", "ft")
"""The units that ``--unit`` accepts."""


def unit_by_name(name: str) -> Unit:
    """Return the unit of that short name; ``KeyError`` if there is none."""
    return {unit.name: unit for unit in HEADER_UNITS.values()}[name]


def feet_and_inches(metres: float, denominator: int = 16) -> str:
    """Return a length as feet and inches to the given fraction of an inch, such as ``12'-3 1/2"``."""
    parts = floor(abs(metres) / 0.0254 * denominator + 0.5)
    inches, fraction = divmod(parts, denominator)
    feet, inches = divmod(inches, 12)
    while fraction and fraction % 2 == 0:
        fraction, denominator = fraction // 2, denominator // 2
    tail = f" {fraction}/{denominator}" if fraction else ""
    sign = "-" if metres < 0 and parts else ""
    return f"{sign}{feet}'-{inches}{tail}\""
