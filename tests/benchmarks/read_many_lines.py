"""How reading grows with the drawing, in processor seconds.

``python tests/benchmarks/read_many_lines.py`` prints them and draws ``docs/figures/reading-growth.svg``. For loose wall
lines (twenty to a room) and for closed rooms: what ezdxf alone needs to load the drawing, what loading and reading need
together, and the ratio. The ratio must not grow with the size.
"""

from collections.abc import Callable
from math import log10
from pathlib import Path
from tempfile import TemporaryDirectory
from time import process_time

import ezdxf
import svgwrite
from ezdxf.filemanagement import readfile
from ezdxf.layouts import Modelspace

from kernelscan.reading import read_plan

PIECES = 5


def loose(space: Modelspace, x: float, y: float) -> None:
    """Draw a room's four walls in five pieces each."""
    corners = [(x + 0.1, y + 0.1), (x + 5.9, y + 0.1), (x + 5.9, y + 4.9), (x + 0.1, y + 4.9)]
    for (ax, ay), (bx, by) in zip(corners, [*corners[1:], corners[0]], strict=True):
        for k in range(PIECES):
            low, high = k / PIECES, (k + 1) / PIECES
            start = (ax + (bx - ax) * low, ay + (by - ay) * low)
            end = (ax + (bx - ax) * high, ay + (by - ay) * high)
            space.add_line(start, end, dxfattribs={"layer": "A-WALL"})


def closed(space: Modelspace, x: float, y: float) -> None:
    """Draw an L-shaped room's outline and its name."""
    corners = [(x, y), (x + 5, y), (x + 5, y + 2), (x + 3, y + 2), (x + 3, y + 4), (x, y + 4)]
    space.add_lwpolyline(corners, close=True, dxfattribs={"layer": "A-AREA"})
    space.add_text(
        f"Room {x:g}-{y:g}", height=0.2, dxfattribs={"layer": "A-AREA-IDEN", "insert": (x + 1, y + 1)}
    )


def measure(
    path: Path, draw: Callable[[Modelspace, float, float], None], rooms: int
) -> tuple[int, float, float]:
    """Write a drawing of about so many rooms; print and return its rooms and what loading and reading it needs."""
    side = round(rooms**0.5)
    drawing = ezdxf.new("R2010")
    drawing.header["$INSUNITS"] = 6
    for i in range(side):
        for j in range(side):
            draw(drawing.modelspace(), i * 6.0, j * 5.0)
    drawing.saveas(path)
    start = process_time()
    readfile(path)
    load = process_time() - start
    start = process_time()
    found = len(read_plan(path).rooms)
    whole = process_time() - start
    assert found == side * side
    times = f"load {load:7.2f} s  load and read {whole:7.2f} s  {whole / load:5.2f}"
    print(f"{draw.__name__:8} {side * side:6} rooms  {times}", flush=True)
    return side * side, load, whole


def plot(loose_times: list[tuple[int, float, float]], path: Path) -> None:
    """Draw load, and load and read, against the number of loose lines, both axes logarithmic."""
    drawing = svgwrite.Drawing(str(path), size=("640px", "420px"), viewBox="0 0 640 420", debug=False)
    drawing.add(drawing.rect((0, 0), (640, 420), fill="white"))

    def at(lines: float, seconds: float) -> tuple[float, float]:
        return round(70 + (log10(lines) - 3) * 230, 1), round(360 - (log10(seconds) + 2) * 95, 1)

    def words(text: str, place: tuple[float, float], anchor: str = "middle") -> None:
        drawing.add(drawing.text(text, place, font_family="sans-serif", font_size=12, text_anchor=anchor))

    for lines in (1000, 10_000, 100_000):
        drawing.add(drawing.line(at(lines, 0.01), at(lines, 20), stroke="#ddd"))
        words(f"{lines:,}", (at(lines, 0.01)[0], 380))
    for seconds in (0.01, 0.1, 1, 10):
        drawing.add(drawing.line(at(1000, seconds), at(100_000, seconds), stroke="#ddd"))
        words(f"{seconds:g} s", (64, at(1000, seconds)[1] + 4), "end")
    words("loose wall lines", (300, 404))
    first, _, start = loose_times[0]
    lines = 20 * first
    for name, power in (("n", 1), ("n²", 2)):
        end = 100_000 if power == 1 else lines * (20 / start) ** 0.5
        drawing.add(drawing.line(at(lines, start), at(end, start * (end / lines) ** power), stroke="#999"))
        words(
            name,
            (at(end, start * (end / lines) ** power)[0] + 10, at(end, start * (end / lines) ** power)[1]),
        )
    for column, ink, dash, name in (
        (1, "#000000", "3,3", "load alone"),
        (2, "#0072B2", "none", "load and read"),
    ):
        points = [at(20 * each[0], each[column]) for each in loose_times]
        line = drawing.polyline(points, fill="none", stroke=ink, stroke_width=2)
        if dash != "none":
            line["stroke-dasharray"] = dash
        drawing.add(line)
        words(name, (points[-1][0] + 8, points[-1][1] + 14 * (2 - column)), "start")
    drawing.save(pretty=True)


def main() -> None:
    """Print one line for each size, and draw the growth with loose lines."""
    with TemporaryDirectory() as folder:
        path = Path(folder) / "plan.dxf"
        measure(path, loose, 50)  # so that what is loaded once does not count
        grown = [measure(path, loose, rooms) for rooms in (50, 100, 500, 1000, 2500, 5000)]
        for rooms in (100, 1000, 10_000):
            measure(path, closed, rooms)
    plot(grown, Path(__file__).resolve().parents[2] / "docs" / "figures" / "reading-growth.svg")


if __name__ == "__main__":
    main()
