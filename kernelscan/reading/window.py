"""A part of the drawing: only what lies in a window is read."""

from dataclasses import replace

from kernelscan.reading.strokes import Contents

__all__ = ["Window", "within_window"]

Window = tuple[float, float, float, float]
"""Two opposite corners, x and y of each, in drawing units."""


def within_window(contents: Contents, window: Window | None) -> Contents:
    """Return the contents whose middle lies in the window; all of them without one."""
    if window is None:
        return contents
    low_x, high_x = sorted((window[0], window[2]))
    low_y, high_y = sorted((window[1], window[3]))

    def holds(x: float, y: float) -> bool:
        return low_x <= x <= high_x and low_y <= y <= high_y

    strokes = [s for s in contents.strokes if holds(*((s.points.min(axis=0) + s.points.max(axis=0)) / 2))]
    labels = [label for label in contents.labels if holds(*label.middle)]
    return replace(contents, strokes=strokes, labels=labels)
