"""The picture of a reading: what was understood of a drawing, so that a glance shows whether that is right.

The drawing's own lines lie pale behind; each room is tinted, numbered and named; obstacles are grey; doors, windows
and bare gaps are thick lines of three kinds, and gaps and the places of problems are circled. The problems are
written out below. The picture fills its page and is not to scale.
"""

from collections.abc import Iterator, Sequence
from itertools import cycle
from math import cos, pi, sin

import numpy as np

from kernelscan.geometry.shapes import interior_point
from kernelscan.markup.clipping import clipped
from kernelscan.markup.drawing import linework_items, obstacle_items
from kernelscan.markup.paper import Scale
from kernelscan.markup.scene import Box, Fill, Group, Item, Pen, Point, Scene, Stroke, Text
from kernelscan.markup.style import BLACK, BODY, HEADING, QUIET, ROOM_PEN
from kernelscan.markup.text import LINE_PITCH, clean_text, cut_to, wrapped
from kernelscan.markup.view import PlanView, plan_extent
from kernelscan.plan import Plan, Problem, Room
from kernelscan.plan.room import OpeningKind

__all__ = ["picture_of_plan"]

WIDTH, MARGIN = 420.0, 10.0
FLATTEST, STEEPEST = 0.2, 1.2
AROUND = 0.04
TINTS = ("#dcebf7", "#fde6d2", "#dff0d8", "#efe1f1", "#fbf4c9", "#d6efec")
OPENING_PENS: dict[OpeningKind, Pen] = {
    "door": Pen(1.4, "#0072b2"),
    "window": Pen(1.4, "#009e73", (2.0, 1.0)),
    "gap": Pen(1.4, "#d55e00", (0.8, 0.8)),
}
CIRCLE_PEN = Pen(0.5, "#d55e00")
PROBLEM_PEN = Pen(0.5, BLACK)
RADIUS = 3.5
LINE = LINE_PITCH * BODY
MOST_LISTED = 60
SMALLEST_SIDE = 0.01


def picture_of_plan(plan: Plan) -> Scene:
    """Return the picture: rooms tinted and named, openings, obstacles, gaps and problems circled and listed."""
    extent = _extent(plan)
    flat = min(max(extent.height / extent.width, FLATTEST), STEEPEST)
    wide = WIDTH - 2 * MARGIN
    lines = list(_notes(plan, wide))
    below = len(lines) * LINE + LINE
    heading = [cut_to(text, wide, BODY) for text in wrapped(clean_text(plan.room_rule), wide, BODY, most=2)]
    above = HEADING * LINE_PITCH + len(heading) * LINE + LINE
    box = Box(MARGIN, MARGIN + below, WIDTH - MARGIN, MARGIN + below + flat * wide)
    height = box.top + above + MARGIN
    factor = min(box.width / extent.width, box.height / extent.height)
    view = PlanView(box, Scale(1000.0 / factor, "not to scale"), extent.centre)
    title = f"{clean_text(plan.file)}: as it was understood"
    return Scene(
        WIDTH,
        height,
        title,
        f"{len(plan.rooms)} rooms; the unit is {plan.unit.name}; not to scale",
        (
            Group("rooms", tuple(clipped(_room_fills(plan.rooms, view), box))),
            Group("linework", tuple(linework_items(plan.linework, view, box))),
            Group("obstacles", tuple(item for room in plan.rooms for item in obstacle_items(room, view))),
            Group(
                "outlines",
                tuple(Stroke(view.ring(room.outline), ROOM_PEN, closed=True) for room in plan.rooms),
            ),
            Group("openings", tuple(_opening_items(plan.rooms, view))),
            Group("names", tuple(_name_items(plan.rooms, view))),
            Group("problems", tuple(clipped(_problem_items(plan.problems, view), box))),
            Group("heading", tuple(_heading(title, heading, height))),
            Group("notes", tuple(_listed(lines, box.bottom - LINE))),
        ),
    )


def _extent(plan: Plan) -> Box:
    """Return the box, in metres, of the views and the rooms, with something around."""
    boxes = [np.array([view.low, view.high]) for view in plan.views]
    if boxes:
        points = np.concatenate([*boxes, *(room.outline for room in plan.rooms)])
        (left, bottom), (right, top) = points.min(axis=0).tolist(), points.max(axis=0).tolist()
        box = Box(left, bottom, right, top)
    else:
        box = plan_extent(plan, plan.rooms)
    by = max(AROUND * max(box.width, box.height), SMALLEST_SIDE)
    return box.grown(by)


def _room_fills(rooms: Sequence[Room], view: PlanView) -> Iterator[Item]:
    for room, tint in zip(rooms, cycle(TINTS), strict=False):
        yield Fill(tuple(view.ring(ring) for ring in room.rings), tint)


def _opening_items(rooms: Sequence[Room], view: PlanView) -> Iterator[Item]:
    """Yield each opening as a thick line, and a circle around each bare gap."""
    for room in rooms:
        for opening in room.openings:
            ends = view.ring(room.opening_ends(opening))
            if opening.kind in OPENING_PENS:
                yield Stroke(ends, OPENING_PENS[opening.kind])
            if opening.kind == "gap":
                (x0, y0), (x1, y1) = ends
                yield _circle(
                    ((x0 + x1) / 2, (y0 + y1) / 2),
                    max(RADIUS, np.hypot(x1 - x0, y1 - y0) / 2 + 1),
                    CIRCLE_PEN,
                )


def _name_items(rooms: Sequence[Room], view: PlanView) -> Iterator[Item]:
    """Yield the number and the name of each room, in the middle of it, cut to its width."""
    for room in rooms:
        x, y = view.point(np.array(interior_point(room.outline, room.holes)))
        across = np.array(view.ring(room.outline))[:, 0]
        wide = max(float(across.max() - across.min()) - 1.0, 8.0)
        yield Text((x, y + 0.3), room.id, BODY, "middle", bold=True)
        yield Text((x, y - LINE + 0.3), cut_to(clean_text(room.name), wide, BODY), BODY, "middle")


def _problem_items(problems: Sequence[Problem], view: PlanView) -> Iterator[Item]:
    """Yield a circle with the problem's number at each place of one."""
    for number, problem in enumerate(problems[:MOST_LISTED], 1):
        if problem.at is not None:
            x, y = view.point(np.array(problem.at))
            yield _circle((x, y), RADIUS, PROBLEM_PEN)
            yield Text((x + RADIUS + 0.5, y + RADIUS - BODY), str(number), BODY, bold=True)


def _circle(centre: Point, radius: float, pen: Pen) -> Stroke:
    x, y = centre
    turns = [k * pi / 24 for k in range(48)]
    return Stroke(tuple((x + radius * cos(t), y + radius * sin(t)) for t in turns), pen, closed=True)


def _notes(plan: Plan, wide: float) -> Iterator[str]:
    """Yield the legend and the list of problems, line by line."""
    yield "Blue: doors. Green, dashed: windows. Orange, dotted and circled: gaps that were closed. Grey: obstacles."
    for number, problem in enumerate(plan.problems[:MOST_LISTED], 1):
        yield cut_to(f"{number}  {problem.code}: {clean_text(problem.message)}", wide, BODY)
    if len(plan.problems) > MOST_LISTED:
        yield f"and {len(plan.problems) - MOST_LISTED} more"


def _heading(title: str, rule: Sequence[str], height: float) -> Iterator[Item]:
    top = height - MARGIN - HEADING
    yield Text((MARGIN, top), cut_to(title, WIDTH - 2 * MARGIN, HEADING, bold=True), HEADING, bold=True)
    for k, line in enumerate(rule, 1):
        yield Text((MARGIN, top - k * LINE), line, BODY, ink=QUIET)


def _listed(lines: Sequence[str], top: float) -> Iterator[Item]:
    for k, line in enumerate(lines):
        yield Text((MARGIN, top - k * LINE), line, BODY)
