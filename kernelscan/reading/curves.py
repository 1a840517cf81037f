"""Entities into points: every kind of line flattened, so that no straight piece strays more than the chord error.

Circles, arcs and bulges are cut into equal pieces; with radius r and chord error e a piece may turn by
``2 acos(1 - e / r)``. Ellipses and splines are halved by ezdxf until the middle of each piece lies within e.
The points lie on the curve, so a flattened round room is never larger than the drawn one. The number of pieces is
bounded, whatever the size: no drawing can ask for endless work.
"""

from collections.abc import Callable, Iterable, Iterator
from math import acos, atan, ceil, hypot, isfinite, pi, radians

import numpy as np
from ezdxf import path as paths
from ezdxf.entities.arc import Arc
from ezdxf.entities.circle import Circle
from ezdxf.entities.dxfentity import DXFEntity
from ezdxf.entities.ellipse import Ellipse
from ezdxf.entities.line import Line
from ezdxf.entities.lwpolyline import LWPolyline
from ezdxf.entities.mline import MLine
from ezdxf.entities.polygon import DXFPolygon
from ezdxf.entities.polyline import Polyline
from ezdxf.entities.solid import Solid
from ezdxf.entities.spline import Spline
from ezdxf.math import OCS, Z_AXIS, Vec2, Vec3, bulge_center

__all__ = ["FLATTENED_KINDS", "flattened"]

Flat = tuple[np.ndarray, bool]
"""``(n, 3)`` points in world coordinates, and whether they close."""

MOST_PIECES = 4096
FINEST = 1e-5
"""The chord error is never finer than this part of a curve's size; below it ezdxf would halve for ever."""


def flattened(entity: DXFEntity, chord: float) -> Iterator[Flat]:
    """Return the lines of one entity; none for a kind that draws none.

    Parameters
    ----------
    entity
        Any entity but a block reference.
    chord
        The chord error in drawing units.

    Raises
    ------
    ValueError
        If the entity's numbers make no curve (a radius of nought, a broken spline).
    """
    make = FLATTENED_KINDS.get(entity.dxftype())
    return make(entity, chord) if make else iter(())


def _line(entity: Line, _chord: float) -> Iterator[Flat]:
    start, end = entity.dxf.start, entity.dxf.end
    yield np.array(((start.x, start.y, start.z), (end.x, end.y, end.z))), False


def _light_polyline(entity: LWPolyline, chord: float) -> Iterator[Flat]:
    table = np.array(entity.lwpoints.values, dtype=np.float64).reshape(-1, 5)
    closed = bool(entity.closed)
    flat = _bulged(table[:, :2], table[:, 4], closed, chord)
    spatial = np.empty((len(flat), 3))
    spatial[:, :2] = flat
    spatial[:, 2] = entity.dxf.elevation if entity.dxf.hasattr("elevation") else 0.0
    yield _from_ocs(entity, spatial), closed


def _old_polyline(entity: Polyline, chord: float) -> Iterator[Flat]:
    if entity.is_poly_face_mesh or entity.is_polygon_mesh:
        return
    drawn = [v for v in entity.vertices if not v.dxf.flags & 16]  # 16: frame of a fitted curve, not drawn
    points = np.array([tuple(v.dxf.location) for v in drawn], dtype=np.float64).reshape(-1, 3)
    if entity.is_3d_polyline:
        yield points, bool(entity.is_closed)
        return
    bulges = np.array([v.dxf.get("bulge", 0.0) for v in drawn], dtype=np.float64)
    flat = _bulged(points[:, :2], bulges, bool(entity.is_closed), chord)
    level = points[0, 2] if len(points) else 0.0
    yield _from_ocs(entity, np.column_stack((flat, np.full(len(flat), level)))), bool(entity.is_closed)


def _circle(entity: Circle, chord: float) -> Iterator[Flat]:
    yield _from_ocs(entity, _round_piece(entity, 0.0, 2 * pi, chord)[:-1]), True


def _arc(entity: Arc, chord: float) -> Iterator[Flat]:
    start = radians(entity.dxf.start_angle)
    sweep = (radians(entity.dxf.end_angle) - start) % (2 * pi) or 2 * pi
    yield _from_ocs(entity, _round_piece(entity, start, sweep, chord)), False


def _round_piece(entity: Circle | Arc, start: float, sweep: float, chord: float) -> np.ndarray:
    centre, radius = entity.dxf.center, entity.dxf.radius
    if not radius > 0:
        raise ValueError(f"radius {radius:g}")
    angles = start + np.linspace(0.0, sweep, pieces(radius, sweep, chord) + 1)
    level = np.full(len(angles), centre.z)
    return np.column_stack((centre.x + radius * np.cos(angles), centre.y + radius * np.sin(angles), level))


def _ellipse(entity: Ellipse, chord: float) -> Iterator[Flat]:
    fine = _bounded(chord, entity.dxf.major_axis.magnitude)
    sweep = (entity.dxf.end_param - entity.dxf.start_param) % (2 * pi)
    whole = sweep < 1e-9 or sweep > 2 * pi - 1e-9
    points = _array(entity.flattening(fine))
    yield (points[:-1] if whole else points), whole


def _spline(entity: Spline, chord: float) -> Iterator[Flat]:
    frame = np.array(
        [tuple(p) for p in entity.control_points] or [tuple(p) for p in entity.fit_points], dtype=np.float64
    )
    if len(frame) < 2 or not np.isfinite(frame).all():
        raise ValueError("too few control points")
    yield _array(entity.flattening(_bounded(chord, float(np.ptp(frame, axis=0).max())))), bool(entity.closed)


def _hatch(entity: DXFPolygon, chord: float) -> Iterator[Flat]:
    for path in paths.from_hatch(entity):
        size = max(
            (hypot(p.x - path.start.x, p.y - path.start.y) for p in path.control_vertices()), default=0.0
        )
        if isfinite(size):
            yield _array(path.flattening(_bounded(chord, size))), True


def _solid(entity: Solid, _chord: float) -> Iterator[Flat]:
    yield _array(entity.wcs_vertices()), True


def _multi_line(entity: MLine, chord: float) -> Iterator[Flat]:
    for part in entity.virtual_entities():
        yield from flattened(part, chord)


def pieces(radius: float, sweep: float, chord: float) -> int:
    """Return into how many equal pieces an arc is cut; at least one a quarter turn."""
    turn = 2 * acos(max(1 - chord / radius, 0.0)) if chord < radius else pi / 2
    return min(max(ceil(abs(sweep) / max(turn, 1e-9)), ceil(abs(sweep) / (pi / 2) - 1e-9), 1), MOST_PIECES)


def _bulged(points: np.ndarray, bulges: np.ndarray, closed: bool, chord: float) -> np.ndarray:
    if not bulges.any():
        return points
    parts = []
    for i, bulge in enumerate(bulges):
        parts.append(points[i : i + 1])
        last = i == len(points) - 1
        if bulge and not (last and not closed):
            parts.append(_bulge_points(points[i], points[(i + 1) % len(points)], float(bulge), chord))
    return np.concatenate(parts)


ROUND = 1e12
"""A larger bulge, tan(sweep / 4), would be a circle from a point to itself, of no use as an arc."""


def _bulge_points(start: np.ndarray, end: np.ndarray, bulge: float, chord: float) -> np.ndarray:
    """Return the points between the two ends of a bulge; bulge is tan(sweep / 4), negative clockwise."""
    if not np.any(start != end) or not abs(bulge) < ROUND:
        return np.empty((0, 2))
    centre = bulge_center(Vec2(start), Vec2(end), bulge)
    arm = start - (centre.x, centre.y)
    sweep = 4 * atan(bulge)
    count = pieces(float(np.hypot(*arm)), sweep, chord)
    angles = np.linspace(0.0, sweep, count + 1)[1:-1]
    cos, sin = np.cos(angles), np.sin(angles)
    return np.column_stack((centre.x + arm[0] * cos - arm[1] * sin, centre.y + arm[0] * sin + arm[1] * cos))


def _from_ocs(entity: DXFEntity, points: np.ndarray) -> np.ndarray:
    """Return points of the entity's own plane in world coordinates: mirrored entities have a plane of their own."""
    if not entity.dxf.hasattr("extrusion") or entity.dxf.extrusion.isclose(Z_AXIS):
        return points
    return _array(OCS(entity.dxf.extrusion).points_to_wcs(Vec3.generate(points)))


def _array(vertices: Iterable[Vec2 | Vec3]) -> np.ndarray:
    return np.array([Vec3(p).xyz for p in vertices], dtype=np.float64).reshape(-1, 3)


def _bounded(chord: float, size: float) -> float:
    return max(chord, size * FINEST)


FLATTENED_KINDS: dict[str, Callable[..., Iterator[Flat]]] = {
    "ARC": _arc,
    "CIRCLE": _circle,
    "ELLIPSE": _ellipse,
    "HATCH": _hatch,
    "LINE": _line,
    "LWPOLYLINE": _light_polyline,
    "MLINE": _multi_line,
    "MPOLYGON": _hatch,
    "POLYLINE": _old_polyline,
    "SOLID": _solid,
    "SPLINE": _spline,
    "TRACE": _solid,
}
"""The kinds of entity that draw lines, and what flattens each."""
