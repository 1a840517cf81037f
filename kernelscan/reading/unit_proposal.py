"""The unit of a drawing, found out from what it shows: a proposal with its reasons, never a silent guess.

Four witnesses are heard for each likely unit: labels that state a room's size, against the room as measured;
dimensions whose text is in feet and inches, against what they measure; the doors' swings, which are 0.6 to 1.1 m wide
(common practice, no source); and the median room, which is 4 to 60 m2 (likewise). The unit with the best evidence is
proposed; without any, none is.
"""

from dataclasses import dataclass
from statistics import median

import numpy as np

from kernelscan.reading.interpretation import Interpretation
from kernelscan.reading.label_sizes import length_in_feet
from kernelscan.reading.names import labels_in_rings, room_label
from kernelscan.units import Unit, unit_by_name

__all__ = ["PROPOSED", "UnitProposal", "proposed_unit"]

PROPOSED = ("mm", "cm", "m", "in", "ft")
NARROWEST_DOOR, WIDEST_DOOR = 0.6, 1.1
SMALLEST_ROOM, LARGEST_ROOM = 4.0, 60.0
WEIGHTS = {"labels": 8.0, "dimensions": 4.0, "doors": 2.0, "rooms": 1.0}


@dataclass(frozen=True, slots=True)
class UnitProposal:
    """A unit and why it is likely, in words."""

    unit: Unit
    reason: str


def proposed_unit(reading: Interpretation) -> UnitProposal | None:
    """Return the unit that the drawing's own sizes speak for; ``None`` if none does."""
    best: tuple[float, Unit, str] | None = None
    for name in PROPOSED:
        unit = unit_by_name(name)
        witnesses = _witnesses(reading, unit.metres)
        weight = sum(WEIGHTS[kind] for kind in witnesses)
        if weight and (best is None or weight > best[0]):
            best = (weight, unit, "; ".join(witnesses.values()))
    return UnitProposal(best[1], best[2]) if best else None


def _witnesses(reading: Interpretation, metres: float) -> dict[str, str]:
    """Return what speaks for a unit, by kind, in words."""
    found = [room.outline for room in reading.rooms(metres)[0]]
    spoken = {
        "labels": _labels(reading, [outline.ring for outline in found], metres),
        "dimensions": _dimensions(reading, metres),
        "doors": _doors(reading, metres),
    }
    if found and SMALLEST_ROOM <= (middle := median(outline.area for outline in found)) <= LARGEST_ROOM:
        spoken["rooms"] = (
            f"the only room has {middle:.1f} m2"
            if len(found) == 1
            else f"the median of {len(found)} rooms is {middle:.1f} m2"
        )
    return {kind: words for kind, words in spoken.items() if words}


def _labels(reading: Interpretation, rings: list[np.ndarray], metres: float) -> str:
    sizes = [
        (size.area, abs(float(_area(ring))))
        for ring, inside in zip(rings, labels_in_rings(rings, reading.contents.labels, metres), strict=True)
        if (size := room_label(inside).size) is not None and size.sure
    ]
    right = sum(abs(measured - stated) <= 0.05 * stated for stated, measured in sizes)
    return f"{right} of {len(sizes)} stated room sizes are right" if right and right * 2 >= len(sizes) else ""


def _dimensions(reading: Interpretation, metres: float) -> str:
    pairs = [
        (said, dimension.measured * metres)
        for dimension in reading.contents.dimensions
        if (said := length_in_feet(dimension.text)) is not None and said > 0
    ]
    right = sum(abs(measured - said) <= 0.01 * said for said, measured in pairs)
    return (
        f"{right} of {len(pairs)} dimensions in feet are right" if right and right * 2 >= len(pairs) else ""
    )


def _doors(reading: Interpretation, metres: float) -> str:
    spans = [
        float(np.hypot(*(s.points[-1] - s.points[0]))) / np.sqrt(2)
        for s in reading.contents.strokes
        if s.kind == "ARC"
        and len(s.points) > 2
        and reading.roles[s.layer].role in {"opening", "unknown", "wall"}
    ]
    if not spans:
        return ""
    wide = median(spans) * metres
    return f"the doors' swings are {wide:.2f} m wide" if NARROWEST_DOOR <= wide <= WIDEST_DOOR else ""


def _area(ring: np.ndarray) -> float:
    x, y = (ring - ring[0]).T
    return float(x[:-1] @ y[1:] - x[1:] @ y[:-1]) / 2
