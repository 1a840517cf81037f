"""The schedule of rooms: a table measured before it is drawn, that goes on over as many sheets as it needs."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from kernelscan.coverage import RoomZones
from kernelscan.coverage.wording import Custom, angle_in_words, kernel_in_words
from kernelscan.markup.drawing import conflict_walls
from kernelscan.markup.metrics import text_width
from kernelscan.markup.scene import Anchor, Box, Item, Stroke, Text
from kernelscan.markup.style import BODY, CONFLICT_LETTERS, HEADING, MARKS, RULE_PEN, TABLE_PEN
from kernelscan.markup.text import LINE_PITCH, clean_text, wrapped

__all__ = ["Column", "Entry", "Schedule", "schedule_of"]

PITCH = BODY * LINE_PITCH
GAP = 2.0
"""Between two columns, in millimetres."""
NAME = 1
"""The column of the name, the only one that gives way and wraps."""
NAME_WIDTH = 30.0
POINT = 4
"""The column where a remark begins when a room has no point."""
NOTES = (
    "x and y are counted from the drawing's own origin. Field: horizontal field of view needed there. "
    "Range: to the farthest corner. Off by: how far the device may be off and still see every wall."
)


@dataclass(frozen=True, slots=True)
class Entry:
    """The rows of one room: cells by column, and a remark over the columns of the points."""

    name: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    remark: tuple[str, ...] = ()

    @property
    def height(self) -> float:
        """Height in millimetres."""
        told = max(len(self.rows), len(self.rows) - 1 + len(self.remark))
        return max(len(self.name), told) * PITCH + 0.8


@dataclass(frozen=True, slots=True)
class Column:
    """One column: its head, the unit under it, its edges from the table's own left edge, and how cells stand."""

    head: str
    unit: str
    left: float
    right: float
    anchor: Anchor

    def text(self, left: float, baseline: float, string: str, bold: bool = False) -> Text:
        """Return a cell drawn in a table whose left edge is there."""
        x = left + (self.left if self.anchor == "start" else self.right)
        return Text((x, baseline), string, anchor=self.anchor, bold=bold)


@dataclass(frozen=True, slots=True)
class Schedule:
    """The whole table, measured: its columns, its width, the entries, and the lines that explain the heads."""

    columns: tuple[Column, ...]
    width: float
    entries: tuple[Entry, ...]
    notes: tuple[str, ...]

    @property
    def head_height(self) -> float:
        """Height of title, notes and heads in millimetres."""
        return HEADING * LINE_PITCH + 1.0 + (len(self.notes) + 2) * PITCH + 1.0

    def height(self, entries: Sequence[Entry]) -> float:
        """Return how high a table of these entries is, with its title and notes."""
        return self.head_height + sum(entry.height for entry in entries) + 0.5

    def fitting(self, first: int, height: float) -> int:
        """Return how many entries from the first on fit a height."""
        left, count = height - self.head_height - 0.5 + 1e-6, 0
        for entry in self.entries[first:]:
            left -= entry.height
            if left < 0:
                break
            count += 1
        return count

    def fits(self, space: Box) -> bool:
        """Whether a space holds the whole table."""
        return self.fitting(0, space.height) == len(self.entries)

    def items(self, left: float, top: float, entries: Sequence[Entry]) -> Iterator[Item]:
        """Yield the table of these entries with its upper left corner at a point."""
        y = top - HEADING - 1.5
        yield Text((left + 1, y), "Schedule of rooms", HEADING, bold=True)
        for note in self.notes:
            y -= PITCH
            yield Text((left + 1, y), note)
        y -= 1.5
        yield Stroke(
            Box(left, top - self.height(entries), left + self.width, y).corners, RULE_PEN, closed=True
        )
        for column in self.columns:
            yield column.text(left, y - 3.4, column.head, bold=True)
            if column.unit:
                yield column.text(left, y - 3.4 - PITCH, column.unit)
        y = top - self.head_height
        for entry in entries:
            yield Stroke(((left, y), (left + self.width, y)), TABLE_PEN)
            yield from self._entry(entry, left, y)
            y -= entry.height

    def _entry(self, entry: Entry, left: float, top: float) -> Iterator[Item]:
        first = top - 3.5
        for i, row in enumerate(entry.rows):
            for j, cell in enumerate(row):
                if cell:
                    yield self.columns[j].text(left, first - i * PITCH, cell, bold=j == 0)
        for i, line in enumerate(entry.name):
            yield self.columns[NAME].text(left, first - i * PITCH, line)
        for i, line in enumerate(entry.remark):
            yield self.columns[POINT].text(left, first - (len(entry.rows) - 1 + i) * PITCH, line)


def schedule_of(answers: Sequence[RoomZones], custom: Custom) -> Schedule:
    """Return the schedule of all rooms, measured: each column as wide as its widest cell, the name 30 mm."""
    heads: tuple[tuple[str, str, Anchor], ...] = (
        ("Room", "", "start"), ("Name", "", "start"), ("Area", custom.area_unit, "end"), ("Kernel", "", "start"),
        ("Point", "", "start"), ("x", custom.length_unit, "end"), ("y", custom.length_unit, "end"),
        ("Field", "", "end"), ("Range", custom.length_unit, "end"), ("Off by", custom.tolerance_unit, "end"),
    )  # fmt: skip
    tables = [_rows(zones, custom) for zones in answers]
    columns, x = [], 1.0
    for i, (head, unit, anchor) in enumerate(heads):
        cells = {unit, *(row[i] for rows in tables for row in rows)}
        widest = max(text_width(head, BODY, True), *(text_width(cell, BODY, i == 0) for cell in cells))
        columns.append(Column(head, unit, x, x + (NAME_WIDTH if i == NAME else widest), anchor))
        x = columns[-1].right + GAP
    width = x - GAP + 1.0
    entries = tuple(
        Entry(
            wrapped(clean_text(zones.room.name), NAME_WIDTH, BODY, most=3),
            rows,
            wrapped(_remark(zones), width - columns[POINT].left - 1.0, BODY),
        )
        for zones, rows in zip(answers, tables, strict=True)
    )
    return Schedule(tuple(columns), width, entries, wrapped(NOTES, width - 2.0, BODY))


def _rows(zones: RoomZones, custom: Custom) -> tuple[tuple[str, ...], ...]:
    """Return a room's cells, a row for each recommended point; the name's own cell stays empty."""
    first = (zones.room.id, "", custom.area(zones.room.area), kernel_in_words(zones, custom))
    rows: list[tuple[str, ...]] = []
    for spot in zones.recommended:
        mark = MARKS[spot.mount]
        rows.append((
            *(("",) * 4 if rows else first),
            f"{mark.letter} {mark.word}",
            custom.position(float(spot.point[0])),
            custom.position(float(spot.point[1])),
            angle_in_words(spot.field_of_view),
            custom.range_up(spot.farthest),
            custom.tolerance_down(spot.tolerance),
        ))  # fmt: skip
    return tuple(rows) or ((*first, *("",) * 6),)


def _remark(zones: RoomZones) -> str:
    walls = conflict_walls(zones)
    if walls:
        letters = CONFLICT_LETTERS[: len(walls)]
        return f"walls {', '.join(letters[:-1])} and {letters[-1]} exclude each other"
    return "" if zones.recommended else "no wall or corner can carry a device"
