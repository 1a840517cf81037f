"""The schedule of rooms without devices: a row for each recommended point, and what is wanting or left out."""

from collections.abc import Iterator, Sequence

from kernelscan.coverage.hidden import Hidden
from kernelscan.coverage.reasons import TELLING_SHORTFALL, Reasons
from kernelscan.coverage.wording import Custom, angle_in_words, kernel_in_words
from kernelscan.markup.schedule import Entry, Form, Row, Schedule, measured
from kernelscan.markup.shown import ShownRoom
from kernelscan.markup.style import BODY, CONFLICT_LETTERS, MARKS, TRIED_LETTER
from kernelscan.markup.text import clean_text, wrapped

__all__ = ["remarks", "room_schedule", "tried_in_words"]

NAME_WIDTH = 30.0
NOTES = (
    "x and y are counted from the drawing's own origin. Field: horizontal field of view needed there. "
    "Range: to the farthest corner. Off by: how far the device may be off with every wall in line of sight."
)


def room_schedule(rooms: Sequence[ShownRoom], custom: Custom) -> Schedule:
    """Return the schedule of all rooms; where small features were left out, with both kernels side by side."""
    form = Form(
        "Schedule of rooms",
        NOTES,
        (
            ("Room", "", "start"), ("Name", "", "start"), ("Area", custom.area_unit, "end"), ("Kernel", "", "start"),
            ("Point", "", "start"), ("x", custom.length_unit, "end"), ("y", custom.length_unit, "end"),
            ("Field", "", "end"), ("Range", custom.length_unit, "end"), ("Off by", custom.tolerance_unit, "end"),
        ),
        name=1,
        name_width=NAME_WIDTH,
        remark=4,
    )  # fmt: skip
    return measured(form, [_entry(room, custom) for room in rooms])


def _entry(shown: ShownRoom, custom: Custom) -> Entry:
    name = wrapped(clean_text(shown.room.name), NAME_WIDTH, BODY, most=3)
    heads = list(_heads(shown, custom))
    points = list(_points(shown, custom))
    told = list(remarks(shown, custom))
    rows = [Row((*head, *point)) for head, point in zip(heads, points, strict=False)]
    rows += [Row((*("",) * 4, *point)) for point in points[len(heads) :]]
    # Rows that have no point beside them have room for a remark.
    free = heads[len(points) :]
    rows += [Row(head, told.pop(0) if told else "") for head in free]
    return Entry(name, (*rows, *(Row((), remark) for remark in told)))


def _heads(shown: ShownRoom, custom: Custom) -> Iterator[tuple[str, ...]]:
    """Yield the cells of the room itself, and a second line for the kernel without small features."""
    area, exact = custom.area(shown.room.area), kernel_in_words(shown.answer.zones, custom)
    if not shown.features:
        yield shown.room.id, "", area, exact
        return
    yield shown.room.id, "", area, f"exact: {exact.removeprefix('area ')}"
    yield "", "", "", f"without F: {kernel_in_words(shown.basis, custom).removeprefix('area ')}"


def _points(shown: ShownRoom, custom: Custom) -> Iterator[tuple[str, ...]]:
    for spot in shown.basis.recommended:
        mark = MARKS[spot.mount]
        yield (
            f"{mark.letter} {mark.word}",
            custom.position(float(spot.point[0])),
            custom.position(float(spot.point[1])),
            angle_in_words(spot.field_of_view),
            custom.range_up(spot.farthest),
            custom.tolerance_down(spot.tolerance),
        )


def remarks(shown: ShownRoom, custom: Custom) -> Iterator[str]:
    """Yield why a room has no point and the best that was tried, and the small features that were left out."""
    why = " ".join(_why_not(shown, custom))
    left_out = " ".join(_left_out(shown, custom))
    yield from filter(None, (why, left_out))


def _why_not(shown: ShownRoom, custom: Custom) -> Iterator[str]:
    if shown.conflict:
        letters = CONFLICT_LETTERS[: len(shown.conflict)]
        yield f"Walls {', '.join(letters[:-1])} and {letters[-1]} exclude each other."
    elif not shown.basis.recommended:
        yield "No wall or corner can carry a device."
    if shown.tried is not None:
        yield from _tried(shown.tried, custom)


def _tried(reasons: Reasons, custom: Custom) -> Iterator[str]:
    yield from reasons.because
    if 0 < reasons.shortfall <= TELLING_SHORTFALL:
        yield f"The room falls short by {custom.length_up(reasons.shortfall)}."
    if reasons.least is not None and reasons.least.depth > 0:
        deep = custom.length_up(reasons.least.depth)
        yield f"Without small features up to {deep} deep the outline would have such points."
    x, y = (custom.position(float(value)) for value in reasons.best.point)
    yield f"{TRIED_LETTER} at x {x}, y {y}: {tried_in_words(reasons, custom)}."


def tried_in_words(reasons: Reasons, custom: Custom) -> str:
    """Return what may be said of the best point that was tried, and what it misses."""
    return f"{reasons.best.words}, {_missed(reasons.hidden, custom)}"


def _left_out(shown: ShownRoom, custom: Custom) -> Iterator[str]:
    """Yield the small features that were left out, and what each point does not see of the exact room for it."""
    for tag, feature in shown.features:
        yield f"{tag}: {feature.kind}, {custom.length(feature.width)} wide, {custom.length(feature.depth)} deep."
    tolerant = shown.answer.tolerant
    if tolerant is None or not shown.features or shown.answer.devices:
        return
    for spot, hidden in zip(tolerant.zones.recommended, tolerant.hidden, strict=True):
        letter = MARKS[spot.mount].letter
        if hidden is None:
            yield f"{letter} lies on a feature that was left out: choose another point."
        else:
            yield f"{letter} {_missed(hidden, custom)}."


def _missed(hidden: Hidden, custom: Custom) -> str:
    if not hidden.patches and not hidden.stretches:
        return "misses nothing"
    floor = f"{custom.area(hidden.floor_hidden)} {custom.area_unit}"
    return f"misses {floor} of the floor and {custom.length(hidden.wall_hidden)} of the walls"
