"""How a device points, on the sheet of its room: an arc with the angle of its aim, and a tag with height and tilt.

The arc turns from the wall that the device is fixed to, so that a fitter lays a protractor on it; from the x axis of
the plan where it is fixed to none. The tag has a small section: the horizon, dashed, and the axis of the device,
tilted against it by its angle.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise
from math import cos, degrees, pi, radians, sin

from kernelscan.coverage.wording import Custom
from kernelscan.markup.labels import GROUND, Label, Line, boxes_around, nearest_in
from kernelscan.markup.placing import Occupied
from kernelscan.markup.scene import Box, Fill, Item, Point, Stroke, Text
from kernelscan.markup.shown import ShownRoom, ShownSpot, device_tag
from kernelscan.markup.style import AIM_LENGTH, BODY, DIMENSION_PEN, HORIZON_PEN, WHITE
from kernelscan.markup.symbols import arc, arrow
from kernelscan.markup.tags import Tags
from kernelscan.markup.view import PlanView, clipped_segment
from kernelscan.plan import Device

__all__ = ["AimArc", "SectionLabel", "aim_arcs", "place_section_tags"]

RADII = (AIM_LENGTH + 3.0, AIM_LENGTH + 6.0, AIM_LENGTH + 9.0)
"""Of the arcs, in millimetres: the first at which the value is clear of everything."""
VALUE_OUT = 2.2
"""From an arc to the middle of its value."""
SECTION_WIDTH, AXIS, SECTION_ARC = 11.0, 9.0, 5.0
AROUND = (6.0, 9.0, 13.0, 18.0, 24.0, 31.0)
LEAST_SWEEP = radians(1.0)


@dataclass(frozen=True, slots=True)
class AimArc:
    """An arc from a dashed line of reference to the aim of a device, and its value."""

    centre: Point
    radius: float
    start: float
    sweep: float
    value: Text

    def items(self) -> Iterator[Item]:
        """Yield the arc drawn, with an arrowhead at the aim."""
        x, y = self.centre
        for angle in (self.start, self.start + self.sweep):
            end = x + (self.radius + 1.5) * cos(angle), y + (self.radius + 1.5) * sin(angle)
            yield Stroke((self.centre, end), HORIZON_PEN)
        points = arc(self.centre, self.radius, self.start, self.sweep)
        yield Stroke(points, DIMENSION_PEN)
        yield arrow(points[-2], points[-1])[1]
        yield Fill((self.value.corners,), WHITE)
        yield self.value


def aim_arcs(room: ShownRoom, view: PlanView, taken: Occupied) -> list[AimArc]:
    """Return an arc for each aim of a room's devices, their values clear of what is taken, and enter them there."""
    arcs = []
    for spot in room.spots:
        for aim in spot.aims:
            start = _reference(spot)
            sweep = (aim - start + pi) % (2 * pi) - pi
            if abs(sweep) >= LEAST_SWEEP:
                arcs.append(_arc(view.point(spot.point), start, sweep, taken))
                taken.add(arcs[-1].value.box)
    for turn in arcs:
        for start_point, end_point in pairwise(arc(turn.centre, turn.radius, turn.start, turn.sweep)):
            taken.add_line(start_point, end_point)
    return arcs


def _reference(spot: ShownSpot) -> float:
    """Return the direction of the wall on the right of a device, or of the x axis where it is fixed to none."""
    return 0.0 if spot.bearing is None else spot.bearing - spot.field / 2


def _arc(centre: Point, start: float, sweep: float, taken: Occupied) -> AimArc:
    middle = start + sweep / 2
    words = f"{degrees(abs(sweep)):.0f}°"
    found = []
    for radius in RADII:
        out = radius + VALUE_OUT
        at = centre[0] + out * cos(middle), centre[1] + out * sin(middle) - BODY / 2
        found.append(AimArc(centre, radius, start, sweep, Text(at, words, anchor="middle")))
    return next((each for each in found if taken.takes(each.value.box)), found[0])


@dataclass(frozen=True, slots=True)
class SectionLabel(Label):
    """A label with a small section beside its lines: the horizon and a tilted axis."""

    tilt: float | None = None

    @property
    def width(self) -> float:
        """Width of the ground in millimetres."""
        return Label(self.lines).width + (0.0 if self.tilt is None else SECTION_WIDTH)

    def items(self, box: Box) -> tuple[Item, ...]:
        """Return the label drawn in a box of its own size."""
        if self.tilt is None:
            return Label(self.lines, framed=True).items(box)
        ground, *_ = Label(self.lines, framed=True).items(box)
        text = Box(box.left, box.bottom, box.right - SECTION_WIDTH, box.top)
        _, *lines = Label(self.lines).items(text)
        return (ground, *lines, *_section(self.tilt, Box(text.right, box.bottom, box.right, box.top)))


def _section(tilt: float, box: Box) -> Iterator[Item]:
    """Yield the horizon, the axis below or above it, and the arc between them."""
    reach = min(AXIS, (box.height - 4 * GROUND) / max(abs(sin(tilt)), 0.3))
    drop = reach * sin(tilt)
    x, y = box.left + 1.0, box.centre[1] + drop / 2
    yield Stroke(((x, y), (x + AXIS, y)), HORIZON_PEN)
    yield from arrow((x, y), (x + reach * cos(tilt), y - drop))
    if abs(tilt) >= LEAST_SWEEP:
        yield Stroke(arc((x, y), min(SECTION_ARC, reach - 2.0), 0.0, -tilt), DIMENSION_PEN)


def place_section_tags(tags: Tags, room: ShownRoom, view: PlanView, custom: Custom) -> None:
    """Place a tag with height and tilt for each device of a room that has them; note what finds no place."""
    rings = [view.ring(ring) for ring in room.room.rings]
    for spot in room.spots:
        at = view.point(spot.point)
        for index in spot.devices:
            label = _section_label(device_tag(index), room.answer.devices[index].device, custom)
            if label is None:
                continue
            free = [box for box in boxes_around(at, label, AROUND, directions=24) if tags.taken.takes(box)]
            tied = [box for box in free if tags.taken.takes_line(at, nearest_in(at, box))]
            off_walls = [box for box in tied if not any(_meets(box, ring) for ring in rings)]
            if free:
                tags.put(label, (*off_walls, *tied, *free)[0], at)
            else:
                tags.missing.append(f"height of {device_tag(index)}")


def _meets(box: Box, ring: tuple[Point, ...]) -> bool:
    """Whether a ring passes through a box."""
    return any(clipped_segment(start, end, box) for start, end in pairwise((*ring, ring[0])))


def _section_label(tag: str, device: Device, custom: Custom) -> SectionLabel | None:
    tilted = device.vertical_field is not None or device.tilt != 0
    if device.height is None and not tilted:
        return None
    lines = [Line(tag, bold=True)]
    if device.height is not None:
        lines.append(Line(f"{custom.length(device.height)} high"))
    if tilted:
        lines.append(Line(f"tilt {degrees(device.tilt):.0f}°"))
    return SectionLabel(tuple(lines), framed=True, tilt=device.tilt if tilted else None)
