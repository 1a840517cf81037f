"""A plan: the rooms of one drawing, what was wrong with it, and its linework for the background."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from kernelscan.plan.room import Room, Source
from kernelscan.units import Unit

__all__ = ["LayerUse", "Plan", "Problem", "UnitSource", "View"]

UnitSource = Literal["header", "option", "proposal"]


@dataclass(frozen=True, slots=True)
class Problem:
    """Something in the drawing that a person should know of; the run goes on.

    Attributes
    ----------
    code
        A stable word for scripts, such as ``open-outline``.
    message
        One line for a person.
    at
        Where, in metres, or ``None`` when the whole drawing is meant.
    source
        Layer and handle, as far as they are known.
    """

    code: str
    message: str
    at: tuple[float, float] | None = None
    source: Source = Source()


@dataclass(frozen=True, slots=True)
class LayerUse:
    """What a layer of the drawing was taken for: its role, the reason, and how many strokes lie on it."""

    layer: str
    role: str
    reason: str
    strokes: int


@dataclass(frozen=True, slots=True)
class View:
    """One of the floors, sections or other views that stand side by side in a drawing.

    Attributes
    ----------
    number
        From 1, in reading order.
    title
        The label that names it, or nothing.
    low, high
        The corners of its box, in metres.
    rooms
        The ids of its rooms; none in a view that closes no room or is no floor.
    """

    number: int
    title: str
    low: tuple[float, float]
    high: tuple[float, float]
    rooms: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, eq=False)
class Plan:
    """What was read from one drawing; lengths in metres, positions the drawing's own times its unit.

    Attributes
    ----------
    file
        The drawing's file name, without its folder.
    unit, unit_from
        The drawing's unit, and whether its header or an option said so, or it was found out and accepted.
    rooms
        In the order of their numbers.
    room_rule
        One sentence for a person: by which rule outlines were taken for rooms.
    problems
        What was met on the way.
    linework
        ``(k, 2)`` arrays, the drawing's own strokes for the pale background, annotation left out.
    layers
        What each layer was taken for.
    views
        The floors or views that were told apart.
    """

    file: str
    unit: Unit
    unit_from: UnitSource
    rooms: tuple[Room, ...]
    room_rule: str
    problems: tuple[Problem, ...] = ()
    linework: tuple[np.ndarray, ...] = ()
    layers: tuple[LayerUse, ...] = ()
    views: tuple[View, ...] = ()
