"""What one device can do in one room.

The places are those of :mod:`kernelscan.coverage.device_zones`, as far as the device may be fixed there and its field
is what they ask for. Where there is none, each limit is lifted in turn to find the one that is to blame.
"""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from math import cos, inf, pi, sin

import numpy as np
import numpy.typing as npt

from kernelscan.coverage.aim import best_aim
from kernelscan.coverage.device_spots import DeviceAnswer, DeviceSpot, Obstruction, PartialSpot
from kernelscan.coverage.device_zones import Conditions, Place, corner_places, wall_places
from kernelscan.coverage.limits import Limits, device_limits
from kernelscan.coverage.plan_zone import PlanZone, plan_zone
from kernelscan.coverage.setting_out import on_grid, setting_out
from kernelscan.geometry.kernel import Kernel
from kernelscan.plan import Device, Fixing, Room, WallRef
from kernelscan.tolerances import Tolerances

__all__ = ["device_answer"]

Floats = npt.NDArray[np.float64]

ALTERNATIVES = 3
"""How many further spots are offered."""

ENOUGH = 1e-9
"""Radians by which a field may fall short."""


def device_answer(
    room: Room,
    kernel: Kernel,
    device: Device,
    *,
    step: float = 0.05,
    near: Floats | None = None,
    tolerances: Tolerances = Tolerances(),
) -> DeviceAnswer:
    """Return what one device can do in one room.

    Parameters
    ----------
    kernel
        The room's visibility kernel.
    step
        The grid of the setting-out distances in metres; 0 for none.
    near
        A spot, ``(2,)``, to which the point is to be as near as the zones allow.
    """
    limits = device_limits(device)
    if kernel.kind == "empty":
        return DeviceAnswer(room, device, limits, None, (), (), (), "sight", ())
    found = _found(room, device, limits, tolerances)
    spots = tuple(_spots(room, device, limits, found, step, near))
    if spots:
        others = _alternatives(room, device, limits, found, spots, step)
        return DeviceAnswer(room, device, limits, *found, spots, None, (), others)
    obstruction, without = _obstruction(room, device, limits, tolerances)
    partial = _partial_spots(room, device, limits, without)
    return DeviceAnswer(room, device, limits, *found, (), obstruction, partial)


Found = tuple[PlanZone | None, tuple[Place, ...], tuple[Place, ...]]
"""The area, the stretches of wall and the corners from which a device covers a room."""


def _found(room: Room, device: Device, limits: Limits, tolerances: Tolerances) -> Found:
    all_round = limits.field >= 2 * pi - ENOUGH
    area = plan_zone(room, limits) if all_round and {"ceiling", "floor"} & set(device.fixings) else None
    walls = wall_places(room, limits, tolerances.smooth) if "wall" in device.fixings else ()
    nooks = corner_places(room, limits, tolerances.smooth) if "corner" in device.fixings else ()
    return area, _wide_enough(walls, limits), _wide_enough(nooks, limits)


def _wide_enough(places: Iterable[Place], limits: Limits) -> tuple[Place, ...]:
    return tuple(place for place in places if place.field <= limits.field + ENOUGH)


def _obstruction(
    room: Room, device: Device, limits: Limits, tolerances: Tolerances
) -> tuple[Obstruction, Found]:
    """The one limit without which the device would cover the room, and the places where it then would."""
    lifted: dict[Obstruction, Limits] = {
        "reach": replace(limits, reach=inf),
        "distance": replace(limits, distance=0.0),
        "grazing": replace(limits, grazing=0.0),
        "clearance": replace(limits, from_openings=0.0, from_fixtures=()),
        # Last: with a field of any width a wall would do, which says little of a device meant for a corner.
        "field": replace(limits, field=2 * pi),
        "several": replace(limits, field=2 * pi, reach=inf, distance=0.0, grazing=0.0),
    }
    for name, without in lifted.items():
        area, walls, nooks = found = _found(room, device, without, tolerances)
        if area is not None or walls or nooks:
            return name, found
    return "several", (None, (), ())


def _spots(
    room: Room, device: Device, limits: Limits, found: Found, step: float, near: Floats | None
) -> Iterator[DeviceSpot]:
    """The best spot of each fixing, in the device's order of preference."""
    area, walls, nooks = found
    for fixing in device.fixings:
        if fixing in {"ceiling", "floor"} and area is not None:
            yield _area_spot(room, device, fixing, area, step, near)
        elif fixing == "wall" and walls:
            yield _place_spot(room, device, limits, *_chosen(walls, near), step, near)
        elif fixing == "corner" and nooks:
            yield _place_spot(room, device, limits, *_chosen(nooks, near), 0.0, near)


def _alternatives(
    room: Room, device: Device, limits: Limits, found: Found, spots: Sequence[DeviceSpot], step: float
) -> tuple[DeviceSpot, ...]:
    """The best spots of the places, walls and corners, on which no chosen spot is."""
    taken = {spot.walls for spot in spots}
    _, walls, nooks = found
    places = [(place, place.best()) for place in (*walls, *nooks) if place.walls not in taken]
    places.sort(key=lambda each: -round(float(each[0].tolerances(each[1][None])[0]), 6))
    return tuple(
        _place_spot(room, device, limits, place, best, step if place.fixing == "wall" else 0.0, None)
        for place, best in places[:ALTERNATIVES]
    )


def _chosen(places: Iterable[Place], near: Floats | None) -> tuple[Place, Floats]:
    """The place and the point on it: that may be missed by most, or that is nearest to a wanted spot."""
    if near is None:
        points = [(place, place.best()) for place in places]
        return max(points, key=lambda each: round(float(each[0].tolerances(each[1][None])[0]), 6))
    points = [(place, _nearest_on(place.ends, near)) for place in places]
    return min(points, key=lambda each: float(np.hypot(*(each[1] - near))))


def _nearest_on(ends: Floats, wanted: Floats) -> Floats:
    way = ends[1] - ends[0]
    length = float(way @ way)
    t = min(1.0, max(0.0, float((wanted - ends[0]) @ way) / length)) if length else 0.0
    return np.asarray(ends[0] + t * way)


def _area_spot(
    room: Room, device: Device, fixing: Fixing, area: PlanZone, step: float, near: Floats | None
) -> DeviceSpot:
    best = area.best() if near is None else area.nearest(near)
    rounded = on_grid(room, best, step, lambda point: float(area.tolerances(point[None])[0]), near=near)
    point = best if rounded is None else rounded
    tolerance = float(area.tolerances(point[None])[0])
    return _spot(
        room, device, fixing, (), point, point, None, None, 2 * pi, area.conditions, tolerance, rounded
    )


def _place_spot(
    room: Room,
    device: Device,
    limits: Limits,
    place: Place,
    best: Floats,
    step: float,
    near: Floats | None,
) -> DeviceSpot:
    rounded = None
    if step > 0:
        rounded = on_grid(
            room, best, step, lambda point: float(place.tolerances(point[None])[0]), place.walls, near
        )
    point = best if rounded is None else rounded
    return _spot(
        room,
        device,
        place.fixing,
        place.walls,
        point,
        point + place.inward,
        place.bearing,
        max(0.0, limits.field - place.field) / 2,
        place.field,
        place.conditions,
        float(place.tolerances(point[None])[0]),
        rounded,
    )


def _spot(
    room: Room,
    device: Device,
    fixing: Fixing,
    walls: tuple[WallRef, ...],
    point: Floats,
    lens: Floats,
    bearing: float | None,
    bearing_slack: float | None,
    field: float,
    needed: Conditions,
    tolerance: float,
    rounded: Floats | None,
) -> DeviceSpot:
    farthest = float(needed.farthest(lens[None])[0])
    return DeviceSpot(
        fixing=fixing,
        walls=walls,
        point=point,
        lens=lens,
        bearing=bearing,
        bearing_slack=bearing_slack,
        field=field,
        farthest=farthest,
        density=device.density_at(farthest),
        floor_edges=device.floor_seen
        if device.height is not None and device.vertical_field is not None
        else None,
        tolerance=max(0.0, tolerance),
        binding=needed.binding(lens),
        setting_out=setting_out(room, point, walls),
        on_grid=rounded is not None,
    )


def _just_inside(lens: Floats, bearing: float) -> Floats:
    """A lens in a wall's face, moved a micrometre into the room: a rounded point may lie on the far side."""
    return np.asarray(lens + 1e-6 * np.array([cos(bearing), sin(bearing)]))


def _partial_spots(room: Room, device: Device, limits: Limits, found: Found) -> tuple[PartialSpot, ...]:
    """The best point of each place, aimed for the most floor within reach; most floor first."""
    area, walls, nooks = found
    spots = []
    for fixing in device.fixings:
        if fixing in {"ceiling", "floor"} and area is not None:
            best = area.best()
            spots.append(
                PartialSpot(fixing, (), best, best, best_aim(room, best, limits.field, limits.reach))
            )
        for place in walls if fixing == "wall" else nooks if fixing == "corner" else ():
            point = place.best()
            lens = point + place.inward
            eye = _just_inside(lens, place.bearing)
            aim = best_aim(room, eye, limits.field, limits.reach, place.walls)
            spots.append(PartialSpot(fixing, place.walls, point, lens, aim))
    return tuple(sorted(spots, key=lambda spot: -round(spot.aim.floor, 6)))
