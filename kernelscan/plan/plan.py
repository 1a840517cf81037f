"""A plan: the rooms of one drawing, what was wrong with it, and its linework for the background."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from kernelscan.plan.room import Room, Source
from kernelscan.units import Unit

__all__ = ["Plan", "Problem", "UnitSource"]

UnitSource = Literal["header", "option"]


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


@dataclass(frozen=True, slots=True, eq=False)
class Plan:
    """What was read from one drawing; lengths in metres, positions the drawing's own times its unit.

    Attributes
    ----------
    file
        The drawing's file name, without its folder.
    unit, unit_from
        The drawing's unit, and whether its header or an option said so.
    rooms
        In the order of their numbers.
    room_rule
        One sentence for a person: by which rule outlines were taken for rooms.
    problems
        What was met on the way.
    linework
        ``(k, 2)`` arrays, the drawing's own strokes for the pale background, annotation left out.
    """

    file: str
    unit: Unit
    unit_from: UnitSource
    rooms: tuple[Room, ...]
    room_rule: str
    problems: tuple[Problem, ...] = ()
    linework: tuple[np.ndarray, ...] = ()
