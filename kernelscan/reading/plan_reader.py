"""A drawing file into a plan: open it, take its strokes and labels, find its unit and its rooms, name them.

Everything up to the rooms is in drawing units; from the outlines on, everything is in metres.
"""

import gc
from collections.abc import Iterator
from contextlib import contextmanager
from os import PathLike
from pathlib import Path

import numpy as np

from kernelscan.plan import Plan, Problem
from kernelscan.plan.plan import UnitSource
from kernelscan.reading.explode import drawing_contents
from kernelscan.reading.files import open_drawing
from kernelscan.reading.interpretation import Interpretation, interpretation
from kernelscan.reading.layers import LayerPatterns
from kernelscan.reading.room_making import made_rooms
from kernelscan.reading.strokes import Contents
from kernelscan.reading.unit_proposal import proposed_unit
from kernelscan.reading.unit_rules import absurd_unit, drawing_unit, no_unit
from kernelscan.reading.views import told_apart
from kernelscan.reading.window import Window, within_window
from kernelscan.tolerances import Tolerances
from kernelscan.units import Unit

__all__ = ["read_plan"]


def read_plan(
    path: str | PathLike[str],
    *,
    unit: str | None = None,
    layers: LayerPatterns = LayerPatterns(),
    tolerances: Tolerances = Tolerances(),
    window: Window | None = None,
) -> Plan:
    """Read a DXF drawing.

    Parameters
    ----------
    path
        The drawing: DXF, text or binary, release 12 to 2018.
    unit
        The drawing's unit, over what its header says: ``mm``, ``cm``, ``dm``, ``m``, ``in`` or ``ft``;
        ``auto`` takes the unit that the drawing's sizes speak for.
    layers
        Which layers are what; by the published conventions where nothing is said.
    tolerances
        The chord error of curves, the snap distance, the smallest room, the widest bare gap, and so on.
    window
        Two opposite corners, in drawing units; what lies outside is left out.

    Returns
    -------
    Plan
        Its rooms in metres, the rule by which they were found, the problems met and the linework.

    Raises
    ------
    InputError
        If the file cannot be read as a drawing, or says no unit or an absurd one and none is given; the text is one
        line.
    """
    with _uncollected():
        return _read(Path(path), unit, layers, tolerances, window)


@contextmanager
def _uncollected() -> Iterator[None]:
    """Pause the collector of cyclic garbage, which would look through the whole drawing again and again."""
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


def _read(
    file: Path, unit: str | None, layers: LayerPatterns, tolerances: Tolerances, window: Window | None
) -> Plan:
    drawing, repairs = open_drawing(file)
    said = drawing_unit(drawing, unit)
    contents = within_window(
        drawing_contents(drawing, tolerances.chord / (said[0].metres if said else 1.0)), window
    )
    reading = interpretation(contents, layers, tolerances)
    asked: list[Problem] = []
    if said is None:
        said, asked = _proposed(file.name, drawing.header.get("$INSUNITS"), reading, unit == "auto")
    metres = said[0].metres
    found, rule, problems = reading.rooms(metres)
    if said[1] == "header":
        refusal = absurd_unit(file.name, [f.outline.area for f in found], said[0], reading)
        if refusal is not None:
            raise refusal
    rooms, sizes = made_rooms(found, reading, metres)
    rooms, views, others = told_apart(rooms, contents, reading.roles, metres)
    return Plan(
        file=file.name,
        unit=said[0],
        unit_from=said[1],
        rooms=rooms,
        room_rule=rule,
        problems=(*repairs, *contents.problems, *asked, *problems, *sizes, *others),
        linework=_linework(contents, metres),
        layers=reading.layer_uses(),
        views=views,
    )


def _proposed(
    file: str, code: object, reading: Interpretation, accepted: bool
) -> tuple[tuple[Unit, UnitSource], list[Problem]]:
    """Return the unit found out and why, if the user accepts that; else refuse, and say what it seems to be and why."""
    proposal = proposed_unit(reading)
    if accepted and proposal is not None:
        text = f"the unit, {proposal.unit.name}, was found out from the drawing: {proposal.reason}"
        return (proposal.unit, "proposal"), [Problem("proposed-unit", text)]
    raise no_unit(file, code, reading, proposal)


def _linework(contents: Contents, metres: float) -> tuple[np.ndarray, ...]:
    """Return the strokes in metres for the background."""
    lines = []
    for stroke in contents.strokes:
        points = stroke.points * metres
        closing = stroke.closed and np.any(points[0] != points[-1])
        line = np.concatenate((points, points[:1])) if closing else points
        line.flags.writeable = False
        lines.append(line)
    return tuple(lines)
