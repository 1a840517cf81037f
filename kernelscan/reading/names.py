"""What people call a room: the label inside it that is a name, else its layer's name, else its number.

A room's label is often a stack: a name of one or two lines, then a size or an area. Labels of one height standing
under each other are one stack; from it the lines that state sizes are kept apart, for checking the unit.
"""

import re
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from kernelscan.geometry.shapes import rings_around
from kernelscan.reading.label_sizes import StatedSize, stated_size
from kernelscan.reading.outlines import ring_areas
from kernelscan.reading.strokes import Label
from kernelscan.reading.texts import words

__all__ = ["RoomLabel", "labels_in_rings", "room_label"]

LONGEST_NAME = 40
STACK_PITCH = 2.2
"""Lines of one stack are at most this many letter heights apart."""

NOTE_WORDS = frozenset({"note", "notes", "dim", "dims", "dimension", "dimensions"})
NAME_WORDS = frozenset(
    {"area", "iden", "room", "rooms", "label", "labels", "tag", "tags", "name", "names", "raum", "space"}
)
_SIGN = re.compile(r"[^\W_]")
_LETTERS = re.compile(r"[^\W\d_]{2,}")


@dataclass(frozen=True, slots=True)
class RoomLabel:
    """What a room's labels say: its name, or nothing, and its size as far as they state it."""

    name: str
    size: StatedSize | None = None
    label: Label | None = None


def labels_in_rings(rings: Sequence[np.ndarray], labels: Sequence[Label], metres: float) -> list[list[Label]]:
    """Return for each ring the labels that stand in it; one in several rings belongs to the smallest.

    Parameters
    ----------
    rings
        Simple rings in metres.
    labels
        In drawing units.
    metres
        How many metres a drawing unit is.
    """
    found: list[list[Label]] = [[] for _ in rings]
    if not rings or not labels:
        return found
    middles = np.array([label.middle for label in labels]) * metres
    starts = np.array([label.start for label in labels]) * metres
    sizes = np.abs(ring_areas(rings))
    homes = _smallest_home(rings, sizes, np.concatenate((middles, starts)))
    for k, label in enumerate(labels):
        home = homes.get(k, homes.get(k + len(labels)))
        if home is not None:
            found[home].append(label)
    return found


def _smallest_home(rings: Sequence[np.ndarray], sizes: np.ndarray, points: np.ndarray) -> dict[int, int]:
    points_in, in_rings = rings_around(rings, points)
    order = np.argsort(-sizes[in_rings], kind="stable")
    return dict(zip(points_in[order].tolist(), in_rings[order].tolist(), strict=True))


def room_label(labels: Sequence[Label], centre: tuple[float, float] | None = None) -> RoomLabel:
    """Return the name and the stated size among the labels of one room.

    Parameters
    ----------
    labels
        What stands in the room.
    centre
        The room's middle in drawing units; of equals, the label nearest to it counts.
    """
    if not labels:
        return RoomLabel("")
    if len(labels) == 1 and len(labels[0].lines) == 1 and _says_name(labels[0]):
        return RoomLabel(labels[0].lines[0][:200], None, labels[0])
    size = next((found for label in labels for line in label.lines if (found := stated_size(line))), None)
    stacks = [stack for stack in _stacks(labels) if _name_of(stack)]
    if not stacks:
        return RoomLabel("", size)
    sizes = [label for label in labels if stated_size(label.text)]
    best = min(stacks, key=lambda stack: _rank(stack, sizes, centre))
    return RoomLabel(_name_of(best), _nearest_size(best, labels) or size, best[0])


def _stacks(labels: Sequence[Label]) -> list[list[Label]]:
    """Put labels of one height and layer that stand closely under each other together, top to bottom."""
    stacks: list[list[Label]] = []
    for label in sorted(labels, key=lambda label: -label.middle[1]):
        if not _says_name(label):
            continue
        home = next((stack for stack in stacks if _continues(stack[-1], label)), None)
        if home is None:
            stacks.append([label])
        else:
            home.append(label)
    return stacks


def _continues(above: Label, below: Label) -> bool:
    height = above.height
    return (
        above.layer == below.layer
        and abs(above.height - below.height) <= 0.05 * height
        and 0 < above.middle[1] - below.middle[1] <= STACK_PITCH * height
        and min(abs(above.middle[0] - below.middle[0]), abs(above.start[0] - below.start[0])) <= 2 * height
    )


def _says_name(label: Label) -> bool:
    return any(_is_name(line) for line in label.lines)


def _is_name(line: str) -> bool:
    return "=" not in line and _SIGN.search(line) is not None and stated_size(line) is None


def _name_of(stack: Sequence[Label]) -> str:
    lines = [line for label in stack for line in label.lines if _is_name(line)]
    worded = [line for line in lines if _LETTERS.search(line)]
    return " ".join(worded or lines[:1])[:200]


def _rank(
    stack: Sequence[Label], sizes: Sequence[Label], centre: tuple[float, float] | None
) -> tuple[bool, int, float, float]:
    """Return how poor a name the stack makes: best with a size under it; notes and numbers last, then small ones."""
    head, name = stack[0], _name_of(stack)
    on_layer = set(words(head.layer))
    sized = any(_stands_under(size, stack[-1]) for size in sizes) or any(
        stated_size(line) for line in stack[-1].lines
    )
    poor = 4 * bool(on_layer & NOTE_WORDS) + 2 * (len(name) > LONGEST_NAME) + 2 * (not _LETTERS.search(name))
    far = 0.0 if centre is None else float(np.hypot(head.middle[0] - centre[0], head.middle[1] - centre[1]))
    return not sized, poor - bool(on_layer & NAME_WORDS), -round(head.height, 9), far


def _stands_under(size: Label, above: Label) -> bool:
    """Whether a label that states a size continues a stack: close under its last line and in line with it."""
    drop = above.middle[1] - size.middle[1]
    aside = min(abs(above.middle[0] - size.middle[0]), abs(above.start[0] - size.start[0]))
    return 0 < drop <= STACK_PITCH * above.height and aside <= 2 * above.height


def _nearest_size(stack: Sequence[Label], labels: Sequence[Label]) -> StatedSize | None:
    """Return the size stated in the stack itself, or by the label nearest under it."""
    within = [found for label in stack for line in label.lines if (found := stated_size(line))]
    if within:
        return within[0]
    last = stack[-1]
    others = [(label, found) for label in labels if (found := stated_size(label.text))]
    others.sort(
        key=lambda pair: np.hypot(pair[0].middle[0] - last.middle[0], pair[0].middle[1] - last.middle[1])
    )
    return others[0][1] if others else None
