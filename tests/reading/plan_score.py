"""How well a reading matches the plan as it was meant."""

from dataclasses import dataclass, field
from math import hypot

from plan_generator import TruePlan, TrueRoom

from kernelscan.plan import Plan, Room

AREA = 1e-3
PLACE = 0.05


@dataclass
class Score:
    """How many rooms there are, are missed, are reported falsely, and are misnamed."""

    rooms: int = 0
    missed: int = 0
    false: int = 0
    misnamed: int = 0
    notes: list[str] = field(default_factory=list)

    def __add__(self, other: "Score") -> "Score":
        return Score(
            self.rooms + other.rooms,
            self.missed + other.missed,
            self.false + other.false,
            self.misnamed + other.misnamed,
            self.notes + other.notes,
        )


def score(truth: TruePlan, plan: Plan) -> Score:
    """Match each true room with a room read of the same place (5 cm) and area (0.1 %), each at most once."""
    left = list(plan.rooms)
    result = Score(rooms=len(truth.rooms))
    for true in truth.rooms:
        found = next((room for room in left if _same(true, room)), None)
        if found is None:
            result.missed += 1
            continue
        left.remove(found)
        result.misnamed += bool(true.name) and found.name != true.name
    result.false = len(left)
    if result.missed or result.false or result.misnamed:
        result.notes.append(f"{truth.manner}: missed {result.missed}, false {result.false}")
    return result


def _same(true: TrueRoom, room: Room) -> bool:
    x, y = (room.outline.min(axis=0) + room.outline.max(axis=0)) / 2
    return (
        abs(room.area - true.area) <= AREA * true.area
        and hypot(x - true.middle[0], y - true.middle[1]) <= PLACE
    )
