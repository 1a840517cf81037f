"""Draws the figures of what-a-kernel-is.md with the package's own answers.

``python docs/make_figures.py`` writes them anew into ``docs/figures``, or into the folder given as only argument; the
same text comes out every time. Lengths are metres; y points up in the rooms and down on the screen.
"""

import sys
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from kernelscan import Kernel, visibility_kernel, visible_region

__all__ = ["FIGURES", "Figure", "figure_svg", "main"]

Ring = Sequence[tuple[float, float]]

SCALE = 34.0  # pixels a metre
MARGIN = 0.5
BLACK, KERNEL, CONFLICT, SEEN = "#000000", "#0072B2", "#D55E00", "#56B4E9"


@dataclass(frozen=True, slots=True)
class Figure:
    """One room: its outline counter-clockwise, what stands in it clockwise, so that walls have the room on their left.

    Attributes
    ----------
    title
        What the room is an example of.
    outline, holes
        Corners in metres.
    eye
        The point whose view is to be shown, if any.
    """

    title: str
    outline: Ring
    holes: tuple[Ring, ...] = ()
    eye: tuple[float, float] | None = None


L_ROOM: Ring = [(0, 0), (8, 0), (8, 3), (3, 3), (3, 6), (0, 6)]
FIGURES: dict[str, Figure] = {
    "l-room": Figure("An L", L_ROOM),
    "l-room-view": Figure("An L, seen from outside its kernel", L_ROOM, eye=(6.5, 1.5)),
    "t-room": Figure("A T", [(0, 0), (9, 0), (9, 3), (6, 3), (6, 6), (3, 6), (3, 3), (0, 3)]),
    "u-room": Figure("A U", [(0, 0), (9, 0), (9, 6), (6, 6), (6, 3), (3, 3), (3, 6), (0, 6)]),
    "pilaster": Figure(
        "A pilaster", [(0, 0), (2.8, 0), (2.8, 0.2), (3.2, 0.2), (3.2, 0), (6, 0), (6, 4), (0, 4)]
    ),
    "column": Figure(
        "A column",
        [(0, 0), (6, 0), (6, 4), (0, 4)],
        holes=([(3.8, 1.8), (3.8, 2.2), (4.2, 2.2), (4.2, 1.8)],),
    ),
    "square-niche": Figure(
        "A square niche", [(0, 0), (2, 0), (2, -0.3), (3.2, -0.3), (3.2, 0), (6, 0), (6, 4), (0, 4)]
    ),
    "splayed-niche": Figure(
        "A splayed niche", [(0, 0), (2, 0), (2.4, -0.4), (3.6, -0.4), (4, 0), (6, 0), (6, 4), (0, 4)]
    ),
    "stepped-room": Figure(
        "Two halves, offset", [(0, 0), (4, 0), (4, 2), (8, 2), (8, 6), (4, 6), (4, 4), (0, 4)]
    ),
    "pinwheel": Figure(
        "A pinwheel",
        [(4, 0), (6, 0), (6, 4), (8, 4), (8, 6), (4, 6), (4, 8), (2, 8), (2, 4), (0, 4), (0, 2), (4, 2)],
    ),
}
"""File names without ``.svg``, and what each shows."""


def figure_svg(figure: Figure) -> str:
    """Return one figure as SVG text."""
    kernel = visibility_kernel(figure.outline, figure.holes)
    canvas = _Canvas(np.array(figure.outline, dtype=float))
    parts = [canvas.shape([figure.outline, *figure.holes], f'fill="white" stroke="{BLACK}" stroke-width="3"')]
    if figure.eye is not None:
        parts += _view(canvas, figure.outline, figure.holes, figure.eye)
    parts += _kernel(canvas, kernel)
    parts += [_conflict(canvas, figure, ring, edge) for ring, edge in kernel.conflict.tolist()]
    return canvas.document(figure.title, parts)


class _Canvas:
    """Turns metres into pixels, and shapes into SVG elements."""

    def __init__(self, outline: np.ndarray) -> None:
        self.low = outline.min(axis=0) - MARGIN
        self.high = outline.max(axis=0) + MARGIN

    def at(self, point: Iterable[float]) -> tuple[float, float]:
        x, y = point
        return (float(x - self.low[0]) * SCALE, float(self.high[1] - y) * SCALE)

    def shape(self, rings: Iterable[Iterable[Iterable[float]]], style: str) -> str:
        loops = ["M " + " L ".join(self._pair(point) for point in ring) + " Z" for ring in rings]
        return f'<path d="{" ".join(loops)}" fill-rule="evenodd" stroke-linejoin="round" {style}/>'

    def line(self, start: Iterable[float], end: Iterable[float], style: str) -> str:
        return f'<path d="M {self._pair(start)} L {self._pair(end)}" {style}/>'

    def dot(self, centre: Iterable[float], style: str) -> str:
        x, y = self.at(centre)
        return f'<circle cx="{x:.1f}" cy="{y:.1f}" r="6" {style}/>'

    def document(self, title: str, parts: Iterable[str]) -> str:
        width, height = (self.high - self.low) * SCALE
        lines = [
            f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {width:.0f} {height:.0f}"'
            f' width="{width:.0f}" height="{height:.0f}" role="img">',
            f"<title>{title}</title>",
            f'<rect width="{width:.0f}" height="{height:.0f}" fill="white"/>',
            '<pattern id="hatch" width="8" height="8" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">',
            f'<path d="M 0 0 V 8" stroke="{KERNEL}" stroke-width="2.4"/>',
            "</pattern>",
            *parts,
            "</svg>",
        ]
        return "\n".join(lines) + "\n"

    def _pair(self, point: Iterable[float]) -> str:
        x, y = self.at(point)
        return f"{x:.1f},{y:.1f}"


def _kernel(canvas: _Canvas, kernel: Kernel) -> list[str]:
    """Hatch an area, draw a line, dot a point; nothing for an empty kernel."""
    vertices = kernel.vertices.tolist()
    if kernel.kind == "area":
        border = f'stroke="{KERNEL}" stroke-width="2" stroke-dasharray="7 4"'
        return [canvas.shape([vertices], f'fill="url(#hatch)" {border}')]
    if kernel.kind == "segment":
        return [canvas.line(*vertices, f'stroke="{KERNEL}" stroke-width="5"')]
    return [canvas.dot(vertex, f'fill="{KERNEL}"') for vertex in vertices]


def _view(canvas: _Canvas, outline: Ring, holes: tuple[Ring, ...], eye: tuple[float, float]) -> list[str]:
    """Shade what one eye sees."""
    seen = visible_region(outline, eye, holes).tolist()
    style = f'fill="{SEEN}" fill-opacity="0.45" stroke="{BLACK}" stroke-width="1"'
    return [canvas.shape([seen], style), canvas.dot(eye, f'fill="{BLACK}"')]


def _conflict(canvas: _Canvas, figure: Figure, ring: int, edge: int) -> str:
    """Mark a wall of an empty kernel, with an arrow to the side from which it can be seen."""
    corners = np.array([figure.outline, *figure.holes][ring], dtype=float)
    start, end = corners[edge], corners[(edge + 1) % len(corners)]
    way = (end - start) / np.hypot(*(end - start))
    inward = np.array([-way[1], way[0]])
    foot = (start + end) / 2
    tip = foot + inward * 1.1
    barbs = [tip - inward * 0.25 + way * 0.14, tip, tip - inward * 0.25 - way * 0.14]
    style = f'stroke="{CONFLICT}" fill="none"'
    return "\n".join(
        [
            canvas.line(start, end, f'{style} stroke-width="8"'),
            canvas.line(foot, tip, f'{style} stroke-width="2.5"'),
            canvas.line(barbs[0], barbs[1], f'{style} stroke-width="2.5"'),
            canvas.line(barbs[1], barbs[2], f'{style} stroke-width="2.5"'),
        ]
    )


def main(folder: Path) -> None:
    """Write every figure into a folder."""
    folder.mkdir(parents=True, exist_ok=True)
    for name, figure in FIGURES.items():
        (folder / f"{name}.svg").write_text(figure_svg(figure), encoding="utf-8", newline="\n")


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent / "figures")
