"""Small drawings for the tests, made with ezdxf."""

from collections.abc import Callable
from pathlib import Path

import ezdxf
from ezdxf.document import Drawing
from ezdxf.layouts import Modelspace

SQUARE = [(0, 0), (4, 0), (4, 3), (0, 3)]


def saved(path: Path, draw: Callable[[Modelspace], None], *, unit: int = 6, release: str = "R2010") -> Path:
    """Save what ``draw`` puts into the model space of a new drawing."""
    drawing = new_drawing(unit, release)
    draw(drawing.modelspace())
    drawing.saveas(path)
    return path


def new_drawing(unit: int = 6, release: str = "R2010") -> Drawing:
    drawing = ezdxf.new(release)
    drawing.header["$INSUNITS"] = unit
    return drawing


def square_on(
    layer: str, size: float = 1.0, at: tuple[float, float] = (0.0, 0.0)
) -> Callable[[Modelspace], None]:
    def draw(space: Modelspace) -> None:
        points = [(at[0] + x * size, at[1] + y * size) for x, y in SQUARE]
        space.add_lwpolyline(points, close=True, dxfattribs={"layer": layer})

    return draw
