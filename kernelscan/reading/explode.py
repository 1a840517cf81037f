"""Walk through a drawing's model space, blocks exploded, hidden layers left out: entities into strokes and labels.

Problem
    Blocks hold blocks, mirrored, stretched and repeated in arrays, and a drawing made in bad faith (or by accident)
    holds a block that refers to itself, or an array of a million copies of one.
Method
    What a block draws is flattened once, in the block's own coordinates, and then carried to every place where
    the block is inserted by one matrix product. Scales differ, so the flattening is kept for each power of two
    of the scale.
Bounds
    A block inside itself is left out, and so is nesting deeper than ``DEEPEST``, and an insertion with which blocks
    would make more than ``MOST_COPIES`` copies of strokes, or ``MOST_POINTS`` points, in the whole run; each is
    reported as a problem.
Layers
    What lies on layer 0 of a block appears on the layer of the insertion. A frozen layer hides the blocks inserted
    on it with all they hold; a layer that is off hides only what lies on it.
"""

from collections import Counter
from dataclasses import dataclass, replace
from math import ceil, log2

import numpy as np
from ezdxf.document import Drawing
from ezdxf.entities.dimension import Dimension
from ezdxf.entities.dxfentity import DXFEntity
from ezdxf.entities.insert import Insert

from kernelscan.plan import Problem, Source
from kernelscan.reading.annotation import dimension_of, label_of
from kernelscan.reading.curves import FLATTENED_KINDS, flattened
from kernelscan.reading.strokes import Contents, Label, Stroke
from kernelscan.reading.texts import clean_text

__all__ = ["drawing_contents"]

DEEPEST = 40
MOST_COPIES = 400_000
MOST_POINTS = 4_000_000
FARTHEST = 1e12
"""Coordinates beyond this, in drawing units, are no building."""

UNREADABLE = frozenset({"3DSOLID", "ACAD_PROXY_ENTITY", "ACIS", "BODY", "REGION", "SURFACE"})
LABELS = frozenset({"ATTRIB", "MTEXT", "TEXT"})


@dataclass(frozen=True, slots=True, eq=False)
class _Spatial:
    """A stroke in a block's coordinates, ``(n, 3)``."""

    points: np.ndarray
    closed: bool
    kind: str
    layer: str
    handle: str
    blocks: str


@dataclass(slots=True, eq=False)
class _Drawn:
    """What one block draws, in its own coordinates."""

    strokes: list[_Spatial]
    labels: list[Label]
    points: int = 0


def drawing_contents(drawing: Drawing, chord: float) -> Contents:
    """Return the visible strokes, labels and dimensions of the model space.

    Parameters
    ----------
    drawing
        An open drawing.
    chord
        The chord error of flattened curves, in drawing units.

    Returns
    -------
    Contents
        In drawing units; its problems name hidden layers, what could not be read and what was left out.
    """
    return _Walk(drawing, chord).contents


class _Walk:
    """One walk through a drawing; ``contents`` is its result."""

    def __init__(self, drawing: Drawing, chord: float) -> None:
        self.chord = chord
        self.contents = Contents()
        self.blocks = drawing.blocks
        self.layers = {layer.dxf.name.casefold(): layer for layer in drawing.layers}
        self.off = {name for name, layer in self.layers.items() if layer.is_off()}
        self.frozen = {name for name, layer in self.layers.items() if layer.is_frozen()}
        self.names: dict[str, str] = {}
        self.states: dict[str, tuple[bool, bool]] = {}
        self.hidden: Counter[str] = Counter()
        self.unread: Counter[tuple[str, str]] = Counter()
        self.drawn: dict[tuple[str, int], _Drawn] = {}
        self.copies_left = MOST_COPIES
        self.points_left = MOST_POINTS
        self.said: set[tuple[str, str]] = set()
        whole = _Drawn([], [])
        for entity in drawing.modelspace():
            self._take(entity, whole, (), 0)
        self.contents.labels = whole.labels
        self.contents.strokes = self._flat(whole.strokes)
        self._report_counts()

    def _take(self, entity: DXFEntity, into: _Drawn, path: tuple[str, ...], fineness: int) -> None:
        layer, kind = entity.dxf.layer, entity.dxftype()
        if self._is_hidden(layer, kind) or (entity.dxf.hasattr("invisible") and entity.dxf.invisible):
            self.hidden[layer] += 1
            return
        try:
            if isinstance(entity, Insert):
                self._insert(entity, into, path, fineness)
            elif kind in FLATTENED_KINDS:
                self._flatten(entity, into, path, fineness)
            elif kind in LABELS:
                self._label(entity, into)
            elif isinstance(entity, Dimension):
                self.contents.dimensions.extend(dimension_of(entity))
            elif kind in UNREADABLE:
                self.unread[kind, layer] += 1
        except Exception as fault:  # entities of damaged drawings fail in the library in any way
            self._say(
                "broken-entity",
                f"{kind} left out: {clean_text(str(fault))[:100] or type(fault).__name__}",
                entity,
            )

    def _is_hidden(self, layer: str, kind: str) -> bool:
        if layer not in self.states:
            folded = layer.casefold()
            self.states[layer] = folded in self.frozen, folded in self.off
        frozen, off = self.states[layer]
        return frozen or (off and kind != "INSERT")

    def _flatten(self, entity: DXFEntity, into: _Drawn, path: tuple[str, ...], fineness: int) -> None:
        kind, layer, handle = entity.dxftype(), self._name(entity.dxf.layer), entity.dxf.handle or ""
        blocks = "/".join(path)
        for points, closed in flattened(entity, self.chord / 2.0**fineness):
            into.strokes.append(_Spatial(points, closed, kind, layer, handle, blocks))
            into.points += len(points)

    def _label(self, entity: DXFEntity, into: _Drawn) -> None:
        label = label_of(entity, self._name(entity.dxf.layer))
        if label is not None:
            into.labels.append(label)

    def _name(self, layer: str) -> str:
        if layer not in self.names:
            self.names[layer] = clean_text(layer)
        return self.names[layer]

    def _insert(self, insert: Insert, into: _Drawn, path: tuple[str, ...], fineness: int) -> None:
        for attribute in insert.attribs:
            self._take(attribute, into, path, fineness)
        name = insert.dxf.name
        if self._is_elsewhere(name):
            self._say(
                "external-reference",
                f"block {clean_text(name)!r} is not in this file; bind external references and save again",
                insert,
                once=name,
            )
        elif name in path:
            self._say(
                "block-in-itself",
                f"block {clean_text(name)!r} refers to itself; left out there",
                insert,
                once=name,
            )
        elif len(path) >= DEEPEST:
            self._say("deep-nesting", f"blocks nested deeper than {DEEPEST}; left out", insert, once="")
        else:
            self._place(insert, into, path, fineness)

    def _is_elsewhere(self, name: str) -> bool:
        layout = self.blocks.get(name)
        head = layout.block if layout is not None else None
        return head is None or head.is_xref or head.is_xref_overlay

    def _place(self, insert: Insert, into: _Drawn, path: tuple[str, ...], fineness: int) -> None:
        scale = max(abs(insert.dxf.get(axis, 1.0)) for axis in ("xscale", "yscale", "zscale"))
        finer = fineness + (ceil(log2(scale)) if 0 < scale < 1e12 else 0)
        drawn = self._block(insert.dxf.name, path, finer)
        copies = max(insert.mcount, 1)
        self.copies_left -= self._checked(
            copies * (len(drawn.strokes) + len(drawn.labels)), self.copies_left, insert
        )
        self.points_left -= self._checked(copies * drawn.points, self.points_left, insert)
        if not (drawn.strokes or drawn.labels):
            return
        for cell in insert.multi_insert() if copies > 1 else (insert,):
            self._carry(drawn, np.array(tuple(cell.matrix44()), dtype=np.float64).reshape(4, 4), insert, into)

    def _checked(self, needed: int, left: int, insert: Insert) -> int:
        if needed > left:
            raise ValueError(
                f"{max(insert.mcount, 1)} copies of block {clean_text(insert.dxf.name)!r} are more than can be drawn"
            )
        return needed

    def _block(self, name: str, path: tuple[str, ...], fineness: int) -> _Drawn:
        key = (name.casefold(), fineness)
        if key not in self.drawn:
            fresh = _Drawn([], [])
            for entity in self.blocks[name]:
                self._take(entity, fresh, (*path, name), fineness)
            self.drawn[key] = fresh
        return self.drawn[key]

    def _carry(self, drawn: _Drawn, matrix: np.ndarray, insert: Insert, into: _Drawn) -> None:
        own = self._name(insert.dxf.layer)
        hidden_zero = own.casefold() in self.off
        turn, shift = matrix[:3, :3], matrix[3, :3]
        for part in drawn.strokes:
            if part.layer == "0" and hidden_zero:
                self.hidden[own] += 1
                continue
            layer = own if part.layer == "0" else part.layer
            into.strokes.append(
                _Spatial(part.points @ turn + shift, part.closed, part.kind, layer, part.handle, part.blocks)
            )
        into.labels.extend(_carried(label, turn, shift, own) for label in drawn.labels)
        into.points += drawn.points

    def _flat(self, parts: list[_Spatial]) -> list[Stroke]:
        """Return the strokes in plan, without those that have no extent there, or absurd coordinates."""
        parts = [part for part in parts if len(part.points) > 1]
        if not parts:
            return []
        counts = np.array([len(part.points) for part in parts])
        ends = np.cumsum(counts)
        points = np.ascontiguousarray(np.concatenate([part.points for part in parts])[:, :2])
        low, high = (bound.reduceat(points, ends - counts) for bound in (np.minimum, np.maximum))
        reach = np.maximum(np.abs(low), np.abs(high)).max(axis=1)
        sound, flat = reach < FARTHEST, (high > low).any(axis=1)
        for k in np.flatnonzero(~sound).tolist():
            text = f"{parts[k].kind} at {reach[k]:.3g} drawing units or not a number; left out"
            source = Source(parts[k].layer, parts[k].handle)
            self.contents.problems.append(Problem("absurd-coordinates", text, None, source))
        spans = zip(parts, (ends - counts).tolist(), ends.tolist(), (sound & flat).tolist(), strict=True)
        return [
            Stroke(points[start:end], part.closed, part.kind, part.layer, part.handle, part.blocks)
            for part, start, end, kept in spans
            if kept
        ]

    def _say(self, code: str, message: str, entity: DXFEntity, once: str | None = None) -> None:
        if once is not None:
            if (code, once) in self.said:
                return
            self.said.add((code, once))
        source = Source(clean_text(entity.dxf.layer), entity.dxf.handle or "")
        self.contents.problems.append(Problem(code, message, None, source))

    def _report_counts(self) -> None:
        for layer, count in self.hidden.items():
            state = (
                "frozen"
                if layer.casefold() in self.frozen
                else "off"
                if layer.casefold() in self.off
                else "hidden"
            )
            noun = "entity" if count == 1 else "entities"
            self.contents.problems.append(
                Problem(
                    "hidden-layer",
                    f"layer {clean_text(layer)!r} is {state}: {count} {noun} left out",
                    None,
                    Source(clean_text(layer)),
                )
            )
        for (kind, layer), count in self.unread.items():
            message = f"{count} {kind} on layer {clean_text(layer)!r} cannot be read; explode to lines and save again"
            self.contents.problems.append(Problem("unread-entity", message, None, Source(clean_text(layer))))


def _carried(label: Label, turn: np.ndarray, shift: np.ndarray, layer: str) -> Label:
    middle, start = ((np.array((*place, 0.0)) @ turn + shift)[:2] for place in (label.middle, label.start))
    up = float(np.hypot(*turn[1, :2]))
    return replace(
        label,
        middle=(float(middle[0]), float(middle[1])),
        start=(float(start[0]), float(start[1])),
        height=label.height * up,
        layer=layer if label.layer == "0" else label.layer,
    )
