"""Where a given device may be mounted so that it covers the whole room, and the best place there.

The conditions are those of :mod:`kernelscan.coverage.limits`. In plan they are half-planes (each wall moved inward by
the placing error and turned by the grazing angle), discs (the reach about every corner) and, for distances from walls
and clearances, capsules to stay out of. Under a ceiling or on a stand the zone is an area; on a wall it is what the
conditions leave of the line along which the lens slides; a corner is one lens position.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from fnmatch import fnmatchcase
from math import atan2, hypot, inf, pi

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.depth import deepest_along, line_depths
from kernelscan.coverage.limits import Limits
from kernelscan.coverage.surfaces import corners, runs, solid_spans, walls_along, without
from kernelscan.geometry.halfplanes import half_planes, wall_half_planes
from kernelscan.geometry.intersection import intersect
from kernelscan.plan import Fixing, Room, WallRef

__all__ = [
    "Conditions",
    "Place",
    "conditions",
    "corner_places",
    "free_conditions",
    "wall_places",
]

Floats = npt.NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class Conditions:
    """What a lens position must fulfil.

    Attributes
    ----------
    lines
        ``(k, 2, 2)``: the lens is on the left of each.
    walls
        ``(k, 2)``: the wall [ring, edge] that each line comes from.
    corners, reach
        ``(n, 2)`` the room's corners, each at most the reach away.
    keep_out, margins, of_lens
        ``(m, 2, 2)`` segments; how far at least the device is from each, ``(m,)``; and whether that is measured from
        the lens, ``(m,)``, or from the point of fixing.
    """

    lines: Floats
    walls: npt.NDArray[np.int64]
    corners: Floats
    reach: float
    keep_out: Floats
    margins: Floats
    of_lens: npt.NDArray[np.bool_]

    def slack(self, lenses: Floats) -> Floats:
        """Return by how much each lens position, ``(m, 2)``, is within all but the clearances: negative outside."""
        depths = line_depths(lenses, self.lines).min(axis=1, initial=inf)
        return np.asarray(np.minimum(depths, self.reach - self.farthest(lenses)))

    def farthest(self, lenses: Floats) -> Floats:
        """Return the distance from each lens position to the farthest corner."""
        offsets = lenses[:, None] - self.corners
        return np.asarray(np.hypot(offsets[..., 0], offsets[..., 1]).max(axis=1))

    def clear_of(self, points: Floats, lenses: Floats) -> Floats:
        """Return by how much each point of fixing with its lens, ``(m, 2)`` both, is clear of what it must be."""
        distances = _distances_to_segments(points, self.keep_out)
        distances[:, self.of_lens] = _distances_to_segments(lenses, self.keep_out[self.of_lens])
        return np.asarray((distances - self.margins).min(axis=1, initial=inf))

    def common_corners(self) -> Floats:
        """Return the corners of what lies left of all the lines, ``(k, 2)``."""
        start, end = self.lines[:, 0], self.lines[:, 1]
        return intersect(half_planes(np.column_stack([start, end - start]))).vertices

    def moved_in(self, depth: float) -> "Conditions":
        """Return the conditions that positions fulfil with so much to spare, in metres."""
        ways = self.lines[:, 1] - self.lines[:, 0]
        ways = ways / np.hypot(ways[:, 0], ways[:, 1])[:, None]
        inward = depth * np.column_stack([-ways[:, 1], ways[:, 0]])
        lines = self.lines + inward[:, None]
        return replace(self, lines=lines, reach=self.reach - depth, margins=self.margins + depth)

    def binding(self, lens: Floats) -> tuple[WallRef, ...]:
        """Return the walls that come nearest to ruling a lens position out, to a millimetre."""
        depths = line_depths(lens[None], self.lines)[0]
        nearest = depths <= depths.min(initial=inf) + 1e-3
        return tuple(dict.fromkeys(WallRef(*wall) for wall in self.walls[nearest].tolist()))


@dataclass(frozen=True, slots=True, eq=False)
class Place:
    """A stretch of wall, or a corner, on which a device can be fixed.

    Attributes
    ----------
    fixing, walls
        What it is, and the wall or the two walls.
    ends
        ``(2, 2)`` metres along the surface; a corner has the same point twice.
    inward
        ``(2,)``: from the point of fixing to the lens.
    bearing, field
        The direction in which the middle of the room lies, and the field that the place asks for.
    conditions
        What the lens must fulfil there.
    """

    fixing: Fixing
    walls: tuple[WallRef, ...]
    ends: Floats
    inward: Floats
    bearing: float
    field: float
    conditions: Conditions

    def best(self) -> Floats:
        """Return the point of fixing that may be missed by most, ``(2,)``."""
        start, end = self.ends
        return deepest_along(start, end, self.tolerances)

    def tolerances(self, points: Floats) -> Floats:
        """Return by how much each point of fixing on it may be missed, along the wall or off it; ``(m,)``."""
        lenses = points + self.inward
        slack = np.minimum(self.conditions.slack(lenses), self.conditions.clear_of(points, lenses))
        if self.fixing == "corner":
            return np.asarray(slack)
        start, end = self.ends
        to_ends = np.minimum(np.hypot(*(points - start).T), np.hypot(*(points - end).T))
        return np.asarray(np.minimum(slack, to_ends))


def free_conditions(room: Room, limits: Limits) -> Conditions:
    """Return the conditions for a lens that is fixed to no wall: under a ceiling or on a stand."""
    return conditions(room, limits, ())


def conditions(room: Room, limits: Limits, fixed_to: Sequence[WallRef]) -> Conditions:
    """Return the conditions for a lens on some walls: these, and what runs along them, need only not hide."""
    plain = wall_half_planes(room.rings)
    # For plain walls t -> h is the wall itself, with nothing rounded.
    plain_lines = plain.rows[:, 2:].reshape(-1, 2, 2)
    along = walls_along(room, fixed_to, plain_lines)
    spared = along | np.array([WallRef(*wall) in set(fixed_to) for wall in plain.walls.tolist()], dtype=bool)
    strict = wall_half_planes(room.rings, limits.placing_error, limits.grazing)
    kept = np.tile(~spared, len(strict) // len(plain))
    hiding = spared & ~along
    lines = np.concatenate([_lines(strict.rows[kept]), plain_lines[hiding]])
    walls = np.concatenate([strict.walls[kept], plain.walls[hiding]])
    segments, margins, of_lens = _keep_out(room, limits, plain_lines[~spared])
    return Conditions(lines, walls, np.concatenate(room.rings), limits.reach, segments, margins, of_lens)


def wall_places(room: Room, limits: Limits, smooth: float) -> Iterator[Place]:
    """Yield the stretches of wall on which the device covers the room, its field set aside."""
    for run in runs(room, smooth):
        needed = conditions(room, limits, run)
        for wall in run:
            yield from _stretches(room, limits, wall, needed)


def corner_places(room: Room, limits: Limits, smooth: float) -> Iterator[Place]:
    """Yield the corners in which the device covers the room, its field set aside."""
    run_of = {wall: run for run in runs(room, smooth) for wall in run}
    for corner in corners(room, smooth):
        if not corner.is_convex:
            continue
        before, after = corner.walls
        needed = conditions(room, limits, run_of[before] + run_of[after])
        # The lens stands off from both walls: along the bisector, by the sine of half the angle.
        out = limits.stand_off / np.sin(corner.angle / 2)
        inward = out * np.array([np.cos(corner.bearing), np.sin(corner.bearing)])
        place = Place(
            "corner",
            corner.walls,
            np.array([corner.point, corner.point]),
            inward,
            corner.bearing,
            corner.angle,
            needed,
        )
        if place.tolerances(corner.point[None])[0] >= 0:
            yield place


def _keep_out(room: Room, limits: Limits, walls: Floats) -> tuple[Floats, Floats, npt.NDArray[np.bool_]]:
    """The segments to keep away from, by how much, and whether from the lens: first the walls, then the rest."""
    keep_out = list(walls) if limits.distance > limits.placing_error else []
    margins = [limits.distance] * len(keep_out)
    from_lens = len(keep_out)
    openings = [
        opening for opening in room.openings if opening.kind != "feature" and limits.from_openings > 0
    ]
    keep_out += [room.opening_ends(opening) for opening in openings]
    margins += [limits.from_openings] * len(openings)
    for pattern, distance in limits.from_fixtures:
        for fixture in room.fixtures:
            if fnmatchcase(fixture.name.casefold(), pattern.casefold()):
                keep_out.append(np.array([fixture.centre, fixture.centre]))
                margins.append(fixture.radius + distance)
    segments = np.array(keep_out, dtype=np.float64).reshape(-1, 2, 2)
    return segments, np.array(margins, dtype=np.float64), np.arange(len(segments)) < from_lens


def _lines(rows: Floats) -> Floats:
    """The half-planes' borders as two points each, ``(k, 2, 2)``."""
    return np.stack([rows[:, :2], rows[:, :2] + (rows[:, 4:] - rows[:, 2:4])], axis=1)


def _stretches(room: Room, limits: Limits, wall: WallRef, needed: Conditions) -> Iterator[Place]:
    start, end = room.wall_ends(wall)
    way = (end - start) / hypot(*(end - start))
    normal = np.array([-way[1], way[0]])
    inward = limits.stand_off * normal
    for low, high in _intervals(
        start + inward, end + inward, start, end, needed, solid_spans(room, wall.edge)
    ):
        ends = np.array([start + low * (end - start), start + high * (end - start)])
        bearing = atan2(normal[1], normal[0])
        yield Place("wall", (wall,), ends, inward, bearing, pi, needed)


def _intervals(
    p: Floats, q: Floats, a: Floats, b: Floats, needed: Conditions, solid: list[tuple[float, float]]
) -> list[tuple[float, float]]:
    """Return the parts of 0..1 at which the lens, from p to q, and the point of fixing, from a to b, are allowed."""
    low, high = _within_lines(p, q, needed.lines)
    for corner in needed.corners:
        if low > high:
            return []
        near, far = _within_disc(p, q, corner, needed.reach)
        low, high = max(low, near), min(high, far)
    left = [(max(low, start), min(high, end)) for start, end in solid]
    for segment, margin, of_lens in zip(
        needed.keep_out, needed.margins.tolist(), needed.of_lens, strict=True
    ):
        left = without(left, _within_capsule(*((p, q) if of_lens else (a, b)), segment, margin))
    return [part for part in left if part[0] <= part[1]]


def _within_lines(p: Floats, q: Floats, lines: Floats) -> tuple[float, float]:
    """The part of p -> q on the left of all lines, as an interval of 0..1, empty when it begins after its end."""
    at_p, at_q = line_depths(np.array([p, q]), lines)
    if ((at_p < 0) & (at_q < 0)).any():
        return inf, -inf
    with np.errstate(divide="ignore", invalid="ignore"):
        t = at_p / (at_p - at_q)
    return float(t[at_p < 0].max(initial=0.0)), float(t[at_q < 0].min(initial=1.0))


def _within_disc(p: Floats, q: Floats, centre: Floats, radius: float) -> tuple[float, float]:
    """The part of the line p -> q within a disc, as an interval, empty when it begins after its end."""
    if radius == inf:
        return -inf, inf
    if radius < 0:
        return inf, -inf
    length = hypot(*(q - p))
    way, offset = (q - p) / length, p - centre
    along, across = float(offset @ way), float(way[0] * offset[1] - way[1] * offset[0])
    if abs(across) > radius:
        return inf, -inf
    half = (radius**2 - across**2) ** 0.5
    return (-along - half) / length, (-along + half) / length


def _within_capsule(p: Floats, q: Floats, segment: Floats, radius: float) -> tuple[float, float]:
    """The part of the line p -> q nearer than the radius to a segment; a capsule is convex, so it is one interval."""
    parts = [_within_disc(p, q, end, radius) for end in segment]
    a, b = segment
    way = (b - a) / max(hypot(*(b - a)), 1e-300)
    aside = radius * np.array([-way[1], way[0]])
    box = np.array(
        [[a - aside, b - aside], [b - aside, b + aside], [b + aside, a + aside], [a + aside, a - aside]]
    )
    parts.append(_within_lines_of_the_line(p, q, box))
    parts = [part for part in parts if part[0] <= part[1]]
    return (min(low for low, _ in parts), max(high for _, high in parts)) if parts else (inf, -inf)


def _within_lines_of_the_line(p: Floats, q: Floats, lines: Floats) -> tuple[float, float]:
    """As :func:`_within_lines`, for the whole line through p and q."""
    at_p, at_q = line_depths(np.array([p, q]), lines)
    rising, falling = at_q > at_p, at_q < at_p
    if (at_p[~rising & ~falling] < 0).any():
        return inf, -inf
    with np.errstate(divide="ignore", invalid="ignore"):
        t = at_p / (at_p - at_q)
    return float(t[rising].max(initial=-inf)), float(t[falling].min(initial=inf))


def _distances_to_segments(points: Floats, segments: Floats) -> Floats:
    """Return the distances ``(m, k)`` from points to segments."""
    a, way = segments[:, 0], segments[:, 1] - segments[:, 0]
    offsets = points[:, None] - a
    t = np.clip((offsets * way).sum(axis=2) / np.maximum((way * way).sum(axis=1), 1e-300), 0, 1)
    return np.asarray(np.hypot(*np.moveaxis(offsets - t[..., None] * way, 2, 0)))
