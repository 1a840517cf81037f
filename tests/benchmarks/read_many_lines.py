"""How reading grows with the drawing: ``python tests/benchmarks/read_many_lines.py`` prints processor seconds.

For loose wall lines (twenty to a room) and for closed rooms: what ezdxf alone needs to load the drawing, what loading
and reading need together, and the ratio. The ratio must not grow with the size.
"""

from collections.abc import Callable
from pathlib import Path
from tempfile import TemporaryDirectory
from time import process_time

import ezdxf
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


def measure(path: Path, draw: Callable[[Modelspace, float, float], None], rooms: int) -> None:
    """Write a drawing of about so many rooms and print what loading and reading it needs."""
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
    print(f"{draw.__name__:8} {side * side:6} rooms  {times}")


def main() -> None:
    """Print one line for each size."""
    with TemporaryDirectory() as folder:
        for draw, sizes in ((loose, (50, 100, 500, 1000, 2500, 5000)), (closed, (100, 1000, 10000))):
            for rooms in sizes:
                measure(Path(folder) / "plan.dxf", draw, rooms)


if __name__ == "__main__":
    main()
