"""The report as data: the answers of one run in the shape that ``report.schema.json`` describes.

Lengths are metres, areas square metres, angles degrees; a wall is ``[ring, edge]`` with ring 0 the outline and
edge i running from vertex i to the next. Numbers are written as Python writes a float, so that reading them back
gives the very same doubles.
"""

import json
import re
from collections.abc import Iterable, Sequence
from importlib.resources import files
from math import degrees
from typing import Any

import numpy as np

from kernelscan.coverage import RoomAnswer, RoomZones, Spot, TolerantAnswer
from kernelscan.coverage.cautions import cautions_for
from kernelscan.coverage.hidden import Hidden
from kernelscan.coverage.reasons import Reasons
from kernelscan.geometry.kernel import Kernel
from kernelscan.plan import Plan, Problem, Room
from kernelscan.report.device_entries import device_entries
from kernelscan.report.entries import (
    HiddenEntry,
    KernelEntry,
    Position,
    ProblemEntry,
    Report,
    RoomEntry,
    SpotEntry,
    TolerantEntry,
    Wall,
    WhyNotEntry,
    ZonesEntry,
)

__all__ = ["Report", "report_schema", "report_text", "rooms_report", "zones_report"]

_PAIR = re.compile(r"\[\n\s*(-?[0-9][^,\s]*),\n\s*(-?[0-9][^,\s]*)\n\s*\]")

FORMAT = "kernelscan-report"
VERSION = 1


def rooms_report(plan: Plan) -> Report:
    """Return the report of the rooms alone, as the ``rooms`` command writes it."""
    return _report(plan, [_room(room) for room in plan.rooms])


def zones_report(plan: Plan, answers: Sequence[RoomAnswer]) -> Report:
    """Return the report of every answered room, as the ``zones`` command writes it."""
    kinds = {each.device.kind: None for answer in answers for each in answer.devices}
    return _report(plan, [_answered(answer) for answer in answers], kinds)


def report_text(report: Report) -> str:
    """Return the document as JSON text, each position on one line; the same report always gives the same text."""
    text = json.dumps(report, ensure_ascii=False, indent=1, allow_nan=False)
    # A raw line break never stands inside a JSON string, so this touches pairs of numbers only.
    return _PAIR.sub(r"[\1, \2]", text) + "\n"


def report_schema() -> dict[str, Any]:
    """Return the JSON Schema (draft 2020-12) that every report keeps to."""
    text = files("kernelscan.report").joinpath("report.schema.json").read_text(encoding="utf-8")
    schema: dict[str, Any] = json.loads(text)
    return schema


def _report(plan: Plan, rooms: list[RoomEntry], kinds: Iterable[str] = ()) -> Report:
    return {
        "format": FORMAT,
        "version": VERSION,
        "plan": {
            "file": plan.file,
            "unit": plan.unit.name,
            "unit_from": "header" if plan.unit_from == "header" else "option",
            "room_rule": plan.room_rule,
        },
        "rooms": rooms,
        "problems": [_problem(problem) for problem in plan.problems],
        "cautions": list(cautions_for(kinds)),
    }


def _room(room: Room) -> RoomEntry:
    return {
        "id": room.id,
        "name": room.name,
        "name_from": room.name_from,
        "layer": room.source.layer,
        "handle": room.source.handle,
        "closed_by": room.closed_by,
        "outline": _positions(room.outline),
        "holes": [_positions(hole) for hole in room.holes],
        "area": room.area,
        "openings": [
            {
                "wall": list(opening.wall),
                "kind": opening.kind,
                "width": opening.width,
                "span": list(opening.span),
            }
            for opening in room.openings
        ],
    }


def _answered(answer: RoomAnswer) -> RoomEntry:
    entry = _room(answer.room)
    entry["kernel"] = _kernel(answer.zones.kernel)
    entry["zones"] = _zones(answer.zones)
    entry["recommended"] = [_spot(spot) for spot in answer.zones.recommended]
    if answer.reasons is not None:
        entry["why_not"] = _why_not(answer.reasons)
    if answer.tolerant is not None:
        entry["tolerant"] = _tolerant(answer.tolerant)
    if answer.devices:
        # Devices stand on the outline that they were placed in, so that their walls are numbered on it.
        basis = entry["tolerant"] if answer.tolerant is not None else entry
        basis["devices"] = device_entries(answer.devices)
    return entry


def _zones(zones: RoomZones) -> ZonesEntry:
    return {
        "ceiling": [] if zones.ceiling is None else _positions(zones.ceiling.vertices),
        "walls": [
            {
                "walls": [list(wall) for wall in zone.walls],
                "path": _positions(zone.path),
                "length": zone.length,
            }
            for zone in zones.walls
        ],
        "corners": [_spot(zone.spot) for zone in zones.corners],
    }


def _why_not(reasons: Reasons) -> WhyNotEntry:
    return {
        "because": list(reasons.because),
        "shortfall": reasons.shortfall,
        "blame": reasons.blame,
        "ignore_depth": None if reasons.least is None else reasons.least.depth,
        "best_tried": reasons.best.point.tolist(),
        "tried": reasons.best.tried,
        "hidden": _hidden(reasons.hidden),
    }


def _tolerant(tolerant: TolerantAnswer) -> TolerantEntry:
    without = tolerant.simplified
    return {
        "ignore_depth": without.depth,
        "outline": _positions(without.room.outline),
        "features": [
            {
                "kind": feature.kind,
                "depth": feature.depth,
                "width": feature.width,
                "middle": feature.middle.tolist(),
                "walls": [list(wall) for wall in feature.walls],
            }
            for feature in without.features
        ],
        "kernel": _kernel(tolerant.zones.kernel),
        "zones": _zones(tolerant.zones),
        "recommended": [_spot(spot) for spot in tolerant.zones.recommended],
        "hidden": [None if hidden is None else _hidden(hidden) for hidden in tolerant.hidden],
    }


def _hidden(hidden: Hidden) -> HiddenEntry:
    return {
        "floor": hidden.floor_hidden,
        "wall": hidden.wall_hidden,
        "patches": [{"at": list(patch.middle), "area": patch.area} for patch in hidden.patches],
        "stretches": [
            {"wall": list(stretch.wall), "ends": _positions(stretch.ends)} for stretch in hidden.stretches
        ],
    }


def _kernel(kernel: Kernel) -> KernelEntry:
    return {
        "kind": kernel.kind,
        "vertices": _positions(kernel.vertices),
        "area": kernel.area,
        "walls": _walls(kernel.walls),
        "conflict": _walls(kernel.conflict),
    }


def _spot(spot: Spot) -> SpotEntry:
    return {
        "mount": spot.mount,
        "point": [float(value) for value in spot.point],
        "field_of_view_deg": degrees(spot.field_of_view),
        "bearing_deg": None if spot.bearing is None else degrees(spot.bearing),
        "farthest": spot.farthest,
        "tolerance": spot.tolerance,
        "walls": [list(wall) for wall in spot.walls],
    }


def _problem(problem: Problem) -> ProblemEntry:
    return {
        "code": problem.code,
        "message": problem.message,
        "at": None if problem.at is None else [float(value) for value in problem.at],
        "layer": problem.source.layer,
        "handle": problem.source.handle,
    }


def _positions(points: np.ndarray) -> list[Position]:
    positions: list[Position] = points.tolist()
    return positions


def _walls(walls: np.ndarray) -> list[Wall]:
    pairs: list[Wall] = walls.tolist()
    return pairs
