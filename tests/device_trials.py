"""Random rooms and devices, and a test of its own for whether a lens position covers a room.

The test knows nothing of half-planes or zones: it measures distances and angles to the ends of walls and to points
strewn densely along them. ``python tests/device_trials.py 10000`` runs so many rooms and prints what it tried.
"""

import sys
from dataclasses import dataclass, replace
from math import acos, atan2, cos, hypot, inf, pi, radians, sin

import numpy as np

from kernelscan.coverage.device_answers import device_answer
from kernelscan.errors import GeometryError
from kernelscan.geometry.kernel import kernel_of_rings
from kernelscan.geometry.rings import as_ring
from kernelscan.plan import Clearances, Device, Opening, Room, WallRef
from kernelscan.tolerances import Tolerances

NEVER_SMOOTH = replace(Tolerances(), smooth=0.0)
BORDER = 1e-6
"""Metres about a border in which nothing is asked."""


@dataclass
class Tally:
    rooms: int = 0
    inside: int = 0
    outside: int = 0


def random_room(rng):
    """A star-shaped room, so that its kernel is seldom empty, with some walls open."""
    while True:
        count = int(rng.integers(3, 11))
        angles = np.sort(rng.uniform(0, 2 * pi, count))
        radii = rng.uniform(1, rng.uniform(1, 2.2), count) * rng.uniform(1, 4)
        try:
            ring = as_ring(np.column_stack([radii * np.cos(angles), radii * np.sin(angles)]))
        except GeometryError:
            continue
        edges = [k for k in range(len(ring)) if rng.random() < 0.15]
        openings = tuple(
            Opening(WallRef(0, k), "door", hypot(*(ring[(k + 1) % len(ring)] - ring[k]))) for k in edges
        )
        return Room("R001", "trial", ring, openings=openings)


def random_device(rng):
    fixings = tuple(
        str(each)
        for each in rng.permutation(["ceiling", "wall", "corner", "floor"])[: int(rng.integers(1, 5))]
    )
    field = rng.choice([2 * pi, pi, rng.uniform(0.8, 2 * pi)])
    sectional = rng.random() < 0.3
    return Device(
        name="trial",
        kind="camera",
        fixings=fixings,
        horizontal_field=float(field),
        vertical_field=float(rng.uniform(0.5, 1.5)) if sectional else None,
        tilt=float(rng.uniform(0, 0.8)),
        height=2.6,
        target_height=float(rng.uniform(0, 2)),
        nearest=float(rng.choice([0, rng.uniform(0, 0.5)])),
        farthest=float(rng.choice([inf, rng.uniform(3, 12)])),
        pixels_across=1920,
        density=float(rng.uniform(20, 200)) if field < 3 and rng.random() < 0.5 else None,
        grazing=float(rng.choice([0, rng.uniform(0, radians(20))])),
        stand_off=float(rng.choice([0, rng.uniform(0, 0.2)])),
        clearances=Clearances(float(rng.choice([0, 0.3])), float(rng.choice([0, rng.uniform(0, 1)]))),
        placing_error=float(rng.choice([0, rng.uniform(0, 0.05)])),
    )


def slack(room, device, point, lens, fixed_to):
    """By how many metres a lens position fulfils the hardest of the device's limits; negative if it fails one."""
    error = device.placing_error
    found = [inf]
    for k in range(len(room.outline)):
        wall = WallRef(0, k)
        a, b = room.wall_ends(wall)
        length = hypot(*(b - a))
        to_line = ((b[0] - a[0]) * (lens[1] - a[1]) - (b[1] - a[1]) * (lens[0] - a[0])) / length
        farthest = max(hypot(*(lens - a)), hypot(*(lens - b)))
        found += [reach - farthest - error for reach in reaches(device)]
        if wall in fixed_to:
            continue
        found.append(to_line - error)
        to_wall = distance_to(lens, a, b)
        found += [
            to_wall - near - error for near in (device.nearest, device.clearances.walls, section(device)[0])
        ]
        if device.grazing:
            found += [
                grazing_slack(lens, a, b, device.grazing) - error,
                grazing_slack(lens, b, a, device.grazing) - error,
            ]
    if device.clearances.openings:
        for opening in room.openings:
            a, b = room.wall_ends(opening.wall)
            found.append(distance_to(point, a, b) - device.clearances.openings - error)
    return min(found)


def distance_to(point, a, b):
    """From a point to a segment."""
    t = min(1.0, max(0.0, ((point - a) @ (b - a)) / ((b - a) @ (b - a))))
    return hypot(*(point - a - t * (b - a)))


def grazing_slack(lens, end, other, least):
    """How far, in metres, the lens is inside the line through a wall's end that leaves it at the least angle."""
    toward, along = lens - end, other - end
    distance = hypot(*toward)
    if distance == 0:
        return 0.0
    angle = acos(max(-1.0, min(1.0, (toward @ along) / (distance * hypot(*along)))))
    return distance * sin(angle - least) if angle - least < pi / 2 else inf


def section(device):
    """The nearest and farthest distance at which the target's height is in the vertical field, found by trying."""
    if device.vertical_field is None:
        return 0.0, inf
    drop = device.height - device.target_height
    steep, flat = device.tilt + device.vertical_field / 2, device.tilt - device.vertical_field / 2
    near = drop * cos(steep) / sin(steep) if steep < pi / 2 else 0.0
    return near, drop * cos(flat) / sin(flat) if flat > 0 else inf


def reaches(device):
    yield device.farthest
    yield section(device)[1]
    if device.density is not None:
        yield (
            device.pixels_across
            / (2 * device.density * sin(device.horizontal_field / 2))
            * cos(device.horizontal_field / 2)
        )


def sees_every_wall(room, device, lens, fixed_to, bearing):
    """Rays to points strewn along the walls: none is cut off, none falls out of the field or beyond the range."""
    poly = room.outline
    for k in range(len(poly)):
        a, b = room.wall_ends(WallRef(0, k))
        for x in a + np.linspace(0.02, 0.98, 25)[:, None] * (b - a):
            if hidden_by(fixed_to, room, device, x):
                continue
            if hypot(*(x - lens)) > device.farthest + BORDER:
                return False
            if bearing is not None:
                off = (atan2(*(x - lens)[::-1]) - bearing + pi) % (2 * pi) - pi
                if abs(off) > device.horizontal_field / 2 + 1e-6:
                    return False
            if crosses_a_wall(poly, lens, x, k):
                return False
    return True


def hidden_by(fixed_to, room, device, x):
    """Whether a point of a wall lies no deeper than the lens stands off from a wall that the device is fixed to."""
    for wall in fixed_to:
        a, b = room.wall_ends(wall)
        depth = ((b[0] - a[0]) * (x[1] - a[1]) - (b[1] - a[1]) * (x[0] - a[0])) / hypot(*(b - a))
        if depth <= device.stand_off + BORDER:
            return True
    return False


def side(a, b, c):
    """Twice the signed area of each triangle a, b, c; ``(n, 2)`` each."""
    return (b[:, 0] - a[:, 0]) * (c[:, 1] - a[:, 1]) - (b[:, 1] - a[:, 1]) * (c[:, 0] - a[:, 0])


def crosses_a_wall(poly, lens, x, own):
    p, q = poly, np.roll(poly, -1, axis=0)
    lenses, ends = np.broadcast_to(lens, p.shape), np.broadcast_to(x, p.shape)
    apart = (side(p, q, lenses) * side(p, q, ends) < -1e-9) & (
        side(lenses, ends, p) * side(lenses, ends, q) < -1e-9
    )
    apart[own] = False
    return bool(apart.any())


def try_room(rng, tally):
    """Check one random room with one random device; raises AssertionError with what went wrong."""
    room, device = random_room(rng), random_device(rng)
    kernel = kernel_of_rings(room.rings)
    answer = device_answer(room, kernel, device, tolerances=NEVER_SMOOTH)
    tally.rooms += 1
    opened = {opening.wall for opening in room.openings}
    if {"ceiling", "floor"} & set(device.fixings):
        check_area(rng, room, device, answer, tally)
    for k in range(len(room.outline)):
        wall = WallRef(0, k)
        if "wall" in device.fixings:
            check_wall(room, device, answer, wall, opened, tally)
        if "corner" in device.fixings:
            check_corner(room, device, answer, k, opened, tally)
    for spot in answer.spots:
        assert slack(room, device, spot.point, spot.lens, spot.walls) > -BORDER
        assert sees_every_wall(room, device, spot.lens, spot.walls, spot.bearing)


def check_area(rng, room, device, answer, tally):
    low, high = room.outline.min(axis=0), room.outline.max(axis=0)
    for lens in rng.uniform(low, high, (40, 2)):
        true = slack(room, device, lens, lens, ())
        if device.horizontal_field < 2 * pi:
            true = -inf
        inside = answer.area is not None and answer.area.tolerances(lens[None])[0] >= 0
        check(inside, true, tally, ("area", room.outline.tolist(), device, lens))
        if inside:
            assert sees_every_wall(room, device, lens, (), None)


def check_wall(room, device, answer, wall, opened, tally):
    a, b = room.wall_ends(wall)
    way = (b - a) / hypot(*(b - a))
    inward = device.stand_off * np.array([-way[1], way[0]])
    for t in np.linspace(0.003, 0.997, 21):
        point = a + t * (b - a)
        true = slack(room, device, point, point + inward, (wall,))
        if device.horizontal_field < pi - 1e-6 or wall in opened:
            true = -inf
        inside = any(on_stretch(place.ends, point) for place in answer.stretches if place.walls == (wall,))
        check(inside, true, tally, ("wall", room.outline.tolist(), device, point))
        if inside and tally.inside % 5 == 0:
            assert sees_every_wall(room, device, point + inward, (wall,), atan2(way[0], -way[1]))


def on_stretch(ends, point):
    return hypot(*(point - ends[0])) + hypot(*(point - ends[1])) <= hypot(*(ends[1] - ends[0])) + 1e-9


def check_corner(room, device, answer, k, opened, tally):
    walls = (WallRef(0, (k - 1) % len(room.outline)), WallRef(0, k))
    point = room.outline[k]
    ahead, back = room.wall_ends(walls[1])[1] - point, room.wall_ends(walls[0])[0] - point
    angle = (atan2(back[1], back[0]) - atan2(ahead[1], ahead[0])) % (2 * pi)
    if angle >= pi - 1e-6:
        return
    n1 = np.array([-ahead[1], ahead[0]]) / hypot(*ahead)
    n2 = np.array([back[1], -back[0]]) / hypot(*back)
    lens = point + np.linalg.solve(np.array([n1, n2]), [device.stand_off, device.stand_off])
    true = slack(room, device, point, lens, walls)
    if device.horizontal_field < angle - 1e-9 or set(walls) & opened:
        true = -inf
    inside = any(place.walls == walls for place in answer.corners)
    check(inside, true, tally, ("corner", room.outline.tolist(), device, point))


def check(inside, true, tally, told):
    """Inside the zone nothing fails, outside something does, but for a millionth of a metre about the border."""
    if inside:
        tally.inside += 1
        assert true > -BORDER, told
    else:
        tally.outside += 1
        assert true < BORDER, told


def main(count):
    tally = Tally()
    for seed in range(count):
        try_room(np.random.default_rng([7, seed]), tally)
    print(f"{tally.rooms} rooms: {tally.inside} points inside zones and {tally.outside} outside, no miss")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 10_000)
