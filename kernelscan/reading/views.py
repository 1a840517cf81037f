"""Floors and other views that stand side by side in one drawing: told apart, numbered, named by their titles.

Linework is entered into a grid of coarse cells; cells that touch belong to one view, so views are apart when more than
a cell or two lies between them. Sheet frames and annotation do not count. A title is the largest label in or just
around a view that speaks of a floor, a section or an elevation; what its title calls a section or an elevation is not
read as a floor. The title words are common practice, without a single source.
"""

import re
from collections.abc import Mapping, Sequence

import numpy as np

from kernelscan.plan import Problem, Room, View
from kernelscan.reading.layers import LayerRole
from kernelscan.reading.segments import WALL, segments_of
from kernelscan.reading.strokes import Contents, Label, Stroke, stroke_boxes
from kernelscan.reading.texts import words

__all__ = ["told_apart"]

CELL = 1.5
SMALLEST_VIEW = 5.0
MOST_CELLS = 2_000_000
AROUND = 4.0
FRAME = 0.85
SIDE_VIEW_TEXT = """
    section sections elevation elevations schnitt schnitte ansicht ansichten coupe coupes elevations sezione sezioni
    prospetto prospetti seccion secciones alzado alzados fachada fachadas doorsnede gevel przekroj elewacja
"""
FLOOR_TEXT = """
    floor ground basement level storey plan grundriss erdgeschoss obergeschoss kellergeschoss geschoss etage rdc
    piano pianta planta baja nivel verdieping plattegrond rzut parter pietro plano
"""
SIDE_VIEWS, FLOORS = frozenset(SIDE_VIEW_TEXT.split()), frozenset(FLOOR_TEXT.split())
_TITLE = re.compile(re.sub("[aeiou]", ".", "|".join(sorted(SIDE_VIEWS | FLOORS))))
"""A quick test that lets every title pass: any sign may stand for a vowel, which may carry an accent."""


def told_apart(
    rooms: Sequence[Room], contents: Contents, roles: Mapping[str, LayerRole], metres: float
) -> tuple[tuple[Room, ...], tuple[View, ...], list[Problem]]:
    """Return the rooms without those of side views, the views, and a problem for each view without a room."""
    kept, views, problems = list(rooms), [], []
    boxes = _boxes(_drawn(contents.strokes, roles, metres), metres)
    for number, (low, high) in enumerate(boxes, 1):
        inside = [room for room in rooms if _holds(low, high, room)]
        title = _title(contents.labels, low, high, metres)
        aside = len(boxes) > 1 and bool(SIDE_VIEWS & set(words(title)))
        if len(boxes) > 1 and (aside or not inside):
            problems.append(_no_floor(number, title, low, high, aside))
        if aside:
            gone = {room.id for room in inside}
            kept, inside = [room for room in kept if room.id not in gone], []
        views.append(View(number, title, low, high, tuple(room.id for room in inside)))
    return tuple(kept), tuple(views), problems


def _no_floor(
    number: int, title: str, low: tuple[float, float], high: tuple[float, float], aside: bool
) -> Problem:
    name = f"view {number}" + (f", {title!r}," if title else "")
    text = (
        f"{name} is a section or an elevation and not read as a floor" if aside else f"{name} closes no room"
    )
    return Problem("no-floor", text, ((low[0] + high[0]) / 2, (low[1] + high[1]) / 2))


def _holds(low: tuple[float, float], high: tuple[float, float], room: Room) -> bool:
    x, y = (room.outline.min(axis=0) + room.outline.max(axis=0)) / 2
    return bool(low[0] <= x <= high[0] and low[1] <= y <= high[1])


def _drawn(strokes: Sequence[Stroke], roles: Mapping[str, LayerRole], metres: float) -> list[Stroke]:
    """Return the strokes that make views: no annotation, no frame around most of the rest."""
    kept = [s for s in strokes if roles[s.layer].role in {"wall", "opening", "room", "unknown", "obstacle"}]
    if not kept:
        return []
    low, high = stroke_boxes(kept)
    whole = np.percentile(high, 98, axis=0) - np.percentile(low, 2, axis=0)
    frame = ((high - low) >= FRAME * whole).all(axis=1) & ((high - low) * metres > 10).all(axis=1)
    outlined = np.array([s.is_ring(0.0) and len(s.points) <= 5 for s in kept])
    return [s for s, skip in zip(kept, frame & outlined, strict=True) if not skip]


def _boxes(strokes: Sequence[Stroke], metres: float) -> list[tuple[tuple[float, float], tuple[float, float]]]:
    """Return the boxes of the views, top to bottom and left to right."""
    lines = segments_of(strokes, [WALL] * len(strokes), metres, np.zeros(2))
    counts = np.ceil(lines.length / CELL).astype(np.int64) + 1
    if not len(lines) or counts.sum() > MOST_CELLS:
        return []
    owner = np.repeat(np.arange(len(lines)), counts)
    step = np.arange(len(owner)) - np.repeat(np.cumsum(counts) - counts, counts)
    share = step / np.maximum(counts[owner] - 1, 1)
    points = lines.a[owner] + share[:, None] * (lines.b - lines.a)[owner]
    cells = np.floor(points / CELL).astype(np.int64)
    cells -= cells.min(axis=0) - 1
    wide = int(cells[:, 1].max()) + 2
    keys, index = np.unique(cells[:, 0] * wide + cells[:, 1], return_inverse=True)
    label = _components(keys, wide)[index]
    boxes = []
    for name in np.unique(label):
        part = points[label == name]
        low, high = part.min(axis=0), part.max(axis=0)
        if (high - low).min() >= SMALLEST_VIEW:
            boxes.append(((float(low[0]), float(low[1])), (float(high[0]), float(high[1]))))
    return sorted(_outermost(boxes), key=lambda box: (-round(box[1][1] / 5), box[0][0]))


Box = tuple[tuple[float, float], tuple[float, float]]


def _outermost(boxes: list[Box]) -> list[Box]:
    """Leave out what lies within another view's box."""
    return [
        box
        for box in boxes
        if not any(
            other is not box and all(other[0][k] <= box[0][k] and box[1][k] <= other[1][k] for k in range(2))
            for other in boxes
        )
    ]


def _components(keys: np.ndarray, wide: int) -> np.ndarray:
    """Return the number of the connected group, corners included, that each cell belongs to.

    A cell's key is its column times ``wide`` plus its row. Each cell takes the lowest number among its neighbours, and
    that one's number in turn, until nothing changes.
    """
    first, second = [], []
    for step in (1, wide - 1, wide, wide + 1):
        place = np.minimum(np.searchsorted(keys, keys + step), len(keys) - 1)
        meets = keys[place] == keys + step
        first.append(np.flatnonzero(meets))
        second.append(place[meets])
    i, j = np.concatenate(first), np.concatenate(second)
    group = np.arange(len(keys))
    while True:
        lowest = np.minimum(group[i], group[j])
        before = group.copy()
        np.minimum.at(group, group[i], lowest)
        np.minimum.at(group, group[j], lowest)
        group = group[group]
        if (group == before).all():
            return group


def _title(
    labels: Sequence[Label], low: tuple[float, float], high: tuple[float, float], metres: float
) -> str:
    """Return the largest label in or just around a box that speaks of a floor or a side view."""
    around = [
        label
        for label in labels
        if all(low[k] - AROUND <= label.middle[k] * metres <= high[k] + AROUND for k in range(2))
        and _TITLE.search(label.text.casefold())
        and (SIDE_VIEWS | FLOORS) & set(words(label.text))
    ]
    return max(around, key=lambda label: label.height).text if around else ""
