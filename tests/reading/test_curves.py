"""Curves are flattened within the chord error, in the plane they were drawn in."""

from math import cos, pi, sin
from pathlib import Path

import numpy as np
import pytest
from ezdxf.layouts import Modelspace
from hypothesis import given
from hypothesis import strategies as st
from reading.drawings import new_drawing, saved

from kernelscan.plan import Room
from kernelscan.reading import read_plan
from kernelscan.reading.curves import flattened
from kernelscan.tolerances import Tolerances


def only_room(path: Path, chord: float = 0.001) -> Room:
    (room,) = read_plan(path, tolerances=Tolerances(chord=chord)).rooms
    return room


@pytest.mark.parametrize("chord", [0.05, 0.001, 0.0001])
def test_a_circle_strays_by_no_more_than_the_chord_error(tmp_path: Path, chord: float) -> None:
    ring = only_room(
        saved(tmp_path / "p.dxf", lambda m: m.add_circle((7, 8), 2.5, dxfattribs={"layer": "ROOM"})), chord
    ).outline
    middles = (ring + np.roll(ring, -1, axis=0)) / 2
    assert np.hypot(*(ring - (7, 8)).T) == pytest.approx(2.5, abs=1e-12)
    sagitta = 2.5 - np.hypot(*(middles - (7, 8)).T)
    assert 0 < sagitta.max() <= chord * (1 + 1e-9)
    assert sagitta.max() > chord / 2, "no more pieces than needed"


@given(bulge=st.floats(0.01, 3), turn=st.floats(0, 6.28), long=st.floats(0.1, 30))
def test_a_bulge_gives_points_on_its_arc(bulge: float, turn: float, long: float) -> None:
    """tan(sweep / 4) is the bulge: chord and sagitta fix the radius, independently of any centre."""
    space = new_drawing().modelspace()
    end = (5 + long * cos(turn), 5 + long * sin(turn))
    entity = space.add_lwpolyline([(5, 5, bulge), (*end, 0)], format="xyb")
    (points, closed) = next(flattened(entity, 0.001))
    assert not closed
    sagitta = bulge * long / 2
    radius = (long**2 / 4 + sagitta**2) / (2 * sagitta)
    middle = np.array([(5 + end[0]) / 2, (5 + end[1]) / 2])
    right = np.array([sin(turn), -cos(turn)])
    centre = middle + right * (sagitta - radius)
    assert np.hypot(*(points[:, :2] - centre).T) == pytest.approx(radius, rel=1e-9)
    assert (points[0, :2] == (5, 5)).all()
    assert points[-1, :2] == pytest.approx(end)


def test_the_published_bulge(tmp_path: Path) -> None:
    """Bulge 0.5 over a chord of 4: radius 2.5, rise 1 (the DXF reference's formula, worked by hand)."""
    points = [(0, 0, 0.5), (4, 0, 0), (4, 5, 0), (0, 5, 0)]
    path = saved(
        tmp_path / "p.dxf",
        lambda m: m.add_lwpolyline(points, format="xyb", close=True, dxfattribs={"layer": "ROOM"}),
    )
    ring = only_room(path).outline
    assert ring[:, 1].min() == pytest.approx(-1, abs=1e-3)
    low = ring[ring[:, 1] < -1e-9]
    assert np.hypot(*(low - (2, 1.5)).T) == pytest.approx(2.5)


@pytest.mark.parametrize(
    ("draw", "area"),
    [
        (lambda m, a: m.add_ellipse((0, 0), (3, 0), 0.5, dxfattribs=a), pi * 3 * 1.5),
        (lambda m, a: m.add_spline([(0, 0), (4, 0), (4, 4), (0, 4), (0, 0)], dxfattribs=a), None),
        (lambda m, a: m.add_polyline2d([(0, 0), (4, 0), (4, 3), (0, 3)], close=True, dxfattribs=a), 12),
        (lambda m, a: m.add_polyline2d([(0, 0), (4, 0), (4, 3), (0, 3), (0, 0)], dxfattribs=a), 12),
        (
            lambda m, a: m.add_polyline3d(
                [(0, 0, 1), (4, 0, 2), (4, 3, 3), (0, 3, 4)], close=True, dxfattribs=a
            ),
            12,
        ),
        (lambda m, a: m.add_lwpolyline([(0, 0), (4, 0), (4, 3), (0, 3), (0, 0)], dxfattribs=a), 12),
        (
            lambda m, a: m.add_lwpolyline([(0, 0), (4, 0), (4, 3), (0, 3), (0, 0)], close=True, dxfattribs=a),
            12,
        ),
        (lambda m, a: m.add_lwpolyline([(0, 0), (4, 0), (4, 3), (0, 3), (0.001, 0.002)], dxfattribs=a), 12),
        (lambda m, a: m.add_solid([(0, 0), (4, 0), (0, 3), (4, 3)], dxfattribs=a), 12),
    ],
)
def test_every_kind_of_closed_line_is_a_room(tmp_path: Path, draw: object, area: float | None) -> None:
    room = only_room(saved(tmp_path / "p.dxf", lambda m: draw(m, {"layer": "ROOM"})))  # type: ignore[operator]
    assert room.area == pytest.approx(area, rel=1e-3) if area else room.area > 8


def test_hatch_boundaries_with_arcs(tmp_path: Path) -> None:
    def draw(space: Modelspace) -> None:
        hatch = space.add_hatch(dxfattribs={"layer": "ROOM"})
        hatch.paths.add_polyline_path([(0, 0, 0), (4, 0, 1), (4, 4, 0), (0, 4, 0)], is_closed=True)

    assert only_room(saved(tmp_path / "p.dxf", draw)).area == pytest.approx(16 + pi * 2, rel=1e-3)


def test_a_mirrored_plane(tmp_path: Path) -> None:
    """With the extrusion (0, 0, -1), x in the entity's plane is -x in the world (the DXF reference's OCS rule)."""
    attributes = {"layer": "ROOM", "extrusion": (0, 0, -1)}
    path = saved(
        tmp_path / "p.dxf",
        lambda m: m.add_lwpolyline([(1, 0), (5, 0), (5, 3), (2, 3)], close=True, dxfattribs=attributes),
    )
    ring = only_room(path).outline
    assert {tuple(p) for p in ring.tolist()} == {(-1, 0), (-5, 0), (-5, 3), (-2, 3)}
    assert only_room(path).area == pytest.approx(10.5)


@pytest.mark.parametrize("size", [1e-9, 1e6, 1e11])
def test_no_size_asks_for_endless_work(size: float) -> None:
    space = new_drawing().modelspace()
    entities = [
        space.add_circle((0, 0), size),
        space.add_ellipse((0, 0), (size, size / 3), 0.3),
        space.add_spline([(0, 0), (size, size), (size, -size), (2 * size, 0)]),
        space.add_lwpolyline([(0, 0, 1), (size, 0, 1)], format="xyb", close=True),
    ]
    for entity in entities:
        for points, _ in flattened(entity, 1e-3):
            assert 1 < len(points) < 20_000


def test_a_radius_of_nought_is_a_problem(tmp_path: Path) -> None:
    plan = read_plan(
        saved(tmp_path / "p.dxf", lambda m: m.add_circle((0, 0), 0, dxfattribs={"layer": "ROOM"}))
    )
    assert [p.code for p in plan.problems] == ["broken-entity"]
