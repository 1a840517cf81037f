"""Rooms and their answers written down by hand, so that the sheets are tested without the solver."""

from collections.abc import Sequence
from math import atan2, hypot, pi

import numpy as np

from kernelscan.coverage import CornerZone, FloorZone, RoomAnswer, RoomZones, Spot, WallZone
from kernelscan.geometry.kernel import Kernel
from kernelscan.plan import Obstacle, Plan, Problem, Room, WallRef
from kernelscan.units import unit_by_name

L = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
T = [(0, 0), (9, 0), (9, 3), (6, 3), (6, 6), (3, 6), (3, 3), (0, 3)]
U = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
SEGMENT = [(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)]
POINT = [(2, 0), (4, 0), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]

Points = Sequence[tuple[float, float]]


def array(points: Points, shift: tuple[float, float] = (0, 0)) -> np.ndarray:
    return np.array(points, dtype=float).reshape(-1, 2) + shift


def room(
    number: int, name: str, outline: Points, holes: Sequence[Points] = (), shift: tuple[float, float] = (0, 0)
) -> Room:
    obstacles = tuple(Obstacle(array(hole, shift)) for hole in holes)
    return Room(f"R{number:03}", name, array(outline, shift), obstacles, name_from="label")


def answer(
    of: Room, kernel: Points, conflict: Sequence[tuple[int, int]] = (), shift: tuple[float, float] = (0, 0)
) -> RoomAnswer:
    """Return a room's answer from its kernel's vertices alone, by plain arithmetic on convex kernels."""
    vertices = array(kernel, shift)
    kind = ("empty", "point", "segment")[len(vertices)] if len(vertices) < 3 else "area"
    x, y = vertices.T
    area = abs(float(x @ np.roll(y, -1) - y @ np.roll(x, -1))) / 2 if kind == "area" else 0.0
    answer_kernel = Kernel(
        kind=kind,
        vertices=vertices,
        area=area,
        walls=np.empty((0, 2), dtype=np.int64),
        conflict=np.array(conflict, dtype=np.int64).reshape(-1, 2),
    )
    if kind == "empty":
        return RoomAnswer(RoomZones(of, answer_kernel, None, (), (), ()))
    walls, corners = _walls(of, vertices), _corners(of, vertices)
    best = [_spot(of, "ceiling", vertices.mean(axis=0), 2 * pi, None, ())]
    if walls:
        longest = max(walls, key=lambda wall: wall.length)
        start, end = of.wall_ends(longest.walls[0])
        inward = atan2(end[0] - start[0], -(end[1] - start[1]))
        best.append(_spot(of, "wall", longest.path.mean(axis=0), pi, inward, longest.walls))
    if corners:
        best.append(corners[0].spot)
    zones = RoomZones(of, answer_kernel, FloorZone(vertices), tuple(walls), tuple(corners), tuple(best))
    return RoomAnswer(zones)


def _walls(of: Room, kernel: np.ndarray) -> list[WallZone]:
    found = []
    for edge in range(len(of.outline)):
        start, end = of.wall_ends(WallRef(0, edge))
        along = (end - start) / hypot(*(end - start))
        on = [p for p in kernel if abs(along[0] * (p - start)[1] - along[1] * (p - start)[0]) < 1e-9]
        places = sorted({min(max(float((p - start) @ along), 0.0), hypot(*(end - start))) for p in on})
        if len(places) > 1:
            ends = np.array([start + places[0] * along, start + places[-1] * along])
            found.append(WallZone((WallRef(0, edge),), ends))
    return found


def _corners(of: Room, kernel: np.ndarray) -> list[CornerZone]:
    found = []
    count = len(of.outline)
    for i, corner in enumerate(of.outline):
        if np.abs(kernel - corner).sum(axis=1).min() < 1e-9:
            after, before = of.outline[(i + 1) % count] - corner, of.outline[i - 1] - corner
            first = atan2(after[1], after[0])
            field = (atan2(before[1], before[0]) - first) % (2 * pi)
            walls = (WallRef(0, (i - 1) % count), WallRef(0, i))
            found.append(CornerZone(_spot(of, "corner", corner, field, first + field / 2, walls)))
    return found


def _spot(of: Room, mount, point, field, bearing, walls) -> Spot:
    farthest = max(float(hypot(*(corner - point))) for corner in of.outline)
    return Spot(mount, np.asarray(point, dtype=float), field, bearing, farthest, 0.35, walls)


def plan_of(
    answers: Sequence[RoomAnswer],
    unit: str = "mm",
    file: str = "invented.dxf",
    linework: Sequence[np.ndarray] = (),
) -> Plan:
    rooms = tuple(each.room for each in answers)
    problems = (Problem("open-outline", "an outline is open", (1.0, 1.0)),)
    rule = "closed outlines on the layer A-AREA"
    return Plan(file, unit_by_name(unit), "header", rooms, rule, problems, tuple(linework))


def moved(
    number: int,
    name: str,
    outline: Points,
    kernel: Points,
    shift: tuple[float, float] = (0, 0),
    holes: Sequence[Points] = (),
    conflict: Sequence[tuple[int, int]] = (),
) -> RoomAnswer:
    """Return the answer of a room that was written down at the origin and stands elsewhere."""
    return answer(room(number, name, outline, holes, shift), kernel, conflict, shift)


def classics() -> list[RoomAnswer]:
    """An L, a T, a U, a room with a column, a kernel that is a segment and one that is a point."""
    column = [(2.8, 1.8), (2.8, 2.2), (3.2, 2.2), (3.2, 1.8)]
    square = [(0, 0), (6, 0), (6, 4), (0, 4)]
    return [
        moved(1, "Reading room", L, [(0, 0), (3, 0), (3, 3), (0, 3)]),
        moved(2, "Hall", T, [(3, 0), (6, 0), (6, 3), (3, 3)], (10, 0)),
        moved(3, "Cloister", U, [], (0, 8), conflict=[(0, 3), (0, 5)]),
        moved(4, "Store", square, [], (10, 8), [column], [(1, 0), (1, 2)]),
        moved(5, "Link", SEGMENT, [(4, 2), (4, 4)], (20, 0)),
        moved(6, "Star", POINT, [(0, 0)], (22, 12)),
    ]


def floor(count: int = 12, columns: int = 4, width: float = 3.6, depth: float = 4.2) -> list[RoomAnswer]:
    """A floor of plain rooms, with walls of 0.2 m between them."""
    outline = [(0, 0), (width, 0), (width, depth), (0, depth)]
    places = [(i % columns * (width + 0.2), i // columns * (depth + 0.2)) for i in range(count)]
    return [moved(i, f"Office {i}", outline, outline, at) for i, at in enumerate(places, 1)]
