"""Kernels worked out by hand, from a drawing through the command line to the report.

Source of every figure: the half-planes that are named beside it, intersected by hand. The only quoted decimal is that
of the pentagram, 0.3468932, which the closed form of the inner pentagon gives.
"""

import json
import subprocess
import sys
from collections.abc import Sequence
from math import cos, dist, pi, sin, sqrt
from pathlib import Path
from typing import Any

import ezdxf
import pytest

Ring = list[tuple[float, float]]

L_ROOM: Ring = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
T_ROOM: Ring = [(0, 0), (9, 0), (9, 3), (6, 3), (6, 6), (3, 6), (3, 3), (0, 3)]
U_ROOM: Ring = [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]
STEPPED: Ring = [(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)]
STAR: Ring = [(2, 0), (4, 0), (-1, 2), (-2, 4), (-1, -2), (-2, -4)]
PILASTER: Ring = [(0, 0), (2.8, 0), (2.8, 0.2), (3.2, 0.2), (3.2, 0), (6, 0), (6, 4), (0, 4)]
NICHE: Ring = [(0, 0), (2, 0), (2, -0.3), (3.2, -0.3), (3.2, 0), (6, 0), (6, 4), (0, 4)]
SPLAYED: Ring = [(0, 0), (2, 0), (2.4, -0.4), (3.6, -0.4), (4, 0), (6, 0), (6, 4), (0, 4)]
CHEVRON: Ring = [(0, 0), (4, 1), (8, 0), (8, 6), (0, 6)]

INNER = (3 - sqrt(5)) / 2  # circumradius of the inner pentagon, where the five lines cross
PENTAGRAM: Ring = [
    (radius * cos(pi / 2 + turn * pi / 5), radius * sin(pi / 2 + turn * pi / 5))
    for turn in range(10)
    for radius in [INNER if turn % 2 else 1]
]
INNER_PENTAGON = 5 / 2 * INNER**2 * sin(2 * pi / 5)

CASES: list[tuple[str, Ring, str, float, Ring]] = [
    # x <= 3 from the wall (3, 3)-(3, 6), y <= 3 from the wall (8, 3)-(3, 3).
    ("1-l", L_ROOM, "area", 9, [(0, 0), (3, 0), (3, 3), (0, 3)]),
    # 3 <= x <= 6 from the flanks of the stem, y <= 3 from the shoulders.
    ("2-t", T_ROOM, "area", 9, [(3, 0), (6, 0), (6, 3), (3, 3)]),
    # x >= 6 from the one inner flank, x <= 3 from the other.
    ("3-u", U_ROOM, "empty", 0, []),
    # x >= 4 from the wall (4, 6)-(4, 4), x <= 4 from (4, 0)-(4, 2); y >= 2 and y <= 4 from the two that meet them.
    ("4-stepped", STEPPED, "segment", 0, [(4, 2), (4, 4)]),
    # y >= 0, y <= -2 x and y <= 2 x from the three walls whose lines pass through the origin.
    ("5-star", STAR, "point", 0, [(0, 0)]),
    # x <= 2.8 from the one flank, x >= 3.2 from the other.
    ("6-pilaster", PILASTER, "empty", 0, []),
    # 2 <= x <= 3.2 from the flanks; y >= 0 from the walls beside the niche. 1.2 x 4.
    ("6-niche", NICHE, "area", 4.8, [(2, 0), (3.2, 0), (3.2, 4), (2, 4)]),
    # x + y >= 2 and x - y <= 4 from the flanks. 6 x 4 less two triangles of 2 x 2 / 2.
    ("6-splayed", SPLAYED, "area", 20, [(2, 0), (4, 0), (6, 2), (6, 4), (0, 4), (0, 2)]),
    # 4 y >= x and 4 y >= 8 - x from the two lower walls. 8 x 6 less two trapeziums of 4 x (1 + 2) / 2.
    ("7-chevron", CHEVRON, "area", 36, [(4, 1), (8, 2), (8, 6), (0, 6), (0, 2)]),
    # The ten walls lie on five lines, which bound the inner pentagon.
    ("8-pentagram", PENTAGRAM, "area", INNER_PENTAGON, PENTAGRAM[1::2]),
]
"""Name, outline, kind of kernel, its area and its corners."""


def draw(ring: Sequence[tuple[float, float]], path: Path) -> Path:
    doc = ezdxf.new("R2010", units=6)
    doc.modelspace().add_lwpolyline(ring, close=True, dxfattribs={"layer": "A-AREA"})
    doc.saveas(path)
    return path


def room_reported(ring: Sequence[tuple[float, float]], folder: Path) -> dict[str, Any]:
    plan, out = draw(ring, folder / "room.dxf"), folder / "out"
    command = [sys.executable, "-m", "kernelscan", "zones", str(plan), "--out", str(out), "--quiet"]
    run = subprocess.run(command, capture_output=True, text=True, check=False)
    assert (run.returncode, run.stdout, run.stderr) == (0, "", "")
    room: dict[str, Any]
    (room,) = json.loads((out / "report.json").read_text(encoding="utf-8"))["rooms"]
    return room


def walls_that_exclude_each_other(room: dict[str, Any]) -> set[tuple[tuple[float, float], ...]]:
    outline = [tuple(vertex) for vertex in room["outline"]]
    assert all(ring == 0 for ring, _ in room["kernel"]["conflict"])
    return {(outline[edge], outline[(edge + 1) % len(outline)]) for _, edge in room["kernel"]["conflict"]}


def is_near(some: Sequence[Sequence[float]], others: Sequence[Sequence[float]]) -> bool:
    """Whether every point of the one list has a point of the other within 1e-9 m."""
    return all(any(dist(point, other) <= 1e-9 for other in others) for point in some)


@pytest.mark.parametrize(("name", "ring", "kind", "area", "corners"), CASES, ids=[case[0] for case in CASES])
def test_worked_check_through_the_command_line(
    name: str, ring: Ring, kind: str, area: float, corners: Ring, tmp_path: Path
) -> None:
    kernel = room_reported(ring, tmp_path)["kernel"]
    assert (kernel["kind"], kernel["area"]) == (kind, pytest.approx(area, abs=1e-9))
    # A convex region that reaches these corners and has their hull's area is their hull. In doubles the pentagram's
    # walls are not quite in line, so that its kernel has more corners than five.
    assert is_near(corners, kernel["vertices"])
    assert kind == "area" or len(kernel["vertices"]) == len(corners)


def test_walls_of_the_u_that_exclude_each_other(tmp_path: Path) -> None:
    room = room_reported(U_ROOM, tmp_path)
    assert walls_that_exclude_each_other(room) == {((6, 6), (6, 3)), ((3, 3), (3, 6))}


def test_flanks_of_the_pilaster_exclude_each_other(tmp_path: Path) -> None:
    room = room_reported(PILASTER, tmp_path)
    assert walls_that_exclude_each_other(room) == {((2.8, 0), (2.8, 0.2)), ((3.2, 0.2), (3.2, 0))}


def test_quoted_decimal_of_the_pentagram() -> None:
    assert pytest.approx(0.3468932, abs=5e-8) == INNER_PENTAGON
